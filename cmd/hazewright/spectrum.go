package main

import (
	"bytes"
	"context"
	"errors"
	"math"
	"strconv"
	"strings"

	"github.com/spf13/cobra"

	"hazewright"
	"hazewright/reports"
)

// spectrumAsk is what `spectrum` is asked for, as typed.
type spectrumAsk struct {
	study, design       string
	wavelengths         string
	points              string
	pointsGiven         bool
	jsonFile, csv, page string
	sets                []string
}

const (
	standardRange  = "0.2um..100um"
	standardPoints = "200"
)

// spectrumCommand returns `spectrum STUDY`.
func (a *app) spectrumCommand() *cobra.Command {
	var ask spectrumAsk
	cmd := &cobra.Command{
		Use:   "spectrum STUDY",
		Short: "Optical properties of a design's particles against wavelength",
		Long: `Works out the optics of every population of a design against wavelength: cross-sections
of one particle, mean cosine of scattering, cross-sections per kilogram, with the method
and its stated error. Random orientation, mean over the sizes; the study's kappa_factor is
left aside. Prints a table, unless JSON, CSV or the chart go to standard output.`,
		Example: `  hazewright spectrum thaw/study.yaml --design 'Iron rods'
  hazewright spectrum thaw/study.yaml --design 'Iron rods' --wavelengths 550nm,10um,15um
  hazewright spectrum thaw/study.yaml --design 'Iron rods' --wavelengths 0.3um..60um --points 400 --chart rods.html
  hazewright spectrum thaw/study.yaml --set 'designs[Iron rods].particles[0].oxide=0 nm' --design 'Iron rods' --csv -`,
		Args: exactlyOne("a study file"),
		RunE: func(cmd *cobra.Command, args []string) error {
			ask.study, ask.jsonFile, ask.pointsGiven = args[0], a.settings.JSON, cmd.Flags().Changed("points")
			return a.runSpectrum(cmd.Context(), ask)
		},
	}
	flags := cmd.Flags()
	flags.SortFlags = false
	text := func(to *string, name, standard, usage string, check func(string) error) {
		*to = standard
		flags.Var(&ownFlag{to, check}, name, usage)
	}
	text(&ask.design, "design", "", "the design, by `NAME`; may be left out if the study has one", anyText)
	text(&ask.wavelengths, "wavelengths", standardRange, "`LIST` such as 550nm,10um, or a range such as 0.3um..60um, spaced evenly in the logarithm", anyText)
	text(&ask.points, "points", standardPoints, "`N` wavelengths in a range, both ends among them", wholeNumber(2, hazewright.MaxWavelengths))
	addSettingFlags(flags, "json")
	text(&ask.csv, "csv", "", "write the rows as one CSV file, in SI units, to `FILE`", anyText)
	text(&ask.page, "chart", "", "write a chart with its numbers, one HTML page that needs no network, to `FILE`", anyText)
	addSetFlag(cmd, &ask.sets)
	addSettingFlags(flags, "strict")
	return cmd
}

// ownFlag is a flag of one command, which no setting stands behind.
type ownFlag struct {
	to    *string
	check func(string) error
}

func (f *ownFlag) String() string {
	if f.to == nil {
		return ""
	}
	return *f.to
}
func (f *ownFlag) Type() string { return "string" }
func (f *ownFlag) Set(text string) error {
	if strings.TrimSpace(text) == "" {
		return errors.New("must not be empty")
	}
	*f.to = text
	return f.check(text)
}

func (a *app) runSpectrum(ctx context.Context, ask spectrumAsk) error {
	list, err := parseWavelengths(ask)
	if err != nil {
		return err
	}
	var targets [3]target // JSON, CSV, chart; a target without a path is not wanted
	var wanted []target
	for i, t := range []struct{ flag, path string }{{"--json", ask.jsonFile}, {"--csv", ask.csv}, {"--chart", ask.page}} {
		if t.path == "" {
			continue
		}
		if targets[i], err = planFile(t.flag, t.path); err != nil {
			return err
		}
		wanted = append(wanted, targets[i])
	}
	if err := distinct([]input{{"study", ask.study}}, wanted...); err != nil {
		return err
	}
	study, err := a.loadStudy(ask.study, ask.sets)
	if err != nil {
		return err
	}
	out := prepared{inputs: inputsOf(ask.study, study)}
	if err := distinct(out.inputs, wanted...); err != nil {
		return err
	}
	if err := study.CheckWavelengths(ask.design, list.values); err != nil {
		return asTyped(err)
	}
	wavelengths, err := list.all()
	if err != nil {
		return err
	}
	spectrum, err := a.spectrum(ctx, study, ask.design, wavelengths)
	if err != nil {
		return asTyped(err)
	}
	if err := ask.prepare(spectrum, targets, &out); err != nil {
		return err
	}
	onStdout := out.stdout != nil
	if !onStdout {
		var b bytes.Buffer
		if err := reports.SpectrumTable(&b, spectrum, a.style()); err != nil {
			return err
		}
		out.stdout = b.Bytes()
	}
	if err := a.deliver(ctx, out); err != nil {
		return err
	}
	told := reports.SpectrumWarnings(spectrum)
	switch {
	case onStdout:
		for _, text := range told {
			a.note("warning: %s", text)
		}
	case len(told) > 0 && terminalWidth(a.stdout) == 0:
		a.note("warning: %s, listed in the table", counted(len(told), "warning"))
	}
	return a.strictly(len(told))
}

// spectrum runs the engine, with progress on a terminal.
func (a *app) spectrum(ctx context.Context, s *hazewright.Study, design string, wavelengths []float64) (*hazewright.Spectrum, error) {
	options, stop := a.engineOptions()
	defer stop()
	return hazewright.NewEngine(options).Spectrum(ctx, s, design, wavelengths)
}

// prepare puts what goes to the targets (JSON, CSV, chart) in its place.
func (ask spectrumAsk) prepare(s *hazewright.Spectrum, targets [3]target, out *prepared) error {
	from := reports.Provenance{Version: version, Command: ask.command(s)}
	var b bytes.Buffer
	if targets[0].path != "" {
		if err := reports.SpectrumJSON(&b, s, from); err != nil {
			return err
		}
		out.add(targets[0], bytes.Clone(b.Bytes()))
	}
	if targets[1].path != "" {
		data, err := reports.SpectrumCSV(s)
		if err != nil {
			return err
		}
		out.add(targets[1], data)
	}
	if targets[2].path != "" {
		b.Reset()
		if err := reports.SpectrumHTML(&b, s, from); err != nil {
			return err
		}
		out.add(targets[2], bytes.Clone(b.Bytes()))
	}
	return nil
}

// command is the command line that gives the same spectrum again.
func (ask spectrumAsk) command(s *hazewright.Spectrum) string {
	flags := []string{"--design", s.Design, "--wavelengths", ask.wavelengths}
	if strings.Contains(ask.wavelengths, "..") {
		flags = append(flags, "--points", ask.points)
	}
	return reproducing("spectrum", []string{ask.study}, ask.sets, flags...)
}

// asTyped turns what the engine says of a spectrum into bad usage of the flag behind it.
func asTyped(err error) error {
	var asked *hazewright.SpectrumError
	if !errors.As(err, &asked) {
		return err
	}
	words := []string{"--" + asked.Input + ":"}
	for _, part := range []string{asked.Value, asked.Problem, asked.Allowed} {
		if part != "" {
			words = append(words, part)
		}
	}
	return &usageError{text: strings.Join(words, " "), hint: asked.Hint}
}

// wavelengthList is the value of --wavelengths: some wavelengths, or the two ends of a
// range with a number of points [m].
type wavelengthList struct {
	text   []string  // as written
	values []float64 // the same [m]
	points int       // 0 for a list
}

// all returns every wavelength. A range is spaced evenly in the logarithm, its ends exact;
// error: it does not rise.
func (l wavelengthList) all() ([]float64, error) {
	if l.points == 0 {
		return l.values, nil
	}
	low, high := l.values[0], l.values[1]
	if !(low < high) {
		e := badUsage("--wavelengths: %s..%s does not rise", l.text[0], l.text[1])
		if low == high {
			return nil, e.withHint("for one wavelength write %s", l.text[0])
		}
		return nil, e.withHint("write the shorter wavelength first: %s..%s", l.text[1], l.text[0])
	}
	out := make([]float64, l.points)
	for i := range out {
		out[i] = low * math.Pow(high/low, float64(i)/float64(l.points-1))
	}
	out[l.points-1] = high
	return out, nil
}

// parseWavelengths reads --wavelengths and --points.
func parseWavelengths(ask spectrumAsk) (wavelengthList, error) {
	var l wavelengthList
	if strings.Contains(ask.wavelengths, "..") {
		l.text = strings.Split(ask.wavelengths, "..")
		if len(l.text) != 2 {
			return l, badUsage("--wavelengths: %q is not a range", ask.wavelengths).withHint("a range has two ends, such as 0.3um..60um")
		}
		points, err := strconv.Atoi(ask.points)
		if err != nil {
			return l, badUsage("--points: %q: %v", ask.points, err)
		}
		l.points = points
	} else {
		if ask.pointsGiven {
			return l, badUsage("--points goes with a range, and --wavelengths is a list").withHint("a range has two dots, such as 0.3um..60um")
		}
		l.text = strings.Split(ask.wavelengths, ",")
	}
	if n := len(l.text); n > hazewright.MaxWavelengths {
		return l, badUsage("--wavelengths: %d wavelengths are outside 1 to %d", n, hazewright.MaxWavelengths)
	}
	for i, text := range l.text {
		l.text[i] = strings.TrimSpace(text)
		w, err := parseWavelength(l.text[i])
		if err != nil {
			return l, err
		}
		l.values = append(l.values, w)
	}
	return l, nil
}

// parseWavelength reads one wavelength [m].
func parseWavelength(text string) (float64, error) {
	const example = "write wavelengths with their unit, such as 550nm or 10 um"
	q, err := hazewright.ParseQuantity(text)
	var fault *hazewright.QuantityError
	switch {
	case errors.As(err, &fault):
		e := badUsage("--wavelengths: %q %s", text, fault.Problem)
		if text == "" {
			return 0, e.withHint(example)
		}
		return 0, e.withHint("%s", fault.Hint)
	case err != nil:
		return 0, badUsage("--wavelengths: %v", err)
	case q.Dimension == hazewright.Dimension{}:
		return 0, badUsage("--wavelengths: %q has no unit", text).withHint(example + "; decimals have a point, a comma parts two wavelengths")
	case q.Dimension != hazewright.Dimension{1}:
		return 0, badUsage("--wavelengths: %q is not a length", text).withHint(example)
	}
	return q.SI, nil
}
