package main

import (
	"bytes"
	"context"
	"errors"
	"os"
	"os/exec"
	"path/filepath"
	"slices"
	"strconv"
	"strings"
	"testing"
	"time"

	"github.com/rogpeppe/go-internal/testscript"
)

func TestMain(m *testing.M) {
	testscript.Main(m, map[string]func(){"hazewright": main})
}

// TestScripts runs the program as its users do; each script is named by what they want.
func TestScripts(t *testing.T) {
	testscript.Run(t, testscript.Params{
		Dir:                 "testdata/script",
		RequireExplicitExec: true,
		RequireUniqueNames:  true,
		Cmds:                map[string]func(*testscript.TestScript, bool, []string){"exits": exits, "nothing-else": nothingElse},
	})
}

// exits runs a command and checks its exit code: exits CODE COMMAND [ARG...].
func exits(ts *testscript.TestScript, neg bool, args []string) {
	if neg || len(args) < 2 {
		ts.Fatalf("usage: exits CODE COMMAND [ARG...]")
	}
	want, err := strconv.Atoi(args[0])
	ts.Check(err)
	got := 0
	var exit *exec.ExitError
	switch err := ts.Exec(args[1], args[2:]...); {
	case errors.As(err, &exit):
		got = exit.ExitCode()
	case err != nil:
		ts.Fatalf("running %s: %v", args[1], err)
	}
	if got != want {
		ts.Fatalf("exit code %d, want %d", got, want)
	}
}

// nothingElse checks that a folder holds exactly the files named, hidden ones counted:
// nothing-else DIR [FILE...].
func nothingElse(ts *testscript.TestScript, neg bool, args []string) {
	if neg || len(args) == 0 {
		ts.Fatalf("usage: nothing-else DIR [FILE...]")
	}
	got := slices.DeleteFunc(names(ts.MkAbs(args[0])), func(name string) bool { return name == ".tmp" }) // testscript's own
	want := slices.Sorted(slices.Values(args[1:]))
	if !slices.Equal(got, want) {
		ts.Fatalf("%s holds %q, want %q", args[0], got, want)
	}
}

// names returns the sorted names of what is in a folder.
func names(dir string) []string {
	entries, err := os.ReadDir(dir)
	if err != nil {
		return []string{err.Error()}
	}
	var list []string
	for _, e := range entries {
		list = append(list, e.Name())
	}
	return list // ReadDir sorts
}

// longStudy is a study of many designs, so that its assessment takes many seconds.
func longStudy() string {
	var b strings.Builder
	b.WriteString("study: Long\nworld: mars\ngoal: {warming: 10 K}\nfate: {sticking: 1 %}\ndesigns:\n")
	for i := range 200 {
		n := strconv.Itoa(i)
		b.WriteString("  - name: Rods " + n + "\n    particles: [{shape: rod, length: " + strconv.FormatFloat(6+float64(i)/50, 'f', 2, 64) +
			" um, diameter: 8" + "0." + n + " nm, material: iron, spread: 1.3}]\n")
	}
	return b.String()
}

// TestInterruptLeavesNothing stops a run in the middle: exit code 130, no output and no
// temporary file.
func TestInterruptLeavesNothing(t *testing.T) {
	dir := t.TempDir()
	if err := os.WriteFile(filepath.Join(dir, "study.yaml"), []byte(longStudy()), 0o666); err != nil {
		t.Fatal(err)
	}
	cmd := exec.Command("hazewright", "assess", "study.yaml", "--report", "r.html", "--json", "r.json", "--csv", "tables")
	cmd.Dir = dir
	var stdout, stderr bytes.Buffer
	cmd.Stdout, cmd.Stderr = &stdout, &stderr
	if err := cmd.Start(); err != nil {
		t.Fatal(err)
	}
	time.Sleep(time.Second) // enough to be at work, far too little to be done
	if err := cmd.Process.Signal(os.Interrupt); err != nil {
		t.Fatal(err)
	}
	err := cmd.Wait()
	var exit *exec.ExitError
	if !errors.As(err, &exit) || exit.ExitCode() != exitInterrupted {
		t.Errorf("ended with %v, want exit code %d; stderr:\n%s", err, exitInterrupted, stderr.String())
	}
	if got := names(dir); !slices.Equal(got, []string{"study.yaml"}) {
		t.Errorf("left %q", got)
	}
	if stdout.Len() > 0 {
		t.Errorf("printed %q on standard output", stdout.String())
	}
	if !strings.Contains(stderr.String(), "hazewright: interrupted; nothing was written") {
		t.Errorf("standard error does not say that it was interrupted:\n%s", stderr.String())
	}
}

// TestFaultInsideIsNotBadUsage holds that a panic ends as a failure, not with Go's own
// exit code 2, which stands for a mistake of the user.
func TestFaultInsideIsNotBadUsage(t *testing.T) {
	var stderr bytes.Buffer
	if code := run(context.Background(), []string{"version"}, nil, brokenWriter{}, &stderr); code != exitFailed {
		t.Errorf("exit code %d, want %d", code, exitFailed)
	}
	if !strings.Contains(stderr.String(), "a fault inside the program: broken") {
		t.Errorf("standard error is %q", stderr.String())
	}
}

type brokenWriter struct{}

func (brokenWriter) Write([]byte) (int, error) { panic("broken") }
