package hazewright

import (
	"fmt"
	"slices"
	"strconv"
	"strings"
	"unicode"
)

// Mistake is one thing in a study that must be mended before it can be assessed.
type Mistake struct {
	File    string // study or table file, or "--set #2"
	Line    int    // from 1; 0 where there is no line
	Column  int    // from 1; 0 where there is no column
	Field   string // path of the input: "designs[Iron rods].particles[0].length"
	Value   string // as written; may be empty
	Problem string // "is outside"
	Allowed string // "0.1 um to 100 um"; may be empty
	Hint    string // how to mend it; may be empty

	order [3]int // layer, line, column: mistakes print in this order
}

// String returns the mistake in one line:
//
//	study.yaml:14:11: designs[Iron rods].particles[0].length: 900 um is outside 0.1 um to 100 um; choose a length inside it
func (m Mistake) String() string {
	var b strings.Builder
	b.WriteString(m.File)
	if m.Line > 0 {
		fmt.Fprintf(&b, ":%d", m.Line)
		if m.Column > 0 {
			fmt.Fprintf(&b, ":%d", m.Column)
		}
	}
	b.WriteString(":")
	if m.Field != "" {
		b.WriteString(" " + m.Field + ":")
	}
	for _, part := range []string{m.Value, m.Problem, m.Allowed} {
		if part != "" {
			b.WriteString(" " + part)
		}
	}
	if m.Hint != "" {
		b.WriteString("; " + m.Hint)
	}
	return b.String()
}

// StudyError holds every mistake of a study, in file order, those of --set last.
type StudyError struct{ Mistakes []Mistake }

// Error returns one line for each mistake.
func (e *StudyError) Error() string {
	lines := make([]string, len(e.Mistakes))
	for i, m := range e.Mistakes {
		lines[i] = m.String()
	}
	return strings.Join(lines, "\n")
}

// sortMistakes puts mistakes in file order; those at one place keep their order.
func sortMistakes(ms []Mistake) {
	slices.SortStableFunc(ms, func(a, b Mistake) int { return slices.Compare(a.order[:], b.order[:]) })
}

// problem is what is wrong with a value, before it is known where the value stands.
type problem struct{ what, allowed, hint string }

// quoteLong shortens a value for a message and quotes it where that helps reading.
func quoteLong(s string) string {
	const longest = 60
	if r := []rune(s); len(r) > longest {
		s = string(r[:longest]) + "..."
	}
	if s != strings.TrimSpace(s) || strings.ContainsFunc(s, unseen) {
		return fmt.Sprintf("%q", s)
	}
	return s
}

// unseen reports whether a character would upset the line it is printed in: control
// characters, line breaks of every kind, and the signs that turn the direction of writing.
func unseen(r rune) bool {
	return unicode.IsControl(r) || unicode.In(r, unicode.Zl, unicode.Zp, unicode.Bidi_Control)
}

// visible returns a text of one line in which such characters are escaped: "\x1b", "\u202e".
func visible(s string) string {
	s = strings.ToValidUTF8(s, "?")
	if !strings.ContainsFunc(s, unseen) {
		return s
	}
	var b strings.Builder
	for _, r := range s {
		if unseen(r) {
			quoted := strconv.QuoteRuneToASCII(r)
			b.WriteString(quoted[1 : len(quoted)-1])
		} else {
			b.WriteRune(r)
		}
	}
	return b.String()
}

// place is where a value stands: its layer, and the line and column or the number of
// the --set.
type place struct {
	layer        layer
	line, column int // of a file; for --set the line holds its number
}

type layer int

const (
	layerDefault layer = iota
	layerFile
	layerSet
)
