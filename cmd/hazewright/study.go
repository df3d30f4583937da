package main

import (
	"context"
	"errors"
	"fmt"
	"io"
	"io/fs"
	"os"
	"strings"

	"hazewright"
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
	options := hazewright.Options{Workers: a.settings.Workers}
	if !a.settings.Quiet && terminalWidth(a.stderr) > 0 {
		p := newProgress(a.stderr)
		defer p.stop()
		options.Progress = p.report
	}
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

// note tells the user something on standard error, unless --quiet is set.
func (a *app) note(format string, args ...any) {
	if !a.settings.Quiet {
		fmt.Fprintf(a.stderr, "hazewright: "+format+"\n", args...)
	}
}

// warn prints the warnings of one study, unless --quiet is set.
func (a *app) warn(study, design string, ws []hazewright.Warning) {
	for _, w := range ws {
		text := w.Text
		for _, part := range []string{w.Where, design, study} {
			if part != "" {
				text = part + ": " + text
			}
		}
		a.note("warning: %s", text)
	}
}

// warnAbout prints the warnings of results.
func (a *app) warnAbout(results []*hazewright.Result) {
	for _, r := range results {
		study := ""
		if len(results) > 1 {
			study = r.Study.File
		}
		a.warn(study, "", r.Study.Warnings)
		a.warn(study, "", r.Warnings)
		for _, d := range r.Designs {
			a.warn(study, d.Name, d.Warnings)
		}
	}
}

// warnings returns how many warnings results hold.
func warnings(results []*hazewright.Result) int {
	n := 0
	for _, r := range results {
		n += len(r.Study.Warnings) + len(r.Warnings)
		for _, d := range r.Designs {
			n += len(d.Warnings)
		}
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

// reproducing returns the command line that gives the same results of a study again:
// what decides them and nothing else, so that outputs do not differ by where they were
// written or by how many processors worked.
func reproducing(study string, sets []string) string {
	words := []string{"hazewright", "assess", study}
	for _, set := range sets {
		words = append(words, "--set", set)
	}
	for i, w := range words {
		words[i] = quoted(w)
	}
	return strings.Join(words, " ")
}
