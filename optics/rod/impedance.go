package rod

import (
	"math"
	"math/cmplx"

	"hazewright/optics/mie"
)

// freeSpaceImpedance is the impedance of vacuum [ohm], CODATA 2018.
const freeSpaceImpedance = 376.730313668

// InternalImpedance returns the internal impedance per length [ohm/m] of a round wire
// of radius a [m] and refractive index m at a wavelength [m]: the field at its surface
// over the axial polarisation current in it, the displacement current of vacuum taken out,
//
//	Z_i = (i eta/(2 pi a)) / (m J1(mx)/J0(mx) - J1(x)/J0(x)),   x = 2 pi a/lambda
//
// exact for the axial order 0 at normal incidence. Limits: i eta/(k pi a^2 (eps - 1)) for
// |m| x << 1, (1 - i) R_s/(2 pi a) for a skin much thinner than the wire. The ratio of
// Bessel functions stays finite for any loss. Own derivation from the cylinder series
// ([BohrenHuffman1983], section 8.4).
func InternalImpedance(wavelength, a float64, m complex128) complex128 {
	x := 2 * math.Pi * a / wavelength
	var admittance complex128
	if cmplx.Abs(m)*x < 1e-3 { // J1(z)/J0(z) = z/2 (1 + z^2/8 + ...), differences taken by hand
		eps1 := (m - 1) * (m + 1)
		x2 := complex(x*x/8, 0)
		admittance = complex(x/2, 0) * eps1 * (1 + x2*(m*m+1))
	} else {
		admittance = m*mie.BesselRatio(m*complex(x, 0)) - mie.BesselRatio(complex(x, 0))
	}
	return complex(0, freeSpaceImpedance/(2*math.Pi*a)) / admittance
}

// SurfaceScatteredIndex returns the refractive index of a thin wire of diameter d [m]
// whose conduction electrons also scatter at its surface, from the bulk index m at a
// wavelength [m] and the product rhoL of resistivity and electron mean free path [ohm m2]:
//
//	rho = 1/(-i omega eps0 (m^2 - 1)),   rho' = rho + 0.75 rhoL/d,   m'^2 = 1 + i/(omega eps0 rho')
//
// the thick-wire limit of diffuse surface scattering ([Dingle1950]) added to the complex
// resistivity of the whole polarisation current. rhoL = 0 returns m. First order in mean
// free path over d: trusted down to d of about the mean free path (tens of nm).
func SurfaceScatteredIndex(m complex128, wavelength, d, rhoL float64) complex128 {
	if rhoL == 0 {
		return m
	}
	// In units of 1/(omega eps0) = lambda eta/(2 pi): rho = i/(m^2 - 1).
	extra := complex(0.75*rhoL/d*2*math.Pi/(wavelength*freeSpaceImpedance), 0)
	rho := 1i/((m-1)*(m+1)) + extra
	r := cmplx.Sqrt(1 + 1i/rho)
	if imag(r) < 0 {
		r = -r
	}
	return r
}
