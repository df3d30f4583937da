package reports

import (
	"bytes"
	"encoding/csv"
	"encoding/json"
	"io"
	"math"
	"regexp"
	"slices"
	"strconv"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"

	"hazewright"
)

func jsonOf(t *testing.T, r *hazewright.Result) (map[string]any, []byte) {
	t.Helper()
	var b bytes.Buffer
	if err := JSON(&b, r, fixtureProvenance); err != nil {
		t.Fatal(err)
	}
	var doc map[string]any
	if err := json.Unmarshal(b.Bytes(), &doc); err != nil {
		t.Fatal(err)
	}
	return doc, b.Bytes()
}

// keysOf returns the keys of the first object after a mark, in the order written.
func keysOf(t *testing.T, text []byte, mark string) []string {
	t.Helper()
	_, rest, ok := bytes.Cut(text, []byte(mark))
	if !ok {
		t.Fatalf("no %q", mark)
	}
	dec := json.NewDecoder(bytes.NewReader(rest))
	if _, err := dec.Token(); err != nil { // {
		t.Fatal(err)
	}
	var keys []string
	for dec.More() {
		key, err := dec.Token()
		if err != nil {
			t.Fatal(err)
		}
		keys = append(keys, key.(string))
		var skip json.RawMessage
		if err := dec.Decode(&skip); err != nil {
			t.Fatal(err)
		}
	}
	return keys
}

func TestJSONShape(t *testing.T) {
	doc, text := jsonOf(t, fixture())
	for _, key := range []string{"schema_version", "tool", "version", "study", "world", "goal", "designs"} {
		if _, ok := doc[key]; !ok {
			t.Errorf("no key %q", key)
		}
	}
	if doc["tool"] != "hazewright" || doc["version"] != "0.1.0" || doc["schema_version"] != 1.0 {
		t.Errorf("tool %v, version %v, schema_version %v", doc["tool"], doc["version"], doc["schema_version"])
	}
	study := doc["study"].(map[string]any)
	for _, key := range []string{"title", "sha256", "resolved", "tables"} {
		if _, ok := study[key]; !ok {
			t.Errorf("study has no %q", key)
		}
	}
	if goal := doc["goal"].(map[string]any); goal["kind"] != "warming" || goal["value"] != 25.0 || goal["unit"] != "K" {
		t.Errorf("goal %v", goal)
	}
	designs := doc["designs"].([]any)
	if len(designs) != 3 {
		t.Fatalf("%d designs", len(designs))
	}
	for _, d := range designs {
		for _, key := range []string{"name", "reached", "cause", "figures", "limits", "losses", "gates", "warnings"} {
			if v, ok := d.(map[string]any)[key]; !ok || v == nil {
				t.Errorf("design %v: no %q, or null", d.(map[string]any)["name"], key)
			}
		}
	}
	var ids []string
	for _, def := range hazewright.Figures() {
		ids = append(ids, def.ID)
	}
	if diff := cmp.Diff(ids, keysOf(t, text, `"figures": `)); diff != "" {
		t.Errorf("figures are not in the order of the table (-want +got):\n%s", diff)
	}
}

func TestJSONFiguresAndLimits(t *testing.T) {
	r := fixture()
	doc, _ := jsonOf(t, r)
	iron, ice := doc["designs"].([]any)[0].(map[string]any), doc["designs"].([]any)[2].(map[string]any)
	burden := iron["figures"].(map[string]any)["burden"].(map[string]any)
	if burden["value"] != r.Designs[0].Figures["burden"].Value || burden["unit"] != "kg/m2" || burden["note"] != "estimate" {
		t.Errorf("burden %v", burden)
	}
	missing := ice["figures"].(map[string]any)["burden"].(map[string]any)
	if diff := cmp.Diff(map[string]any{"value": nil, "why": "sublimes"}, missing); diff != "" {
		t.Errorf("a figure without a value (-want +got):\n%s", diff)
	}
	limit := iron["limits"].([]any)[0].(map[string]any)
	if limit["figure"] != "production_rate" || limit["met"] != false || math.Abs(limit["factor"].(float64)-42.68) > 0.01 || limit["side"] != "at_most" {
		t.Errorf("limit %v", limit)
	}
	unknown := ice["limits"].([]any)[0].(map[string]any)
	if unknown["met"] != nil || unknown["factor"] != nil {
		t.Errorf("limit on a figure without a value: %v", unknown)
	}
	if n := len(iron["cases"].([]any)); n != 2 {
		t.Errorf("%d sticking cases, want 2", n)
	}
}

// Every number comes back as it was: shortest form that reads back to the same bits.
func TestJSONRoundTrip(t *testing.T) {
	r := fixture()
	tenth := 0.1
	awkward := tenth + 0.2 // 0.30000000000000004
	r.Designs[0].Figures["burden"] = hazewright.FigureValue{Value: awkward}
	doc, text := jsonOf(t, r)
	got := doc["designs"].([]any)[0].(map[string]any)["figures"].(map[string]any)["burden"].(map[string]any)["value"]
	if got != awkward || !bytes.Contains(text, []byte("0.30000000000000004")) {
		t.Errorf("%v, want %v", got, awkward)
	}
}

// No output lets a NaN or an infinity pass; the error names the figure.
func TestNotFiniteIsAnError(t *testing.T) {
	for _, bad := range []float64{math.NaN(), math.Inf(1), math.Inf(-1)} {
		r := fixture()
		r.Designs[1].Figures["forcing"] = hazewright.FigureValue{Value: bad}
		_, csvErr := CSV(r)
		for name, err := range map[string]error{
			"JSON": JSON(io.Discard, r, fixtureProvenance), "HTML": HTML(io.Discard, r, fixtureProvenance), "CSV": csvErr,
			"Table": Table(io.Discard, r, Style{}), "CompareTable": CompareTable(io.Discard, []*hazewright.Result{r}, "burden", Style{}),
		} {
			if err == nil || !strings.Contains(err.Error(), "forcing") || !strings.Contains(err.Error(), "Tuned mix") {
				t.Errorf("%s with %v: error %v, want one that names the design and the figure", name, bad, err)
			}
		}
	}
	r := fixture()
	delete(r.Designs[0].Figures, "power")
	if err := JSON(io.Discard, r, fixtureProvenance); err == nil || !strings.Contains(err.Error(), "power") {
		t.Errorf("a missing figure: error %v", err)
	}
	r = fixture()
	r.Designs[0].Spectrum[3].Abs = math.NaN()
	if err := HTML(io.Discard, r, fixtureProvenance); err == nil || !strings.Contains(err.Error(), "spectrum") {
		t.Errorf("a NaN in a spectrum: error %v", err)
	}
}

func TestCSVFiles(t *testing.T) {
	files := csvOf(t, fixture())
	var names []string
	for _, f := range files {
		names = append(names, f.Name)
		if !bytes.Contains(f.Data, []byte("\r\n")) {
			t.Errorf("%s: lines do not end in CRLF", f.Name)
		}
		rows, err := csv.NewReader(bytes.NewReader(f.Data)).ReadAll() // also checks that all rows have one length
		if err != nil {
			t.Errorf("%s: %v", f.Name, err)
			continue
		}
		if len(rows) < 2 && f.Name != "inputs.csv" {
			t.Errorf("%s has no rows", f.Name)
		}
	}
	want := []string{"designs.csv", "figures.csv", "limits.csv", "benchmarks.csv", "losses.csv", "gates.csv", "warming_curve.csv", "spectrum.csv", "profile.csv", "schedule.csv", "warnings.csv", "inputs.csv"}
	if diff := cmp.Diff(want, names); diff != "" {
		t.Errorf("files (-want +got):\n%s", diff)
	}
	rows, _ := csv.NewReader(bytes.NewReader(files[0].Data)).ReadAll()
	at := slices.Index(rows[0], "burden [kg/m2]")
	if at < 0 || len(rows) != 5 { // header, two cases of the first design, two more designs
		t.Fatalf("designs.csv: burden in column %d, %d rows", at, len(rows))
	}
	if v, err := strconv.ParseFloat(rows[1][at], 64); err != nil || v != fixture().Designs[0].Figures["burden"].Value {
		t.Errorf("burden %q", rows[1][at])
	}
	if rows[4][at] != "" {
		t.Errorf("a missing burden is %q, want an empty cell", rows[4][at])
	}
}

func csvOf(t *testing.T, r *hazewright.Result) []File {
	t.Helper()
	files, err := CSV(r)
	if err != nil {
		t.Fatal(err)
	}
	return files
}

func TestCSVGuardsFormulas(t *testing.T) {
	for _, c := range []struct{ in, want string }{
		{"=1+1", "'=1+1"}, {"+1", "'+1"}, {"-1", "'-1"}, {"@SUM(A1)", "'@SUM(A1)"}, {"\t=1", "'\t=1"}, {"\r=1", "'\r=1"}, {"＝1", "'＝1"},
		{"iron", "iron"}, {"", ""}, {"a=1", "a=1"},
	} {
		if got := guard(c.in); got != c.want {
			t.Errorf("guard(%q) = %q, want %q", c.in, got, c.want)
		}
	}
	for _, f := range csvOf(t, evilFixture()) {
		rows, err := csv.NewReader(bytes.NewReader(f.Data)).ReadAll()
		if err != nil {
			t.Fatalf("%s: %v", f.Name, err)
		}
		for _, row := range rows {
			for _, c := range row {
				if c == "" || !strings.ContainsRune("=+-@\t\r", rune(c[0])) {
					continue
				}
				if _, err := strconv.ParseFloat(c, 64); err != nil {
					t.Errorf("%s: cell %q is no number and begins like a formula", f.Name, c)
				}
			}
		}
	}
}

// The same result gives the same bytes in every output.
func TestOutputsAreDeterministic(t *testing.T) {
	write := func() string {
		var b bytes.Buffer
		r := evilFixture()
		for _, err := range []error{JSON(&b, r, fixtureProvenance), Table(&b, r, Style{Color: true, Width: 90}),
			CompareTable(&b, []*hazewright.Result{r, fixture()}, "lifetime", Style{Width: 90})} {
			if err != nil {
				t.Fatal(err)
			}
		}
		for _, f := range csvOf(t, r) {
			b.Write(f.Data)
		}
		return b.String()
	}
	first := write()
	for range 3 {
		if write() != first {
			t.Fatal("outputs differ")
		}
	}
}

func tableText(t *testing.T, r *hazewright.Result, style Style) string {
	t.Helper()
	var b bytes.Buffer
	if err := Table(&b, r, style); err != nil {
		t.Fatal(err)
	}
	return b.String()
}

func TestTable(t *testing.T) {
	text := tableText(t, fixture(), Style{Width: 120})
	for _, want := range []string{Scope, "FAILED x42.7", "FAILED x6.15", "not known", "85.23*", "not reached:", "sublimes",
		"Sticking not given: every touch sticks (100 %)", "Sticking not given: one touch in a hundred sticks (1 %)", "12.4",
		"*   estimate:", "  1. uncertain:", "What it hangs on most", Deferral[:40]} {
		if !strings.Contains(text, want) {
			t.Errorf("the table lacks %q:\n%s", want, text)
		}
	}
	for _, id := range mainIDs {
		def, _ := hazewright.FigureByID(id)
		if !strings.Contains(text, "  "+def.Title) {
			t.Errorf("the table lacks %q", def.Title)
		}
	}
	if strings.Contains(text, "\x1b") {
		t.Error("colour where none was asked for")
	}
	if !regexp.MustCompile("\x1b\\[31m *FAILED x42.7\x1b\\[0m").MatchString(tableText(t, fixture(), Style{Color: true})) {
		t.Error("no colour where it was asked for")
	}
}

// No line is wider than asked for where the columns allow it, and none ends in blanks.
func TestTableWidth(t *testing.T) {
	for _, width := range []int{80, 100, 140} {
		for _, line := range strings.Split(tableText(t, fixture(), Style{Width: width}), "\n") {
			if columnsOf(line) > width || strings.HasSuffix(line, " ") {
				t.Errorf("width %d: line of %d columns %q", width, columnsOf(line), line)
			}
		}
	}
}

func TestTableCleansNames(t *testing.T) {
	text := tableText(t, evilFixture(), Style{Width: 100})
	for _, bad := range []string{"\x1b", "\u202e", "\r"} {
		if strings.Contains(text, bad) {
			t.Errorf("the table contains %q", bad)
		}
	}
}

func TestCompareTable(t *testing.T) {
	a, b := fixture(), fixture()
	b.Study.Title = "Second study"
	for id, v := range b.Designs[0].Figures {
		if id == "production_rate" {
			v.Value /= 1000 // now the least
			b.Designs[0].Figures[id] = v
		}
	}
	var out bytes.Buffer
	if err := CompareTable(&out, []*hazewright.Result{a, b}, "production_rate", Style{}); err != nil {
		t.Fatal(err)
	}
	text := out.String()
	for _, want := range []string{"1. Iron rods", "Second study", "no programme", "Landed mass at most 60 kt", "less is better",
		"Where sticking is not given: if one touch in a hundred sticks (1 %)", "FAILED: Landed"} {
		if !strings.Contains(text, want) {
			t.Errorf("the comparison lacks %q:\n%s", want, text)
		}
	}
	if strings.Contains(text, "goals differ") {
		t.Error("the goals are the same")
	}
	for _, line := range strings.Split(text, "\n") {
		if columnsOf(line) > compareWidth {
			t.Errorf("line of %d columns %q", columnsOf(line), line)
		}
	}
	b.Study.Goal.Warming = 30
	out.Reset()
	if err := CompareTable(&out, []*hazewright.Result{a, b}, "production_rate", Style{}); err != nil {
		t.Fatal(err)
	}
	if !strings.Contains(out.String(), "goals differ (warming of 25 K; warming of 30 K)") {
		t.Errorf("no word on the goals:\n%s", out.String())
	}
	if at := strings.Index(text, "5. Ice veil"); at < 0 || at < strings.Index(text, "4. ") {
		t.Errorf("designs without a value must come last:\n%s", text)
	}
	err := CompareTable(io.Discard, []*hazewright.Result{a}, "prodution", Style{})
	if err == nil || !strings.Contains(err.Error(), "production_rate") {
		t.Errorf("unknown figure: error %v, want one that lists the known ones", err)
	}
}

// More is better for a lifetime: the longest comes first.
func TestCompareRanksByBetter(t *testing.T) {
	var out bytes.Buffer
	if err := CompareTable(&out, []*hazewright.Result{fixture()}, "lifetime", Style{}); err != nil {
		t.Fatal(err)
	}
	if !strings.Contains(out.String(), "1. Tuned mix") {
		t.Errorf("9.31 yr must come before 0.158 yr:\n%s", out.String())
	}
}

func TestCleanAndTypographic(t *testing.T) {
	for _, c := range []struct{ in, want string }{
		{"Iron rods", "Iron rods"}, {"a\nb\tc", "a b c"}, {"a\x1b[31mb", "a?[31mb"}, {"a\u202eb", "a?b"}, {"\xff", "?"}, {"Süd 氷", "Süd 氷"}, {"  a  ", "a"},
	} {
		if got := clean(c.in); got != c.want {
			t.Errorf("clean(%q) = %q, want %q", c.in, got, c.want)
		}
	}
	for _, c := range []struct{ in, want string }{
		{"85 mg/m2", "85 mg/m²"}, {"21 1/cm3", "21 1/cm³"}, {"8 um", "8 µm"}, {"7.8e18 1/s", "7.8\u00a0×\u00a010¹⁸ 1/s"}, {"1e-7", "1\u00a0×\u00a010⁻⁷"},
		{"Team2 sum", "Team2 sum"}, {"25 K", "25 K"},
	} {
		if got := typographic(c.in); got != c.want {
			t.Errorf("typographic(%q) = %q, want %q", c.in, got, c.want)
		}
	}
	if got := prettyText("1234567 t/d"); got != "1\u202f234\u202f567 t/d" {
		t.Errorf("thousands: %q", got)
	}
}
