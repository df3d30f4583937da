package reports

import (
	"bufio"
	"strings"
)

// gridCell is one cell of a terminal table: a text with a mark after it, aligned apart.
type gridCell struct {
	text, mark string
	tone       tone
}

// gridRow is one row: its head, its unit, and one cell for each column. A row without
// cells is a heading.
type gridRow struct {
	head, unit string
	cells      []gridCell
}

// grid is a terminal table with named columns.
type grid struct {
	columns []string
	rows    []gridRow
}

const (
	gap        = 2
	widestCell = 18 // longer texts are wrapped
	widestHead = 34
)

// write lays the table out in blocks of as many columns as fit the width.
func (g *grid) write(w *bufio.Writer, style Style) {
	head, unit := 0, 0
	for _, r := range g.rows {
		for _, line := range wrap(r.head, widestHead) {
			head = max(head, columnsOf(line))
		}
		unit = max(unit, columnsOf(r.unit))
	}
	text, mark := make([]int, len(g.columns)), make([]int, len(g.columns))
	for i, name := range g.columns {
		for _, line := range wrap(name, widestCell) {
			text[i] = max(text[i], columnsOf(line))
		}
		for _, r := range g.rows {
			if i >= len(r.cells) {
				continue
			}
			for _, line := range wrap(r.cells[i].text, widestCell) {
				text[i] = max(text[i], columnsOf(line))
			}
			mark[i] = max(mark[i], columnsOf(r.cells[i].mark))
		}
	}
	for from := 0; from < len(g.columns); {
		to, used := from, head+gap+unit
		for to < len(g.columns) && (to == from || style.Width <= 0 || used+gap+text[to]+mark[to] <= style.Width) {
			used += gap + text[to] + mark[to]
			to++
		}
		if from > 0 {
			w.WriteByte('\n')
		}
		g.block(w, style, from, to, head, unit, text, mark)
		from = to
	}
}

// block writes the columns from..to.
func (g *grid) block(w *bufio.Writer, style Style, from, to, head, unit int, text, mark []int) {
	names := gridRow{cells: make([]gridCell, len(g.columns))}
	for i, name := range g.columns {
		names.cells[i] = gridCell{text: name, tone: strong}
	}
	for _, r := range append([]gridRow{names}, g.rows...) {
		if len(r.cells) == 0 {
			writeLine(w, style.paint(r.head, strong))
			continue
		}
		heads := wrap(r.head, widestHead)
		height := len(heads)
		lines := make([][]string, len(g.columns))
		for i := from; i < to; i++ {
			lines[i] = wrap(r.cells[i].text, widestCell)
			height = max(height, len(lines[i]))
		}
		for k := range height {
			var b strings.Builder
			u := ""
			if k == 0 {
				u = r.unit
			}
			b.WriteString(padRight(at(heads, k), head) + strings.Repeat(" ", gap) + padRight(u, unit))
			for i := from; i < to; i++ {
				m := ""
				if k == 0 {
					m = r.cells[i].mark
				}
				b.WriteString(strings.Repeat(" ", gap))
				b.WriteString(style.paint(padLeft(at(lines[i], k), text[i]), r.cells[i].tone))
				b.WriteString(padRight(m, mark[i]))
			}
			writeLine(w, b.String())
		}
	}
}

func at(lines []string, i int) string {
	if i < len(lines) {
		return lines[i]
	}
	return ""
}

// writeLine ends a line without blanks before its end. The writer keeps the first error.
func writeLine(w *bufio.Writer, line string) {
	w.WriteString(strings.TrimRight(line, " "))
	w.WriteByte('\n')
}
