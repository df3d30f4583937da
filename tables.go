package hazewright

import (
	"bytes"
	"crypto/sha256"
	"encoding/hex"
	"errors"
	"fmt"
	"io/fs"
	"path/filepath"
	"regexp"
	"strconv"
	"strings"

	"go.yaml.in/yaml/v3"

	"hazewright/optics/greenhouse"
	"hazewright/optics/material"
)

// opticalTable is a table of refractive index that a study names, read once.
type opticalTable struct {
	rows [][3]float64 // wavelength [m], n, k; none if a mistake was found
}

var (
	tableLine  = regexp.MustCompile(`^line (\d+): `)
	longNumber = regexp.MustCompile(`\d+\.\d{7,}`) // carries the rounding of the change to SI and back
)

// readTable returns the rows of the table that node n names, reading each file once.
func (l *loader) readTable(n *node, field string) [][3]float64 {
	name := n.text
	if t := l.tables[name]; t != nil {
		return t.rows
	}
	t := &opticalTable{}
	l.tables[name] = t
	if !filepath.IsLocal(filepath.FromSlash(name)) || strings.Contains(name, `\`) {
		l.fault(n, field, quoteLong(name), problem{what: "leads out of the study's folder", hint: "put the table beside the study and name it relative to it"})
		return nil
	}
	if l.file.Open == nil {
		l.fault(n, field, quoteLong(name), problem{what: "cannot be read: this study does not come from a folder", hint: "save the study as a file beside its tables"})
		return nil
	}
	data, err := l.file.Open(name)
	if err == nil && len(data) > maxFile {
		err = errTooLarge
	}
	if err != nil {
		l.fault(n, field, quoteLong(name), unreadable(err))
		return nil
	}
	sum := sha256.Sum256(data)
	l.study.Tables = append(l.study.Tables, TableFile{File: name, SHA256: hex.EncodeToString(sum[:])})

	rows, firstLine, err := parseTable(name, data)
	if err != nil {
		l.tableFault(n, field, name, firstLine, err)
		return nil
	}
	for _, r := range rows {
		t.rows = append(t.rows, [3]float64{r.Wavelength, r.N, r.K})
	}
	return t.rows
}

// unreadable says why a table could not be read.
func unreadable(err error) problem {
	p := problem{hint: "name a file in the study's folder"}
	var inner *fs.PathError
	switch {
	case errors.Is(err, fs.ErrNotExist):
		p.what = "does not exist: no such file beside the study"
		return p
	case errors.Is(err, fs.ErrPermission):
		p.what = "cannot be read: no permission"
		return p
	case errors.As(err, &inner):
		err = inner.Err
	}
	p.what = "cannot be read: " + err.Error()
	return p
}

// neededFrom and neededTo bound the wavelengths [m] at which a material's index must be
// known: the bands of sunlight and of the thermal, which hold the means and the spectrum
// too. The radio bands are left without a figure where it is not.
func neededFrom() float64 { return greenhouse.SolarEdges()[0] }
func neededTo() float64 {
	edges := greenhouse.ThermalEdges()
	return edges[len(edges)-1]
}

// checkCoverage refuses a table that is too short, unless its ends are to be held.
func (l *loader) checkCoverage(n *node, m MaterialRef, path string) {
	if m.Extend || len(m.Rows) == 0 {
		return
	}
	const slack = 1e-6 // relative; tables round
	from, to := m.Rows[0][0], m.Rows[len(m.Rows)-1][0]
	if from <= neededFrom()*(1+slack) && to >= neededTo()*(1-slack) {
		return
	}
	um := func(si float64) string { return FormatSI(si, "um", 6) }
	l.fault(n, path, quoteLong(m.Table), problem{
		what:    fmt.Sprintf("covers %s to %s, not all of", um(from), um(to)),
		allowed: fmt.Sprintf("%s to %s", um(neededFrom()), um(neededTo())),
		hint:    "add `extend: true` to hold the end values outside the table, with a warning, or give a longer table",
	})
}

// tableFault notes a mistake inside a table at the table's own line.
func (l *loader) tableFault(n *node, field, name string, firstLine int, err error) {
	text := err.Error()
	line := 0
	if m := tableLine.FindStringSubmatch(text); m != nil {
		line, _ = strconv.Atoi(m[1])
		line += firstLine
		text = text[len(m[0]):]
	}
	text = longNumber.ReplaceAllStringFunc(text, func(number string) string {
		v, _ := strconv.ParseFloat(number, 64) // the pattern matches numbers only
		return strconv.FormatFloat(v, 'g', 6, 64)
	})
	l.fault(n, field, "", problem{what: text, hint: "the table is named at " + l.position(n.at)})
	m := &l.mistakes[len(l.mistakes)-1]
	m.File, m.Line, m.Column = name, line, 0
}

// parseTable reads a table in either layout. Line numbers of errors count from
// firstLine.
func parseTable(name string, data []byte) (rows []material.Row, firstLine int, err error) {
	if ext := strings.ToLower(filepath.Ext(name)); ext != ".yaml" && ext != ".yml" {
		rows, err = material.ParseCSV(bytes.NewReader(data))
		return rows, 0, err
	}
	// The open refractive-index database layout: DATA is a list of blocks with a type.
	var file struct {
		Data []struct {
			Type string    `yaml:"type"`
			Rows yaml.Node `yaml:"data"`
		} `yaml:"DATA"`
	}
	if err := yaml.Unmarshal(data, &file); err != nil {
		return nil, 0, fmt.Errorf("not valid YAML: %s", strings.TrimPrefix(err.Error(), "yaml: "))
	}
	for _, block := range file.Data {
		if strings.TrimSpace(block.Type) == "tabulated nk" {
			rows, err = material.ParsePairs(block.Rows.Value)
			return rows, block.Rows.Line, err
		}
	}
	return nil, 0, fmt.Errorf("has no DATA block of type \"tabulated nk\"")
}
