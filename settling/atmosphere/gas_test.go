package atmosphere

import (
	"math"
	"strings"
	"testing"

	"gonum.org/v1/gonum/floats/scalar"
	"pgregory.net/rapid"
)

func pure(t testing.TB, name string) Gas {
	t.Helper()
	g, err := NewGas([]Fraction{{Species: name, Mole: 1}})
	if err != nil {
		t.Fatal(err)
	}
	return g
}

// US Standard Atmosphere 1976, table II: dynamic viscosity of air. Values from
// memory; the table's own formula is 1.458e-6 T^1.5/(T + 110.4).
func TestViscosity_USSA1976(t *testing.T) {
	air := pure(t, "air")
	for _, c := range []struct{ temperature, want float64 }{
		{288.150, 1.7894e-5}, {255.676, 1.6282e-5}, {223.252, 1.4577e-5}, {216.650, 1.4216e-5},
	} {
		got, err := air.Viscosity(c.temperature)
		if err != nil {
			t.Fatal(err)
		}
		if !scalar.EqualWithinRel(got, c.want, 5e-4) { // 1.716e-5 at 273.15 K has 4 figures
			t.Errorf("%g K: viscosity %.5g Pa s, table has %.5g", c.temperature, got, c.want)
		}
	}
}

// Handbook viscosities at 300 K, values from memory: carbon dioxide 14.9 to
// 15.0 uPa s, nitrogen 17.9, argon 22.7 (22.9 by the other common tables).
func TestViscosity_Handbook300K(t *testing.T) {
	for _, c := range []struct {
		species   string
		low, high float64
	}{{"co2", 14.9e-6, 15.05e-6}, {"n2", 17.7e-6, 18.0e-6}, {"ar", 22.5e-6, 23.0e-6}} {
		if got, _ := pure(t, c.species).Viscosity(300); got < c.low || got > c.high {
			t.Errorf("%s: viscosity %.4g Pa s, handbook %.4g to %.4g", c.species, got, c.low, c.high)
		}
	}
}

// A mixture of nitrogen and carbon dioxide lies between its parts and agrees with
// a calculation by hand; a trace of a second gas changes nothing.
func TestViscosity_WilkeLimits(t *testing.T) {
	a, b := pure(t, "co2"), pure(t, "n2")
	mix, err := NewGas([]Fraction{{"CO2", 0.5}, {"N2", 0.5}})
	if err != nil {
		t.Fatal(err)
	}
	ma, _ := a.Viscosity(250)
	mb, _ := b.Viscosity(250)
	got, _ := mix.Viscosity(250)
	if got <= ma || got >= mb {
		t.Errorf("half and half: %.4g is not between %.4g and %.4g", got, ma, mb)
	}
	// By hand from [Wilke1950] with mu 1.2584e-5 and 1.5506e-5 Pa s, M 44.0095 and
	// 28.0134: phi_12 = 0.7181, phi_21 = 1.3901, and so
	// 1.2584e-5/1.7181 + 1.5506e-5/2.3901 = 1.3812e-5 Pa s.
	if !scalar.EqualWithinRel(got, 1.3812e-5, 1e-4) {
		t.Errorf("half and half: %.5g Pa s, by hand 1.3812e-5", got)
	}
	trace, err := NewGas([]Fraction{{"co2", 1 - 1e-9}, {"ar", 1e-9}})
	if err != nil {
		t.Fatal(err)
	}
	if m, _ := trace.Viscosity(250); !scalar.EqualWithinRel(m, ma, 1e-8) {
		t.Errorf("a trace changes the viscosity: %g against %g", m, ma)
	}
}

// US Standard Atmosphere 1976, sea level: mean free path 6.6332e-8 m by the
// standard's own hard-sphere formula L = R T/(sqrt(2) pi NA sigma^2 p), sigma =
// 3.65e-10 m. Ours is by the viscosity, 4 % less, as [SeinfeldPandis2006] eq. 9.6,
// which gives 0.0651 um at 298 K and 1 atm (value from memory).
func TestMeanFreePath(t *testing.T) {
	air := pure(t, "air")
	s, err := air.State(101325, 288.15)
	if err != nil {
		t.Fatal(err)
	}
	own := GasConstant * 288.15 / (math.Sqrt2 * math.Pi * Avogadro * 3.65e-10 * 3.65e-10 * 101325)
	if !scalar.EqualWithinRel(own, 6.6332e-8, 1e-4) {
		t.Errorf("the standard's formula gives %.5g m, its table 6.6332e-8", own)
	}
	if r := s.MeanFreePath / own; r < 0.955 || r > 0.965 {
		t.Errorf("viscosity over hard-sphere mean free path: %.4f, want about 0.96", r)
	}
	s, _ = air.State(101325, 298)
	if !scalar.EqualWithinRel(s.MeanFreePath, 0.0651e-6, 0.025) {
		t.Errorf("298 K, 1 atm: %.4g m, want 0.0651e-6 within 2.5 %%", s.MeanFreePath)
	}
	// The design point of a thin carbon dioxide atmosphere; independent numpy
	// calculation of the same equations.
	s, _ = pure(t, "co2").State(610, 210)
	if !scalar.EqualWithinRel(s.MeanFreePath, 4.331959271e-6, 1e-6) || !scalar.EqualWithinRel(s.Viscosity, 1.058524071e-5, 1e-6) {
		t.Errorf("co2 at 610 Pa, 210 K: mean free path %.9g, viscosity %.9g", s.MeanFreePath, s.Viscosity)
	}
	// Air at 288.15 K: 2.5470e25 molecules per m3, mean speed 458.94 m/s
	// [USSA1976], sea level.
	s, _ = air.State(101325, 288.15)
	if !scalar.EqualWithinRel(s.NumberDensity, 2.5470e25, 1e-4) || !scalar.EqualWithinRel(s.MolecularSpeed, 458.94, 1e-4) || !scalar.EqualWithinRel(s.Density, 1.2250, 1e-4) {
		t.Errorf("sea level: N %.5g, c %.5g, rho %.5g", s.NumberDensity, s.MolecularSpeed, s.Density)
	}
}

func TestNewGas_Mistakes(t *testing.T) {
	for _, c := range []struct {
		mix  []Fraction
		want string
	}{
		{nil, "no species"},
		{[]Fraction{{"xenon", 1}}, `unknown species "xenon"`},
		{[]Fraction{{"co2", 0.5}, {"CO2", 0.5}}, "given twice"},
		{[]Fraction{{"co2", 0.9}}, "sum to 0.9"},
		{[]Fraction{{"co2", math.NaN()}}, "outside 0 to 1"},
		{[]Fraction{{"co2", -1}, {"foo", 1}}, "foo"},
	} {
		if _, err := NewGas(c.mix); err == nil || !strings.Contains(err.Error(), c.want) {
			t.Errorf("%v: error %v, want one with %q", c.mix, err, c.want)
		}
	}
	if _, err := (Gas{}).Viscosity(200); err == nil {
		t.Error("empty gas: no error")
	}
}

func TestRangesOfState(t *testing.T) {
	g := pure(t, "co2")
	for _, c := range []struct {
		p, t float64
		ok   bool
	}{
		{610, MinTemperature, true}, {610, MaxTemperature, true},
		{610, math.Nextafter(MinTemperature, 0), false}, {610, math.Nextafter(MaxTemperature, 1e9), false},
		{MinPressure, 200, true}, {MaxPressure, 200, true},
		{math.Nextafter(MinPressure, 0), 200, false}, {math.Nextafter(MaxPressure, 1e9), 200, false},
		{math.NaN(), 200, false}, {610, math.NaN(), false}, {math.Inf(1), 200, false},
	} {
		if _, err := g.State(c.p, c.t); (err == nil) != c.ok {
			t.Errorf("p %g, T %g: error %v, want accepted %v", c.p, c.t, err, c.ok)
		}
	}
}

// A gas is more viscous when hotter, and its density times its mean free path does
// not depend on pressure.
func TestGasProperties(t *testing.T) {
	names := Species()
	rapid.Check(t, func(rt *rapid.T) {
		x := rapid.Float64Range(0.01, 0.99).Draw(rt, "x")
		i := rapid.IntRange(0, len(names)-2).Draw(rt, "i")
		g, err := NewGas([]Fraction{{names[i], x}, {names[i+1], 1 - x}})
		if err != nil {
			rt.Fatal(err)
		}
		temp := rapid.Float64Range(80, 1900).Draw(rt, "T")
		p := rapid.Float64Range(1e-3, 1e5).Draw(rt, "p")
		a, err := g.State(p, temp)
		if err != nil {
			rt.Fatal(err)
		}
		b, _ := g.State(p, temp*1.01)
		if b.Viscosity <= a.Viscosity {
			rt.Fatalf("viscosity falls from %g to %g", a.Viscosity, b.Viscosity)
		}
		c, _ := g.State(p/2, temp)
		if !scalar.EqualWithinRel(a.Density*a.MeanFreePath, c.Density*c.MeanFreePath, 1e-12) {
			rt.Fatal("density x mean free path depends on pressure")
		}
	})
}
