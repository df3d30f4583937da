// Package material holds the complex refractive index m = n + ik (time dependence
// exp(-i omega t), absorption k > 0) of what particles are made of, with density and what
// else the optics asks about a material.
//
// The built-in materials are curves this project fitted to published measurements (see
// [Material.Source], the fit errors in [Material.FitRMS] and [Material.FitWorst], and
// [Material.FitNote] for what happens beyond the measurements). They are for the bulk at
// about room temperature (water-ice: 266 K); colder metal conducts somewhat better.
// Users' own tables come in through [ParseCSV] or [ParsePairs] and [NewTable].
package material

import (
	"fmt"
	"math"

	"gonum.org/v1/gonum/interp"

	"hazewright/optics/internal/planck"
)

// Material is one substance: refractive index, density and flags. Make it with [ByName] or
// [NewTable]; it is safe for use by several goroutines.
type Material struct {
	Name    string
	Density float64 // [kg/m3]

	MinWavelength, MaxWavelength float64 // range of [Material.Index] [m]
	DataMin, DataMax             float64 // range of the measured points behind it, or that a law was held against [m]

	Source string // where the index was measured

	// FitRMS and FitWorst are the relative errors on published points, the larger of those of
	// n and of k and of all points and those held out of the fit; 0 for tables.
	FitRMS, FitWorst float64
	FitNote          string // errors of n and k apart, and what is used beyond DataMin and DataMax

	Metal        bool    // conducts as a metal; its rods may have an oxide skin and scatter electrons at the surface
	SurfaceRhoL  float64 // resistivity x electron mean free path [ohm m2], 0 = none or unknown
	DefaultOxide float64 // thickness of the oxide skin when a study gives none [m], an assumption
	Volatile     bool    // sublimes under Mars-like conditions
	Conducts     Answer  // whether a fibre of it conducts electricity
	Combustible  Answer  // whether fine dust of it burns in breathable air [NFPA484]

	axes                 []Axis
	heldBelow, heldAbove bool // the end values of the data are held there, a guess
}

// Axis is one optical axis of a material and its weight [1]. The weights of a material sum to
// 1; particles with no preferred orientation of the crystal have the weighted mean of the
// cross-sections that each axis gives alone (of cross-sections, not of indices):
// exact for pieces much smaller than the wave, customary for all [BohrenHuffman1983].
type Axis struct {
	Name   string // "" where there is one for all directions
	Weight float64

	// StaticPermittivity is the relative permittivity that the index tends to at long
	// wavelengths [1], +Inf for a conductor.
	StaticPermittivity float64

	law law
}

// LightSpeed is the speed of light in vacuum [m/s], exact by definition of the metre.
const LightSpeed = 299792458.0

// Answer is yes, no or, for the materials of users' tables, unknown.
type Answer string

// The answers.
const (
	Yes     Answer = "yes"
	No      Answer = "no"
	Unknown Answer = "unknown"
)

// law gives an index at a wavelength [m].
type law interface {
	index(wavelength float64) complex128
}

// predictor gives a value at ln(wavelength/m).
type predictor interface{ Predict(x float64) float64 }

// points is the law of measured points from first to last [m], and beyond them.
type points struct {
	n, k        predictor
	first, last float64
	tail        law // nil: the end value is held
}

func (p *points) index(wavelength float64) complex128 {
	if wavelength > p.last && p.tail != nil {
		return p.tail.index(wavelength)
	}
	x := math.Log(min(max(wavelength, p.first), p.last))
	return complex(p.n.Predict(x), p.k.Predict(x))
}

// RangeError says that an index was asked for outside the range of a material.
type RangeError struct {
	Material               string
	Wavelength             float64 // wanted [m]
	MinWavelength, MaxWave float64 // had [m]
}

func (e *RangeError) Error() string {
	return fmt.Sprintf("material %s: refractive index needed at %.6g um, but known from %.6g um to %.6g um only",
		e.Material, e.Wavelength*1e6, e.MinWavelength*1e6, e.MaxWave*1e6)
}

// Axes returns the optical axes: one for most materials. The caller must not change them.
func (m *Material) Axes() []Axis { return m.axes }

// Index is [Material.IndexAlong] the first axis: of most materials the only one, of a crystal
// with two the ordinary one.
func (m *Material) Index(wavelength float64) (complex128, error) { return m.IndexAlong(0, wavelength) }

// IndexAlong returns the complex refractive index m = n + ik [1] along one of [Material.Axes] at
// a wavelength in vacuum [m]. Between DataMin and DataMax it is the fitted curve or the table
// (linear in ln lambda); beyond, the continuation that FitNote names. Error: a [*RangeError]
// outside MinWavelength..MaxWavelength, and for a wavelength that is not a number; an axis
// that the material does not have.
func (m *Material) IndexAlong(axis int, wavelength float64) (complex128, error) {
	const slack = 1e-9 // relative: band edges computed from wavenumbers carry rounding
	if !(wavelength >= m.MinWavelength*(1-slack) && wavelength <= m.MaxWavelength*(1+slack)) {
		return 0, &RangeError{m.Name, wavelength, m.MinWavelength, m.MaxWavelength}
	}
	if axis < 0 || axis >= len(m.axes) {
		return 0, fmt.Errorf("material %s: axis %d is outside 0 to %d", m.Name, axis, len(m.axes)-1)
	}
	return m.axes[axis].law.index(wavelength), nil
}

// HeldShare returns the share [1] of the blackbody emission at temperature T [K] that
// lies at wavelengths where the index is not known but held at its end values: 0 for most
// built-in materials at thermal temperatures; for tables made with extend, everything outside
// the rows.
func (m *Material) HeldShare(temperature float64) float64 {
	if !(temperature > 0) {
		return 0
	}
	share := 0.0
	if m.heldBelow {
		share += planck.Fraction(m.DataMin, temperature)
	}
	if m.heldAbove {
		share += 1 - planck.Fraction(m.DataMax, temperature)
	}
	return share
}

// logSpline is a natural cubic spline in ln(wavelength) of the logarithm of a value.
type logSpline struct {
	spline interp.NaturalCubic
	below  float64 // ln(m): constant below
}

func (s *logSpline) Predict(x float64) float64 { return math.Exp(s.spline.Predict(max(x, s.below))) }

func newLogSpline(knotsUM, values []float64) *logSpline {
	x := make([]float64, len(knotsUM))
	for i, k := range knotsUM {
		x[i] = math.Log(k * 1e-6)
	}
	s := &logSpline{below: x[0]}
	// The knots are constants of this package, sorted and equal in number; a test builds every material.
	if err := s.spline.Fit(x, values); err != nil {
		panic("material: built-in curve: " + err.Error())
	}
	return s
}
