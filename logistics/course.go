package logistics

import (
	"fmt"
	"math"
	"slices"
	"sort"
)

// Series is a history for charts, all slices of one length: time [s], capacity and
// production at the gate [kg/s], airborne and loose ground mass [kg], warming [K].
type Series struct {
	Time, Capacity, Production, Airborne, Ground, Warming []float64
}

// Points in the two series.
const (
	buildUpPoints = 301
	endingPoints  = 201
)

// Balance is the mass balance of the schedule [kg]. Each term but the two stores is
// counted on its own from its rate, and Closure is what they leave over, as a share of
// the mass made.
type Balance struct {
	Until         float64 // time it is drawn up [s]
	Made          float64 // at the factory gate
	LostAtRelease float64 // between gate and release
	LostInPlume   float64 // clumped in the release plume
	Aloft         float64
	OnGround      float64 // loose
	Buried        float64
	OtherSinks    float64
	Clumped       float64 // in the air, or lifted as a clump
	Closure       float64
}

// thermometer reads the warming off a burden and remembers what went wrong.
type thermometer struct {
	warming func(burden float64) float64
	area    float64
	err     error
}

func (t *thermometer) at(airborne float64) float64 {
	// Rounding may leave a little less than nothing aloft.
	burden := max(0, airborne/t.area)
	w := t.warming(burden)
	if (math.IsNaN(w) || math.IsInf(w, 0)) && t.err == nil {
		t.err = fmt.Errorf("schedule: the warming at a burden of %s is %g; it must be finite", withUnit(burden, "kg/m2"), w)
	}
	return w
}

// course is the joint history of all populations.
type course struct {
	lines []*line
	meter *thermometer
}

// newCourse starts a course, from nothing or from the steady state at the goal.
func newCourse(populations []population, meter *thermometer, atGoal bool) *course {
	c := &course{meter: meter}
	for i := range populations {
		p := &populations[i]
		start := make([]mass, len(p.steady))
		if atGoal {
			copy(start, p.steady)
		}
		c.lines = append(c.lines, newLine(p, start))
	}
	return c
}

func (c *course) time() float64 { return c.lines[0].time }

// advance integrates all populations to the time to. Each is limited to its sustaining
// supply times the relative capacity.
func (c *course) advance(to float64, capacity stage) error {
	for _, l := range c.lines {
		if err := l.advance(to, capacity); err != nil {
			return err
		}
	}
	return nil
}

// at returns the state at a time that has been integrated, by cubic Hermite
// interpolation of the stores and linear interpolation of the rates in a step.
func (c *course) at(t float64) (state node) {
	state.time = t
	for _, l := range c.lines {
		// The last step that begins at or before t.
		steps := len(l.nodes) / 2
		i := sort.Search(steps, func(i int) bool { return l.nodes[2*i].time > t })
		i = max(0, i-1)
		a, b := &l.nodes[2*i], &l.nodes[2*i+1]
		h := b.time - a.time
		u := min(1, max(0, (t-a.time)/h))
		state.aloft += hermite(u, h, a.aloft, a.aloftRate, b.aloft, b.aloftRate)
		state.ground += hermite(u, h, a.ground, a.groundRate, b.ground, b.groundRate)
		state.production += a.production + u*(b.production-a.production)
		state.capacity += a.capacity + u*(b.capacity-a.capacity)
	}
	return state
}

// hermite interpolates at the share u of a step h with end values a, b and slopes.
func hermite(u, h, a, slopeA, b, slopeB float64) float64 {
	v := 1 - u
	return v*v*((1+2*u)*a+u*h*slopeA) + u*u*((1+2*v)*b-v*h*slopeB)
}

func (c *course) warming(t float64) float64 { return c.meter.at(c.at(t).aloft) }

// firstTime returns the first time in (from, now] at which the warming meets the test,
// to 1e-9, and whether there is one. It looks at the end of every time step.
func (c *course) firstTime(from float64, meets func(warming float64) bool) (float64, bool) {
	var ends []float64
	for _, l := range c.lines {
		for i := len(l.nodes) - 1; i > 0 && l.nodes[i].time > from; i -= 2 {
			ends = append(ends, l.nodes[i].time)
		}
	}
	slices.Sort(ends)
	low := from
	for _, high := range slices.Compact(ends) {
		if !meets(c.warming(high)) {
			low = high
			continue
		}
		for high-low > 1e-9*high {
			middle := (low + high) / 2
			if middle <= low || middle >= high {
				break
			}
			if meets(c.warming(middle)) {
				high = middle
			} else {
				low = middle
			}
		}
		return high, true
	}
	return 0, false
}

// series samples the course evenly from its start to the time end.
func (c *course) series(end float64, points int) Series {
	column := func() []float64 { return make([]float64, points) }
	s := Series{column(), column(), column(), column(), column(), column()}
	for i := range points {
		t := end * float64(i) / float64(points-1)
		state := c.at(t)
		s.Time[i], s.Capacity[i], s.Production[i] = t, state.capacity, state.production
		s.Airborne[i], s.Ground[i] = max(0, state.aloft), max(0, state.ground)
		s.Warming[i] = c.meter.at(state.aloft)
	}
	return s
}

// balance draws up the masses; the course must have started from nothing.
func (c *course) balance() Balance {
	b := Balance{Until: c.time()}
	for _, l := range c.lines {
		b.Made += l.totals.gate
		b.LostAtRelease += l.totals.lost
		b.LostInPlume += l.totals.plume
		b.Aloft += aloft(l.y)
		b.OnGround += onGround(l.y)
		b.Buried += l.totals.buried
		b.OtherSinks += l.totals.other
		b.Clumped += l.totals.clumped
	}
	if b.Made > 0 {
		found := b.LostAtRelease + b.LostInPlume + b.Aloft + b.OnGround + b.Buried + b.OtherSinks + b.Clumped
		b.Closure = math.Abs(b.Made-found) / b.Made
	}
	return b
}
