package hazewright

import (
	"math"
	"strings"
	"testing"
)

const hollowShells = `
study: hollow shells
world: mars
goal: {burden: 40 mg/m2}
designs:
  - name: Hollow shells
    particles: [{shape: shell, radius: 5 um, wall: 10 nm, material: aluminium, oxide: 0 nm, surface_scattering: off}]
fate: {sticking: 0 %}
supply: {feedstock: {mineral: alumina}}
`

// 40 mg/m2 of hollow aluminium shells of 5 um and 10 nm wall, well mixed, warm by 8.8 K:
// independent radiative-convective column with layered-sphere optics of the measured index.
func TestHollowShellsWarmAsTheColumnSays(t *testing.T) {
	d := assess(t, studyOf(t, hollowShells)).Designs[0]
	if w := value(t, d, "warming"); math.Abs(w/8.8-1) > 0.15 {
		t.Errorf("warming %g K, column 8.8 K; the estimate is within 0.91 to 1.09 for rods and shells", w)
	}
	// By hand: 4 pi (5 um)^2 x 10 nm x (1 - 10 nm/5 um) x 2700 kg/m3 = 8.466e-15 kg.
	if m := d.Populations[0].ParticleMass; math.Abs(m/8.466e-15-1) > 1e-3 {
		t.Errorf("mass of a shell %g kg, by hand 8.466e-15 kg", m)
	}
	if !strings.Contains(d.Populations[0].Name, "hollow") {
		t.Errorf("described as %q", d.Populations[0].Name)
	}
	// The volume made is that of the metal: rate over 2700 kg/m3.
	if got, want := value(t, d, "volume_rate"), value(t, d, "production_rate")/2700; math.Abs(got/want-1) > 1e-9 {
		t.Errorf("volume rate %g m3/s, want %g", got, want)
	}
}

// A shell falls as a sphere of its outer size with its own mass: so much slower than the
// full sphere as it is lighter.
func TestShellsFallByTheirOwnMass(t *testing.T) {
	shell := assess(t, studyOf(t, hollowShells)).Designs[0]
	full := assess(t, studyOf(t, strings.Replace(hollowShells, "shape: shell, radius: 5 um, wall: 10 nm", "shape: sphere, radius: 5 um", 1))).Designs[0]
	got := value(t, shell, "fall_speed") / value(t, full, "fall_speed")
	want := shell.Populations[0].ParticleMass / full.Populations[0].ParticleMass
	if math.Abs(got/want-1) > 0.02 { // the full sphere is fast enough for a little inertia
		t.Errorf("fall speed ratio %g, mass ratio %g", got, want)
	}
}

// A wall of ice is gone when its thickness is: wall x density over the loss per area.
func TestIceShellSublimesByItsWall(t *testing.T) {
	const ice = `
study: ice shells
world: mars
goal: {burden: 1 g/m2}
designs:
  - name: Shells
    particles: [{shape: shell, radius: 10 um, wall: 12 um, core: iron, material: water-ice}]
fate: {sticking: 0 %, vapour: saturated}
supply: {feedstock: {mineral: none}}
`
	d := assess(t, studyOf(t, strings.Replace(ice, "radius: 10 um", "radius: 20 um", 1))).Designs[0]
	// The README works out 12.3 s for a sphere of 12 um at 210 K.
	if s := value(t, d, "sublimation_time"); math.Abs(s/12.3-1) > 0.02 {
		t.Errorf("a wall of 12 um sublimes in %g s, by hand 12.3 s", s)
	}
	if _, err := Load(Source{Name: "study.yaml", Data: []byte(ice)}, nil); err == nil || !strings.Contains(err.Error(), "wall: 12 um is not below the outer radius, 10 um") {
		t.Errorf("a wall thicker than the radius: %v", err)
	}
	for _, c := range [][2]string{{"shape: shell", "shape: sphere"}, {", wall: 12 um", ""}} {
		if _, err := Load(Source{Name: "study.yaml", Data: []byte(strings.Replace(ice, c[0], c[1], 1))}, nil); err == nil || !strings.Contains(err.Error(), "study.yaml:7:") {
			t.Errorf("%v: %v", c, err)
		}
	}
}
