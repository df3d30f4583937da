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

// compareWidth is how wide the comparison may be where there is no terminal to ask [columns].
const compareWidth = 160

// entry is one design of one study in a comparison.
type entry struct {
	r *hazewright.Result
	d *hazewright.DesignResult
}

// CompareTable writes the designs of several studies side by side, best first by the
// figure named, with the limits that each study sets, the other sticking cases where a
// study gives no sticking, and a last column without any programme. Where neither more
// nor less of the figure is better, less comes first. Designs without a value come after
// those with one, and equals stay in the order given. An unknown figure is an error that
// lists the known ones.
func CompareTable(w io.Writer, results []*hazewright.Result, by string, style Style) error {
	def, ok := hazewright.FigureByID(by)
	if !ok {
		return fmt.Errorf("reports: cannot rank by %q; the figures are %s", by, strings.Join(figureIDs(), ", "))
	}
	if style.Width <= 0 {
		style.Width = compareWidth
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
	goals := goalsOf(results)
	if len(goals) > 1 {
		paragraph(out, style, "", fmt.Sprintf("The studies' goals differ (%s): figures of designs with different goals do not compare.", strings.Join(goals, "; ")))
		out.WriteByte('\n')
	}
	t := comparison{entries: entries, several: len(results) > 1, goals: len(goals) > 1}
	t.build(def)
	t.grid.write(out, style)
	out.WriteByte('\n')
	if t.estimates {
		paragraph(out, style, "*   ", "estimate: rests on a method that is itself an estimate")
	}
	for i, e := range entries {
		if e.d.StickingCase != "" {
			paragraph(out, style, "", fmt.Sprintf("%d. %s: sticking is not given; the first rows hold %s.", i+1, clean(e.d.Name), stickingCase(e.d)))
		}
	}
	paragraph(out, style, "", Deferral)
	if err := out.Flush(); err != nil {
		return fmt.Errorf("reports: writing the comparison: %w", err)
	}
	return nil
}

// goalsOf returns the goals of the studies, each once.
func goalsOf(results []*hazewright.Result) []string {
	var out []string
	for _, r := range results {
		if text := goalText(r.Study.Goal); !slices.Contains(out, text) {
			out = append(out, text)
		}
	}
	return out
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

// comparison collects the rows of [CompareTable]: one column for each design, and one
// without any programme.
type comparison struct {
	entries        []entry
	several, goals bool // of several studies; with different goals
	grid           grid
	estimates      bool
}

func (t *comparison) row(head, unit, none string, cell func(e entry) gridCell) {
	row := gridRow{head: head, unit: unit}
	for _, e := range t.entries {
		row.cells = append(row.cells, cell(e))
	}
	t.grid.rows = append(t.grid.rows, gridRow{head: head, unit: unit, cells: append(row.cells, gridCell{text: none})})
}

func (t *comparison) figure(def hazewright.FigureDef, v hazewright.FigureValue) gridCell {
	c := gridCell{text: figureCell(def, v)}
	if estimated(v) {
		t.estimates = true
		c.mark = "*"
	}
	return c
}

func (t *comparison) build(by hazewright.FigureDef) {
	for i, e := range t.entries {
		t.grid.columns = append(t.grid.columns, fmt.Sprintf("%d. %s", i+1, clean(e.d.Name)))
	}
	t.grid.columns = append(t.grid.columns, "no programme")
	if t.several {
		t.row("Study", "", "-", func(e entry) gridCell { return gridCell{text: clean(e.r.Study.Title)} })
	}
	if t.goals {
		t.row("Asked for", "", "-", func(e entry) gridCell { return gridCell{text: goalText(e.r.Study.Goal)} })
	}
	figures := []hazewright.FigureDef{by}
	for _, def := range defs(compareIDs) {
		if def.ID != by.ID {
			figures = append(figures, def)
		}
	}
	t.row("Goal", "", "not reached", func(e entry) gridCell { return goalCell(variantsOf(e.d)[0]) })
	for _, def := range figures {
		t.row(def.Title, unitHead(def.Shown), noProgramme(def.ID), func(e entry) gridCell { return t.figure(def, e.d.Figures[def.ID]) })
	}
	t.limits()
	t.cases(figures)
}

// limits adds a row for each limit that any of the studies sets.
func (t *comparison) limits() {
	var titles []string
	for _, e := range t.entries {
		for _, l := range e.r.Study.Limits {
			if title := limitTitle(l); !slices.Contains(titles, title) {
				titles = append(titles, title)
			}
		}
	}
	if len(titles) > 0 {
		t.grid.rows = append(t.grid.rows, gridRow{head: "Limits"})
	}
	for _, title := range titles {
		t.row("  "+title, "", "-", func(e entry) gridCell {
			for _, l := range e.d.Limits {
				if limitTitle(l.Limit) == title {
					return limitCell(l, e.d.Figures)
				}
			}
			return gridCell{text: "not set"}
		})
	}
}

// cases adds the further sticking cases of designs whose study gives no sticking.
func (t *comparison) cases(figures []hazewright.FigureDef) {
	var names []string
	for _, e := range t.entries {
		for _, c := range e.d.Cases[min(1, len(e.d.Cases)):] {
			if !slices.Contains(names, c.Name) {
				names = append(names, c.Name)
			}
		}
	}
	for _, name := range names {
		t.grid.rows = append(t.grid.rows, gridRow{head: "Where sticking is not given: if " + clean(name)})
		row := func(head, unit, none string, cell func(v variant) gridCell) {
			t.row("  "+head, unit, none, func(e entry) gridCell {
				for _, v := range variantsOf(e.d) {
					if v.name == name {
						return cell(v)
					}
				}
				return gridCell{text: "as above"}
			})
		}
		row("Goal", "", "not reached", goalCell)
		for _, def := range figures {
			if slices.Contains(caseIDs, def.ID) || def.ID == figures[0].ID {
				row(def.Title, unitHead(def.Shown), noProgramme(def.ID), func(v variant) gridCell { return t.figure(def, v.figures[def.ID]) })
			}
		}
		row("Flights a window to hold it", "", "-", upkeepCell)
		row("Landing the plant", "", "-", buildCell)
		row("Limits", "", "-", func(v variant) gridCell { return failures(v.limits, v.figures) })
	}
}

// failures names each limit that fails and by what factor.
func failures(limits []hazewright.LimitResult, figures map[string]hazewright.FigureValue) gridCell {
	var failed []string
	for _, l := range limits {
		if l.Known && !l.Met {
			def, _ := hazewright.FigureByID(l.Figure)
			failed = append(failed, def.Title+strings.TrimPrefix(limitWord(l, figures[l.Figure]), "FAILED"))
		}
	}
	if len(failed) > 0 {
		return gridCell{text: "FAILED: " + strings.Join(failed, ", "), tone: bad}
	}
	return gridCell{text: limitsWord(limits), tone: limitsTone(limits)}
}
