package hazewright

import (
	"context"
	"encoding/json"
	"math"
	"os"
	"testing"
)

// studyOf loads a study written in a test.
func studyOf(t testing.TB, text string, sets ...string) *Study {
	t.Helper()
	s, err := Load(Source{Name: "study.yaml", Data: []byte(text)}, sets)
	if err != nil {
		t.Fatalf("loading:\n%v", err)
	}
	return s
}

// remembering is an engine that the tests share: what it remembers of particles must not
// change an answer, see TestSameAnswerForAnyWorkersAndMemory.
var remembering = NewEngine(Options{})

func assess(t testing.TB, s *Study) *Result {
	t.Helper()
	r, err := remembering.Assess(context.Background(), s)
	if err != nil {
		t.Fatal(err)
	}
	return r
}

func example(t testing.TB, sets ...string) *Study {
	t.Helper()
	src, err := FileSource("examples/lantern-basin/study.yaml")
	if err != nil {
		t.Fatal(err)
	}
	s, err := Load(src, sets)
	if err != nil {
		t.Fatalf("loading the example:\n%v", err)
	}
	return s
}

const ironRods = `
study: iron rods alone
world: mars
goal: {warming: 25 K}
designs:
  - name: Iron rods
    particles: [{shape: rod, length: 8 um, diameter: 80 nm, material: iron}]
fate: {sticking: 0 %}
`

// value returns a figure that must be there.
func value(t testing.TB, d DesignResult, id string) float64 {
	t.Helper()
	v, ok := d.Figures[id]
	if !ok || v.Null {
		t.Fatalf("%s: figure %s: no value: %s", d.Name, id, v.Why)
	}
	return v.Value
}

// mayBeNull are the figures that can have no value for some kinds of design that reach
// their goal, and for which kind.
var mayBeNull = map[string]string{
	"burden_low_held":    "held low the goal may be out of reach",
	"agglomeration_time": "nothing sticks",
	"sublimation_time":   "the material does not sublime",
	"ore_rate":           "shipped particles need no ore on the planet",
	"ground_store":       "a given lifetime leaves the ground uncomputed",
	"residence_total":    "the same",
	"cycles":             "the same",
	"time_to_goal":       "the schedule may never get there",
	"half_loss_time":     "half of the warming may never be lost within reach",
	"radio_loss_uhf":     "a user's table may not reach radio wavelengths",
	"radio_loss_s":       "the same",
	"radio_loss_x":       "the same",
	"radio_loss_ka":      "the same",
}

func TestEveryFigureHasAValueOrAnAllowedReason(t *testing.T) {
	r := assess(t, example(t))
	all := r.Designs
	for _, sets := range [][]string{
		{"designs[0].given={lifetime: 3 yr}"}, {"supply.route=shipped"}, {"goal={burden: 40 mg/m2}"},
		{"designs[0].particles[0]={shape: sphere, radius: 0.25 um, material: graphite}", "goal={optical_depth: 0.1, at: solar}"},
	} {
		all = append(all, assess(t, studyOf(t, ironRods, sets...)).Designs...)
	}
	for _, d := range all {
		if len(d.Figures) != len(Figures()) {
			t.Errorf("%s: %d figures, the table has %d", d.Name, len(d.Figures), len(Figures()))
		}
		for _, def := range Figures() {
			v, ok := d.Figures[def.ID]
			switch {
			case !ok:
				t.Errorf("%s: figure %s is missing", d.Name, def.ID)
			case v.Null && v.Why == "":
				t.Errorf("%s: figure %s is null without a reason", d.Name, def.ID)
			case v.Null && d.Reached && mayBeNull[def.ID] == "":
				t.Errorf("%s: figure %s is null (%s), which the allow-list does not permit", d.Name, def.ID, v.Why)
			}
		}
	}
	metal := r.Designs[0]
	for _, id := range []string{"radio_loss_uhf", "radio_loss_ka", "ore_rate", "half_loss_time", "agglomeration_time"} {
		value(t, metal, id)
	}
	if v := r.Designs[1].Cases[1].Figures["time_to_goal"]; v.Null {
		t.Errorf("%s at 1 %% sticking never reaches its goal: %s", r.Designs[1].Name, v.Why)
	}
}

// A design that cannot reach the goal says why, and nothing that needs a burden has a
// value.
func TestUnreachable(t *testing.T) {
	d := assess(t, studyOf(t, ironRods, "goal.warming=250 K")).Designs[0]
	if d.Reached || d.Cause == "" {
		t.Fatalf("250 K: reached %v, cause %q", d.Reached, d.Cause)
	}
	for _, id := range []string{"burden", "warming", "production_rate", "lifetime", "landed_mass"} {
		if v := d.Figures[id]; !v.Null || v.Why != d.Cause {
			t.Errorf("figure %s of an unreached design: %+v", id, v)
		}
	}
	value(t, d, "kappa_thermal") // needs no burden
	if d.Programme != nil {
		t.Error("an unreached design has a programme")
	}
}

// The burden found for a warming goal gives that warming when it is put in as a goal:
// the way there and the way back are different code.
func TestBurdenAndWarmingAgreeBothWays(t *testing.T) {
	there := assess(t, studyOf(t, ironRods)).Designs[0]
	burden := value(t, there, "burden")
	s := studyOf(t, ironRods)
	s.Goal = Goal{Kind: "burden", Burden: burden}
	back := assess(t, s).Designs[0]
	if w := value(t, back, "warming"); math.Abs(w-25) > 1e-4 {
		t.Errorf("burden %g kg/m2 for 25 K warms by %g K", burden, w)
	}
	if b := value(t, back, "burden"); b != burden {
		t.Errorf("a burden goal of %g comes back as %g", burden, b)
	}
}

// An optical depth goal is exact: depth = extinction per mass x burden.
func TestOpticalDepthGoalIsExact(t *testing.T) {
	for _, at := range []struct{ at, figure string }{{"thermal", "optical_depth_thermal"}, {"solar", "optical_depth_solar"}} {
		s := studyOf(t, ironRods)
		s.Goal = Goal{Kind: "optical_depth", OpticalDepth: 0.3, At: at.at}
		d := assess(t, s).Designs[0]
		if v := value(t, d, at.figure); math.Abs(v-0.3) > 1e-12 {
			t.Errorf("optical depth 0.3 at %s: figure %s is %g", at.at, at.figure, v)
		}
	}
}

// Without sticking both cases are assessed, and they are the same as giving it.
func TestStickingCases(t *testing.T) {
	s := studyOf(t, ironRods)
	s.Designs[0].Fate.StickingGiven = false
	d := assess(t, s).Designs[0]
	if len(d.Cases) != 2 || d.Cases[0].Sticking != 1 || d.Cases[1].Sticking != 0.01 {
		t.Fatalf("cases: %+v", d.Cases)
	}
	for _, c := range d.Cases {
		given := studyOf(t, ironRods)
		given.Designs[0].Fate.Sticking = c.Sticking
		want := value(t, assess(t, given).Designs[0], "production_rate")
		if got := c.Figures["production_rate"].Value; got != want {
			t.Errorf("sticking %g: production %g as a case, %g when given", c.Sticking, got, want)
		}
	}
	if a, b := d.Cases[0].Figures["lifetime"].Value, d.Cases[1].Figures["lifetime"].Value; !(a < b/5) {
		t.Errorf("lifetime %g s if every touch sticks, %g s at 1 %%: sticking must rule", a, b)
	}
}

// Given values are used, and are marked.
func TestGivenValues(t *testing.T) {
	year := 365.25 * 86400
	s := studyOf(t, ironRods)
	s.Designs[0].Given = Given{Lifetime: 10 * year, Burden: 0.15e-3}
	d := assess(t, s).Designs[0]
	if v := d.Figures["lifetime"]; v.Value != 10*year || v.Note != "given, not computed" {
		t.Errorf("given lifetime: %+v", v)
	}
	if v := d.Figures["burden"]; v.Value != 0.15e-3 || v.Note != "given, not computed" {
		t.Errorf("given burden: %+v", v)
	}
	// Production by hand: burden x area / lifetime / (1 - release loss).
	area := 4 * math.Pi * s.World.Radius * s.World.Radius
	want := 0.15e-3 * area / (10 * year) / (1 - s.Designs[0].Supply.ReleaseLoss)
	if got := value(t, d, "production_rate"); math.Abs(got/want-1) > 1e-9 {
		t.Errorf("production %g kg/s, by hand %g", got, want)
	}
	s = studyOf(t, ironRods)
	s.Designs[0].Given.KappaThermal = 5000
	if v := value(t, assess(t, s).Designs[0], "kappa_thermal"); math.Abs(v-5000) > 1e-9 {
		t.Errorf("given kappa_thermal 5000 m2/kg comes out as %g", v)
	}
}

// Doubling a model factor halves or doubles what hangs on it alone.
func TestModelFactors(t *testing.T) {
	base := assess(t, studyOf(t, ironRods)).Designs[0]
	s := studyOf(t, ironRods)
	s.Model.KappaFactor = 2
	if got, want := value(t, assess(t, s).Designs[0], "kappa_thermal"), 2*value(t, base, "kappa_thermal"); math.Abs(got/want-1) > 1e-12 {
		t.Errorf("kappa factor 2: %g, want %g", got, want)
	}
	s = studyOf(t, ironRods)
	s.Model.FallSpeedFactor = 2
	if got, want := value(t, assess(t, s).Designs[0], "fall_speed"), 2*value(t, base, "fall_speed"); math.Abs(got/want-1) > 1e-12 {
		t.Errorf("fall speed factor 2: %g, want %g", got, want)
	}
	s = studyOf(t, ironRods)
	s.Model.WarmingFactor = 2
	d := assess(t, s).Designs[0]
	if got := value(t, d, "warming"); math.Abs(got-25) > 1e-4 {
		t.Errorf("warming factor 2: the goal of 25 K gives %g K", got)
	}
	if !(value(t, d, "burden") < 0.6*value(t, base, "burden")) {
		t.Error("a warming factor of 2 must need less than 0.6 of the burden")
	}
}

// The airborne mass of the schedule's steady state is the column's.
func TestScheduleHoldsTheColumnsSteadyState(t *testing.T) {
	for _, sticking := range []float64{0, 0.2} {
		s := studyOf(t, ironRods)
		s.Designs[0].Fate.Sticking = sticking
		d := assess(t, s).Designs[0]
		var supply, ground float64
		for _, q := range d.Programme.Streams {
			supply += q.Supply
			ground += q.Ground
		}
		inventory := value(t, d, "inventory")
		if got, want := inventory/supply, value(t, d, "lifetime"); math.Abs(got/want-1) > 1e-6 {
			t.Errorf("sticking %g: lifetime %g s by the schedule's stores, %g s by the column", sticking, got, want)
		}
		area := inventory / value(t, d, "burden")
		if got, want := ground/area, value(t, d, "ground_store"); math.Abs(got/want-1) > 1e-6 {
			t.Errorf("sticking %g: ground store %g kg/m2 by the schedule, %g by the column", sticking, got, want)
		}
	}
}

// The order of designs, the number of workers and what was remembered change nothing.
func TestSameAnswerForAnyWorkersAndMemory(t *testing.T) {
	s := example(t)
	figures := func(r *Result) string {
		var all []map[string]FigureValue
		for _, d := range r.Designs {
			all = append(all, d.Figures)
		}
		b, err := json.Marshal(all)
		if err != nil {
			t.Fatal(err)
		}
		return string(b)
	}
	one := NewEngine(Options{Workers: 1})
	var want string
	for i, e := range []*Engine{one, one, NewEngine(Options{Workers: 2})} {
		r, err := e.Assess(context.Background(), s)
		if err != nil {
			t.Fatal(err)
		}
		got := figures(r)
		if i == 0 {
			want = got
		} else if got != want {
			t.Errorf("run %d differs from the first", i)
		}
	}
}

func TestCancelledAssessmentReturnsTheCause(t *testing.T) {
	ctx, cancel := context.WithCancel(context.Background())
	cancel()
	if _, err := NewEngine(Options{}).Assess(ctx, example(t)); err != context.Canceled {
		t.Errorf("error %v, want %v", err, context.Canceled)
	}
}

func TestExampleFileIsThere(t *testing.T) {
	if _, err := os.Stat("examples/lantern-basin/README.md"); err != nil {
		t.Error(err)
	}
}

func BenchmarkAssess(b *testing.B) {
	s := example(b)
	b.ReportAllocs()
	for b.Loop() {
		if _, err := NewEngine(Options{}).Assess(context.Background(), s); err != nil {
			b.Fatal(err)
		}
	}
}

// The schedule's table of the warming stays within 0.03 K of the estimate it stands for.
func TestResponseTable(t *testing.T) {
	s := studyOf(t, ironRods)
	p, err := newPlanet(s)
	if err != nil {
		t.Fatal(err)
	}
	f := facts{design: &s.Designs[0]}
	pop, err := NewEngine(Options{}).population(p, &s.Designs[0], 0)
	if err != nil {
		t.Fatal(err)
	}
	f.populations = []*population{pop}
	if err := f.light(1); err != nil {
		t.Fatal(err)
	}
	const goal = 0.4e-3 // about 60 K
	at, err := response(p.quick, f.bands, goal, 1)
	if err != nil {
		t.Fatal(err)
	}
	worst := 0.0
	for i := range 500 {
		burden := 1.5 * goal * (float64(i) + 0.37) / 500
		want, err := p.quick.Warming(f.bands, burden)
		if err != nil {
			t.Fatal(err)
		}
		worst = max(worst, math.Abs(at(burden)-want.Warming))
	}
	if worst > 0.03 {
		t.Errorf("the table is up to %.3g K off the estimate, stated 0.03 K", worst)
	}
	want, _ := p.quick.Warming(f.bands, goal)
	if got := at(goal); math.Abs(got-want.Warming) > 1e-9 {
		t.Errorf("at the goal the table gives %g K, the estimate %g K", got, want.Warming)
	}
}

// A limit on a figure that has no value: without bound fails an upper limit and meets a
// lower one; what is unknown is neither.
func TestLimitsOnAbsentFigures(t *testing.T) {
	figures := map[string]FigureValue{
		"time_to_goal":       {Null: true, Why: "never"},
		"agglomeration_time": {Null: true, Why: "nothing sticks"},
		"radio_loss_s":       {Null: true, Why: "no data"},
		"lifetime":           {Value: 10},
	}
	limits := []Limit{
		{Figure: "time_to_goal", AtMost: true, Bound: 60},
		{Figure: "agglomeration_time", Bound: 5},
		{Figure: "radio_loss_s", AtMost: true, Bound: 1},
		{Figure: "lifetime", Bound: 5},
		{Figure: "lifetime", AtMost: true, Bound: 4},
	}
	want := []LimitResult{{Known: true}, {Known: true, Met: true}, {}, {Known: true, Met: true, Factor: 0.5}, {Known: true, Factor: 2.5}}
	for i, got := range holdAgainst(limits, figures, true) {
		if got.Known != want[i].Known || got.Met != want[i].Met || got.Factor != want[i].Factor {
			t.Errorf("%+v: known %v met %v factor %g, want %+v", limits[i], got.Known, got.Met, got.Factor, want[i])
		}
	}
	if got := holdAgainst(limits[:1], figures, false)[0]; got.Known {
		t.Error("a limit of a design without a burden cannot be known")
	}
}
