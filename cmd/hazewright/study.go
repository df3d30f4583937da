package main

import (
	"context"
	"errors"
	"fmt"
	"io"
	"io/fs"
	"os"
	"path/filepath"
	"strings"

	"hazewright"
	"hazewright/reports"
)

// maxStdin bounds a study read from standard input [bytes].
const maxStdin = 16 << 20

// loadStudy reads and checks the study at path, with the values of --set on top.
// "-" is standard input; such a study cannot name tables beside it.
func (a *app) loadStudy(path string, sets []string) (*hazewright.Study, error) {
	source, err := a.source(path)
	if err != nil {
		return nil, err
	}
	return hazewright.Load(source, sets)
}

// source opens the study file at path.
func (a *app) source(path string) (hazewright.Source, error) {
	if path == "-" {
		data, err := io.ReadAll(io.LimitReader(a.stdin, maxStdin+1))
		switch {
		case err != nil:
			return hazewright.Source{}, fmt.Errorf("reading the study from standard input: %w", err)
		case len(data) > maxStdin:
			return hazewright.Source{}, badUsage("the study on standard input is larger than %d MiB", maxStdin>>20)
		}
		return hazewright.Source{Name: "standard input", Data: data}, nil
	}
	info, err := os.Stat(path)
	switch {
	case errors.Is(err, fs.ErrNotExist):
		return hazewright.Source{}, badUsage("study %s does not exist", path).
			withHint("`hazewright new DIR` makes a starter study in DIR/study.yaml")
	case err != nil:
		return hazewright.Source{}, badUsage("study: %v", err)
	case info.IsDir():
		e := badUsage("study %s is a folder, not a file", path)
		inside := strings.TrimSuffix(path, "/") + "/study.yaml"
		if found, err := os.Stat(inside); err == nil && found.Mode().IsRegular() {
			return hazewright.Source{}, e.withHint("did you mean %s?", inside)
		}
		return hazewright.Source{}, e.withHint("give the study file in it")
	}
	source, err := hazewright.FileSource(path)
	if err != nil {
		return hazewright.Source{}, badUsage("study: %v", err)
	}
	return source, nil
}

// assess runs the engine on each study in turn, with progress on a terminal.
func (a *app) assess(ctx context.Context, studies []*hazewright.Study) ([]*hazewright.Result, error) {
	options, stop := a.engineOptions()
	defer stop()
	engine := hazewright.NewEngine(options)
	results := make([]*hazewright.Result, len(studies))
	for i, s := range studies {
		r, err := engine.Assess(ctx, s)
		if err != nil {
			return nil, err
		}
		results[i] = r
	}
	return results, nil
}

// engineOptions returns the options of an engine that shows its progress on a terminal. The
// caller must call stop when the work is done.
func (a *app) engineOptions() (o hazewright.Options, stop func()) {
	o.Workers = a.settings.Workers
	if a.settings.Quiet || terminalWidth(a.stderr) == 0 {
		return o, func() {}
	}
	p := newProgress(a.stderr)
	o.Progress = p.report
	return o, p.stop
}

// note tells the user something on standard error, unless --quiet is set.
func (a *app) note(format string, args ...any) {
	if !a.settings.Quiet {
		fmt.Fprintf(a.stderr, "hazewright: "+format+"\n", args...)
	}
}

// warnAbout prints the warnings of results.
func (a *app) warnAbout(results []*hazewright.Result) {
	for _, r := range results {
		for _, w := range reports.Warnings(r) {
			a.note("warning: %s", w)
		}
	}
}

// warnings returns how many warnings results hold.
func warnings(results []*hazewright.Result) int {
	n := 0
	for _, r := range results {
		n += len(reports.Warnings(r))
	}
	return n
}

// strictly returns the error that --strict makes of n warnings.
func (a *app) strictly(n int) error {
	if a.settings.Strict && n > 0 {
		return &strictError{n}
	}
	return nil
}

// reproducing returns the command line that gives the same results of studies again, in
// their folder: what decides them and nothing else, so that outputs do not differ by where
// the studies lie, where they were written or how many processors worked.
func reproducing(verb string, studies, sets []string, flags ...string) string {
	names := make([]string, len(studies))
	for i, s := range studies {
		names[i] = filepath.Base(s)
	}
	return command(verb, names, sets, flags...)
}

// command returns a command line, quoted for a shell.
func command(verb string, studies, sets []string, flags ...string) string {
	words := append([]string{"hazewright", verb}, studies...)
	words = append(words, flags...)
	for _, set := range sets {
		words = append(words, "--set", set)
	}
	for i, w := range words {
		words[i] = quoted(w)
	}
	return strings.Join(words, " ")
}
