package logistics

import (
	"fmt"
	"math"
)

// SynodicPeriod returns the mean time [s] between like alignments, and so between
// launch windows, of two planets with the sidereal orbital periods a and b [s]:
//
//	1/S = |1/a - 1/b|
//
// Single windows differ from it by some weeks where orbits are eccentric. Periods
// that are not positive and finite, or are equal, are an error. Source: [Vallado2013].
func SynodicPeriod(a, b float64) (float64, error) {
	var c checker
	c.positive("orbital period a", a, longest, "s")
	c.positive("orbital period b", b, longest, "s")
	if len(c.errs) > 0 {
		return 0, c.errs[0]
	}
	if a == b {
		return 0, fmt.Errorf("orbital periods: both are %s, and equal periods have no windows", withUnit(a, "s"))
	}
	return a / math.Abs(b-a) * b, nil
}
