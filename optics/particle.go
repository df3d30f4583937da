package optics

import (
	"errors"
	"fmt"
	"math"

	"hazewright/optics/material"
	"hazewright/optics/rod"
)

// Shapes of a [Particle].
const (
	Sphere = "sphere"
	Rod    = "rod"
	Shell  = "shell" // a sphere with a wall of the material, hollow or around a core
)

// Limits of a [Particle] [m] and of its spread [1].
const (
	MinRadius   = 1e-9
	MaxRadius   = 10e-3
	MinWall     = 1e-9
	MinDiameter = 2e-9
	MaxLength   = 10e-3
	MaxSpread   = 3
)

// Methods of the [CrossSection] of a sphere and of a shell.
const (
	MethodMie     = "Mie series"
	MethodLayered = "layered-sphere series"
)

// Particle describes one kind of particle and how its size is spread.
type Particle struct {
	Shape            string  // [Sphere], [Rod] or [Shell]
	Radius           float64 // outer radius of a sphere or shell, the median by number [m]
	Length, Diameter float64 // of a rod, outer; Length is the median by number [m]

	// Wall is the thickness of a shell's wall [m], oxide skin included, the same for every size of
	// a spread. Particles of a spread no larger than their wall are full spheres of it.
	Wall float64

	// Core is what is inside a shell's wall; nil for vacuum.
	Core *material.Material

	// Oxide is the thickness of a skin that neither conducts nor absorbs [m]: the optical core
	// is thinner by twice as much, the mass stays that of the full particle. A shell has its
	// skin on the outside only: the wall that acts is thinner by Oxide and its outer radius
	// smaller by as much.
	Oxide float64

	// Spread is the geometric standard deviation of the airborne number by (outer) radius, or
	// by length at fixed diameter [1]; 0 counts as 1, all of one size.
	Spread float64

	// SurfaceScattering adds the scattering of electrons at the surface of thin rods (see
	// [rod.SurfaceScatteredIndex]) and walls to the resistivity. For a wall of acting thickness t it is
	//
	//	rho' = rho + 0.375 rhoL/t
	//
	// the thick-film law of diffuse scattering at both faces ([Sondheimer1952]), within 10 % of the full
	// film integral from a twentieth of the electrons' mean free path up. It has no effect on
	// spheres and cores.
	SurfaceScattering bool

	// Method is how rods are computed: [rod.Standard] (or ""), [rod.Reference] or [rod.Fast]; it
	// has no effect on the others.
	Method string

	Material *material.Material // of a shell: of its wall
}

// Validate returns every reason why the particle cannot be used, joined, or nil: shape,
// sizes within MinRadius..MaxRadius or MinDiameter and MaxLength, length at least 10 diameters, a wall
// of at least MinWall and below the radius, spread from 1 to 3, a known method, an oxide skin that
// leaves at least half the diameter or wall, materials, and no wall or core where they mean nothing.
func (p Particle) Validate() error {
	var errs []error
	bad := func(format string, args ...any) { errs = append(errs, fmt.Errorf(format, args...)) }
	radius := func() {
		if !(p.Radius >= MinRadius && p.Radius <= MaxRadius) {
			bad("radius %.6g um is outside %g um to %g um", p.Radius*1e6, MinRadius*1e6, MaxRadius*1e6)
		}
	}
	var thickness float64 // smallest dimension that a skin may take half of [m]
	switch p.Shape {
	case Sphere:
		thickness = p.Radius
		radius()
	case Shell:
		thickness = p.Wall
		radius()
		if !(p.Wall >= MinWall && p.Wall < p.Radius) {
			bad("wall %.6g nm is outside %g nm to less than the radius of %.6g nm", p.Wall*1e9, MinWall*1e9, p.Radius*1e9)
		}
	case Rod:
		thickness = p.Diameter / 2
		if !(p.Diameter >= MinDiameter && p.Diameter <= MaxLength/rod.MinAspect) {
			bad("diameter %.6g um is outside %g um to %g um", p.Diameter*1e6, MinDiameter*1e6, MaxLength/rod.MinAspect*1e6)
		}
		if !(p.Length > 0 && p.Length <= MaxLength) {
			bad("length %.6g um is outside %g um to %g um", p.Length*1e6, MinDiameter*rod.MinAspect*1e6, MaxLength*1e6)
		}
		if p.Length < rod.MinAspect*p.Diameter {
			bad("length %.6g um is %.3g diameters: the rod model needs at least %d; use a longer or thinner rod", p.Length*1e6, p.Length/p.Diameter, rod.MinAspect)
		}
	default:
		bad("shape %q is unknown; use %s, %s or %s", p.Shape, Sphere, Rod, Shell)
	}
	if p.Shape != Shell && (p.Wall != 0 || p.Core != nil) {
		bad("shape %q takes neither a wall (%.6g nm) nor a core; use shape %s", p.Shape, p.Wall*1e9, Shell)
	}
	switch p.Method {
	case "", rod.Standard, rod.Reference, rod.Fast:
	default:
		bad("method %q is unknown; use %s, %s or %s", p.Method, rod.Standard, rod.Reference, rod.Fast)
	}
	if !(p.Spread == 0 || p.Spread >= 1 && p.Spread <= MaxSpread) {
		bad("spread %.4g is outside 1 to %d", p.Spread, MaxSpread)
	}
	if !(p.Oxide >= 0 && 2*p.Oxide <= thickness) && thickness > 0 {
		bad("oxide skin of %.6g nm is outside 0 nm to %.6g nm: half of the thickness, of a shell half of its wall, must be left", p.Oxide*1e9, thickness/2*1e9)
	}
	if p.Material == nil {
		bad("no material")
	}
	for _, m := range []*material.Material{p.Material, p.Core} {
		if m != nil && !(m.Density > 0) {
			bad("material %s has density %g kg/m3, which must be above 0 kg/m3", m.Name, m.Density)
		}
	}
	return errors.Join(errs...)
}

// volume and projectedArea of one particle of a size, outer dimensions; the area is the
// orientation mean, a quarter of the surface of a convex body (Cauchy).
func (p Particle) volume(size float64) float64 {
	if p.Shape == Rod {
		return math.Pi / 4 * p.Diameter * p.Diameter * size
	}
	return 4 * math.Pi / 3 * size * size * size
}

func (p Particle) projectedArea(size float64) float64 {
	if p.Shape == Rod {
		return math.Pi * p.Diameter * (size + p.Diameter/2) / 4
	}
	return math.Pi * size * size
}

// masses returns the mass of what is made of Material and of Core in one particle [kg].
func (p Particle) masses(size float64) (material, core float64) {
	material = p.volume(size) * p.Material.Density
	if p.Shape != Shell || size <= p.Wall {
		return material, 0
	}
	inside := p.volume(size - p.Wall)
	// 4 pi/3 (r^3 - (r - w)^3), free of cancellation
	material = 4 * math.Pi * p.Wall * (size*(size-p.Wall) + p.Wall*p.Wall/3) * p.Material.Density
	if p.Core != nil {
		core = inside * p.Core.Density
	}
	return material, core
}
