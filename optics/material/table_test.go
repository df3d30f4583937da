package material

import (
	"math"
	"strings"
	"testing"

	"gonum.org/v1/gonum/floats/scalar"
)

const sample = `# a made-up glass
wavelength_um,n,k
1,1.5,0

10,1.7,0.2
100,2.0,0.1
`

func TestNewTable(t *testing.T) {
	rows, err := ParseCSV(strings.NewReader(sample))
	if err != nil {
		t.Fatal(err)
	}
	m, err := NewTable("glass", 2500, rows, false)
	if err != nil {
		t.Fatal(err)
	}
	got, err := m.Index(math.Sqrt(1e-6 * 10e-6)) // half-way in ln(wavelength)
	if err != nil {
		t.Fatal(err)
	}
	if !scalar.EqualWithinAbs(real(got), 1.6, 1e-12) || !scalar.EqualWithinAbs(imag(got), 0.1, 1e-12) {
		t.Errorf("index %g, want 1.6+0.1i", got)
	}
	if _, err := m.Index(101e-6); err == nil || !strings.Contains(err.Error(), "101 um") || !strings.Contains(err.Error(), "100 um") {
		t.Errorf("error %v: want the wavelength needed and the range had", err)
	}
	if s := m.HeldShare(210); s != 0 {
		t.Errorf("HeldShare = %g without extend", s)
	}
	m, err = NewTable("glass", 2500, rows[1:], true)
	if err != nil {
		t.Fatal(err)
	}
	if got, err := m.Index(1e-6); err != nil || got != complex(1.7, 0.2) {
		t.Errorf("held index %g, %v; want 1.7+0.2i", got, err)
	}
	// Blackbody table: 0.02085 below 10 um at 210 K... from F(2100 um K) = 0.0831 and F(21000 um K) = 0.9853 (value from memory)
	if s := m.HeldShare(210); math.Abs(s-(0.0831+1-0.9853)) > 0.003 {
		t.Errorf("HeldShare(210 K) = %g", s)
	}
}

func TestParse_sameRows(t *testing.T) {
	a, err := ParseCSV(strings.NewReader(sample))
	if err != nil {
		t.Fatal(err)
	}
	b, err := ParsePairs("  1 1.5 0\n10\t1.7 0.2\n\n100 2 0.1")
	if err != nil {
		t.Fatal(err)
	}
	for i := range a {
		if a[i] != b[i] {
			t.Errorf("row %d: %v and %v", i, a[i], b[i])
		}
	}
}

func TestParse_errors(t *testing.T) {
	head := "wavelength_um,n,k\n"
	for _, c := range []struct{ text, want string }{
		{"1,1.5,0\n2,1.5,0\n", "line 1"},
		{head + "1,1.5\n2,1.5,0\n", "line 2: 2 columns"},
		{head + "1,1.5,0\n# x\n2,abc,0\n", "line 4: \"abc\" is not a number"},
		{head + "1,1.5,0\n1,1.5,0\n", "line 3: wavelength 1 um is not above"},
		{head + "1,0,0\n2,1,0\n", "line 2: n = 0"},
		{head + "1,1,-0.1\n2,1,0\n", "line 2: k = -0.1"},
		{head + "1,NaN,0\n2,1,0\n", "line 2: n = NaN is outside 0.0001 to 1e+06"},
		{head + "1,1,0\n49.99999999999999,1,0\n49.9,1,0\n", "line 4: wavelength 49.9 um is not above the 50 um before it"},
		{head + "1,1,1e999\n2,1,0\n", "line 2: \"1e999\" is too large; want"},
		{head + "1,1,Inf\n2,1,0\n", "line 2: k = +Inf is outside 0 to 1e+06"},
		{head + "0,1,0\n2,1,0\n", "line 2: wavelength 0 um is outside 0.001 um to 1e+07 um"},
		{head + "NaN,1,0\n2,1,0\n", "line 2: wavelength NaN um is outside"},
		{head + "-1,1,0\n2,1,0\n", "line 2: wavelength -1 um"},
		{head + "1,1,0\n", "1 rows of wavelength, n, k; at least 2"},
		{"", "0 rows"},
	} {
		if _, err := ParseCSV(strings.NewReader(c.text)); err == nil || !strings.Contains(err.Error(), c.want) {
			t.Errorf("%q: error %v, want %q", c.text, err, c.want)
		}
	}
	if _, err := ParsePairs("1 1.5\n2 1.6\n"); err == nil || !strings.Contains(err.Error(), "line 1: 2 columns") {
		t.Errorf("error %v", err)
	}
}

func TestNewTable_errors(t *testing.T) {
	good := []Row{{1e-6, 1.5, 0}, {2e-6, 1.5, 0}}
	for _, c := range []struct {
		name    string
		density float64
		rows    []Row
	}{{"", 1, good}, {"x", 0, good}, {"x", math.NaN(), good}, {"x", math.Inf(1), good}, {"x", 1, good[:1]},
		{"x", 1, []Row{good[1], good[0]}}, {"x", 1, []Row{good[0], good[0]}}, {"x", 1, []Row{good[0], {2e-6, -1, 0}}}} {
		if _, err := NewTable(c.name, c.density, c.rows, true); err == nil {
			t.Errorf("NewTable(%q, %g, %v): no error", c.name, c.density, c.rows)
		}
	}
}

// checkRows holds whatever a parser lets through to its promises.
func checkRows(t *testing.T, rows []Row, err error) {
	if err != nil {
		return
	}
	m, err := NewTable("fuzz", 1000, rows, true)
	if err != nil {
		// Two wavelengths may differ yet have equal logarithms.
		if strings.Contains(err.Error(), "not above") {
			return
		}
		t.Fatalf("parsed rows refused: %v", err)
	}
	for _, r := range rows {
		i, err := m.Index(r.Wavelength)
		if err != nil || math.IsNaN(real(i)) || math.IsNaN(imag(i)) {
			t.Fatalf("index at %g: %g, %v", r.Wavelength, i, err)
		}
	}
}

func FuzzParseCSV(f *testing.F) {
	f.Add(sample)
	f.Add("wavelength_um,n,k\n1e308,1,0\n1e309,1,0\n")
	f.Fuzz(func(t *testing.T, text string) {
		rows, err := ParseCSV(strings.NewReader(text))
		checkRows(t, rows, err)
	})
}

func FuzzParsePairs(f *testing.F) {
	f.Add("1 1.5 0\n2 1.6 0.1\n")
	f.Add("1e-320 1 0\n2 1e308 0.1")
	f.Fuzz(func(t *testing.T, text string) {
		rows, err := ParsePairs(text)
		checkRows(t, rows, err)
	})
}
