package hazewright

import (
	"fmt"
	"math"
)

// estimated are the figures that come straight from the quick warming estimate.
var estimated = map[string]bool{"warming": true, "warming_low_held": true, "burden": true, "burden_low_held": true, "forcing": true, "sunlight_loss": true}

// figures fills the table of figures from the facts. A value that is not finite is a
// defect of the program and an error.
func (f *facts) figures(goal Goal) (map[string]FigureValue, error) {
	given := f.design.Given
	out := make(map[string]FigureValue, len(figureTable))
	for _, def := range figureTable {
		v, why := def.get(f)
		if why != "" {
			out[def.ID] = FigureValue{Null: true, Why: why}
			continue
		}
		if math.IsNaN(v) || math.IsInf(v, 0) {
			return nil, fmt.Errorf("figure %s comes out as %g: a defect of this program, please report it with the study", def.ID, v)
		}
		value := FigureValue{Value: v}
		switch {
		case def.ID == "lifetime" && given.Lifetime > 0, def.ID == "kappa_thermal" && given.KappaThermal > 0, def.ID == "burden" && given.Burden > 0:
			value.Note = "given, not computed"
		case def.ID == "burden" && goal.Kind != "warming":
			// exact: it is the goal, or the goal over an extinction
		case estimated[def.ID]:
			value.Note = "estimate"
		}
		out[def.ID] = value
	}
	return out, nil
}

// absentMeans says what the absence of a figure means for a design that has a burden:
// +Inf where the value is without bound, 0 where there is nothing. A figure that is not
// here is unknown when it is absent.
var absentMeans = map[string]float64{
	"burden_low_held":    math.Inf(1),
	"agglomeration_time": math.Inf(1),
	"sublimation_time":   math.Inf(1),
	"time_to_goal":       math.Inf(1),
	"half_loss_time":     math.Inf(1),
	"ore_rate":           0,
}

// holdAgainst holds the figures against the study's limits, in their order. reachable says
// whether the design has a burden: without one, nothing that is absent is known.
func holdAgainst(limits []Limit, figures map[string]FigureValue, reachable bool) []LimitResult {
	out := make([]LimitResult, len(limits))
	for i, l := range limits {
		r := &out[i]
		r.Limit = l
		v := figures[l.Figure]
		value := v.Value
		if v.Null {
			meant, ok := absentMeans[l.Figure]
			if !ok || !reachable {
				continue
			}
			value = meant
		}
		r.Known = true
		over, under := value, l.Bound
		if !l.AtMost {
			over, under = l.Bound, value
		}
		r.Met = over <= under
		if over > 0 && under > 0 && !math.IsInf(over, 0) && !math.IsInf(under, 0) {
			r.Factor = over / under
		}
	}
	return out
}
