package reports

import (
	"bufio"
	"crypto/sha256"
	_ "embed" // the files of the page
	"encoding/base64"
	"fmt"
	"html/template"
	"io"
	"strings"

	"hazewright"
)

var (
	//go:embed assets/report.html
	pageSource string
	//go:embed assets/report.css
	styleSheet string
	//go:embed assets/boot.js
	bootScript string
	//go:embed assets/echarts.custom.min.js
	echartsScript string

	//go:embed assets/LICENSE-echarts
	licenceECharts string
	//go:embed assets/NOTICE-echarts
	noticeECharts string
	//go:embed assets/LICENSE-d3
	licenceD3 string
	//go:embed assets/LICENSE-zrender
	licenceZrender string
	//go:embed assets/LICENSE-tslib
	licenceTslib string
)

var pageTemplate = template.Must(template.New("report").Parse(pageSource))

// Licence is the licence text of a part that every report carries within itself.
type Licence struct{ Name, Text string }

// Licences returns the licences and notices of what a report redistributes.
func Licences() []Licence {
	return []Licence{
		{"Apache ECharts, NOTICE", noticeECharts},
		{"Apache ECharts", licenceECharts},
		{"d3, within Apache ECharts", licenceD3},
		{"zrender", licenceZrender},
		{"tslib", licenceTslib},
	}
}

// contentHash is the CSP source expression for a script or style sheet in the page.
func contentHash(s string) string {
	sum := sha256.Sum256([]byte(s))
	return "'sha256-" + base64.StdEncoding.EncodeToString(sum[:]) + "'"
}

// securityPolicy allows the two scripts and the style sheet by hash, and nothing else.
func securityPolicy() string {
	return fmt.Sprintf("default-src 'none'; script-src %s %s; style-src %s; img-src data:; base-uri 'none'; form-action 'none'",
		contentHash(echartsScript), contentHash(bootScript), contentHash(styleSheet))
}

// HTML writes the report: one file that needs nothing else, opens by double click,
// prints to A4 and follows the reader's light or dark setting. The first screen holds
// the answer for each design, what it hangs on, its largest caution and the scope.
func HTML(w io.Writer, r *hazewright.Result, p Provenance) error {
	if err := check(r); err != nil {
		return err
	}
	view, err := newPage(r, p)
	if err != nil {
		return err
	}
	out := bufio.NewWriterSize(w, 1<<16)
	if err := pageTemplate.Execute(out, view); err != nil {
		return fmt.Errorf("reports: writing the report: %w", err)
	}
	if err := out.Flush(); err != nil {
		return fmt.Errorf("reports: writing the report: %w", err)
	}
	return nil
}

// page is what the template shows. All strings are data: the template escapes them.
type page struct {
	CSP           string
	CSS           template.CSS
	Echarts, Boot template.JS

	Title, World, Goal, Scope, Deferral, HingeRule, EstimateNote string
	Sections                                                     []sectionLink
	Answers                                                      []answerView
	Columns                                                      []string
	Verdicts                                                     []string
	ColumnCount                                                  int
	HasBenchmarks                                                bool
	Groups                                                       []groupView
	Populations                                                  []populationView
	ChartSections                                                []chartSection
	LimitRows                                                    []limitRow
	GateRows                                                     []gateRow
	Warnings                                                     []warning
	Inputs                                                       []inputView
	Methods                                                      []hazewright.Method
	Words                                                        []Word
	Version, Command, File, SHA256                               string
	Tables                                                       []hazewright.TableFile
	Licences                                                     []Licence
}

type sectionLink struct{ ID, Title string }

type chartSection struct {
	ID, Title, Note string
	Charts          []*chart
}

type figureView struct {
	Title, Definition, Text, Note, Why string
	Estimate                           bool
}

type answerView struct {
	Name, Cause       string
	Reached, Never    bool // Never: the programme does not get there
	Limits, LimitTone string
	Failed            []string
	Key               []figureView
	CaseShown         string
	CaseNames         []string
	Cases             []caseView
	Hinge             string
	Caution           *Gate
	CautionMore       string
}

type caseView struct {
	Name  string
	Cells []string
}

type groupView struct {
	Title string
	Rows  []rowView
}

type rowView struct {
	ID, Title, Definition, Unit, None string
	Cells                             []cellView
}

type cellView struct {
	Text, Note, Why string
	Estimate        bool
	Benchmarks      []string
}

type populationView struct {
	Design, Name string
	Numbers      []string
	Optics       string
}

type limitRow struct {
	Title, Pos string
	Cells      [][]limitView
}

type limitView struct{ Word, Tone, Text string }

type gateRow struct {
	Title, Text, Source, NextStep string
	Cells                         []gateView
}

type gateView struct{ State, Tone, Finding string }

type inputView struct{ Path, Text, Title, Origin, Source string }

func newPage(r *hazewright.Result, p Provenance) (*page, error) {
	s := r.Study
	v := &page{
		CSP: securityPolicy(), CSS: template.CSS(styleSheet), Echarts: template.JS(echartsScript), Boot: template.JS(bootScript),
		Title: clean(s.Title), World: clean(s.World.Name), Goal: typographic(goalText(s.Goal)), Scope: Scope, Deferral: Deferral, HingeRule: hingeRule,
		ColumnCount: len(r.Designs) + 3,
		Words:       Words(), Version: clean(p.Version), Command: clean(p.Command), File: clean(s.File), SHA256: clean(s.SHA256), Licences: Licences(),
	}
	for i := range r.Designs {
		d := &r.Designs[i]
		v.Columns = append(v.Columns, clean(d.Name))
		v.Verdicts = append(v.Verdicts, goalWord(d))
		v.Answers = append(v.Answers, answerOf(r, d))
		v.Populations = append(v.Populations, populationsOf(d)...)
		v.HasBenchmarks = v.HasBenchmarks || len(benchmarks(r, d)) > 0
	}
	for _, m := range r.Methods {
		if m.Estimate {
			v.EstimateNote = "Values marked \"estimate\" rest on a method that is itself an estimate; its validity stands under Methods."
		}
		v.Methods = append(v.Methods, m)
	}
	v.Groups = groupsOf(r)
	v.LimitRows = limitRows(r)
	v.GateRows = gateRows(r)
	for _, w := range warnings(r) {
		w.Design, w.Where, w.Text = clean(w.Design), clean(w.Where), clean(w.Text)
		v.Warnings = append(v.Warnings, w)
	}
	for _, in := range s.Inputs() {
		origin := in.Origin.Kind
		if place := strings.TrimPrefix(in.Origin.Pos, s.File+":"); place != "" {
			origin += ", " + place
		}
		v.Inputs = append(v.Inputs, inputView{clean(in.Path), clean(in.Text), clean(in.Title), clean(origin), clean(in.Source)})
	}
	for _, t := range s.Tables {
		v.Tables = append(v.Tables, hazewright.TableFile{File: clean(t.File), SHA256: clean(t.SHA256)})
	}
	sections, err := chartSections(r)
	if err != nil {
		return nil, err
	}
	v.ChartSections = sections
	v.Sections = append(v.Sections, sectionLink{"answer", "Answer"}, sectionLink{"comparison", "Comparison"})
	for _, c := range sections {
		v.Sections = append(v.Sections, sectionLink{c.ID, c.Title})
	}
	v.Sections = append(v.Sections, []sectionLink{{"limits", "Limits"}, {"gates", "Cautions and gates"}, {"warnings", "Warnings"},
		{"inputs", "Inputs"}, {"methods", "Methods"}, {"words", "Words"}, {"provenance", "Provenance"}}...)
	return v, nil
}

// chartSections draws all charts that the result has data for and numbers them.
func chartSections(r *hazewright.Result) ([]chartSection, error) {
	type maker func() (*chart, error)
	one := func(f func(*hazewright.Result) (*chart, error)) maker { return func() (*chart, error) { return f(r) } }
	var flows []maker
	for i := range r.Designs {
		flows = append(flows, func() (*chart, error) { return flowChart(&r.Designs[i], i+1) })
	}
	plan := []struct {
		id, title, note string
		makers          []maker
	}{
		{"warming", "Warming", "", []maker{one(warmingChart), one(emissionChart)}},
		{"spectra", "Spectra", "", []maker{
			func() (*chart, error) { return spectrumChart(r, false) }, func() (*chart, error) { return spectrumChart(r, true) }}},
		{"aloft", "Time aloft", "", []maker{one(fallChart), one(profileChart), one(lossChart)}},
		{"supply", "Supply", missingDesigns(r), append(flows, one(landedChart))},
		{"schedule", "Schedule and ending", "", []maker{one(scheduleChart), one(endingChart)}},
	}
	var out []chartSection
	number := 0
	for _, p := range plan {
		section := chartSection{ID: p.id, Title: p.title, Note: p.note}
		for _, make := range p.makers {
			c, err := make()
			if err != nil {
				return nil, err
			}
			if c == nil {
				continue
			}
			number++
			c.Number = number
			section.Charts = append(section.Charts, c)
		}
		if len(section.Charts) > 0 {
			out = append(out, section)
		}
	}
	return out, nil
}

// viewOf splits a figure's value into its text and its marks.
func viewOf(def hazewright.FigureDef, v hazewright.FigureValue, text string) figureView {
	out := figureView{Title: def.Title, Definition: def.Definition, Text: prettyText(text), Estimate: estimated(v)}
	if !v.Null && !out.Estimate {
		out.Note = clean(v.Note)
	}
	return out
}

func answerOf(r *hazewright.Result, d *hazewright.DesignResult) answerView {
	a := answerView{
		Name: clean(d.Name), Reached: d.Reached, Never: neverInTime(d.Figures), Cause: clean(d.Cause), Limits: "Limits: " + limitsWord(d.Limits) + ".",
		CaseShown: stickingCase(d), Hinge: typographic(hinge(d)),
	}
	switch n := count(d.Limits); {
	case n.failed > 0:
		a.LimitTone = "bad"
	case n.met > 0 && n.unknown == 0:
		a.LimitTone = "good"
	}
	for _, l := range d.Limits {
		if l.Known && !l.Met {
			a.Failed = append(a.Failed, prettyText(limitTitle(l.Limit))+": "+limitWord(l))
		}
	}
	for _, def := range defs(answerIDs) {
		v := d.Figures[def.ID]
		one := viewOf(def, v, figureText(def, v))
		if v.Null && d.Reached {
			one.Why = why(v)
		}
		a.Key = append(a.Key, one)
	}
	if !d.Reached {
		mark := estimated(hazewright.FigureValue{Note: d.Figures["warming"].Note})
		a.Key = append(a.Key, figureView{Title: "Largest warming found", Definition: "top of the warming curve",
			Text: pretty(d.MaxWarming, "K"), Estimate: mark || warmingEstimated(r)})
	}
	for _, c := range d.Cases {
		a.CaseNames = append(a.CaseNames, clean(c.Name))
	}
	if len(d.Cases) > 0 {
		a.Cases = casesOf(d)
	}
	if g, ok := largestCaution(r, d); ok {
		g.Finding = typographic(g.Finding)
		a.Caution = &g
		n := 0
		for _, g := range Gates(r, d) {
			if g.State == Tripped {
				n++
			}
		}
		a.CautionMore = fmt.Sprintf("%d of %d conditions trip.", n, len(gateTable))
	}
	return a
}

// casesOf returns the rows of the table of sticking cases, one column for each case.
func casesOf(d *hazewright.DesignResult) []caseView {
	var out []caseView
	for _, def := range defs(caseIDs) {
		row := caseView{Name: def.Title}
		for _, c := range d.Cases {
			row.Cells = append(row.Cells, prettyText(figureText(def, c.Figures[def.ID])))
		}
		out = append(out, row)
	}
	if len(d.Limits) > 0 {
		row := caseView{Name: "Limits met"}
		for _, c := range d.Cases {
			row.Cells = append(row.Cells, fmt.Sprintf("%d of %d", count(c.Limits).met, len(c.Limits)))
		}
		out = append(out, row)
	}
	return out
}

// warmingEstimated reports whether the warming method is an estimate.
func warmingEstimated(r *hazewright.Result) bool {
	for _, m := range r.Methods {
		if m.Estimate && strings.EqualFold(m.Stage, "warming") {
			return true
		}
	}
	return false
}

func sentenceCase(s string) string {
	if s == "" {
		return s
	}
	return strings.ToUpper(s[:1]) + s[1:]
}

func groupsOf(r *hazewright.Result) []groupView {
	var out []groupView
	for _, g := range groups(nil) {
		view := groupView{Title: g.title}
		for _, def := range g.figures {
			row := rowView{ID: def.ID, Title: def.Title, Definition: def.Definition, Unit: typographic(unitHead(def.Shown)), None: noProgramme(def.ID)}
			for i := range r.Designs {
				d := &r.Designs[i]
				v := d.Figures[def.ID]
				one := viewOf(def, v, figureCell(def, v))
				c := cellView{Text: one.Text, Note: one.Note, Estimate: one.Estimate}
				if v.Null && (d.Reached || v.Why != d.Cause) {
					c.Why = why(v)
				}
				for _, b := range benchmarks(r, d) {
					if b.Figure == def.ID {
						c.Benchmarks = append(c.Benchmarks, benchmarkText(def, b))
					}
				}
				row.Cells = append(row.Cells, c)
			}
			view.Rows = append(view.Rows, row)
		}
		out = append(out, view)
	}
	return out
}

func benchmarkText(def hazewright.FigureDef, b benchmark) string {
	text := "benchmark " + pretty(b.Value, def.Shown)
	if b.ratio != 0 {
		text += ", ratio " + factor(b.ratio)
	}
	if b.Source != "" {
		text += " (" + clean(b.Source) + ")"
	}
	return text
}

func populationsOf(d *hazewright.DesignResult) []populationView {
	var out []populationView
	for _, p := range d.Populations {
		life := duration(p.Lifetime)
		if p.Given {
			life += ", given"
		}
		if p.Lifetime <= 0 {
			life = "-"
		}
		optics := clean(p.OpticsMethod)
		if p.OpticsError > 0 {
			optics += ", within " + percent(max(p.OpticsError, 0.001))
		}
		out = append(out, populationView{clean(d.Name), clean(p.Name), []string{
			percent(p.Share), typographic(significant(p.ParticleMass, 3)), significant(p.KappaThermal, digits), significant(p.KappaThermalExt, digits),
			significant(p.KappaSolarExt, digits), significant(p.FallSpeed*1e3, 3), life}, optics})
	}
	return out
}

func limitRows(r *hazewright.Result) []limitRow {
	var out []limitRow
	for i, l := range r.Study.Limits {
		row := limitRow{Title: prettyText(limitTitle(l)), Pos: clean(l.Pos)}
		def, _ := hazewright.FigureByID(l.Figure)
		view := func(limits []hazewright.LimitResult, figures map[string]hazewright.FigureValue, name string) limitView {
			if i >= len(limits) {
				return limitView{Word: "not known"}
			}
			v := limitView{Word: limitWord(limits[i]), Text: prettyText(figureText(def, figures[l.Figure])), Tone: "soft"}
			if limits[i].Known {
				v.Tone = "bad"
				if limits[i].Met {
					v.Tone = "good"
				}
			} else {
				v.Text = why(figures[l.Figure])
			}
			if name != "" {
				v.Text += " if " + clean(name)
			}
			return v
		}
		for k := range r.Designs {
			d := &r.Designs[k]
			var cell []limitView
			if len(d.Cases) == 0 {
				cell = append(cell, view(d.Limits, d.Figures, ""))
			}
			for _, c := range d.Cases {
				cell = append(cell, view(c.Limits, c.Figures, c.Name))
			}
			row.Cells = append(row.Cells, cell)
		}
		out = append(out, row)
	}
	return out
}

func gateRows(r *hazewright.Result) []gateRow {
	var out []gateRow
	for _, g := range gateTable {
		out = append(out, gateRow{Title: g.Title, Text: typographic(g.Text), Source: g.Source, NextStep: g.NextStep})
	}
	for i := range r.Designs {
		for k, g := range Gates(r, &r.Designs[i]) {
			tone := "soft"
			if g.State == Tripped {
				tone = "bad"
			}
			out[k].Cells = append(out[k].Cells, gateView{sentenceCase(g.State), tone, typographic(g.Finding)})
		}
	}
	return out
}
