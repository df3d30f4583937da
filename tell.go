package hazewright

import (
	"sort"
	"strings"

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
			Name: pop.name, Share: pop.Share, Material: pop.Material.Name, Density: pop.density, ParticleMass: pop.meanMass,
			Metal: pop.material.Metal, Conducts: string(pop.material.Conducts), Combustible: string(pop.material.Combustible),
			Oxide:        pop.oxide,
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
			r.LayerShare += pop.Share * f.fates[i].layerShare()
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
	r.Warnings = append(r.Warnings, f.caseWarnings()...)
	return nil
}

// caseWarnings returns the warnings that depend on the sticking: those of fate and supply.
func (f *facts) caseWarnings() []Warning {
	if f.noBurden != "" {
		return nil
	}
	var out []Warning
	for i, pop := range f.populations {
		for _, w := range f.fates[i].Warnings {
			out = append(out, Warning{"fate", pop.name + ": " + w})
		}
	}
	if f.sticking > 0 && f.design.Fate.AggregateValue < 1 && f.design.Given.Lifetime == 0 {
		out = append(out, Warning{"fate.sticking", uncounted(f.design)})
	}
	out = append(out, f.warnings...)
	if f.noProgramme != "" {
		return append(out, Warning{"supply", f.noProgramme})
	}
	if f.state.Warming <= 0 {
		out = append(out, Warning{"warming", "the burden does not warm: the schedule counts the way to its " + FormatSI(f.state.Warming, "K", 3)})
	}
	for _, w := range f.programme.Warnings {
		out = append(out, Warning{w.Field, w.Text})
	}
	return out
}

// uncounted says which meetings of sticky particles are left out. The factors are those of
// an independent calculation for rods of 100 nm at a dust optical depth of 0.4.
func uncounted(d *Design) string {
	var what []string
	if d.Fate.Dust {
		what = append(what, "with natural dust (for thin rods about 1.5 times)")
	}
	if len(d.Particles) > 1 {
		what = append(what, "between the populations of the mix (about 1.8 times for two)")
	}
	if what == nil {
		return "meetings by differential fall and turbulence are not counted yet: sticky particles are lost sooner than computed"
	}
	return "meetings " + strings.Join(what, " and ") + " are not counted yet: sticky particles are lost sooner than computed, by those factors"
}

// layerShare is the share of the airborne mass inside a fixed layer, 0 without one.
func (s *fateFacts) layerShare() float64 {
	if s.inPlace == 1 {
		return 0
	}
	return s.inPlace
}

// thermalPeak is Wien's displacement constant [m K] (CODATA 2018).
const thermalPeak = 2.897771955e-3

func (r *DesignResult) tellWarnings(f *facts) {
	d := f.design
	for _, n := range f.state.Notes {
		r.warn("warming", "%s", n)
	}
	switch {
	case d.Fate.Profile.Kind == "mixed":
		r.warn("fate.profile", "the height profile is fixed by the study as mixed: the warming uses that, the lifetime the column that particles fall through")
	case d.Fate.Profile.Kind == "layer" && r.LayerShare > 0:
		r.warn("fate.profile", "the layer is fixed by the study: %.2g %% of what the column holds up is inside it; only that warms and counts as airborne, and the supply pays for the rest", 100*r.LayerShare)
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
	for _, pop := range f.populations {
		if pop.noFall != nil {
			return nil
		}
	}
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
				inverse[l.Name] += f.populations[i].Share / (l.LifetimeAlone * s.inPlace)
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
