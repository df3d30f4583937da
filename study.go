package hazewright

import (
	"hazewright/logistics"
)

// Study is one loaded study file: every value is resolved (defaults, file and
// command-line settings merged), checked and in SI units.
type Study struct {
	Title      string
	World      World
	Goal       Goal
	Designs    []Design
	Benchmarks []Benchmark
	Limits     []Limit
	Model      Model
	Uncertain  []Law
	Sweeps     []Sweep
	Sources    []SourceNote

	File     string      // name of the study file as given
	SHA256   string      // of the study file's bytes
	Tables   []TableFile // optical tables that were read, in order of first use
	Warnings []Warning   // what loading wants the reader to know

	resolved *node // the merged tree, in the order of the table of inputs
}

// World is the planet of a study.
type World struct {
	Name              string     // "mars", or the given name of an inline world, or "mars (changed)"
	Base              string     // "mars"
	Radius            float64    // [m]
	Gravity           float64    // [m/s2]
	SurfacePressure   float64    // [Pa]
	Gas               []GasShare // mole fractions that sum to 1
	AirTemperature    float64    // of the isothermal column that particles fall through [K]
	Sunlight          float64    // mean normal-incidence sunlight at the planet [W/m2]
	BondAlbedo        float64
	Emissivity        float64 // of the ground, thermal
	DustOpticalDepth  float64 // natural dust, visible
	LapseLimit        float64 // [K/m]
	WarmSeasonMaximum float64 // warmest ground temperature of the present year [K]
}

// GasShare is one species of the atmosphere.
type GasShare struct {
	Species string // "CO2", "N2", "Ar", "air"
	Mole    float64
}

// Goal is what the programme is to reach. Exactly one of the kinds is set.
type Goal struct {
	Kind         string  // "warming", "burden" or "optical_depth"
	Warming      float64 // [K]
	Burden       float64 // [kg/m2]
	OpticalDepth float64 // vertical extinction optical depth
	At           string  // for optical_depth: "thermal", "solar" or a wavelength as written
	Wavelength   float64 // [m], 0 unless At is a wavelength
}

// Design is one candidate: particle populations with shares, and its own fate and
// supply (the study's, with the design's overrides merged in).
type Design struct {
	Name      string
	Particles []Particle
	Fate      Fate
	Supply    logistics.Supply
	Given     Given
	HasFate   bool // the design overrides something of fate
	HasSupply bool // the design overrides something of supply
}

// Particle is one population of a design.
type Particle struct {
	Shape             string  // "sphere", "rod" or "shell"
	Radius            float64 // spheres and shells, outer [m]
	Wall              float64 // shells [m]
	Core              string  // shells: a built-in material, "" for hollow
	Length, Diameter  float64 // rods [m]
	Material          MaterialRef
	Spread            float64 // geometric standard deviation of airborne number; 1 = one size
	Oxide             float64 // oxide skin [m]; -1: not given, the material's own default
	SurfaceScattering bool    // electron surface scattering of thin metal
	Share             float64 // of the design's airborne mass; the shares of a design sum to 1
}

// MaterialRef names a built-in material or holds a user's n,k table.
type MaterialRef struct {
	Name    string       // built-in name, or the table's file name
	Table   string       // file relative to the study; "" for a built-in
	Density float64      // of a table's material [kg/m3]; 0 for a built-in
	Extend  bool         // hold the end values outside the table
	Rows    [][3]float64 // wavelength [m], n, k of a table
}

// Fate is what happens to particles once released. SI units.
type Fate struct {
	ReleaseHeight   float64
	LiftHeight      float64
	Profile         Profile
	EddyDiffusivity []EddyPoint // one point: constant with height
	Deposition      float64     // turbulent deposition beside the fall [m/s]
	LiftTime        float64
	BurialTime      float64
	FrostBurial     float64 // [1/s]
	Sticking        float64 // [1]; meaningless unless StickingGiven
	StickingGiven   bool
	Charge          float64 // mean like-sign elementary charges per particle
	Dust            bool    // natural dust collides with the particles
	AggregateValue  float64
	Vapour          string // "dry" or "saturated"
	Sinks           []Sink
	ReturnSingle    float64
}

// Profile is the height profile of the airborne particles.
type Profile struct {
	Kind        string  // "computed", "mixed" or "layer"
	Bottom, Top float64 // of a layer [m]
}

// EddyPoint is one row of an eddy diffusivity table.
type EddyPoint struct{ Height, Value float64 } // [m], [m2/s]

// Sink is a user's loss of airborne mass.
type Sink struct {
	Name string
	Rate float64 // [1/s]
}

// Given holds values used instead of computed ones. Zero means not given.
type Given struct {
	Lifetime     float64 // [s]
	KappaThermal float64 // [m2/kg]
	Burden       float64 // [kg/m2]
}

// Benchmark is a published number to hold a figure against.
type Benchmark struct {
	Design string
	Figure string
	Value  float64 // SI
	Source string
}

// Limit is a bound the board sets on a figure. SI units.
type Limit struct {
	Figure string
	AtMost bool // otherwise at least
	Bound  float64
	Pos    string // file:line:column of the limit, or "--set #2"
}

// Model holds factors for model error; 1 means the model as it is.
type Model struct {
	WarmingFactor, KappaFactor, FallSpeedFactor, KernelFactor float64
}

// Law is the probability law of one uncertain input. SI units.
type Law struct {
	At              string
	Kind            string // uniform, loguniform, triangular, normal, lognormal
	Low, High, Mode float64
	Mean, SD        float64
	Median, Spread  float64
	Assumption      bool // from `uncertain: defaults`
}

// Sweep is one input varied over a range. SI units.
type Sweep struct {
	Name     string
	At       string
	From, To float64
	Points   int
	Log      bool
}

// SourceNote is a user's source for an input.
type SourceNote struct{ At, Text string }

// TableFile is an optical table that the study read.
type TableFile struct {
	File   string `json:"file"`
	SHA256 string `json:"sha256"`
}

// Warning is something the reader of any output must see.
type Warning struct {
	Where string `json:"where"` // input path, figure or stage
	Text  string `json:"text"`
}

// Origin says where an effective value came from.
type Origin struct {
	Kind string // "default", "file", "set"
	Pos  string // file:line:column, or "--set #2"; "" for defaults
}

// InputValue is one effective input of a study, for the report's inputs table.
type InputValue struct {
	Path   string
	Text   string // as written, or the default's text
	SI     float64
	HasSI  bool
	Unit   string // unit of SI, "" for text
	Origin Origin
	Source string // user's source, else the default's source or "assumption"
	Title  string // description from the input table
}
