package greenhouse

import (
	"errors"
	"fmt"
	"math"
)

// Band holds the optics of an aerosol per unit mass [m2/kg], one value per band, bands in ascending wavelength.
type Band struct {
	Ext  []float64 // extinction
	Sca  []float64 // scattering, 0 to Ext
	GSca []float64 // scattering times asymmetry (mean cosine), -Sca to Sca
}

// Aerosol is what the estimate needs to know of a design.
type Aerosol struct {
	Thermal   Band // in the bands of [ThermalEdges]
	Solar     Band // in the bands of [SolarEdges]
	Placement Placement
}

// Kind says how the aerosol's mass is spread over height.
type Kind int

// The ways an aerosol can be spread over height.
const (
	Mixed Kind = iota // in proportion to the air, at all heights
	Layer             // in proportion to the air between Bottom and Top
	Low               // mass density falling with height as exp(-z / LowScaleHeight)
)

// String returns the name of the kind.
func (k Kind) String() string {
	switch k {
	case Mixed:
		return "mixed"
	case Layer:
		return "layer"
	case Low:
		return "low"
	}
	return fmt.Sprintf("Kind(%d)", int(k))
}

// LowScaleHeight is the e-folding height of the mass density of an aerosol held low [m] (our choice: a night-time
// boundary layer's depth; common practice, no source).
const LowScaleHeight = 2e3

// Placement is the spread of the aerosol's mass over height. The zero value is well mixed.
type Placement struct {
	Kind        Kind
	Bottom, Top float64 // of a Layer [m], above ground; ignored otherwise
}

// validate returns everything in the aerosol that the estimate cannot use, or nil.
func (a Aerosol) validate() error {
	err := errors.Join(
		a.Thermal.validate("thermal", len(ThermalEdges())-1),
		a.Solar.validate("solar", len(SolarEdges())-1),
	)
	switch p := a.Placement; p.Kind {
	case Mixed, Low:
	case Layer:
		if !(p.Bottom >= 0 && p.Top > p.Bottom && p.Top <= 100e3) {
			err = errors.Join(err, fmt.Errorf("layer from %g m to %g m: want 0 <= bottom < top <= 100000 m", p.Bottom, p.Top))
		}
	default:
		err = errors.Join(err, fmt.Errorf("placement %v is not known", p.Kind))
	}
	return err
}

func (b Band) validate(name string, bands int) error {
	if len(b.Ext) != bands || len(b.Sca) != bands || len(b.GSca) != bands {
		return fmt.Errorf("%s optics: %d, %d and %d values of extinction, scattering and asymmetry, want %d each", name, len(b.Ext), len(b.Sca), len(b.GSca), bands)
	}
	for i, ext := range b.Ext {
		sca, gsca := b.Sca[i], b.GSca[i]
		slack := 1e-9 * ext // rounding in what the scatterer returned
		// Written so that NaN fails. The upper limit is far beyond any particle.
		if !(ext >= 0 && ext <= 1e9 && sca >= 0 && sca <= ext+slack && math.Abs(gsca) <= sca+slack) {
			return fmt.Errorf("%s optics, band %d: extinction %g, scattering %g, scattering times asymmetry %g m2/kg: want 0 <= |asymmetric| <= scattering <= extinction <= 1e9", name, i, ext, sca, gsca)
		}
	}
	return nil
}

// transport returns the transport extinction Ext - GSca [m2/kg] of band i.
func (b Band) transport(i int) float64 { return math.Max(0, b.Ext[i]-b.GSca[i]) }

// diffusivity is the ratio of the mean slant path of diffuse radiation to the vertical one [Elsasser1942].
const diffusivity = 1.66

// emissionHeights fills three heights [m] from which the aerosol's thermal emission escape upward, for
// vertical transport depth tau and pressure scale height [m]. The share p of what escapes comes from above the depth
//
//	t(p) = -ln(1 - p (1 - exp(-D tau))) / D,   D = 1.66
//
// counted from the top, and depth goes with height as the mass does: t/tau = exp(-z/H) mixed or held low, and
// (exp(-z/H) - exp(-top/H)) / (exp(-bottom/H) - exp(-top/H)) in a layer. The shares are the points of gauss3 in the square
// root of p, which takes the logarithm out of the integrand; their weights are [emissionWeights]. The mean
// height is within 4% of H.
func (p Placement) emissionHeights(tau, scaleHeight float64, heights *[3]float64) {
	h, low, high := scaleHeight, 0.0, 1.0
	switch p.Kind {
	case Low:
		h = LowScaleHeight
	case Layer:
		low, high = math.Exp(-p.Top/h), math.Exp(-p.Bottom/h)
	}
	escape := -math.Expm1(-diffusivity * tau)
	for i, v := range gauss3.x {
		s := v * v
		if escape > 1e-9 {
			s = -math.Log1p(-s*escape) / (diffusivity * tau)
		}
		heights[i] = -h * math.Log(low+s*(high-low))
	}
}

// gauss3 holds the three-point Gauss-Legendre rule on [0, 1] [AbramowitzStegun1964, table 25.4].
var gauss3 = struct{ x, w [3]float64 }{
	x: [3]float64{0.1127016653792583, 0.5, 0.8872983346207417},
	w: [3]float64{5.0 / 18, 8.0 / 18, 5.0 / 18},
}

// emissionWeights are the weights of the heights of [Placement.emissionHeights]; they sum to one.
var emissionWeights = [3]float64{2 * gauss3.x[0] * gauss3.w[0], 2 * gauss3.x[1] * gauss3.w[1], 2 * gauss3.x[2] * gauss3.w[2]}
