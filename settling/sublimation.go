package settling

import (
	"fmt"
	"math"

	"hazewright/settling/atmosphere"
)

// The temperatures [K] between which the vapour pressure of ice is given.
const (
	MinIceTemperature = 110.0
	MaxIceTemperature = 273.16
)

// waterMolarMass is the molar mass of water [kg/mol] [IUPAC2021].
const waterMolarMass = 18.015e-3

// IceVapourPressure returns the vapour pressure [Pa] of hexagonal ice at temperature
// t [K]:
//
//	p = exp(9.550426 - 5723.265/T + 3.53068 ln T - 0.00728332 T)
//
// Holds from [MinIceTemperature] to [MaxIceTemperature], an error outside. Below
// about 150 K new ice may be amorphous and has a higher vapour pressure. Source:
// [MurphyKoop2005], eq. 7.
func IceVapourPressure(t float64) (float64, error) {
	if !(t >= MinIceTemperature && t <= MaxIceTemperature) {
		return 0, fmt.Errorf("vapour pressure of ice: temperature %g K is outside %g K to %g K", t, MinIceTemperature, MaxIceTemperature)
	}
	return math.Exp(9.550426 - 5723.265/t + 3.53068*math.Log(t) - 0.00728332*t), nil
}

// SublimationTime returns the time [s] in which a particle of ice is gone in
// perfectly dry gas at temperature t [K], by Hertz-Knudsen with an evaporation
// coefficient of 1:
//
//	j = p (M/(2 pi R T))^(1/2)       mass lost per surface and time
//	sphere: 3 m/(S j),  S = 4 pi r^2
//	rod:    2 m/(S j),  S = 2 pi a L (its ends neglected)
//
// with [IceVapourPressure] and the particle at the temperature of the gas. This is
// the shortest time: the vapour's own diffusion (Knudsen numbers well under 1),
// cooling by the latent heat and any vapour already in the gas lengthen it. In
// saturated gas there is no loss; that is for the caller to decide. The mass is
// taken to be all ice. Errors as [Body.Check] and [IceVapourPressure].
func SublimationTime(b Body, t float64) (float64, error) {
	if err := b.Check(); err != nil {
		return 0, err
	}
	p, err := IceVapourPressure(t)
	if err != nil {
		return 0, err
	}
	j := p * math.Sqrt(waterMolarMass/(2*math.Pi*atmosphere.GasConstant*t))
	if b.Shape == Sphere {
		return 3 * b.Mass / (4 * math.Pi * b.Radius * b.Radius * j), nil
	}
	return 2 * b.Mass / (math.Pi * b.Diameter * b.Length * j), nil
}
