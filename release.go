package hazewright

import (
	"fmt"

	"hazewright/settling"
)

// plumeGoal is the share of a release that should leave its plume single, and
// leastSurvival the least at which the study's own release points are used as given.
const (
	plumeGoal     = 0.9
	leastSurvival = 0.5
)

// release finds how much of the release survives its own plume. With S the supply that
// must survive and c S the crowding of the plumes at that rate, a release R leaves
//
//	S = R/(1 + c R),  so  R = S/(1 - c S)  and the survival is 1 - c S.
//
// Where that is under a half the study's release points do not do: more released only
// clumps more. Then production is sized for the points that let 90 % survive, and a
// warning says so. Populations are released apart, each through its share of the points.
func (f *facts) release(p *planet) error {
	r := f.design.Supply.Release
	ground, err := p.column.At(f.design.Fate.ReleaseHeight)
	if err != nil {
		return err
	}
	var needed, supply, survived float64
	short := false
	for i, pop := range f.populations {
		s := &f.fates[i]
		body := pop.body(pop.medianNode())
		kernel, err := settling.Kernel(ground, body)
		if err != nil {
			return err
		}
		charge, err := settling.ChargeFactor(ground, body, f.design.Fate.Charge)
		if err != nil {
			return err
		}
		rate := pop.Share * f.burdenValue * f.area / s.lifetime
		plume := settling.Plume{MassRate: rate, Points: max(1, float64(r.Points)*pop.Share), Mass: body.Mass,
			Kernel: kernel * charge * p.study.Model.KernelFactor, Sticking: f.sticking,
			Wind: r.Wind, Radius: r.Radius, Spreading: r.Spreading}
		first, err := settling.PlumeSurvival(plume)
		if err != nil {
			return err
		}
		own := max(0, 2-1/first) // 1 - c S
		s.usedSurvival = own
		if own < leastSurvival {
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
		f.warnings = append(f.warnings, Warning{"supply.release.points", fmt.Sprintf(
			"the %d release points let %.0f %% survive the plume; production is sized for the %.0f points that let %.0f %% survive",
			r.Points, 100*f.survival, f.points, 100*plumeGoal)})
	}
	return nil
}
