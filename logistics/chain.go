package logistics

import (
	"fmt"
	"math"
)

// Way is what one route of supply takes for the same mass aloft.
type Way struct {
	OreRate             Quantity // ore dug on the planet for the sustaining production [kg/s]
	EnergyPerKg         float64  // spent on the planet [J per kg of product]
	Power               float64  // installed on the planet, for the capacity [W]
	PlantMass           float64  // production plant, for the capacity [kg]
	PowerMass           float64  // power plant [kg]
	ParticleMass        float64  // particles landed to fill the inventory once [kg]; 0 if made there
	LandedMass          float64  // the three together [kg]
	Flights             float64  // whole flights for it, lost ones included
	Windows             float64  // whole launch windows for it
	LandedPerWindow     float64  // what one window brings [kg]
	LandedPerWindowNext float64  // needed per window once built up: spares, replacement, particles [kg]
	FlightsPerWindow    float64  // whole flights for that
	TimeToGoal          Quantity // s after the start of the programme
}

// wholeCount rounds a count up, without being misled by the last bits.
func wholeCount(x float64) float64 { return math.Ceil(x * (1 - 1e-12)) }

// finish fills what follows from the masses.
func (w *Way) finish(d Delivery) {
	w.LandedMass = w.PlantMass + w.PowerMass + w.ParticleMass
	w.Flights = wholeCount(w.LandedMass / d.perFlight())
	w.Windows = math.Ceil(w.Flights / float64(d.FlightsPerWindow))
	w.LandedPerWindow = d.perWindow()
	w.FlightsPerWindow = wholeCount(w.LandedPerWindowNext / d.perFlight())
}

// localWay sizes making the particles on the planet:
//
//	ore    = production / (grade x recovery x stoichiometry)
//	power  = capacity x energy per kg / availability
//	landed = capacity x plant specific mass + power x power specific mass
//	next   = window spacing x (plant x spares + (plant + power plant) / life)
func localWay(s Supply, m mineral, production, capacity float64) Way {
	w := Way{EnergyPerKg: s.Energy.Total()}
	w.OreRate = known(production / (s.Feedstock.Grade * s.Feedstock.Recovery * m.yield()))
	w.Power = capacity * w.EnergyPerKg / s.Availability
	w.PlantMass = capacity * s.Plant.SpecificMass
	w.PowerMass = w.Power * s.Power.SpecificMass
	wear := w.PlantMass*s.Plant.Spares + (w.PlantMass+w.PowerMass)/s.Plant.Life
	w.LandedPerWindowNext = wear * s.Delivery.WindowSpacing
	w.finish(s.Delivery)
	return w
}

// shippedWay sizes landing the particles themselves. On the planet only the release
// takes energy:
//
//	landed = inventory / (survival x (1 - release loss)) + power plant for the release
//	next   = window spacing x (production + power plant / life)
//
// filled is the first term. What the release equipment weighs is left out.
func shippedWay(s Supply, filled, production, capacity float64) Way {
	w := Way{EnergyPerKg: s.Energy.Release, ParticleMass: filled}
	w.OreRate = missing("made at home: no ore is dug on the planet")
	w.Power = capacity * w.EnergyPerKg / s.Availability
	w.PowerMass = w.Power * s.Power.SpecificMass
	w.LandedPerWindowNext = (production + w.PowerMass/s.Plant.Life) * s.Delivery.WindowSpacing
	w.finish(s.Delivery)
	return w
}

// crossover returns the time of sustaining supply [s] after which shipping has landed
// more than making on the planet has:
//
//	production t = landed + wear t
//
// The first inventory is filled by the same supply, so that it needs no term of its own.
func crossover(local, shipped Way, production, spacing float64) Quantity {
	wear := local.LandedPerWindowNext / spacing
	shippedWear := shipped.LandedPerWindowNext / spacing
	ahead := local.LandedMass - shipped.PowerMass
	switch {
	case ahead <= 0:
		return known(0)
	case shippedWear <= wear:
		return missing("never: keeping the local plant takes %s a day, the particles %s a day",
			tonnes(wear*86400), tonnes(production*86400))
	}
	return known(ahead / (shippedWear - wear))
}

// Flow is one mass flow of the sustaining steady state [kg/s], for a mass-flow diagram.
type Flow struct {
	Name, From, To string
	Rate           float64
}

// steadyFlows returns the flows at the goal, in the order of the chain. Every place
// in the middle gives out what it takes in; a lifted clump counts as clumped in the air.
func steadyFlows(s Supply, m mineral, populations []population, production float64) []Flow {
	var sum flows
	for i := range populations {
		p := &populations[i]
		sum.add(1, p.rates(make([]mass, len(p.steady)), p.steady, 1, p.sustaining))
	}
	var out []Flow
	source := "home"
	if s.Route == Local {
		source = "plant"
		ore := production / (s.Feedstock.Grade * s.Feedstock.Recovery * m.yield())
		oxide := production / m.yield()
		out = append(out,
			Flow{"ore", "ground", "mine", ore},
			Flow{"waste", "mine", "dump", ore - oxide},
			Flow{"mineral", "mine", "plant", oxide},
			Flow{"oxygen", "plant", "by-product", oxide - production})
	}
	return append(out,
		Flow{"product", source, "release", production},
		Flow{"lost before release", "release", "lost", sum.lost},
		Flow{"clumped in the plume", "release", "lost", sum.plume},
		Flow{"new supply", "release", "air", sum.gate - sum.lost - sum.plume},
		Flow{"settled", "air", "loose layer", sum.settled},
		Flow{"lifted again", "loose layer", "air", sum.lifted},
		Flow{"buried", "loose layer", "lost", sum.buried},
		Flow{"other sinks", "air", "lost", sum.other},
		Flow{"clumped", "air", "lost", sum.clumped})
}

// chainWarnings are cautions that follow from the supply alone.
func chainWarnings(d Demand, s Supply, m mineral, w Way, production float64) []Warning {
	var out []Warning
	warn := func(field, format string, args ...any) {
		out = append(out, Warning{field, fmt.Sprintf(format, args...)})
	}
	if s.Route == Local {
		warned := map[string]bool{}
		for _, st := range d.Streams {
			if m.material != "" && st.Material != m.material && !warned[st.Material] {
				warned[st.Material] = true
				warn("supply.feedstock.mineral", "%s gives %s, not %s: ore and energy are counted as if it did; choose another mineral, or none with its own grade",
					m.name, m.material, st.Material)
			}
		}
		if least, ok := MinimumReduction(m.name); ok && s.Energy.Reduction < least.Gibbs {
			warn("supply.energy.reduction", "%.3g MJ/kg is under the thermodynamic minimum of %.3g MJ/kg for %s",
				s.Energy.Reduction/1e6, least.Gibbs/1e6, m.name)
		}
	}
	if w.LandedPerWindowNext > w.LandedPerWindow*(1+1e-9) {
		warn("supply.delivery.flights_per_window", "keeping the supply up needs %s a window, but a window lands %s: %.0f flights a window are needed",
			tonnes(w.LandedPerWindowNext), tonnes(w.LandedPerWindow), w.FlightsPerWindow)
	}
	if s.Route == Local {
		if built := w.Windows * s.Delivery.WindowSpacing; built > s.Plant.Life {
			warn("supply.delivery.flights_per_window", "landing the plant takes %s, longer than its life of %s; the schedule does not count this wear",
				years(built), years(s.Plant.Life))
		}
	}
	return out
}
