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
// graphite rods miss the sum rule by 8 to 19 % because of it, magnetite rods by 5 %, metal rods by under 2 %.
const roughBeyond = "the part beyond the measurements is rough: the resistivity varies with make by a factor of a few"

// substance is the entry of a built-in material beside its curves.
type substance struct {
	name         string
	axes         []crystalAxis
	line         *publishedLine // in place of axes
	density      float64        // [kg/m3]
	metal        bool
	surfaceRhoL  float64 // [ohm m2]
	defaultOxide float64 // [m]
	volatile     bool
	combustible  Answer
	note         string
}

// crystalAxis is one optical axis of a substance: its curve and how that goes on.
type crystalAxis struct {
	name   string
	weight float64
	curve  *curve
	beyond beyond
}

// alike is a substance with the same index in all directions.
func alike(c *curve, b beyond) []crystalAxis { return []crystalAxis{{weight: 1, curve: c, beyond: b}} }

// publishedLine is a law taken from the literature as it is, and how far it lies from
// measured points between two wavelengths [um].
type publishedLine struct {
	source                     string
	law                        law
	first, last                float64
	nRMS, nWorst, kRMS, kWorst float64
}

// ironDrude is the free-electron fit to iron of [Ordal1985] (values from memory), against the
// measured points of [Ordal1988] of which the curve iron is made. Its direct-current
// resistivity is 8.1e-8 ohm m.
var ironDrude = publishedLine{
	source: "Drude law of Ordal et al. 1985, Appl. Opt. 24, 4493 (parameters from memory)",
	law:    drudeLine{plasma: 3.30e6, damping: 1.47e4},
	first:  0.667, last: 286,
	nRMS: 0.7619, nWorst: 0.9958, kRMS: 0.1883, kWorst: 0.4163,
}

// substances lists the built-in materials. Densities and resistivities near 293 K, static
// permittivity of halite ([CRC97], values from memory; graphite and magnetite vary with make by
// a factor of a few); of hematite: [Onari1977], values from memory.
// surfaceRhoL: [Gall2016] for aluminium, copper, nickel, tungsten (values from memory);
// iron 4e-16 within 50 %. Oxide skins: assumption, a few nm for every metal. Combustible:
// every metal and carbon as fine dust, to be on the safe side; oxides, salt and ice are not.
func substances() []substance {
	return []substance{
		{name: "iron", combustible: Yes, axes: alike(&ironCurve, conductor(9.61e-8)), density: 7874, metal: true, surfaceRhoL: 4e-16, defaultOxide: 3e-9,
			note: "two sources joined between 0.62 um and 0.667 um"},
		{name: "iron-querry", combustible: Yes, axes: alike(&ironQuerryCurve, conductor(9.61e-8)), density: 7874, metal: true, surfaceRhoL: 4e-16, defaultOxide: 3e-9,
			note: "a second measurement, to show the spread between sources"},
		{name: "iron-drude", combustible: Yes, line: &ironDrude, density: 7874, metal: true, surfaceRhoL: 4e-16, defaultOxide: 3e-9,
			note: "for comparison only: no absorption between bands, so n is a third of the measured at 10 um and next to nothing in sunlight; rods of 8 um x 80 nm absorb 11 % too little and take out 14 % too much at 210 K"},
		{name: "aluminium", combustible: Yes, axes: alike(&aluminiumCurve, conductor(2.65e-8)), density: 2700, metal: true, surfaceRhoL: 5e-16, defaultOxide: 3e-9},
		{name: "copper", combustible: Yes, axes: alike(&copperCurve, conductor(1.68e-8)), density: 8960, metal: true, surfaceRhoL: 6.7e-16, defaultOxide: 3e-9},
		{name: "nickel", combustible: Yes, axes: alike(&nickelCurve, conductor(6.93e-8)), density: 8908, metal: true, surfaceRhoL: 4.1e-16, defaultOxide: 3e-9},
		{name: "titanium", combustible: Yes, axes: alike(&titaniumCurve, conductor(4.2e-7)), density: 4506, metal: true, defaultOxide: 3e-9},
		{name: "tungsten", combustible: Yes, axes: alike(&tungstenCurve, conductor(5.28e-8)), density: 19250, metal: true, surfaceRhoL: 8.2e-16, defaultOxide: 3e-9},
		{name: "graphite", combustible: Yes, axes: alike(&graphiteCurve, conductor(1e-5)), density: 2260, note: roughBeyond},
		{name: "magnetite", combustible: No, axes: alike(&magnetiteCurve, conductor(5e-5)), density: 5170, note: roughBeyond},
		{name: "hematite", combustible: No, density: 5260,
			axes: []crystalAxis{
				{"ordinary", 2. / 3, &hematiteOrdinaryCurve, insulator(24.1)},
				{"extraordinary", 1. / 3, &hematiteExtraordinaryCurve, insulator(20.6)},
			},
			note: hematiteNote},
		{name: "halite", combustible: No, axes: alike(&haliteCurve, insulator(5.9)), density: 2165, note: haliteNote},
		{name: "water-ice", combustible: No, axes: alike(&waterIceCurve, ice()), density: 917, volatile: true,
			note: "k is 2e-11 below 0.39 um, as the source has it"},
	}
}

const (
	hematiteNote = "cross-sections are 2/3 ordinary and 1/3 extraordinary; the 11 rows of the ordinary axis from 47.6 um to 90.9 um have k of -0.07 to -0.15, which would amplify: k = 0.03 (45.5 um/lambda) is held there, the last positive value falling as the wing of a resonance; three misprinted wavelengths put right; " +
		"beyond 14 um every point was used (leaving one out: n 3 % rms, k 28 % ordinary, 5 % extraordinary)"

	haliteNote = "k prints as 0.000 below 17.9 um, that is under 0.0005: held there is the fall towards shorter wavelengths of 1/e per 56 1/cm that the lattice edge has (value from memory), from 0.001 at 17.9 um, not below 1e-9: an assumption; " +
		"k below 0.01 is rounded to 0.001; beyond 17 um every point was used, so no k was held out, and between 50 um and 71 um, at the resonance, n and k between points are uncertain by a factor of about 2"
)

// Names returns the names of the built-in materials, in the order of the catalogue.
func Names() []string {
	var names []string
	for _, s := range substances() {
		names = append(names, s.name)
	}
	return names
}

// ByName returns a built-in material. Error: an unknown name, with the known ones.
func ByName(name string) (*Material, error) {
	for _, s := range substances() {
		if s.name == name {
			return s.build(), nil
		}
	}
	return nil, fmt.Errorf("unknown material %q; known: %s", name, strings.Join(Names(), ", "))
}

func (s substance) build() *Material {
	m := &Material{
		Name: s.name, Density: s.density,
		MinWavelength: builtinMin, MaxWavelength: builtinMax,
		Metal: s.metal, SurfaceRhoL: s.surfaceRhoL, DefaultOxide: s.defaultOxide, Volatile: s.volatile,
		Conducts: No, Combustible: s.combustible,
	}
	var nRMS, nWorst, kRMS, kWorst float64
	var how string
	if l := s.line; l != nil {
		m.axes = []Axis{{Weight: 1, StaticPermittivity: math.Inf(1), law: l.law}}
		m.Source, m.DataMin, m.DataMax = l.source, l.first*1e-6, l.last*1e-6
		nRMS, nWorst, kRMS, kWorst = l.nRMS, l.nWorst, l.kRMS, l.kWorst
		how = "a published law, error against the measured index of "
	} else {
		m.Source, m.DataMin, m.DataMax = s.axes[0].curve.source, 0, math.Inf(1)
		how = "fit on every other published point, error of "
	}
	var tails []string
	for _, a := range s.axes {
		c := a.curve
		m.axes = append(m.axes, Axis{Name: a.name, Weight: a.weight, StaticPermittivity: a.beyond.staticPermittivity, law: c.points(a.beyond)})
		nRMS, nWorst = math.Max(nRMS, c.nRMS), math.Max(nWorst, c.nWorst)
		kRMS, kWorst = math.Max(kRMS, c.kRMS), math.Max(kWorst, c.kWorst)
		m.DataMin, m.DataMax = math.Max(m.DataMin, c.first*1e-6), math.Min(m.DataMax, c.last*1e-6)
		tails = append(tails, strings.TrimSpace(fmt.Sprintf("%s beyond %.4g um: %s", a.name, c.last, a.beyond.text)))
	}
	if math.IsInf(m.axes[0].StaticPermittivity, 1) {
		m.Conducts = Yes
	}
	m.FitRMS, m.FitWorst = math.Max(nRMS, kRMS), math.Max(nWorst, kWorst)
	notes := append([]string{how + fmt.Sprintf("n %.3g %% rms, %.3g %% worst, of k %.3g %%, %.3g %%", nRMS*100, nWorst*100, kRMS*100, kWorst*100)}, tails...)
	if s.line == nil && m.DataMin > builtinMin {
		m.heldBelow = true
		notes = append(notes, fmt.Sprintf("below %.4g um: that value held", m.DataMin*1e6))
	}
	if s.note != "" {
		notes = append(notes, s.note)
	}
	m.FitNote = strings.Join(notes, "; ")
	return m
}

// points makes the curve a law that goes on past its last point.
func (c *curve) points(b beyond) *points {
	p := &points{n: newLogSpline(c.nKnots, c.lnN), first: c.first * 1e-6, last: c.last * 1e-6}
	if c.kKnots != nil {
		p.k = newLogSpline(c.kKnots, c.lnK)
	} else {
		p.k = newLogSpline(c.nKnots, c.lnK)
	}
	x := math.Log(p.last)
	p.tail = b.law(p.last, complex(p.n.Predict(x), p.k.Predict(x)))
	return p
}
