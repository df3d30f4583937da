package hazewright

import (
	"fmt"
	"strings"
)

// figure finds the figure that a row of limits or benchmarks names.
func (l *loader) figure(n *node, path string) (FigureDef, bool) {
	if !n.has("figure") {
		return FigureDef{}, false
	}
	id := n.word("figure")
	f, ok := FigureByID(id)
	if !ok {
		var ids []string
		for _, f := range Figures() {
			ids = append(ids, f.ID)
		}
		p := problem{what: "is not a figure", hint: "`hazewright catalogue figures` lists them"}
		if near := Nearest(id, ids); near != "" {
			p.hint = fmt.Sprintf("did you mean %s?", near)
		}
		l.fault(n.child("figure"), path+".figure", quoteLong(id), p)
	}
	return f, ok
}

// figureValue reads a value in the dimension of a figure, which is above zero but for the
// figures of mayBeNegative.
func (l *loader) figureValue(n *node, path string, f FigureDef) float64 {
	if n == nil || n.kind != scalarNode || !n.ok {
		return 0
	}
	in := Input{Path: path, Kind: KindQuantity, Unit: f.Unit, Example: "1 " + f.Shown}
	if f.Unit == "1" {
		in.Kind, in.Example = KindNumber, "1"
	}
	q, p := in.readNumber(n.text)
	if p == nil && q.SI <= 0 && !mayBeNegative[f.ID] {
		p = &problem{what: "is not above zero", hint: "the distance of a design from it is told as a ratio; give a value above zero"}
	}
	if p != nil {
		l.fault(n, path, quoteLong(n.text), *p)
		return 0
	}
	n.quantity = q
	return q.SI
}

// mayBeNegative are the figures for which zero and less are values like others.
var mayBeNegative = map[string]bool{"warming": true, "warming_low_held": true, "forcing": true}

func (l *loader) limits(root *node) {
	for i, n := range root.list("limits") {
		path := fmt.Sprintf("limits[%d]", i)
		f, known := l.figure(n, path)
		most, least := n.child("at_most"), n.child("at_least")
		switch {
		case n.kind != mapNode:
			continue
		case most == nil && least == nil && (!n.lacks("at_most") || !n.lacks("at_least")):
			continue
		case most == nil && least == nil:
			l.fault(n, path, "", problem{what: "has no bound", hint: "give at_most or at_least"})
			continue
		case most != nil && least != nil:
			l.fault(least, path+".at_least", "", problem{what: "is a second bound beside at_most", hint: "write two limits"})
			continue
		}
		limit := Limit{Figure: f.ID, AtMost: most != nil, Pos: l.position(n.at)}
		bound, key := most, "at_most"
		if most == nil {
			bound, key = least, "at_least"
		}
		if known {
			limit.Bound = l.figureValue(bound, path+"."+key, f)
		}
		l.study.Limits = append(l.study.Limits, limit)
	}
}

func (l *loader) benchmarks(root *node) {
	var names []string
	for _, d := range l.study.Designs {
		names = append(names, d.Name)
	}
	for i, n := range root.list("benchmarks") {
		path := fmt.Sprintf("benchmarks[%d]", i)
		b := Benchmark{Design: n.word("design"), Source: n.word("source")}
		if b.Design != "" {
			found := false
			for _, name := range names {
				found = found || name == b.Design
			}
			if !found {
				p := problem{what: "is not a design of this study", hint: "the study has " + fewWords(names, "and")}
				if near := Nearest(b.Design, names); near != "" {
					p.hint = fmt.Sprintf("did you mean %q?", near)
				}
				l.fault(n.child("design"), path+".design", quoteLong(b.Design), p)
			}
		}
		if f, known := l.figure(n, path); known {
			b.Figure = f.ID
			b.Value = l.figureValue(n.child("value"), path+".value", f)
		}
		l.study.Benchmarks = append(l.study.Benchmarks, b)
	}
}

// target finds the numeric input that a law or sweep varies.
func (l *loader) target(root, n *node, path string) (string, *Input) {
	if !n.has("at") {
		return "", nil
	}
	at := n.child("at")
	canonical, v, s, p := resolve(root, at.text)
	if p == nil {
		p = notVariable(canonical, v, s)
	}
	if p != nil {
		l.fault(at, path+".at", quoteLong(at.text), *p)
		return "", nil
	}
	at.text = canonical
	return canonical, s.row
}

// notVariable says why an input cannot be swept or uncertain.
func notVariable(path string, v *node, s *schema) *problem {
	section, _, _ := strings.Cut(path, ".")
	section, _, _ = strings.Cut(section, "[")
	switch section {
	case "world", "goal", "designs", "fate", "supply", "model":
	default:
		return &problem{what: "is not an input that can be varied", hint: "vary inputs of world, goal, designs, fate, supply or model"}
	}
	switch {
	case s.row == nil || !s.row.numeric():
		return &problem{what: "is not a number", hint: "vary inputs that are numbers"}
	case s.name == "share":
		return &problem{what: "cannot be varied alone: shares sum to 100 %", hint: "write a design for each mix"}
	case v == nil && s.row.Unset == "":
		return &problem{what: "has no value in this study", hint: "give it one first"}
	case v != nil && v.kind != scalarNode:
		return &problem{what: "is " + v.kind.String() + " in this study", hint: "vary its single values"}
	}
	return nil
}

// value reads a key of a law or sweep in the dimension of the input that it is about,
// inside that input's range.
func (l *loader) value(n *node, key, path string, in *Input) (float64, bool) {
	v := n.child(key)
	if v == nil || v.kind != scalarNode || !v.ok {
		return 0, false
	}
	q, p := in.readNumber(v.text)
	if p != nil {
		l.fault(v, path+"."+key, quoteLong(v.text), *p)
		return 0, false
	}
	v.quantity = q
	return q.SI, true
}

// lawKeys are the keys that each law takes beside at and law.
var lawKeys = map[string][]string{
	"uniform":    {"low", "high"},
	"loguniform": {"low", "high"},
	"triangular": {"low", "mode", "high"},
	"normal":     {"mean", "sd"},
	"lognormal":  {"median", "spread"},
}

func (l *loader) uncertain(root *node) {
	n := root.child("uncertain")
	if n == nil {
		return
	}
	if n.kind == scalarNode && n.ok {
		l.study.Uncertain = defaultLaws()
		return
	}
	seen := map[string]int{}
	for i, row := range n.items {
		path := fmt.Sprintf("uncertain[%d]", i)
		if row.kind != mapNode {
			continue
		}
		at, in := l.target(root, row, path)
		law := Law{At: at, Kind: row.word("law")}
		if at != "" {
			if first, twice := seen[at]; twice {
				l.fault(row.child("at"), path+".at", quoteLong(at), problem{what: fmt.Sprintf("has two laws, the first in line %d", first), hint: "keep one"})
			} else {
				seen[at] = row.child("at").at.line
			}
		}
		if law.Kind != "" && l.lawHasKeys(row, law.Kind, path) && in != nil {
			l.readLaw(&law, row, path, in)
		}
		l.study.Uncertain = append(l.study.Uncertain, law)
	}
}

// lawHasKeys reports whether a law has the keys it takes, and no others.
func (l *loader) lawHasKeys(row *node, kind, path string) bool {
	takes := lawKeys[kind]
	hint := fmt.Sprintf("%s law takes %s", article(kind), listWords(takes, "and"))
	sound := true
	for _, key := range takes {
		if row.child(key) == nil {
			sound = false
		}
		if row.lacks(key) {
			l.fault(row, path+"."+key, "", problem{what: "is missing", hint: hint})
		}
	}
	for _, m := range row.members {
		switch m.key {
		case "low", "high", "mode", "mean", "sd", "median", "spread":
			known := false
			for _, key := range takes {
				known = known || key == m.key
			}
			if !known {
				sound = false
				l.faultAt(m.at, m.value.alias, path+"."+m.key, "", problem{what: "does not belong to this law", hint: hint})
			}
		}
	}
	return sound
}

// readLaw reads and checks the parameters of a law.
func (l *loader) readLaw(law *Law, row *node, path string, in *Input) {
	switch law.Kind {
	case "uniform", "loguniform", "triangular":
		low, okLow := l.value(row, "low", path, in)
		high, okHigh := l.value(row, "high", path, in)
		law.Low, law.High = low, high
		if !okLow || !okHigh {
			return
		}
		if low >= high {
			l.fault(row.child("high"), path+".high", row.word("high"), problem{what: "is not above low, " + row.word("low"), hint: "swap the two"})
			return
		}
		if law.Kind == "loguniform" && low <= 0 {
			l.fault(row.child("low"), path+".low", row.word("low"), problem{what: "is not above zero, as a loguniform law needs", hint: "choose a small positive value, or a uniform law"})
		}
		if law.Kind == "triangular" {
			mode, ok := l.value(row, "mode", path, in)
			law.Mode = mode
			if ok && (mode < low || mode > high) {
				l.fault(row.child("mode"), path+".mode", row.word("mode"), problem{what: "is outside", allowed: row.word("low") + " to " + row.word("high"), hint: "choose a mode inside it"})
			}
		}
	case "normal":
		law.Mean, _ = l.value(row, "mean", path, in)
		law.SD = l.deviation(row.child("sd"), path+".sd", in)
	case "lognormal":
		median, ok := l.value(row, "median", path, in)
		law.Median, law.Spread = median, row.si("spread")
		if ok && median <= 0 {
			l.fault(row.child("median"), path+".median", row.word("median"), problem{what: "is not above zero, as a lognormal law needs", hint: "choose a positive median"})
		}
		if row.has("spread") && law.Spread <= 1 {
			l.fault(row.child("spread"), path+".spread", row.word("spread"), problem{what: "is not above 1", hint: "a geometric standard deviation of 1.3 means a factor of 1.3 either way"})
		}
	}
}

// deviation reads a standard deviation: a difference in the dimension of the input.
func (l *loader) deviation(n *node, path string, in *Input) float64 {
	if n == nil || !n.ok {
		return 0
	}
	difference := *in
	if in.Kind == KindTemperature {
		difference.Kind = KindQuantity
	}
	if in.Kind == KindWhole {
		difference.Kind = KindNumber
	}
	q, p := difference.readDimension(n.text)
	if p == nil && q.SI <= 0 {
		p = &problem{what: "is not above zero", hint: "give a positive standard deviation"}
	}
	if p != nil {
		l.fault(n, path, quoteLong(n.text), *p)
	}
	n.quantity = q
	return q.SI
}

// defaultLaws returns the laws of `uncertain: defaults`, each marked assumption.
func defaultLaws() []Law {
	var laws []Law
	for _, in := range InputTable() {
		if in.Vary.Law == "" {
			continue
		}
		si := func(text string) float64 {
			q, _ := ParseQuantity(text) // "" gives 0; the table's texts are tested
			return q.SI
		}
		laws = append(laws, Law{At: in.Path, Kind: in.Vary.Law, Low: si(in.Vary.Low), High: si(in.Vary.High),
			Median: si(in.Vary.Median), Spread: si(in.Vary.Spread), Assumption: true})
	}
	return laws
}

func (l *loader) sweeps(root *node) {
	for i, n := range root.list("sweeps") {
		path := fmt.Sprintf("sweeps[%s]", itemLabel(root.child("sweeps"), studySchema().child("sweeps"), i))
		if n.kind != mapNode {
			continue
		}
		sweep := Sweep{Name: n.word("name"), Points: int(n.si("points")), Log: n.word("scale") == "log"}
		at, in := l.target(root, n, path)
		if in != nil {
			from, okFrom := l.value(n, "from", path, in)
			to, okTo := l.value(n, "to", path, in)
			sweep.At, sweep.From, sweep.To = at, from, to
			switch {
			case !okFrom || !okTo:
			case from == to:
				l.fault(n.child("to"), path+".to", n.word("to"), problem{what: "is the same as from", hint: "give a range"})
			case sweep.Log && (from <= 0 || to <= 0):
				l.fault(n, path, "", problem{what: "goes through zero on a log scale", hint: "start above zero, or use scale: linear"})
			}
		}
		l.study.Sweeps = append(l.study.Sweeps, sweep)
	}
}

func (l *loader) sources(root *node) {
	for i, n := range root.list("sources") {
		if !n.has("at") {
			continue
		}
		at := n.child("at")
		canonical, v, s, p := resolve(root, at.text)
		if p == nil && v == nil && (s.row == nil || s.row.Unset == "") {
			p = &problem{what: "has no value in this study", hint: "remove its source"}
		}
		if p != nil {
			l.fault(at, fmt.Sprintf("sources[%d].at", i), quoteLong(at.text), *p)
			continue
		}
		at.text = canonical
		l.study.Sources = append(l.study.Sources, SourceNote{At: canonical, Text: n.word("text")})
	}
}
