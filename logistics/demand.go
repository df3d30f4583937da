package logistics

import (
	"errors"
	"fmt"
	"math"
)

// Demand is what must be held aloft, from the optics, warming and settling stages.
type Demand struct {
	Streams         []Stream
	PlanetArea      float64   // m2
	Burden          float64   // airborne at the goal [kg/m2]; the streams' inventories sum to Burden x PlanetArea
	GoalWarming     float64   // K; what Burden gives where the goal is not itself a warming
	ReleaseSurvival []float64 // share that survives the release plume single, per population
}

// Stream is one size class of one population, held at its steady state at the goal.
type Stream struct {
	Name         string
	Material     string
	Population   int     // index; clumping scales with the airborne mass of all streams of the population
	ParticleMass float64 // kg, for the number rate
	Density      float64 // kg/m3, for the volume rate
	Inventory    float64 // airborne over the planet at the goal [kg]

	// Mean time aloft per visit [s] of mass just made and of mass that wind has lifted,
	// with all losses of the steady state at the goal acting, and the share of a visit
	// that ends on the ground. The rest is lost to sinks and clumping.
	NewResidence, LiftedResidence float64
	NewToGround, LiftedToGround   float64

	// AgglomerationRate is the part of the loss at the goal [1/s], averaged over the
	// airborne mass of the stream, that scales with the airborne mass of its population:
	// clumping among the design's own particles. Clumping on natural dust does not scale
	// and is left out here.
	AgglomerationRate float64

	LiftTime     float64 // mean wait on the ground before wind lifts it [s]; +Inf = never
	BurialTime   float64 // mean time on the ground until it is out of reach [s]
	ReturnSingle float64 // share of the lifted mass that comes back single
}

// inventory returns the airborne mass of all streams at the goal [kg].
func (d Demand) inventory() float64 {
	sum := 0.0
	for _, s := range d.Streams {
		sum += s.Inventory
	}
	return sum
}

// Validate returns nil or every field that cannot be used, joined, each a [*FieldError].
func (d Demand) Validate() error {
	var c checker
	if len(d.Streams) == 0 {
		c.errs = append(c.errs, &FieldError{"streams", "an empty list", "one stream or more"})
	}
	c.positive("planet_area", d.PlanetArea, 1e20, "m2")
	c.positive("burden", d.Burden, 1e6, "kg/m2")
	c.within("goal.warming", d.GoalWarming, -1e4, 1e4, "K")
	for i, v := range d.ReleaseSurvival {
		c.positive(fmt.Sprintf("release_survival[%d]", i), v, 1, "")
	}
	for i, s := range d.Streams {
		s.validate(&c, fmt.Sprintf("streams[%d]", i), len(d.ReleaseSurvival))
	}
	if len(c.errs) == 0 {
		want := d.Burden * d.PlanetArea
		if got := d.inventory(); math.Abs(got-want) > 1e-6*want {
			c.errs = append(c.errs, &FieldError{"streams: sum of inventories", withUnit(got, "kg"),
				fmt.Sprintf("burden x planet area = %s within 1e-6", withUnit(want, "kg"))})
		}
	}
	return errors.Join(c.errs...)
}

func (s Stream) validate(c *checker, at string, populations int) {
	if s.Population < 0 || s.Population >= populations {
		c.errs = append(c.errs, &FieldError{at + ".population", fmt.Sprint(s.Population),
			fmt.Sprintf("the %d populations that have a release survival", populations)})
	}
	c.positive(at+".particle_mass", s.ParticleMass, heaviest, "kg")
	c.positive(at+".density", s.Density, 1e5, "kg/m3")
	c.within(at+".inventory", s.Inventory, 0, heaviest, "kg")
	c.within(at+".new_residence", s.NewResidence, 1e-3, longest, "s")
	c.within(at+".lifted_residence", s.LiftedResidence, 1e-3, longest, "s")
	c.within(at+".new_to_ground", s.NewToGround, 0, 1, "")
	c.within(at+".lifted_to_ground", s.LiftedToGround, 0, 1, "")
	if !math.IsInf(s.LiftTime, 1) {
		c.within(at+".lift_time", s.LiftTime, 1, longest, "s")
	}
	c.within(at+".burial_time", s.BurialTime, 1, longest, "s")
	c.within(at+".return_single", s.ReturnSingle, 0, 1, "")
	if len(c.errs) > 0 {
		return // the bound below needs the rest to be sound
	}
	// The slack is for a column whose clumping has converged to 1e-6 only; the share is
	// cut at 1 where it is used.
	steady := s.perUnitSupply()
	most := (s.lostAloft(steady) + 1e-6) / steady.lifetime()
	c.within(at+".agglomeration_rate", s.AgglomerationRate, 0, most*(1+1e-4), "1/s")
}
