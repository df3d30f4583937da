package reports

import (
	_ "embed" // the page
	"fmt"
	"io"
	"math"
	"slices"

	"hazewright"
)

//go:embed assets/spectrum.html
var spectrumSource string

var spectrumTemplate = pageOf("spectrum", spectrumSource)

// spectrumPage is what the template shows.
type spectrumPage struct {
	frame
	Title, Design, Scope           string
	Charts                         []*chart
	Populations                    []spectrumPopulation
	Runs                           []methodRun
	Methods                        []hazewright.Method
	Warnings                       []string
	Version, Command, File, SHA256 string
	Tables                         []hazewright.TableFile
}

type spectrumPopulation struct {
	Name  string
	Facts []fact
}

type fact struct{ Name, Text string }

// methodRun is a run of wavelengths that one method serves.
type methodRun struct {
	Population, Method string
	Numbers            []string // wavelengths, how many, median and largest error
}

// SpectrumHTML writes a page with the spectrum as a chart: extinction and absorption per
// kilogram, its numbers, and what they rest on. Like the report it is one file that needs
// nothing else.
func SpectrumHTML(w io.Writer, s *hazewright.Spectrum, p Provenance) error {
	if err := checkSpectrum(s); err != nil {
		return err
	}
	c, err := kappaChart(s)
	if err != nil {
		return err
	}
	v := &spectrumPage{
		frame: newFrame(), Title: clean(s.Study.Title), Design: clean(s.Design), Scope: spectrumScope, Methods: s.Methods,
		Version: clean(p.Version), Command: clean(p.Command), File: clean(baseName(s.Study.File)), SHA256: clean(s.Study.SHA256),
	}
	if c != nil {
		c.Number = 1
		c.Table.pretty()
		v.Charts = []*chart{c}
	}
	for _, t := range s.Study.Tables {
		v.Tables = append(v.Tables, hazewright.TableFile{File: clean(t.File), SHA256: clean(t.SHA256)})
	}
	for i := range s.Populations {
		pop := &s.Populations[i]
		v.Populations = append(v.Populations, spectrumPopulation{populationTitle(pop), populationFacts(pop)})
		v.Runs = append(v.Runs, methodRuns(pop)...)
	}
	for _, text := range SpectrumWarnings(s) {
		v.Warnings = append(v.Warnings, prettyText(text))
	}
	return execute(w, spectrumTemplate, v)
}

func populationTitle(p *hazewright.SpectrumPopulation) string { return typographic(clean(p.Name)) }

func populationFacts(p *hazewright.SpectrumPopulation) []fact {
	facts := []fact{
		{"Made of", materialText(p)},
		{"Mean mass of one particle", quantity(p.Mass, "kg")},
		{"Sizes", nodesText(p)},
		{"Oxide skin as used", oxideText(p)},
		{"Surface scattering as used", scatteringText(p)},
		{"Refractive index", indexText(p)},
	}
	if p.IndexNote != "" {
		facts = append(facts, fact{"How the index is represented", uniform(clean(p.IndexNote))})
	}
	for i := range facts {
		facts[i].Text = prettyText(facts[i].Text)
	}
	return facts
}

// methodRuns parts the wavelengths, by rising length, into runs of one method.
func methodRuns(p *hazewright.SpectrumPopulation) []methodRun {
	var out []methodRun
	rows := rising(p.Rows)
	for from := 0; from < len(rows); {
		to := from + 1
		for to < len(rows) && rows[to].Method == rows[from].Method {
			to++
		}
		run := rows[from:to]
		errs := make([]float64, len(run))
		for i, r := range run {
			errs[i] = 100 * r.Err
		}
		slices.Sort(errs)
		span := significant(run[0].Wavelength*1e6, digits)
		if last := significant(run[len(run)-1].Wavelength*1e6, digits); last != span {
			span += " to " + last
		}
		out = append(out, methodRun{populationTitle(p), clean(run[0].Method), []string{
			prettyText(span), fmt.Sprint(len(run)), prettyText(significant(errs[len(errs)/2], 2)), prettyText(significant(errs[len(errs)-1], 2))}})
		from = to
	}
	return out
}

// rising returns the rows by rising wavelength.
func rising(rows []hazewright.SpectrumRow) []hazewright.SpectrumRow {
	out := slices.Clone(rows)
	slices.SortStableFunc(out, func(a, b hazewright.SpectrumRow) int {
		switch {
		case a.Wavelength < b.Wavelength:
			return -1
		case a.Wavelength > b.Wavelength:
			return 1
		}
		return 0
	})
	return out
}

const (
	shownDecades = 6   // of the vertical axis, at most
	shownRows    = 600 // of the table behind the chart
	fewPoints    = 40  // up to which the points of a line are marked
)

// kappaChart shows extinction and absorption per kilogram of every population against
// wavelength; nil if there is nothing above zero. For rods it has the one-mode yardstick per mass,
//
//	lambda^2 / (8 pi m)
//
// the largest absorption that one resonance has at random orientation.
func kappaChart(s *hazewright.Spectrum) (*chart, error) {
	c := &chart{ID: "kappa", Kind: "whole", Height: 460, Table: dataTable{Head: []string{"Population"}}}
	for _, column := range spectrumColumns {
		head := column.name
		if column.unit != "" {
			head += " [" + typographic(column.unit) + "]"
		}
		c.Table.Head = append(c.Table.Head, head)
	}
	d := xy{x: axis{name: "Wavelength [um]", log: true}, y: axis{name: "Cross-section per mass [m2/kg]", log: true}}
	var parts []string
	all, step := 0, 1
	for i := range s.Populations {
		all += len(s.Populations[i].Rows)
	}
	if all > shownRows {
		step = (all + shownRows - 1) / shownRows
		c.Table.Note = fmt.Sprintf("One wavelength in %d, and the last; all are in the CSV and JSON of the same command.", step)
	}
	var yardsticks []line
	for i := range s.Populations {
		p := &s.Populations[i]
		name, rows := populationTitle(p), rising(p.Rows)
		var ext, abs, yard [][2]float64
		best := hazewright.SpectrumRow{}
		for k, r := range rows {
			if k%step == 0 || k == len(rows)-1 {
				c.Table.Rows = append(c.Table.Rows, append([]string{name}, spectrumCells(r)...))
			}
			um := r.Wavelength * 1e6
			if r.KappaExt > 0 {
				ext = append(ext, [2]float64{um, r.KappaExt})
			}
			if r.KappaAbs > 0 {
				abs = append(abs, [2]float64{um, r.KappaAbs})
			}
			yard = append(yard, [2]float64{um, r.Wavelength * r.Wavelength / (8 * math.Pi) / p.Mass})
			if r.KappaAbs > best.KappaAbs {
				best = r
			}
		}
		few := len(rows) <= fewPoints
		if len(ext) > 0 {
			d.lines = append(d.lines, line{name: "extinction, " + name, points: ext, colour: i, thin: few})
		}
		if len(abs) > 0 {
			d.lines = append(d.lines, line{name: "absorption, " + name, points: abs, colour: i, dash: 1, thin: few})
		}
		if p.Shape == "rod" {
			yardsticks = append(yardsticks, line{name: "one-mode yardstick λ²/(8π) per particle mass, " + name, points: yard, colour: i, dash: 2})
		}
		if best.KappaAbs > 0 {
			parts = append(parts, fmt.Sprintf("%s: %s at %s", name, pretty(best.KappaAbs, "m2/kg"), pretty(best.Wavelength, "um")))
		} else {
			parts = append(parts, name+": none")
		}
	}
	if len(d.lines) == 0 {
		return nil, nil
	}
	d.x.min, d.x.max = extent(d.lines, 0, true)
	if d.x.max < 1.1*d.x.min { // a single wavelength, or nearly
		d.x.min, d.x.max = d.x.min/2, d.x.max*2
	}
	low, high := extent(d.lines, 1, true)
	d.y.min, d.y.max = decadeBelow(max(low, high*math.Pow(10, -shownDecades))), decadeAbove(high)
	if d.y.max <= d.y.min {
		d.y.max = 10 * d.y.min
	}
	for _, y := range yardsticks {
		y.points = slices.DeleteFunc(y.points, func(p [2]float64) bool { return p[1] < d.y.min || p[1] > d.y.max })
		if len(y.points) > 0 {
			d.lines = append(d.lines, y)
		}
	}
	ground := fmt.Sprintf("emission of the ground at %s, shape", pretty(s.SurfaceTemperature, "K"))
	for _, shape := range []struct {
		name        string
		temperature float64
	}{{"sunlight, shape", sunTemperature}, {ground, s.SurfaceTemperature}} {
		if shape.temperature > 0 {
			d.lines = append(d.lines, line{name: shape.name, points: planckShape(shape.temperature, d.x.min*1e-6, d.x.max*1e-6), shape: true})
		}
	}
	c.Title = "Largest absorption per kilogram. " + sentence(parts)
	c.Caption = "Per kilogram of each population, at random orientation, mean over its sizes. Grey: where sunlight and the ground's emission lie, per logarithm of wavelength, not to scale."
	if len(yardsticks) > 0 {
		c.Caption += " Dotted: the most that a single resonance of a rod can absorb at random orientation; a yardstick and not a bound, since several act at once."
	}
	c.Caption += " Methods and their stated errors stand below."
	c.Alt = "Lines of extinction and absorption per kilogram against wavelength for each population, on logarithmic axes, with the shapes of sunlight and of the ground's emission behind. " + c.Title
	return c, c.draw(d)
}
