package atmosphere

// Constants of nature. The first three are exact by the definition of the SI
// [SIBrochure2019].
const (
	// Boltzmann is the Boltzmann constant [J/K].
	Boltzmann = 1.380649e-23
	// Avogadro is the Avogadro constant [1/mol].
	Avogadro = 6.02214076e23
	// GasConstant is the molar gas constant [J/(mol K)].
	GasConstant = Boltzmann * Avogadro
)
