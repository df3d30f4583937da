package settling

import (
	"errors"
	"fmt"
	"math"
)

// Plume is the release of particles from one or more points into a wind.
type Plume struct {
	MassRate  float64 // of all points together [kg/s]
	Points    float64 // number of points, each with an equal part, 1 or more
	Mass      float64 // of one particle [kg]
	Kernel    float64 // of [Kernel], charge and factors included [m3/s]
	Sticking  float64 // share of meetings that stick, 0 to 1
	Wind      float64 // speed [m/s]
	Radius    float64 // of the plume at the point [m]
	Spreading float64 // growth of its radius per distance downwind [1]
}

func (p Plume) check() error {
	var errs []error
	positive := func(name, unit string, v float64) {
		if !(v > 0) || math.IsInf(v, 0) {
			errs = append(errs, fmt.Errorf("plume: %s %g%s is not a positive finite number", name, v, unit))
		}
	}
	if !(p.MassRate >= 0) || math.IsInf(p.MassRate, 0) {
		errs = append(errs, fmt.Errorf("plume: mass rate %g kg/s is not a finite number of 0 or more", p.MassRate))
	}
	if !(p.Kernel >= 0) || math.IsInf(p.Kernel, 0) {
		errs = append(errs, fmt.Errorf("plume: kernel %g m3/s is not a finite number of 0 or more", p.Kernel))
	}
	if !(p.Sticking >= 0 && p.Sticking <= 1) {
		errs = append(errs, fmt.Errorf("plume: sticking %g is outside 0 to 1", p.Sticking))
	}
	if !(p.Points >= 1) || math.IsInf(p.Points, 0) {
		errs = append(errs, fmt.Errorf("plume: %g points; at least 1 is needed", p.Points))
	}
	positive("particle mass", " kg", p.Mass)
	positive("wind", " m/s", p.Wind)
	positive("radius", " m", p.Radius)
	positive("spreading", "", p.Spreading)
	return errors.Join(errs...)
}

// crowding returns the denominator's second term for the given number of points.
func (p Plume) crowding(points float64) float64 {
	return p.Sticking * p.Kernel * (p.MassRate / points) / (p.Mass * math.Pi * p.Spreading * p.Wind * p.Wind * p.Radius)
}

// PlumeSurvival returns the share [1] of released particles that leave their plume
// single:
//
//	1/(1 + s K Q/(m pi alpha u^2 R0))
//
// with Q the mass rate of one point. It is the solution of dn/dt = -s K n^2 carried
// along a cone of radius R0 + alpha x at the speed u, the number spread evenly over
// the cross-section, to infinity; neither shear nor the mixing in of other plumes is
// counted. Errors name every input out of range.
func PlumeSurvival(p Plume) (float64, error) {
	if err := p.check(); err != nil {
		return 0, err
	}
	return 1 / (1 + p.crowding(p.Points)), nil
}

// PlumePoints returns the least number of release points, sharing the mass rate
// equally, with which the share survival (above 0, below 1) leaves its plume single,
// from the formula of [PlumeSurvival]. The Points of p are not used. An error also
// where more than 1e12 points would be needed.
func PlumePoints(p Plume, survival float64) (float64, error) {
	p.Points = 1
	if err := p.check(); err != nil {
		return 0, err
	}
	if !(survival > 0 && survival < 1) {
		return 0, fmt.Errorf("plume: survival %g is outside 0 to 1, ends excluded", survival)
	}
	// One part in 1e12 is given away so that rounding does not cost a point.
	points := math.Ceil(p.crowding(1) * survival / (1 - survival) * (1 - 1e-12))
	if !(points <= 1e12) {
		return 0, fmt.Errorf("plume: %.3g points would be needed; more than 1e12 is not a design", points)
	}
	return max(points, 1), nil
}
