package logistics

import (
	"errors"
	"math"
	"strings"
	"testing"
)

func TestSupply_Validate(t *testing.T) {
	if err := lantern().Validate(); err != nil {
		t.Fatal(err)
	}
	for field, change := range map[string]func(*Supply){
		"supply.route: \"rail\" is outside the choices local, shipped":        func(s *Supply) { s.Route = "rail" },
		"supply.overbuild: -0.1 is outside 0 to 100":                          func(s *Supply) { s.Overbuild = -0.1 },
		"supply.feedstock.mineral: \"hematit\"":                               func(s *Supply) { s.Feedstock.Mineral = "hematit" },
		"supply.feedstock.grade: 1.2 is outside 1e-09 to 1":                   func(s *Supply) { s.Feedstock.Grade = 1.2 },
		"supply.feedstock.recovery: 0":                                        func(s *Supply) { s.Feedstock.Recovery = 0 },
		"supply.energy.mining: -1 J/kg is outside 0 J/kg":                     func(s *Supply) { s.Energy.Mining = -1 },
		"supply.energy.reduction: NaN J/kg":                                   func(s *Supply) { s.Energy.Reduction = math.NaN() },
		"supply.energy.shaping: +Inf J/kg":                                    func(s *Supply) { s.Energy.Shaping = math.Inf(1) },
		"supply.energy.release":                                               func(s *Supply) { s.Energy.Release = -1 },
		"supply.availability: 0 is outside 0.001 to 1":                        func(s *Supply) { s.Availability = 0 },
		"supply.plant.specific_mass":                                          func(s *Supply) { s.Plant.SpecificMass = -1 },
		"supply.plant.spares":                                                 func(s *Supply) { s.Plant.Spares = -1 },
		"supply.plant.life: 0 s is outside 86400 s":                           func(s *Supply) { s.Plant.Life = 0 },
		"supply.plant.commissioning":                                          func(s *Supply) { s.Plant.Commissioning = -1 },
		"supply.power.source: \"wind\" is outside the choices fission, solar": func(s *Supply) { s.Power.Source = "wind" },
		"supply.power.specific_mass":                                          func(s *Supply) { s.Power.SpecificMass = -1 },
		"supply.release.points: 0 is outside 1":                               func(s *Supply) { s.Release.Points = 0 },
		"supply.release.radius: 0 m is outside above 0":                       func(s *Supply) { s.Release.Radius = 0 },
		"supply.release.wind":                                                 func(s *Supply) { s.Release.Wind = 0 },
		"supply.release.spreading":                                            func(s *Supply) { s.Release.Spreading = 0 },
		"supply.release_loss: 1 is outside 0 up to, not including, 1":         func(s *Supply) { s.ReleaseLoss = 1 },
		"supply.delivery.payload: 0 kg":                                       func(s *Supply) { s.Delivery.Payload = 0 },
		"supply.delivery.flights_per_window: 0":                               func(s *Supply) { s.Delivery.FlightsPerWindow = 0 },
		"supply.delivery.window_spacing":                                      func(s *Supply) { s.Delivery.WindowSpacing = 0 },
		"supply.delivery.first_window":                                        func(s *Supply) { s.Delivery.FirstWindow = -1 },
		"supply.delivery.loss":                                                func(s *Supply) { s.Delivery.Loss = 1 },
		"supply.stop_at: -1 s":                                                func(s *Supply) { s.StopAt = -1 },
	} {
		s := lantern()
		change(&s)
		err := s.Validate()
		var bad *FieldError
		if !errors.As(err, &bad) || !strings.Contains(err.Error(), field) {
			t.Errorf("got %v, want an error with %q", err, field)
		}
	}
	several := lantern()
	several.Overbuild, several.Availability, several.StopAt = -1, 2, -1
	got := several.Validate().Error()
	if strings.Count(got, "\n") != 2 || strings.Index(got, "overbuild") > strings.Index(got, "availability") {
		t.Errorf("three mistakes print as %q", got)
	}
	edge := lantern()
	edge.Availability, edge.ReleaseLoss, edge.Feedstock.Grade = 1, math.Nextafter(1, 0), 1
	if err := edge.Validate(); err != nil {
		t.Errorf("just inside: %v", err)
	}
}

func TestDemand_Validate(t *testing.T) {
	for field, change := range map[string]func(*Demand){
		"streams: an empty list":                 func(d *Demand) { d.Streams = nil },
		"planet_area":                            func(d *Demand) { d.PlanetArea = 0 },
		"burden: 0 kg/m2":                        func(d *Demand) { d.Burden = 0 },
		"goal.warming: NaN K":                    func(d *Demand) { d.GoalWarming = math.NaN() },
		"release_survival[0]: 0":                 func(d *Demand) { d.ReleaseSurvival[0] = 0 },
		"streams[0].population: 1 is outside":    func(d *Demand) { d.Streams[0].Population = 1 },
		"streams[0].particle_mass":               func(d *Demand) { d.Streams[0].ParticleMass = 0 },
		"streams[0].density":                     func(d *Demand) { d.Streams[0].Density = 0 },
		"streams[0].inventory":                   func(d *Demand) { d.Streams[0].Inventory = -1 },
		"streams[0].new_residence: NaN s":        func(d *Demand) { d.Streams[0].NewResidence = math.NaN() },
		"streams[0].lifted_residence":            func(d *Demand) { d.Streams[0].LiftedResidence = 0 },
		"streams[0].new_to_ground: 1.1":          func(d *Demand) { d.Streams[0].NewToGround = 1.1 },
		"streams[0].lifted_to_ground":            func(d *Demand) { d.Streams[0].LiftedToGround = -0.1 },
		"streams[0].lift_time":                   func(d *Demand) { d.Streams[0].LiftTime = 0 },
		"streams[0].burial_time: +Inf s":         func(d *Demand) { d.Streams[0].BurialTime = math.Inf(1) },
		"streams[0].return_single":               func(d *Demand) { d.Streams[0].ReturnSingle = 2 },
		"streams[0].agglomeration_rate: 1e-07":   func(d *Demand) { d.Streams[0].AgglomerationRate = 1e-7 },
		"burden x planet area = 1e+10 kg within": func(d *Demand) { d.Streams[0].Inventory *= 1.00001 },
	} {
		d := demand(ironStream(1e10))
		change(&d)
		var bad *FieldError
		if err := d.Validate(); !errors.As(err, &bad) || !strings.Contains(err.Error(), field) {
			t.Errorf("got %v, want an error with %q", err, field)
		}
	}
	never := ironStream(1e10)
	never.LiftTime = math.Inf(1)
	if err := demand(never).Validate(); err != nil {
		t.Errorf("never lifted: %v", err)
	}
}

// Run reports the mistakes of both inputs at once.
func TestRun_ReportsAllMistakes(t *testing.T) {
	d, s := demand(ironStream(1e10)), lantern()
	d.Streams[0].Density, s.Availability = 0, 2
	_, err := Run(d, s, linear(d))
	if err == nil || !strings.Contains(err.Error(), "density") || !strings.Contains(err.Error(), "availability") {
		t.Errorf("got %v", err)
	}
}
