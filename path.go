package hazewright

import (
	"fmt"
	"strconv"
	"strings"
	"unicode/utf8"
)

// segment is one step of a path: a key, or an item of a list by index or name.
type segment struct {
	text string
	item bool
}

// splitPath reads "designs[Iron rods].particles[0].diameter". It reports false for
// text that is not a path.
func splitPath(path string) ([]segment, bool) {
	var segs []segment
	rest := strings.TrimSpace(path)
	for wantKey := true; ; {
		if wantKey {
			end := 0
			for end < len(rest) && (isLetter(rest[end]) || isDigit(rest[end]) || rest[end] == '_' || rest[end] == '-') {
				end++
			}
			if end == 0 {
				return nil, false
			}
			segs = append(segs, segment{text: rest[:end]})
			rest = rest[end:]
		}
		switch {
		case rest == "":
			return segs, true
		case rest[0] == '.':
			rest, wantKey = rest[1:], true
		case rest[0] == '[':
			end := strings.IndexByte(rest, ']')
			name := ""
			if end > 0 {
				name = strings.Trim(strings.TrimSpace(rest[1:end]), `"'`)
			}
			if name == "" {
				return nil, false
			}
			segs = append(segs, segment{text: name, item: true})
			rest, wantKey = rest[end+1:], false
		default:
			return nil, false
		}
	}
}

// pick returns the item of a list with the name or index, and how paths call it.
func (n *node) pick(s *schema, want string) (item *node, label string) {
	if n == nil {
		return nil, want
	}
	for i, it := range n.items {
		if label := itemLabel(n, s, i); label == want {
			return it, label
		}
	}
	if i, err := strconv.Atoi(want); err == nil && i >= 0 && i < len(n.items) {
		return n.items[i], itemLabel(n, s, i)
	}
	return nil, want
}

// itemLabel returns what stands in brackets for an item: its name where the list's
// items have names, else its index.
func itemLabel(n *node, s *schema, i int) string {
	if s.named() && n.items[i] != nil {
		if name := n.items[i].child("name"); name != nil && name.kind == scalarNode && nameFault(name.text) == "" {
			return name.text
		}
	}
	return strconv.Itoa(i)
}

// nameFault says why text cannot name a design, sink or sweep; "" if it can.
func nameFault(name string) string {
	const longest = 80
	switch {
	case name == "":
		return "is empty"
	case utf8.RuneCountInString(name) > longest:
		return fmt.Sprintf("is longer than %d characters", longest)
	case strings.ContainsFunc(name, unseen):
		return unseenFault
	case strings.ContainsAny(name, `[]"'`):
		return "holds a bracket or a quotation mark, which paths cannot name"
	}
	if _, err := strconv.Atoi(name); err == nil {
		return "is a number, which paths would take for an index"
	}
	return ""
}

// itemNames lists the items of a list for a message.
func itemNames(n *node, s *schema) string {
	const most = 8
	if n == nil || len(n.items) == 0 {
		return "the study has none"
	}
	if !s.named() {
		return fmt.Sprintf("items are numbered from 0 to %d", len(n.items)-1)
	}
	var names []string
	for i := range n.items {
		if i == most {
			names = append(names, "...")
			break
		}
		names = append(names, itemLabel(n, s, i))
	}
	return "the study has " + listWords(names, "and")
}

// resolve walks a path through the merged study. It returns the path with every item by
// its name, the schema, and the node: nil where the key is known but has no value in
// this study. A design's fate and supply fall back on the study's.
func resolve(root *node, path string) (canonical string, n *node, s *schema, p *problem) {
	segs, ok := splitPath(path)
	if !ok {
		return "", nil, nil, &problem{what: "is not a path", hint: `write paths like "fate.burial_time" or "designs[Name].particles[0].diameter"`}
	}
	n, s = root, studySchema()
	var shared *node // the study's own value below a design's fate or supply
	for _, seg := range segs {
		if seg.item {
			list := n
			if list == nil {
				list = shared
			}
			if s.item == nil {
				return "", nil, nil, &problem{what: fmt.Sprintf("does not exist: %s is not a list", canonical)}
			}
			item, label := list.pick(s, seg.text)
			if item == nil {
				return "", nil, nil, &problem{what: fmt.Sprintf("does not exist: there is no %s[%s]", canonical, quoteLong(seg.text)), hint: itemNames(list, s)}
			}
			canonical = fmt.Sprintf("%s[%s]", canonical, label)
			n, s, shared = item, s.item, nil
			continue
		}
		next := s.child(seg.text)
		if next == nil {
			return "", nil, nil, &problem{what: fmt.Sprintf("does not exist: unknown key %q", seg.text), hint: unknownKey(s, seg.text).hint}
		}
		canonical = joinPath(canonical, seg.text)
		n, s, shared = n.child(seg.text), next, shared.child(seg.text)
		if next.shared {
			shared = root.child(seg.text)
		}
	}
	if n == nil {
		n = shared
	}
	return canonical, n, s, nil
}
