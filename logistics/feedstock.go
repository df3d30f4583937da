package logistics

// Standard atomic weights [g/mol], abridged values [IUPAC2021].
const (
	weightO  = 15.999
	weightAl = 26.982
	weightFe = 55.845
)

// mineral is an ore mineral M(m)O(o) that one material is made from, or a substance
// that is used as it is (metal 0).
type mineral struct {
	name     string
	material string  // what it gives
	metal    float64 // metal atoms per formula
	oxygen   float64 // oxygen atoms per formula
	weight   float64 // of the metal [g/mol]
	gibbs    float64 // free energy of formation at 298.15 K, 1 bar, negative [J/mol]
	enthalpy float64 // of formation, the same [J/mol]
}

// Formation values [CRC2016], section 5, "Standard thermodynamic properties of chemical
// substances"; values from memory.
var minerals = [...]mineral{
	{name: "hematite", material: "iron", metal: 2, oxygen: 3, weight: weightFe, gibbs: -742.2e3, enthalpy: -824.2e3},
	{name: "magnetite", material: "iron", metal: 3, oxygen: 4, weight: weightFe, gibbs: -1015.4e3, enthalpy: -1118.4e3},
	{name: "alumina", material: "aluminium", metal: 2, oxygen: 3, weight: weightAl, gibbs: -1582.3e3, enthalpy: -1675.7e3},
	{name: "water-ice", material: "water-ice"},
	{name: "halite", material: "halite"},
	{name: "none"},
}

// Minerals returns the feedstocks known by name. "none" stands for any other: its
// grade is then kg of product per kg of ore, and there is no thermodynamic minimum.
func Minerals() []string {
	names := make([]string, len(minerals))
	for i, m := range minerals {
		names[i] = m.name
	}
	return names
}

func findMineral(name string) (mineral, error) {
	for _, m := range minerals {
		if m.name == name {
			return m, nil
		}
	}
	var c checker
	c.choice("supply.feedstock.mineral", name, Minerals()...)
	return mineral{}, c.errs[0]
}

// Stoichiometry returns the kg of product per kg of mineral,
//
//	m W_metal / (m W_metal + o W_oxygen)
//
// for an oxide with m metal and o oxygen atoms, and 1 for what is used as it is. An
// unknown mineral is an error that lists the known ones. Source: [IUPAC2021].
func Stoichiometry(mineralName string) (float64, error) {
	m, err := findMineral(mineralName)
	if err != nil {
		return 0, err
	}
	return m.yield(), nil
}

func (m mineral) yield() float64 {
	if m.metal == 0 {
		return 1
	}
	metal := m.metal * m.weight
	return metal / (metal + m.oxygen*weightO)
}

// ReductionMinimum is the least energy that parts the metal from its oxide.
type ReductionMinimum struct {
	Gibbs    float64 // least work at 298 K, heat taken from around for nothing [J/kg of metal]
	Enthalpy float64 // all energy that goes in, heat included [J/kg of metal]
}

// MinimumReduction returns the thermodynamic minimum of the reduction step,
//
//	Gibbs = -dGf / (m W_metal),   Enthalpy = -dHf / (m W_metal)
//
// at 298.15 K and 1 bar, with oxygen gas as the other product, and true; or false
// where the mineral is used as it is or unknown. Source: [CRC2016], from memory.
func MinimumReduction(mineralName string) (ReductionMinimum, bool) {
	m, err := findMineral(mineralName)
	if err != nil || m.metal == 0 {
		return ReductionMinimum{}, false
	}
	kilograms := m.metal * m.weight * 1e-3 // metal per mol of oxide
	return ReductionMinimum{Gibbs: -m.gibbs / kilograms, Enthalpy: -m.enthalpy / kilograms}, true
}
