package rod

import (
	"math"
	"math/cmplx"
)

// maxExtraModes is the largest number of modes beyond kL/2.
const maxExtraModes = 48

// need returns how many modes a wire of impedance times length z [ohm] needs, and the relative
// error they leave in absorption and scattering. The current has a wave of axial
// wavenumber k, and near the ends one of
//
//	h = sqrt(2 pi k |z/L|/(eta ln)),   ln = ln(2L/(d(1 + hL/2))) or 1
//
// (the wire as a transmission line), which a faint or thin wire squeezes into a short piece. With
// p = hL/2 and q = kL/2,
//
//	modes = q + 6 + 3.3 log10(L/10d) + 2 sqrt(p^2/(p + q))
//
// and p here stands for p^2/(p + q) in the error 1e-4 + 2e-5 p, at most 5e-3. Fitted to the
// solver itself with many more modes, for L/d from 10 to 1000, kL from 0.1 to 120 and
// indices from 1.5 + 0.1i to 200 + 300i, where no error is larger than three times that.
func need(phase, aspect float64, z complex128) (modes int, err float64) {
	q := phase / 2
	steep := 2 * math.Pi / freeSpaceImpedance * phase * cmplx.Abs(z)
	p, ln := 0.0, 1.0
	for range 3 {
		p = math.Sqrt(steep/ln) / 2
		ln = math.Max(1, math.Log(2*aspect/(1+p)))
	}
	p *= p / (p + q)
	extra := 6 + 3.3*math.Log10(aspect/10) + 2*math.Sqrt(p)
	err = 1e-4 + 2e-5*p
	return int(math.Ceil(q + math.Min(extra, maxExtraModes))), math.Min(err, 5e-3)
}
