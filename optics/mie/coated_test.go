package mie

import (
	"math"
	"testing"

	"pgregory.net/rapid"
)

// Expected values: arbitrary-precision evaluations of the same series, two independent
// programs. The second table has thin, nearly transparent coats on transparent cores.
func TestCoated_arbitraryPrecision(t *testing.T) {
	for _, name := range []string{"testdata/coated.csv", "testdata/coated_random.csv"} {
		worst := [5]float64{}
		for _, r := range readRows(t, name) {
			e, err := Coated(r[0], r[1], complex(r[2], r[3]), complex(r[4], r[5]))
			if err != nil {
				t.Fatal(err)
			}
			for i, got := range []float64{e.Ext, e.Sca, e.Abs, e.Back, e.G} {
				err := relative(got, r[6+i])
				worst[i] = math.Max(worst[i], err)
				if !(err <= 1e-10) {
					t.Errorf("x = %g, %g, m = %g+%gi, %g+%gi: result %d is %.15g, want %.15g (relative %.1e)", r[0], r[1], r[2], r[3], r[4], r[5], i, got, r[6+i], err)
				}
			}
		}
		t.Logf("%s: worst relative error of Ext, Sca, Abs, Back, G: %.1e", name, worst)
	}
}

// drawIndex draws a refractive index, |m| up to 100, often transparent or nearly so.
func drawIndex(t *rapid.T, name string) complex128 {
	n := math.Exp(rapid.Float64Range(math.Log(0.05), math.Log(70)).Draw(t, "ln n "+name))
	k := 0.0
	if rapid.IntRange(0, 3).Draw(t, "absorbs "+name) > 0 {
		k = math.Exp(rapid.Float64Range(math.Log(1e-11), math.Log(70)).Draw(t, "ln k "+name))
	}
	return complex(n, k)
}

func TestCoated_properties(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		x := math.Exp(rapid.Float64Range(math.Log(1e-6), math.Log(3000)).Draw(t, "ln x"))
		share := rapid.Float64Range(0, 1).Draw(t, "core")
		switch rapid.IntRange(0, 3).Draw(t, "kind") {
		case 0:
			share = 1 - math.Pow(10, -8*share)
		case 1:
			share = math.Pow(10, -8*share)
		}
		core := max(x*share, MinSize)
		m1, m2 := drawIndex(t, "core"), drawIndex(t, "shell")
		e, err := Coated(core, x, m1, m2)
		if err != nil {
			t.Fatal(err)
		}
		for _, v := range []float64{e.Ext, e.Sca, e.Abs, e.Back, e.G} {
			if math.IsNaN(v) || math.IsInf(v, 0) {
				t.Fatalf("%+v is not finite", e)
			}
		}
		if e.Abs < 0 || e.Sca <= 0 || e.Ext < e.Abs || math.Abs(e.G) > 1+1e-12 || e.Back < 0 {
			t.Fatalf("%+v breaks Ext >= Abs >= 0, Sca > 0 or |G| <= 1", e)
		}
		if imag(m1) == 0 && imag(m2) == 0 && (e.Abs != 0 || e.Ext != e.Sca) {
			t.Fatalf("%+v: a transparent sphere absorbs", e)
		}
	})
}

// sameEfficiencies reports a difference beyond a relative tolerance.
func sameEfficiencies(t *rapid.T, got, want Efficiencies, tolerance float64) {
	for i, p := range [][2]float64{{got.Ext, want.Ext}, {got.Sca, want.Sca}, {got.Abs, want.Abs}, {got.Back, want.Back}, {got.G, want.G}} {
		allowed := tolerance * math.Abs(p[1])
		switch i {
		case 3:
			allowed *= 100 // one direction, where the orders cancel
		case 4:
			allowed = tolerance // crosses zero
		}
		if math.Abs(p[0]-p[1]) > allowed {
			t.Fatalf("result %d is %.15g, want %.15g", i, p[0], p[1])
		}
	}
}

// Every limit that is a homogeneous sphere, through the layered series itself.
func TestCoated_homogeneousLimits(t *testing.T) {
	var s Solver
	rapid.Check(t, func(t *rapid.T) {
		x := math.Exp(rapid.Float64Range(math.Log(1e-4), math.Log(50)).Draw(t, "ln x"))
		share := rapid.Float64Range(0.01, 0.999).Draw(t, "core")
		n := rapid.Float64Range(0.3, 8).Draw(t, "n")
		k := rapid.Float64Range(0.01, 8).Draw(t, "k")
		n2 := rapid.Float64Range(0.3, 8).Draw(t, "n2")
		k2 := rapid.Float64Range(0.01, 8).Draw(t, "k2")
		m, other := complex(n, k), complex(n2, k2)
		want, err := Sphere(x, m)
		if err != nil {
			t.Fatal(err)
		}
		sameEfficiencies(t, s.layered(x*share, x, m, m), want, 1e-12)        // equal indices
		sameEfficiencies(t, s.layered(x*1e-6, x, other, m), want, 1e-11)     // no core
		sameEfficiencies(t, s.layered(x*(1-1e-14), x, m, other), want, 1e-7) // no shell: one of 1e-14 shows at 1e-9
		for _, c := range [][2]float64{{0, 0}, {x * share, 1}, {x, 2}} {
			core, shell := other, m
			switch c[1] {
			case 1:
				core = m
			case 2:
				core, shell = m, other
			}
			got, err := Coated(c[0], x, core, shell)
			if err != nil || got != want {
				t.Fatalf("Coated(%g, %g, %g, %g) = %+v, %v, want %+v", c[0], x, core, shell, got, err, want)
			}
		}
	})
}

// Closed form for small spheres (Bohren & Huffman 1983, eq. 5.36): polarizability of a
// coated sphere, with f the core's share of the volume.
func TestCoated_smallLimit(t *testing.T) {
	for _, share := range []float64{0.3, 0.8, 0.99} {
		const x = 1e-5
		m1, m2 := 1.5+0.3i, 1.31+0.01i
		e1, e2, f := m1*m1, m2*m2, complex(share*share*share, 0)
		alpha := ((e2-1)*(e1+2*e2) + f*(e1-e2)*(1+2*e2)) / ((e2+2)*(e1+2*e2) + f*(2*e2-2)*(e1-e2))
		e, err := Coated(x*share, x, m1, m2)
		if err != nil {
			t.Fatal(err)
		}
		if got, want := e.Abs, 4*x*imag(alpha); relative(got, want) > 1e-8 {
			t.Errorf("core %g: Abs = %g, want %g", share, got, want)
		}
		if got, want := e.Sca, 8./3*math.Pow(x, 4)*norm(alpha); relative(got, want) > 1e-8 {
			t.Errorf("core %g: Sca = %g, want %g", share, got, want)
		}
	}
}

func TestCoated_refusesBadArguments(t *testing.T) {
	nan, inf := math.NaN(), math.Inf(1)
	for _, c := range []struct {
		core, shell float64
		m1, m2      complex128
	}{
		{2, 1, 1.5, 1.3}, {math.Nextafter(1, 2), 1, 1.5, 1.3}, {-1, 1, 1.5, 1.3}, {1e-11, 1, 1.5, 1.3},
		{nan, 1, 1.5, 1.3}, {0.5, nan, 1.5, 1.3}, {0.5, inf, 1.5, 1.3}, {inf, inf, 1.5, 1.3}, {0, 0, 1.5, 1.3},
		{0.5, 1, 1i, 1.3}, {0.5, 1, 1.5, 1i}, {0.5, 1, complex(nan, 0), 1.3}, {0.5, 1, 1.5, complex(1, nan)},
		{0.5, 1, complex(1.5, -1e-9), 1.3}, {0.5, 1, 1.5, complex(1.5, inf)}, {0, 1, -1, 1.3},
		{1e4, 1.1e4, 1000, 1.3}, {1e4, 1.1e4, 1.3, 1000},
	} {
		if e, err := Coated(c.core, c.shell, c.m1, c.m2); err == nil {
			t.Errorf("Coated(%g, %g, %g, %g) = %+v, want an error", c.core, c.shell, c.m1, c.m2, e)
		}
	}
}
