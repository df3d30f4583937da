package material

import (
	"fmt"
	"math"
	"strings"
)

const (
	builtinMin = 0.2e-6 // shortest wavelength every built-in material answers for [m]
	builtinMax = 1.0    // longest [m]
)

// roughBeyond warns of the two conductors whose measurements end before they behave as metals;
// graphite rods miss the sum rule by 8 % because of it, metal rods by under 2 %.
const roughBeyond = "the part beyond the measurements is rough: the resistivity varies with make by a factor of a few"

// substance is the entry of a built-in material beside its curve.
type substance struct {
	name         string
	curve        *curve
	density      float64 // [kg/m3]
	metal        bool
	dc           float64 // direct-current resistivity [ohm m]; 0 = not a conductor
	surfaceRhoL  float64 // [ohm m2]
	defaultOxide float64 // [m]
	volatile     bool
	combustible  Answer
	note         string
}

// substances lists the built-in materials. Densities and resistivities near 293 K
// ([CRC97], values from memory; graphite and magnetite vary with make by a factor of a few).
// surfaceRhoL: [Gall2016] for aluminium, copper, nickel, tungsten (values from memory);
// iron 4e-16 within 50 %. Oxide skins: assumption, a few nm for every metal. Combustible:
// every metal and carbon as fine dust, to be on the safe side; an oxide and ice are not.
func substances() []substance {
	return []substance{
		{name: "iron", combustible: Yes, curve: &ironCurve, density: 7874, metal: true, dc: 9.61e-8, surfaceRhoL: 4e-16, defaultOxide: 3e-9,
			note: "two sources joined between 0.62 um and 0.667 um"},
		{name: "iron-querry", combustible: Yes, curve: &ironQuerryCurve, density: 7874, metal: true, dc: 9.61e-8, surfaceRhoL: 4e-16, defaultOxide: 3e-9,
			note: "a second measurement, to show the spread between sources"},
		{name: "aluminium", combustible: Yes, curve: &aluminiumCurve, density: 2700, metal: true, dc: 2.65e-8, surfaceRhoL: 5e-16, defaultOxide: 3e-9},
		{name: "copper", combustible: Yes, curve: &copperCurve, density: 8960, metal: true, dc: 1.68e-8, surfaceRhoL: 6.7e-16, defaultOxide: 3e-9},
		{name: "nickel", combustible: Yes, curve: &nickelCurve, density: 8908, metal: true, dc: 6.93e-8, surfaceRhoL: 4.1e-16, defaultOxide: 3e-9},
		{name: "titanium", combustible: Yes, curve: &titaniumCurve, density: 4506, metal: true, dc: 4.2e-7, defaultOxide: 3e-9},
		{name: "tungsten", combustible: Yes, curve: &tungstenCurve, density: 19250, metal: true, dc: 5.28e-8, surfaceRhoL: 8.2e-16, defaultOxide: 3e-9},
		{name: "graphite", combustible: Yes, curve: &graphiteCurve, density: 2260, dc: 1e-5, note: roughBeyond},
		{name: "magnetite", combustible: No, curve: &magnetiteCurve, density: 5170, dc: 5e-5, note: roughBeyond},
		{name: "water-ice", combustible: No, curve: &waterIceCurve, density: 917, volatile: true,
			note: "k is 2e-11 below 0.39 um, as the source has it"},
	}
}

// Names returns the names of the built-in materials, in the order of the catalogue.
func Names() []string {
	var names []string
	for _, s := range substances() {
		names = append(names, s.name)
	}
	return names
}

// ByName returns a built-in material. Error: an unknown name, with the known ones and the
// nearest.
func ByName(name string) (*Material, error) {
	for _, s := range substances() {
		if s.name == name {
			return s.build(), nil
		}
	}
	return nil, fmt.Errorf("unknown material %q (did you mean %q?); known: %s", name, nearest(name, Names()), strings.Join(Names(), ", "))
}

func (s substance) build() *Material {
	c := s.curve
	m := &Material{
		Name: s.name, Density: s.density,
		MinWavelength: builtinMin, MaxWavelength: builtinMax,
		DataMin: c.first * 1e-6, DataMax: c.last * 1e-6,
		Source: c.source,
		FitRMS: math.Max(c.nRMS, c.kRMS), FitWorst: math.Max(c.nWorst, c.kWorst),
		Metal: s.metal, SurfaceRhoL: s.surfaceRhoL, DefaultOxide: s.defaultOxide, Volatile: s.volatile,
		Conducts: No, Combustible: s.combustible,
		StaticPermittivity: math.Inf(1),
	}
	m.n = newLogSpline(c.nKnots, c.lnN)
	if c.kKnots != nil {
		m.k = newLogSpline(c.kKnots, c.lnK)
	} else {
		m.k = newLogSpline(c.nKnots, c.lnK)
	}
	x := math.Log(m.DataMax)
	last := complex(m.n.Predict(x), m.k.Predict(x))
	var beyond string
	if s.dc > 0 {
		m.Conducts = Yes
		m.tail = newDrudeTail(m.DataMax, last, s.dc)
		beyond = fmt.Sprintf("Drude law to the direct-current resistivity %.3g ohm m", s.dc)
	} else {
		m.tail = newIceTail(m.DataMax, last)
		m.StaticPermittivity = icePermittivity
		beyond = "permittivity 3.17 and a published microwave loss"
	}
	m.FitNote = fmt.Sprintf("fit on every other published point, held-out error of n %.2g %% rms, %.2g %% worst, of k %.2g %%, %.2g %%; beyond %.4g um: %s",
		c.nRMS*100, c.nWorst*100, c.kRMS*100, c.kWorst*100, c.last, beyond)
	if m.DataMin > builtinMin {
		m.FitNote += fmt.Sprintf("; below %.4g um: that value held", c.first)
	}
	if s.note != "" {
		m.FitNote += "; " + s.note
	}
	return m
}

// nearest returns the candidate with the fewest single-letter edits from name.
func nearest(name string, candidates []string) string {
	best, least := "", math.MaxInt
	for _, c := range candidates {
		if d := edits(name, c); d < least {
			best, least = c, d
		}
	}
	return best
}

// edits is the Levenshtein distance; names beyond 64 bytes are cut, they match nothing anyway.
func edits(a, b string) int {
	a = a[:min(len(a), 64)]
	row := make([]int, len(b)+1)
	for j := range row {
		row[j] = j
	}
	for i := range len(a) {
		diagonal := row[0]
		row[0] = i + 1
		for j := range len(b) {
			cost := diagonal
			if a[i] != b[j] {
				cost++
			}
			diagonal = row[j+1]
			row[j+1] = min(cost, row[j]+1, row[j+1]+1)
		}
	}
	return row[len(b)]
}
