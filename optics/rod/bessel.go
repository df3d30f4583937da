package rod

import "math"

// besselJ fills dst with J_0(q), J_1(q), ... for q > 0: upward from J_0 and J_1 while the order
// stays below q, which is stable, else the ratios J_n+1/J_n downward (Miller's method as a
// continued fraction, which neither overflows nor needs rescaling), normalised by
// the larger of J_0 and J_1 ([AbramowitzStegun1964], 9.1.27 and 9.12).
func besselJ(dst []float64, q float64) {
	j0, j1 := math.J0(q), math.J1(q)
	last := len(dst) - 1
	if float64(last) < q {
		dst[0], dst[1] = j0, j1
		upward(dst, q)
		return
	}
	start := int(float64(last)+6*math.Cbrt(float64(last))) + 12
	ratio := 0.0
	for n := start; n > 0; n-- {
		ratio = q / (float64(2*n) - q*ratio) // J_n/J_n-1
		if n <= last {
			dst[n] = ratio
		}
	}
	dst[0] = j0
	if math.Abs(j0) >= math.Abs(j1) {
		dst[1] *= j0
	} else {
		dst[1] = j1
	}
	for n := 2; n <= last; n++ {
		dst[n] *= dst[n-1]
	}
}

// besselY fills dst with Y_0(q), Y_1(q), ... upward, which is stable for every order.
func besselY(dst []float64, q float64) {
	dst[0], dst[1] = math.Y0(q), math.Y1(q)
	upward(dst, q)
}

// upward continues dst[0], dst[1] with the recurrence C_n+1 = (2n/q) C_n - C_n-1.
func upward(dst []float64, q float64) {
	r := 2 / q
	for n := 1; n < len(dst)-1; n++ {
		dst[n+1] = float64(n)*r*dst[n] - dst[n-1]
	}
}

// besselI0K0 returns I0(x) K0(x) [1] for x > 0: power series up to 2
// ([AbramowitzStegun1964], 9.6.12 and 9.6.13), above it a Chebyshev fit to 2x I0 K0 in 4/x - 1,
// our own; relative error below 1e-9. Neither factor is formed, so nothing overflows.
func besselI0K0(x float64) float64 {
	if x > 2 {
		return chebyshev(productI0K0[:], 4/x-1) / (2 * x)
	}
	t := x * x / 4
	term, i0, k0, harmonic := 1.0, 1.0, 0.0, 0.0
	for k := 1.0; k < 14; k++ {
		term *= t / (k * k)
		harmonic += 1 / k
		i0 += term
		k0 += term * harmonic
		if term < 1e-14 {
			break
		}
	}
	return i0 * (k0 - (math.Log(x/2)+eulerGamma)*i0)
}

var productI0K0 = [...]float64{
	1.01450629922130497e+00, 1.96592723619381897e-02, 5.08251965305948298e-03, -3.69507453000718627e-04,
	-3.65048477281533284e-04, -3.17764956397307029e-05, 4.39023353986831453e-05, 3.43675687178011714e-06,
	-7.17268484258448643e-06, 4.64421294362020248e-07, 1.24567832964443563e-06, -4.06035528362743162e-07,
	-1.42956226654496455e-07, 1.38171046010121390e-07, -1.83202067475409973e-08, -2.59416215551611398e-08,
	1.59683727616842173e-08, -7.53710823620253567e-10, -3.88876555098734659e-09, 2.23327656877088260e-09,
	-1.22934204741511642e-10, -5.74015370056459835e-10,
}
