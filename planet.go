package hazewright

import (
	"fmt"
	"math"

	"hazewright/optics/greenhouse"
	"hazewright/settling/atmosphere"
)

// newPlanet prepares what every design of a study shares: the air column, the warming
// estimate and the unaided planet. Errors name the part of the world that the stages
// are not valid for.
func newPlanet(s *Study) (*planet, error) {
	w := s.World
	fractions := make([]atmosphere.Fraction, len(w.Gas))
	for i, g := range w.Gas {
		fractions[i] = atmosphere.Fraction{Species: g.Species, Mole: g.Mole}
	}
	gas, err := atmosphere.NewGas(fractions)
	if err != nil {
		return nil, fmt.Errorf("world: %w", err)
	}
	air, err := atmosphere.Isothermal(w.AirTemperature)
	if err != nil {
		return nil, fmt.Errorf("world: %w", err)
	}
	column, err := atmosphere.NewColumn(gas, w.Gravity, w.SurfacePressure, air)
	if err != nil {
		return nil, fmt.Errorf("world: %w", err)
	}
	quick, err := greenhouse.NewQuick(greenhouse.Planet{
		Sunlight: w.Sunlight, BondAlbedo: w.BondAlbedo, Emissivity: w.Emissivity, DustOpticalDepth: w.DustOpticalDepth,
		LapseLimit: w.LapseLimit, SurfacePressure: w.SurfacePressure, Gravity: w.Gravity, ScaleHeight: column.ScaleHeight(0),
	})
	if err != nil {
		return nil, fmt.Errorf("world: %w", err)
	}
	bare := quick.Baseline()
	p := &planet{study: s, quick: quick, column: column, area: 4 * math.Pi * w.Radius * w.Radius}
	p.base = Baseline{
		SurfaceTemperature: bare.SurfaceTemperature,
		EffectiveTemp:      quick.EffectiveTemperature(),
		ScaleHeight:        column.ScaleHeight(0),
		Area:               p.area,
		ThermalEdges:       greenhouse.ThermalEdges(),
		Outgoing:           bare.OutgoingSpectrum,
		SunAtGround:        bare.SunAtGround,
	}
	return p, nil
}
