package settling

import (
	"errors"
	"fmt"
	"math"

	"hazewright/settling/atmosphere"
)

// The electric fields [V/m] across a charged layer at which a warning is given and
// at which the layer is refused. The second is the order of the breakdown of a thin
// carbon dioxide atmosphere; value from memory.
const (
	WarnField   = 10e3
	RefuseField = 20e3
)

// ErrLayerField is wrapped by the error for a layer whose charge would break down
// the gas.
var ErrLayerField = errors.New("field of the charged layer is beyond the breakdown of the gas")

// The names of the losses that every fate has; sinks keep the user's names.
const (
	LossAgglomeration = "agglomeration"
	LossBurial        = "ground burial"
	LossClumps        = "lifted as clumps"
)

// Loss is one way in which particles are removed for good.
type Loss struct {
	Name  string
	Share float64 // of all removal; the shares of a [Suspension] sum to 1
	Rate  float64 // [kg/(m2 s)]
	// LifetimeAlone is the lifetime [s] if only this loss acted (at the same burden,
	// with all that settles lifted again except for burial and clumps), 0 where Acts
	// is false.
	LifetimeAlone float64
	Acts          bool // whether the loss removes anything
}

// Stream is one member of the population as two stores see it: what is new, what
// has been lifted, and the loose ground between them. With P the supply, A the
// airborne and G the loose mass of the member per area,
//
//	dAnew/dt  = P - Anew/NewResidence
//	dAlift/dt = ReturnSingle G/LiftTime - Alift/LiftedResidence
//	dG/dt     = NewToGround Anew/NewResidence + LiftedToGround Alift/LiftedResidence
//	            - G/LiftTime - G/BurialTime
//
// has the same steady state as the column. The residences hold the losses aloft,
// agglomeration at the held burden among them.
type Stream struct {
	MassShare         float64 // of the airborne mass
	SupplyShare       float64 // of the new supply
	NewResidence      float64 // airborne per new supply [s]
	LiftedResidence   float64 // airborne per lifted supply [s]
	NewToGround       float64 // share of new mass that reaches the ground
	LiftedToGround    float64 // share of lifted mass that reaches the ground
	AgglomerationRate float64 // at the held burden [1/s]
	OtherRate         float64 // of the other losses aloft [1/s]
	LiftTime          float64 // [s], +Inf for never
	BurialTime        float64 // [s], +Inf for never
	ReturnSingle      float64 // share of lifted mass that returns single
}

// Suspension is the steady state of a population held at a burden.
type Suspension struct {
	Burden        float64 // airborne [kg/m2], as given
	Supply        float64 // new mass that holds it [kg/(m2 s)]
	Lifetime      float64 // Burden/Supply; time on the ground not counted [s]
	FallTime      float64 // residence from release to first touching the ground, with no loss aloft [s]
	GroundStore   float64 // loose mass on the ground that wind can lift again [kg/m2]
	ResidenceFull float64 // (Burden + GroundStore)/Supply [s]

	// Cycles is the flux lifted (clumps included) over the new supply, and
	// CyclesLimit what it would be without other losses, burial time over lift
	// time; no limit exists where nothing is buried (CyclesLimited false).
	Cycles, CyclesLimit float64
	CyclesLimited       bool

	// AgglomerationTime is the airborne mass over its loss by agglomeration [s]; 0
	// where there is no such loss (Agglomerates false).
	AgglomerationTime float64
	Agglomerates      bool

	Losses  []Loss
	Streams []Stream // one for each member with a number, in the order given

	FallSpeedGround     float64 // mean over the airborne mass of the fall speeds at the ground, factor included [m/s]
	NumberColumn        float64 // particles aloft [1/m2]
	NumberDensityGround float64 // particles at the ground [1/m3]
	LayerField          float64 // of the charge aloft, counter-ions assumed absent [V/m]
	Profile             Profile // of the airborne mass

	Steps    int     // taken to find the rate of agglomeration
	Residual float64 // relative difference between the supply and the losses, each found on its own
	Warnings []string
}

// Suspend returns the steady state of one population aloft at the held airborne
// burden [kg/m2]: the new supply that holds it, where it goes, and how long it
// stays. Each member of the population has its own column ([Residence]), solved for
// its new mass from the release height and its lifted mass from the lift height
// under the same rate of loss aloft
//
//	k = sum of sinks + s (1 - a) f integral K n^2 dz / (W integral n dz)
//
// with s the sticking, a the aggregate value, f the kernel factor, K/W [Kernel] and
// [ChargeFactor] of the number-median member and n the number of all members. k and
// the profile of n are found together, to 1e-6. Settled particles wait in a loose
// layer; with G its mass and F the flux into it
//
//	F = G (1/lift time + 1/burial time),   lifted single = return single x G/lift time
//
// The lifetime is harmonic over the members by airborne mass, since each holds its
// share of it. More burden never gives a longer life where agglomeration acts, and
// changes nothing where it does not.
//
// Errors: inputs out of range (all named), nothing that removes particles, a
// layer field above [RefuseField] ([ErrLayerField]), a rate of agglomeration not
// found in 40 steps.
func Suspend(c atmosphere.Column, pop Population, f Fate, burden float64) (Suspension, error) {
	m, err := NewModel(c, pop, f)
	if err != nil {
		return Suspension{}, err
	}
	return m.Suspend(burden)
}

// Suspend is [Suspend] for a model already prepared, for use at many burdens.
func (m *Model) Suspend(burden float64) (Suspension, error) {
	if !(burden > 0) || math.IsInf(burden, 0) {
		return Suspension{}, fmt.Errorf("burden: %g kg/m2 is not a positive finite number", burden)
	}
	s := Suspension{Burden: burden, FallTime: m.fallTime, NumberColumn: burden / m.meanMass}
	s.LayerField = math.Abs(m.fate.Charge) * elementaryCharge * s.NumberColumn / vacuumPermittivity
	if s.LayerField > RefuseField {
		return Suspension{}, fmt.Errorf("%w: %.3g V/m for %g charges on each of %.3g particles per m2; at most %g V/m",
			ErrLayerField, s.LayerField, m.fate.Charge, s.NumberColumn, RefuseField)
	}
	w := m.newWork()
	e := m.fate.exchange()
	p, not := e.returns()
	k, steps, err := w.agglomerate(s.NumberColumn, m.sinks, p, not)
	if err != nil {
		return Suspension{}, err
	}
	s.Steps = steps
	if k+m.sinks == 0 && not == 0 {
		return Suspension{}, errors.New("nothing removes the particles: no burial, no sinks, no agglomeration; there is no steady state")
	}
	if k > 0 {
		s.Agglomerates, s.AgglomerationTime = true, 1/k
	}
	s.Supply = burden / w.lifetime()
	s.Lifetime = burden / s.Supply
	if !(s.Supply > 0) || math.IsInf(s.Lifetime, 0) {
		return Suspension{}, errors.New("the particles are removed too slowly to tell the supply")
	}
	for j, l := range m.lanes {
		q := w.passages[j]
		supply := burden * l.mass / q.life
		toGround := supply * (q.groundNew + q.lifted*q.groundLift)
		s.GroundStore += toGround / (e.lift + e.bury)
		s.FallSpeedGround += l.mass * l.transport.fall.Speed
		s.Streams = append(s.Streams, Stream{
			MassShare: l.mass, SupplyShare: supply / s.Supply,
			NewResidence: q.stayNew, LiftedResidence: q.stayLift,
			NewToGround: q.groundNew, LiftedToGround: q.groundLift,
			AgglomerationRate: k, OtherRate: m.sinks,
			LiftTime: m.fate.LiftTime, BurialTime: m.fate.BurialTime, ReturnSingle: m.fate.ReturnSingle,
		})
	}
	s.ResidenceFull = (burden + s.GroundStore) / s.Supply
	s.Cycles = e.lift * s.GroundStore / s.Supply
	if e.bury > 0 {
		s.CyclesLimit, s.CyclesLimited = e.lift/e.bury, true
	}
	s.NumberDensityGround = s.NumberColumn * w.foot
	s.Profile = m.lattice.profile(w.mass, 1)
	if err := m.budget(&s, k); err != nil {
		return Suspension{}, err
	}
	s.Warnings = m.warnings(&s, w, k)
	return s, nil
}

// budget fills the losses and the residual.
func (m *Model) budget(s *Suspension, k float64) error {
	e := m.fate.exchange()
	add := func(name string, rate, alone float64) {
		l := Loss{Name: name, Rate: rate}
		if !math.IsInf(alone, 0) {
			l.LifetimeAlone, l.Acts = alone, true
		}
		s.Losses = append(s.Losses, l)
	}
	alone := math.Inf(1)
	if k > 0 {
		w := m.newWork()
		if _, _, err := w.agglomerate(s.NumberColumn, 0, 1, 0); err != nil {
			return fmt.Errorf("lifetime by agglomeration alone: %w", err)
		}
		alone = w.lifetime()
	}
	add(LossAgglomeration, k*s.Burden, alone)
	n := len(m.fate.Sinks)
	for i, sink := range m.fate.Sinks {
		add(sink.Name, sink.Rate*s.Burden, m.alone[i])
	}
	add(LossBurial, e.bury*s.GroundStore, m.alone[n])
	add(LossClumps, (1-e.single)*e.lift*s.GroundStore, m.alone[n+1])
	sum := 0.0
	for _, l := range s.Losses {
		sum += l.Rate
	}
	for i := range s.Losses {
		s.Losses[i].Share = s.Losses[i].Rate / sum
	}
	s.Residual = math.Abs(sum/s.Supply - 1)
	if !(s.Residual <= 1e-9) {
		return fmt.Errorf("the losses differ from the supply by %.2g of it: a defect of this program, please report it with the inputs", s.Residual)
	}
	return nil
}
