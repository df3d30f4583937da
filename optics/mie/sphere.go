package mie

import (
	"math"
	"math/cmplx"
)

// Sphere returns the efficiencies of a homogeneous sphere of size parameter
// x = 2 pi a/lambda [1] and refractive index m = n + ik relative to vacuum, from
// the full series ([BohrenHuffman1983], eq. 4.53 with the Riccati-Bessel functions
// psi and xi = psi - i chi). With rho_n = psi_{n+1}(mx)/psi_n(mx),
//
//	u_a = (n+1)/x (1/m^2 - 1) - rho_n/m,   u_b = -m rho_n
//	num = psi_{n+1} + u psi_n,   den = num - i (chi_{n+1} + u chi_n),   a, b = num/den
//	Re a - |a|^2 = -Im(u_a)/|den|^2, and the same for b
//
// so that scattering and absorption are both sums of non-negative terms, nothing
// cancels, and one path serves every size.
//
// Holds for [MinSize] <= x <= [MaxSize], Re m > 0, Im m >= 0, [MinIndex] <= |m| <=
// [MaxIndex] and |m| x <= [MaxOpticalSize]. Between x = 1e-6 and 1e4 the tests hold it
// against arbitrary-precision rows to a relative 1e-12 (Back 1e-10). Errors: any
// argument outside that range or not finite.
//
// For many spheres use a [Solver], which does not allocate.
func Sphere(x float64, m complex128) (Efficiencies, error) {
	var s Solver
	return s.Sphere(x, m)
}

// Sphere is the function [Sphere], with the work space kept for the next call.
func (s *Solver) Sphere(x float64, m complex128) (Efficiencies, error) {
	if err := checkArguments("sphere", x, m); err != nil {
		return Efficiencies{}, err
	}
	if imag(m) == 0 {
		return s.transparent(x, real(m)), nil
	}
	return s.absorbing(x, m), nil
}

// absorbing computes the coefficients of the series for an absorbing sphere.
func (s *Solver) absorbing(x float64, m complex128) Efficiencies {
	n, psi, psiNext := s.secondKind(x)
	rho := s.room(n+1, n+1)
	fillRatios(rho, m*complex(x, 0))
	chi, orders := s.chi[:n+2], s.orders[:n+1]

	rx := 1 / x
	mr, mi := real(m), imag(m)
	rm := reciprocal(m)
	rmr, rmi := real(rm), imag(rm)
	// (1/m^2 - 1)/x: real part factored (m near 1), imaginary part from 1/m^2
	// directly, since the factored product loses digits of it for large |m|.
	rm2 := rm * rm
	cr, ci := real((1-m)*(1+m)*rm2)*rx, imag(rm2)*rx

	chiNext := chi[n+1]
	for k := n; k >= 1; k-- {
		chiK := chi[k]
		fk := float64(k)
		f := fk + fk + 1
		rhoR, rhoI := real(rho[k]), imag(rho[k])

		// With A = psi_{k+1} + Re(u) psi_k, C = chi_{k+1} + Re(u) chi_k, v = Im u and
		// psi_k chi_{k+1} - psi_{k+1} chi_k = 1, the products of num and den come out real:
		// |num|^2 = A^2 + v^2 psi^2, |den|^2 = |num|^2 + C^2 + v^2 chi^2 - 2v,
		// Re(num conj den) = |num|^2 - v, Im(num conj den) = A C + v^2 psi chi.
		psi2, chi2, cross := psi*psi, chiK*chiK, psi*chiK

		o := &orders[k]
		u := (fk+1)*cr - rmr*rhoR + rmi*rhoI
		v := (fk+1)*ci - rmr*rhoI - rmi*rhoR
		A, C, v2 := psiNext+psi*u, chiNext+chiK*u, v*v
		re := A*A + v2*psi2 - v
		o.aRe, o.aIm, o.aLoss = re, A*C+v2*cross, -v
		o.aDen = re - v + C*C + v2*chi2

		u = mi*rhoI - mr*rhoR
		v = -mr*rhoI - mi*rhoR
		A, C, v2 = psiNext+psi*u, chiNext+chiK*u, v*v
		re = A*A + v2*psi2 - v
		o.bRe, o.bIm, o.bLoss = re, A*C+v2*cross, -v
		o.bDen = re - v + C*C + v2*chi2

		psi, psiNext, chiNext = f*rx*psi-psiNext, psi, chiK
	}
	return s.efficiencies(n, rx)
}

// transparent is [Solver.absorbing] in real arithmetic, for a real index. Psi_n,
// proportional to psi_n(mx), multiplies every coefficient, so that its zeros do no harm.
func (s *Solver) transparent(x, m float64) Efficiencies {
	n, psi, psiNext := s.secondKind(x)
	s.room(n+1, 0)
	rx := 1 / x
	rm := 1 / m
	rz := rm * rx
	contrast := (1 - m) * (1 + m) * rm * rm * rx

	p, q := 0.0, 1.0 // Psi_{k+1}, Psi_k
	for k := startOrder(m*x, n); k > n; k-- {
		p, q = q, float64(2*k+1)*rz*q-p
		if math.Abs(q) > 1e15 {
			p, q = p/q, 1
		}
	}
	for k := n; k >= 1; k-- {
		if math.Abs(q) > 1e15 {
			p, q = p/q, 1
		}
		fk := float64(k)
		f := fk + fk + 1
		u := (fk+1)*contrast*q - rm*p
		aNum, aDen := psiNext*q+psi*u, s.chi[k+1]*q+s.chi[k]*u
		u = -m * p
		bNum, bDen := psiNext*q+psi*u, s.chi[k+1]*q+s.chi[k]*u
		s.orders[k] = order{ // a = num/(num - i den)
			aRe: aNum * aNum, aIm: aNum * aDen, aDen: aNum*aNum + aDen*aDen,
			bRe: bNum * bNum, bIm: bNum * bDen, bDen: bNum*bNum + bDen*bDen,
		}

		p, q = q, f*rz*q-p
		psi, psiNext = f*rx*psi-psiNext, psi
	}
	return s.efficiencies(n, rx)
}

// fillRatios sets rho[k] = psi_{k+1}(z)/psi_k(z), Im z > 0 or not, from a sequence Psi_k
// proportional to psi_k(z) that comes down by the three-term recurrence. The division is
// outside the chain of operations that wait for each other. Absorption needs
// Im rho_k = w_k/|Psi_k|^2, a sum of positive terms:
//
//	w_k = Im(Psi_{k+1} conj Psi_k),   w_{k-1} = w_k - (2k+1) Im(1/z) |Psi_k|^2
func fillRatios(rho []complex128, z complex128) {
	n := len(rho) - 1
	rz := reciprocal(z)
	rzr, rzi := real(rz), imag(rz)
	k, pr, pi := startRatio(z, n) // Psi_{k+1}
	qr, qi := 1.0, 0.0            // Psi_k
	w := pi
	for ; k > n; k-- {
		f := float64(2*k + 1)
		fr, fi := f*rzr, f*rzi
		q2 := qr*qr + qi*qi
		w -= fi * q2
		pr, pi, qr, qi = qr, qi, fr*qr-fi*qi-pr, fr*qi+fi*qr-pi
		if q2 > 1e30 {
			pr, pi, qr, qi, w = rescale(pr, pi, qr, qi, w)
		}
	}
	for ; k >= 0; k-- {
		f := float64(2*k + 1)
		fr, fi := f*rzr, f*rzi
		q2 := qr*qr + qi*qi + 1e-290 // never zero
		inv := 1 / q2
		rho[k] = complex((pr*qr+pi*qi)*inv, w*inv)
		w -= fi * q2
		pr, pi, qr, qi = qr, qi, fr*qr-fi*qi-pr, fr*qi+fi*qr-pi
		if q2 > 1e30 {
			pr, pi, qr, qi, w = rescale(pr, pi, qr, qi, w)
		}
	}
}

// rescale divides a pair of the recurrence, and the quadratic w, by the size of the
// second of the pair, against overflow.
func rescale(pr, pi, qr, qi, w float64) (float64, float64, float64, float64, float64) {
	f := 1 / (math.Abs(qr) + math.Abs(qi))
	return pr * f, pi * f, qr * f, qi * f, w * f * f
}

// startRatio returns an order k >= n and psi_{k+1}(z)/psi_k(z) there, good enough for
// a downward recurrence to be right at order n. Deep inside an absorber the
// recurrence forgets its start within a few orders, exp(-2 Re arccosh(nu/z)) each, and
// the ratio of the leading term will do; else the start is above |z|, from zero.
func startRatio(z complex128, n int) (k int, re, im float64) {
	az := math.Sqrt(norm(z))
	if az > float64(2*n+100) {
		if w := leadingRatio(z, n); norm(w) < 0.7 {
			k = n + 3 + int(36/-math.Log(norm(w)))
			w = leadingRatio(z, k)
			return k, real(w), imag(w)
		}
	}
	return startOrder(az, n), 0, 0
}

// leadingRatio is the leading term of psi_{k+1}(z)/psi_k(z) for large k + |z|:
// exp(-arccosh(nu/z)), nu = k + 3/2.
func leadingRatio(z complex128, k int) complex128 {
	nu := complex(float64(k)+1.5, 0)
	root := cmplx.Sqrt((nu - z) * (nu + z))
	if real(root*cmplx.Conj(nu/z)) < 0 && norm(nu+root) < norm(nu-root) {
		root = -root
	}
	return z / (nu + root)
}
