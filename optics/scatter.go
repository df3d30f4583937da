package optics

import (
	"fmt"
	"math"
	"sync"

	"hazewright/optics/mie"
	"hazewright/optics/rod"
)

// tools is what a population reuses from one wavelength to the next.
type tools struct {
	options    rod.Options
	workspaces sync.Pool // of *rod.Workspace
	solvers    sync.Pool // of *mie.Solver
}

func newTools(p Particle) *tools {
	t := &tools{
		workspaces: sync.Pool{New: func() any { return new(rod.Workspace) }},
		solvers:    sync.Pool{New: func() any { return new(mie.Solver) }},
	}
	if p.Shape == Rod {
		t.options = rod.Options{Method: p.Method, Memo: rod.NewMemo()}
		if p.Method == "" {
			t.options.Method = rod.Standard
		}
	}
	return t
}

// mean sums cross-sections with weights.
type mean struct {
	CrossSection // G and Err times their weights until over
	most         float64
}

func (m *mean) add(weight float64, c CrossSection) {
	m.Sca += weight * c.Sca
	m.Abs += weight * c.Abs
	m.G += weight * c.G * c.Sca
	m.Err += weight * c.Err * c.Ext
	if v := weight * c.Ext; v > m.most {
		m.most, m.Method = v, c.Method
	}
}

// over returns the mean: G by scattering, Err by extinction, Method of the largest part.
func (m *mean) over() CrossSection {
	c := m.CrossSection
	c.Ext = c.Sca + c.Abs
	if c.Sca > 0 {
		c.G /= c.Sca
	}
	if c.Ext > 0 {
		c.Err /= c.Ext
	}
	return c
}

// pairing is one combination of the optical axes of wall and core.
type pairing struct {
	weight      float64
	axis, core  int
	epsilon     float64 // static permittivity of the material
	epsilonCore float64
}

// pairings returns the combinations whose weighted mean is that of the particle: the crystal
// axes of wall and core are independent. Weights sum to 1.
func (p Particle) pairings() []pairing {
	var out []pairing
	for i, a := range p.Material.Axes() {
		if p.Core == nil {
			out = append(out, pairing{weight: a.Weight, axis: i, epsilon: a.StaticPermittivity, epsilonCore: 1})
			continue
		}
		for j, c := range p.Core.Axes() {
			out = append(out, pairing{a.Weight * c.Weight, i, j, a.StaticPermittivity, c.StaticPermittivity})
		}
	}
	return out
}

// at returns the cross-sections of particles of the given sizes (radius or length) [m], means
// over the optical axes.
func (p Particle) at(wavelength float64, sizes []Node, out []CrossSection, t *tools) error {
	pairings := p.pairings()
	var sums []mean
	if len(pairings) > 1 {
		sums = make([]mean, len(sizes))
	}
	for _, pair := range pairings {
		m, err := p.Material.IndexAlong(pair.axis, wavelength)
		if err != nil {
			return err
		}
		mCore := complex128(1)
		if p.Core != nil {
			if mCore, err = p.Core.IndexAlong(pair.core, wavelength); err != nil {
				return err
			}
		}
		switch p.Shape {
		case Rod:
			err = p.rods(wavelength, m, sizes, out, t)
		default:
			err = p.balls(wavelength, m, mCore, sizes, out, t)
		}
		if err != nil {
			return err
		}
		for i := range sums {
			sums[i].add(pair.weight, out[i])
		}
	}
	for i := range sums {
		out[i] = sums[i].over()
	}
	return nil
}

// balls computes spheres and shells of index m, shells with mCore inside.
func (p Particle) balls(wavelength float64, m, mCore complex128, sizes []Node, out []CrossSection, t *tools) error {
	solver := t.solvers.Get().(*mie.Solver)
	defer t.solvers.Put(solver)
	if p.Shape == Shell && p.SurfaceScattering {
		// 0.75 rhoL/d of a wire is the 0.375 rhoL/t of a wall of t = d/2
		m = rod.SurfaceScatteredIndex(m, wavelength, 2*(p.Wall-p.Oxide), p.Material.SurfaceRhoL)
	}
	for i, s := range sizes {
		a := s.Size - p.Oxide
		x, area := 2*math.Pi*a/wavelength, math.Pi*a*a
		c := CrossSection{Err: 1e-9, Method: MethodMie}
		var e mie.Efficiencies
		var err error
		if xCore := 2 * math.Pi * (s.Size - p.Wall) / wavelength; p.Shape == Shell && xCore >= mie.MinSize {
			c.Err, c.Method = 1e-5, MethodLayered
			e, err = solver.Coated(xCore, x, mCore, m)
		} else {
			e, err = solver.Sphere(x, m)
		}
		if err != nil {
			return fmt.Errorf("%s of radius %.6g um at %.6g um: %w", p.Shape, s.Size*1e6, wavelength*1e6, err)
		}
		c.Sca, c.Abs, c.Ext, c.G = e.Sca*area, e.Abs*area, e.Ext*area, e.G
		out[i] = c
	}
	return nil
}

// resonantFrom is the wavelength [m] from which long rods of good conductors ring end to end, so
// that [rod.Standard] is not left at 8 wavelengths but solved up to 30.
const resonantFrom = 3e-6

// rods computes rods of index m.
func (p Particle) rods(wavelength float64, m complex128, sizes []Node, out []CrossSection, t *tools) error {
	core := p.Diameter - 2*p.Oxide
	if p.SurfaceScattering {
		m = rod.SurfaceScatteredIndex(m, wavelength, core, p.Material.SurfaceRhoL)
	}
	work := t.workspaces.Get().(*rod.Workspace)
	defer t.workspaces.Put(work)
	options := t.options
	if options.Method == rod.Standard && wavelength >= resonantFrom {
		options.Join = rod.ReferenceJoin
	}
	section, err := work.Section(wavelength, core, m, options)
	if err != nil {
		return err
	}
	for i, s := range sizes {
		length := math.Max(s.Size, rod.MinAspect*core)
		r, err := section.Rod(length)
		if err != nil {
			return err
		}
		f := s.Size / length // 1 but for the few shortest of a wide spread, see [NewPopulation]
		out[i] = CrossSection{Sca: r.Sca * f, Abs: r.Abs * f, Ext: r.Ext * f, G: r.G, Err: r.Err, Method: r.Method}
	}
	return nil
}
