package settling

import (
	"errors"
	"math"

	"hazewright/settling/atmosphere"
)

// Constants of the slip law C = 1 + Kn (slipA + slipB exp(-slipC/Kn)), Kn = mean
// free path over radius [SeinfeldPandis2006], eq. 9.34.
const (
	slipA = 1.257
	slipB = 0.4
	slipC = 1.1
)

// diffuse is the share of molecules that leave a particle's surface diffusely, the
// rest being reflected as by a mirror [Dahneke1973]. At 0.9 the free-molecular
// drag of a sphere meets the slip law's limit within 0.4 %.
const diffuse = 0.9

// Slip returns the factor [1] by which slip lowers the drag on a sphere of Knudsen
// number kn (mean free path over radius):
//
//	C = 1 + Kn (1.257 + 0.4 exp(-1.1/Kn))
//
// Holds for every kn >= 0, within 2 % of measured values for air. For a kn that
// is negative or not a number it returns 1. Source: [SeinfeldPandis2006], eq.
// 9.34, the constants going back to [Davies1945].
func Slip(kn float64) float64 {
	if !(kn > 0) {
		return 1
	}
	return 1 + kn*(slipA+slipB*math.Exp(-slipC/kn))
}

// Drag returns the drag per unit speed [kg/s] on a particle that moves slowly
// along its axis (parallel) and across it (perpendicular); for a sphere the two
// are equal.
//
// Sphere of radius r:
//
//	F = 6 pi mu r / C(lambda/r)
//
// Rod of length L and radius a, each direction joined between its limits by the
// adjusted-sphere method [Dahneke1973]:
//
//	F     = Fc / C(lambda/radj),   radj = 1.657 lambda Ffm/Fc
//	Fc    drag in the continuum on the prolate spheroid of equal length and
//	      volume, semi-axes L/2 and b = a (3/2)^(1/2) [HappelBrenner1983]:
//	      phi = L/(2b), s = (phi^2-1)^(1/2), l = ln(phi+s)
//	      parallel       6 pi mu b (4/3)(phi^2-1)/[(2 phi^2-1) l/s - phi]
//	      perpendicular  6 pi mu b (8/3)(phi^2-1)/[(2 phi^2-3) l/s + phi]
//	Ffm   drag among free molecules, from the momentum fluxes of a half
//	      Maxwellian, diffuse share f = 0.9, c the mean molecular speed:
//	      An = 1 - f (1/2 - pi/8),  At = f/4
//	      parallel       rho c [2 pi a L At + 2 pi a^2 An]
//	      perpendicular  rho c [pi a L (An + At) + 2 pi a^2 At]
//
// Holds for every mean free path at a Reynolds number well under 1 and a speed
// well under the molecules'. An error for a body that [Body.Check] refuses or a
// state that was not made by package atmosphere.
func Drag(s atmosphere.State, b Body) (parallel, perpendicular float64, err error) {
	if err := check(s, b); err != nil {
		return 0, 0, err
	}
	parallel, perpendicular = drag(s, b)
	return parallel, perpendicular, nil
}

// Mobility returns the speed per unit force [s/kg] of a particle turned at random,
// the mean over directions (1/parallel + 2/perpendicular)/3 of [Drag]; same range
// and errors.
func Mobility(s atmosphere.State, b Body) (float64, error) {
	if err := check(s, b); err != nil {
		return 0, err
	}
	return mobility(s, b), nil
}

func check(s atmosphere.State, b Body) error {
	if !(s.Viscosity > 0 && s.MeanFreePath > 0 && s.Temperature > 0 && s.Density > 0 && s.MolecularSpeed > 0) {
		return errors.New("state of gas is not filled; take it from atmosphere.Column.At or atmosphere.Gas.State")
	}
	return b.Check()
}

func drag(s atmosphere.State, b Body) (parallel, perpendicular float64) {
	if b.Shape == Sphere {
		f := 6 * math.Pi * s.Viscosity * b.Radius / Slip(s.MeanFreePath/b.Radius)
		return f, f
	}
	a, l := b.Diameter/2, b.Length
	cPar, cPerp := continuumDrag(s.Viscosity, a, l)
	rc := s.Density * s.MolecularSpeed
	an, at := 1-diffuse*(0.5-math.Pi/8), diffuse/4
	fPar := rc * 2 * math.Pi * a * (l*at + a*an)
	fPerp := rc * math.Pi * a * (l*(an+at) + 2*a*at)
	return join(cPar, fPar), join(cPerp, fPerp)
}

// join returns the drag between its continuum and free-molecular limits
// [Dahneke1973]. The mean free path drops out of lambda/radj.
func join(continuum, free float64) float64 {
	return continuum / Slip(continuum/((slipA+slipB)*free))
}

// continuumDrag returns the drag of the prolate spheroid that stands for a rod of
// radius a and length l, see [Drag]. The aspect ratio is at least [MinAspect], so
// phi is at least 1.6 and nothing cancels.
func continuumDrag(mu, a, l float64) (parallel, perpendicular float64) {
	b := a * math.Sqrt(1.5)
	phi := l / (2 * b)
	s := math.Sqrt(phi*phi - 1)
	log := math.Log(phi + s)
	stokes := 6 * math.Pi * mu * b
	parallel = stokes * 4 / 3 * s * s / ((2*phi*phi-1)/s*log - phi)
	perpendicular = stokes * 8 / 3 * s * s / ((2*phi*phi-3)/s*log + phi)
	return parallel, perpendicular
}

func mobility(s atmosphere.State, b Body) float64 {
	par, perp := drag(s, b)
	return (1/par + 2/perp) / 3
}
