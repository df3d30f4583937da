package atmosphere

import (
	"math"
	"testing"

	"gonum.org/v1/gonum/floats/scalar"
	"gonum.org/v1/gonum/integrate/quad"
	"pgregory.net/rapid"
)

func must[T any](v T, err error) T {
	if err != nil {
		panic(err)
	}
	return v
}

// US Standard Atmosphere 1976, table by geopotential height, values from memory:
// pressure 54020 Pa at 5 km, 22632 Pa at 11 km, 5474.9 Pa at 20 km.
func TestColumn_USSA1976(t *testing.T) {
	p := must(ConstantLapse(288.15, 6.5e-3, 216.65))
	c := must(NewColumn(pure(t, "air"), 9.80665, 101325, p))
	for _, r := range []struct{ z, pressure, temperature float64 }{
		{0, 101325, 288.15}, {5000, 54020, 255.65}, {11000, 22632, 216.65}, {20000, 5474.9, 216.65},
	} {
		s := must(c.At(r.z))
		// The standard's gas constant is 1.7e-5 below today's.
		if !scalar.EqualWithinRel(s.Pressure, r.pressure, 2e-4) || !scalar.EqualWithinAbs(s.Temperature, r.temperature, 1e-9) {
			t.Errorf("%g m: %.6g Pa, %.6g K; table has %.6g, %.6g", r.z, s.Pressure, s.Temperature, r.pressure, r.temperature)
		}
	}
	if s := must(c.At(11000)); !scalar.EqualWithinRel(s.Density, 0.36392, 2e-4) {
		t.Errorf("density at 11 km %.5g, table has 0.36392", s.Density)
	}
}

// The planet fact sheet's scale height for a thin carbon dioxide atmosphere of
// about 210 K under 3.71 m/s2 is 11.1 km, for the mean molar mass 43.3 g/mol; with
// pure carbon dioxide 10.7 km.
func TestScaleHeight(t *testing.T) {
	c := must(NewColumn(pure(t, "co2"), 3.71, 610, must(Isothermal(210))))
	if h := c.ScaleHeight(0); !scalar.EqualWithinRel(h, 10694, 1e-3) {
		t.Errorf("scale height %.5g m", h)
	}
	s := must(c.At(c.ScaleHeight(0)))
	if !scalar.EqualWithinRel(s.Pressure, 610/math.E, 1e-12) {
		t.Errorf("pressure after one scale height: %.9g Pa", s.Pressure)
	}
}

// Hydrostatic balance by direct quadrature: the weight of the gas between two
// heights is the difference of pressure; HeightOf inverts At.
func TestColumn_Hydrostatic(t *testing.T) {
	gas := pure(t, "co2")
	rapid.Check(t, func(rt *rapid.T) {
		n := rapid.IntRange(1, 5).Draw(rt, "n")
		h, temp := []float64{0}, []float64{rapid.Float64Range(150, 300).Draw(rt, "T0")}
		for i := 1; i < n; i++ {
			h = append(h, h[i-1]+rapid.Float64Range(100, 2e4).Draw(rt, "dz"))
			temp = append(temp, rapid.Float64Range(150, 300).Draw(rt, "T"))
		}
		c := must(NewColumn(gas, 3.71, 610, must(Tabulated(h, temp))))
		z1 := rapid.Float64Range(0, 3e4).Draw(rt, "z1")
		z2 := z1 + rapid.Float64Range(1, 3e4).Draw(rt, "step")
		edges := []float64{z1}
		for _, x := range h {
			if x > z1 && x < z2 {
				edges = append(edges, x)
			}
		}
		edges = append(edges, z2)
		weight := 0.0
		for i := 1; i < len(edges); i++ {
			weight += 3.71 * quad.Fixed(func(z float64) float64 { return must(c.At(z)).Density }, edges[i-1], edges[i], 40, nil, 0)
		}
		a, b := must(c.At(z1)), must(c.At(z2))
		if !scalar.EqualWithinRel(weight, a.Pressure-b.Pressure, 1e-9) {
			rt.Fatalf("weight %.12g Pa, pressure difference %.12g", weight, a.Pressure-b.Pressure)
		}
		if z := must(c.HeightOf(b.Pressure)); !scalar.EqualWithinRel(z, z2, 1e-9) {
			rt.Fatalf("height of the pressure at %g m: %g m", z2, z)
		}
	})
}

func TestColumn_Mistakes(t *testing.T) {
	iso := must(Isothermal(210))
	gas := pure(t, "co2")
	bad := []struct {
		name string
		err  error
	}{
		{"no gas", second(NewColumn(Gas{}, 3.71, 610, iso))},
		{"no profile", second(NewColumn(gas, 3.71, 610, Profile{}))},
		{"gravity", second(NewColumn(gas, 0, 610, iso))},
		{"pressure", second(NewColumn(gas, 3.71, math.NaN(), iso))},
		{"hot", second(Isothermal(3000))},
		{"warm floor", second(ConstantLapse(200, 1e-3, 210))},
		{"rising lapse", second(ConstantLapse(200, -1e-3, 150))},
		{"NaN lapse", second(ConstantLapse(200, math.NaN(), 150))},
		{"no points", second(Tabulated(nil, nil))},
		{"first height", second(Tabulated([]float64{10}, []float64{200}))},
		{"order", second(Tabulated([]float64{0, 0}, []float64{200, 200}))},
		{"lengths", second(Tabulated([]float64{0, 1}, []float64{200}))},
		{"infinite height", second(Tabulated([]float64{0, math.Inf(1)}, []float64{200, 200}))},
	}
	c := must(NewColumn(gas, 3.71, 610, iso))
	for _, z := range []float64{-1, math.NaN(), math.Inf(1), 1e6} {
		_, err := c.At(z)
		bad = append(bad, struct {
			name string
			err  error
		}{"height", err})
	}
	_, err := c.HeightOf(611)
	bad = append(bad, struct {
		name string
		err  error
	}{"pressure above the surface's", err})
	for _, b := range bad {
		if b.err == nil {
			t.Errorf("%s: no error", b.name)
		}
	}
}

func second[T any](_ T, err error) error { return err }
