package hazewright

import (
	"context"
	"errors"
	"math"
	"reflect"
	"strings"
	"testing"
)

// glass is a study of one sphere whose refractive index is the same at all wavelengths.
func glass(t *testing.T, radius, n, k string) *Study {
	t.Helper()
	text := "study: Glass\nworld: mars\ngoal: {burden: 1 mg/m2}\ndesigns:\n  - name: Beads\n    particles:\n" +
		"      - {shape: sphere, radius: " + radius + ", material: {table: glass.csv, density: 2 g/cm3, extend: true}}\n"
	table := "wavelength_um,n,k\n0.5," + n + "," + k + "\n1," + n + "," + k + "\n"
	s, err := Load(Source{Name: "glass.yaml", Data: []byte(text), Open: func(string) ([]byte, error) { return []byte(table), nil }}, nil)
	if err != nil {
		t.Fatal(err)
	}
	return s
}

func spectrumAt(t *testing.T, s *Study, design string, wavelengths ...float64) *Spectrum {
	t.Helper()
	out, err := NewEngine(Options{}).Spectrum(context.Background(), s, design, wavelengths)
	if err != nil {
		t.Fatal(err)
	}
	return out
}

func near(t *testing.T, what string, got, want, tolerance float64) {
	t.Helper()
	if !(math.Abs(got-want) <= tolerance*math.Abs(want)) {
		t.Errorf("%s is %.8g, want %.8g within %g", what, got, want, tolerance)
	}
}

// Bohren & Huffman (1983), appendix A, sample case of the program for spheres: x = 2 pi
// 0.525/0.6328 in vacuum, m = 1.55: Qext = Qsca = 3.10543. g: independent numpy calculation of the same
// equations. The rest by hand: area pi 0.525^2 um2, mass 4/3 pi (0.525 um)^3 2000 kg/m3.
func TestSpectrumOfPublishedSphere(t *testing.T) {
	s := spectrumAt(t, glass(t, "0.525 um", "1.55", "0"), "", 0.6328e-6)
	if s.Design != "Beads" || len(s.Populations) != 1 || len(s.Populations[0].Rows) != 1 {
		t.Fatalf("got %+v", s)
	}
	p := s.Populations[0]
	r := p.Rows[0]
	const ext, mass = 3.10543 * math.Pi * 0.525e-6 * 0.525e-6, 4.0 / 3 * math.Pi * 0.525e-6 * 0.525e-6 * 0.525e-6 * 2000
	near(t, "extinction", r.Ext, ext, 1e-5)
	near(t, "scattering", r.Sca, ext, 1e-5)
	near(t, "mean cosine", r.G, 0.633137, 1e-5)
	near(t, "extinction per kg", r.KappaExt, ext/mass, 1e-5)
	near(t, "mass", p.Mass, mass, 1e-12)
	if r.Abs != 0 || r.KappaAbs != 0 {
		t.Errorf("glass absorbs %g m2, %g m2/kg", r.Abs, r.KappaAbs)
	}
	if r.Wavelength != 0.6328e-6 || r.Method != "Mie series" || r.Err > 1e-6 {
		t.Errorf("row %+v", r)
	}
	if len(s.Warnings) != 0 {
		t.Errorf("warnings inside the table: %v", s.Warnings)
	}
}

// A sphere far smaller than the wavelength absorbs 4 pi k a^3 Im((m^2 - 1)/(m^2 + 2)), Bohren &
// Huffman (1983), eq. 5.11; at x = 6e-4 what is left out is below 1e-5.
func TestSpectrumOfTinySphere(t *testing.T) {
	s := spectrumAt(t, glass(t, "1 nm", "1.5", "0.3"), "Beads", 10e-6)
	r := s.Populations[0].Rows[0]
	m2 := complex(1.5, 0.3) * complex(1.5, 0.3)
	abs := 4 * math.Pi * (2 * math.Pi / 10e-6) * 1e-27 * imag((m2-1)/(m2+2))
	near(t, "absorption", r.Abs, abs, 1e-5)
	near(t, "absorption per kg", r.KappaAbs, abs/(4.0/3*math.Pi*1e-27*2000), 1e-5)
	if len(s.Warnings) != 1 || !strings.Contains(s.Warnings[0].Text, "at 1 of 1 wavelengths, such as 10 um, the index of glass.csv is not known") {
		t.Errorf("warnings beyond the table: %v", s.Warnings)
	}
}

const twoRods = `
study: Rods
world: mars
goal: {burden: 1 mg/m2}
model: {kappa_factor: 2}
designs:
  - name: Pair
    particles:
      - {shape: rod, length: 9 um, diameter: 100 nm, material: aluminium, share: 50 %}
      - {shape: rod, length: 9 um, diameter: 100 nm, material: aluminium, share: 50 %, spread: 1.3, oxide: 5 nm}
  - name: Bare
    particles: [{shape: rod, length: 9 um, diameter: 80 nm, material: iron, surface_scattering: false}]
`

func loadText(t *testing.T, text string) *Study {
	t.Helper()
	s, err := Load(Source{Name: "study.yaml", Data: []byte(text)}, nil)
	if err != nil {
		t.Fatal(err)
	}
	return s
}

// What the optics rest on is told as used; names are told apart.
func TestSpectrumSaysWhatItRestsOn(t *testing.T) {
	s := spectrumAt(t, loadText(t, twoRods), "Pair", 10e-6)
	a, b := s.Populations[0], s.Populations[1]
	if a.Name != "rod 9 um x 100 nm, aluminium, population 1" || b.Name != "rod 9 um x 100 nm, aluminium, population 2" {
		t.Errorf("names %q and %q", a.Name, b.Name)
	}
	if a.OxideGiven || a.OxideUsed <= 0 || !b.OxideGiven || b.OxideUsed != 5e-9 {
		t.Errorf("oxide: %v %g, %v %g", a.OxideGiven, a.OxideUsed, b.OxideGiven, b.OxideUsed)
	}
	if len(a.Nodes) != 1 || len(b.Nodes) < 5 {
		t.Errorf("%d and %d size nodes", len(a.Nodes), len(b.Nodes))
	}
	near(t, "added resistivity", b.AddedResistivity, 0.75*b.SurfaceRhoL/90e-9, 1e-12)
	near(t, "mass", a.Mass, math.Pi/4*100e-9*100e-9*9e-6*2700, 1e-3) // density of aluminium: 2.70 g/cm3, any handbook
	bare := spectrumAt(t, loadText(t, twoRods), "Bare", 10e-6).Populations[0]
	if bare.SurfaceRhoL != 0 || bare.AddedResistivity != 0 {
		t.Errorf("surface scattering is off, but adds %g", bare.AddedResistivity)
	}
	if len(s.Methods) != 1 || s.Methods[0].Stage != "Optics" || s.SurfaceTemperature < 150 {
		t.Errorf("methods %v, surface at %g K", s.Methods, s.SurfaceTemperature)
	}
}

// kappa_factor, which is model error of the warming, does not touch a spectrum.
func TestSpectrumLeavesModelFactorsAside(t *testing.T) {
	doubled := spectrumAt(t, loadText(t, twoRods), "Bare", 1e-6, 10e-6)
	plain := spectrumAt(t, loadText(t, strings.Replace(twoRods, "kappa_factor: 2", "kappa_factor: 1", 1)), "Bare", 1e-6, 10e-6)
	if !reflect.DeepEqual(doubled.Populations, plain.Populations) {
		t.Error("the spectrum depends on kappa_factor")
	}
}

// Neither the number of workers nor the company of other wavelengths moves a byte.
func TestSpectrumDoesNotDependOnWorkers(t *testing.T) {
	s := loadText(t, twoRods)
	wavelengths := make([]float64, 60)
	for i := range wavelengths {
		wavelengths[i] = 0.4e-6 * math.Pow(200, float64(i)/59)
	}
	one, err := NewEngine(Options{Workers: 1}).Spectrum(context.Background(), s, "Pair", wavelengths)
	if err != nil {
		t.Fatal(err)
	}
	four, err := NewEngine(Options{Workers: 4}).Spectrum(context.Background(), s, "Pair", wavelengths)
	if err != nil {
		t.Fatal(err)
	}
	if !reflect.DeepEqual(one.Populations, four.Populations) {
		t.Error("4 workers give other rows than 1")
	}
	alone := spectrumAt(t, s, "Pair", wavelengths[30])
	if alone.Populations[1].Rows[0] != one.Populations[1].Rows[30] {
		t.Errorf("alone %+v, among others %+v", alone.Populations[1].Rows[0], one.Populations[1].Rows[30])
	}
}

func TestSpectrumMistakes(t *testing.T) {
	s := loadText(t, twoRods)
	for _, c := range []struct {
		design      string
		wavelengths []float64
		want        []string
	}{
		{"", []float64{1e-5}, []string{"design: the study has 2 designs", "Pair or Bare"}},
		{"Pare", []float64{1e-5}, []string{`design: "Pare" is not in the study`, `did you mean "Bare"?`, "Pair and Bare"}},
		{"Bare", nil, []string{"wavelengths: 0 is outside 1 to 20000 wavelengths"}},
		{"Bare", make([]float64, 20001), []string{"wavelengths: 20001 is outside 1 to 20000 wavelengths"}},
		{"Bare", []float64{1e-5, 0}, []string{"wavelengths: 0 um is outside 0.2 um to 1 m", "index of iron"}},
		{"Bare", []float64{-1e-5}, []string{"-10 um is outside 0.2 um to 1 m"}},
		{"Bare", []float64{math.NaN()}, []string{"NaN", "is outside 0.2 um to 1 m"}},
		{"Bare", []float64{math.Inf(1)}, []string{"is outside 0.2 um to 1 m"}},
		{"Bare", []float64{0.19e-6}, []string{"0.19 um is outside 0.2 um to 1 m"}},
		{"Bare", []float64{5}, []string{"5 m is outside 0.2 um to 1 m"}},
	} {
		_, err := NewEngine(Options{}).Spectrum(context.Background(), s, c.design, c.wavelengths)
		var asked *SpectrumError
		if !errors.As(err, &asked) {
			t.Errorf("%q %v: got %v, want a SpectrumError", c.design, c.wavelengths, err)
			continue
		}
		for _, part := range c.want {
			if !strings.Contains(err.Error(), part) {
				t.Errorf("%q: error %q lacks %q", c.design, err, part)
			}
		}
	}
	for _, w := range []float64{0.2e-6, 1} { // the ends belong to the range
		if err := s.CheckWavelengths("Bare", []float64{w}); err != nil {
			t.Errorf("at %g m: %v", w, err)
		}
	}
}

func TestSpectrumStopsWhenCancelled(t *testing.T) {
	ctx, cancel := context.WithCancel(context.Background())
	seen := 0
	o := Options{Workers: 2, Progress: func(stage string, done, total int) {
		if seen = max(seen, done); done == 3 {
			cancel()
		}
		if stage != "wavelengths" || total != 4000 {
			t.Errorf("progress of %s in %d", stage, total)
		}
	}}
	wavelengths := make([]float64, 4000)
	for i := range wavelengths {
		wavelengths[i] = 1e-6 + 1e-8*float64(i)
	}
	_, err := NewEngine(o).Spectrum(ctx, loadText(t, twoRods), "Bare", wavelengths)
	if !errors.Is(err, context.Canceled) {
		t.Errorf("got %v", err)
	}
	if seen < 3 || seen > 100 {
		t.Errorf("%d wavelengths were worked out", seen)
	}
}
