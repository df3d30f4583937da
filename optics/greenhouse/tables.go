package greenhouse

import (
	_ "embed"
	"encoding/csv"
	"fmt"
	"math"
	"slices"
	"sort"
	"strconv"
	"strings"
)

//go:embed data/baseline.csv
var baselineCSV string

//go:embed data/dust.csv
var dustCSV string

// numbers reads a comma-separated table: lines starting with # are comment, the first row names the columns.
func numbers(name, text string, columns int) ([][]float64, error) {
	r := csv.NewReader(strings.NewReader(text))
	r.Comment = '#'
	r.FieldsPerRecord = columns
	records, err := r.ReadAll()
	if err != nil {
		return nil, fmt.Errorf("reading table %s: %w", name, err)
	}
	if len(records) < 2 {
		return nil, fmt.Errorf("table %s has no rows", name)
	}
	rows := make([][]float64, len(records)-1)
	for i, record := range records[1:] {
		rows[i] = make([]float64, columns)
		for j, field := range record {
			v, err := strconv.ParseFloat(field, 64)
			if err != nil || math.IsNaN(v) || math.IsInf(v, 0) {
				return nil, fmt.Errorf("table %s, row %d, column %d: %q is not a finite number", name, i+1, j+1, field)
			}
			rows[i][j] = v
		}
	}
	return rows, nil
}

// emissionTable describes per thermal band how the planet without aerosol radiates; see the package comment.
type emissionTable struct {
	emission, transmission, back []float64
}

// baselineEmission interpolates the embedded baseline table linearly in the dust optical depth, which must lie within
// the table (0 to 1).
func baselineEmission(dust float64) (emissionTable, error) {
	rows, err := numbers("baseline.csv", baselineCSV, 7)
	if err != nil {
		return emissionTable{}, err
	}
	edges := ThermalEdges()
	n := len(edges) - 1
	if len(rows)%n != 0 {
		return emissionTable{}, fmt.Errorf("table baseline.csv has %d rows, not a multiple of %d bands", len(rows), n)
	}
	depths := make([]float64, len(rows)/n)
	for i := range depths {
		depths[i] = rows[i*n][0]
	}
	if dust < depths[0] || dust > depths[len(depths)-1] {
		return emissionTable{}, fmt.Errorf("dust optical depth %g is outside the baseline table, %g to %g", dust, depths[0], depths[len(depths)-1])
	}
	k := max(1, sort.SearchFloat64s(depths, dust))
	share := (dust - depths[k-1]) / (depths[k] - depths[k-1])
	at := func(b, column int) float64 { // rows run upward in wavenumber, bands upward in wavelength
		low, high := rows[(k-1)*n+n-1-b], rows[k*n+n-1-b]
		return low[column] + share*(high[column]-low[column])
	}
	t := emissionTable{make([]float64, n), make([]float64, n), make([]float64, n)}
	for b := range n {
		if high := rows[n-1-b][3]; math.Abs(wavelength(high)/edges[b]-1) > 1e-9 {
			return emissionTable{}, fmt.Errorf("table baseline.csv: band edge %g 1/cm is not that of the program", high)
		}
		t.emission[b], t.transmission[b], t.back[b] = at(b, 4), at(b, 5), at(b, 6)
	}
	return t, nil
}

// dustBand returns extinction, scattering and scattering times asymmetry of natural dust per band, relative to its
// extinction at 0.67 um, from the embedded rough table at the geometric middle of each band: extinction interpolated in
// log against log wavelength, the others against log wavelength.
func dustBand(edges []float64) (Band, error) {
	rows, err := numbers("dust.csv", dustCSV, 4)
	if err != nil {
		return Band{}, err
	}
	n := len(edges) - 1
	out := Band{Ext: make([]float64, n), Sca: make([]float64, n), GSca: make([]float64, n)}
	for b := range n {
		x := math.Sqrt(edges[b]*edges[b+1]) * 1e6
		k, _ := slices.BinarySearchFunc(rows, x, func(row []float64, x float64) int {
			if row[0] < x {
				return -1
			}
			return 1
		})
		if k == 0 || k == len(rows) {
			return Band{}, fmt.Errorf("table dust.csv: %g um is outside it", x)
		}
		low, high := rows[k-1], rows[k]
		s := math.Log(x/low[0]) / math.Log(high[0]/low[0])
		ext := low[1] * math.Pow(high[1]/low[1], s)
		sca := ext * (low[2] + s*(high[2]-low[2]))
		out.Ext[b], out.Sca[b], out.GSca[b] = ext, sca, sca*(low[3]+s*(high[3]-low[3]))
	}
	return out, nil
}
