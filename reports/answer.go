package reports

import (
	"fmt"
	"strings"

	"hazewright"
)

// estimated reports whether a value rests on an estimate that must be marked.
func estimated(v hazewright.FigureValue) bool {
	return !v.Null && strings.Contains(strings.ToLower(v.Note), "estimate")
}

// tally counts limits by outcome and finds the one that fails by most.
type tally struct {
	met, failed, unknown int
	worst                hazewright.LimitResult // of those failed
}

func count(limits []hazewright.LimitResult) tally {
	var t tally
	for _, l := range limits {
		switch {
		case !l.Known:
			t.unknown++
		case l.Met:
			t.met++
		default:
			if t.failed == 0 || l.Factor > t.worst.Factor {
				t.worst = l
			}
			t.failed++
		}
	}
	return t
}

// limitsWord says in a few words how a design stands against the limits.
func limitsWord(limits []hazewright.LimitResult) string {
	t := count(limits)
	switch {
	case len(limits) == 0:
		return "no limits set"
	case t.failed > 0:
		text := fmt.Sprintf("%d of %d FAILED", t.failed, len(limits))
		if t.worst.Factor > 0 {
			text += ", worst " + factor(t.worst.Factor)
		}
		return text
	case t.unknown > 0:
		return fmt.Sprintf("%d of %d not known", t.unknown, len(limits))
	case t.met == 1:
		return "met"
	}
	return fmt.Sprintf("all %d met", t.met)
}

// limitWord is the outcome of one limit: "met", "FAILED x1.8", "FAILED: never" or "not
// known". v is the figure that it bounds.
func limitWord(l hazewright.LimitResult, v hazewright.FigureValue) string {
	switch {
	case !l.Known:
		return "not known"
	case l.Met:
		return "met"
	case l.Factor > 0:
		return "FAILED " + factor(l.Factor)
	case v.Null && v.Why != "":
		return "FAILED: " + shortReason(why(v))
	}
	return "FAILED" // no ratio can be told
}

// shortReason is what stands before the explanation: "never" of "never: the supply ends".
func shortReason(text string) string {
	short, _, _ := strings.Cut(text, ":")
	short, _, _ = strings.Cut(short, " (")
	return short
}

// limitTone is its tone.
func limitTone(l hazewright.LimitResult) tone {
	switch {
	case !l.Known:
		return plain
	case l.Met:
		return good
	}
	return bad
}

// limitsTone is the tone of [limitsWord].
func limitsTone(limits []hazewright.LimitResult) tone {
	switch n := count(limits); {
	case n.failed > 0:
		return bad
	case n.met > 0 && n.unknown == 0:
		return good
	}
	return plain
}

// limitTitle writes a limit: "Production at most 5000 t/d".
func limitTitle(l hazewright.Limit) string {
	def, ok := hazewright.FigureByID(l.Figure)
	if !ok {
		def = hazewright.FigureDef{Title: l.Figure, Shown: "1"}
	}
	side := "at least"
	if l.AtMost {
		side = "at most"
	}
	return fmt.Sprintf("%s %s %s", def.Title, side, quantity(l.Bound, def.Shown))
}

// goalText writes the goal: "warming of 25 K".
func goalText(g hazewright.Goal) string {
	switch g.Kind {
	case "warming":
		return "warming of " + quantity(g.Warming, "K")
	case "burden":
		return "burden of " + quantity(g.Burden, "mg/m2")
	case "optical_depth":
		return fmt.Sprintf("vertical optical depth of %s (%s)", significant(g.OpticalDepth, digits), clean(g.At))
	}
	return clean(g.Kind)
}

// Rule by which [hinge] names the assumption a design hangs on most.
const hingeRule = "What a design hangs on is named by a simple rule, not by a sensitivity analysis: sticking where the study does not give it " +
	"and the production depends on it by more than a tenth, else a lifetime that was given and not computed, else the largest share of the loss budget."

// hinge names the assumption that the design hangs on most, by hingeRule.
func hinge(d *hazewright.DesignResult) string {
	if !d.Reached {
		switch {
		case d.NeverWarms && d.MaxWarming < 0:
			return "The warming estimate, by which these particles cool at every burden."
		case d.NeverWarms:
			return "The warming estimate, by which no burden of these particles warms."
		}
		title, text := warmest(d)
		return fmt.Sprintf("The goal is not reached (%s). %s: %s, by the warming estimate.", clean(d.Cause), title, text)
	}
	if w := d.Figures["warming"]; !w.Null && w.Value <= 0 {
		return fmt.Sprintf("The warming estimate, by which the burden does not warm: %s.", quantity(w.Value, "K"))
	}
	if text := stickingHinge(d); text != "" {
		return text
	}
	if life := d.Figures["lifetime"]; strings.Contains(life.Note, "given") {
		return fmt.Sprintf("Lifetime: %s is given, not computed.", duration(life.Value))
	}
	largest := hazewright.Loss{}
	for _, l := range d.Losses {
		if l.Share > largest.Share {
			largest = l
		}
	}
	if largest.Share <= 0 {
		return "The lifetime; no loss budget is known."
	}
	return fmt.Sprintf("Lifetime, through its largest loss: %s takes %s of what is removed; alone it would allow %s.",
		clean(largest.Name), percent(largest.Share), duration(largest.LifetimeAlone))
}

// warmest says how far a design that misses the goal comes, with what to call that.
func warmest(d *hazewright.DesignResult) (title, text string) {
	at := func(warming, burden float64) string {
		return fmt.Sprintf("%s at %s", quantity(warming, "K"), quantity(burden, "mg/m2"))
	}
	switch n := len(d.Curve); {
	case d.NeverWarms && d.MaxWarming < 0:
		return "Largest warming", "none, they cool"
	case d.NeverWarms:
		return "Largest warming", "none"
	case d.Goal.Burden > 0: // it is given, and falls short
		return "Warming at its burden", at(d.Goal.Warming, d.Goal.Burden)
	case n > 0 && d.MaxBurden >= d.Curve[n-1].Burden:
		return "Warming at the end of the curve", at(d.MaxWarming, d.MaxBurden)
	}
	return "Largest warming", at(d.MaxWarming, d.MaxBurden)
}

// stickingHinge says what not knowing the sticking does, "" if that is little.
func stickingHinge(d *hazewright.DesignResult) string {
	if len(d.Cases) < 2 {
		return ""
	}
	worst, best := d.Cases[0], d.Cases[len(d.Cases)-1]
	a, b := worst.Figures["production_rate"], best.Figures["production_rate"]
	const text = "How well particles stick when they touch. The study does not give it"
	switch {
	case a.Null || b.Null || b.Value <= 0:
		return text + "."
	case a.Value < 1.1*b.Value:
		return ""
	}
	return fmt.Sprintf("%s; between %s and %s sticking the production goes from %s to %s (%s).", text,
		percent(worst.Sticking), percent(best.Sticking), quantity(a.Value, "t/d"), quantity(b.Value, "t/d"), factor(a.Value/b.Value))
}

// stickingCase says which case the figures of a design without sticking hold for.
func stickingCase(d *hazewright.DesignResult) string {
	return "if " + strings.TrimPrefix(clean(d.StickingCase), "if ")
}

// benchmark is a published number held against a design's figure.
type benchmark struct {
	hazewright.Benchmark
	ratio float64 // ours over theirs; 0 if there is none
}

// benchmarks returns the study's benchmarks of a design, in study order.
func benchmarks(r *hazewright.Result, d *hazewright.DesignResult) []benchmark {
	var out []benchmark
	for _, b := range r.Study.Benchmarks {
		if b.Design != d.Name {
			continue
		}
		row := benchmark{Benchmark: b}
		if v, ok := d.Figures[b.Figure]; ok && !v.Null && b.Value != 0 {
			row.ratio = v.Value / b.Value
		}
		out = append(out, row)
	}
	return out
}
