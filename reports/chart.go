package reports

import (
	"bytes"
	"encoding/json"
	"fmt"
	"html/template"
	"math"

	"github.com/go-echarts/go-echarts/v2/charts"
	"github.com/go-echarts/go-echarts/v2/opts"
)

// chart is one numbered figure of the report.
type chart struct {
	ID      string
	Number  int
	Title   string // says the finding
	Caption string // how to read it
	Alt     string // says in words what the drawing shows
	Kind    string // class of its box: "", "flow" (tall and wide) or "bars"
	Height  int    // of a bar chart [px]; 0 for that of its class
	Legend  []legendEntry
	Option  template.JS
	Table   dataTable
}

// dataTable holds the numbers of a chart.
type dataTable struct {
	Head []string
	Rows [][]string
	Note string
}

// legendEntry explains one mark. It is written in HTML and not by the chart, so that
// long names wrap and print.
type legendEntry struct {
	Name   string
	Letter string // of a bar segment; "" for a line
	Colour int    // index into the palette, modulo its size
	Dash   string // stroke-dasharray of a line
	Thin   bool
	Dots   bool   // a line with dots on it
	Shape  bool   // a grey area
	Point  bool   // a single mark
	Mark   string // SVG path of the mark of a row, 12 px wide
}

// paletteSize is the number of colours in the style sheet and in boot.js.
const paletteSize = 8

// line is one series of points.
type line struct {
	name   string
	points [][2]float64
	colour int
	dash   int  // index into dashes
	thin   bool // thin, with dots
	shape  bool // a grey area on a hidden axis from 0 to 1
	point  bool // a single mark
}

// dashes tell lines apart without colour: the chart's name for each, and SVG's.
var dashes = [...]struct {
	chart any
	svg   string
}{
	{"solid", ""}, {[]int{8, 4}, "8 4"}, {[]int{2, 3}, "2 3"}, {[]int{10, 3, 2, 3}, "10 3 2 3"}, {[]int{14, 4}, "14 4"},
}

// axis is one axis of a chart of points.
type axis struct {
	name     string
	log      bool
	min, max float64 // used where max > min
}

// xy describes a chart of points on two axes.
type xy struct {
	lines    []line
	x, y     axis
	goal     float64 // a horizontal line, if goalText is set
	goalText string
	byHeight bool // the reader looks along y
}

// spliced is a series with keys that go-echarts has no field for.
type spliced struct {
	charts.SingleSeries
	extra map[string]any
}

// MarshalJSON joins the two objects.
func (s spliced) MarshalJSON() ([]byte, error) {
	base, err := json.Marshal(s.SingleSeries)
	if err != nil || len(s.extra) == 0 {
		return base, err
	}
	extra, err := json.Marshal(s.extra)
	if err != nil {
		return nil, err
	}
	return append(append(bytes.TrimSuffix(base, []byte("}")), ','), extra[1:]...), nil
}

// visitor changes the whole option before it is written.
type visitor struct {
	charts.BaseConfigurationVisitor
	change func(map[string]any)
}

func (v visitor) Visit(m map[string]any) { v.change(m) }

// with returns the JSON object of v with keys added; nested objects are merged.
func with(v any, extra map[string]any) map[string]any {
	out := map[string]any{}
	text, err := json.Marshal(v)
	if err == nil {
		err = json.Unmarshal(text, &out)
	}
	if err != nil { // options hold no values that JSON cannot write
		return extra
	}
	merge(out, extra)
	return out
}

func merge(into, from map[string]any) {
	for k, v := range from {
		a, aok := into[k].(map[string]any)
		b, bok := v.(map[string]any)
		if aok && bok {
			merge(a, b)
			continue
		}
		into[k] = v
	}
}

// option is what both kinds of go-echarts chart offer.
type option interface {
	Validate()
	JSON() map[string]any
}

// encode returns the option as JSON that is safe inside a script element: json.Marshal
// escapes <, >, & and the line separators, and refuses NaN.
func encode(o option) (template.JS, error) {
	o.Validate()
	text, err := json.Marshal(o.JSON())
	if err != nil {
		return "", fmt.Errorf("reports: chart option: %w", err)
	}
	return template.JS(text), nil
}

// common are the settings of every chart, with the room [px] left and right of its axes.
func common(tooltip opts.Tooltip, left, right string) []charts.GlobalOpts {
	return []charts.GlobalOpts{
		charts.WithInitializationOpts(opts.Initialization{Theme: "report", ChartID: "chart"}), // a fixed id: the default is random
		charts.WithAnimation(false),
		charts.WithLegendOpts(opts.Legend{Show: opts.Bool(false)}),
		charts.WithTooltipOpts(tooltip),
		charts.WithGridOpts(opts.Grid{Left: left, Right: right, Top: "14", Bottom: "34", ContainLabel: opts.Bool(true)}),
	}
}

// tooltipExtra makes tooltips text in the drawing, with no HTML at all.
var tooltipExtra = map[string]any{"renderMode": "richText", "confine": true}

// option builds the chart's option.
func (c xy) option() (template.JS, error) {
	chart := charts.NewLine()
	tooltip := opts.Tooltip{Trigger: "axis", Formatter: "@fn:axis"}
	if c.byHeight {
		tooltip.AxisPointer = &opts.AxisPointer{Axis: "y"}
	}
	chart.SetGlobalOptions(append(common(tooltip, "30", "22"),
		charts.WithXAxisOpts(opts.XAxis{Type: c.x.kind(), Name: typographic(c.x.name), NameLocation: "middle", NameGap: 30,
			Min: c.x.low(), Max: c.x.high(), AxisLabel: &opts.AxisLabel{Formatter: "@fn:num", HideOverlap: opts.Bool(true)}}),
		charts.WithYAxisOpts(opts.YAxis{Type: c.y.kind(), Name: typographic(c.y.name), NameLocation: "middle", NameGap: 16 + 7*c.y.labelWidth(c.lines),
			Min: c.y.low(), Max: c.y.high(), AxisLabel: &opts.AxisLabel{Formatter: "@fn:num"}}),
	)...)
	chart.ExtendYAxis(opts.YAxis{Type: "value", Min: 0, Max: 1, Show: opts.Bool(false), AxisLabel: &opts.AxisLabel{}})
	for _, l := range c.lines {
		chart.AddSeries(l.name, nil)
	}
	chart.Accept(visitor{change: func(m map[string]any) {
		m["tooltip"] = with(m["tooltip"], tooltipExtra)
		m["xAxis"] = []any{with(chart.XAxisList[0], c.x.extra())}
		m["yAxis"] = []any{with(chart.YAxisList[0], c.y.extra()), chart.YAxisList[1]}
		series := make([]spliced, len(c.lines))
		for i, l := range c.lines {
			series[i] = l.series(chart.MultiSeries[i])
		}
		if c.goalText != "" && len(series) > 0 {
			series[0].extra["markLine"] = map[string]any{
				"silent": true, "symbol": "none", "lineStyle": map[string]any{"type": "dashed", "color": "@ink", "width": 1},
				"label": map[string]any{"formatter": c.goalText, "position": "insideStartTop", "color": "@ink"},
				"data":  []any{map[string]any{"yAxis": round5(c.goal)}},
			}
		}
		m["series"] = series
	}})
	return encode(chart)
}

// series fills in one line.
func (l line) series(s charts.SingleSeries) spliced {
	points := make([][2]float64, len(l.points))
	for i, p := range l.points {
		points[i] = [2]float64{round5(p[0]), round5(p[1])}
	}
	s.Data = points
	colour := fmt.Sprintf("@%d", l.colour%paletteSize)
	extra := map[string]any{"showSymbol": l.thin, "itemStyle": map[string]any{"color": colour}}
	style := map[string]any{"color": colour, "width": 2.2, "type": dashes[l.dash%len(dashes)].chart}
	switch {
	case l.point:
		s.Type = "scatter"
		extra["symbol"], extra["symbolSize"] = "diamond", 12
		extra["z"] = 5
	case l.shape:
		s.YAxisIndex = 1
		style["color"], style["width"] = "@line", 0.8
		extra["areaStyle"] = map[string]any{"color": "@line", "opacity": 0.16}
		extra["itemStyle"] = map[string]any{"color": "@line"}
		extra["silent"], extra["z"] = true, 0
		extra["tooltip"] = map[string]any{"show": false} // else the tooltip keeps to its points and names no line
	case l.thin:
		style["width"] = 1
		extra["symbolSize"] = 4
	}
	if !l.point {
		extra["lineStyle"] = style
	}
	return spliced{s, extra}
}

// fill fills in a bar chart: its option, legend and height, which its rows make.
func (c *chart) fill(b bars) error {
	option, err := b.option()
	row := 46
	if b.marks {
		row = 40
	}
	c.Option, c.Legend, c.Height = option, b.legend(), 60+row*len(b.names)
	return err
}

// legend returns the entries for the lines.
func (c xy) legend() []legendEntry {
	var out []legendEntry
	for _, l := range c.lines {
		out = append(out, legendEntry{Name: l.name, Colour: l.colour % paletteSize, Dash: dashes[l.dash%len(dashes)].svg,
			Thin: l.thin, Dots: l.thin, Shape: l.shape, Point: l.point})
	}
	return out
}

// labelWidth is about how many letters the labels of a vertical axis take.
func (a axis) labelWidth(lines []line) int {
	low, high := a.min, a.max
	if high <= low {
		low, high = extent(lines, 1, a.log)
	}
	ticks := []float64{niceAbove(high)}
	if a.log {
		ticks = logTicks(low, high)
	} else if high < 5 {
		ticks = []float64{0.5}
	}
	width := 1
	for _, t := range ticks {
		width = max(width, len(significant(t, 2)))
	}
	if low < 0 {
		width++
	}
	return width
}

func (a axis) kind() string {
	if a.log {
		return "log"
	}
	return "value"
}

func (a axis) low() any {
	if a.max > a.min {
		return round5(a.min)
	}
	return nil
}

func (a axis) high() any {
	if a.max > a.min {
		return round5(a.max)
	}
	return nil
}

// extra sets the ticks of a logarithmic axis: whole decades, and 2 and 5 between them
// where there are few. ECharts labels too few of them by itself.
func (a axis) extra() map[string]any {
	if !a.log || a.max <= a.min || a.min <= 0 {
		return map[string]any{"axisTick": map[string]any{"show": true}}
	}
	ticks := logTicks(a.min, a.max)
	return map[string]any{
		"axisLabel": map[string]any{"customValues": ticks},
		"axisTick":  map[string]any{"customValues": ticks},
	}
}

func logTicks(low, high float64) []float64 {
	steps := []float64{1}
	switch decades := math.Log10(high / low); {
	case decades <= 3:
		steps = []float64{1, 2, 5}
	}
	var ticks []float64
	for e := math.Floor(math.Log10(low)); e <= math.Log10(high); e++ {
		for _, s := range steps {
			if v := s * math.Pow(10, e); v >= low*(1-1e-9) && v <= high*(1+1e-9) {
				ticks = append(ticks, round5(v))
			}
		}
	}
	return ticks
}

// extent returns the least and the largest of one coordinate over all lines that are
// not shapes, of positive values only for a logarithmic axis.
func extent(lines []line, coordinate int, log bool) (low, high float64) {
	low, high = math.Inf(1), math.Inf(-1)
	for _, l := range lines {
		if l.shape {
			continue
		}
		for _, p := range l.points {
			if v := p[coordinate]; !log || v > 0 {
				low, high = min(low, v), max(high, v)
			}
		}
	}
	if low > high {
		return 0, 0
	}
	return low, high
}

// highest returns the largest y of the lines and the goal.
func highest(d xy) float64 {
	_, high := extent(d.lines, 1, false)
	if d.goalText != "" {
		high = max(high, d.goal)
	}
	return high
}

// niceAbove returns the next round number at or above a positive v; 0 for others.
func niceAbove(v float64) float64 {
	if v <= 0 {
		return 0
	}
	step := math.Pow(10, math.Floor(math.Log10(v))) / 2
	return step * math.Ceil(v/step*(1-1e-9))
}

// segment is one part of every bar in a stacked bar chart.
type segment struct {
	name   string
	values []float64 // one for each bar
}

// bars describes horizontal stacked bars, or rows of marks.
type bars struct {
	names    []string // of the bars, first at the top
	segments []segment
	x        axis
	label    string // name of the formatter for segments
	marks    bool   // a mark for each segment on a logarithmic axis, not stacked
}

// markShapes tell the segments of rows of marks apart without colour: the chart's name
// for each, and a path for the legend.
var markShapes = [...]struct{ chart, svg string }{
	{"circle", "M0 6a6 6 0 1 0 12 0a6 6 0 1 0 -12 0z"}, {"triangle", "M6 0L12 12H0z"}, {"rect", "M1 1H11V11H1z"}, {"diamond", "M6 -1L13 6L6 13L-1 6z"},
}

// decades returns the whole decades around the positive values.
func (b bars) decades() (low, high float64) {
	low, high = math.Inf(1), 0
	for _, s := range b.segments {
		for _, v := range s.values {
			if v > 0 {
				low, high = min(low, v), max(high, v)
			}
		}
	}
	return decadeBelow(low), decadeAbove(high)
}

func (b bars) option() (template.JS, error) {
	chart := charts.NewBar()
	chart.SetGlobalOptions(append(common(opts.Tooltip{Trigger: "item", Formatter: "@fn:item"}, "26", "44"),
		charts.WithXAxisOpts(opts.XAxis{Type: axis{log: b.marks}.kind(), Name: typographic(b.x.name), NameLocation: "middle", NameGap: 30,
			Min: b.x.low(), Max: b.x.high(), AxisLabel: &opts.AxisLabel{Formatter: "@fn:num", HideOverlap: opts.Bool(true)}}),
		charts.WithYAxisOpts(opts.YAxis{Type: "category", Data: b.names, Inverse: opts.Bool(true),
			AxisLabel: &opts.AxisLabel{Width: 170, Overflow: "break"}}),
	)...)
	for _, s := range b.segments {
		chart.AddSeries(s.name, nil)
	}
	chart.Accept(visitor{change: func(m map[string]any) {
		m["tooltip"] = with(m["tooltip"], tooltipExtra)
		m["xAxis"] = []any{chart.XAxisList[0]}
		labels := map[string]any{"axisLabel": map[string]any{"interval": 0, "lineHeight": 14}}
		if b.marks {
			labels["splitLine"] = map[string]any{"show": true} // to follow a row by
			m["xAxis"] = []any{with(chart.XAxisList[0], axis{log: true, min: b.x.min, max: b.x.max}.extra())}
		}
		m["yAxis"] = []any{with(chart.YAxisList[0], labels)}
		series := make([]spliced, len(b.segments))
		for i, s := range b.segments {
			if b.marks {
				series[i] = s.marked(chart.MultiSeries[i], i)
			} else {
				series[i] = s.stacked(chart.MultiSeries[i], i, b.label)
			}
		}
		m["series"] = series
		m["aria"] = map[string]any{"enabled": true, "label": map[string]any{"enabled": false}, "decal": map[string]any{"show": !b.marks}}
	}})
	return encode(chart)
}

// stacked fills in the i-th segment of stacked bars.
func (s segment) stacked(series charts.SingleSeries, i int, label string) spliced {
	values := make([]float64, len(s.values))
	for k, v := range s.values {
		values[k] = round5(v)
	}
	series.Data, series.Stack = values, "all"
	return spliced{series, map[string]any{
		"barMaxWidth": 34,
		"itemStyle":   map[string]any{"color": fmt.Sprintf("@%d", i%paletteSize)},
		"label":       map[string]any{"show": true, "formatter": "@fn:" + label},
	}}
}

// marked fills in the i-th segment of rows of marks; nothing is drawn where there is nothing.
func (s segment) marked(series charts.SingleSeries, i int) spliced {
	points := [][2]float64{}
	for k, v := range s.values {
		if v > 0 {
			points = append(points, [2]float64{round5(v), float64(k)})
		}
	}
	series.Type, series.Data = "scatter", points
	return spliced{series, map[string]any{
		"symbol": markShapes[i%len(markShapes)].chart, "symbolSize": 12,
		"itemStyle": map[string]any{"color": fmt.Sprintf("@%d", i%paletteSize), "opacity": 0.85},
	}}
}

func (b bars) legend() []legendEntry {
	var out []legendEntry
	for i, s := range b.segments {
		entry := legendEntry{Name: s.name, Letter: string(rune('A' + i%26)), Colour: i % paletteSize}
		if b.marks {
			entry.Letter, entry.Mark = "", markShapes[i%len(markShapes)].svg
		}
		out = append(out, entry)
	}
	return out
}
