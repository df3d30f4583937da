package settling

import (
	"math"
	"testing"

	"gonum.org/v1/gonum/floats/scalar"
)

func testPlume() Plume {
	b := RodOf(8e-6, 80e-9, iron)
	return Plume{MassRate: 20, Points: 12, Mass: b.Mass, Kernel: must(Kernel(state("co2", 610, 210), b)), Sticking: 0.2, Wind: 5, Radius: 5, Spreading: 0.1}
}

// The survival against the steps of a direct integration of dn/dt = -s K n^2 along
// the cone, the exact solution of a constant kernel with dilution.
func TestPlumeSurvival_DirectIntegration(t *testing.T) {
	p := testPlume()
	got := must(PlumeSurvival(p))
	if got < 0.01 || got > 0.99 {
		t.Fatalf("survival %g shows nothing", got)
	}
	// Midpoint steps in y = ln(1 + alpha x/R0): number flux N, dN/dx = -s K
	// N^2/(pi r^2 u^2).
	start := p.MassRate / p.Points / p.Mass
	n := start
	const steps, end = 20000, 25.0
	h := end / steps
	slope := func(y, n float64) float64 {
		r := p.Radius * math.Exp(y)
		return -p.Sticking * p.Kernel * n * n / (math.Pi * r * r * p.Wind * p.Wind) * r / p.Spreading
	}
	for i := range steps {
		y := float64(i) * h
		n += h * slope(y+h/2, n+h/2*slope(y, n))
	}
	if !scalar.EqualWithinRel(got, n/start, 1e-5) {
		t.Errorf("survival %.6g, direct integration %.6g", got, n/start)
	}
}

func TestPlumePoints(t *testing.T) {
	p := testPlume()
	points := must(PlumePoints(p, 0.9))
	p.Points = points
	if s := must(PlumeSurvival(p)); s < 0.9 {
		t.Errorf("%g points: survival %g", points, s)
	}
	p.Points = points - 1
	if s := must(PlumeSurvival(p)); s >= 0.9 {
		t.Errorf("one point fewer still survives by %g", s)
	}
	p.Sticking = 0
	if n := must(PlumePoints(p, 0.9)); n != 1 {
		t.Errorf("without sticking %g points", n)
	}
	for _, s := range []float64{0, 1, math.NaN()} {
		if _, err := PlumePoints(p, s); err == nil {
			t.Errorf("survival %g: no error", s)
		}
	}
	for name, change := range map[string]func(*Plume){
		"rate": func(p *Plume) { p.MassRate = math.NaN() }, "points": func(p *Plume) { p.Points = 0.5 },
		"mass": func(p *Plume) { p.Mass = 0 }, "wind": func(p *Plume) { p.Wind = 0 },
		"radius": func(p *Plume) { p.Radius = -1 }, "spreading": func(p *Plume) { p.Spreading = 0 },
		"sticking": func(p *Plume) { p.Sticking = 1.1 }, "kernel": func(p *Plume) { p.Kernel = math.Inf(1) },
	} {
		p := testPlume()
		change(&p)
		if _, err := PlumeSurvival(p); err == nil {
			t.Errorf("%s: no error", name)
		}
	}
}
