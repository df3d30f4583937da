package reports

import (
	"math"
	"strings"
	"testing"

	"hazewright"
)

// gateOf holds one condition against a design of one population.
func gateOf(t *testing.T, id string, change func(r *hazewright.Result, d *hazewright.DesignResult, p *hazewright.Particle)) Gate {
	t.Helper()
	r := fixture()
	d := &r.Designs[0]
	d.Cases = nil // one case is enough for a rule
	change(r, d, &d.Design.Particles[0])
	for _, g := range Gates(r, d) {
		if g.ID == id {
			return g
		}
	}
	t.Fatalf("no gate %q", id)
	return Gate{}
}

// WHO counting rule [WHO1997]: length > 5 um, diameter < 3 um, aspect > 3:1, all strict.
func TestRespirableFibreRule(t *testing.T) {
	for _, c := range []struct {
		length, diameter, spread float64
		want                     string
	}{
		{8e-6, 80e-9, 1, Tripped},
		{5e-6, 80e-9, 1, NotTripped},
		{math.Nextafter(5e-6, 1), 80e-9, 1, Tripped},
		{20e-6, 3e-6, 1, NotTripped},
		{20e-6, math.Nextafter(3e-6, 0), 1, Tripped},
		{8e-6, 2.8e-6, 1, NotTripped}, // aspect 2.86
		{4e-6, 80e-9, 1.2, Tripped},   // two standard deviations: 5.76 um
		{4e-6, 80e-9, 1.1, NotTripped},
	} {
		g := gateOf(t, "respirable-fibre", func(_ *hazewright.Result, _ *hazewright.DesignResult, p *hazewright.Particle) {
			p.Length, p.Diameter, p.Spread = c.length, c.diameter, c.spread
		})
		if g.State != c.want {
			t.Errorf("%v x %v, spread %v: %s (%s), want %s", c.length, c.diameter, c.spread, g.State, g.Finding, c.want)
		}
	}
	g := gateOf(t, "respirable-fibre", func(_ *hazewright.Result, _ *hazewright.DesignResult, p *hazewright.Particle) {
		p.Shape, p.Radius = "sphere", 1e-6
	})
	if g.State != NotTripped {
		t.Errorf("spheres: %s", g.State)
	}
}

// ISO 80004-1: under 100 nm in at least one dimension.
func TestNanoscaleRule(t *testing.T) {
	for _, c := range []struct {
		shape            string
		diameter, spread float64
		want             string
	}{
		{"rod", 100e-9, 1, NotTripped}, {"rod", math.Nextafter(100e-9, 0), 1, Tripped}, {"rod", 100e-9, 1.5, NotTripped}, // lengths spread, not diameters
		{"sphere", 200e-9, 1, NotTripped}, {"sphere", 200e-9, 1.5, Tripped}, {"sphere", 99e-9, 1, Tripped},
	} {
		g := gateOf(t, "nanoscale", func(_ *hazewright.Result, _ *hazewright.DesignResult, p *hazewright.Particle) {
			p.Shape, p.Diameter, p.Radius, p.Spread = c.shape, c.diameter, c.diameter/2, c.spread
		})
		if g.State != c.want {
			t.Errorf("%s %v, spread %v: %s, want %s", c.shape, c.diameter, c.spread, g.State, c.want)
		}
	}
}

func TestMaterialRules(t *testing.T) {
	for _, c := range []struct {
		gate, material, table, answer string // answer: does it conduct, does its dust burn
		want                          string
	}{
		{"combustible-dust", "iron", "", "yes", Tripped}, {"combustible-dust", "halite", "", "no", NotTripped},
		{"combustible-dust", "iron.csv", "iron.csv", "unknown", NotKnown},
		{"pyrophoric-iron", "iron", "", "yes", Tripped}, {"pyrophoric-iron", "iron-querry", "", "yes", Tripped},
		{"pyrophoric-iron", "aluminium", "", "yes", NotTripped}, {"pyrophoric-iron", "x.csv", "x.csv", "unknown", NotKnown},
		{"conductive-fibres", "graphite", "", "yes", Tripped}, {"conductive-fibres", "halite", "", "no", NotTripped},
		{"conductive-fibres", "x.csv", "x.csv", "unknown", NotKnown},
		{"contamination", "iron", "", "yes", Tripped}, {"contamination", "water-ice", "", "no", NotTripped},
	} {
		g := gateOf(t, c.gate, func(_ *hazewright.Result, d *hazewright.DesignResult, p *hazewright.Particle) {
			p.Material = hazewright.MaterialRef{Name: c.material, Table: c.table}
			d.Populations[0].Material, d.Populations[0].Conducts, d.Populations[0].Combustible = c.material, c.answer, c.answer
		})
		if g.State != c.want {
			t.Errorf("%s of %s: %s (%s), want %s", c.gate, c.material, g.State, g.Finding, c.want)
		}
	}
}

// A skin that the study does not give is -1 there: the finding has what the engine took.
func TestPyrophoricFindingNamesTheSkin(t *testing.T) {
	for skin, want := range map[float64]string{3e-9: "iron 80 nm thin, oxide skin 3 nm", 0: "iron 80 nm thin, no oxide skin"} {
		g := gateOf(t, "pyrophoric-iron", func(_ *hazewright.Result, d *hazewright.DesignResult, p *hazewright.Particle) {
			p.Oxide, d.Populations[0].Oxide = -1, skin
		})
		if g.Finding != want {
			t.Errorf("finding %q, want %q", g.Finding, want)
		}
	}
}

// A gate trips if it trips in any sticking case, and says in which: the half-loss time is
// 0.12 yr if every touch sticks and 10.6 yr if few do, and from 1 yr on it trips.
func TestGatesLookAtEveryCase(t *testing.T) {
	r := fixture()
	d := &r.Designs[0]
	d.Cases[1].Figures["half_loss_time"] = hazewright.FigureValue{Value: 10.6 * year}
	for _, g := range Gates(r, d) {
		switch g.ID {
		case "slow-to-reverse":
			if g.State != Tripped || !strings.Contains(g.Finding, "at 1 % sticking: half of the warming lasts 10.6 yr") ||
				!strings.Contains(g.Finding, "at 100 % sticking: "+NotTripped) {
				t.Errorf("%s: %s", g.State, g.Finding)
			}
		case "respirable-fibre": // the same in both, and said once
			if strings.Contains(g.Finding, "sticking") {
				t.Errorf("%s", g.Finding)
			}
		}
	}
}

// Rules on figures trip from their threshold on, and leave a missing figure not known.
func TestFigureRules(t *testing.T) {
	for _, c := range []struct {
		gate, figure string
		threshold    float64
		upTo         bool // trips up to the threshold and not from it on
	}{
		{"sunlight", "sunlight_loss", 0.01, false},
		{"radio", "radio_loss_ka", 0.1, false},
		{"layer-field", "layer_field", 10e3, false},
		{"slow-to-reverse", "half_loss_time", year, false},
		{"ending", "half_loss_time", 30 * year, true},
	} {
		under, over := NotTripped, Tripped
		if c.upTo {
			under, over = Tripped, NotTripped
		}
		for value, want := range map[float64]string{
			math.Nextafter(c.threshold, 0): under, c.threshold: Tripped, c.threshold * 1.001: over,
		} {
			g := gateOf(t, c.gate, func(_ *hazewright.Result, d *hazewright.DesignResult, _ *hazewright.Particle) {
				d.Figures[c.figure] = hazewright.FigureValue{Value: value}
			})
			if g.State != want {
				t.Errorf("%s at %s = %v: %s, want %s", c.gate, c.figure, value, g.State, want)
			}
		}
		g := gateOf(t, c.gate, func(_ *hazewright.Result, d *hazewright.DesignResult, _ *hazewright.Particle) {
			for _, id := range []string{"radio_loss_uhf", "radio_loss_s", "radio_loss_x", "radio_loss_ka", c.figure} {
				d.Figures[id] = hazewright.FigureValue{Null: true, Why: "sublimes"}
			}
		})
		if g.State != NotKnown {
			t.Errorf("%s without a value: %s, want not known", c.gate, g.State)
		}
	}
}

// Special Regions: -28 degC = 245.15 K [COSPAR], present warm-season maximum + warming.
func TestSpecialRegionsRule(t *testing.T) {
	for _, c := range []struct {
		warmest, warming float64
		null             bool
		want             string
	}{
		{220, 25.15, false, Tripped}, {220, 25.14, false, NotTripped}, {288, 1, false, Tripped}, {220, 0, true, NotKnown}, {288, 0, true, Tripped},
	} {
		g := gateOf(t, "special-regions", func(r *hazewright.Result, d *hazewright.DesignResult, _ *hazewright.Particle) {
			r.Study.World.WarmSeasonMaximum = c.warmest
			d.Figures["warming"] = hazewright.FigureValue{Value: c.warming, Null: c.null, Why: "sublimes"}
		})
		if g.State != c.want {
			t.Errorf("%v K + %v K: %s (%s), want %s", c.warmest, c.warming, g.State, g.Finding, c.want)
		}
		if c.want == Tripped && !strings.Contains(g.Finding, "needs water-activity review") {
			t.Errorf("finding %q", g.Finding)
		}
	}
}

// 1 kg/s over 1.444e14 m2 is 0.2185 mg/m2 a year: 31 557 600 kg / 1.444e14 m2.
func TestIceRecordsFinding(t *testing.T) {
	g := gateOf(t, "ice-records", func(_ *hazewright.Result, d *hazewright.DesignResult, _ *hazewright.Particle) {
		d.Figures["production_rate"] = hazewright.FigureValue{Value: 1}
	})
	if g.State != Tripped || !strings.HasPrefix(g.Finding, "0.219 mg/m2") {
		t.Errorf("%s: %s", g.State, g.Finding)
	}
}

// No condition ever clears anything, and each says what to do and on whose word.
func TestGatesNeverClear(t *testing.T) {
	seen := map[string]bool{}
	for _, def := range GateTable() {
		if seen[def.ID] || def.Title == "" || def.Text == "" || def.NextStep == "" || def.Source == "" {
			t.Errorf("gate %q is doubled or incomplete", def.ID)
		}
		seen[def.ID] = true
	}
	r := fixture()
	for i := range r.Designs {
		for _, g := range Gates(r, &r.Designs[i]) {
			if g.State != Tripped && g.State != NotTripped && g.State != NotKnown {
				t.Errorf("%s: state %q", g.ID, g.State)
			}
			for _, word := range []string{"clear", "safe", "passed", "approved"} {
				if strings.Contains(strings.ToLower(g.State), word) {
					t.Errorf("%s: state %q reads as a clearance", g.ID, g.State)
				}
			}
			if g.Finding == "" {
				t.Errorf("%s: no finding", g.ID)
			}
		}
		if g, ok := largestCaution(r, &r.Designs[i]); !ok || g.State != Tripped {
			t.Errorf("%s: no largest caution", r.Designs[i].Name)
		}
	}
	if !strings.Contains(Deferral, "not a clearance") || !strings.Contains(Deferral, "licensed practice") {
		t.Errorf("deferral %q", Deferral)
	}
}
