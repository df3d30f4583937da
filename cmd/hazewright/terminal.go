package main

import (
	"io"
	"os"
	"strings"

	"golang.org/x/term"
)

// terminalWidth returns the columns of the terminal that w is, or 0 if w is none or one
// that cannot move its cursor.
func terminalWidth(w io.Writer) int {
	f, ok := w.(*os.File)
	if !ok || !term.IsTerminal(int(f.Fd())) || os.Getenv("TERM") == "dumb" {
		return 0
	}
	columns, _, err := term.GetSize(int(f.Fd()))
	if err != nil || columns <= 0 {
		return 80
	}
	return columns
}

// inColour says whether to colour what goes to w. An explicit setting wins over
// NO_COLOR, which counts when it is present and not empty.
func inColour(setting string, w io.Writer) bool {
	switch setting {
	case "always":
		return true
	case "never":
		return false
	}
	return os.Getenv("NO_COLOR") == "" && terminalWidth(w) > 0
}

// quoted returns text as a shell would have to be given it.
func quoted(text string) string {
	plain := text != "" && strings.IndexFunc(text, func(r rune) bool {
		return !strings.ContainsRune("abcdefghijklmnopqrstuvwxyzABCDEFGHIJKLMNOPQRSTUVWXYZ0123456789_-./=:,+@", r)
	}) < 0
	if plain {
		return text
	}
	return "'" + strings.ReplaceAll(text, "'", `'\''`) + "'"
}
