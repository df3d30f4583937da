package optics

import (
	"fmt"
	"math"

	"gonum.org/v1/gonum/integrate/quad"

	"hazewright/optics/rod"
)

// Node is one size class of a [Population]: the size (radius of a sphere, outer radius of a shell, length of a rod) [m],
// the share of the number of particles (all sum to 1) and the mass of one particle [kg].
type Node struct {
	Size, Number, Mass float64
}

// Population is a kind of particle with its spread of sizes. It does not change once made and
// is safe for use by several goroutines.
type Population struct {
	particle Particle
	nodes    []Node
	rough    []float64 // weights of a second, rougher average over sizes, see roughWeights
	mass     float64   // [kg], mean of one particle
	area     float64   // [m2], mean projected area
	volume   float64   // [m3], mean outer
	tools    *tools
}

// NewPopulation returns the population of a particle kind. A spread above 1 is log-normal in
// the airborne number, by Gauss-Hermite nodes in the logarithm of the size:
//
//	size_i = size exp(sqrt(2) ln(spread) t_i),   share_i = w_i/sqrt(pi)
//
// with enough nodes that Planck means change by less than 0.5 % when their number is
// raised by half; nodes with a share below 1e-9 of the number and of the volume are left out.
// Rods shorter than 10 diameters are counted, per length, as rods of 10 diameters, if they
// hold less than 1 % of the mass. Errors: those of [Particle.Validate], and a spread that puts
// more mass than that below 10 diameters.
func NewPopulation(p Particle) (*Population, error) {
	if err := p.Validate(); err != nil {
		return nil, err
	}
	spread := math.Max(p.Spread, 1)
	return newPopulation(p, nodeCount(spread))
}

// nodeCount returns the number of Gauss-Hermite nodes. Means over bands or spectra are converged;
// at a single wavelength near the resonance of aluminium rods the size mean still carries a
// few per cent (spread 1.2) to 30 % (spread 1.8).
func nodeCount(spread float64) int {
	s := math.Log(spread)
	if s == 0 {
		return 1
	}
	return 4 + int(math.Ceil(25*s))
}

func newPopulation(p Particle, count int) (*Population, error) {
	median := p.Radius
	if p.Shape == Rod {
		median = p.Length
	}
	s := math.Log(math.Max(p.Spread, 1))
	t, w := []float64{0}, []float64{math.Sqrt(math.Pi)}
	if count > 1 {
		t, w = make([]float64, count), make([]float64, count)
		quad.Hermite{}.FixedLocations(t, w, math.Inf(-1), math.Inf(1))
	}
	pop := &Population{particle: p, tools: newTools(p)}
	moment := p.volume(median) * math.Exp(4.5*s*s)
	if p.Shape == Rod {
		moment = p.volume(median) * math.Exp(0.5*s*s)
	}
	total, short := 0.0, 0.0
	for i := range t {
		size := median * math.Exp(math.Sqrt2*s*t[i])
		number := w[i] / math.Sqrt(math.Pi)
		volume := p.volume(size)
		if count > 1 && number < 1e-9 && number*volume < 1e-9*moment {
			continue
		}
		if p.Shape != Rod && size <= 2*p.Oxide {
			return nil, fmt.Errorf("spread %g puts particles of radius %.3g nm into an oxide skin of %.3g nm", p.Spread, size*1e9, p.Oxide*1e9)
		}
		if p.Shape == Rod && size < rod.MinAspect*p.Diameter {
			short += number * volume
		}
		wall, core := p.masses(size)
		pop.nodes = append(pop.nodes, Node{Size: size, Number: number, Mass: wall + core})
		total += number
	}
	for i := range pop.nodes {
		n := &pop.nodes[i]
		n.Number /= total
		pop.mass += n.Number * n.Mass
		pop.area += n.Number * p.projectedArea(n.Size)
		pop.volume += n.Number * p.volume(n.Size)
	}
	if share := short * p.Material.Density / (total * pop.mass); share > 0.01 {
		return nil, fmt.Errorf("spread %g of length %.4g um puts %.2g %% of the mass below %d diameters (%.4g um), where the rod model does not hold; use a smaller spread or thinner rods",
			p.Spread, p.Length*1e6, share*100, rod.MinAspect, rod.MinAspect*p.Diameter*1e6)
	}
	if len(pop.nodes) > 1 {
		pop.rough = roughWeights(pop.nodes, median, s, p.Shape == Rod)
	}
	return pop, nil
}

// roughWeights returns the weights of the average over a log-normal spread that takes the
// cross-section per volume as linear in ln(size) between the nodes and constant beyond
// them. Where it departs from the Gauss-Hermite average the nodes do not resolve the
// cross-section's dependence on size; s is the standard deviation of ln(size).
func roughWeights(nodes []Node, median, s float64, rods bool) []float64 {
	power := 3.0 // of the size in the volume
	if rods {
		power = 1
	}
	out := make([]float64, len(nodes))
	const steps, reach = 2000, 8.0 // midpoint rule over +-8 standard deviations of number and of volume
	from, to := -reach, reach+power*s
	h := (to - from) / steps
	at := 0
	for i := range steps {
		z := from + (float64(i)+0.5)*h
		size := median * math.Exp(s*z)
		number := h * math.Exp(-z*z/2) / math.Sqrt(2*math.Pi)
		for at+1 < len(nodes) && nodes[at+1].Size < size {
			at++
		}
		f := 0.0 // towards the next node
		if at+1 < len(nodes) && size > nodes[at].Size {
			f = math.Log(size/nodes[at].Size) / math.Log(nodes[at+1].Size/nodes[at].Size)
		}
		out[at] += number * (1 - f) * math.Pow(size/nodes[at].Size, power)
		if f > 0 {
			out[at+1] += number * f * math.Pow(size/nodes[at+1].Size, power)
		}
	}
	return out
}

// Particle returns the description the population was made from.
func (p *Population) Particle() Particle { return p.particle }

// Nodes returns the size classes, by rising size. The caller owns the slice.
func (p *Population) Nodes() []Node { return append([]Node(nil), p.nodes...) }

// MeanMass returns the number-mean mass of one particle [kg]: outer dimensions, of a shell its
// wall and core.
func (p *Population) MeanMass() float64 { return p.mass }

// Density returns the mean mass over the mean outer volume [kg/m3]: that of the material, of a
// shell that of the particle as a whole.
func (p *Population) Density() float64 { return p.mass / p.volume }

// MeanProjectedArea returns the number-mean geometric cross-section of one randomly oriented
// particle [m2], a quarter of its surface.
func (p *Population) MeanProjectedArea() float64 { return p.area }

// At returns the number-mean cross-sections of one particle at a wavelength in vacuum [m]. G is
// weighted with scattering, Err with extinction, with what the average over sizes leaves
// unresolved added (a few per cent near sharp resonances, of weak absorbers more; means over a
// spectrum lose far less); Method is that of the size class that contributes most extinction. Errors: the material's range, or a size the method does not take.
func (p *Population) At(wavelength float64) (CrossSection, error) {
	var buffer [48]CrossSection
	each := buffer[:0]
	if len(p.nodes) > len(buffer) {
		each = make([]CrossSection, len(p.nodes))
	}
	each = each[:len(p.nodes)]
	if err := p.particle.at(wavelength, p.nodes, each, p.tools); err != nil {
		return CrossSection{}, err
	}
	var sum mean
	for i, n := range p.nodes {
		sum.add(n.Number, each[i])
	}
	c := sum.over()
	c.Err += p.unresolved(each, c)
	return c, nil
}

// unresolved returns the relative error of the average over sizes: what a rougher average
// makes of extinction or absorption, whichever is more, at most 1. It tells the size of the
// error, not a bound: the truth is within three times it at 95 % of wavelengths. It is zero
// for particles of one size.
func (p *Population) unresolved(each []CrossSection, c CrossSection) float64 {
	if p.rough == nil {
		return 0
	}
	var ext, abs float64
	for i, w := range p.rough {
		ext += w * each[i].Ext
		abs += w * each[i].Abs
	}
	e := 0.0
	if c.Ext > 0 {
		e = math.Abs(ext/c.Ext - 1)
	}
	if c.Abs > 0 {
		e = max(e, math.Abs(abs/c.Abs-1))
	}
	return min(e, 1)
}

// Means holds mass-specific means [m2/kg]: absorption, extinction, scattering, and scattering
// weighted with the cosine of its angle.
type Means struct {
	Abs, Ext, Sca, GSca float64
}

// Kappa returns the cross-sections per mass [m2/kg] at a wavelength [m]: those of [Population.At]
// over [Population.MeanMass].
func (p *Population) Kappa(wavelength float64) (Means, error) {
	c, err := p.At(wavelength)
	if err != nil {
		return Means{}, err
	}
	return Means{Abs: c.Abs / p.mass, Ext: c.Ext / p.mass, Sca: c.Sca / p.mass, GSca: c.G * c.Sca / p.mass}, nil
}
