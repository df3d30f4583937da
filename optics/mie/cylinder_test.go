package mie

import (
	"math"
	"math/cmplx"
	"testing"

	"gonum.org/v1/gonum/floats/scalar"
	"gonum.org/v1/gonum/integrate/quad"
	"pgregory.net/rapid"
)

// Expected values: arbitrary-precision evaluations of the same series, two independent programs.
func TestCylinder_arbitraryPrecision(t *testing.T) {
	for _, name := range []string{"testdata/cylinder.csv", "testdata/cylinder_random.csv"} {
		worst := [6]float64{}
		for _, r := range readRows(t, name) {
			e, err := Cylinder(r[0], complex(r[1], r[2]), r[3]*math.Pi/180)
			if err != nil {
				t.Fatal(err)
			}
			tm, te := e.TM(), e.TE
			for i, got := range []float64{tm.Ext, tm.Sca, tm.Abs, te.Ext, te.Sca, te.Abs} {
				err := relative(got, r[4+i])
				worst[i] = math.Max(worst[i], err)
				if !(err <= 1e-11) {
					t.Errorf("x = %g, m = %g+%gi, zeta = %g: result %d is %.15g, want %.15g (relative %.1e)", r[0], r[1], r[2], r[3], i, got, r[4+i], err)
				}
			}
		}
		t.Logf("%s: worst relative error of Ext, Sca, Abs, TM then TE: %.1e", name, worst)
	}
}

// relative returns the relative error, or got where zero is wanted.
func relative(got, want float64) float64 {
	if want == 0 {
		return math.Abs(got)
	}
	return math.Abs(got/want - 1)
}

// Closed form: a wide cylinder lit across its axis blocks twice its shadow, 2 sin zeta per diameter.
func TestCylinder_largeLimit(t *testing.T) {
	for _, zeta := range []float64{math.Pi / 2, math.Pi / 3} {
		e, err := Cylinder(3000, complex(1.5, 0.3), zeta)
		if err != nil {
			t.Fatal(err)
		}
		want := 2 * math.Sin(zeta)
		for _, got := range []float64{e.TM().Ext, e.TE.Ext} {
			if !scalar.EqualWithinRel(got, want, 0.01) {
				t.Errorf("zeta = %g: Ext = %g, want %g", zeta, got, want)
			}
		}
	}
}

// All scattered light leaves on the cone of half-angle zeta about the axis, so its
// cosine lies between cos 2 zeta and 1.
func TestCylinder_asymmetryIsBounded(t *testing.T) {
	for _, x := range []float64{0.01, 0.3, 2, 20} {
		for _, zeta := range []float64{0.2, 0.8, math.Pi / 2} {
			e, err := Cylinder(x, complex(5, 14), zeta)
			if err != nil {
				t.Fatal(err)
			}
			c := math.Cos(zeta)
			lo, hi := c*c-(1-c*c), 1.0
			for _, ch := range []Channel{e.TM(), e.TE} {
				if g := ch.GSca / ch.Sca; g < lo-1e-12 || g > hi+1e-12 {
					t.Errorf("x = %g, zeta = %g: mean cosine %g is outside the scattering cone %g to 1", x, zeta, g, lo)
				}
			}
		}
	}
}

func TestCylinder_refusesBadArguments(t *testing.T) {
	for _, c := range []struct {
		x    float64
		m    complex128
		zeta float64
	}{{0, 2, 1}, {1, complex(0, 1), 1}, {1, 2, 0}, {1, 2, 1.6}, {1, 2, math.NaN()}, {1e-10, 2, 1}} {
		if e, err := Cylinder(c.x, c.m, c.zeta); err == nil {
			t.Errorf("Cylinder(%g, %g, %g) = %+v, want an error", c.x, c.m, c.zeta, e)
		}
	}
}

// J1/J0 at a real argument is that of the standard library; on the imaginary axis it
// is i I1/I0, with I0(10) = 2815.716628, I1(10) = 2670.988304 ([AbramowitzStegun1964], table 9.8);
// the two branches must meet.
func TestBesselRatio(t *testing.T) {
	for _, x := range []float64{1e-6, 0.5, 2, 7, 40, 300} {
		if got, want := BesselRatio(complex(x, 0)), math.J1(x)/math.J0(x); cmplx.Abs(got-complex(want, 0)) > 1e-11*(1+math.Abs(want)*math.Abs(want)) {
			t.Errorf("J1/J0(%g) = %g, want %g", x, got, want)
		}
	}
	if got := imag(BesselRatio(10i)); !scalar.EqualWithinRel(got, 2670.988304/2815.716628, 1e-9) {
		t.Errorf("I1/I0(10) = %.12g", got)
	}
	in, out := BesselRatio(complex(55, 23.97)), BesselRatio(complex(55, 23.99))
	if cmplx.Abs(in-out) > 1e-5 {
		t.Errorf("branches at |z| = 60 differ: %g and %g", in, out)
	}
}

func BenchmarkCylinderAverage(b *testing.B) {
	for _, c := range []struct {
		name string
		x    float64
	}{{"x=0.01", 0.01}, {"x=0.5", 0.5}, {"x=5", 5}} {
		b.Run(c.name, func(b *testing.B) {
			for b.Loop() {
				if _, err := CylinderAverage(c.x, complex(5, 14)); err != nil {
					b.Fatal(err)
				}
			}
		})
	}
}

// Expected values: independent numpy evaluation of the same series, the mean cosine
// summed over 64 azimuths.
func TestCylinder_asymmetry(t *testing.T) {
	for _, c := range []struct {
		x      float64
		m      complex128
		zeta   float64
		tm, te float64
	}{
		{0.3, 3 + 5i, 0.8, 0.48484286, 0.45817155},
		{1.2, 1.5 + 0.1i, 1.2, 0.62891948, 0.71370473},
		{4, 5 + 14i, 0.5, 0.86151979, 0.80770114},
		{2, 8.9 + 49i, math.Pi / 2, 0.35428213, 0.087988927},
	} {
		e, err := Cylinder(c.x, c.m, c.zeta)
		if err != nil {
			t.Fatal(err)
		}
		tm, te := e.TM().GSca/e.TM().Sca, e.TE.GSca/e.TE.Sca
		if !scalar.EqualWithinRel(tm, c.tm, 2e-7) || !scalar.EqualWithinRel(te, c.te, 2e-7) {
			t.Errorf("x = %g: mean cosines %.8g, %.8g, want %.8g, %.8g", c.x, tm, te, c.tm, c.te)
		}
	}
}

// Expected values: independent numpy evaluation, 48 angles: order 0 and the rest of
// iron at 0.55 um (diameter 80 nm) and of aluminium at 0.3 um (diameter 160 nm).
func TestCylinderAverage(t *testing.T) {
	for _, c := range []struct {
		x                                float64
		m                                complex128
		tm0Ext, tm0Abs, restExt, restAbs float64
		g                                float64
	}{
		{0.45695893143124267, 2.9 + 3i, 0.957334266903667, 0.34361117898802673, 0.6653568358874151, 0.46560094891301623, 0.36097637192850246},
		{1.6755160819145565, 0.28 + 3.7i, 0.4683992547856012, 0.012572812623766385, 1.3188371460365556, 0.09512397020870929, 0.49220115080353755},
	} {
		e, err := CylinderAverage(c.x, c.m)
		if err != nil {
			t.Fatal(err)
		}
		rest := e.TMRest.Add(e.TE)
		all := e.TM().Add(e.TE)
		for i, p := range [][2]float64{{e.TM0.Ext, c.tm0Ext}, {e.TM0.Abs, c.tm0Abs}, {rest.Ext, c.restExt}, {rest.Abs, c.restAbs}, {all.GSca / all.Sca, c.g}} {
			if !scalar.EqualWithinRel(p[0], p[1], 1e-3) {
				t.Errorf("x = %g: result %d is %.8g, want %.8g", c.x, i, p[0], p[1])
			}
		}
	}
}

// Two ways: the adaptive average against 400 equal panels of a 5-point Gauss rule, whose
// nodes come from gonum.
func TestCylinderAverage_againstFineRule(t *testing.T) {
	nodes, weights := make([]float64, 5), make([]float64, 5)
	quad.Legendre{}.FixedLocations(nodes, weights, 0, 1)
	for _, c := range []struct {
		x float64
		m complex128
	}{{1e-4, 30 + 100i}, {0.01, 5 + 14i}, {0.1, 9 + 25i}, {0.3, 1.5 + 1e-3i}, {0.58, 1.15 + 7.64i}, {1, 2.9 + 3i}, {2.2979, 1.0454 + 18.768i}, {3, 1.5 + 0.05i}, {5, 5 + 14i}, {12, 1.33 + 0.01i}} {
		got, err := CylinderAverage(c.x, c.m)
		if err != nil {
			t.Fatal(err)
		}
		var want CylinderEfficiencies
		const panels = 400
		for p := range panels {
			for i := range nodes {
				// zeta = (pi/2) v^2 crowds the panels at grazing incidence
				v := (float64(p) + nodes[i]) / panels
				zeta := math.Max(math.Pi/2*v*v, 1e-4)
				e, err := Cylinder(c.x, c.m, zeta)
				if err != nil {
					t.Fatal(err)
				}
				want = want.add(e, weights[i]/panels*math.Pi*v*math.Sin(zeta)/2)
			}
		}
		g, w := watched(got), watched(want)
		for i := range g {
			scale := w[i]
			if i == 4 {
				scale = want.TM().Sca + want.TE.Sca
			}
			if math.Abs(g[i]-w[i]) > 1e-6*scale {
				t.Errorf("x = %g, m = %g: result %d is %.9g, want %.9g", c.x, c.m, i, g[i], w[i])
			}
		}
	}
}

func TestCylinder_properties(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		x := math.Exp(rapid.Float64Range(math.Log(1e-9), math.Log(300)).Draw(t, "ln x"))
		zeta := math.Exp(rapid.Float64Range(math.Log(1e-4), math.Log(math.Pi/2)).Draw(t, "ln zeta"))
		m := drawIndex(t, "m")
		e, err := Cylinder(x, m, zeta)
		if err != nil {
			t.Fatal(err)
		}
		for _, c := range []Channel{e.TM0, e.TMRest, e.TE} {
			for _, v := range []float64{c.Ext, c.Sca, c.Abs, c.GSca, e.Cross} {
				if math.IsNaN(v) || math.IsInf(v, 0) {
					t.Fatalf("%+v is not finite", e)
				}
			}
			if c.Abs < 0 || c.Sca < 0 || c.Ext < c.Abs {
				t.Fatalf("%+v breaks Ext >= Abs >= 0", e)
			}
		}
		if tm := e.TM(); math.Abs(tm.GSca) > tm.Sca*(1+1e-9) || math.Abs(e.TE.GSca) > e.TE.Sca*(1+1e-9) {
			t.Fatalf("%+v: mean cosine beyond 1", e)
		}
		if imag(m) == 0 && e.TM().Abs+e.TE.Abs != 0 {
			t.Fatalf("%+v: a transparent cylinder absorbs", e)
		}
	})
}
