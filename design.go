package hazewright

import (
	"context"
	"errors"
	"fmt"
	"math"

	"hazewright/logistics"
	"hazewright/optics/greenhouse"
)

// The sticking cases of a study that gives no sticking, worst first.
var stickingCases = []struct {
	name     string
	sticking float64
}{
	{"every touch sticks (100 %)", 1},
	{"one touch in a hundred sticks (1 %)", 0.01},
}

// design takes one design through the chain.
func (e *Engine) design(ctx context.Context, p *planet, d *Design) (*DesignResult, error) {
	r := &DesignResult{Design: d, Name: d.Name, Figures: map[string]FigureValue{}}
	shared := facts{design: d, area: p.area}
	for i := range d.Particles {
		if err := ctx.Err(); err != nil {
			return nil, err
		}
		pop, err := e.population(p, d, i)
		if err != nil {
			return nil, err
		}
		shared.populations = append(shared.populations, pop)
	}
	if err := shared.light(p.study.Model.KappaFactor); err != nil {
		return nil, err
	}
	if err := ctx.Err(); err != nil {
		return nil, err
	}
	if err := r.warm(p, &shared); err != nil {
		return nil, fmt.Errorf("warming: %w", err)
	}
	if err := ctx.Err(); err != nil {
		return nil, err
	}

	cases := stickingCases
	if d.Fate.StickingGiven {
		cases = cases[:1]
	}
	for i, c := range cases {
		f := shared
		f.sticking = d.Fate.Sticking
		if !d.Fate.StickingGiven {
			f.sticking = c.sticking
		}
		f.fall(p)
		if err := f.supplyChain(p); err != nil {
			return nil, fmt.Errorf("supply: %w", err)
		}
		figures, err := f.figures(p.study.Goal)
		if err != nil {
			return nil, err
		}
		limits := holdAgainst(p.study.Limits, figures, f.noBurden == "")
		if i == 0 {
			r.Figures, r.Limits = figures, limits
			if err := r.tell(p, &f); err != nil {
				return nil, err
			}
		}
		if !d.Fate.StickingGiven {
			r.Cases = append(r.Cases, CaseResult{Name: c.name, Sticking: c.sticking, Figures: figures, Limits: limits,
				Warnings: f.caseWarnings(), Losses: f.losses(), Programme: f.programme})
		}
	}
	if !d.Fate.StickingGiven {
		r.StickingCase = stickingCases[0].name
		r.warn("fate.sticking", "sticking is not given: assessed at 100 %% (shown) and at 1 %%; neither is a measurement")
	}
	return r, nil
}

func (r *DesignResult) warn(where, format string, args ...any) {
	w := Warning{where, fmt.Sprintf(format, args...)}
	for _, old := range r.Warnings {
		if old == w {
			return
		}
	}
	r.Warnings = append(r.Warnings, w)
}

// light joins the populations' optics by their shares of the airborne mass; kappa is
// the model factor on everything thermal.
func (f *facts) light(kappa float64) error {
	factor := kappa
	mix := func(of func(*population) float64) float64 {
		var s float64
		for _, p := range f.populations {
			s += p.Share * of(p)
		}
		return s
	}
	if g := f.design.Given.KappaThermal; g > 0 {
		factor = g / mix(func(p *population) float64 { return p.thermal.Abs })
	}
	f.thermalFactor = factor
	k := &f.kappa
	k.thermalAbs = factor * mix(func(p *population) float64 { return p.thermal.Abs })
	k.thermalExt = factor * mix(func(p *population) float64 { return p.thermal.Ext })
	k.solarAbs = mix(func(p *population) float64 { return p.solar.Abs })
	k.solarExt = mix(func(p *population) float64 { return p.solar.Ext })
	k.sumRuleCap = mix(func(p *population) float64 { return p.sumRuleCap })
	for i := range k.radio {
		k.radio[i] = mix(func(p *population) float64 { return p.radio[i] })
	}
	for _, p := range f.populations {
		if p.noRadio != "" {
			k.noRadio = p.noRadio
		}
	}
	bands := func(of func(*population) greenhouse.Band, factor float64) greenhouse.Band {
		n := len(of(f.populations[0]).Ext)
		b := greenhouse.Band{Ext: make([]float64, n), Sca: make([]float64, n), GSca: make([]float64, n)}
		for _, p := range f.populations {
			q := of(p)
			for i := range b.Ext {
				b.Ext[i] += factor * p.Share * q.Ext[i]
				b.Sca[i] += factor * p.Share * q.Sca[i]
				b.GSca[i] += factor * p.Share * q.GSca[i]
			}
		}
		return b
	}
	f.bands = greenhouse.Aerosol{
		Thermal:   bands(func(p *population) greenhouse.Band { return p.thermalBands }, factor),
		Solar:     bands(func(p *population) greenhouse.Band { return p.solarBands }, 1),
		Placement: placement(f.design.Fate.Profile),
	}
	if !(k.solarExt > 0) || !(k.sumRuleCap > 0) {
		return errors.New("optics: the particles neither absorb nor scatter sunlight: check the optical table")
	}
	return nil
}

// supplyChain sizes release, production, delivery and schedule.
func (f *facts) supplyChain(p *planet) error {
	if f.noBurden != "" {
		return nil
	}
	if err := f.release(p); err != nil {
		f.noProgramme = "no programme: " + err.Error()
		return nil
	}
	s := f.design.Supply
	d := logistics.Demand{PlanetArea: f.area, Burden: f.burdenValue, GoalWarming: f.state.Warming}
	for i, pop := range f.populations {
		fate := &f.fates[i]
		d.ReleaseSurvival = append(d.ReleaseSurvival, fate.usedSurvival)
		mass := pop.Share * f.burdenValue * f.area
		stream := logistics.Stream{Name: pop.name, Material: pop.Material.Name, Population: i,
			ParticleMass: pop.meanMass, Density: pop.solidDensity(), Inventory: mass}
		if g := f.design.Given.Lifetime; g > 0 {
			// Everything leaves at the given rate and nothing comes back.
			stream.NewResidence, stream.LiftedResidence = g, g
			stream.LiftTime, stream.BurialTime, stream.ReturnSingle = math.Inf(1), g, 1
			d.Streams = append(d.Streams, stream)
			continue
		}
		for _, q := range fate.Streams {
			one := stream
			one.Inventory = mass * q.MassShare
			// Of a fixed layer only the time inside it counts as time aloft.
			one.NewResidence, one.LiftedResidence = fate.inPlace*q.NewResidence, fate.inPlace*q.LiftedResidence
			one.NewToGround, one.LiftedToGround = q.NewToGround, q.LiftedToGround
			one.AgglomerationRate = q.AgglomerationRate / fate.inPlace
			one.LiftTime, one.BurialTime, one.ReturnSingle = q.LiftTime, q.BurialTime, q.ReturnSingle
			d.Streams = append(d.Streams, one)
		}
	}
	programme, err := logistics.Run(d, s, f.warmingAt)
	if err != nil {
		return err
	}
	f.programme = &programme
	return nil
}
