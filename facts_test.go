package hazewright

import (
	"math"
	"testing"

	"hazewright/logistics"
	"hazewright/optics/greenhouse"
	"hazewright/settling"
)

// handFacts is a mix of two populations with round numbers, so that every figure can be
// redone in the head. Shares 25 % and 75 % of 2 kg/m2 on a planet of 10 m2.
func handFacts() *facts {
	return &facts{
		design: &Design{}, area: 10, burdenValue: 2,
		populations: []*population{
			{Particle: Particle{Share: 0.25}, groundSpeed: 8, volatile: true, sublimation: 70},
			{Particle: Particle{Share: 0.75}, groundSpeed: 4, volatile: true, sublimation: 50},
		},
		kappa: mixMeans{thermalAbs: 6, thermalExt: 10, solarAbs: 1, solarExt: 4, sumRuleCap: 40, radio: [4]float64{1, 2, 3, 4}},
		state: greenhouse.State{Warming: 25, SunlightLoss: 0.1, Forcing: 30}, lowState: greenhouse.State{Warming: 11},
		low: greenhouse.Curve{Reached: true, Burden: 5},
		fates: []fateFacts{
			{Suspension: settling.Suspension{FallTime: 10, GroundStore: 3, Cycles: 4, Agglomerates: true, AgglomerationTime: 5, NumberDensityGround: 100, LayerField: 7}, lifetime: 50, inPlace: 1},
			{Suspension: settling.Suspension{FallTime: 30, GroundStore: 1, Cycles: 8, Agglomerates: true, AgglomerationTime: 15, NumberDensityGround: 200, LayerField: 9}, lifetime: 150, inPlace: 1},
		},
		survival: 0.8, points: 12,
		programme: &logistics.Programme{ProductionRate: 1.1, Capacity: 1.4, VolumeRate: 0.2, NumberRate: 9, HalfLossTime: logistics.Quantity{Value: 33},
			Way: logistics.Way{OreRate: logistics.Quantity{Value: 77}, EnergyPerKg: 61, Power: 88, PlantMass: 5, LandedMass: 6, LandedPerWindowNext: 7,
				Flights: 8, Windows: 2, TimeToGoal: logistics.Quantity{Value: 44}}},
	}
}

// Every figure of a mix against values worked out by hand. Supply per area is
// 2 (0.25/50 + 0.75/150) = 0.02 kg/m2/s, half from each population.
func TestFiguresOfAMixByHand(t *testing.T) {
	want := map[string]float64{
		"warming": 25, "warming_low_held": 11, "burden": 2, "burden_low_held": 5, "inventory": 20,
		"ground_store":          4,               // 3 + 1
		"optical_depth_thermal": 20,              // 10 x 2
		"optical_depth_solar":   8,               // 4 x 2
		"sunlight_loss":         0.1,             //
		"forcing":               30,              //
		"kappa_thermal":         6,               //
		"kappa_thermal_ext":     10,              //
		"thermal_to_solar":      1.5,             // 6/4
		"bound_share":           0.25,            // 10/40
		"fall_speed":            5,               // 0.25 x 8 + 0.75 x 4
		"fall_time":             20,              // 1/(0.25/10 + 0.75/30)
		"lifetime":              100,             // 1/(0.25/50 + 0.75/150)
		"residence_total":       300,             // (2 + 4)/0.02
		"cycles":                6,               // half of each supply: (4 + 8)/2
		"agglomeration_time":    10,              // 1/(0.25/5 + 0.75/15)
		"sublimation_time":      50,              // the shorter
		"number_density":        300,             // 100 + 200
		"layer_field":           16,              // 7 + 9
		"release_survival":      0.8,             //
		"release_points_needed": 12,              //
		"production_rate":       1.1,             //
		"capacity":              1.4,             //
		"volume_rate":           0.2,             //
		"number_rate":           9,               //
		"ore_rate":              77,              //
		"energy_per_kg":         61,              //
		"power":                 88,              //
		"plant_mass":            5,               //
		"landed_mass":           6,               //
		"flights":               8,               //
		"windows":               2,               //
		"time_to_goal":          44,              //
		"half_loss_time":        33,              //
		"radio_loss_uhf":        2 * 1 * 4.34294, // 10 log10(e) = 4.34294 dB per unit of optical depth
		"radio_loss_s":          2 * 2 * 4.34294, //
		"radio_loss_x":          2 * 3 * 4.34294, //
		"radio_loss_ka":         2 * 4 * 4.34294, //

		"landed_per_window_after": 7,
	}
	got, err := handFacts().figures(Goal{Kind: "warming"})
	if err != nil {
		t.Fatal(err)
	}
	for _, def := range Figures() {
		w, ok := want[def.ID]
		if !ok {
			t.Errorf("figure %s has no value worked out by hand in this test", def.ID)
			continue
		}
		if v := got[def.ID]; v.Null || math.Abs(v.Value-w) > 1e-5*w {
			t.Errorf("figure %s: %+v, by hand %g", def.ID, v, w)
		}
	}
}

// The notes say where a value is given or an estimate.
func TestNotesOfFigures(t *testing.T) {
	f := handFacts()
	f.design.Given = Given{KappaThermal: 6, Burden: 2}
	got, err := f.figures(Goal{Kind: "warming"})
	if err != nil {
		t.Fatal(err)
	}
	for id, want := range map[string]string{"kappa_thermal": "given, not computed", "burden": "given, not computed", "warming": "estimate", "lifetime": ""} {
		if got[id].Note != want {
			t.Errorf("figure %s: note %q, want %q", id, got[id].Note, want)
		}
	}
	exact, err := handFacts().figures(Goal{Kind: "burden"})
	if err != nil {
		t.Fatal(err)
	}
	if exact["burden"].Note != "" {
		t.Errorf("a burden that is the goal is marked %q", exact["burden"].Note)
	}
}

// A given lifetime leaves nothing of the computed fate standing beside it.
func TestGivenLifetimeNullsTheComputedFate(t *testing.T) {
	f := handFacts()
	f.design.Given.Lifetime = 100
	got, err := f.figures(Goal{Kind: "warming"})
	if err != nil {
		t.Fatal(err)
	}
	for _, id := range []string{"ground_store", "residence_total", "cycles", "agglomeration_time"} {
		if !got[id].Null {
			t.Errorf("figure %s has the value %g beside a given lifetime", id, got[id].Value)
		}
	}
	if got["lifetime"].Note != "given, not computed" {
		t.Errorf("lifetime: %+v", got["lifetime"])
	}
}

// A value that is not finite never leaves as a figure.
func TestNotFiniteIsAnError(t *testing.T) {
	f := handFacts()
	f.kappa.solarExt = 0
	if _, err := f.figures(Goal{}); err == nil {
		t.Error("a ratio to zero passed as a figure")
	}
}

// The radio bands are in the order of the figures.
func TestRadioFrequencies(t *testing.T) {
	// UHF, S, X and Ka as the design names them [Hz].
	if radioFrequencies != [4]float64{0.4e9, 2.3e9, 8.4e9, 32e9} {
		t.Errorf("radio frequencies %v", radioFrequencies)
	}
}
