package reports

import (
	"fmt"
	"math"

	"hazewright"
	"hazewright/logistics"
)

// check returns nil if r can be written: there is a study, every figure of the table
// is present in every design, and every number is finite. The error names the first
// place that breaks this, which is a fault of the program and not of the study.
func check(r *hazewright.Result) error {
	if r == nil || r.Study == nil {
		return fmt.Errorf("reports: no assessed study to write")
	}
	c := checker{}
	c.numbers("baseline", r.Baseline.SurfaceTemperature, r.Baseline.EffectiveTemp, r.Baseline.ScaleHeight,
		r.Baseline.Area, r.Baseline.SunAtGround)
	c.numbers("baseline: thermal bands", r.Baseline.ThermalEdges...)
	c.numbers("baseline: outgoing flux", r.Baseline.Outgoing...)
	for i := range r.Designs {
		c.design(&r.Designs[i])
	}
	for _, b := range r.Study.Benchmarks {
		c.numbers("benchmark of "+b.Figure, b.Value)
	}
	return c.err
}

type checker struct{ err error }

func (c *checker) numbers(where string, values ...float64) {
	for _, v := range values {
		if c.err == nil && (math.IsNaN(v) || math.IsInf(v, 0)) {
			c.err = fmt.Errorf("reports: %s is %v; please report this as a fault of the program", where, v)
		}
	}
}

func (c *checker) figures(where string, figures map[string]hazewright.FigureValue) {
	for _, def := range hazewright.Figures() {
		v, ok := figures[def.ID]
		if !ok {
			if c.err == nil {
				c.err = fmt.Errorf("reports: %s: figure %s is missing; please report this as a fault of the program", where, def.ID)
			}
			continue
		}
		if !v.Null {
			c.numbers(fmt.Sprintf("%s: figure %s", where, def.ID), v.Value)
		}
	}
}

func (c *checker) design(d *hazewright.DesignResult) {
	at := fmt.Sprintf("design %q", d.Name)
	if d.Design == nil && c.err == nil {
		c.err = fmt.Errorf("reports: %s has no input; please report this as a fault of the program", at)
		return
	}
	c.figures(at, d.Figures)
	c.limits(at, d.Limits)
	for _, k := range d.Cases {
		c.figures(at+", "+k.Name, k.Figures)
		c.limits(at+", "+k.Name, k.Limits)
		c.numbers(at+": sticking case", k.Sticking)
		c.losses(at+", "+k.Name, k.Losses)
		if k.Programme != nil {
			c.programme(at+", "+k.Name, k.Programme)
		}
	}
	c.losses(at, d.Losses)
	c.numbers(at+": share inside the layer", d.LayerShare)
	for _, curve := range [][]hazewright.CurvePoint{d.Curve, d.CurveLow, {d.Goal}} {
		for _, p := range curve {
			c.numbers(at+": warming curve", p.Burden, p.Warming, p.SunlightLoss)
		}
	}
	c.numbers(at+": largest warming", d.MaxWarming, d.MaxBurden)
	for _, p := range d.Spectrum {
		c.numbers(at+": spectrum", p.Wavelength, p.Ext, p.Abs, p.Sca, p.G, p.Err)
	}
	c.numbers(at+": outgoing flux", d.Outgoing...)
	for _, p := range d.Profile {
		c.numbers(at+": profile", p.Height, p.Mass)
	}
	for _, p := range d.FallSpeed {
		c.numbers(at+": fall speed", p.Height, p.Value)
	}
	for _, p := range d.Populations {
		c.numbers(at+": population "+p.Name, p.Share, p.Density, p.ParticleMass, p.KappaThermal, p.KappaThermalExt,
			p.KappaSolarExt, p.KappaSolarAbs, p.OpticsError, p.FallSpeed, p.Lifetime, p.Oxide)
	}
	if d.Programme != nil {
		c.programme(at, d.Programme)
	}
}

func (c *checker) losses(where string, losses []hazewright.Loss) {
	for _, l := range losses {
		c.numbers(where+": loss "+l.Name, l.Share, l.LifetimeAlone)
	}
}

// programme checks the parts of a programme that charts and files show, and that the
// columns of its histories are of one length.
func (c *checker) programme(where string, p *logistics.Programme) {
	for _, f := range p.Flows {
		c.numbers(where+": mass flow "+f.Name, f.Rate)
	}
	for _, way := range []logistics.Way{p.Local, p.Shipped} {
		c.numbers(where+": landed mass", way.PlantMass, way.PowerMass, way.ParticleMass, way.LandedMass, way.Flights, way.Windows,
			way.LandedPerWindow, way.LandedPerWindowNext, way.FlightsPerWindow)
	}
	c.numbers(where+": crossover", p.Crossover.Value)
	for _, s := range []logistics.Series{p.BuildUp, p.Ending} {
		for _, column := range [][]float64{s.Time, s.Capacity, s.Production, s.Airborne, s.Ground, s.Warming} {
			c.numbers(where+": schedule", column...)
			if len(column) != len(s.Time) && c.err == nil {
				c.err = fmt.Errorf("reports: %s: the columns of the schedule differ in length; please report this as a fault of the program", where)
			}
		}
	}
}

func (c *checker) limits(where string, limits []hazewright.LimitResult) {
	for _, l := range limits {
		if !l.Known {
			continue
		}
		c.numbers(fmt.Sprintf("%s: limit on %s", where, l.Figure), l.Bound, l.Factor)
	}
}
