package optics

import (
	"fmt"
	"math"

	"hazewright/optics/internal/planck"
)

// BandOptics holds, for each band between neighbouring Edges [m], the mean extinction,
// scattering, and scattering weighted with the cosine of its angle, per mass [m2/kg].
type BandOptics struct {
	Edges          []float64
	Ext, Sca, GSca []float64
}

// bandTemperature is the temperature [K] of the blackbody that weighs wavelengths inside a band
// beyond thermalFrom; sunlight weighs the shorter ones.
const bandTemperature = 210

// Bands returns band means between wavelength edges [m] in rising order. Inside a band the
// wavelengths are Gauss nodes in ln(wavelength), three, or more in a band wider than a factor
// 1.3, weighted with blackbody emission: 5772 K for a band that starts below 4 um, 210 K for
// the others. Errors: fewer than two edges, edges not rising or not positive, and those of
// [Population.At].
func Bands(p *Population, edges []float64) (BandOptics, error) {
	if len(edges) < 2 {
		return BandOptics{}, fmt.Errorf("%d band edges; at least 2 are needed", len(edges))
	}
	n := len(edges) - 1
	out := BandOptics{
		Edges: append([]float64(nil), edges...),
		Ext:   make([]float64, n), Sca: make([]float64, n), GSca: make([]float64, n),
	}
	for b := range n {
		lo, hi := edges[b], edges[b+1]
		if !(lo > 0 && hi > lo) || math.IsInf(hi, 0) {
			return BandOptics{}, fmt.Errorf("band edges %g um and %g um: want positive and rising", lo*1e6, hi*1e6)
		}
		temperature := float64(bandTemperature)
		if lo < thermalFrom*(1-1e-9) {
			temperature = SolarTemperature
		}
		nodes, weights := bandRule(hi / lo)
		var sum Means
		total := 0.0
		for i, u := range nodes {
			l := lo * math.Pow(hi/lo, u)
			w := weights[i] * planck.Density(l, temperature) * l
			k, err := p.Kappa(l)
			if err != nil {
				return BandOptics{}, err
			}
			sum.add(k, w)
			total += w
		}
		m := sum.over(total)
		out.Ext[b], out.Sca[b], out.GSca[b] = m.Ext, m.Sca, m.GSca
	}
	return out, nil
}

// Gauss-Legendre rules on (0, 1).
var (
	gauss3        = [...]float64{0.1127016653792583, 0.5, 0.8872983346207417}
	gaussWeights3 = [...]float64{5. / 18, 8. / 18, 5. / 18}
	gauss6        = [...]float64{0.033765242898423975, 0.16939530676686776, 0.38069040695840156, 0.6193095930415985, 0.8306046932331322, 0.966234757101576}
	gaussWeights6 = [...]float64{0.08566224618958517, 0.1803807865240693, 0.23395696728634552, 0.23395696728634552, 0.1803807865240693, 0.08566224618958517}
)

// bandRule returns the rule for a band whose edges have the given ratio.
func bandRule(ratio float64) (nodes, weights []float64) {
	if ratio > 1.3 {
		return gauss6[:], gaussWeights6[:]
	}
	return gauss3[:], gaussWeights3[:]
}
