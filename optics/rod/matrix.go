package rod

import (
	"fmt"
	"math"

	"gonum.org/v1/gonum/integrate/quad"
)

// Limits of [NewMatrix].
const (
	MinPhase = 1e-9 // k times length
	MaxPhase = 600
	MaxModes = 360
)

// Matrix is the axial current problem of one straight wire: what its current does to the
// field outside. It depends on the wavenumber times the length and on length over
// diameter only, so it is built once and solved for any number of materials
// ([Matrix.Solve]). It does not change once made and is safe for several goroutines.
//
// The current is a sum over n = 0..modes-1 of
//
//	f_n = sqrt(1 - u^2) U_n(u),   u = 2z/L
//
// (Chebyshev polynomials of the second kind), which vanishes at the ends with the right square
// root and converges fast. Even and odd n do not couple. Kept are those combinations of the f_n
// that are orthonormal over the length, so that an internal impedance only adds to the diagonal.
type Matrix struct {
	phase, aspect float64 // k times length, length over diameter, of the wire solved for
	size          int     // modes of each parity

	// data holds, size*size each: radiation (resistive part) [ohm] of even and odd modes, reactance
	// of even and odd modes, and transfer, the radiation weighted with the
	// cosine of direction, even rows and odd columns.
	data []float64
}

func (m *Matrix) radiation(parity int) []float64 { return m.part(parity) }
func (m *Matrix) reactance(parity int) []float64 { return m.part(2 + parity) }
func (m *Matrix) transfer() []float64            { return m.part(4) }

func (m *Matrix) part(i int) []float64 {
	n := m.size * m.size
	return m.data[i*n : (i+1)*n]
}

// NewMatrix returns the external impedance of an open tube of phase kL [1], k = 2 pi/lambda,
// and aspect L/d [1], with a number of modes (0 chooses enough for a good conductor; faint and very thin wires need more). For a
// rod with flat ends pass the longer L of [FlatEnds]. With the impedance per length zeta of a
// current of axial wavenumber h on a tube of radius a,
//
//	zeta(h) = (eta kappa^2/4k) J0(kappa a) H0(kappa a),   kappa^2 = k^2 - h^2,   h < k
//	zeta(h) = (i eta g^2/(2 pi k)) I0(ga) K0(ga),   g^2 = h^2 - k^2,   h > k
//	Z_mn = (pi L/2) (m+1)(n+1)(-1)^((n-m)/2) int_0^inf zeta(2q/L) J_m+1(q) J_n+1(q) dq/q^2
//
// for m + n even. Below q0 = kL/2 the substitution q = q0 sin t, above it q = q0 + s^2 remove
// the square root at the light line. Far above it, where the product of Bessel
// functions oscillates fast, it fades into its mean (1/2)(J J + Y Y), which is smooth; the
// rest beyond 50 L/d is taken in closed form.
//
// The integrals hold to 1e-6. Own derivation: Galerkin's method on the equation of the thin
// tube with its exact kernel ([Balanis2005], section 8.3, in the spectral domain). Errors:
// kL outside [MinPhase] to [MaxPhase], aspect below [MinAspect] or above [MaxAspect], modes negative
// or above [MaxModes].
func NewMatrix(phase, aspect float64, modes int) (*Matrix, error) {
	if !(phase >= MinPhase && phase <= MaxPhase) {
		return nil, fmt.Errorf("rod: 2 pi length/wavelength %g is outside %g to %d", phase, MinPhase, MaxPhase)
	}
	if !(aspect >= MinAspect && aspect <= MaxAspect) {
		return nil, fmt.Errorf("rod: length over diameter %g is outside %d to %g", aspect, MinAspect, float64(MaxAspect))
	}
	if modes < 0 || modes > MaxModes {
		return nil, fmt.Errorf("rod: %d modes; want 0 to %d", modes, MaxModes)
	}
	if modes == 0 {
		modes, _ = need(phase, aspect, 0)
	}
	return new(builder).build(phase, aspect, (modes+1)/2), nil
}

// builder holds what building matrices one after another can reuse.
type builder struct {
	bessel         []float64
	nodes, weights []float64
	even, odd      [batch][]float64 // modes at the wavenumbers waiting to be added
	weight         [batch]float64
	waiting        int
	factors        map[int][2][]float64 // by size, see orthonormal
	scratch        []float64
}

// batch is the number of wavenumbers added to the reactance at a time.
const batch = 4

// rule returns a Gauss-Legendre rule of at least n points on [from, to], valid until the next call.
func (b *builder) rule(n int, from, to float64) (nodes, weights []float64) {
	if n == 26 {
		n = 27 // the library's rule of 26 points is wrong: its weights do not match its nodes
	}
	if cap(b.nodes) < n {
		b.nodes, b.weights = make([]float64, 2*n), make([]float64, 2*n)
	}
	nodes, weights = b.nodes[:n], b.weights[:n]
	quad.Legendre{}.FixedLocations(nodes, weights, from, to)
	return nodes, weights
}

// build returns the matrix with size modes of each parity.
func (b *builder) build(phase, aspect float64, size int) *Matrix {
	m := &Matrix{phase: phase, aspect: aspect, size: size, data: make([]float64, 5*size*size)}
	orders := 2*size + 1
	if cap(b.bessel) < orders {
		b.bessel = make([]float64, orders)
		for i := range batch {
			b.even[i], b.odd[i] = make([]float64, size), make([]float64, size)
		}
	}
	b.bessel = b.bessel[:orders]
	for i := range batch {
		b.even[i], b.odd[i] = b.even[i][:size], b.odd[i][:size]
	}

	q0, thin := phase/2, 1/aspect // thin = d/L: radius in the unit of 1/q
	b.below(m, q0, thin)
	b.above(m, q0, thin)
	for p := range 4 {
		mirror(m.part(p), size)
	}
	b.orthonormal(m)
	return m
}

// below adds the waves that leave, |h| < k.
func (b *builder) below(m *Matrix, q0, thin float64) {
	nodes, weights := b.rule(12+int(math.Ceil(0.8*q0)), 0, math.Pi/2)
	for i, t := range nodes {
		sin, cos := math.Sincos(t)
		q, x := q0*sin, q0*cos*thin
		besselJ(b.bessel, q)
		even, odd := b.even[0], b.odd[0]
		fillModes(even, odd, b.bessel, q)
		j0, y0 := math.J0(x), math.Y0(x)
		w := weights[i] * freeSpaceImpedance * math.Pi / 4 * q0 * q0 * cos * cos * cos * j0
		addTwo(m.radiation(0), m.reactance(0), even, w*j0, w*y0)
		addTwo(m.radiation(1), m.reactance(1), odd, w*j0, w*y0)
		addCross(m.transfer(), even, odd, w*j0*sin)
	}
}

// above adds the waves bound to the wire, |h| > k.
func (b *builder) above(m *Matrix, q0, thin float64) {
	const sigma = 4.5 // width of the fade from J J to its mean
	modes := float64(2 * m.size)
	fade := math.Max(q0, 1.7*modes) + 8 // its middle
	end := fade + 3.4*sigma
	scale := freeSpaceImpedance / (2 * q0)

	const first = 3 // length of the piece next to the light line
	nodes, weights := b.rule(12, 0, math.Sqrt(first))
	for i, s := range nodes {
		q := q0 + s*s
		g2 := s * s * (2*q0 + s*s)
		b.addReactance(m, q, weights[i]*2*s*scale*g2*besselI0K0(math.Sqrt(g2)*thin))
	}
	from := q0 + first
	nodes, weights = b.rule(12+int(math.Ceil(0.7*(end-from))), from, end)
	for i, q := range nodes {
		g2 := (q - q0) * (q + q0)
		w := weights[i] * scale * g2 * besselI0K0(math.Sqrt(g2)*thin)
		mean := math.Erfc((fade-q)/sigma) / 4 // half of the share that is a mean
		b.addReactance(m, q, w*(1-mean))
		if mean > 1e-7 {
			b.addSecond(m, q, w*mean)
		}
	}
	last := math.Max(50/thin, 50*end)
	panels := int(math.Ceil(math.Log2(last / end)))
	ratio := math.Pow(last/end, 1/float64(panels))
	for from := end; panels > 0; panels-- {
		nodes, weights = b.rule(6, from, from*ratio)
		from *= ratio
		for i, q := range nodes {
			g2 := (q - q0) * (q + q0)
			w := weights[i] * scale * g2 * besselI0K0(math.Sqrt(g2)*thin) / 2
			b.addReactance(m, q, w)
			b.addSecond(m, q, w)
		}
	}
	b.flush(m)
	beyond(m, q0, thin, last)
}

// beyond adds to the reactance what lies above a wavenumber far beyond all others, from the first
// two terms of g^2 I0 K0 and of the mean of the product of Bessel functions
// ([AbramowitzStegun1964], 9.2.28, 9.2.29 and 9.7.5), orders mu = m + 1 and nu = n + 1:
//
//	g^2 I0(ga) K0(ga) = (h/2a) (1 - k^2/2h^2 + 1/(8 h^2 a^2)),   h = 2q/L
//	(1/2)(J J + Y Y) = +-(1/pi q) (1 + [2(mu^2 + nu^2) - 1 - (mu^2 - nu^2)^2]/8q^2)
func beyond(m *Matrix, q0, thin, last float64) {
	rest := freeSpaceImpedance / (4 * math.Pi * q0 * thin * last)
	wave := 1/(8*thin*thin) - q0*q0/2
	n := m.size
	for p := range 2 {
		x := m.reactance(p)
		for i := range n {
			for j := range i + 1 {
				mu, nu := float64(2*i+p+1), float64(2*j+p+1)
				d := mu*mu - nu*nu
				x[i*n+j] += rest * mu * nu * (1 + (wave+(2*(mu*mu+nu*nu)-1-d*d)/8)/(3*last*last))
			}
		}
	}
}

// addReactance adds the product of the modes at a wavenumber.
func (b *builder) addReactance(m *Matrix, q, weight float64) {
	besselJ(b.bessel, q)
	even, odd := b.next(m, weight)
	fillModes(even, odd, b.bessel, q)
}

// addSecond is addReactance with Y in place of J.
func (b *builder) addSecond(m *Matrix, q, weight float64) {
	besselY(b.bessel, q)
	even, odd := b.next(m, weight)
	fillModes(even, odd, b.bessel, q)
}

// next returns where to put the modes of the next wavenumber.
func (b *builder) next(m *Matrix, weight float64) (even, odd []float64) {
	if b.waiting == batch {
		b.flush(m)
	}
	i := b.waiting
	b.weight[i] = weight
	b.waiting++
	return b.even[i], b.odd[i]
}

// flush adds the wavenumbers that wait to the lower half of the reactance.
func (b *builder) flush(m *Matrix) {
	for i := b.waiting; i < batch; i++ {
		b.weight[i] = 0
	}
	if b.waiting > 0 {
		addBatch(m.reactance(0), &b.even, &b.weight)
		addBatch(m.reactance(1), &b.odd, &b.weight)
	}
	b.waiting = 0
}

func addBatch(a []float64, v *[batch][]float64, w *[batch]float64) {
	n := len(v[0])
	for i := range n {
		row := a[i*n : i*n+i+1]
		k := len(row)
		v0, v1, v2, v3 := v[0][:k], v[1][:k], v[2][:k], v[3][:k]
		f0, f1, f2, f3 := w[0]*v0[i], w[1]*v1[i], w[2]*v2[i], w[3]*v3[i]
		for j := range row {
			row[j] += f0*v0[j] + f1*v1[j] + (f2*v2[j] + f3*v3[j])
		}
	}
}

// fillModes sets even and odd to (n+1) J_n+1(q)/q with the sign (-1)^floor(n/2).
func fillModes(even, odd, bessel []float64, q float64) {
	sign := 1 / q
	for i := range even {
		n := 2 * i
		even[i] = sign * float64(n+1) * bessel[n+1]
		odd[i] = sign * float64(n+2) * bessel[n+2]
		sign = -sign
	}
}

// addPair adds w v v^T to the lower half of a.
func addPair(a, v []float64, w float64) {
	n := len(v)
	for i, f := range v {
		f *= w
		row := a[i*n : i*n+i+1]
		for j := range row {
			row[j] += f * v[j]
		}
	}
}

// addTwo adds w v v^T to the lower half of a, and u v v^T to that of b.
func addTwo(a, b, v []float64, w, u float64) {
	n := len(v)
	for i, f := range v {
		g := f * u
		f *= w
		row, other := a[i*n:i*n+i+1], b[i*n:i*n+i+1]
		for j, x := range v[:i+1] {
			row[j] += f * x
			other[j] += g * x
		}
	}
}

// addCross adds w u v^T to a.
func addCross(a, u, v []float64, w float64) {
	n := len(v)
	for i, f := range u {
		f *= w
		row := a[i*n : i*n+n]
		for j := range row {
			row[j] += f * v[j]
		}
	}
}

// mirror copies the lower half of a to the upper.
func mirror(a []float64, n int) {
	for i := range n {
		for j := range i {
			a[j*n+i] = a[i*n+j]
		}
	}
}

// orthonormal passes from the modes f_n to those combinations of them that are orthonormal over
// the length (so that the internal impedance is a multiple of the identity) by the Cholesky factor of
// their overlaps,
//
//	(1/L) int f_m f_n dz = (1/4) [2/(1 - (m-n)^2) - 2/(1 - (m+n+2)^2)]
//
// The first few combinations are made of the first few f_n.
func (b *builder) orthonormal(m *Matrix) {
	n := m.size
	factor, held := b.factors[n]
	if !held {
		for p := range factor {
			g := make([]float64, n*n)
			for i := range n {
				for j := range n {
					minus, plus := 2*(i-j), 2*(i+j+1+p)
					g[i*n+j] = 0.5/float64(1-minus*minus) - 0.5/float64(1-plus*plus)
				}
			}
			inverseFactor(g, n)
			factor[p] = g
		}
		if b.factors == nil {
			b.factors = make(map[int][2][]float64)
		}
		b.factors[n] = factor
	}
	if cap(b.scratch) < n*n {
		b.scratch = make([]float64, n*n)
	}
	scratch := b.scratch[:n*n]
	for p := range 2 {
		for _, a := range [][]float64{m.radiation(p), m.reactance(p)} {
			multiplyLeft(scratch, factor[p], a, n)
			multiplyRight(a, scratch, factor[p], n, true)
			mirror(a, n)
		}
	}
	multiplyLeft(scratch, factor[0], m.transfer(), n)
	multiplyRight(m.transfer(), scratch, factor[1], n, false)
}

// inverseFactor replaces a symmetric positive matrix by the inverse of its lower Cholesky factor.
func inverseFactor(a []float64, n int) {
	for i := range n {
		for j := range i + 1 {
			s := a[i*n+j]
			for l := range j {
				s -= a[i*n+l] * a[j*n+l]
			}
			if i == j {
				a[i*n+i] = math.Sqrt(s)
			} else {
				a[i*n+j] = s / a[j*n+j]
			}
		}
	}
	for i := range n {
		d := 1 / a[i*n+i]
		for j := range i {
			s := 0.0
			for l := j; l < i; l++ {
				s -= a[i*n+l] * a[l*n+j]
			}
			a[i*n+j] = s * d
		}
		a[i*n+i] = d
	}
}

// multiplyLeft sets out to l a, l lower triangular.
func multiplyLeft(out, l, a []float64, n int) {
	for i := range n {
		row := out[i*n : i*n+n]
		clear(row)
		for k, f := range l[i*n : i*n+i+1] {
			for j, v := range a[k*n : k*n+n] {
				row[j] += f * v
			}
		}
	}
}

// multiplyRight sets out, or only its lower half, to a r^T, r lower triangular.
func multiplyRight(out, a, r []float64, n int, lower bool) {
	for i := range n {
		row := a[i*n : i*n+n]
		end := n
		if lower {
			end = i + 1
		}
		for j := range end {
			s := 0.0
			for k, f := range r[j*n : j*n+j+1] {
				s += f * row[k]
			}
			out[i*n+j] = s
		}
	}
}
