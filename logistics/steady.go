package logistics

// steadyState is what one unit of supply [1 kg/s] keeps up in a stream.
type steadyState struct {
	aloftNew    float64 // never lifted yet [kg per kg/s = s]
	aloftLifted float64 // lifted by wind at least once [s]
	ground      float64 // loose on the ground [s]
	cycles      float64 // flux brought back single / supply
}

// lifetime returns airborne mass per unit supply [s].
func (s steadyState) lifetime() float64 { return s.aloftNew + s.aloftLifted }

// perUnitSupply returns the steady state of the three stores of a stream for a supply
// of 1, from their linear balance:
//
//	G = g_n / (1/t_lift + 1/t_bury - g_l r/t_lift)
//	A_n = B_n,   A_l = B_l r G/t_lift
//
// with B the residence, g the share to the ground and r the share returned single.
// The bracket is never below 1/t_bury.
func (s Stream) perUnitSupply() steadyState {
	lift := 1 / s.LiftTime // 0 for +Inf
	ground := s.NewToGround / (lift*(1-s.LiftedToGround*s.ReturnSingle) + 1/s.BurialTime)
	cycles := s.ReturnSingle * lift * ground
	return steadyState{
		aloftNew:    s.NewResidence,
		aloftLifted: s.LiftedResidence * cycles,
		ground:      ground,
		cycles:      cycles,
	}
}

// lostAloft returns the flux lost to sinks and clumping in the air, per unit supply [1].
func (s Stream) lostAloft(steady steadyState) float64 {
	return 1 - s.NewToGround + (1-s.LiftedToGround)*steady.cycles
}

// clumpingShare returns the part of the loss aloft that is clumping within the
// population [1]. One share serves new and lifted mass: the rate is known as a mean
// over both, and clumping and other sinks act in the same layers.
func (s Stream) clumpingShare(steady steadyState) float64 {
	aloft := s.lostAloft(steady)
	if aloft <= 0 {
		return 0
	}
	return min(1, s.AgglomerationRate*steady.lifetime()/aloft)
}

// Steady is the steady state of a stream at the goal.
type Steady struct {
	Lifetime      float64 // airborne inventory / new supply [s]
	Supply        float64 // new airborne supply, past release and plume [kg/s]
	NewAloft      float64 // kg
	LiftedAloft   float64 // kg
	Ground        float64 // loose on the ground [kg]
	Cycles        float64 // mass brought back by wind per mass newly supplied [1]
	ResidenceBoth float64 // mean time in the air or loose on the ground per unit supply [s]
}

// Steady returns the steady state of the stream that holds its inventory:
//
//	supply = inventory / lifetime
//
// The stream must be valid (see [Demand.Validate]).
func (s Stream) Steady() Steady {
	unit := s.perUnitSupply()
	supply := s.Inventory / unit.lifetime()
	return Steady{
		Lifetime:      unit.lifetime(),
		Supply:        supply,
		NewAloft:      supply * unit.aloftNew,
		LiftedAloft:   supply * unit.aloftLifted,
		Ground:        supply * unit.ground,
		Cycles:        unit.cycles,
		ResidenceBoth: unit.lifetime() + unit.ground,
	}
}
