package settling

import "fmt"

// The shear [1/s] and the electric field [V/m] that rods are held against. The
// first is the order of the shear in a windy lower atmosphere, the second that of
// fields in dust storms; rules of thumb: common practice, no source.
const (
	usualShear = 1.0
	stormField = 5e3
)

// unfitShare is the share of the airborne mass in gas outside the range of the
// viscosity fit above which a warning is given [1].
const unfitShare = 0.1

// warnings lists what makes the result less sure than usual.
func (m *Model) warnings(s *Suspension, w *work, k float64) []string {
	var out []string
	warn := func(format string, args ...any) { out = append(out, fmt.Sprintf(format, args...)) }
	if s.LayerField > WarnField {
		warn("the charge aloft makes a field of %.3g V/m, above %g V/m; counter-ions are assumed absent", s.LayerField, WarnField)
	}
	for _, l := range m.lanes {
		if flag := l.transport.fall.Flag; flag != "" {
			warn("at the ground, particles of %.3g kg: %s", l.body.Mass, flag)
			break
		}
	}
	for _, l := range m.lanes {
		if release := max(m.fate.ReleaseHeight, m.fate.LiftHeight); l.transport.fast <= release {
			warn("from %.3g m up, particles of %.3g kg fall faster than %g of the molecules' speed; they fall slower there than given", l.transport.fast, l.body.Mass, fastShare)
			break
		}
	}
	ground := m.lattice.gas[0]
	if m.median.Shape == Rod {
		// The body and the state were checked, so no error is left to report.
		if d, err := RotationalDiffusivity(ground, m.median); err == nil && usualShear > d {
			warn("rods turn at %.2g 1/s by thermal motion, slower than a shear of %g 1/s: they are not turned at random", d, usualShear)
		}
		if e, err := AligningField(ground, m.median); err == nil && stormField > e {
			warn("if the rods conduct, a field of %.1f kV/m stands them up, less than the %g kV/m of a dust storm: they then fall faster than given and look different", e/1e3, stormField/1e3)
		}
	}
	low, high := m.column.Gas().FittedRange()
	outside := 0.0
	for i, g := range m.lattice.mid {
		if g.Temperature < low || g.Temperature > high {
			outside += w.mass[i]
		}
	}
	if outside > unfitShare {
		warn("%.0f %% of the airborne mass is in gas outside %g K to %g K, where the viscosity is less sure than 2 %%", 100*outside, low, high)
	}
	h := m.column.ScaleHeight(0)
	if mixing := h * h / m.fate.Eddy(h); k*mixing > 1 {
		warn("particles meet in %.2g d, faster than the column mixes (%.2g d): one rate over the whole column understates how long they last, by up to about 1.4 times", 1/k/86400, mixing/86400)
	}
	if i := m.lattice.cellOf(m.fate.ReleaseHeight); k*m.lattice.thickness(i)*m.lattice.thickness(i) > m.lattice.eddy[i] {
		warn("particles meet before they are mixed out of the %.0f m in which they are released; the result depends on the grid", m.lattice.thickness(i))
	}
	if r := m.fate.Deposition / s.FallSpeedGround; r > 1 {
		warn("deposition is %.2g times the fall speed at the ground and rules how long particles stay", r)
	}
	return out
}
