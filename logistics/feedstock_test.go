package logistics

import (
	"errors"
	"strings"
	"testing"
)

// From the standard atomic weights Fe 55.845, O 15.999, Al 26.982 [IUPAC2021], by hand:
// 111.690/159.687, 167.535/231.531, 53.964/101.961.
func TestStoichiometry(t *testing.T) {
	for _, c := range []struct {
		mineral string
		want    float64
	}{
		{"hematite", 0.69943}, {"magnetite", 0.72360}, {"alumina", 0.52926},
		{"water-ice", 1}, {"halite", 1}, {"none", 1},
	} {
		got, err := Stoichiometry(c.mineral)
		if err != nil {
			t.Fatal(err)
		}
		near(t, c.mineral, got, c.want, 1e-5)
	}
	_, err := Stoichiometry("hematit")
	var field *FieldError
	if !errors.As(err, &field) || !strings.Contains(err.Error(), "hematite, magnetite") {
		t.Errorf("unknown mineral: %v", err)
	}
}

func TestMinimumReduction(t *testing.T) {
	// By hand from the formation values of [CRC2016] (from memory): 742.2 kJ/mol over
	// 0.11169 kg/mol and so on.
	for _, c := range []struct {
		mineral     string
		gibbs, heat float64
	}{
		{"hematite", 6.645e6, 7.379e6}, {"magnetite", 6.061e6, 6.676e6}, {"alumina", 29.32e6, 31.05e6},
	} {
		got, ok := MinimumReduction(c.mineral)
		if !ok {
			t.Fatalf("%s: no minimum", c.mineral)
		}
		near(t, c.mineral+" Gibbs", got.Gibbs, c.gibbs, 3e-4)
		near(t, c.mineral+" enthalpy", got.Enthalpy, c.heat, 3e-4)
	}
	// Another compilation: hematite -825.50 kJ/mol, NIST-JANAF Thermochemical Tables, 4th
	// edition, as shown by the NIST Chemistry WebBook.
	hematite, _ := MinimumReduction("hematite")
	near(t, "hematite enthalpy against JANAF", hematite.Enthalpy, 825.50e3/0.11169, 2e-3)
	if _, ok := MinimumReduction("water-ice"); ok {
		t.Error("water-ice has a reduction minimum")
	}
}

// Earth 365.256 d, Mars 686.980 d: NASA planetary fact sheets give 779.94 d.
func TestSynodicPeriod(t *testing.T) {
	got, err := SynodicPeriod(365.256*day, 686.980*day)
	if err != nil {
		t.Fatal(err)
	}
	near(t, "synodic period", got, 779.94*day, 1e-5)
	swapped, _ := SynodicPeriod(686.980*day, 365.256*day)
	near(t, "swapped", swapped, got, 1e-15)
	for _, bad := range [][2]float64{{0, 1e7}, {1e7, 1e7}, {-1, 1e7}} {
		if _, err := SynodicPeriod(bad[0], bad[1]); err == nil {
			t.Errorf("periods %v: no error", bad)
		}
	}
}
