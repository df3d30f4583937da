package hazewright

import (
	"strings"
	"sync"
)

// schema is the table of inputs as a tree: which keys a map of the study may have and
// what stands below them.
type schema struct {
	name     string    // key
	row      *Input    // nil for the root and for items that are maps
	children []*schema // keys of a map, in table order
	item     *schema   // of a list
	shared   bool      // a design's fate or supply: children are those of the study's
}

// studySchema returns the tree for the whole study.
var studySchema = sync.OnceValue(func() *schema {
	root := &schema{}
	table := InputTable()
	for i := range table {
		at := root
		for _, key := range strings.Split(table[i].Path, ".") {
			name, list := strings.CutSuffix(key, "[]")
			child := at.child(name)
			if child == nil {
				child = &schema{name: name}
				at.children = append(at.children, child)
			}
			if list {
				if child.item == nil {
					child.item = &schema{name: name}
				}
				child = child.item
			}
			at = child
		}
		at.row = &table[i]
	}
	for _, key := range []string{"fate", "supply"} {
		link := root.child("designs").item.child(key)
		link.children, link.shared = root.child(key).children, true
	}
	return root
})

// child returns the schema of a key, or nil; like items and named it may be asked of nil.
func (s *schema) child(name string) *schema {
	if s == nil {
		return nil
	}
	for _, c := range s.children {
		if c.name == name {
			return c
		}
	}
	return nil
}

// keys returns the known keys of a map.
func (s *schema) keys() []string {
	names := make([]string, len(s.children))
	for i, c := range s.children {
		names[i] = c.name
	}
	return names
}

// named reports whether the items of a list are known by their name.
func (s *schema) named() bool {
	if s == nil || s.item == nil {
		return false
	}
	c := s.item.child("name")
	return c != nil && c.row.Kind == KindName
}

// items returns the schema of a list's items, or nil.
func (s *schema) items() *schema {
	if s == nil {
		return nil
	}
	return s.item
}

// scalar reports whether a single value other than the row's choices may stand here.
func (s *schema) scalar() bool {
	return s.row != nil && s.row.Kind != KindList && s.row.Kind != KindMap
}

// whereKnown returns the sections that know a key, for hints: "fate", "supply.plant".
func (s *schema) whereKnown(key, prefix string) []string {
	var found []string
	for _, c := range s.children {
		if c.shared {
			continue
		}
		path := strings.TrimPrefix(prefix+"."+c.name, ".")
		if c.name == key && prefix != "" {
			found = append(found, prefix)
		}
		found = append(found, c.whereKnown(key, path)...)
		if c.item != nil {
			found = append(found, c.item.whereKnown(key, path+"[]")...)
		}
	}
	return found
}
