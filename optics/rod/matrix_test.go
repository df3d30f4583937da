package rod

import (
	"math"
	"math/cmplx"
	"testing"

	"gonum.org/v1/gonum/floats/scalar"
	"gonum.org/v1/gonum/integrate/quad"
	"gonum.org/v1/gonum/mathext"
)

// wire gives a test what Matrix keeps to itself: the pattern of its orthonormal modes.
type wire struct {
	*Matrix
	factor [2][]float64
}

func newWire(t *testing.T, phase, aspect float64, modes int) wire {
	t.Helper()
	m, err := NewMatrix(phase, aspect, modes)
	if err != nil {
		t.Fatal(err)
	}
	b := new(builder)
	b.build(phase, aspect, m.size)
	return wire{m, b.factors[m.size]}
}

// pattern returns int phi_p exp(ikcz) dz [1, in lengths] of the modes of a parity, for odd ones over i.
func (w wire) pattern(parity int, c float64) []float64 {
	q := w.phase / 2 * c
	out := make([]float64, w.size)
	for p := range w.size {
		sign := 1.0
		for j := range p + 1 {
			n := 2*j + parity
			f := 0.5 // J_1(q)/q at 0
			if q != 0 {
				f = math.Jn(n+1, q) / q
			} else if n > 0 {
				f = 0
			}
			out[p] += w.factor[parity][p*w.size+j] * math.Pi / 2 * sign * float64(n+1) * f
			sign = -sign
		}
	}
	return out
}

// admittance returns 1/(R + iX + z) of a parity.
func (w wire) admittance(parity int, z complex128) []complex128 {
	y := make([]complex128, w.size*w.size)
	for i := range y {
		y[i] = complex(w.radiation(parity)[i], w.reactance(parity)[i])
	}
	for i := range w.size {
		y[i*w.size+i] += z
	}
	invert(y, make([]complex128, w.size), w.size)
	return y
}

func quadratic(v []float64, y []complex128) complex128 {
	var sum complex128
	for i, a := range v {
		for j, b := range v {
			sum += complex(a*b, 0) * y[i*len(v)+j]
		}
	}
	return sum
}

// Two ways: the integrals of [NewMatrix] against brute force, with the asymptote i eta h/(4 pi k a)
// taken out under the integral and put back in closed form on the diagonal, no fade, no log
// panels, from the standard library's Bessel functions and trapezoidal I0 and K0.
func TestNewMatrix_bruteForce(t *testing.T) {
	for _, c := range []struct {
		phase, aspect float64
		modes         int
	}{{0.3, 50, 8}, {2.8, 12, 10}, {5, 100, 12}, {30, 40, 24}} {
		w := newWire(t, c.phase, c.aspect, c.modes)
		q0, thin := c.phase/2, 1/c.aspect
		n := w.size
		var r, x [2][]float64
		for p := range 2 {
			r[p], x[p] = make([]float64, n*n), make([]float64, n*n)
		}
		add := func(q, re, im float64) {
			re *= math.Pi
			im = math.Pi * (im - freeSpaceImpedance*q/(4*math.Pi*q0*thin))
			for p := range 2 {
				v := make([]float64, n)
				for i := range v {
					o := 2*i + p
					v[i] = float64(o+1) * math.Jn(o+1, q) / q
					if i%2 == 1 {
						v[i] = -v[i]
					}
				}
				addPair(r[p], v, re)
				addPair(x[p], v, im)
			}
		}
		nodes, weights := make([]float64, 40), make([]float64, 40)
		piece := func(from, to float64, f func(u, weight float64)) {
			quad.Legendre{}.FixedLocations(nodes, weights, from, to)
			for i, u := range nodes {
				f(u, weights[i])
			}
		}
		addWeighted := func(q, weight, re, im float64) {
			full := freeSpaceImpedance * q / (4 * math.Pi * q0 * thin) // add takes the weight outside the asymptote
			add(q, weight*re, weight*(im-full)+full)
		}
		piece(0, math.Pi/2, func(u, weight float64) {
			k2 := q0 * math.Cos(u)
			f := freeSpaceImpedance * k2 * k2 / (4 * q0) * math.J0(k2*thin)
			addWeighted(q0*math.Sin(u), weight*k2, f*math.J0(k2*thin), f*math.Y0(k2*thin))
		})
		above := func(q, weight float64) {
			g := math.Sqrt((q - q0) * (q + q0))
			addWeighted(q, weight, 0, freeSpaceImpedance*g*g/(2*math.Pi*q0)*productByQuadrature(g*thin))
		}
		piece(0, 1, func(u, weight float64) { above(q0+u*u, weight*2*u) })
		for q := q0 + 1; q < 200*c.aspect; q += 20 {
			piece(q, q+20, above)
		}
		for p := range 2 {
			mirror(r[p], n)
			mirror(x[p], n)
			for i := range n {
				x[p][i*n+i] += freeSpaceImpedance * float64(2*i+p+1) / (8 * q0 * thin)
			}
			scratch := make([]float64, n*n)
			for _, a := range [][]float64{r[p], x[p]} {
				multiplyLeft(scratch, w.factor[p], a, n)
				multiplyRight(a, scratch, w.factor[p], n, false)
			}
			for i := range n * n {
				if got := w.radiation(p)[i]; !scalar.EqualWithinAbsOrRel(got, r[p][i], 1e-9*r[p][0], 1e-9) {
					t.Errorf("kL = %g, parity %d: R[%d] = %g, want %g", c.phase, p, i, got, r[p][i])
				}
				scale := math.Sqrt(math.Abs(x[p][i/n*n+i/n] * x[p][i%n*n+i%n]))
				if got := w.reactance(p)[i]; math.Abs(got-x[p][i]) > 3e-6*scale {
					t.Errorf("kL = %g, parity %d: X[%d] = %g, want %g", c.phase, p, i, got, x[p][i])
				}
			}
		}
	}
}

// productByQuadrature returns I0(x) K0(x): I0 exp(-x) as the mean of exp(x(cos p - 1)), K0 exp(x) as the
// integral of exp(-x(cosh s - 1)), both by the trapezoidal rule.
func productByQuadrature(x float64) float64 {
	points := 64 + int(8*math.Sqrt(x)*4)
	i0 := 0.0
	for i := range points {
		i0 += math.Exp(x*(math.Cos(2*math.Pi*(float64(i)+0.5)/float64(points))-1)) / float64(points)
	}
	k0, step := 0.0, 0.05/math.Sqrt(1+x)
	for s := step / 2; ; s += step {
		v := math.Exp(-2 * x * math.Pow(math.Sinh(s/2), 2))
		k0 += v * step
		if v < 1e-18 {
			break
		}
	}
	return i0 * k0
}

// The rules integrate a polynomial exactly (closed form): 2/(2j + 1).
func TestRule(t *testing.T) {
	var b builder
	for n := 6; n <= 400; n++ {
		nodes, weights := b.rule(n, -1, 1)
		var second, tenth float64
		for i, x := range nodes {
			second += weights[i] * x * x
			tenth += weights[i] * math.Pow(x, 10)
		}
		if math.Abs(second-2./3) > 1e-13 || math.Abs(tenth-2./11) > 1e-13 {
			t.Errorf("%d points: %g and %g", n, second-2./3, tenth-2./11)
		}
	}
}

func TestBesselI0K0(t *testing.T) {
	for _, x := range []float64{1e-3, 0.1, 1, 1.999, 2.001, 5, 20, 300} {
		if got, want := besselI0K0(x), productByQuadrature(x); !scalar.EqualWithinRel(got, want, 2e-9) {
			t.Errorf("I0 K0 at %g = %.12g, want %.12g", x, got, want)
		}
	}
}

// The standard library's own recurrences.
func TestBesselJ(t *testing.T) {
	dst := make([]float64, 60)
	for _, q := range []float64{1e-8, 0.3, 2.4, 3.83, 17, 58, 59.5, 400} {
		besselJ(dst, q)
		for n, got := range dst {
			if want := math.Jn(n, q); math.Abs(got-want) > 1e-12*math.Max(math.Abs(want), 1e-3) {
				t.Errorf("J%d(%g) = %g, want %g", n, q, got, want)
			}
		}
	}
}

// Handbook values for the thin half-wave dipole with its sinusoidal current (Balanis, Antenna
// Theory, 3rd ed., section 8.6; values from memory): 73.1 + 42.5i ohm with exp(+i omega t), here
// the conjugate.
func TestNewMatrix_halfWaveImpedance(t *testing.T) {
	w := newWire(t, math.Pi, 1e6, 120)
	d := make([]float64, w.size) // cos(pi u/2) in the modes
	for p := range d {
		for j := range p + 1 {
			overlap := quad.Fixed(func(v float64) float64 { // u = cos v
				return math.Cos(math.Pi/2*math.Cos(v)) * math.Sin(float64(2*j+1)*v) * math.Sin(v) / 2
			}, 0, math.Pi, 300, quad.Legendre{}, 1)
			d[p] += w.factor[0][p*w.size+j] * overlap
		}
	}
	var r, x float64
	for i := range d {
		for j := range d {
			r += d[i] * d[j] * w.radiation(0)[i*w.size+j]
			x += d[i] * d[j] * w.reactance(0)[i*w.size+j]
		}
	}
	if !scalar.EqualWithinAbs(r, 73.1, 0.05) || !scalar.EqualWithinAbs(x, -42.5, 0.1) {
		t.Errorf("impedance %.3f%+.3fi ohm, want 73.1-42.5i", r, x)
	}
}

// Handbook facts of a thin dipole without loss (Balanis; radar practice; values from memory): it
// resonates at 0.47 to 0.48 wavelengths; there its radar cross-section is about 0.86 lambda^2
// broadside and 0.15 to 0.17 lambda^2 on average over orientation.
func TestSolve_halfWaveDipole(t *testing.T) {
	const aspect = 500
	best, at := 0.0, 0.0
	for l := 0.45; l < 0.5; l += 0.001 {
		m, err := NewMatrix(2*math.Pi*l, aspect, 0)
		if err != nil {
			t.Fatal(err)
		}
		if c := m.SolveImpedance(0); c.Sca > best {
			best, at = c.Sca, l
		}
	}
	if at < 0.465 || at > 0.485 || best < 0.15 || best > 0.17 {
		t.Errorf("resonance at %.3f wavelengths with %.4f lambda^2", at, best)
	}
	w := newWire(t, 2*math.Pi*at, aspect, 16)
	even, odd := w.admittance(0, 0), w.admittance(1, 0)
	radar := func(c float64) float64 { // co-polarised, field in the plane of the axis [lambda^2]
		j0 := math.J0(w.phase / 2 / aspect * math.Sqrt(1-c*c))
		// V = even - i odd backwards and forwards: V^T Y V.
		s := quadratic(w.pattern(0, c), even) - quadratic(w.pattern(1, c), odd)
		amplitude := freeSpaceImpedance * w.phase / (4 * math.Pi) * (1 - c*c) * j0 * j0 * cmplx.Abs(s)
		return 4 * math.Pi * amplitude * amplitude * at * at
	}
	if got := radar(0); !scalar.EqualWithinRel(got, 0.86, 0.03) {
		t.Errorf("broadside radar cross-section %.3f lambda^2, want 0.86", got)
	}
	// The mean over the angle between the polarisation and the plane of the axis, cos^4, is 3/8.
	mean := quad.Fixed(radar, 0, 1, 40, quad.Legendre{}, 1)
	t.Logf("resonance at %.3f wavelengths, %.4f lambda^2; radar %.4f broadside, %.4f mean", at, best, radar(0), mean*3/8)
	if got := mean * 3 / 8; got < 0.15 || got > 0.17 {
		t.Errorf("mean radar cross-section %.4f lambda^2, want 0.15 to 0.17", got)
	}
}

// Radiation resistance of a short wire, down to radio (closed form): eta/(6 pi) (kL)^2, which is 20 (kL)^2 ohm,
// times the square of the mean current.
func TestNewMatrix_shortDipole(t *testing.T) {
	for _, phase := range []float64{1e-2, 1e-5, 1e-8} {
		w := newWire(t, phase, 1000, 8)
		v := w.pattern(0, 0)
		for i := range v {
			want := freeSpaceImpedance / (6 * math.Pi) * phase * phase * v[i] * v[i]
			if got := w.radiation(0)[i*w.size+i]; !scalar.EqualWithinRel(got, want, 1e-4) {
				t.Errorf("kL = %g: R[%d] = %g, want %g", phase, i, got, want)
			}
		}
	}
}

// Optical theorem: three cross-sections from three formulas.
func TestSolve_energy(t *testing.T) {
	for _, phase := range []float64{0.1, 0.5, 3, 12, 45, 150} {
		for _, aspect := range []float64{10, 100, 1000} {
			m, err := NewMatrix(phase, aspect, 0)
			if err != nil {
				t.Fatal(err)
			}
			for _, index := range []complex128{1.5 + 0.1i, 0.5 + 8i, 5 + 15i, 60 + 150i, 3 + 3i} {
				c := m.Solve(index)
				if d := (c.Ext - c.Abs - c.Sca) / c.Ext; math.Abs(d) > 1e-9 {
					t.Errorf("kL = %g, L/d = %g, m = %g: %+v, residual %.1e", phase, aspect, index, c, d)
				}
			}
		}
	}
}

// A single mode absorbs at most lambda^2/8 pi; at a matched load it reaches that. L < 0.6 lambda.
func TestSolve_oneModeYardstick(t *testing.T) {
	best := 0.0
	for _, l := range []float64{0.1, 0.3, 0.45, 0.48, 0.52, 0.59} {
		for _, aspect := range []float64{20, 100, 1000} {
			m, err := NewMatrix(2*math.Pi*l, aspect, 0)
			if err != nil {
				t.Fatal(err)
			}
			for load := 1.0; load < 1e5; load *= 1.3 {
				for _, x := range []float64{0, -1} {
					c := m.SolveImpedance(complex(load, x*load))
					best = math.Max(best, c.Abs*8*math.Pi)
					if c.Abs*8*math.Pi > 1+1e-3 {
						t.Errorf("L = %g lambda, L/d = %g, load %g: absorption %g of the one-mode limit", l, aspect, load, c.Abs*8*math.Pi)
					}
				}
			}
		}
	}
	if best < 0.98 {
		t.Errorf("best absorption %g of the one-mode limit; a matched load should reach it", best)
	}
}

// Four more modes take the error of a typical wire from below 5e-3 to below 3e-4, and
// the modes chosen by need leave no more than its estimate says.
func TestSolve_converges(t *testing.T) {
	var s solver
	worse := 0.0
	for _, aspect := range []float64{10, 30, 100, 300, 1000} {
		for _, phase := range []float64{0.1, 3, 10, 40, 120} {
			if phase/2/aspect > 1 {
				continue
			}
			m, err := NewMatrix(phase, aspect, int(phase/2)+56)
			if err != nil {
				t.Fatal(err)
			}
			for _, index := range []complex128{1.5 + 0.1i, 2 + 1i, 3 + 3i, 5 + 15i, 1 + 6i, 10 + 40i, 60 + 150i, 200 + 300i} {
				z := m.internal(index)
				want := s.solve(m, m.size, z)
				difference := func(modes int) float64 {
					c := s.solve(m, (modes+1)/2, z)
					return math.Max(math.Abs(c.Abs/want.Abs-1), math.Abs(c.Sca/want.Sca-1))
				}
				modes, err := need(phase, aspect, z)
				if d := difference(modes); d > 3*err {
					t.Errorf("L/d = %g, kL = %g, m = %g: error %.1e with %d modes, estimate %.1e", aspect, phase, index, d, modes, err)
				} else {
					worse = math.Max(worse, d/err)
				}
				if index == 60+150i && aspect <= 100 && phase <= 10 {
					q := int(math.Ceil(phase / 2))
					if a, b := difference(q+4), difference(q+8); a > 5e-3 || b > 3e-4 {
						t.Errorf("L/d = %g, kL = %g: error %.1e with 4 modes more than kL/2, %.1e with 8", aspect, phase, a, b)
					}
				}
			}
		}
	}
	if worse < 0.3 {
		t.Errorf("largest error over estimate is %.2f: the estimate is far too wide", worse)
	}
}

// Two ways: an independent moment method with triangles on equal segments and the exact kernel of the
// tube in space instead of wavenumber, extrapolated in the number of segments.
func TestSolve_triangles(t *testing.T) {
	for _, c := range []struct {
		phase, aspect float64
		index         complex128
	}{
		{2 * math.Pi * 9 / 30, 9 / 0.16, 21.605 + 76.264i},
		{2 * math.Pi * 9 / 10, 9 / 0.16, 25.833 + 90.72i},
		{2 * math.Pi * 9 / 5, 9 / 0.16, 3.653 + 2.942i},
		{2 * math.Pi * 5 / 20, 20, 13.131 + 53.124i},
	} {
		m, err := NewMatrix(c.phase, c.aspect, 0)
		if err != nil {
			t.Fatal(err)
		}
		got := m.Solve(c.index)
		z := m.internal(c.index)
		var abs, ext [3]float64
		for i, n := range []int{40, 80, 160} {
			abs[i], ext[i] = triangles(c.phase, c.aspect, n, z)
		}
		// Error of the order of the step, then of its square.
		extrapolate := func(v [3]float64) float64 {
			a, b := 2*v[1]-v[0], 2*v[2]-v[1]
			return b + (b-a)/3
		}
		wantAbs, wantExt := extrapolate(abs), extrapolate(ext)
		if !scalar.EqualWithinRel(got.Abs, wantAbs, 1e-3) || !scalar.EqualWithinRel(got.Ext, wantExt, 1e-3) {
			t.Errorf("%+v: absorption %g and extinction %g, triangles %g and %g (%v)", c, got.Abs, got.Ext, wantAbs, wantExt, abs)
		}
	}
}

// triangles returns absorption and extinction [lambda^2] of a wire of length 1 by Galerkin's method with n
// segments: Z_pq = -(i eta/4 pi) [k int int T_p T_q K - (1/k) int int T_p' T_q' K].
func triangles(k, aspect float64, n int, z complex128) (abs, ext float64) {
	a, step := 0.5/aspect, 1/float64(n)
	size := n - 1
	row := make([]complex128, size)
	nodes, weights := make([]float64, 8), make([]float64, 8)
	piece := func(from, to float64) { // of the kernel, u > 0; T_p T_q depends on u through B-splines
		quad.Legendre{}.FixedLocations(nodes, weights, from, to)
		for i, u := range nodes {
			kernel := tubeKernel(u, k, a) * complex(weights[i], 0)
			for _, v := range []float64{u, -u} {
				first := max(0, int(math.Floor(v/step))-2)
				for p := first; p < min(size, first+6); p++ {
					s := math.Abs(v/step - float64(p))
					cubic, second := 0.0, hat(s)*2-hat(v/step-float64(p)+1)-hat(v/step-float64(p)-1)
					switch {
					case s < 1:
						cubic = 2./3 - s*s + s*s*s/2
					case s < 2:
						cubic = (2 - s) * (2 - s) * (2 - s) / 6
					}
					row[p] += complex(0, -freeSpaceImpedance/(4*math.Pi)*(k*cubic*step-second/(k*step))) * kernel
				}
			}
		}
	}
	piece(0, a/16384)
	from := a / 16384
	for s := range n + 2 {
		edge := float64(s+1) * step
		for from < edge*(1-1e-12) {
			to := math.Min(edge, 2*from)
			piece(from, to)
			from = to
		}
	}
	y := make([]complex128, size*size)
	r := make([]float64, size*size)
	for i := range size {
		for j := range size {
			d := i - j
			if d < 0 {
				d = -d
			}
			y[i*size+j] = row[d]
			r[i*size+j] = real(row[d])
			switch d {
			case 0:
				y[i*size+j] += z * complex(2*step/3, 0)
			case 1:
				y[i*size+j] += z * complex(step/6, 0)
			}
		}
	}
	invert(y, make([]complex128, size), size)
	ry := make([]complex128, size*size)
	multiply(ry, r, size, y, size)
	for i := range size {
		ext += real(ry[i*size+i])
		for j := range size {
			gy := y[j*size+i] * complex(2*step/3, 0) // (G Y)_ji
			if j > 0 {
				gy += y[(j-1)*size+i] * complex(step/6, 0)
			}
			if j < size-1 {
				gy += y[(j+1)*size+i] * complex(step/6, 0)
			}
			abs += real(cmplx.Conj(ry[i*size+j]) * gy)
		}
	}
	return abs * real(z) / (2 * math.Pi), ext / (2 * math.Pi)
}

func hat(s float64) float64 { return math.Max(0, 1-math.Abs(s)) }

// tubeKernel returns the mean of exp(ikR)/R around the tube; its static part is a complete elliptic integral.
func tubeKernel(u, k, a float64) complex128 {
	far := u*u + 4*a*a
	sum := complex(2/(math.Pi*math.Sqrt(far))*mathext.CompleteK(4*a*a/far), 0)
	const points = 24
	for i := range points {
		s := math.Sin(math.Pi * (float64(i) + 0.5) / (2 * points))
		r := math.Sqrt(u*u + 4*a*a*s*s)
		sin, cos := math.Sincos(k * r / 2)
		sum += complex(-2*sin*sin/r, 2*sin*cos/r) / points // (exp(ikR) - 1)/R
	}
	return sum
}

func TestNewMatrix_refuses(t *testing.T) {
	for _, c := range []struct {
		phase, aspect float64
		modes         int
	}{{0, 100, 8}, {601, 100, 8}, {math.NaN(), 100, 8}, {3, 9.99, 8}, {3, math.Inf(1), 8}, {3, 100, -1}, {3, 100, 361}} {
		if _, err := NewMatrix(c.phase, c.aspect, c.modes); err == nil {
			t.Errorf("%+v accepted", c)
		}
	}
}
