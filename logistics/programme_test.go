package logistics

import (
	"fmt"
	"math"
	"reflect"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"
	"github.com/google/go-cmp/cmp/cmpopts"
)

// Rules of thumb (common practice, no source): 0.03 Gt of metal rods lasting 10 yr take
// about 10 L/s, and about 300 000 landings of 100 t if shipped.
func TestRun_RulesOfThumb(t *testing.T) {
	s := plain(10 * year)
	s.Inventory = 0.03e12
	d := demand(s)
	d.ReleaseSurvival[0] = 1
	u := lantern()
	u.Route, u.ReleaseLoss, u.Energy.Release = Shipped, 0, 0
	u.Delivery.Payload, u.Delivery.Loss = 100e3, 0
	p := run(t, d, u)
	near(t, "production", p.ProductionRate, 95.06, 1e-3) // 3e10 kg / 3.15576e8 s
	near(t, "volume rate", p.VolumeRate, 12.07e-3, 1e-3) // over 7874 kg/m3
	if p.VolumeRate < 5e-3 || p.VolumeRate > 20e-3 {
		t.Errorf("volume rate %g m3/s, want about 10 L/s", p.VolumeRate)
	}
	if p.Flights != 300000 {
		t.Errorf("flights = %v, want 300000", p.Flights)
	}
	near(t, "number rate", p.NumberRate, 95.06/3.2e-16, 1e-3)
}

// The chain by hand, step by step, in tonnes and days.
func TestRun_ChainByHand(t *testing.T) {
	s := plain(1000 * day)
	s.Inventory = 1e9 // 1000 t/d airborne
	d := demand(s)
	d.ReleaseSurvival[0] = 0.8
	u := lantern()
	u.ReleaseLoss = 0.2 // 1000 / 0.8 / 0.8 = 1562.5 t/d at the gate
	u.Overbuild = 0.28  // 2000 t/d
	u.Energy = Energy{Mining: 1e6, Reduction: 20e6, Shaping: 20e6, Release: 2.2e6}
	u.Availability = 0.5
	u.Plant.Spares, u.Plant.Life = 0.1/year, 20*year
	u.Delivery = Delivery{Payload: 100e3, FlightsPerWindow: 10, WindowSpacing: 2 * year, FirstWindow: year, Loss: 0.5}
	p := run(t, d, u)
	near(t, "production", p.ProductionRate*day/1e3, 1562.5, 1e-12)
	near(t, "capacity", p.Capacity*day/1e3, 2000, 1e-12)
	// 1562.5 / (0.15 x 0.8 x 0.69943)
	near(t, "ore", p.OreRate.Value*day/1e3, 18616.3, 1e-5)
	near(t, "energy", p.EnergyPerKg, 43.2e6, 1e-12)
	near(t, "power", p.Power, 2e9, 1e-12)               // 2e6 kg x 43.2 MJ / 86400 s / 0.5
	near(t, "plant", p.PlantMass, 50e6, 1e-12)          // 2000 x 25 t
	near(t, "power plant", p.PowerMass, 120e6, 1e-12)   // 2 GW x 60 kg/kW
	near(t, "landed", p.LandedMass, 170e6, 1e-12)       //
	near(t, "flights", p.Flights, 3400, 1e-12)          // of 50 t that arrive
	near(t, "windows", p.Windows, 340, 1e-12)           //
	near(t, "after", p.LandedPerWindowNext, 27e6, 1e-9) // 2 yr x (5 kt/yr + 170 kt / 20 yr)
	near(t, "flights after", p.FlightsPerWindow, 540, 1e-12)
	near(t, "reduction ratio", p.ReductionRatio.Value, 20/6.645, 1e-3)

	near(t, "shipped particles", p.Shipped.ParticleMass, 1e9/0.64, 1e-12)
	near(t, "shipped power", p.Shipped.Power, 2e6*2.2e6/86400/0.5, 1e-12)
	near(t, "shipped after", p.Shipped.LandedPerWindowNext,
		(1562.5e3/day+p.Shipped.PowerMass/(20*year))*2*year, 1e-12)
	if p.Shipped.OreRate.Known() {
		t.Error("the shipped route has an ore rate")
	}
	// 170 kt against 1562.5 t/d less wear, and the small power plant for the release.
	wear, small := 27e6/(2*year), p.Shipped.PowerMass
	near(t, "crossover", p.Crossover.Value, (170e6-small)/(1562.5e3/day+small/(20*year)-wear), 1e-9)
	if len(p.Warnings) == 0 || !strings.Contains(fmt.Sprint(p.Warnings), "540 flights a window") {
		t.Errorf("no warning that upkeep outruns delivery: %v", p.Warnings)
	}
}

// fast is a supply whose plant is all there at the first window, after 4 yr, and runs a
// year later.
func fast() Supply {
	u := lantern()
	u.Delivery.FlightsPerWindow = 1e6
	return u
}

// With all plant there at 5 yr and a single store, the goal share x is reached
// B ln((1+o)/(1+o-x)) later.
func TestRun_TimeToGoal(t *testing.T) {
	d := demand(plain(3 * year))
	for _, over := range []float64{0, 0.01, 0.25, 2} {
		u := fast()
		u.Overbuild = over
		p := run(t, d, u)
		want := 5*year + 3*year*math.Log((1+over)/(1+over-0.99))
		near(t, fmt.Sprintf("time to goal at overbuild %g", over), p.TimeToGoal.Value, want, 5e-5)
		// A warming curve that flattens is within 1 % of its goal sooner.
		curve := func(b float64) float64 { return 25 * math.Sqrt(b/d.Burden) }
		q, err := Run(d, u, curve)
		if err != nil {
			t.Fatal(err)
		}
		want = 5*year + 3*year*math.Log((1+over)/(1+over-0.99*0.99))
		near(t, "time to goal on a root", q.TimeToGoal.Value, want, 5e-5)
	}
}

// Three windows by hand: the capacity steps, and the airborne mass after each step.
func TestRun_WindowByWindow(t *testing.T) {
	d := demand(plain(3 * year))
	u := lantern()
	p := run(t, d, u)
	u.Delivery.FlightsPerWindow = int(math.Ceil(p.Flights / 2.5))
	p = run(t, d, u)
	if p.Windows != 3 {
		t.Fatalf("%v windows, want 3", p.Windows)
	}
	spacing, b := u.Delivery.WindowSpacing, 3*year
	air := 0.0 // relative to the goal
	populations := newPopulations(d, u.ReleaseLoss)
	h := history{stages: localStages(u, p.Local), overbuilt: 1.25, stopAt: math.Inf(1)}
	c, _, err := buildUp(populations, &thermometer{warming: linear(d), area: area}, h, goal{25, 25}, 0)
	if err != nil {
		t.Fatal(err)
	}
	tread := p.LandedPerWindow / p.LandedMass
	near(t, "share a window", tread, 0.4, 1e-2)
	for k, share := range []float64{tread, 2 * tread} {
		from := 5*year + float64(k)*spacing
		supply := 1.25 * share
		air = supply + (air-supply)*math.Exp(-spacing/b)
		end := c.at(from + spacing*(1-1e-12))
		near(t, "capacity", end.capacity, p.Capacity*share, 1e-9)
		near(t, "airborne", end.aloft/1e10, air, 2e-5)
	}
	if before := c.at(4.99 * year); before.capacity != 0 || before.aloft != 0 {
		t.Errorf("before the first window: %+v", before)
	}
	// From 1.25 x full capacity the rest takes B ln((1.25 - air)/(1.25 - 0.99)).
	near(t, "time to goal", p.TimeToGoal.Value, 5*year+2*spacing+b*math.Log((1.25-air)/(1.25-0.99)), 5e-5)
}

// Many windows: the straight line agrees with the steps it stands for.
func TestRun_LongBuildUp(t *testing.T) {
	d := demand(ironStream(1e10))
	u := lantern()
	first := run(t, d, u)
	u.Delivery.FlightsPerWindow = int(first.Flights / (mostTreads - 0.5))
	steps := run(t, d, u)
	u.Delivery.FlightsPerWindow = int(first.Flights / (mostTreads + 0.5))
	line := run(t, d, u)
	if steps.Windows > mostTreads || line.Windows <= mostTreads {
		t.Fatalf("%v and %v windows do not straddle %d", steps.Windows, line.Windows, mostTreads)
	}
	near(t, "time to goal", line.TimeToGoal.Value, steps.TimeToGoal.Value, 0.02)
	near(t, "capacity at the end", line.BuildUp.Capacity[buildUpPoints-1], line.Capacity, 1e-9)
}

// Held at its goal the airborne mass never dips, and the production falls from the
// capacity to the sustaining rate while the ground store fills.
func TestRun_GoalIsHeld(t *testing.T) {
	s := ironStream(1e10)
	s.LiftTime, s.BurialTime = 5*year, 30*year
	u := fast()
	u.Overbuild = 3
	p := run(t, demand(s), u)
	held := false
	for i, w := range p.BuildUp.Warming {
		if held && math.Abs(w-25) > 1e-4 {
			t.Errorf("warming %g K at %g yr, want 25 K held", w, p.BuildUp.Time[i]/year)
		}
		held = held || w > 25-1e-6
		if p.BuildUp.Production[i] > p.BuildUp.Capacity[i]*(1+1e-9) {
			t.Errorf("production %g over capacity %g", p.BuildUp.Production[i], p.BuildUp.Capacity[i])
		}
	}
	if !held {
		t.Fatal("the goal is not held")
	}
	after := history{stages: localStages(u, p.Local), overbuilt: 4, stopAt: 2000 * year}
	populations := newPopulations(demand(s), u.ReleaseLoss)
	c, _, err := buildUp(populations, &thermometer{warming: linear(demand(s)), area: area}, after, goal{25, 25}, 0)
	if err != nil {
		t.Fatal(err)
	}
	near(t, "production at last", c.at(1999*year).production, p.ProductionRate, 1e-6)
	near(t, "ground at last", c.at(1999*year).ground, p.Streams[0].Ground, 1e-6)
	// Soon after the goal nothing much comes back yet: production is far above that.
	soon := c.at(p.TimeToGoal.Value + 0.1*year)
	if soon.production < 1.2*p.ProductionRate {
		t.Errorf("production soon after the goal is %g, sustaining %g: the store on the ground cannot be full", soon.production, p.ProductionRate)
	}
}

func TestRun_Never(t *testing.T) {
	d := demand(plain(3 * year))
	for _, c := range []struct {
		name, want string
		change     func(*Demand, *Supply)
	}{
		{"short of the goal", "short of the goal of 40 K", func(d *Demand, _ *Supply) { d.GoalWarming = 40 }},
		{"no warming wanted", "the goal is no warming", func(d *Demand, _ *Supply) { d.GoalWarming = 0 }},
		{"stopped", "supply ends after 6 yr", func(_ *Demand, u *Supply) { u.StopAt = 6 * year }},
		{"stopped before it began", "supply ends after 1 yr", func(_ *Demand, u *Supply) { u.StopAt = year }},
		{"few flights", "% of the sustaining supply", func(_ *Demand, u *Supply) { u.Route, u.Delivery.FlightsPerWindow = Shipped, 1 }},
	} {
		t.Run(c.name, func(t *testing.T) {
			d, u := d, fast()
			c.change(&d, &u)
			p, err := Run(d, u, linear(d))
			if err != nil {
				t.Fatal(err)
			}
			if p.TimeToGoal.Known() || !strings.Contains(p.TimeToGoal.Why, c.want) {
				t.Errorf("time to goal %+v, want a reason with %q", p.TimeToGoal, c.want)
			}
		})
	}
}

// After stop_at the airborne mass of a single store falls as exp(-t/B).
func TestRun_StopAt(t *testing.T) {
	d := demand(plain(3 * year))
	u := fast()
	u.StopAt = 60 * year
	p := run(t, d, u)
	near(t, "time to goal", p.TimeToGoal.Value, 5*year+3*year*math.Log(1.25/0.26), 5e-5)
	near(t, "half-loss time", p.HalfLossTime.Value, 3*year*math.Ln2, 5e-5)
	s := p.BuildUp
	for i, when := range s.Time {
		if when > u.StopAt {
			near(t, "after the stop", s.Airborne[i], 1e10*math.Exp(-(when-u.StopAt)/(3*year)), 1e-4)
			if s.Production[i] != 0 {
				t.Errorf("production %g after the stop", s.Production[i])
			}
		}
	}
	near(t, "end of the chart", s.Time[len(s.Time)-1], u.StopAt+3*p.HalfLossTime.Value, 1e-12)
	near(t, "ending", p.Ending.Airborne[endingPoints-1], 1e10/8, 1e-4)
}

// A design that cools, held at a burden, still has a schedule.
func TestRun_Cooling(t *testing.T) {
	d := demand(plain(3 * year))
	d.GoalWarming = -4
	p, err := Run(d, fast(), func(b float64) float64 { return -4 * b / d.Burden })
	if err != nil {
		t.Fatal(err)
	}
	if !p.TimeToGoal.Known() || !p.HalfLossTime.Known() {
		t.Errorf("no schedule: %+v %+v", p.TimeToGoal, p.HalfLossTime)
	}
}

// Two populations: each has its own survival and line; the supplies add.
func TestRun_TwoPopulations(t *testing.T) {
	a, b := plain(2*year), plain(8*year)
	a.Inventory, b.Inventory, b.Population = 4e9, 6e9, 1
	b.Material, b.Density = "aluminium", 2699
	d := demand(a, b)
	d.ReleaseSurvival = []float64{0.5, 0.9}
	p := run(t, d, fast())
	want := (4e9/(2*year)/0.5 + 6e9/(8*year)/0.9) / 0.98
	near(t, "production", p.ProductionRate, want, 1e-12)
	near(t, "filled once", p.Shipped.ParticleMass, (4e9/0.5+6e9/0.9)/0.98, 1e-12)
	near(t, "volume", p.VolumeRate, (4e9/(2*year)/0.5/7874+6e9/(8*year)/0.9/2699)/0.98, 1e-12)
	// The slow one decides: 0.4 + 0.6 x = 0.99 of the goal.
	x := (0.99 - 0.4) / 0.6
	near(t, "time to goal", p.TimeToGoal.Value, 5*year+8*year*math.Log(1.25/(1.25-x)), 5e-5)
	if !strings.Contains(fmt.Sprint(p.Warnings), "hematite gives iron, not aluminium") {
		t.Errorf("no warning on the feedstock: %v", p.Warnings)
	}
}

// Parting a stream in equal parts changes nothing.
func TestRun_SplitStream(t *testing.T) {
	whole := demand(ironStream(1e10))
	half := ironStream(0.5e10)
	parts := demand(half, half)
	a, b := run(t, whole, lantern()), run(t, parts, lantern())
	if diff := cmp.Diff(a, b, cmpopts.EquateApprox(1e-7, 1e-3), cmpopts.IgnoreFields(Programme{}, "Streams", "Balance")); diff != "" {
		t.Error(diff)
	}
}

// What goes into the release, the loose layer and the air comes out.
func TestRun_FlowsBalance(t *testing.T) {
	p := run(t, demand(ironStream(1e10)), lantern())
	for _, place := range []string{"mine", "plant", "release", "air", "loose layer"} {
		in, out := 0.0, 0.0
		for _, f := range p.Flows {
			if f.To == place {
				in += f.Rate
			}
			if f.From == place {
				out += f.Rate
			}
		}
		if place == "mine" {
			in = p.OreRate.Value
		}
		near(t, place, out, in, 1e-12)
	}
}

func TestRun_Warnings(t *testing.T) {
	u := fast()
	u.Energy.Reduction = 5e6
	p := run(t, demand(ironStream(1e10)), u)
	if !strings.Contains(fmt.Sprint(p.Warnings), "under the thermodynamic minimum of 6.65 MJ/kg") {
		t.Errorf("no warning: %v", p.Warnings)
	}
	u.Feedstock.Mineral = "none"
	p = run(t, demand(ironStream(1e10)), u)
	if p.MinimumReduction.Known() || len(p.Warnings) != 0 {
		t.Errorf("feedstock none: %+v %v", p.MinimumReduction, p.Warnings)
	}
}

func TestRun_Deterministic(t *testing.T) {
	d := demand(classes(ironStream(1e10), 5)...)
	if !reflect.DeepEqual(run(t, d, lantern()), run(t, d, lantern())) {
		t.Error("two runs differ")
	}
}

func TestRun_WarmingNotFinite(t *testing.T) {
	d := demand(ironStream(1e10))
	if _, err := Run(d, lantern(), func(float64) float64 { return math.NaN() }); err == nil {
		t.Error("no error for a warming that is not a number")
	}
	if _, err := Run(d, lantern(), nil); err == nil {
		t.Error("no error for no warming function")
	}
}

func TestCrossover(t *testing.T) {
	const spacing = 1000.0
	way := func(landed, perWindow float64) Way { return Way{LandedMass: landed, LandedPerWindowNext: perWindow} }
	// 500 kg ahead, losing 2 - 1 = 1 kg/s.
	near(t, "crossover", crossover(way(500, 1000), way(0, 2000), 2, spacing).Value, 500, 1e-12)
	if got := crossover(way(500, 3000), way(0, 2000), 2, spacing); got.Known() || !strings.Contains(got.Why, "never") {
		t.Errorf("plant that wears faster than particles are used: %+v", got)
	}
	if got := crossover(way(0, 0), way(0, 2000), 2, spacing); !got.Known() || got.Value != 0 {
		t.Errorf("no plant to land: %+v", got)
	}
}
