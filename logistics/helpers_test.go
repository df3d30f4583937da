package logistics

import (
	"math"
	"testing"
)

const day = 86400.0

// area of a planet of radius 3389.5 km [m2].
var area = 4 * math.Pi * 3389.5e3 * 3389.5e3

// lantern is a supply with round numbers that every test may bend.
func lantern() Supply {
	return Supply{
		Route:        Local,
		Overbuild:    0.25,
		Feedstock:    Feedstock{Mineral: "hematite", Grade: 0.15, Recovery: 0.8},
		Energy:       Energy{Mining: 0.3e6, Reduction: 20e6, Shaping: 40e6, Release: 0.5e6},
		Availability: 0.85,
		Plant:        Plant{SpecificMass: 25 * day, Spares: 0.05 / year, Life: 20 * year, Commissioning: year},
		Power:        Power{Source: "fission", SpecificMass: 0.06},
		Release:      Release{Points: 12, Radius: 5, Wind: 5, Spreading: 0.1},
		ReleaseLoss:  0.02,
		Delivery:     Delivery{Payload: 60e3, FlightsPerWindow: 12, WindowSpacing: 779.94 * day, FirstWindow: 4 * year, Loss: 0.02},
	}
}

// ironStream is one population of iron rods with a ground store and all sinks.
func ironStream(inventory float64) Stream {
	return Stream{
		Name: "iron rods", Material: "iron", ParticleMass: 3.2e-16, Density: 7874,
		Inventory:    inventory,
		NewResidence: 0.5 * year, LiftedResidence: 0.48 * year, NewToGround: 0.9, LiftedToGround: 0.91,
		AgglomerationRate: 0.1 / year,
		LiftTime:          60 * day, BurialTime: 5 * year, ReturnSingle: 0.95,
	}
}

func demand(streams ...Stream) Demand {
	d := Demand{Streams: streams, PlanetArea: area, GoalWarming: 25}
	for _, s := range streams {
		for len(d.ReleaseSurvival) <= s.Population {
			d.ReleaseSurvival = append(d.ReleaseSurvival, 0.97)
		}
	}
	d.Burden = d.inventory() / area
	return d
}

// linear returns a warming of 25 K at the burden of d, in proportion.
func linear(d Demand) func(float64) float64 {
	return func(b float64) float64 { return 25 * b / d.Burden }
}

func run(t testing.TB, d Demand, s Supply) Programme {
	t.Helper()
	p, err := Run(d, s, linear(d))
	if err != nil {
		t.Fatal(err)
	}
	return p
}

func near(t testing.TB, what string, got, want, tolerance float64) {
	t.Helper()
	if math.IsNaN(got) || math.Abs(got-want) > tolerance*math.Abs(want) {
		t.Errorf("%s = %.12g, want %.12g within %g", what, got, want, tolerance)
	}
}
