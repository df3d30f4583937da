package main

import (
	"os"
	"path/filepath"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"
	"github.com/spf13/pflag"
)

// flagsOf returns all flags of settings after parsing args.
func flagsOf(t *testing.T, args ...string) *pflag.FlagSet {
	t.Helper()
	flags := pflag.NewFlagSet("test", pflag.ContinueOnError)
	flags.String("settings", "", "")
	for _, s := range settingTable {
		addSettingFlags(flags, s.key)
	}
	if err := flags.Parse(args); err != nil {
		t.Fatal(err)
	}
	return flags
}

// settingsFile writes a settings file and returns its path.
func settingsFile(t *testing.T, text string) string {
	t.Helper()
	path := filepath.Join(t.TempDir(), "settings.yaml")
	if err := os.WriteFile(path, []byte(text), 0o666); err != nil {
		t.Fatal(err)
	}
	return path
}

// TestEverySettingInEveryLayer sets each setting in each layer and finds that the
// higher layer wins: flag over variable over file over default.
func TestEverySettingInEveryLayer(t *testing.T) {
	standard := settings{Color: "auto"}
	layered := []struct {
		key               string
		file, env, flag   string
		inFile, inE, inFl settings
	}{
		{"workers", "2", "3", "4", settings{Workers: 2}, settings{Workers: 3}, settings{Workers: 4}},
		{"color", "never", "always", "auto", settings{Color: "never"}, settings{Color: "always"}, settings{Color: "auto"}},
		{"quiet", "true", "false", "true", settings{Quiet: true}, settings{}, settings{Quiet: true}},
		{"strict", "true", "false", "true", settings{Strict: true}, settings{}, settings{Strict: true}},
		{"report", "a.html", "b.html", "c.html", settings{Report: "a.html"}, settings{Report: "b.html"}, settings{Report: "c.html"}},
		{"json", "a.json", "b.json", "-", settings{JSON: "a.json"}, settings{JSON: "b.json"}, settings{JSON: "-"}},
		{"csv", "a", "b", "c", settings{CSV: "a"}, settings{CSV: "b"}, settings{CSV: "c"}},
	}
	if len(layered) != len(settingTable) {
		t.Fatalf("%d settings are tested, the table has %d", len(layered), len(settingTable))
	}
	// with returns the defaults with what one setting changes.
	with := func(s settings) settings {
		if s.Color == "" {
			s.Color = standard.Color
		}
		return s
	}
	for _, c := range layered {
		t.Run(c.key, func(t *testing.T) {
			var args []string
			expect := func(layer string, want settings) {
				t.Helper()
				got, err := loadSettings(flagsOf(t, args...))
				if err != nil {
					t.Fatalf("%s: %v", layer, err)
				}
				if diff := cmp.Diff(want, got); diff != "" {
					t.Errorf("%s (-want +got):\n%s", layer, diff)
				}
			}
			expect("default", standard)
			t.Setenv("HAZEWRIGHT_SETTINGS", settingsFile(t, c.key+": "+c.file+"\n"))
			expect("file", with(c.inFile))
			t.Setenv("HAZEWRIGHT_"+strings.ToUpper(c.key), c.env)
			expect("variable", with(c.inE))
			args = []string{"--" + c.key + "=" + c.flag}
			expect("flag", with(c.inFl))
		})
	}
}

// TestFlagNamesTheSettingsFile holds that --settings wins over HAZEWRIGHT_SETTINGS.
func TestFlagNamesTheSettingsFile(t *testing.T) {
	t.Setenv("HAZEWRIGHT_SETTINGS", settingsFile(t, "workers: 2\n"))
	got, err := loadSettings(flagsOf(t, "--settings", settingsFile(t, "workers: 5\n")))
	if err != nil || got.Workers != 5 {
		t.Errorf("workers = %d, %v; want 5", got.Workers, err)
	}
}

// TestMistakesInSettingsFile holds that each mistake is told with its line.
func TestMistakesInSettingsFile(t *testing.T) {
	for _, c := range []struct{ text, want, hint string }{
		{"workers: 2\nwrokers: 3\n", `:2: unknown setting "wrokers"`, `did you mean "workers"?`},
		{"Workers: 2\n", `:1: unknown setting "Workers"`, `did you mean "workers"?`},
		{"{wrokers: 3}\n", `: unknown setting "wrokers"`, `did you mean "workers"?`},
		{"banana: 3\n", `:1: unknown setting "banana"`, "settings are workers, color, quiet, strict, report, json, csv"},
		{"# note\nworkers:\n", ":2: workers has no value", "leave the line out"},
		{"workers: # two\n", ":1: workers has no value", "leave the line out"},
		{"workers: 3.7\n", ":1: workers: 3.7 must be a whole number from 0 to 1024", ""},
		{"workers: -1\n", ":1: workers: -1 must be a whole number from 0 to 1024", ""},
		{"workers: 1025\n", ":1: workers: 1025 must be", ""},
		{"workers: many\n", ":1: workers: many must be", ""},
		{"workers: .nan\n", ":1: workers: NaN must be", ""},
		{"workers: [1, 2]\n", ":1: workers must be one value", ""},
		{"report:\n  file: x\n", ":1: report has no value", ""},
		{"quiet: yes\n", ":1: quiet: yes must be true or false", ""},
		{"color: pink\n", ":1: color: pink must be one of auto, always, never", ""},
		{"workers: 1\nworkers: 2\n", "not a settings file", ""},
		{"workers: [\n", "not a settings file", ""},
		{"just text\n", "not a settings file", ""},
	} {
		path := settingsFile(t, c.text)
		_, err := loadSettings(flagsOf(t, "--settings", path))
		usage, ok := err.(*usageError)
		if !ok {
			t.Errorf("%q: got %v, want a usage error", c.text, err)
			continue
		}
		if !strings.HasPrefix(usage.text, path) || !strings.Contains(usage.text, c.want) {
			t.Errorf("%q: got %q, want the path and %q", c.text, usage.text, c.want)
		}
		if !strings.Contains(usage.hint, c.hint) {
			t.Errorf("%q: hint is %q, want %q", c.text, usage.hint, c.hint)
		}
	}
}

// TestMistakesInVariables holds that a bad variable is told by its name, also where a
// flag would win over it, and that an empty one counts as unset.
func TestMistakesInVariables(t *testing.T) {
	t.Setenv("HAZEWRIGHT_WORKERS", "")
	if got, err := loadSettings(flagsOf(t)); err != nil || got.Workers != 0 {
		t.Errorf("empty variable: workers = %d, %v; want 0", got.Workers, err)
	}
	t.Setenv("HAZEWRIGHT_WORKERS", "two")
	_, err := loadSettings(flagsOf(t, "--workers", "2"))
	if err == nil || !strings.Contains(err.Error(), `environment variable HAZEWRIGHT_WORKERS: "two": must be a whole number`) {
		t.Errorf("got %v", err)
	}
}

// TestEmptySettingsFile holds that a file with nothing but comments is fine.
func TestEmptySettingsFile(t *testing.T) {
	got, err := loadSettings(flagsOf(t, "--settings", settingsFile(t, "# nothing yet\n")))
	if err != nil || got.Color != "auto" {
		t.Errorf("got %+v, %v", got, err)
	}
}
