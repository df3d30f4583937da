package rod

import "math"

// Axial holds the cross-sections of the axial current of one wire, averaged over random
// orientation and over polarisation, in units of the square of the wavelength [1]: extinction,
// absorption and scattering, each from its own formula, and GSca, scattering weighted
// with the cosine of its angle.
type Axial struct{ Ext, Abs, Sca, GSca float64 }

// Plus returns the sum of two.
func (a Axial) Plus(b Axial) Axial {
	return Axial{a.Ext + b.Ext, a.Abs + b.Abs, a.Sca + b.Sca, a.GSca + b.GSca}
}

// Times returns every entry multiplied by f.
func (a Axial) Times(f float64) Axial {
	return Axial{a.Ext * f, a.Abs * f, a.Sca * f, a.GSca * f}
}

// Solve returns the cross-sections for a wire of refractive index n + ik (see
// [InternalImpedance]) with all modes of the matrix. Ext = Abs + Sca up to rounding: below
// 1e-9 of Ext for kL above 0.1. That sum checks the arithmetic, not the number of modes.
func (m *Matrix) Solve(index complex128) Axial {
	return m.SolveImpedance(m.internal(index))
}

// internal returns the internal impedance times the length [ohm].
func (m *Matrix) internal(index complex128) complex128 {
	length := m.phase / (2 * math.Pi) // in wavelengths
	return InternalImpedance(1, length/(2*m.aspect), index) * complex(length, 0)
}

// SolveImpedance returns the cross-sections for an internal impedance times length z [ohm];
// 0 is a perfect conductor. With Z = R + iX + z, Y = 1/Z and the averages as traces,
//
//	C_ext = (lambda^2/2 pi) Re tr(R Y),   C_abs = (lambda^2/2 pi) Re(z) tr(R Y* Y)
//	C_sca = (lambda^2/2 pi) tr(R Y* R Y),   g C_sca = (lambda^2/2 pi) tr(R1 Y R1 Y*)
//
// where R1 is R with the cosine of direction as weight, which couples even with odd modes.
// Own derivation: R is the mean over directions of what each mode picks up from a wave
// and, by reciprocity, of what it sends out.
func (m *Matrix) SolveImpedance(z complex128) Axial {
	return new(solver).solve(m, m.size, z)
}

// solver holds the memory of one solution after another.
type solver struct {
	admittance [2][]complex128
	ry, column []complex128
	trace      complex128 // of R Y
}

// solve uses the first n modes of each parity.
func (s *solver) solve(m *Matrix, n int, z complex128) Axial {
	if cap(s.ry) < n*n {
		s.ry, s.column = make([]complex128, n*n), make([]complex128, n)
		s.admittance[0], s.admittance[1] = make([]complex128, n*n), make([]complex128, n*n)
	}
	ry := s.ry[:n*n]
	s.trace = 0
	var out Axial
	for p := range 2 {
		y := s.admittance[p][:n*n]
		s.admittance[p] = y
		r, x := m.radiation(p), m.reactance(p)
		for i := range n {
			ri, xi, yi := r[i*m.size:][:i+1], x[i*m.size:][:i+1], y[i*n:][:i+1]
			for j, v := range ri {
				yi[j] = complex(v, xi[j])
			}
			yi[i] += z
		}
		invert(y, s.column[:n], n)
		multiply(ry, r, m.size, y, n)
		abs := 0.0
		for i := range n {
			s.trace += ry[i*n+i]
			for j := range n {
				a, b, c := ry[i*n+j], ry[j*n+i], y[i*n+j]
				out.Sca += real(a)*real(b) + imag(a)*imag(b)
				abs += real(a)*real(c) + imag(a)*imag(c)
			}
		}
		out.Abs += real(z) * abs
	}
	out.Ext = real(s.trace)
	// tr(R1 Y R1 Y*) = 2 Re tr(T Y_odd T^T Y_even*), R1 = [[0, -iT], [iT^T, 0]]
	transfer := m.transfer()
	multiply(ry, transfer, m.size, s.admittance[1], n)
	even := s.admittance[0]
	for i := range n {
		for j := range n { // column j of T^T Y_even*
			re, im := real(even[j*n+i]), imag(even[j*n+i])
			row := transfer[j*m.size:][:n]
			var sumRe, sumIm float64
			for l, v := range ry[i*n:][:n] {
				sumRe += real(v) * row[l]
				sumIm += imag(v) * row[l]
			}
			out.GSca += 2 * (sumRe*re + sumIm*im)
		}
	}
	return out.Times(1 / (2 * math.Pi))
}

// multiply sets t to the leading n by n part of a, which has a stride, times y, symmetric. Two
// rows at a time.
func multiply(t []complex128, a []float64, stride int, y []complex128, n int) {
	for i := 0; i < n; i += 2 {
		second := min(i+1, n-1) // the last row of an odd number twice
		a0, a1 := a[i*stride:][:n], a[second*stride:][:n]
		t0, t1 := t[i*n:][:n], t[second*n:][:n]
		for j := range t0 {
			yj := y[j*n:][:n]
			var re0, im0, re1, im1 float64
			for l, v := range yj {
				re, im := real(v), imag(v)
				re0 += a0[l] * re
				im0 += a0[l] * im
				re1 += a1[l] * re
				im1 += a1[l] * im
			}
			t0[j], t1[j] = complex(re0, im0), complex(re1, im1)
		}
	}
}

// invert replaces a symmetric matrix, of which the lower half is given, by its inverse (the sweep
// operator on the diagonal); scratch holds n numbers. The real part of an impedance
// matrix is positive definite, so no pivot vanishes.
func invert(m, scratch []complex128, n int) {
	for k := range n {
		pivot := 1 / m[k*n+k]
		column := scratch[:n]
		copy(column, m[k*n:k*n+k])
		column[k] = 0 // leaves row and column k as they are
		for i := k + 1; i < n; i++ {
			column[i] = m[i*n+k]
		}
		for i := range n {
			row := m[i*n : i*n+i+1]
			f := column[i] * pivot
			for j, v := range column[:i+1] {
				row[j] -= f * v
			}
			if i > k {
				row[k] = f
			}
		}
		for j, v := range column[:k] {
			m[k*n+j] = v * pivot
		}
		m[k*n+k] = -pivot
	}
	for i := range n {
		for j := range i + 1 {
			v := -m[i*n+j]
			m[i*n+j], m[j*n+i] = v, v
		}
	}
}
