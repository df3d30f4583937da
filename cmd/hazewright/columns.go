package main

import (
	"io"
	"strings"
	"unicode/utf8"
)

const (
	columnsWidth = 110 // where the last column of a listing is folded
	columnsWide  = 40  // cells longer than this do not widen their column, they run over
	columnsFold  = 40  // the last column is folded only if it has at least this much room
)

// writeColumns writes rows as aligned columns, two spaces apart, the last one folded
// at words.
func writeColumns(w io.StringWriter, rows [][]string) error {
	var widths []int
	for _, row := range rows {
		for i, cell := range row[:max(len(row)-1, 0)] {
			if i == len(widths) {
				widths = append(widths, 0)
			}
			if n := utf8.RuneCountInString(cell); n <= columnsWide {
				widths[i] = max(widths[i], n)
			}
		}
	}
	for _, row := range rows {
		var b strings.Builder
		indent := 0
		for i, cell := range row {
			if i < len(row)-1 {
				b.WriteString(cell)
				b.WriteString(strings.Repeat(" ", max(widths[i]-utf8.RuneCountInString(cell), 0)+2))
				indent += widths[i] + 2
				continue
			}
			lines := []string{cell}
			if columnsWidth-indent >= columnsFold {
				lines = fold(cell, columnsWidth-indent)
			}
			for j, line := range lines {
				if j > 0 {
					b.WriteString("\n" + strings.Repeat(" ", indent))
				}
				b.WriteString(line)
			}
		}
		if _, err := w.WriteString(strings.TrimRight(b.String(), " ") + "\n"); err != nil {
			return err
		}
	}
	return nil
}

// fold breaks text at spaces into lines of at most width characters; a longer word has
// a line of its own. Text that fits stays as it is.
func fold(text string, width int) []string {
	if utf8.RuneCountInString(text) <= width {
		return []string{text}
	}
	var lines []string
	line := ""
	for word := range strings.FieldsSeq(text) {
		switch {
		case line == "":
			line = word
		case utf8.RuneCountInString(line)+1+utf8.RuneCountInString(word) > width:
			lines = append(lines, line)
			line = word
		default:
			line += " " + word
		}
	}
	return append(lines, line)
}
