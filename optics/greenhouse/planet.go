package greenhouse

import (
	"errors"
	"fmt"
	"math"
)

// Planet is what the estimate needs to know of the planet without the aerosol. SI units.
type Planet struct {
	Sunlight         float64 // annual mean at normal incidence [W/m2], 50 to 1500
	BondAlbedo       float64 // share of sunlight sent back, dust included [1], 0.02 to 0.7
	Emissivity       float64 // of the ground in the thermal [1], 0.6 to 1
	DustOpticalDepth float64 // natural dust, vertical extinction at 0.67 um [1], 0 to 1
	LapseLimit       float64 // steepest fall of temperature with height that convection lets stand [K/m], 0.5e-3 to 20e-3
	SurfacePressure  float64 // of CO2 [Pa], 100 to 3000
	Gravity          float64 // [m/s2], 1 to 10
	ScaleHeight      float64 // of pressure [m], 2e3 to 30e3
}

// BaselinePlanet returns the planet the embedded emission table was computed for: present Mars as the fact sheet has it
// [WilliamsMars], 586.2 W/m2, Bond albedo 0.25, with 610 Pa of CO2, dust 0.4, ground emissivity 0.95 and lapse limit
// 2.5 K/km (these three: common practice, no source). The scale height is that of CO2 at 210 K, R T / g = 10.69 km.
func BaselinePlanet() Planet {
	return Planet{
		Sunlight: 586.2, BondAlbedo: 0.25, Emissivity: 0.95, DustOpticalDepth: 0.4, LapseLimit: 2.5e-3,
		SurfacePressure: 610, Gravity: 3.71, ScaleHeight: 188.92 * 210 / 3.71,
	}
}

// planetRange is one input of [Planet]: what the estimate takes, and how far it may be from the baseline before the
// reader must be told.
type planetRange struct {
	name, unit string
	get        func(Planet) float64
	low, high  float64
	relative   float64 // tolerated departure from the baseline; zero where the estimate follows the input
	effect     string
}

var planetRanges = [...]planetRange{
	{"sunlight", "W/m2", func(p Planet) float64 { return p.Sunlight }, 50, 1500, 0.02,
		"the share of each band that escapes is held; the baseline temperature is then within 0.3 K from 450 to 700 W/m2"},
	{"bond albedo", "", func(p Planet) float64 { return p.BondAlbedo }, 0.02, 0.7, 0.2, "emission is held as for albedo 0.25"},
	{"emissivity", "", func(p Planet) float64 { return p.Emissivity }, 0.6, 1, 0.03,
		"the ground's own emission follows it, the air's share of the emission does not; the baseline temperature is then within 0.4 K from 0.9 to 1"},
	{"dust optical depth", "", func(p Planet) float64 { return p.DustOpticalDepth }, 0, 1, 0, ""},
	{"lapse limit", "K/m", func(p Planet) float64 { return p.LapseLimit }, 0.5e-3, 20e-3, 0.2,
		"it acts on the aerosol layer, not on the baseline emission"},
	{"surface pressure", "Pa", func(p Planet) float64 { return p.SurfacePressure }, 100, 3000, 0.05,
		"the CO2 greenhouse is held at that of 610 Pa; doubling the pressure adds about 1 K to the baseline and little to the warming"},
	{"gravity", "m/s2", func(p Planet) float64 { return p.Gravity }, 1, 10, 0.05, "the column mass of CO2 is held at that of 3.71 m/s2"},
	{"scale height", "m", func(p Planet) float64 { return p.ScaleHeight }, 2e3, 30e3, 0.1, "it acts on the height of the aerosol, not on the baseline emission"},
}

// validate returns every input of the planet that the estimate cannot use, joined into one error, or nil.
func (p Planet) validate() error {
	var errs []error
	for _, r := range planetRanges {
		if v := r.get(p); math.IsNaN(v) || v < r.low || v > r.high {
			errs = append(errs, fmt.Errorf("%s: %s is outside %s to %s", r.name, quantity(v, r.unit), quantity(r.low, r.unit), quantity(r.high, r.unit)))
		}
	}
	return errors.Join(errs...)
}

// Departures lists the inputs in which the planet differs from the one the baseline emission was computed for
// ([BaselinePlanet]), and what the estimate does about it; empty for the baseline. Dust is never listed, the table
// follows it. A caller should print each line beside the result as "estimate outside its baseline".
func (p Planet) Departures() []string {
	var out []string
	base := BaselinePlanet()
	for _, r := range planetRanges {
		v, b := r.get(p), r.get(base)
		if r.relative > 0 && math.Abs(v-b) > r.relative*b {
			out = append(out, fmt.Sprintf("%s %s against %s in the baseline: %s", r.name, quantity(v, r.unit), quantity(b, r.unit), r.effect))
		}
	}
	return out
}

func quantity(v float64, unit string) string {
	if unit == "" {
		return fmt.Sprintf("%.4g", v)
	}
	return fmt.Sprintf("%.4g %s", v, unit)
}

// frostPoint returns the temperature [K] at which CO2 of the pressure [Pa] freezes, 147.7 K at 610 Pa:
//
//	T = 3182.48 / (23.3494 - ln(p / 100 Pa))
//
// A fit to the vapour pressure over the solid, value from memory; within about 0.5 K from 10 to 10000 Pa.
func frostPoint(pressure float64) float64 {
	return 3182.48 / (23.3494 - math.Log(pressure/100))
}
