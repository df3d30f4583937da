package hazewright

import (
	"fmt"

	"hazewright/optics/greenhouse"
)

// reachedWithin is how close to the goal a given burden must come to count as there.
const reachedWithin = 0.01

// placement turns a study's profile into where the warming estimate puts the mass. A
// computed profile counts as mixed: the estimate sees only mixed, layer or low.
func placement(p Profile) greenhouse.Placement {
	if p.Kind == "layer" {
		return greenhouse.Placement{Kind: greenhouse.Layer, Bottom: p.Bottom, Top: p.Top}
	}
	return greenhouse.Placement{}
}

// warm finds the burden of the goal, the warming there, and the curves of warming
// against burden as placed and held low.
func (r *DesignResult) warm(p *planet, f *facts) error {
	factor := p.study.Model.WarmingFactor
	low := f.bands
	low.Placement = greenhouse.Placement{Kind: greenhouse.Low}
	fixed, err := f.fixedBurden(p.study.Goal)
	if err != nil {
		return err
	}
	var curve greenhouse.Curve
	target := p.study.Goal.Warming / factor
	if fixed {
		if curve, err = p.quick.Scan(f.bands, min(largestBurden, chartReach*f.burdenValue)); err != nil {
			return err
		}
	} else {
		if curve, err = p.quick.Curve(f.bands, target); err != nil {
			return err
		}
		f.burdenValue = curve.Burden
	}
	if curve.Reached {
		if f.state, err = p.quick.Warming(f.bands, f.burdenValue); err != nil {
			return err
		}
		if f.lowState, err = p.quick.Warming(low, f.burdenValue); err != nil {
			return err
		}
	}
	if p.study.Goal.Kind != "warming" {
		target = f.state.Warming
	}
	f.low.Cause = greenhouse.CauseNever // a burden that cools has no warming to match
	if target > 0 {
		if f.low, err = p.quick.Curve(low, target); err != nil {
			return err
		}
	}
	r.Curve, r.CurveLow = curvePoints(curve, factor), curvePoints(f.low, factor)
	r.MaxWarming, r.MaxBurden = factor*curve.Max.Warming, curve.Max.Burden
	if !curve.Reached {
		r.NeverWarms = curve.Cause == greenhouse.CauseNever
		cause := fmt.Sprintf("unreachable: at most %s at %s (%s)",
			FormatSI(r.MaxWarming, "K", 3), FormatSI(r.MaxBurden, "mg/m2", 3), curve.Cause)
		if r.NeverWarms {
			cause = "unreachable: no burden warms"
		}
		f.stop(cause)
		return nil
	}
	f.state.Warming *= factor
	f.lowState.Warming *= factor
	r.Reached = true
	if p.study.Goal.Kind == "warming" && f.state.Warming < (1-reachedWithin)*p.study.Goal.Warming {
		r.Reached = false
		r.Cause = fmt.Sprintf("the given burden warms by %s only", FormatSI(f.state.Warming, "K", 3))
	}
	r.Goal = curvePoint(f.state, 1)
	r.Outgoing = f.state.OutgoingSpectrum
	f.warmingAt, err = response(p.quick, f.bands, f.burdenValue, factor)
	return err
}

// largestBurden is the most that the warming estimate takes [kg/m2], and chartReach how
// far beyond a fixed burden its curve is drawn.
const (
	largestBurden = 1000.0
	chartReach    = 4.0
)

// fixedBurden sets the burden where the study fixes it, exactly: given, or a goal that is
// a burden or an optical depth. It reports whether it did.
func (f *facts) fixedBurden(g Goal) (bool, error) {
	switch {
	case f.design.Given.Burden > 0:
		f.burdenValue = f.design.Given.Burden
	case g.Kind == "burden":
		f.burdenValue = g.Burden
	case g.Kind == "optical_depth":
		per, err := f.extinctionAt(g)
		if err != nil {
			return false, err
		}
		f.burdenValue = g.OpticalDepth / per
	default:
		return false, nil
	}
	return true, nil
}

// thermalFrom is where the thermal part of the spectrum begins [m]: what scales the thermal
// optics scales an optical depth stated beyond it.
const thermalFrom = 4e-6

// extinctionAt returns the extinction per kilogram in which an optical-depth goal is
// stated [m2/kg].
func (f *facts) extinctionAt(g Goal) (float64, error) {
	switch g.At {
	case "thermal":
		return f.kappa.thermalExt, nil
	case "solar":
		return f.kappa.solarExt, nil
	}
	var sum float64
	for _, p := range f.populations {
		x, err := p.perKg(g.Wavelength)
		if err != nil {
			return 0, err
		}
		sum += p.Share * x.Ext
	}
	if g.Wavelength >= thermalFrom {
		sum *= f.thermalFactor
	}
	return sum, nil
}

func curvePoint(s greenhouse.State, factor float64) CurvePoint {
	return CurvePoint{Burden: s.Burden, Warming: factor * s.Warming, SunlightLoss: s.SunlightLoss, Valid: s.Valid}
}

func curvePoints(c greenhouse.Curve, factor float64) []CurvePoint {
	out := make([]CurvePoint, len(c.Points))
	for i, s := range c.Points {
		out[i] = curvePoint(s, factor)
	}
	return out
}
