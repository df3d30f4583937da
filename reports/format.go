package reports

import (
	"math"
	"regexp"
	"strconv"
	"strings"
	"unicode"
	"unicode/utf8"

	"hazewright"
)

const (
	digits = 4 // significant digits of a figure

	day  = 86400.0
	year = 365.25 * day
)

// figureText returns a figure in its shown unit, such as "85.2 mg/m2", or "-" if
// there is none.
func figureText(def hazewright.FigureDef, v hazewright.FigureValue) string {
	if v.Null {
		return "-"
	}
	return quantity(v.Value, def.Shown)
}

// figureCell is figureText without the unit, for tables that name it once.
func figureCell(def hazewright.FigureDef, v hazewright.FigureValue) string {
	if v.Null {
		return "-"
	}
	return bare(v.Value, def.Shown)
}

// quantity writes an SI value in the unit given, without a unit if that is "1".
func quantity(si float64, unit string) string {
	if unit == "1" {
		return bare(si, unit)
	}
	return bare(si, unit) + " " + unit
}

// bare writes an SI value in the unit given, without the unit.
func bare(si float64, unit string) string {
	return strings.TrimSuffix(hazewright.FormatSI(si, unit, digits), " "+unit)
}

// shown returns an SI value in the unit given, for charts. The units come from the
// table of figures, so they are known.
func shown(si float64, unit string) float64 {
	v, err := hazewright.Convert(si, unit)
	if err != nil {
		return si
	}
	return v
}

// duration writes a time [s] in the unit that suits its size.
func duration(s float64) string {
	for _, u := range []struct {
		name string
		size float64
	}{{"yr", year}, {"d", day}, {"h", 3600}} {
		if math.Abs(s) >= 1.5*u.size {
			return significant(s/u.size, 3) + " " + u.name
		}
	}
	return significant(s, 3) + " s"
}

// factor writes a ratio, such as "x1.8".
func factor(v float64) string { return "x" + significant(v, 3) }

// percent writes a share as a percentage.
func percent(share float64) string { return significant(100*share, 3) + " %" }

// significant writes v with n significant digits, without an exponent for ordinary
// sizes.
func significant(v float64, n int) string { return hazewright.FormatSI(v, "1", n) }

// round5 rounds to 5 significant digits: enough for any chart, and short in the page.
func round5(v float64) float64 {
	r, err := strconv.ParseFloat(strconv.FormatFloat(v, 'g', 5, 64), 64)
	if err != nil {
		return v
	}
	return r
}

var (
	unitPower   = regexp.MustCompile(`\b([kcm]?m)([23])\b`)
	unitMicro   = regexp.MustCompile(`\bum\b`)
	tenToThe    = regexp.MustCompile(`\b(\d+(?:\.\d+)?)e(-?\d+)\b`)
	raisedDigit = strings.NewReplacer("-", "⁻", "0", "⁰", "1", "¹", "2", "²", "3", "³", "4", "⁴", "5", "⁵", "6", "⁶", "7", "⁷", "8", "⁸", "9", "⁹")
)

// typographic returns a text with units and powers of ten raised: "85 mg/m²",
// "1.2 × 10²⁰ 1/s".
func typographic(s string) string {
	s = unitMicro.ReplaceAllString(s, "µm")
	s = unitPower.ReplaceAllStringFunc(s, func(u string) string { return u[:len(u)-1] + raisedDigit.Replace(u[len(u)-1:]) })
	return tenToThe.ReplaceAllStringFunc(s, func(n string) string {
		mantissa, exponent, _ := strings.Cut(n, "e")
		return mantissa + "\u00a0×\u00a010" + raisedDigit.Replace(exponent)
	})
}

var numberInText = regexp.MustCompile(`\d+(?:\.\d+)?(?:e[+-]?\d+)?`)

// eachNumber replaces the numbers of a text that stand by themselves, as "12020" and
// "x583" do and the digits of a name or a version do not.
func eachNumber(s string, replace func(number string) string) string {
	var b strings.Builder
	last := 0
	for _, at := range numberInText.FindAllStringIndex(s, -1) {
		before, _ := utf8.DecodeLastRuneInString(strings.TrimSuffix(s[:at[0]], "x"))
		after, _ := utf8.DecodeRuneInString(strings.TrimPrefix(s[at[1]:], "."))
		if partOfName(before) || partOfName(after) {
			continue
		}
		b.WriteString(s[last:at[0]])
		b.WriteString(replace(s[at[0]:at[1]]))
		last = at[1]
	}
	return b.String() + s[last:]
}

func partOfName(r rune) bool {
	return unicode.IsLetter(r) || unicode.IsDigit(r) || r == '_' || r == '.' || r == '/'
}

// pretty writes an SI value in the unit given for the report: powers raised, and a
// narrow space between thousands.
func pretty(si float64, unit string) string { return prettyText(quantity(si, unit)) }

// prettyText does so for every number of a text.
func prettyText(s string) string {
	return typographic(eachNumber(s, func(n string) string {
		whole := len(n)
		if i := strings.IndexAny(n, ".e"); i >= 0 {
			whole = i
		}
		for i := whole - 3; i > 0 && whole >= 5; i -= 3 {
			n = n[:i] + "\u202f" + n[i:]
		}
		return n
	}))
}

// uniform writes the large numbers of a text as figures are written: "13317641 flights"
// becomes "1.332e7 flights", "1.66e+07 yr" becomes "1.66e7 yr".
func uniform(s string) string {
	return eachNumber(s, func(n string) string {
		v, err := strconv.ParseFloat(n, 64)
		if err != nil || v < 1e7 && !strings.Contains(n, "e") {
			return n
		}
		return significant(v, digits)
	})
}

// clean makes a text from a study safe to show on one line: control characters and
// marks that reorder text (which can make one name look like another) become "?",
// and any run of white space one space.
func clean(s string) string {
	s = strings.Map(func(r rune) rune {
		switch {
		case unicode.IsSpace(r):
			return ' '
		case unicode.IsControl(r), r == unicode.ReplacementChar,
			r >= 0x200B && r <= 0x200F, r >= 0x202A && r <= 0x202E, r >= 0x2060 && r <= 0x2069, r == 0xFEFF:
			return '?'
		}
		return r
	}, strings.ToValidUTF8(s, "?"))
	return strings.Join(strings.Fields(s), " ")
}

// plural returns "1 study" or "3 studies".
func plural(n int, one, many string) string {
	if n == 1 {
		return "1 " + one
	}
	return strconv.Itoa(n) + " " + many
}
