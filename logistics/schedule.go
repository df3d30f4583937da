package logistics

import "math"

const (
	goalShare = 0.99 // of the goal warming: the goal counts as reached
	patience  = 25   // slowest time constants waited for after the build-up
)

// goal is what a course is held against.
type goal struct {
	warming float64 // K
	held    float64 // warming at the held burden [K]
}

func (g goal) reached(warming float64) bool { return warming/g.warming >= goalShare }

// buildUp runs a supply and returns its course and the time to the goal. The
// course goes on for some time past the goal, or for tail past the end of supply.
func buildUp(populations []population, meter *thermometer, p history, g goal, tail float64) (*course, Quantity, error) {
	c := newCourse(populations, meter, false)
	slow := slowestTime(populations)
	last := p.last()
	end := min(last+patience*slow, longest)
	if p.stopAt < math.Inf(1) {
		end = p.stopAt + tail
	}
	var reached Quantity
	found := g.warming == 0 // then there is nothing to look for
	for c.time() < end {
		from := c.time()
		now, until := p.after(from)
		past := max(0, from-last) // the further on, the longer between looks
		to := min(end, until, max(from, last)+slow/2+past/2)
		if err := c.advance(to, now); err != nil {
			return nil, Quantity{}, err
		}
		if found {
			continue
		}
		if t, ok := c.firstTime(from, g.reached); ok {
			found, reached = true, known(t)
			if p.stopAt == math.Inf(1) {
				end = min(end, max(to, 1.4*t))
			}
		}
	}
	if !found || g.warming == 0 {
		reached = p.excuse(c, g)
	}
	return c, reached, meter.err
}

// excuse says why a goal was not reached.
func (p history) excuse(c *course, g goal) Quantity {
	full := p.stages[len(p.stages)-1]
	switch {
	case g.warming == 0:
		return missing("the goal is no warming")
	case !g.reached(g.held):
		return missing("never: the held burden warms by %.3g K, short of the goal of %.3g K", g.held, g.warming)
	case full.share*p.overbuilt < 1:
		return missing("never: delivery brings at most %.3g %% of the sustaining supply", 100*full.share*p.overbuilt)
	case p.stopAt < math.Inf(1):
		return missing("never: the supply ends after %s, before the goal is reached", years(p.stopAt))
	case full.from > c.time():
		return missing("not within %s: landing the plant takes until %s", years(c.time()), years(full.from))
	}
	return missing("not within %s", years(c.time()))
}

// ending runs down from the steady state at the goal without supply. It returns the
// course, the time to chart and the time until half the warming at the goal is left.
func ending(populations []population, meter *thermometer, g goal) (*course, float64, Quantity, error) {
	c := newCourse(populations, meter, true)
	slow := slowestTime(populations)
	half := missing("there is no warming to lose")
	if g.held == 0 {
		err := c.advance(5*slow, stage{})
		return c, 5 * slow, half, err
	}
	halved := func(warming float64) bool { return warming/g.held <= 0.5 }
	half = missing("half the warming is still there after %s", years(4*patience*slow))
	end := 4 * patience * slow
	for c.time() < end {
		from := c.time()
		if err := c.advance(min(end, from+slow/4), stage{}); err != nil {
			return nil, 0, Quantity{}, err
		}
		if t, ok := c.firstTime(from, halved); ok && !half.Known() {
			half = known(t)
			end = max(c.time(), 3*t)
		}
	}
	chart := 5 * slow
	if half.Known() {
		chart = 3 * half.Value
	}
	return c, chart, half, meter.err
}
