package main

import (
	"encoding/json"
	"fmt"
	"runtime"
	"runtime/debug"
	"strings"

	"github.com/spf13/cobra"
)

// version is the version of the program, and of every output it writes.
const version = "0.1.0"

// about is what `version` tells.
type about struct {
	Tool     string `json:"tool"`
	Version  string `json:"version"`
	Revision string `json:"revision,omitempty"` // of the version control, if known
	Changed  bool   `json:"changed,omitempty"`  // built from files that differ from it
	Go       string `json:"go"`
	System   string `json:"system"`
	Charts   string `json:"charts"` // the chart library that reports carry
}

// versionCommand returns `version`.
func (a *app) versionCommand() *cobra.Command {
	var asJSON bool
	cmd := &cobra.Command{
		Use:   "version",
		Short: "Print the version and what the program was built from",
		Example: `  hazewright version
  hazewright version --json`,
		Args: none,
		RunE: func(*cobra.Command, []string) error {
			v := buildInfo()
			if asJSON {
				return a.printJSON(v)
			}
			rows := [][]string{{"hazewright", v.Version}}
			if v.Revision != "" {
				revision := v.Revision
				if v.Changed {
					revision += ", changed"
				}
				rows = append(rows, []string{"revision", revision})
			}
			rows = append(rows, []string{"go", v.Go}, []string{"system", v.System}, []string{"charts", v.Charts})
			return a.printColumns(rows)
		},
	}
	cmd.Flags().BoolVar(&asJSON, "json", false, "print JSON")
	return cmd
}

// buildInfo gathers what the program knows about its own making.
func buildInfo() about {
	v := about{
		Tool:    "hazewright",
		Version: version,
		Go:      runtime.Version(),
		System:  runtime.GOOS + "/" + runtime.GOARCH,
		Charts:  chartLibrary,
	}
	if info, ok := debug.ReadBuildInfo(); ok {
		for _, s := range info.Settings {
			switch s.Key {
			case "vcs.revision":
				v.Revision = s.Value
			case "vcs.modified":
				v.Changed = s.Value == "true"
			}
		}
	}
	return v
}

// printJSON writes v as indented JSON to standard output.
func (a *app) printJSON(v any) error {
	data, err := json.MarshalIndent(v, "", "  ")
	if err != nil {
		return err
	}
	_, err = fmt.Fprintf(a.stdout, "%s\n", data)
	return err
}

// printColumns writes rows as aligned columns to standard output.
func (a *app) printColumns(rows [][]string) error {
	var b strings.Builder
	if err := writeColumns(&b, rows); err != nil {
		return err
	}
	_, err := fmt.Fprint(a.stdout, b.String())
	return err
}
