package settling

import (
	"fmt"
	"math"

	"hazewright/settling/atmosphere"
)

// CollisionSection returns the mean cross-section [m2] of meetings between two
// randomly turned particles of the same convex kind,
//
//	sigma = [2 S + M^2/(2 pi)]/4
//
// with S the surface and M the integral of mean curvature: sphere 4 pi r, cylinder
// pi L + pi^2 a. For spheres this is pi (2r)^2. A quarter of the surface of the sum
// of two convex bodies, averaged over their turning (Cauchy's theorem and the
// kinematic formula) [Santalo2004]. Errors as [Body.Check].
func CollisionSection(b Body) (float64, error) {
	if err := b.Check(); err != nil {
		return 0, err
	}
	return collisionSection(b), nil
}

// CollisionRadius returns the radius [m] of the circle with [CollisionSection], the
// distance of centres at which two like particles touch: for spheres 2r.
func CollisionRadius(b Body) (float64, error) {
	section, err := CollisionSection(b)
	return math.Sqrt(section / math.Pi), err
}

func collisionSection(b Body) float64 {
	if b.Shape == Sphere {
		return 4 * math.Pi * b.Radius * b.Radius
	}
	a := b.Diameter / 2
	surface := 2 * math.Pi * a * (b.Length + a)
	curvature := math.Pi*b.Length + math.Pi*math.Pi*a
	return (2*surface + curvature*curvature/(2*math.Pi)) / 4
}

// Diffusivity returns k T x [Mobility] [m2/s]; same range and errors.
func Diffusivity(s atmosphere.State, b Body) (float64, error) {
	m, err := Mobility(s, b)
	return atmosphere.Boltzmann * s.Temperature * m, err
}

// Kernel returns the rate constant K [m3/s] at which uncharged particles of one kind
// meet by thermal motion: dn/dt = -K n^2 for the number n per volume when every
// meeting sticks and both partners are counted as lost; meetings per volume and
// time are K n^2/2. By Fuchs, with R the [CollisionRadius], D the [Diffusivity]:
//
//	c = (8 k T/(pi m))^(1/2),   l = 8 D/(pi c)
//	g = [(R + l)^3 - (R^2 + l^2)^(3/2)]/(3 R l) - R
//	K = 8 pi D R / [R/(R + 2^(1/2) g) + 4 2^(1/2) D/(c R)]
//
// which tends to 8 pi D R for short paths and to 2^(1/2) pi R^2 c for long. For
// spheres the table's formula as printed; for rods, which may diffuse slower than
// they are long, an upper estimate, within a factor of about 2. Errors as [Drag].
// Source: [SeinfeldPandis2006], table 13.1, with R in place of the sum of radii.
func Kernel(s atmosphere.State, b Body) (float64, error) {
	if err := check(s, b); err != nil {
		return 0, err
	}
	return kernel(s, b), nil
}

func kernel(s atmosphere.State, b Body) float64 {
	kT := atmosphere.Boltzmann * s.Temperature
	r := math.Sqrt(collisionSection(b) / math.Pi)
	d := kT * mobility(s, b)
	c := math.Sqrt(8 * kT / (math.Pi * b.Mass))
	// g/R = [A^3 - B^3]/(3x) - 1 with A = 1+x, B = (1+x^2)^(1/2), x = l/R; written
	// with A - B = 2x/(A+B), so that nothing cancels.
	x := 8 * d / (math.Pi * c * r)
	p, q := 1+x, math.Sqrt(1+x*x)
	g := 2 * (p*p + p*q + q*q) / (3 * (p + q))
	g = r * (g - 1)
	return 8 * math.Pi * d * r / (r/(r+math.Sqrt2*g) + 4*math.Sqrt2*d/(c*r))
}

// ChargeFactor returns the share 1/W [1] of the uncharged [Kernel] that is left when
// every particle carries the given number of elementary charges of the same sign
// (a mean, so it need not be whole):
//
//	W = (e^w - 1)/w,   w = (z e)^2/(4 pi eps0 R k T)
//
// with R the [CollisionRadius]: the barrier in the continuum [SeinfeldPandis2006],
// chapter 13. Among free molecules it is e^w, which is more, so that in a thin gas
// charge protects better than given here. 1 for no charge, 0 where the barrier is
// beyond reckoning. More than 1e9 charges or a charge that is not a number is an
// error; other errors as [Drag].
func ChargeFactor(s atmosphere.State, b Body, charge float64) (float64, error) {
	if err := check(s, b); err != nil {
		return 0, err
	}
	if math.IsNaN(charge) || math.Abs(charge) > maxCharge {
		return 0, fmt.Errorf("charge: %g elementary charges is outside -%g to %g", charge, maxCharge, maxCharge)
	}
	return chargeFactor(s, b, charge), nil
}

// maxCharge bounds the elementary charges on one particle [1], far above what
// field emission lets any particle of [MaxSize] hold in a thin gas.
const maxCharge = 1e9

func chargeFactor(s atmosphere.State, b Body, charge float64) float64 {
	if charge == 0 {
		return 1
	}
	r := math.Sqrt(collisionSection(b) / math.Pi)
	q := charge * elementaryCharge
	w := q * q / (4 * math.Pi * vacuumPermittivity * r * atmosphere.Boltzmann * s.Temperature)
	if w == 0 {
		return 1
	}
	return w / math.Expm1(w)
}
