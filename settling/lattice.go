package settling

import (
	"errors"
	"fmt"
	"math"

	"hazewright/settling/atmosphere"
)

// Eddy is the eddy diffusivity [m2/s] at height z [m], positive everywhere.
type Eddy func(z float64) float64

// ConstantEddy returns the same diffusivity k [m2/s] at every height.
func ConstantEddy(k float64) Eddy { return func(float64) float64 { return k } }

// EddyPoint is the eddy diffusivity at one height.
type EddyPoint struct {
	Height float64 // [m]
	Value  float64 // [m2/s]
}

// EddyTable returns the diffusivity through the given points, linear between them
// and held at the ends. Heights must increase and values be positive and finite.
func EddyTable(points []EddyPoint) (Eddy, error) {
	if len(points) == 0 {
		return nil, errors.New("eddy diffusivity: no points given")
	}
	p := append([]EddyPoint(nil), points...)
	for i, q := range p {
		if !(q.Value > 0) || math.IsInf(q.Value, 0) {
			return nil, fmt.Errorf("eddy diffusivity: %g m2/s at %g m is not a positive finite number", q.Value, q.Height)
		}
		if math.IsNaN(q.Height) || math.IsInf(q.Height, 0) || (i > 0 && q.Height <= p[i-1].Height) {
			return nil, fmt.Errorf("eddy diffusivity: height %g m (point %d) is not above the one before; heights must be finite and increase", q.Height, i+1)
		}
	}
	return func(z float64) float64 {
		i := 0
		for i < len(p) && p[i].Height <= z {
			i++
		}
		switch i {
		case 0:
			return p[0].Value
		case len(p):
			return p[len(p)-1].Value
		}
		a, b := p[i-1], p[i]
		return a.Value + (b.Value-a.Value)*(z-a.Height)/(b.Height-a.Height)
	}, nil
}

// Grid sets the cells of the column. The zero value is the default of
// [DefaultCells] cells, each thicker than the one below, up to the height where the
// pressure is e^-10 of that at the ground.
type Grid struct {
	Cells int // number of cells, 20 to 2000; 0 for the default
}

// DefaultCells is the number of cells of a column where none is given. With it the
// residence of thin rods agrees with one of 800 equal cells within 0.3 %.
const DefaultCells = 120

// growth is the thickness of the topmost over the lowest cell [1], and decades the
// depth of the column in powers of e of pressure. Releases must lie where the
// pressure is above e^-releaseDepth of the ground's.
const (
	growth       = 8.0
	depth        = 10.0
	releaseDepth = 8.0
)

// lattice is the grid of a column with the gas on it. It does not change.
type lattice struct {
	faces   []float64          // n+1 heights [m]
	centres []float64          // n heights [m]
	airMass []float64          // n masses of gas per area [kg/m2]
	gas     []atmosphere.State // at the faces but the topmost
	mid     []atmosphere.State // at the centres
	eddy    []float64          // at the faces but the topmost [m2/s]
	highest float64            // highest release [m]
}

func newLattice(c atmosphere.Column, eddy Eddy, g Grid) (*lattice, error) {
	n := g.Cells
	if n == 0 {
		n = DefaultCells
	}
	if n < 20 || n > 2000 {
		return nil, fmt.Errorf("column: %d cells is outside 20 to 2000", n)
	}
	if eddy == nil {
		return nil, errors.New("column: no eddy diffusivity given")
	}
	p0 := c.SurfacePressure()
	top, err := c.HeightOf(p0 * math.Exp(-depth))
	if err != nil {
		return nil, fmt.Errorf("column: the gas is too thin: %w", err)
	}
	highest, err := c.HeightOf(p0 * math.Exp(-releaseDepth))
	if err != nil {
		return nil, err
	}
	l := &lattice{
		faces:   make([]float64, n+1),
		centres: make([]float64, n),
		airMass: make([]float64, n),
		gas:     make([]atmosphere.State, n),
		mid:     make([]atmosphere.State, n),
		eddy:    make([]float64, n),
		highest: highest,
	}
	ratio := math.Pow(growth, 1/float64(n-1))
	for i := range l.faces {
		l.faces[i] = top * math.Expm1(float64(i)*math.Log(ratio)) / math.Expm1(float64(n)*math.Log(ratio))
	}
	l.faces[n] = top
	pTop := p0 * math.Exp(-depth)
	for i := range n {
		if l.gas[i], err = c.At(l.faces[i]); err != nil {
			return nil, err
		}
		l.centres[i] = (l.faces[i] + l.faces[i+1]) / 2
		if l.mid[i], err = c.At(l.centres[i]); err != nil {
			return nil, err
		}
		l.eddy[i] = eddy(l.faces[i])
		if !(l.eddy[i] > 0) || math.IsInf(l.eddy[i], 0) {
			return nil, fmt.Errorf("eddy diffusivity: %g m2/s at %g m is not a positive finite number", l.eddy[i], l.faces[i])
		}
	}
	for i := range n {
		above := pTop
		if i < n-1 {
			above = l.gas[i+1].Pressure
		}
		l.airMass[i] = (l.gas[i].Pressure - above) / c.Gravity()
	}
	return l, nil
}

func (l *lattice) cells() int { return len(l.centres) }

func (l *lattice) thickness(i int) float64 { return l.faces[i+1] - l.faces[i] }

// cellOf returns the cell that holds the height z.
func (l *lattice) cellOf(z float64) int {
	i := 0
	for i < l.cells()-1 && l.faces[i+1] < z {
		i++
	}
	return i
}

// source writes to s the share of a unit supply that enters each cell: at one
// height (bottom equal to top), split between the two nearest centres so that its
// mean height is exact (all of it in the lowest cell below that cell's centre), or
// mixed into the gas between two heights.
func (l *lattice) source(s []float64, bottom, top float64) error {
	if !(bottom >= 0 && bottom <= top && top <= l.highest) {
		return fmt.Errorf("release between %g m and %g m: heights must lie within 0 m to %.4g m (where the pressure is e^-%g of the ground's), the lower first",
			bottom, top, l.highest, releaseDepth)
	}
	clear(s)
	if bottom == top {
		if bottom <= l.centres[0] {
			s[0] = 1
			return nil
		}
		j := 0
		for l.centres[j+1] < bottom {
			j++
		}
		w := (bottom - l.centres[j]) / (l.centres[j+1] - l.centres[j])
		s[j], s[j+1] = 1-w, w
		return nil
	}
	total := 0.0
	for i := range s {
		low, high := max(bottom, l.faces[i]), min(top, l.faces[i+1])
		if high > low {
			s[i] = l.airMass[i] * (high - low) / l.thickness(i)
			total += s[i]
		}
	}
	for i := range s {
		s[i] /= total
	}
	return nil
}

// transport holds the rates at which the particles of one cell leave for its
// neighbours and for the ground.
type transport struct {
	down   []float64 // from cell i to i-1, i >= 1 [1/s]
	up     []float64 // from cell i to i+1 [1/s]
	ground float64   // from cell 0 to the ground [1/s]
	foot   float64   // concentration at the ground per amount in cell 0 [1/m]
	fall   Fall      // at the ground
	fast   float64   // lowest height [m] at which the fall is too fast for a drag that grows with speed, +Inf for none
}

// bernoulli returns x/(e^x - 1), 1 at 0.
func bernoulli(x float64) float64 {
	if x == 0 {
		return 1
	}
	return x / math.Expm1(x)
}

// transport returns the rates for particles that fall by gravity (times factor)
// and are mixed by the eddies. Between two centres a distance h apart the downward
// flux J = rho (v q + K dq/dz) is that of the exact solution with constant v and K,
// so that with Pe = v h/K
//
//	J = rho (K/h) [B(-Pe) q_above - B(Pe) q_below],   B(x) = x/(e^x - 1)
//
// [ScharfetterGummel1969]; at the ground the same over half a cell, with the flux
// (v + deposition) rho q there.
func (l *lattice) transport(gravity float64, b Body, factor, deposition float64) (*transport, error) {
	n := l.cells()
	t := &transport{down: make([]float64, n), up: make([]float64, n), fast: math.Inf(1)}
	for i := range n {
		f, err := fall(l.gas[i], gravity, b)
		if err != nil {
			return nil, fmt.Errorf("at %.4g m: %w", l.faces[i], err)
		}
		v := f.Speed * factor
		if math.IsInf(t.fast, 1) && v > fastShare*l.gas[i].MolecularSpeed {
			t.fast = l.faces[i]
		}
		if i == 0 {
			t.fall = f
			t.fall.Speed = v
			h := l.centres[0]
			pe := v * h / l.eddy[0]
			back := bernoulli(pe)
			q := (back + pe) / (back + pe*(1+deposition/v)) // at the ground, for 1 at the centre
			t.foot = l.gas[0].Density * q / l.airMass[0]
			t.ground = (v + deposition) * t.foot
			continue
		}
		h := l.centres[i] - l.centres[i-1]
		k := l.eddy[i] / h
		back := bernoulli(v / k)
		t.down[i] = l.gas[i].Density * (v + k*back) / l.airMass[i]
		t.up[i-1] = l.gas[i].Density * k * back / l.airMass[i-1]
	}
	return t, nil
}

// solver finds steady amounts in the cells. It is reused between solves and not
// safe for use by two goroutines.
type solver struct {
	inv  []float64 // 1/(rate out of cell i, once all above is eliminated)
	pass []float64 // share of what enters cell i that ends up below it
}

func newSolver(n int) *solver {
	return &solver{inv: make([]float64, n), pass: make([]float64, n)}
}

// factor prepares the solver for the transport and the uniform sink [1/s], plus the
// sink of each cell where perCell is not nil.
//
// Cells are eliminated from the top down. What a cell gains from above and what it
// loses for good are both sums of positive terms, so nothing cancels and every
// amount is good to rounding error, however much faster mixing is than removal;
// the general tridiagonal elimination, which carries the diagonal, loses as many
// digits as the two rates are apart.
func (s *solver) factor(t *transport, sink float64, perCell []float64) {
	n := len(s.inv)
	at := func(i int) float64 {
		if perCell == nil {
			return sink
		}
		return sink + perCell[i]
	}
	lost := at(n - 1) // rate at which cell i loses for good, itself or by way of cells above
	for i := n - 1; i > 0; i-- {
		s.inv[i] = 1 / (t.down[i] + lost)
		s.pass[i] = t.down[i] * s.inv[i]
		lost = at(i-1) + t.up[i-1]*(lost*s.inv[i])
	}
	s.inv[0] = 1 / (t.ground + lost)
}

// solve writes to a the steady amount in each cell, in the unit of source x s, for
// the supply source, and returns the sum. factor must have been called for t.
func (s *solver) solve(t *transport, source, a []float64) float64 {
	carry := 0.0
	for i := len(a) - 1; i > 0; i-- {
		a[i] = source[i] + carry
		carry = a[i] * s.pass[i]
	}
	a[0] = (source[0] + carry) * s.inv[0]
	sum := a[0]
	for i := 1; i < len(a); i++ {
		a[i] = (a[i] + t.up[i-1]*a[i-1]) * s.inv[i]
		sum += a[i]
	}
	return sum
}
