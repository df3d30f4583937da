package greenhouse

import (
	"math"
	"testing"
)

// Where the diffusion exponent k meets 1/mu the particular solution of the two-stream
// equations has a removable pole: the fluxes on both sides of it and at it must join.
func TestSunlightIsContinuousAcrossThePole(t *testing.T) {
	const w, g, ground, tau = 0.4, 0.3, 0.23, 0.7
	gamma1 := (7 - w*(4+3*g)) / 4
	gamma2 := -(1 - w*(4-3*g)) / 4
	at := 1 / math.Sqrt((gamma1-gamma2)*(gamma1+gamma2)) // the direction of the Sun at the pole
	if at > 1 {
		t.Fatalf("no pole in the sky for these optics: mu = %g", at)
	}
	fluxes := func(off float64) [4]float64 {
		b := eddington(tau, w, g, ground, at*(1+off))
		return [4]float64{b.netTop, b.netGround, b.netMean, b.down}
	}
	// Fluxes change about as fast as mu itself, so neighbours must agree to a few times
	// what lies between them.
	offsets := []float64{-1e-3, -1e-4, -1e-5, -2e-6, -1e-6, -1e-7, 0, 1e-7, 9e-7, 1.1e-6, 1e-5, 1e-4, 1e-3}
	for j := 1; j < len(offsets); j++ {
		a, b := fluxes(offsets[j-1]), fluxes(offsets[j])
		step := offsets[j] - offsets[j-1] + 2*pole
		for i := range a {
			if d := math.Abs(a[i] - b[i]); d > 5*step {
				t.Errorf("flux %d jumps by %.2g between %g and %g of mu from the pole", i, d, offsets[j-1], offsets[j])
			}
		}
	}
}
