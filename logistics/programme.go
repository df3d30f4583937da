package logistics

import (
	"errors"
	"fmt"
	"math"
)

// Programme is what a demand takes by the chosen route, and by both side by side.
// All values SI.
type Programme struct {
	Route string

	// The supply, at the factory gate and the same by either route.
	ProductionRate float64  // sustaining [kg/s]
	Capacity       float64  // production rate x (1 + overbuild) [kg/s]
	VolumeRate     float64  // of sustaining production, solid volume [m3/s]
	NumberRate     float64  // particles made [1/s]
	Streams        []Steady // per stream of the demand, in its order
	GroundStore    float64  // loose on the ground at the goal [kg/m2]

	// The chain by the chosen route.
	Way
	Energy           Energy   // by step [J per kg of product]; by the shipped route only the release
	MinimumReduction Quantity // free energy that the reduction takes at least [J/kg]
	MinimumHeat      Quantity // enthalpy, the least with all heat counted [J/kg]
	ReductionRatio   Quantity // reduction step / MinimumReduction
	Flows            []Flow   // mass flows of the sustaining steady state

	// The schedule by the chosen route.
	BuildUp      Series
	Ending       Series   // from the steady state at the goal, from the end of supply
	HalfLossTime Quantity // end of supply to half the warming at the goal [s]
	Balance      Balance  // of the build-up

	// Both routes, and when shipping has landed more [s of sustaining supply].
	Local, Shipped Way
	Crossover      Quantity

	Warnings []Warning
}

// Run returns the programme that holds the demand d by the supply s. The function
// warming returns the equilibrium warming [K] at a burden [kg/m2]; it is called for
// burdens from zero to a little over the goal and must be finite.
//
//	production = sum over populations of airborne supply / survival / (1 - release loss)
//
// with supply = inventory / lifetime per stream (see [Stream.Steady]). Capacity grows as
// the windows land the plant; each population is supplied at its capacity until its
// airborne mass is at the goal and then held there. Time to goal: the warming is within
// 1 % of the goal for the first time. Times are good to about 1e-4; masses close to 1e-9.
//
// Every input that cannot be used is reported in one joined error of [*FieldError]. A
// figure that does not exist is a [Quantity] with its reason.
func Run(d Demand, s Supply, warming func(burden float64) float64) (Programme, error) {
	var missingFunction error
	if warming == nil {
		missingFunction = errors.New("schedule: no warming function")
	}
	if err := errors.Join(d.Validate(), s.Validate(), missingFunction); err != nil {
		return Programme{}, err
	}
	m, err := findMineral(s.Feedstock.Mineral)
	if err != nil {
		return Programme{}, err
	}

	out := Programme{Route: s.Route, Streams: make([]Steady, len(d.Streams))}
	for i, st := range d.Streams {
		at := st.Steady()
		made := at.Supply / d.ReleaseSurvival[st.Population] / (1 - s.ReleaseLoss)
		out.Streams[i] = at
		out.ProductionRate += made
		out.VolumeRate += made / st.Density
		out.NumberRate += made / st.ParticleMass
		out.GroundStore += at.Ground / d.PlanetArea
	}
	out.Capacity = out.ProductionRate * (1 + s.Overbuild)
	filled := 0.0
	for _, st := range d.Streams {
		filled += st.Inventory / d.ReleaseSurvival[st.Population] / (1 - s.ReleaseLoss)
	}
	out.Local = localWay(s, m, out.ProductionRate, out.Capacity)
	out.Shipped = shippedWay(s, filled, out.ProductionRate, out.Capacity)
	out.Crossover = crossover(out.Local, out.Shipped, out.ProductionRate, s.Delivery.WindowSpacing)

	populations := newPopulations(d, s.ReleaseLoss)
	if err := out.schedule(populations, d, s, &thermometer{warming: warming, area: d.PlanetArea}); err != nil {
		return Programme{}, err
	}

	out.Energy = s.Energy
	out.Way = out.Local
	if s.Route == Shipped {
		out.Energy = Energy{Release: s.Energy.Release}
		out.Way = out.Shipped
	}
	out.setMinimum(s, m)
	out.Flows = steadyFlows(s, m, populations, out.ProductionRate)
	out.Warnings = chainWarnings(d, s, m, out.Way, out.ProductionRate)
	return out, out.sound()
}

// schedule runs both routes and keeps the history of the chosen one.
func (out *Programme) schedule(populations []population, d Demand, s Supply, meter *thermometer) error {
	g := goal{warming: d.GoalWarming, held: meter.at(d.Burden * d.PlanetArea)}

	end, chart, half, err := ending(populations, meter, g)
	if err != nil {
		return err
	}
	out.HalfLossTime = half
	out.Ending = end.series(chart, endingPoints)

	stopAt := s.StopAt
	if stopAt == 0 {
		stopAt = math.Inf(1)
	}
	for _, route := range []struct {
		name   string
		way    *Way
		stages []stage
	}{
		{Local, &out.Local, localStages(s, out.Local)},
		{Shipped, &out.Shipped, shippedStages(s, out.Shipped, out.Capacity)},
	} {
		p := history{stages: route.stages, overbuilt: 1 + s.Overbuild, stopAt: stopAt}
		c, reached, err := buildUp(populations, meter, p, g, chart)
		if err != nil {
			return fmt.Errorf("route %s: %w", route.name, err)
		}
		route.way.TimeToGoal = reached
		if route.name == s.Route {
			out.BuildUp = c.series(c.time(), buildUpPoints)
			out.Balance = c.balance()
		}
	}
	return meter.err
}

func (out *Programme) setMinimum(s Supply, m mineral) {
	least, ok := MinimumReduction(m.name)
	switch {
	case s.Route == Shipped:
		why := missing("made at home: no reduction on the planet")
		out.MinimumReduction, out.MinimumHeat, out.ReductionRatio = why, why, why
	case !ok:
		why := missing("no reduction minimum is known for feedstock %s", m.name)
		out.MinimumReduction, out.MinimumHeat, out.ReductionRatio = why, why, why
	default:
		out.MinimumReduction, out.MinimumHeat = known(least.Gibbs), known(least.Enthalpy)
		out.ReductionRatio = known(s.Energy.Reduction / least.Gibbs)
	}
}

// sound returns an error if a result is not finite, which finite input can bring about
// only by running out of the range of numbers.
func (out *Programme) sound() error {
	for _, r := range []struct {
		name  string
		value float64
	}{
		{"production_rate", out.ProductionRate}, {"volume_rate", out.VolumeRate}, {"number_rate", out.NumberRate},
		{"ground_store", out.GroundStore}, {"ore_rate", out.Local.OreRate.Value}, {"power", out.Power},
		{"landed_mass", out.LandedMass}, {"flights", out.Flights}, {"balance", out.Balance.Closure},
	} {
		if math.IsNaN(r.value) || math.IsInf(r.value, 0) {
			return fmt.Errorf("%s comes out as %g from finite input; please report this with the study", r.name, r.value)
		}
	}
	return nil
}
