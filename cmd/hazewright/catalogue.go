package main

import (
	"bytes"
	"encoding/json"
	"strconv"
	"strings"

	"github.com/spf13/cobra"

	"hazewright"
	"hazewright/optics/material"
	"hazewright/reports"
)

// topic is one thing that `catalogue` can list.
type topic struct {
	name, about string
	list        func() listing
}

// listing is a table: the heads name the columns of the text and, in lower_snake, the
// keys of the JSON.
type listing struct {
	heads []string
	rows  [][]string
	below int // how many of the last columns stand on lines of their own, below the others
}

var topics = []topic{
	{"inputs", "what a study file may hold: unit, default, allowed range, source", listInputs},
	{"figures", "the results, with unit and definition", listFigures},
	{"materials", "what particles can be made of, with density and range", listMaterials},
	{"worlds", "the planets", listWorlds},
	{"units", "the units of quantities", listUnits},
	{"gates", "the safety and planetary-protection conditions", listGates},
	{"words", "the words of studies and reports", listWords},
}

// catalogueCommand returns `catalogue [TOPIC]`.
func (a *app) catalogueCommand() *cobra.Command {
	var asJSON bool
	names := make([]string, len(topics))
	overview := [][]string{}
	for i, t := range topics {
		names[i] = t.name
		overview = append(overview, []string{"  " + t.name, t.about})
	}
	var text strings.Builder
	writeColumns(&text, overview)
	cmd := &cobra.Command{
		Use:   "catalogue [" + strings.Join(names, "|") + "]",
		Short: "List inputs, figures, materials, worlds, units, gates or words",
		Long:  "Lists what the program knows; without a topic, the topics:\n\n" + text.String(),
		Example: `  hazewright catalogue materials
  hazewright catalogue inputs --json`,
		Args:      atMostOne("one topic"),
		ValidArgs: names,
		RunE: func(_ *cobra.Command, args []string) error {
			if len(args) == 0 {
				overview := listing{heads: []string{"topic", "about"}}
				for _, t := range topics {
					overview.rows = append(overview.rows, []string{t.name, t.about})
				}
				return a.printListing(overview, asJSON)
			}
			for _, t := range topics {
				if t.name == args[0] {
					return a.printListing(t.list(), asJSON)
				}
			}
			e := badUsage("unknown topic %q", args[0])
			if near := hazewright.Nearest(args[0], names); near != "" {
				return e.withHint("did you mean %s?", near)
			}
			return e.withHint("topics are %s", strings.Join(names, ", "))
		},
	}
	cmd.Flags().BoolVar(&asJSON, "json", false, "print JSON")
	return cmd
}

// printListing writes a listing to standard output, as text or as a JSON list of
// objects whose keys are the heads.
func (a *app) printListing(l listing, asJSON bool) error {
	if asJSON {
		return a.printJSON(l.objects())
	}
	beside := len(l.heads) - l.below
	rows := [][]string{l.heads[:beside]}
	for _, row := range l.rows {
		rows = append(rows, row[:beside])
		for i, text := range row[beside:] {
			if i > 0 {
				text = l.heads[beside+i] + ": " + text
			}
			for _, line := range fold(text, columnsWidth-4) {
				rows = append(rows, []string{"    " + line})
			}
		}
	}
	return a.printColumns(rows)
}

// objects returns the rows as objects that keep the order of the heads.
func (l listing) objects() []object {
	keys := make([]string, len(l.heads))
	for i, head := range l.heads {
		keys[i] = strings.ToLower(strings.ReplaceAll(head, " ", "_"))
	}
	list := make([]object, len(l.rows))
	for i, row := range l.rows {
		list[i] = object{keys, row}
	}
	return list
}

// object is one row as JSON, with its keys in order.
type object struct{ keys, values []string }

// MarshalJSON writes the object with its keys in order.
func (o object) MarshalJSON() ([]byte, error) {
	var b bytes.Buffer
	b.WriteByte('{')
	for i, key := range o.keys {
		if i > 0 {
			b.WriteByte(',')
		}
		for j, text := range []string{key, o.values[i]} {
			if j > 0 {
				b.WriteByte(':')
			}
			quoted, err := json.Marshal(text)
			if err != nil {
				return nil, err
			}
			b.Write(quoted)
		}
	}
	b.WriteByte('}')
	return b.Bytes(), nil
}

func listInputs() listing {
	l := listing{heads: []string{"input", "default", "allowed", "meaning", "source"}, below: 2}
	for _, in := range hazewright.InputTable() {
		l.rows = append(l.rows, []string{in.Path, inputDefault(in), inputAllowed(in), in.Title, in.Source})
	}
	return l
}

// inputDefault says what an input is if the study does not give it.
func inputDefault(in hazewright.Input) string {
	switch {
	case in.Required:
		return "required"
	case in.Default != "":
		return in.Default
	case in.Unset != "":
		return in.Unset
	}
	return "none"
}

// inputAllowed says what values an input takes.
func inputAllowed(in hazewright.Input) string {
	switch {
	case len(in.Choices) > 0:
		words := strings.Join(in.Choices, ", ")
		if in.Kind == hazewright.KindList || in.Kind == hazewright.KindMap {
			words += ", " + in.Kind
		}
		return words
	case in.Low != "" && in.High != "":
		return in.Low + " to " + in.High
	case in.Low != "":
		return "from " + in.Low
	case in.High != "":
		return "up to " + in.High
	}
	return in.Kind
}

func listFigures() listing {
	l := listing{heads: []string{"figure", "unit", "shown in", "better", "title", "definition"}, below: 1}
	better := map[int]string{-1: "less", 0: "neither", +1: "more"}
	for _, f := range hazewright.Figures() {
		l.rows = append(l.rows, []string{f.ID, f.Unit, f.Shown, better[f.Better], f.Title, f.Definition})
	}
	return l
}

// listWorlds lists what each known world has of its own: the defaults of the inputs
// below "world".
func listWorlds() listing {
	l := listing{heads: []string{"world", "input", "value", "meaning", "source"}, below: 2}
	for _, base := range hazewright.InputTable() {
		if base.Path != "world.base" {
			continue
		}
		for _, world := range base.Choices {
			for _, in := range hazewright.InputTable() {
				if strings.HasPrefix(in.Path, "world.") && in.Path != "world.base" && in.Default != "" {
					l.rows = append(l.rows, []string{world, in.Path, in.Default, in.Title, in.Source})
				}
			}
		}
	}
	return l
}

func listUnits() listing {
	l := listing{heads: []string{"unit", "in SI", "dimension", "meaning"}}
	for _, u := range hazewright.Units() {
		l.rows = append(l.rows, []string{u.Symbol, strconv.FormatFloat(u.Factor, 'g', -1, 64), u.Dimension.String(), u.Meaning})
	}
	return l
}

func listGates() listing {
	l := listing{heads: []string{"gate", "title", "text", "next step", "source"}, below: 3}
	for _, g := range reports.GateTable() {
		l.rows = append(l.rows, []string{g.ID, g.Title, g.Text, g.NextStep, g.Source})
	}
	return l
}

func listMaterials() listing {
	l := listing{heads: []string{"material", "density", "measured over", "fit rms", "fit worst", "source", "notes"}, below: 2}
	for _, name := range material.Names() {
		m, err := material.ByName(name)
		if err != nil {
			continue // a name of the list is always known
		}
		l.rows = append(l.rows, []string{
			m.Name,
			hazewright.FormatSI(m.Density, "kg/m3", 4),
			hazewright.FormatSI(m.DataMin, "um", 3) + " to " + hazewright.FormatSI(m.DataMax, "um", 3),
			hazewright.FormatSI(m.FitRMS, "%", 2),
			hazewright.FormatSI(m.FitWorst, "%", 2),
			m.Source,
			m.FitNote,
		})
	}
	return l
}

func listWords() listing {
	l := listing{heads: []string{"word", "meaning"}}
	for _, w := range reports.Words() {
		l.rows = append(l.rows, []string{w.Word, w.Meaning})
	}
	return l
}
