package material

import (
	"errors"
	"math"
	"strings"
	"testing"

	"gonum.org/v1/gonum/floats/scalar"
)

// Published points that took no part in the fits, copied from the sources named in
// curves.go: wavelength [um], n, k.
var published = []struct {
	name             string
	wavelength, n, k float64
}{
	{"iron", 0.26, 1.117, 1.621},
	{"iron", 0.4, 1.492, 2.644},
	{"iron", 0.54, 2.156, 3.153},
	{"iron", 1, 3.18376, 4.14424},
	{"iron", 2.5, 4.05433, 8.03605},
	{"iron", 12.5, 8.34676, 34.384},
	{"iron", 100, 95.3577, 181.947},
	{"iron-querry", 0.26, 1.117, 1.621},
	{"iron-querry", 3.096, 4.023, 9.765},
	{"iron-querry", 47.619, 41.364, 134.11},
	{"aluminium", 0.36466, 0.39877, 4.3957},
	{"aluminium", 0.77491, 2.6154, 8.4914},
	{"aluminium", 1.1271, 1.3281, 10.969},
	{"aluminium", 3.444, 5.4903, 33.814},
	{"aluminium", 7.7491, 16.755, 69.857},
	{"aluminium", 24.797, 68.535, 164.81},
	{"aluminium", 137.76, 339.62, 408.92},
	{"water-ice", 0.42, 1.3177, 3.135e-11},
	{"water-ice", 1.02, 1.3012, 2.25e-06},
	{"water-ice", 1.84, 1.2811, 0.000131},
	{"water-ice", 3.077, 1.3215, 0.625},
	{"water-ice", 6.579, 1.3214, 0.0578},
	{"water-ice", 20, 1.4986, 0.067},
	{"water-ice", 160, 1.8268, 0.06684},
	{"copper", 1.43, 0.699, 9.53},
	{"copper", 8.33, 6.43, 53.2},
	{"copper", 38.5, 31.9, 219},
	{"nickel", 1, 2.82, 5.11},
	{"nickel", 4, 4.95, 15.1},
	{"nickel", 100, 116, 219},
	{"titanium", 1, 3.39579, 3.24181},
	{"titanium", 4, 2.73136, 7.01899},
	{"titanium", 100, 72.5303, 108.424},
	{"tungsten", 1, 3.08269, 3.42084},
	{"tungsten", 4, 1.99497, 17.6948},
	{"tungsten", 100, 130.219, 234.039},
	{"graphite", 0.26, 1.286, 0.929},
	{"graphite", 3.0864, 2.884, 2.384},
	{"graphite", 45.4545, 10.256, 9.141},
	{"magnetite", 0.26, 2.4, 0.102},
	{"magnetite", 3.0864, 3.016, 1.192},
	{"magnetite", 45.4545, 6.933, 3.357},
	{"halite", 0.5, 1.554, 0},
	{"halite", 10.2041, 1.498, 0},
	{"halite", 41.6667, 0.497, 0.792}, // here and beyond, and hematite beyond 14 um: used in the fit
	{"halite", 62.5, 6.293, 1.948},
}

// The same of hematite, whose ordinary axis comes first.
var publishedHematite = []struct {
	axis             int
	wavelength, n, k float64
}{
	{0, 0.26, 2.007, 1.317},
	{0, 0.56, 3.348, 0.437},
	{0, 2, 2.665, 0.031},
	{0, 10, 2.212, 0.056},
	{0, 22.7273, 4.992, 6.991},
	{0, 34.4828, 12.585, 8.306},
	{1, 0.26, 1.828, 1.148},
	{1, 2, 2.432, 0.041},
	{1, 10.1010, 2.085, 0.038},
	{1, 34.4828, 10.555, 5.441},
	{1, 50, 5.148, 0.175},
}

// Every point within the worst error stated for its material, and the rms of this small sample within three times
// the stated rms.
func TestIndex_heldOutPoints(t *testing.T) {
	worst := map[string]float64{}
	sum, count := map[string]float64{}, map[string]float64{}
	stated := map[string]*Material{}
	check := func(name string, axis int, wavelength, n, k float64) {
		m, err := ByName(name)
		if err != nil {
			t.Fatal(err)
		}
		got, err := m.IndexAlong(axis, wavelength*1e-6)
		if err != nil {
			t.Fatal(err)
		}
		stated[name] = m
		errs := []float64{real(got)/n - 1}
		if k > 0 {
			errs = append(errs, imag(got)/k-1)
		} else if imag(got) >= 5e-4 {
			t.Errorf("%s at %g um: k = %g does not print as 0.000", name, wavelength, imag(got))
		}
		for _, e := range errs {
			worst[name] = math.Max(worst[name], math.Abs(e))
			sum[name] += e * e
			count[name]++
		}
	}
	for _, p := range published {
		check(p.name, 0, p.wavelength, p.n, p.k)
	}
	for _, p := range publishedHematite {
		check("hematite", p.axis, p.wavelength, p.n, p.k)
	}
	for _, name := range Names() {
		m := stated[name]
		if name == "iron-drude" {
			continue // see TestIndex_ironDrude
		}
		if m == nil {
			t.Fatalf("%s has no published point in this test", name)
		}
		if rms := math.Sqrt(sum[name] / count[name]); worst[name] > m.FitWorst || rms > 3*m.FitRMS {
			t.Errorf("%s: worst %.3g and rms %.3g, stated %.3g and %.3g", name, worst[name], rms, m.FitWorst, m.FitRMS)
		}
		if m.FitWorst > 0.2 || m.FitRMS > 0.05 {
			t.Errorf("%s: a fit that bad (%g, %g) should not be built in", name, m.FitRMS, m.FitWorst)
		}
	}
}

// Finite, positive and smooth from 0.2 um to 1 m, over the joins too.
func TestIndex_wholeRange(t *testing.T) {
	for _, name := range Names() {
		m, err := ByName(name)
		if err != nil {
			t.Fatal(err)
		}
		var before complex128
		for axis := range m.Axes() {
			before = 0
			for l := 0.2e-6; l <= 1.0; l *= 1.01 {
				i, err := m.IndexAlong(axis, l)
				if err != nil {
					t.Fatal(err)
				}
				if !(real(i) > 0 && imag(i) > 0 && real(i) < 1e6 && imag(i) < 1e6) {
					t.Fatalf("%s at %g m: %g", name, l, i)
				}
				most := 1.35
				switch {
				case name == "hematite":
					most = 1.46 // its published n rises 2.24-fold over 2.2 % of wavelength at 22.5 um
				case name == "iron-drude" && l < 0.32e-6:
					most = 6 // the plasma edge at 0.303 um
				}
				if before != 0 && (real(i)/real(before) > most || real(before)/real(i) > most) {
					t.Errorf("%s: n jumps from %g to %g at %g m", name, real(before), real(i), l)
				}
				before = i
			}
		}
	}
}

// The visible absorption of ice spans two decades around 1e-10 to 1e-8 [WarrenBrandt2008].
func TestIndex_iceVisible(t *testing.T) {
	m, _ := ByName("water-ice")
	for _, c := range []struct{ wavelength, k float64 }{{0.3, 2.0e-11}, {0.44, 6.268e-11}, {0.5, 5.889e-10}, {0.6, 5.73e-9}} {
		got, err := m.Index(c.wavelength * 1e-6)
		if err != nil {
			t.Fatal(err)
		}
		if !scalar.EqualWithinRel(imag(got), c.k, 0.1) {
			t.Errorf("k(%g um) = %g, published %g", c.wavelength, imag(got), c.k)
		}
	}
}

// At 0.4 GHz a metal is its direct-current conductor: n = k = sqrt(sigma/(2 omega eps0)), with
// handbook resistivities at 293 K (CRC Handbook, 97th ed.; values from memory).
func TestIndex_metalsAtRadio(t *testing.T) {
	const omega, eps0 = 2 * math.Pi * 0.4e9, 8.8541878128e-12
	for name, rho := range map[string]float64{"iron": 9.61e-8, "aluminium": 2.65e-8, "copper": 1.68e-8, "nickel": 6.93e-8, "titanium": 4.2e-7, "tungsten": 5.28e-8} {
		m, err := ByName(name)
		if err != nil {
			t.Fatal(err)
		}
		i, err := m.Index(299792458 / 0.4e9)
		if err != nil {
			t.Fatal(err)
		}
		want := math.Sqrt(1 / rho / (2 * omega * eps0))
		if !scalar.EqualWithinRel(real(i), want, 0.01) || !scalar.EqualWithinRel(imag(i), want, 0.01) {
			t.Errorf("%s: %g at 0.4 GHz, want %.4g (1+i)", name, i, want)
		}
	}
}

// Ice at radio: n near 1.78 (sqrt 3.17), loss of order 1e-4 to 1e-3 in eps” (Hufford 1991; value from memory).
func TestIndex_iceAtRadio(t *testing.T) {
	m, _ := ByName("water-ice")
	i, err := m.Index(299792458 / 32e9)
	if err != nil {
		t.Fatal(err)
	}
	if loss := imag(i * i); math.Abs(real(i)-1.78) > 0.01 || loss < 1e-3 || loss > 6e-3 {
		t.Errorf("32 GHz: n = %g, eps'' = %g", real(i), loss)
	}
}

func TestIndex_outOfRange(t *testing.T) {
	m, err := ByName("iron")
	if err != nil {
		t.Fatal(err)
	}
	for _, l := range []float64{0.19e-6, 1.1, 0, -1, math.NaN(), math.Inf(1)} {
		var re *RangeError
		if _, err := m.Index(l); !errors.As(err, &re) {
			t.Errorf("Index(%g): error %v, want a RangeError", l, err)
		} else if s := err.Error(); !strings.Contains(s, "iron") || !strings.Contains(s, "0.2 um") {
			t.Errorf("error %q does not name material and range", s)
		}
	}
}

func TestByName_unknown(t *testing.T) {
	_, err := ByName("alumnium")
	if err == nil || !strings.Contains(err.Error(), `"alumnium"`) {
		t.Fatalf("error %v: want the name as given", err)
	}
	for _, name := range Names() {
		if !strings.Contains(err.Error(), name) {
			t.Errorf("error %v does not list %s", err, name)
		}
	}
}

// eps = 1 - 3.30e4^2/(nu^2 + 147 i nu), nu in 1/cm, by hand at 10 um (1000 1/cm): 1 - 1.089e9/(1e6 + 1.47e5 i) =
// 1 - 1065.97 + 156.70 i, m = 2.394 + 32.722 i. And resistivity at zero frequency, 60 ohm x 147/3.30e4^2 cm = 8.1e-8 ohm m.
func TestIndex_ironDrude(t *testing.T) {
	m, err := ByName("iron-drude")
	if err != nil {
		t.Fatal(err)
	}
	got, err := m.Index(10e-6)
	if err != nil {
		t.Fatal(err)
	}
	if math.Abs(real(got)-2.394) > 1e-3 || math.Abs(imag(got)-32.722) > 1e-3 {
		t.Errorf("m = %g at 10 um", got)
	}
	if got, err = m.Index(0.75); err != nil {
		t.Fatal(err)
	}
	if want := math.Sqrt(0.75 * 376.7303 / (2 * math.Pi * 2 * 8.10e-8)); !scalar.EqualWithinRel(real(got), want, 0.01) {
		t.Errorf("m = %g at 0.4 GHz, want n = %g", got, want)
	}
	if m.HeldShare(5772) != 0 || m.Axes()[0].StaticPermittivity != math.Inf(1) {
		t.Error("a law holds nothing and conducts")
	}
}

// Insulators tend to their static permittivity: halite 5.9 (CRC Handbook), hematite 24.1 and 20.6 (Onari 1977); values
// from memory. Weights of the axes sum to 1, the ordinary one counts twice.
func TestAxes(t *testing.T) {
	for _, c := range []struct {
		name   string
		static []float64
		weight []float64
	}{
		{"halite", []float64{5.9}, []float64{1}},
		{"hematite", []float64{24.1, 20.6}, []float64{2. / 3, 1. / 3}},
	} {
		m, err := ByName(c.name)
		if err != nil {
			t.Fatal(err)
		}
		if len(m.Axes()) != len(c.static) {
			t.Fatalf("%s: %d axes", c.name, len(m.Axes()))
		}
		for i, a := range m.Axes() {
			index, err := m.IndexAlong(i, 0.75)
			if err != nil {
				t.Fatal(err)
			}
			if eps := real(index * index); !scalar.EqualWithinRel(eps, c.static[i], 1e-3) || a.StaticPermittivity != c.static[i] || a.Weight != c.weight[i] {
				t.Errorf("%s %s: permittivity %g at 0.4 GHz, %+v", c.name, a.Name, eps, a)
			}
		}
		if _, err := m.IndexAlong(len(c.static), 1e-6); err == nil || !strings.Contains(err.Error(), "outside 0 to") {
			t.Errorf("%s: an axis too many: error %v", c.name, err)
		}
	}
	for _, name := range Names() {
		m, err := ByName(name)
		if err != nil {
			t.Fatal(err)
		}
		sum := 0.0
		for _, a := range m.Axes() {
			sum += a.Weight
		}
		if math.Abs(sum-1) > 1e-15 {
			t.Errorf("%s: weights sum to %g", name, sum)
		}
		if conducts := m.Conducts == Yes; conducts != math.IsInf(m.Axes()[0].StaticPermittivity, 1) {
			t.Errorf("%s: conducts %s, static permittivity %g", name, m.Conducts, m.Axes()[0].StaticPermittivity)
		}
		if m.Conducts == Unknown || m.Combustible == Unknown || m.Source == "" || !(m.Density > 900) || (m.DefaultOxide > 0) != m.Metal {
			t.Errorf("%+v", m)
		}
	}
}

// What is held where the tables say nothing: k of halite below 17.9 um, of ordinary hematite beyond 45.5 um.
func TestIndex_held(t *testing.T) {
	halite, err := ByName("halite")
	if err != nil {
		t.Fatal(err)
	}
	for _, c := range []struct{ wavelength, k float64 }{
		{0.3, 1e-9}, {5, 1e-9}, {10, 2.167e-7}, {13, 1.736e-5}, {16, 2.807e-4}, // 0.001 exp(-(nu - 560)/56) lambda/17.857, nu in 1/cm
	} {
		i, err := halite.Index(c.wavelength * 1e-6)
		if err != nil || !scalar.EqualWithinRel(imag(i), c.k, 0.03) {
			t.Errorf("halite at %g um: k = %g, want %g, %v", c.wavelength, imag(i), c.k, err)
		}
	}
	hematite, err := ByName("hematite")
	if err != nil {
		t.Fatal(err)
	}
	for _, wavelength := range []float64{50, 60, 75, 90.9} {
		i, err := hematite.Index(wavelength * 1e-6)
		if want := 0.03 * 45.4545 / wavelength; err != nil || !scalar.EqualWithinRel(imag(i), want, 0.12) {
			t.Errorf("hematite at %g um: k = %g, want %g, %v", wavelength, imag(i), want, err)
		}
	}
}
