package logistics

import (
	"fmt"
	"math"
	"strings"
)

// Quantity is a result that may be missing. Why is empty when Value [SI] is known,
// and otherwise says why there is none; Value is then zero.
type Quantity struct {
	Value float64
	Why   string
}

// Known reports whether the value exists.
func (q Quantity) Known() bool { return q.Why == "" }

func known(v float64) Quantity { return Quantity{Value: v} }

func missing(format string, args ...any) Quantity {
	return Quantity{Why: fmt.Sprintf(format, args...)}
}

// Warning is a caution that must travel with the result. Field names the input that
// it hangs on.
type Warning struct{ Field, Text string }

// FieldError is an input that cannot be used: its name, its value with unit, and the
// allowed range.
type FieldError struct{ Field, Value, Want string }

func (e *FieldError) Error() string {
	return fmt.Sprintf("%s: %s is outside %s", e.Field, e.Value, e.Want)
}

// checker collects every bad field, in order.
type checker struct{ errs []error }

func (c *checker) number(field string, v float64, unit string, ok bool, want string) {
	if math.IsNaN(v) || math.IsInf(v, 0) || !ok {
		c.errs = append(c.errs, &FieldError{field, withUnit(v, unit), want})
	}
}

// within checks low <= v <= high.
func (c *checker) within(field string, v, low, high float64, unit string) {
	c.number(field, v, unit, v >= low && v <= high, fmt.Sprintf("%s to %s", withUnit(low, unit), withUnit(high, unit)))
}

// positive checks 0 < v <= high.
func (c *checker) positive(field string, v, high float64, unit string) {
	c.number(field, v, unit, v > 0 && v <= high, fmt.Sprintf("above 0 up to %s", withUnit(high, unit)))
}

// loss checks a share lost: 0 <= v < 1.
func (c *checker) loss(field string, v float64) {
	c.number(field, v, "", v >= 0 && v < 1, "0 up to, not including, 1")
}

func (c *checker) choice(field, v string, choices ...string) {
	for _, choice := range choices {
		if v == choice {
			return
		}
	}
	c.errs = append(c.errs, &FieldError{field, fmt.Sprintf("%q", v), "the choices " + strings.Join(choices, ", ")})
}

func withUnit(v float64, unit string) string {
	return strings.TrimSpace(fmt.Sprintf("%.6g %s", v, unit))
}

// year is the Julian year [s], 365.25 d of 86 400 s, used for texts and bounds.
const year = 365.25 * 86400

func years(t float64) string { return readable(t/year) + " yr" }

// tonnes writes a mass in t, kt, Mt or Gt, whichever reads best.
func tonnes(m float64) string {
	t, unit := m/1000, "t"
	for _, next := range []string{"kt", "Mt", "Gt"} {
		if t < 10e3 {
			break
		}
		t, unit = t/1000, next
	}
	return readable(t) + " " + unit
}

// readable writes a number with three significant figures, without an exponent where it is of
// ordinary size.
func readable(v float64) string {
	if v >= 100 && v < 1e7 {
		return fmt.Sprintf("%.0f", v)
	}
	return fmt.Sprintf("%.3g", v)
}
