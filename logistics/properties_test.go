package logistics

import (
	"math"
	"testing"

	"pgregory.net/rapid"
)

// logBetween draws evenly in the logarithm.
func logBetween(t *rapid.T, name string, low, high float64) float64 {
	return math.Exp(rapid.Float64Range(math.Log(low), math.Log(high)).Draw(t, name))
}

func share(t *rapid.T, name string) float64 {
	return rapid.OneOf(rapid.Just(0.0), rapid.Just(1.0), rapid.Float64Range(1e-6, 1)).Draw(t, name)
}

func drawStream(t *rapid.T, population int) Stream {
	s := Stream{
		Material: "iron", Population: population,
		ParticleMass: logBetween(t, "particle mass", 1e-18, 1e-9), Density: 7874,
		Inventory:       logBetween(t, "inventory", 1, 1e14),
		NewResidence:    logBetween(t, "new residence", 100, 1000*year),
		LiftedResidence: logBetween(t, "lifted residence", 100, 1000*year),
		NewToGround:     share(t, "new to ground"),
		LiftedToGround:  share(t, "lifted to ground"),
		LiftTime:        logBetween(t, "lift time", 3600, 1000*year),
		BurialTime:      logBetween(t, "burial time", 86400, 1000*year),
		ReturnSingle:    share(t, "return single"),
	}
	if rapid.Bool().Draw(t, "never lifted") {
		s.LiftTime = math.Inf(1)
	}
	unit := s.perUnitSupply()
	s.AgglomerationRate = share(t, "clumping") * s.lostAloft(unit) / unit.lifetime()
	return s
}

func drawDemand(t *rapid.T) Demand {
	var streams []Stream
	for population := range rapid.IntRange(1, 2).Draw(t, "populations") {
		for range rapid.IntRange(1, 3).Draw(t, "classes") {
			streams = append(streams, drawStream(t, population))
		}
	}
	return demand(streams...)
}

func drawSupply(t *rapid.T) Supply {
	s := lantern()
	s.Route = rapid.SampledFrom([]string{Local, Shipped}).Draw(t, "route")
	s.Overbuild = share(t, "overbuild") * 3
	s.ReleaseLoss = rapid.Float64Range(0, 0.9).Draw(t, "release loss")
	s.Delivery.FlightsPerWindow = int(logBetween(t, "flights", 1, 1e7))
	s.Delivery.FirstWindow = share(t, "first window") * 20 * year
	s.StopAt = share(t, "stop at") * 200 * year
	return s
}

// Whatever the study: finite, closed, within capacity, never made beyond the goal.
func TestRun_Properties(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		d, s := drawDemand(t), drawSupply(t)
		p, err := Run(d, s, linear(d))
		if err != nil {
			t.Fatal(err)
		}
		if p.Balance.Closure > 1e-9 {
			t.Fatalf("mass balance %+v", p.Balance)
		}
		for _, series := range []Series{p.BuildUp, p.Ending} {
			for i := range series.Time {
				for _, v := range []float64{series.Time[i], series.Capacity[i], series.Production[i], series.Airborne[i], series.Ground[i], series.Warming[i]} {
					if math.IsNaN(v) || math.IsInf(v, 0) || v < 0 {
						t.Fatalf("point %d: %g", i, v)
					}
				}
				// Wind may lift more than the goal needs; then nothing is made.
				next := min(i+1, len(series.Time)-1)
				making := min(series.Production[max(i-1, 0)], series.Production[i], series.Production[next]) > 0
				if making && len(d.ReleaseSurvival) == 1 && series.Airborne[i] > d.inventory()*(1+1e-5) {
					t.Fatalf("airborne %g over the goal %g", series.Airborne[i], d.inventory())
				}
				if series.Production[i] > p.Capacity*(1+1e-9) {
					t.Fatalf("production %g over the capacity %g", series.Production[i], p.Capacity)
				}
			}
		}
		if !p.HalfLossTime.Known() || p.HalfLossTime.Value <= 0 {
			t.Fatalf("half-loss time %+v", p.HalfLossTime)
		}
		for _, w := range []Way{p.Local, p.Shipped} {
			if w.TimeToGoal.Known() && w.TimeToGoal.Value < s.Delivery.FirstWindow {
				t.Fatalf("goal at %g s, before the first window", w.TimeToGoal.Value)
			}
			if w.Windows*float64(s.Delivery.FlightsPerWindow) < w.Flights {
				t.Fatalf("%g windows for %g flights", w.Windows, w.Flights)
			}
		}
	})
}

// Twice the inventory takes twice the supply, plant and landed mass, and the ending is
// as long.
func TestRun_Scales(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		d, s := drawDemand(t), drawSupply(t)
		one, err := Run(d, s, linear(d))
		if err != nil {
			t.Fatal(err)
		}
		double := d
		double.Streams = append([]Stream(nil), d.Streams...)
		for i := range double.Streams {
			double.Streams[i].Inventory *= 2
		}
		double.Burden *= 2
		two, err := Run(double, s, linear(double))
		if err != nil {
			t.Fatal(err)
		}
		for _, pair := range [][2]float64{
			{one.ProductionRate, two.ProductionRate}, {one.VolumeRate, two.VolumeRate}, {one.NumberRate, two.NumberRate},
			{one.GroundStore, two.GroundStore}, {one.Power, two.Power}, {one.LandedMass, two.LandedMass},
			{one.LandedPerWindowNext, two.LandedPerWindowNext},
		} {
			if math.Abs(pair[1]-2*pair[0]) > 1e-9*pair[1] {
				t.Fatalf("%g and %g, want twice", pair[0], pair[1])
			}
		}
		if math.Abs(one.HalfLossTime.Value-two.HalfLossTime.Value) > 1e-6*one.HalfLossTime.Value {
			t.Fatalf("half-loss times %g, %g", one.HalfLossTime.Value, two.HalfLossTime.Value)
		}
	})
}

// Whatever keeps particles aloft longer never raises the supply.
func TestSteady_Monotone(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		s := drawStream(t, 0)
		before := s.Steady().Supply
		more := 1 + rapid.Float64Range(0, 3).Draw(t, "more")
		switch rapid.IntRange(0, 4).Draw(t, "what") {
		case 0:
			s.BurialTime *= more
		case 1:
			s.NewResidence *= more
		case 2:
			s.LiftedResidence *= more
		case 3:
			s.LiftTime /= more
		case 4:
			s.ReturnSingle = min(1, s.ReturnSingle*more)
		}
		if after := s.Steady().Supply; after > before*(1+1e-12) {
			t.Fatalf("supply rises from %g to %g", before, after)
		}
	})
}
