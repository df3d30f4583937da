package greenhouse

import (
	"fmt"
	"math"
)

// sunTemperature is the effective temperature of the Sun [K] [PrsaIAU2016]; the spectrum is taken as black.
const sunTemperature = 5772

// sunlight is the solar half of the estimate: dust and aerosol as one well-mixed layer over a grey ground.
type sunlight struct {
	flux   float64   // at normal incidence [W/m2]
	share  []float64 // of the flux in each band
	dust   Band      // optical depths of natural dust
	ground float64   // albedo of the ground
}

// sunFluxes is the planet-mean sunlight [W/m2] for one amount of aerosol.
type sunFluxes struct {
	top, ground, mean float64 // net downward at the top, at the ground, averaged over the depth of the layer
	down, direct      float64 // downward at the ground, all of it and unscattered
}

// newSunlight tunes the albedo of the ground so that ground and dust together have the planet's Bond albedo. CO2's own
// absorption of sunlight (about 0.5% of it) is left to the ground.
func newSunlight(p Planet) (sunlight, error) {
	edges := SolarEdges()
	dust, err := dustBand(edges)
	if err != nil {
		return sunlight{}, err
	}
	for _, v := range [][]float64{dust.Ext, dust.Sca, dust.GSca} {
		for b := range v {
			v[b] *= p.DustOpticalDepth
		}
	}
	share := Planck(edges, sunTemperature)
	var sum float64
	for _, v := range share {
		sum += v
	}
	for b := range share {
		share[b] /= sum
	}
	s := sunlight{flux: p.Sunlight, share: share, dust: dust}
	planetary := func(ground float64) float64 {
		s.ground = ground
		return 1 - 4*s.fluxes(s.dust, 0).top/s.flux
	}
	low, high := 0.0, 1.0
	if dark, bright := planetary(low), planetary(high); p.BondAlbedo < dark || p.BondAlbedo > bright {
		return sunlight{}, fmt.Errorf("bond albedo %.3g cannot be met with dust optical depth %.3g: a black ground gives %.3g, a white one %.3g", p.BondAlbedo, p.DustOpticalDepth, dark, bright)
	}
	for range 60 { // the planetary albedo rises with that of the ground; 2^-60 is below rounding
		mid := (low + high) / 2
		if planetary(mid) < p.BondAlbedo {
			low = mid
		} else {
			high = mid
		}
	}
	s.ground = (low + high) / 2
	return s, nil
}

// fluxes returns the planet-mean fluxes with the burden [kg/m2] of an aerosol beside the dust. Averages over the day side
// with four Gauss points in the cosine of the zenith angle, which is exact for a sphere in the mean of mu.
func (s sunlight) fluxes(a Band, burden float64) sunFluxes {
	var out sunFluxes
	for b, share := range s.share {
		ext := s.dust.Ext[b] + burden*a.Ext[b]
		tau, w, g := deltaScale(ext, s.dust.Sca[b]+burden*a.Sca[b], s.dust.GSca[b]+burden*a.GSca[b])
		for i, mu := range gauss4.x {
			weight := s.flux / 2 * share * gauss4.w[i]
			f := eddington(tau, w, g, s.ground, mu)
			out.top += weight * f.netTop
			out.ground += weight * f.netGround
			out.mean += weight * f.netMean
			out.down += weight * f.down
			out.direct += weight * mu * math.Exp(-ext/mu)
		}
	}
	return out
}
