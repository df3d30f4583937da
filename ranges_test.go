package hazewright

import (
	"context"
	"errors"
	"strings"
	"testing"
)

// rangeCase says how an input is put to an end of its range in the starter study: the
// sets, in which VALUE stands for the end, and why it takes more than the value itself.
type rangeCase struct {
	reason string
	sets   []string
}

const (
	tabulated  = "designs[0].particles[0].material={table: nk.csv, density: VALUE, extend: on}"
	bareSphere = "designs[0].particles[0]={shape: sphere, radius: VALUE, material: iron, oxide: 0 nm}"
)

// rangeCases are the inputs whose ends do not go with the rest of the starter study, or
// that it has no place for; "low" and "high" stand before the path where only one end is
// meant.
var rangeCases = map[string]rangeCase{
	"low world.bond_albedo": {"natural dust alone sends back more", []string{"world.bond_albedo=VALUE", "world.dust_optical_depth=0"}},

	"goal.warming":       {"a goal is one of three", []string{"goal={warming: VALUE}"}},
	"goal.burden":        {"a goal is one of three", []string{"goal={burden: VALUE}"}},
	"goal.optical_depth": {"a goal is one of three", []string{"goal={optical_depth: VALUE, at: thermal}"}},

	"designs[].particles[].radius":           {"the starter has a rod; the thinnest sphere has no room for an oxide", []string{bareSphere}},
	"low designs[].particles[].wall":         {"only shells have a wall", []string{"designs[0].particles[0]={shape: shell, radius: 1 um, wall: VALUE, material: iron, oxide: 0 nm}"}},
	"high designs[].particles[].wall":        {"only shells have a wall", []string{"designs[0].particles[0]={shape: shell, radius: 101 um, wall: VALUE, material: iron}"}},
	"low designs[].particles[].length":       {"a rod is ten times as long as thick", []string{"designs[0].particles[0]={shape: rod, length: VALUE, diameter: 10 nm, material: iron, oxide: 0 nm}"}},
	"low designs[].particles[].diameter":     {"the thinnest rod has no room for an oxide", []string{"designs[0].particles[0].diameter=VALUE", "designs[0].particles[0].oxide=0 nm"}},
	"high designs[].particles[].diameter":    {"a rod is ten times as long as thick", []string{"designs[0].particles[0]={shape: rod, length: 100 um, diameter: VALUE, material: iron}"}},
	"high designs[].particles[].oxide":       {"half the thickness must be left", []string{"designs[0].particles[0]={shape: rod, length: 80 um, diameter: 5 um, material: iron, oxide: VALUE}"}},
	"designs[].particles[].material.density": {"of a table", []string{tabulated}},
	"low designs[].particles[].share": {"the shares sum to 100 %", []string{
		"designs[0].particles=[{shape: sphere, radius: 2 um, material: iron, share: VALUE}, {shape: sphere, radius: 1 um, material: iron, share: 99.999 %}]"}},

	"fate.eddy_diffusivity[].height": {"an item of a list", []string{"fate.eddy_diffusivity=[{height: VALUE, value: 300 m2/s}]"}},
	"fate.eddy_diffusivity[].value":  {"an item of a list", []string{"fate.eddy_diffusivity=[{height: 10 km, value: VALUE}]"}},
	"low fate.profile.layer[]":       {"an item of a list", []string{"fate.profile.layer=[VALUE, 2 km]"}},
	"high fate.profile.layer[]":      {"an item of a list", []string{"fate.profile.layer=[70 km, VALUE]"}},
	"fate.sinks[].rate":              {"an item of a list", []string{"fate.sinks=[{name: caps, rate: VALUE}]"}},
}

// Whatever the table of inputs allows, one input at a time, the stages accept: an
// assessment of the starter study with the input at either end of its range may find the
// goal out of reach but is no error, and every figure is finite or says why not.
func TestInputTable_EndsOfTheRangesAreAccepted(t *testing.T) {
	engine := NewEngine(Options{})
	used := map[string]bool{}
	walked := 0
	for _, in := range InputTable() {
		section, _, _ := strings.Cut(in.Path, ".")
		switch strings.TrimSuffix(section, "[]") {
		case "world", "goal", "designs", "fate", "supply", "model":
		default:
			continue
		}
		if !in.numeric() || in.Path == "world.gas[].share" { // the shares of gases sum to 100 %, no end stands alone
			continue
		}
		for end, value := range map[string]string{"low": in.Low, "high": in.High} {
			sets := []string{strings.Replace(strings.Replace(in.Path, "designs[]", "designs[0]", 1), "particles[]", "particles[0]", 1) + "=VALUE"}
			for _, key := range []string{in.Path, end + " " + in.Path} {
				if c, ok := rangeCases[key]; ok {
					sets, used[key] = c.sets, true
				}
			}
			all := append([]string(nil), sets...)
			for i := range all {
				all[i] = strings.ReplaceAll(all[i], "VALUE", value)
			}
			s, err := Load(Source{Name: "study.yaml", Data: []byte(Starter()), Open: shortTable}, all)
			if err != nil {
				t.Errorf("%q: %v", all, err)
				continue
			}
			r, err := engine.Assess(context.Background(), s)
			if err != nil {
				t.Errorf("%q: %v", all, err)
				continue
			}
			if d := r.Designs[0]; !d.Reached && d.Cause == "" {
				t.Errorf("%q: not reached, and no cause", all)
			}
			walked++
		}
	}
	if walked < 100 {
		t.Errorf("only %d ends were walked", walked)
	}
	for key, c := range rangeCases {
		if !used[key] || c.reason == "" {
			t.Errorf("the exception %q is of no use, or has no reason", key)
		}
	}
}

// Both ends of what spheres share with rods.
func TestInputTable_EndsForSpheres(t *testing.T) {
	engine := NewEngine(Options{})
	for _, set := range []string{"oxide: 0 nm, spread: 1", "oxide: 0 nm, spread: 2.5", "oxide: 1 um"} {
		s, err := Load(Source{Name: "study.yaml", Data: []byte(Starter())}, []string{"designs[0].particles[0]={shape: sphere, radius: 2500 nm, material: iron, " + set + "}"})
		if err == nil {
			_, err = engine.Assess(context.Background(), s)
		}
		if err != nil {
			t.Errorf("%s: %v", set, err)
		}
	}
}

func shortTable(name string) ([]byte, error) {
	if name != "nk.csv" {
		return nil, errors.New("no such table")
	}
	return []byte("wavelength_um,n,k\n0.3,1.5,0.1\n50,2,0.5\n"), nil
}
