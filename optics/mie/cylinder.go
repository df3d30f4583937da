package mie

import (
	"fmt"
	"math"
	"math/cmplx"
)

// Channel is one part of a cylinder's efficiencies, per diameter (cross-section per
// length over 2a) [1]. GSca is the scattering efficiency weighted with the cosine of
// the scattering angle. Ext = Sca + Abs up to rounding.
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
// section 8.4, with every term divided by J_n(eta)):
//
//	xi = x sin zeta,   eta = x sqrt(m^2 - cos^2 zeta)
//	Ext_TM = (2/x) Re(b0 + 2 sum b_n),   Sca_TM = (2/x) (|b0|^2 + 2 sum |b_n|^2 + |a_n|^2)
//
// and the same with a and b exchanged for TE.
//
// Holds for x from 1e-9 to [MaxSize], 1e-4 <= zeta <= pi/2, the same indices as
// [Sphere]; a relative 1e-9 against arbitrary-precision rows. Absorption is the
// difference of extinction and scattering, so a faint absorber (k below about 1e-7)
// keeps fewer digits: its error is about 1e-16 Ext/Abs, and more for x << 1. Errors:
// an argument outside the range or not finite.
func Cylinder(x float64, m complex128, zeta float64) (CylinderEfficiencies, error) {
	if err := checkArguments(x, m); err != nil {
		return CylinderEfficiencies{}, err
	}
	if x < 1e-9 {
		return CylinderEfficiencies{}, fmt.Errorf("size parameter %g of a cylinder is below 1e-9", x)
	}
	if !(zeta >= 1e-4 && zeta <= math.Pi/2) {
		return CylinderEfficiencies{}, fmt.Errorf("angle %g rad between wave and axis is outside 1e-4 to pi/2", zeta)
	}
	s, c := math.Sincos(zeta)
	if zeta == math.Pi/2 {
		c = 0
	}
	xi := x * s
	// m^2 - c^2, written so that an index near 1 keeps its digits.
	eta := complex(x, 0) * cmplx.Sqrt((m-1)*(m+1)+complex(s*s, 0))
	n := int(xi+6*math.Cbrt(xi)) + 6
	logDer := besselLogDerivatives(eta, n)
	j := besselJ(xi, n+1)

	var e CylinderEfficiencies
	yPrev, y := math.Inf(-1), math.Y0(xi) // Y_{n-1}, Y_n
	yNext := math.Y1(xi)
	m2 := m * m
	r := complex(xi*xi, 0)/(eta*eta) - 1
	cxi := complex(xi, 0)
	var aLast, bLast [2]complex128 // previous order, TM and TE
	f := 2 / x
	for k := 0; k <= n; k++ {
		jp := -j[1]
		yp := -yNext
		if k > 0 {
			jp = (j[k-1] - j[k+1]) / 2
			yp = (yPrev - yNext) / 2
		}
		J, Jp := complex(j[k], 0), complex(jp, 0)
		H, Hp := complex(j[k], y), complex(jp, yp)
		d := logDer[k]
		A := 1i * cxi * (cxi*d*J - eta*Jp)
		B := cxi * (m2*cxi*d*J - eta*Jp)
		V := cxi * (m2*cxi*d*H - eta*Hp)
		W := 1i * cxi * (eta*Hp - cxi*d*H)
		cross := complex(float64(k)*c, 0) * eta * r
		C, D := cross*J, cross*H
		den := 1 / (W*V + 1i*D*D)
		tm := [2]complex128{(C*V - B*D) * den, (W*B + 1i*D*C) * den}        // a_n, b_n
		te := [2]complex128{-(A*V - 1i*C*D) * den, -1i * (C*W + A*D) * den} // a_n, b_n

		if k == 0 {
			ext, sca := f*real(tm[1]), f*norm(tm[1])
			e.TM0 = Channel{Ext: ext, Sca: sca, Abs: ext - sca, GSca: c * c * sca}
			e.TE.Ext += f * real(te[0])
			e.TE.Sca += f * norm(te[0])
		} else {
			e.TMRest.Ext += 2 * f * real(tm[1])
			e.TMRest.Sca += 2 * f * (norm(tm[1]) + norm(tm[0]))
			e.TE.Ext += 2 * f * real(te[0])
			e.TE.Sca += 2 * f * (norm(te[0]) + norm(te[1]))
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
		yPrev, y = y, yNext
		yNext = 2*float64(k+1)/xi*y - yPrev
		if math.Abs(yNext) > 1e120 || float64(k) > xi && norm(tm[0])+norm(tm[1])+norm(te[0])+norm(te[1]) < 1e-40*(e.TE.Sca+e.TM0.Sca)/f {
			break // what follows is far below rounding
		}
	}
	e.TMRest.GSca += c * c * e.TMRest.Sca
	e.TE.GSca += c * c * e.TE.Sca
	e.TMRest.Abs = e.TMRest.Ext - e.TMRest.Sca
	e.TE.Abs = e.TE.Ext - e.TE.Sca
	if imag(m) == 0 {
		e.TM0 = lossless(e.TM0)
		e.TMRest = lossless(e.TMRest)
		e.TE = lossless(e.TE)
	}
	return e, nil
}

// lossless gives a channel of a transparent cylinder no absorption, not the rounding left over.
func lossless(c Channel) Channel {
	c.Ext, c.Abs = c.Sca, 0
	return c
}

// CylinderAverage returns the efficiencies per diameter of an infinite cylinder
// averaged over random orientation and over both polarisations, so that a piece of
// length L has the cross-section 2 a L times the sum of the channels:
//
//	Q = (1/2) int_0^1 [Q_TM + Q_TE] d(cos zeta)
//
// TM0, TMRest and TE carry the factor 1/2. The Gauss rule over cos zeta grows with x;
// it is converged to about 6e-4. Errors and range as [Cylinder].
func CylinderAverage(x float64, m complex128) (CylinderEfficiencies, error) {
	nodes, weights := gauss12[:], gaussWeights12[:]
	if x < 0.3 {
		nodes, weights = gauss8[:], gaussWeights8[:]
	} else if x > 3 {
		nodes, weights = gauss24[:], gaussWeights24[:]
	}
	var sum CylinderEfficiencies
	for i, u := range nodes {
		e, err := Cylinder(x, m, math.Acos(u))
		if err != nil {
			return CylinderEfficiencies{}, err
		}
		w := weights[i] / 2
		sum.TM0 = sum.TM0.Add(e.TM0.Scale(w))
		sum.TMRest = sum.TMRest.Add(e.TMRest.Scale(w))
		sum.TE = sum.TE.Add(e.TE.Scale(w))
		sum.Cross += w * e.Cross
	}
	return sum, nil
}
