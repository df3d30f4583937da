package rod

import (
	"encoding/csv"
	"math"
	"math/cmplx"
	"os"
	"strconv"
	"testing"

	"gonum.org/v1/gonum/floats/scalar"
	"pgregory.net/rapid"
)

// reference is one row of testdata/rods.csv or testdata/long.csv, in SI units.
type reference struct {
	material                     string
	length, diameter, wavelength float64
	m                            complex128
	abs, sca, g                  float64
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
		var v [8]float64
		for i, s := range line[1:] {
			if v[i], err = strconv.ParseFloat(s, 64); err != nil {
				t.Fatal(err)
			}
		}
		out = append(out, reference{line[0], v[0] * 1e-6, v[1] * 1e-6, v[2] * 1e-6, complex(v[3], v[4]), v[5] * 1e-12, v[6] * 1e-12, v[7]})
	}
	if len(out) < 30 {
		t.Fatalf("%s: only %d rows", name, len(out))
	}
	return out
}

// spread collects relative errors.
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

func TestRod_independentSolver(t *testing.T) {
	// Stated error of the doc comment of Section.Rod: rms and worst, absorption and scattering.
	for _, c := range []struct {
		file, material                     string
		absRMS, absWorst, scaRMS, scaWorst float64
	}{
		{"testdata/rods.csv", "", 0.02, 0.045, 0.02, 0.05},
		{"testdata/long.csv", "Fe", 0.01, 0.02, 0.01, 0.01},
		{"testdata/long.csv", "Al", 0.05, 0.075, 0.02, 0.04},
		{"testdata/long.csv", "C", 0.01, 0.012, 0.01, 0.012},
	} {
		var abs, sca spread
		for _, r := range readReferences(t, c.file) {
			if c.material != "" && r.material != c.material {
				continue
			}
			got, err := CrossSections(r.wavelength, r.length, r.diameter, r.m)
			if err != nil {
				t.Fatal(err)
			}
			abs.add(got.Abs/r.abs - 1)
			sca.add(got.Sca/r.sca - 1)
			// Err is a standard error: nothing may lie far outside it.
			if e := math.Max(math.Abs(got.Abs/r.abs-1), math.Abs(got.Sca/r.sca-1)); e > 3*got.Err {
				t.Errorf("%+v: error %.3f against an estimate of %.3f", r, e, got.Err)
			}
			// Below 0.02 lambda in diameter the axial part is nearly all of the scattering.
			if r.diameter < 0.02*r.wavelength && math.Abs(got.G-r.g) > 0.015 {
				t.Errorf("%+v: asymmetry %.4f", r, got.G)
			}
		}
		if abs.rms() > c.absRMS || abs.worst > c.absWorst || sca.rms() > c.scaRMS || sca.worst > c.scaWorst {
			t.Errorf("%s %s: abs rms %.4f worst %.4f, sca rms %.4f worst %.4f; stated %g %g %g %g", c.file, c.material,
				abs.rms(), abs.worst, sca.rms(), sca.worst, c.absRMS, c.absWorst, c.scaRMS, c.scaWorst)
		}
	}
}

// Handbook values for the thin half-wave dipole (Balanis, Antenna Theory, 3rd ed., section
// 8.6; values from memory): 73.1 + 42.5i ohm with exp(+i omega t), here the conjugate.
func TestAntenna_halfWaveImpedance(t *testing.T) {
	w := newAntenna(math.Pi, 1, 1e-7) // lambda = 2, L = 1
	r, x := w.radiation[0][0][0], w.reactance[0][0][0]
	if !scalar.EqualWithinAbs(r, 73.1, 0.05) || !scalar.EqualWithinAbs(x, -42.5, 0.05) {
		t.Errorf("impedance %.3f%+.3fi ohm, want 73.1-42.5i", r, x)
	}
}

// Radiation resistance of a short wire with a half-sine current: 20 (kL)^2 (2/pi)^2 ohm (the
// short dipole's 20 (kL)^2 times the square of mean over peak current), down to radio.
func TestAntenna_shortDipole(t *testing.T) {
	for _, kl := range []float64{1e-2, 1e-5, 1e-8} {
		w := newAntenna(kl, 1, 1e-3)
		want := freeSpaceImpedance / (6 * math.Pi) * kl * kl * 4 / (math.Pi * math.Pi)
		if got := w.radiation[0][0][0]; !scalar.EqualWithinRel(got, want, 1e-4) {
			t.Errorf("kL = %g: R = %g, want %g", kl, got, want)
		}
	}
}

// Handbook facts of a thin dipole without loss (Balanis; radar practice; values from
// memory): it resonates at 0.47 to 0.49 wavelengths, where it scatters 0.15 to 0.17
// lambda^2 averaged over orientation and polarisation as one mode: lambda^2/2 pi.
func TestAntenna_resonance(t *testing.T) {
	const d = 1. / 500
	best, at := 0.0, 0.0
	for l := 0.40; l < 0.55; l += 0.001 {
		c := newAntenna(2*math.Pi, l, d*l/2).solve(1e-6i)
		if c.sca > best {
			best, at = c.sca, l
		}
	}
	if at < 0.465 || at > 0.49 || best < 0.15 || best > 0.17 {
		t.Errorf("resonance at %.3f wavelengths with %.4f lambda^2", at, best)
	}
}

// A single mode absorbs at most lambda^2/8 pi, and extinguishes at most lambda^2/2 pi.
func TestAntenna_oneModeYardstick(t *testing.T) {
	best := 0.0
	for _, r := range []float64{1, 3, 10, 30, 70, 100, 300, 1000, 3000} {
		c := newAntenna(2*math.Pi, 0.48, 0.0005).solve(complex(r, 0))
		best = math.Max(best, c.abs)
		if c.abs > 1.02/(8*math.Pi) || c.abs+c.sca > 1.02/(2*math.Pi) {
			t.Errorf("Ri = %g ohm/lambda: absorption %g, extinction %g lambda^2", r, c.abs, c.abs+c.sca)
		}
	}
	if best < 0.9/(8*math.Pi) {
		t.Errorf("best absorption %g of the one-mode limit; a matched load should reach it", best*8*math.Pi)
	}
}

// Optical theorem: the sum of absorption and scattering is the trace of R Y, which is
// not what solve adds up.
func TestAntenna_energy(t *testing.T) {
	for _, kl := range []float64{1e-3, 0.5, 3, 12, 45} {
		for _, zi := range []complex128{1 - 3i, 30 - 40i, 1000 + 200i} {
			w := newAntenna(kl, 1, 0.005)
			got := w.solve(zi)
			var trace float64
			for p := range 2 {
				var y block
				for i := range w.size {
					for j := range w.size {
						y[i][j] = complex(w.radiation[p][i][j], w.reactance[p][i][j])
					}
					y[i][i] += zi * complex(w.length/2, 0)
				}
				invert(&y, w.size)
				for i := range w.size {
					for j := range w.size {
						trace += w.radiation[p][i][j] * real(y[j][i])
					}
				}
			}
			if ext := 2 * math.Pi / (kl * kl) * trace; !scalar.EqualWithinRel(got.abs+got.sca, ext, 1e-9) {
				t.Errorf("kL = %g, zi = %g: abs + sca = %g, extinction %g", kl, zi, got.abs+got.sca, ext)
			}
		}
	}
}

// Long-wave limit down to radio: absorption k Im<alpha>, scattering k^4 <|alpha|^2>/6 pi.
func TestRod_quasiStatic(t *testing.T) {
	const length, d = 9e-6, 0.16e-6
	for _, m := range []complex128{9.22 + 8.502i, 238 + 306i} {
		for _, wavelength := range []float64{3e-3, 9.4e-3, 0.75} {
			got, err := CrossSections(wavelength, length, d, m)
			if err != nil {
				t.Fatal(err)
			}
			axial, transverse, err := Polarizability(length, d, m*m)
			if err != nil {
				t.Fatal(err)
			}
			k := 2 * math.Pi / wavelength
			abs := k * imag(axial+2*transverse) / 3
			a, b := cmplx.Abs(axial), cmplx.Abs(transverse)
			sca := k * k * k * k * (a*a + 2*b*b) / 3 / (6 * math.Pi)
			// Eddy currents are absent from the static value: small while |m| k d/2 << 1.
			if !scalar.EqualWithinRel(got.Abs, abs, 0.01) || !scalar.EqualWithinRel(got.Sca, sca, 0.01) {
				t.Errorf("m = %g at %g m: abs %g, sca %g; static %g, %g", m, wavelength, got.Abs, got.Sca, abs, sca)
			}
			if math.Abs(got.G) > 1e-3 {
				t.Errorf("asymmetry %g of a dipole", got.G)
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
	if !scalar.EqualWithinRel(real(axial), want, 0.02) {
		t.Errorf("axial polarizability %g, want %g", real(axial), want)
	}
}

// No jump where the long rod joins, in length and in wavelength.
func TestRod_join(t *testing.T) {
	m := complex(1.4, 15.6) // aluminium-like: the hard case
	for _, d := range []float64{0.05e-6, 0.1e-6, 0.2e-6} {
		s, err := NewSection(1e-6, d, m)
		if err != nil {
			t.Fatal(err)
		}
		below, err1 := s.Rod(JoinLength * 1e-6)
		above, err2 := s.Rod(JoinLength * 1.0001e-6)
		if err1 != nil || err2 != nil {
			t.Fatal(err1, err2)
		}
		if math.Abs(above.Abs/below.Abs-1) > 1e-3 || math.Abs(above.Sca/below.Sca-1) > 1e-3 || math.Abs(above.G-below.G) > 1e-3 {
			t.Errorf("d = %g: %+v below and %+v above the join", d, below, above)
		}
		if below.Method == above.Method {
			t.Errorf("method %q on both sides", below.Method)
		}
	}
}

func TestRod_properties(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		log := func(lo, hi float64, name string) float64 {
			return math.Exp(rapid.Float64Range(math.Log(lo), math.Log(hi)).Draw(t, name))
		}
		d := log(2e-9, 2e-6, "d")
		r, err := CrossSections(log(0.2e-6, 1, "wavelength"), d*log(MinAspect*1.0001, 1000, "aspect"), d, complex(log(0.1, 300, "n"), log(1e-3, 300, "k")))
		if err != nil {
			t.Fatal(err)
		}
		for _, v := range []float64{r.Ext, r.Sca, r.Abs, r.G, r.Err} {
			if math.IsNaN(v) || math.IsInf(v, 0) {
				t.Fatalf("%+v is not finite", r)
			}
		}
		if r.Abs < 0 || r.Sca < 0 || r.Ext < r.Abs || math.Abs(r.G) > 1 || r.Err <= 0 {
			t.Fatalf("%+v breaks Ext >= Abs >= 0 or |G| <= 1", r)
		}
	})
}

func TestRod_refuses(t *testing.T) {
	s, err := NewSection(10e-6, 1e-7, 5+20i)
	if err != nil {
		t.Fatal(err)
	}
	for _, l := range []float64{0.99e-6, 0, -1, math.NaN(), math.Inf(1)} {
		if r, err := s.Rod(l); err == nil {
			t.Errorf("Rod(%g) = %+v, want an error", l, r)
		}
	}
	if _, err := NewSection(10e-6, 0, 5+20i); err == nil {
		t.Error("zero diameter accepted")
	}
	if _, err := NewSection(math.Inf(1), 1e-7, 5+20i); err == nil {
		t.Error("infinite wavelength accepted")
	}
}

func BenchmarkRod(b *testing.B) {
	for _, c := range []struct {
		name       string
		wavelength float64
	}{{"thermal", 15e-6}, {"near", 1.5e-6}, {"visible", 0.5e-6}} {
		s, err := NewSection(c.wavelength, 80e-9, 5+20i)
		if err != nil {
			b.Fatal(err)
		}
		b.Run("section/"+c.name, func(b *testing.B) {
			for b.Loop() {
				NewSection(c.wavelength, 80e-9, 5+20i)
			}
		})
		b.Run("rod/"+c.name, func(b *testing.B) {
			for b.Loop() {
				s.Rod(8e-6)
			}
		})
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

// A faint rod far thinner than the wave polarises like its bulk: axial alpha near V (eps - 1)
// (closed form as d/L -> 0); sine modes reach it within the extra error of [Result].Err.
func TestPolarizability_faint(t *testing.T) {
	const eps = 1.7
	axial, transverse, err := Polarizability(1e-5, 1e-8, eps)
	if err != nil {
		t.Fatal(err)
	}
	v := math.Pi / 4 * 1e-16 * 1e-5
	if r := real(axial) / (v * (eps - 1)); r > 1 || r < 0.95 {
		t.Errorf("axial polarizability %g of the bulk's", r)
	}
	if want := 2 * v * (eps - 1) / (eps + 1); !scalar.EqualWithinRel(real(transverse), want, 1e-12) {
		t.Errorf("transverse polarizability %g, want %g", real(transverse), want)
	}
}
