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
	density      float64 // [kg/m3]
	meanMass     float64 // of one particle aloft [kg]
	metal        bool
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
	key := fmt.Sprintf("%+v at %v", q, p.base.SurfaceTemperature)
	shared, ok := e.optics.get(key)
	if !ok {
		var err error
		if shared, err = newPopulation(q, p.base.SurfaceTemperature); err != nil {
			return nil, fmt.Errorf("optics of %s: %w", name, err)
		}
		e.optics.put(key, shared)
	}
	out := *shared
	out.name = name
	if err := out.falls(p); err != nil {
		return nil, fmt.Errorf("fall of %s: %w", name, err)
	}
	return &out, nil
}

// describe names a population in plain words.
func describe(q Particle) string {
	if q.Shape == "rod" {
		return fmt.Sprintf("rod %s x %s, %s", FormatSI(q.Length, "um", 3), FormatSI(q.Diameter, "nm", 3), q.Material.Name)
	}
	return fmt.Sprintf("sphere of radius %s, %s", FormatSI(q.Radius, "um", 3), q.Material.Name)
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

// newPopulation works out the optics of a particle; planckTemperature is that of the
// thermal means [K].
func newPopulation(q Particle, planckTemperature float64) (*population, error) {
	m, err := materialOf(q.Material)
	if err != nil {
		return nil, err
	}
	oxide := q.Oxide
	if oxide < 0 { // not given
		oxide = m.DefaultOxide
	}
	o, err := optics.NewPopulation(optics.Particle{Shape: q.Shape, Radius: q.Radius, Length: q.Length, Diameter: q.Diameter,
		Oxide: oxide, Spread: q.Spread, SurfaceScattering: q.SurfaceScattering, Material: m})
	if err != nil {
		return nil, err
	}
	p := &population{Particle: q, optics: o, density: m.Density, meanMass: o.MeanMass(), metal: m.Metal, volatile: m.Volatile}
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
		x, err := p.perKg(lightSpeed / f)
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

// lightSpeed in vacuum [m/s], exact by definition.
const lightSpeed = 299792458.0

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

// body returns the falling body of one size class.
func (p *population) body(n optics.Node) settling.Body {
	if p.Shape == "rod" {
		return settling.Body{Shape: settling.Rod, Length: n.Size, Diameter: p.Diameter, Mass: n.Mass}
	}
	return settling.Body{Shape: settling.Sphere, Radius: n.Size, Mass: n.Mass}
}

// settlingPopulation returns the size classes as falling bodies.
func (p *population) settlingPopulation() settling.Population {
	var out settling.Population
	for _, n := range p.optics.Nodes() {
		out.Nodes = append(out.Nodes, settling.Member{Body: p.body(n), Number: n.Number})
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
		f, err := settling.FallSpeed(gas, pl.study.World.Gravity, p.body(n))
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
	p.sublimation, err = settling.SublimationTime(p.body(p.medianNode()), pl.study.World.AirTemperature)
	return err
}

// medianNode returns the middle size class, which stands for the population where one
// particle has to.
func (p *population) medianNode() optics.Node {
	nodes := p.optics.Nodes()
	return nodes[len(nodes)/2]
}
