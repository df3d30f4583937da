package hazewright

import (
	"bytes"
	"encoding/json"
	"fmt"
	"slices"
	"strconv"
	"strings"

	"go.yaml.in/yaml/v3"
)

// node is one value of a study: a scalar, a list or a map, with the place where it
// stands. The layers (defaults, file, --set) are merged as nodes.
type node struct {
	kind    nodeKind
	text    string   // of a scalar, as written
	null    bool     // a scalar that is empty, ~ or null
	members []member // of a map, in file order
	items   []*node  // of a list
	at      place
	alias   int    // line of the alias that leads here; 0 = none
	section string // path that the value was given for, where it stands in place of a map; "" = its own

	// What check found out about a scalar.
	ok       bool
	faulty   bool // a mistake in it is already on the list
	quantity Quantity
	flag     bool
	row      *Input

	misspelt []string // of a map: keys that are missing and that unknown keys probably mean
}

type nodeKind int

const (
	scalarNode nodeKind = iota
	listNode
	mapNode
)

func (k nodeKind) String() string { return [...]string{"a single value", "a list", "a map"}[k] }

// member is one key of a map with its value.
type member struct {
	key   string
	at    place // of the key
	value *node
}

// child returns the value of a key of a map, or nil.
func (n *node) child(key string) *node {
	if n == nil {
		return nil
	}
	for i := range n.members {
		if n.members[i].key == key {
			return n.members[i].value
		}
	}
	return nil
}

// put sets a key of a map.
func (n *node) put(key string, at place, value *node) {
	for i := range n.members {
		if n.members[i].key == key {
			n.members[i].at, n.members[i].value = at, value
			return
		}
	}
	n.members = append(n.members, member{key, at, value})
}

// si returns the value of a numeric key in SI units, 0 where it is missing or wrong.
func (n *node) si(key string) float64 {
	if c := n.child(key); c != nil && c.ok {
		return c.quantity.SI
	}
	return 0
}

// has reports whether a key has a sound single value.
func (n *node) has(key string) bool {
	c := n.child(key)
	return c != nil && c.ok
}

// word returns the text of a key, "" where it is missing or wrong.
func (n *node) word(key string) string {
	if c := n.child(key); c != nil && c.ok {
		return c.text
	}
	return ""
}

// on returns the value of a flag.
func (n *node) on(key string) bool {
	c := n.child(key)
	return c != nil && c.flag
}

// lacks reports whether a map has neither a key nor a misspelling of it.
func (n *node) lacks(key string) bool {
	return n.child(key) == nil && (n == nil || !slices.Contains(n.misspelt, key))
}

// list returns the items of a list key.
func (n *node) list(key string) []*node {
	if c := n.child(key); c != nil {
		return c.items
	}
	return nil
}

// merge lays over upon base: maps merge key by key, anything else is replaced.
func merge(base, over *node) *node {
	if over == nil {
		return base
	}
	if base == nil || base.kind != mapNode || over.kind != mapNode {
		return over
	}
	merged := *base
	merged.members = append([]member(nil), base.members...)
	for _, m := range over.members {
		merged.put(m.key, m.at, merge(base.child(m.key), m.value))
	}
	return &merged
}

// MarshalJSON writes the node with its keys in their order: plain numbers as numbers,
// flags as true and false, everything else as text.
func (n *node) MarshalJSON() ([]byte, error) {
	var b bytes.Buffer
	if err := n.writeJSON(&b); err != nil {
		return nil, err
	}
	return b.Bytes(), nil
}

func (n *node) writeJSON(b *bytes.Buffer) error {
	text := func(s string) error {
		data, err := json.Marshal(s)
		b.Write(data)
		return err
	}
	switch n.kind {
	case mapNode:
		b.WriteByte('{')
		for i, m := range n.members {
			if i > 0 {
				b.WriteByte(',')
			}
			if err := text(m.key); err != nil {
				return err
			}
			b.WriteByte(':')
			if err := m.value.writeJSON(b); err != nil {
				return err
			}
		}
		b.WriteByte('}')
	case listNode:
		b.WriteByte('[')
		for i, item := range n.items {
			if i > 0 {
				b.WriteByte(',')
			}
			if err := item.writeJSON(b); err != nil {
				return err
			}
		}
		b.WriteByte(']')
	default:
		number := n.row != nil && (n.row.numeric() || n.row.Kind == KindValue) && n.text != "" && json.Valid([]byte(n.text))
		switch {
		case n.row != nil && n.row.Kind == KindFlag:
			fmt.Fprint(b, n.flag)
		case number:
			b.WriteString(n.text)
		default:
			return text(n.text)
		}
	}
	return nil
}

const (
	maxNodes = 50_000 // values in a study, aliases followed; the largest sensible study has some thousands
	maxDepth = 24     // of nesting; the file format needs 7
)

// nodeReader turns parsed YAML into nodes. It refuses what a study must not hold
// (merge keys, tags, keys that are not text, keys given twice) and stops at
// maxNodes: aliases inside aliases can multiply without bound.
type nodeReader struct {
	place func(line, column int) place
	fault func(at place, field, value string, p problem)
	count int
	full  bool
}

// read returns the node for y, nil where it cannot be used; the reason is then on the
// list of mistakes. The schema, nil where y is out of place, only tells which items are
// known by their names.
func (r *nodeReader) read(y *yaml.Node, s *schema, path string, depth, alias int) *node {
	if r.full {
		return nil
	}
	at := r.place(y.Line, y.Column)
	r.count++
	if r.count > maxNodes || depth > maxDepth {
		r.full = true
		p := problem{what: fmt.Sprintf("makes the study larger than %d values", maxNodes), hint: "shorten lists, or write aliases out"}
		if depth > maxDepth {
			p = problem{what: fmt.Sprintf("is nested deeper than %d levels", maxDepth), hint: "an alias may hold itself; write it out"}
		}
		r.fault(at, path, "", p)
		return nil
	}
	if y.Style&yaml.TaggedStyle != 0 {
		r.fault(at, path, quoteLong(y.Tag), problem{what: "is a tag, which studies do not use", hint: "remove it"})
		return nil
	}
	n := &node{at: at, alias: alias}
	switch y.Kind {
	case yaml.AliasNode:
		if y.Alias == nil {
			r.fault(at, path, "", problem{what: "is an alias without its anchor"})
			return nil
		}
		return r.read(y.Alias, s, path, depth+1, y.Line)
	case yaml.ScalarNode:
		n.text = strings.TrimSpace(y.Value)
		n.null = y.Tag == "!!null" || n.text == ""
	case yaml.SequenceNode:
		n.kind = listNode
		for i, item := range y.Content {
			if c := r.read(item, s.items(), fmt.Sprintf("%s[%s]", path, labelBefore(item, s, i)), depth+1, alias); c != nil {
				n.items = append(n.items, c)
			}
		}
	case yaml.MappingNode:
		n.kind = mapNode
		r.readMembers(n, y, s, path, depth, alias)
	default:
		r.fault(at, path, "", problem{what: "cannot be read"})
		return nil
	}
	return n
}

func (r *nodeReader) readMembers(n *node, y *yaml.Node, s *schema, path string, depth, alias int) {
	lines := make(map[string]int, len(y.Content)/2)
	for i := 0; i+1 < len(y.Content) && !r.full; i += 2 {
		key, at := y.Content[i], r.place(y.Content[i].Line, y.Content[i].Column)
		if key.Kind == yaml.ScalarNode && key.Tag == "!!merge" {
			r.fault(at, path, "<<", problem{what: "is a merge key, which studies do not use",
				hint: "write the keys out; what all designs share belongs under fate and supply"})
			continue
		}
		if key.Kind != yaml.ScalarNode || key.Style&yaml.TaggedStyle != 0 || strings.TrimSpace(key.Value) == "" {
			r.fault(at, path, "", problem{what: "has a key that is not a word", hint: `write "key: value"`})
			continue
		}
		name := strings.TrimSpace(key.Value)
		if first, twice := lines[name]; twice {
			r.fault(at, joinPath(path, quoteLong(name)), "", problem{what: fmt.Sprintf("is given twice, first in line %d", first), hint: "keep one of the two"})
			continue
		}
		lines[name] = key.Line
		if v := r.read(y.Content[i+1], s.child(name), joinPath(path, quoteLong(name)), depth+1, alias); v != nil {
			n.members = append(n.members, member{name, at, v})
		}
	}
}

// labelBefore is [itemLabel] for an item that has not been read yet.
func labelBefore(item *yaml.Node, s *schema, i int) string {
	if item.Kind == yaml.AliasNode && item.Alias != nil {
		item = item.Alias
	}
	if s.named() && item.Kind == yaml.MappingNode {
		for k := 0; k+1 < len(item.Content); k += 2 {
			key, value := item.Content[k], item.Content[k+1]
			if name := strings.TrimSpace(value.Value); key.Value == "name" && value.Kind == yaml.ScalarNode && nameFault(name) == "" {
				return name
			}
		}
	}
	return strconv.Itoa(i)
}

// joinPath appends a key to a path.
func joinPath(path, key string) string {
	if path == "" {
		return key
	}
	return path + "." + key
}
