package greenhouse

import (
	"math"
	"slices"
	"testing"
)

// Band edges and Planck fluxes at 210 K against the independent numpy calculation.
func TestThermalEdges(t *testing.T) {
	edges := ThermalEdges()
	rows := readTable(t, "testdata/column_bands.csv")
	if len(rows) != len(edges)-1 || !slices.IsSorted(edges) {
		t.Fatalf("%d edges, sorted %v, want %d", len(edges), slices.IsSorted(edges), len(rows)+1)
	}
	planck := Planck(edges, 210)
	for i, row := range rows {
		b := len(rows) - 1 - i
		if low, high := number(t, row["wn_lo"]), number(t, row["wn_hi"]); math.Abs(0.01/edges[b]-high) > 1e-3 || math.Abs(0.01/edges[b+1]-low) > 1e-3 {
			t.Errorf("band %d: %.4f to %.4f 1/cm, want %g to %g", b, 0.01/edges[b+1], 0.01/edges[b], low, high)
		}
		if want := number(t, row["piB_210K_Wm2"]); math.Abs(planck[b]/want-1) > 2e-4 { // printed to five figures
			t.Errorf("band %d: Planck flux %.6g W/m2, want %.5g", b, planck[b], want)
		}
	}
}

// Edges against the wavenumbers in the optics of the test aerosols.
func TestSolarEdges(t *testing.T) {
	edges := SolarEdges()
	var lows []float64
	for _, row := range readTable(t, "testdata/aerosols.csv") {
		if row["aerosol"] == "al_rod" && row["range"] == "solar" {
			lows = append(lows, number(t, row["wn_lo"]))
		}
	}
	slices.Sort(lows)
	slices.Reverse(lows)
	if len(lows) != len(edges)-1 || !slices.IsSorted(edges) {
		t.Fatalf("%d edges, want %d, ascending", len(edges), len(lows)+1)
	}
	for i, low := range lows {
		if math.Abs(0.01/edges[i+1]/low-1) > 1e-4 {
			t.Errorf("edge %d: %.3f 1/cm, want %.3f", i+1, 0.01/edges[i+1], low)
		}
	}
}

// Stefan-Boltzmann: the bands hold all but a sliver of sigma T^4, and the table follows the integral.
func TestPlanck(t *testing.T) {
	edges := ThermalEdges()
	table := newPlanckTable(edges)
	for _, temperature := range []float64{183.3, 217, 260.9, 301} {
		exact := Planck(edges, temperature)
		for b, want := range fine(edges, temperature) {
			if math.Abs(exact[b]/want-1) > 2e-5 {
				t.Errorf("%g K, band %d: %.9g W/m2, midpoint sum %.9g", temperature, b, exact[b], want)
			}
		}
		if got, want := sum(exact), stefanBoltzmann*math.Pow(temperature, 4); got > want || got < want*(1-2e-3) {
			t.Errorf("%g K: %.4f W/m2, sigma T^4 = %.4f", temperature, got, want)
		}
		var total float64
		for b, want := range exact {
			got := table.flux(b, temperature)
			total += got
			if math.Abs(got/want-1) > 5e-5 {
				t.Errorf("%g K, band %d: table %.8g, integral %.8g W/m2", temperature, b, got, want)
			}
		}
		if math.Abs(total/sum(exact)-1) > 1e-7 {
			t.Errorf("%g K: table %.10g, integral %.10g W/m2", temperature, total, sum(exact))
		}
	}
	if Planck(edges, 0)[3] != 0 || Planck(edges, -5)[3] != 0 {
		t.Error("a body at or below 0 K emits")
	}
}

// fine is the Planck flux per band by the midpoint rule with 1000 steps, in frequency.
func fine(edges []float64, temperature float64) []float64 {
	out := make([]float64, len(edges)-1)
	for b := range out {
		low, high := lightSpeed/edges[b+1], lightSpeed/edges[b]
		for i := range 1000 {
			f := low + (high-low)*(float64(i)+0.5)/1000
			radiance := 2 * planckConstant * f * f * f / (lightSpeed * lightSpeed) / math.Expm1(planckConstant*f/(boltzmannConstant*temperature))
			out[b] += math.Pi * radiance * (high - low) / 1000
		}
	}
	return out
}

// Mean emission height in the limits: the mean height of the mass when thin, H (ln(D tau) + 0.5772) held low and thick.
func TestEmissionHeights(t *testing.T) {
	mean := func(p Placement, tau float64) float64 {
		var h [3]float64
		p.emissionHeights(tau, 10e3, &h)
		return h[0]*emissionWeights[0] + h[1]*emissionWeights[1] + h[2]*emissionWeights[2]
	}
	low := Placement{Kind: Low}
	for _, c := range []struct {
		name           string
		got, want, tol float64
	}{
		{"low, thin", mean(low, 1e-12), 2e3, 25},
		{"low, thick", mean(low, 50), 2e3 * (math.Log(1.66*50) + 0.5772), 80},
		{"mixed, thin", mean(Placement{}, 1e-6), 10e3, 120},
		{"thin layer", mean(Placement{Layer, 30e3, 30.1e3}, 5), 30.06e3, 50},
		{"layer, thick: from its top", mean(Placement{Layer, 10e3, 20e3}, 1e4), 20e3, 20},
	} {
		if math.Abs(c.got-c.want) > c.tol {
			t.Errorf("%s: %.1f m, want %.1f", c.name, c.got, c.want)
		}
	}
	var total float64
	for _, w := range emissionWeights {
		total += w
	}
	if math.Abs(total-1) > 1e-15 {
		t.Errorf("weights sum to %.17g", total)
	}
}

// Two-stream limits: nothing in, all through; conservative layers do not emit; pure absorption transmits exp(-1.66 tau).
func TestThermalSlab(t *testing.T) {
	r, tr, e := thermalSlab(0, 0, 0)
	if r > 1e-11 || math.Abs(tr-1) > 1e-11 || e > 1e-11 {
		t.Errorf("empty: %g %g %g", r, tr, e)
	}
	for _, tau := range []float64{1e-6, 0.01, 1, 5} {
		r, tr, e = thermalSlab(tau, 0, 0)
		if r > 1e-12 || math.Abs(tr-math.Exp(-1.66*tau)) > 1e-12 || math.Abs(e-(1-tr)) > 1e-9 {
			t.Errorf("absorber %g: %g %g %g", tau, r, tr, e)
		}
		r, tr, e = thermalSlab(tau, tau, 0)
		if want := 0.75 * tau / (1 + 0.75*tau); math.Abs(r-want) > 1e-4 || math.Abs(r+tr-1) > 1e-6 || e > 1e-6 {
			t.Errorf("scatterer %g: reflects %g, Eddington %g; emits %g", tau, r, want, e)
		}
	}
}
