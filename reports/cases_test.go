package reports

import (
	"slices"
	"strings"
	"testing"

	"hazewright"
	"hazewright/logistics"
)

// standing returns a design whose programme lands 100 t a window and needs as much, with a
// plant that lasts 20 yr and takes 10 yr to land.
func standing(timeToGoal float64) (variant, *logistics.Programme) {
	p := &logistics.Programme{Route: logistics.Local, Way: logistics.Way{LandedPerWindow: 1e5, LandedPerWindowNext: 1e5, FlightsPerWindow: 120, Windows: 5}}
	d := &hazewright.DesignResult{Reached: true, Design: &hazewright.Design{}}
	d.Design.Supply.Plant.Life = 20 * year
	d.Design.Supply.Delivery.WindowSpacing = 2 * year
	d.Design.Supply.Delivery.FlightsPerWindow = 120
	return variant{DesignResult: d, reached: true, programme: p, figures: map[string]hazewright.FigureValue{
		"warming": {Value: 25}, "burden": {Value: 1e-4}, "time_to_goal": {Value: timeToGoal}}}, p
}

func TestGoalWord(t *testing.T) {
	check := func(what string, v variant, word string, want tone) {
		t.Helper()
		if got, tone := v.goalWord(); got != word || tone != want {
			t.Errorf("%s: %q in tone %q, want %q in %q", what, got, tone, word, want)
		}
	}
	v, p := standing(19.8 * year)
	check("all well", v, "reached after 19.8 yr", good)
	p.LandedPerWindowNext = 3.5e5
	check("upkeep above delivery", v, "reached at its burden, after 19.8 yr", warn)

	v, p = standing(19.8 * year)
	p.Windows = 11
	check("landing outlasts the plant", v, "reached at its burden, after 19.8 yr", warn)
	p.Route = logistics.Shipped
	check("no plant to wear", v, "reached after 19.8 yr", good)

	v, _ = standing(35290 * year)
	check("goal after the plant's life", v, "reached at its burden, after 35300 yr", warn)

	v, _ = standing(0)
	v.figures["time_to_goal"] = hazewright.FigureValue{Null: true, Why: "never: the supply ends"}
	check("never", v, "reached at its burden, never by this programme", bad)
	v.programme, v.figures["warming"] = nil, hazewright.FigureValue{Value: -1.2}
	check("cools", v, "at its burden, which does not warm", warn)
	v.reached, v.cause = false, "sublimes"
	check("not reached", v, "not reached: sublimes", bad)
}

// The favourable case says itself that its supply does not hold.
func TestCardShowsTroublesOfEachCase(t *testing.T) {
	page := render(t, fixture())
	card := page[strings.Index(page, "<h3>Iron rods</h3>"):strings.Index(page, "<h3>Tuned mix</h3>")]
	if !strings.Contains(card, "! At 1 % sticking it reaches the goal, but: cannot be held as planned: ") || !strings.Contains(card, "flights a window needed, 120 planned") {
		t.Errorf("the card of the iron rods does not say that 1 %% sticking cannot be held:\n%s", card)
	}
	if strings.Contains(card, "\u2713") {
		t.Error("the card of the iron rods has a tick, although neither case can be held")
	}
}

// Warnings of one case come after those of all and name it; none is said twice.
func TestWarningsNameTheirCase(t *testing.T) {
	var got []string
	for _, w := range warningsOf(&fixture().Designs[0]) {
		got = append(got, w.String())
	}
	want := []string{
		"Iron rods: fate: a field stands the rods up",
		"Iron rods: fate.sticking: sticking is not given",
		"Iron rods, if every touch sticks (100 %): supply.release: 12 points are far fewer than the 1.332e7 that 90 % survival needs",
		"Iron rods, if one touch in a hundred sticks (1 %): supply.delivery.flights_per_window: 421 flights a window are needed",
	}
	if !slices.Equal(got, want) {
		t.Errorf("got\n%s\nwant\n%s", strings.Join(got, "\n"), strings.Join(want, "\n"))
	}
	doc, _ := jsonOf(t, fixture())
	design := doc["designs"].([]any)[0].(map[string]any)
	if n := len(design["warnings"].([]any)); n != 4 {
		t.Errorf("%d warnings of the design in JSON, want 4", n)
	}
	second := design["cases"].([]any)[1].(map[string]any)["warnings"].([]any)
	if len(second) != 2 || second[1].(map[string]any)["text"] != "421 flights a window are needed" {
		t.Errorf("warnings of the second case in JSON: %v", second)
	}
}

// A design that no burden makes warm has no largest warming, one that falls short has.
func TestDesignsThatDoNotWarm(t *testing.T) {
	r := fixture()
	ice := &r.Designs[2]
	ice.NeverWarms, ice.Cause, ice.MaxWarming = true, "unreachable: no burden warms", -1.19
	page, table := render(t, r), tableText(t, r, Style{})
	for _, text := range []string{page, table} {
		if strings.Contains(text, "-1.19") {
			t.Error("a cooling design is given a largest warming of -1.19 K")
		}
		if !strings.Contains(text, "by which these particles cool at every burden") {
			t.Error("it is not said that the particles cool")
		}
	}
	for _, c := range []struct {
		change func(d *hazewright.DesignResult)
		title  string
	}{
		{func(d *hazewright.DesignResult) { d.MaxBurden = d.Curve[20].Burden }, "Largest warming"},
		{func(d *hazewright.DesignResult) { d.MaxBurden = d.Curve[40].Burden }, "Warming at the end of the curve"}, // the scan just ends
		{func(d *hazewright.DesignResult) { d.Goal = d.Curve[20] }, "Warming at its burden"},
	} {
		d := &fixture().Designs[2]
		c.change(d)
		if title, _ := warmest(d); title != c.title {
			t.Errorf("title %q, want %q", title, c.title)
		}
	}
}

// A limit without a ratio says why.
func TestLimitWord(t *testing.T) {
	failed := hazewright.LimitResult{Known: true}
	for _, c := range []struct {
		l    hazewright.LimitResult
		v    hazewright.FigureValue
		want string
	}{
		{hazewright.LimitResult{}, hazewright.FigureValue{Null: true, Why: "sublimes"}, "not known"},
		{hazewright.LimitResult{Known: true, Met: true}, hazewright.FigureValue{}, "met"},
		{hazewright.LimitResult{Known: true, Factor: 1.8}, hazewright.FigureValue{Value: 1}, "FAILED x1.8"},
		{failed, hazewright.FigureValue{Null: true, Why: "never: the supply ends after 80 yr"}, "FAILED: never"},
		{failed, hazewright.FigureValue{Null: true, Why: "no programme: the burden does not warm (-1 K)"}, "FAILED: no programme"},
		{failed, hazewright.FigureValue{}, "FAILED"},
	} {
		if got := limitWord(c.l, c.v); got != c.want {
			t.Errorf("got %q, want %q", got, c.want)
		}
	}
}

func TestNumbersInTexts(t *testing.T) {
	for _, c := range []struct{ in, uniform, pretty string }{
		{"from 1250000 t/d to 12020 t/d (x104)", "from 1250000 t/d to 12020 t/d (x104)", "from 1\u202f250\u202f000 t/d to 12\u202f020 t/d (x104)"},
		{"13317641 flights", "1.332e7 flights", "1.332\u00a0×\u00a010⁷ flights"},
		{"takes 1.66e+07 yr.", "takes 1.66e7 yr.", "takes 1.66\u00a0×\u00a010⁷ yr."},
		{"FAILED x58200, 2.12345 K", "FAILED x58200, 2.12345 K", "FAILED x58\u202f200, 2.12345 K"},
		{"run_123456 v1.234567 a123456b", "run_123456 v1.234567 a123456b", "run_123456 v1.234567 a123456b"},
		{"9999 12345 67890", "9999 12345 67890", "9999 12\u202f345 67\u202f890"},
	} {
		if got := uniform(c.in); got != c.uniform {
			t.Errorf("uniform(%q) = %q, want %q", c.in, got, c.uniform)
		}
		if got := prettyText(uniform(c.in)); got != c.pretty {
			t.Errorf("prettyText(%q) = %q, want %q", c.in, got, c.pretty)
		}
	}
}

// Tables for paper hold at most so many designs, in order and about equally many each.
func TestBlocks(t *testing.T) {
	for n, want := range map[int][]int{1: {1}, 6: {6}, 7: {3, 4}, 13: {4, 4, 5}} {
		r := &hazewright.Result{Designs: make([]hazewright.DesignResult, n)}
		var got []int
		next := 0
		for i, b := range blocks(r, 6) {
			got = append(got, len(b.designs))
			if b.first != (i == 0) || b.last != (i == len(want)-1) {
				t.Errorf("%d designs, table %d: first %v, last %v", n, i, b.first, b.last)
			}
			for _, d := range b.designs {
				if d != &r.Designs[next] {
					t.Errorf("%d designs: table %d has the wrong ones", n, i)
				}
				next++
			}
		}
		if !slices.Equal(got, want) || next != n {
			t.Errorf("%d designs are parted into %v, want %v", n, got, want)
		}
	}
}

// No output tells in which folder the study lies.
func TestOutputsHideTheFolder(t *testing.T) {
	r := fixture()
	r.Study.File = "/home/somebody/secret/study.yaml"
	for i := range r.Study.Limits {
		l := &r.Study.Limits[i]
		l.Pos = strings.Replace(l.Pos, "study.yaml", r.Study.File, 1)
		for k := range r.Designs {
			r.Designs[k].Limits[i].Limit = *l
		}
	}
	_, text := jsonOf(t, r)
	for name, text := range map[string]string{"HTML": render(t, r), "JSON": string(text), "table": tableText(t, r, Style{})} {
		if strings.Contains(text, "secret") {
			t.Errorf("%s tells the folder", name)
		}
		if name != "table" && !strings.Contains(text, "study.yaml") {
			t.Errorf("%s does not name the study", name)
		}
	}
	for _, f := range csvOf(t, r) {
		if strings.Contains(string(f.Data), "secret") {
			t.Errorf("%s tells the folder", f.Name)
		}
	}
}

// Where the masses lie far apart, marks on a logarithmic axis take the place of bars.
func TestLandedChartChangesToMarks(t *testing.T) {
	r := fixture()
	c, err := landedChart(r)
	if err != nil {
		t.Fatal(err)
	}
	if option := string(c.Option); !strings.Contains(option, `"type":"scatter"`) || !strings.Contains(option, `"type":"log"`) {
		t.Errorf("masses from %s: want marks on a logarithmic axis", c.Title)
	}
	r.Designs = r.Designs[1:2]
	r.Designs[0].Programme.Shipped.LandedMass = 20 * r.Designs[0].Programme.Local.LandedMass
	if c, err = landedChart(r); err != nil {
		t.Fatal(err)
	}
	if option := string(c.Option); strings.Contains(option, `"type":"scatter"`) {
		t.Errorf("masses from %s: want bars", c.Title)
	}
}

// Above six designs the warming chart has one line for each and nothing else.
func TestWarmingChartOfManyDesigns(t *testing.T) {
	r := fixture()
	for len(r.Designs) < 7 {
		r.Designs = append(r.Designs, r.Designs[1])
	}
	c, err := warmingChart(r)
	if err != nil {
		t.Fatal(err)
	}
	if len(c.Legend) != 7 {
		t.Errorf("%d lines for 7 designs", len(c.Legend))
	}
}

func TestFixedLayerIsSaidUnderTheProfile(t *testing.T) {
	r := fixture()
	r.Designs[0].Design.Fate.Profile = hazewright.Profile{Kind: "layer", Bottom: 25e3, Top: 35e3}
	r.Designs[0].LayerShare = 0.085
	c, err := profileChart(r)
	if err != nil {
		t.Fatal(err)
	}
	if want := "the warming uses the study's layer from 25 to 35 km, in which 8.5 % of the mass drawn lies"; !strings.Contains(c.Caption, want) {
		t.Errorf("caption %q lacks %q", c.Caption, want)
	}
}
