package reports

import (
	"bufio"
	"cmp"
	"fmt"
	"io"
	"slices"
	"strings"

	"hazewright"
)

// compareIDs are the figures of the comparison, after the one it is ranked by.
var compareIDs = []string{"warming", "burden", "lifetime", "production_rate", "power", "landed_mass", "time_to_goal", "sunlight_loss"}

// entry is one design of one study in a comparison.
type entry struct {
	r *hazewright.Result
	d *hazewright.DesignResult
}

// CompareTable writes the designs of several studies side by side, best first by the
// figure named, with what each fails, and a last row without any programme. Where
// neither more nor less of the figure is better, less comes first. Designs without a
// value come after those with one, and equals stay in the order given. An unknown
// figure is an error that lists the known ones.
func CompareTable(w io.Writer, results []*hazewright.Result, by string, style Style) error {
	def, ok := hazewright.FigureByID(by)
	if !ok {
		return fmt.Errorf("reports: cannot rank by %q; the figures are %s", by, strings.Join(figureIDs(), ", "))
	}
	var entries []entry
	for _, r := range results {
		if err := check(r); err != nil {
			return err
		}
		for i := range r.Designs {
			entries = append(entries, entry{r, &r.Designs[i]})
		}
	}
	rank(entries, def)

	out := bufio.NewWriter(w)
	order := "less is better"
	switch def.Better {
	case 1:
		order = "more is better"
	case 0:
		order = "neither way is better; least first"
	}
	heading(out, style, fmt.Sprintf("%s of %s, ranked by %s (%s)", plural(len(entries), "design", "designs"), plural(len(results), "study", "studies"),
		strings.ToLower(def.Title), order), "")
	t := compareBuilder(entries, def)
	t.write(out, style)
	out.WriteByte('\n')
	if slices.ContainsFunc(entries, func(e entry) bool { return estimated(e.d.Figures["warming"]) || estimated(e.d.Figures["burden"]) }) {
		paragraph(out, style, "*   ", "estimate: rests on a method that is itself an estimate")
	}
	for i, e := range entries {
		if e.d.StickingCase != "" {
			paragraph(out, style, "", fmt.Sprintf("%d. %s: sticking is not given; the row holds %s.", i+1, clean(e.d.Name), stickingCase(e.d)))
		}
	}
	paragraph(out, style, "", Deferral)
	if err := out.Flush(); err != nil {
		return fmt.Errorf("reports: writing the comparison: %w", err)
	}
	return nil
}

func figureIDs() []string {
	var ids []string
	for _, def := range hazewright.Figures() {
		ids = append(ids, def.ID)
	}
	return ids
}

// rank sorts by the figure, best first.
func rank(entries []entry, def hazewright.FigureDef) {
	slices.SortStableFunc(entries, func(a, b entry) int {
		x, y := a.d.Figures[def.ID], b.d.Figures[def.ID]
		switch {
		case x.Null && y.Null:
			return 0
		case x.Null:
			return 1
		case y.Null:
			return -1
		case def.Better > 0:
			return cmp.Compare(y.Value, x.Value)
		}
		return cmp.Compare(x.Value, y.Value)
	})
}

// compareBuilder makes one row for each design and one without any programme.
func compareBuilder(entries []entry, by hazewright.FigureDef) grid {
	columns := []hazewright.FigureDef{by}
	for _, def := range defs(compareIDs) {
		if def.ID != by.ID {
			columns = append(columns, def)
		}
	}
	g := grid{columns: []string{"goal"}}
	for _, def := range columns {
		name := def.Title
		if def.Shown != "1" {
			name += " " + def.Shown
		}
		g.columns = append(g.columns, name)
	}
	g.columns = append(g.columns, "limits")
	for i, e := range entries {
		row := gridRow{head: fmt.Sprintf("%d. %s (%s)", i+1, clean(e.d.Name), clean(e.r.Study.Title))}
		row.cells = append(row.cells, goalCell(e.d))
		for _, def := range columns {
			v := e.d.Figures[def.ID]
			c := gridCell{text: figureCell(def, v)}
			if estimated(v) {
				c.mark = "*"
			}
			row.cells = append(row.cells, c)
		}
		row.cells = append(row.cells, failures(e.d.Limits))
		g.rows = append(g.rows, row)
	}
	none := gridRow{head: "-. no programme", cells: []gridCell{{text: "not reached"}}}
	for _, def := range columns {
		none.cells = append(none.cells, gridCell{text: noProgramme(def.ID)})
	}
	none.cells = append(none.cells, gridCell{text: "-"})
	g.rows = append(g.rows, none)
	return g
}

// failures names each limit that fails and by what factor.
func failures(limits []hazewright.LimitResult) gridCell {
	var failed []string
	for _, l := range limits {
		if l.Known && !l.Met {
			failed = append(failed, l.Figure+" "+limitWord(l))
		}
	}
	if len(failed) > 0 {
		return gridCell{text: strings.Join(failed, ", "), tone: bad}
	}
	c := gridCell{text: limitsWord(limits)}
	if n := count(limits); n.met > 0 && n.unknown == 0 {
		c.tone = good
	}
	return c
}
