package hazewright

import (
	"math"

	"hazewright/logistics"
	"hazewright/optics/greenhouse"
	"hazewright/settling"
)

// facts is what the stages found out about one design under one sticking case; the
// table of figures reads it. SI units.
type facts struct {
	design *Design
	area   float64 // of the planet [m2]

	sticking float64 // of this case
	warnings []Warning

	populations []*population // optics; never empty
	bands       greenhouse.Aerosol
	kappa       mixMeans

	thermalFactor float64 // on all thermal cross-sections

	burdenValue float64 // [kg/m2]
	noBurden    string  // why there is none; then nothing below applies
	noProgramme string  // why there is a burden but no programme
	state       greenhouse.State
	low         greenhouse.Curve
	lowState    greenhouse.State             // held low at the same burden
	warmingAt   func(burden float64) float64 // [K]

	fates     []fateFacts // one per population
	survival  float64     // share that survives the plume at the study's own release points
	points    float64     // release points needed for 90 %
	programme *logistics.Programme
}

// fateFacts is the fate of one population.
type fateFacts struct {
	settling.Suspension
	lifetime     float64 // the given lifetime, or that of the suspension [s]
	inPlace      float64 // share of the airborne mass inside a fixed layer; 1 without one
	usedSurvival float64 // share that survives the plume, as production is sized
}

// agglomerationRate returns the loss of airborne mass by meetings [1/s]; of a fixed layer
// only the mass inside is airborne, while meetings go on in the whole column.
func (s *fateFacts) agglomerationRate() float64 {
	if !s.Agglomerates {
		return 0
	}
	return 1 / (s.AgglomerationTime * s.inPlace)
}

// mixMeans are share-weighted means of a design per kilogram [m2/kg].
type mixMeans struct {
	thermalAbs, thermalExt, solarAbs, solarExt float64
	sumRuleCap                                 float64
	radio                                      [4]float64 // extinction at the radio bands
	noRadio                                    string     // why there is none
}

// radioFrequencies of the radio_loss figures [Hz].
var radioFrequencies = [4]float64{0.4e9, 2.3e9, 8.4e9, 32e9}

const dBPerNeper = 10 / math.Ln10 // 10 log10(e): decibels per unit optical depth

// at returns v where the design has a burden, else why it has none.
func (f *facts) at(v float64) (float64, string) {
	if f.noBurden != "" {
		return 0, f.noBurden
	}
	return v, ""
}

func (f *facts) warming() (float64, string)      { return f.at(f.state.Warming) }
func (f *facts) burden() (float64, string)       { return f.at(f.burdenValue) }
func (f *facts) inventory() (float64, string)    { return f.at(f.burdenValue * f.area) }
func (f *facts) sunlightLoss() (float64, string) { return f.at(f.state.SunlightLoss) }
func (f *facts) forcing() (float64, string)      { return f.at(f.state.Forcing) }
func (f *facts) warmingLowHeld() (float64, string) {
	return f.at(f.lowState.Warming)
}

func (f *facts) burdenLowHeld() (float64, string) {
	if !f.low.Reached {
		return 0, "held low: unreachable (" + f.low.Cause + ")"
	}
	return f.low.Burden, ""
}

func (f *facts) depthThermal() (float64, string) { return f.at(f.kappa.thermalExt * f.burdenValue) }
func (f *facts) depthSolar() (float64, string)   { return f.at(f.kappa.solarExt * f.burdenValue) }
func (f *facts) kappaThermal() (float64, string) { return f.kappa.thermalAbs, "" }
func (f *facts) kappaThermalExt() (float64, string) {
	return f.kappa.thermalExt, ""
}
func (f *facts) thermalToSolar() (float64, string) {
	return f.kappa.thermalAbs / f.kappa.solarExt, ""
}
func (f *facts) boundShare() (float64, string) { return f.kappa.thermalExt / f.kappa.sumRuleCap, "" }

// shares returns the share-weighted mean of v over the populations.
func (f *facts) shares(v func(*population, *fateFacts) float64) (float64, string) {
	if f.noBurden != "" {
		return 0, f.noBurden
	}
	var s float64
	for i, p := range f.populations {
		s += p.Share * v(p, &f.fates[i])
	}
	return s, ""
}

func (f *facts) fallSpeed() (float64, string) {
	var s float64
	for _, p := range f.populations {
		if p.noFall != nil {
			return 0, p.noFall.Error()
		}
		s += p.Share * p.groundSpeed
	}
	return s, ""
}

func (f *facts) fallTime() (float64, string) {
	inv, why := f.shares(func(_ *population, s *fateFacts) float64 { return 1 / s.FallTime })
	if why != "" {
		return 0, why
	}
	return 1 / inv, ""
}

func (f *facts) lifetime() (float64, string) {
	inv, why := f.shares(func(_ *population, s *fateFacts) float64 { return 1 / s.lifetime })
	if why != "" {
		return 0, why
	}
	return 1 / inv, ""
}

// supply is the new airborne mass per time and area that holds the burden [kg/m2/s].
func (f *facts) supply() float64 {
	inv, _ := f.shares(func(_ *population, s *fateFacts) float64 { return 1 / s.lifetime })
	return f.burdenValue * inv
}

func (f *facts) groundStore() (float64, string) {
	if why := f.noFate(); why != "" {
		return 0, why
	}
	var g float64
	for i := range f.fates {
		g += f.fates[i].GroundStore
	}
	return g, ""
}

func (f *facts) residenceTotal() (float64, string) {
	g, why := f.groundStore()
	if why != "" {
		return 0, why
	}
	return (f.burdenValue + g) / f.supply(), ""
}

// noFate returns why what depends on the computed lifetime has no value, or "".
func (f *facts) noFate() string {
	if f.noBurden == "" && f.design.Given.Lifetime > 0 {
		return "the lifetime is given: losses and ground are not computed"
	}
	return f.noBurden
}

// cycles of a mix: lifted mass over new supply, so supply-weighted.
func (f *facts) cycles() (float64, string) {
	if why := f.noFate(); why != "" {
		return 0, why
	}
	return f.supplyMean(func(s *fateFacts) float64 { return s.Cycles })
}

// supplyMean returns the mean of v over the populations, weighted by new supply.
func (f *facts) supplyMean(v func(*fateFacts) float64) (float64, string) {
	sum, why := f.shares(func(_ *population, s *fateFacts) float64 { return v(s) / s.lifetime })
	if why != "" {
		return 0, why
	}
	inv, _ := f.shares(func(_ *population, s *fateFacts) float64 { return 1 / s.lifetime })
	return sum / inv, ""
}

func (f *facts) agglomerationTime() (float64, string) {
	if why := f.noFate(); why != "" {
		return 0, why
	}
	rate, why := f.shares(func(_ *population, s *fateFacts) float64 { return s.agglomerationRate() })
	switch {
	case why != "":
		return 0, why
	case rate == 0:
		return 0, "no meeting removes anything: sticking is 0 or an aggregate keeps its whole value"
	}
	return 1 / rate, ""
}

func (f *facts) sublimationTime() (float64, string) {
	shortest := math.Inf(1)
	for _, p := range f.populations {
		if p.volatile && p.noFall != nil {
			return 0, p.noFall.Error()
		}
		if p.volatile {
			shortest = math.Min(shortest, p.sublimation)
		}
	}
	if math.IsInf(shortest, 1) {
		return 0, "the material does not sublime at these temperatures"
	}
	return shortest, ""
}

func (f *facts) numberDensity() (float64, string) {
	if f.noBurden != "" {
		return 0, f.noBurden
	}
	var n float64
	for i := range f.fates {
		n += f.fates[i].NumberDensityGround
	}
	return n, ""
}

func (f *facts) layerField() (float64, string) {
	if f.noBurden != "" {
		return 0, f.noBurden
	}
	var e float64
	for i := range f.fates {
		e += f.fates[i].LayerField
	}
	return e, ""
}

func (f *facts) releaseSurvival() (float64, string) {
	return f.programmed(func(*logistics.Programme) float64 { return f.survival })
}
func (f *facts) releasePointsNeeded() (float64, string) {
	return f.programmed(func(*logistics.Programme) float64 { return f.points })
}

// programmed returns a number of the supply programme, or why there is none.
func (f *facts) programmed(v func(*logistics.Programme) float64) (float64, string) {
	if why := f.notProgrammed(); why != "" {
		return 0, why
	}
	return v(f.programme), ""
}

// notProgrammed returns why there is no programme, or "".
func (f *facts) notProgrammed() string {
	if f.noBurden != "" {
		return f.noBurden
	}
	return f.noProgramme
}

func (f *facts) productionRate() (float64, string) {
	return f.programmed(func(p *logistics.Programme) float64 { return p.ProductionRate })
}
func (f *facts) capacity() (float64, string) {
	return f.programmed(func(p *logistics.Programme) float64 { return p.Capacity })
}
func (f *facts) oreRate() (float64, string) {
	if why := f.notProgrammed(); why != "" {
		return 0, why
	}
	return f.programme.OreRate.Value, f.programme.OreRate.Why
}
func (f *facts) energyPerKg() (float64, string) {
	return f.programmed(func(p *logistics.Programme) float64 { return p.EnergyPerKg })
}
func (f *facts) power() (float64, string) {
	return f.programmed(func(p *logistics.Programme) float64 { return p.Power })
}
func (f *facts) plantMass() (float64, string) {
	return f.programmed(func(p *logistics.Programme) float64 { return p.PlantMass })
}
func (f *facts) landedMass() (float64, string) {
	return f.programmed(func(p *logistics.Programme) float64 { return p.LandedMass })
}
func (f *facts) landedPerWindowAfter() (float64, string) {
	return f.programmed(func(p *logistics.Programme) float64 { return p.LandedPerWindowNext })
}
func (f *facts) flights() (float64, string) {
	return f.programmed(func(p *logistics.Programme) float64 { return p.Flights })
}
func (f *facts) windows() (float64, string) {
	return f.programmed(func(p *logistics.Programme) float64 { return p.Windows })
}

func (f *facts) volumeRate() (float64, string) {
	return f.programmed(func(p *logistics.Programme) float64 { return p.VolumeRate })
}
func (f *facts) numberRate() (float64, string) {
	return f.programmed(func(p *logistics.Programme) float64 { return p.NumberRate })
}

func (f *facts) timeToGoal() (float64, string) {
	if why := f.notProgrammed(); why != "" {
		return 0, why
	}
	return f.programme.TimeToGoal.Value, f.programme.TimeToGoal.Why
}

func (f *facts) halfLossTime() (float64, string) {
	if why := f.notProgrammed(); why != "" {
		return 0, why
	}
	return f.programme.HalfLossTime.Value, f.programme.HalfLossTime.Why
}

// radioLoss returns the getter of the radio loss at the i-th radio frequency.
func radioLoss(i int) func(*facts) (float64, string) {
	return func(f *facts) (float64, string) {
		if f.kappa.noRadio != "" {
			return 0, f.kappa.noRadio
		}
		return f.at(dBPerNeper * f.kappa.radio[i] * f.burdenValue)
	}
}
