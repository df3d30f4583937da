package main

import (
	"bytes"
	"errors"
	"fmt"
	"os"
	"regexp"
	"slices"
	"strconv"
	"strings"

	"github.com/spf13/pflag"
	"github.com/spf13/viper"

	"hazewright"
)

// settings is how the program runs, as opposed to what it computes: no setting moves
// a number of a study.
type settings struct {
	Workers int
	Color   string
	Quiet   bool
	Strict  bool
	Report  string
	JSON    string
	CSV     string
}

// setting is one row of the table of settings: a flag, an environment variable and a
// key of the settings file under one name.
type setting struct {
	key      string
	kind     string // as pflag names types: "int", "uint64", "bool", "string"
	standard string // the default
	usage    string
	check    func(text string) error
	short    string // one-letter flag, if it has one
}

var settingTable = []setting{
	{"workers", "int", "0", "use `N` processors; 0 is all of them; the results do not depend on it", wholeNumber(0, maxWorkers), ""},
	{"color", "string", "auto", "colour tables `WHEN`: auto, always or never; auto is on a terminal unless NO_COLOR is set", oneOf("auto", "always", "never"), ""},
	{"quiet", "bool", "false", "print no progress, no notes and no warnings; errors are still printed", trueOrFalse, "q"},
	{"strict", "bool", "false", "end with exit code 3 if there are warnings", trueOrFalse, ""},
	{"report", "string", "", "write the report, one HTML page that needs no network, to `FILE`", anyText, ""},
	{"json", "string", "", "write the results as JSON to `FILE`", anyText, ""},
	{"csv", "string", "", "write the results as CSV files into `DIR`, which is made if missing", anyText, ""},
}

const maxWorkers = 1024

// env is the environment variable of a setting.
func (s setting) env() string { return "HAZEWRIGHT_" + strings.ToUpper(s.key) }

func wholeNumber(low, high uint64) func(string) error {
	return func(text string) error {
		n, err := strconv.ParseUint(text, 10, 64)
		if err != nil || n < low || n > high {
			return fmt.Errorf("must be a whole number from %d to %d", low, high)
		}
		return nil
	}
}

func oneOf(words ...string) func(string) error {
	return func(text string) error {
		if !slices.Contains(words, text) {
			return fmt.Errorf("must be one of %s", strings.Join(words, ", "))
		}
		return nil
	}
}

func trueOrFalse(text string) error {
	if _, err := strconv.ParseBool(text); err != nil {
		return fmt.Errorf("must be true or false")
	}
	return nil
}

func anyText(string) error { return nil }

// flagValue is a flag whose text is checked by its row of the table of settings.
type flagValue struct {
	setting
	text string
}

func (f *flagValue) String() string { return f.text }
func (f *flagValue) Type() string   { return f.kind }
func (f *flagValue) Set(text string) error {
	f.text = text
	if text == "" {
		return errors.New("must not be empty")
	}
	return f.check(text)
}

// addSettingFlags gives a command the flags of some settings.
func addSettingFlags(flags *pflag.FlagSet, keys ...string) {
	for _, key := range keys {
		for _, s := range settingTable {
			if s.key != key {
				continue
			}
			f := flags.VarPF(&flagValue{s, s.standard}, s.key, s.short, s.usage+" ["+s.env()+"]")
			if s.kind == "bool" {
				f.NoOptDefVal = "true"
			}
		}
	}
}

// loadSettings layers the settings: a flag wins over its environment variable, that
// over the settings file, that over the default. Each layer is checked on its own, so
// that an error can say where the value stands.
func loadSettings(flags *pflag.FlagSet) (settings, error) {
	v := viper.New()
	v.SetConfigType("yaml")
	for _, s := range settingTable {
		v.SetDefault(s.key, s.standard)
		if err := v.BindEnv(s.key, s.env()); err != nil {
			return settings{}, err
		}
		if text := os.Getenv(s.env()); text != "" {
			if err := s.check(text); err != nil {
				return settings{}, badUsage("environment variable %s: %q: %v", s.env(), text, err)
			}
		}
		if f := flags.Lookup(s.key); f != nil {
			if _, ours := f.Value.(*flagValue); ours {
				if err := v.BindPFlag(s.key, f); err != nil {
					return settings{}, err
				}
			}
		}
	}
	path := os.Getenv("HAZEWRIGHT_SETTINGS")
	if f := flags.Lookup("settings"); f != nil && f.Changed {
		path = f.Value.String()
	}
	if path != "" {
		if err := readSettingsFile(v, path); err != nil {
			return settings{}, err
		}
	}
	// viper's weak typing turns the text of flags and variables into numbers; every text
	// was checked above, so it cannot turn a wrong one into something else.
	var out settings
	if err := v.UnmarshalExact(&out); err != nil {
		return settings{}, badUsage("settings: %v", err)
	}
	return out, nil
}

// settingsLine is a key at the left edge of a settings file.
var settingsLine = regexp.MustCompile(`^["']?([^\s"'#:{\[]+)["']?\s*:\s*(.*)$`)

// readSettingsFile reads the settings file at path into v. Unknown keys, empty values
// and values out of range are errors that name the line.
func readSettingsFile(v *viper.Viper, path string) error {
	data, err := os.ReadFile(path)
	if err != nil {
		return badUsage("settings file: %v", err)
	}
	keys := make([]string, len(settingTable))
	for i, s := range settingTable {
		keys[i] = s.key
	}
	lines := map[string]int{} // of each key
	for i, text := range strings.Split(string(data), "\n") {
		m := settingsLine.FindStringSubmatch(text)
		if m == nil {
			continue
		}
		at := fmt.Sprintf("%s:%d", path, i+1)
		if !slices.Contains(keys, m[1]) {
			return unknownSetting(at, m[1], keys)
		}
		if rest, _, _ := strings.Cut(m[2], "#"); strings.TrimSpace(rest) == "" {
			return badUsage("%s: %s has no value", at, m[1]).withHint("leave the line out to have the default")
		}
		lines[m[1]] = i + 1
	}
	file := viper.New()
	file.SetConfigType("yaml")
	if err := file.ReadConfig(bytes.NewReader(data)); err != nil {
		return badUsage("%s: not a settings file: %v", path, err).withHint("a settings file has lines such as \"workers: 2\"")
	}
	for _, key := range file.AllKeys() {
		at := path
		if n := lines[key]; n > 0 {
			at = fmt.Sprintf("%s:%d", path, n)
		}
		i := slices.Index(keys, key)
		if i < 0 {
			return unknownSetting(at, key, keys)
		}
		value := file.Get(key)
		switch value.(type) {
		case string, bool, int, int64, uint64, float64:
		default:
			return badUsage("%s: %s must be one value", at, key)
		}
		if err := settingTable[i].check(fmt.Sprint(value)); err != nil {
			return badUsage("%s: %s: %v %v", at, key, value, err)
		}
	}
	return v.ReadConfig(bytes.NewReader(data))
}

// unknownSetting is the error for a key that is no setting.
func unknownSetting(at, key string, keys []string) error {
	e := badUsage("%s: unknown setting %q", at, key)
	if near := hazewright.Nearest(key, keys); near != "" {
		return e.withHint("did you mean %q?", near)
	}
	return e.withHint("settings are %s", strings.Join(keys, ", "))
}

// settingsHelp is the text of `hazewright help settings`.
func settingsHelp() string {
	var b strings.Builder
	b.WriteString(`Settings say how the program runs; no setting moves a number of a study.

A flag wins over its environment variable, that over the settings file, that over the
default. The settings file is YAML with lines such as "workers: 2"; it is read only if
--settings FILE or HAZEWRIGHT_SETTINGS names it. A command ignores what it has no use
for. Paths are relative to where the program is run.

`)
	rows := [][]string{{"key", "flag", "variable", "default", ""}}
	for _, s := range settingTable {
		standard := s.standard
		if standard == "" {
			standard = "none"
		}
		rows = append(rows, []string{s.key, "--" + s.key, s.env(), standard, strings.ReplaceAll(s.usage, "`", "")})
	}
	writeColumns(&b, rows)
	return b.String()
}
