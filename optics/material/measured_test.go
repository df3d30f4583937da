package material

import (
	"math"
	"os"
	"path/filepath"
	"strconv"
	"strings"
	"testing"

	"gonum.org/v1/gonum/floats/scalar"
)

// measuredFolder is where the published tables lie beside a checkout, if they do.
var measuredFolder = filepath.Join("..", "..", "..", "shared", "data", "optical-constants")

// measuredRow is a row of a published table, wavelength in um; k may be negative there.
type measuredRow struct{ wavelength, n, k float64 }

// misprints are wavelengths [um] that do not fit the even steps of wavenumber around them.
var misprints = map[float64]float64{3.6911: 3.8911, 23.3095: 23.8095, 27.0220: 27.0270}

func measured(t *testing.T, name string) []measuredRow {
	t.Helper()
	file, err := os.ReadFile(filepath.Join(measuredFolder, name+".csv"))
	if os.IsNotExist(err) {
		t.Skip("the published tables are not beside this checkout")
	}
	if err != nil {
		t.Fatal(err)
	}
	var rows []measuredRow
	for line := range strings.Lines(string(file)) {
		fields, ok := numbers(strings.TrimSpace(line))
		if !ok {
			continue
		}
		if right, wrong := misprints[fields[0]]; wrong {
			fields[0] = right
		}
		rows = append(rows, measuredRow{fields[0], fields[1], fields[2]})
	}
	if len(rows) < 20 {
		t.Fatalf("%s: only %d rows", name, len(rows))
	}
	return rows
}

// Every point of the published tables within the stated errors, n and k apart. The stated rms is
// that of the held-out points or of all, whichever is larger, so half a per cent of it is allowed for rounding.
func TestIndex_measuredTables(t *testing.T) {
	tables := map[string][]string{"hematite": {"hematite-ordinary", "hematite-extraordinary"}}
	for _, s := range substances() {
		t.Run(s.name, func(t *testing.T) {
			names := tables[s.name]
			if names == nil {
				names = []string{s.name}
			}
			m := s.build()
			if s.line != nil {
				rows := measured(t, "iron")
				checkErrors(t, m, 0, rows, 0, 0, [4]float64{s.line.nRMS, s.line.nWorst, s.line.kRMS, s.line.kWorst})
				return
			}
			for i, a := range s.axes {
				c := a.curve
				rows := measured(t, names[i])
				if s.name == "iron" {
					for _, r := range measured(t, "iron-querry") {
						if r.wavelength <= 0.62 {
							rows = append(rows, r)
						}
					}
				}
				var used []measuredRow
				for _, r := range rows {
					if r.wavelength >= math.Max(c.first, 0.2)*(1-1e-9) && r.wavelength <= c.last*(1+1e-9) {
						used = append(used, r)
					}
				}
				kFrom := c.nKnots[0]
				if c.kKnots != nil {
					kFrom = c.kKnots[0]
				}
				checkErrors(t, m, i, used, c.kLeast, kFrom, [4]float64{c.nRMS, c.nWorst, c.kRMS, c.kWorst})
			}
		})
	}
}

func checkErrors(t *testing.T, m *Material, axis int, rows []measuredRow, kLeast, kFrom float64, stated [4]float64) {
	t.Helper()
	var sum, worst, count [2]float64
	for _, r := range rows {
		got, err := m.IndexAlong(axis, r.wavelength*1e-6)
		if err != nil {
			t.Fatal(err)
		}
		add := func(i int, e float64) {
			sum[i] += e * e
			worst[i] = math.Max(worst[i], math.Abs(e))
			count[i]++
		}
		add(0, real(got)/r.n-1)
		if r.k > 0 && r.k >= kLeast && r.wavelength >= kFrom {
			add(1, imag(got)/r.k-1)
		}
	}
	for i, name := range []string{"n", "k"} {
		if rms := math.Sqrt(sum[i] / count[i]); rms > stated[2*i]*1.005+5e-5 || worst[i] > stated[2*i+1]*1.005+5e-5 {
			t.Errorf("%s axis %d, %s: rms %.4f and worst %.4f of %g points, stated %.4f and %.4f", m.Name, axis, name, rms, worst[i], count[i], stated[2*i], stated[2*i+1])
		}
	}
	if count[0] < 20 || count[1] < 10 {
		t.Errorf("%s: only %g and %g points", m.Name, count[0], count[1])
	}
}

// The rows of the ordinary axis of hematite that would amplify are the ones the note names.
func TestMeasured_hematiteAmplifies(t *testing.T) {
	n, least := 0, 0.0
	for _, r := range measured(t, "hematite-ordinary") {
		if r.k < 0 {
			n++
			least = math.Min(least, r.k)
			if r.wavelength < 47.6 {
				t.Errorf("k = %g at %g um", r.k, r.wavelength)
			}
		}
	}
	if n != 11 || !scalar.EqualWithinAbs(least, -0.148, 1e-9) {
		t.Errorf("%d rows with k down to %g", n, least)
	}
}

// numbers reads the three columns of a row, and says no to a header or comment.
func numbers(line string) ([3]float64, bool) {
	var out [3]float64
	fields := strings.Split(line, ",")
	if len(fields) != 3 {
		return out, false
	}
	for i, f := range fields {
		x, err := strconv.ParseFloat(f, 64)
		if err != nil {
			return out, false
		}
		out[i] = x
	}
	return out, true
}
