package logistics_test

import (
	"fmt"
	"math"

	"hazewright/logistics"
)

// 0.03 Gt of iron rods that last 10 yr and are never lifted again, landed from home
// with 100 t a flight.
func ExampleRun() {
	const yr, day = 365.25 * 86400, 86400
	area := 4 * math.Pi * 3389.5e3 * 3389.5e3 // m2
	const inventory = 3e10                    // kg
	demand := logistics.Demand{
		PlanetArea: area, Burden: inventory / area, GoalWarming: 25,
		ReleaseSurvival: []float64{1},
		Streams: []logistics.Stream{{
			Name: "rods", Material: "iron", ParticleMass: 3.2e-16, Density: 7874,
			Inventory: inventory, NewResidence: 10 * yr, LiftedResidence: 10 * yr,
			NewToGround: 1, LiftedToGround: 1, LiftTime: math.Inf(1), BurialTime: yr, ReturnSingle: 1,
		}},
	}
	supply := logistics.Supply{
		Route: logistics.Shipped, Overbuild: 0.25,
		Feedstock:    logistics.Feedstock{Mineral: "none", Grade: 1, Recovery: 1},
		Availability: 1, Plant: logistics.Plant{Life: 20 * yr}, Power: logistics.Power{Source: "solar"},
		Release:  logistics.Release{Points: 12, Radius: 5, Wind: 5, Spreading: 0.1},
		Delivery: logistics.Delivery{Payload: 100e3, FlightsPerWindow: 100000, WindowSpacing: 779.94 * day, FirstWindow: 4 * yr},
	}
	p, err := logistics.Run(demand, supply, func(burden float64) float64 { return 25 * burden / demand.Burden })
	if err != nil {
		fmt.Println(err)
		return
	}
	fmt.Printf("%.0f kg/s, %.0f L/s, %.0f landings\n", p.ProductionRate, p.VolumeRate*1000, p.Flights)
	fmt.Printf("goal after %.1f yr, half the warming gone %.1f yr after the end\n", p.TimeToGoal.Value/yr, p.HalfLossTime.Value/yr)
	// Output:
	// 95 kg/s, 12 L/s, 300000 landings
	// goal after 19.7 yr, half the warming gone 6.9 yr after the end
}
