package settling

import (
	"errors"
	"math"

	"hazewright/settling/atmosphere"
)

// vacuumPermittivity is the permittivity of free space [F/m] and elementaryCharge
// the charge of the proton [C] [CODATA2018].
const (
	vacuumPermittivity = 8.8541878128e-12
	elementaryCharge   = 1.602176634e-19
)

// RotationalDiffusivity returns the rate [1/s] at which thermal motion turns a rod
// end over end,
//
//	D = k T / zeta,   zeta = zc / C(lambda/radj),   radj = 1.657 lambda zfm/zc
//
// with the torque per unit turning rate in the continuum [TiradoGarcia1984]
//
//	zc = pi mu L^3 / [3 (ln p - 0.662 + 0.917/p - 0.050/p^2)],   p = L/(2a)
//
// and among free molecules from the fluxes of [Drag]
//
//	zfm = rho c [pi a L^3 (An + At)/12 + pi a^2 L^2 At/2]
//
// joined as the drag is [Dahneke1973]. Where a shear exceeds this rate, rods are
// no longer turned at random. Good to some tens of per cent. An error for a sphere,
// and as [Drag].
func RotationalDiffusivity(s atmosphere.State, b Body) (float64, error) {
	if err := checkRod(s, b); err != nil {
		return 0, err
	}
	a, l := b.Diameter/2, b.Length
	p := l / b.Diameter
	zc := math.Pi * s.Viscosity * l * l * l / (3 * (math.Log(p) - 0.662 + 0.917/p - 0.050/(p*p)))
	an, at := 1-diffuse*(0.5-math.Pi/8), diffuse/4
	zfm := s.Density * s.MolecularSpeed * math.Pi * a * l * l * (l*(an+at)/12 + a*at/2)
	return atmosphere.Boltzmann * s.Temperature / join(zc, zfm), nil
}

// AligningField returns the electric field [V/m] at which the energy of a
// perfectly conducting rod lying along the field is below that of one lying across
// it by k T,
//
//	(alpha_par - alpha_perp) E^2/2 = k T,   alpha = eps0 V/N
//
// with the depolarisation factors N of the prolate spheroid of equal length and
// volume. Above it, rods stand along the field. An error for a sphere, and as
// [Drag]. Source: [BohrenHuffman1983], section 5.3.
func AligningField(s atmosphere.State, b Body) (float64, error) {
	if err := checkRod(s, b); err != nil {
		return 0, err
	}
	phi := b.Length / (b.Diameter * math.Sqrt(1.5))
	e := math.Sqrt(1 - 1/(phi*phi))
	along := (1 - e*e) / (e * e) * (math.Atanh(e)/e - 1)
	across := (1 - along) / 2
	volume := math.Pi / 4 * b.Diameter * b.Diameter * b.Length
	alpha := vacuumPermittivity * volume * (1/along - 1/across)
	return math.Sqrt(2 * atmosphere.Boltzmann * s.Temperature / alpha), nil
}

func checkRod(s atmosphere.State, b Body) error {
	if err := check(s, b); err != nil {
		return err
	}
	if b.Shape != Rod {
		return errors.New("turning of a particle: only a rod has a direction")
	}
	return nil
}
