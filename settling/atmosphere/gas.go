package atmosphere

import (
	"errors"
	"fmt"
	"math"
	"strings"
)

// The ranges within which a state of gas is given. Outside them an error is
// returned.
const (
	// MinTemperature and MaxTemperature bound the temperature [K]. Sutherland's
	// law is good to about 2 % only in the narrower range of [Gas.FittedRange];
	// towards 80 K it may be off by 10 %.
	MinTemperature = 80.0
	MaxTemperature = 2000.0
	// MinPressure bounds the pressure [Pa] from below: under it the mean free
	// path exceeds every height in question.
	MinPressure = 1e-9
	// MaxPressure bounds the pressure [Pa] from above: beyond it cold carbon
	// dioxide is no longer an ideal gas to a few per cent.
	MaxPressure = 1e6
)

// species holds the constants of Sutherland's law for one gas.
type species struct {
	name      string
	molarMass float64 // [kg/mol]
	mu0       float64 // viscosity at t0 [Pa s]
	s         float64 // Sutherland temperature [K]
	low, high float64 // range in which the fit is good to about 2 % [K]
}

// t0 is the reference temperature of every species below [K].
const t0 = 273.15

// known lists the gases in the order they are named to the user. Molar masses are
// the standard atomic weights' [IUPAC2021], dry air's that of [USSA1976]. The
// Sutherland constants and ranges are those of [White2006], table 1-2, except
// that air carries the 110.4 K of [USSA1976].
func known() []species {
	return []species{
		{"co2", 44.0095e-3, 1.370e-5, 222.0, 190, 1700},
		{"n2", 28.0134e-3, 1.663e-5, 107.0, 100, 1500},
		{"ar", 39.948e-3, 2.125e-5, 144.0, 120, 1500},
		{"air", 28.9644e-3, 1.716e-5, 110.4, 170, 1900},
	}
}

// Species returns the names of the gases that [NewGas] knows.
func Species() []string {
	var names []string
	for _, s := range known() {
		names = append(names, s.name)
	}
	return names
}

// Fraction is one part of a gas mixture.
type Fraction struct {
	Species string  // one of [Species], upper or lower case
	Mole    float64 // mole fraction [1], above 0 and at most 1
}

// Gas is an ideal gas or a mixture of ideal gases. The zero value is not usable;
// make one with [NewGas].
type Gas struct {
	parts     []species
	mole      []float64
	molarMass float64
	low, high float64
}

// NewGas returns the gas made of the given mole fractions. They must be positive
// and sum to 1 within 1e-6; what is missing is made up by scaling. An unknown or
// repeated species is an error; all mistakes are reported together.
func NewGas(mix []Fraction) (Gas, error) {
	if len(mix) == 0 {
		return Gas{}, errors.New("gas: no species given; name at least one of " + strings.Join(Species(), ", "))
	}
	var errs []error
	var g Gas
	sum := 0.0
	for i, f := range mix {
		name := strings.ToLower(f.Species)
		s, ok := find(name)
		if !ok {
			errs = append(errs, fmt.Errorf("gas: unknown species %q; use %s", f.Species, strings.Join(Species(), ", ")))
			continue
		}
		for _, earlier := range mix[:i] {
			if strings.ToLower(earlier.Species) == name {
				errs = append(errs, fmt.Errorf("gas: species %q is given twice; add the two fractions", name))
			}
		}
		if !(f.Mole > 0 && f.Mole <= 1+1e-6) {
			errs = append(errs, fmt.Errorf("gas: mole fraction of %s: %g is outside 0 to 1", name, f.Mole))
			continue
		}
		sum += f.Mole
		g.parts = append(g.parts, s)
		g.mole = append(g.mole, f.Mole)
	}
	if len(errs) == 0 && math.Abs(sum-1) > 1e-6 {
		errs = append(errs, fmt.Errorf("gas: mole fractions sum to %g; they must sum to 1", sum))
	}
	if err := errors.Join(errs...); err != nil {
		return Gas{}, err
	}
	g.low, g.high = MinTemperature, MaxTemperature
	for i := range g.parts {
		g.mole[i] /= sum
		g.molarMass += g.mole[i] * g.parts[i].molarMass
		if g.mole[i] > 0.01 {
			g.low = max(g.low, g.parts[i].low)
			g.high = min(g.high, g.parts[i].high)
		}
	}
	return g, nil
}

func find(name string) (species, bool) {
	for _, s := range known() {
		if s.name == name {
			return s, true
		}
	}
	return species{}, false
}

// MolarMass returns the mean molar mass [kg/mol].
func (g Gas) MolarMass() float64 { return g.molarMass }

// FittedRange returns the temperatures [K] between which the viscosity is good to
// about 2 %: where the fits of all parts above 1 % of the mixture overlap
// [White2006].
func (g Gas) FittedRange() (low, high float64) { return g.low, g.high }

// Viscosity returns the dynamic viscosity [Pa s] at temperature t [K], Sutherland's
// law for each part and Wilke's rule for the mixture:
//
//	mu_i = mu0 (T/T0)^1.5 (T0+S)/(T+S)
//	mu   = sum_i x_i mu_i / sum_j x_j phi_ij
//	phi_ij = [1 + (mu_i/mu_j)^(1/2) (M_j/M_i)^(1/4)]^2 / [8 (1 + M_i/M_j)]^(1/2)
//
// It does not depend on pressure (low-density limit). Good to about 2 % within
// [Gas.FittedRange], mixtures included; an error outside [MinTemperature] to
// [MaxTemperature]. Sources: [White2006], eq. 1-36 and table 1-2; [Wilke1950].
func (g Gas) Viscosity(t float64) (float64, error) {
	if len(g.parts) == 0 {
		return 0, errors.New("gas: no species; make the gas with NewGas")
	}
	if !(t >= MinTemperature && t <= MaxTemperature) {
		return 0, fmt.Errorf("gas: temperature %g K is outside %g K to %g K", t, MinTemperature, MaxTemperature)
	}
	return g.viscosity(t), nil
}

// viscosity is [Gas.Viscosity] at a temperature known to be in range.
func (g Gas) viscosity(t float64) float64 {
	mu := 0.0
	for i, a := range g.parts {
		mi := a.viscosity(t)
		weight := 0.0
		for j, b := range g.parts {
			if i == j {
				weight += g.mole[j]
				continue
			}
			f := 1 + math.Sqrt(mi/b.viscosity(t))*math.Pow(b.molarMass/a.molarMass, 0.25)
			weight += g.mole[j] * f * f / math.Sqrt(8*(1+a.molarMass/b.molarMass))
		}
		mu += g.mole[i] * mi / weight
	}
	return mu
}

func (s species) viscosity(t float64) float64 {
	x := t / t0
	return s.mu0 * x * math.Sqrt(x) * (t0 + s.s) / (t + s.s)
}

// State is the gas at one height. Make it with [Gas.State] or [Column.At], which
// fill every field and keep it within the valid ranges.
type State struct {
	Height         float64 // above the ground [m]; 0 from [Gas.State]
	Pressure       float64 // [Pa]
	Temperature    float64 // [K]
	Density        float64 // [kg/m3]
	NumberDensity  float64 // molecules [1/m3]
	Viscosity      float64 // dynamic [Pa s]
	MeanFreePath   float64 // by the viscosity definition [m]
	MolecularSpeed float64 // mean thermal speed of the molecules [m/s]
}

// State returns the gas at pressure p [Pa] and temperature t [K]:
//
//	density         rho = p M/(R T)
//	number density  N   = p/(k T)
//	mean speed      c   = (8 k T/(pi m))^(1/2)
//	mean free path  lambda = (mu/p) (pi k T/(2 m))^(1/2) = 2 mu/(rho c)
//
// with m = M/NA. This mean free path is the one the usual slip constants belong
// to; for air it is 4 % below the hard-sphere value printed in [USSA1976]. Errors
// outside [MinTemperature] to [MaxTemperature] and [MinPressure] to [MaxPressure].
// Source: [SeinfeldPandis2006], eq. 9.6.
func (g Gas) State(p, t float64) (State, error) {
	if _, err := g.Viscosity(t); err != nil {
		return State{}, err
	}
	if !(p >= MinPressure && p <= MaxPressure) {
		return State{}, fmt.Errorf("gas: pressure %g Pa is outside %g Pa to %g Pa", p, MinPressure, MaxPressure)
	}
	return g.state(p, t), nil
}

// state is [Gas.State] for values known to be in range.
func (g Gas) state(p, t float64) State {
	s := State{
		Pressure:       p,
		Temperature:    t,
		Density:        p * g.molarMass / (GasConstant * t),
		NumberDensity:  p / (Boltzmann * t),
		Viscosity:      g.viscosity(t),
		MolecularSpeed: math.Sqrt(8 * GasConstant * t / (math.Pi * g.molarMass)),
	}
	s.MeanFreePath = 2 * s.Viscosity / (s.Density * s.MolecularSpeed)
	return s
}
