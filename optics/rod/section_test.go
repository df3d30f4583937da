package rod

import (
	"encoding/csv"
	"math"
	"math/cmplx"
	"os"
	"strconv"
	"strings"
	"testing"

	"gonum.org/v1/gonum/floats/scalar"
	"pgregory.net/rapid"
)

// reference is one row of testdata/rods.csv or testdata/long.csv, in SI units, and the values of its
// other columns.
type reference struct {
	material                     string
	length, diameter, wavelength float64
	m                            complex128
	values                       map[string]float64
}

func readReferences(t testing.TB, name string) []reference {
	t.Helper()
	f, err := os.Open(name)
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
	var out []reference
	for _, line := range lines[1:] {
		v := make(map[string]float64)
		for i, s := range line[1:] {
			if v[lines[0][i+1]], err = strconv.ParseFloat(s, 64); err != nil {
				t.Fatal(err)
			}
		}
		out = append(out, reference{line[0], v["L_um"] * 1e-6, v["d_um"] * 1e-6, v["lambda_um"] * 1e-6, complex(v["n"], v["k"]), v})
	}
	if len(out) < 30 {
		t.Fatalf("%s: only %d rows", name, len(out))
	}
	return out
}

func mustSection(t testing.TB, wavelength, diameter float64, m complex128, options Options) *Section {
	t.Helper()
	s, err := NewSection(wavelength, diameter, m, options)
	if err != nil {
		t.Fatal(err)
	}
	return s
}

func mustRod(t testing.TB, s *Section, length float64) Result {
	t.Helper()
	r, err := s.Rod(length)
	if err != nil {
		t.Fatal(err)
	}
	return r
}

// spread collects errors.
type spread struct {
	n          int
	sum, worst float64
}

func (s *spread) add(err float64) {
	s.n++
	s.sum += err * err
	s.worst = math.Max(s.worst, math.Abs(err))
}

func (s *spread) rms() float64 { return math.Sqrt(s.sum / float64(s.n)) }

// Expected values: testdata/rods.csv, see its header. Five figures are printed.
func TestRod_independentSolver(t *testing.T) {
	columns := make(map[string]*spread)
	add := func(column string, err float64) {
		if columns[column] == nil {
			columns[column] = new(spread)
		}
		columns[column].add(err)
	}
	memo := NewMemo()
	for _, r := range readReferences(t, "testdata/rods.csv") {
		open := mustSection(t, r.wavelength, r.diameter, r.m, Options{OpenEnds: true})
		flat := mustSection(t, r.wavelength, r.diameter, r.m, Options{})
		o, f, axis := mustRod(t, open, r.length), mustRod(t, flat, r.length), open.axial(r.length, 0)
		for column, got := range map[string]float64{
			"Cabs_um2": o.Abs, "Csca_um2": o.Sca, "Cext_um2": o.Ext, "Cabs_flatends_um2": f.Abs, "Csca_flatends_um2": f.Sca,
			"Cabs_TM0": axis.Abs, "Csca_TM0": axis.Sca,
		} {
			add(column, got*1e12/r.values[column]-1)
		}
		add("g_TM0", axis.GSca/axis.Sca-r.values["g_TM0"])
		add("residual", (axis.Ext-axis.Abs-axis.Sca)/axis.Ext)
		standard := mustRod(t, mustSection(t, r.wavelength, r.diameter, r.m, Options{Method: Standard, Memo: memo}), r.length)
		add("memo", standard.Abs/f.Abs-1)
		add("memo", standard.Sca/f.Sca-1)
		// Below 0.02 lambda in diameter the axial part is nearly all of the scattering.
		if r.diameter < 0.02*r.wavelength && math.Abs(f.G-r.values["g_TM0"]) > 0.005 {
			t.Errorf("%+v: asymmetry %.4f", r, f.G)
		}
		if f.Err > 0.01 {
			t.Errorf("%+v: estimated error %.3f", r, f.Err)
		}
	}
	for column, limit := range map[string]float64{
		"Cabs_um2": 2e-4, "Csca_um2": 2e-4, "Cext_um2": 2e-4, "Cabs_flatends_um2": 2e-4, "Csca_flatends_um2": 2e-4,
		"Cabs_TM0": 2e-4, "Csca_TM0": 2e-4, "g_TM0": 1e-4, "residual": 1e-12, "memo": 5e-7,
	} {
		if s := columns[column]; s.worst > limit {
			t.Errorf("%s: rms %.1e, worst %.1e, limit %.1e", column, s.rms(), s.worst, limit)
		} else {
			t.Logf("%s: rms %.1e, worst %.1e", column, s.rms(), s.worst)
		}
	}
}

// Expected values: testdata/long.csv, see its header; rods up to 25 wavelengths.
func TestRod_longSolver(t *testing.T) {
	for _, r := range readReferences(t, "testdata/long.csv") {
		if math.Pi*r.diameter/r.wavelength > 1 {
			continue // fades into the cylinder
		}
		wantAbs, wantSca := r.values["Cabs_um2"]*1e-12, r.values["Csca_um2"]*1e-12
		got := mustRod(t, mustSection(t, r.wavelength, r.diameter, r.m, Options{}), r.length)
		if !scalar.EqualWithinRel(got.Abs, wantAbs, 2e-3) || !scalar.EqualWithinRel(got.Sca, wantSca, 2e-3) {
			t.Errorf("%s %+v: absorption %+.2e, scattering %+.2e off", r.material, r.values, got.Abs/wantAbs-1, got.Sca/wantSca-1)
		}
		for _, method := range []string{Standard, Fast} {
			got := mustRod(t, mustSection(t, r.wavelength, r.diameter, r.m, Options{Method: method}), r.length)
			if e := math.Max(math.Abs(got.Abs/wantAbs-1), math.Abs(got.Sca/wantSca-1)); e > 3*got.Err {
				t.Errorf("%s, %s %+v: error %.3f against an estimate of %.3f", method, r.material, r.values, e, got.Err)
			}
		}
	}
}

// Stated errors of the doc comment of [Section.Rod]: sine modes against the solver.
func TestRod_fast(t *testing.T) {
	var abs, sca, longAbs, longSca spread
	seen := make(map[complex128]bool)
	for _, r := range append(readReferences(t, "testdata/rods.csv"), readReferences(t, "testdata/long.csv")...) {
		if seen[r.m] {
			continue
		}
		seen[r.m] = true
		for _, aspect := range []float64{12, 20, 40, 100, 200, 400, 1000} {
			for _, l := range []float64{0.02, 0.05, 0.1, 0.2, 0.35, 0.5, 0.8, 1.2, 2, 3, 5, 7.9} {
				length := l * r.wavelength
				d := length / aspect
				if math.Pi*d > r.wavelength {
					continue
				}
				fast := mustRod(t, mustSection(t, r.wavelength, d, r.m, Options{Method: Fast}), length)
				want := mustRod(t, mustSection(t, r.wavelength, d, r.m, Options{}), length)
				if fast.Method != MethodSines || want.Method != MethodSolver {
					t.Fatalf("methods %q and %q", fast.Method, want.Method)
				}
				abs.add(fast.Abs/want.Abs - 1)
				sca.add(fast.Sca/want.Sca - 1)
				if aspect >= 20 {
					longAbs.add(fast.Abs/want.Abs - 1)
					longSca.add(fast.Sca/want.Sca - 1)
				}
			}
		}
	}
	t.Logf("%d indices, %d rods: abs %.4f %.4f sca %.4f %.4f; from 20 diameters abs %.4f %.4f sca %.4f %.4f", len(seen), abs.n,
		abs.rms(), abs.worst, sca.rms(), sca.worst, longAbs.rms(), longAbs.worst, longSca.rms(), longSca.worst)
	if abs.rms() > 0.03 || abs.worst > 0.16 || sca.rms() > 0.028 || sca.worst > 0.16 ||
		longAbs.rms() > 0.025 || longAbs.worst > 0.15 || longSca.rms() > 0.022 || longSca.worst > 0.09 {
		t.Error("sine modes are worse than stated")
	}
}

// Continuation beyond the join against the solver itself, up to 60 wavelengths; iron at 1 um and
// aluminium at 0.5, 1 and 2 um (indices from published tables, rounded).
func TestRod_longContinuation(t *testing.T) {
	for _, c := range []struct {
		wavelength                        float64
		m                                 complex128
		referenceAbs, standardAbs, scaRMS float64
	}{
		{1e-6, 2.9 + 3.35i, 0.002, 0.002, 0.002},
		{0.5e-6, 0.78 + 6.1i, 0.006, 0.01, 0.004},
		{1e-6, 1.35 + 9.6i, 0.006, 0.01, 0.005},
		{2e-6, 2.15 + 20.7i, 0.02, 0.08, 0.02},
	} {
		for _, method := range []string{Reference, Standard} {
			var abs, sca spread
			for _, d := range []float64{0.02e-6, 0.05e-6, 0.1e-6} {
				s := mustSection(t, c.wavelength, d, c.m, Options{Method: method})
				exact := mustSection(t, c.wavelength, d, c.m, Options{Join: MaxJoin})
				for _, l := range []float64{10.3, 14.7, 21.1, 33.3, 39.9, 47.2, 59} {
					got, want := mustRod(t, s, l*c.wavelength), mustRod(t, exact, l*c.wavelength)
					if want.Method != MethodSolver {
						t.Fatalf("method %q", want.Method)
					}
					abs.add(got.Abs/want.Abs - 1)
					sca.add(got.Sca/want.Sca - 1)
					if e := math.Abs(got.Abs/want.Abs - 1); e > 3*got.Err {
						t.Errorf("%s: d = %g, %g wavelengths: error %.4f, estimate %.4f", method, d, l, e, got.Err)
					}
				}
			}
			limit := c.referenceAbs
			if method == Standard {
				limit = c.standardAbs
			}
			t.Logf("%s, m = %g at %g m: abs rms %.4f worst %.4f, sca rms %.4f worst %.4f", method, c.m, c.wavelength, abs.rms(), abs.worst, sca.rms(), sca.worst)
			if abs.rms() > limit || sca.rms() > c.scaRMS {
				t.Errorf("%s, m = %g: absorption %.4f rms, scattering %.4f rms", method, c.m, abs.rms(), sca.rms())
			}
		}
	}
}

// Long-wave limit down to radio: absorption k Im<alpha>, scattering k^4 <|alpha|^2>/6 pi.
func TestRod_quasiStatic(t *testing.T) {
	const length, d = 9e-6, 0.16e-6
	for _, m := range []complex128{9.22 + 8.502i, 238 + 306i} {
		for _, wavelength := range []float64{3e-3, 9.4e-3, 0.75} {
			axial, transverse, err := Polarizability(length, d, m*m)
			if err != nil {
				t.Fatal(err)
			}
			k := 2 * math.Pi / wavelength
			abs := k * imag(axial+2*transverse) / 3
			a, b := cmplx.Abs(axial), cmplx.Abs(transverse)
			sca := k * k * k * k * (a*a + 2*b*b) / 3 / (6 * math.Pi)
			for _, method := range []string{Reference, Standard, Fast} {
				got := mustRod(t, mustSection(t, wavelength, d, m, Options{Method: method, Memo: NewMemo()}), length)
				tolerance := 0.01 // eddy currents are absent from the static value: small while |m| k d/2 << 1
				if method == Fast {
					tolerance = 0.04
				}
				if !scalar.EqualWithinRel(got.Abs, abs, tolerance) || !scalar.EqualWithinRel(got.Sca, sca, tolerance) {
					t.Errorf("%s, m = %g at %g m: abs %g, sca %g; static %g, %g", method, m, wavelength, got.Abs, got.Sca, abs, sca)
				}
				if math.Abs(got.G) > 1e-3 {
					t.Errorf("asymmetry %g of a dipole", got.G)
				}
			}
		}
	}
}

// A thin conducting cylinder of half-length l and radius a has the axial polarizability
// (4 pi/3) l^3/(ln(4l/a) - 7/3) to second order in 1/ln (Landau & Lifshitz, Electrodynamics of
// Continuous Media, 2nd ed., section 2; from memory).
func TestPolarizability_slenderConductor(t *testing.T) {
	const l, a = 1.0, 1e-5
	axial, _, err := Polarizability(2*l, 2*a, cmplx.Inf())
	if err != nil {
		t.Fatal(err)
	}
	want := 4 * math.Pi / 3 / (math.Log(4*l/a) - 7./3)
	if !scalar.EqualWithinRel(real(axial), want, 0.01) {
		t.Errorf("axial polarizability %g, want %g", real(axial), want)
	}
}

// A faint rod far thinner than the wave polarises like its bulk: axial alpha near V (eps - 1)
// (closed form as d/L -> 0).
func TestPolarizability_faint(t *testing.T) {
	const eps = 1.7
	axial, transverse, err := Polarizability(1e-5, 1e-8, eps)
	if err != nil {
		t.Fatal(err)
	}
	v := math.Pi / 4 * 1e-16 * 1e-5
	if r := real(axial) / (v * (eps - 1)); r > 1 || r < 0.99 {
		t.Errorf("axial polarizability %g of the bulk's", r)
	}
	if want := 2 * v * (eps - 1) / (eps + 1); !scalar.EqualWithinRel(real(transverse), want, 1e-12) {
		t.Errorf("transverse polarizability %g, want %g", real(transverse), want)
	}
}

// No jump where the long rod joins.
func TestRod_join(t *testing.T) {
	m := complex(1.4, 15.6) // aluminium-like: the hard case
	for method, joins := range map[string][]float64{Reference: {30}, Standard: {8, 16}, Fast: {8}} {
		for _, d := range []float64{0.05e-6, 0.1e-6, 0.2e-6} {
			s := mustSection(t, 1e-6, d, m, Options{Method: method})
			for i, join := range joins {
				length := join*1e-6 - endLength*d
				below, above := mustRod(t, s, length*(1-1e-6)), mustRod(t, s, length*(1+1e-6))
				if math.Abs(above.Abs/below.Abs-1) > 1e-4 || math.Abs(above.Sca/below.Sca-1) > 1e-4 || math.Abs(above.G-below.G) > 1e-4 {
					t.Errorf("%s, d = %g: %+v below and %+v above %g wavelengths", method, d, below, above, join)
				}
				if (below.Method == above.Method) != (i > 0) {
					t.Errorf("%s: methods %q and %q at %g wavelengths", method, below.Method, above.Method, join)
				}
			}
		}
	}
}

// A memory changes nothing but the time, whatever the order of calls, also for the ends of long rods.
func TestMemo_sameValues(t *testing.T) {
	forward, backward := NewMemo(), NewMemo()
	options := func(m *Memo) Options { return Options{Method: Standard, Memo: m} }
	const length, d = 8e-6, 80e-9
	var wavelengths []float64
	for l := 0.3e-6; l < 1e-3; l *= 1.11 {
		wavelengths = append(wavelengths, l)
	}
	index := func(l float64) complex128 { return complex(2+1e6*l, 3+3e6*l) }
	first := make([]Result, len(wavelengths))
	for i, l := range wavelengths {
		first[i] = mustRod(t, mustSection(t, l, d, index(l), options(forward)), length)
		direct := mustRod(t, mustSection(t, l, d, index(l), options(nil)), length)
		tolerance := 1e-6
		if direct.Method == MethodSolverEnds {
			tolerance = 1e-4
		}
		if !scalar.EqualWithinRel(first[i].Abs, direct.Abs, tolerance) || !scalar.EqualWithinRel(first[i].Sca, direct.Sca, tolerance) || math.Abs(first[i].G-direct.G) > tolerance {
			t.Errorf("%g m: absorption %.1e, scattering %.1e, asymmetry %.1e off", l, first[i].Abs/direct.Abs-1, first[i].Sca/direct.Sca-1, first[i].G-direct.G)
		}
	}
	for i := len(wavelengths) - 1; i >= 0; i-- {
		l := wavelengths[i]
		if got := mustRod(t, mustSection(t, l, d, index(l), options(backward)), length); got != first[i] {
			t.Errorf("%g m: %+v backwards, %+v forwards", l, got, first[i])
		}
	}
}

// More shapes than it keeps.
func TestMemo_full(t *testing.T) {
	memo := NewMemo()
	for i := range memoShapes + 10 {
		length := 2e-6 * (1 + float64(i)/50)
		s := mustSection(t, 10e-6, 80e-9, 5+15i, Options{Memo: memo})
		direct := mustSection(t, 10e-6, 80e-9, 5+15i, Options{})
		if got, want := mustRod(t, s, length), mustRod(t, direct, length); !scalar.EqualWithinRel(got.Abs, want.Abs, 1e-6) {
			t.Errorf("length %g: %g and %g", length, got.Abs, want.Abs)
		}
	}
	if len(memo.shapes) > memoShapes {
		t.Errorf("%d shapes kept", len(memo.shapes))
	}
}

func TestRod_properties(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		log := func(lo, hi float64, name string) float64 {
			return math.Exp(rapid.Float64Range(math.Log(lo), math.Log(hi)).Draw(t, name))
		}
		d := log(2e-9, 2e-6, "d")
		method := rapid.SampledFrom([]string{Reference, Standard, Fast}).Draw(t, "method")
		options := Options{Method: method, OpenEnds: rapid.Bool().Draw(t, "open")}
		if rapid.Bool().Draw(t, "memo") {
			options.Memo = NewMemo()
		}
		s, err := NewSection(log(0.2e-6, 1, "wavelength"), d, complex(log(0.1, 300, "n"), log(1e-3, 300, "k")), options)
		if err != nil {
			t.Fatal(err)
		}
		r, err := s.Rod(d * log(MinAspect*1.0001, 1e5, "aspect"))
		if err != nil {
			t.Fatal(err)
		}
		for _, v := range []float64{r.Ext, r.Sca, r.Abs, r.G, r.Err} {
			if math.IsNaN(v) || math.IsInf(v, 0) {
				t.Fatalf("%+v is not finite", r)
			}
		}
		if r.Abs < 0 || r.Sca < 0 || r.Ext < r.Abs || math.Abs(r.G) > 1 || r.Err <= 0 || r.Method == "" {
			t.Fatalf("%+v breaks Ext >= Abs >= 0 or |G| <= 1", r)
		}
	})
}

func TestRod_refuses(t *testing.T) {
	s := mustSection(t, 10e-6, 1e-7, 5+20i, Options{})
	for _, l := range []float64{0.99e-6, 0, -1, math.NaN(), math.Inf(1), 100} {
		if r, err := s.Rod(l); err == nil {
			t.Errorf("Rod(%g) = %+v, want an error", l, r)
		}
	}
	if _, err := s.Rod(0.99e-6); err == nil || !strings.Contains(err.Error(), "9.9") || !strings.Contains(err.Error(), "10") {
		t.Errorf("error %v names neither value nor limit", err)
	}
	for _, c := range []struct {
		wavelength, d float64
		options       Options
	}{
		{10e-6, 0, Options{}}, {math.Inf(1), 1e-7, Options{}}, {10e-6, math.NaN(), Options{}},
		{10e-6, 1e-7, Options{Method: "exact"}}, {10e-6, 1e-7, Options{Join: 3}}, {10e-6, 1e-7, Options{Join: 61}}, {10e-6, 1e-7, Options{Join: math.NaN()}},
	} {
		if _, err := NewSection(c.wavelength, c.d, 5+20i, c.options); err == nil {
			t.Errorf("%+v accepted", c)
		}
	}
	if _, _, err := Polarizability(0.9e-6, 1e-7, 5); err == nil {
		t.Error("Polarizability of a short rod accepted")
	}
}

// At zero frequency 0.75 rhoL/d = 3.75e-9 ohm m adds to 2.65e-8 (closed form, [Dingle1950]):
// the conductivity, which is Im m^2 at radio, falls in that ratio.
func TestSurfaceScatteredIndex(t *testing.T) {
	const wavelength, rho = 0.75, 2.65e-8
	m2 := 1 + complex(0, wavelength*freeSpaceImpedance/(2*math.Pi*rho))
	got := SurfaceScatteredIndex(cmplx.Sqrt(m2), wavelength, 100e-9, 5e-16)
	if r := imag(m2) / imag(got*got); !scalar.EqualWithinRel(r, 1+3.75e-9/rho, 1e-6) {
		t.Errorf("conductivity falls %g-fold, want %g", r, 1+3.75e-9/rho)
	}
	if m := SurfaceScatteredIndex(5+20i, 10e-6, 1e-7, 0); m != 5+20i {
		t.Errorf("no surface term: %g", m)
	}
}

// Limits of the internal impedance (closed forms): uniform current i eta/(k pi a^2 (eps - 1)) in
// a very thin wire, (1 - i) Rs/(2 pi a), Rs = eta k delta/2 with delta = 1/(k Im m), in a thick one.
func TestInternalImpedance_limits(t *testing.T) {
	m := complex(30, 30.1)
	k := 2 * math.Pi / 10e-6
	a := 1e-9
	want := complex(0, freeSpaceImpedance/(k*math.Pi*a*a)) / (m*m - 1)
	if got := InternalImpedance(10e-6, a, m); cmplx.Abs(got/want-1) > 1e-3 {
		t.Errorf("thin: %g, want %g", got, want)
	}
	a = 1e-6
	rs := freeSpaceImpedance / 2 / imag(m)
	want = complex(rs, -rs) / complex(2*math.Pi*a, 0)
	if got := InternalImpedance(10e-6, a, m); cmplx.Abs(got/want-1) > 0.05 { // curvature, delta/2a
		t.Errorf("thick: %g, want %g", got, want)
	}
	// The series for very thin wires meets the Bessel form.
	in, out := InternalImpedance(1e-3, 0.99e-3*1e-3/(2*math.Pi*cmplx.Abs(m)), m), InternalImpedance(1e-3, 1.01e-3*1e-3/(2*math.Pi*cmplx.Abs(m)), m)
	if r := cmplx.Abs(in / out); !scalar.EqualWithinRel(r, math.Pow(1.01/0.99, 2), 1e-5) {
		t.Errorf("series and Bessel form differ: ratio %g", r)
	}
}

// A rod that absorbs nothing has a finite error whatever its length and method, and no
// absorption.
func TestRod_lossless(t *testing.T) {
	for _, method := range []string{Standard, Reference, Fast} {
		for _, wavelength := range []float64{0.5e-6, 1e-6, 3e-6, 20e-6} {
			s, err := NewSection(wavelength, 160e-9, 1.5, Options{Method: method})
			if err != nil {
				t.Fatal(err)
			}
			for _, length := range []float64{2e-6, 9e-6, 40e-6} {
				r, err := s.Rod(length)
				if err != nil {
					t.Fatal(err)
				}
				if math.IsNaN(r.Err) || math.IsInf(r.Err, 0) || r.Err <= 0 || !(r.Sca > 0) || r.Abs > 1e-9*r.Sca {
					t.Errorf("%s, %g m at %g m: %+v", method, length, wavelength, r)
				}
			}
		}
	}
}
