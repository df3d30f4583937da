package mie

import (
	"fmt"
	"math"
)

// Channel is one part of a cylinder's efficiencies, per diameter (cross-section per
// length over 2a) [1]. GSca is the scattering efficiency weighted with the cosine of
// the scattering angle. Ext = Sca + Abs by construction.
type Channel struct {
	Ext, Sca, Abs, GSca float64
}

// Add returns the sum of two channels.
func (c Channel) Add(d Channel) Channel {
	return Channel{c.Ext + d.Ext, c.Sca + d.Sca, c.Abs + d.Abs, c.GSca + d.GSca}
}

// Scale returns the channel with every entry multiplied by f.
func (c Channel) Scale(f float64) Channel {
	return Channel{c.Ext * f, c.Sca * f, c.Abs * f, c.GSca * f}
}

// CylinderEfficiencies separates what a long cylinder does with the two
// polarisations: TM has the electric field in the plane of wave vector and axis (case
// I of [BohrenHuffman1983]), TE has it across the axis (case II). TM0 is the azimuthal
// order 0 of TM, the axial current that the antenna model of package rod replaces;
// TMRest is every other order of TM. Cross is the interference of TM orders 0 and 1, which
// adds to the cosine-weighted scattering only.
type CylinderEfficiencies struct {
	TM0, TMRest, TE Channel
	Cross           float64
}

// TM returns all orders of the polarisation with the electric field in the plane of
// wave vector and axis.
func (e CylinderEfficiencies) TM() Channel {
	c := e.TM0.Add(e.TMRest)
	c.GSca += e.Cross
	return c
}

// Cylinder returns the efficiencies per diameter of an infinite cylinder of size
// parameter x = 2 pi a/lambda [1] and index m = n + ik, lit at the angle zeta
// [rad] between wave vector and axis, from the exact series ([BohrenHuffman1983],
// section 8.4):
//
//	Ext_TM = (2/x) Re(b0 + 2 sum b_n),   Sca_TM = (2/x) (|b0|^2 + 2 sum |b_n|^2 + |a_n|^2)
//
// and the same with a and b exchanged for TE. The coefficients are rewritten so that
// nothing cancels. With eps = m^2, xi = x sin zeta, eta^2 = x^2 (eps - cos^2 zeta),
// c = cos zeta, A = 1/xi^2, B = 1/eta^2, t = J_{n+1}(eta)/(eta J_n(eta)), t0 the same at xi,
// h = H_{n-1}(xi)/(xi H_n(xi)),
//
//	det  = 2 n^2 A B (eps+1) - n (A + eps B)(h + t) - n (A + B)(h + eps t) + (h + t)(h + eps t)
//	b_TM = J/H [c^2 n (A-B)(h + t - 2nA) + (eps t - t0)(h + t - n(A+B))] / det
//	a_TE = J/H [n (A-B)(h + eps t - 2nA) + (t - t0)(h + eps t - n(A + eps B))] / det
//	a_TM = -b_TE = -2 n c (A-B) / (pi xi^2 H^2 det)
//
// Absorption is the flow of energy through the surface, a sum of three non-negative
// terms for each order, and extinction is the sum of scattering and absorption:
//
//	Abs_TM,n = 4/(pi x^3 sin^2 zeta |H det|^2) [n |Im B| c^2 |2nA - h - t|^2
//	           + n^2 c^2 |A-B|^2 Im t + |h + t - n(A+B)|^2 Im(eps t)]
//	Abs_TE,n = the same factor [n |Im B| |2nA - h - eps t|^2
//	           + |h + eps t - n(A + eps B)|^2 Im t + n^2 c^2 |A-B|^2 Im(eps t)]
//
// Holds for x from 1e-9 to [MaxSize], 1e-4 <= zeta <= pi/2, the same indices as
// [Sphere]; a relative 1e-11 against arbitrary-precision rows between x = 1e-3 and
// 200 and from 2 to 90 degrees, faint absorbers and metals included. Errors:
// an argument outside the range or not finite.
func Cylinder(x float64, m complex128, zeta float64) (CylinderEfficiencies, error) {
	if err := checkCylinder(x, m); err != nil {
		return CylinderEfficiencies{}, err
	}
	if !(zeta >= 1e-4 && zeta <= math.Pi/2) {
		return CylinderEfficiencies{}, fmt.Errorf("angle between wave and axis: %g rad is outside 1e-4 to pi/2", zeta)
	}
	s, c := math.Sincos(zeta)
	if zeta == math.Pi/2 {
		c = 0
	}
	var w besselWork
	return cylinder(&w, x, m, s, c), nil
}

// cylinder sums the series for the sine s and cosine c of zeta.
func cylinder(work *besselWork, x float64, m complex128, s, c float64) CylinderEfficiencies {
	xi := x * s
	eps := m * m
	contrast := (m - 1) * (m + 1)            // eps - 1, precise near an index of 1
	epsC := contrast + complex(s*s, 0)       // eps - cos^2 zeta
	eta2 := complex(x*x, 0) * epsC           // eta^2
	A := complex(1/(xi*xi), 0)               // 1/xi^2
	B := reciprocal(eta2)                    // 1/eta^2
	AB := contrast * B * complex(1/(s*s), 0) // A - B
	leading := 2 * A * B * (eps + 1)         // of the determinant, over n^2
	lossB := math.Abs(imag(B))               // of the surface term, over n
	n := work.fill(xi, eta2)
	j, y, t, t0 := work.j, work.y, work.t, work.t0

	var e CylinderEfficiencies
	var aLast, bLast [2]complex128 // previous order, TM and TE
	f := 2 / x
	g := 4 / (math.Pi * x * x * x * s * s)
	for k := 0; k <= n; k++ {
		H2 := j[k]*j[k] + y[k]*y[k] // |H|^2
		var h complex128
		if k == 0 {
			h = complex(-(j[1]*j[0]+y[1]*y[0])/(xi*H2), 2/(math.Pi*xi*xi*H2))
		} else {
			h = complex((j[k-1]*j[k]+y[k-1]*y[k])/(xi*H2), 2/(math.Pi*xi*xi*H2))
		}
		order := complex(float64(k), 0)
		tk := t[k]
		et := eps * tk
		ht, het := h+tk, h+et
		pH := ht - order*(A+B)      // TM
		pE := het - order*(A+eps*B) // TE
		det := order*order*leading - order*((A+eps*B)*ht+(A+B)*het) + ht*het
		invDet := reciprocal(det)
		jH := complex(j[k]*j[k]/H2, -j[k]*y[k]/H2) // J/H
		near := order * AB
		top := 2 * order * A
		b := jH * invDet * (complex(c*c, 0)*near*(ht-top) + (et-complex(t0[k], 0))*pH)
		a := jH * invDet * (near*(het-top) + (tk-complex(t0[k], 0))*pE)
		H := complex(j[k], y[k])
		rH := reciprocal(H)
		mix := -complex(2*c/(math.Pi*xi*xi), 0) * near * (rH * rH) * invDet
		tm := [2]complex128{mix, b}  // a_n, b_n
		te := [2]complex128{a, -mix} // a_n, b_n

		w := g / H2 * norm(invDet)
		cross := c * c * norm(near)
		order0 := float64(k) * lossB
		lossTM := w * (order0*c*c*norm(ht-top) + cross*imag(tk) + norm(pH)*imag(et))
		lossTE := w * (order0*norm(het-top) + norm(pE)*imag(tk) + cross*imag(et))

		if k == 0 {
			sca := f * norm(b)
			e.TM0 = Channel{Sca: sca, Abs: lossTM, GSca: c * c * sca}
			e.TE.Sca = f * norm(a)
			e.TE.Abs = lossTE
		} else {
			e.TMRest.Sca += 2 * f * (norm(b) + norm(mix))
			e.TMRest.Abs += 2 * lossTM
			e.TE.Sca += 2 * f * (norm(a) + norm(mix))
			e.TE.Abs += 2 * lossTE
			// cos theta = cos^2 zeta + sin^2 zeta cos phi; neighbours interfere through cos phi
			cone := dot(bLast[0], tm[1])
			coneTE := dot(aLast[1], te[0])
			if k == 1 {
				e.Cross = 2 * f * s * s * cone
			} else {
				e.TMRest.GSca += 2 * f * s * s * (cone + dot(aLast[0], tm[0]))
				coneTE += dot(bLast[1], te[1])
			}
			e.TE.GSca += 2 * f * s * s * coneTE
		}
		aLast, bLast = [2]complex128{tm[0], te[0]}, [2]complex128{tm[1], te[1]}
	}
	e.TMRest.GSca += c * c * e.TMRest.Sca
	e.TE.GSca += c * c * e.TE.Sca
	if imag(m) == 0 { // not the rounding left over
		e.TM0.Abs, e.TMRest.Abs, e.TE.Abs = 0, 0, 0
	}
	e.TM0.Ext = e.TM0.Sca + e.TM0.Abs
	e.TMRest.Ext = e.TMRest.Sca + e.TMRest.Abs
	e.TE.Ext = e.TE.Sca + e.TE.Abs
	return e
}

func checkCylinder(x float64, m complex128) error {
	if err := checkArguments("cylinder", x, m); err != nil {
		return err
	}
	if x < 1e-9 {
		return fmt.Errorf("size parameter of the cylinder: %g is outside 1e-9 to %g", x, MaxSize)
	}
	return nil
}
