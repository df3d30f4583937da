package reports

import (
	"bytes"
	"encoding/csv"
	"fmt"
	"strconv"

	"hazewright"
	"hazewright/logistics"
)

// File is one named file of an output.
type File struct {
	Name string
	Data []byte
}

// CSV returns the result as CSV files, as RFC 4180 has it: comma, CRLF, one header row,
// quotes doubled. Values are SI, the unit in brackets after the column name; an empty
// cell is a value that does not exist. A text cell that a spreadsheet would take for a
// formula gets a leading apostrophe.
//
//	designs.csv        one row for each design and sticking case, all figures as columns
//	figures.csv        the same, one row for each figure, with its note or why it is missing
//	limits.csv         limits held against each design and case
//	benchmarks.csv     the study's published numbers, with the ratio of ours to them
//	losses.csv         loss budget of each design and case
//	gates.csv          cautions and gates
//	warming_curve.csv  warming against burden, placed as the study says and held low
//	spectrum.csv       optics per kilogram against wavelength
//	profile.csv        airborne mass and fall speed against height
//	schedule.csv       the programme against time, for each case
//	warnings.csv       all warnings, with the sticking case in which they hold
//	inputs.csv         every effective input with its origin and source
func CSV(r *hazewright.Result) ([]File, error) {
	if err := check(r); err != nil {
		return nil, err
	}
	tables := []struct {
		name   string
		header []string
		fill   func(*hazewright.Result, *rows)
	}{
		{"designs.csv", designsHeader(), designsRows},
		{"figures.csv", []string{"design", "case", "figure", "value", "unit", "note", "why"}, figuresRows},
		{"limits.csv", []string{"design", "case", "figure", "side", "bound", "unit", "met", "factor"}, limitsRows},
		{"benchmarks.csv", []string{"design", "figure", "value", "unit", "ratio", "source"}, benchmarksRows},
		{"losses.csv", []string{"design", "case", "loss", "share [1]", "lifetime_alone [s]"}, lossesRows},
		{"gates.csv", []string{"design", "gate", "title", "state", "finding", "next_step", "source"}, gatesRows},
		{"warming_curve.csv", []string{"design", "placed", "burden [kg/m2]", "warming [K]", "sunlight_loss [1]", "valid"}, curveRows},
		{"spectrum.csv", []string{"design", "wavelength [m]", "ext [m2/kg]", "abs [m2/kg]", "sca [m2/kg]", "g [1]", "method", "error [1]"}, spectrumRows},
		{"profile.csv", []string{"design", "height [m]", "mass_share [1/m]", "fall_speed [m/s]"}, profileRows},
		{"schedule.csv", scheduleHeader, scheduleRows},
		{"warnings.csv", []string{"design", "case", "where", "warning"}, warningsRows},
		{"inputs.csv", []string{"input", "as_written", "value", "unit", "origin", "position", "source", "title"}, inputsRows},
	}
	files := make([]File, 0, len(tables))
	for _, t := range tables {
		var b bytes.Buffer
		out := rows{w: csv.NewWriter(&b)}
		out.w.UseCRLF = true
		out.write(t.header)
		t.fill(r, &out)
		out.w.Flush()
		if err := out.w.Error(); err != nil {
			return nil, fmt.Errorf("reports: writing %s: %w", t.name, err)
		}
		files = append(files, File{t.name, b.Bytes()})
	}
	return files, nil
}

// rows writes cells: text guarded, numbers in shortest form. The writer under it is a
// buffer, so that an error can only come at the end.
type rows struct{ w *csv.Writer }

func (o *rows) write(cells []string) { _ = o.w.Write(cells) }

// add writes one row of strings, numbers, booleans and nils (empty cells).
func (o *rows) add(cells ...any) {
	line := make([]string, len(cells))
	for i, c := range cells {
		switch v := c.(type) {
		case string:
			line[i] = guard(v)
		case float64:
			line[i] = number(v)
		case int:
			line[i] = strconv.Itoa(v)
		case bool:
			line[i] = strconv.FormatBool(v)
		}
	}
	o.write(line)
}

func number(v float64) string { return strconv.FormatFloat(v, 'g', -1, 64) }

// guard puts an apostrophe before a text that a spreadsheet would run as a formula.
func guard(s string) string {
	if s == "" {
		return s
	}
	switch []rune(s)[0] {
	case '=', '+', '-', '@', '\t', '\r', '\n', '＝', '＋', '－', '＠':
		return "'" + s
	}
	return s
}

func designsHeader() []string {
	header := []string{"design", "case", "reached", "cause"}
	for _, def := range hazewright.Figures() {
		header = append(header, def.ID+" ["+def.Unit+"]")
	}
	return header
}

func designsRows(r *hazewright.Result, out *rows) {
	for _, v := range variants(r) {
		cells := []any{v.Name, v.name, v.reached, v.cause}
		for _, def := range hazewright.Figures() {
			cells = append(cells, cell(v.figures[def.ID]))
		}
		out.add(cells...)
	}
}

func cell(v hazewright.FigureValue) any {
	if v.Null {
		return nil
	}
	return v.Value
}

func figuresRows(r *hazewright.Result, out *rows) {
	for _, v := range variants(r) {
		for _, def := range hazewright.Figures() {
			f := v.figures[def.ID]
			out.add(v.Name, v.name, def.ID, cell(f), def.Unit, f.Note, f.Why)
		}
	}
}

func limitsRows(r *hazewright.Result, out *rows) {
	for _, v := range variants(r) {
		for _, l := range limitsJSON(v.limits) {
			var met, ratio any
			if l.Met != nil {
				met = *l.Met
			}
			if l.Factor != nil {
				ratio = *l.Factor
			}
			out.add(v.Name, v.name, l.Figure, l.Side, l.Bound, l.Unit, met, ratio)
		}
	}
}

func benchmarksRows(r *hazewright.Result, out *rows) {
	for i := range r.Designs {
		d := &r.Designs[i]
		for _, b := range benchmarks(r, d) {
			def, _ := hazewright.FigureByID(b.Figure)
			var ratio any
			if b.ratio != 0 {
				ratio = b.ratio
			}
			out.add(d.Name, b.Figure, b.Value, def.Unit, ratio, b.Source)
		}
	}
}

func lossesRows(r *hazewright.Result, out *rows) {
	for _, v := range variants(r) {
		for _, l := range v.losses {
			var alone any
			if l.LifetimeAlone > 0 {
				alone = l.LifetimeAlone
			}
			out.add(v.Name, v.name, l.Name, l.Share, alone)
		}
	}
}

func gatesRows(r *hazewright.Result, out *rows) {
	for i := range r.Designs {
		for _, g := range Gates(r, &r.Designs[i]) {
			out.add(r.Designs[i].Name, g.ID, g.Title, g.State, g.Finding, g.NextStep, g.Source)
		}
	}
}

func curveRows(r *hazewright.Result, out *rows) {
	for _, d := range r.Designs {
		for _, p := range d.Curve {
			out.add(d.Name, "as in the study", p.Burden, p.Warming, p.SunlightLoss, p.Valid)
		}
		for _, p := range d.CurveLow {
			out.add(d.Name, "held low", p.Burden, p.Warming, p.SunlightLoss, p.Valid)
		}
	}
}

func spectrumRows(r *hazewright.Result, out *rows) {
	for _, d := range r.Designs {
		for _, p := range d.Spectrum {
			out.add(d.Name, p.Wavelength, p.Ext, p.Abs, p.Sca, p.G, p.Method, p.Err)
		}
	}
}

// profileRows writes mass and fall speed in one row where their heights agree.
func profileRows(r *hazewright.Result, out *rows) {
	for _, d := range r.Designs {
		speed := map[float64]float64{}
		for _, p := range d.FallSpeed {
			speed[p.Height] = p.Value
		}
		written := map[float64]bool{}
		for _, p := range d.Profile {
			var v any
			if s, ok := speed[p.Height]; ok {
				v = s
			}
			written[p.Height] = true
			out.add(d.Name, p.Height, p.Mass, v)
		}
		for _, p := range d.FallSpeed {
			if !written[p.Height] {
				out.add(d.Name, p.Height, nil, p.Value)
			}
		}
	}
}

func inputsRows(r *hazewright.Result, out *rows) {
	for _, in := range r.Study.Inputs() {
		var si any
		if in.HasSI {
			si = in.SI
		}
		out.add(in.Path, in.Text, si, in.Unit, in.Origin.Kind, position(r.Study, in.Origin.Pos), in.Source, in.Title)
	}
}

var scheduleHeader = []string{"design", "case", "part", "time [s]", "capacity [kg/s]", "production [kg/s]", "airborne [kg]", "ground [kg]", "warming [K]"}

// scheduleRows writes the build-up from the start of the programme, then the ending
// from the end of supply.
func scheduleRows(r *hazewright.Result, out *rows) {
	for _, v := range variants(r) {
		if v.programme == nil {
			continue
		}
		for _, part := range []struct {
			name string
			s    logistics.Series
		}{{"build-up", v.programme.BuildUp}, {"ending", v.programme.Ending}} {
			for i, t := range part.s.Time {
				out.add(v.Name, v.name, part.name, t, part.s.Capacity[i], part.s.Production[i], part.s.Airborne[i], part.s.Ground[i], part.s.Warming[i])
			}
		}
	}
}

func warningsRows(r *hazewright.Result, out *rows) {
	for _, w := range Warnings(r) {
		out.add(w.Design, w.Case, w.Where, w.Text)
	}
}
