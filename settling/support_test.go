package settling

import (
	"encoding/csv"
	"os"
	"path/filepath"
	"strconv"
	"testing"

	"hazewright/settling/atmosphere"
)

// row is one line of a table under testdata, by column name.
type row map[string]string

func (r row) num(t testing.TB, name string) float64 {
	t.Helper()
	v, err := strconv.ParseFloat(r[name], 64)
	if err != nil {
		t.Fatalf("column %s: %v", name, err)
	}
	return v
}

func table(t testing.TB, name string) []row {
	t.Helper()
	f, err := os.Open(filepath.Join("testdata", name))
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	r := csv.NewReader(f)
	r.Comment = '#'
	lines, err := r.ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	var rows []row
	for _, line := range lines[1:] {
		m := row{}
		for i, name := range lines[0] {
			m[name] = line[i]
		}
		rows = append(rows, m)
	}
	if len(rows) == 0 {
		t.Fatalf("%s holds no rows", name)
	}
	return rows
}

// must returns v; a test that sets up something invalid stops here.
func must[T any](v T, err error) T {
	if err != nil {
		panic(err)
	}
	return v
}

func gasOf(name string) atmosphere.Gas {
	return must(atmosphere.NewGas([]atmosphere.Fraction{{Species: name, Mole: 1}}))
}

func state(name string, pressure, temperature float64) atmosphere.State {
	return must(gasOf(name).State(pressure, temperature))
}

// thin is the column most tests use: carbon dioxide, 610 Pa, 210 K, 3.71 m/s2.
func thin() atmosphere.Column {
	return must(atmosphere.NewColumn(gasOf("co2"), 3.71, 610, must(atmosphere.Isothermal(210))))
}

const (
	iron = 7874.0       // density [kg/m3]
	year = 365.25 * day // [s]
	day  = 86400.0      // [s]
)
