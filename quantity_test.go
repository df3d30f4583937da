package hazewright

import (
	"errors"
	"fmt"
	"math"
	"math/big"
	"strings"
	"testing"

	"pgregory.net/rapid"
)

// Expected values: SI definitions (BIPM SI brochure, 9th edition), the Julian year of
// 365.25 d, the standard atmosphere of 101 325 Pa, and the Mars solar day of 88 775.244 s
// (Allison & McEwen 2000), multiplied out by hand.
func TestParseQuantity(t *testing.T) {
	for _, c := range []struct {
		text string
		want float64
		dim  Dimension
	}{
		{"9 um", 9e-6, dimLength},
		{"9µm", 9e-6, dimLength},  // U+00B5
		{"9 μm", 9e-6, dimLength}, // U+03BC
		{"12 cm", 0.12, dimLength},
		{"1 yr", 31557600, dimTime},
		{"1 sol", 88775.244, dimTime},
		{"779.94 d", 67386816, dimTime},
		{"90 min", 5400, dimTime},
		{"2 Gt", 2e12, dimMass},
		{"120 mg/m2", 120e-6, Dimension{-2, 1}},
		{"120 mg/m^2", 120e-6, Dimension{-2, 1}},
		{"120 mg m-2", 120e-6, Dimension{-2, 1}},
		{"120 mg m⁻²", 120e-6, Dimension{-2, 1}},
		{"15 L/s", 0.015, Dimension{3, 0, -1}},
		{"30 t/(t/d)", 30 * 86400, dimTime},
		{"25 %/yr", 0.25 / 31557600, dimRate},
		{"3 /yr", 3.0 / 31557600, dimRate},
		{"3 1/yr", 3.0 / 31557600, dimRate},
		{"2.5 K/km", 0.0025, Dimension{-1, 0, 0, 1}},
		{"-40 degC", 233.15, dimTemperature},
		{"-40 °C", 233.15, dimTemperature},
		{"30 K", 30, dimTemperature},
		{"1 kWh/kg", 3.6e6, Dimension{2, 0, -2}},
		{"60 kg/kW", 0.06, Dimension{-2, 0, 3}},
		{"6.1 mbar", 610, dimPressure},
		{"1 atm", 101325, dimPressure},
		{"5 kV/m", 5000, Dimension{1, 1, -3, 0, -1}},
		{"3 W/(m2 K)", 3, Dimension{0, 1, -3, -1}},
		{"8.4 GHz", 8.4e9, dimRate},
		{"180 deg", math.Pi, dimAngle},
		{"3 dB", 3, dimLevel},
		{"40 %", 0.4, Dimension{}},
		{"40%", 0.4, Dimension{}},
		{"400 ppm", 4e-4, Dimension{}},
		{"0.25", 0.25, Dimension{}},
		{".5", 0.5, Dimension{}},
		{"1e-3 kg", 1e-3, dimMass},
		{"+5 m", 5, dimLength},
		{"−5 m", -5, dimLength},
	} {
		q, err := ParseQuantity(c.text)
		if err != nil {
			t.Errorf("%q: %v", c.text, err)
			continue
		}
		if q.SI != c.want || q.Dimension != c.dim {
			t.Errorf("%q: got %v %v, want %v %v", c.text, q.SI, q.Dimension, c.want, c.dim)
		}
	}
}

func TestParseQuantity_Refuses(t *testing.T) {
	for _, c := range []struct{ text, problem, hint string }{
		{"", "is empty", ""},
		{"um", "does not start with a number", ""},
		{"nan", "is not a finite number", ""},
		{".inf", "is not a finite number", ""},
		{"-Inf m", "is not a finite number", ""},
		{"1,000 m", "has a comma", "1000"},
		{"1,5 um", "has a comma", "1.5"},
		{"1_000 m", "has a separator", "1000"},
		{"1'000 m", "has a separator", "1000"},
		{"1 000 m", "has a space inside", "1000"},
		{"1.000.000 m", "has two decimal points", ""},
		{"010 m", "has a leading zero", "without the leading zero"},
		{"-00.5 m", "has a leading zero", ""},
		{"0x10 m", "looks hexadecimal", "decimal"},
		{"0b11", "looks hexadecimal, octal or binary", ""},
		{"9 micron", `has the unknown unit "micron"`, "use um"},
		{"9 UM", `has the unknown unit "UM"`, "use um (case matters)"},
		{"9 kmm", `has the unknown unit "kmm"`, "did you mean"},
		{"9 W/m2 K", "can be read in two ways", "W/(m2 K)"},
		{"9 W/m2*K", "can be read in two ways", ""},
		{"9 degC/km", "degC inside a compound", "K"},
		{"9 m degC", "degC inside a compound", "K"},
		{"9 m0", `has the unit power "0"`, ""},
		{"9 m99", `has the unit power "99"`, ""},
		{"9 (m", "closing parenthesis", ""},
		{"9 m)", "cannot be read", ""},
		{"9 m/", "ends early", ""},
		{"9 ((((((m))))))", "too many parentheses", ""},
		{"1e301 m", "exponent that is too large", ""},
		{"1e99999999999999999999 m", "exponent that is too large", ""},
		{"1e300 Gt", "beyond the numbers", ""},
		{"1e-300 nm9", "beyond the numbers", ""},
		{"12:30", "cannot be read", ""},
		{"2026-01-02", "cannot be read", ""},
		{strings.Repeat("1", 300), "too long", ""},
	} {
		_, err := ParseQuantity(c.text)
		var q *QuantityError
		if !errors.As(err, &q) {
			t.Errorf("%.40q: got %v, want a QuantityError", c.text, err)
			continue
		}
		if !strings.Contains(q.Problem, c.problem) || !strings.Contains(q.Hint, c.hint) {
			t.Errorf("%.40q: got problem %q, hint %q; want %q, %q", c.text, q.Problem, q.Hint, c.problem, c.hint)
		}
	}
}

// Every spelling of one length is the same float64, the one nearest to the decimal.
func TestParseQuantity_SameValueInAnyUnit(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		digits := rapid.StringMatching(`[1-9][0-9]{0,17}`).Draw(t, "digits")
		exp := rapid.IntRange(-12, 12).Draw(t, "exponent")
		exact, _ := new(big.Rat).SetString(fmt.Sprintf("%se%d", digits, exp))
		want, _ := exact.Float64()
		for unit, power := range map[string]int{"nm": -9, "um": -6, "mm": -3, "cm": -2, "m": 0, "km": 3} {
			q, err := ParseQuantity(fmt.Sprintf("%se%d %s", digits, exp-power, unit))
			if err != nil || q.SI != want {
				t.Fatalf("%se%d m written in %s: got %v, %v; want %v", digits, exp, unit, q.SI, err, want)
			}
		}
	})
}

func TestParseQuantity_PrintsAndParsesBack(t *testing.T) {
	symbols := make([]string, 0, len(unitRows))
	for _, u := range Units() {
		if u.Symbol != "degC" {
			symbols = append(symbols, u.Symbol)
		}
	}
	rapid.Check(t, func(t *rapid.T) {
		number := rapid.StringMatching(`-?(0|[1-9][0-9]{0,5})(\.[0-9]{1,5})?(e-?[0-9])?`).Draw(t, "number")
		unit := rapid.SampledFrom(symbols).Draw(t, "unit")
		if rapid.Bool().Draw(t, "compound") {
			unit += rapid.SampledFrom([]string{"/", " ", "*", "^2/", " / (", "-1 "}).Draw(t, "joint") + rapid.SampledFrom(symbols).Draw(t, "second")
			if strings.Contains(unit, "(") {
				unit += ")"
			}
		}
		checkRoundTrip(t, number+" "+unit)
	})
}

// checkRoundTrip fails if text is a quantity whose print does not parse to the same.
func checkRoundTrip(t interface{ Fatalf(string, ...any) }, text string) {
	q, err := ParseQuantity(text)
	if err != nil {
		return
	}
	if math.IsNaN(q.SI) || math.IsInf(q.SI, 0) {
		t.Fatalf("%q gives %v", text, q.SI)
	}
	again, err := ParseQuantity(q.String())
	if err != nil {
		t.Fatalf("%q prints as %q, which fails: %v", text, q, err)
	}
	if again != q {
		t.Fatalf("%q prints as %q and parses to %#v, not %#v", text, q, again, q)
	}
}

func FuzzParseQuantity(f *testing.F) {
	for _, s := range []string{"9 um", "30 t/(t/d)", "25 %/yr", "-40 degC", "1e-3 kg m-2", "1,000", "5 /s", "5 1/s", "0x1", "3 W/(m2 K)", "9µm²"} {
		f.Add(s)
	}
	f.Fuzz(func(t *testing.T, text string) { checkRoundTrip(t, text) })
}

func TestUnits_EachParsesToItsFactor(t *testing.T) {
	seen := map[string]bool{}
	for _, u := range Units() {
		if seen[u.Symbol] {
			t.Errorf("%s is in the table twice", u.Symbol)
		}
		seen[u.Symbol] = true
		if u.Meaning == "" || !(u.Factor > 0) {
			t.Errorf("%s: meaning %q, factor %v", u.Symbol, u.Meaning, u.Factor)
		}
		q, err := ParseQuantity("1 " + u.Symbol)
		want := u.Factor
		if u.Symbol == "degC" {
			want = 274.15
		}
		if err != nil || q.SI != want || q.Dimension != u.Dimension {
			t.Errorf("1 %s: got %v %v, %v; want %v %v", u.Symbol, q.SI, q.Dimension, err, want, u.Dimension)
		}
	}
	for word, symbol := range unitWords {
		if !seen[symbol] {
			t.Errorf("the hint for %q names %q, which is no unit", word, symbol)
		}
		if seen[word] {
			t.Errorf("%q is a unit and needs no hint", word)
		}
	}
}

func TestConvert(t *testing.T) {
	for _, c := range []struct {
		si   float64
		unit string
		want float64
	}{
		{85e-6, "mg/m2", 85}, {1, "t/d", 86.4}, {0.12, "%", 12}, {233.15, "degC", -40}, {5, "1", 5}, {5, "", 5}, {1e6, "1/cm3", 1},
		{31557600, "yr", 1}, {0.015, "L/s", 15},
	} {
		got, err := Convert(c.si, c.unit)
		if err != nil || math.Abs(got-c.want) > 1e-12*math.Abs(c.want) {
			t.Errorf("Convert(%v, %q) = %v, %v; want %v", c.si, c.unit, got, err, c.want)
		}
	}
	for _, c := range []struct {
		si   float64
		unit string
	}{{1, "furlong"}, {math.NaN(), "m"}, {math.Inf(1), "m"}, {1e300, "nm4"}} {
		if v, err := Convert(c.si, c.unit); err == nil {
			t.Errorf("Convert(%v, %q) = %v without error", c.si, c.unit, v)
		}
	}
}

func TestFormatSI(t *testing.T) {
	for _, c := range []struct {
		si     float64
		unit   string
		digits int
		want   string
	}{
		{85e-6, "mg/m2", 3, "85 mg/m2"},
		{0.125, "%", 4, "12.5 %"},
		{12345.0 / 86.4, "t/d", 3, "12300 t/d"},
		{9999.9, "1", 3, "10000"},
		{0.00099996, "1", 3, "0.001"},
		{math.Nextafter(0.001, 0), "1", 3, "0.001"},
		{0.000999, "1", 3, "9.99e-4"},
		{9999999, "", 8, "9999999"},
		{9999999, "", 3, "1e7"},
		{5e-9, "m", 3, "5e-9 m"},
		{-233.456, "K", 4, "-233.5 K"},
		{0, "kg", 3, "0 kg"},
		{2.5, "1", 0, "2"},
		{1, "furlong", 3, `1 SI (not shown in "furlong": has the unknown unit "furlong")`},
	} {
		if got := FormatSI(c.si, c.unit, c.digits); got != c.want {
			t.Errorf("FormatSI(%v, %q, %d) = %q, want %q", c.si, c.unit, c.digits, got, c.want)
		}
	}
}

func TestNearest(t *testing.T) {
	keys := []string{"length", "diameter", "burial_time", "at", "ore_rate", "production_rate"}
	for _, c := range []struct{ word, want string }{
		{"lenght", "length"}, {"Length", "length"}, {"burial-time", "burial_time"}, {"burial", "burial_time"},
		{"diametre", "diameter"}, {"temperature", ""}, {"", ""}, {"zz", ""}, {"prod_rate", "production_rate"}, {"or_rate", "ore_rate"}, {strings.Repeat("length", 20), ""},
	} {
		if got := Nearest(c.word, keys); got != c.want {
			t.Errorf("Nearest(%q) = %q, want %q", c.word, got, c.want)
		}
	}
}
