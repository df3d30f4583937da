package reports

import (
	"fmt"
	"html/template"
	"slices"
	"strings"

	"github.com/go-echarts/go-echarts/v2/charts"
	"github.com/go-echarts/go-echarts/v2/opts"

	"hazewright"
	"hazewright/logistics"
)

// flowChart shows the mass flows of one design's sustaining supply.
func flowChart(d *hazewright.DesignResult, number int) (*chart, error) {
	if d.Programme == nil {
		return nil, nil
	}
	links := netFlows(d.Programme.Flows)
	if len(links) == 0 {
		return nil, nil
	}
	c := &chart{ID: fmt.Sprintf("flow-%d", number), Kind: "flow", Table: dataTable{Head: []string{"Flow", "From", "To", "Rate [t/d]"}}}
	for _, f := range d.Programme.Flows {
		c.Table.Rows = append(c.Table.Rows, []string{f.Name, f.From, f.To, bare(f.Rate, "t/d")})
	}
	c.Title = flowFinding(d)
	c.Caption = "Mass flows that hold the goal, in t/d. Mass that settles and is lifted again is left out of the drawing and is in the table."
	c.Alt = "Mass-flow diagram from ore to losses. " + c.Title
	option, err := sankey(links)
	c.Option = option
	return c, err
}

func flowFinding(d *hazewright.DesignResult) string {
	product, ore := d.Figures["production_rate"], d.Figures["ore_rate"]
	name := clean(d.Name)
	switch {
	case product.Null:
		return name + ": mass flows of the sustaining supply."
	case ore.Null || product.Value <= 0:
		return fmt.Sprintf("%s: %s of product hold the goal.", name, pretty(product.Value, "t/d"))
	}
	return fmt.Sprintf("%s: %s of ore for %s of product, %s kg of ore for each kilogram.", name, pretty(ore.Value, "t/d"),
		pretty(product.Value, "t/d"), significant(ore.Value/product.Value, 3))
}

// netFlows drops nothing flows and nets the pairs that run both ways, which a
// mass-flow diagram cannot draw, into the direction of the larger.
func netFlows(flows []logistics.Flow) []logistics.Flow {
	var out []logistics.Flow
	for i, f := range flows {
		rate, later := f.Rate, false
		for k, g := range flows {
			if g.From == f.To && g.To == f.From {
				rate -= g.Rate
				later = later || (k < i && g.Rate == f.Rate)
			}
		}
		if rate > 0 && !later {
			f.Rate = rate
			out = append(out, f)
		}
	}
	return out
}

// stages renames the places of a flow by what is there, which reads better beside a
// mass.
var stages = map[string]string{
	"mine": "ore", "plant": "mineral", "release": "product", "air": "airborne", "loose layer": "settled", "home": "from home",
}

func stage(place string) string {
	if name, ok := stages[place]; ok {
		return name
	}
	return place
}

// endNode tells the lost flows apart: one node for all of them would hide the losses.
func endNode(f logistics.Flow) string {
	if f.To == "lost" || f.To == "dump" || f.To == "by-product" {
		return f.Name
	}
	return stage(f.To)
}

// flowNode is a node of a mass-flow diagram with the place of its label.
type flowNode struct {
	opts.SankeyNode
	Label map[string]string `json:"label,omitempty"`
}

func sankey(links []logistics.Flow) (template.JS, error) {
	chart := charts.NewSankey()
	chart.SetGlobalOptions(common(opts.Tooltip{Trigger: "item", Formatter: "@fn:flow"}, "8", "8")...)
	var nodes []flowNode
	seen := map[string]bool{}
	add := func(name string) {
		if !seen[name] {
			seen[name] = true
			node := flowNode{SankeyNode: opts.SankeyNode{Name: name}}
			if name == stage("loose layer") { // its label would run into those at the right
				node.Label = map[string]string{"position": "bottom"}
			}
			nodes = append(nodes, node)
		}
	}
	type edge struct {
		Source string  `json:"source"`
		Target string  `json:"target"`
		Value  float64 `json:"value"`
	}
	var edges []edge
	for _, f := range links {
		if f.From == "ground" {
			continue // the ore is the first node
		}
		from, to := stage(f.From), endNode(f)
		add(from)
		add(to)
		edges = append(edges, edge{from, to, round5(shown(f.Rate, "t/d"))})
	}
	chart.AddSeries("mass flow", nil, nil)
	chart.Accept(visitor{change: func(m map[string]any) {
		m["tooltip"] = with(m["tooltip"], tooltipExtra)
		series := chart.MultiSeries[0]
		series.Data, series.Links = nodes, edges
		m["series"] = []spliced{{series, map[string]any{
			"left": 8, "right": 212, "top": 12, "bottom": 12, "nodeGap": 18, "nodeWidth": 14, "draggable": false, "layoutIterations": 64,
			"lineStyle": map[string]any{"color": "source", "opacity": 0.3, "curveness": 0.5},
			"label":     map[string]any{"show": true, "formatter": "@fn:node", "lineHeight": 14},
			"emphasis":  map[string]any{"focus": "adjacency"},
		}}}
	}})
	return encode(chart)
}

// scheduleChart shows warming against time as capacity is landed and the burden builds
// up.
func scheduleChart(r *hazewright.Result) (*chart, error) {
	c := &chart{ID: "schedule", Table: dataTable{Head: []string{"Design", "Case", "Time [yr]", "Capacity [t/d]", "Production [t/d]", "Warming [K]"}}}
	d := xy{x: axis{name: "Time from the start of the programme [yr]"}, y: axis{name: "Warming [K]"}}
	if r.Study.Goal.Kind == "warming" {
		d.goal, d.goalText = r.Study.Goal.Warming, "goal "+pretty(r.Study.Goal.Warming, "K")
	}
	shortest, longest := 0.0, 0.0
	eachCourse(r, func(v variant, l line) {
		if len(v.programme.BuildUp.Time) == 0 {
			return
		}
		s := v.programme.BuildUp
		l.points = inYears(s)
		d.lines = append(d.lines, l)
		end := s.Time[len(s.Time)-1] / year
		if shortest == 0 || end < shortest {
			shortest = end
		}
		longest = max(longest, end)
		for k := 0; k < len(s.Time); k += max(len(s.Time)/24, 1) {
			c.Table.Rows = append(c.Table.Rows, []string{clean(v.Name), clean(v.name), significant(s.Time[k]/year, 3), bare(s.Capacity[k], "t/d"),
				bare(s.Production[k], "t/d"), significant(s.Warming[k], 3)})
		}
	})
	if len(d.lines) == 0 {
		return nil, nil
	}
	if longest > 6*shortest { // one linear axis would hide the short one
		d.x.log = true
		d.x.name += ", logarithmic"
		low, _ := extent(d.lines, 0, true)
		d.x.min, d.x.max = max(low, shortest/100), longest
		for i := range d.lines {
			d.lines[i].points = positive(d.lines[i].points, d.x.min)
		}
	}
	d.y.max = niceAbove(1.04 * highest(d))
	c.Title = "Time to the goal. " + byCase(r, func(v variant) string {
		if t := v.figures["time_to_goal"]; !t.Null {
			return prettyText(duration(t.Value))
		}
		return "never"
	})
	c.Caption = "Warming follows the burden at once here; ground and ice would lag. The schedule does not count wear while the plant is landed." + dottedCase(r)
	c.Table.Note = "Every few times; all are in schedule.csv."
	c.Alt = "Lines of warming against time for each design, with the goal as a level line. " + c.Title
	return c, c.draw(d)
}

// eachCourse calls draw for every design and sticking case that has a programme, with
// the line to draw it by: full for the case shown first, thin with dots for the others,
// which are left out where there are too many designs.
func eachCourse(r *hazewright.Result, draw func(v variant, l line)) {
	for i := range r.Designs {
		for k, v := range variantsOf(&r.Designs[i]) {
			if v.programme == nil || k > 0 && len(r.Designs) > crowd {
				continue
			}
			l := line{name: clean(v.Name), colour: i, dash: i, thin: k > 0}
			if v.name != "" {
				l.name += ", " + v.condition()
			}
			draw(v, l)
		}
	}
}

// byCase says one thing of every design that has a programme, with the case where they
// differ: "Iron rods: never at 100 % sticking, 54 yr at 1 % sticking".
func byCase(r *hazewright.Result, text func(v variant) string) string {
	var parts []string
	for i := range r.Designs {
		var texts, full []string
		for _, v := range variantsOf(&r.Designs[i]) {
			if v.programme != nil {
				texts = append(texts, text(v))
				full = append(full, text(v)+" "+v.condition())
			}
		}
		switch distinct := slices.Compact(slices.Clone(texts)); {
		case len(distinct) == 1:
			parts = append(parts, clean(r.Designs[i].Name)+": "+distinct[0])
		case len(distinct) > 1:
			parts = append(parts, clean(r.Designs[i].Name)+": "+strings.Join(full, ", "))
		}
	}
	return sentence(parts)
}

// dottedCase explains the lines of the further sticking cases.
func dottedCase(r *hazewright.Result) string {
	for i := range r.Designs {
		if len(r.Designs[i].Cases) > 1 && len(r.Designs) <= crowd {
			return " Where sticking is not given, full lines are the first case and thin lines with dots the other."
		}
	}
	return shownCase(r)
}

func inYears(s logistics.Series) [][2]float64 {
	var out [][2]float64
	for i, t := range s.Time {
		out = append(out, [2]float64{t / year, s.Warming[i]})
	}
	return out
}

func positive(points [][2]float64, least float64) [][2]float64 {
	var out [][2]float64
	for _, p := range points {
		if p[0] >= least {
			out = append(out, p)
		}
	}
	return out
}

// endingChart shows what is left of the warming after supply ends.
func endingChart(r *hazewright.Result) (*chart, error) {
	c := &chart{ID: "ending", Table: dataTable{Head: []string{"Design", "Case", "Time after supply ends [yr]", "Warming [K]"}}}
	d := xy{x: axis{name: "Time after supply ends [yr]"}, y: axis{name: "Warming [K]"}}
	end := 0.0
	eachCourse(r, func(v variant, l line) {
		s := v.programme.Ending
		if len(s.Time) == 0 {
			return
		}
		l.points = inYears(s)
		d.lines = append(d.lines, l)
		for k := 0; k < len(s.Time); k += max(len(s.Time)/24, 1) {
			c.Table.Rows = append(c.Table.Rows, []string{clean(v.Name), clean(v.name), significant(s.Time[k]/year, 3), significant(s.Warming[k], 3)})
		}
		last := s.Time[len(s.Time)-1]
		if half := v.figures["half_loss_time"]; !half.Null {
			last = min(last, 4*half.Value)
		}
		end = max(end, last/year)
	})
	if len(d.lines) == 0 {
		return nil, nil
	}
	d.x.max = niceAbove(end)
	d.y.max = niceAbove(highest(d))
	c.Title = "Time until half of the warming is gone after supply ends. " + byCase(r, func(v variant) string {
		if half := v.figures["half_loss_time"]; !half.Null {
			return prettyText(duration(half.Value))
		}
		return "never"
	})
	c.Caption = "From the steady state at the goal, up to four times the longest half-loss time. Loose particles on the ground go on feeding the air." + dottedCase(r)
	c.Table.Note = "Every few times; all are in schedule.csv."
	c.Alt = "Falling lines of warming against time after supply ends. " + c.Title
	return c, c.draw(d)
}

// spreadOfBars is how far apart the totals of bars may lie on one linear axis: beyond it
// the least is a line too thin to see, and marks on a logarithmic axis take over.
const spreadOfBars = 30.0

// landedChart shows what must be landed if the particles are made on the planet and if
// they are shipped: stacked bars, or marks for the parts where the masses lie far apart.
func landedChart(r *hazewright.Result) (*chart, error) {
	c := &chart{ID: "landed", Kind: "bars", Table: dataTable{Head: []string{"Design", "Case", "Route", "Plant [kt]", "Power plant [kt]", "Particles [kt]", "All [kt]", "Flights", "Windows"}}}
	b := bars{x: axis{name: "Landed mass [kt]"}, label: "letter"}
	b.segments = []segment{{name: "production plant"}, {name: "power plant"}, {name: "particles"}}
	var totals []float64
	var crossovers []string
	eachCourse(r, func(v variant, l line) {
		p := v.programme
		name := clean(v.Name)
		if v.name != "" {
			name += ", " + percent(v.sticking)
		}
		for _, w := range []struct {
			name string
			way  logistics.Way
		}{{"made there", p.Local}, {"shipped", p.Shipped}} {
			b.names = append(b.names, fmt.Sprintf("%s, %s: %s", name, w.name, pretty(w.way.LandedMass, "kt")))
			for k, mass := range []float64{w.way.PlantMass, w.way.PowerMass, w.way.ParticleMass} {
				b.segments[k].values = append(b.segments[k].values, mass/1e6)
			}
			totals = append(totals, w.way.LandedMass/1e6)
			c.Table.Rows = append(c.Table.Rows, []string{clean(v.Name), clean(v.name), w.name, bare(w.way.PlantMass, "kt"), bare(w.way.PowerMass, "kt"),
				bare(w.way.ParticleMass, "kt"), bare(w.way.LandedMass, "kt"), bare(w.way.Flights, "1"), bare(w.way.Windows, "1")})
		}
		crossover := why(hazewright.FigureValue{Why: p.Crossover.Why})
		if p.Crossover.Known() {
			crossover = fmt.Sprintf("shipping has landed more after %s of supply", duration(p.Crossover.Value))
		}
		crossovers = append(crossovers, fmt.Sprintf("%s: %s", l.name, prettyText(crossover)))
	})
	if len(b.names) == 0 {
		return nil, nil
	}
	c.Title = "Landed mass if made there. " + byCase(r, func(v variant) string { return pretty(v.programme.Local.LandedMass, "kt") })
	c.Caption = "Made there: plant and its power for the capacity. Shipped: the particles to fill the inventory once, and power to release them. Spares and renewal come on top. "
	for i := range r.Designs {
		if len(r.Designs[i].Cases) > 0 {
			c.Caption += "Where sticking is not given, its percentage follows the name. "
			break
		}
	}
	if slices.Max(totals) > spreadOfBars*slices.Min(totals) && slices.Min(totals) > 0 {
		b.marks = true
		b.x.name += ", logarithmic"
		b.segments = append(b.segments, segment{"all together", totals})
		b.x.min, b.x.max = b.decades()
		c.Caption += "The masses lie too far apart for bars on one scale: each mark is one part. "
	}
	c.Caption += strings.Join(crossovers, "; ") + "."
	c.Alt = "Landed mass by part, made on the planet and shipped, for each design. " + c.Title
	return c, c.fill(b)
}
