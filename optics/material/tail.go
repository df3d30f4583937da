package material

import (
	"fmt"
	"math"
	"math/cmplx"
)

// freeSpaceImpedance is the impedance of vacuum [ohm], CODATA 2018.
const freeSpaceImpedance = 376.730313668

// beyond says how an index goes on past its last measured point: the law from there, the
// permittivity it tends to (+Inf for a conductor), and what the catalogue says about it.
type beyond struct {
	law                func(join float64, m complex128) law
	staticPermittivity float64
	text               string
}

// conductor goes on to a direct-current resistivity [ohm m].
func conductor(dc float64) beyond {
	return beyond{
		law:                func(join float64, m complex128) law { return newDrudeTail(join, m, dc) },
		staticPermittivity: math.Inf(1),
		text:               fmt.Sprintf("Drude law to the direct-current resistivity %.3g ohm m", dc),
	}
}

// insulator goes on to a static permittivity [1].
func insulator(permittivity float64) beyond {
	return beyond{
		law:                func(join float64, m complex128) law { return newWingTail(join, m, permittivity) },
		staticPermittivity: permittivity,
		text:               fmt.Sprintf("far wing of the resonances to the static permittivity %.4g", permittivity),
	}
}

// ice goes on by [Hufford1991].
func ice() beyond {
	return beyond{
		law:                func(join float64, m complex128) law { return newIceTail(join, m) },
		staticPermittivity: icePermittivity,
		text:               "permittivity 3.17 and a published microwave loss",
	}
}

// drudeTail continues a conductor from its last measured point to radio wavelengths. The
// complex resistivity of the polarisation current, rho = i lambda eta/(2 pi (m^2 - 1)),
// follows a Drude law whose real part moves from the measured value at the join to
// the direct-current one:
//
//	rho(lambda) = rho_dc + (Re rho_join - rho_dc)(join/lambda)^2 + i Im rho_join (join/lambda)
//
// so it is continuous at the join and right at zero frequency. Permeability 1: real iron
// and nickel are magnetic below some GHz and absorb more there.
type drudeTail struct {
	join float64    // [m]
	rho  complex128 // at the join [ohm m]
	dc   float64    // [ohm m]
}

func newDrudeTail(join float64, m complex128, dc float64) *drudeTail {
	return &drudeTail{join: join, rho: complex(0, join*freeSpaceImpedance/(2*math.Pi)) / ((m - 1) * (m + 1)), dc: dc}
}

func (t *drudeTail) index(wavelength float64) complex128 {
	r := t.join / wavelength
	rho := complex(t.dc+(real(t.rho)-t.dc)*r*r, imag(t.rho)*r)
	return upper(cmplx.Sqrt(1 + complex(0, wavelength*freeSpaceImpedance/(2*math.Pi))/rho))
}

// drudeLine is a free-electron metal of plasma wavenumber and damping [1/m]:
//
//	m^2 = 1 - plasma^2/(nu^2 + i nu damping),   nu = 1/lambda
type drudeLine struct {
	plasma, damping float64
}

func (d drudeLine) index(wavelength float64) complex128 {
	nu := 1 / wavelength
	return upper(cmplx.Sqrt(1 - complex(d.plasma*d.plasma, 0)/complex(nu*nu, nu*d.damping)))
}

// upper returns the one of m and -m that absorbs.
func upper(m complex128) complex128 {
	if imag(m) < 0 {
		return -m
	}
	return m
}

// wingTail continues an insulator as the far wing of its lattice resonances: the permittivity
// eps_join at the join moves to the static one,
//
//	eps = eps_0 + (Re eps_join - eps_0)(join/lambda)^2 + i Im eps_join (join/lambda)
type wingTail struct {
	join   float64
	eps    complex128
	static float64
}

func newWingTail(join float64, m complex128, static float64) *wingTail {
	return &wingTail{join: join, eps: m * m, static: static}
}

func (t *wingTail) index(wavelength float64) complex128 {
	r := t.join / wavelength
	return cmplx.Sqrt(complex(t.static+(real(t.eps)-t.static)*r*r, imag(t.eps)*r))
}

// iceTail continues water-ice at 266 K from the last measured point to radio wavelengths:
// permittivity 3.17 and the loss of [Hufford1991] with f in GHz (coefficients from memory,
// at T = 266 K, theta = 300/T - 1 = 0.1278),
//
//	eps'' = alpha/f + beta f,   alpha = (50.4 + 62 theta) 1e-4 exp(-22.1 theta)
//	beta = (0.502 - 0.131 theta)/(1 + theta) 1e-4 + 0.542e-6 ((1 + theta)/(theta + 0.0073))^2
//
// which meets the measured k at 0.5 mm within 5 %; the differences there, in both
// parts, fade as join/lambda.
type iceTail struct {
	join               float64
	epsStep, lossRatio float64
}

const (
	icePermittivity = 3.17
	iceTheta        = 300./266 - 1
)

func hufford(wavelength float64) float64 {
	f := LightSpeed / wavelength * 1e-9
	alpha := (50.4 + 62*iceTheta) * 1e-4 * math.Exp(-22.1*iceTheta)
	ratio := (1 + iceTheta) / (iceTheta + 0.0073)
	beta := (0.502-0.131*iceTheta)/(1+iceTheta)*1e-4 + 0.542e-6*ratio*ratio
	return alpha/f + beta*f
}

func newIceTail(join float64, m complex128) *iceTail {
	eps := m * m
	return &iceTail{join: join, epsStep: real(eps) - icePermittivity, lossRatio: imag(eps) / hufford(join)}
}

func (t *iceTail) index(wavelength float64) complex128 {
	r := t.join / wavelength
	return cmplx.Sqrt(complex(icePermittivity+t.epsStep*r, hufford(wavelength)*(1+(t.lossRatio-1)*r)))
}
