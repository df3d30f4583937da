package hazewright

import (
	"fmt"
	"math"
	"math/big"
	"strconv"
	"strings"
)

// Quantity is a number with its unit, as a study file writes it.
type Quantity struct {
	SI        float64   // the value in SI units, correctly rounded
	Dimension Dimension // of the unit
	Celsius   bool      // given in degC: a temperature, not a difference

	number string // decimal digits in one normal spelling
	unit   string // unit text in one normal spelling
}

// String returns the quantity in one normal spelling ("9 um"), which [ParseQuantity]
// reads back to the same value.
func (q Quantity) String() string {
	if q.unit == "" {
		return q.number
	}
	return q.number + " " + q.unit
}

// plain reports whether the quantity is a bare number: no unit, not even %.
func (q Quantity) plain() bool { return q.unit == "" }

// QuantityError says why text is not a quantity.
type QuantityError struct {
	Text    string // what was to be read
	Problem string // as the continuation of Text: "has the unknown unit ..."
	Hint    string // how to mend it; may be empty
}

// Error returns text, problem and hint in one line.
func (e *QuantityError) Error() string {
	msg := strings.TrimSpace(e.Text + " " + e.Problem)
	if e.Hint != "" {
		msg += "; " + e.Hint
	}
	return msg
}

const (
	maxQuantityText = 200
	maxExponent     = 300
)

// ParseQuantity reads "number unit" or a plain number: "9 um", "1e-3 kg/m2",
// "30 t/(t/d)", "25 %/yr", "-40 degC", "0.25". See [Units] for the units.
//
// The decimal number is scaled exactly and rounded once, so that every spelling of the
// same quantity ("9 um", "9000 nm", "9e-6 m") gives the same SI value to the last bit.
//
// Errors are *QuantityError: not a number or not finite, a number that reads as octal
// ("010"), separators inside a number ("1,000", "1_000", "1 000"), an unknown unit.
func ParseQuantity(text string) (Quantity, error) {
	shown := text
	if len(shown) > maxQuantityText {
		shown = shown[:60] + "..."
	}
	fail := func(problem, hint string) (Quantity, error) {
		return Quantity{}, &QuantityError{Text: strings.ToValidUTF8(shown, "?"), Problem: problem, Hint: hint}
	}
	if len(text) > maxQuantityText {
		return fail("is too long for a quantity", `write "number unit", such as "9 um"`)
	}
	body := strings.TrimSpace(strings.ReplaceAll(text, "−", "-"))
	number, rest := cutNumber(body)
	if number == "" {
		return fail(noNumber(body))
	}
	if problem, hint := numberFault(number, rest); problem != "" {
		return fail(problem, hint)
	}
	value, normal, ok := decimal(number)
	if !ok {
		return fail("has an exponent that is too large", fmt.Sprintf("powers of ten go from -%d to %d", maxExponent, maxExponent))
	}
	u, err := parseUnit(rest)
	if err != nil {
		if q, ok := err.(*QuantityError); ok {
			return fail(q.Problem, q.Hint)
		}
		return fail(err.Error(), "")
	}
	zero := value.Sign() == 0
	value.Mul(value, u.factor)
	if u.celsius {
		value.Add(value, celsiusOffset)
		zero = value.Sign() == 0
	}
	si, _ := value.Float64()
	if math.IsInf(si, 0) || si == 0 && !zero {
		return fail("is beyond the numbers a computer holds", "check number and unit")
	}
	return Quantity{SI: si, Dimension: u.dim, Celsius: u.celsius, number: normal, unit: u.text}, nil
}

// cutNumber splits a leading decimal number off the text.
func cutNumber(s string) (number, rest string) {
	i := 0
	if i < len(s) && (s[i] == '+' || s[i] == '-') {
		i++
	}
	digits := 0
	for ; i < len(s) && isDigit(s[i]); i++ {
		digits++
	}
	if i < len(s) && s[i] == '.' {
		for i++; i < len(s) && isDigit(s[i]); i++ {
			digits++
		}
	}
	if digits == 0 {
		return "", s
	}
	if i < len(s) && (s[i] == 'e' || s[i] == 'E') {
		j := i + 1
		if j < len(s) && (s[j] == '+' || s[j] == '-') {
			j++
		}
		if j < len(s) && isDigit(s[j]) {
			for j < len(s) && isDigit(s[j]) {
				j++
			}
			i = j
		}
	}
	return s[:i], s[i:]
}

// noNumber explains text that does not start with a number.
func noNumber(s string) (problem, hint string) {
	word := strings.ToLower(strings.TrimLeft(s, "+-."))
	switch {
	case s == "":
		return "is empty", `write "number unit", such as "9 um"`
	case strings.HasPrefix(word, "nan"), strings.HasPrefix(word, "inf"):
		return "is not a finite number", "write a number"
	}
	return "does not start with a number", `write "number unit", such as "9 um"`
}

// numberFault explains spellings of numbers that could be misread.
func numberFault(number, rest string) (problem, hint string) {
	digits := strings.TrimLeft(number, "+-")
	spaced := strings.TrimLeft(rest, " \t\u00a0\u202f\u2009")
	switch {
	case digits[0] == '0' && len(digits) == 1 && rest != "" && strings.ContainsRune("xXoObB", rune(rest[0])) && len(rest) > 1 && isHex(rest[1]):
		return "looks hexadecimal, octal or binary", "write a decimal number"
	case len(digits) > 1 && digits[0] == '0' && isDigit(digits[1]):
		return "has a leading zero, which reads as octal elsewhere", "write it without the leading zero"
	case strings.HasPrefix(rest, ","):
		return "has a comma inside the number", "write thousands without a comma (1000) and decimals with a point (1.5)"
	case strings.HasPrefix(rest, "_"), strings.HasPrefix(rest, "'"):
		return "has a separator inside the number", "write thousands without a separator: 1000"
	case strings.HasPrefix(rest, "."):
		return "has two decimal points", "write thousands without a separator (1000) and decimals with one point"
	case len(spaced) > 1 && isDigit(spaced[0]) && (isDigit(spaced[1]) || spaced[0] != '1'):
		return "has a space inside the number", "write thousands without a space: 1000"
	}
	return "", ""
}

func isHex(c byte) bool {
	return isDigit(c) || c >= 'a' && c <= 'f' || c >= 'A' && c <= 'F'
}

// decimal returns a number that cutNumber found exactly, with its normal spelling.
// It reports false for an exponent outside +-maxExponent.
func decimal(number string) (value *big.Rat, normal string, ok bool) {
	negative := strings.HasPrefix(number, "-")
	mantissa, exponent, _ := strings.Cut(strings.ToLower(strings.TrimLeft(number, "+-")), "e")
	whole, fraction, _ := strings.Cut(mantissa, ".")
	if whole == "" {
		whole = "0"
	}
	exp := 0
	if exponent != "" {
		var err error
		if exp, err = strconv.Atoi(exponent); err != nil || exp < -maxExponent || exp > maxExponent {
			return nil, "", false
		}
	}
	normal = whole
	if fraction != "" {
		normal += "." + fraction
	}
	if exp != 0 {
		normal += "e" + strconv.Itoa(exp)
	}
	if negative {
		normal = "-" + normal
	}
	value, ok = new(big.Rat).SetString(normal)
	return value, normal, ok
}
