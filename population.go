package hazewright

import (
	"fmt"
	"math"

	"hazewright/optics"
	"hazewright/optics/greenhouse"
	"hazewright/optics/material"
	"hazewright/settling"
)

// population is one population of a design as the stages see it: its optics per
// kilogram and its bodies. Everything but the fields set by [Engine.population] is
// remembered and shared.
type population struct {
	Particle // as the study has it
	name     string

	optics       *optics.Population
	material     *material.Material // of the particle, or of a shell's wall
	core         *material.Material // of a shell; nil for hollow and for other shapes
	oxide        float64            // skin [m]
	density      float64            // of the material [kg/m3]
	meanMass     float64            // of one particle aloft [kg]
	volatile     bool
	thermal      optics.Means // Planck means at the baseline surface temperature [m2/kg]
	solar        optics.Means
	sumRuleCap   float64    // [m2/kg]
	radio        [4]float64 // extinction at the radio bands [m2/kg]
	noRadio      string
	thermalBands greenhouse.Band
	solarBands   greenhouse.Band
	spectrum     []SpectrumPoint
	notes        []string

	noFall      error   // why its fall cannot be computed; then the rest is zero
	groundSpeed float64 // mass-weighted [m/s]
	sublimation float64 // [s], volatile only
}

// spectrumPoints is how many wavelengths a spectrum chart has, spectrumFrom and
// spectrumTo its ends [m].
const (
	spectrumPoints = 160
	spectrumFrom   = 0.2e-6
	spectrumTo     = 100e-6
)

// population returns the i-th population of a design with its optics, remembered or new.
func (e *Engine) population(p *planet, d *Design, i int) (*population, error) {
	q := d.Particles[i]
	name := describe(q)
	key := opticsKey(p.study, q, p.base.SurfaceTemperature)
	shared, ok := e.optics.get(key)
	if !ok {
		var err error
		if shared, err = newPopulation(q, p.base.SurfaceTemperature); err != nil {
			return nil, fmt.Errorf("optics of %s: %w", name, err)
		}
		e.optics.put(key, shared)
	}
	out := *shared
	out.Particle, out.name = q, name
	out.noFall = out.falls(p)
	return &out, nil
}

// opticsKey names all that the optics of a population depend on: not its share, and a
// user's table by its hash.
func opticsKey(s *Study, q Particle, planckTemperature float64) string {
	q.Share = 0
	q.Material.Rows = nil
	hash := ""
	for _, t := range s.Tables {
		if t.File == q.Material.Table {
			hash = t.SHA256
		}
	}
	return fmt.Sprintf("%+v %s %v", q, hash, planckTemperature)
}

// describe names a population in plain words.
func describe(q Particle) string {
	if q.Shape == "rod" {
		return fmt.Sprintf("rod %s x %s, %s", FormatSI(q.Length, "um", 3), FormatSI(q.Diameter, "nm", 3), q.Material.Name)
	}
	radius := FormatSI(q.Radius, "um", 3)
	if q.Shape == "sphere" {
		return fmt.Sprintf("sphere of radius %s, %s", radius, q.Material.Name)
	}
	inside := "hollow"
	if q.Core != "" {
		inside = "around " + q.Core
	}
	return fmt.Sprintf("shell of radius %s, wall %s of %s, %s", radius, FormatSI(q.Wall, "nm", 3), q.Material.Name, inside)
}

// materialOf returns the built-in material or the user's table of a reference.
func materialOf(m MaterialRef) (*material.Material, error) {
	if m.Table == "" {
		return material.ByName(m.Name)
	}
	rows := make([]material.Row, len(m.Rows))
	for i, r := range m.Rows {
		rows[i] = material.Row{Wavelength: r[0], N: r[1], K: r[2]}
	}
	return material.NewTable(m.Name, m.Density, rows, m.Extend)
}

// opticsOf returns a population as the optics have it, with the material's own oxide skin
// where the study gives none; its Particle has material, core and skin as used.
func opticsOf(q Particle) (*optics.Population, error) {
	m, err := materialOf(q.Material)
	if err != nil {
		return nil, err
	}
	p := optics.Particle{Shape: q.Shape, Radius: q.Radius, Length: q.Length, Diameter: q.Diameter, Wall: q.Wall,
		Oxide: q.Oxide, Spread: q.Spread, SurfaceScattering: q.SurfaceScattering, Material: m}
	if q.Oxide < 0 { // not given
		p.Oxide = m.DefaultOxide
	}
	if q.Core != "" {
		if p.Core, err = material.ByName(q.Core); err != nil {
			return nil, fmt.Errorf("core: %w", err)
		}
	}
	return optics.NewPopulation(p)
}

// newPopulation works out the optics of a particle; planckTemperature is that of the
// thermal means [K].
func newPopulation(q Particle, planckTemperature float64) (*population, error) {
	o, err := opticsOf(q)
	if err != nil {
		return nil, err
	}
	used := o.Particle()
	m := used.Material
	p := &population{Particle: q, optics: o, material: m, core: used.Core, oxide: used.Oxide, density: m.Density, meanMass: o.MeanMass(), volatile: m.Volatile}
	for _, light := range []struct {
		name        string
		temperature float64
	}{{"thermal emission", planckTemperature}, {"sunlight", optics.SolarTemperature}} {
		if held := m.HeldShare(light.temperature); held > heldWarned {
			p.notes = append(p.notes, fmt.Sprintf("%.2g %% of the %s is at wavelengths where the index of %s is not known and its end values are held", 100*held, light.name, m.Name))
		}
	}
	if p.thermal, err = optics.PlanckMean(o, planckTemperature); err != nil {
		return nil, err
	}
	if p.solar, err = optics.SolarMean(o); err != nil {
		return nil, err
	}
	if p.sumRuleCap, err = optics.SumRuleCap(o, planckTemperature); err != nil {
		return nil, err
	}
	if p.thermalBands, err = bandsOf(o, greenhouse.ThermalEdges()); err != nil {
		return nil, err
	}
	if p.solarBands, err = bandsOf(o, greenhouse.SolarEdges()); err != nil {
		return nil, err
	}
	for i, f := range radioFrequencies {
		x, err := p.perKg(material.LightSpeed / f)
		if err != nil {
			p.noRadio = "no optical data at radio wavelengths: " + err.Error()
			break
		}
		p.radio[i] = x.Ext
	}
	step := math.Log(spectrumTo/spectrumFrom) / (spectrumPoints - 1)
	for i := range spectrumPoints {
		x, err := p.perKg(spectrumFrom * math.Exp(step*float64(i)))
		if err != nil {
			return nil, err
		}
		p.spectrum = append(p.spectrum, x)
	}
	return p, nil
}

// heldWarned is the share of a spectrum on held index values above which it is said.
const heldWarned = 0.01

// perKg returns the size-averaged optics at one wavelength [m], per kilogram.
func (p *population) perKg(wavelength float64) (SpectrumPoint, error) {
	x, err := p.optics.At(wavelength)
	if err != nil {
		return SpectrumPoint{}, err
	}
	m := p.meanMass
	return SpectrumPoint{Wavelength: wavelength, Ext: x.Ext / m, Abs: x.Abs / m, Sca: x.Sca / m, G: x.G, Method: x.Method, Err: x.Err}, nil
}

func bandsOf(o *optics.Population, edges []float64) (greenhouse.Band, error) {
	b, err := optics.Bands(o, edges)
	if err != nil {
		return greenhouse.Band{}, err
	}
	return greenhouse.Band{Ext: b.Ext, Sca: b.Sca, GSca: b.GSca}, nil
}

// body returns the falling body of one size and mass. The few rods of a wide spread that
// are shorter than the drag model takes fall as the shortest that it takes.
func (p *population) body(size, mass float64) settling.Body {
	if p.Shape == "rod" {
		return settling.Body{Shape: settling.Rod, Length: max(size, settling.MinAspect*p.Diameter), Diameter: p.Diameter, Mass: mass}
	}
	return settling.Body{Shape: settling.Sphere, Radius: size, Mass: mass}
}

// typical returns the particle of median size, which stands for the population where one
// particle has to.
func (p *population) typical() settling.Body {
	switch p.Shape {
	case "rod":
		return settling.RodOf(p.Length, p.Diameter, p.density)
	case "sphere":
		return settling.SphereOf(p.Radius, p.density)
	}
	body := settling.SphereOf(p.Radius, p.density)
	inside := settling.SphereOf(p.Radius-p.Wall, p.density)
	body.Mass -= inside.Mass
	if p.core != nil {
		body.Mass += inside.Mass * p.core.Density / p.density
	}
	return body
}

// vanishing returns the body whose sublimation time is that of the population's typical
// particle: of a shell, whose wall is gone when its thickness is, a sphere as thick.
func (p *population) vanishing() settling.Body {
	if p.Shape == "shell" {
		return settling.SphereOf(p.Wall, p.density)
	}
	return p.typical()
}

// solidDensity is the mean density of what the particles are made of [kg/m3]: their mass
// over the volume of wall and core, without what is hollow.
func (p *population) solidDensity() float64 {
	if p.core == nil {
		return p.density
	}
	inside := math.Pow(1-p.Wall/p.Radius, 3) // share of the volume
	return p.density*(1-inside) + p.core.Density*inside
}

// settlingPopulation returns the size classes as falling bodies.
func (p *population) settlingPopulation() settling.Population {
	out := settling.Population{Typical: p.typical()}
	for _, n := range p.optics.Nodes() {
		out.Nodes = append(out.Nodes, settling.Member{Body: p.body(n.Size, n.Mass), Number: n.Number})
	}
	return out
}

// fallSpeedAt returns the mass-weighted fall speed at a height [m/s].
func (p *population) fallSpeedAt(pl *planet, height float64) (float64, error) {
	gas, err := pl.column.At(height)
	if err != nil {
		return 0, err
	}
	var speed, mass float64
	for _, n := range p.optics.Nodes() {
		f, err := settling.FallSpeed(gas, pl.study.World.Gravity, p.body(n.Size, n.Mass))
		if err != nil {
			return 0, err
		}
		speed += n.Number * n.Mass * f.Speed
		mass += n.Number * n.Mass
	}
	return pl.study.Model.FallSpeedFactor * speed / mass, nil
}

// falls fills what depends on the planet.
func (p *population) falls(pl *planet) error {
	var err error
	if p.groundSpeed, err = p.fallSpeedAt(pl, 0); err != nil {
		return err
	}
	if !p.volatile {
		return nil
	}
	p.sublimation, err = settling.SublimationTime(p.vanishing(), pl.study.World.AirTemperature)
	return err
}
