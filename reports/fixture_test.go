package reports

import (
	"math"

	"hazewright"
	"hazewright/logistics"
)

// The fixture is an invented result: numbers of a plausible size, not of any physics.
// Three designs: iron rods (sticking not given), an aluminium mix of two lengths with a
// failed limit, and an ice veil that does not reach the goal.

const marsArea = 1.444e14 // m2, 4 pi (3389.5 km)^2

// Names that must stay text wherever they are shown.
const (
	evilTag      = `</script><img src=x onerror=alert(1)>`
	evilFunction = `__f__(function(){document.title='pwned';return 'x'})()__f__`
	evilComment  = "<!--<script>"
	evilFormula  = `=HYPERLINK("http://example.invalid","x")`
	evilRevive   = "@fn:num"
	evilControl  = "Red\x1b[31m\u202etxt"
)

func fixtureSupply(mineral string) logistics.Supply {
	return logistics.Supply{
		Route: logistics.Local, Overbuild: 0.25,
		Feedstock:    logistics.Feedstock{Mineral: mineral, Grade: 0.15, Recovery: 0.8},
		Energy:       logistics.Energy{Mining: 0.3e6, Reduction: 35e6, Shaping: 40e6, Release: 0.5e6},
		Availability: 0.85,
		Plant:        logistics.Plant{SpecificMass: 25 * day, Spares: 0.05 / year, Life: 20 * year, Commissioning: year},
		Power:        logistics.Power{Source: "fission", SpecificMass: 60e-3},
		Release:      logistics.Release{Points: 12, Radius: 5, Wind: 5, Spreading: 0.1},
		ReleaseLoss:  0.02,
		Delivery: logistics.Delivery{Payload: 60e3, FlightsPerWindow: 120, WindowSpacing: 779.94 * day,
			FirstWindow: 4 * year, Loss: 0.02},
	}
}

func fixtureStudy() *hazewright.Study {
	rod := func(length, diameter float64, material string, share float64) hazewright.Particle {
		return hazewright.Particle{Shape: "rod", Length: length, Diameter: diameter, Spread: 1,
			Material: hazewright.MaterialRef{Name: material}, Oxide: 3e-9, SurfaceScattering: true, Share: share}
	}
	return &hazewright.Study{
		Title: "Lantern Basin thaw, concept phase",
		World: hazewright.World{Name: "mars", Base: "mars", Radius: 3389.5e3, Gravity: 3.71, SurfacePressure: 610,
			Gas:            []hazewright.GasShare{{Species: "CO2", Mole: 1}},
			AirTemperature: 210, Sunlight: 586.2, BondAlbedo: 0.25, Emissivity: 0.95, DustOpticalDepth: 0.4,
			LapseLimit: 2.5e-3, WarmSeasonMaximum: 288},
		Goal: hazewright.Goal{Kind: "warming", Warming: 25},
		Designs: []hazewright.Design{
			{Name: "Iron rods", Particles: []hazewright.Particle{rod(8e-6, 80e-9, "iron", 1)}, Supply: fixtureSupply("hematite")},
			{Name: "Tuned mix", Particles: []hazewright.Particle{rod(6e-6, 100e-9, "aluminium", 0.4), rod(13e-6, 100e-9, "aluminium", 0.6)},
				Supply: fixtureSupply("alumina"), Fate: hazewright.Fate{Sticking: 0.02, StickingGiven: true}},
			{Name: "Ice veil", Particles: []hazewright.Particle{{Shape: "sphere", Radius: 12e-6, Spread: 1, Share: 1,
				Material: hazewright.MaterialRef{Name: "water-ice"}}}, Supply: fixtureSupply("water-ice")},
		},
		Benchmarks: []hazewright.Benchmark{{Design: "Tuned mix", Figure: "burden", Value: 150e-6, Source: "programme note 3, table 2"}},
		Limits: []hazewright.Limit{
			{Figure: "production_rate", AtMost: true, Bound: 5000e3 / day, Pos: "study.yaml:30"},
			{Figure: "landed_mass", AtMost: true, Bound: 60e6, Pos: "study.yaml:31"},
			{Figure: "lifetime", AtMost: false, Bound: 5 * year, Pos: "study.yaml:32"},
		},
		File: "study.yaml", SHA256: "3b1f0c9a5d7e2468ace013579bdf02468ace13579bdf02468ace13579bdf0246",
	}
}

// fixtureFigures returns a value for every figure of the table, from those given in
// shown units; the rest get a small number.
func fixtureFigures(given map[string]float64) map[string]hazewright.FigureValue {
	out := map[string]hazewright.FigureValue{}
	for _, def := range hazewright.Figures() {
		one, err := hazewright.ParseQuantity("1 " + def.Shown)
		if def.Shown == "1" {
			one, err = hazewright.Quantity{SI: 1}, nil
		}
		if err != nil {
			panic(err)
		}
		v, ok := given[def.ID]
		if !ok {
			v = 0.025
		}
		value := hazewright.FigureValue{Value: v * one.SI}
		switch def.ID {
		case "warming", "burden", "burden_low_held", "warming_low_held":
			value.Note = "estimate"
		}
		out[def.ID] = value
	}
	return out
}

func fixtureLimits(s *hazewright.Study, figures map[string]hazewright.FigureValue) []hazewright.LimitResult {
	var out []hazewright.LimitResult
	for _, l := range s.Limits {
		v := figures[l.Figure]
		row := hazewright.LimitResult{Limit: l, Known: !v.Null}
		if row.Known {
			row.Factor = v.Value / l.Bound
			if !l.AtMost {
				row.Factor = l.Bound / v.Value
			}
			row.Met = row.Factor <= 1
		}
		out = append(out, row)
	}
	return out
}

// warmingCurve saturates: goal at the burden given.
func warmingCurve(goal, burden, top float64) []hazewright.CurvePoint {
	var out []hazewright.CurvePoint
	for i := range 41 {
		b := 2e-6 * math.Pow(1000, float64(i)/40)
		k := burden * (top - goal) / goal
		out = append(out, hazewright.CurvePoint{Burden: b, Warming: top * b / (b + k), SunlightLoss: 1 - math.Exp(-b/2e-3), Valid: b < 1e-3})
	}
	return out
}

func spectrum(peaks []float64, height float64) []hazewright.SpectrumPoint {
	var out []hazewright.SpectrumPoint
	for i := range 161 {
		l := 0.3e-6 * math.Pow(400, float64(i)/160)
		ext := 0.05 * height
		for _, p := range peaks {
			x := math.Log(l / p)
			ext += height / float64(len(peaks)) / (1 + x*x/0.08)
		}
		out = append(out, hazewright.SpectrumPoint{Wavelength: l, Ext: ext, Abs: 0.7 * ext, Sca: 0.3 * ext, G: 0.1, Method: "antenna", Err: 0.01})
	}
	return out
}

func planck(l, t float64) float64 {
	return 3.7418e-16 / math.Pow(l, 5) / math.Expm1(0.0143878/(l*t)) // W/m2 per m
}

func fixtureDesign(s *hazewright.Study, i int, given map[string]float64) hazewright.DesignResult {
	d := hazewright.DesignResult{Design: &s.Designs[i], Name: s.Designs[i].Name, Reached: true}
	d.Figures = fixtureFigures(given)
	d.Limits = fixtureLimits(s, d.Figures)
	burden := d.Figures["burden"].Value
	d.Curve = warmingCurve(25, burden, 62)
	d.CurveLow = warmingCurve(12.5, burden, 31)
	d.MaxWarming, d.MaxBurden = d.Curve[40].Warming, d.Curve[40].Burden
	d.Goal = hazewright.CurvePoint{Burden: burden, Warming: 25, SunlightLoss: d.Figures["sunlight_loss"].Value, Valid: true}
	for k := range 40 {
		z := float64(k)*2000 + 1000
		d.Profile = append(d.Profile, hazewright.ProfilePoint{Height: z, Mass: math.Exp(-z/8000) / 8000})
		d.FallSpeed = append(d.FallSpeed, hazewright.HeightValue{Height: z, Value: d.Figures["fall_speed"].Value * math.Exp(z/11100)})
	}
	return d
}

// programme runs the real chain for one stream that lasts as long as the figures say.
func programme(s *hazewright.Study, d *hazewright.DesignResult) *logistics.Programme {
	burden, life := d.Figures["burden"].Value, d.Figures["lifetime"].Value
	fall := life / 4
	p, err := logistics.Run(logistics.Demand{
		Streams: []logistics.Stream{{Name: d.Name, Material: d.Design.Particles[0].Material.Name, ParticleMass: 3e-16, Density: 7874,
			Inventory: burden * marsArea, NewResidence: fall, LiftedResidence: 0.9 * fall, NewToGround: 0.95, LiftedToGround: 0.95,
			AgglomerationRate: 0.01 / fall, LiftTime: 60 * day, BurialTime: 300 * day, ReturnSingle: 1}},
		PlanetArea: marsArea, Burden: burden, GoalWarming: 25, ReleaseSurvival: []float64{0.93},
	}, d.Design.Supply, func(b float64) float64 { return 62 * b / (b + burden*37/25) })
	if err != nil {
		panic(err)
	}
	return &p
}

// fixture returns the invented result. It is built anew on every call, so that a test
// may change it.
func fixture() *hazewright.Result {
	s := fixtureStudy()
	r := &hazewright.Result{Study: s, Baseline: hazewright.Baseline{SurfaceTemperature: 217.2, EffectiveTemp: 209.8,
		ScaleHeight: 10.7e3, Area: marsArea, SunAtGround: 104}}
	for l := 5e-6; l < 120e-6; l *= 1.06 {
		r.Baseline.ThermalEdges = append(r.Baseline.ThermalEdges, l)
	}
	edges := r.Baseline.ThermalEdges
	for i := range len(edges) - 1 {
		mid := math.Sqrt(edges[i] * edges[i+1])
		r.Baseline.Outgoing = append(r.Baseline.Outgoing, planck(mid, 215)*(edges[i+1]-edges[i]))
	}

	iron := fixtureDesign(s, 0, map[string]float64{"warming": 25, "warming_low_held": 12.5, "burden": 85.23, "burden_low_held": 262, "inventory": 12.3,
		"ground_store": 9.1, "optical_depth_thermal": 0.91, "optical_depth_solar": 0.42, "sunlight_loss": 6.2, "forcing": 17.9,
		"kappa_thermal": 1820, "kappa_thermal_ext": 2090, "thermal_to_solar": 4.1, "bound_share": 22, "fall_speed": 0.31,
		"fall_time": 1.1, "lifetime": 0.158, "residence_total": 0.17, "cycles": 0.4, "agglomeration_time": 0.16, "sublimation_time": 0,
		"number_density": 21.4, "production_rate": 213400, "capacity": 266750, "volume_rate": 313, "number_rate": 7.8e18,
		"ore_rate": 2541000, "energy_per_kg": 75.8, "power": 275000, "plant_mass": 6670, "landed_mass": 23200, "landed_per_window_after": 1.6e6,
		"flights": 394000, "windows": 3283, "time_to_goal": 7000, "half_loss_time": 0.12, "release_survival": 12, "release_points_needed": 812, "layer_field": 0})
	iron.StickingCase = "if every touch sticks (100 %)"
	iron.Figures["sublimation_time"] = hazewright.FigureValue{Null: true, Why: "not volatile"}
	slow := fixtureFigures(map[string]float64{"burden": 85.23, "lifetime": 12.4, "production_rate": 2720, "power": 3500, "landed_mass": 296,
		"time_to_goal": 31.5, "warming": 25})
	iron.Cases = []hazewright.CaseResult{
		{Name: "every touch sticks (100 %)", Sticking: 1, Figures: iron.Figures, Limits: iron.Limits},
		{Name: "one touch in a hundred sticks (1 %)", Sticking: 0.01, Figures: slow, Limits: fixtureLimits(s, slow)},
	}
	iron.Losses = []hazewright.Loss{{Name: "agglomeration", Share: 0.86, LifetimeAlone: 0.18 * year}, {Name: "burial", Share: 0.11, LifetimeAlone: 1.5 * year},
		{Name: "frost burial", Share: 0.03, LifetimeAlone: 33 * year}}
	iron.Spectrum = spectrum([]float64{17e-6}, 2500)
	plume := hazewright.Warning{Where: "supply.release", Text: "12 points are far fewer than the 13317641 that 90 % survival needs"}
	upkeep := hazewright.Warning{Where: "supply.delivery.flights_per_window", Text: "421 flights a window are needed"}
	field := hazewright.Warning{Where: "fate", Text: "a field stands the rods up"}
	asked := hazewright.Warning{Where: "fate.sticking", Text: "sticking is not given"}
	iron.Warnings = []hazewright.Warning{field, plume, asked} // of all cases, and of the first
	iron.Cases[0].Warnings = []hazewright.Warning{field, plume}
	iron.Cases[1].Warnings = []hazewright.Warning{field, upkeep}
	iron.Cases[0].Losses = iron.Losses
	iron.Cases[1].Losses = []hazewright.Loss{{Name: "burial", Share: 0.9, LifetimeAlone: 13.8 * year}, {Name: "agglomeration", Share: 0.1, LifetimeAlone: 124 * year}}
	iron.Populations = []hazewright.PopulationResult{{Name: "rod 8 um x 80 nm, iron", Share: 1, Material: "iron", Conducts: "yes", Combustible: "yes", Oxide: 3e-9, Density: 7874, ParticleMass: 3.2e-16,
		KappaThermal: 1820, KappaThermalExt: 2090, KappaSolarExt: 510, KappaSolarAbs: 300, OpticsMethod: "antenna", OpticsError: 0.02,
		FallSpeed: 3.1e-4, Lifetime: 0.158 * year}}

	mix := fixtureDesign(s, 1, map[string]float64{"warming": 25, "warming_low_held": 13.1, "burden": 71.8, "burden_low_held": 188, "inventory": 10.4,
		"ground_store": 14.2, "optical_depth_thermal": 1.1, "sunlight_loss": 4.4, "forcing": 18.3, "kappa_thermal": 1460, "kappa_thermal_ext": 2610,
		"thermal_to_solar": 5.6, "fall_speed": 0.17, "fall_time": 2.6, "lifetime": 9.31, "agglomeration_time": 20.2, "production_rate": 3400,
		"capacity": 4250, "volume_rate": 14.6, "number_rate": 9.8e16, "ore_rate": 53500, "energy_per_kg": 75.8, "power": 4390,
		"plant_mass": 106, "landed_mass": 369, "flights": 6280, "windows": 53, "time_to_goal": 118, "half_loss_time": 7.2, "release_survival": 97,
		"release_points_needed": 4, "layer_field": 0, "sublimation_time": 0})
	mix.Losses = []hazewright.Loss{{Name: "burial", Share: 0.51, LifetimeAlone: 18.2 * year}, {Name: "agglomeration", Share: 0.37, LifetimeAlone: 25 * year},
		{Name: "frost burial", Share: 0.12, LifetimeAlone: 33 * year}}
	mix.Spectrum = spectrum([]float64{13e-6, 27e-6}, 3600)

	mix.Populations = []hazewright.PopulationResult{
		{Name: "rod 6 um x 100 nm, aluminium", Share: 0.4, Material: "aluminium", Conducts: "yes", Combustible: "yes", Density: 2700, ParticleMass: 1.3e-16, Lifetime: 9.31 * year},
		{Name: "rod 13 um x 100 nm, aluminium", Share: 0.6, Material: "aluminium", Conducts: "yes", Combustible: "yes", Density: 2700, ParticleMass: 2.8e-16, Lifetime: 9.31 * year},
	}

	ice := fixtureDesign(s, 2, map[string]float64{"kappa_thermal": 48, "sublimation_time": 0.00014})
	ice.Reached, ice.Cause = false, "sublimes"
	for _, id := range []string{"warming", "warming_low_held", "burden", "burden_low_held", "inventory", "ground_store", "sunlight_loss", "forcing", "optical_depth_thermal",
		"optical_depth_solar", "lifetime", "residence_total", "cycles", "agglomeration_time", "production_rate", "capacity", "volume_rate", "number_rate",
		"ore_rate", "power", "plant_mass", "landed_mass", "landed_per_window_after", "flights", "windows", "time_to_goal", "half_loss_time",
		"number_density", "release_survival", "release_points_needed", "layer_field"} {
		ice.Figures[id] = hazewright.FigureValue{Null: true, Why: "sublimes"}
	}
	ice.Populations = []hazewright.PopulationResult{{Name: "sphere of radius 12 um, water-ice", Share: 1, Material: "water-ice", Conducts: "no", Combustible: "no", Density: 917}}
	ice.Limits = fixtureLimits(s, ice.Figures)
	ice.Curve, ice.CurveLow = warmingCurve(9, 2e-3, 12), nil
	ice.MaxWarming, ice.MaxBurden = ice.Curve[40].Warming, ice.Curve[40].Burden
	ice.Goal = hazewright.CurvePoint{}
	ice.Spectrum = spectrum([]float64{11e-6, 45e-6}, 90)

	for _, d := range []*hazewright.DesignResult{&iron, &mix} {
		d.Programme = programme(s, d)
		for i, f := range r.Baseline.Outgoing {
			l := math.Sqrt(edges[i] * edges[i+1])
			x := math.Log(l / 17e-6)
			d.Outgoing = append(d.Outgoing, f*(1.15-0.5/(1+x*x/0.1)))
		}
	}
	iron.Cases[0].Programme = iron.Programme
	bySlow := iron
	bySlow.Figures = slow
	iron.Cases[1].Programme = programme(s, &bySlow)
	r.Designs = []hazewright.DesignResult{iron, mix, ice}
	r.Warnings = []hazewright.Warning{{Where: "uncertain", Text: "not used yet: this run has no samples"}}
	r.Methods = []hazewright.Method{
		{Stage: "optics", Text: "Rods as thin antennas; spheres by Mie theory.", Validity: "aspect ratio 10 and more; within 3 % of an independent solver",
			LeftOut: []string{"cold resistivity (either way, under 10 %)"}, Source: "[BohrenHuffman1983]"},
		{Stage: "warming", Text: "Quick estimate from the blocked emission.", Validity: "well mixed, up to a thermal optical depth of 3; about 30 %",
			LeftOut: []string{"carbon dioxide and water released by the warming (understates warming)", "daytime heating that traps particles low (overstates it, by up to half)"},
			Source:  "[Pollack1979]", Estimate: true},
		{Stage: "residence", Text: "Steady column with eddy mixing and slip-corrected fall.", Validity: "annual mean", LeftOut: []string{"transport by winds (either way)"}},
	}
	return r
}

// evilFixture is the fixture with hostile texts in every place a study file can set.
func evilFixture() *hazewright.Result {
	r := fixture()
	s := r.Study
	s.Title = evilTag
	s.World.Name = evilComment
	for i, name := range []string{evilTag, evilFunction, evilFormula} {
		s.Designs[i].Name = name
		r.Designs[i].Name = name
	}
	s.Benchmarks[0].Design, s.Benchmarks[0].Source = evilFunction, evilTag
	r.Designs[1].Losses[2].Name = evilRevive
	r.Designs[1].Losses[1].Name = evilTag
	r.Designs[0].Warnings = append(r.Designs[0].Warnings, hazewright.Warning{Where: evilControl, Text: evilTag + evilComment})
	r.Designs[2].Cause = evilControl + evilTag
	s.Tables = []hazewright.TableFile{{File: evilFormula, SHA256: "00"}}
	return r
}

var fixtureProvenance = Provenance{Version: "0.1.0", Command: "hazewright assess study.yaml --report report.html"}
