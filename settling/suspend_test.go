package settling

import (
	"errors"
	"math"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"
	"gonum.org/v1/gonum/floats"
	"gonum.org/v1/gonum/floats/scalar"
	"gonum.org/v1/gonum/integrate/quad"
	"gonum.org/v1/gonum/mat"
	"pgregory.net/rapid"
)

// usual is the fate most tests start from.
func usual(sticking float64) Fate {
	return Fate{
		ReleaseHeight: 2000, LiftHeight: 1000, Eddy: ConstantEddy(300),
		LiftTime: 60 * day, BurialTime: 5 * year,
		Sinks:    []Sink{{"frost burial", 0.03 / year}},
		Sticking: sticking, ReturnSingle: 1, FallSpeedFactor: 1, KernelFactor: 1,
	}
}

func one(b Body) Population { return Population{Nodes: []Member{{b, 1}}} }

func thinRod() Body { return RodOf(8e-6, 80e-9, iron) }

// spread is a population of rods of one diameter, lognormal by length with geometric
// standard deviation 1.2, nine nodes of equal steps.
func spread() Population {
	var p Population
	for i := -4; i <= 4; i++ {
		x := 0.6 * float64(i)
		p.Nodes = append(p.Nodes, Member{RodOf(8e-6*math.Exp(x*math.Log(1.2)), 80e-9, iron), math.Exp(-x * x / 2)})
	}
	return p
}

// The whole chain at one point, from an independent numpy calculation with losses
// resolved in height: 85 mg/m2 of 8 um x 80 nm iron rods last 16 yr without sticking
// and 0.16 yr with 20 %. Ours has one rate of agglomeration over the column; mixing
// is quick enough here for that to matter little. The order is what is held, and a
// little more.
func TestSuspend_Scale(t *testing.T) {
	for _, c := range []struct{ sticking, years float64 }{{0, 16}, {0.2, 0.16}} {
		s := must(Suspend(thin(), one(thinRod()), usual(c.sticking), 85e-6))
		if !scalar.EqualWithinRel(s.Lifetime/year, c.years, 0.05) {
			t.Errorf("sticking %g: %.4g yr, want about %g", c.sticking, s.Lifetime/year, c.years)
		}
	}
	// 160 mg/m2 of 9 um x 160 nm iron rods meet in about 44 d near the ground if
	// every touch sticks; same source.
	b := RodOf(9e-6, 160e-9, iron)
	n := 160e-6 / b.Mass / thin().ScaleHeight(0)
	if d := 1 / (n * must(Kernel(state("co2", 610, 210), b))) / day; !scalar.EqualWithinRel(d, 44, 0.02) {
		t.Errorf("meeting time near the ground %.3g d, want about 44", d)
	}
}

// Deposition of 0.3, 1 and 3 mm/s beside a fall of 0.3 mm/s cuts 16 yr to 11, 6.3 and
// 2.8 yr: an independent numpy calculation of the same chain, two figures.
func TestSuspend_Deposition(t *testing.T) {
	for _, c := range []struct{ deposition, years float64 }{{0.3e-3, 11}, {1e-3, 6.3}, {3e-3, 2.8}} {
		f := usual(0)
		f.Deposition = c.deposition
		s := must(Suspend(thin(), one(thinRod()), f, 85e-6))
		if !scalar.EqualWithinRel(s.Lifetime/year, c.years, 0.06) {
			t.Errorf("deposition %g: %.3g yr, want about %g", c.deposition, s.Lifetime/year, c.years)
		}
	}
}

// With burial alone the lifetime is tau(release) + p/(1-p) tau(lift height), p =
// burial/(burial + lift), with the residences of two columns; cycles are burial time
// over lift time, and the fall time the first of the two.
func TestSuspend_ExchangeClosedForm(t *testing.T) {
	f := usual(0)
	f.Sinks = nil
	b := thinRod()
	s := must(Suspend(thin(), one(b), f, 85e-6))
	fresh := must(Residence(thin(), b, point(f.ReleaseHeight, 300))).Residence
	lifted := must(Residence(thin(), b, point(f.LiftHeight, 300))).Residence
	ratio := f.BurialTime / f.LiftTime // p/(1-p)
	for _, c := range []struct {
		name      string
		got, want float64
	}{
		{"lifetime", s.Lifetime, fresh + ratio*lifted},
		{"fall time", s.FallTime, fresh},
		{"cycles", s.Cycles, ratio},
		{"limit of cycles", s.CyclesLimit, ratio},
		{"residence with the ground", s.ResidenceFull, fresh + ratio*lifted + f.BurialTime},
		{"ground store", s.GroundStore, s.Supply * f.BurialTime},
		{"burial alone", s.Losses[1].LifetimeAlone, s.Lifetime},
		{"share of burial", s.Losses[1].Share, 1},
		{"speed at the ground", s.FallSpeedGround, must(FallSpeed(must(thin().At(0)), 3.71, b)).Speed},
	} {
		if !scalar.EqualWithinRel(c.got, c.want, 1e-9) {
			t.Errorf("%s: %.12g, closed form %.12g", c.name, c.got, c.want)
		}
	}
	if s.Losses[1].Name != LossBurial || s.Losses[0].Acts || s.Agglomerates || s.AgglomerationTime != 0 {
		t.Errorf("losses: %+v", s.Losses)
	}
}

// Never lifted, a particle stays for its first fall only; never buried, it stays
// until something else takes it; with nothing that takes it, no steady state exists.
func TestSuspend_Never(t *testing.T) {
	f := usual(0)
	f.LiftTime = math.Inf(1)
	s := must(Suspend(thin(), one(thinRod()), f, 85e-6))
	p := point(f.ReleaseHeight, 300)
	p.Sinks = []ColumnSink{{"frost", func(float64) float64 { return 0.03 / year }}}
	r := must(Residence(thin(), thinRod(), p))
	if s.Cycles != 0 || !scalar.EqualWithinRel(s.Lifetime, r.Residence, 1e-12) || !scalar.EqualWithinRel(s.GroundStore, s.Supply*r.ToGround*f.BurialTime, 1e-12) {
		t.Errorf("never lifted: cycles %g, lifetime %g against %g", s.Cycles, s.Lifetime, r.Residence)
	}
	f = usual(0)
	f.BurialTime = math.Inf(1)
	s = must(Suspend(thin(), one(thinRod()), f, 85e-6))
	if !scalar.EqualWithinRel(s.Lifetime, year/0.03, 1e-9) || s.CyclesLimited || s.Losses[2].Acts {
		t.Errorf("never buried: lifetime %g yr, sink's 33.33; %+v", s.Lifetime/year, s.Losses)
	}
	f.Sinks = nil
	if _, err := Suspend(thin(), one(thinRod()), f, 85e-6); err == nil || !strings.Contains(err.Error(), "nothing removes") {
		t.Errorf("nothing removes: error %v", err)
	}
	f.ReturnSingle = 0.5
	s = must(Suspend(thin(), one(thinRod()), f, 85e-6))
	if l := s.Losses[2]; l.Name != LossClumps || !scalar.EqualWithinRel(l.Share, 1, 1e-12) || !scalar.EqualWithinRel(s.Cycles, 2, 1e-9) {
		t.Errorf("half return single: cycles %g, want 2; %+v", s.Cycles, s.Losses)
	}
	f.LiftTime = math.Inf(1)
	if _, err := Suspend(thin(), one(thinRod()), f, 85e-6); err == nil || !strings.Contains(err.Error(), "never") {
		t.Errorf("both never: error %v", err)
	}
}

// Mixed without end, the rate of agglomeration is K n integrated over the exponential
// profile: a direct quadrature.
func TestSuspend_WellMixedAgglomeration(t *testing.T) {
	f := usual(0.3)
	f.Eddy = ConstantEddy(1e9)
	f.KernelFactor, f.AggregateValue, f.Charge = 0.5, 0.2, 3
	b := thinRod()
	s := must(Suspend(thin(), one(b), f, 85e-6))
	h := thin().ScaleHeight(0)
	n0 := 85e-6 / b.Mass / (h * (1 - math.Exp(-depth)))
	k := quad.Fixed(func(z float64) float64 {
		at := must(thin().At(z))
		n := n0 * math.Exp(-z/h)
		return must(Kernel(at, b)) * must(ChargeFactor(at, b, 3)) * n * n
	}, 0, depth*h, 200, nil, 0) * 0.3 * 0.5 * 0.8 * b.Mass / 85e-6
	if !scalar.EqualWithinRel(1/s.AgglomerationTime, k, 1e-3) {
		t.Errorf("rate %g 1/s, quadrature %g", 1/s.AgglomerationTime, k)
	}
	if !scalar.EqualWithinRel(s.NumberDensityGround, n0, 1e-3) {
		t.Errorf("number at the ground %g, closed form %g", s.NumberDensityGround, n0)
	}
}

// The rate found by secants is the one that plain iteration, half a step at a time,
// creeps up to.
func TestSuspend_PlainIteration(t *testing.T) {
	for _, k := range []float64{3, 300} {
		f := usual(1)
		f.Eddy = ConstantEddy(k)
		m := must(NewModel(thin(), spread(), f))
		s := must(m.Suspend(85e-6))
		w := m.newWork()
		p, not := f.exchange().returns()
		rate := 0.0
		for range 200 {
			w.pass(rate+m.sinks, p, not)
			rate = (rate + w.meeting(s.NumberColumn)) / 2
		}
		if !scalar.EqualWithinRel(1/s.AgglomerationTime, rate, 1e-6) {
			t.Errorf("K %g: rate %.9g after %d steps, plain iteration %.9g", k, 1/s.AgglomerationTime, s.Steps, rate)
		}
	}
}

// The search for the rate ends in few steps from weak to strong loss and mixing.
func TestSuspend_Steps(t *testing.T) {
	for _, k := range []float64{0.1, 1, 10, 100, 1e4} {
		for _, burden := range []float64{1e-9, 1e-5, 1e-3, 1e-2, 1} {
			for _, z := range []float64{0, 2000, 40e3} {
				f := usual(1)
				f.Eddy, f.ReleaseHeight = ConstantEddy(k), z
				s, err := Suspend(thin(), one(thinRod()), f, burden)
				if err != nil || s.Steps < 2 || s.Steps > 10 {
					t.Errorf("K %g, burden %g, release %g: %d steps, error %v", k, burden, z, s.Steps, err)
				}
			}
		}
	}
}

// Two stores with the streams' numbers have the column's steady state: the linear
// system of the doc comment of [Stream], solved directly.
func TestSuspend_Streams(t *testing.T) {
	f := usual(0.05)
	f.ReturnSingle = 0.7
	s := must(Suspend(thin(), spread(), f, 85e-6))
	air, ground, supplies, masses := 0.0, 0.0, 0.0, 0.0
	for _, q := range s.Streams {
		a := mat.NewDense(3, 3, []float64{
			1 / q.NewResidence, 0, 0,
			0, 1 / q.LiftedResidence, -q.ReturnSingle / q.LiftTime,
			-q.NewToGround / q.NewResidence, -q.LiftedToGround / q.LiftedResidence, 1/q.LiftTime + 1/q.BurialTime,
		})
		var x mat.VecDense
		if err := x.SolveVec(a, mat.NewVecDense(3, []float64{s.Supply * q.SupplyShare, 0, 0})); err != nil {
			t.Fatal(err)
		}
		if got := (x.AtVec(0) + x.AtVec(1)) / s.Burden; !scalar.EqualWithinRel(got, q.MassShare, 1e-9) {
			t.Errorf("share aloft %.12g, given %.12g", got, q.MassShare)
		}
		air += x.AtVec(0) + x.AtVec(1)
		ground += x.AtVec(2)
		supplies += q.SupplyShare
		masses += q.MassShare
		loss := q.AgglomerationRate + q.OtherRate
		if d := q.NewToGround + loss*q.NewResidence - 1; math.Abs(d) > 1e-12 {
			t.Errorf("new mass: balance %g", d)
		}
	}
	for _, c := range []struct {
		name      string
		got, want float64
	}{{"burden", air, s.Burden}, {"ground store", ground, s.GroundStore}, {"supply shares", supplies, 1}, {"mass shares", masses, 1}} {
		if !scalar.EqualWithinRel(c.got, c.want, 1e-9) {
			t.Errorf("%s: %.12g, want %.12g", c.name, c.got, c.want)
		}
	}
}

// Without agglomeration members do not know of each other: the supply of a spread is
// the sum of that of each member held at its part of the burden. Larger rods here
// fall a little faster, so they need more.
func TestSuspend_SpreadIsSumOfMembers(t *testing.T) {
	s := must(Suspend(thin(), spread(), usual(0), 85e-6))
	supply, ground, number := 0.0, 0.0, 0.0
	density := make([]float64, len(s.Profile.Density))
	for i, m := range spread().Nodes {
		q := must(Suspend(thin(), one(m.Body), usual(0), 85e-6*s.Streams[i].MassShare))
		supply += q.Supply
		ground += q.GroundStore
		number += q.NumberDensityGround
		floats.AddScaled(density, s.Streams[i].MassShare, q.Profile.Density)
	}
	if !floats.EqualApprox(density, s.Profile.Density, 1e-16) {
		t.Error("profile of mass is not the sum of the members'")
	}
	if !scalar.EqualWithinRel(s.NumberDensityGround, number, 1e-12) {
		t.Errorf("number at the ground %g, sum of members %g", s.NumberDensityGround, number)
	}
	if !scalar.EqualWithinRel(s.Supply, supply, 1e-12) || !scalar.EqualWithinRel(s.GroundStore, ground, 1e-12) {
		t.Errorf("supply %g and ground store %g, sums of members %g and %g", s.Supply, s.GroundStore, supply, ground)
	}
}

// Half of the number lies at or below the median member, in whatever order members
// are given.
func TestMedianBody(t *testing.T) {
	a, b, c := SphereOf(1e-6, 1000), SphereOf(2e-6, 1000), SphereOf(3e-6, 1000)
	for _, r := range []struct {
		pop  []Member
		want Body
	}{
		{[]Member{{c, 1}, {a, 1}, {b, 1}}, b},
		{[]Member{{c, 3}, {a, 4}, {b, 2}}, b},
		{[]Member{{b, 1}, {a, 1}}, a},
		{[]Member{{a, 1}, {b, 1.1}}, b},
		{[]Member{{a, 0}, {c, 1}}, c},
	} {
		if m := must(NewModel(thin(), Population{Nodes: r.pop}, usual(1))); m.median != r.want {
			t.Errorf("%v: median %v", r.pop, m.median)
		}
	}
}

func TestSuspend_LossesAlone(t *testing.T) {
	s := must(Suspend(thin(), one(thinRod()), usual(0.05), 85e-6))
	sum := 0.0
	for _, l := range s.Losses {
		sum += l.Share
		if l.Acts && l.LifetimeAlone < s.Lifetime {
			t.Errorf("%s alone gives %g s, all losses %g s", l.Name, l.LifetimeAlone, s.Lifetime)
		}
	}
	if !scalar.EqualWithinRel(sum, 1, 1e-12) {
		t.Errorf("shares sum to %g", sum)
	}
	if l := s.Losses[1]; l.Name != "frost burial" || !scalar.EqualWithinRel(l.LifetimeAlone, year/0.03, 1e-9) {
		t.Errorf("a uniform sink alone: %+v, want 33.33 yr", l)
	}
	f := usual(0)
	f.Sinks = nil
	if q := must(Suspend(thin(), one(thinRod()), f, 85e-6)); !scalar.EqualWithinRel(q.Lifetime, s.Losses[2].LifetimeAlone, 1e-9) {
		t.Errorf("burial alone %g, a fate with burial alone %g", s.Losses[2].LifetimeAlone, q.Lifetime)
	}
}

func TestSuspend_LayerField(t *testing.T) {
	// z e N/eps0 by hand: 100 x 1.602e-19 x 1e9/8.854e-12 = 1810 V/m.
	f := usual(0)
	f.Charge = 100
	mass := thinRod().Mass
	s := must(Suspend(thin(), one(thinRod()), f, 1e9*mass))
	if !scalar.EqualWithinRel(s.LayerField, 1809.5, 1e-3) {
		t.Errorf("field %g V/m, by hand 1810", s.LayerField)
	}
	if s := must(Suspend(thin(), one(thinRod()), f, 1e9*mass*10.5/1.8095)); len(s.Warnings) == 0 || !strings.Contains(s.Warnings[0], "field") {
		t.Errorf("10.5 kV/m: warnings %q", s.Warnings)
	}
	if s := must(Suspend(thin(), one(thinRod()), f, 1e9*mass*9.5/1.8095)); len(s.Warnings) > 0 && strings.Contains(s.Warnings[0], "charge aloft") {
		t.Errorf("9.5 kV/m: warnings %q", s.Warnings)
	}
	if _, err := Suspend(thin(), one(thinRod()), f, 1e9*mass*20.5/1.8095); !errors.Is(err, ErrLayerField) {
		t.Errorf("20.5 kV/m: error %v", err)
	}
}

// More burden never lasts longer; without sticking the supply is in proportion to
// the burden; the losses make up the supply.
func TestSuspend_Properties(t *testing.T) {
	rapid.Check(t, func(rt *rapid.T) {
		draw := func(name string, low, high float64) float64 {
			return math.Exp(rapid.Float64Range(math.Log(low), math.Log(high)).Draw(rt, "ln "+name))
		}
		f := usual(0)
		f.Sticking = draw("sticking", 1e-4, 1)
		f.Eddy = ConstantEddy(draw("K", 1, 1e4))
		f.LiftTime, f.BurialTime = draw("lift", day, 100*year), draw("burial", day, 100*year)
		f.ReleaseHeight = rapid.Float64Range(0, 40e3).Draw(rt, "release")
		f.LiftHeight = rapid.Float64Range(0, 40e3).Draw(rt, "lift height")
		f.ReturnSingle = rapid.Float64Range(0, 1).Draw(rt, "single")
		pop := Population{Nodes: []Member{
			{RodOf(8e-6, 80e-9, iron), rapid.Float64Range(0.01, 1).Draw(rt, "a")},
			{SphereOf(draw("r", 1e-7, 1e-5), 2000), rapid.Float64Range(0, 0.1).Draw(rt, "b")},
		}}
		m := must(NewModel(thin(), pop, f))
		burden := draw("burden", 1e-8, 1e-2)
		a := must(m.Suspend(burden))
		b := must(m.Suspend(burden * 2))
		if b.Lifetime > a.Lifetime*(1+1e-5) {
			rt.Fatalf("burden %g lasts %g s, twice as much %g s", burden, a.Lifetime, b.Lifetime)
		}
		if a.Residual > 1e-11 {
			rt.Fatalf("losses differ from the supply by %g", a.Residual)
		}
		f.Sticking = 0
		m = must(NewModel(thin(), pop, f))
		a, b = must(m.Suspend(burden)), must(m.Suspend(burden*2))
		if !scalar.EqualWithinRel(b.Supply, 2*a.Supply, 1e-12) {
			rt.Fatalf("twice the burden needs %g times the supply", b.Supply/a.Supply)
		}
	})
}

// The rate of agglomeration does not hang on the grid where mixing is quick.
func TestSuspend_GridConvergence(t *testing.T) {
	f := usual(0.2)
	want := 0.0
	for _, n := range []int{960, DefaultCells} {
		f.Grid.Cells = n
		s := must(Suspend(thin(), spread(), f, 85e-6))
		if n == 960 {
			want = s.Lifetime
		} else if !scalar.EqualWithinRel(s.Lifetime, want, 3e-3) {
			t.Errorf("%d cells: %g s, 960 cells %g s", n, s.Lifetime, want)
		}
	}
}

func TestSuspend_SameTwice(t *testing.T) {
	m := must(NewModel(thin(), spread(), usual(0.2)))
	a, b := must(m.Suspend(85e-6)), must(m.Suspend(85e-6))
	if d := cmp.Diff(a, b); d != "" {
		t.Error(d)
	}
	if d := cmp.Diff(a, must(Suspend(thin(), spread(), usual(0.2), 85e-6))); d != "" {
		t.Error(d)
	}
}

func TestSuspend_Warnings(t *testing.T) {
	for _, c := range []struct {
		name   string
		body   Body
		change func(*Fate)
		burden float64
		want   string
	}{
		{"shear", RodOf(50e-6, 1e-6, iron), func(f *Fate) {}, 85e-6, "not turned at random"},
		{"alignment", thinRod(), func(f *Fate) {}, 85e-6, "stands them up"},
		{"deposition", thinRod(), func(f *Fate) { f.Deposition = 1e-3 }, 85e-6, "deposition"},
		{"slow mixing", thinRod(), func(f *Fate) { f.Sticking = 1; f.Eddy = ConstantEddy(10) }, 85e-6, "understates how long"},
		{"grid", thinRod(), func(f *Fate) { f.Sticking = 1; f.Eddy = ConstantEddy(1) }, 1e-3, "depends on the grid"},
		{"inertia", SphereOf(1e-3, 1000), func(f *Fate) {}, 85e-6, "Schiller-Naumann"},
		{"fast", SphereOf(1e-3, 1000), func(f *Fate) { f.ReleaseHeight = 80e3 }, 85e-6, "molecules' speed"},
	} {
		f := usual(0)
		c.change(&f)
		s := must(Suspend(thin(), one(c.body), f, c.burden))
		if !strings.Contains(strings.Join(s.Warnings, "\n"), c.want) {
			t.Errorf("%s: warnings %q, want one with %q", c.name, s.Warnings, c.want)
		}
	}
	if s := must(Suspend(thin(), one(SphereOf(1e-6, 1000)), usual(0.01), 1e-6)); len(s.Warnings) != 0 {
		t.Errorf("small spheres: warnings %q", s.Warnings)
	}
}

func TestSuspend_Mistakes(t *testing.T) {
	for name, change := range map[string]func(*Fate){
		"lift time": func(f *Fate) { f.LiftTime = 0 }, "burial time": func(f *Fate) { f.BurialTime = math.NaN() },
		"sticking": func(f *Fate) { f.Sticking = 1.01 }, "aggregate value": func(f *Fate) { f.AggregateValue = -0.1 },
		"return single": func(f *Fate) { f.ReturnSingle = math.NaN() }, "kernel factor": func(f *Fate) { f.KernelFactor = 0 },
		"fall speed factor": func(f *Fate) { f.FallSpeedFactor = 0 }, "charge": func(f *Fate) { f.Charge = math.Inf(1) },
		"frost": func(f *Fate) { f.Sinks = []Sink{{"frost", -1}} }, "eddy": func(f *Fate) { f.Eddy = nil },
		"release": func(f *Fate) { f.ReleaseHeight = -1 }, "lift height": func(f *Fate) { f.LiftHeight = 1e6 },
		"deposition": func(f *Fate) { f.Deposition = math.Inf(1) },
	} {
		f := usual(0.1)
		change(&f)
		if _, err := Suspend(thin(), one(thinRod()), f, 85e-6); err == nil || !strings.Contains(err.Error(), name) {
			t.Errorf("%s: error %v", name, err)
		}
	}
	for _, burden := range []float64{0, -1, math.NaN(), math.Inf(1)} {
		if _, err := Suspend(thin(), one(thinRod()), usual(0), burden); err == nil {
			t.Errorf("burden %g: no error", burden)
		}
	}
	for _, p := range []Population{{}, {Nodes: []Member{{thinRod(), 0}}}, {Nodes: []Member{{thinRod(), -1}, {thinRod(), 2}}}, {Nodes: []Member{{Body{}, 1}}}} {
		if _, err := Suspend(thin(), p, usual(0), 85e-6); err == nil {
			t.Errorf("population %+v: no error", p)
		}
	}
	f := usual(2)
	f.Charge = math.NaN()
	if _, err := Suspend(thin(), Population{}, f, 1); err == nil || !strings.Contains(err.Error(), "sticking") || !strings.Contains(err.Error(), "charge") || !strings.Contains(err.Error(), "population") {
		t.Errorf("three mistakes are not all reported: %v", err)
	}
}

func TestLeftOut(t *testing.T) {
	for _, s := range LeftOut() {
		if !strings.HasSuffix(s, ".") || len(s) < 40 {
			t.Errorf("not a sentence: %q", s)
		}
	}
	if len(LeftOut()) < 5 {
		t.Error("the list is short")
	}
}

// The cost of a spread of nine sizes from scratch, and with the model at hand.
func BenchmarkSuspend(b *testing.B) {
	c, pop, f := thin(), spread(), usual(0.2)
	b.ReportAllocs()
	for b.Loop() {
		must(Suspend(c, pop, f, 85e-6))
	}
}

func BenchmarkModelSuspend(b *testing.B) {
	m := must(NewModel(thin(), spread(), usual(0.2)))
	b.ReportAllocs()
	for b.Loop() {
		must(m.Suspend(85e-6))
	}
}
