package settling

import (
	"errors"
	"fmt"
	"math"
	"sort"

	"hazewright/settling/atmosphere"
)

// Model is a population in a column with its fate, ready to be solved at any
// burden. It does not change once made and may be shared between goroutines.
type Model struct {
	fate       Fate
	column     atmosphere.Column
	lattice    *lattice
	lanes      []lane
	median     Body
	meanMass   float64   // of a particle aloft [kg]
	sinks      float64   // sum of the uniform sinks [1/s]
	kernel     []float64 // effective own-kind loss constant at each centre [m3/s]
	newSource  []float64 // share of new supply entering each cell
	liftSource []float64 // the same of lifted supply
	fallTime   float64   // from release to the ground with no loss aloft [s]
	alone      []float64 // lifetime by each sink, then burial, then clumps, alone [s]; +Inf where it does not act
}

// lane is one member of the population on its way through the column.
type lane struct {
	body      Body
	transport *transport
	number    float64 // share of the number aloft
	mass      float64 // share of the mass aloft
}

// passage is what the column does to one member under a given total rate of loss
// aloft.
type passage struct {
	stayNew, stayLift     float64 // airborne per unit supply, new and lifted [s]
	groundNew, groundLift float64 // share of each that reaches the ground
	lifted                float64 // returned single, per new supply
	life                  float64 // airborne per new supply, returns included [s]
}

// NewModel prepares the population and its fate in the column: fall speeds at every
// height, kernels, and what needs no burden. Errors as [Suspend].
func NewModel(c atmosphere.Column, pop Population, f Fate) (*Model, error) {
	if err := errors.Join(pop.check(), f.check()); err != nil {
		return nil, err
	}
	l, err := newLattice(c, f.Eddy, f.Grid)
	if err != nil {
		return nil, err
	}
	n := l.cells()
	f.Sinks = append([]Sink(nil), f.Sinks...)
	m := &Model{fate: f, column: c, lattice: l, newSource: make([]float64, n), liftSource: make([]float64, n)}
	if err := l.source(m.newSource, f.ReleaseHeight, f.ReleaseHeight); err != nil {
		return nil, err
	}
	if err := l.source(m.liftSource, f.LiftHeight, f.LiftHeight); err != nil {
		return nil, fmt.Errorf("lift height: %w", err)
	}
	for _, s := range f.Sinks {
		m.sinks += s.Rate
	}
	if err := m.addLanes(pop); err != nil {
		return nil, err
	}
	if m.median = pop.Typical; m.median.Shape == "" {
		m.median = m.medianBody()
	}
	m.kernel = make([]float64, n)
	if effect := f.Sticking * f.KernelFactor * (1 - f.AggregateValue); effect > 0 {
		for i, s := range l.mid {
			m.kernel[i] = effect * kernel(s, m.median) * chargeFactor(s, m.median, f.Charge)
		}
	}
	m.loneLosses()
	return m, nil
}

// addLanes turns the members of the population that have a number into lanes.
func (m *Model) addLanes(pop Population) error {
	total := 0.0
	for _, q := range pop.Nodes {
		total += q.Number
	}
	for _, q := range pop.Nodes {
		share := q.Number / total
		if share == 0 {
			continue
		}
		t, err := m.lattice.transport(m.column.Gravity(), q.Body, m.fate.FallSpeedFactor, m.fate.Deposition)
		if err != nil {
			return err
		}
		m.lanes = append(m.lanes, lane{body: q.Body, transport: t, number: share})
		m.meanMass += share * q.Body.Mass
	}
	for i := range m.lanes {
		m.lanes[i].mass = m.lanes[i].number * m.lanes[i].body.Mass / m.meanMass
	}
	return nil
}

// medianBody returns the lightest body at or below which half of the number lies.
func (m *Model) medianBody() Body {
	order := append([]lane(nil), m.lanes...)
	sort.SliceStable(order, func(i, j int) bool { return order[i].body.Mass < order[j].body.Mass })
	sum := 0.0
	for _, l := range order {
		sum += l.number
		if sum >= 0.5-1e-9 {
			return l.body
		}
	}
	return order[len(order)-1].body
}

// loneLosses finds the fall time and the lifetime each loss but agglomeration would
// give if it acted alone. A loss aloft acts alone when all that settles comes back
// at the lift height; burial when all that is lifted is single and nothing is lost
// aloft; clumps when nothing is buried and nothing is lost aloft.
func (m *Model) loneLosses() {
	w := m.newWork()
	w.pass(0, 0, 1)
	m.fallTime = w.lifetime()
	for _, s := range m.fate.Sinks {
		life := math.Inf(1)
		if s.Rate > 0 {
			w.pass(s.Rate, 1, 0)
			life = w.lifetime()
		}
		m.alone = append(m.alone, life)
	}
	e := m.fate.exchange()
	burial, clumps := math.Inf(1), math.Inf(1)
	if e.bury > 0 {
		w.pass(0, e.lift/(e.lift+e.bury), e.bury/(e.lift+e.bury))
		burial = w.lifetime()
	}
	if e.lift > 0 && e.single < 1 {
		w.pass(0, e.single, 1-e.single)
		clumps = w.lifetime()
	}
	m.alone = append(m.alone, burial, clumps)
}

// work is the storage of one solution; each goroutine needs its own.
type work struct {
	m        *Model
	solver   *solver
	fresh    []float64 // amounts of new mass in the cells under unit supply
	lifted   []float64 // the same of lifted mass
	passages []passage // of each lane
	number   []float64 // share of the number aloft in each cell
	mass     []float64 // share of the mass aloft in each cell
	foot     float64   // number per volume at the ground over number per area aloft [1/m]
}

func (m *Model) newWork() *work {
	n := m.lattice.cells()
	return &work{
		m: m, solver: newSolver(n), passages: make([]passage, len(m.lanes)),
		fresh: make([]float64, n), lifted: make([]float64, n), number: make([]float64, n), mass: make([]float64, n),
	}
}

// pass solves the column of every lane under the rate of loss [1/s] aloft, when a
// settled particle returns with the chance p; not is 1 - p. Not both loss and not
// may be 0.
func (w *work) pass(loss, p, not float64) {
	clear(w.number)
	clear(w.mass)
	w.foot = 0
	for j, l := range w.m.lanes {
		w.solver.factor(l.transport, loss, nil)
		var q passage
		q.stayNew = w.solver.solve(l.transport, w.m.newSource, w.fresh)
		q.stayLift = w.solver.solve(l.transport, w.m.liftSource, w.lifted)
		q.groundNew = l.transport.ground * w.fresh[0]
		q.groundLift = l.transport.ground * w.lifted[0]
		// 1 - p groundLift = not + p (1 - groundLift), and what does not reach the
		// ground is lost aloft: loss x stayLift. No digits are lost this way.
		q.lifted = p * q.groundNew / (not + p*loss*q.stayLift)
		q.life = q.stayNew + q.lifted*q.stayLift
		w.passages[j] = q
		for i := range w.fresh {
			share := (w.fresh[i] + q.lifted*w.lifted[i]) / q.life
			w.number[i] += l.number * share
			w.mass[i] += l.mass * share
		}
		w.foot += l.number * l.transport.foot * (w.fresh[0] + q.lifted*w.lifted[0]) / q.life
	}
}

// lifetime returns the airborne mass over the new supply of the last pass [s]: the
// mean over the lanes' lives, harmonic by airborne mass.
func (w *work) lifetime() float64 {
	sum := 0.0
	for j, l := range w.m.lanes {
		sum += l.mass / w.passages[j].life
	}
	return 1 / sum
}

// meeting returns the rate [1/s] at which particles are lost to their own kind for
// the profile of the last pass and the number aloft per area, column [1/m2]:
//
//	k = integral of K n^2 dz / integral of n dz
func (w *work) meeting(column float64) float64 {
	sum := 0.0
	for i, s := range w.number {
		sum += w.m.kernel[i] * s * s / w.m.lattice.thickness(i)
	}
	return column * sum
}

// mixed sets the profile to the well-mixed one.
func (w *work) mixed() {
	total := 0.0
	for _, a := range w.m.lattice.airMass {
		total += a
	}
	for i, a := range w.m.lattice.airMass {
		w.number[i] = a / total
	}
}

// The tolerance on the rate of agglomeration [1] and the most steps to reach it.
const (
	meetingTolerance = 1e-6
	maxSteps         = 40
)

// agglomerate finds the rate k [1/s] of loss by agglomeration that the profile under
// k gives, leaves that profile in w, and returns k with the number of steps. sinks
// is the rate of the other losses aloft, p and not as in pass.
//
// With h(ln k) = ln(k of the profile) - ln k the first step goes half of h, the
// following ones to the zero of the secant as long as its slope is between -4 and
// -1/4, which holds where the rate responds as a smooth power of itself, and half of
// h otherwise. At least two steps are made.
func (w *work) agglomerate(column, sinks, p, not float64) (k float64, steps int, err error) {
	w.mixed()
	k = w.meeting(column)
	if k == 0 {
		if sinks > 0 || not > 0 {
			w.pass(sinks, p, not)
		}
		return 0, 1, nil
	}
	var lastX, lastH float64
	x := math.Log(k)
	for steps = 1; steps <= maxSteps; steps++ {
		k = math.Exp(x)
		w.pass(k+sinks, p, not)
		h := math.Log(w.meeting(column)) - x
		if math.Abs(h) <= meetingTolerance && steps >= 2 {
			return k, steps, nil
		}
		step := h / 2
		if slope := (h - lastH) / (x - lastX); steps > 1 && slope < -0.25 && slope > -4 {
			step = -h / slope
		}
		lastX, lastH = x, h
		x += step
	}
	return 0, maxSteps, fmt.Errorf("agglomeration: after %d steps the loss rate still changes between %.6g and %.6g 1/s (residual %.2g, tolerance %g)",
		maxSteps, math.Exp(lastX), math.Exp(x), math.Abs(lastH), meetingTolerance)
}
