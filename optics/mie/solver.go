package mie

import (
	"fmt"
	"math"
)

// Limits of the arguments that spheres and cylinders accept. They hold 1 nm at
// radio wavelengths and 10 mm in sunlight; the cap on |m| x bounds the work, which
// grows in proportion to it.
const (
	MinSize        = 1e-10
	MaxSize        = 5e5
	MinIndex       = 1e-4 // of |m|
	MaxIndex       = 1e6
	MaxOpticalSize = 5e6 // of |m| x
)

// Efficiencies are the cross-sections of a sphere over its geometric
// cross-section pi a^2 [1], a the outer radius, and the asymmetry of its scattering.
//
// Back is the radar backscattering efficiency 4 |S1(180 deg)|^2 / x^2 (the
// definition of [BohrenHuffman1983], appendix A). G is the mean cosine of the
// scattering angle. Ext = Sca + Abs holds by construction.
type Efficiencies struct {
	Ext, Sca, Abs, Back, G float64
}

// Solver holds the work space of the sphere series, so that many spheres can be
// computed without allocation. The zero value is ready for use. A Solver must not be
// used from two goroutines at once.
type Solver struct {
	chi, psi []float64    // Riccati-Bessel functions of the outer size parameter
	inverse  []float64    // 1/n
	ratios   []complex128 // psi_{n+1}/psi_n of the arguments inside
	orders   []order      // [0] never used
}

// order holds one order of the series before the division by |den|^2:
//
//	a = (aRe + i aIm)/aDen,   Re a - |a|^2 = aLoss/aDen,   and the same for b
//
// The division waits for the sums, where it holds up nothing else.
type order struct {
	aRe, aIm, aLoss, aDen float64
	bRe, bIm, bLoss, bDen float64
}

// room makes room for n orders, and for ratios ratios, which it returns.
func (s *Solver) room(n, ratios int) []complex128 {
	if cap(s.orders) < n {
		s.orders = make([]order, 2*n)
	}
	s.orders = s.orders[:n]
	if cap(s.ratios) < ratios {
		s.ratios = make([]complex128, 2*ratios)
	}
	return s.ratios[:ratios]
}

// efficiencies sums the orders 1..n; rx = 1/x.
func (s *Solver) efficiencies(n int, rx float64) Efficiencies {
	var sca, loss, g, backR, backI float64
	var aR, aI, bR, bI float64 // the order above
	sign := 1.0
	if n&1 == 1 {
		sign = -1
	}
	inverse, orders := s.inverse[:n+2], s.orders[:n+1]
	above := inverse[n+1]
	for k := n; k >= 1; k-- {
		o := &orders[k]
		inv := 1 / (o.aDen * o.bDen) // one division for both
		aInv, bInv := o.bDen*inv, o.aDen*inv
		ar, ai, br, bi := o.aRe*aInv, o.aIm*aInv, o.bRe*bInv, o.bIm*bInv
		fk := float64(k)
		f := fk + fk + 1
		sca += f * (ar*ar + ai*ai + br*br + bi*bi)
		loss += f * (o.aLoss*aInv + o.bLoss*bInv)
		f *= sign
		backR += f * (ar - br)
		backI += f * (ai - bi)
		here := inverse[k]
		// (2k+1)/(k(k+1)) and k(k+2)/(k+1)
		g += (here+above)*(ar*br+ai*bi) + (fk+1-above)*(ar*aR+ai*aI+br*bR+bi*bI)
		aR, aI, bR, bI = ar, ai, br, bi
		above, sign = here, -sign
	}
	scale := 2 * rx * rx
	e := Efficiencies{Sca: scale * sca, Abs: scale * loss, Back: (backR*backR + backI*backI) * rx * rx}
	e.Ext = e.Sca + e.Abs
	if sca > 0 {
		e.G = 2 * g / sca
	}
	return e
}

// secondKind fills s.chi with chi_0(x)..chi_{n+1}(x) and returns n, the number of
// orders that matter: |a_n| is about 1/chi_n^2, and the series ends where that is 1e-20
// of its first term. It also returns psi_n(x) and psi_{n+1}(x), from the Wronskian
// psi_n chi_{n+1} - psi_{n+1} chi_n = 1 and the leading term of their ratio, whose error
// is as far below rounding as a_n is.
func (s *Solver) secondKind(x float64) (n int, psi, psiNext float64) {
	sin, cos := math.Sincos(x)
	rx := 1 / x
	prev, chi := cos, cos*rx+sin
	limit := 1e9 * max(1, math.Abs(chi))
	c := append(s.chi[:0], prev, chi)
	for n = 1; ; n++ {
		next := float64(2*n+1)*rx*chi - prev
		c = append(c, next)
		if chi > limit {
			break
		}
		prev, chi = chi, next
	}
	s.chi = c
	for i := len(s.inverse); i <= n+1; i++ {
		s.inverse = append(s.inverse, 1/float64(i)) // [0] is never used
	}
	nu := float64(n) + 1.5
	ratio := x / (nu + math.Sqrt(nu*nu-x*x))
	psi = 1 / (c[n+1] - ratio*c[n])
	return n, psi, ratio * psi
}

// startOrder returns the order at which a downward recurrence of psi_n(z) may start
// from nothing so that it has forgotten the start at order n: where the second
// solution has grown by 1e8, psi_n over it has fallen by 1e16. For weak absorption the
// start must lie above |z| by about |z|^(1/3) times 7.
func startOrder(az float64, n int) int {
	k := max(n, int(az)+1)
	r := 1 / az
	prev, t := 1.0, 1.0
	for t < 1e8 {
		prev, t = t, float64(2*k+1)*r*t-prev
		k++
	}
	return k
}

// checkArguments returns an error for a size parameter or refractive index outside
// the limits; part names what they belong to.
func checkArguments(part string, x float64, m complex128) error {
	n, k := real(m), imag(m)
	if !(x >= MinSize && x <= MaxSize) {
		return fmt.Errorf("size parameter of the %s: %g is outside %g to %g", part, x, MinSize, MaxSize)
	}
	if !(n > 0) || !(k >= 0) || n > MaxIndex || k > MaxIndex {
		return fmt.Errorf("refractive index of the %s: %g%+gi is outside n > 0, k >= 0, |m| = %g to %g", part, n, k, MinIndex, MaxIndex)
	}
	m2 := n*n + k*k
	switch {
	case m2 < MinIndex*MinIndex || m2 > MaxIndex*MaxIndex:
		return fmt.Errorf("refractive index of the %s: %g%+gi is outside n > 0, k >= 0, |m| = %g to %g", part, n, k, MinIndex, MaxIndex)
	case m2*x*x > MaxOpticalSize*MaxOpticalSize:
		return fmt.Errorf("|m| x of the %s: %g is above %g, too large for this series", part, math.Sqrt(m2)*x, MaxOpticalSize)
	}
	return nil
}

// reciprocal returns 1/z without the scaling of the built-in division, which only
// extreme magnitudes need.
func reciprocal(z complex128) complex128 {
	inv := 1 / norm(z)
	return complex(real(z)*inv, -imag(z)*inv)
}

func norm(z complex128) float64   { return real(z)*real(z) + imag(z)*imag(z) }
func dot(a, b complex128) float64 { return real(a)*real(b) + imag(a)*imag(b) }
