package greenhouse

import "math"

// Physical constants, exact in the SI since 2019 [CODATA2018].
const (
	planckConstant    = 6.62607015e-34 // [J s]
	lightSpeed        = 2.99792458e8   // [m/s]
	boltzmannConstant = 1.380649e-23   // [J/K]
	stefanBoltzmann   = 5.670374419e-8 // [W/m2/K4]
)

// thermalSegments lists the thermal band edges as runs of equal width, in wavenumber [1/cm]: fine through the 15 um CO2
// band and the window beside it, coarse elsewhere.
var thermalSegments = [...]struct {
	from, to float64
	bands    int
}{
	{10, 500, 20}, {500, 840, 34}, {840, 1200, 18}, {1200, 2200, 10}, {2200, 2420, 2}, {2420, 3000, 1},
}

// ThermalEdges returns the 86 edges of the 85 thermal bands as wavelengths [m], ascending, 3.33 um to 1 mm
// (3000 to 10 1/cm). Bands of 25 1/cm up to 500, 10 up to 840, 20 up to 1200 and wider ones beyond; at 220 K all but 3e-4
// of a black body's emission lies inside. Coarser bands (21 instead of 85) move the warming by a kelvin.
func ThermalEdges() []float64 {
	edges := []float64{wavelength(3000)}
	for i := len(thermalSegments) - 1; i >= 0; i-- {
		s := thermalSegments[i]
		for k := s.bands - 1; k >= 0; k-- {
			edges = append(edges, wavelength(s.from+(s.to-s.from)*float64(k)/float64(s.bands)))
		}
	}
	return edges
}

// SolarEdges returns the 21 edges of the 20 solar bands as wavelengths [m], ascending, 0.2 to 5 um. They isolate the CO2
// bands at 2.0, 2.7 and 4.3 um. The Planck share of the Sun outside is put into the bands in proportion.
func SolarEdges() []float64 {
	um := [...]float64{0.2, 0.3, 0.4, 0.5, 0.6, 0.7, 0.85, 1.0, 1.25, 1.6, 1.87, 1.98, 2.06, 2.6, 2.68, 2.80, 3.3, 4.14, 4.20, 4.45, 5.0}
	edges := make([]float64, len(um))
	for i, w := range um {
		edges[i] = w * 1e-6
	}
	return edges
}

// wavelength returns the vacuum wavelength [m] of a wavenumber [1/cm].
func wavelength(perCentimetre float64) float64 { return 0.01 / perCentimetre }

// Planck returns the flux [W/m2] a black body at temperature [K] sends from one side in each band between neighbouring
// edges (wavelengths [m], ascending):
//
//	B_b = integral over the band of 2 pi h c^2 nu^3 / (exp(h c nu / k T) - 1) dnu,   nu = 1/wavelength
//
// by four Gauss points a band: within 2e-5 of the whole for the bands of [ThermalEdges] from 100 to 500 K. Edges must be
// positive; a temperature at or below zero gives zeros.
func Planck(edges []float64, temperature float64) []float64 {
	out := make([]float64, len(edges)-1)
	p := newPlancker(edges)
	for b := range out {
		out[b] = p.integral(b, temperature)
	}
	return out
}

// gauss4 holds the four-point Gauss-Legendre rule on [0, 1] [AbramowitzStegun1964, table 25.4].
var gauss4 = struct{ x, w [4]float64 }{
	x: [4]float64{0.069431844202973712388, 0.33000947820757186760, 0.66999052179242813240, 0.93056815579702628761},
	w: [4]float64{0.17392742256872692869, 0.32607257743127307131, 0.32607257743127307131, 0.17392742256872692869},
}

// plancker holds the parts of the Planck integral that do not depend on temperature.
type plancker struct {
	exponent [][4]float64 // h c nu / k [K]
	weight   [][4]float64 // 2 pi h c^2 nu^3 dnu [W/m2]
}

func newPlancker(edges []float64) plancker {
	n := len(edges) - 1
	p := plancker{make([][4]float64, n), make([][4]float64, n)}
	for b := range n {
		low, high := 1/edges[b+1], 1/edges[b]
		for i := range 4 {
			nu := low + (high-low)*gauss4.x[i]
			p.exponent[b][i] = planckConstant * lightSpeed * nu / boltzmannConstant
			p.weight[b][i] = 2 * math.Pi * planckConstant * lightSpeed * lightSpeed * nu * nu * nu * (high - low) * gauss4.w[i]
		}
	}
	return p
}

// integral returns the Planck flux [W/m2] of band b at temperature [K].
func (p plancker) integral(b int, temperature float64) float64 {
	if temperature <= 0 {
		return 0
	}
	var sum float64
	for i, w := range p.weight[b] {
		sum += w / math.Expm1(p.exponent[b][i]/temperature) // beyond the range of exp the quotient is zero
	}
	return sum
}

// withSlope returns [plancker.integral] and its derivative with temperature [W/m2/K].
func (p plancker) withSlope(b int, temperature float64) (flux, slope float64) {
	for i, w := range p.weight[b] {
		x := p.exponent[b][i] / temperature
		if x > 700 {
			continue
		}
		e := 1 / math.Expm1(x)
		flux += w * e
		slope += w * e * (1 + e) * x / temperature
	}
	return flux, slope
}

// Grid of the Planck table [K]. Cubic Hermite interpolation on it is within 5e-5 of the integral from 180 to 500 K in the
// worst band, 1e-7 over all bands.
const (
	tableCold, tableStep = 90.0, 4.0
	tableNodes           = 104 // to 502 K
)

// planckTable is the Planck flux per band on a grid of temperature, since the balances ask for it thousands of times.
type planckTable struct {
	exact plancker
	nodes [][2]float64 // flux [W/m2] and slope times step, band by band
}

func newPlanckTable(edges []float64) planckTable {
	t := planckTable{exact: newPlancker(edges), nodes: make([][2]float64, (len(edges)-1)*tableNodes)}
	for b := range len(edges) - 1 {
		for i := range tableNodes {
			at := tableCold + tableStep*float64(i)
			flux, slope := t.exact.withSlope(b, at)
			t.nodes[b*tableNodes+i] = [2]float64{flux, slope * tableStep}
		}
	}
	return t
}

// flux returns the Planck flux [W/m2] of band b at temperature [K], from the table where it reaches.
func (t planckTable) flux(b int, temperature float64) float64 {
	x := (temperature - tableCold) / tableStep
	if !(x >= 0 && x < tableNodes-1) {
		return t.exact.integral(b, temperature)
	}
	i := int(x)
	u := x - float64(i)
	p, q := &t.nodes[b*tableNodes+i], &t.nodes[b*tableNodes+i+1]
	v := 1 - u
	return v*v*((1+2*u)*p[0]+u*p[1]) + u*u*((1+2*v)*q[0]-v*q[1])
}
