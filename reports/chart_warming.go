package reports

import (
	"fmt"
	"math"
	"strings"

	"hazewright"
)

// draw fills in a chart of points: its option, legend and table.
func (c *chart) draw(d xy) error {
	option, err := d.option()
	c.Option, c.Legend = option, d.legend()
	return err
}

// warmingChart shows warming against burden, as placed by the study and held low.
func warmingChart(r *hazewright.Result) (*chart, error) {
	c := &chart{ID: "warming", Table: dataTable{Head: []string{"Design", "Placed", "Burden [mg/m2]", "Warming [K]", "Sunlight lost [%]", "Valid"}}}
	d := xy{x: axis{name: "Burden [mg/m2]", log: true}, y: axis{name: "Warming [K]"}}
	if r.Study.Goal.Kind == "warming" {
		d.goal, d.goalText = r.Study.Goal.Warming, "goal "+pretty(r.Study.Goal.Warming, "K")
	}
	var low, points []line
	outside := false
	crowded := len(r.Designs) > crowd
	for i := range r.Designs {
		design := &r.Designs[i]
		name := clean(design.Name)
		add := func(curve []hazewright.CurvePoint, placed string) (out [][2]float64) {
			for _, p := range curve {
				if p.Burden > 0 {
					out = append(out, [2]float64{p.Burden * 1e6, p.Warming})
				}
				valid := "yes"
				if !p.Valid {
					valid, outside = "no", true
				}
				c.Table.Rows = append(c.Table.Rows, []string{name, placed, bare(p.Burden, "mg/m2"), significant(p.Warming, digits),
					significant(100*p.SunlightLoss, 3), valid})
			}
			return out
		}
		if curve := add(design.Curve, "as in the study"); len(curve) > 0 {
			d.lines = append(d.lines, line{name: name, points: curve, colour: i, dash: i})
		}
		if curve := add(design.CurveLow, "held low"); len(curve) > 0 && !crowded {
			low = append(low, line{name: name + ", held low", points: thin(curve, 15), colour: i, dash: i, thin: true})
		}
		if design.Reached && design.Goal.Burden > 0 && !crowded {
			points = append(points, line{name: name + ", its burden", points: [][2]float64{{design.Goal.Burden * 1e6, design.Goal.Warming}}, colour: i, point: true})
		}
	}
	d.lines = append(append(d.lines, low...), points...)
	if len(d.lines) == 0 {
		return nil, nil
	}
	d.x.min, d.x.max = extent(d.lines, 0, true)
	c.Title = warmingFinding(r)
	c.Caption = "Annual-mean warming of the whole planet. "
	if crowded {
		c.Caption += "The same particles held low, and each design's burden, are in the tables."
	} else {
		c.Caption += "Thin lines with dots: the same particles held low, their density falling with height as exp(-z/2 km). Diamond: the design's burden."
	}
	if outside {
		c.Caption += " Parts of the curves lie outside the estimate's validity; the table says which."
	}
	c.Alt = "Lines of warming against burden for each design. " + c.Title
	return c, c.draw(d)
}

// crowd is how many designs a chart can show with more than one mark each.
const crowd = 6

func warmingFinding(r *hazewright.Result) string {
	var parts []string
	for i := range r.Designs {
		d := &r.Designs[i]
		b := d.Figures["burden"]
		text := pretty(b.Value, "mg/m2")
		switch low := d.Figures["burden_low_held"]; {
		case d.NeverWarms:
			text = "never warms"
		case !d.Reached || b.Null:
			title, at := warmest(d)
			text = strings.ToLower(title[:1]) + title[1:] + " " + prettyText(at)
		case low.Null && low.Why != "":
			text += ", held low not reached"
		case !low.Null && b.Value > 0:
			text += ", held low " + prettyText(factor(low.Value/b.Value))
		}
		parts = append(parts, clean(d.Name)+": "+text)
	}
	return sentence(parts)
}

// sentence joins findings; more than three would make no title.
func sentence(parts []string) string {
	if n := len(parts); n > 3 {
		parts = append(parts[:3:3], fmt.Sprintf("and %d more", n-3))
	}
	return strings.Join(parts, "; ") + "."
}

// thin keeps about n points, always the last.
func thin(points [][2]float64, n int) [][2]float64 {
	step := max(len(points)/n, 1)
	var out [][2]float64
	for i, p := range points {
		if i%step == 0 || i == len(points)-1 {
			out = append(out, p)
		}
	}
	return out
}

// Planck's constants, for the shapes behind the spectra.
const (
	secondRadiation = 0.014387768775 // m K, hc/k (exact in SI)
	sunTemperature  = 5772.0         // K, nominal effective temperature [PrsaIAU2016]
)

// planckShape returns wavelength [um] and the blackbody's flux per logarithm of
// wavelength, scaled to a top of 1:
//
//	x^4 / (exp(x) - 1) / 4.780,   x = hc / (lambda k T)
func planckShape(temperature, low, high float64) [][2]float64 {
	const top = 4.779841017 // of x^4/(e^x - 1), at x = 3.92069
	var out [][2]float64
	for i := range 121 {
		l := low * math.Pow(high/low, float64(i)/120)
		x := secondRadiation / (l * temperature)
		y := 0.0
		if x < 300 {
			y = math.Pow(x, 4) / math.Expm1(x) / top
		}
		out = append(out, [2]float64{l * 1e6, y})
	}
	return out
}

// spectrumChart shows extinction or absorption per kilogram against wavelength.
func spectrumChart(r *hazewright.Result, absorption bool) (*chart, error) {
	c := &chart{ID: "extinction"}
	what, id := "extinction", "kappa_thermal_ext"
	value := func(p hazewright.SpectrumPoint) float64 { return p.Ext }
	if absorption {
		c.ID, what, id = "absorption", "absorption", "kappa_thermal"
		value = func(p hazewright.SpectrumPoint) float64 { return p.Abs }
	}
	c.Table.Head = []string{"Design", "Wavelength [um]", strings.ToUpper(what[:1]) + what[1:] + " [m2/kg]"}
	d := xy{x: axis{name: "Wavelength [um]", log: true}, y: axis{name: strings.ToUpper(what[:1]) + what[1:] + " [m2/kg]", log: true}}
	for i := range r.Designs {
		var points [][2]float64
		for _, p := range r.Designs[i].Spectrum {
			if v := value(p); v > 0 {
				points = append(points, [2]float64{p.Wavelength * 1e6, v})
			}
		}
		if len(points) == 0 {
			continue
		}
		name := clean(r.Designs[i].Name)
		d.lines = append(d.lines, line{name: name, points: points, colour: i, dash: i})
		for _, p := range thin(points, 24) {
			c.Table.Rows = append(c.Table.Rows, []string{name, significant(p[0], digits), significant(p[1], digits)})
		}
	}
	if len(d.lines) == 0 {
		return nil, nil
	}
	c.Table.Note = "Every few wavelengths; all are in spectrum.csv."
	d.x.min, d.x.max = extent(d.lines, 0, true)
	low, high := extent(d.lines, 1, true)
	d.y.min, d.y.max = decadeBelow(max(low, high*1e-4)), decadeAbove(high)
	for _, shape := range []struct {
		name        string
		temperature float64
	}{
		{"sunlight, shape", sunTemperature},
		{fmt.Sprintf("emission of the ground at %s, shape", pretty(r.Baseline.SurfaceTemperature, "K")), r.Baseline.SurfaceTemperature},
	} {
		if shape.temperature > 0 {
			d.lines = append(d.lines, line{name: shape.name, points: planckShape(shape.temperature, d.x.min*1e-6, d.x.max*1e-6), shape: true})
		}
	}
	c.Title = spectrumFinding(r, what, id)
	c.Caption = "Per kilogram of the design's mix, at random orientation. Grey: where sunlight and the ground's emission lie, per logarithm of wavelength, not to scale."
	c.Alt = fmt.Sprintf("Lines of %s per kilogram against wavelength for each design, with the shapes of sunlight and of the ground's emission behind. %s", what, c.Title)
	return c, c.draw(d)
}

func spectrumFinding(r *hazewright.Result, what, id string) string {
	var parts []string
	for i := range r.Designs {
		d := &r.Designs[i]
		if v := d.Figures[id]; !v.Null && len(d.Spectrum) > 0 {
			parts = append(parts, fmt.Sprintf("%s: %s", clean(d.Name), pretty(v.Value, "m2/kg")))
		}
	}
	if len(parts) == 0 {
		return fmt.Sprintf("Spectral %s per kilogram.", what)
	}
	return fmt.Sprintf("Mean thermal %s per kilogram. %s", what, sentence(parts))
}

func decadeBelow(v float64) float64 { return math.Pow(10, math.Floor(math.Log10(v))) }
func decadeAbove(v float64) float64 { return math.Pow(10, math.Ceil(math.Log10(v))) }

// emissionChart shows what the planet sends out, before and at the goal.
func emissionChart(r *hazewright.Result) (*chart, error) {
	edges, before := r.Baseline.ThermalEdges, r.Baseline.Outgoing
	if len(edges) < 3 || len(before) != len(edges)-1 {
		return nil, nil
	}
	c := &chart{ID: "emission", Table: dataTable{Head: []string{"From [um]", "To [um]", "Before [W/m2]"}}}
	d := xy{x: axis{name: "Wavelength [um]", log: true}, y: axis{name: "Outgoing flux [W/m2 per um]"}}
	d.lines = append(d.lines, line{name: "before", points: steps(edges, before), colour: paletteSize - 1})
	var with []*hazewright.DesignResult
	var parts []string
	for i := range r.Designs {
		design := &r.Designs[i]
		if len(design.Outgoing) != len(before) {
			continue
		}
		with = append(with, design)
		c.Table.Head = append(c.Table.Head, clean(design.Name)+" [W/m2]")
		d.lines = append(d.lines, line{name: clean(design.Name) + ", at its burden", points: steps(edges, design.Outgoing), colour: i, dash: i + 1})
		deepest, at := 0.0, 0
		for k := range before {
			if drop := (before[k] - design.Outgoing[k]) / (edges[k+1] - edges[k]); drop > deepest {
				deepest, at = drop, k
			}
		}
		if deepest > 0 {
			parts = append(parts, fmt.Sprintf("%s: most held back near %s um", clean(design.Name), significant(1e6*math.Sqrt(edges[at]*edges[at+1]), 2)))
		}
	}
	if len(with) == 0 {
		return nil, nil
	}
	for k := range before {
		row := []string{significant(edges[k]*1e6, 3), significant(edges[k+1]*1e6, 3), significant(before[k], 3)}
		for _, design := range with {
			row = append(row, significant(design.Outgoing[k], 3))
		}
		c.Table.Rows = append(c.Table.Rows, row)
	}
	d.x.min, d.x.max = max(edges[0]*1e6, 4), min(edges[len(edges)-1]*1e6, 100)
	if d.x.min >= d.x.max {
		d.x.min, d.x.max = edges[0]*1e6, edges[len(edges)-1]*1e6
	}
	c.Title = "The planet's outgoing heat, before and at the goal."
	if len(parts) > 0 {
		c.Title = typographic(sentence(parts))
	}
	c.Caption = "Thermal flux to space in each band. At balance the whole must match the sunlight taken in, so what is held back at some wavelengths leaves at others from a warmer ground."
	c.Alt = "Stepped lines of outgoing thermal flux against wavelength, before and with each design. " + c.Title
	return c, c.draw(d)
}

// steps draws a flux per band as a stepped line of flux per micrometre.
func steps(edges, flux []float64) [][2]float64 {
	var out [][2]float64
	for i, f := range flux {
		y := f / ((edges[i+1] - edges[i]) * 1e6)
		out = append(out, [2]float64{edges[i] * 1e6, y}, [2]float64{edges[i+1] * 1e6, y})
	}
	return out
}
