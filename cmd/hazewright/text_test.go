package main

import (
	"bytes"
	"os"
	"os/exec"
	"slices"
	"strings"
	"testing"
	"time"

	"hazewright/reports"
)

func TestFold(t *testing.T) {
	for _, c := range []struct {
		text  string
		width int
		want  []string
	}{
		{"", 5, []string{""}},
		{"  as it is", 10, []string{"  as it is"}},
		{"one two three", 7, []string{"one two", "three"}},
		{"much-too-long a b", 5, []string{"much-too-long", "a b"}},
		{"µµ µµ µµ", 5, []string{"µµ µµ", "µµ"}}, // letters count, not bytes
	} {
		if got := fold(c.text, c.width); !slices.Equal(got, c.want) {
			t.Errorf("fold(%q, %d) = %q, want %q", c.text, c.width, got, c.want)
		}
	}
}

func TestQuoted(t *testing.T) {
	for _, c := range []struct{ text, want string }{
		{"thaw/study.yaml", "thaw/study.yaml"},
		{"fate.sticking=5 %", "'fate.sticking=5 %'"},
		{"it's", `'it'\''s'`},
		{"", "''"},
		{"a\nb", "'a\nb'"},
	} {
		if got := quoted(c.text); got != c.want {
			t.Errorf("quoted(%q) = %s, want %s", c.text, got, c.want)
		}
	}
}

// TestColour holds the order: an explicit setting, then NO_COLOR, then the terminal.
func TestColour(t *testing.T) {
	var file bytes.Buffer // not a terminal
	t.Setenv("NO_COLOR", "1")
	if !inColour("always", &file) {
		t.Error("always: NO_COLOR won over the explicit setting")
	}
	t.Setenv("NO_COLOR", "")
	if inColour("auto", &file) || inColour("never", &file) {
		t.Error("colour off a terminal")
	}
}

func TestProgressWaitsASecond(t *testing.T) {
	var out bytes.Buffer
	p := newProgress(&out)
	p.report("optics", 3, 12)
	p.show(999 * time.Millisecond)
	if out.Len() > 0 {
		t.Errorf("after 0.999 s it shows %q", out.String())
	}
	p.show(61500 * time.Millisecond)
	p.stop()
	if want := "\r\x1b[Koptics: 3 of 12, 1m1s\r\x1b[K"; out.String() != want {
		t.Errorf("got %q, want %q", out.String(), want)
	}
}

// TestNoticesNameEveryModule compares the list of licences with the modules that are
// linked into the program.
func TestNoticesNameEveryModule(t *testing.T) {
	out, err := exec.Command("go", "list", "-deps", "-f", "{{with .Module}}{{.Path}}{{end}}", ".").Output()
	if err != nil {
		t.Skip("go list does not run here:", err)
	}
	list, err := noticeList()
	if err != nil {
		t.Fatal(err)
	}
	texts, err := licenceTexts()
	if err != nil {
		t.Fatal(err)
	}
	// A sentence of each licence, to know its text by.
	sentences := map[string]string{
		"Apache-2.0":   "TERMS AND CONDITIONS FOR USE, REPRODUCTION, AND DISTRIBUTION",
		"BSD-3-Clause": "Neither the name of the copyright holder nor the names of its",
		"MIT":          "The above copyright notice and this permission notice shall be included in all",
		"0BSD":         "purpose with or without fee is hereby granted.",
	}
	listed := map[string]bool{}
	for _, row := range list {
		listed[row[0]] = true
		sentence, known := sentences[row[1]]
		if !known || !slices.ContainsFunc(texts, func(l reports.Licence) bool { return strings.Contains(l.Text, sentence) }) {
			t.Errorf("%s: the text of %s is not among those printed", row[0], row[1])
		}
	}
	modules := strings.Fields(string(out))
	if len(modules) < 5 {
		t.Fatalf("go list found only %q", modules)
	}
	for _, m := range modules {
		if !listed[m] {
			t.Errorf("module %s is linked into the program and not in notices/list.txt", m)
		}
	}
}

// TestChartLibraryIsTheOneCarried holds that version and licences name the script that
// reports embed.
func TestChartLibraryIsTheOneCarried(t *testing.T) {
	script, err := os.ReadFile("../../reports/assets/echarts.custom.min.js")
	if err != nil {
		t.Fatal(err)
	}
	if !bytes.HasPrefix(script, []byte("/* "+chartLibrary+",")) {
		t.Errorf("the script begins %q, not with %s", script[:40], chartLibrary)
	}
	list, err := noticeList()
	if err != nil {
		t.Fatal(err)
	}
	if !slices.ContainsFunc(list, func(row []string) bool { return strings.HasPrefix(row[0], chartLibrary+",") }) {
		t.Errorf("the list of licences lacks %s", chartLibrary)
	}
}
