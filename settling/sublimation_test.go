package settling

import (
	"math"
	"testing"

	"gonum.org/v1/gonum/floats/scalar"
)

// The triple point of water, 611.657 Pa at 273.16 K, is a published fixed value. At
// lower temperatures the slope is held against the latent heat of sublimation, 51.06
// kJ/mol near 200 K by Clausius-Clapeyron (value from memory).
func TestIceVapourPressure(t *testing.T) {
	if p := must(IceVapourPressure(273.16)); !scalar.EqualWithinRel(p, 611.657, 1e-5) {
		t.Errorf("triple point: %.7g Pa, published 611.657", p)
	}
	latent := 8.314462618 * 200 * 200 * math.Log(must(IceVapourPressure(200.5))/must(IceVapourPressure(199.5)))
	if !scalar.EqualWithinRel(latent, 51.06e3, 5e-3) {
		t.Errorf("latent heat near 200 K: %.5g J/mol", latent)
	}
	for _, temp := range []float64{math.Nextafter(MinIceTemperature, 0), math.Nextafter(MaxIceTemperature, 300), math.NaN()} {
		if _, err := IceVapourPressure(temp); err == nil {
			t.Errorf("%g K: no error", temp)
		}
	}
}

// 12 um ice spheres in dry gas: about 12 s at 210 K, by hand from 0.702 Pa and a flux
// of 0.702 (0.018015/(2 pi 8.314 x 210))^(1/2) = 9.0e-4 kg/(m2 s) against 917 x 12e-6
// kg/m2; of the order of a day at 160 K.
func TestSublimationTime(t *testing.T) {
	b := SphereOf(12e-6, 917)
	if s := must(SublimationTime(b, 210)); !scalar.EqualWithinRel(s, 12.2, 0.02) {
		t.Errorf("210 K: %.4g s, by hand 12.2", s)
	}
	if s := must(SublimationTime(b, 160)); s < day/3 || s > 3*day {
		t.Errorf("160 K: %.3g d, of the order of 1", s/day)
	}
	// A long rod shrinks by its side alone: time = rho a/j, as for a sphere of its
	// radius.
	rod := must(SublimationTime(RodOf(1e-3, 24e-6, 917), 210))
	if s := must(SublimationTime(b, 210)); !scalar.EqualWithinRel(rod, s, 1e-12) {
		t.Errorf("rod %g s, sphere of its radius %g s", rod, s)
	}
	if _, err := SublimationTime(b, 300); err == nil {
		t.Error("melting: no error")
	}
}
