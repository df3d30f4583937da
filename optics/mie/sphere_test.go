package mie

import (
	"encoding/csv"
	"math"
	"os"
	"strconv"
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
	if len(rows) < 20 {
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
			want, tol := r[3+i], 1e-10
			if i == 3 {
				tol = 1e-8
			}
			err := math.Abs(got - want)
			if want != 0 {
				err /= math.Abs(want)
			}
			worst[i] = math.Max(worst[i], err)
			if !(err <= tol) {
				t.Errorf("x = %g, m = %g+%gi: result %d is %.15g, want %.15g (relative %.1e)", r[0], r[1], r[2], i, got, want, err)
			}
		}
	}
	t.Logf("worst relative error of Ext, Sca, Abs, Back, G: %.1e", worst)
}

// Bohren & Huffman 1983, appendix A, sample output: radius 0.525 um, wavelength 0.6328 um, index 1.55.
func TestSphere_BohrenHuffman1983_appendixA(t *testing.T) {
	e, err := Sphere(2*math.Pi*0.525/0.6328, 1.55)
	if err != nil {
		t.Fatal(err)
	}
	for _, c := range []struct {
		name      string
		got, want float64
	}{{"Ext", e.Ext, 3.10543}, {"Sca", e.Sca, 3.10543}, {"Back", e.Back, 2.92534}, {"G", e.G, 0.63314}} {
		if math.Abs(c.got-c.want) > 6e-6 { // printed to five decimals
			t.Errorf("%s = %.6f, printed %.5f", c.name, c.got, c.want)
		}
	}
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
		{1, complex(0, 1)}, {1, complex(-1, 1)}, {1, complex(1.5, -1e-9)}, {1, complex(math.NaN(), 0)},
		{1, complex(1, math.Inf(1))}, {1e4, complex(1000, 0)}, {1, complex(1e-5, 1e-6)}, {1, complex(1e7, 0)},
	} {
		if e, err := Sphere(c.x, c.m); err == nil {
			t.Errorf("Sphere(%g, %g) = %+v, want an error", c.x, c.m, e)
		}
	}
}

func BenchmarkSphere(b *testing.B) {
	for _, c := range []struct {
		name string
		x    float64
	}{{"x=1", 1}, {"x=30", 30}, {"x=400", 400}} {
		b.Run(c.name, func(b *testing.B) {
			for b.Loop() {
				if _, err := Sphere(c.x, complex(1.3, 0.1)); err != nil {
					b.Fatal(err)
				}
			}
		})
	}
}
