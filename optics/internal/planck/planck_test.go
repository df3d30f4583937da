package planck

import (
	"math"
	"testing"
)

// Blackbody tables: F(0 to lambda T) at lambda T in um K (Modest & Mazumder 2021, appendix C; values from memory).
func TestFraction_tables(t *testing.T) {
	for _, c := range []struct{ lt, want float64 }{{1000, 0.00032}, {2898, 0.25006}, {4000, 0.48087}, {6000, 0.73779}, {10000, 0.91416}, {50000, 0.99889}} {
		if got := Fraction(c.lt*1e-6/300, 300); math.Abs(got-c.want) > 2e-4 {
			t.Errorf("F(%g um K) = %.5f, want %.5f", c.lt, got, c.want)
		}
	}
}

// The density integrates to the fraction, and the two branches of the fraction meet at x = 1.
func TestDensity_integrates(t *testing.T) {
	const temperature, n = 210.0, 20000
	a, b := math.Log(4e-6), math.Log(400e-6)
	var sum float64
	for i := range n {
		l := math.Exp(a + (b-a)*(float64(i)+0.5)/n)
		sum += Density(l, temperature) * l * (b - a) / n
	}
	if want := Fraction(400e-6, temperature) - Fraction(4e-6, temperature); math.Abs(sum-want) > 1e-7 {
		t.Errorf("integral %.9f, difference of fractions %.9f", sum, want)
	}
	l := SecondRadiation / temperature
	if d := Fraction(l*1.0000001, temperature) - Fraction(l*0.9999999, temperature); d < 0 || d > 1e-6 {
		t.Errorf("branches at x = 1 differ by %g", d)
	}
	if p := Peak(temperature); Density(13.0e-6, temperature) > p || Density(14.5e-6, temperature) > p {
		t.Error("density exceeds its peak")
	}
}
