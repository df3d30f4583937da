package hazewright

import (
	"bytes"
	"crypto/sha256"
	"encoding/hex"
	"errors"
	"fmt"
	"io"
	"os"
	"path/filepath"
	"regexp"
	"strconv"
	"strings"
	"unicode/utf8"

	"go.yaml.in/yaml/v3"
)

// Source is a study file that has been read.
type Source struct {
	Name string // for messages
	Data []byte
	Open func(name string) ([]byte, error) // reads a table beside the study; nil = no tables allowed
}

// maxFile bounds a study file and each of its tables [bytes].
const maxFile = 4 << 20

// FileSource reads a study file. The Open of the source reads files of the study's
// folder and below only: never outside of it, not by "..", an absolute path or a link.
// Files above 4 MiB are refused.
func FileSource(path string) (Source, error) {
	f, err := os.Open(path)
	if err != nil {
		return Source{}, err
	}
	data, err := readLimited(f)
	if err != nil {
		return Source{}, fmt.Errorf("reading %s: %w", path, err)
	}
	folder := filepath.Dir(path)
	open := func(name string) ([]byte, error) {
		root, err := os.OpenRoot(folder)
		if err != nil {
			return nil, err
		}
		defer root.Close()
		if info, err := root.Stat(filepath.FromSlash(name)); err == nil && !info.Mode().IsRegular() {
			return nil, errors.New("is not a regular file")
		}
		f, err := root.Open(filepath.FromSlash(name))
		if err != nil {
			return nil, err
		}
		return readLimited(f)
	}
	return Source{Name: path, Data: data, Open: open}, nil
}

// readLimited reads a file of at most maxFile bytes and closes it.
func readLimited(f *os.File) ([]byte, error) {
	defer f.Close()
	data, err := io.ReadAll(io.LimitReader(f, maxFile+1))
	if err == nil && len(data) > maxFile {
		err = errTooLarge
	}
	return data, err
}

var errTooLarge = fmt.Errorf("is larger than %d MiB", maxFile>>20)

// Load reads a study. Three layers make it up, each over the one before: the defaults
// of the input table, the file, and sets, which are texts PATH=VALUE as after --set:
// "fate.burial_time=10 yr", "designs[Iron rods].particles[0].diameter=90 nm". Maps are
// merged key by key, lists are replaced.
//
// Whatever is wrong comes back in one *StudyError: all mistakes, in file order, those
// of the sets last. See [InputTable] for what a study may hold.
func Load(file Source, sets []string) (*Study, error) {
	sum := sha256.Sum256(file.Data)
	l := &loader{
		file:   file,
		study:  &Study{File: file.Name, SHA256: hex.EncodeToString(sum[:])},
		tables: map[string]*opticalTable{},
	}
	root := l.parseFile()
	if root != nil {
		expandWorld(root)
		for i, set := range sets {
			l.applySet(root, i+1, set)
		}
		expandWorld(root)
		fillDefaults(root, studySchema())
		l.check(root, studySchema(), "")
		l.decode(root)
	}
	if len(l.mistakes) > 0 {
		sortMistakes(l.mistakes)
		return nil, &StudyError{Mistakes: l.mistakes}
	}
	l.study.resolved = inTableOrder(root, studySchema())
	return l.study, nil
}

// loader carries what one Load needs.
type loader struct {
	file     Source
	study    *Study
	mistakes []Mistake
	tables   map[string]*opticalTable // by file name
}

// fault notes a mistake at a node.
func (l *loader) fault(n *node, field, value string, p problem) {
	l.faultAt(n.at, n.alias, field, value, p)
}

// faultAt notes a mistake at a place; alias is the line of the alias that led there.
func (l *loader) faultAt(at place, alias int, field, value string, p problem) {
	m := Mistake{File: l.file.Name, Line: at.line, Column: at.column, Field: field, Value: value,
		Problem: p.what, Allowed: p.allowed, Hint: p.hint, order: [3]int{int(at.layer), at.line, at.column}}
	for _, text := range []*string{&m.Field, &m.Value, &m.Problem, &m.Allowed, &m.Hint} {
		*text = visible(*text)
	}
	if at.layer == layerSet {
		m.File, m.Line, m.Column = at.String(), 0, 0
	}
	if alias > 0 {
		m.Hint = strings.TrimPrefix(fmt.Sprintf("%s; used by the alias in line %d", m.Hint, alias), "; ")
	}
	l.mistakes = append(l.mistakes, m)
}

// parseFile returns the file as nodes, nil where it cannot be used at all.
func (l *loader) parseFile() *node {
	top := place{layer: layerFile, line: 1, column: 1}
	data := l.file.Data
	switch {
	case len(data) > maxFile:
		l.faultAt(top, 0, "", "the file", problem{what: errTooLarge.Error(), hint: "shorten it"})
		return nil
	case !utf8.Valid(data):
		at := top
		at.line, at.column = badByte(data)
		l.faultAt(at, 0, "", "the file", problem{what: "is not UTF-8 text", hint: "save it as UTF-8"})
		return nil
	}
	decoder := yaml.NewDecoder(bytes.NewReader(data))
	var doc yaml.Node
	switch err := decoder.Decode(&doc); {
	case errors.Is(err, io.EOF):
		l.faultAt(top, 0, "", "the file", problem{what: "is empty", hint: "`hazewright new DIR` writes a starter study"})
		return nil
	case err != nil:
		l.syntaxFault(top, "", err)
		return nil
	}
	var second yaml.Node
	switch err := decoder.Decode(&second); {
	case errors.Is(err, io.EOF):
	case err != nil:
		l.syntaxFault(top, "", err)
	default:
		at := top
		at.line, at.column = second.Line, second.Column
		l.faultAt(at, 0, "", "the file", problem{what: "holds a second document", hint: "a study is one document; remove what follows the line ---"})
	}
	inFile := func(line, column int) place { return place{layer: layerFile, line: line, column: column} }
	root := l.read(&doc, studySchema(), "", inFile)
	if root == nil && len(l.mistakes) > 0 {
		return nil
	}
	if root == nil || root.kind != mapNode {
		l.faultAt(top, 0, "", "the file", problem{what: "does not hold a map", hint: `start with "study: TITLE"`})
		return nil
	}
	return root
}

// read turns a YAML document, the value at a path of the schema, into nodes.
func (l *loader) read(doc *yaml.Node, s *schema, path string, where func(line, column int) place) *node {
	if doc.Kind != yaml.DocumentNode || len(doc.Content) == 0 {
		return nil
	}
	r := nodeReader{place: where, fault: func(at place, field, value string, p problem) { l.faultAt(at, 0, field, value, p) }}
	return r.read(doc.Content[0], s, path, 0, 0)
}

// badByte returns line and column of the first byte that is not UTF-8.
func badByte(data []byte) (line, column int) {
	line, column = 1, 1
	for len(data) > 0 {
		r, size := utf8.DecodeRune(data)
		if r == utf8.RuneError && size == 1 {
			break
		}
		column++
		if r == '\n' {
			line, column = line+1, 1
		}
		data = data[size:]
	}
	return line, column
}

var (
	yamlLine      = regexp.MustCompile(`^line (\d+): `)
	unknownAnchor = regexp.MustCompile(`^unknown anchor '(.*)' referenced`)
)

// syntaxFault notes that text is not YAML. The parser knows the line only, and for
// brackets left open not exactly.
func (l *loader) syntaxFault(at place, path string, err error) {
	text := strings.TrimPrefix(err.Error(), "yaml: ")
	if m := yamlLine.FindStringSubmatch(text); m != nil && at.layer == layerFile {
		at.line, _ = strconv.Atoi(m[1])
		at.column = 0
	}
	text = yamlLine.ReplaceAllString(text, "")
	if m := unknownAnchor.FindStringSubmatch(text); m != nil && at.layer == layerFile {
		before, _, _ := bytes.Cut(l.file.Data, []byte("*"+m[1])) // the parser does not say where
		at.line = 1 + bytes.Count(before, []byte("\n"))
		at.column = 0
	}
	hint := "check brackets, quotation marks and indentation about this line"
	switch {
	case strings.Contains(text, "cannot start any token"), strings.Contains(text, "tab character"):
		hint = "indent with spaces, not tabs, and put text that starts with a sign (% @ `) in quotation marks"
	case strings.Contains(text, "mapping values are not allowed"):
		hint = `put text that holds ": " in quotation marks`
	}
	value := "the file"
	if path != "" {
		value = ""
	}
	l.faultAt(at, 0, path, value, problem{what: "is not valid YAML: " + text, hint: hint})
}

// applySet puts the value of one --set into the file's tree.
func (l *loader) applySet(root *node, number int, set string) {
	at := place{layer: layerSet, line: number}
	path, value, found := cutSet(set)
	if !found {
		l.faultAt(at, 0, "", quoteLong(set), problem{what: "has no '='", hint: "write --set PATH=VALUE, such as --set 'fate.burial_time=10 yr'"})
		return
	}
	segs, ok := splitPath(path)
	if !ok {
		l.faultAt(at, 0, "", quoteLong(path), problem{what: "is not a path", hint: `write paths like "fate.burial_time" or "designs[Name].particles[0].diameter"`})
		return
	}
	v := l.setValue(at, segs, path, value)
	if v == nil {
		return
	}
	n, s, walked := root, studySchema(), ""
	for i, seg := range segs {
		last := i == len(segs)-1
		var next *node
		if seg.item {
			if s.item == nil {
				l.faultAt(at, 0, path, "", problem{what: walked + " is not a list"})
				return
			}
			var label string
			if next, label = n.pick(s, seg.text); next == nil {
				l.faultAt(at, 0, path, "", problem{what: fmt.Sprintf("there is no %s[%s]", walked, quoteLong(seg.text)), hint: itemNames(n, s)})
				return
			}
			s, walked = s.item, fmt.Sprintf("%s[%s]", walked, label)
		} else {
			child := s.child(seg.text)
			if child == nil {
				l.faultAt(at, 0, joinPath(walked, seg.text), "", unknownKey(s, seg.text))
				return
			}
			if n.kind != mapNode { // a map replaces what stood there
				*n = node{kind: mapNode, at: at}
			}
			if next = n.child(seg.text); next == nil {
				next = &node{kind: mapNode, at: at}
				n.put(seg.text, at, next)
			}
			s, walked = child, joinPath(walked, seg.text)
		}
		if last {
			*next = *v
		}
		n = next
	}
}

// setValue reads the VALUE of a --set, which may be anything in YAML's flow style.
func (l *loader) setValue(at place, segs []segment, path, value string) *node {
	if strings.TrimSpace(value) == "" {
		l.faultAt(at, 0, path, "", problem{what: "is empty", hint: "write a value after ="})
		return nil
	}
	if len(value) > maxFile || !utf8.ValidString(value) {
		l.faultAt(at, 0, path, "", problem{what: "is not usable text", hint: "write a short value in UTF-8"})
		return nil
	}
	var doc yaml.Node
	if err := yaml.Unmarshal([]byte(value), &doc); err != nil {
		l.syntaxFault(at, path, err)
		return nil
	}
	s := studySchema()
	for _, seg := range segs {
		if seg.item {
			s = s.items()
		} else {
			s = s.child(seg.text)
		}
	}
	v := l.read(&doc, s, path, func(int, int) place { return at })
	if v == nil && doc.Kind == 0 {
		l.faultAt(at, 0, path, quoteLong(value), problem{what: "is empty", hint: "write a value after ="})
	}
	return v
}

// cutSet splits PATH=VALUE at the first '=' outside brackets.
func cutSet(set string) (path, value string, ok bool) {
	depth := 0
	for i, c := range set {
		switch c {
		case '[':
			depth++
		case ']':
			depth--
		case '=':
			if depth == 0 {
				return set[:i], set[i+1:], true
			}
		}
	}
	return set, "", false
}

// expandWorld turns `world: mars` into a map with that base.
func expandWorld(root *node) {
	w := root.child("world")
	if w == nil || w.kind != scalarNode || w.null {
		return
	}
	base := *w
	base.section = "world"
	*w = node{kind: mapNode, at: base.at, alias: base.alias, members: []member{{"base", base.at, &base}}}
}

// fillDefaults adds what the study leaves out and the table of inputs has a default for.
func fillDefaults(n *node, s *schema) {
	for _, c := range s.children {
		v := n.child(c.name)
		if v == nil && !c.shared && !(c.row != nil && c.row.Required) {
			if v = defaultNode(c); v == nil {
				continue
			}
			n.put(c.name, v.at, v)
		}
		switch {
		case v == nil || c.shared:
		case v.kind == mapNode:
			fillDefaults(v, c)
		case v.kind == listNode && c.item != nil:
			for _, item := range v.items {
				if item.kind == mapNode {
					fillDefaults(item, c.item)
				}
			}
		}
	}
}

// defaultNode returns the default of an input: nil where it has none, an empty map for
// a section whose inputs have defaults.
func defaultNode(s *schema) *node {
	if s.row == nil {
		return nil
	}
	switch {
	case s.name == "world" || s.row.Kind == KindMap && s.row.Default == "" && s.hasDefaults():
		return &node{kind: mapNode}
	case s.row.Default == "":
		return nil
	case s.row.Kind != KindList:
		return &node{text: s.row.Default}
	}
	var doc yaml.Node
	if err := yaml.Unmarshal([]byte(s.row.Default), &doc); err != nil || len(doc.Content) == 0 {
		return nil
	}
	r := nodeReader{place: func(int, int) place { return place{} }, fault: func(place, string, string, problem) {}}
	return r.read(doc.Content[0], s, s.name, 0, 0)
}

// hasDefaults reports whether any input of a section has a default.
func (s *schema) hasDefaults() bool {
	for _, c := range s.children {
		if c.row != nil && c.row.Default != "" || c.hasDefaults() {
			return true
		}
	}
	return false
}

// inTableOrder returns the tree with the keys of every map in the order of the table.
func inTableOrder(n *node, s *schema) *node {
	sorted := *n
	switch n.kind {
	case mapNode:
		sorted.members = nil
		for _, c := range s.children {
			for _, m := range n.members {
				if m.key == c.name {
					sorted.members = append(sorted.members, member{m.key, m.at, inTableOrder(m.value, c)})
				}
			}
		}
	case listNode:
		sorted.items = make([]*node, len(n.items))
		for i, item := range n.items {
			sorted.items[i] = inTableOrder(item, s.item)
		}
	}
	return &sorted
}
