package rod

import "math"

const (
	maxSines = 14 // modes of one parity

	// endCorrection is the weight of the rank-one end term (see [sines.reactance]).
	endCorrection = 0.5
)

// sines fills a matrix with the closed forms of the modes sqrt(2) sin(n pi (z + L/2)/L), odd n
// first, in units of the length; enough modes: twice L/lambda and twelve more.
type sines struct {
	phase, radius float64
	m             Matrix
}

// matrix returns the matrix of a wire, valid until the next call.
func (w *sines) matrix(phase, aspect float64) *Matrix {
	w.phase, w.radius = phase, 0.5/aspect
	n := min(maxSines, 6+int(math.Ceil(phase/(2*math.Pi))))
	data := w.m.data
	if cap(data) < 5*n*n {
		data = make([]float64, 5*n*n)
	}
	data = data[:5*n*n]
	clear(data)
	w.m = Matrix{phase: phase, aspect: aspect, size: n, data: data}
	w.radiation()
	w.reactance()
	for i := range data {
		data[i] *= 2
	}
	return &w.m
}

// wavenumber returns the axial wavenumber of mode i of a parity.
func (w *sines) wavenumber(parity, i int) float64 { return float64(2*i+1+parity) * math.Pi }

// radiation computes the resistive part [ohm] and its cosine-weighted companion by Gauss
// quadrature over the direction cosine c, where nothing cancels, however short the wire:
//
//	R_nm = (eta k^2/8 pi) int_-1^1 (1 - c^2) J0^2(ka sqrt(1 - c^2)) F_n F_m* dc
//	F_n = int sin(n pi (z + L/2)/L) exp(ikcz) dz = 2 kap cos(kcL/2)/(kap^2 - k^2 c^2), n odd
//
// and -i times the same with the sine for n even; the companion has another factor c.
func (w *sines) radiation() {
	half := w.phase / 2
	nodes, weights := gaussRule(half)
	n := w.m.size
	var f [2][maxSines]float64
	odd, even := f[0][:n], f[1][:n]
	for q, c := range nodes {
		sin, cos := math.Sincos(half * c)
		s2 := 1 - c*c
		j0 := math.J0(w.phase * w.radius * math.Sqrt(s2))
		weight := 2 * weights[q] * freeSpaceImpedance * w.phase * w.phase / (8 * math.Pi) * s2 * j0 * j0
		h := w.phase * c
		for i := range n {
			odd[i] = pattern(w.wavenumber(0, i), h, cos, 2*i+1)
			even[i] = pattern(w.wavenumber(1, i), h, sin, 2*i+2)
		}
		addPair(w.m.radiation(0), odd, weight)
		addPair(w.m.radiation(1), even, weight)
		addCross(w.m.transfer(), odd, even, weight*c)
	}
	mirror(w.m.radiation(0), n)
	mirror(w.m.radiation(1), n)
}

// pattern returns 2 kap wave/(kap^2 - h^2), wave being cos(h/2) for odd and sin(h/2) for even n,
// with its limit at h = kap.
func pattern(kap, h, wave float64, n int) float64 {
	if math.Abs(h-kap) < 1e-5 {
		if n%4 == 0 || n%4 == 3 { // the sign of sin(n pi/2), or of -cos(n pi/2)
			return -0.5
		}
		return 0.5
	}
	return 2 * kap * wave / ((kap - h) * (kap + h))
}

// reactance computes the reactive part [ohm] in closed form. With kap = n pi/L and
// Phi(b) = ln(2L/a) - Cin(|b|L) + i sgn(b) Si(|b|L) for the thin kernel exp(ik|u|)/|u|,
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
func (w *sines) reactance() {
	n := w.m.size
	k, a := w.phase, w.radius
	const scale = -freeSpaceImpedance / (4 * math.Pi)
	sinK, cosK := math.Sincos(k)
	ln := math.Log(2 / a)
	for p := range 2 {
		parity := float64(2*p - 1) // (-1)^n: -1 for odd n
		sin, cos := parity*sinK, parity*cosK
		var kap, s [maxSines]float64
		x := w.m.reactance(p)
		end := endCorrection * 2 * freeSpaceImpedance * a / (math.Pi * math.Pi * k)
		for i := range n {
			kap[i] = w.wavenumber(p, i)
			plus, minus := k+kap[i], k-kap[i]
			cinP, siP := sineIntegrals(plus, sin, cos)
			sign := 1.0
			if minus < 0 {
				sign = -1
			}
			cinM, siM := sineIntegrals(math.Abs(minus), sign*sin, cos)
			s[i] = (siP - sign*siM) / 2
			s0 := (2*ln-cinP-cinM)/2 - (sin/plus+sinOver(sin, minus))/2
			d0 := s[i] / kap[i]
			x[i*n+i] = scale*(k*(s0+d0)-kap[i]*kap[i]/k*(s0-d0)) + tubeMinusThin(k, kap[i], a)/2 + end*kap[i]*kap[i]
			for j := range i {
				g := 2 * (kap[i]*s[j] - kap[j]*s[i])
				c := 2 * (kap[i]*s[i] - kap[j]*s[j])
				x[i*n+j] = scale*(k*g+kap[i]*kap[j]/k*c)/(kap[i]*kap[i]-kap[j]*kap[j]) + end*kap[i]*kap[j]
			}
		}
		mirror(x, n)
	}
}

// sinOver returns sin(b)/b with its limit 1 at b = 0; sin is sin(b).
func sinOver(sin, b float64) float64 {
	if math.Abs(b) < 1e-7 {
		return 1
	}
	return sin / b
}

// tubeMinusThin returns the reactance per length [ohm] that a current of axial
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
