package reports

import (
	"bufio"
	"bytes"
	"encoding/csv"
	"encoding/json"
	"fmt"
	"io"
	"strings"

	"hazewright"
)

// spectrumScope is the sentence under the heading of a spectrum.
const spectrumScope = "Of one particle, mean by number over its sizes, and per kilogram of particles; random orientation, unpolarised light; wavelengths in vacuum."

// SpectrumTable writes a spectrum for a terminal: for each population a head with what its
// optics rest on, then one line for each wavelength.
func SpectrumTable(w io.Writer, s *hazewright.Spectrum, style Style) error {
	if err := checkSpectrum(s); err != nil {
		return err
	}
	out := bufio.NewWriter(w)
	writeLine(out, style.paint(clean(s.Study.Title), strong))
	writeLine(out, "Design "+clean(s.Design)+".")
	paragraph(out, style, "", spectrumScope)
	for i := range s.Populations {
		p := &s.Populations[i]
		out.WriteByte('\n')
		for k, line := range wrap(clean(p.Name)+": "+populationHead(p), style.Width) {
			if k == 0 {
				line = style.paint(line, strong)
			}
			writeLine(out, line)
		}
		for _, text := range []string{oxideText(p), scatteringText(p), indexText(p)} {
			paragraph(out, style, "  ", text)
		}
		spectrumLines(out, style, p)
	}
	if len(s.Warnings) > 0 {
		out.WriteByte('\n')
	}
	for _, text := range SpectrumWarnings(s) {
		paragraph(out, style, "! ", text)
	}
	if err := out.Flush(); err != nil {
		return fmt.Errorf("reports: writing the table: %w", err)
	}
	return nil
}

// SpectrumWarnings returns the warnings of a spectrum, one line each.
func SpectrumWarnings(s *hazewright.Spectrum) []string {
	var out []string
	for _, w := range s.Warnings {
		out = append(out, Warning{Warning: w}.String())
	}
	return out
}

// spectrumColumns are the columns of a spectrum as people read it, with their units.
var spectrumColumns = []struct{ name, unit string }{
	{"wavelength", "um"}, {"C_ext", "um2"}, {"C_sca", "um2"}, {"C_abs", "um2"}, {"g", "1"},
	{"kappa_ext", "m2/kg"}, {"kappa_abs", "m2/kg"}, {"method", ""}, {"error", "%"},
}

const methodColumn = 7

// spectrumCells are the cells of one row, in the units of [spectrumColumns].
func spectrumCells(r hazewright.SpectrumRow) []string {
	return []string{
		significant(r.Wavelength*1e6, 6), significant(r.Ext*1e12, 5), significant(r.Sca*1e12, 5), significant(r.Abs*1e12, 5), significant(r.G, 4),
		significant(r.KappaExt, 5), significant(r.KappaAbs, 5), clean(r.Method), significant(100*r.Err, 2),
	}
}

// spectrumLines writes the rows of a population as aligned columns.
func spectrumLines(out *bufio.Writer, style Style, p *hazewright.SpectrumPopulation) {
	lines := make([][]string, 2, len(p.Rows)+2)
	for _, c := range spectrumColumns {
		lines[0], lines[1] = append(lines[0], c.name), append(lines[1], c.unit)
	}
	for _, r := range p.Rows {
		lines = append(lines, spectrumCells(r))
	}
	widths := make([]int, len(spectrumColumns))
	for _, line := range lines {
		for i, cell := range line {
			widths[i] = max(widths[i], columnsOf(cell))
		}
	}
	for k, line := range lines {
		var b strings.Builder
		for i, cell := range line {
			if i > 0 {
				b.WriteString(strings.Repeat(" ", gap))
			}
			if i == methodColumn {
				b.WriteString(padRight(cell, widths[i]))
			} else {
				b.WriteString(padLeft(cell, widths[i]))
			}
		}
		text := b.String()
		if k < 2 {
			text = style.paint(text, strong)
		}
		writeLine(out, text)
	}
}

// populationHead says what a population is made of.
func populationHead(p *hazewright.SpectrumPopulation) string {
	return fmt.Sprintf("%s; mean mass of one %s; %s", materialText(p), quantity(p.Mass, "kg"), nodesText(p))
}

// materialText names what a particle is made of.
func materialText(p *hazewright.SpectrumPopulation) string {
	text := fmt.Sprintf("material %s, %s", clean(p.Material.Name), quantity(p.Density, "kg/m3"))
	if p.Shape == "shell" {
		inside := "hollow"
		if p.Core != "" {
			inside = "around a core of " + clean(p.Core)
		}
		text += fmt.Sprintf(", a wall of %s %s", quantity(p.Wall, "nm"), inside)
	}
	return text
}

// nodesText says over which sizes the mean is taken.
func nodesText(p *hazewright.SpectrumPopulation) string {
	what := "radius"
	if p.Shape == "rod" {
		what = "length"
	}
	if len(p.Nodes) == 1 {
		return "1 size node, all of one " + what
	}
	first, last := p.Nodes[0].Size, p.Nodes[len(p.Nodes)-1].Size
	return fmt.Sprintf("%d size nodes, %s %s to %s (spread %s)", len(p.Nodes), what, quantity(first, "um"), quantity(last, "um"), significant(p.Spread, 4))
}

// oxideText says which oxide skin was used.
func oxideText(p *hazewright.SpectrumPopulation) string {
	from := "the material's own, an assumption"
	if p.OxideGiven {
		from = "as the study gives it"
	}
	if p.OxideUsed == 0 {
		if p.OxideGiven {
			return "no oxide skin, " + from
		}
		return "no oxide skin: the material has none of its own and the study gives none"
	}
	return fmt.Sprintf("oxide skin %s, %s; it neither conducts nor absorbs, its mass counts", quantity(p.OxideUsed, "nm"), from)
}

// scatteringText says what scattering of electrons at the surface does to the resistivity.
func scatteringText(p *hazewright.SpectrumPopulation) string {
	switch {
	case p.Shape == "sphere":
		return "surface scattering of electrons does not act on full spheres"
	case !p.SurfaceScattering:
		return "surface scattering of electrons is off, as the study says"
	case p.AddedResistivity == 0:
		return "surface scattering of electrons adds nothing: no value is known for the material"
	}
	return fmt.Sprintf("surface scattering of electrons adds %s x %s / %s = %s to the resistivity", significant(p.SurfaceFactor, 3), significant(p.SurfaceRhoL, 4)+" ohm m2",
		quantity(p.SurfaceAcross, "nm"), significant(p.AddedResistivity, 4)+" ohm m")
}

// indexText says where the refractive index comes from.
func indexText(p *hazewright.SpectrumPopulation) string {
	text := fmt.Sprintf("refractive index known from %s to %s", quantity(p.DataMin, "um"), quantity(p.DataMax, "um"))
	if p.IndexSource != "" {
		text += " (" + clean(p.IndexSource) + ")"
	}
	return text
}

// SpectrumJSON writes a spectrum as one JSON object: rows in SI units [m, m2, m2/kg], of one
// particle, averaged over sizes; "error" is relative.
func SpectrumJSON(w io.Writer, s *hazewright.Spectrum, p Provenance) error {
	if err := checkSpectrum(s); err != nil {
		return err
	}
	doc := jsonSpectrum{Tool: tool, Version: p.Version, Design: s.Design, Rows: []jsonSpectrumRow{}}
	for _, pop := range s.Populations {
		for _, r := range pop.Rows {
			doc.Rows = append(doc.Rows, jsonSpectrumRow{pop.Name, r.Wavelength, r.Ext, r.Sca, r.Abs, r.G, r.KappaExt, r.KappaAbs, r.Method, r.Err})
		}
	}
	enc := json.NewEncoder(w)
	enc.SetEscapeHTML(false)
	enc.SetIndent("", "  ")
	if err := enc.Encode(doc); err != nil {
		return fmt.Errorf("reports: writing JSON: %w", err)
	}
	return nil
}

type jsonSpectrum struct {
	Tool    string            `json:"tool"`
	Version string            `json:"version"`
	Design  string            `json:"design"`
	Rows    []jsonSpectrumRow `json:"rows"`
}

type jsonSpectrumRow struct {
	Population string  `json:"population"`
	Wavelength float64 `json:"wavelength"`
	CExt       float64 `json:"c_ext"`
	CSca       float64 `json:"c_sca"`
	CAbs       float64 `json:"c_abs"`
	G          float64 `json:"g"`
	KappaExt   float64 `json:"kappa_ext"`
	KappaAbs   float64 `json:"kappa_abs"`
	Method     string  `json:"method"`
	Error      float64 `json:"error"`
}

// SpectrumCSV returns a spectrum as one CSV file, written as [CSV] writes its files.
func SpectrumCSV(s *hazewright.Spectrum) ([]byte, error) {
	if err := checkSpectrum(s); err != nil {
		return nil, err
	}
	var b bytes.Buffer
	out := rows{w: csv.NewWriter(&b)}
	out.w.UseCRLF = true
	out.write([]string{"design", "population", "wavelength [m]", "c_ext [m2]", "c_sca [m2]", "c_abs [m2]", "g [1]", "kappa_ext [m2/kg]", "kappa_abs [m2/kg]", "method", "error [1]"})
	for _, p := range s.Populations {
		for _, r := range p.Rows {
			out.add(s.Design, p.Name, r.Wavelength, r.Ext, r.Sca, r.Abs, r.G, r.KappaExt, r.KappaAbs, r.Method, r.Err)
		}
	}
	out.w.Flush()
	if err := out.w.Error(); err != nil {
		return nil, fmt.Errorf("reports: writing the spectrum as CSV: %w", err)
	}
	return b.Bytes(), nil
}

// checkSpectrum returns nil if s can be written: it has a study, and every number is finite.
func checkSpectrum(s *hazewright.Spectrum) error {
	if s == nil || s.Study == nil {
		return fmt.Errorf("reports: no spectrum to write")
	}
	c := checker{}
	c.numbers("surface temperature", s.SurfaceTemperature)
	for _, p := range s.Populations {
		c.numbers("population "+p.Name, p.Density, p.Mass, p.OxideUsed, p.SurfaceFactor, p.SurfaceRhoL, p.SurfaceAcross, p.AddedResistivity, p.DataMin, p.DataMax)
		for _, r := range p.Rows {
			c.numbers("spectrum of "+p.Name, r.Wavelength, r.Ext, r.Sca, r.Abs, r.G, r.KappaExt, r.KappaAbs, r.Err)
		}
	}
	return c.err
}
