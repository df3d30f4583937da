package hazewright

import (
	"sort"

	"hazewright/settling"
)

// tell fills what the report shows of a design beside its figures, from the first
// sticking case.
func (r *DesignResult) tell(p *planet, f *facts) error {
	if f.noBurden != "" {
		r.Reached, r.Cause = false, f.noBurden
	}
	for i, pop := range f.populations {
		x := PopulationResult{
			Name: pop.name, Share: pop.Share, Material: pop.Material.Name, Metal: pop.metal, Density: pop.density, ParticleMass: pop.meanMass,
			KappaThermal: pop.thermal.Abs, KappaThermalExt: pop.thermal.Ext, KappaSolarExt: pop.solar.Ext, KappaSolarAbs: pop.solar.Abs,
			ProjectedArea: pop.optics.MeanProjectedArea() / pop.meanMass,
			FallSpeed:     pop.groundSpeed, Spectrum: pop.spectrum,
		}
		peak, err := pop.perKg(thermalPeak / p.base.SurfaceTemperature)
		if err != nil {
			return err
		}
		x.OpticsMethod, x.OpticsError = peak.Method, peak.Err
		if f.noBurden == "" {
			x.Lifetime, x.Given = f.fates[i].lifetime, f.design.Given.Lifetime > 0
			for _, w := range f.fates[i].Warnings {
				r.warn("fate", "%s: %s", pop.name, w)
			}
		}
		for _, n := range pop.notes {
			r.warn("optics", "%s: %s", pop.name, n)
		}
		r.Populations = append(r.Populations, x)
	}
	r.Spectrum = f.mixedSpectrum()
	if err := r.tellFall(p, f); err != nil {
		return err
	}
	r.tellWarnings(f)
	if f.noBurden != "" {
		return nil
	}
	r.Losses = f.losses()
	r.Profile = f.profile()
	r.Programme = f.programme
	for _, w := range f.programme.Warnings {
		r.warn(w.Field, "%s", w.Text)
	}
	r.Warnings = append(r.Warnings, f.warnings...)
	return nil
}

// thermalPeak is Wien's displacement constant [m K] (CODATA 2018).
const thermalPeak = 2.897771955e-3

func (r *DesignResult) tellWarnings(f *facts) {
	d := f.design
	for _, n := range f.state.Notes {
		r.warn("warming", "%s", n)
	}
	if d.Fate.Profile.Kind != "computed" {
		r.warn("fate.profile", "the height profile is fixed by the study, not computed: nothing here shows that the particles would stay there")
	}
	if d.Fate.Vapour == "saturated" {
		for _, p := range f.populations {
			if p.volatile {
				r.warn("fate.vapour", "the air is assumed saturated: the vapour must be kept up, or the particles sublime in %s",
					FormatSI(p.sublimation, shortTime(p.sublimation), 3))
			}
		}
	}
	if d.Given.Lifetime > 0 {
		r.warn("given.lifetime", "lifetime is given, not computed")
	}
	if d.Given.KappaThermal > 0 {
		r.warn("given.kappa_thermal", "thermal absorption per mass is given, not computed: the thermal optics are scaled to it")
	}
	if d.Given.Burden > 0 {
		r.warn("given.burden", "burden is given, not computed: the warming is what it gives")
	}
}

// mixedSpectrum joins the populations' spectra by share of the airborne mass.
func (f *facts) mixedSpectrum() []SpectrumPoint {
	out := make([]SpectrumPoint, len(f.populations[0].spectrum))
	for i := range out {
		s := &out[i]
		var weighted float64
		for _, p := range f.populations {
			x := p.spectrum[i]
			s.Wavelength = x.Wavelength
			s.Ext += p.Share * x.Ext
			s.Abs += p.Share * x.Abs
			s.Sca += p.Share * x.Sca
			weighted += p.Share * x.Sca * x.G
			s.Err = max(s.Err, x.Err)
			s.Method = x.Method
		}
		if s.Sca > 0 {
			s.G = weighted / s.Sca
		}
	}
	return out
}

// The heights of the fall-speed chart [m].
const (
	fallTop   = 60e3
	fallSteps = 31
)

// tellFall fills fall speed against height, mass-weighted over the design.
func (r *DesignResult) tellFall(p *planet, f *facts) error {
	for i := range fallSteps {
		z := fallTop * float64(i) / (fallSteps - 1)
		var v float64
		for _, pop := range f.populations {
			one, err := pop.fallSpeedAt(p, z)
			if err != nil {
				return err
			}
			v += pop.Share * one
		}
		r.FallSpeed = append(r.FallSpeed, HeightValue{z, v})
	}
	return nil
}

// losses joins the populations' losses by name, largest first.
func (f *facts) losses() []Loss {
	if g := f.design.Given.Lifetime; g > 0 {
		return []Loss{{Name: "all losses (lifetime given)", Share: 1, LifetimeAlone: g}}
	}
	var out []Loss
	at := map[string]int{}
	var total float64
	inverse := map[string]float64{} // of the lifetime each would give alone, by share of mass
	for i, s := range f.fates {
		for _, l := range s.Losses {
			k, ok := at[l.Name]
			if !ok {
				k = len(out)
				at[l.Name] = k
				out = append(out, Loss{Name: l.Name})
			}
			out[k].Share += l.Rate
			total += l.Rate
			if l.Acts {
				inverse[l.Name] += f.populations[i].Share / l.LifetimeAlone
			}
		}
	}
	for i := range out {
		out[i].Share /= total
		if v := inverse[out[i].Name]; v > 0 {
			out[i].LifetimeAlone = 1 / v
		}
	}
	sort.SliceStable(out, func(i, j int) bool { return out[i].Share > out[j].Share })
	return out
}

// profile joins the populations' height profiles by share of the airborne mass. All
// populations of a design share one column and so one grid.
func (f *facts) profile() []ProfilePoint {
	var out []ProfilePoint
	for i, s := range f.fates {
		var p settling.Profile = s.Profile
		if out == nil {
			out = make([]ProfilePoint, len(p.Heights))
		}
		for k := range p.Heights {
			out[k].Height = p.Heights[k]
			out[k].Mass += f.populations[i].Share * p.Density[k]
		}
	}
	return out
}
