package reports

import (
	"encoding/json"
	"math"
	"strings"
	"testing"

	"hazewright/logistics"
)

// The top of x^4/(e^x - 1) lies at x = 3.92069 (Wien's law per logarithm), where the
// shape is 1: at 5772 K that is 0.6358 um.
func TestPlanckShape(t *testing.T) {
	best, at := 0.0, 0.0
	for _, p := range planckShape(5772, 0.3e-6, 3e-6) {
		if p[1] > best {
			best, at = p[1], p[0]
		}
	}
	if math.Abs(best-1) > 1e-3 || math.Abs(at-0.6358) > 0.01 {
		t.Errorf("top %v at %v um, want 1 at 0.6358 um", best, at)
	}
}

func TestLogTicks(t *testing.T) {
	for _, c := range []struct {
		low, high float64
		want      string
	}{{1, 10, "[1,2,5,10]"}, {0.3, 3, "[0.5,1,2]"}, {1, 1e6, "[1,10,100,1000,10000,100000,1000000]"}} {
		got, _ := json.Marshal(logTicks(c.low, c.high))
		if string(got) != c.want {
			t.Errorf("ticks from %v to %v: %s, want %s", c.low, c.high, got, c.want)
		}
	}
}

func TestNiceAbove(t *testing.T) {
	for _, c := range [][2]float64{{26, 30}, {25, 25}, {79, 80}, {0.12, 0.15}, {1, 1}, {0, 0}, {-3, 0}} {
		if got := niceAbove(c[0]); math.Abs(got-c[1]) > 1e-12 {
			t.Errorf("niceAbove(%v) = %v, want %v", c[0], got, c[1])
		}
	}
}

// A mass-flow diagram cannot hold what runs both ways: only the net is drawn, and
// nothing that is nought.
func TestNetFlows(t *testing.T) {
	got := netFlows([]logistics.Flow{
		{Name: "settled", From: "air", To: "loose layer", Rate: 5}, {Name: "lifted again", From: "loose layer", To: "air", Rate: 3},
		{Name: "buried", From: "loose layer", To: "lost", Rate: 2}, {Name: "clumped", From: "air", To: "lost"},
	})
	if len(got) != 2 || got[0].Name != "settled" || got[0].Rate != 2 || got[1].Name != "buried" {
		t.Errorf("net flows %+v", got)
	}
}

// Keys without a field in go-echarts are joined into the series, and names of
// functions in a name stay data.
func TestOptionJSON(t *testing.T) {
	text, err := xy{lines: []line{{name: evilTag, points: [][2]float64{{1, 2}, {3, 4}}}, {name: evilRevive, points: [][2]float64{{1, 2}}, point: true}},
		x: axis{name: "x"}, y: axis{name: "y"}}.option()
	if err != nil {
		t.Fatal(err)
	}
	if strings.ContainsAny(string(text), "<>&") {
		t.Errorf("option is not safe in a script element: %s", text)
	}
	var option struct {
		Series []struct {
			Name, Type string
			Data       [][2]float64
			LineStyle  map[string]any
			Symbol     string
		}
	}
	if err := json.Unmarshal([]byte(text), &option); err != nil {
		t.Fatal(err)
	}
	if len(option.Series) != 2 || option.Series[0].Name != evilTag || option.Series[0].LineStyle["type"] != "solid" ||
		option.Series[0].Data[1] != [2]float64{3, 4} || option.Series[1].Type != "scatter" || option.Series[1].Symbol != "diamond" {
		t.Errorf("series %+v", option.Series)
	}
	if _, err := (xy{lines: []line{{name: "n", points: [][2]float64{{1, math.NaN()}}}}}).option(); err == nil {
		t.Error("a NaN must be an error")
	}
}
