package material

import (
	"bufio"
	"errors"
	"fmt"
	"io"
	"math"
	"strconv"
	"strings"

	"gonum.org/v1/gonum/interp"
)

// Row is one line of a table of refractive index: wavelength in vacuum [m], n and k [1].
type Row struct {
	Wavelength, N, K float64
}

const csvHeader = "wavelength_um,n,k"

// ParseCSV reads a table of refractive index: the header line wavelength_um,n,k, then one
// line per wavelength [um] in rising order; blank lines and lines starting with # are
// skipped. Errors carry the line number and the value: no header, wrong number of columns, not a
// number, wavelength outside 1 nm to 10 m, n outside 1e-4 to 1e6, k outside 0 to 1e6, not
// rising, fewer than two rows.
func ParseCSV(r io.Reader) ([]Row, error) {
	return parse(r, true, func(line string) []string { return strings.Split(line, ",") })
}

// ParsePairs reads rows of wavelength [um], n and k separated by blanks, as the
// "tabulated nk" blocks of the open refractive-index database have them; comments and
// errors as [ParseCSV], without a header.
func ParsePairs(text string) ([]Row, error) {
	return parse(strings.NewReader(text), false, strings.Fields)
}

func parse(r io.Reader, header bool, split func(string) []string) ([]Row, error) {
	var rows []Row
	scanner := bufio.NewScanner(r)
	for number := 1; scanner.Scan(); number++ {
		line := strings.TrimSpace(strings.TrimPrefix(scanner.Text(), "\ufeff"))
		if line == "" || line[0] == '#' {
			continue
		}
		if header {
			header = false
			if strings.ReplaceAll(line, " ", "") != csvHeader {
				return nil, fmt.Errorf("line %d: %.40q is not the header %s", number, line, csvHeader)
			}
			continue
		}
		row, err := parseRow(split(line))
		if err == nil && len(rows) > 0 && row.Wavelength <= rows[len(rows)-1].Wavelength {
			err = fmt.Errorf("wavelength %.6g um is not above the %.6g um before it", row.Wavelength*1e6, rows[len(rows)-1].Wavelength*1e6)
		}
		if err != nil {
			return nil, fmt.Errorf("line %d: %w", number, err)
		}
		rows = append(rows, row)
	}
	if err := scanner.Err(); err != nil {
		return nil, fmt.Errorf("reading table: %w", err)
	}
	if len(rows) < 2 {
		return nil, fmt.Errorf("table has %d rows of wavelength, n, k; at least 2 are needed", len(rows))
	}
	return rows, nil
}

func parseRow(fields []string) (Row, error) {
	if len(fields) != 3 {
		return Row{}, fmt.Errorf("%d columns; want 3: wavelength in um, n, k", len(fields))
	}
	var v [3]float64
	for i, f := range fields {
		x, err := strconv.ParseFloat(strings.TrimSpace(f), 64)
		if errors.Is(err, strconv.ErrRange) {
			return Row{}, fmt.Errorf("%.40q is too large; %s", strings.TrimSpace(f), rowRanges)
		} else if err != nil {
			return Row{}, fmt.Errorf("%.40q is not a number", strings.TrimSpace(f))
		}
		v[i] = x
	}
	row := Row{v[0] * 1e-6, v[1], v[2]}
	return row, row.check()
}

// Limits of a [Row]: wavelength [m], n and k [1]; those of the scattering series.
const (
	minTableWavelength, maxTableWavelength = 1e-9, 10
	minTableIndex, maxTableIndex           = 1e-4, 1e6
)

// rowRanges says them.
const rowRanges = "want wavelengths of 0.001 um to 1e+07 um, n of 0.0001 to 1e+06, k of 0 to 1e+06"

func (r Row) check() error {
	const slack = 1e-9
	switch {
	case !(r.Wavelength >= minTableWavelength*(1-slack) && r.Wavelength <= maxTableWavelength*(1+slack)):
		return fmt.Errorf("wavelength %.6g um is outside 0.001 um to 1e+07 um", r.Wavelength*1e6)
	case !(r.N >= minTableIndex && r.N <= maxTableIndex):
		return fmt.Errorf("n = %.6g is outside 0.0001 to 1e+06", r.N)
	case r.K < 0:
		return fmt.Errorf("k = %.6g is negative; want 0 to 1e+06: with exp(-i omega t) absorption is k > 0", r.K)
	case !(r.K <= maxTableIndex):
		return fmt.Errorf("k = %.6g is outside 0 to 1e+06", r.K)
	}
	return nil
}

// NewTable returns a material from a user's table, density in kg/m3. The index is linear in
// ln(wavelength) between rows. Outside the rows it is an error, or with extend the end
// values are held from 1 nm to 10 m; [Material.HeldShare] says how much rests on that.
// Where the last row has k > n the material counts as a conductor at zero frequency,
// else its permittivity there is the last n^2 - k^2: a guess the table cannot support further.
// Errors: no name, density not positive, fewer than two rows, rows not rising or unphysical.
func NewTable(name string, density float64, rows []Row, extend bool) (*Material, error) {
	if name == "" {
		return nil, errors.New("material table has no name")
	}
	if !(density > 0) || math.IsInf(density, 0) {
		return nil, fmt.Errorf("material %s: density %g kg/m3 is outside 0 to infinity, both excluded", name, density)
	}
	if len(rows) < 2 {
		return nil, fmt.Errorf("material %s: table has %d rows; at least 2 are needed", name, len(rows))
	}
	x := make([]float64, len(rows))
	n := make([]float64, len(rows))
	k := make([]float64, len(rows))
	for i, r := range rows {
		if err := r.check(); err != nil {
			return nil, fmt.Errorf("material %s: row %d: %w", name, i+1, err)
		}
		x[i], n[i], k[i] = math.Log(r.Wavelength), r.N, r.K
		if i > 0 && !(x[i] > x[i-1]) {
			return nil, fmt.Errorf("material %s: row %d: wavelength %.6g um is not above the %.6g um before it", name, i+1, r.Wavelength*1e6, rows[i-1].Wavelength*1e6)
		}
	}
	var nn, kk interp.PiecewiseLinear
	if err := errors.Join(nn.Fit(x, n), kk.Fit(x, k)); err != nil {
		return nil, fmt.Errorf("material %s: %w", name, err)
	}
	first, last := rows[0], rows[len(rows)-1]
	static := math.Max(1, last.N*last.N-last.K*last.K)
	if last.K > last.N {
		static = math.Inf(1)
	}
	m := &Material{
		Name: name, Density: density, Source: "user's table",
		MinWavelength: first.Wavelength, MaxWavelength: last.Wavelength,
		DataMin: first.Wavelength, DataMax: last.Wavelength,
		FitNote:     "linear in ln(wavelength) between rows",
		Conducts:    Unknown,
		Combustible: Unknown,
		axes: []Axis{{Weight: 1, StaticPermittivity: static,
			law: &points{n: &nn, k: &kk, first: first.Wavelength, last: last.Wavelength}}},
	}
	if extend {
		m.MinWavelength, m.MaxWavelength = minTableWavelength, maxTableWavelength
		m.heldBelow, m.heldAbove = first.Wavelength > m.MinWavelength, last.Wavelength < m.MaxWavelength
		m.FitNote += "; end values held outside the rows"
	}
	return m, nil
}
