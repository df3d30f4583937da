package settling

import (
	"errors"
	"fmt"
	"math"
)

// Member is one size of a population.
type Member struct {
	Body   Body
	Number float64 // relative number aloft, 0 or more; any scale
}

// Population is one kind of particle with its spread of sizes, as the nodes of a
// quadrature over the number distribution aloft at steady state.
type Population struct {
	Nodes []Member
	// Typical is the member with whose kernel all meet; the number-median one of Nodes
	// if its shape is empty.
	Typical Body
}

// Sink is a loss aloft at the same rate at every height, for instance burial by
// seasonal frost: the share carried down times the share not returned, as a rate.
type Sink struct {
	Name string
	Rate float64 // [1/s], 0 or more
}

// Fate says what happens to a population between its release and its end.
type Fate struct {
	ReleaseHeight float64 // of new particles [m]
	LiftHeight    float64 // to which wind brings lifted particles [m]
	Eddy          Eddy
	Deposition    float64 // speed of turbulent deposition beside the fall [m/s]
	// LiftTime is the mean time [s] a settled particle waits before wind lifts it,
	// and BurialTime the mean time [s] until it is out of reach for good. Both run
	// at once. +Inf says never; not both may be.
	LiftTime, BurialTime float64
	Sinks                []Sink
	Sticking             float64 // share of meetings that stick, 0 to 1
	AggregateValue       float64 // share of its worth a particle keeps in an aggregate, 0 to 1
	Charge               float64 // mean like-sign elementary charges per particle
	ReturnSingle         float64 // share of lifted mass that comes back as single particles, 0 to 1
	FallSpeedFactor      float64 // multiplies every fall speed; 1 as computed
	KernelFactor         float64 // multiplies the collision kernel; 1 as computed
	Grid                 Grid
}

func (p Population) check() error {
	if len(p.Nodes) == 0 {
		return errors.New("population: no members given")
	}
	var errs []error
	if p.Typical.Shape != "" {
		if err := p.Typical.Check(); err != nil {
			errs = append(errs, fmt.Errorf("population's typical member: %w", err))
		}
	}
	total := 0.0
	for i, m := range p.Nodes {
		if err := m.Body.Check(); err != nil {
			errs = append(errs, fmt.Errorf("population member %d: %w", i+1, err))
		}
		if !(m.Number >= 0) || math.IsInf(m.Number, 0) {
			errs = append(errs, fmt.Errorf("population member %d: number %g is not a finite number of 0 or more", i+1, m.Number))
		}
		total += m.Number
	}
	if len(errs) == 0 && (!(total > 0) || math.IsInf(total, 0)) {
		errs = append(errs, fmt.Errorf("population: the numbers sum to %g; the sum must be positive and finite", total))
	}
	return errors.Join(errs...)
}

func (f Fate) check() error {
	errs := []error{checkMotion(f.Deposition, f.FallSpeedFactor)}
	share := func(name string, v float64) {
		if !(v >= 0 && v <= 1) {
			errs = append(errs, fmt.Errorf("%s: %g is outside 0 to 1", name, v))
		}
	}
	wait := func(name string, v float64) {
		if !(v > 0) {
			errs = append(errs, fmt.Errorf("%s: %g s is not above 0; +Inf says never", name, v))
		}
	}
	wait("lift time", f.LiftTime)
	wait("burial time", f.BurialTime)
	if math.IsInf(f.LiftTime, 1) && math.IsInf(f.BurialTime, 1) {
		errs = append(errs, errors.New("lift time and burial time are both never: the ground store would grow without end; give one of them"))
	}
	share("sticking", f.Sticking)
	share("aggregate value", f.AggregateValue)
	share("return single", f.ReturnSingle)
	if !(f.KernelFactor > 0) || math.IsInf(f.KernelFactor, 0) {
		errs = append(errs, fmt.Errorf("kernel factor: %g is not a positive finite number; use 1 for the kernel as computed", f.KernelFactor))
	}
	if math.IsNaN(f.Charge) || math.Abs(f.Charge) > maxCharge {
		errs = append(errs, fmt.Errorf("charge: %g elementary charges is outside -%g to %g", f.Charge, maxCharge, maxCharge))
	}
	for _, s := range f.Sinks {
		if !(s.Rate >= 0) || math.IsInf(s.Rate, 0) {
			errs = append(errs, fmt.Errorf("sink %q: rate %g 1/s is not a finite number of 0 or more", s.Name, s.Rate))
		}
	}
	return errors.Join(errs...)
}

// exchange is the traffic between the air and the loose ground.
type exchange struct {
	lift, bury float64 // rates [1/s]
	single     float64 // share of what is lifted that returns as single particles
}

func (f Fate) exchange() exchange {
	return exchange{lift: 1 / f.LiftTime, bury: 1 / f.BurialTime, single: f.ReturnSingle}
}

// returns is the chance that a settled particle returns single, and its
// complement, each a sum of positive terms.
func (e exchange) returns() (p, not float64) {
	out := e.lift + e.bury
	return e.single * e.lift / out, (e.bury + (1-e.single)*e.lift) / out
}
