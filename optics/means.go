package optics

import (
	"fmt"
	"math"

	"hazewright/optics/internal/planck"
)

const (
	// SolarTemperature is the effective temperature of the Sun [K], IAU 2015 nominal value.
	SolarTemperature = 5772

	thermalFrom, thermalTo, thermalPoints = 4e-6, 150e-6, 121
	solarFrom, solarTo, solarPoints       = 0.2e-6, 5e-6, 81
)

// PlanckMean returns the cross-sections per mass [m2/kg] averaged with the blackbody emission at
// a temperature T [K] over 4 to 150 um, on 121 log-spaced wavelengths (rods have sharp
// resonances; twice as many change the mean by under 0.5 %):
//
//	mean = int kappa B_lambda(T) d lambda / int B_lambda(T) d lambda
//
// Errors: T outside 50 to 2000 K, and those of [Population.At].
func PlanckMean(p *Population, temperature float64) (Means, error) {
	if !(temperature >= 50 && temperature <= 2000) {
		return Means{}, fmt.Errorf("temperature %g K of a thermal mean is outside 50 K to 2000 K", temperature)
	}
	return p.mean(temperature, thermalFrom, thermalTo, thermalPoints)
}

// SolarMean returns the cross-sections per mass [m2/kg] averaged with sunlight, a blackbody of
// 5772 K, over 0.2 to 5 um on 81 log-spaced wavelengths. Errors: those of [Population.At].
func SolarMean(p *Population) (Means, error) {
	return p.mean(SolarTemperature, solarFrom, solarTo, solarPoints)
}

// mean is the trapezoidal rule in ln(wavelength).
func (p *Population) mean(temperature, from, to float64, points int) (Means, error) {
	var sum Means
	total := 0.0
	step := math.Log(to/from) / float64(points-1)
	for i := range points {
		l := from * math.Exp(step*float64(i))
		w := planck.Density(l, temperature) * l
		if i == 0 || i == points-1 {
			w /= 2
		}
		k, err := p.Kappa(l)
		if err != nil {
			return Means{}, err
		}
		sum.add(k, w)
		total += w
	}
	return sum.over(total), nil
}

func (m *Means) add(k Means, w float64) {
	m.Abs += w * k.Abs
	m.Ext += w * k.Ext
	m.Sca += w * k.Sca
	m.GSca += w * k.GSca
}

func (m Means) over(total float64) Means {
	return Means{m.Abs / total, m.Ext / total, m.Sca / total, m.GSca / total}
}

// SpectrumRow is one wavelength [m] of a spectrum: number-mean cross-sections of one particle and
// the same per mass [m2/kg].
type SpectrumRow struct {
	Wavelength float64
	CrossSection
	KappaExt, KappaAbs float64
}

// Spectrum returns one row for each wavelength [m], in the order given. Errors: those of
// [Population.At].
func Spectrum(p *Population, wavelengths []float64) ([]SpectrumRow, error) {
	rows := make([]SpectrumRow, 0, len(wavelengths))
	for _, l := range wavelengths {
		c, err := p.At(l)
		if err != nil {
			return nil, err
		}
		rows = append(rows, SpectrumRow{Wavelength: l, CrossSection: c, KappaExt: c.Ext / p.mass, KappaAbs: c.Abs / p.mass})
	}
	return rows, nil
}
