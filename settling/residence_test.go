package settling

import (
	"math"
	"testing"

	"gonum.org/v1/gonum/floats/scalar"
	"gonum.org/v1/gonum/integrate/quad"
	"pgregory.net/rapid"

	"hazewright/settling/atmosphere"
)

func TestResidence_Table(t *testing.T) {
	c := thin()
	for _, r := range table(t, "residence_rod.csv") {
		k, z, sink := r.num(t, "eddy_diffusivity_m2_s"), r.num(t, "release_height_m"), r.num(t, "sink_per_s")
		b := RodOf(r.num(t, "length_m"), r.num(t, "diameter_m"), r.num(t, "density_kg_m3"))
		got, err := Residence(c, b, Passage{
			Bottom: z, Top: z, Eddy: ConstantEddy(k), FallSpeedFactor: 1,
			Sinks: []ColumnSink{{"sink", func(float64) float64 { return sink }}},
		})
		if err != nil {
			t.Fatal(err)
		}
		want := r.num(t, "residence_s")
		if !scalar.EqualWithinRel(got.Residence, want, 3e-3) {
			t.Errorf("%v: residence %.6g s, table %.6g (%+.2f %%)", r, got.Residence, want, 100*(got.Residence/want-1))
		}
		if w := r.num(t, "share_to_ground"); !scalar.EqualWithinAbsOrRel(got.ToGround, w, 1e-4, 3e-3) {
			t.Errorf("%v: share to the ground %.6g, table %.6g", r, got.ToGround, w)
		}
		if math.Abs(got.Balance) > 1e-12 {
			t.Errorf("%v: balance %g", r, got.Balance)
		}
	}
}

// point returns the passage of a release at height z under eddy diffusivity k.
func point(z, k float64) Passage {
	return Passage{Bottom: z, Top: z, Eddy: ConstantEddy(k), FallSpeedFactor: 1}
}

// Mixed without end, the residence is the gas's mass over its density at the ground
// and the speed of the flux there, in parallel with a sink.
func TestResidence_WellMixed(t *testing.T) {
	c := thin()
	b := RodOf(9e-6, 160e-9, iron)
	v := must(FallSpeed(must(c.At(0)), 3.71, b)).Speed
	h := c.ScaleHeight(0) * (1 - math.Exp(-depth))
	for _, r := range []struct{ z, deposition, sink float64 }{{0, 0, 0}, {50e3, 0, 0}, {2000, 1e-3, 0}, {2000, 3e-4, 1e-7}} {
		p := point(r.z, 1e9)
		p.Deposition = r.deposition
		p.Sinks = []ColumnSink{{"sink", func(float64) float64 { return r.sink }}}
		got := must(Residence(c, b, p))
		want := 1 / ((v+r.deposition)/h + r.sink)
		if !scalar.EqualWithinRel(got.Residence, want, 1e-4) {
			t.Errorf("%+v: residence %.6g s, H/v %.6g", r, got.Residence, want)
		}
		if q := got.Profile.MixingRatio[0]; !scalar.EqualWithinRel(q, 1, 1e-4) {
			t.Errorf("%+v: mixing ratio near the ground %g of the mean", r, q)
		}
	}
}

// Without mixing, the residence is the integral of dz/v from the ground to the
// release. Half a cell's fall is added by the grid, so the error halves with the
// cells.
func TestResidence_NoMixing(t *testing.T) {
	c := thin()
	for _, b := range []Body{RodOf(9e-6, 160e-9, iron), SphereOf(10e-6, 917)} {
		for _, z := range []float64{2e3, 20e3} {
			want := quad.Fixed(func(z float64) float64 {
				return 1 / must(FallSpeed(must(c.At(z)), 3.71, b)).Speed
			}, 0, z, 60, nil, 0)
			p := point(z, 1e-6)
			off := func(cells int) float64 {
				p.Grid.Cells = cells
				return must(Residence(c, b, p)).Residence/want - 1
			}
			coarse, fine := off(1000), off(2000)
			if math.Abs(fine) > 5e-3 || fine/coarse < 0.4 || fine/coarse > 0.6 {
				t.Errorf("%s from %g m: off by %.3g with 2000 cells, %.3g with 1000", b.Shape, z, fine, coarse)
			}
		}
	}
}

// Doubling the cells brings the residence closer to that of 2000, down to the
// default's 0.3 %.
func TestResidence_GridConvergence(t *testing.T) {
	c := thin()
	b := RodOf(9e-6, 160e-9, iron)
	for _, k := range []float64{1, 30, 300} {
		for _, z := range []float64{0, 2e3, 20e3} {
			if k == 1 && z == 0 {
				continue // below the lowest centre a release is moved up to it
			}
			p := point(z, k)
			p.Grid.Cells = 2000
			want := must(Residence(c, b, p)).Residence
			last := math.Inf(1)
			for _, n := range []int{30, 60, 120, 240, 480} {
				p.Grid.Cells = n
				off := math.Abs(must(Residence(c, b, p)).Residence/want - 1)
				// A release between two centres lies differently in each grid, which
				// leaves a ripple on the error.
				if off > 0.6*last && off > 3e-4 {
					t.Errorf("K %g, release %g: %d cells are off by %.3g, half of them by %.3g", k, z, n, off, last)
				}
				if n == DefaultCells && off > 3e-3 {
					t.Errorf("K %g, release %g: the default grid is off by %.3g", k, z, off)
				}
				last = off
			}
		}
	}
}

// Deposition thins the gas near the ground of particles, which the lowest half cell
// must show: the default grid agrees with a fine one.
func TestResidence_DepositionOnGrid(t *testing.T) {
	p := point(20e3, 1)
	p.Deposition = 1e-2
	got := must(Residence(thin(), RodOf(9e-6, 160e-9, iron), p)).Residence
	p.Grid.Cells = 2000
	want := must(Residence(thin(), RodOf(9e-6, 160e-9, iron), p)).Residence
	if !scalar.EqualWithinRel(got, want, 3e-3) {
		t.Errorf("default grid %g s, fine grid %g s", got, want)
	}
	p.Deposition = 0
	if none := must(Residence(thin(), RodOf(9e-6, 160e-9, iron), p)).Residence; none < 1.05*want {
		t.Errorf("deposition changes little: %g s against %g s", want, none)
	}
}

// What is released equals what reaches the ground and the sinks, found each on its
// own; and each of them gets something.
func TestResidence_Balance(t *testing.T) {
	gas := gasOf("co2")
	rapid.Check(t, func(rt *rapid.T) {
		c := must(atmosphere.NewColumn(gas, 3.71, rapid.Float64Range(10, 2e4).Draw(rt, "p"), must(atmosphere.ConstantLapse(220, 2.5e-3, 140))))
		k := math.Exp(rapid.Float64Range(math.Log(1e-3), math.Log(1e6)).Draw(rt, "ln K"))
		p := point(0, k)
		p.Eddy = func(z float64) float64 { return k * (1 + z/2e4) }
		p.Bottom = rapid.Float64Range(0, 2e4).Draw(rt, "bottom")
		p.Top = p.Bottom + rapid.Float64Range(0, 1e4).Draw(rt, "span")
		p.Deposition = rapid.Float64Range(0, 1e-2).Draw(rt, "deposition")
		high := math.Exp(rapid.Float64Range(-25, -8).Draw(rt, "ln sink"))
		p.Sinks = []ColumnSink{
			{"everywhere", func(float64) float64 { return 1e-9 }},
			{"high up", func(z float64) float64 {
				if z < 1e4 {
					return 0
				}
				return high
			}},
		}
		s := must(Residence(c, RodOf(9e-6, 60e-9, 2699), p))
		sum := s.ToGround + s.ToSinks[0] + s.ToSinks[1]
		if math.Abs(sum-1) > 1e-11 || math.Abs(sum-1-s.Balance) > 1e-14 {
			rt.Fatalf("shares sum to 1%+.3g, balance %g", sum-1, s.Balance)
		}
		if !(s.ToGround > 0 && s.ToSinks[0] > 0 && (s.ToSinks[1] > 0 || k < 100)) {
			rt.Fatalf("shares: ground %g, sinks %v", s.ToGround, s.ToSinks)
		}
		mass, height := 0.0, 0.0
		for i, d := range s.Profile.Density {
			dz := s.Profile.Faces[i+1] - s.Profile.Faces[i]
			mass += d * dz
			height += d * dz * s.Profile.Heights[i]
		}
		if !scalar.EqualWithinRel(mass, 1, 1e-12) || !scalar.EqualWithinRel(height, s.Profile.MeanHeight, 1e-12) {
			rt.Fatalf("profile holds %g, mean height %g against %g", mass, height, s.Profile.MeanHeight)
		}
	})
}

// A release spread over heights is the sum of its parts, and one height above the
// lowest centre has its exact mean height.
func TestSource(t *testing.T) {
	l := must(newLattice(thin(), ConstantEddy(100), Grid{}))
	s := make([]float64, l.cells())
	for _, z := range []float64{0, l.centres[0], 150, 2000, 12345, l.highest} {
		if err := l.source(s, z, z); err != nil {
			t.Fatal(err)
		}
		sum, mean := 0.0, 0.0
		for i, w := range s {
			if w < 0 {
				t.Errorf("%g m: a share of %g", z, w)
			}
			sum += w
			mean += w * l.centres[i]
		}
		if !scalar.EqualWithinAbs(sum, 1, 1e-12) || !scalar.EqualWithinAbsOrRel(mean, math.Max(z, l.centres[0]), 1e-9, 1e-12) {
			t.Errorf("%g m: sum %g, mean height %g", z, sum, mean)
		}
	}
	if err := l.source(s, 0, l.highest); err != nil {
		t.Fatal(err)
	}
	for i := range s {
		if l.faces[i+1] < l.highest && !scalar.EqualWithinRel(s[i]/s[0], l.airMass[i]/l.airMass[0], 1e-12) {
			t.Errorf("cell %d: release is not mixed into the gas", i)
		}
	}
	for _, z := range []float64{-1, math.NaN(), math.Nextafter(l.highest, 1e9)} {
		if err := l.source(s, z, z); err == nil {
			t.Errorf("release at %g m: no error", z)
		}
	}
}

func TestResidence_Mistakes(t *testing.T) {
	b := SphereOf(1e-6, 1000)
	for name, change := range map[string]func(*Passage){
		"no eddy":       func(p *Passage) { p.Eddy = nil },
		"zero eddy":     func(p *Passage) { p.Eddy = ConstantEddy(0) },
		"NaN eddy":      func(p *Passage) { p.Eddy = ConstantEddy(math.NaN()) },
		"factor":        func(p *Passage) { p.FallSpeedFactor = 0 },
		"deposition":    func(p *Passage) { p.Deposition = -1 },
		"cells":         func(p *Passage) { p.Grid.Cells = 19 },
		"order":         func(p *Passage) { p.Bottom, p.Top = 2, 1 },
		"sink":          func(p *Passage) { p.Sinks = []ColumnSink{{"x", func(float64) float64 { return -1 }}} },
		"sink, no rate": func(p *Passage) { p.Sinks = []ColumnSink{{Name: "x"}} },
	} {
		p := point(1000, 100)
		change(&p)
		if _, err := Residence(thin(), b, p); err == nil {
			t.Errorf("%s: no error", name)
		}
	}
	if _, err := Residence(atmosphere.Column{}, b, point(1000, 100)); err == nil {
		t.Error("no column: no error")
	}
}

func TestEddyTable(t *testing.T) {
	e := must(EddyTable([]EddyPoint{{1000, 10}, {3000, 30}, {5000, 10}}))
	for _, c := range []struct{ z, want float64 }{{0, 10}, {1000, 10}, {2500, 25}, {3000, 30}, {4000, 20}, {5000, 10}, {9e4, 10}} {
		if got := e(c.z); !scalar.EqualWithinRel(got, c.want, 1e-12) {
			t.Errorf("%g m: %g, want %g", c.z, got, c.want)
		}
	}
	for _, bad := range [][]EddyPoint{nil, {{0, 0}}, {{0, 1}, {0, 2}}, {{math.NaN(), 1}}, {{0, math.Inf(1)}}} {
		if _, err := EddyTable(bad); err == nil {
			t.Errorf("%v: no error", bad)
		}
	}
}
