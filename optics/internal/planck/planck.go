// Package planck gives the blackbody weights by which spectral means are taken.
package planck

import "math"

// SecondRadiation is c2 = h c/k_B [m K], CODATA 2018.
const SecondRadiation = 1.438776877e-2

// Fraction returns the share [1] of a blackbody's emission at temperature T [K] that lies
// below a wavelength [m]:
//
//	F = (15/pi^4) sum_n exp(-n x) (x^3/n + 3x^2/n^2 + 6x/n^3 + 6/n^4),   x = c2/(lambda T)
//
// and one minus a power series for x < 1 ([ModestMazumder2021], section 1.5). Within 1e-9.
func Fraction(wavelength, temperature float64) float64 {
	x := SecondRadiation / (wavelength * temperature)
	const norm = 15 / (math.Pi * math.Pi * math.Pi * math.Pi)
	switch {
	case math.IsNaN(x):
		return 0
	case x > 700:
		return 0
	case x < 1:
		// int_0^x t^3/(e^t - 1) dt, DLMF 24.2 (Bernoulli numbers)
		x2 := x * x
		s := 1./3 - x/8 + x2*(1./60-x2*(1./5040-x2*(1./272160-x2*(1./13305600-x2/622702080))))
		return 1 - norm*x*x2*s
	}
	var s float64
	for n := 1.0; n <= 40; n++ {
		term := math.Exp(-n*x) * (x*x*x/n + 3*x*x/(n*n) + 6*x/(n*n*n) + 6/(n*n*n*n))
		s += term
		if term < 1e-15*s {
			break
		}
	}
	return norm * s
}

// Density returns the share of a blackbody's emission per unit wavelength [1/m] at a
// wavelength [m] and temperature T [K], whose integral over wavelength is one:
//
//	w = (15/pi^4) (T/c2) x^5/(exp(x) - 1),   x = c2/(lambda T)
func Density(wavelength, temperature float64) float64 {
	x := SecondRadiation / (wavelength * temperature)
	if x > 700 {
		return 0
	}
	const norm = 15 / (math.Pi * math.Pi * math.Pi * math.Pi)
	return norm * temperature / SecondRadiation * math.Pow(x, 5) / math.Expm1(x)
}

// Peak returns the largest value of [Density] [1/m] over wavelength at temperature T [K],
// which it takes at x = 4.965114231744276 (Wien's law).
func Peak(temperature float64) float64 {
	return Density(SecondRadiation/(4.965114231744276*temperature), temperature)
}
