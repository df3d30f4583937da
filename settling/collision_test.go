package settling

import (
	"math"
	"testing"

	"gonum.org/v1/gonum/floats/scalar"

	"hazewright/settling/atmosphere"
)

func TestKernel_Table(t *testing.T) {
	for _, r := range table(t, "agglomeration.csv") {
		s := state(r["gas"], r.num(t, "pressure_Pa"), r.num(t, "temperature_K"))
		b := SphereOf(r.num(t, "radius_or_length_m"), r.num(t, "density_kg_m3"))
		if r["shape"] == Rod {
			b = RodOf(r.num(t, "radius_or_length_m"), r.num(t, "diameter_m"), r.num(t, "density_kg_m3"))
		}
		for _, c := range []struct {
			name      string
			got, want float64
		}{
			{"diffusivity", must(Diffusivity(s, b)), r.num(t, "diffusivity_m2_s")},
			{"collision radius", must(CollisionRadius(b)), r.num(t, "collision_radius_m")},
			{"kernel", must(Kernel(s, b)), r.num(t, "kernel_m3_s")},
		} {
			if !scalar.EqualWithinRel(c.got, c.want, 1e-6) {
				t.Errorf("%v: %s %.8g, table %.8g", r, c.name, c.got, c.want)
			}
		}
	}
}

// Seinfeld & Pandis (2006), 2nd ed., table 13.3: equal unit-density spheres in air at
// 298 K and 1 atm, by diameter; values from memory, two to three figures.
func TestKernel_SeinfeldPandis2006(t *testing.T) {
	s := state("air", 101325, 298)
	for _, c := range []struct{ diameter, want float64 }{
		{0.02e-6, 24e-16}, {0.1e-6, 14.4e-16}, {1e-6, 6.9e-16}, {10e-6, 6.1e-16},
	} {
		if k := must(Kernel(s, SphereOf(c.diameter/2, 1000))); !scalar.EqualWithinRel(k, c.want, 0.03) {
			t.Errorf("%g m: kernel %.4g m3/s, table %.4g", c.diameter, k, c.want)
		}
	}
}

func TestKernel_Limits(t *testing.T) {
	// Continuum: 8 k T/(3 mu), whatever the size.
	s := state("air", 1e6, 298)
	want := 8 * atmosphere.Boltzmann * 298 / (3 * s.Viscosity)
	if k := must(Kernel(s, SphereOf(50e-6, 1000))); !scalar.EqualWithinRel(k, want, 2e-3) {
		t.Errorf("continuum: %g, closed form %g", k, want)
	}
	// Free molecules: sqrt(2) c sigma.
	s = state("co2", 1e-6, 210)
	b := RodOf(9e-6, 60e-9, 2699)
	want = math.Sqrt2 * math.Sqrt(8*atmosphere.Boltzmann*210/(math.Pi*b.Mass)) * must(CollisionSection(b))
	if k := must(Kernel(s, b)); !scalar.EqualWithinRel(k, want, 2e-3) {
		t.Errorf("free molecules: %g, closed form %g", k, want)
	}
}

// The mean collision cross-section of two thin crossed needles tends to the mean
// over turnings of L^2 |sin gamma| times the mean of |cos| of the view, (pi/4)(1/2)
// L^2 = pi L^2/8.
func TestCollisionSection_Needles(t *testing.T) {
	if got, want := must(CollisionSection(RodOf(1e-3, 1e-9, 1000))), math.Pi*1e-6/8; !scalar.EqualWithinRel(got, want, 1e-4) {
		t.Errorf("needles: %g m2, closed form %g", got, want)
	}
	if got, want := must(CollisionSection(SphereOf(1e-6, 1000))), math.Pi*4e-12; !scalar.EqualWithinRel(got, want, 1e-12) {
		t.Errorf("spheres: %g m2, closed form %g", got, want)
	}
}

func TestChargeFactor(t *testing.T) {
	s := state("co2", 610, 210)
	b := SphereOf(0.5e-6, 1000)
	// w = (z e)^2/(4 pi eps0 R k T) for z = 10, R = 1 um: 100 x 2.3071e-28/(1e-6 x
	// 2.8994e-21) = 7.957; W = (e^w - 1)/w = 358.8.
	if f := must(ChargeFactor(s, b, 10)); !scalar.EqualWithinRel(1/f, 358.8, 2e-3) {
		t.Errorf("ten charges: barrier %.5g, by hand 358.8", 1/f)
	}
	if f := must(ChargeFactor(s, b, -10)); f != must(ChargeFactor(s, b, 10)) {
		t.Error("the sign of the charge matters")
	}
	for _, z := range []float64{0, 1e-12, 1e-200} {
		if f := must(ChargeFactor(s, b, z)); !scalar.EqualWithinRel(f, 1, 1e-12) {
			t.Errorf("%g charges: factor %g", z, f)
		}
	}
	if f := must(ChargeFactor(s, b, 1e6)); f != 0 {
		t.Errorf("a million charges: factor %g", f)
	}
	for _, z := range []float64{math.NaN(), math.Inf(1), 1e10} {
		if _, err := ChargeFactor(s, b, z); err == nil {
			t.Errorf("%g charges: no error", z)
		}
	}
}
