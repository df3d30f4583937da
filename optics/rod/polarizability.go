package rod

import (
	"fmt"
	"math"
	"math/cmplx"
)

// Polarizability returns the static polarizability of a rod [m3], along and across its
// axis, defined by p = eps0 alpha E, for a relative permittivity eps; cmplx.Inf() or any
// infinite eps stands for a conductor. The mean over orientations is (axial + 2
// transverse)/3. Axial: the antenna modes of [Section.Rod] in the limit of a long wave,
//
//	alpha = (i eta/k) V^T Z^-1 V,   V_n = int sin(n pi z/L) dz
//
// transverse: the infinite cylinder, 2 V (eps - 1)/(eps + 1). Axial within about 2 to 3 %
// of the exact value, as [Section.Rod] in that limit; transverse leaves out the ends, a
// share d/L. Errors: length or diameter not positive and finite, aspect ratio below [MinAspect].
func Polarizability(length, diameter float64, eps complex128) (axial, transverse complex128, err error) {
	if !(length > 0) || !(diameter > 0) || math.IsInf(length, 0) || length < MinAspect*diameter {
		return 0, 0, fmt.Errorf("rod: length %g m and diameter %g m must be positive, length at least %d diameters", length, diameter, MinAspect)
	}
	k := 1e-3 / length // long wave; the error is of order (kL)^2
	w := newAntenna(k, length+endLength*diameter, diameter/2)
	area := math.Pi * diameter * diameter / 4
	var internal complex128 // reactance per length, Z/i
	transverse = complex(2*area*length, 0)
	if !cmplx.IsInf(eps) {
		internal = complex(freeSpaceImpedance/(k*area), 0) / (eps - 1)
		transverse *= (eps - 1) / (eps + 1)
	}
	var y block
	for i := range w.size {
		for j := range w.size {
			y[i][j] = complex(w.reactance[0][i][j], 0)
		}
		y[i][i] += internal * complex(w.length/2, 0)
	}
	invert(&y, w.size)
	for i := range w.size {
		for j := range w.size {
			axial += complex(4/(w.wavenumber(0, i)*w.wavenumber(0, j)), 0) * y[i][j]
		}
	}
	return axial * complex(freeSpaceImpedance/k, 0), transverse, nil
}
