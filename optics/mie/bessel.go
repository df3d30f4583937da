package mie

import (
	"math"
	"math/cmplx"
)

// besselWork holds the functions of one angle of incidence on a cylinder, kept from
// one angle to the next.
type besselWork struct {
	j, y []float64    // J_0(xi)..J_{n+1}(xi), the same of Y
	t0   []float64    // J_{k+1}(xi)/(xi J_k(xi)), k = 0..n
	t    []complex128 // the same at eta
}

// fill computes all of them for xi > 0 and eta^2 and returns n, the last order that
// matters: J_n/Y_n has fallen by 1e20. Y goes up from the standard library's Y_0 and Y_1; J
// comes down from J_{n+1} Y_n - J_n Y_{n+1} = 2/(pi xi).
func (w *besselWork) fill(xi float64, eta2 complex128) (n int) {
	rx := 1 / xi
	y := append(w.y[:0], math.Y0(xi), math.Y1(xi))
	limit := 1e10 * max(1, math.Abs(y[1]))
	for n < 2 || math.Abs(y[n]) < limit {
		n++
		y = append(y, float64(2*n)*rx*y[n]-y[n-1])
	}
	w.y = y
	if cap(w.j) < n+2 {
		w.j, w.t0, w.t = make([]float64, 2*n), make([]float64, 2*n), make([]complex128, 2*n)
	}
	j, t0 := w.j[:n+2], w.t0[:n+1]
	realBesselRatios(t0, xi*xi)
	j[n] = 2 * rx / math.Pi / (xi*t0[n]*y[n] - y[n+1])
	j[n+1] = xi * t0[n] * j[n]
	for k := n; k > 0; k-- {
		j[k-1] = float64(2*k)*rx*j[k] - j[k+1]
	}
	w.j, w.t0, w.t = j, t0, w.t[:n+1]
	besselRatios(w.t, eta2)
	return n
}

// besselRatios sets t[k] = J_{k+1}(z)/(z J_k(z)), given z^2, by
//
//	t_k = 1/(2k + 2 - z^2 t_{k+1})
//
// downward, which never overflows however large Im z is.
func besselRatios(t []complex128, z2 complex128) {
	zr, zi := real(z2), imag(z2)
	var tr, ti float64
	for k := startOrder(math.Sqrt(math.Sqrt(norm(z2))), len(t)); k >= 0; k-- {
		dr, di := float64(2*k+2)-(zr*tr-zi*ti), -(zr*ti + zi*tr)
		inv := 1 / (dr*dr + di*di)
		tr, ti = dr*inv, -di*inv
		if k < len(t) {
			t[k] = complex(tr, ti)
		}
	}
}

// realBesselRatios is [besselRatios] for a real argument.
func realBesselRatios(t []float64, x2 float64) {
	r := 0.0
	for k := startOrder(math.Sqrt(x2), len(t)); k >= 0; k-- {
		r = 1 / (float64(2*k+2) - x2*r)
		if k < len(t) {
			t[k] = r
		}
	}
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
