package hazewright

import (
	"math"
	"strings"
	"testing"
)

// Every input of fate, supply and model moves a figure the right way: each row sets one
// input of a study and says which figure rises (+1) or falls (-1), in that order.
func TestEveryInputMovesItsFigure(t *testing.T) {
	const sticky = `
study: sticky iron rods
world: mars
goal: {warming: 10 K}
designs:
  - name: Iron rods
    particles: [{shape: rod, length: 8 um, diameter: 80 nm, material: iron}]
fate: {sticking: 0.1 %}
supply: {release: {points: 3}, delivery: {flights_per_window: 2000}}
`
	base := assess(t, studyOf(t, sticky)).Designs[0]
	const p = "designs[0].particles[0]."
	for _, c := range []struct {
		set, figure string
		sign        int
	}{
		{p + "length=9 um", "fall_speed", +1},
		{p + "diameter=60 nm", "fall_speed", -1},
		{p + "oxide=8 nm", "kappa_thermal", -1},
		{p + "surface_scattering=off", "kappa_thermal_ext", +1},
		{p + "spread=1.5", "kappa_thermal", -1},
		{"fate.release_height=10 km", "lifetime", +1},
		{"fate.lift_height=10 km", "lifetime", +1},
		{"fate.profile={layer: [0 km, 10 km]}", "lifetime", -1},
		{"fate.eddy_diffusivity=1000 m2/s", "lifetime", +1},
		{"fate.deposition=1 mm/s", "lifetime", -1},
		{"fate.lift_time=400 d", "lifetime", -1},
		{"fate.burial_time=20 yr", "lifetime", +1},
		{"fate.frost_burial=20 %/yr", "lifetime", -1},
		{"fate.sticking=1 %", "lifetime", -1},
		{"fate.charge=5", "lifetime", +1},
		{"fate.charge=5", "layer_field", +1},
		{"fate.aggregate_value=50 %", "lifetime", +1},
		{"fate.sinks=[{name: rain, rate: 10 %/yr}]", "lifetime", -1},
		{"fate.return_single=50 %", "lifetime", -1},
		{"supply.overbuild=50 %", "capacity", +1},
		{"supply.feedstock={mineral: magnetite, grade: 15 %, recovery: 80 %}", "ore_rate", -1},
		{"supply.feedstock.grade=30 %", "ore_rate", -1},
		{"supply.feedstock.recovery=40 %", "ore_rate", +1},
		{"supply.energy.mining=9 MJ/kg", "energy_per_kg", +1},
		{"supply.energy.reduction=30 MJ/kg", "energy_per_kg", +1},
		{"supply.energy.shaping=9 MJ/kg", "energy_per_kg", -1},
		{"supply.energy.release=9 MJ/kg", "energy_per_kg", +1},
		{"supply.availability=50 %", "power", +1},
		{"supply.plant.specific_mass=50 t/(t/d)", "plant_mass", +1},
		{"supply.plant.spares=10 %/yr", "landed_per_window_after", +1},
		{"supply.plant.life=10 yr", "landed_per_window_after", +1},
		{"supply.plant.commissioning=4 yr", "time_to_goal", +1},
		{"supply.power.specific_mass=90 kg/kW", "landed_mass", +1},
		{"supply.release.points=30", "release_survival", +1},
		{"supply.release.radius=50 m", "release_survival", +1},
		{"supply.release.wind=9 m/s", "release_survival", +1},
		{"supply.release.spreading=0.3", "release_survival", +1},
		{"supply.release_loss=20 %", "production_rate", +1},
		{"supply.delivery.payload=90 t", "flights", -1},
		{"supply.delivery.flights_per_window=20", "windows", +1},
		{"supply.delivery.window_spacing=300 d", "landed_per_window_after", -1},
		{"supply.delivery.first_window=9 yr", "time_to_goal", +1},
		{"supply.delivery.loss=20 %", "flights", +1},
		{"supply.route=shipped", "energy_per_kg", -1},
		{"model.warming_factor=1.5", "burden", -1},
		{"model.kappa_factor=1.5", "burden", -1},
		{"model.fall_speed_factor=2", "fall_time", -1},
		{"model.fall_speed_factor=2", "fall_speed", +1},
		{"model.kernel_factor=3", "lifetime", -1},
		{"model.kernel_factor=3", "release_survival", -1},
		{"world.gravity=3.6 m/s2", "fall_speed", -1},
		{"world.surface_pressure=900 Pa", "fall_speed", -1},
		{"world.air_temperature=240 K", "fall_time", +1},
		{"world.radius=4000 km", "inventory", +1},
		{"world.lapse_limit=4 K/km", "warming_low_held", +1},
	} {
		moved := assess(t, studyOf(t, sticky, c.set)).Designs[0]
		a, b := value(t, base, c.figure), value(t, moved, c.figure)
		if !(float64(c.sign)*(b-a) > 1e-6*math.Abs(a)) {
			t.Errorf("%s: %s goes from %g to %g, must go %+d", c.set, c.figure, a, b, c.sign)
		}
	}
}

// A layer holds only what the falling column leaves in it: the supply that keeps a burden
// inside is the column's, so lifetime scales with the share inside.
func TestFixedLayerCountsOnlyWhatIsInside(t *testing.T) {
	free := assess(t, studyOf(t, ironRods, "fate.release_height=30 km")).Designs[0]
	layered := assess(t, studyOf(t, ironRods, "fate.release_height=30 km", "fate.profile={layer: [20 km, 30 km]}")).Designs[0]
	// By hand from the profile of the free column: trapezoids, coarse at the edges.
	var inside, all float64
	for i := 1; i < len(free.Profile); i++ {
		a, b := free.Profile[i-1], free.Profile[i]
		mass := (b.Height - a.Height) * (a.Mass + b.Mass) / 2
		all += mass
		if mid := (a.Height + b.Height) / 2; mid > 20e3 && mid < 30e3 {
			inside += mass
		}
	}
	share := inside / all
	if math.Abs(layered.LayerShare/share-1) > 0.05 {
		t.Errorf("share in the layer %g, from the free profile %g", layered.LayerShare, share)
	}
	if got, want := value(t, layered, "lifetime"), layered.LayerShare*value(t, free, "lifetime"); math.Abs(got/want-1) > 1e-9 {
		t.Errorf("lifetime in the layer %g s, want %g s", got, want)
	}
	var supply float64
	for _, s := range layered.Programme.Streams {
		supply += s.Supply
	}
	if got, want := value(t, layered, "inventory")/supply, value(t, layered, "lifetime"); math.Abs(got/want-1) > 1e-6 {
		t.Errorf("lifetime %g s by the schedule's stores, %g s by the column", got, want)
	}
	// A loss that takes a share x of what is removed would alone give lifetime/x; agglomeration's
	// time is its own.
	for _, sets := range [][]string{nil, {"fate.release_height=30 km", "fate.profile={layer: [20 km, 30 km]}"}} {
		d := assess(t, studyOf(t, ironRods, append([]string{"fate.sticking=5 %"}, sets...)...)).Designs[0]
		for _, l := range d.Losses {
			if l.Name != "agglomeration" {
				continue
			}
			if got, want := l.Share*value(t, d, "agglomeration_time"), value(t, d, "lifetime"); math.Abs(got/want-1) > 1e-6 {
				t.Errorf("%v: agglomeration removes %g of all in %g s, lifetime %g s", sets, l.Share, value(t, d, "agglomeration_time"), want)
			}
		}
	}
	out := assess(t, studyOf(t, ironRods, "fate.release_height=0 km", "fate.eddy_diffusivity=1 m2/s", "fate.lift_height=0 km", "fate.profile={layer: [60 km, 70 km]}")).Designs[0]
	if out.Reached || !strings.Contains(out.Cause, "layer") {
		t.Errorf("a layer that nothing gets to: reached %v, cause %q", out.Reached, out.Cause)
	}
}

// More sticking never needs less production: the plume's rule has no step.
func TestProductionRisesWithSticking(t *testing.T) {
	last := 0.0
	for _, sticking := range []string{"0 %", "0.5 %", "1 %", "2 %", "3 %", "4 %", "5 %", "8 %", "20 %", "100 %"} {
		p := value(t, assess(t, studyOf(t, ironRods, "goal.warming=10 K", "fate.sticking="+sticking)).Designs[0], "production_rate")
		if p < last {
			t.Errorf("sticking %s: production falls from %g to %g kg/s", sticking, last, p)
		}
		last = p
	}
}

// An aggregate that keeps its whole value costs nothing, in the column or in the plume.
func TestAggregatesOfFullValue(t *testing.T) {
	d := assess(t, studyOf(t, ironRods, "fate.sticking=100 %", "fate.aggregate_value=100 %")).Designs[0]
	none := assess(t, studyOf(t, ironRods)).Designs[0]
	for _, id := range []string{"production_rate", "lifetime", "release_survival"} {
		if a, b := value(t, d, id), value(t, none, id); math.Abs(a/b-1) > 1e-9 {
			t.Errorf("%s: %g with aggregates of full value, %g without sticking", id, a, b)
		}
	}
}

const iceVeil = `
study: ice
world: mars
goal: {burden: 1 g/m2}
designs:
  - name: Ice
    particles: [{shape: sphere, radius: 8 um, material: water-ice}]
fate: {sticking: 0 %, release_height: 20 km}
supply: {feedstock: {mineral: none, grade: 60 %, recovery: 90 %}}
`

// Ice in dry air: gone before it falls, it is refused; slower, it is one more loss.
func TestIceInDryAir(t *testing.T) {
	warm := assess(t, studyOf(t, iceVeil)).Designs[0]
	if warm.Reached || !strings.HasPrefix(warm.Cause, "sublimes") {
		t.Errorf("ice at 210 K in dry air: reached %v, cause %q", warm.Reached, warm.Cause)
	}
	cold := assess(t, studyOf(t, iceVeil, "world.air_temperature=146 K")).Designs[0]
	moist := assess(t, studyOf(t, iceVeil, "world.air_temperature=146 K", "fate.vapour=saturated")).Designs[0]
	dry, wet, gone := value(t, cold, "lifetime"), value(t, moist, "lifetime"), value(t, cold, "sublimation_time")
	if !(dry < wet && dry < gone) {
		t.Errorf("lifetime %g s in dry air, %g s in moist, sublimation in %g s", dry, wet, gone)
	}
	found := false
	for _, l := range cold.Losses {
		found = found || l.Name == "sublimation" && l.Share > 0
	}
	if !found {
		t.Errorf("no sublimation among the losses %+v", cold.Losses)
	}
}

// The charge of all populations together makes the field that is refused.
func TestLayerFieldOfAMix(t *testing.T) {
	const two = `
study: charged
world: mars
goal: {burden: 100 mg/m2}
designs:
  - name: Pair
    particles:
      - {shape: rod, length: 8 um, diameter: 80 nm, material: iron, share: 50 %}
      - {shape: rod, length: 8 um, diameter: 80 nm, material: iron, share: 50 %}
fate: {sticking: 0 %, charge: 5}
`
	// By hand: 100e-6 kg/m2 / 3.166e-16 kg = 3.158e11 /m2; a charge on each is
	// 3.158e11 x 1.602e-19 C / 8.854e-12 F/m = 5.715 kV/m.
	d := assess(t, studyOf(t, two, "fate.charge=3")).Designs[0]
	if field := value(t, d, "layer_field"); math.Abs(field/(3*5715)-1) > 0.01 {
		t.Errorf("field of 3 charges %g V/m, by hand %g V/m", field, 3*5715.0)
	}
	// 5 charges make 28.6 kV/m together, 14.3 kV/m for each half.
	if d := assess(t, studyOf(t, two)).Designs[0]; d.Reached || !strings.Contains(d.Cause, "breakdown") {
		t.Errorf("5 charges: reached %v, cause %q", d.Reached, d.Cause)
	}
}

// A particle that only cools has its warming and all that it takes told under a burden goal.
func TestCoolingParticle(t *testing.T) {
	const soot = `
study: soot
world: mars
goal: {burden: 50 mg/m2}
designs:
  - name: Soot
    particles: [{shape: sphere, radius: 0.25 um, material: graphite}]
fate: {sticking: 0 %}
limits:
  - {figure: warming, at_least: 1 K}
`
	d := assess(t, studyOf(t, soot)).Designs[0]
	if w := value(t, d, "warming"); !(w < 0) {
		t.Errorf("soot warms by %g K", w)
	}
	warned := false
	for _, w := range d.Warnings {
		warned = warned || strings.Contains(w.Text, "does not warm")
	}
	if !warned {
		t.Error("nothing says that the burden does not warm")
	}
	for _, id := range []string{"production_rate", "ore_rate", "power", "landed_mass"} {
		value(t, d, id) // what it takes does not hang on whether it warms
	}
	if l := d.Limits[0]; !l.Known || l.Met {
		t.Errorf("limit on warming: %+v", l)
	}
	never := assess(t, studyOf(t, strings.Replace(soot, "burden: 50 mg/m2", "warming: 5 K", 1))).Designs[0]
	if never.Reached || !never.NeverWarms || !strings.Contains(never.Cause, "no burden warms") {
		t.Errorf("goal of 5 K by soot: reached %v, cause %q", never.Reached, never.Cause)
	}
}

// What a study reads but nothing uses is said, and another world is said to be outside
// the baseline of the estimate.
func TestWarningsOfTheWholeStudy(t *testing.T) {
	has := func(r *Result, word string) bool {
		for _, w := range r.Warnings {
			if strings.Contains(w.Where+" "+w.Text, word) {
				return true
			}
		}
		return false
	}
	r := assess(t, studyOf(t, ironRods+"uncertain: defaults\n", "world.surface_pressure=900 Pa"))
	if !has(r, "uncertain") || !has(r, "outside its baseline") {
		t.Errorf("warnings %+v", r.Warnings)
	}
	if r := assess(t, studyOf(t, ironRods)); len(r.Warnings) != 0 {
		t.Errorf("the plain study has warnings %+v", r.Warnings)
	}
}

// The effective temperature is the fact sheet's 209.8 K [MarsFactSheet].
func TestBaselineOfThePlanet(t *testing.T) {
	b := assess(t, studyOf(t, ironRods)).Baseline
	if math.Abs(b.EffectiveTemp-209.8) > 0.1 {
		t.Errorf("effective temperature %g K, fact sheet 209.8 K", b.EffectiveTemp)
	}
	if b.SurfaceTemperature < 210 || b.SurfaceTemperature > 220 {
		t.Errorf("surface temperature %g K", b.SurfaceTemperature)
	}
}

// What is remembered of a particle does not leak between worlds or shares.
func TestMemoKey(t *testing.T) {
	s := studyOf(t, ironRods)
	q := s.Designs[0].Particles[0]
	a := opticsKey(s, q, 210)
	if opticsKey(s, q, 240) == a {
		t.Error("the same key at another temperature")
	}
	q.Share = 0.5
	if opticsKey(s, q, 210) != a {
		t.Error("another key for another share")
	}
	q.Diameter *= 2
	if opticsKey(s, q, 210) == a {
		t.Error("the same key for another diameter")
	}
}
