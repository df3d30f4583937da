package logistics

import (
	"math"
	"testing"

	"gonum.org/v1/gonum/mat"
)

// constant is a history of a constant supply, relative to the sustaining one.
func constant(share float64) stage { return stage{share: share} }

// onePopulation returns the production line of the streams, from nothing.
func onePopulation(t testing.TB, d Demand) *line {
	t.Helper()
	if err := d.Validate(); err != nil {
		t.Fatal(err)
	}
	populations := newPopulations(d, 0.02)
	return newLine(&populations[0], make([]mass, len(populations[0].steady)))
}

// plain is a stream that is lost on the ground for good.
func plain(residence float64) Stream {
	s := ironStream(1e10)
	s.NewResidence, s.LiftedResidence = residence, residence
	s.NewToGround, s.LiftedToGround, s.AgglomerationRate = 1, 1, 0
	s.LiftTime = math.Inf(1)
	return s
}

// Closed form A = P B (1 - exp(-t/B)).
func TestBuildUp_ConstantRate(t *testing.T) {
	const b = 3 * year
	l := onePopulation(t, demand(plain(b)))
	for _, when := range []float64{0.01, 0.3, 1, 2, 5, 10} {
		if err := l.advance(when*b, constant(0.8)); err != nil {
			t.Fatal(err)
		}
		near(t, "airborne", aloft(l.y), 0.8e10*(1-math.Exp(-when)), 2e-5)
	}
}

// With clumping alone, dA/dt = P - a A^2/A0. Closed forms: from nothing at constant
// supply A = A0 tanh(a t); from A0 without supply A = A0/(1 + a t).
func TestClumping_ClosedForm(t *testing.T) {
	s := plain(20 * day)
	s.NewToGround, s.LiftedToGround, s.AgglomerationRate = 0, 0, 1/(20*day)
	l := onePopulation(t, demand(s))
	for _, when := range []float64{0.1, 0.5, 1, 3, 1000} {
		if err := l.advance(when*20*day, constant(1)); err != nil {
			t.Fatal(err)
		}
		near(t, "build-up", aloft(l.y), 1e10*math.Tanh(when), 2e-5)
	}
	l = newLine(l.population, l.steady)
	for _, when := range []float64{0.1, 1, 10, 100} {
		if err := l.advance(when*20*day, constant(0)); err != nil {
			t.Fatal(err)
		}
		near(t, "decay", aloft(l.y), 1e10/(1+when), 1e-5*(1+when)) // 1e-5 of the goal
	}
}

// twoStore returns the airborne mass, from 1, a time t after the end of supply: the
// eigenvalues and vectors of the air-ground pair, by hand.
func twoStore(fall, lift, bury, t float64) float64 {
	a, b, c, d := -1/fall, 1/lift, 1/fall, -(1/lift + 1/bury)
	ground := (1 / fall) / (1/lift + 1/bury) // steady, per airborne mass
	mean, root := (a+d)/2, math.Sqrt((a-d)*(a-d)/4+b*c)
	slow, fast := mean+root, mean-root
	// A = u exp(slow t) + w exp(fast t) with A(0) = 1, A'(0) = a + b G(0).
	rate := a + b*ground
	u := (rate - fast) / (slow - fast)
	return u*math.Exp(slow*t) + (1-u)*math.Exp(fast*t)
}

func TestEnding_TwoStores(t *testing.T) {
	for _, c := range []struct{ fall, lift, bury float64 }{
		{0.5 * year, 5 * year, 30 * year}, {2 * year, 60 * day, 5 * year}, {16 * year, 10 * day, 100 * year},
	} {
		s := plain(c.fall)
		s.LiftTime, s.BurialTime, s.ReturnSingle = c.lift, c.bury, 1
		l := onePopulation(t, demand(s))
		copy(l.y, l.steady)
		for _, when := range []float64{0.2, 1, 4, 10, 40} {
			if err := l.advance(when*c.fall, constant(0)); err != nil {
				t.Fatal(err)
			}
			near(t, "airborne", aloft(l.y)/1e10, twoStore(c.fall, c.lift, c.bury, when*c.fall), 2e-5)
		}
	}
}

// Rods that fall in 0.536 yr, wait 5 yr for the wind and are buried in 30 yr live
// 3.75 yr aloft. A single store with that lifetime would lose half the warming in 2.6 yr;
// they take 19 yr (eigenvalues by an independent numpy calculation: 18.96 yr).
func TestEnding_GroundStoreDelaysTheCold(t *testing.T) {
	const fall = 0.5358 * year
	s := plain(fall)
	s.LiftTime, s.BurialTime, s.ReturnSingle = 5*year, 30*year, 1
	near(t, "a single store", s.Steady().Lifetime*math.Ln2, 2.6*year, 1e-3)
	p := run(t, demand(s), lantern())
	half := p.HalfLossTime.Value
	near(t, "half-loss time", half, 18.96*year, 2e-4)
	near(t, "airborne then", twoStore(fall, 5*year, 30*year, half), 0.5, 2e-5)
}

// The steady state of a stream with every process, against the linear system solved on
// its own and against a long integration.
func TestSteady_TwoWays(t *testing.T) {
	streams := classes(ironStream(1e10), 4)
	for i := range streams {
		streams[i].LiftTime *= 1 + float64(i)
	}
	d := demand(streams...)
	for _, s := range streams {
		bn, bl := s.NewResidence, s.LiftedResidence
		m := mat.NewDense(3, 3, []float64{
			1 / bn, 0, 0,
			0, 1 / bl, -s.ReturnSingle / s.LiftTime,
			-s.NewToGround / bn, -s.LiftedToGround / bl, 1/s.LiftTime + 1/s.BurialTime,
		})
		var y mat.VecDense
		if err := y.SolveVec(m, mat.NewVecDense(3, []float64{1, 0, 0})); err != nil {
			t.Fatal(err)
		}
		got := s.Steady()
		near(t, "lifetime", got.Lifetime, y.AtVec(0)+y.AtVec(1), 1e-12)
		near(t, "supply", got.Supply, s.Inventory/(y.AtVec(0)+y.AtVec(1)), 1e-12)
		near(t, "ground", got.Ground, got.Supply*y.AtVec(2), 1e-12)
		near(t, "cycles", got.Cycles, y.AtVec(1)/bl, 1e-12)
	}
	l := onePopulation(t, d)
	if err := l.advance(60*slowestTime([]population{*l.population}), constant(1)); err != nil {
		t.Fatal(err)
	}
	for i, s := range streams {
		at := s.Steady()
		near(t, "new aloft", l.y[i].fresh, at.NewAloft, 1e-6)
		near(t, "lifted aloft", l.y[i].lifted, at.LiftedAloft, 1e-6)
		near(t, "ground", l.y[i].ground, at.Ground, 1e-6)
	}
}

// The clumping rate given is the one that acts at the goal, whatever its split.
func TestSteady_ClumpingRate(t *testing.T) {
	s := ironStream(1e10)
	l := onePopulation(t, demand(s))
	f := l.rates(l.k1, l.steady, 1, l.sustaining)
	returned := (1 - s.ReturnSingle) * l.steady[0].ground / s.LiftTime
	near(t, "clumped", f.clumped-returned, s.AgglomerationRate*s.Inventory, 1e-12)
}

// Halving the step divides the error by four.
func TestStep_SecondOrder(t *testing.T) {
	const b = 3 * year
	miss := func(steps int) float64 {
		l := onePopulation(t, demand(plain(b)))
		l.tolerance = math.Inf(1)
		l.begin(constant(1))
		for i := 1; i <= steps; i++ {
			l.tryStep(b*float64(i)/float64(steps), b/float64(steps))
		}
		return math.Abs(aloft(l.y)/1e10 - (1 - math.Exp(-1)))
	}
	for _, n := range []int{8, 16, 32} {
		if ratio := miss(n) / miss(2*n); ratio < 3.7 || ratio > 4.3 {
			t.Errorf("%d steps: halving divides the error by %.3g, want 4", n, ratio)
		}
	}
}

// A step a million times longer than the fastest process neither swings nor overshoots.
func TestStep_Stiff(t *testing.T) {
	s := plain(1 * day)
	s.NewToGround, s.LiftedToGround, s.AgglomerationRate = 0.5, 0.5, 0.4/day
	s.LiftTime, s.BurialTime = 1*year, 300*year
	l := onePopulation(t, demand(s))
	l.tolerance = math.Inf(1)
	l.begin(constant(1.25))
	for i := 1; i <= 10; i++ {
		l.tryStep(3000*year*float64(i), 3000*year)
		if x := aloft(l.y) / l.goal; x < 0 || x > 1+1e-9 {
			t.Errorf("step %d: airborne mass is %g of the goal", i, x)
		}
	}
	near(t, "airborne", aloft(l.y), l.goal, 1e-6)
}

// The counters close to 1e-9, and a rate that is not the one the stores feel is seen.
func TestBalance_GoesRed(t *testing.T) {
	closure := func(spoil func(*stores)) float64 {
		l := onePopulation(t, demand(ironStream(1e10)))
		if spoil != nil {
			spoil(&l.streams[0])
		}
		if err := l.advance(40*year, constant(1.25)); err != nil {
			t.Fatal(err)
		}
		b := (&course{lines: []*line{l}}).balance()
		for _, part := range []float64{b.LostAtRelease, b.LostInPlume, b.Aloft, b.OnGround, b.Buried, b.OtherSinks, b.Clumped} {
			if part < 1e-3*b.Made {
				t.Errorf("the check is empty: a part is %g of %g kg", part, b.Made)
			}
		}
		return b.Closure
	}
	if got := closure(nil); got > 1e-9 {
		t.Errorf("closure %g, want under 1e-9", got)
	}
	for name, spoil := range map[string]func(*stores){
		"burial": func(s *stores) { s.bury *= 1.001 },
		"lift":   func(s *stores) { s.lift *= 1.001 },
		"leave":  func(s *stores) { s.leave *= 1.001 },
		"share":  func(s *stores) { s.share *= 1.001 },
	} {
		if got := closure(spoil); got < 1e-6 {
			t.Errorf("%s wrong by 0.1 %%: closure %g does not show it", name, got)
		}
	}
}
