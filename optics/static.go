package optics

import (
	"math"

	"hazewright/optics/rod"
)

// polarizability returns the orientation mean of the static polarizability of one particle [m3].
func (p Particle) polarizability(size float64) (float64, error) {
	sum := 0.0
	for _, pair := range p.pairings() {
		if p.Shape != Rod {
			f := 0.0
			a := size - p.Oxide
			if inside := size - p.Wall; p.Shape == Shell && inside > 0 {
				f = math.Pow(inside/a, 3)
			}
			sum += pair.weight * 4 * math.Pi * a * a * a * layered(pair.epsilonCore, pair.epsilon, f)
			continue
		}
		core := p.Diameter - 2*p.Oxide
		length := math.Max(size, rod.MinAspect*core)
		axial, transverse, err := rod.Polarizability(length, core, complex(pair.epsilon, 0))
		if err != nil {
			return 0, err
		}
		sum += pair.weight * real(axial+2*transverse) / 3 * size / length
	}
	return sum, nil
}

// layered returns the static polarizability of a sphere with a concentric core over 4 pi a^3 [1],
// permittivities of core and wall, f the core's share of the volume ([BohrenHuffman1983], eq. 5.36):
//
//	[(e2 - 1)(e1 + 2 e2) + f (e1 - e2)(1 + 2 e2)] / [(e2 + 2)(e1 + 2 e2) + f (2 e2 - 2)(e1 - e2)]
//
// 1 for a conducting wall, which screens what is inside. +Inf stands for a conductor.
func layered(core, wall, f float64) float64 {
	if math.IsInf(wall, 1) {
		return 1
	}
	if math.IsInf(core, 1) {
		return (wall - 1 + f*(1+2*wall)) / (wall + 2 + f*(2*wall-2))
	}
	outer, step := core+2*wall, core-wall
	return ((wall-1)*outer + f*step*(1+2*wall)) / ((wall+2)*outer + f*(2*wall-2)*step)
}
