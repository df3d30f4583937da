package settling

import (
	"errors"
	"fmt"
	"math"
	"slices"

	"hazewright/settling/atmosphere"
)

// Passage says how like particles cross a column.
type Passage struct {
	// Bottom and Top are the heights [m] of the release: equal for a release at one
	// height, otherwise the particles are mixed into the gas between the two.
	Bottom, Top float64
	Eddy        Eddy
	// Deposition is the speed [m/s] of turbulent deposition on the ground, beside
	// the fall; 0 for none.
	Deposition float64
	// Sinks remove particles aloft.
	Sinks []ColumnSink
	// FallSpeedFactor multiplies every fall speed [1]; 1 for the speed as computed.
	FallSpeedFactor float64
	Grid            Grid
}

// ColumnSink is a loss aloft whose rate depends on height.
type ColumnSink struct {
	Name string
	Rate func(z float64) float64 // [1/s] at height z [m], 0 or more
}

// Stay is the steady state of a column of like particles under unit supply.
type Stay struct {
	Residence float64   // airborne mass per supply, the mean time aloft [s]
	ToGround  float64   // share of the supply that reaches the ground [1]
	ToSinks   []float64 // share that each sink removes, in the order given [1]
	Balance   float64   // ToGround and ToSinks summed, less 1: the error of the solution
	Profile   Profile
	Ground    Fall // the fall at the ground, factor included
}

// Profile is how particles are spread over height.
type Profile struct {
	Faces       []float64 // heights of the cells' edges [m], one more than cells
	Heights     []float64 // heights of the cells' centres [m]
	Density     []float64 // mass per volume over the airborne mass per area [1/m]
	MixingRatio []float64 // mass per mass of gas over its mean in the column [1]; 1 throughout when well mixed
	MeanHeight  float64   // mean height of the airborne mass [m]
}

// profile returns the profile of the amounts a, whose sum is total.
func (l *lattice) profile(a []float64, total float64) Profile {
	n := l.cells()
	p := Profile{Faces: slices.Clone(l.faces), Heights: slices.Clone(l.centres), Density: make([]float64, n), MixingRatio: make([]float64, n)}
	air := 0.0
	for _, m := range l.airMass {
		air += m
	}
	for i := range n {
		share := a[i] / total
		p.Density[i] = share / l.thickness(i)
		p.MixingRatio[i] = share * air / l.airMass[i]
		p.MeanHeight += share * l.centres[i]
	}
	return p
}

// Residence returns how long particles of the given kind stay in the column, where
// they go and how they are spread, in the steady state
//
//	d/dz [rho v q + rho K dq/dz] = k rho q - S
//
// with q the mixing ratio, v the [FallSpeed], K the eddy diffusivity, k the sum of
// the sinks and S the release; the flux to the ground is (v + deposition) rho q at
// z = 0. Finite volumes with exponential fluxes [ScharfetterGummel1969]. Limits: for
// K to infinity the residence tends to H/(v(0) + deposition), H the height of the
// column's gas at its density at the ground; for K to 0 to the integral of dz/v.
//
// With [DefaultCells] it is within 0.3 % of a fine grid where mixing is quick against
// the fall through one cell (v dz/K under about 0.1, dz some 200 m near the ground)
// and the release is not below the centre of the lowest cell, into which it is put
// otherwise. With weaker mixing the residence is too long by up to the fall through
// half a cell.
//
// Errors: a body that [Body.Check] refuses or that falls too fast ([FallSpeed]), a
// release above the height where the pressure is e^-8 of the ground's, a negative
// rate or deposition, a diffusivity or factor that is not positive.
func Residence(c atmosphere.Column, b Body, p Passage) (Stay, error) {
	if err := errors.Join(b.Check(), checkMotion(p.Deposition, p.FallSpeedFactor)); err != nil {
		return Stay{}, err
	}
	l, err := newLattice(c, p.Eddy, p.Grid)
	if err != nil {
		return Stay{}, err
	}
	n := l.cells()
	source, sinks, amount := make([]float64, n), make([]float64, n), make([]float64, n)
	if err := l.source(source, p.Bottom, p.Top); err != nil {
		return Stay{}, err
	}
	rates := make([][]float64, len(p.Sinks))
	for j, s := range p.Sinks {
		rates[j] = make([]float64, n)
		if s.Rate == nil {
			return Stay{}, fmt.Errorf("sink %q: no rate given", s.Name)
		}
		for i, z := range l.centres {
			k := s.Rate(z)
			if !(k >= 0) || math.IsInf(k, 0) {
				return Stay{}, fmt.Errorf("sink %q: rate %g 1/s at %g m is not a finite number of 0 or more", s.Name, k, z)
			}
			rates[j][i] = k
			sinks[i] += k
		}
	}
	t, err := l.transport(c.Gravity(), b, p.FallSpeedFactor, p.Deposition)
	if err != nil {
		return Stay{}, err
	}
	solve := newSolver(n)
	solve.factor(t, 0, sinks)
	r := Stay{Residence: solve.solve(t, source, amount), Ground: t.fall}
	r.ToGround = t.ground * amount[0]
	r.Balance = r.ToGround - 1
	for _, rate := range rates {
		share := 0.0
		for i, k := range rate {
			share += k * amount[i]
		}
		r.ToSinks = append(r.ToSinks, share)
		r.Balance += share
	}
	r.Profile = l.profile(amount, r.Residence)
	return r, nil
}

func checkMotion(deposition, factor float64) error {
	var errs []error
	if !(deposition >= 0) || math.IsInf(deposition, 0) {
		errs = append(errs, fmt.Errorf("deposition: %g m/s is not a finite number of 0 or more", deposition))
	}
	if !(factor > 0) || math.IsInf(factor, 0) {
		errs = append(errs, fmt.Errorf("fall speed factor: %g is not a positive finite number; use 1 for the speed as computed", factor))
	}
	return errors.Join(errs...)
}
