package settling

import (
	"errors"
	"fmt"
	"math"
)

// The shapes of a [Body].
const (
	Sphere = "sphere"
	Rod    = "rod" // a straight cylinder with flat ends
)

// The sizes accepted for a [Body].
const (
	MinSize   = 1e-9 // smallest radius of a sphere or diameter of a rod [m]
	MaxSize   = 1e-2 // largest radius of a sphere or length of a rod [m]
	MinAspect = 2.0  // least length over diameter of a rod [1]
)

// Body is one particle as the gas sees it: its outer size and its own mass, so
// that coated and hollow particles need no further description.
type Body struct {
	Shape    string  // [Sphere] or [Rod]
	Radius   float64 // of a sphere [m]
	Length   float64 // of a rod [m]
	Diameter float64 // of a rod [m]
	Mass     float64 // [kg]
}

// SphereOf returns the solid sphere of the given radius [m] and density [kg/m3].
func SphereOf(radius, density float64) Body {
	return Body{Shape: Sphere, Radius: radius, Mass: 4. / 3 * math.Pi * radius * radius * radius * density}
}

// RodOf returns the solid rod of the given length [m], diameter [m] and density
// [kg/m3].
func RodOf(length, diameter, density float64) Body {
	return Body{Shape: Rod, Length: length, Diameter: diameter, Mass: math.Pi / 4 * diameter * diameter * length * density}
}

// Check returns an error that names every size or mass that cannot be used: an
// unknown shape, a size outside [MinSize] to [MaxSize], a rod with an aspect ratio
// under [MinAspect], a mass that is not positive and finite.
func (b Body) Check() error {
	var errs []error
	switch b.Shape {
	case Sphere:
		if !(b.Radius >= MinSize && b.Radius <= MaxSize) {
			errs = append(errs, fmt.Errorf("sphere radius %g m is outside %g m to %g m", b.Radius, MinSize, MaxSize))
		}
	case Rod:
		if !(b.Length >= MinSize && b.Length <= MaxSize) {
			errs = append(errs, fmt.Errorf("rod length %g m is outside %g m to %g m", b.Length, MinSize, MaxSize))
		}
		if !(b.Diameter >= MinSize && b.Diameter <= MaxSize) {
			errs = append(errs, fmt.Errorf("rod diameter %g m is outside %g m to %g m", b.Diameter, MinSize, MaxSize))
		}
		if len(errs) == 0 && b.Length < MinAspect*b.Diameter {
			errs = append(errs, fmt.Errorf("rod of %g m by %g m has an aspect ratio of %.3g, under %g; describe it as a sphere of equal volume",
				b.Length, b.Diameter, b.Length/b.Diameter, MinAspect))
		}
	default:
		errs = append(errs, fmt.Errorf("particle shape %q is not known; use %s or %s", b.Shape, Sphere, Rod))
	}
	if !(b.Mass > 0) || math.IsInf(b.Mass, 0) {
		errs = append(errs, fmt.Errorf("particle mass %g kg is not a positive finite number", b.Mass))
	}
	return errors.Join(errs...)
}

// largest returns the largest dimension [m].
func (b Body) largest() float64 {
	if b.Shape == Rod {
		return b.Length
	}
	return 2 * b.Radius
}
