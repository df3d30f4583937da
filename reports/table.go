package reports

import (
	"bufio"
	"fmt"
	"io"
	"slices"
	"strings"

	"hazewright"
)

// Table writes the main figures of every design side by side for a terminal: whether
// the goal is reached and the limits met, the figures under headings with their units,
// the sticking cases where the study does not give sticking, then warnings as numbered
// notes. A value that rests on an estimate carries "*".
func Table(w io.Writer, r *hazewright.Result, style Style) error {
	if err := check(r); err != nil {
		return err
	}
	out := bufio.NewWriter(w)
	heading(out, style, clean(r.Study.Title), fmt.Sprintf("World %s. Goal: %s.", clean(r.Study.World.Name), goalText(r.Study.Goal)))
	t := tableBuilder{r: r}
	t.verdicts()
	t.figures()
	t.limits()
	t.benchmarks()
	t.cases()
	t.grid.write(out, style)
	t.footer(out, style)
	if err := out.Flush(); err != nil {
		return fmt.Errorf("reports: writing the table: %w", err)
	}
	return nil
}

func heading(out *bufio.Writer, style Style, title, line string) {
	writeLine(out, style.paint(title, strong))
	if line != "" {
		writeLine(out, line)
	}
	paragraph(out, style, "", Scope)
	out.WriteByte('\n')
}

// paragraph writes a text wrapped to the width, further lines indented under its mark.
func paragraph(out *bufio.Writer, style Style, mark, text string) {
	width := 0
	if style.Width > 0 {
		width = max(style.Width-columnsOf(mark), 20)
	}
	for i, line := range wrap(text, width) {
		if i > 0 {
			mark = strings.Repeat(" ", columnsOf(mark))
		}
		writeLine(out, mark+line)
	}
}

// tableBuilder collects the rows of [Table] and the notes that its marks refer to.
type tableBuilder struct {
	r         *hazewright.Result
	grid      grid
	notes     []string // of values, in order of first use
	estimates bool
}

func (t *tableBuilder) row(head, unit string, cell func(d *hazewright.DesignResult) gridCell) {
	row := gridRow{head: head, unit: unit, cells: []gridCell{}}
	for i := range t.r.Designs {
		row.cells = append(row.cells, cell(&t.r.Designs[i]))
	}
	t.grid.rows = append(t.grid.rows, row)
}

func (t *tableBuilder) headingRow(head string) {
	t.grid.rows = append(t.grid.rows, gridRow{head: head})
}

// value is the cell of a figure with the marks of its notes.
func (t *tableBuilder) value(d *hazewright.DesignResult, def hazewright.FigureDef, v hazewright.FigureValue) gridCell {
	c := gridCell{text: figureCell(def, v)}
	note := clean(v.Note)
	if v.Null {
		note = ""
		if d.Reached && v.Why != "" {
			note = why(v)
		}
	}
	if estimated(v) {
		t.estimates = true
		c.mark = "*"
	}
	if note != "" && note != "estimate" {
		i := slices.Index(t.notes, note)
		if i < 0 {
			i = len(t.notes)
			t.notes = append(t.notes, note)
		}
		c.mark += " " + noteMark(i)
	}
	return c
}

// noteMark returns (a), (b), ... for the notes of values.
func noteMark(i int) string {
	if i < 26 {
		return "(" + string(rune('a'+i)) + ")"
	}
	return fmt.Sprintf("(%d)", i+1)
}

func (t *tableBuilder) verdicts() {
	for _, d := range t.r.Designs {
		t.grid.columns = append(t.grid.columns, clean(d.Name))
	}
	t.row("Goal", "", func(d *hazewright.DesignResult) gridCell { return goalCell(variantsOf(d)[0]) })
	t.row("Limits", "", func(d *hazewright.DesignResult) gridCell {
		return gridCell{text: limitsWord(d.Limits), tone: limitsTone(d.Limits)}
	})
	t.row("Cautions and gates", "", func(d *hazewright.DesignResult) gridCell {
		n := 0
		for _, g := range Gates(t.r, d) {
			if g.State == Tripped {
				n++
			}
		}
		return gridCell{text: fmt.Sprintf("%d of %d tripped", n, len(gateTable))}
	})
	if slices.ContainsFunc(t.r.Designs, func(d hazewright.DesignResult) bool { return !d.Reached }) {
		t.row("Largest warming", "K", func(d *hazewright.DesignResult) gridCell {
			switch {
			case d.Reached:
				return gridCell{text: "-"}
			case d.NeverWarms:
				_, text := warmest(d)
				return gridCell{text: text}
			}
			c := gridCell{text: bare(d.MaxWarming, "K")}
			if d.Goal.Burden > 0 {
				c.text = bare(d.Goal.Warming, "K")
			}
			if warmingEstimated(t.r) {
				t.estimates = true
				c.mark = "*"
			}
			return c
		})
	}
}

func (t *tableBuilder) figures() {
	for _, g := range groups(mainIDs) {
		t.headingRow(g.title)
		for _, def := range g.figures {
			t.row("  "+def.Title, unitHead(def.Shown), func(d *hazewright.DesignResult) gridCell {
				return t.value(d, def, d.Figures[def.ID])
			})
		}
	}
}

// goalCell is goalWord with its tone.
func goalCell(v variant) gridCell {
	text, tone := v.goalWord()
	return gridCell{text: text, tone: tone}
}

// unitHead is the unit in a head column, nothing for a plain number.
func unitHead(unit string) string {
	if unit == "1" {
		return ""
	}
	return unit
}

// limits adds a row for each limit of the study; every design has them in one order.
func (t *tableBuilder) limits() {
	if len(t.r.Study.Limits) == 0 {
		return
	}
	t.headingRow("Limits")
	for i, l := range t.r.Study.Limits {
		t.row("  "+limitTitle(l), "", func(d *hazewright.DesignResult) gridCell {
			if i >= len(d.Limits) {
				return gridCell{text: "not known"}
			}
			return limitCell(d.Limits[i], d.Figures)
		})
	}
}

// benchmarks adds a row for each published number of the study, with the ratio of ours to it.
func (t *tableBuilder) benchmarks() {
	if len(t.r.Study.Benchmarks) == 0 {
		return
	}
	t.headingRow("Benchmarks: ours over the published number")
	for _, b := range t.r.Study.Benchmarks {
		def, ok := hazewright.FigureByID(b.Figure)
		if !ok {
			continue
		}
		t.row("  "+def.Title+" "+bare(b.Value, def.Shown), unitHead(def.Shown), func(d *hazewright.DesignResult) gridCell {
			if b.Design != d.Name {
				return gridCell{}
			}
			for _, own := range benchmarks(t.r, d) {
				if own.Benchmark == b && own.ratio != 0 {
					return gridCell{text: factor(own.ratio)}
				}
			}
			return gridCell{text: "-"}
		})
	}
}

func limitCell(l hazewright.LimitResult, figures map[string]hazewright.FigureValue) gridCell {
	return gridCell{text: limitWord(l, figures[l.Figure]), tone: limitTone(l)}
}

// cases adds the sticking cases, worst first.
func (t *tableBuilder) cases() {
	most := 0
	for _, d := range t.r.Designs {
		most = max(most, len(d.Cases))
	}
	for i := range most {
		t.headingRow("Sticking not given: " + t.caseName(i))
		of := func(cell func(v variant) gridCell) func(d *hazewright.DesignResult) gridCell {
			return func(d *hazewright.DesignResult) gridCell {
				if i >= len(d.Cases) {
					return gridCell{text: "as above"}
				}
				return cell(variantsOf(d)[i])
			}
		}
		t.row("  Goal", "", of(goalCell))
		for _, def := range defs(caseIDs) {
			t.row("  "+def.Title, unitHead(def.Shown), of(func(v variant) gridCell {
				return t.value(v.result(), def, v.figures[def.ID])
			}))
		}
		t.row("  Flights a window to hold it", "", of(upkeepCell))
		t.row("  Landing the plant", "", of(buildCell))
		t.row("  Limits", "", of(func(v variant) gridCell {
			return gridCell{text: limitsWord(v.limits), tone: limitsTone(v.limits)}
		}))
	}
}

// upkeepCell holds the flights that a case needs against those planned.
func upkeepCell(v variant) gridCell {
	c := v.upkeep()
	if c.tone == warn {
		c.text += fmt.Sprintf(", %d planned", v.Design.Supply.Delivery.FlightsPerWindow)
	}
	return c
}

// buildCell holds the time that landing the plant takes against the plant's life.
func buildCell(v variant) gridCell {
	c := v.building()
	if c.tone == warn {
		c.text += ", it lasts " + duration(v.Design.Supply.Plant.Life)
	}
	return c
}

func (t *tableBuilder) caseName(i int) string {
	for _, d := range t.r.Designs {
		if i < len(d.Cases) {
			return clean(d.Cases[i].Name)
		}
	}
	return ""
}

func (t *tableBuilder) footer(out *bufio.Writer, style Style) {
	out.WriteByte('\n')
	if t.estimates {
		paragraph(out, style, "*   ", "estimate: rests on a method that is itself an estimate; its validity is in the report's methods")
	}
	for i, n := range t.notes {
		paragraph(out, style, noteMark(i)+" ", n)
	}
	for i := range t.r.Designs {
		if d := &t.r.Designs[i]; d.StickingCase != "" {
			paragraph(out, style, "", fmt.Sprintf("%s: sticking is not given; the figures above hold %s.", clean(d.Name), stickingCase(d)))
		}
	}
	out.WriteByte('\n')
	writeLine(out, style.paint("What it hangs on most", strong))
	for i := range t.r.Designs {
		paragraph(out, style, "  ", clean(t.r.Designs[i].Name)+": "+hinge(&t.r.Designs[i]))
	}
	paragraph(out, style, "  ", hingeRule)
	if list := Warnings(t.r); len(list) > 0 {
		out.WriteByte('\n')
		writeLine(out, style.paint("Warnings", strong))
		for i, w := range list {
			paragraph(out, style, fmt.Sprintf("%3d. ", i+1), w.String())
		}
	}
	out.WriteByte('\n')
	paragraph(out, style, "", Deferral)
}
