package reports

import (
	"fmt"
	"slices"
	"strings"

	"hazewright"
	"hazewright/logistics"
)

// variant is a design as it comes out in one sticking case, or with the sticking given.
type variant struct {
	*hazewright.DesignResult
	name      string // of the case; "" where sticking was given
	sticking  float64
	figures   map[string]hazewright.FigureValue
	limits    []hazewright.LimitResult
	losses    []hazewright.Loss
	programme *logistics.Programme // nil if there is none
	reached   bool
	cause     string // why not
}

// variantsOf returns a design once, or once for each of its sticking cases, worst first.
func variantsOf(d *hazewright.DesignResult) []variant {
	if len(d.Cases) == 0 {
		return []variant{{d, "", 0, d.Figures, d.Limits, d.Losses, d.Programme, d.Reached, d.Cause}}
	}
	var out []variant
	for i, c := range d.Cases {
		v := variant{d, c.Name, c.Sticking, c.Figures, c.Limits, c.Losses, c.Programme, d.Reached, d.Cause}
		if b := c.Figures["burden"]; i > 0 && b.Null != d.Figures["burden"].Null { // only one of the cases can be held up
			v.reached, v.cause = !b.Null, b.Why
		}
		out = append(out, v)
	}
	return out
}

// variants returns those of every design, in study order.
func variants(r *hazewright.Result) []variant {
	var out []variant
	for i := range r.Designs {
		out = append(out, variantsOf(&r.Designs[i])...)
	}
	return out
}

// result returns the design with the figures, limits and programme of the case.
func (v variant) result() *hazewright.DesignResult {
	d := *v.DesignResult
	d.Figures, d.Limits, d.Losses, d.Programme, d.Reached, d.Cause = v.figures, v.limits, v.losses, v.programme, v.reached, v.cause
	return &d
}

// condition says in which case something holds: "at 1 % sticking".
func (v variant) condition() string { return "at " + percent(v.sticking) + " sticking" }

// upkeepTrouble says that deliveries cannot hold what was built up, "" if they can. The
// test is that of the programme's own warning.
func (v variant) upkeepTrouble() string {
	p := v.programme
	if p == nil || p.LandedPerWindowNext <= p.LandedPerWindow*(1+1e-9) {
		return ""
	}
	return fmt.Sprintf("cannot be held as planned: %s flights a window needed, %d planned", bare(p.FlightsPerWindow, "1"),
		v.Design.Supply.Delivery.FlightsPerWindow)
}

// landing is how long the windows take that land the plant [s].
func (v variant) landing() float64 {
	return v.programme.Windows * v.Design.Supply.Delivery.WindowSpacing
}

// buildTrouble says that the plant wears out before it has done its work, "" if not.
func (v variant) buildTrouble() string {
	p, life := v.programme, v.Design.Supply.Plant.Life
	if p == nil || p.Route != logistics.Local || life <= 0 {
		return ""
	}
	if built := v.landing(); built > life {
		return fmt.Sprintf("landing the plant takes %s, its life is %s", duration(built), duration(life))
	}
	if t := v.figures["time_to_goal"]; !t.Null && t.Value > life {
		return fmt.Sprintf("the goal takes longer than the plant's life of %s", duration(life))
	}
	return ""
}

// upkeep is the flights a window that hold what was built up, "-" without a programme.
func (v variant) upkeep() gridCell {
	if v.programme == nil {
		return gridCell{text: "-"}
	}
	return gridCell{text: bare(v.programme.FlightsPerWindow, "1"), tone: warnIf(v.upkeepTrouble())}
}

// building is the time that landing the plant takes, "-" where none is landed.
func (v variant) building() gridCell {
	if v.programme == nil || v.programme.Route != logistics.Local {
		return gridCell{text: "-"}
	}
	return gridCell{text: duration(v.landing()), tone: warnIf(v.buildTrouble())}
}

func warnIf(trouble string) tone {
	if trouble == "" {
		return plain
	}
	return warn
}

// troubles joins what stands against the programme as planned, "" if nothing does.
func (v variant) troubles() string {
	parts := slices.DeleteFunc([]string{v.upkeepTrouble(), v.buildTrouble()}, func(s string) bool { return s == "" })
	return strings.Join(parts, "; ")
}

// goalWord says whether the case reaches the goal, by when, and if not, why.
func (v variant) goalWord() (string, tone) {
	if !v.reached {
		return "not reached: " + clean(v.cause), bad
	}
	t := v.figures["time_to_goal"]
	switch warming := v.figures["warming"]; {
	case !warming.Null && warming.Value <= 0:
		return "at its burden, which does not warm", warn
	case t.Null && v.programme == nil:
		return "reached at its burden; " + why(t), warn
	case t.Null:
		return "reached at its burden, never by this programme", bad
	case v.troubles() != "":
		return "reached at its burden, after " + duration(t.Value), warn
	}
	return "reached after " + duration(t.Value), good
}

// goalShort is goalWord without the burden, for a table of cases.
func (v variant) goalShort() (string, tone) {
	word, tone := v.goalWord()
	word = strings.TrimPrefix(strings.TrimPrefix(word, "reached at its burden, "), "reached ")
	if v.reached && v.programme != nil && v.figures["time_to_goal"].Null {
		word = "never"
	}
	return word, tone
}

// goalWord is that of the case that is shown first.
func goalWord(d *hazewright.DesignResult) (string, tone) { return variantsOf(d)[0].goalWord() }

// Warning is a warning with the design it belongs to and the sticking case in which it
// holds. Design is empty for the study, Case where it holds in all.
type Warning struct {
	Design, Case string
	hazewright.Warning
}

// Warnings returns all warnings: of the whole study, those of loading among them, then
// of each design, those of one sticking case after those of all.
func Warnings(r *hazewright.Result) []Warning {
	var out []Warning
	for _, w := range r.Warnings {
		out = append(out, Warning{Warning: w})
	}
	for i := range r.Designs {
		out = append(out, warningsOf(&r.Designs[i])...)
	}
	return out
}

// warningsOf returns the warnings of a design, each once and with its case.
func warningsOf(d *hazewright.DesignResult) []Warning {
	var all, some []Warning
	add := func(w hazewright.Warning) {
		same := func(o Warning) bool { return o.Warning == w }
		if slices.ContainsFunc(all, same) || slices.ContainsFunc(some, same) {
			return
		}
		var in []string
		for _, c := range d.Cases {
			if slices.Contains(c.Warnings, w) {
				in = append(in, clean(c.Name))
			}
		}
		if len(in) == 0 || len(in) == len(d.Cases) {
			all = append(all, Warning{d.Name, "", w})
			return
		}
		some = append(some, Warning{d.Name, "if " + strings.Join(in, " or if "), w})
	}
	for _, w := range d.Warnings {
		add(w)
	}
	for _, c := range d.Cases {
		for _, w := range c.Warnings {
			add(w)
		}
	}
	slices.SortStableFunc(some, func(a, b Warning) int { return caseIndex(d, a.Warning) - caseIndex(d, b.Warning) })
	return append(all, some...)
}

// caseIndex is the first case in which a warning holds.
func caseIndex(d *hazewright.DesignResult, w hazewright.Warning) int {
	return slices.IndexFunc(d.Cases, func(c hazewright.CaseResult) bool { return slices.Contains(c.Warnings, w) })
}

// String writes the warning on one line: "Iron rods, if every touch sticks (100 %): fate: ...".
func (w Warning) String() string {
	head := clean(w.Design)
	if w.Case != "" {
		head += ", " + w.Case
	}
	if head != "" {
		head += ": "
	}
	return head + clean(w.Where) + ": " + uniform(clean(w.Text))
}
