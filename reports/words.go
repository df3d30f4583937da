package reports

// Word is a term of this program and what it means here.
type Word struct{ Word, Meaning string }

// Words returns the terms that outputs use, in the order in which they build on each
// other. The figures explain themselves in the table of figures.
func Words() []Word { return append([]Word(nil), words...) }

var words = []Word{
	{"Study", "one file: world, goal, designs, fate of particles, supply, limits"},
	{"Design", "one candidate: particle populations with shares, and its own overrides of fate and supply"},
	{"Share", "share of the design's airborne mass at steady state, not of its production"},
	{"Burden", "airborne mass over each square metre of the planet, [kg/m2]; inventory is burden times the planet's area"},
	{"Lifetime", "airborne inventory over new supply at steady state; time on the ground is not counted"},
	{"Fall time", "residence from release to first touching the ground"},
	{"Loose layer, ground store", "particles on the ground that wind can lift again"},
	{"Held low", "the particles stay in the lowest 2 km instead of mixing upward; what trapped air would do to the warming"},
	{"Sticking", "share of touches between particles after which they stay together; a stuck pair counts as lost unless the study says otherwise"},
	{"Absorption, extinction per mass", "cross-section per kilogram, at random orientation; extinction is absorption and scattering together"},
	{"Planck mean", "mean over wavelength, weighted by the emission of a black body at the baseline surface temperature"},
	{"Forcing", "change of the energy balance at fixed surface temperature"},
	{"Goal", "the warming, burden or optical depth that the study asks for"},
	{"Limit", "a bound that the board sets on a figure"},
	{"Caution, gate", "a safety or planetary-protection condition with a rule that trips it; a rule that does not trip clears nothing"},
	{"Benchmark", "a published number held against a figure"},
	{"Estimate", "a value that rests on a method which is itself an estimate; its validity stands under Methods"},
	{"t, yr", "1000 kg; 365.25 d of 86 400 s"},
}
