package atmosphere

import (
	"errors"
	"fmt"
	"math"
	"sort"
)

// Profile is temperature against height: straight lines between points, and the
// last temperature held above the highest. Make one with [Isothermal],
// [ConstantLapse] or [Tabulated].
type Profile struct {
	heights, temperatures []float64
}

// Isothermal returns the profile with the same temperature t [K] at every height.
func Isothermal(t float64) (Profile, error) { return Tabulated([]float64{0}, []float64{t}) }

// ConstantLapse returns the profile that cools from surface [K] at the ground by
// lapse [K/m] until it reaches floor [K], and keeps that above. The lapse must
// not be negative; with a lapse of 0 the profile is isothermal.
func ConstantLapse(surface, lapse, floor float64) (Profile, error) {
	if !(lapse >= 0) || math.IsInf(lapse, 0) {
		return Profile{}, fmt.Errorf("temperature profile: lapse %g K/m is not a number of 0 or more", lapse)
	}
	if !(floor <= surface) {
		return Profile{}, fmt.Errorf("temperature profile: floor %g K is above the surface's %g K", floor, surface)
	}
	if lapse == 0 || floor == surface {
		return Isothermal(surface)
	}
	return Tabulated([]float64{0, (surface - floor) / lapse}, []float64{surface, floor})
}

// Tabulated returns the profile through the given heights [m] and temperatures
// [K]. The first height must be 0 and heights must increase; temperatures must lie
// within [MinTemperature] to [MaxTemperature]. The slices are copied.
func Tabulated(heights, temperatures []float64) (Profile, error) {
	if len(heights) == 0 || len(heights) != len(temperatures) {
		return Profile{}, fmt.Errorf("temperature profile: %d heights and %d temperatures; give as many of one as of the other, at least one",
			len(heights), len(temperatures))
	}
	for i, h := range heights {
		switch {
		case math.IsNaN(h) || math.IsInf(h, 0):
			return Profile{}, fmt.Errorf("temperature profile: height %d is %g, not a finite number", i+1, h)
		case i == 0 && h != 0:
			return Profile{}, fmt.Errorf("temperature profile: the first height is %g m; it must be 0 m", h)
		case i > 0 && h <= heights[i-1]:
			return Profile{}, fmt.Errorf("temperature profile: height %g m follows %g m; heights must increase", h, heights[i-1])
		}
		if t := temperatures[i]; !(t >= MinTemperature && t <= MaxTemperature) {
			return Profile{}, fmt.Errorf("temperature profile: %g K at %g m is outside %g K to %g K", t, h, MinTemperature, MaxTemperature)
		}
	}
	return Profile{
		heights:      append([]float64(nil), heights...),
		temperatures: append([]float64(nil), temperatures...),
	}, nil
}

// layer returns the index of the last point at or below z, z >= 0.
func (p Profile) layer(z float64) int {
	return sort.Search(len(p.heights), func(i int) bool { return p.heights[i] > z }) - 1
}

// At returns the temperature [K] at height z [m]; below the ground that of the
// ground.
func (p Profile) At(z float64) float64 {
	i := p.layer(max(z, 0))
	return p.temperatures[i] + p.slope(i)*(max(z, 0)-p.heights[i])
}

// slope returns the temperature gradient above point i [K/m].
func (p Profile) slope(i int) float64 {
	if i == len(p.heights)-1 {
		return 0
	}
	return (p.temperatures[i+1] - p.temperatures[i]) / (p.heights[i+1] - p.heights[i])
}

// Column is a still atmosphere over a flat ground. It does not change once made
// and may be shared. Make it with [NewColumn].
type Column struct {
	gas       Gas
	gravity   float64
	profile   Profile
	pressures []float64 // at the heights of the profile
}

// NewColumn returns the hydrostatic column of the gas under gravity [m/s2] (0.01
// to 100), with surfacePressure [Pa] ([MinPressure] to [MaxPressure]) at the
// ground.
func NewColumn(gas Gas, gravity, surfacePressure float64, profile Profile) (Column, error) {
	var errs []error
	if len(gas.parts) == 0 {
		errs = append(errs, errors.New("column: no gas; make it with NewGas"))
	}
	if len(profile.heights) == 0 {
		errs = append(errs, errors.New("column: no temperature profile; make it with Isothermal, ConstantLapse or Tabulated"))
	}
	if !(gravity >= 0.01 && gravity <= 100) {
		errs = append(errs, fmt.Errorf("column: gravity %g m/s2 is outside 0.01 m/s2 to 100 m/s2", gravity))
	}
	if !(surfacePressure >= MinPressure && surfacePressure <= MaxPressure) {
		errs = append(errs, fmt.Errorf("column: surface pressure %g Pa is outside %g Pa to %g Pa", surfacePressure, MinPressure, MaxPressure))
	}
	if err := errors.Join(errs...); err != nil {
		return Column{}, err
	}
	c := Column{gas: gas, gravity: gravity, profile: profile, pressures: make([]float64, len(profile.heights))}
	c.pressures[0] = surfacePressure
	for i := 1; i < len(c.pressures); i++ {
		c.pressures[i] = c.pressure(i-1, profile.heights[i])
	}
	return c, nil
}

// pressure returns the pressure at height z, which lies above point i of the
// profile and not above the next.
func (c Column) pressure(i int, z float64) float64 {
	t, slope, dz := c.profile.temperatures[i], c.profile.slope(i), z-c.profile.heights[i]
	x := slope * dz / t // relative change of temperature over dz
	// dp/p = -(M g/R) dz/T, with T linear in z: the integral of dz/T is
	// (dz/t) ln(1+x)/x, which tends to dz/t.
	path := dz / t
	if x != 0 {
		path *= math.Log1p(x) / x
	}
	return c.pressures[i] * math.Exp(-c.gas.molarMass*c.gravity/GasConstant*path)
}

// Gas returns the gas of the column.
func (c Column) Gas() Gas { return c.gas }

// Gravity returns the acceleration of gravity [m/s2].
func (c Column) Gravity() float64 { return c.gravity }

// SurfacePressure returns the pressure at the ground [Pa].
func (c Column) SurfacePressure() float64 {
	if len(c.pressures) == 0 {
		return 0
	}
	return c.pressures[0]
}

// Temperatures returns the temperature profile of the column.
func (c Column) Temperatures() Profile { return c.profile }

// At returns the gas at height z [m] above the ground, from the hydrostatic
// balance
//
//	dp/dz = -rho g = -p M g/(R T)
//
// integrated exactly for a temperature that is linear between the points of the
// profile. A negative height is an error, and so is one at which the pressure is
// under [MinPressure].
func (c Column) At(z float64) (State, error) {
	if len(c.pressures) == 0 {
		return State{}, errors.New("column: empty; make it with NewColumn")
	}
	if !(z >= 0) || math.IsInf(z, 0) {
		return State{}, fmt.Errorf("column: height %g m is not a finite number of 0 or more", z)
	}
	i := c.profile.layer(z)
	p := c.pressure(i, z)
	if p < MinPressure {
		return State{}, fmt.Errorf("column: at %g m the pressure is under %g Pa; the gas is not described there", z, MinPressure)
	}
	s := c.gas.state(p, c.profile.At(z))
	s.Height = z
	return s, nil
}

// ScaleHeight returns R T/(M g) [m] for the temperature at height z [m], the height
// over which pressure falls by e where the temperature does not change.
func (c Column) ScaleHeight(z float64) float64 {
	if len(c.pressures) == 0 {
		return 0
	}
	return GasConstant * c.profile.At(z) / (c.gas.molarMass * c.gravity)
}

// HeightOf returns the height [m] at which the pressure is p [Pa], the inverse of
// [Column.At]. The pressure must lie between [MinPressure] and the surface
// pressure.
func (c Column) HeightOf(p float64) (float64, error) {
	if len(c.pressures) == 0 {
		return 0, errors.New("column: empty; make it with NewColumn")
	}
	if !(p >= MinPressure && p <= c.pressures[0]) {
		return 0, fmt.Errorf("column: pressure %g Pa is outside %g Pa to the surface's %g Pa", p, MinPressure, c.pressures[0])
	}
	i := sort.Search(len(c.pressures), func(i int) bool { return c.pressures[i] < p }) - 1
	t, slope := c.profile.temperatures[i], c.profile.slope(i)
	path := math.Log(c.pressures[i]/p) * GasConstant / (c.gas.molarMass * c.gravity) // integral of dz/T
	dz := path * t
	if slope != 0 {
		dz = t * math.Expm1(slope*path) / slope
	}
	return c.profile.heights[i] + dz, nil
}
