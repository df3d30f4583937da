package greenhouse

import (
	"errors"
	"math"
	"strings"
	"testing"
)

func TestCurve_MeetsGoal(t *testing.T) {
	q := mustQuick(t, BaselinePlanet())
	aerosols := testAerosols(t)
	for _, c := range []struct {
		aerosol string
		place   string
		goal    float64
		want    float64 // burden [mg/m2] at which the full column, interpolated between its cases, has that warming
		tol     float64
	}{
		{"al_rod", "mixed", 19.74, 40, 0.06},
		{"al_rod", "mixed", 43.38, 160, 0.06},
		{"fe_rod", "mixed", 21.93, 160, 0.06},
		{"fe_rod", "mixed", 49.84, 640, 0.06},
		{"al_rod", "low2", 23.99, 160, 0.20},
		{"fe_rod", "low2", 9.99, 160, 0.05},
		{"al_shell_r5_w10nm", "mixed", 8.85, 40, 0.10},
	} {
		a := aerosols[c.aerosol]
		a.Placement = placements[c.place]
		curve, err := q.Curve(a, c.goal)
		if err != nil {
			t.Fatal(err)
		}
		if !curve.Reached || curve.Cause != "" || curve.Burden != curve.At.Burden || math.Abs(curve.At.Warming-c.goal) > 1e-6 {
			t.Errorf("%s %s: reached %v, cause %q, %.9g K at %g", c.aerosol, c.place, curve.Reached, curve.Cause, curve.At.Warming, curve.Burden)
		}
		if math.Abs(curve.Burden*1e6/c.want-1) > c.tol {
			t.Errorf("%s %s: %.4g K at %.4g mg/m2, column at %g", c.aerosol, c.place, c.goal, curve.Burden*1e6, c.want)
		}
		again := mustWarm(t, q, a, curve.Burden)
		if again.Warming != curve.At.Warming {
			t.Errorf("%s: Warming gives %.12g K, Curve %.12g K", c.aerosol, again.Warming, curve.At.Warming)
		}
		checkPoints(t, curve)
	}
}

func checkPoints(t *testing.T, c Curve) {
	t.Helper()
	if len(c.Points) < 10 {
		t.Errorf("only %d points", len(c.Points))
	}
	holdsAt := !c.Reached
	for i, p := range c.Points {
		if i > 0 && (p.Burden <= c.Points[i-1].Burden || p.Burden > 1.3*c.Points[i-1].Burden) {
			t.Errorf("points %d and %d: burdens %g and %g", i-1, i, c.Points[i-1].Burden, p.Burden)
		}
		if p.Warming > c.Max.Warming {
			t.Errorf("point %g K above Max %g K", p.Warming, c.Max.Warming)
		}
		holdsAt = holdsAt || p.Burden == c.Burden
	}
	if !holdsAt {
		t.Error("the answer is not on the curve")
	}
}

// Largest warmings of the independent column: aluminium rods 74.4 K at 1.0 g/m2, iron rods 83.7 K at 4.2 g/m2, aluminium
// shells 20.8 K at 0.32 g/m2.
func TestCurve_Unreachable(t *testing.T) {
	q := mustQuick(t, BaselinePlanet())
	aerosols := testAerosols(t)
	for _, c := range []struct {
		aerosol, place string
		cause          string
		max, burden    float64 // [K], [kg/m2]; zero: not checked
	}{
		{"al_rod", "mixed", CauseShading, 74.4, 1.0e-3},
		{"fe_rod", "mixed", CauseShading, 83.7, 4.2e-3},
		{"al_shell_r5_w10nm", "mixed", CauseShading, 20.8, 0.32e-3},
		{"fe_rod", "low2", CauseSaturate, 0, 0},
		{"graphite_r0.25", "mixed", CauseNever, 0, 0},
		{"nacl_r3", "mixed", CauseNever, 0, 0},
	} {
		a := aerosols[c.aerosol]
		a.Placement = placements[c.place]
		curve, err := q.Curve(a, 150)
		if err != nil {
			t.Fatal(err)
		}
		if curve.Reached || curve.Cause != c.cause || curve.Burden != 0 {
			t.Errorf("%s %s: reached %v, cause %q, burden %g; want %q", c.aerosol, c.place, curve.Reached, curve.Cause, curve.Burden, c.cause)
		}
		if c.max > 0 && (math.Abs(curve.Max.Warming/c.max-1) > 0.06 || math.Abs(curve.Max.Burden/c.burden-1) > 0.25) {
			t.Errorf("%s: at most %.1f K at %.3g kg/m2, column %.1f K at %.3g", c.aerosol, curve.Max.Warming, curve.Max.Burden, c.max, c.burden)
		}
		checkPoints(t, curve)
	}
	// Grey, transparent to sunlight: warms without limit until the ground leaves the range.
	curve, err := q.Curve(grey(10, 0, 0, 0, 0, 0), 500)
	if err != nil {
		t.Fatal(err)
	}
	if curve.Reached || curve.Cause != CauseSaturate && curve.Cause != CauseValidity {
		t.Errorf("grey: reached %v, cause %q", curve.Reached, curve.Cause)
	}
}

// A goal between the best scanned point and the true top is found by searching the top.
func TestCurve_GoalJustUnderTheTop(t *testing.T) {
	q := mustQuick(t, BaselinePlanet())
	a := testAerosols(t)["al_shell_r5_w10nm"]
	all, err := q.Curve(a, 150)
	if err != nil {
		t.Fatal(err)
	}
	var scanned float64
	for _, p := range all.Points {
		if p.Burden != all.Max.Burden {
			scanned = math.Max(scanned, p.Warming)
		}
	}
	if scanned >= all.Max.Warming {
		t.Fatalf("the top, %g K, is not above the scan, %g K", all.Max.Warming, scanned)
	}
	goal := scanned + 0.9*(all.Max.Warming-scanned)
	c, err := q.Curve(a, goal)
	if err != nil {
		t.Fatal(err)
	}
	if !c.Reached || math.Abs(c.At.Warming-goal) > 1e-6 || c.Burden > all.Max.Burden {
		t.Errorf("goal %.9g K: reached %v, %.9g K at %g", goal, c.Reached, c.At.Warming, c.Burden)
	}
	if c.At.Valid || len(c.At.Notes) == 0 { // solar depth about 7
		t.Errorf("an answer at solar depth %.2g is not flagged", c.At.OpticalDepthSolar)
	}
	over, err := q.Curve(a, all.Max.Warming+1e-3)
	if err != nil || over.Reached || over.Cause != CauseShading {
		t.Errorf("goal above the top: %v, reached %v, cause %q", err, over.Reached, over.Cause)
	}
}

func TestScan(t *testing.T) {
	q := mustQuick(t, BaselinePlanet())
	a := testAerosols(t)["fe_rod"]
	for _, to := range []float64{1e-8, 1.6e-4, 3e-3} {
		c, err := q.Scan(a, to)
		if err != nil {
			t.Fatal(err)
		}
		if !c.Reached || c.At.Burden != to || c.Points[len(c.Points)-1].Burden != to || c.At.Warming != mustWarm(t, q, a, to).Warming {
			t.Errorf("to %g: %+v", to, c.At)
		}
		checkPoints(t, c)
	}
}

func TestErrors(t *testing.T) {
	q := mustQuick(t, BaselinePlanet())
	good := grey(100, 0.5, 0, 10, 0.9, 0.5)
	nan := grey(100, 0.5, 0, 10, 0.9, 0.5)
	nan.Thermal.Ext[3] = math.NaN()
	bright := grey(100, 1.5, 0, 10, 0.9, 0.5)
	layer := good
	layer.Placement = Placement{Layer, 5e3, 5e3}
	strange := good
	strange.Placement.Kind = 9
	warm := func(a Aerosol, m float64) error { _, err := q.Warming(a, m); return err }
	curve := func(a Aerosol, goal float64) error { _, err := q.Curve(a, goal); return err }
	scan := func(a Aerosol, to float64) error { _, err := q.Scan(a, to); return err }
	planet := func(change func(*Planet)) error {
		p := BaselinePlanet()
		change(&p)
		_, err := NewQuick(p)
		return err
	}
	for _, c := range []struct {
		err  error
		want string
	}{
		{warm(good, math.NaN()), "burden NaN"},
		{warm(good, -1), "burden -1"},
		{warm(good, math.Inf(1)), "burden +Inf"},
		{warm(nan, 1e-4), "thermal optics, band 3"},
		{warm(bright, 1e-4), "thermal optics, band 0"},
		{warm(Aerosol{}, 1e-4), "want 85 each"},
		{warm(layer, 1e-4), "bottom < top"},
		{warm(strange, 1e-4), "placement Kind(9)"},
		{curve(good, 0), "goal 0 K"},
		{curve(good, math.NaN()), "goal NaN"},
		{curve(grey(0, 0, 0, 0, 0, 0), 10), "no extinction"},
		{curve(nan, 10), "thermal optics"},
		{scan(good, 0), "burden 0"},
		{planet(func(p *Planet) { p.Sunlight = math.NaN() }), "sunlight: NaN W/m2 is outside 50 W/m2"},
		{planet(func(p *Planet) { p.DustOpticalDepth = 1.01 }), "dust optical depth"},
		{planet(func(p *Planet) { p.Sunlight = 60 }), "outside 150 to 300 K"},
		{planet(func(p *Planet) { p.BondAlbedo, p.DustOpticalDepth = 0.03, 1 }), "bond albedo"},
		{planet(func(p *Planet) { p.Emissivity = 2; p.Gravity = 0 }), "gravity"},
	} {
		if c.err == nil || !strings.Contains(c.err.Error(), c.want) {
			t.Errorf("got %v, want %q", c.err, c.want)
		}
	}
	if _, _, err := descend(200, func(float64) float64 { return 1 }); !errors.Is(err, errNoBalance) {
		t.Errorf("a gain that never falls: %v", err)
	}
}

func TestDepartures(t *testing.T) {
	if d := BaselinePlanet().Departures(); len(d) != 0 {
		t.Errorf("the baseline departs from itself: %q", d)
	}
	p := BaselinePlanet()
	p.SurfacePressure, p.DustOpticalDepth = 900, 0.7
	if d := p.Departures(); len(d) != 1 || !strings.Contains(d[0], "surface pressure 900 Pa against 610 Pa") {
		t.Errorf("%q", d)
	}
	for _, lines := range [][]string{Accuracy(), LeftOut()} {
		if len(lines) < 5 {
			t.Errorf("%d lines", len(lines))
		}
	}
}
