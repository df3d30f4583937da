package hazewright

import (
	"fmt"
	"strings"

	"hazewright/optics/material"
)

// position returns a place as messages print it.
func (l *loader) position(at place) string { return at.in(l.file.Name) }

// in returns a place as messages print it: "study.yaml:14:11", "--set #2", "" for a
// default.
func (p place) in(file string) string {
	if p.layer == layerFile {
		return fmt.Sprintf("%s:%d:%d", file, p.line, p.column)
	}
	return p.String()
}

// String returns a place without its file.
func (p place) String() string {
	switch p.layer {
	case layerSet:
		return fmt.Sprintf("--set #%d", p.line)
	case layerFile:
		return fmt.Sprintf("%d:%d", p.line, p.column)
	}
	return ""
}

// origin returns where a node's value came from.
func (s *Study) origin(at place) Origin {
	kind := [...]string{layerDefault: "default", layerFile: "file", layerSet: "set"}[at.layer]
	return Origin{Kind: kind, Pos: at.in(s.File)}
}

// Origin says where the effective value of an input came from. The path is as in
// "designs[Iron rods].particles[0].diameter"; items may be given by name or index, and
// a design's fate and supply fall back on the study's. It reports false for a path
// without a value.
func (s *Study) Origin(path string) (Origin, bool) {
	if s.resolved == nil {
		return Origin{}, false
	}
	_, n, _, p := resolve(s.resolved, path)
	if p != nil || n == nil {
		return Origin{}, false
	}
	return s.origin(n.at), true
}

// Resolved returns the merged study for JSON: keys in the order of the input table,
// quantities as written or as the default's text, flags as true and false. Written to a
// file it loads as the same study.
func (s *Study) Resolved() any {
	if s.resolved == nil {
		return nil
	}
	return s.resolved
}

// Inputs returns every effective value of world, goal, designs, fate, supply, limits and
// model in the order of the input table, with origin and source. Of a design's fate and
// supply only what the design itself changes is listed. Inputs that may be left out and
// were are listed where the table says what then happens.
func (s *Study) Inputs() []InputValue {
	if s.resolved == nil {
		return nil
	}
	c := inputCollector{study: s}
	for _, section := range studySchema().children {
		switch section.name {
		case "world", "goal", "designs", "fate", "supply", "limits", "model":
			c.collect(s.resolved.child(section.name), section, section.name, sourceAbove{})
		}
	}
	return c.values
}

type inputCollector struct {
	study  *Study
	values []InputValue
}

// sourceAbove is what the sections above a value say about where it comes from.
type sourceAbove struct{ user, table string }

// collect adds the values below n.
func (c *inputCollector) collect(n *node, s *schema, path string, above sourceAbove) {
	if n == nil {
		if s.row != nil && s.row.Unset != "" && !c.inDesign(path, s) {
			c.values = append(c.values, InputValue{Path: path, Text: s.row.Unset, Unit: s.row.Unit, Origin: Origin{Kind: "default"},
				Source: firstOf(c.userSource(path), above.user, s.row.Source), Title: s.row.Title})
		}
		return
	}
	source := sourceAbove{user: firstOf(c.userSource(path), above.user), table: above.table}
	if s.row != nil && s.row.Source != byStudy {
		source.table = s.row.Source
	}
	switch n.kind {
	case mapNode:
		for _, child := range s.children {
			below := joinPath(path, child.name)
			if n.child(child.name) == nil && child.row != nil && particleDefaults[child.row.Path] != nil {
				if text := particleDefaults[child.row.Path](n); text != "" {
					c.values = append(c.values, InputValue{Path: below, Text: text, Unit: child.row.Unit, Origin: Origin{Kind: "default"},
						Source: firstOf(c.userSource(below), source.user, child.row.Source), Title: child.row.Title})
				}
				continue
			}
			c.collect(n.child(child.name), child, below, source)
		}
	case listNode:
		if len(n.items) == 0 {
			c.add(n, s, path, "none", source)
		}
		for i, item := range n.items {
			c.collect(item, s.item, fmt.Sprintf("%s[%s]", path, itemLabel(n, s, i)), source)
		}
	default:
		c.add(n, s, path, n.text, source)
	}
}

// particleDefaults give the effective text of what a particle leaves out and its shape or
// material decides; "" where the particle has no such thing.
var particleDefaults = map[string]func(particle *node) string{
	"designs[].particles[].core": func(p *node) string {
		if p.word("shape") == "shell" {
			return hollow
		}
		return ""
	},
	"designs[].particles[].oxide": func(p *node) string {
		m, err := material.ByName(p.word("material"))
		if err != nil {
			return "0 nm"
		}
		return FormatSI(m.DefaultOxide, "nm", 3)
	},
}

// inDesign reports whether path lies in a design's own fate or supply.
func (c *inputCollector) inDesign(path string, s *schema) bool {
	return strings.HasPrefix(path, "designs[") && s.row != nil && !strings.HasPrefix(s.row.Path, "designs[")
}

func (c *inputCollector) add(n *node, s *schema, path, text string, source sourceAbove) {
	v := InputValue{Path: path, Text: text, Origin: c.study.origin(n.at), Title: s.row.Title}
	if n.ok && (s.row.numeric() || s.row.Kind == KindValue && n.quantity.number != "") {
		v.SI, v.HasSI, v.Unit = n.quantity.SI, true, s.row.Unit
	}
	if s.row.Kind == KindValue {
		if f, ok := FigureByID(c.figureOf(path)); ok {
			v.Unit = f.Unit
		}
	}
	switch {
	case source.user != "":
		v.Source = source.user
	case v.Origin.Kind == "default" || sameAsDefault(n, s.row):
		v.Source = source.table
	default:
		v.Source = byStudy
	}
	c.values = append(c.values, v)
}

// figureOf returns the figure of the limit that holds path.
func (c *inputCollector) figureOf(path string) string {
	limit, _, _ := strings.Cut(path, ".")
	_, n, _, p := resolve(c.study.resolved, limit)
	if p != nil {
		return ""
	}
	return n.word("figure")
}

// sameAsDefault reports whether a value is the default, whatever its spelling.
func sameAsDefault(n *node, row *Input) bool {
	if row.Default == "" {
		return false
	}
	if row.numeric() {
		q, err := ParseQuantity(row.Default)
		return err == nil && n.kind == scalarNode && q.SI == n.quantity.SI
	}
	return n.text == row.Default
}

// userSource returns the study's own source for exactly this path.
func (c *inputCollector) userSource(path string) string {
	for _, note := range c.study.Sources {
		if note.At == path {
			return note.Text
		}
	}
	return ""
}

// firstOf returns the first text that is not empty.
func firstOf(texts ...string) string {
	for _, t := range texts {
		if t != "" {
			return t
		}
	}
	return ""
}
