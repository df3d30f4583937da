package hazewright

import (
	"fmt"

	"hazewright/settling"
)

// plumeGoal is the share of a release that should leave its plume single.
const plumeGoal = 0.9

// release finds how much of the release survives its own plume. With S the supply that
// must survive and c S the crowding of the plumes at that rate, a release R leaves
//
//	S = R/(1 + c R),  so  R = S/(1 - c S)  and the survival is 1 - c S,
//
// and nothing does where c S is 1 or more. Where fewer than 90 % would survive at the
// study's own release points, production is sized for as many points as let 90 % survive,
// and a warning says so. Populations are released apart, each through its share of the
// points. A clump keeps the aggregate value of its particles.
func (f *facts) release(p *planet) error {
	r := f.design.Supply.Release
	air, err := p.column.At(f.design.Fate.ReleaseHeight)
	if err != nil {
		return err
	}
	var needed, supply, survived float64
	short := false
	for i, pop := range f.populations {
		s := &f.fates[i]
		body := pop.typical()
		kernel, err := settling.Kernel(air, body)
		if err != nil {
			return err
		}
		charge, err := settling.ChargeFactor(air, body, f.design.Fate.Charge)
		if err != nil {
			return err
		}
		rate := pop.Share * f.burdenValue * f.area / s.lifetime
		plume := settling.Plume{MassRate: rate, Points: max(1, float64(r.Points)*pop.Share), Mass: body.Mass,
			Kernel: kernel * charge * p.study.Model.KernelFactor, Sticking: f.sticking * (1 - f.design.Fate.AggregateValue),
			Wind: r.Wind, Radius: r.Radius, Spreading: r.Spreading}
		first, err := settling.PlumeSurvival(plume)
		if err != nil {
			return err
		}
		own := max(0, 2-1/first) // 1 - c S
		s.usedSurvival = own
		if own < plumeGoal {
			s.usedSurvival, short = plumeGoal, true
		}
		plume.MassRate = rate / plumeGoal
		points, err := settling.PlumePoints(plume, plumeGoal)
		if err != nil {
			return err
		}
		needed += points
		supply += rate
		survived += rate * own
	}
	f.points = needed
	f.survival = survived / supply
	if short {
		what := fmt.Sprintf("the plumes of %d release points let %.0f %% of the supply through", r.Points, 100*f.survival)
		if f.survival == 0 {
			what = fmt.Sprintf("no release rate gets the supply through the plumes of %d release points", r.Points)
		}
		f.warnings = append(f.warnings, Warning{"supply.release.points", fmt.Sprintf(
			"%s; production is sized for the %.0f points that let %.0f %% through", what, f.points, 100*plumeGoal)})
	}
	return nil
}
