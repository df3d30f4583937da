package greenhouse

import (
	"encoding/csv"
	"os"
	"sort"
	"strconv"
	"strings"
	"testing"
)

// readTable reads a CSV with # comments into one map a row, by column name.
func readTable(t testing.TB, path string) []map[string]string {
	t.Helper()
	f, err := os.Open(path)
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	r := csv.NewReader(f)
	r.Comment = '#'
	records, err := r.ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	var rows []map[string]string
	for _, rec := range records[1:] {
		row := map[string]string{}
		for i, name := range records[0] {
			row[name] = rec[i]
		}
		rows = append(rows, row)
	}
	return rows
}

func number(t testing.TB, s string) float64 {
	t.Helper()
	v, err := strconv.ParseFloat(s, 64)
	if err != nil {
		t.Fatal(err)
	}
	return v
}

// testAerosols reads the optics of the test aerosols, turned round to ascending wavelength.
func testAerosols(t testing.TB) map[string]Aerosol {
	t.Helper()
	out := map[string]Aerosol{}
	rows := readTable(t, "testdata/aerosols.csv")
	sort.SliceStable(rows, func(i, j int) bool { return number(t, rows[i]["wn_lo"]) > number(t, rows[j]["wn_lo"]) })
	for _, row := range rows {
		a := out[row["aerosol"]]
		band := &a.Thermal
		if row["range"] == "solar" {
			band = &a.Solar
		}
		ext, w, g := number(t, row["kext_m2_kg"]), number(t, row["ssa"]), number(t, row["g"])
		band.Ext = append(band.Ext, ext)
		band.Sca = append(band.Sca, ext*w)
		band.GSca = append(band.GSca, ext*w*g)
		out[row["aerosol"]] = a
	}
	return out
}

// grey returns an aerosol with the same extinction [m2/kg], single-scattering albedo and asymmetry in every band.
func grey(thermal, thermalAlbedo, thermalG, solar, solarAlbedo, solarG float64) Aerosol {
	fill := func(n int, ext, w, g float64) Band {
		b := Band{make([]float64, n), make([]float64, n), make([]float64, n)}
		for i := range n {
			b.Ext[i], b.Sca[i], b.GSca[i] = ext, ext*w, ext*w*g
		}
		return b
	}
	return Aerosol{Thermal: fill(len(ThermalEdges())-1, thermal, thermalAlbedo, thermalG), Solar: fill(len(SolarEdges())-1, solar, solarAlbedo, solarG)}
}

func mustQuick(t testing.TB, p Planet) *Quick {
	t.Helper()
	q, err := NewQuick(p)
	if err != nil {
		t.Fatal(err)
	}
	return q
}

func mustWarm(t testing.TB, q *Quick, a Aerosol, burden float64) State {
	t.Helper()
	s, err := q.Warming(a, burden)
	if err != nil {
		t.Fatal(err)
	}
	return s
}

// placements names the vertical distributions of testdata/column_runs.csv.
var placements = map[string]Placement{
	"mixed": {}, "low2": {Kind: Low},
	"s0_5": {Kind: Layer, Bottom: 0, Top: 5e3}, "s10_20": {Kind: Layer, Bottom: 10e3, Top: 20e3}, "s25_35": {Kind: Layer, Bottom: 25e3, Top: 35e3},
}

func isMetal(aerosol string) bool {
	return strings.Contains(aerosol, "rod") || strings.Contains(aerosol, "shell")
}
