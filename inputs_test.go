package hazewright

import (
	"regexp"
	"slices"
	"strings"
	"testing"
)

func TestInputTable_IsComplete(t *testing.T) {
	seen := map[string]bool{}
	form := regexp.MustCompile(`^[a-z][a-z0-9_]*(\[\])?(\.[a-z][a-z0-9_]*(\[\])?)*$`)
	for _, in := range InputTable() {
		if seen[in.Path] {
			t.Errorf("%s stands twice", in.Path)
		}
		seen[in.Path] = true
		if !form.MatchString(in.Path) {
			t.Errorf("%q is no path", in.Path)
		}
		if in.Title == "" || in.Source == "" {
			t.Errorf("%s: title %q, source %q", in.Path, in.Title, in.Source)
		}
		if in.Required && in.Default != "" && in.Kind != KindMap {
			t.Errorf("%s is required and has a default", in.Path)
		}
		if in.numeric() {
			checkNumericRow(t, in)
		} else if in.Vary != (Vary{}) || in.Low != "" || in.High != "" {
			t.Errorf("%s is no number and has a range", in.Path)
		}
		switch in.Kind {
		case KindChoice:
			if len(in.Choices) == 0 || in.Default != "" && !slices.Contains(in.Choices, in.Default) {
				t.Errorf("%s: default %q is not one of %v", in.Path, in.Default, in.Choices)
			}
		case KindFlag:
			if _, p := readFlag(in.Default); p != nil {
				t.Errorf("%s: default %q is no flag", in.Path, in.Default)
			}
		}
	}
}

func checkNumericRow(t *testing.T, in Input) {
	t.Helper()
	if in.Unit == "" || in.Low == "" || in.High == "" {
		t.Errorf("%s: unit %q, range %q to %q", in.Path, in.Unit, in.Low, in.High)
	}
	unit, err := parseUnit(in.Unit)
	if err != nil {
		t.Errorf("%s: unit %q: %v", in.Path, in.Unit, err)
	}
	if f, _ := unit.factor.Float64(); f != 1 {
		t.Errorf("%s: unit %q is not SI", in.Path, in.Unit)
	}
	texts := []string{in.Default, in.Example, in.Low, in.High, in.Vary.Low, in.Vary.High, in.Vary.Median}
	for _, text := range texts {
		if text == "" {
			continue
		}
		if _, p := in.readNumber(text); p != nil {
			t.Errorf("%s: %q %s %s", in.Path, text, p.what, p.allowed)
		}
	}
	if in.example() == "" {
		t.Errorf("%s has no example for its messages", in.Path)
	}
	if v := in.Vary; v.Law != "" {
		keys := lawKeys[v.Law]
		if (v.Low != "" && v.High != "") != slices.Contains(keys, "low") || (v.Median != "" && v.Spread != "") != slices.Contains(keys, "median") {
			t.Errorf("%s: %+v does not fit its law", in.Path, v)
		}
	}
}

// Whatever the study does not give says where it comes from: an assumption, or a reference
// by its key. Only the planet and its synodic period have references.
func TestInputTable_DefaultsAreAssumedOrCited(t *testing.T) {
	for _, in := range InputTable() {
		if in.Default == "" && in.Unset == "" {
			continue
		}
		cited := strings.Contains(in.Source, "[")
		if !cited && !strings.HasPrefix(in.Source, assumption) {
			t.Errorf("%s: default %q has the source %q", in.Path, in.Default, in.Source)
		}
		if cited && !strings.HasPrefix(in.Path, "world.") && in.Path != "supply.delivery.window_spacing" {
			t.Errorf("%s cites %q", in.Path, in.Source)
		}
	}
}

// Inputs that nothing reads yet, or that are read and checked only, say so.
func TestInputTable_WhatHasNoEffectSaysSo(t *testing.T) {
	for path, part := range map[string]string{"fate.dust": "no effect yet", "uncertain": "draws no samples", "sweeps": "does not run them"} {
		for _, in := range InputTable() {
			if strings.TrimSuffix(in.Path, "[]") == path && !strings.Contains(in.Title, part) {
				t.Errorf("%s: %q does not say %q", in.Path, in.Title, part)
			}
		}
	}
}

// The table cannot be changed by those who read it.
func TestInputTable_IsACopy(t *testing.T) {
	for _, in := range InputTable() {
		if len(in.Choices) > 0 {
			in.Choices[0] = "changed"
		}
	}
	for _, in := range InputTable() {
		if slices.Contains(in.Choices, "changed") {
			t.Fatalf("%s: choices are shared", in.Path)
		}
	}
}

// fullStudy gives every input that has a single value, but for those that exclude others.
func TestFullStudy_GivesEveryInput(t *testing.T) {
	s := mustLoad(t, fullStudy)
	given := map[string]bool{}
	brackets := regexp.MustCompile(`\[[^\]]*\]`)
	for _, in := range s.Inputs() {
		given[brackets.ReplaceAllString(in.Path, "[]")] = true
	}
	absent := []string{ // other kinds of goal, spheres' and tables' keys, alternatives
		"goal.burden", "goal.optical_depth", "goal.at", "world.name", "fate.eddy_diffusivity[].height", "fate.eddy_diffusivity[].value",
		"designs[].particles[].material.table", "designs[].particles[].material.density", "designs[].particles[].material.extend",
		"designs[].given.kappa_thermal", "designs[].given.burden", "limits[].at_least", "fate.profile.layer[]",
	}
	for _, in := range InputTable() {
		section, _, _ := strings.Cut(in.Path, "[")
		if in.Kind == KindMap || in.Kind == KindList || slices.Contains(absent, in.Path) ||
			slices.Contains([]string{"study", "benchmarks", "uncertain", "sweeps", "sources"}, section) {
			continue
		}
		if !given[in.Path] {
			t.Errorf("%s is not listed", in.Path)
		}
	}
}
