package hazewright

import (
	"errors"
	"fmt"
	"math"

	"hazewright/settling"
)

// leastInPlace is the least share of the airborne mass that must be inside a fixed layer
// for the layer to mean anything.
const leastInPlace = 1e-4

// fall follows the populations through the air and over the ground. What the stage is
// not valid for, or what cannot stay aloft, becomes the cause why the design has no burden.
func (f *facts) fall(p *planet) {
	if f.noBurden != "" {
		return
	}
	f.fates = make([]fateFacts, len(f.populations))
	var field float64
	for i, pop := range f.populations {
		s, err := f.suspend(p, pop)
		if err != nil {
			f.stop(fmt.Sprintf("%s: %v", pop.name, err))
			return
		}
		if pop.sublimes(f.design.Fate) && pop.sublimation < s.FallTime {
			f.stop(fmt.Sprintf("sublimes: in dry air a particle lasts %s, its fall %s",
				FormatSI(pop.sublimation, shortTime(pop.sublimation), 3), FormatSI(s.FallTime, shortTime(s.FallTime), 3)))
			return
		}
		field += s.LayerField
		f.fates[i] = s
	}
	if field > settling.RefuseField {
		f.stop(fmt.Sprintf("%v: %s, at most %s", settling.ErrLayerField, FormatSI(field, "kV/m", 3), FormatSI(settling.RefuseField, "kV/m", 3)))
	}
}

// suspend holds one population's share of the burden aloft. With a fixed layer the share
// must be inside the layer: the whole column is then held at the burden over the part of
// it that is inside, and only time inside counts as time aloft.
func (f *facts) suspend(p *planet, pop *population) (fateFacts, error) {
	if pop.noFall != nil {
		return fateFacts{}, pop.noFall
	}
	fate, err := f.settlingFate(p.study.Model, pop)
	if err != nil {
		return fateFacts{}, err
	}
	model, err := settling.NewModel(p.column, pop.settlingPopulation(), fate)
	if err != nil {
		return fateFacts{}, err
	}
	wanted := pop.Share * f.burdenValue
	s, err := model.Suspend(wanted)
	if err != nil {
		return fateFacts{}, err
	}
	out := fateFacts{Suspension: s, inPlace: 1}
	if layer := f.design.Fate.Profile; layer.Kind == "layer" {
		// The share inside depends on the whole through agglomeration alone, and weakly.
		const steps, tolerance = 40, 1e-9
		for range steps {
			out.inPlace = massBetween(out.Profile, layer.Bottom, layer.Top)
			if out.inPlace < leastInPlace {
				return fateFacts{}, fmt.Errorf("%.2g of the airborne mass stays in the layer of the profile: release it there or above, or change the layer", out.inPlace)
			}
			last := out.Burden
			if out.Suspension, err = model.Suspend(wanted / out.inPlace); err != nil {
				return fateFacts{}, err
			}
			if math.Abs(out.Burden/last-1) < tolerance {
				break
			}
		}
	}
	out.lifetime = out.inPlace * out.Lifetime
	if g := f.design.Given.Lifetime; g > 0 {
		out.lifetime = g
	}
	return out, nil
}

// massBetween returns the share of a profile's mass between two heights [m].
func massBetween(p settling.Profile, bottom, top float64) float64 {
	var in, all float64
	for i, density := range p.Density {
		low, high := p.Faces[i], p.Faces[i+1]
		all += density * (high - low)
		in += density * max(0, min(high, top)-max(low, bottom))
	}
	return in / all
}

// stop gives up on a burden, with the cause.
func (f *facts) stop(cause string) { f.noBurden = cause }

// sublimes reports whether the population loses ice to dry air.
func (p *population) sublimes(f Fate) bool { return p.volatile && f.Vapour == "dry" }

// shortTime returns a unit in which a time reads well.
func shortTime(t float64) string {
	switch {
	case t < 600:
		return "s"
	case t < 2*day:
		return "h"
	case t < 2*year:
		return "d"
	}
	return "yr"
}

const (
	day  = 86400.0
	year = 365.25 * day
)

// settlingFate turns the study's fate into what the column needs. Ice in dry air has one
// more sink, at the rate of its sublimation time.
func (f *facts) settlingFate(m Model, pop *population) (settling.Fate, error) {
	s := f.design.Fate
	points := make([]settling.EddyPoint, len(s.EddyDiffusivity))
	for i, q := range s.EddyDiffusivity {
		points[i] = settling.EddyPoint{Height: q.Height, Value: q.Value}
	}
	eddy, err := settling.EddyTable(points)
	if err != nil {
		return settling.Fate{}, err
	}
	out := settling.Fate{
		ReleaseHeight: s.ReleaseHeight, LiftHeight: s.LiftHeight, Eddy: eddy, Deposition: s.Deposition,
		LiftTime: s.LiftTime, BurialTime: s.BurialTime,
		Sticking: f.sticking, AggregateValue: s.AggregateValue, Charge: s.Charge, ReturnSingle: s.ReturnSingle,
		FallSpeedFactor: m.FallSpeedFactor, KernelFactor: m.KernelFactor,
	}
	out.Sinks = append(out.Sinks, settling.Sink{Name: "frost burial", Rate: s.FrostBurial})
	if pop.sublimes(s) {
		if !(pop.sublimation > 0) {
			return settling.Fate{}, errors.New("the sublimation time is not known")
		}
		out.Sinks = append(out.Sinks, settling.Sink{Name: "sublimation", Rate: 1 / pop.sublimation})
	}
	for _, k := range s.Sinks {
		out.Sinks = append(out.Sinks, settling.Sink{Name: k.Name, Rate: k.Rate})
	}
	return out, nil
}
