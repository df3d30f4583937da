package greenhouse

import (
	"errors"
	"fmt"
	"math"
	"slices"
)

// Quick estimates the warming of one planet; see the package comment for the equations. It does not change once built and
// may be used from several goroutines.
type Quick struct {
	planet Planet
	sun    sunlight
	planck planckTable
	table  emissionTable
	base   State

	groundPlanck []float64 // B_b(T0) [W/m2]
	radiative    []float64 // f'_b
	air          []float64 // J_b [W/m2]
	airSunlit    float64   // s
	upBase       float64   // sum up0 [W/m2]
	sunBase      sunFluxes
	absorbedBase float64 // Q0 [W/m2]
}

// Limits of the estimate.
const (
	baseColdest, baseWarmest = 150.0, 300.0 // baseline ground temperature [K]
	coldestGround            = 90.0         // ground temperature with aerosol [K]
	warmestGround            = 480.0
	testedSolarDepth         = 1.5  // solar extinction depth up to which the estimate was held against the full column
	deepestTested            = 13.0 // solar extinction depth of the deepest comparison
	largestBurden            = 1000 // [kg/m2], six times the air itself (610 Pa / 3.71 m/s2): beyond any aerosol
)

// NewQuick prepares the estimate for a planet. It returns an error that lists every input out of range (the ranges stand
// beside the fields of [Planet]), or if no ground albedo gives the Bond albedo, or if the ground without aerosol would be
// outside 150 to 300 K. The baseline emission is that of [BaselinePlanet] at the planet's own dust optical depth, with the
// ground's emission changed to its emissivity; what else differs is listed by [Planet.Departures].
func NewQuick(p Planet) (*Quick, error) {
	if err := p.validate(); err != nil {
		return nil, err
	}
	table, err := baselineEmission(p.DustOpticalDepth)
	if err != nil {
		return nil, err
	}
	sun, err := newSunlight(p)
	if err != nil {
		return nil, err
	}
	// A ground of other emissivity emits more or less of B and reflects less or more of the back radiation.
	change := p.Emissivity - BaselinePlanet().Emissivity
	for b := range table.emission {
		table.emission[b] += table.transmission[b] * change * (1 - table.back[b])
	}

	n := len(table.emission)
	q := &Quick{
		planet: p, sun: sun, planck: newPlanckTable(ThermalEdges()), table: table,
		groundPlanck: make([]float64, n), radiative: make([]float64, n), air: make([]float64, n),
		sunBase: sun.fluxes(sun.dust, 0),
	}
	ft, fs := q.sunBase.top, q.sunBase.ground
	q.absorbedBase = (ft + fs) / 2

	t0, _, err := descend(200, func(t float64) float64 {
		var out float64
		for b, f := range table.emission {
			out += f * q.planck.flux(b, t)
		}
		return ft - out
	})
	if err != nil {
		return nil, fmt.Errorf("baseline ground temperature: %w", err)
	}
	if t0 < baseColdest || t0 > baseWarmest {
		return nil, fmt.Errorf("baseline ground temperature %.1f K is outside %g to %g K, the range of the estimate", t0, baseColdest, baseWarmest)
	}

	outgoing := make([]float64, n)
	var airTotal float64
	for b := range n {
		planck := q.planck.flux(b, t0)
		q.groundPlanck[b] = planck
		f, t, d := table.emission[b], table.transmission[b], table.back[b]
		up := (p.Emissivity + (1-p.Emissivity)*d) * planck
		outgoing[b] = f * planck
		q.radiative[b] = f * q.absorbedBase / ft
		q.air[b] = outgoing[b] - t*up
		q.upBase += up
		airTotal += q.air[b]
	}
	if airTotal > 0 {
		q.airSunlit = math.Max(0, math.Min(1, (ft-fs)/2/airTotal))
	}
	q.base = State{
		SurfaceTemperature: t0, AbsorbedSunlight: ft,
		SunAtGround: q.sunBase.down, SunAtGroundBase: q.sunBase.down,
		DirectSun: q.sunBase.direct, DirectSunBase: q.sunBase.direct,
		OutgoingSpectrum: outgoing, OutgoingBase: outgoing, Rule: Radiative, Valid: true,
	}
	return q, nil
}

// Planet returns the planet the estimate was built for.
func (q *Quick) Planet() Planet { return q.planet }

// Baseline returns the state without aerosol: ground temperature [K], sunlight and outgoing spectrum.
func (q *Quick) Baseline() State { return q.base.clone() }

// EffectiveTemperature returns the temperature [K] of a black body that sends back the sunlight
// the planet takes in,
//
//	T = (S (1 - A) / (4 sigma))^(1/4)
//
// with sunlight S at normal incidence and Bond albedo A.
func (q *Quick) EffectiveTemperature() float64 {
	return math.Pow(q.planet.Sunlight/4*(1-q.planet.BondAlbedo)/stefanBoltzmann, 0.25)
}

// GroundAlbedo returns the albedo of the ground [1] with which ground and dust have the planet's Bond albedo.
func (q *Quick) GroundAlbedo() float64 { return q.sun.ground }

// Rule names the balance that sets the ground temperature; see the package comment.
type Rule int

// The two balances.
const (
	Radiative  Rule = iota // radiation alone: the air is not steeper than the lapse limit, or is heated from above
	Convective             // convection holds the air at the lapse limit
)

// String returns the name of the rule.
func (r Rule) String() string {
	if r == Convective {
		return "convective"
	}
	return "radiative"
}

// State is the planet with one burden of aerosol. Fluxes are planet means on a horizontal plane [W/m2].
type State struct {
	Burden             float64 // airborne column mass [kg/m2]
	Warming            float64 // of the ground against the baseline [K]
	SurfaceTemperature float64 // [K]

	// Forcing is the fixed-surface-temperature forcing: the net gain N = min(N_rad, N_con) of the planet with the
	// aerosol while the ground is held at its baseline temperature and the air has adjusted [W/m2]. It is what the ground
	// has to make up for by warming, and has the sign of the warming.
	Forcing float64

	OpticalDepthThermal float64 // vertical extinction, Planck mean at the baseline ground temperature [1]
	OpticalDepthSolar   float64 // vertical extinction, Planck mean at 5772 K over the solar bands [1]

	AbsorbedSunlight float64 // by planet and air [W/m2]
	SunAtGround      float64 // all downward sunlight at the ground [W/m2]
	SunAtGroundBase  float64 // the same without the aerosol, dust kept
	DirectSun        float64 // unscattered part of it (delta scaling not applied)
	DirectSunBase    float64 // the same without the aerosol
	SunlightLoss     float64 // 1 - SunAtGround/SunAtGroundBase [1]; negative where the aerosol sends light back down

	// OutgoingSpectrum is the thermal flux to space in each band of [ThermalEdges] [W/m2]; it sums to AbsorbedSunlight.
	// Under the radiative rule the energy that leaves directly from aloft is spread in proportion to the rest.
	OutgoingSpectrum []float64
	OutgoingBase     []float64 // the same without the aerosol

	Rule  Rule
	Valid bool     // false where the estimate was not tested; Notes say why
	Notes []string // remarks for the reader of the result
}

func (s State) clone() State {
	s.OutgoingSpectrum = slices.Clone(s.OutgoingSpectrum)
	s.OutgoingBase = slices.Clone(s.OutgoingBase)
	s.Notes = slices.Clone(s.Notes)
	return s
}

// Warming returns the state with a burden [kg/m2] of the aerosol, 0 to 1000. The ground temperature solves
// N(Ts) = min(N_rad, N_con) = 0 to 1e-8 W/m2 (package comment). Beyond a solar extinction depth of 1.5, or a ground outside
// 90 to 480 K, the state comes back with Valid false and a note. Malformed optics, a burden out of range or a balance
// that cannot be closed give an error. How well it does: [Accuracy].
func (q *Quick) Warming(a Aerosol, burden float64) (State, error) {
	if err := a.validate(); err != nil {
		return State{}, err
	}
	return q.warming(a, burden)
}

// warming is Warming for optics already checked.
func (q *Quick) warming(a Aerosol, burden float64) (State, error) {
	if !(burden >= 0 && burden <= largestBurden) {
		return State{}, fmt.Errorf("burden %g kg/m2 is outside 0 to %d kg/m2", burden, largestBurden)
	}
	if burden == 0 {
		return q.Baseline(), nil
	}
	c := q.newColumn(a, burden)
	t0 := q.base.SurfaceTemperature
	t, residual, err := descend(t0, func(t float64) float64 { n, _ := c.gain(t); return n })
	if err != nil {
		return State{}, fmt.Errorf("ground temperature at burden %g kg/m2: %w", burden, err)
	}
	s := q.base.clone()
	s.Burden = burden
	s.Forcing, _ = c.gain(t0)
	_, s.Rule = c.gain(t)
	s.SurfaceTemperature, s.Warming = t, t-t0
	s.AbsorbedSunlight = c.sun.top
	s.SunAtGround, s.DirectSun = c.sun.down, c.sun.direct
	s.SunlightLoss = 1 - s.SunAtGround/s.SunAtGroundBase
	s.OutgoingSpectrum = c.outgoing(t, s.Rule)
	for b, planck := range q.groundPlanck {
		s.OpticalDepthThermal += burden * a.Thermal.Ext[b] * planck
	}
	s.OpticalDepthThermal /= sum(q.groundPlanck)
	for b, share := range q.sun.share {
		s.OpticalDepthSolar += burden * a.Solar.Ext[b] * share
	}
	if math.IsNaN(s.Warming+s.Forcing+s.SunlightLoss+residual) || math.IsNaN(sum(s.OutgoingSpectrum)) {
		return State{}, fmt.Errorf("burden %g kg/m2: the estimate came out as NaN from finite optics; please report this with the study", burden)
	}
	q.remark(&s, a)
	return s, nil
}

// beyondTested says what the comparison with the full column showed past testedSolarDepth.
var beyondTested = [...]string{
	Mixed: "well-mixed rods and shells then came out at 0.96 to 1.15 of the full column, few cases",
	Layer: "aerosol in a layer then came out at up to 3.6 times the full column",
	Low:   "aerosol held low then came out at up to 2 times the full column, which peaks earlier",
}

// remark sets Valid and Notes.
func (q *Quick) remark(s *State, a Aerosol) {
	switch {
	case s.OpticalDepthSolar > deepestTested:
		s.Valid = false
		s.Notes = append(s.Notes, fmt.Sprintf("solar optical depth %.3g is beyond %g: nothing like it was compared with a full column", s.OpticalDepthSolar, deepestTested))
	case s.OpticalDepthSolar > testedSolarDepth:
		s.Valid = false
		s.Notes = append(s.Notes, fmt.Sprintf("solar optical depth %.2g is beyond %g: %s", s.OpticalDepthSolar, testedSolarDepth, beyondTested[a.Placement.Kind]))
	}
	if t := s.SurfaceTemperature; t < coldestGround || t > warmestGround {
		s.Valid = false
		s.Notes = append(s.Notes, fmt.Sprintf("ground temperature %.0f K is outside %g to %g K", t, coldestGround, warmestGround))
	}
	if frost := frostPoint(q.planet.SurfacePressure); s.SurfaceTemperature < frost {
		s.Notes = append(s.Notes, fmt.Sprintf("ground colder than the CO2 frost point, %.1f K: the atmosphere would freeze out", frost))
	}
	if s.Warming < 0 {
		s.Notes = append(s.Notes, "cooling is estimated less well than warming: within a factor of about 2")
	}
	if a.Placement.Kind == Layer && a.Placement.Bottom >= 10e3 && s.SunlightLoss > 0.1 && s.AbsorbedSunlight > q.base.AbsorbedSunlight {
		s.Notes = append(s.Notes, "a high layer that absorbs sunlight warms the ground less than the estimate says, down to a third of it")
	}
}

// column is the planet with one burden of one aerosol, ready to be balanced.
type column struct {
	q                       *Quick
	sun                     sunFluxes
	resistance              []float64    // 1/f' + 0.75 tau*
	reflect, transmit, emit []float64    // of the aerosol layer
	cut                     [][3]float64 // how much colder than the ground it emits [K]: lapse limit times emission heights
	sunlit                  float64      // absorbed sunlight against the baseline, at most 1
	coldest                 float64      // grey skin temperature [K]
}

func (q *Quick) newColumn(a Aerosol, burden float64) *column {
	n := len(q.radiative)
	store := make([]float64, 4*n)
	part := func(i int) []float64 { return store[i*n : (i+1)*n : (i+1)*n] }
	c := &column{
		q: q, sun: q.sun.fluxes(a.Solar, burden),
		resistance: part(0), reflect: part(1), transmit: part(2), emit: part(3), cut: make([][3]float64, n),
	}
	c.sunlit = math.Min(1, c.sun.top/q.sunBase.top)
	c.coldest = math.Pow(c.sun.top/(2*stefanBoltzmann), 0.25)
	for b := range n {
		tau := burden * a.Thermal.transport(b)
		c.resistance[b] = 1/q.radiative[b] + 0.75*tau
		c.reflect[b], c.transmit[b], c.emit[b] = thermalSlab(burden*a.Thermal.Ext[b], burden*a.Thermal.Sca[b], burden*a.Thermal.GSca[b])
		a.Placement.emissionHeights(tau, q.planet.ScaleHeight, &c.cut[b])
		for i := range c.cut[b] {
			c.cut[b][i] *= q.planet.LapseLimit
		}
	}
	return c
}

// gain returns N(Ts) [W/m2] and the rule that sets it.
func (c *column) gain(t float64) (float64, Rule) {
	radiative, convective := c.radiativeGain(t), c.convectiveGain(t, nil)
	if convective < radiative {
		return convective, Convective
	}
	return radiative, Radiative
}

// radiativeGain returns N_rad(Ts) [W/m2].
func (c *column) radiativeGain(t float64) float64 {
	var planck, out float64
	for b, r := range c.resistance {
		v := c.q.planck.flux(b, t)
		planck += v
		out += v / r
	}
	x := planck/out - 1
	mean := c.sun.mean / c.q.sunBase.mean * c.q.absorbedBase
	return ((c.sun.top+c.sun.ground)/2+x*mean)/(1+x) - out
}

// convectiveGain returns N_con(Ts) [W/m2]; the outgoing flux per band goes to spectrum unless it is nil.
func (c *column) convectiveGain(t float64, spectrum []float64) float64 {
	q := c.q
	emissivity := q.planet.Emissivity
	var through, upTotal float64
	for b, planck := range q.groundPlanck {
		reflect, transmit, down := c.reflect[b], c.transmit[b], c.sunlit*q.table.back[b]*planck
		var emitted float64
		for i, w := range emissionWeights {
			emitted += w * q.planck.flux(b, math.Max(t-c.cut[b][i], c.coldest))
		}
		emitted *= c.emit[b]
		ground := (emissivity*q.planck.flux(b, t) + (1-emissivity)*(emitted+transmit*down)) / (1 - (1-emissivity)*reflect)
		up := emitted + reflect*down + transmit*ground
		through += q.table.transmission[b] * up
		upTotal += up
		if spectrum != nil {
			spectrum[b] = q.table.transmission[b] * up
		}
	}
	air := q.airSunlit*c.sunlit + (1-q.airSunlit)*upTotal/q.upBase
	var airTotal float64
	for b, j := range q.air {
		airTotal += air * j
		if spectrum != nil {
			spectrum[b] += air * j
		}
	}
	return c.sun.top - through - airTotal
}

// outgoing returns the spectrum to space [W/m2] at the balanced ground temperature.
func (c *column) outgoing(t float64, r Rule) []float64 {
	out := make([]float64, len(c.resistance))
	if r == Convective {
		c.convectiveGain(t, out)
		return out
	}
	for b, r := range c.resistance {
		out[b] = c.q.planck.flux(b, t) / r
	}
	scale := c.sun.top / sum(out)
	for b := range out {
		out[b] *= scale
	}
	return out
}

func sum(v []float64) float64 {
	var s float64
	for _, x := range v {
		s += x
	}
	return s
}

// balanceTolerance is how closely the energy balance is met [W/m2].
const balanceTolerance = 1e-8

var errNoBalance = errors.New("no ground temperature between 40 and 1500 K closes the energy balance")

// descend returns the root of a function that falls with temperature, and what is left there. It steps outward from start
// until the sign changes, then closes in with the Illinois form of false position [DahlquistBjorck1974].
func descend(start float64, f func(float64) float64) (root, residual float64, err error) {
	const lowest, highest = 40.0, 1500.0
	a, fa := start, f(start)
	if math.Abs(fa) < balanceTolerance/10 {
		return a, fa, nil
	}
	// A black ground gains 4 sigma T^3 = 2 W/m2/K at 215 K; twice the Newton step mostly brackets.
	step := 2 * fa / (4 * stefanBoltzmann * math.Pow(start, 3))
	b, fb := a, fa
	for fa*fb > 0 {
		a, fa = b, fb
		b = math.Max(lowest, math.Min(highest, b+step))
		if b == a {
			return 0, 0, errNoBalance
		}
		fb = f(b)
		step *= 2
	}
	for range 200 {
		m := b - fb*(b-a)/(fb-fa)
		if !(m > math.Min(a, b) && m < math.Max(a, b)) {
			m = (a + b) / 2
		}
		fm := f(m)
		if math.Abs(fm) < balanceTolerance/10 || m == a || m == b {
			if math.Abs(fm) < balanceTolerance {
				return m, fm, nil
			}
			break
		}
		if fm*fb < 0 {
			a, fa = b, fb
		} else {
			fa /= 2
		}
		b, fb = m, fm
	}
	return 0, 0, fmt.Errorf("energy balance not closed: %.3g W/m2 left at %.3f K, wanted %g", fb, b, balanceTolerance)
}
