package hazewright

import (
	"encoding/json"
	"errors"
	"fmt"
	"math"
	"os"
	"path/filepath"
	"reflect"
	"strconv"
	"strings"
	"testing"
	"time"

	"github.com/google/go-cmp/cmp"
	"go.yaml.in/yaml/v3"
	"pgregory.net/rapid"
)

// smallStudy is the least that loads; line 6 holds the particle.
const smallStudy = `study: Thaw
goal: {warming: 20 K}
designs:
  - name: Iron rods
    particles:
      - {shape: rod, length: 8 um, diameter: 80 nm, material: iron}
`

// with returns smallStudy with one text replaced.
func with(old, replacement string) string {
	if !strings.Contains(smallStudy, old) {
		panic("smallStudy has no " + old)
	}
	return strings.Replace(smallStudy, old, replacement, 1)
}

func mustLoad(t testing.TB, text string, sets ...string) *Study {
	t.Helper()
	s, err := Load(Source{Name: "s.yaml", Data: []byte(text)}, sets)
	if err != nil {
		t.Fatalf("loading: %v\n%s", err, text)
	}
	return s
}

// mistakes returns the mistakes of a study, one line each.
func mistakes(t testing.TB, text string, sets ...string) []string {
	t.Helper()
	_, err := Load(Source{Name: "s.yaml", Data: []byte(text)}, sets)
	if err == nil {
		return nil
	}
	var e *StudyError
	if !errors.As(err, &e) || len(e.Mistakes) == 0 {
		t.Fatalf("got %T %v, want a StudyError with mistakes", err, err)
	}
	return strings.Split(e.Error(), "\n")
}

// Every mistake that loading knows, with its place. Each line of want is the beginning
// of a message; a part after "..." must follow somewhere in it.
func TestLoad_Mistakes(t *testing.T) {
	for _, c := range []struct {
		name, study string
		want        []string
	}{
		// Numbers and units.
		{"outside the range", with("8 um", "900 um"), []string{"s.yaml:6:30: designs[Iron rods].particles[0].length: 900 um is outside 0.1 um to 100 um; choose a length inside it"}},
		{"no unit", with("8 um", "8"), []string{"s.yaml:6:30: designs[Iron rods].particles[0].length: 8 has no unit where a length is due; ...nm, um, mm, cm, m, km"}},
		{"other dimension", with("8 um", "8 kg"), []string{"s.yaml:6:30: designs[Iron rods].particles[0].length: 8 kg is a mass where a length is due"}},
		{"unknown unit", with("8 um", "8 micron"), []string{`s.yaml:6:30: designs[Iron rods].particles[0].length: 8 micron has the unknown unit "micron"; use um`}},
		{"unit where none is due", smallStudy + "fate: {charge: 5 kg}\n", []string{"s.yaml:7:16: fate.charge: 5 kg is a mass where a plain number is due; write a plain number or %"}},
		{"per cent beyond 1", smallStudy + "fate: {sticking: 40}\n", []string{"s.yaml:7:18: fate.sticking: 40 is outside 0 % to 100 %; write 40 % if per cent is meant"}},
		{"share for a rate", smallStudy + "fate: {frost_burial: 3 %}\n", []string{"s.yaml:7:22: fate.frost_burial: 3 % is a plain number where a rate (one per time) is due; write it like 3 %/yr"}},
		{"nan", with("8 um", ".nan"), []string{"s.yaml:6:30: designs[Iron rods].particles[0].length: .nan is not a finite number"}},
		{"inf", with("8 um", "-.inf"), []string{"s.yaml:6:30: designs[Iron rods].particles[0].length: -.inf is not a finite number"}},
		{"octal", with("8 um", "010 um"), []string{"s.yaml:6:30: designs[Iron rods].particles[0].length: 010 um has a leading zero"}},
		{"octal number", smallStudy + "supply: {release: {points: 012}}\n", []string{"s.yaml:7:28: supply.release.points: 012 has a leading zero"}},
		{"hexadecimal", smallStudy + "fate: {charge: 0x10}\n", []string{"s.yaml:7:16: fate.charge: 0x10 looks hexadecimal"}},
		{"underscore", with("8 um", "8_000 nm"), []string{"s.yaml:6:30: designs[Iron rods].particles[0].length: 8_000 nm has a separator"}},
		{"comma", with("8 um", `"8,000 nm"`), []string{"s.yaml:6:30: designs[Iron rods].particles[0].length: 8,000 nm has a comma inside the number"}},
		{"time of day", smallStudy + "fate: {lift_time: 12:30}\n", []string{"s.yaml:7:19: fate.lift_time: 12:30 has a unit that cannot be read"}},
		{"date", smallStudy + "fate: {lift_time: 2026-01-02}\n", []string{"s.yaml:7:19: fate.lift_time: 2026-01-02 has a unit that cannot be read"}},
		{"not whole", smallStudy + "supply: {release: {points: 2.5}}\n", []string{"s.yaml:7:28: supply.release.points: 2.5 is not a whole number"}},
		{"whole with a unit", smallStudy + "supply: {release: {points: 12 m}}\n", []string{"s.yaml:7:28: supply.release.points: 12 m has a unit where a whole number is due"}},
		{"degC for a difference", with("20 K", "20 degC"), []string{"s.yaml:2:17: goal.warming: 20 degC is a temperature where a difference is due; write the difference in K"}},

		// Keys and shapes of the tree.
		{"unknown key", with("diameter:", "diametre:"), []string{
			`s.yaml:6:36: designs[Iron rods].particles[0].diametre: is an unknown key; did you mean "diameter"?`}},
		{"comma in a bare text", smallStudy + "benchmarks: [{design: Iron rods, as printed, figure: burden, value: 150 mg/m2, source: S}]\n", []string{"s.yaml:7:34: benchmarks[0].as printed: is an unknown key; a text with a comma in it needs quotation marks"}},
		{"key in capitals", with("study:", "Study:"), []string{`s.yaml:1:1: Study: is an unknown key; did you mean "study"?`}},
		{"look-alike beside the key", "STUDY: A\n" + smallStudy, []string{`s.yaml:1:1: STUDY: is an unknown key; did you mean "study"?`}},
		{"key of another section", smallStudy + "fate: {specific_mass: 3 t}\n", []string{"s.yaml:7:8: fate.specific_mass: is an unknown key; it belongs under supply.plant or supply.power"}},
		{"strange key", smallStudy + "goal_of_all: 3\n", []string{`s.yaml:7:1: goal_of_all: is an unknown key; did you mean "goal"?`}},
		{"duplicate key", smallStudy + "study: Again\n", []string{"s.yaml:7:1: study: is given twice, first in line 1"}},
		{"duplicate key inside", with("8 um", "8 um, length: 9 um"), []string{"s.yaml:6:36: designs[Iron rods].particles[0].length: is given twice, first in line 6"}},
		{"key that is no word", smallStudy + "? [a]\n: 3\n", []string{"s.yaml:7:3: has a key that is not a word"}},
		{"empty value", with("Thaw", ""), []string{"s.yaml:1:7: study: is empty; give the title of the study"}},
		{"null", with("Thaw", "~"), []string{"s.yaml:1:8: study: is empty"}},
		{"empty quotes", with("Thaw", `""`), []string{"s.yaml:1:8: study: is empty"}},
		{"empty section", smallStudy + "fate:\n", []string{"s.yaml:7:6: fate: is empty; give a map with the keys release_height"}},
		{"missing title", with("study: Thaw\n", ""), []string{"s.yaml:1:1: study: is missing; give the title of the study"}},
		{"missing goal", with("goal: {warming: 20 K}\n", ""), []string{"s.yaml:1:1: goal: is missing"}},
		{"missing designs", "study: T\ngoal: {warming: 3 K}\n", []string{"s.yaml:1:1: designs: is missing"}},
		{"no designs", "study: T\ngoal: {warming: 3 K}\ndesigns: []\n", []string{"s.yaml:3:10: designs: is an empty list"}},
		{"misspelt section", with("goal:", "gaol:"), []string{`s.yaml:2:1: gaol: is an unknown key; did you mean "goal"?`}},
		{"misspelt goal", with("warming", "warmign"), []string{`s.yaml:2:8: goal.warmign: is an unknown key; did you mean "warming"?`}},
		{"misspelt bound", smallStudy + "limits: [{figure: warming, atmost: 3 K}]\n", []string{`s.yaml:7:28: limits[0].atmost: is an unknown key; did you mean "at_most"?`}},
		{"misspelt deviation", smallStudy + "uncertain: [{at: fate.sticking, law: normal, mean: 0.5, std: 0.1}]\n", []string{`s.yaml:7:57: uncertain[0].std: is an unknown key; did you mean "sd"?`}},
		{"misspelt share", with("iron}", "iron, shares: 40 %}\n      - {shape: sphere, radius: 1 um, material: iron, share: 60 %}"), []string{
			`s.yaml:6:69: designs[Iron rods].particles[0].shares: is an unknown key; did you mean "share"?`}},
		{"misspelt key beside another that is missing", with("length: 8 um, diameter: 80 nm", "diametre: 80 nm"), []string{
			"s.yaml:6:9: designs[Iron rods].particles[0].length: is missing", "s.yaml:6:22: designs[Iron rods].particles[0].diametre: is an unknown key"}},
		{"duplicate key of a sink", smallStudy + "fate: {sinks: [{name: caps, rate: 1 %/yr, rate: 2 %/yr}]}\n", []string{"s.yaml:7:43: fate.sinks[caps].rate: is given twice"}},
		{"decimal comma", with("8 um", "8,5 um"), []string{"s.yaml:6:30: designs[Iron rods].particles[0].length: 8,5 um has a comma inside the number; write decimals with a point: 8.5 um"}},
		{"thousands with a comma", with("8 um", "8,000 nm"), []string{"s.yaml:6:30: designs[Iron rods].particles[0].length: 8,000 nm has a comma inside the number; ...8.000 nm; thousands without a sign: 8000 nm"}},
		{"decimal comma of a plain number", smallStudy + "fate: {sticking: 0,5, charge: 1}\n", []string{"s.yaml:7:18: fate.sticking: 0,5 has a comma inside the number; write decimals with a point: 0.5"}},
		{"missing material", with(", material: iron", ""), []string{"s.yaml:6:9: designs[Iron rods].particles[0].material: is missing; give iron, ...water-ice, or a map with the keys table, density and extend"}},
		{"empty material", with("iron", ""), []string{"s.yaml:6:63: designs[Iron rods].particles[0].material: is empty; give iron, ...water-ice"}},
		{"list for a value", with("8 um", "[8 um]"), []string{"s.yaml:6:30: designs[Iron rods].particles[0].length: is a list; give a single value such as 8 um"}},
		{"map for a value", with("8 um", "{of: 8 um}"), []string{"s.yaml:6:30: designs[Iron rods].particles[0].length: is a map; give a single value"}},
		{"value for a section", smallStudy + "supply: 7\n", []string{"s.yaml:7:9: supply: 7 is a single value; give a map with the keys route"}},
		{"list for a section", smallStudy + "model: [1]\n", []string{"s.yaml:7:8: model: is a list; give a map"}},
		{"map for a list", smallStudy + "limits: {figure: warming}\n", []string{"s.yaml:7:9: limits: is a map; give a list"}},
		{"unknown word", with("shape: rod", "shape: disc"), []string{"s.yaml:6:17: designs[Iron rods].particles[0].shape: disc is not one of rod, sphere"}},
		{"near word", smallStudy + "supply: {feedstock: {mineral: hematit}}\n", []string{"s.yaml:7:31: supply.feedstock.mineral: hematit is not one of ...did you mean hematite?"}},
		{"neither on nor off", smallStudy + "fate: {dust: maybe}\n", []string{"s.yaml:7:14: fate.dust: maybe is neither on nor off"}},
		{"title of two lines", with("Thaw", "\"a\\nb\""), []string{`s.yaml:1:8: study: "a\nb" holds a control character, a line break`}},

		// YAML itself.
		{"nothing", "", []string{"s.yaml:1:1: the file is empty"}},
		{"comments only", "# nothing\n", []string{"s.yaml:1:1: the file is empty"}},
		{"not a map", "- a\n", []string{"s.yaml:1:1: the file does not hold a map"}},
		{"not YAML", "study: [\n", []string{"s.yaml:1: the file is not valid YAML"}},
		{"colon in a value", "study: a: b\n", []string{"s.yaml:1:1: the file is not valid YAML: ...quotation marks"}},
		{"tab", "study: T\n\tgoal: 3\n", []string{"s.yaml:2: the file is not valid YAML: ...spaces, not tabs"}},
		{"second document", smallStudy + "---\nstudy: B\n", []string{"s.yaml:7:1: the file holds a second document"}},
		{"not UTF-8", "study: T\ngoal: \xff\n", []string{"s.yaml:2:7: the file is not UTF-8 text"}},
		{"too large", "study: " + strings.Repeat("x", maxFile), []string{"s.yaml:1:1: the file is larger than 4 MiB"}},
		{"merge key", smallStudy + "<<: {fate: {}}\n", []string{"s.yaml:7:1: << is a merge key"}},
		{"tag", smallStudy + "fate: !!map {charge: 1}\n", []string{"s.yaml:7:7: fate: !!map is a tag"}},
		{"unknown anchor", smallStudy + "fate: *nope\n", []string{"s.yaml:7: the file is not valid YAML: unknown anchor 'nope'"}},
		{"mistake behind an alias", smallStudy + "fate: &f {charge: 1}\nsupply: *f\n", []string{"s.yaml:7:11: supply.charge: is an unknown key; it belongs under fate; used by the alias in line 8"}},
		{"alias of itself", smallStudy + "fate: &f [*f]\n", []string{"s.yaml:7:7: fate[0]...is nested deeper than 24 levels", "s.yaml:7:7: fate: is a list"}},

		// World and goal.
		{"unknown world", smallStudy + "world: vulcan\n", []string{"s.yaml:7:8: world: vulcan is not one of mars; ...a map with base"}},
		{"gas that does not sum", smallStudy + "world: {gas: [{species: CO2, share: 90 %}]}\n", []string{"s.yaml:7:14: world.gas: has shares that sum to 90 % instead of 100 %"}},
		{"gas twice", smallStudy + "world: {gas: [{species: CO2, share: 90 %}, {species: CO2, share: 10 %}]}\n", []string{"s.yaml:7:54: world.gas[1].species: CO2 is given twice"}},
		{"unknown gas", smallStudy + "world: {gas: [{species: Xe, share: 100 %}]}\n", []string{"s.yaml:7:25: world.gas[0].species: Xe is not one of CO2, N2, Ar, air"}},
		{"no goal", with("{warming: 20 K}", "{}"), []string{"s.yaml:2:7: goal: names no goal; give exactly one"}},
		{"two goals", with("20 K}", "20 K, burden: 3 mg/m2}"), []string{"s.yaml:2:23: goal.burden: is a second goal beside warming; give exactly one"}},
		{"goal out of scope", with("{warming: 20 K}", "{region: north}"), []string{"s.yaml:2:8: goal.region: is outside the scope of this program; ...whole planet ...annual mean"}},
		{"season", with("20 K}", "20 K, season: summer}"), []string{"s.yaml:2:23: goal.season: is outside the scope"}},
		{"optical depth of what", with("{warming: 20 K}", "{optical_depth: 0.5}"), []string{"s.yaml:2:7: goal.at: is missing; say where the optical depth holds"}},
		{"optical depth at what", with("{warming: 20 K}", "{optical_depth: 0.5, at: noon}"), []string{"s.yaml:2:32: goal.at: noon does not start with a number; write thermal, solar or a wavelength"}},
		{"at without optical depth", with("20 K}", "20 K, at: solar}"), []string{"s.yaml:2:27: goal.at: belongs to a goal of optical_depth only"}},

		// Designs.
		{"design without a name", smallStudy + "  - particles: [{shape: sphere, radius: 1 um, material: iron}]\n", []string{"s.yaml:7:5: designs[1].name: is missing"}},
		{"two of a name", smallStudy + "  - name: Iron rods\n    particles: [{shape: sphere, radius: 1 um, material: iron}]\n", []string{"s.yaml:7:11: designs: Iron rods names two of the list, first in line 4"}},
		{"name that is a number", with("name: Iron rods", "name: 7"), []string{"s.yaml:4:11: designs[0].name: 7 is a number"}},
		{"name with a bracket", with("name: Iron rods", `name: "a]b"`), []string{"s.yaml:4:11: designs[0].name: a]b holds a bracket"}},
		{"name that is long", with("Iron rods", strings.Repeat("\u00fc", 81)), []string{"s.yaml:4:11: designs[0].name: ...is longer than 80 characters"}},
		{"name with an escape", with("Iron rods", `"Iron\e[31m rods"`), []string{`s.yaml:4:11: designs[0].name: "Iron\x1b[31m rods" holds a control character`}},
		{"name of two lines", with("Iron rods", `"Iron\nrods"`), []string{`s.yaml:4:11: designs[0].name: "Iron\nrods" holds a control character`}},
		{"name that turns the writing", with("Iron rods", `"Iron \u202esdor"`), []string{`s.yaml:4:11: designs[0].name: "Iron \u202esdor" holds a control character`}},
		{"key with an escape", smallStudy + `"\e[31mfate": {}` + "\n", []string{`s.yaml:7:1: "\x1b[31mfate": is an unknown key`}},
		{"word with an escape", with("iron}", `"\e[31mtin"}`), []string{`s.yaml:6:63: designs[Iron rods].particles[0].material: "\x1b[31mtin" is not one of`}},
		{"thin rod of metal", with("80 nm", "11 nm"), []string{"s.yaml:6:46: designs[Iron rods].particles[0].diameter: 11 nm leaves a core of 5 nm of 11 nm across: the oxide skin of iron by default is 3 nm thick; ...more than 5.5 nm"}},
		{"thick oxide", with("iron}", "iron, oxide: 21 nm}"), []string{"s.yaml:6:76: designs[Iron rods].particles[0].oxide: 21 nm leaves a core of 38 nm of 80 nm across: the oxide skin is 21 nm thick; ...more than 40 nm"}},
		{"thin core", with("80 nm, material: iron", "3 nm, material: iron, oxide: 0.6 nm"), []string{"s.yaml:6:75: designs[Iron rods].particles[0].oxide: 0.6 nm leaves a core of 1.8 nm of 3 nm across: ...at least 2 nm"}},
		{"oxide of a sphere", with("shape: rod, length: 8 um, diameter: 80 nm, material: iron", "shape: sphere, radius: 5 nm, material: iron"), []string{
			"s.yaml:6:33: designs[Iron rods].particles[0].radius: 5 nm leaves a core of 4 nm of 10 nm across: the oxide skin of iron by default is 3 nm thick"}},
		{"spread beyond the sizes", with("shape: rod, length: 8 um, diameter: 80 nm, material: iron", "shape: sphere, radius: 50 um, material: iron, spread: 2.5"), []string{
			"s.yaml:6:64: designs[Iron rods].particles[0].spread: 2.5 reaches a size of ..., outside 0.001 um to 10000 um; choose a smaller spread"}},
		{"goal where the index is not known", with("{warming: 20 K}", "{optical_depth: 0.5, at: 0.1 um}"), []string{"s.yaml:2:32: goal.at: 0.1 um cannot be used: material iron: refractive index needed at 0.1 um"}},
		{"rod with a radius", with("iron}", "iron, radius: 3 um}"), []string{"s.yaml:6:69: designs[Iron rods].particles[0].radius: does not belong to this shape; a rod takes length and diameter"}},
		{"sphere of a rod's sizes", with("shape: rod", "shape: sphere"), []string{
			"s.yaml:6:9: designs[Iron rods].particles[0].radius: is missing; a sphere takes a radius",
			"s.yaml:6:25: designs[Iron rods].particles[0].length: does not belong to this shape",
			"s.yaml:6:39: designs[Iron rods].particles[0].diameter: does not belong to this shape"}},
		{"stout rod", with("8 um", "700 nm"), []string{"s.yaml:6:48: designs[Iron rods].particles[0].diameter: 80 nm makes the rod 8.75 times as long as thick; below 10"}},
		{"rod across", with("diameter: 80 nm", "diameter: 9 um"), []string{"s.yaml:6:46: designs[Iron rods].particles[0].diameter: 9 um is not below the length, 8 um"}},
		{"all oxide", with("iron}", "iron, oxide: 40 nm}"), []string{"s.yaml:6:76: designs[Iron rods].particles[0].oxide: 40 nm leaves a core of 0 nm of 80 nm across: ...more than 40 nm"}},
		{"unknown material", with("iron}", "irn}"), []string{"s.yaml:6:63: designs[Iron rods].particles[0].material: irn is not one of iron, ...did you mean iron?"}},
		{"single share", with("iron}", "iron, share: 90 %}"), []string{"s.yaml:6:76: designs[Iron rods].particles: has shares that sum to 90 % instead of 100 %"}},
		{"shares of two", with("iron}", "iron, share: 40 %}\n      - {shape: sphere, radius: 1 um, material: iron, share: 50 %}"), []string{"s.yaml:7:62: designs[Iron rods].particles: has shares that sum to 90 % instead of 100 %"}},
		{"shares missing", with("iron}", "iron}\n      - {shape: sphere, radius: 1 um, material: iron}"), []string{
			"s.yaml:6:9: designs[Iron rods].particles[0].share: is missing", "s.yaml:7:9: designs[Iron rods].particles[1].share: is missing"}},
		{"table out of the folder", with("iron}", "{table: ../a.csv, density: 3 g/cm3}}"), []string{"s.yaml:6:71: designs[Iron rods].particles[0].material.table: ../a.csv leads out of the study's folder"}},
		{"table without density", with("iron}", "{table: a.csv}}"), []string{
			"s.yaml:6:63: designs[Iron rods].particles[0].material.density: is missing",
			"s.yaml:6:71: designs[Iron rods].particles[0].material.table: a.csv cannot be read"}},
		{"given out of range", smallStudy + "    given: {lifetime: 1 s}\n", []string{"s.yaml:7:23: designs[Iron rods].given.lifetime: 1 s is outside 1 h to 1e6 yr"}},

		// Fate.
		{"layer upside down", smallStudy + "fate: {profile: {layer: [35 km, 25 km]}}\n", []string{"s.yaml:7:33: fate.profile.layer[1]: 25 km is not above the bottom, 35 km"}},
		{"layer of one", smallStudy + "fate: {profile: {layer: [35 km]}}\n", []string{"s.yaml:7:25: fate.profile.layer: needs 2 heights, not 1"}},
		{"unknown profile", smallStudy + "fate: {profile: layered}\n", []string{"s.yaml:7:17: fate.profile: layered is not one of computed, mixed; ...a map with the key layer"}},
		{"eddy table unsorted", smallStudy + "fate: {eddy_diffusivity: [{height: 2 km, value: 3 m2/s}, {height: 1 km, value: 3 m2/s}]}\n", []string{"s.yaml:7:67: fate.eddy_diffusivity[1].height: 1 km is not above the height before it, 2 km"}},
		{"eddy table empty", smallStudy + "fate: {eddy_diffusivity: []}\n", []string{"s.yaml:7:26: fate.eddy_diffusivity: is an empty list"}},
		{"mistake in a design's fate", smallStudy + "    fate: {profile: {layer: [3 km, 3 km]}}\n", []string{"s.yaml:7:36: designs[Iron rods].fate.profile.layer[1]: 3 km is not above the bottom"}},

		// Limits, benchmarks, laws, sweeps, sources.
		{"unknown figure", smallStudy + "limits: [{figure: warmng, at_most: 3 K}]\n", []string{"s.yaml:7:19: limits[0].figure: warmng is not a figure; did you mean warming?"}},
		{"limit in another dimension", smallStudy + "limits: [{figure: production_rate, at_most: 3 K}]\n", []string{"s.yaml:7:45: limits[0].at_most: 3 K is a temperature where a mass per time is due; write it like 1 t/d"}},
		{"limit in degC", smallStudy + "limits: [{figure: warming, at_most: 3 degC}]\n", []string{"s.yaml:7:37: limits[0].at_most: 3 degC is a temperature where a difference is due"}},
		{"limit of a share", smallStudy + "limits: [{figure: sunlight_loss, at_most: 3 t}]\n", []string{"s.yaml:7:43: limits[0].at_most: 3 t is a mass where a plain number is due"}},
		{"no bound", smallStudy + "limits: [{figure: warming}]\n", []string{"s.yaml:7:10: limits[0]: has no bound"}},
		{"bound of zero", smallStudy + "limits: [{figure: production_rate, at_most: 0 t/d}]\n", []string{"s.yaml:7:45: limits[0].at_most: 0 t/d is not above zero; ...ratio"}},
		{"bound below zero", smallStudy + "limits: [{figure: sunlight_loss, at_least: -1 %}]\n", []string{"s.yaml:7:44: limits[0].at_least: -1 % is not above zero"}},
		{"two bounds", smallStudy + "limits: [{figure: warming, at_most: 3 K, at_least: 4 K}]\n", []string{"s.yaml:7:52: limits[0].at_least: is a second bound"}},
		{"benchmark of no design", smallStudy + "benchmarks: [{design: Iron rod, figure: burden, value: 3 mg/m2, source: q}]\n", []string{`s.yaml:7:23: benchmarks[0].design: Iron rod is not a design of this study; did you mean "Iron rods"?`}},
		{"benchmark without source", smallStudy + "benchmarks: [{design: Iron rods, figure: burden, value: 3 mg/m2}]\n", []string{"s.yaml:7:14: benchmarks[0].source: is missing"}},
		{"benchmark's unit", smallStudy + "benchmarks: [{design: Iron rods, figure: burden, value: 3, source: q}]\n", []string{"s.yaml:7:57: benchmarks[0].value: 3 has no unit where a mass per area is due"}},
		{"unknown word for laws", smallStudy + "uncertain: default\n", []string{"s.yaml:7:12: uncertain: default is not one of defaults; did you mean defaults?"}},
		{"law at nothing", smallStudy + "uncertain: [{at: fate.burial, law: uniform, low: 1 yr, high: 2 yr}]\n", []string{`s.yaml:7:18: uncertain[0].at: fate.burial does not exist: unknown key "burial"; did you mean "burial_time"?`}},
		{"law at no path", smallStudy + "uncertain: [{at: a b, law: uniform, low: 1 yr, high: 2 yr}]\n", []string{"s.yaml:7:18: uncertain[0].at: a b is not a path"}},
		{"law at a flag", smallStudy + "uncertain: [{at: fate.dust, law: uniform, low: 1, high: 2}]\n", []string{"s.yaml:7:18: uncertain[0].at: fate.dust is not a number"}},
		{"law at a limit", smallStudy + "uncertain: [{at: study, law: uniform, low: 1, high: 2}]\n", []string{"s.yaml:7:18: uncertain[0].at: study is not an input that can be varied"}},
		{"law at no design", smallStudy + "uncertain: [{at: \"designs[Tin].particles[0].length\", law: uniform, low: 3 um, high: 4 um}]\n", []string{"s.yaml:7:18: uncertain[0].at: designs[Tin].particles[0].length does not exist: there is no designs[Tin]; the study has Iron rods"}},
		{"law at what a rod lacks", smallStudy + "uncertain: [{at: \"designs[0].particles[0].radius\", law: uniform, low: 3 um, high: 4 um}]\n", []string{"s.yaml:7:18: uncertain[0].at: designs[0].particles[0].radius has no value in this study"}},
		{"law at a share", smallStudy + "uncertain: [{at: \"designs[0].particles[0].share\", law: uniform, low: 0, high: 1}]\n", []string{"s.yaml:7:18: uncertain[0].at: designs[0].particles[0].share cannot be varied alone"}},
		{"law with another's keys", smallStudy + "uncertain: [{at: fate.burial_time, law: normal, mean: 1 yr, high: 2 yr}]\n", []string{
			"s.yaml:7:13: uncertain[0].sd: is missing; a normal law takes mean and sd", "s.yaml:7:61: uncertain[0].high: does not belong to this law"}},
		{"law upside down", smallStudy + "uncertain: [{at: fate.burial_time, law: uniform, low: 3 yr, high: 2 yr}]\n", []string{"s.yaml:7:67: uncertain[0].high: 2 yr is not above low, 3 yr"}},
		{"law in another dimension", smallStudy + "uncertain: [{at: fate.burial_time, law: uniform, low: 3 yr, high: 2 km}]\n", []string{"s.yaml:7:67: uncertain[0].high: 2 km is a length where a time is due"}},
		{"law outside the input", smallStudy + "uncertain: [{at: fate.sticking, law: uniform, low: 0, high: 2}]\n", []string{"s.yaml:7:61: uncertain[0].high: 2 is outside 0 % to 100 %"}},
		{"loguniform from zero", smallStudy + "uncertain: [{at: fate.sticking, law: loguniform, low: 0, high: 1}]\n", []string{"s.yaml:7:55: uncertain[0].low: 0 is not above zero"}},
		{"mode outside", smallStudy + "uncertain: [{at: fate.sticking, law: triangular, low: 0.1, mode: 0.9, high: 0.5}]\n", []string{"s.yaml:7:66: uncertain[0].mode: 0.9 is outside 0.1 to 0.5"}},
		{"no deviation", smallStudy + "uncertain: [{at: fate.sticking, law: normal, mean: 0.5, sd: 0}]\n", []string{"s.yaml:7:61: uncertain[0].sd: 0 is not above zero"}},
		{"spread of 1", smallStudy + "uncertain: [{at: fate.burial_time, law: lognormal, median: 3 yr, spread: 1}]\n", []string{"s.yaml:7:74: uncertain[0].spread: 1 is not above 1"}},
		{"two laws", smallStudy + "uncertain:\n  - {at: fate.sticking, law: uniform, low: 0, high: 1}\n  - {at: fate.sticking, law: uniform, low: 0, high: 1}\n", []string{"s.yaml:9:10: uncertain[1].at: fate.sticking has two laws, the first in line 8"}},
		{"sweep of a point", smallStudy + "sweeps: [{name: B, at: fate.burial_time, from: 1 yr, to: 12 yr, points: 1}]\n", []string{"s.yaml:7:73: sweeps[B].points: 1 is outside 2 to 1000"}},
		{"sweep of nothing", smallStudy + "sweeps: [{name: B, at: fate.burial_time, from: 1 yr, to: 1 yr}]\n", []string{"s.yaml:7:58: sweeps[B].to: 1 yr is the same as from"}},
		{"log sweep from zero", smallStudy + "sweeps: [{name: B, at: fate.frost_burial, from: 0 %/yr, to: 3 %/yr, scale: log}]\n", []string{"s.yaml:7:10: sweeps[B]: goes through zero on a log scale"}},
		{"source of nothing", smallStudy + "sources: [{at: fate.nothing, text: x}]\n", []string{`s.yaml:7:16: sources[0].at: fate.nothing does not exist: unknown key "nothing"`}},
	} {
		t.Run(c.name, func(t *testing.T) {
			got := mistakes(t, c.study)
			if len(got) != len(c.want) {
				t.Fatalf("got %d mistakes, want %d:\n%s", len(got), len(c.want), strings.Join(got, "\n"))
			}
			for i, want := range c.want {
				start, rest, _ := strings.Cut(want, "...")
				if !strings.HasPrefix(got[i], start) {
					t.Errorf("got  %s\nwant %s", got[i], start)
				}
				for part := range strings.SplitSeq(rest, "...") {
					if !strings.Contains(got[i], part) {
						t.Errorf("%s\nlacks %q", got[i], part)
					}
				}
			}
		})
	}
}

func TestLoad_AllMistakesInFileOrder(t *testing.T) {
	got := mistakes(t, `study: T
fate: {lift_time: 5}
goal: {warming: 9000 K}
designs:
  - particles: [{shape: rod, length: 1 m, diameter: 80 nm, material: tin}]
    name: A
supply: {rout: local}
`, "fate.dust=perhaps", "limits=[{figure: nothing}]")
	want := []string{"s.yaml:2:19: fate.lift_time", "s.yaml:3:17: goal.warming", "s.yaml:5:38: designs[A].particles[0].length",
		"s.yaml:5:70: designs[A].particles[0].material", "s.yaml:7:10: supply.rout", "--set #1: fate.dust", "--set #2: limits[0].figure", "--set #2: limits[0]: has no bound"}
	if len(got) != len(want) {
		t.Fatalf("got %d mistakes, want %d:\n%s", len(got), len(want), strings.Join(got, "\n"))
	}
	for i := range want {
		if !strings.HasPrefix(got[i], want[i]) {
			t.Errorf("got  %s\nwant %s", got[i], want[i])
		}
	}
}

func TestLoad_SetMistakes(t *testing.T) {
	for _, c := range []struct{ set, want string }{
		{"fate", "--set #1: fate has no '='; write --set PATH=VALUE"},
		{"=1", "--set #1: is not a path"},
		{"fate..x=1", "--set #1: fate..x is not a path"},
		{"designs[=1", "--set #1: designs[=1 has no '='"},
		{"fate.burial=3 yr", `--set #1: fate.burial: is an unknown key; did you mean "burial_time"?`},
		{"fate.burial_time=", "--set #1: fate.burial_time: is empty"},
		{"fate.burial_time= # 3 yr", `--set #1: fate.burial_time: " # 3 yr" is empty`},
		{"fate.burial_time=3", "--set #1: fate.burial_time: 3 has no unit where a time is due"},
		{"fate.burial_time=[", "--set #1: fate.burial_time: is not valid YAML"},
		{"fate[0]=1", "--set #1: fate[0]: fate is not a list"},
		{"designs[Tin].name=x", "--set #1: designs[Tin].name: there is no designs[Tin]; the study has Iron rods"},
		{"designs[Iron rods].particles[4].spread=2", "--set #1: designs[Iron rods].particles[4].spread: there is no designs[Iron rods].particles[4]; items are numbered from 0 to 0"},
		{"designs=1", "--set #1: designs: 1 is a single value; give a list"},
		{"world=vulcan", "--set #1: world: vulcan is not one of mars"},
		{"goal.burden=3 mg/m2", "--set #1: goal.burden: is a second goal beside warming"},
		{"goal.region=north", "--set #1: goal.region: is outside the scope"},
		{"study=\xff", "--set #1: study: is not usable text"},
	} {
		got := mistakes(t, smallStudy, c.set)
		if len(got) != 1 || !strings.HasPrefix(got[0], c.want) {
			t.Errorf("--set %q: got\n%s\nwant\n%s", c.set, strings.Join(got, "\n"), c.want)
		}
	}
}

// A letter left out of or added to any key makes the study fail, and the key is named.
func TestLoad_NoMisspeltKeyPasses(t *testing.T) {
	var doc yaml.Node
	if err := yaml.Unmarshal([]byte(fullStudy), &doc); err != nil {
		t.Fatal(err)
	}
	var keys []*yaml.Node
	var walk func(*yaml.Node)
	walk = func(n *yaml.Node) {
		for i, c := range n.Content {
			if n.Kind == yaml.MappingNode && i%2 == 0 {
				keys = append(keys, c)
			}
			walk(c)
		}
	}
	walk(&doc)
	if len(keys) < 150 {
		t.Fatalf("only %d keys found", len(keys))
	}
	lines := strings.SplitAfter(fullStudy, "\n")
	rapid.Check(t, func(t *rapid.T) {
		key := rapid.SampledFrom(keys).Draw(t, "key")
		at := rapid.IntRange(0, len(key.Value)-1).Draw(t, "at")
		bad := key.Value[:at] + key.Value[at+1:]
		if rapid.Bool().Draw(t, "add") {
			bad = key.Value[:at] + string(rapid.RuneFrom([]rune("abcdefghijklmnopqrstuvwxyz_Z")).Draw(t, "letter")) + key.Value[at:]
		}
		line := lines[key.Line-1]
		start := key.Column - 1
		changed := append([]string(nil), lines...)
		changed[key.Line-1] = line[:start] + bad + line[start+len(key.Value):]
		_, err := Load(Source{Name: "s.yaml", Data: []byte(strings.Join(changed, ""))}, nil)
		var e *StudyError
		if !errors.As(err, &e) {
			t.Fatalf("%q in place of %q, line %d: %v", bad, key.Value, key.Line, err)
		}
		for _, m := range e.Mistakes {
			if m.Line == key.Line && m.Column == key.Column && (m.Field == bad || strings.HasSuffix(m.Field, "."+bad)) {
				return
			}
		}
		t.Fatalf("%q in place of %q, line %d, is not named:\n%v", bad, key.Value, key.Line, e)
	})
}

// values returns what a study works with, without where it came from.
func values(s *Study) Study {
	v := *s
	v.resolved, v.File, v.SHA256 = nil, "", ""
	v.Limits = append([]Limit(nil), s.Limits...)
	for i := range v.Limits {
		v.Limits[i].Pos = ""
	}
	return v
}

func sameValues(t testing.TB, what string, a, b *Study) {
	t.Helper()
	if diff := cmp.Diff(values(a), values(b), cmp.AllowUnexported(Study{}, node{})); diff != "" {
		t.Errorf("%s:\n%s", what, diff)
	}
}

func TestLoad_SpellingsOfAQuantityAreOneStudy(t *testing.T) {
	want := mustLoad(t, with("8 um", "9 um"))
	if want.Designs[0].Particles[0].Length != 9e-6 {
		t.Fatalf("9 um is %v m", want.Designs[0].Particles[0].Length)
	}
	for _, spelling := range []string{"9000 nm", "9e-6 m", "9µm", "9 μm", "0.009 mm", "9.000 um", "'9 um'", "9e3 nm"} {
		sameValues(t, spelling, want, mustLoad(t, with("8 um", spelling)))
		sameValues(t, "--set "+spelling, want, mustLoad(t, smallStudy, "designs[Iron rods].particles[0].length="+spelling))
	}
}

func TestLoad_FullStudy(t *testing.T) {
	s := mustLoad(t, fullStudy)
	if got := len(s.Designs); got != 5 {
		t.Fatalf("%d designs", got)
	}
	const yr = 31557600.0
	for _, c := range []struct {
		what      string
		got, want any
	}{
		{"title", s.Title, "Kettle Plain thaw, concept phase"},
		{"world", s.World.Name, "mars (changed)"},
		{"pressure", s.World.SurfacePressure, 700.0},
		{"goal", s.Goal, Goal{Kind: "warming", Warming: 25}},
		{"rod", s.Designs[0].Particles[0], Particle{Shape: "rod", Length: 8e-6, Diameter: 80e-9, Material: MaterialRef{Name: "iron"}, Spread: 1.2, Oxide: 3e-9, SurfaceScattering: true, Share: 1}},
		{"share", s.Designs[1].Particles[1].Share, 0.6},
		{"no oxide given", s.Designs[1].Particles[1].Oxide, -1.0},
		{"own mineral", s.Designs[1].Supply.Feedstock.Mineral, "alumina"},
		{"merged grade", s.Designs[1].Supply.Feedstock.Grade, 0.15},
		{"has supply", [2]bool{s.Designs[1].HasSupply, s.Designs[1].HasFate}, [2]bool{true, false}},
		{"layer", s.Designs[2].Fate.Profile, Profile{Kind: "layer", Bottom: 25e3, Top: 35e3}},
		{"layer's vapour", s.Designs[2].Fate.Vapour, "saturated"},
		{"others' profile", s.Designs[0].Fate.Profile, Profile{Kind: "computed"}},
		{"given", s.Designs[3].Given, Given{Lifetime: 10 * yr}},
		{"benchmark", s.Benchmarks[0], Benchmark{Design: "Printed rod, as published", Figure: "burden", Value: 150e-6, Source: "report Q, table 2"}},
		{"eddy", s.Designs[0].Fate.EddyDiffusivity, []EddyPoint{{Value: 300}}},
		{"sticking", [2]any{s.Designs[0].Fate.Sticking, s.Designs[0].Fate.StickingGiven}, [2]any{0.05, true}},
		{"frost", s.Designs[0].Fate.FrostBurial, 0.03 / yr},
		{"sinks", s.Designs[0].Fate.Sinks, []Sink{{"caps", 0.01 / yr}}},
		{"dust", s.Designs[0].Fate.Dust, true},
		{"plant", s.Designs[0].Supply.Plant.SpecificMass, 25 * 86400.0},
		{"points", s.Designs[0].Supply.Release.Points, 12},
		{"stop", s.Designs[0].Supply.StopAt, 80 * yr},
		{"limit", s.Limits[0], Limit{Figure: "production_rate", AtMost: true, Bound: 5e6 / 86400, Pos: "s.yaml:53:5"}},
		{"law", s.Uncertain[0], Law{At: "fate.burial_time", Kind: "loguniform", Low: yr, High: 30 * yr}},
		{"law of a design", s.Uncertain[3], Law{At: "designs[Iron rods].particles[0].diameter", Kind: "normal", Mean: 80e-9, SD: 8e-9}},
		{"sweep", s.Sweeps[0], Sweep{Name: "Burial", At: "fate.burial_time", From: 0.5 * yr, To: 50 * yr, Points: 25, Log: true}},
		{"source", s.Sources[0], SourceNote{"supply.plant.specific_mass", "plant concept note 7, rev B"}},
	} {
		if !reflect.DeepEqual(c.got, c.want) {
			t.Errorf("%s: got %v, want %v", c.what, c.got, c.want)
		}
	}
}

func TestLoad_Defaults(t *testing.T) {
	s := mustLoad(t, smallStudy)
	f := s.Designs[0].Fate
	if f.StickingGiven || f.Profile.Kind != "computed" || !f.Dust || f.LiftTime != 60*86400 || f.Vapour != "dry" || len(f.Sinks) != 0 {
		t.Errorf("fate: %+v", f)
	}
	w := s.World
	if w.Name != "mars" || w.SurfacePressure != 610 || w.LapseLimit != 0.0025 {
		t.Errorf("world: %+v", w)
	}
	sum := 0.0
	for _, g := range w.Gas {
		sum += g.Mole
	}
	if len(w.Gas) != 3 || sum < 1-1e-15 || sum > 1+1e-15 || w.Gas[0] != (GasShare{"CO2", 0.951 / (0.951 + 0.0259 + 0.0194)}) {
		t.Errorf("gas sums to %v: %+v", sum, w.Gas)
	}
	if s.Designs[0].Supply.StopAt != 0 || s.Designs[0].HasFate || s.Designs[0].HasSupply {
		t.Errorf("design: %+v", s.Designs[0])
	}
	if err := s.Designs[0].Supply.Validate(); err != nil {
		t.Errorf("package logistics refuses the default supply: %v", err)
	}
}

func TestLoad_NameOfAChangedWorld(t *testing.T) {
	for change, want := range map[string]bool{
		"base: mars": true, "radius: 3000 km": false, "air_temperature: 220 K": false, "warm_season_maximum: 10 degC": false, "surface_pressure: 6.1 hPa": true, "bond_albedo: 25 %": true,
		"surface_pressure: 611 Pa": false, "gas: [{species: CO2, share: 100 %}]": false, "gravity: 3.7 m/s2": false, "sunlight: 600 W/m2": false,
		"bond_albedo: 0.2": false, "emissivity: 1": false, "dust_optical_depth: 0": false, "lapse_limit: 2 K/km": false,
	} {
		s := mustLoad(t, smallStudy+"world: {"+change+"}\n")
		if (s.World.Name == "mars") != want {
			t.Errorf("world {%s} is named %q", change, s.World.Name)
		}
	}
}

func TestLoad_LayersAndOrigins(t *testing.T) {
	text := smallStudy + `    fate: {lift_time: 90 d}
fate: {lift_time: 30 d, burial_time: 8 yr}
`
	s := mustLoad(t, text, "fate.burial_time=9 yr", "designs[Iron rods].supply.plant.life=30 yr", "world.gravity=3.7 m/s2",
		"fate.profile.layer=[1 km, 2 km]", `designs[0].particles[0]={shape: sphere, radius: 1 um, material: iron}`)
	d := s.Designs[0]
	const yr = 31557600.0
	if d.Fate.LiftTime != 90*86400 || d.Fate.BurialTime != 9*yr || d.Supply.Plant.Life != 30*yr || d.Supply.Plant.SpecificMass != 25*86400 ||
		s.World.Gravity != 3.7 || d.Fate.Profile.Top != 2000 || d.Particles[0].Radius != 1e-6 || d.Particles[0].Share != 1 {
		t.Errorf("layers are not merged: %+v, gravity %v", d, s.World.Gravity)
	}
	for path, want := range map[string]Origin{
		"fate.lift_time":                            {"file", "s.yaml:8:19"},
		"designs[Iron rods].fate.lift_time":         {"file", "s.yaml:7:23"},
		"designs[0].fate.lift_time":                 {"file", "s.yaml:7:23"},
		"designs[Iron rods].fate.burial_time":       {"set", "--set #1"},
		"fate.burial_time":                          {"set", "--set #1"},
		"designs[Iron rods].fate.deposition":        {"default", ""},
		"supply.plant.life":                         {"default", ""},
		"designs[Iron rods].supply.plant.life":      {"set", "--set #2"},
		"designs[Iron rods].supply.plant.spares":    {"default", ""},
		"world.gravity":                             {"set", "--set #3"},
		"world.radius":                              {"default", ""},
		"fate.profile.layer[1]":                     {"set", "--set #4"},
		"designs[Iron rods].particles[0].radius":    {"set", "--set #5"},
		"designs[Iron rods].particles[0].spread":    {"default", ""},
		"designs[\"Iron rods\"].particles[0].share": {"default", ""},
		"study": {"file", "s.yaml:1:8"},
	} {
		if got, ok := s.Origin(path); !ok || got != want {
			t.Errorf("origin of %s: %+v, %v; want %+v", path, got, ok, want)
		}
	}
	for _, path := range []string{"fate.sticking", "fate.nothing", "designs[Tin].name", "designs[0].particles[0].length", ""} {
		if got, ok := s.Origin(path); ok {
			t.Errorf("origin of %s: %+v", path, got)
		}
	}
}

func TestStudy_Inputs(t *testing.T) {
	s := mustLoad(t, smallStudy+`    fate: {lift_time: 90 d}
fate: {burial_time: 8 yr, frost_burial: 3 %/yr}
limits: [{figure: sunlight_loss, at_most: 12 %}]
sources:
  - {at: fate.burial_time, text: note 4}
  - {at: supply.plant, text: note 5}
`, "supply.availability=90 %")
	got := map[string]InputValue{}
	for _, in := range s.Inputs() {
		if _, twice := got[in.Path]; twice {
			t.Errorf("%s is listed twice", in.Path)
		}
		got[in.Path] = in
		if in.Title == "" || in.Source == "" {
			t.Errorf("%+v lacks title or source", in)
		}
	}
	for _, want := range []InputValue{
		{Path: "fate.burial_time", Text: "8 yr", SI: 8 * 31557600, HasSI: true, Unit: "s", Origin: Origin{"file", "s.yaml:8:21"}, Source: "note 4"},
		{Path: "fate.frost_burial", Text: "3 %/yr", SI: 0.03 / 31557600, HasSI: true, Unit: "1/s", Origin: Origin{"file", "s.yaml:8:41"}, Source: assumption},
		{Path: "fate.sticking", Text: "not given: assessed at 100 % and at 1 %", Unit: "1", Origin: Origin{Kind: "default"}, Source: assumption},
		{Path: "fate.sinks", Text: "none", Origin: Origin{Kind: "default"}, Source: assumption},
		{Path: "designs[Iron rods].fate.lift_time", Text: "90 d", SI: 90 * 86400, HasSI: true, Unit: "s", Origin: Origin{"file", "s.yaml:7:23"}, Source: byStudy},
		{Path: "designs[Iron rods].particles[0].material", Text: "iron", Origin: Origin{"file", "s.yaml:6:63"}, Source: byStudy},
		{Path: "supply.plant.life", Text: "20 yr", SI: 20 * 31557600, HasSI: true, Unit: "s", Origin: Origin{Kind: "default"}, Source: "note 5"},
		{Path: "supply.availability", Text: "90 %", SI: 0.9, HasSI: true, Unit: "1", Origin: Origin{"set", "--set #1"}, Source: byStudy},
		{Path: "world.gas[1].share", Text: "2.59 %", SI: 0.0259, HasSI: true, Unit: "1", Origin: Origin{Kind: "default"},
			Source: factSheet + "; the rest, 0.4 %, is left out and the shares are scaled to 100 %"},
		{Path: "limits[0].at_most", Text: "12 %", SI: 0.12, HasSI: true, Unit: "1", Origin: Origin{"file", "s.yaml:9:43"}, Source: byStudy},
	} {
		in := got[want.Path]
		in.Title = ""
		if in != want {
			t.Errorf("got  %+v\nwant %+v", in, want)
		}
	}
	for _, absent := range []string{"designs[Iron rods].fate.burial_time", "designs[Iron rods].fate.sticking", "designs[Iron rods].particles[0].radius", "goal.burden"} {
		if in, ok := got[absent]; ok {
			t.Errorf("%+v should not be listed", in)
		}
	}
}

// The resolved study, written as JSON, is the same study.
func TestStudy_ResolvedLoadsAgain(t *testing.T) {
	for name, s := range map[string]*Study{
		"full":    mustLoad(t, fullStudy, "designs[Iron rods].fate.eddy_diffusivity=[{height: 0 km, value: 10 m2/s}, {height: 40 km, value: 400 m2/s}]", "fate.dust=no"),
		"starter": mustLoad(t, Starter()),
		"odd":     mustLoad(t, with("Thaw", "'2026'")+"fate: {charge: .5, aggregate_value: '0.5'}\nlimits: [{figure: sunlight_loss, at_most: 0.5}]\n"),
	} {
		data, err := json.Marshal(s.Resolved())
		if err != nil {
			t.Fatal(err)
		}
		sameValues(t, name, s, mustLoad(t, string(data)))
		again, _ := json.Marshal(s.Resolved())
		if string(again) != string(data) {
			t.Errorf("%s: two writings differ", name)
		}
	}
	data, _ := json.Marshal(mustLoad(t, smallStudy).Resolved())
	if want := `{"study":"Thaw","world":{"base":"mars","radius":"3389.5 km","gravity":"3.71 m/s2",`; !strings.HasPrefix(string(data), want) {
		t.Errorf("resolved study begins %.120s", data)
	}
}

func TestStarter(t *testing.T) {
	s := mustLoad(t, Starter())
	if len(s.Designs) != 1 || s.Designs[0].Fate.StickingGiven || len(s.Warnings) != 0 {
		t.Errorf("starter: %+v", s)
	}
}

// The starter study says in a comment what comes out of it: at 1 % sticking the goal is
// reached in decades and every limit is met, at 100 % it is out of reach.
func TestStarter_ReachesItsGoal(t *testing.T) {
	d := assess(t, mustLoad(t, Starter())).Designs[0]
	const yr = 31557600.0
	for _, c := range d.Cases {
		met := 0
		for _, l := range c.Limits {
			if l.Known && l.Met {
				met++
			}
		}
		favourable := c.Sticking == 0.01
		if got := c.Figures["time_to_goal"]; favourable && (got.Null || math.Abs(got.Value/yr-19) > 1) || !favourable && !got.Null && got.Value < 100*yr {
			t.Errorf("%s: time to goal %g yr %s", c.Name, got.Value/yr, got.Why)
		}
		if (met == len(c.Limits)) != favourable {
			t.Errorf("%s: %d of %d limits are met", c.Name, met, len(c.Limits))
		}
	}
	windows := d.Cases[1].Figures["windows"]
	if windows.Value != 4 {
		t.Errorf("the plant comes in %g windows", windows.Value)
	}
}

// A bound of a figure that can be negative may be anything.
func TestLoad_SignedBounds(t *testing.T) {
	for id := range mayBeNegative {
		f, ok := FigureByID(id)
		if !ok {
			t.Errorf("%s is no figure", id)
			continue
		}
		for _, bound := range []string{"-1", "0"} {
			s := mustLoad(t, fmt.Sprintf("%slimits: [{figure: %s, at_least: %s %s}]\n", smallStudy, id, bound, f.Shown))
			if got := strconv.FormatFloat(s.Limits[0].Bound, 'g', -1, 64); got != bound {
				t.Errorf("%s: bound %s comes out as %s", id, bound, got)
			}
		}
	}
}

// A name counts in characters, not in bytes.
func TestLoad_LongName(t *testing.T) {
	name := strings.Repeat("\u00fc", 80)
	if got := mustLoad(t, with("Iron rods", name)).Designs[0].Name; got != name {
		t.Errorf("name %q", got)
	}
}

// No message holds a character that upsets the line it is printed in, whatever is typed.
func TestLoad_MessagesAreVisible(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		odd := rapid.SampledFrom([]string{`\e[31m`, `\n`, `\u202e`, `\u2066`, `\u2028`, `\u0085`, `\u200f`, `\t`}).Draw(t, "odd")
		study := rapid.SampledFrom([]string{
			with("study:", `"st`+odd+`udy":`), with("Iron rods", `"I`+odd+`r"`), with("iron}", `"i`+odd+`n"}`), with("8 um", `"8`+odd+`um"`),
			with("20 K", `"2`+odd+`K"`), smallStudy + `"fa` + odd + `te": {"x` + odd + `": 1}` + "\n", smallStudy + `limits: [{figure: "w` + odd + `", at_most: 3 K}]` + "\n",
			smallStudy + `uncertain: [{at: "fate.x` + odd + `", law: uniform, low: 1, high: 2}]` + "\n", smallStudy + `benchmarks: [{design: "x` + odd + `y", figure: burden, value: 3 mg/m2, source: q}]` + "\n",
			with("iron}", `{table: "i`+odd+`n.csv", density: 3 g/cm3}}`), smallStudy + `fate: {sinks: [{name: "a` + odd + `b", rate: 3}]}` + "\n",
		}).Draw(t, "study")
		_, err := Load(Source{Name: "s.yaml", Data: []byte(study)}, []string{`fate.x["` + "\u202e" + `"]=1`})
		var e *StudyError
		if !errors.As(err, &e) {
			t.Fatalf("got %v", err)
		}
		for _, m := range e.Mistakes {
			if strings.ContainsFunc(m.String(), unseen) {
				t.Fatalf("%q", m.String())
			}
		}
	})
}

func TestLoad_UncertainDefaults(t *testing.T) {
	s := mustLoad(t, smallStudy+"uncertain: defaults\n")
	const yr = 31557600.0
	want := map[string]Law{
		"fate.eddy_diffusivity":      {Kind: "loguniform", Low: 10, High: 1e4},
		"fate.lift_time":             {Kind: "loguniform", Low: 864000, High: 10 * yr},
		"fate.burial_time":           {Kind: "loguniform", Low: yr, High: 100 * yr},
		"fate.frost_burial":          {Kind: "uniform", Low: 0, High: 0.2 / yr},
		"fate.sticking":              {Kind: "loguniform", Low: 0.001, High: 1},
		"supply.energy.reduction":    {Kind: "uniform", Low: 10e6, High: 40e6},
		"supply.energy.shaping":      {Kind: "loguniform", Low: 5e6, High: 500e6},
		"supply.plant.specific_mass": {Kind: "loguniform", Low: 5 * 86400, High: 100 * 86400},
		"supply.power.specific_mass": {Kind: "loguniform", Low: 0.02, High: 0.15},
		"supply.availability":        {Kind: "uniform", Low: 0.5, High: 0.95},
		"model.warming_factor":       {Kind: "lognormal", Median: 1, Spread: 1.3},
		"model.kappa_factor":         {Kind: "lognormal", Median: 1, Spread: 1.3},
		"model.fall_speed_factor":    {Kind: "lognormal", Median: 1, Spread: 1.3},
		"model.kernel_factor":        {Kind: "lognormal", Median: 1, Spread: 1.3},
	}
	if len(s.Uncertain) != len(want) {
		t.Errorf("%d laws, want %d", len(s.Uncertain), len(want))
	}
	for _, law := range s.Uncertain {
		w := want[law.At]
		w.At, w.Assumption = law.At, true
		if law != w {
			t.Errorf("got %+v, want %+v", law, w)
		}
	}
}

func TestLoad_Goals(t *testing.T) {
	for text, want := range map[string]Goal{
		"{burden: 85 mg/m2}":                {Kind: "burden", Burden: 85e-6},
		"{optical_depth: 0.5, at: thermal}": {Kind: "optical_depth", OpticalDepth: 0.5, At: "thermal"},
		"{at: 10 um, optical_depth: 50 %}":  {Kind: "optical_depth", OpticalDepth: 0.5, At: "10 um", Wavelength: 10e-6},
	} {
		if got := mustLoad(t, with("{warming: 20 K}", text)).Goal; got != want {
			t.Errorf("goal %s: got %+v", text, got)
		}
	}
}

func TestLoad_AliasIsFollowed(t *testing.T) {
	s := mustLoad(t, smallStudy+"    fate: &f {lift_time: 9 d}\n  - {name: B, particles: [{shape: sphere, radius: 1 um, material: iron}], fate: *f}\n")
	if got := s.Designs[1].Fate.LiftTime; got != 9*86400 {
		t.Errorf("lift time behind the alias: %v", got)
	}
}

// Nine levels of nine aliases each would be some 400 million values.
func TestLoad_AliasBombIsStopped(t *testing.T) {
	bomb := smallStudy + "a: &a [x, x, x, x, x, x, x, x, x]\n"
	for level := 'b'; level <= 'i'; level++ {
		bomb += fmt.Sprintf("%c: &%c [%s]\n", level, level, strings.TrimSuffix(strings.Repeat(fmt.Sprintf("*%c, ", level-1), 9), ", "))
	}
	start := time.Now()
	got := strings.Join(mistakes(t, bomb), "\n")
	if !strings.Contains(got, "makes the study larger than 50000 values") {
		t.Errorf("got %.300s", got)
	}
	if took := time.Since(start); took > 5*time.Second {
		t.Errorf("took %v", took)
	}
}

func TestLoad_Tables(t *testing.T) {
	folder := t.TempDir()
	write := func(name, text string) string {
		path := filepath.Join(folder, name)
		if err := os.MkdirAll(filepath.Dir(path), 0o755); err != nil {
			t.Fatal(err)
		}
		if err := os.WriteFile(path, []byte(text), 0o644); err != nil {
			t.Fatal(err)
		}
		return path
	}
	write("study/good.csv", "# invented\nwavelength_um,n,k\n1,1.5,0.1\n10,2,0.5\n")
	write("study/sub/good.yaml", "REFERENCES: invented\nDATA:\n  - type: tabulated nk\n    data: |\n      1 1.5 0.1\n      10 2 0.5\n")
	write("study/bad.csv", "wavelength_um,n,k\n1,1.5,0.1\n10,2,-0.5\n")
	write("study/bad.yaml", "DATA:\n  - type: tabulated nk\n    data: |\n      1 1.5 0.1\n      10 2 x\n")
	write("study/none.yaml", "DATA:\n  - type: formula 1\n")
	write("study/broken.yaml", "DATA: [\n")
	write("study/short.csv", "wavelength_um,n,k\n0.21,1.5,0.1\n55.56,2,0.5\n")
	write("study/whole.csv", "wavelength_um,n,k\n0.2,1.5,0.1\n1000,2,0.5\n")
	write("study/falling.csv", "wavelength_um,n,k\n50,1.5,0.1\n49.99,2,0.5\n")
	write("secret.csv", "wavelength_um,n,k\n1,1.5,0.1\n10,2,0.5\n")
	if err := os.Symlink("../secret.csv", filepath.Join(folder, "study", "link.csv")); err != nil {
		t.Fatal(err)
	}

	load := func(material string) (*Study, error) {
		path := write("study/study.yaml", with("iron}", material+"}"))
		src, err := FileSource(path)
		if err != nil {
			t.Fatal(err)
		}
		src.Name = "s.yaml"
		return Load(src, nil)
	}
	um := 1e-6 // a variable, so that the product below is rounded as at run time
	rows := [][3]float64{{um, 1.5, 0.1}, {10 * um, 2, 0.5}}
	for _, name := range []string{"good.csv", "sub/good.yaml"} {
		s, err := load("{table: " + name + ", density: 2260 kg/m3, extend: true}")
		if err != nil {
			t.Errorf("%s: %v", name, err)
			continue
		}
		want := MaterialRef{Name: name, Table: name, Density: 2260, Extend: true, Rows: rows}
		if diff := cmp.Diff(want, s.Designs[0].Particles[0].Material); diff != "" {
			t.Errorf("%s: %s", name, diff)
		}
		if len(s.Tables) != 1 || s.Tables[0].File != name || len(s.Tables[0].SHA256) != 64 {
			t.Errorf("%s: tables %+v", name, s.Tables)
		}
	}
	if s, err := load("{table: whole.csv, density: 2260 kg/m3}"); err != nil || s.Designs[0].Particles[0].Material.Extend {
		t.Errorf("a table of all wavelengths: %v", err)
	}
	for name, want := range map[string]string{
		"short.csv":                         "s.yaml:6:63: designs[Iron rods].particles[0].material: short.csv covers 0.21 um to 55.56 um, not all of 0.2 um to 1000 um; add `extend: true`",
		"falling.csv":                       "falling.csv:3: designs[Iron rods].particles[0].material.table: wavelength 49.99 um is not above the 50 um before it; the table is named at s.yaml:6:71",
		"bad.csv":                           "bad.csv:3: designs[Iron rods].particles[0].material.table: k = -0.5 is negative",
		"bad.yaml":                          `bad.yaml:5: designs[Iron rods].particles[0].material.table: "x" is not a number`,
		"none.yaml":                         `none.yaml: designs[Iron rods].particles[0].material.table: has no DATA block of type "tabulated nk"`,
		"broken.yaml":                       "broken.yaml:",
		"absent.csv":                        "s.yaml:6:71: designs[Iron rods].particles[0].material.table: absent.csv does not exist: no such file beside the study",
		"link.csv":                          "s.yaml:6:71: designs[Iron rods].particles[0].material.table: link.csv cannot be read",
		"../secret.csv":                     "s.yaml:6:71: designs[Iron rods].particles[0].material.table: ../secret.csv leads out of the study's folder",
		filepath.Join(folder, "secret.csv"): "s.yaml:6:71: designs[Iron rods].particles[0].material.table: ",
		"sub":                               "s.yaml:6:71: designs[Iron rods].particles[0].material.table: sub cannot be read: is not a regular file",
	} {
		_, err := load("{table: " + name + ", density: 2260 kg/m3}")
		if err == nil || !strings.HasPrefix(err.Error(), want) || strings.Contains(err.Error(), "\n") {
			t.Errorf("%s: got %v\nwant %s", name, err, want)
		}
	}
}

func TestFileSource_NoFile(t *testing.T) {
	if _, err := FileSource(filepath.Join(t.TempDir(), "none.yaml")); !errors.Is(err, os.ErrNotExist) {
		t.Errorf("got %v", err)
	}
	if _, err := FileSource(t.TempDir()); err == nil {
		t.Error("a folder was read as a study")
	}
}

func FuzzLoad(f *testing.F) {
	f.Add(smallStudy, "fate.burial_time=9 yr")
	f.Add(fullStudy, "designs[Iron rods].particles[0].diameter=90 nm")
	f.Add(Starter(), "world=mars")
	f.Add("study: &a [*a]\n", "designs[0]={}")
	f.Add("a: &a {b: *a}\n<<: *a\n", "goal={region: x}")
	f.Add("study:\n? x\n: y\n---\nz", "fate.profile.layer=[1 km]")
	f.Add("designs: [1, [2], {name: [3], particles: {a: b}, fate: 4, given: []}]\ngoal: [1]\nworld: {gas: 3}\n", "uncertain=[1, {at: 2}]")
	f.Add("fate: {eddy_diffusivity: [1, {height: 2}], profile: {layer: 3}, sinks: [x]}\nlimits: [1]\nsweeps: [{at: fate.sinks}]\nsources: [{at: x}]\n", "benchmarks=[1]")
	f.Fuzz(func(t *testing.T, text, set string) {
		s, err := Load(Source{Name: "s.yaml", Data: []byte(text)}, []string{set})
		if err != nil {
			var e *StudyError
			if !errors.As(err, &e) || len(e.Mistakes) == 0 {
				t.Fatalf("got %T %v", err, err)
			}
			return
		}
		for _, in := range s.Inputs() {
			if _, ok := s.Origin(in.Path); !ok && in.Origin.Kind != "default" {
				t.Fatalf("no origin of %s", in.Path)
			}
		}
		data, err := json.Marshal(s.Resolved())
		if err != nil {
			t.Fatal(err)
		}
		sameValues(t, "resolved study", s, mustLoad(t, string(data)))
	})
}

func BenchmarkLoad(b *testing.B) {
	for b.Loop() {
		if _, err := Load(Source{Name: "s.yaml", Data: []byte(fullStudy)}, nil); err != nil {
			b.Fatal(err)
		}
	}
}
