package logistics

import "math"

// path is one way that airborne mass takes: new from the plant, or lifted by wind.
// Rates in 1/s.
type path struct {
	ground float64 // falls to the ground
	other  float64 // sinks, and clumping that does not depend on the airborne mass
	clump  float64 // clumping within the population, at the goal
}

func newPath(residence, toGround, clumpingShare float64) path {
	aloft := (1 - toGround) / residence
	return path{ground: toGround / residence, other: aloft * (1 - clumpingShare), clump: aloft * clumpingShare}
}

// loss returns the total rate [1/s] at the airborne mass x, relative to the goal.
func (p path) loss(x float64) float64 { return p.ground + p.other + p.clump*x }

// stores holds the rates of the three stores of one stream:
//
//	dA_n/dt = s P - A_n/B_n
//	dA_l/dt = r G/t_lift - A_l/B_l
//	dG/dt   = A_n g_n/B_n + A_l g_l/B_l - G (1/t_lift + 1/t_bury)
//
// with 1/B = ground + other + clump x, x the airborne mass of the population relative
// to the goal, and s the share of the stream in the population's supply P.
type stores struct {
	share       float64
	fresh       path
	lifted      path
	lift, bury  float64 // 1/s
	leave       float64 // lift + bury, kept apart from the counters' lift and bury
	single      float64 // share r of the lifted mass that comes back single
	slowestTime float64 // of the approach to the steady state at the goal [s]
}

// mass is the content of the stores of a stream, or its rate of change.
type mass struct{ fresh, lifted, ground float64 }

func newStores(s Stream, share float64) stores {
	clumping := s.clumpingShare(s.perUnitSupply())
	st := stores{
		share:  share,
		fresh:  newPath(s.NewResidence, s.NewToGround, clumping),
		lifted: newPath(s.LiftedResidence, s.LiftedToGround, clumping),
		lift:   1 / s.LiftTime,
		bury:   1 / s.BurialTime,
		single: s.ReturnSingle,
	}
	st.leave = st.lift + st.bury
	st.slowestTime = s.NewResidence
	if st.lift*st.single > 0 {
		// Eigenvalues of the lifted-ground pair; the slow one as determinant / fast one.
		a, d := st.lifted.loss(1), st.leave
		bc := st.lifted.ground * st.single * st.lift
		fast := (a+d)/2 + math.Sqrt((a-d)*(a-d)/4+bc)
		st.slowestTime = max(st.slowestTime, fast/(a*d-bc))
	}
	return st
}

// population is the streams that share one production line.
type population struct {
	streams    []stores
	steady     []mass  // at the goal
	goal       float64 // airborne mass at the goal [kg]
	groundGoal float64 // loose on the ground at the goal [kg]
	sustaining float64 // new airborne supply at the goal [kg/s]
	perGate    float64 // airborne supply / production at the gate
	afterLoss  float64 // 1 - release loss
	clumps     bool
}

// newPopulations sorts the streams into production lines. A population with nothing
// aloft is left out.
func newPopulations(d Demand, releaseLoss float64) []population {
	all := make([]population, len(d.ReleaseSurvival))
	for _, s := range d.Streams {
		all[s.Population].sustaining += s.Steady().Supply
	}
	for _, s := range d.Streams {
		if s.Inventory == 0 {
			continue
		}
		p := &all[s.Population]
		at := s.Steady()
		st := newStores(s, at.Supply/p.sustaining)
		p.streams = append(p.streams, st)
		p.steady = append(p.steady, mass{at.NewAloft, at.LiftedAloft, at.Ground})
		p.goal += s.Inventory
		p.groundGoal += at.Ground
		p.clumps = p.clumps || st.fresh.clump > 0 || st.lifted.clump > 0
	}
	var used []population
	for i, p := range all {
		if p.goal > 0 {
			p.afterLoss = 1 - releaseLoss
			p.perGate = p.afterLoss * d.ReleaseSurvival[i]
			used = append(used, p)
		}
	}
	return used
}

// slowestTime returns the slowest time constant of any stream [s].
func slowestTime(populations []population) float64 {
	slow := 0.0
	for _, p := range populations {
		for _, st := range p.streams {
			slow = max(slow, st.slowestTime)
		}
	}
	return slow
}

// aloft returns the airborne mass [kg], or its rate of change [kg/s].
func aloft(y []mass) float64 {
	sum := 0.0
	for _, m := range y {
		sum += m.fresh + m.lifted
	}
	return sum
}

// onGround returns the loose mass on the ground [kg], or its rate of change [kg/s].
func onGround(y []mass) float64 {
	sum := 0.0
	for _, m := range y {
		sum += m.ground
	}
	return sum
}

// flows are the mass flows of a population [kg/s], or their integrals [kg]. They are
// summed from the single rates, not from the changes of the stores.
type flows struct {
	gate    float64 // made, at the factory gate
	lost    float64 // between gate and release
	plume   float64 // clumped in the release plume
	settled float64 // air to ground
	lifted  float64 // ground to air, single or not
	buried  float64
	other   float64 // other sinks in the air
	clumped float64 // clumped in the air, or lifted as a clump
}

// add adds h times g.
func (f *flows) add(h float64, g flows) {
	f.gate += h * g.gate
	f.lost += h * g.lost
	f.plume += h * g.plume
	f.settled += h * g.settled
	f.lifted += h * g.lifted
	f.buried += h * g.buried
	f.other += h * g.other
	f.clumped += h * g.clumped
}

// rates writes the rates of change of the stores y at relative airborne mass x and
// supply [kg/s] into dy, and returns the flows behind them.
func (p *population) rates(dy, y []mass, x, supply float64) flows {
	gate := supply / p.perGate
	f := flows{gate: gate, lost: gate * (1 - p.afterLoss), plume: gate*p.afterLoss - supply}
	for i := range p.streams {
		st, m := &p.streams[i], y[i]
		down := m.fresh*st.fresh.ground + m.lifted*st.lifted.ground
		up := m.ground * st.lift
		dy[i] = mass{
			fresh:  st.share*supply - m.fresh*st.fresh.loss(x),
			lifted: st.single*up - m.lifted*st.lifted.loss(x),
			ground: down - m.ground*st.leave,
		}
		f.settled += down
		f.lifted += up
		f.buried += m.ground * st.bury
		f.other += m.fresh*st.fresh.other + m.lifted*st.lifted.other
		f.clumped += (m.fresh*st.fresh.clump+m.lifted*st.lifted.clump)*x + (1-st.single)*up
	}
	return f
}

// holding returns the supply [kg/s] that keeps the airborne mass as it is.
func (p *population) holding(y []mass, x float64) float64 {
	sum := 0.0
	for i := range p.streams {
		st, m := &p.streams[i], y[i]
		sum += m.fresh*st.fresh.loss(x) + m.lifted*st.lifted.loss(x) - st.single*st.lift*m.ground
	}
	return sum
}
