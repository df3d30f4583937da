package hazewright

import (
	"hazewright/logistics"
)

// Result is an assessed study.
type Result struct {
	Study    *Study
	Designs  []DesignResult
	Warnings []Warning // that concern the whole study
	Methods  []Method  // how it was computed, with validity and what is left out
	Baseline Baseline
}

// Baseline is the unaided planet.
type Baseline struct {
	SurfaceTemperature float64   // [K]
	EffectiveTemp      float64   // [K]
	ScaleHeight        float64   // [m]
	Area               float64   // [m2]
	ThermalEdges       []float64 // wavelength [m], ascending
	Outgoing           []float64 // outgoing thermal flux per band [W/m2]
	SunAtGround        float64   // [W/m2]
}

// Method is one paragraph of the methods section.
type Method struct {
	Stage    string   // "optics", "warming", ...
	Text     string   // what is done
	Validity string   // where it holds and how well
	LeftOut  []string // what is left out, each with the way it pushes
	Source   string   // keys of REFERENCES.md
	Estimate bool     // true if the stage is an estimate, to be marked wherever it shows
}

// DesignResult is everything the program found out about one design.
type DesignResult struct {
	Design      *Design
	Name        string
	Reached     bool
	Cause       string // why not, if not reached
	Populations []PopulationResult
	Figures     map[string]FigureValue // by id; every id of the figures table is present
	Limits      []LimitResult
	Losses      []Loss
	Warnings    []Warning

	NeverWarms bool    // no burden warms at all
	LayerShare float64 // with a fixed layer, the share of the falling column's airborne mass inside it; 0 without one

	StickingCase string       // "" if sticking was given, else "every touch sticks (100 %)"
	Cases        []CaseResult // the sticking cases, worst first; empty if sticking was given

	Curve      []CurvePoint         // warming against burden, placed as the study says
	CurveLow   []CurvePoint         // the same held low
	MaxWarming float64              // [K] top of Curve
	MaxBurden  float64              // [kg/m2] there
	Goal       CurvePoint           // at the design's burden
	Spectrum   []SpectrumPoint      // extinction and absorption per kg of the mix against wavelength
	Outgoing   []float64            // outgoing thermal flux per band at the goal [W/m2]
	Profile    []ProfilePoint       // of the airborne mass
	FallSpeed  []HeightValue        // mass-weighted fall speed against height [m, m/s]
	Programme  *logistics.Programme // nil if there is no burden, or one that does not warm
}

// CaseResult is one sticking case of a design whose study gives no sticking.
type CaseResult struct {
	Name     string // "every touch sticks (100 %)"
	Sticking float64
	Figures  map[string]FigureValue
	Limits   []LimitResult

	Warnings  []Warning            // of fate and supply in this case
	Losses    []Loss               // nil if the goal is not reached
	Programme *logistics.Programme // nil if there is none
}

// PopulationResult is one population's part.
type PopulationResult struct {
	Name                                                        string // "rod 8 um x 80 nm, iron"
	Share                                                       float64
	Material                                                    string
	Metal                                                       bool    // conducts as a metal
	Conducts                                                    string  // whether a fibre of it conducts: "yes", "no" or "unknown"
	Combustible                                                 string  // whether its fine dust burns in breathable air: the same
	Oxide                                                       float64 // oxide skin, the material's own where the study gives none [m]
	Density                                                     float64 // [kg/m3]
	ParticleMass                                                float64 // mean [kg]
	ProjectedArea                                               float64 // mean over directions, per mass [m2/kg]
	KappaThermal, KappaThermalExt, KappaSolarExt, KappaSolarAbs float64 // [m2/kg]
	OpticsMethod                                                string
	OpticsError                                                 float64 // relative, at the thermal peak
	FallSpeed                                                   float64 // at the ground [m/s]
	Lifetime                                                    float64 // [s]
	Given                                                       bool    // lifetime was given
	Spectrum                                                    []SpectrumPoint
}

// FigureValue is a figure's value in SI, or why there is none.
type FigureValue struct {
	Value float64
	Null  bool
	Why   string // if Null
	Note  string // "given, not computed", "estimate", ...
}

// LimitResult is one limit held against a design.
type LimitResult struct {
	Limit
	Met   bool
	Known bool // false if the figure has no value
	// Factor is how far: value/bound for at-most, bound/value for at-least; above 1
	// fails. 0 where either is not above zero or is without bound, so that no ratio can be told.
	Factor float64
}

// Loss is one way in which airborne mass leaves for good.
type Loss struct {
	Name          string  `json:"name"`
	Share         float64 `json:"share"`          // of all removal
	LifetimeAlone float64 `json:"lifetime_alone"` // lifetime if only this acted [s]; 0 if it removes nothing
}

// CurvePoint is one point of a warming curve.
type CurvePoint struct {
	Burden       float64 // [kg/m2]
	Warming      float64 // [K]
	SunlightLoss float64 // [1]
	Valid        bool    // inside the estimate's validity
}

// SpectrumPoint is one wavelength of a design's or population's optics, per kg.
type SpectrumPoint struct {
	Wavelength float64 // [m]
	Ext, Abs   float64 // [m2/kg]
	Sca, G     float64 // [m2/kg], [1]
	Method     string
	Err        float64 // relative
}

// ProfilePoint is the airborne mass at one height.
type ProfilePoint struct {
	Height float64 // [m]
	Mass   float64 // share of the column mass per metre [1/m]
}

// HeightValue is a value at a height.
type HeightValue struct{ Height, Value float64 }
