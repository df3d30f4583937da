package rod

import (
	"math"
)

const (
	maxBlock = 14 // modes of one parity

	// endCorrection is the weight of the rank-one end term (see [antenna.reactance]).
	endCorrection = 0.5

	// endLength is the length, in diameters, that flat solid ends add to the tube
	// solution: fitted to quasi-static solid cylinders (finite volumes), 0.2 %.
	endLength = 0.09
)

// block is a square matrix of the modes of one parity.
type block [maxBlock][maxBlock]complex128

// realBlock is a real matrix between modes, of one parity or across the two.
type realBlock [maxBlock][maxBlock]float64

// antenna is the axial current problem of one straight wire: modes sin(n pi (z + L/2)/L),
// n = 1..2 size, split into odd n (index 0) and even n (index 1), which do not couple.
type antenna struct {
	k, length, radius float64
	size              int // modes of each parity
	radiation         [2]realBlock
	transfer          realBlock // forward-backward asymmetry: odd rows, even columns
	reactance         [2]realBlock
}

// axial holds the orientation and polarisation averaged cross-sections [m2] of the axial
// current; gsca is the scattering weighted with the cosine of its angle.
type axial struct{ abs, sca, gsca float64 }

func (a axial) plus(b axial) axial {
	return axial{a.abs + b.abs, a.sca + b.sca, a.gsca + b.gsca}
}

func (a axial) times(f float64) axial { return axial{a.abs * f, a.sca * f, a.gsca * f} }

// wavenumber returns the axial wavenumber of mode i of a parity [1/m].
func (w *antenna) wavenumber(parity, i int) float64 {
	return float64(2*i+1+parity) * math.Pi / w.length
}

// newAntenna fills the external impedance of a wire of effective length L and radius a
// [m] at wavenumber k [1/m]. Enough modes: twice L/lambda and twelve more.
func newAntenna(k, length, radius float64) *antenna {
	w := new(antenna)
	w.fill(k, length, radius)
	return w
}

// fill is [newAntenna] in memory used before.
func (w *antenna) fill(k, length, radius float64) {
	w.k, w.length, w.radius = k, length, radius
	w.size = min(maxBlock, 6+int(math.Ceil(k*length/(2*math.Pi))))
	w.fillRadiation()
	w.fillReactance()
}

// fillRadiation computes the resistive part of the external impedance [ohm] and its
// cosine-weighted companion by Gauss quadrature over the direction cosine c, where
// nothing cancels, however short the wire:
//
//	R_nm = (eta k^2/8 pi) int_-1^1 (1 - c^2) J0^2(ka sqrt(1 - c^2)) F_n F_m* dc
//	F_n = int sin(n pi (z + L/2)/L) exp(ikcz) dz = 2 kap cos(kcL/2)/(kap^2 - k^2 c^2), n odd
//
// and -i times the same with the sine for n even; the companion has another factor c.
func (w *antenna) fillRadiation() {
	half := w.k * w.length / 2
	nodes, weights := gaussRule(half)
	n := w.size
	for i := range n {
		clear(w.radiation[0][i][:n])
		clear(w.radiation[1][i][:n])
		clear(w.transfer[i][:n])
	}
	var f [2][maxBlock]float64
	for q, c := range nodes {
		sin, cos := math.Sincos(half * c)
		s2 := 1 - c*c
		j0 := math.J0(w.k * w.radius * math.Sqrt(s2))
		weight := 2 * weights[q] * freeSpaceImpedance * w.k * w.k / (8 * math.Pi) * s2 * j0 * j0
		h := w.k * c
		for i := range n {
			f[0][i] = pattern(w.wavenumber(0, i), h, cos, w.length, 2*i+1)
			f[1][i] = pattern(w.wavenumber(1, i), h, sin, w.length, 2*i+2)
		}
		odd, even := f[0][:n], f[1][:n]
		for i := range n {
			fo, fe := odd[i]*weight, even[i]*weight
			ro, re := &w.radiation[0][i], &w.radiation[1][i]
			for j := range i + 1 {
				ro[j] += fo * odd[j]
				re[j] += fe * even[j]
			}
			fo *= c
			row := w.transfer[i][:n]
			for j, v := range even {
				row[j] += fo * v
			}
		}
	}
	for p := range 2 {
		for i := range n {
			for j := range i {
				w.radiation[p][j][i] = w.radiation[p][i][j]
			}
		}
	}
}

// pattern returns 2 kap wave/(kap^2 - h^2), wave being cos(hL/2) for odd and sin(hL/2) for even n,
// with its limit at h = kap.
func pattern(kap, h, wave, length float64, n int) float64 {
	if d := h - kap; math.Abs(d)*length < 1e-5 {
		limit := length / 2
		if n%4 == 0 || n%4 == 3 { // the sign of sin(n pi/2), or of -cos(n pi/2)
			limit = -limit
		}
		return limit
	}
	return 2 * kap * wave / ((kap - h) * (kap + h))
}

// fillReactance computes the reactive part of the external impedance [ohm] in closed
// form. With kap = n pi/L and Phi(b) = ln(2L/a) - Cin(|b|L) + i sgn(b) Si(|b|L) for the
// thin kernel exp(ik|u|)/|u|,
//
//	S_n = [Phi(k+kap) - Phi(k-kap)]/2i,   d0 = S_n/kap
//	s0 = (L/2)[Phi(k+kap) + Phi(k-kap)] - (1/2) sum over +- of (exp(ibL) - 1)/(ib), b = k +- kap
//	Z_nn = -(i eta/4 pi) [k(s0 + d0) - (kap^2/k)(s0 - d0)]
//	Z_nm = -(i eta/4 pi) [k 2(kap_n S_m - kap_m S_n) + (kap_n kap_m/k) 2(kap_n S_n - kap_m S_m)]/(kap_n^2 - kap_m^2)
//
// Two terms make up for the thin kernel, without which the matrix diverges once n d/L
// passes about 0.1: on the diagonal the difference of tube and thin kernel at the
// mode's own wavenumber, and between all modes of a parity the end term
//
//	X_nm += weight 2 eta a kap_n kap_m/(pi^2 k)
//
// the average over h of that difference against the ends' spectrum 4 kap_n kap_m/h^4
// (the integral int [I0 K0 + ln(t/2) + gamma] dt/t^2 is 2). Its weight is 1 for endlessly
// many slow modes; 1/2 is the measured best for the modes kept.
func (w *antenna) fillReactance() {
	n := w.size
	k, length, a := w.k, w.length, w.radius
	const scale = -freeSpaceImpedance / (4 * math.Pi)
	sinL, cosL := math.Sincos(k * length)
	ln := math.Log(2 * length / a)
	for p := range 2 {
		parity := 2*p - 1 // (-1)^n: -1 for odd n
		sin, cos := float64(parity)*sinL, float64(parity)*cosL
		var kap, s [maxBlock]float64
		x := &w.reactance[p]
		for i := range n {
			kap[i] = w.wavenumber(p, i)
			plus, minus := k+kap[i], k-kap[i]
			cinP, siP := sineIntegrals(plus*length, sin, cos)
			sign := 1.0
			if minus < 0 {
				sign = -1
			}
			cinM, siM := sineIntegrals(math.Abs(minus)*length, sign*sin, cos)
			s[i] = (siP - sign*siM) / 2
			e := (sin/plus + sinOver(sin, minus, length)) / 2
			s0 := length/2*(2*ln-cinP-cinM) - e
			d0 := s[i] / kap[i]
			x[i][i] = scale*(k*(s0+d0)-kap[i]*kap[i]/k*(s0-d0)) + length/2*tubeMinusThin(k, kap[i], a)
		}
		end := endCorrection * 2 * freeSpaceImpedance * a / (math.Pi * math.Pi * k)
		for i := range n {
			x[i][i] += end * kap[i] * kap[i]
			for j := range i {
				g := 2 * (kap[i]*s[j] - kap[j]*s[i])
				c := 2 * (kap[i]*s[i] - kap[j]*s[j])
				v := scale*(k*g+kap[i]*kap[j]/k*c)/(kap[i]*kap[i]-kap[j]*kap[j]) + end*kap[i]*kap[j]
				x[i][j], x[j][i] = v, v
			}
		}
	}
}

// sinOver returns sin(bL)/b with its limit L at b = 0; sin is sin(bL).
func sinOver(sin, b, length float64) float64 {
	if math.Abs(b)*length < 1e-7 {
		return length
	}
	return sin / b
}

// tubeMinusThin returns the reactance per length [ohm/m] that a current of axial
// wavenumber h on a tube of radius a has beyond the thin-kernel one:
//
//	(eta g^2/2 pi k) [I0(ga) K0(ga) + ln(ga/2) + gamma],   g^2 = h^2 - k^2 > 0
//	(eta q^2/4k) [J0(qa) Y0(qa) - (2/pi)(ln(qa/2) + gamma)],   q^2 = k^2 - h^2 > 0
func tubeMinusThin(k, h, a float64) float64 {
	g2 := (h - k) * (h + k)
	if g2 == 0 {
		return 0
	}
	x := math.Sqrt(math.Abs(g2)) * a
	log := math.Log(x/2) + eulerGamma
	if g2 > 0 {
		return freeSpaceImpedance * g2 / (2 * math.Pi * k) * (besselI0K0(x) + log)
	}
	return -freeSpaceImpedance * g2 / (4 * k) * (math.J0(x)*math.Y0(x) - 2/math.Pi*log)
}

// besselI0K0 returns I0(x) K0(x) [1] for x > 0: power series below 6, asymptotic series
// above ([AbramowitzStegun1964], 9.6.12, 9.6.13 and 9.7.5); relative error below 1e-4.
func besselI0K0(x float64) float64 {
	if x > 6 {
		t := 1 / (4 * x * x)
		return (1 + t*(0.5+t*(27./8+t*1125./16))) / (2 * x)
	}
	t := x * x / 4
	term, i0, k0, harmonic := 1.0, 1.0, 0.0, 0.0
	for k := 1; k < 40; k++ {
		term *= t / float64(k*k)
		harmonic += 1 / float64(k)
		i0 += term
		k0 += term * harmonic
		if term < 1e-17*i0 {
			break
		}
	}
	return i0 * (k0 - (math.Log(x/2)+eulerGamma)*i0)
}

// solve returns the averaged cross-sections for the internal impedance zi per length
// [ohm/m]. With Z = R + iX + zi L/2, Y = 1/Z and the averages as traces,
//
//	C_abs = (lambda^2/2 pi) Re(zi) (L/2) tr(R Y* Y),   C_sca = (lambda^2/2 pi) tr(R Y* R Y)
//	g C_sca = (lambda^2/2 pi) tr(R1 Y R1 Y*)
//
// Both are sums of non-negative parts, and their sum is (lambda^2/2 pi) Re tr(R Y).
func (w *antenna) solve(zi complex128) axial {
	n := w.size
	c := 2 * math.Pi / (w.k * w.k) // lambda^2/2 pi
	var y [2]block
	var t block
	var out axial
	own := zi * complex(w.length/2, 0)
	for p := range 2 {
		yp := &y[p]
		for i := range n {
			for j := range n {
				yp[i][j] = complex(w.radiation[p][i][j], w.reactance[p][i][j])
			}
			yp[i][i] += own
		}
		invert(yp, n)
		product(&t, &w.radiation[p], yp, n) // R Y
		for i := range n {
			for j := range n {
				a, b, d := t[i][j], yp[j][i], t[j][i]
				out.abs += real(a)*real(b) + imag(a)*imag(b)
				out.sca += real(a)*real(d) + imag(a)*imag(d)
			}
		}
	}
	// tr(R1 Y R1 Y*) = 2 Re tr(B Y_even B^T Y_odd*), R1 = [[0, iB], [-iB^T, 0]]
	product(&t, &w.transfer, &y[1], n)
	for i := range n {
		ti := t[i][:n]
		for j := range n {
			var re, im float64
			for l, b := range w.transfer[j][:n] {
				re += real(ti[l]) * b
				im += imag(ti[l]) * b
			}
			o := y[0][j][i]
			out.gsca += 2 * (re*real(o) + im*imag(o))
		}
	}
	out.abs *= c * real(own)
	out.sca *= c
	out.gsca *= c
	return out
}

// product sets the leading n by n part of t to that of a y, y symmetric.
func product(t *block, a *realBlock, y *block, n int) {
	for i := range n {
		ai := a[i][:n]
		for j := range n {
			yj := y[j][:n]
			var re, im float64
			for l, v := range ai {
				re += v * real(yj[l])
				im += v * imag(yj[l])
			}
			t[i][j] = complex(re, im)
		}
	}
}

// invert replaces the leading n by n part of m by its inverse (Gauss-Jordan on the
// diagonal). The real part of an impedance matrix is positive definite, so every pivot
// is away from zero without exchanges.
func invert(m *block, n int) {
	for k := range n {
		pivot := 1 / m[k][k]
		m[k][k] = 1
		row := m[k][:n]
		for j := range row {
			row[j] *= pivot
		}
		for i := range n {
			if i == k {
				continue
			}
			r := m[i][:n]
			f := r[k]
			r[k] = 0
			for j, v := range row {
				r[j] -= f * v
			}
		}
	}
}
