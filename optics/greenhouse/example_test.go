package greenhouse_test

import (
	"fmt"

	"hazewright/optics/greenhouse"
)

// A grey aerosol of 1000 m2/kg in the thermal that absorbs and a fiftieth of it in sunlight, mostly scattered forward.
func ExampleQuick_Curve() {
	fill := func(edges []float64, ext, sca, gsca float64) greenhouse.Band {
		n := len(edges) - 1
		b := greenhouse.Band{Ext: make([]float64, n), Sca: make([]float64, n), GSca: make([]float64, n)}
		for i := range n {
			b.Ext[i], b.Sca[i], b.GSca[i] = ext, sca, gsca
		}
		return b
	}
	q, err := greenhouse.NewQuick(greenhouse.BaselinePlanet())
	if err != nil {
		fmt.Println(err)
		return
	}
	curve, err := q.Curve(greenhouse.Aerosol{
		Thermal: fill(greenhouse.ThermalEdges(), 1000, 0, 0),
		Solar:   fill(greenhouse.SolarEdges(), 20, 18, 9),
	}, 20)
	if err != nil {
		fmt.Println(err)
		return
	}
	fmt.Printf("ground without it %.1f K\n", q.Baseline().SurfaceTemperature)
	fmt.Printf("20 K need %.2g kg/m2, optical depth %.2g thermal, %.2g solar\n", curve.Burden, curve.At.OpticalDepthThermal, curve.At.OpticalDepthSolar)
	// Output:
	// ground without it 216.5 K
	// 20 K need 0.00091 kg/m2, optical depth 0.91 thermal, 0.018 solar
}
