package mie

import (
	"math"
	"math/cmplx"
)

// besselLogDerivatives returns J_k'(z)/J_k(z) for k = 0..n by the downward ratio
// J_{k+1}/J_k, which never overflows however large Im z is.
func besselLogDerivatives(z complex128, n int) []complex128 {
	az := cmplx.Abs(z)
	start := int(math.Max(float64(n), az)+8*math.Cbrt(az)) + 18
	d := make([]complex128, n+1)
	rz := 1 / z
	var r complex128 // J_{k+1}/J_k
	for k := start; k >= 0; k-- {
		f := float64(2*k + 2)
		q := complex(f*real(rz)-real(r), f*imag(rz)-imag(r))
		inv := 1 / norm(q)
		r = complex(real(q)*inv, -imag(q)*inv)
		if k <= n {
			d[k] = complex(float64(k), 0)*rz - r
		}
	}
	return d
}

// besselJ returns J_0(x)..J_n(x), x > 0: downward ratios, normalised by the larger of
// J_0 and J_1.
func besselJ(x float64, n int) []float64 {
	start := int(math.Max(float64(n), x)+8*math.Cbrt(x)) + 18
	j := make([]float64, n+1)
	r := 0.0
	for k := start; k >= 0; k-- {
		r = 1 / (float64(2*k+2)/x - r)
		if k < n {
			j[k+1] = r // J_{k+1}/J_k for now
		}
	}
	j0, j1 := math.J0(x), math.J1(x)
	if math.Abs(j0) >= math.Abs(j1) {
		j[0] = j0
		j[1] *= j0
	} else {
		j[0] = j0
		j[1] = j1
	}
	for k := 2; k <= n; k++ {
		j[k] *= j[k-1]
	}
	return j
}

// BesselRatio returns J_1(z)/J_0(z) for complex z [1], which stays finite for any
// Im z > 0: downward ratios for |z| <= 60 or near the real axis, else the ratio of the
// Hankel expansions of the growing wave ([AbramowitzStegun1964], 9.2.8), to rounding.
func BesselRatio(z complex128) complex128 {
	az := cmplx.Abs(z)
	if az <= 60 || imag(z) < 20 {
		start := int(az+8*math.Cbrt(az)) + 18
		rz := 1 / z
		var r complex128
		for k := start; k >= 0; k-- {
			r = 1 / (complex(float64(2*k+2), 0)*rz - r)
		}
		return r
	}
	return 1i * hankelSum(z, 4) / hankelSum(z, 0)
}

// hankelSum is the asymptotic sum of H_nu^(2) without its leading exponential,
// mu = 4 nu^2.
func hankelSum(z complex128, mu float64) complex128 {
	sum, term := complex128(1), complex128(1)
	for k := 1; k <= 12; k++ {
		o := float64(2*k - 1)
		term *= complex(mu-o*o, 0) / (complex(float64(8*k), 0) * z) * -1i
		sum += term
	}
	return sum
}
