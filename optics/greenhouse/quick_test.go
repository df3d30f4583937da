package greenhouse

import (
	"math"
	"sort"
	"strings"
	"testing"

	"pgregory.net/rapid"
)

// Mars fact sheet: 586.2 W/m2 and Bond albedo 0.25 give a black-body temperature of 209.8 K.
func TestBaseline_FactSheetEffectiveTemperature(t *testing.T) {
	p := BaselinePlanet()
	got := mustQuick(t, p).EffectiveTemperature()
	if math.Abs(got-209.8) > 0.05 {
		t.Errorf("effective temperature %.2f K, fact sheet has 209.8 K", got)
	}
	b := mustQuick(t, p).Baseline()
	if want := p.Sunlight / 4 * (1 - p.BondAlbedo); math.Abs(b.AbsorbedSunlight-want) > 1e-9 || math.Abs(sum(b.OutgoingSpectrum)-want) > 1e-7 {
		t.Errorf("absorbs %.9f and emits %.9f W/m2, want %.9f", b.AbsorbedSunlight, sum(b.OutgoingSpectrum), want)
	}
}

// Ground temperature without aerosol; independent numpy calculation of the column, 40 layers, Bond albedo held at 0.25.
func TestBaseline_SurfaceTemperature(t *testing.T) {
	for _, c := range []struct {
		name      string
		change    func(*Planet)
		want, tol float64
	}{
		{"baseline", func(*Planet) {}, 216.46, 0.1},
		{"dust 0.3", func(p *Planet) { p.DustOpticalDepth = 0.3 }, 216.69, 0.1},
		{"dust 0.5", func(p *Planet) { p.DustOpticalDepth = 0.5 }, 216.26, 0.1},
		{"no dust", func(p *Planet) { p.DustOpticalDepth = 0 }, 216.96, 0.1},
		{"emissivity 1", func(p *Planet) { p.Emissivity = 1 }, 213.96, 0.45},
		{"emissivity 0.9", func(p *Planet) { p.Emissivity = 0.9 }, 219.09, 0.45},
		{"450 W/m2", func(p *Planet) { p.Sunlight = 450 }, 202.12, 0.3},
		{"700 W/m2", func(p *Planet) { p.Sunlight = 700 }, 226.59, 0.3},
		{"300 W/m2, no dust, albedo 0.2465", func(p *Planet) { p.Sunlight, p.DustOpticalDepth, p.BondAlbedo = 300, 0, 0.2465 }, 183.08, 0.3},
	} {
		p := BaselinePlanet()
		c.change(&p)
		if got := mustQuick(t, p).Baseline().SurfaceTemperature; math.Abs(got-c.want) > c.tol {
			t.Errorf("%s: %.2f K, column has %.2f K", c.name, got, c.want)
		}
	}
}

// Ratio of the warming to that of the full column, per kind of aerosol and placement; independent numpy calculation.
// Bounds are those printed by Accuracy with a little room; the median must lie between the last two.
func TestWarming_AgainstColumn(t *testing.T) {
	q := mustQuick(t, BaselinePlanet())
	aerosols := testAerosols(t)
	type bounds struct{ low, high, medianLow, medianHigh float64 }
	groups := map[string]bounds{
		"metal mixed tested":  {0.90, 1.10, 0.95, 1.02},
		"metal mixed beyond":  {0.95, 1.16, 0.98, 1.10},
		"metal low2 tested":   {0.72, 1.07, 0.88, 1.00},
		"metal low2 beyond":   {0.90, 2.05, 0.95, 1.10},
		"metal s0_5 tested":   {0.77, 1.03, 0.90, 1.00},
		"metal s10_20 tested": {0.80, 1.33, 0.95, 1.06},
		"metal s25_35 tested": {0.83, 2.42, 0.95, 1.20},
		"ice mixed tested":    {0.94, 1.13, 1.00, 1.10},
		"ice s10_20 tested":   {0.79, 0.87, 0.80, 0.86},
		"ice s25_35 tested":   {0.81, 0.87, 0.80, 0.86},
	}
	ratios := map[string][]float64{}
	for _, row := range readTable(t, "testdata/column_runs.csv") {
		name, profile := row["aerosol"], row["profile"]
		a := aerosols[name]
		a.Placement = placements[profile]
		s := mustWarm(t, q, a, number(t, row["mg"])*1e-6)
		want := number(t, row["dT"])
		kind, reach := "", "tested"
		switch {
		case isMetal(name):
			kind = "metal"
		case strings.HasPrefix(name, "ice") && (profile == "low2" || profile == "s0_5"):
			if math.Abs(s.Warming-want) > 0.7 { // small differences of large numbers: the ratio means nothing
				t.Errorf("%s %s %s mg/m2: %.2f K, column %.2f K", name, profile, row["mg"], s.Warming, want)
			}
		case strings.HasPrefix(name, "ice"):
			kind = "ice"
		case s.Warming > 0 || math.Abs(s.Warming-want) > 7.5:
			t.Errorf("%s %s %s mg/m2: %.2f K, column %.2f K: want cooling within 7.5 K", name, profile, row["mg"], s.Warming, want)
		}
		if !s.Valid {
			reach = "beyond"
		}
		key := kind + " " + profile + " " + reach
		ratios[key] = append(ratios[key], s.Warming/want)
	}
	for key, b := range groups {
		r := ratios[key]
		if len(r) < 3 {
			t.Errorf("%s: only %d cases", key, len(r))
			continue
		}
		sort.Float64s(r)
		median := (r[len(r)/2] + r[(len(r)-1)/2]) / 2
		if r[0] < b.low || r[len(r)-1] > b.high || median < b.medianLow || median > b.medianHigh {
			t.Errorf("%s: ratio %.3f to %.3f, median %.3f, want %v", key, r[0], r[len(r)-1], median, b)
		}
	}
}

// Grey and real aerosols, 40-layer cases of the same independent calculation: warming and forcing.
func TestWarming_ColumnCases(t *testing.T) {
	aerosols := testAerosols(t)
	for _, c := range []struct {
		id           string
		warm, effect float64 // tolerated relative error
	}{
		{"C15", 0.10, 0.15}, {"C16", 0.05, 0.20}, // grey absorber without dust or gas
		{"C19", 0.15, 0.10}, {"C20", 0.10, 0.10}, {"C21", 0.05, 0.20}, // with gas
		{"C25", 0.05, 0.05}, {"C26", 0.10, 0.10}, // scattering
		{"C30", 0.05, 0.05},                                           // sunlight scattered only
		{"C33", 0.05, 0.05}, {"C34", 0.05, 0.05}, {"C35", 0.05, 0.05}, // grey with dust
		{"C39", 0.12, 0.10}, {"C40", 0.12, 0.10}, {"C41", 0.10, 0.10}, // layers
		{"C42", 0.05, 0.05}, {"C43", 0.05, 0.05}, // held low
		{"C48", 0.08, 0.10}, {"C54", 0.05, 0.05}, {"C55", 0.05, 0.05}, {"C58", 0.06, 0.05},
		{"C63", 0.18, 0.15}, {"C65", 0.18, 0.15}, {"C67", 0.18, 0.15}, // ice in a layer
	} {
		found := false
		for _, row := range readTable(t, "testdata/column_cases.csv") {
			if row["id"] != c.id {
				continue
			}
			found = true
			n := func(column string) float64 { return number(t, row[column]) }
			p := BaselinePlanet()
			p.DustOpticalDepth, p.LapseLimit = n("dust_tau"), n("lapse_K_km")/1000
			a, burden := aerosols[row["aerosol"]], n("column_kg_m2")
			if row["aerosol"] == "grey" {
				a, burden = grey(n("tau_ir"), n("ssa_ir"), n("g_ir"), n("tau_sw"), n("ssa_sw"), n("g_sw")), 1
			}
			switch row["profile"] {
			case "slab":
				a.Placement = Placement{Layer, n("z1_km") * 1000, n("z2_km") * 1000}
			case "exp":
				a.Placement = Placement{Kind: Low} // the cases chosen have 2 km
			}
			s := mustWarm(t, mustQuick(t, p), a, burden)
			if want := n("dT_K"); math.Abs(s.Warming/want-1) > c.warm {
				t.Errorf("%s %s: warming %.2f K, column %.2f K", c.id, row["note"], s.Warming, want)
			}
			if want := n("ERF_fixedTs_Wm2"); math.Abs(s.Forcing/want-1) > c.effect {
				t.Errorf("%s %s: forcing %.2f W/m2, column %.2f W/m2", c.id, row["note"], s.Forcing, want)
			}
		}
		if !found {
			t.Errorf("case %s is missing from testdata", c.id)
		}
	}
}

func TestWarming_ZeroBurden(t *testing.T) {
	q := mustQuick(t, BaselinePlanet())
	a := testAerosols(t)["al_rod"]
	s := mustWarm(t, q, a, 0)
	if s.Warming != 0 || s.Forcing != 0 || s.SunlightLoss != 0 || !s.Valid {
		t.Errorf("zero burden: %+v", s)
	}
	// An aerosol of almost nothing goes through the whole calculation and must agree with the short cut.
	s = mustWarm(t, q, a, 1e-15)
	if math.Abs(s.Warming) > 1e-8 || math.Abs(s.Forcing) > 1e-8 || math.Abs(s.SunlightLoss) > 1e-10 {
		t.Errorf("1e-15 kg/m2: warming %g K, forcing %g W/m2, loss %g", s.Warming, s.Forcing, s.SunlightLoss)
	}
}

func TestWarming_SmallBurdenIsLinear(t *testing.T) {
	q := mustQuick(t, BaselinePlanet())
	for name, a := range testAerosols(t) {
		for profile, p := range placements {
			a.Placement = p
			m := 1e-5 / a.Thermal.Ext[40]
			one, two := mustWarm(t, q, a, m), mustWarm(t, q, a, 2*m)
			if math.Abs(two.Warming/one.Warming-2) > 0.01 || math.Abs(two.Forcing/one.Forcing-2) > 0.01 {
				t.Errorf("%s %s: doubling %g kg/m2 takes %g K to %g K and %g to %g W/m2", name, profile, m, one.Warming, two.Warming, one.Forcing, two.Forcing)
			}
		}
	}
}

// Without dust or aerosol absorption, what the top takes in reaches the ground.
func TestSunlight_ConservativeScattering(t *testing.T) {
	p := BaselinePlanet()
	p.DustOpticalDepth = 0
	q := mustQuick(t, p)
	for _, depth := range []float64{1e-3, 0.1, 1, 10, 100} {
		a := grey(0, 0, 0, depth, 1, 0.7)
		f := q.sun.fluxes(a.Solar, 1)
		if math.Abs(f.top-f.ground) > 2e-4*q.planet.Sunlight/4 || math.Abs(f.mean-f.top) > 2e-4*q.planet.Sunlight/4 {
			t.Errorf("depth %g: %.6f W/m2 in at the top, %.6f in the mean, %.6f at the ground", depth, f.top, f.mean, f.ground)
		}
	}
	// Clear sky: all sunlight reaches the ground and the ground albedo is the Bond albedo.
	if b := q.Baseline(); math.Abs(b.SunAtGround-p.Sunlight/4) > 1e-6 || math.Abs(b.DirectSun-p.Sunlight/4) > 1e-6 || math.Abs(q.GroundAlbedo()-p.BondAlbedo) > 1e-8 {
		t.Errorf("clear sky: %.8f, direct %.8f W/m2 at the ground, ground albedo %.8f", b.SunAtGround, b.DirectSun, q.GroundAlbedo())
	}
}

// The layer against the two flux equations integrated numerically, upward and downward, by the Runge-Kutta method.
func TestEddington_AgainstIntegration(t *testing.T) {
	for _, c := range []struct{ tau, w, g, ground, mu float64 }{
		{0.3, 0.9, 0.5, 0.23, 0.67}, {2, 0.6, 0.3, 0.23, 0.33}, {1, 0.99, 0.4, 0.6, 0.93}, {0.5, 0, 0, 0.2, 0.5}, {0.05, 0.8, 0.2, 0.1, 0.0694},
	} {
		g1, g2 := (7-c.w*(4+3*c.g))/4, -(1-c.w*(4-3*c.g))/4
		g3 := (2 - 3*c.g*c.mu) / 4
		slope := func(tau, up, down, sun float64) (float64, float64) {
			s := sun * c.w * math.Exp(-tau/c.mu)
			return g1*up - g2*down - g3*s, g2*up - g1*down + (1-g3)*s
		}
		const n = 20000
		h := c.tau / n
		shoot := func(up0, sun float64) (up, down, integral float64) {
			up = up0
			for i := range n {
				x := float64(i) * h
				net0 := down - up + sun*c.mu*math.Exp(-x/c.mu)
				u1, d1 := slope(x, up, down, sun)
				u2, d2 := slope(x+h/2, up+h/2*u1, down+h/2*d1, sun)
				up, down = up+h*u2, down+h*d2
				net1 := down - up + sun*c.mu*math.Exp(-(x+h)/c.mu)
				integral += h * (net0 + net1) / 2
			}
			return up, down, integral
		}
		// The problem is linear in the upward flux at the top: find the one that meets the ground's condition.
		beamAtGround := c.mu * math.Exp(-c.tau/c.mu)
		miss := func(top, sun float64) float64 {
			up, down, _ := shoot(top, sun)
			return up - c.ground*(down+sun*beamAtGround)
		}
		top := -miss(0, 1) / miss(1, 0)
		up, down, integral := shoot(top, 1)
		got := eddington(c.tau, c.w, c.g, c.ground, c.mu)
		for _, v := range []struct {
			name      string
			got, want float64
		}{
			{"net at the top", got.netTop, c.mu - top},
			{"net at the ground", got.netGround, down + beamAtGround - up},
			{"down at the ground", got.down, down + beamAtGround},
			{"mean net", got.netMean, integral / c.tau},
		} {
			if math.Abs(v.got-v.want) > 2e-6 {
				t.Errorf("%+v: %s %.8f, integration gives %.8f", c, v.name, v.got, v.want)
			}
		}
	}
}

// Eddington's grey solution: sigma Ts^4 = F (1/f + 3/4 tau) for an aerosol transparent to sunlight, where convection does
// not interfere (a lapse limit of 20 K/km is steep enough up to depth 10) and nothing is absorbed aloft.
func TestWarming_OpaqueGreyLimit(t *testing.T) {
	p := BaselinePlanet()
	p.DustOpticalDepth, p.LapseLimit = 0, 20e-3
	q := mustQuick(t, p)
	for _, depth := range []float64{0.3, 1, 3, 10} {
		s := mustWarm(t, q, grey(depth, 0, 0, 0, 0, 0), 1)
		if s.Rule != Radiative {
			t.Errorf("depth %g: %v rule", depth, s.Rule)
		}
		var want float64 // independent sum over bands, by the exact Planck integral
		for b, planck := range Planck(ThermalEdges(), s.SurfaceTemperature) {
			want += planck / (1/q.table.emission[b] + 0.75*depth)
		}
		if math.Abs(want-109.9125) > 1e-4 {
			t.Errorf("depth %g at %.3f K: Eddington emits %.5f W/m2, absorbed 109.9125", depth, s.SurfaceTemperature, want)
		}
		// Against the plain grey law with the mean emission 0.92 the bands differ by little.
		plain := math.Pow(109.9125/stefanBoltzmann*(1/0.892+0.75*depth), 0.25)
		if math.Abs(s.SurfaceTemperature-plain) > 3 {
			t.Errorf("depth %g: %.2f K, grey law %.2f K", depth, s.SurfaceTemperature, plain)
		}
	}
}

// The energy balance recomputed from the equations in the package comment, with the exact Planck integral in place of
// the table and the sums written out afresh.
func TestWarming_BalanceCloses(t *testing.T) {
	q := mustQuick(t, BaselinePlanet())
	base := q.Baseline()
	edges := ThermalEdges()
	ground := Planck(edges, base.SurfaceTemperature)
	seen := map[Rule]int{}
	for name, a := range testAerosols(t) {
		for _, place := range placements {
			a.Placement = place
			s := mustWarm(t, q, a, 0.3/a.Thermal.Ext[40])
			seen[s.Rule]++
			if got := sum(s.OutgoingSpectrum); math.Abs(got-s.AbsorbedSunlight) > 1e-7 {
				t.Errorf("%s: sends %.9f W/m2, absorbs %.9f", name, got, s.AbsorbedSunlight)
			}
			f, f0 := q.sun.fluxes(a.Solar, s.Burden), q.sun.fluxes(a.Solar, 0)
			planck := Planck(edges, s.SurfaceTemperature)
			q0 := (f0.top + f0.ground) / 2
			var out float64
			for b := range planck {
				tau := s.Burden * (a.Thermal.Ext[b] - a.Thermal.GSca[b])
				out += planck[b] / (1/(q.table.emission[b]*q0/f0.top) + 0.75*tau)
			}
			x := sum(planck)/out - 1
			radiative := ((f.top+f.ground)/2+x*q0*f.mean/f0.mean)/(1+x) - out
			if s.Rule == Radiative && math.Abs(radiative) > 1e-4 || radiative < -1e-4 {
				t.Errorf("%s %v %v: radiative gain %.3g W/m2 at the answer", name, place, s.Rule, radiative)
			}
			if s.Rule != Convective {
				continue
			}
			var up, through, up0, air float64
			lit := math.Min(1, f.top/f0.top)
			for b := range planck {
				r, tr, e := thermalSlab(s.Burden*a.Thermal.Ext[b], s.Burden*a.Thermal.Sca[b], s.Burden*a.Thermal.GSca[b])
				var heights [3]float64
				place.emissionHeights(s.Burden*(a.Thermal.Ext[b]-a.Thermal.GSca[b]), 188.92*210/3.71, &heights)
				var mean float64
				for i, z := range heights {
					at := math.Max(s.SurfaceTemperature-2.5e-3*z, math.Pow(f.top/2/stefanBoltzmann, 0.25))
					mean += emissionWeights[i] * Planck(edges, at)[b]
				}
				down := lit * q.table.back[b] * ground[b]
				u := e*mean + r*down + tr*(0.95*planck[b]+0.05*(e*mean+tr*down))/(1-0.05*r)
				u0 := 0.95*ground[b] + 0.05*q.table.back[b]*ground[b]
				up, up0, through = up+u, up0+u0, through+q.table.transmission[b]*u
				air += q.table.emission[b]*ground[b] - q.table.transmission[b]*u0
			}
			share := (f0.top - f0.ground) / 2 / air
			if gain := f.top - through - air*(lit*share+(1-share)*up/up0); math.Abs(gain) > 1e-4 {
				t.Errorf("%s %v: convective gain %.3g W/m2 at the answer", name, place, gain)
			}
		}
	}
	if seen[Radiative] < 5 || seen[Convective] < 5 {
		t.Errorf("rules seen: %v; want both", seen)
	}
}

// The gain must fall with the ground's temperature, or the root is not the only one.
func TestGain_FallsWithTemperature(t *testing.T) {
	q := mustQuick(t, BaselinePlanet())
	for name, a := range testAerosols(t) {
		for _, place := range placements {
			a.Placement = place
			for _, depth := range []float64{0.1, 1, 10, 60} {
				c := q.newColumn(a, depth/a.Thermal.Ext[40])
				last := math.Inf(1)
				for temperature := 60.0; temperature <= 600; temperature += 5 {
					n, _ := c.gain(temperature)
					if n >= last {
						t.Errorf("%s %v depth %g: gain rises to %g W/m2 at %g K", name, place, depth, n, temperature)
						break
					}
					last = n
				}
			}
		}
	}
}

// Any aerosol the types allow gives a finite state, and more infrared absorber at the same solar optics never cools.
func TestWarming_Properties(t *testing.T) {
	q := mustQuick(t, BaselinePlanet())
	rapid.Check(t, func(t *rapid.T) {
		logUniform := func(name string, low, high float64) float64 {
			return math.Exp(rapid.Float64Range(math.Log(low), math.Log(high)).Draw(t, name))
		}
		a := grey(logUniform("thermal", 1e-3, 1e4), rapid.Float64Range(0, 1).Draw(t, "thermal albedo"), rapid.Float64Range(-0.9, 0.99).Draw(t, "thermal g"),
			logUniform("solar", 1e-3, 1e3), rapid.Float64Range(0, 1).Draw(t, "solar albedo"), rapid.Float64Range(-0.5, 0.99).Draw(t, "solar g"))
		bottom := rapid.Float64Range(0, 40e3).Draw(t, "bottom")
		a.Placement = Placement{Kind(rapid.IntRange(0, 2).Draw(t, "kind")), bottom, bottom + rapid.Float64Range(100, 20e3).Draw(t, "depth")}
		burden := logUniform("burden", 1e-6, 1e-1)
		s, err := q.Warming(a, burden)
		if err != nil {
			t.Fatal(err)
		}
		for _, v := range append([]float64{s.Warming, s.Forcing, s.SunAtGround, s.DirectSun, s.SunlightLoss}, s.OutgoingSpectrum...) {
			if math.IsNaN(v) || math.IsInf(v, 0) {
				t.Fatalf("not finite: %+v", s)
			}
		}
		if s.SunAtGround < -1e-9 || s.DirectSun > s.SunAtGround+1e-6 || s.Forcing*s.Warming < -1e-12 {
			t.Fatalf("sun %g, direct %g W/m2, forcing %g W/m2 with warming %g K", s.SunAtGround, s.DirectSun, s.Forcing, s.Warming)
		}
		if a.Placement.Kind == Low || a.Placement.Kind == Layer && a.Placement.Bottom < 10e3 || s.OpticalDepthSolar > testedSolarDepth {
			return // near the ground a little absorber can emit more than it blocks
		}
		// Scattering alone blocks more than absorption does, so the rule holds for absorbers; and sunlight absorbed aloft
		// can leave the ground cooler below a thicker infrared layer, so for aerosol that only scatters sunlight.
		less, more := a, a
		less.Solar.Sca, less.Thermal.Sca = a.Solar.Ext, make([]float64, len(a.Thermal.Ext))
		less.Thermal.GSca = less.Thermal.Sca
		more.Solar, more.Thermal = less.Solar, less.Thermal
		more.Thermal.Ext = make([]float64, len(a.Thermal.Ext))
		for b := range more.Thermal.Ext {
			more.Thermal.Ext[b] = a.Thermal.Ext[b] * 1.2
		}
		if s, err = q.Warming(less, burden); err != nil {
			t.Fatal(err)
		}
		m, err := q.Warming(more, burden)
		if err != nil {
			t.Fatal(err)
		}
		if m.Warming < s.Warming-1e-9 {
			t.Fatalf("20%% more absorber takes %g K to %g K", s.Warming, m.Warming)
		}
	})
}
