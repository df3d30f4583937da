package settling

import (
	"math"
	"strings"
	"testing"

	"gonum.org/v1/gonum/floats/scalar"
	"pgregory.net/rapid"

	"hazewright/settling/atmosphere"
)

func TestFallSpeed_TableOfSpheres(t *testing.T) {
	for _, r := range table(t, "settling_sphere.csv") {
		s := state(r["gas"], r.num(t, "pressure_Pa"), r.num(t, "temperature_K"))
		b := SphereOf(r.num(t, "radius_m"), r.num(t, "density_kg_m3"))
		f, err := FallSpeed(s, r.num(t, "gravity_m_s2"), b)
		if err != nil {
			t.Fatal(err)
		}
		for _, c := range []struct {
			name      string
			got, want float64
		}{
			{"speed", f.Speed, r.num(t, "fall_speed_m_s")},
			{"viscosity", s.Viscosity, r.num(t, "viscosity_Pa_s")},
			{"mean free path", s.MeanFreePath, r.num(t, "mean_free_path_m")},
			{"slip", Slip(f.Knudsen), r.num(t, "slip")},
		} {
			if !scalar.EqualWithinRel(c.got, c.want, 1e-6) {
				t.Errorf("%v: %s %.8g, table %.8g", r, c.name, c.got, c.want)
			}
		}
	}
}

func TestFallSpeed_TableOfRods(t *testing.T) {
	for _, r := range table(t, "settling_rod.csv") {
		s := state(r["gas"], r.num(t, "pressure_Pa"), r.num(t, "temperature_K"))
		b := RodOf(r.num(t, "length_m"), r.num(t, "diameter_m"), r.num(t, "density_kg_m3"))
		f, err := FallSpeed(s, r.num(t, "gravity_m_s2"), b)
		if err != nil {
			t.Fatal(err)
		}
		par, perp, err := Drag(s, b)
		if err != nil {
			t.Fatal(err)
		}
		for _, c := range []struct {
			name      string
			got, want float64
		}{
			{"speed", f.Speed, r.num(t, "fall_speed_m_s")},
			{"parallel drag", par, r.num(t, "drag_parallel_kg_s")},
			{"perpendicular drag", perp, r.num(t, "drag_perpendicular_kg_s")},
		} {
			if !scalar.EqualWithinRel(c.got, c.want, 1e-6) {
				t.Errorf("%v: %s %.8g, table %.8g", r, c.name, c.got, c.want)
			}
		}
	}
}

// Settling speeds of unit-density spheres in air at 293 K and 1 atm, tabulated by
// diameter in W. C. Hinds, Aerosol Technology, 2nd ed.; values from memory. The slip
// constants of the book differ a little from ours, most near 0.1 um.
func TestFallSpeed_Hinds(t *testing.T) {
	s := state("air", 101325, 293.15)
	for _, c := range []struct{ diameter, want, tolerance float64 }{
		{0.1e-6, 8.8e-7, 0.03}, {1e-6, 3.48e-5, 0.02}, {10e-6, 3.06e-3, 0.02},
	} {
		f := must(FallSpeed(s, 9.80665, SphereOf(c.diameter/2, 1000)))
		if !scalar.EqualWithinRel(f.Speed, c.want, c.tolerance) || f.Flag != "" {
			t.Errorf("%g m: %.4g m/s (flag %q), Hinds %.4g", c.diameter, f.Speed, f.Flag, c.want)
		}
	}
}

// The same table goes on to 100 um: 0.25 m/s, against 0.30 by Stokes drag.
func TestFallSpeed_HindsInertia(t *testing.T) {
	s := state("air", 101325, 293.15)
	f := must(FallSpeed(s, 9.80665, SphereOf(50e-6, 1000)))
	if !scalar.EqualWithinRel(f.Speed, 0.25, 0.04) || !strings.Contains(f.Flag, "Schiller-Naumann") {
		t.Errorf("100 um: %.4g m/s (flag %q), Hinds 0.25", f.Speed, f.Flag)
	}
	if back := f.Reynolds * s.Viscosity / (s.Density * 100e-6); !scalar.EqualWithinRel(back, f.Speed, 1e-12) {
		t.Errorf("Reynolds number %g and speed %g do not belong together", f.Reynolds, f.Speed)
	}
	// The corrected drag carries the weight.
	stokes := must(FallSpeed(s, 9.80665e-6, SphereOf(50e-6, 1000))).Speed * 1e6
	if !scalar.EqualWithinRel(f.Speed*inertia(f.Reynolds), stokes, 1e-9) {
		t.Errorf("speed x correction %g, Stokes speed %g", f.Speed*inertia(f.Reynolds), stokes)
	}
}

// Drag in thick and in thin gas against the closed forms of the limits.
func TestDrag_Limits(t *testing.T) {
	dense := state("co2", 1e6, 210) // mean free path 2.6 nm
	b := SphereOf(1e-4, 1000)
	if par, perp, _ := Drag(dense, b); par != perp || !scalar.EqualWithinRel(par, 6*math.Pi*dense.Viscosity*1e-4, 1e-4) {
		t.Errorf("Stokes: %g, %g", par, perp)
	}
	rare := state("co2", 1e-3, 210)
	b = SphereOf(1e-6, 1000)
	// (4/3) pi r^2 rho c (1 + pi f/8), diffuse share f = 0.9 (Epstein's law)
	want := 4. / 3 * math.Pi * 1e-12 * rare.Density * rare.MolecularSpeed * (1 + math.Pi*0.9/8)
	if f, _, _ := Drag(rare, b); !scalar.EqualWithinRel(f, want, 4e-3) {
		t.Errorf("free-molecular sphere: %g, Epstein %g", f, want)
	}
	// A long rod among free molecules, all reflected diffusely or not: across over
	// along tends to (An + At)/(2 At) = 2.507 at f = 0.9 for a thin rod.
	par, perp, _ := Drag(rare, RodOf(1e-3, 1e-7, 1000))
	if !scalar.EqualWithinRel(perp/par, 2.507, 2e-3) {
		t.Errorf("free-molecular rod: across over along %.4g, closed form 2.507", perp/par)
	}
	// Slender rod in the continuum: 4 pi mu L/(ln(L/a) + 0.193) across,
	// 2 pi mu L/(ln(L/a) - 0.807) along (slender-body theory, values from memory).
	// The spheroid of equal length and volume lies within 3 %.
	l, a := 1e-2, 2.5e-5
	par, perp, _ = Drag(dense, RodOf(l, 2*a, 1000))
	if w := 4 * math.Pi * dense.Viscosity * l / (math.Log(l/a) + 0.193); !scalar.EqualWithinRel(perp, w, 0.03) {
		t.Errorf("slender rod across: %g, %g", perp, w)
	}
	if w := 2 * math.Pi * dense.Viscosity * l / (math.Log(l/a) - 0.807); !scalar.EqualWithinRel(par, w, 0.03) {
		t.Errorf("slender rod along: %g, %g", par, w)
	}
}

// A coated or hollow particle is its outer size with its own mass.
func TestFallSpeed_OwnMass(t *testing.T) {
	s := state("co2", 610, 210)
	full := RodOf(9e-6, 160e-9, iron)
	hollow := full
	hollow.Mass /= 3
	a, b := must(FallSpeed(s, 3.71, full)), must(FallSpeed(s, 3.71, hollow))
	if !scalar.EqualWithinRel(a.Speed, 3*b.Speed, 1e-12) {
		t.Errorf("a third of the mass: %g against %g m/s", b.Speed, a.Speed)
	}
}

// A heavier particle of the same shape never falls slower, across all treatments of
// drag.
func TestFallSpeed_HeavierNeverSlower(t *testing.T) {
	gas := gasOf("co2")
	rapid.Check(t, func(rt *rapid.T) {
		s := must(gas.State(math.Exp(rapid.Float64Range(-3, 11).Draw(rt, "ln p")), rapid.Float64Range(100, 400).Draw(rt, "T")))
		r := math.Exp(rapid.Float64Range(math.Log(1e-8), math.Log(1e-3)).Draw(rt, "ln r"))
		b := SphereOf(r, rapid.Float64Range(10, 20000).Draw(rt, "density"))
		if rapid.Bool().Draw(rt, "rod") {
			b = RodOf(r, r/rapid.Float64Range(2, 200).Draw(rt, "aspect"), 5000)
			if b.Check() != nil {
				return
			}
		}
		heavy := b
		heavy.Mass *= 1 + math.Exp(rapid.Float64Range(-10, 1).Draw(rt, "ln more"))
		f, err := FallSpeed(s, 3.71, b)
		g, err2 := FallSpeed(s, 3.71, heavy)
		if err != nil || err2 != nil {
			return // beyond the drag laws, and refused
		}
		if !(g.Speed >= f.Speed) {
			rt.Fatalf("mass %g falls at %g m/s, mass %g at %g m/s", b.Mass, f.Speed, heavy.Mass, g.Speed)
		}
	})
}

func TestFallSpeed_Refusals(t *testing.T) {
	s := state("co2", 610, 210)
	ok := SphereOf(1e-6, 1000)
	for _, c := range []struct {
		name    string
		s       atmosphere.State
		gravity float64
		b       Body
		want    string
	}{
		{"no state", atmosphere.State{}, 3.71, ok, "state of gas"},
		{"no gravity", s, 0, ok, "gravity"},
		{"shape", s, 3.71, Body{Shape: "cube", Mass: 1}, `"cube"`},
		{"small", s, 3.71, Body{Shape: Sphere, Radius: math.Nextafter(MinSize, 0), Mass: 1e-20}, "radius"},
		{"large", s, 3.71, Body{Shape: Sphere, Radius: math.Nextafter(MaxSize, 1), Mass: 1e-20}, "radius"},
		{"stubby", s, 3.71, RodOf(1.99e-6, 1e-6, 1000), "aspect ratio"},
		{"no mass", s, 3.71, Body{Shape: Rod, Length: 1e-5, Diameter: 1e-7}, "mass"},
		{"NaN", s, 3.71, SphereOf(math.NaN(), 1000), "radius"},
		{"too fast", state("co2", 1e5, 210), 3.71, SphereOf(1e-2, 1000), "Reynolds"},
	} {
		if _, err := FallSpeed(c.s, c.gravity, c.b); err == nil || !strings.Contains(err.Error(), c.want) {
			t.Errorf("%s: error %v, want one with %q", c.name, err, c.want)
		}
	}
	if f := must(FallSpeed(state("co2", 1e-3, 210), 3.71, SphereOf(1e-3, 1000))); !strings.Contains(f.Flag, "molecules") {
		t.Errorf("a fall at %g m/s is not flagged: %q", f.Speed, f.Flag)
	}
	if f := must(FallSpeed(state("co2", 1e5, 210), 3.71, RodOf(1e-3, 5e-5, 5000))); !strings.Contains(f.Flag, "rod length") {
		t.Errorf("a rod at Reynolds number %g is not flagged: %q", f.Reynolds, f.Flag)
	}
}

// The turning of a rod against closed forms: [TiradoGarcia1984] in the continuum,
// and among free molecules the drag across the rod on a lever.
func TestRotationalDiffusivity(t *testing.T) {
	s := state("co2", 1e6, 210)
	b := RodOf(1e-2, 1e-4, 1000)
	want := 3 * atmosphere.Boltzmann * 210 * (math.Log(100) - 0.662 + 0.00917 - 0.000005) / (math.Pi * s.Viscosity * 1e-6)
	if d := must(RotationalDiffusivity(s, b)); !scalar.EqualWithinRel(d, want, 1e-3) {
		t.Errorf("continuum: %g 1/s, closed form %g", d, want)
	}
	s = state("co2", 1e-3, 210)
	b = RodOf(8e-6, 8e-9, iron)
	_, perp, _ := Drag(s, b)
	if d, w := must(RotationalDiffusivity(s, b)), 12*atmosphere.Boltzmann*210/(perp*64e-12); !scalar.EqualWithinRel(d, w, 5e-3) {
		t.Errorf("free molecules: %g 1/s, drag on a lever %g", d, w)
	}
	if _, err := RotationalDiffusivity(s, SphereOf(1e-6, 1000)); err == nil {
		t.Error("a sphere turns")
	}
}

// Slender conducting rod: polarisability along it 4 pi eps0 (L/2)^3/(3 (ln(L/b) - 1))
// for the spheroid of semi-axes L/2, b, from the closed form for a long spheroid.
func TestAligningField(t *testing.T) {
	s := state("co2", 610, 210)
	l, d := 8e-6, 8e-9
	b := d / 2 * math.Sqrt(1.5)
	alpha := 4 * math.Pi * vacuumPermittivity * l * l * l / 8 / (3 * (math.Log(l/b) - 1))
	want := math.Sqrt(2 * atmosphere.Boltzmann * 210 / alpha)
	if e := must(AligningField(s, RodOf(l, d, iron))); !scalar.EqualWithinRel(e, want, 1e-3) {
		t.Errorf("aligning field %g V/m, slender rod %g", e, want)
	}
}
