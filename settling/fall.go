package settling

import (
	"fmt"
	"math"

	"hazewright/settling/atmosphere"
)

// The Reynolds numbers at which the treatment of [FallSpeed] changes.
const (
	StokesReynolds = 0.1 // up to here drag is proportional to speed
	fullInertia    = 1.0 // from here the whole Schiller-Naumann correction acts
	MaxReynolds    = 800 // beyond it the correction does not hold: an error
)

// fastShare is the share of the mean molecular speed above which a fall speed is
// flagged: drag is no longer proportional to speed there [1]. Rule of thumb:
// common practice, no source.
const fastShare = 0.2

// Fall is the steady fall of one particle.
type Fall struct {
	Speed    float64 // downward [m/s]
	Reynolds float64 // by the largest dimension [1]
	Knudsen  float64 // mean free path over radius [1]
	Flag     string  // why the speed is less sure than usual, or empty
}

// FallSpeed returns the steady fall of a particle turned at random in the gas s
// under gravity [m/s2]:
//
//	v = m g x mobility
//
// with [Mobility]. The Reynolds number is Re = rho v D/mu, D the diameter of a
// sphere or the length of a rod. Up to 0.1 nothing is added. Beyond, the drag of a
// sphere is multiplied by the correction of [SchillerNaumann1935]
//
//	1 + w 0.15 Re^0.687
//
// where w rises smoothly from 0 at Re = 0.1 to 1 at Re = 1 (a smooth step in
// log Re, so that a heavier sphere never falls slower); a rod's drag is left as it
// is and the result flagged, since it then falls slower than given. Above
// [MaxReynolds] it is an error. A speed above a fifth of the mean molecular speed is
// flagged too. The weight of the displaced gas is neglected. Other errors as
// [Drag], and for a gravity that is not positive and finite.
func FallSpeed(s atmosphere.State, gravity float64, b Body) (Fall, error) {
	if err := check(s, b); err != nil {
		return Fall{}, err
	}
	if !(gravity > 0) || math.IsInf(gravity, 0) {
		return Fall{}, fmt.Errorf("fall speed: gravity %g m/s2 is not a positive finite number", gravity)
	}
	return fall(s, gravity, b)
}

func fall(s atmosphere.State, gravity float64, b Body) (Fall, error) {
	d := b.largest()
	perSpeed := s.Density * d / s.Viscosity // Reynolds number per unit speed
	f := Fall{Speed: b.Mass * gravity * mobility(s, b)}
	f.Reynolds = f.Speed * perSpeed
	if f.Reynolds > StokesReynolds {
		if b.Shape == Sphere {
			f.Reynolds = inertial(f.Reynolds)
			f.Speed = f.Reynolds / perSpeed
			f.Flag = fmt.Sprintf("Reynolds number %.2g is above %g; drag raised by the Schiller-Naumann correction", f.Reynolds, StokesReynolds)
		} else {
			f.Flag = fmt.Sprintf("Reynolds number %.2g by rod length is above %g; the rod falls slower than given", f.Reynolds, StokesReynolds)
		}
	}
	if f.Reynolds > MaxReynolds {
		return Fall{}, fmt.Errorf("fall speed: Reynolds number %.3g at pressure %.3g Pa is above %d, where no drag law here holds; the particle is too large or too heavy",
			f.Reynolds, s.Pressure, MaxReynolds)
	}
	if b.Shape == Sphere {
		f.Knudsen = s.MeanFreePath / b.Radius
	} else {
		f.Knudsen = 2 * s.MeanFreePath / b.Diameter
	}
	if f.Speed > fastShare*s.MolecularSpeed {
		f.Flag = fmt.Sprintf("fall speed %.3g m/s is above %g of the molecules' %.3g m/s; drag grows faster than speed there", f.Speed, fastShare, s.MolecularSpeed)
	}
	return f, nil
}

// inertia returns the factor by which inertia raises the drag of a sphere.
func inertia(re float64) float64 {
	if re <= StokesReynolds {
		return 1
	}
	w := 1.0
	if re < fullInertia {
		x := math.Log(re/StokesReynolds) / math.Log(fullInertia/StokesReynolds)
		w = x * x * (3 - 2*x)
	}
	return 1 + w*0.15*math.Pow(re, 0.687)
}

// inertial returns the Reynolds number re with re x inertia(re) = stokes, the
// Reynolds number that Stokes drag would give. The left side rises with re, so
// false position (Illinois variant) within the bracket finds it.
func inertial(stokes float64) float64 {
	low, high := stokes/inertia(stokes), stokes
	fLow, fHigh := low*inertia(low)-stokes, high*inertia(high)-stokes
	for range 100 {
		if fLow == 0 || fHigh == fLow || high-low <= 1e-14*high {
			break
		}
		mid := (low*fHigh - high*fLow) / (fHigh - fLow)
		f := mid*inertia(mid) - stokes
		switch {
		case math.Abs(f) <= 1e-14*stokes:
			return mid
		case f < 0:
			low, fLow = mid, f
			fHigh /= 2
		default:
			high, fHigh = mid, f
			fLow /= 2
		}
	}
	return low
}
