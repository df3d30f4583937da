package mie

import (
	"encoding/csv"
	"math"
	"os"
	"strconv"
	"strings"
	"testing"

	"gonum.org/v1/gonum/floats/scalar"
	"pgregory.net/rapid"
)

// readRows returns the numbers of a table in testdata, whose header lines start with '#'.
func readRows(t testing.TB, name string) [][]float64 {
	t.Helper()
	f, err := os.Open(name)
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	r := csv.NewReader(f)
	r.Comment = '#'
	text, err := r.ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	var rows [][]float64
	for _, line := range text[1:] {
		row := make([]float64, len(line))
		for i, s := range line {
			if row[i], err = strconv.ParseFloat(s, 64); err != nil {
				t.Fatal(err)
			}
		}
		rows = append(rows, row)
	}
	if len(rows) < 19 {
		t.Fatalf("%s: only %d rows", name, len(rows))
	}
	return rows
}

// Expected values: arbitrary-precision evaluation of the same series, testdata/sphere.csv.
func TestSphere_arbitraryPrecision(t *testing.T) {
	worst := [5]float64{}
	for _, r := range readRows(t, "testdata/sphere.csv") {
		e, err := Sphere(r[0], complex(r[1], r[2]))
		if err != nil {
			t.Fatal(err)
		}
		for i, got := range []float64{e.Ext, e.Sca, e.Abs, e.Back, e.G} {
			tolerance := 1e-12
			if i == 3 {
				tolerance = 1e-10 // one direction, where the orders cancel
			}
			err := relative(got, r[3+i])
			worst[i] = math.Max(worst[i], err)
			if !(err <= tolerance) {
				t.Errorf("x = %g, m = %g+%gi: result %d is %.15g, want %.15g (relative %.1e)", r[0], r[1], r[2], i, got, r[3+i], err)
			}
		}
	}
	t.Logf("worst relative error of Ext, Sca, Abs, Back, G: %.1e", worst)
}

// Closed form for |m| x << 1 (Bohren & Huffman 1983, eqs 5.7 and 5.8):
// Abs = 4x Im((m^2-1)/(m^2+2)), Sca = (8/3) x^4 |(m^2-1)/(m^2+2)|^2, G -> 0.
func TestSphere_smallLimit(t *testing.T) {
	for _, x := range []float64{1e-9, 1e-6, 1e-4} {
		m := complex(1.5, 0.3)
		e, err := Sphere(x, m)
		if err != nil {
			t.Fatal(err)
		}
		l := (m*m - 1) / (m*m + 2)
		if want := 4 * x * imag(l); !scalar.EqualWithinRel(e.Abs, want, 1e-7) {
			t.Errorf("x = %g: Abs = %g, want %g", x, e.Abs, want)
		}
		if want := 8. / 3 * math.Pow(x, 4) * norm(l); !scalar.EqualWithinRel(e.Sca, want, 1e-7) {
			t.Errorf("x = %g: Sca = %g, want %g", x, e.Sca, want)
		}
		if math.Abs(e.G) > 1e-7 {
			t.Errorf("x = %g: G = %g, want about x^2", x, e.G)
		}
	}
}

// A large absorbing sphere blocks twice its shadow: Ext -> 2 (extinction paradox).
func TestSphere_largeLimit(t *testing.T) {
	e, err := Sphere(2e4, complex(1.5, 0.2))
	if err != nil {
		t.Fatal(err)
	}
	if math.Abs(e.Ext-2) > 0.005 { // edge term 2 x^(-2/3) = 0.003
		t.Errorf("Ext = %g, want 2 within 0.005", e.Ext)
	}
}

func TestSphere_properties(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		x := math.Exp(rapid.Float64Range(math.Log(1e-9), math.Log(300)).Draw(t, "ln x"))
		n := math.Exp(rapid.Float64Range(math.Log(0.05), math.Log(300)).Draw(t, "ln n"))
		k := math.Exp(rapid.Float64Range(math.Log(1e-11), math.Log(300)).Draw(t, "ln k"))
		e, err := Sphere(x, complex(n, k))
		if err != nil {
			t.Fatal(err)
		}
		for _, v := range []float64{e.Ext, e.Sca, e.Abs, e.Back, e.G} {
			if math.IsNaN(v) || math.IsInf(v, 0) {
				t.Fatalf("%+v is not finite", e)
			}
		}
		if e.Abs < 0 || e.Sca < 0 || e.Ext < e.Abs || math.Abs(e.G) > 1 {
			t.Fatalf("%+v breaks Ext >= Abs >= 0 or |G| <= 1", e)
		}
	})
}

func TestSphere_refusesBadArguments(t *testing.T) {
	for _, c := range []struct {
		x float64
		m complex128
	}{
		{0, 1.5}, {-1, 1.5}, {math.NaN(), 1.5}, {math.Inf(1), 1.5}, {math.Nextafter(MaxSize, 1e9), 1.5},
		{1, complex(0, 1)}, {1, complex(-1, 1)}, {1, complex(1.5, -1e-9)}, {1, complex(math.NaN(), 0)}, {1, complex(1.5, math.NaN())}, {math.Nextafter(MinSize, 0), 1.5},
		{1, complex(1, math.Inf(1))}, {1e4, complex(1000, 0)}, {1, complex(1e-5, 1e-6)}, {1, complex(1e7, 0)},
	} {
		if e, err := Sphere(c.x, c.m); err == nil {
			t.Errorf("Sphere(%g, %g) = %+v, want an error", c.x, c.m, e)
		}
	}
}

func TestSolver_doesNotAllocate(t *testing.T) {
	var s Solver
	run := func() {
		for _, x := range []float64{300, 0.01, 5} {
			for _, m := range []complex128{1.5, 1.3 + 0.1i, 30 + 100i} {
				if _, err := s.Sphere(x, m); err != nil {
					t.Fatal(err)
				}
				if _, err := s.Coated(0.7*x, x, m, 1.31+1e-6i); err != nil {
					t.Fatal(err)
				}
			}
		}
	}
	run()
	if n := testing.AllocsPerRun(10, run); n != 0 {
		t.Errorf("%g allocations after warm-up, want none", n)
	}
}

// What a Solver did before must not show.
func TestSolver_forgets(t *testing.T) {
	var s Solver
	for _, x := range []float64{200, 0.01, 30, 1e-6, 5} {
		for _, m := range []complex128{1.5, 1.3 + 0.1i, 30 + 100i} {
			got, err := s.Sphere(x, m)
			want, err2 := Sphere(x, m)
			if err != nil || err2 != nil || got != want {
				t.Errorf("x = %g, m = %g: %+v, %v, fresh %+v, %v", x, m, got, err, want, err2)
			}
		}
	}
}

// The error must name the value and what is allowed.
func TestSphere_errorsSayWhatIsAllowed(t *testing.T) {
	for _, c := range []struct {
		x    float64
		m    complex128
		want []string
	}{
		{-2, 1.5, []string{"size parameter", "-2", "1e-10", "500000"}},
		{1, complex(1.5, -0.25), []string{"refractive index", "1.5-0.25i", "k >= 0"}},
		{1, 5e-5, []string{"5e-05", "0.0001", "1e+06"}},
		{1e4, 1000, []string{"|m| x", "1e+07", "5e+06"}},
	} {
		_, err := Sphere(c.x, c.m)
		if err == nil {
			t.Errorf("Sphere(%g, %g): no error", c.x, c.m)
			continue
		}
		for _, w := range c.want {
			if !strings.Contains(err.Error(), w) {
				t.Errorf("Sphere(%g, %g): %q does not say %q", c.x, c.m, err, w)
			}
		}
	}
}
