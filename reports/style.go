package reports

import (
	"strings"
	"unicode"
)

// Style says how a terminal table may look.
type Style struct {
	Color bool // ANSI colours, besides words that say the same
	Width int  // columns of the terminal; 0 means no limit
}

// tone colours a cell. Colour never carries anything that the words do not.
type tone string

const (
	plain  tone = ""
	good   tone = "32" // green
	warn   tone = "33" // yellow
	bad    tone = "31" // red
	strong tone = "1"  // bold
)

func (s Style) paint(text string, t tone) string {
	if !s.Color || t == plain || strings.TrimSpace(text) == "" {
		return text
	}
	return "\x1b[" + string(t) + "m" + text + "\x1b[0m"
}

// columnsOf returns how many terminal columns a text takes: marks that combine with
// the letter before take none, wide East Asian letters two.
func columnsOf(s string) int {
	n := 0
	for _, r := range s {
		switch {
		case unicode.In(r, unicode.Mn, unicode.Me):
		case unicode.In(r, unicode.Han, unicode.Hangul, unicode.Hiragana, unicode.Katakana), r >= 0xFF01 && r <= 0xFF60:
			n += 2
		default:
			n++
		}
	}
	return n
}

func padLeft(s string, width int) string {
	return strings.Repeat(" ", max(width-columnsOf(s), 0)) + s
}

func padRight(s string, width int) string {
	return s + strings.Repeat(" ", max(width-columnsOf(s), 0))
}

// wrap breaks a text into lines of at most width columns, at spaces where it can.
// Width 0 means no limit.
func wrap(s string, width int) []string {
	if width <= 0 || columnsOf(s) <= width {
		return []string{s}
	}
	if indent := len(s) - len(strings.TrimLeft(s, " ")); indent > 0 && indent < width {
		lines := wrap(s[indent:], width-indent)
		for i := range lines {
			lines[i] = s[:indent] + lines[i]
		}
		return lines
	}
	var lines []string
	line := ""
	for _, word := range strings.Fields(s) {
		for columnsOf(word) > width { // too long for any line
			if line != "" {
				lines, line = append(lines, line), ""
			}
			head := cut(word, width)
			lines, word = append(lines, head), word[len(head):]
		}
		switch {
		case line == "":
			line = word
		case columnsOf(line)+1+columnsOf(word) <= width:
			line += " " + word
		default:
			lines, line = append(lines, line), word
		}
	}
	if line != "" {
		lines = append(lines, line)
	}
	return lines
}

// cut returns the longest head of s that fits the width, at least one letter.
func cut(s string, width int) string {
	n := 0
	for i, r := range s {
		n += columnsOf(string(r))
		if n > width && i > 0 {
			return s[:i]
		}
	}
	return s
}
