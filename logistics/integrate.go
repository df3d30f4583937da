package logistics

import (
	"fmt"
	"math"
)

// Time steps by TR-BDF2, a second-order, L-stable implicit Runge-Kutta method with a
// third-order error estimate [HoseaShampine1996]. Every stage is the solution of
//
//	Y = r + h d f(Y),
//
// which for known relative airborne mass x is a triangular solve per stream, so that
// only the scalar x (clumping) and, at the goal, the scalar supply are sought.
const (
	trGamma = 2 - math.Sqrt2
	trD     = trGamma / 2
	trW     = math.Sqrt2 / 4

	// Differences between the second- and third-order weights.
	trE1 = trW - (1-trW)/3
	trE2 = trW - (3*trW+1)/3
	trE3 = trD - trD/3

	stepTolerance = 2e-7 // local error / goal mass
	mostSteps     = 200000
)

// node is one end of a time step, kept for dense output.
type node struct {
	time                 float64
	aloft, aloftRate     float64
	ground, groundRate   float64
	production, capacity float64 // at the gate [kg/s]
}

// line integrates one population.
type line struct {
	*population
	time      float64
	step      float64 // proposed next step
	tolerance float64
	y         []mass
	totals    flows
	capacity  stage   // relative to the sustaining supply
	supply1   float64 // at the beginning of the step
	flows1    flows
	unsolved  bool   // a stage of this step has found no airborne mass
	nodes     []node // pairs: begin and end of every step

	k1, k2, k3, r, y2, y3 []mass
}

func newLine(p *population, y []mass) *line {
	n := len(p.streams)
	buffer := make([]mass, 7*n)
	cut := func(i int) []mass { return buffer[i*n : (i+1)*n : (i+1)*n] }
	l := &line{
		population: p, y: cut(0),
		k1: cut(1), k2: cut(2), k3: cut(3), r: cut(4), y2: cut(5), y3: cut(6),
		nodes: make([]node, 0, 256), tolerance: stepTolerance,
	}
	copy(l.y, y)
	return l
}

// advance integrates to time to [s] with the supply limited to capacity, relative to
// the sustaining supply.
func (l *line) advance(to float64, capacity stage) error {
	if l.step == 0 {
		l.step = (to - l.time) / 100
	}
	l.begin(capacity)
	for steps := 0; l.time < to; steps++ {
		if steps == mostSteps {
			return fmt.Errorf("schedule: %d time steps did not reach %s; please report this with the study", mostSteps, years(to))
		}
		left := to - l.time
		h := min(l.step, left)
		if left-h < 0.1*h {
			h = left
		}
		end := l.time + h
		if h == left {
			end = to
		}
		l.tryStep(end, h)
	}
	return nil
}

// begin sets the capacity, and the rates at the present time from the stores.
func (l *line) begin(capacity stage) {
	l.capacity = capacity
	x := aloft(l.y) / l.goal
	l.supply1 = l.limit(l.time)
	if x >= 1-1e-10 {
		l.supply1 = min(l.supply1, max(0, l.holding(l.y, x)))
	}
	l.flows1 = l.rates(l.k1, l.y, x, l.supply1)
}

// limit returns the most that can be supplied at time t [kg/s, airborne].
func (l *line) limit(t float64) float64 { return l.sustaining * l.capacity.at(t) }

// tryStep makes one step if its error allows it, and proposes the next length.
func (l *line) tryStep(end, h float64) {
	l.unsolved = false
	c := h * trD
	for i, k := range l.k1 {
		l.r[i] = l.y[i].plus(c, k)
	}
	x2, supply2 := l.stage(l.y2, l.r, c, l.limit(l.time+trGamma*h), aloft(l.y)/l.goal)
	flows2 := l.rates(l.k2, l.y2, x2, supply2)
	slopes(l.k2, l.y2, l.r, c)

	for i := range l.r {
		l.r[i] = l.y[i].plus(h*trW, l.k1[i]).plus(h*trW, l.k2[i])
	}
	x3, supply3 := l.stage(l.y3, l.r, c, l.limit(end), x2)
	flows3 := l.rates(l.k3, l.y3, x3, supply3)
	slopes(l.k3, l.y3, l.r, c)

	if l.unsolved {
		l.step = h / 5
		return
	}

	air, floor := 0.0, 0.0
	for i := range l.k1 {
		a, b, c := l.k1[i], l.k2[i], l.k3[i]
		air += math.Abs(trE1*a.fresh+trE2*b.fresh+trE3*c.fresh) + math.Abs(trE1*a.lifted+trE2*b.lifted+trE3*c.lifted)
		floor += math.Abs(trE1*a.ground + trE2*b.ground + trE3*c.ground)
	}
	miss := h * max(air/l.goal, floor/(l.goal+l.groundGoal)) / l.tolerance
	grow := 5.0
	if miss > 0 {
		grow = min(5, max(0.2, 0.9/math.Cbrt(miss)))
	}
	tiny := h < 1e-9*end || h < 1e-3 // a millisecond: nothing here is faster
	if miss > 1 && !tiny {
		l.step = h * grow
		return
	}

	l.nodes = append(l.nodes,
		l.node(l.time, l.y, l.k1, l.supply1), l.node(end, l.y3, l.k3, supply3))
	l.totals.add(h*trW, l.flows1)
	l.totals.add(h*trW, flows2)
	l.totals.add(c, flows3)
	l.y, l.y3 = l.y3, l.y
	l.k1, l.k3 = l.k3, l.k1 // the end of this step is the beginning of the next
	l.supply1, l.flows1 = supply3, flows3
	l.time = end
	if grow < 5 || h*grow > l.step { // a short last step with no error says nothing about the next
		l.step = h * grow
	}
}

// slopes sets k = (y - r)/c, the rate that the stage has solved for. It equals the one
// from the stores but for rounding, which the fast rates of a stiff store would enlarge.
func slopes(k, y, r []mass, c float64) {
	for i := range k {
		k[i] = y[i].plus(-1, r[i])
		k[i] = mass{k[i].fresh / c, k[i].lifted / c, k[i].ground / c}
	}
}

func (l *line) node(t float64, y, k []mass, supply float64) node {
	return node{
		time:  t,
		aloft: aloft(y), aloftRate: aloft(k),
		ground: onGround(y), groundRate: onGround(k),
		production: supply / l.perGate, capacity: l.limit(t) / l.perGate,
	}
}

func (m mass) plus(h float64, k mass) mass {
	return mass{m.fresh + h*k.fresh, m.lifted + h*k.lifted, m.ground + h*k.ground}
}

// stage solves Y = r + c f(Y) into y and returns the relative airborne mass and the
// supply: capacity where that does not overshoot the goal, else what meets it.
func (l *line) stage(y, r []mass, c, capacity, guess float64) (x, supply float64) {
	x = l.settle(y, r, c, capacity, guess)
	if x <= 1 || capacity == 0 {
		return x, capacity
	}
	// The goal would be passed: x = 1 and the supply that gives it, linear in the supply.
	with, _ := l.solve(y, r, c, capacity, 1)
	without, _ := l.solve(y, r, c, 0, 1)
	supply = capacity * (l.goal - without) / (with - without)
	if supply <= 0 { // more falls in from the ground than the goal needs
		return l.settle(y, r, c, 0, 1), 0
	}
	l.solve(y, r, c, supply, 1)
	return 1, supply
}

// settle solves a stage for a given supply and returns the relative airborne mass x.
// x - A(x)/goal rises with x and is concave, so Newton's method finds its one root.
func (l *line) settle(y, r []mass, c, supply, guess float64) float64 {
	x := guess
	for range 60 {
		air, slope := l.solve(y, r, c, supply, x)
		miss := x - air/l.goal
		switch {
		case !l.clumps: // x has no part in the solution
			return air / l.goal
		case x == 0 && miss >= 0:
			return 0 // a step too long has swung below zero; nothing is there to clump
		case math.Abs(miss) <= 1e-13*x:
			return x // the one solved with, so that the flows are those of the solution
		}
		x = max(0, x-miss/(1-slope/l.goal))
	}
	l.unsolved = true
	return x
}

// solve solves a stage for given x and supply, and returns the airborne mass and its
// derivative by x.
func (l *line) solve(y, r []mass, c, supply, x float64) (air, slope float64) {
	for i := range l.streams {
		st := &l.streams[i]
		fresh := 1 / (1 + c*st.fresh.loss(x))
		lifted := 1 / (1 + c*st.lifted.loss(x))
		back := c * st.single * st.lift * lifted // airborne per ground
		ground := 1 / (1 + c*st.leave - c*st.lifted.ground*back)

		m := &y[i]
		m.fresh = (r[i].fresh + c*st.share*supply) * fresh
		m.ground = (r[i].ground + c*st.fresh.ground*m.fresh + c*st.lifted.ground*r[i].lifted*lifted) * ground
		m.lifted = r[i].lifted*lifted + back*m.ground
		air += m.fresh + m.lifted

		if l.clumps {
			dFresh := -c * st.fresh.clump * m.fresh * fresh
			dLifted := -c * st.lifted.clump * m.lifted * lifted
			dGround := (c*st.fresh.ground*dFresh + c*st.lifted.ground*dLifted) * ground
			slope += dFresh + dLifted + back*dGround
		}
	}
	return air, slope
}
