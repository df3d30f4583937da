package reports

import (
	"bufio"
	"crypto/sha256"
	_ "embed" // the files of the page
	"encoding/base64"
	"fmt"
	"html/template"
	"io"
	"strconv"
	"strings"

	"hazewright"
	"hazewright/logistics"
)

var (
	//go:embed assets/report.html
	pageSource string
	//go:embed assets/parts.html
	partsSource string
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

var pageTemplate = pageOf("report", pageSource)

// pageOf returns the template of a page, with the parts that all pages share.
func pageOf(name, source string) *template.Template {
	return template.Must(template.Must(template.New(name).Parse(partsSource)).Parse(source))
}

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
	return execute(w, pageTemplate, view)
}

// execute writes a page.
func execute(w io.Writer, t *template.Template, view any) error {
	out := bufio.NewWriterSize(w, 1<<16)
	if err := t.Execute(out, view); err != nil {
		return fmt.Errorf("reports: writing the %s page: %w", t.Name(), err)
	}
	if err := out.Flush(); err != nil {
		return fmt.Errorf("reports: writing the %s page: %w", t.Name(), err)
	}
	return nil
}

// frame is what every page carries: style sheet, scripts, the policy that allows those, and
// the licences of what they hold.
type frame struct {
	CSP           string
	CSS           template.CSS
	Echarts, Boot template.JS
	Licences      []Licence
}

func newFrame() frame {
	return frame{securityPolicy(), template.CSS(styleSheet), template.JS(echartsScript), template.JS(bootScript), Licences()}
}

// page is what the template shows. All strings are data: the template escapes them.
type page struct {
	frame

	Title, World, Goal, Scope, Deferral, HingeRule, EstimateNote string
	Sections                                                     []sectionLink
	Answers                                                      []answerView
	Comparison                                                   []comparisonView
	HasBenchmarks                                                bool
	Definitions                                                  []hazewright.FigureDef
	Populations                                                  []populationView
	ChartSections                                                []chartSection
	Limits                                                       []limitTable
	Gates                                                        []gateTableView
	Warnings                                                     []Warning
	Inputs                                                       []inputView
	Methods                                                      []hazewright.Method
	Words                                                        []Word
	Version, Command, File, SHA256                               string
	Tables                                                       []hazewright.TableFile
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
	Name, Tone, Mark, Verdict string
	Limits, LimitTone         string
	Failed                    []string
	Key                       []figureView
	CaseShown                 string
	CaseNames                 []caseName
	Cases                     []caseView
	Supply                    []string // what stands against a programme that reaches the goal
	Hinge                     string
	Caution                   *Gate
	CautionMore               string
}

type caseName struct{ Name, Share string }

type caseView struct {
	Name  string
	Cells []toned
}

// toned is a text with its tone: "good", "warn", "bad", "soft" or "".
type toned struct{ Text, Tone string }

// comparisonView is the table of figures for as many designs as a page has room for.
type comparisonView struct {
	First, Last bool // of several tables
	Columns     []string
	Verdicts    []toned
	Groups      []groupView
	Span        int // columns of the table
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

type limitTable struct {
	Columns []string
	Rows    []limitRow
}

type limitRow struct {
	Title, Pos string
	Cells      [][]limitView
}

type limitView struct{ Word, Tone, Text string }

type gateTableView struct {
	First   bool
	Columns []string
	Rows    []gateRow
}

type gateRow struct {
	Title, Text, Source, NextStep string
	Cells                         []gateView
}

type gateView struct{ State, Tone, Finding string }

type inputView struct{ Path, Text, Title, Origin, Source string }

func newPage(r *hazewright.Result, p Provenance) (*page, error) {
	s := r.Study
	v := &page{
		frame: newFrame(), Title: clean(s.Title), World: clean(s.World.Name), Goal: typographic(goalText(s.Goal)), Scope: Scope, Deferral: Deferral, HingeRule: hingeRule,
		Definitions: hazewright.Figures(),
		Words:       Words(), Version: clean(p.Version), Command: clean(p.Command), File: clean(baseName(s.File)), SHA256: clean(s.SHA256),
	}
	for i := range r.Designs {
		d := &r.Designs[i]
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
	for _, b := range blocks(r, figureColumns) {
		v.Comparison = append(v.Comparison, comparisonOf(r, b))
	}
	if len(s.Limits) > 0 {
		for _, b := range blocks(r, limitColumns) {
			v.Limits = append(v.Limits, limitTable{namesOf(b.designs), limitRows(r, b.designs)})
		}
	}
	for _, b := range blocks(r, gateColumns) {
		v.Gates = append(v.Gates, gateTableView{b.first, namesOf(b.designs), gateRows(r, b.designs)})
	}
	for _, w := range Warnings(r) {
		w.Design, w.Where, w.Text = clean(w.Design), clean(w.Where), prettyText(uniform(clean(w.Text)))
		v.Warnings = append(v.Warnings, w)
	}
	for _, in := range s.Inputs() {
		origin := in.Origin.Kind
		if place := strings.TrimPrefix(position(s, in.Origin.Pos), baseName(s.File)+":"); place != "" {
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
			c.Table.pretty()
			section.Charts = append(section.Charts, c)
		}
		if len(section.Charts) > 0 {
			out = append(out, section)
		}
	}
	return out, nil
}

// pretty writes the numbers of a table as the report has them.
func (t dataTable) pretty() {
	for _, row := range t.Rows {
		for i, cell := range row {
			if _, err := strconv.ParseFloat(cell, 64); err == nil { // a number and not a name
				row[i] = prettyText(cell)
			}
		}
	}
}

// viewOf splits a figure's value into its text and its marks.
func viewOf(def hazewright.FigureDef, v hazewright.FigureValue, text string) figureView {
	out := figureView{Title: def.Title, Definition: def.Definition, Text: prettyText(text), Estimate: estimated(v)}
	if !v.Null && v.Note != "estimate" {
		out.Note = clean(v.Note)
	}
	return out
}

// marks go with the tone of a verdict, for those who do not see the colour.
var marks = map[tone]string{good: "\u2713", warn: "!", bad: "\u2717", plain: ""}

// class is the tone's class in the style sheet.
func (t tone) class() string { return map[tone]string{good: "good", warn: "warn", bad: "bad"}[t] }

func answerOf(r *hazewright.Result, d *hazewright.DesignResult) answerView {
	cases := variantsOf(d)
	word, tone := cases[0].goalWord()
	a := answerView{
		Name: clean(d.Name), Tone: tone.class(), Mark: marks[tone], Verdict: prettyText("Goal " + word),
		Limits: "Limits: " + prettyText(limitsWord(d.Limits)) + ".", LimitTone: limitsTone(d.Limits).class(),
		CaseShown: stickingCase(d), Hinge: prettyText(hinge(d)),
	}
	for _, l := range d.Limits {
		if l.Known && !l.Met {
			a.Failed = append(a.Failed, prettyText(limitTitle(l.Limit)+": "+limitWord(l, d.Figures[l.Figure])))
		}
	}
	for _, def := range defs(answerIDs) {
		v := d.Figures[def.ID]
		one := viewOf(def, v, figureText(def, v))
		if v.Null && d.Reached {
			one.Why = prettyText(why(v))
		}
		a.Key = append(a.Key, one)
	}
	if !d.Reached && !d.NeverWarms {
		title, text := warmest(d)
		a.Key = append(a.Key, figureView{Title: title, Definition: "of the warming curve", Text: prettyText(text), Estimate: warmingEstimated(r)})
	}
	if len(d.Cases) > 0 {
		a.Cases = casesOf(cases)
	}
	for _, v := range cases {
		text := v.troubles()
		if v.name != "" {
			a.CaseNames = append(a.CaseNames, caseName{clean(v.name), percent(v.sticking)})
			text = "At " + percent(v.sticking) + " sticking it reaches the goal, but: " + text
		}
		if _, tone := v.goalWord(); tone == warn && v.troubles() != "" {
			a.Supply = append(a.Supply, prettyText(sentenceCase(text))+".")
		}
	}
	if g, ok := largestCaution(r, d); ok {
		g.Finding = prettyText(g.Finding)
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
func casesOf(cases []variant) []caseView {
	var out []caseView
	add := func(name string, cell func(v variant) toned) {
		row := caseView{Name: name}
		for _, v := range cases {
			row.Cells = append(row.Cells, cell(v))
		}
		out = append(out, row)
	}
	add("Goal", func(v variant) toned {
		word, tone := v.goalShort()
		return toned{strings.TrimSpace(marks[tone] + " " + prettyText(word)), tone.class()}
	})
	if len(cases[0].limits) > 0 {
		add("Limits met", func(v variant) toned {
			return toned{fmt.Sprintf("%d of %d", count(v.limits).met, len(v.limits)), limitsTone(v.limits).class()}
		})
	}
	for _, def := range defs(answerCaseIDs) {
		add(def.Title, func(v variant) toned { return toned{prettyText(figureText(def, v.figures[def.ID])), ""} })
	}
	cell := func(c gridCell) toned { return toned{prettyText(c.text), c.tone.class()} }
	supply := cases[0].Design.Supply
	add(fmt.Sprintf("Flights a window (%d planned)", supply.Delivery.FlightsPerWindow), func(v variant) toned { return cell(v.upkeep()) })
	if supply.Route == logistics.Local {
		add(fmt.Sprintf("Landing the plant (lasts %s)", duration(supply.Plant.Life)), func(v variant) toned { return cell(v.building()) })
	}
	return out
}

// block is a run of the designs that one table of a page shows.
type block struct {
	first, last bool
	designs     []*hazewright.DesignResult
}

// How many designs a table has room for on paper.
const (
	figureColumns = 6
	limitColumns  = 6
	gateColumns   = 4
)

// blocks parts the designs into as few runs of at most so many as it takes, of about the
// same length.
func blocks(r *hazewright.Result, most int) []block {
	n := len(r.Designs)
	count := (n + most - 1) / most
	out := make([]block, count)
	for i := range out {
		out[i].first, out[i].last = i == 0, i == count-1
		for k := i * n / count; k < (i+1)*n/count; k++ {
			out[i].designs = append(out[i].designs, &r.Designs[k])
		}
	}
	return out
}

func namesOf(designs []*hazewright.DesignResult) []string {
	var out []string
	for _, d := range designs {
		out = append(out, clean(d.Name))
	}
	return out
}

func comparisonOf(r *hazewright.Result, b block) comparisonView {
	v := comparisonView{First: b.first, Last: b.last, Columns: namesOf(b.designs), Groups: groupsOf(r, b.designs), Span: len(b.designs) + 2}
	if b.last {
		v.Span++
	}
	for _, d := range b.designs {
		word, tone := goalWord(d)
		v.Verdicts = append(v.Verdicts, toned{prettyText(word), tone.class()})
	}
	return v
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

func groupsOf(r *hazewright.Result, designs []*hazewright.DesignResult) []groupView {
	var out []groupView
	for _, g := range groups(nil) {
		view := groupView{Title: g.title}
		for _, def := range g.figures {
			row := rowView{ID: def.ID, Title: def.Title, Definition: def.Definition, Unit: typographic(unitHead(def.Shown)), None: noProgramme(def.ID)}
			for _, d := range designs {
				v := d.Figures[def.ID]
				one := viewOf(def, v, figureCell(def, v))
				c := cellView{Text: one.Text, Note: one.Note, Estimate: one.Estimate}
				if v.Null && (d.Reached || v.Why != d.Cause) {
					c.Why = prettyText(why(v))
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
		out = append(out, populationView{clean(d.Name), typographic(clean(p.Name)), []string{
			percent(p.Share), typographic(significant(p.ParticleMass, 3)), pretty(p.KappaThermal, "1"), pretty(p.KappaThermalExt, "1"),
			pretty(p.KappaSolarExt, "1"), significant(p.FallSpeed*1e3, 3), life}, optics})
	}
	return out
}

func limitRows(r *hazewright.Result, designs []*hazewright.DesignResult) []limitRow {
	var out []limitRow
	for i, l := range r.Study.Limits {
		row := limitRow{Title: prettyText(limitTitle(l)), Pos: clean(position(r.Study, l.Pos))}
		def, _ := hazewright.FigureByID(l.Figure)
		for _, d := range designs {
			var cell []limitView
			for _, v := range variantsOf(d) {
				cell = append(cell, limitViewOf(v, i, def))
			}
			row.Cells = append(row.Cells, cell)
		}
		out = append(out, row)
	}
	return out
}

// limitViewOf shows the i-th limit in one case.
func limitViewOf(v variant, i int, def hazewright.FigureDef) limitView {
	if i >= len(v.limits) {
		return limitView{Word: "not known"}
	}
	value := v.figures[def.ID]
	out := limitView{Word: prettyText(limitWord(v.limits[i], value)), Text: prettyText(figureText(def, value)), Tone: limitTone(v.limits[i]).class()}
	if value.Null {
		out.Text = prettyText(why(value))
		if short := shortReason(why(value)); strings.HasSuffix(out.Word, short) { // it is said already
			out.Text = strings.TrimPrefix(strings.TrimPrefix(why(value), short), ":")
		}
	}
	if out.Tone == "" {
		out.Tone = "soft"
	}
	if v.name != "" {
		out.Text += ", if " + clean(v.name)
	}
	return out
}

func gateRows(r *hazewright.Result, designs []*hazewright.DesignResult) []gateRow {
	var out []gateRow
	for _, g := range gateTable {
		out = append(out, gateRow{Title: g.Title, Text: typographic(g.Text), Source: g.Source, NextStep: g.NextStep})
	}
	for _, d := range designs {
		for k, g := range Gates(r, d) {
			tone := "soft"
			if g.State == Tripped {
				tone = "bad"
			}
			out[k].Cells = append(out[k].Cells, gateView{sentenceCase(g.State), tone, prettyText(g.Finding)})
		}
	}
	return out
}
