package optics

import (
	"errors"
	"fmt"
	"math"
	"sync"

	"hazewright/optics/material"
	"hazewright/optics/mie"
	"hazewright/optics/rod"
)

// Shapes of a [Particle].
const (
	Sphere = "sphere"
	Rod    = "rod"
)

// Limits of a [Particle] [m] and of its spread [1].
const (
	MinRadius   = 1e-9
	MaxRadius   = 10e-3
	MinDiameter = 2e-9
	MaxLength   = 10e-3
	MaxSpread   = 3
)

// MethodMie is the method of a sphere's [CrossSection].
const MethodMie = "Mie series"

// Particle describes one kind of particle and how its size is spread.
type Particle struct {
	Shape            string  // [Sphere] or [Rod]
	Radius           float64 // outer radius of a sphere, the median by number [m]
	Length, Diameter float64 // of a rod, outer; Length is the median by number [m]

	// Oxide is the thickness of a skin that neither conducts nor absorbs [m]: the optical core
	// is thinner by twice as much, the mass stays that of the full particle.
	Oxide float64

	// Spread is the geometric standard deviation of the airborne number by radius, or by
	// length at fixed diameter [1]; 0 counts as 1, all of one size.
	Spread float64

	// SurfaceScattering adds the scattering of electrons at the surface of thin rods to the
	// resistivity (see [rod.SurfaceScatteredIndex]); it has no effect on spheres.
	SurfaceScattering bool

	// Method is how rods are computed: [rod.Standard] (or ""), [rod.Reference] or [rod.Fast]; it
	// has no effect on spheres.
	Method string

	Material *material.Material
}

// Validate returns every reason why the particle cannot be used, joined, or nil: shape,
// sizes within MinRadius..MaxRadius or MinDiameter and MaxLength, length at least 10 diameters, spread
// from 1 to 3, a known method, an oxide skin that leaves at least half the diameter, a material.
func (p Particle) Validate() error {
	var errs []error
	bad := func(format string, args ...any) { errs = append(errs, fmt.Errorf(format, args...)) }
	var thickness float64 // smallest dimension [m]
	switch p.Shape {
	case Sphere:
		thickness = 2 * p.Radius
		if !(p.Radius >= MinRadius && p.Radius <= MaxRadius) {
			bad("radius %.4g um is outside %g um to %g um", p.Radius*1e6, MinRadius*1e6, MaxRadius*1e6)
		}
	case Rod:
		thickness = p.Diameter
		if !(p.Diameter >= MinDiameter) || math.IsInf(p.Diameter, 0) {
			bad("diameter %.4g um is below %g um", p.Diameter*1e6, MinDiameter*1e6)
		}
		if !(p.Length > 0 && p.Length <= MaxLength) {
			bad("length %.4g um is outside 0 um to %g um", p.Length*1e6, MaxLength*1e6)
		}
		if p.Length < rod.MinAspect*p.Diameter {
			bad("length %.4g um is %.3g diameters: the rod model needs at least %d; use a longer or thinner rod", p.Length*1e6, p.Length/p.Diameter, rod.MinAspect)
		}
	default:
		bad("shape %q is unknown; use %s or %s", p.Shape, Sphere, Rod)
	}
	switch p.Method {
	case "", rod.Standard, rod.Reference, rod.Fast:
	default:
		bad("method %q is unknown; use %s, %s or %s", p.Method, rod.Standard, rod.Reference, rod.Fast)
	}
	if !(p.Spread == 0 || p.Spread >= 1 && p.Spread <= MaxSpread) {
		bad("spread %.4g is outside 1 to %d", p.Spread, MaxSpread)
	}
	if !(p.Oxide >= 0 && 2*p.Oxide <= thickness/2) && thickness > 0 {
		bad("oxide skin of %.4g nm is negative or leaves less than half of the %.4g nm across", p.Oxide*1e9, thickness*1e9)
	}
	if p.Material == nil {
		bad("no material")
	} else if !(p.Material.Density > 0) {
		bad("material %s has density %g kg/m3", p.Material.Name, p.Material.Density)
	}
	return errors.Join(errs...)
}

// rods is what a population of rods reuses from one wavelength to the next.
type rods struct {
	options    rod.Options
	workspaces sync.Pool
}

func newRods(method string) *rods {
	if method == "" {
		method = rod.Standard
	}
	return &rods{
		options:    rod.Options{Method: method, Memo: rod.NewMemo()},
		workspaces: sync.Pool{New: func() any { return new(rod.Workspace) }},
	}
}

// at returns the cross-sections of particles of the given sizes (radius or length) [m].
func (p Particle) at(wavelength float64, sizes []Node, out []CrossSection, rods *rods) error {
	m, err := p.Material.Index(wavelength)
	if err != nil {
		return err
	}
	if p.Shape == Sphere {
		for i, s := range sizes {
			a := s.Size - p.Oxide
			e, err := mie.Sphere(2*math.Pi*a/wavelength, m)
			if err != nil {
				return fmt.Errorf("sphere of radius %.4g um at %.4g um: %w", a*1e6, wavelength*1e6, err)
			}
			area := math.Pi * a * a
			out[i] = CrossSection{Sca: e.Sca * area, Abs: e.Abs * area, Ext: e.Ext * area, G: e.G, Err: 1e-9, Method: MethodMie}
		}
		return nil
	}
	core := p.Diameter - 2*p.Oxide
	if p.SurfaceScattering {
		m = rod.SurfaceScatteredIndex(m, wavelength, core, p.Material.SurfaceRhoL)
	}
	work := rods.workspaces.Get().(*rod.Workspace)
	defer rods.workspaces.Put(work)
	section, err := work.Section(wavelength, core, m, rods.options)
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

// polarizability returns the orientation mean of the static polarizability of one particle [m3].
func (p Particle) polarizability(size float64) (float64, error) {
	eps := complex(p.Material.StaticPermittivity, 0)
	conductor := math.IsInf(p.Material.StaticPermittivity, 1)
	if p.Shape == Sphere {
		a := size - p.Oxide
		v := 4 * math.Pi * a * a * a
		if conductor {
			return v, nil
		}
		return v * real((eps-1)/(eps+2)), nil
	}
	core := p.Diameter - 2*p.Oxide
	length := math.Max(size, rod.MinAspect*core)
	axial, transverse, err := rod.Polarizability(length, core, eps)
	if err != nil {
		return 0, err
	}
	return real(axial+2*transverse) / 3 * size / length, nil
}

// volume and projectedArea of one particle of a size, outer dimensions; the area is the
// orientation mean, a quarter of the surface of a convex body (Cauchy).
func (p Particle) volume(size float64) float64 {
	if p.Shape == Sphere {
		return 4 * math.Pi / 3 * size * size * size
	}
	return math.Pi / 4 * p.Diameter * p.Diameter * size
}

func (p Particle) projectedArea(size float64) float64 {
	if p.Shape == Sphere {
		return math.Pi * size * size
	}
	return math.Pi * p.Diameter * (size + p.Diameter/2) / 4
}
