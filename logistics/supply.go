package logistics

import "errors"

// Routes of supply.
const (
	Local   = "local"   // made on the planet, from landed plant
	Shipped = "shipped" // made at home and landed
)

// Supply is the supply part of a study. All values SI; shares are fractions.
type Supply struct {
	Route        string  // Local or Shipped: fills the top-level figures
	Overbuild    float64 // capacity above the sustaining rate
	Feedstock    Feedstock
	Energy       Energy
	Availability float64 // share of the time that power reaches the plant
	Plant        Plant
	Power        Power
	Release      Release
	ReleaseLoss  float64 // share lost between factory gate and release
	Delivery     Delivery
	StopAt       float64 // end of supply [s] after the start of the programme; 0 = none
}

// Feedstock is what the product is made from. One per design.
type Feedstock struct {
	Mineral  string  // see [Minerals]
	Grade    float64 // kg of mineral per kg of ore
	Recovery float64 // share of the mineral that is recovered
}

// Energy is the energy per kg of product at the factory gate [J/kg], by step. Mining
// too is per kg of product, not per kg of ore.
type Energy struct{ Mining, Reduction, Shaping, Release float64 }

// Total returns the sum over the steps [J/kg of product].
func (e Energy) Total() float64 { return e.Mining + e.Reduction + e.Shaping + e.Release }

// Plant is the landed production plant.
type Plant struct {
	SpecificMass  float64 // kg per (kg/s) of capacity = s
	Spares        float64 // plant mass replaced as spares per time [1/s]
	Life          float64 // time until plant and power plant are landed anew [s]
	Commissioning float64 // landing to running [s]
}

// Power is the landed power plant.
type Power struct {
	Source       string  // "fission" or "solar"; a label here, the specific mass carries the difference
	SpecificMass float64 // kg per W installed
}

// Release is how particles leave the ground. This package only checks it; how many
// survive the plume comes in as [Demand.ReleaseSurvival].
type Release struct {
	Points    int
	Radius    float64 // m
	Wind      float64 // m/s
	Spreading float64 // slope of plume radius against distance
}

// Delivery is the transport from home.
type Delivery struct {
	Payload          float64 // landed per flight [kg]
	FlightsPerWindow int
	WindowSpacing    float64 // s, see [SynodicPeriod]
	FirstWindow      float64 // landing of the first window after the start of the programme [s]
	Loss             float64 // share of flights lost
}

// perWindow returns the mass that arrives per window [kg].
func (d Delivery) perWindow() float64 { return float64(d.FlightsPerWindow) * d.perFlight() }

// perFlight returns the mean mass that arrives per flight [kg].
func (d Delivery) perFlight() float64 { return d.Payload * (1 - d.Loss) }

const (
	longest  = 1e6 * year // no time in a study is longer
	heaviest = 1e20       // kg, far above any inventory; keeps sums finite
)

// Validate returns nil or every field that cannot be used, joined, each a
// [*FieldError] with the field's name in the study, its value and the allowed range.
func (s Supply) Validate() error {
	var c checker
	c.choice("supply.route", s.Route, Local, Shipped)
	c.within("supply.overbuild", s.Overbuild, 0, 100, "")
	c.choice("supply.feedstock.mineral", s.Feedstock.Mineral, Minerals()...)
	c.within("supply.feedstock.grade", s.Feedstock.Grade, 1e-9, 1, "")
	c.within("supply.feedstock.recovery", s.Feedstock.Recovery, 1e-6, 1, "")
	for _, step := range []struct {
		name  string
		value float64
	}{
		{"mining", s.Energy.Mining}, {"reduction", s.Energy.Reduction},
		{"shaping", s.Energy.Shaping}, {"release", s.Energy.Release},
	} {
		c.within("supply.energy."+step.name, step.value, 0, 1e12, "J/kg")
	}
	c.within("supply.availability", s.Availability, 1e-3, 1, "")
	c.within("supply.plant.specific_mass", s.Plant.SpecificMass, 0, 1e12, "kg/(kg/s)")
	c.within("supply.plant.spares", s.Plant.Spares, 0, 1, "1/s")
	c.within("supply.plant.life", s.Plant.Life, 86400, longest, "s")
	c.within("supply.plant.commissioning", s.Plant.Commissioning, 0, longest, "s")
	c.choice("supply.power.source", s.Power.Source, "fission", "solar")
	c.within("supply.power.specific_mass", s.Power.SpecificMass, 0, 1e6, "kg/W")
	c.within("supply.release.points", float64(s.Release.Points), 1, 1e9, "")
	c.positive("supply.release.radius", s.Release.Radius, 1e6, "m")
	c.positive("supply.release.wind", s.Release.Wind, 1e3, "m/s")
	c.positive("supply.release.spreading", s.Release.Spreading, 10, "")
	c.loss("supply.release_loss", s.ReleaseLoss)
	c.within("supply.delivery.payload", s.Delivery.Payload, 1e-3, 1e12, "kg")
	c.within("supply.delivery.flights_per_window", float64(s.Delivery.FlightsPerWindow), 1, 1e9, "")
	c.within("supply.delivery.window_spacing", s.Delivery.WindowSpacing, 3600, longest, "s")
	c.within("supply.delivery.first_window", s.Delivery.FirstWindow, 0, longest, "s")
	c.loss("supply.delivery.loss", s.Delivery.Loss)
	c.within("supply.stop_at", s.StopAt, 0, longest, "s")
	return errors.Join(c.errs...)
}
