package optics

import (
	"math"
	"sort"
	"testing"
)

// The stated error of a size average is about the size of the true one, against the same
// average with many more size classes: at 95 % of wavelengths the truth is within three times
// it, and it is not padded where sizes matter little.
func TestPopulation_errorOfTheSizeAverage(t *testing.T) {
	for _, c := range []struct {
		name    string
		p       Particle
		typical float64 // most that the median stated error may be
	}{
		{"iron rods", Particle{Shape: Rod, Length: 8e-6, Diameter: 80e-9, Spread: 1.2, Method: "fast", Material: mustMaterial(t, "iron")}, 0.06},
		{"aluminium rods", Particle{Shape: Rod, Length: 9e-6, Diameter: 160e-9, Spread: 1.2, Method: "fast", Material: mustMaterial(t, "aluminium")}, 0.2},
		{"ice spheres", Particle{Shape: Sphere, Radius: 5e-6, Spread: 1.2, Material: mustMaterial(t, "water-ice")}, 0.2},
	} {
		p := mustPopulation(t, c.p)
		dense, err := newPopulation(c.p, 150)
		if err != nil {
			t.Fatal(err)
		}
		var stated []float64
		beyond, seen := 0, 0
		for i := range 80 {
			wavelength := 2e-6 * math.Exp(math.Log(30)*float64(i)/79)
			a, err := p.At(wavelength)
			if err != nil {
				t.Fatal(err)
			}
			b, err := dense.At(wavelength)
			if err != nil {
				t.Fatal(err)
			}
			seen++
			stated = append(stated, a.Err)
			if math.Abs(a.Ext/b.Ext-1) > 3*a.Err {
				beyond++
			}
		}
		sort.Float64s(stated)
		if beyond > seen/20 {
			t.Errorf("%s: the true error is beyond three times the stated one at %d of %d wavelengths", c.name, beyond, seen)
		}
		if m := stated[seen/2]; m > c.typical {
			t.Errorf("%s: the median stated error is %.3g, more than %g", c.name, m, c.typical)
		}
		t.Logf("%s: median stated error %.3g, largest %.3g", c.name, stated[seen/2], stated[seen-1])
	}
}
