package greenhouse

import (
	"errors"
	"fmt"
	"math"
	"sort"
)

// Causes for which a wanted warming is not reached.
const (
	CauseShading  = "solar shading"    // warming falls beyond a peak: too little sunlight gets down
	CauseSaturate = "saturated"        // still rising slowly when the infrared depth passed 60
	CauseNever    = "never warms"      // no burden warms by more than 0.05 K
	CauseValidity = "outside validity" // the ground left the range of the estimate, or the burden its own, before the goal
)

// Curve is warming against burden for one aerosol.
type Curve struct {
	Points  []State // ascending in burden, ten a decade and the states below
	Reached bool    // whether the goal is met; see At.Valid and At.Notes for whether the estimate holds there
	Burden  float64 // smallest burden found that meets the goal [kg/m2]; zero when not reached
	At      State   // the state at Burden; zero when not reached
	// Max is the state of largest warming. When the goal is not reached it is the top of the curve, searched for; when it
	// is reached the scan ends at four times Burden and Max is only the best point seen.
	Max   State
	Cause string // why the goal is not reached, one of the Cause constants; empty when it is
}

// Parameters of the scan.
const (
	scanStart    = 0.02 // largest thermal extinction depth of the first point
	perDecade    = 10   // points
	beyondGoal   = 4.0  // the scan goes on to this multiple of the burden that meets the goal
	fallen       = 3.0  // [K] below the best, once that is above 1 K: the peak is behind
	worthwhile   = 1.0  // [K]
	warmsAtAll   = 0.05 // [K]
	coolest      = -10  // [K]
	thickThermal = 60.0 // mean transport depth
	thickSolar   = 300.0
	goalReached  = 1e-7 // [K]
)

// Curve scans the warming over burden and finds the smallest burden whose warming is goal [K], to 1e-6 K.
//
// The scan starts where the strongest thermal band has an extinction depth of 0.02 and takes ten points a decade. The
// first pair of points that brackets the goal holds the answer, found by false position on the rising side. If no pair
// does, the top is searched by golden section around the best point, since a step can pass over it, and used as the upper
// end of the bracket if it is high enough. The scan ends at four times the burden that meets the goal; 3 K below the best
// point; at -10 K; at a Planck-mean thermal transport depth of 60 or a solar depth of 300; or where the ground passes
// 480 K or the burden 1000 kg/m2. It assumes one interior maximum. It sees the peak only roughly: states beyond a solar
// depth of 1.5 are flagged, and a goal met there comes back Reached with At.Valid false.
//
// Errors: malformed optics; a goal that is not a positive finite number; an aerosol without any extinction.
func (q *Quick) Curve(a Aerosol, goal float64) (Curve, error) {
	if !(goal > 0) || math.IsInf(goal, 0) {
		return Curve{}, fmt.Errorf("goal %g K: want a positive warming", goal)
	}
	s, err := q.newScan(a)
	if err != nil {
		return Curve{}, err
	}
	found := -1 // index of the first point at or above the goal
	cause := ""
	for burden := s.start; cause == ""; burden *= scanRatio {
		if found >= 0 && burden > beyondGoal*s.points[found].Burden {
			break
		}
		p, err := s.add(burden)
		if err != nil {
			return Curve{}, err
		}
		if found < 0 && p.Warming >= goal {
			found = len(s.points) - 1
		}
		cause = s.stop(p, burden)
	}
	var c Curve
	lower, upper := 0.0, 0.0
	switch {
	case found == 0:
		upper = s.points[0].Burden
	case found > 0:
		lower, upper = s.points[found-1].Burden, s.points[found].Burden
	default:
		top, err := s.top()
		if err != nil {
			return Curve{}, err
		}
		if top.Warming >= goal {
			upper = top.Burden
			if i := s.before(top.Burden); i >= 0 {
				lower = s.points[i].Burden
			}
		}
	}
	if upper > 0 {
		at, err := s.meet(goal, lower, upper)
		if err != nil {
			return Curve{}, err
		}
		c.Reached, c.Burden, c.At = true, at.Burden, at
	}
	s.sort()
	c.Points, c.Max = s.points, s.points[s.best()]
	if !c.Reached {
		if c.Cause = cause; c.Max.Warming <= warmsAtAll {
			c.Cause = CauseNever
		}
	}
	return c, nil
}

// Scan returns the curve up to a burden [kg/m2], ten points a decade, ending exactly there: for goals that are a burden or
// an optical depth. Reached is true and At is the state at that burden. Max is the best point seen.
// Errors: as for [Quick.Curve], and a burden that is not above 0 or beyond 1000 kg/m2.
func (q *Quick) Scan(a Aerosol, to float64) (Curve, error) {
	if !(to > 0 && to <= largestBurden) {
		return Curve{}, fmt.Errorf("burden %g kg/m2 is outside 0 to %d kg/m2", to, largestBurden)
	}
	s, err := q.newScan(a)
	if err != nil {
		return Curve{}, err
	}
	if s.start >= to { // a burden too thin for the usual start still gets a decade
		s.start = to / 10
	}
	for burden := s.start; burden < to*(1-1e-9); burden *= scanRatio {
		if _, err := s.add(burden); err != nil {
			return Curve{}, err
		}
	}
	at, err := s.add(to)
	if err != nil {
		return Curve{}, err
	}
	return Curve{Points: s.points, Reached: true, Burden: to, At: at, Max: s.points[s.best()]}, nil
}

// scanRatio is the step of the scan.
var scanRatio = math.Pow(10, 1.0/perDecade)

// scan is a curve in the making.
type scan struct {
	q                *Quick
	a                Aerosol
	points           []State
	start            float64 // first burden [kg/m2]
	thermalTransport float64 // Planck mean at the baseline [m2/kg]
	solarExtinction  float64 // Planck mean at 5772 K [m2/kg]
	bestSoFar        float64 // [K]
}

func (q *Quick) newScan(a Aerosol) (*scan, error) {
	if err := a.validate(); err != nil {
		return nil, err
	}
	s := &scan{q: q, a: a, bestSoFar: math.Inf(-1)}
	var strongest float64
	for b, planck := range q.groundPlanck {
		strongest = math.Max(strongest, a.Thermal.Ext[b])
		s.thermalTransport += a.Thermal.transport(b) * planck
	}
	s.thermalTransport /= sum(q.groundPlanck)
	for b, share := range q.sun.share {
		s.solarExtinction += share * a.Solar.Ext[b]
	}
	if strongest*largestBurden < 1 {
		for _, ext := range a.Solar.Ext {
			strongest = math.Max(strongest, ext)
		}
	}
	if strongest*largestBurden < 1 {
		return nil, errors.New("the aerosol has no extinction to speak of (largest below 1e-3 m2/kg): no curve")
	}
	s.start = scanStart / strongest
	return s, nil
}

func (s *scan) add(burden float64) (State, error) {
	p, err := s.q.warming(s.a, burden)
	if err != nil {
		return State{}, err
	}
	s.points = append(s.points, p)
	return p, nil
}

// stop returns why the scan ends after p, or "".
func (s *scan) stop(p State, burden float64) string {
	s.bestSoFar = math.Max(s.bestSoFar, p.Warming)
	falling := p.Warming < s.bestSoFar
	switch {
	case p.SurfaceTemperature > warmestGround, burden*scanRatio > largestBurden:
		return CauseValidity
	case s.bestSoFar > worthwhile && p.Warming < s.bestSoFar-fallen, p.Warming < coolest:
		return CauseShading
	case burden*s.thermalTransport > thickThermal, burden*s.solarExtinction > thickSolar:
		if falling {
			return CauseShading
		}
		return CauseSaturate
	}
	return ""
}

// best returns the index of the warmest point.
func (s *scan) best() int {
	best := 0
	for i, p := range s.points {
		if p.Warming > s.points[best].Warming {
			best = i
		}
	}
	return best
}

// before returns the index of the point with the largest burden below the one given, or -1.
func (s *scan) before(burden float64) int {
	i := -1
	for k, p := range s.points {
		if p.Burden < burden && (i < 0 || p.Burden > s.points[i].Burden) {
			i = k
		}
	}
	return i
}

func (s *scan) sort() {
	sort.SliceStable(s.points, func(i, j int) bool { return s.points[i].Burden < s.points[j].Burden })
}

// top finds the largest warming near the best point by golden section in the logarithm of the burden, to 1e-4 of the
// burden, adds it to the points and returns it.
func (s *scan) top() (State, error) {
	i := s.best()
	best := s.points[i]
	if best.Warming <= warmsAtAll || i == len(s.points)-1 {
		return best, nil // nothing to look for, or the scan ended while it was still rising
	}
	low, high := math.Log(best.Burden/scanRatio), math.Log(best.Burden*scanRatio)
	inside := (math.Sqrt(5) - 1) / 2
	at := func(x float64) (State, error) { return s.q.warming(s.a, math.Exp(x)) }
	x1, x2 := high-inside*(high-low), low+inside*(high-low)
	p1, err := at(x1)
	if err != nil {
		return State{}, err
	}
	p2, err := at(x2)
	if err != nil {
		return State{}, err
	}
	for high-low > 1e-4 {
		if p1.Warming >= p2.Warming {
			high, x2, p2 = x2, x1, p1
			x1 = high - inside*(high-low)
			p1, err = at(x1)
		} else {
			low, x1, p1 = x1, x2, p2
			x2 = low + inside*(high-low)
			p2, err = at(x2)
		}
		if err != nil {
			return State{}, err
		}
	}
	for _, p := range []State{p1, p2} {
		if p.Warming > best.Warming {
			best = p
		}
	}
	if best.Burden != s.points[i].Burden {
		s.points = append(s.points, best)
	}
	return best, nil
}

// meet returns the state whose warming is goal, between two burdens of which the lower falls short and the upper does
// not, by the Illinois form of false position [DahlquistBjorck1974], and adds it to the points.
func (s *scan) meet(goal, lower, upper float64) (State, error) {
	short := -goal // at zero burden
	if lower > 0 {
		p, err := s.q.warming(s.a, lower)
		if err != nil {
			return State{}, err
		}
		short = p.Warming - goal
	}
	p, err := s.q.warming(s.a, upper)
	if err != nil {
		return State{}, err
	}
	if p.Warming-goal < goalReached {
		return p, nil
	}
	a, fa, b, fb := lower, short, upper, p.Warming-goal
	for range 100 {
		m := b - fb*(b-a)/(fb-fa)
		if !(m > math.Min(a, b) && m < math.Max(a, b)) {
			m = (a + b) / 2
		}
		if p, err = s.q.warming(s.a, m); err != nil {
			return State{}, err
		}
		fm := p.Warming - goal
		if math.Abs(fm) < goalReached {
			s.points = append(s.points, p)
			return p, nil
		}
		if fm*fb < 0 {
			a, fa = b, fb
		} else {
			fa /= 2
		}
		b, fb = m, fm
	}
	return State{}, fmt.Errorf("burden for %g K of warming not found between %g and %g kg/m2: %.3g K left", goal, lower, upper, fb)
}
