package hazewright

import (
	"fmt"
	"math"
	"slices"
	"strings"
	"unicode/utf8"
)

// check holds a node and all below it against the schema, reads every single value,
// and lists the mistakes. Rules that join several inputs are in decode.
func (l *loader) check(n *node, s *schema, path string) {
	if n.faulty {
		return
	}
	switch n.kind {
	case scalarNode:
		l.checkScalar(n, s, path)
	case listNode:
		l.checkList(n, s, path)
	case mapNode:
		l.checkMap(n, s, path)
	}
}

func (l *loader) checkScalar(n *node, s *schema, path string) {
	n.row = s.row
	if n.null {
		l.fault(n, path, "", problem{what: "is empty", hint: emptyHint(s)})
		return
	}
	if !s.scalar() {
		if s.row != nil && slices.Contains(s.row.Choices, n.text) {
			n.ok = true
			return
		}
		l.fault(n, path, quoteLong(n.text), wrongType(n.text, s))
		return
	}
	var p *problem
	if n.quantity, n.flag, p = s.row.read(n.text); p != nil {
		if n.section != "" {
			path = n.section
			if Nearest(n.text, s.row.Choices) == "" {
				p.hint = "choose one of them, or give a map with base and what differs from it"
			}
		}
		l.fault(n, path, quoteLong(n.text), *p)
		return
	}
	n.ok = true
}

func (l *loader) checkList(n *node, s *schema, path string) {
	if s.item == nil {
		l.fault(n, path, "", problem{what: "is a list", hint: typeHint(s, false)})
		return
	}
	if s.row != nil && s.row.Required && len(n.items) == 0 {
		l.fault(n, path, "", problem{what: "is an empty list", hint: "give at least one"})
	}
	seen := map[string]int{}
	for i, item := range n.items {
		label := itemLabel(n, s, i)
		l.check(item, s.item, fmt.Sprintf("%s[%s]", path, label))
		if name := item.child("name"); s.named() && name != nil && name.ok {
			if first, twice := seen[name.text]; twice {
				l.fault(name, path, quoteLong(name.text), problem{what: "names two of the list, first in line " + fmt.Sprint(first), hint: "give each its own name"})
			} else {
				seen[name.text] = name.at.line
			}
		}
	}
}

func (l *loader) checkMap(n *node, s *schema, path string) {
	if len(s.children) == 0 {
		l.fault(n, path, "", problem{what: "is a map", hint: typeHint(s, false)})
		return
	}
	l.decimalCommas(n, path)
	for _, m := range n.members {
		if c := s.child(m.key); c != nil {
			l.check(m.value, c, joinPath(path, m.key))
			continue
		}
		if near := Nearest(m.key, s.keys()); near != "" && n.child(near) == nil {
			n.misspelt = append(n.misspelt, near)
		}
		l.faultAt(m.at, n.alias, joinPath(path, quoteLong(m.key)), "", unknownKey(s, m.key))
	}
	for _, c := range s.children {
		if c.row != nil && c.row.Required && n.lacks(c.name) {
			l.fault(n, joinPath(path, c.name), "", problem{what: "is missing", hint: emptyHint(c)})
		}
	}
}

// decimalCommas finds numbers that a comma cuts in two: YAML reads {length: 8,5 um} as a
// length of 8 and a key "5 um" without a value. It takes the false key out of the map.
func (l *loader) decimalCommas(n *node, path string) {
	var kept []member
	for _, m := range n.members {
		if len(kept) > 0 && m.value.null && isDigit(m.key[0]) {
			last := kept[len(kept)-1]
			v := last.value
			if v.kind == scalarNode && v.text != "" && isDigit(v.text[len(v.text)-1]) {
				p := problem{what: "has a comma inside the number", hint: fmt.Sprintf("write decimals with a point: %s.%s", v.text, m.key)}
				if digits, _ := cutNumber(m.key); len(digits) == 3 {
					p.hint += fmt.Sprintf("; thousands without a sign: %s%s", v.text, m.key)
				}
				l.fault(v, joinPath(path, quoteLong(last.key)), quoteLong(v.text+","+m.key), p)
				v.faulty = true
				continue
			}
		}
		kept = append(kept, m)
	}
	n.members = kept
}

// wrongType says what may stand where a scalar does not fit.
func wrongType(text string, s *schema) problem {
	if s.row == nil || len(s.row.Choices) == 0 {
		return problem{what: "is a single value", hint: typeHint(s, false)}
	}
	p := badChoice(text, s.row.Choices)
	if Nearest(text, s.row.Choices) == "" {
		p.hint = typeHint(s, true)
	}
	return p
}

// typeHint says what belongs in a place; told says that the message lists the words that
// may stand there already.
func typeHint(s *schema, told bool) string {
	var kinds []string
	if s.row != nil && len(s.row.Choices) > 0 {
		words := fewWords(s.row.Choices, "or")
		if told {
			words = "one of these words"
		}
		kinds = append(kinds, words)
	} else if s.scalar() {
		kinds = append(kinds, "a single value")
		if example := s.row.example(); example != "" {
			kinds[0] += " such as " + example
		}
	}
	if s.item != nil {
		kinds = append(kinds, "a list")
	}
	if len(s.children) > 0 {
		word := "keys"
		if len(s.children) == 1 {
			word = "key"
		}
		kinds = append(kinds, fmt.Sprintf("a map with the %s %s", word, fewWords(s.keys(), "and")))
	}
	return "give " + strings.Join(kinds, ", or ")
}

// emptyHint says what to write where a value is missing.
func emptyHint(s *schema) string {
	switch {
	case s.row == nil:
		return typeHint(s, false)
	case s.row.Kind == KindText && s.name == s.row.Path:
		return "give the " + s.row.Title
	case s.row.Kind == KindText, s.row.Kind == KindName, s.row.Kind == KindPath:
		return fmt.Sprintf("give the %s (%s)", s.row.noun(), s.row.Title)
	case s.row.Default != "" && !s.row.Required:
		return "give a value, or leave the key out for " + shortDefault(s.row)
	case len(s.row.Choices) > 0 && s.scalar():
		return "give " + fewWords(s.row.Choices, "or")
	}
	return typeHint(s, false)
}

func shortDefault(row *Input) string {
	const longest = 30
	if len(row.Default) > longest {
		return "the default"
	}
	return "the default, " + row.Default
}

// fewWords lists words for a message, not too many.
func fewWords(words []string, last string) string {
	const most = 16
	if len(words) > most {
		words = append(slices.Clone(words[:most]), "...")
	}
	return listWords(words, last)
}

// unknownKey says which key was probably meant.
func unknownKey(s *schema, key string) problem {
	p := problem{what: "is an unknown key"}
	if s == studySchema().child("goal") && outsideScope(key) {
		return problem{what: "is outside the scope of this program", hint: "goals are for the whole planet and the annual mean: no latitude, season, region or phased area"}
	}
	if strings.Contains(key, " ") { // no key has one
		p.hint = "a text with a comma in it needs quotation marks"
		return p
	}
	keys := s.keys()
	if near := Nearest(key, keys); near != "" {
		p.hint = fmt.Sprintf("did you mean %q?", near)
		return p
	}
	if homes := studySchema().whereKnown(key, ""); len(homes) > 0 && len(homes) <= 3 {
		p.hint = fmt.Sprintf("it belongs under %s", listWords(homes, "or"))
		return p
	}
	switch {
	case s.child(strings.ToLower(key)) != nil:
		p.hint = fmt.Sprintf("did you mean %q?", strings.ToLower(key))
	case len(keys) > 0:
		p.hint = "known keys: " + fewWords(keys, "and")
	}
	return p
}

// outsideScope reports whether a key asks for less than the whole planet and year.
func outsideScope(key string) bool {
	for _, word := range []string{"region", "latitude", "longitude", "lat", "lon", "area", "site", "season", "month",
		"hemisphere", "pole", "basin", "crater", "phase", "phases", "zone"} {
		if strings.EqualFold(key, word) {
			return true
		}
	}
	return false
}

// badChoice says which words are allowed and which was probably meant.
func badChoice(word string, choices []string) problem {
	p := problem{what: "is not one of", allowed: strings.Join(choices, ", ")}
	if near := Nearest(word, choices); near != "" {
		p.hint = fmt.Sprintf("did you mean %s?", near)
	} else {
		p.hint = "choose one of them"
	}
	return p
}

// read turns the text of a single value into what the kind of input asks for.
func (in *Input) read(text string) (q Quantity, flag bool, p *problem) {
	switch in.Kind {
	case KindFlag:
		flag, p = readFlag(text)
	case KindChoice:
		if !slices.Contains(in.Choices, text) {
			bad := badChoice(text, in.Choices)
			p = &bad
		}
	case KindText, KindPath, KindValue:
		p = readText(text)
	case KindName:
		if p = readText(text); p == nil {
			if bad := nameFault(text); bad != "" {
				p = &problem{what: bad, hint: "choose another name"}
			}
		}
	default:
		q, p = in.readNumber(text)
	}
	return q, flag, p
}

func readFlag(text string) (bool, *problem) {
	switch strings.ToLower(text) {
	case "on", "true", "yes":
		return true, nil
	case "off", "false", "no":
		return false, nil
	}
	return false, &problem{what: "is neither on nor off", hint: "write on or off"}
}

func readText(text string) *problem {
	const longest = 500
	if utf8.RuneCountInString(text) > longest {
		return &problem{what: fmt.Sprintf("is longer than %d characters", longest), hint: "shorten it"}
	}
	if strings.ContainsFunc(text, unseen) {
		return &problem{what: unseenFault, hint: "write it in one line of plain text"}
	}
	return nil
}

// unseenFault is what is wrong with a text that has an [unseen] character.
const unseenFault = "holds a control character, a line break or a sign that turns the direction of writing"

// readNumber reads a number or quantity and holds it against dimension and range.
func (in *Input) readNumber(text string) (Quantity, *problem) {
	q, p := in.readDimension(text)
	if p != nil {
		return q, p
	}
	if in.Kind == KindWhole && q.SI != math.Trunc(q.SI) {
		return q, &problem{what: "is not a whole number", hint: "write a whole number"}
	}
	return q, in.outside(q)
}

// readDimension reads a number or quantity of the right dimension, whatever its size.
func (in *Input) readDimension(text string) (Quantity, *problem) {
	unit, err := parseUnit(in.Unit)
	if err != nil {
		return Quantity{}, &problem{what: "has no known unit: " + err.Error()}
	}
	q, err := ParseQuantity(text)
	if err != nil {
		p := problem{what: err.Error()}
		if e, ok := err.(*QuantityError); ok {
			p = problem{what: e.Problem, hint: e.Hint}
		}
		if strings.HasPrefix(p.what, "has the unknown unit") || p.hint == "" {
			p.hint = strings.TrimPrefix(p.hint+"; "+in.unitsHint(unit.dim), "; ")
		} else if strings.HasPrefix(p.what, "does not start") {
			p.hint = "write it like " + in.example()
		}
		return q, &p
	}
	if unit.dim == (Dimension{}) {
		if in.Kind == KindWhole && !q.plain() {
			return q, &problem{what: "has a unit where a whole number is due", hint: "write a whole number"}
		}
		if q.Dimension != unit.dim {
			return q, &problem{what: fmt.Sprintf("is a %s where a plain number is due", q.Dimension), hint: "write a plain number or %"}
		}
		return q, nil
	}
	switch {
	case q.plain():
		return q, &problem{what: "has no unit where " + in.wanted(unit.dim) + " is due", hint: in.unitsHint(unit.dim)}
	case q.Dimension != unit.dim:
		return q, &problem{what: fmt.Sprintf("is %s where %s is due", article(q.Dimension.String()), in.wanted(unit.dim)), hint: in.unitsHint(unit.dim)}
	case q.Celsius && in.Kind != KindTemperature:
		return q, &problem{what: "is a temperature where a difference is due", hint: "write the difference in K"}
	}
	return q, nil
}

// wanted names the dimension of an input with its article.
func (in *Input) wanted(d Dimension) string {
	if d == dimTemperature && in.Kind != KindTemperature {
		return "a temperature difference"
	}
	return article(d.String())
}

// unitsHint lists the units that would do.
func (in *Input) unitsHint(d Dimension) string {
	if d == (Dimension{}) {
		return "write a plain number or %"
	}
	symbols := unitsOf(d)
	if in.Kind != KindTemperature {
		symbols = slices.DeleteFunc(symbols, func(s string) bool { return s == "degC" })
	}
	hint := "write it like " + in.example()
	if len(symbols) > 0 && d != dimRate { // rates are written as %/yr; Hz would mislead
		hint += fmt.Sprintf(" (units of %s: %s)", d, strings.Join(symbols, ", "))
	}
	return hint
}

// outside says if a value is not in the input's range.
func (in *Input) outside(q Quantity) *problem {
	low, lowErr := ParseQuantity(in.Low)
	high, highErr := ParseQuantity(in.High)
	tooLow, tooHigh := lowErr == nil && q.SI < low.SI, highErr == nil && q.SI > high.SI
	if !tooLow && !tooHigh {
		return nil
	}
	p := &problem{what: "is outside", allowed: in.Low + " to " + in.High, hint: "choose " + article(in.noun()) + " inside it"}
	if in.Unit == "1" {
		p.hint = "choose a value inside it"
	}
	if tooHigh && q.plain() && in.Kind == KindFraction && q.SI <= 100 {
		p.hint = fmt.Sprintf("write %s %% if per cent is meant", q)
	}
	return p
}

// noun returns the last key of the path in words: "burial time".
func (in *Input) noun() string {
	key := strings.TrimSuffix(in.Path[strings.LastIndexByte(in.Path, '.')+1:], "[]")
	if key == "" {
		return "value"
	}
	return strings.ReplaceAll(key, "_", " ")
}

// article puts "a" or "an" before a noun.
func article(noun string) string {
	if noun != "" && strings.ContainsRune("aeiou", rune(noun[0])) {
		return "an " + noun
	}
	return "a " + noun
}
