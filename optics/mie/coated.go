package mie

import (
	"fmt"
	"math"
	"math/cmplx"
)

// Coated returns the efficiencies of a sphere of index mCore and size parameter
// xCore = 2 pi a_core/lambda [1] in a concentric shell of index mShell and outer size
// parameter xShell, per outer cross-section, from the full series ([BohrenHuffman1983],
// section 8.1). A core of index 1 makes a hollow shell. In the shell the field of each order is
// F_n = psi_n + R_n c_n, with c_n a second solution, and only ratios of neighbouring
// orders appear: rho = psi_{n+1}/psi_n, sigma = c_{n+1}/c_n. With z1 = mShell xCore, z2 =
// mShell xShell, the core sets r = F_{n+1}/F_n at z1 (below for a_n, b_n), and at z2 it is
//
//	r_a(z1) = (n+1)/xCore (1/mShell - mShell/mCore^2) + mShell/mCore rho(mCore xCore)
//	r_b(z1) = mCore/mShell rho(mCore xCore)
//	r(z2) = [rho(z2) D + N q sigma(z2)] / (D + N q),   D = sigma(z1) - r(z1),  N = r(z1) - rho(z1)
//	q = (psi_n/c_n)(z1) / (psi_n/c_n)(z2)
//
// which takes the place of rho_n(mx) in the formulas of [Sphere]. c_n is chi_n while Im z2
// <= 2, where a faint absorption then stays apart from the real part, and the outgoing
// wave z h_n above, which neither overflows nor cancels in an opaque shell.
//
// Holds for the arguments of [Sphere] (mShell with xShell, mCore with xCore), and 0 or
// [MinSize] <= xCore <= xShell; a vanishing core or shell and equal indices give the
// homogeneous sphere. The tests hold it against arbitrary-precision rows between x = 1e-3
// and 300 to a relative 1e-10. Absorption that comes from a small part only, a thin coat on
// a transparent core or a small core in a transparent shell, keeps the fewer digits the
// smaller that part is: allow 1e-5 where it is below 1e-6 of the radius.
// Errors: an argument outside that range or not finite, or a core larger than the shell.
func Coated(xCore, xShell float64, mCore, mShell complex128) (Efficiencies, error) {
	var s Solver
	return s.Coated(xCore, xShell, mCore, mShell)
}

// Coated is the function [Coated], with the work space kept for the next call.
func (s *Solver) Coated(xCore, xShell float64, mCore, mShell complex128) (Efficiencies, error) {
	if err := checkArguments("shell", xShell, mShell); err != nil {
		return Efficiencies{}, err
	}
	if xCore != 0 {
		if !(xCore <= xShell) {
			return Efficiencies{}, fmt.Errorf("size parameter of the core: %g is outside 0 to %g, the size parameter of the shell", xCore, xShell)
		}
		if err := checkArguments("core", xCore, mCore); err != nil {
			return Efficiencies{}, err
		}
	} else if err := checkArguments("core", MinSize, mCore); err != nil {
		return Efficiencies{}, err
	}
	switch {
	case xCore == 0 || mCore == mShell:
		return s.Sphere(xShell, mShell)
	case xCore == xShell:
		return s.Sphere(xShell, mCore)
	}
	return s.layered(xCore, xShell, mCore, mShell), nil
}

func (s *Solver) layered(xCore, xShell float64, mCore, mShell complex128) Efficiencies {
	n, psi, psiNext := s.secondKind(xShell)
	rx := 1 / xShell
	if cap(s.psi) < n+2 {
		s.psi = make([]float64, n+2)
	}
	p := s.psi[:n+2]
	p[n], p[n+1] = psi, psiNext
	for k := n; k > 0; k-- {
		p[k-1] = float64(2*k+1)*rx*p[k] - p[k+1]
	}
	work := s.room(n+1, 3*(n+1))
	core, inner, outer := work[:n+1], work[n+1:2*(n+1)], work[2*(n+1):]
	z1, z2 := mShell*complex(xCore, 0), mShell*complex(xShell, 0)
	fillRatios(core, mCore*complex(xCore, 0))
	fillRatios(inner, z1)
	fillRatios(outer, z2)

	rCore, rShell := reciprocal(mCore), reciprocal(mShell)
	// 1/mShell - mShell/mCore^2 and 1/mShell^2 - 1: real parts factored, imaginary parts direct
	step := mShell * rCore * rCore
	jump := complex(real((mCore-mShell)*(mCore+mShell)*rCore*rCore*rShell), imag(rShell)-imag(step)) / complex(xCore, 0)
	toShell, toCore := mShell*rCore, mCore*rShell
	rm2 := rShell * rShell
	contrast := complex(real((1-mShell)*(1+mShell)*rm2)*rx, imag(rm2)*rx)

	q, sigma1, sigma2 := firstOrder(z1, z2, inner[0], outer[0])
	rz1, rz2 := reciprocal(z1), reciprocal(z2)
	for k := 1; k <= n; k++ {
		fk := float64(k)
		f := 2*fk + 1
		rho, rho1, rho2 := core[k], inner[k], outer[k]
		ra := complex(fk+1, 0)*jump + toShell*rho
		rb := toCore * rho
		ra = acrossShell(ra, q, rho1, rho2, sigma1, sigma2)
		rb = acrossShell(rb, q, rho1, rho2, sigma1, sigma2)
		o := &s.orders[k]
		o.aRe, o.aIm, o.aLoss, o.aDen = coefficient(complex(fk+1, 0)*contrast-ra*rShell, p[k], p[k+1], s.chi[k], s.chi[k+1])
		o.bRe, o.bIm, o.bLoss, o.bDen = coefficient(-mShell*rb, p[k], p[k+1], s.chi[k], s.chi[k+1])

		q *= rho1 * invert(rho2) * sigma2 * invert(sigma1)
		sigma1 = complex(f+2, 0)*rz1 - invert(sigma1)
		sigma2 = complex(f+2, 0)*rz2 - invert(sigma2)
	}
	e := s.efficiencies(n, rx)
	if imag(mCore) == 0 && imag(mShell) == 0 {
		e.Ext, e.Abs = e.Sca, 0 // not the rounding left over
	}
	return e
}

// acrossShell carries the ratio r of one order from the inner to the outer surface.
func acrossShell(r, q, rho1, rho2, sigma1, sigma2 complex128) complex128 {
	d, n := sigma1-r, (r-rho1)*q
	return (rho2*d + n*sigma2) * invert(d+n)
}

// coefficient returns the parts of [order] for the ratio u. A negative loss is rounding.
func coefficient(u complex128, psi, psiNext, chi, chiNext float64) (re, im, loss, den float64) {
	A, C, v := psiNext+real(u)*psi, chiNext+real(u)*chi, min(0, imag(u))
	re = A*A + v*v*psi*psi - v
	return re, A*C + v*v*psi*chi, -v, re - v + C*C + v*v*chi*chi
}

// firstOrder returns q and both sigma of order 1 for the second solution chosen.
// rho1 and rho2 are the ratios of order 0.
func firstOrder(z1, z2, rho1, rho2 complex128) (q, sigma1, sigma2 complex128) {
	rz1, rz2 := reciprocal(z1), reciprocal(z2)
	if imag(z2) <= 2 {
		sin1, cos1 := cmplx.Sin(z1), cmplx.Cos(z1)
		sin2, cos2 := cmplx.Sin(z2), cmplx.Cos(z2)
		psi1, psi2 := rho1*sin1, rho2*sin2
		if norm(sin1) < 0.25 && norm(z1) > 1 { // the ratio is lost near a zero of psi_0
			psi1 = sin1*rz1 - cos1
		}
		if norm(sin2) < 0.25 && norm(z2) > 1 {
			psi2 = sin2*rz2 - cos2
		}
		chi1, chi2 := cos1*rz1+sin1, cos2*rz2+sin2
		return psi1 * chi2 * invert(psi2*chi1), 3*rz1 - cos1*invert(chi1), 3*rz2 - cos2*invert(chi2)
	}
	// psi_1 exp(iz), from psi_0 exp(iz) = expm1(2iz)/2i
	scaled := func(z, rz, rho complex128) complex128 {
		e := expm1(2i * z)
		if norm(e) < 1 && norm(z) > 1 {
			return -0.5i*e*rz - 1 - e/2
		}
		return -0.5i * e * rho
	}
	s1, s2 := rz1-1i, rz2-1i // sigma of order 0
	q = scaled(z1, rz1, rho1) * invert(scaled(z2, rz2, rho2)) * s2 * invert(s1) * cmplx.Exp(2i*(z2-z1))
	return q, 3*rz1 - invert(s1), 3*rz2 - invert(s2)
}

// expm1 returns exp(z) - 1, Re z <= 0, without cancellation at small z.
func expm1(z complex128) complex128 {
	half := math.Sin(imag(z) / 2)
	sin, cos := math.Sincos(imag(z))
	return complex(math.Expm1(real(z))*cos-2*half*half, math.Exp(real(z))*sin)
}

// invert returns 1/z, and a large finite number at a zero, which a ratio of two
// neighbouring orders meets when the lower one vanishes to the last bit.
func invert(z complex128) complex128 {
	n := norm(z)
	if n < 1e-280 {
		return 1e140
	}
	return complex(real(z)/n, -imag(z)/n)
}
