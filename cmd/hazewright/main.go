// Command hazewright works out, from one study file, whether an engineered aerosol
// could warm a cold planet with a thin atmosphere, and what that would take.
//
// It reads flags and settings, loads studies, runs the engine of package hazewright
// and hands the results to package reports. There is no physics here.
package main

import (
	"context"
	"errors"
	"fmt"
	"io"
	"os"
	"os/signal"
	"runtime/debug"
	"strings"
	"syscall"

	"hazewright"
)

// Exit codes, as the help of the program lists them.
const (
	exitDone        = 0
	exitFailed      = 1
	exitUsage       = 2
	exitWarnings    = 3
	exitInterrupted = 130
)

func main() {
	ctx, stop := signal.NotifyContext(context.Background(), os.Interrupt, syscall.SIGTERM)
	// The first signal cancels the work; after it, the next one ends the program at once.
	context.AfterFunc(ctx, stop)
	os.Exit(run(ctx, os.Args[1:], os.Stdin, os.Stdout, os.Stderr))
}

// run is the whole program: it returns the exit code.
func run(ctx context.Context, args []string, stdin io.Reader, stdout, stderr io.Writer) (code int) {
	defer func() {
		if fault := recover(); fault != nil {
			fmt.Fprintf(stderr, "hazewright: error: a fault inside the program: %v\n%s", fault, debug.Stack())
			fmt.Fprintln(stderr, "hazewright: hint: please report this, with the study that led here")
			code = exitFailed
		}
	}()
	a := &app{stdin: stdin, stdout: stdout, stderr: stderr}
	root := a.rootCommand()
	root.SetArgs(append([]string{}, args...)) // never nil, which cobra reads as os.Args
	root.SetIn(stdin)
	root.SetOut(stdout)
	root.SetErr(stderr)
	err := root.ExecuteContext(ctx)
	switch {
	case err == nil:
		return exitDone
	case errors.Is(err, errShown):
		return exitUsage
	case errors.Is(err, context.Canceled) && ctx.Err() != nil:
		fmt.Fprintln(stderr, "hazewright: interrupted; nothing was written")
		return exitInterrupted
	}
	printError(stderr, asUsage(err))
	return exitCode(err)
}

// app is one run of the program.
type app struct {
	stdin          io.Reader
	stdout, stderr io.Writer
	settings       settings // valid once the command runs
}

// errShown ends a run as bad usage when everything there is to say was printed.
var errShown = errors.New("help shown")

// usageError is a mistake in what was typed: exit code 2.
type usageError struct{ text, hint string }

func (e *usageError) Error() string { return e.text }

// badUsage returns a usageError without a hint.
func badUsage(format string, args ...any) *usageError {
	return &usageError{text: fmt.Sprintf(format, args...)}
}

// withHint returns e with a hint on what to do.
func (e *usageError) withHint(format string, args ...any) *usageError {
	e.hint = fmt.Sprintf(format, args...)
	return e
}

// strictError says that a run came to its end with warnings under --strict.
type strictError struct{ warnings int }

func (e *strictError) Error() string {
	if e.warnings == 1 {
		return "done with 1 warning, and --strict is set"
	}
	return fmt.Sprintf("done with %d warnings, and --strict is set", e.warnings)
}

// exitCode returns the exit code that stands for err.
func exitCode(err error) int {
	var usage *usageError
	var study *hazewright.StudyError
	var strict *strictError
	switch {
	case errors.As(asUsage(err), &usage), errors.As(err, &study):
		return exitUsage
	case errors.As(err, &strict):
		return exitWarnings
	}
	return exitFailed
}

// printError writes err with the program's prefix, one line a mistake, each followed
// by its hint if it has one.
func printError(w io.Writer, err error) {
	line := func(kind, text string) {
		if text != "" {
			fmt.Fprintf(w, "hazewright: %s: %s\n", kind, text)
		}
	}
	var usage *usageError
	var study *hazewright.StudyError
	switch {
	case errors.As(err, &study):
		for _, m := range study.Mistakes {
			hint := m.Hint
			m.Hint = "" // String would put it on the same line
			line("error", m.String())
			line("hint", hint)
		}
	case errors.As(err, &usage):
		line("error", usage.text)
		line("hint", usage.hint)
	default:
		for text := range strings.SplitSeq(err.Error(), "\n") {
			line("error", text)
		}
	}
}
