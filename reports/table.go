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
			note = strings.ToLower(def.Title) + ": " + why(v)
		}
	}
	switch {
	case estimated(v):
		t.estimates = true
		c.mark = "*"
	case note != "":
		i := slices.Index(t.notes, note)
		if i < 0 {
			i = len(t.notes)
			t.notes = append(t.notes, note)
		}
		c.mark = " " + noteMark(i)
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
	t.row("Goal", "", func(d *hazewright.DesignResult) gridCell {
		return goalCell(d)
	})
	t.row("Limits", "", func(d *hazewright.DesignResult) gridCell {
		c := gridCell{text: limitsWord(d.Limits)}
		switch n := count(d.Limits); {
		case n.failed > 0:
			c.tone = bad
		case n.met > 0 && n.unknown == 0:
			c.tone = good
		}
		return c
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
		t.row("Largest warming found", "K", func(d *hazewright.DesignResult) gridCell {
			c := gridCell{text: bare(d.MaxWarming, "K")}
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
func goalCell(d *hazewright.DesignResult) gridCell {
	c := gridCell{text: goalWord(d), tone: bad}
	if d.Reached && !neverInTime(d.Figures) {
		c.tone = good
	}
	return c
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
			return limitCell(d.Limits[i])
		})
	}
}

func limitCell(l hazewright.LimitResult) gridCell {
	c := gridCell{text: limitWord(l)}
	if l.Known && l.Met {
		c.tone = good
	} else if l.Known {
		c.tone = bad
	}
	return c
}

// cases adds the sticking cases, worst first.
func (t *tableBuilder) cases() {
	most := 0
	for _, d := range t.r.Designs {
		most = max(most, len(d.Cases))
	}
	for i := range most {
		t.headingRow("Sticking not given: " + t.caseName(i))
		for _, def := range defs(caseIDs) {
			t.row("  "+def.Title, unitHead(def.Shown), func(d *hazewright.DesignResult) gridCell {
				if i >= len(d.Cases) {
					return gridCell{text: "as above"}
				}
				return t.value(d, def, d.Cases[i].Figures[def.ID])
			})
		}
		t.row("  Limits", "", func(d *hazewright.DesignResult) gridCell {
			if i >= len(d.Cases) {
				return gridCell{text: "-"}
			}
			return gridCell{text: limitsWord(d.Cases[i].Limits)}
		})
	}
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
	if list := warnings(t.r); len(list) > 0 {
		out.WriteByte('\n')
		writeLine(out, style.paint("Warnings", strong))
		for i, w := range list {
			where := clean(w.Where)
			if w.Design != "" {
				where = clean(w.Design) + ": " + where
			}
			paragraph(out, style, fmt.Sprintf("%3d. ", i+1), where+": "+clean(w.Text))
		}
	}
	out.WriteByte('\n')
	paragraph(out, style, "", Deferral)
}
