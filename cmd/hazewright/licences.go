package main

import (
	"embed"
	"fmt"
	"strings"

	"github.com/spf13/cobra"

	"hazewright/reports"
)

// chartLibrary is the script that every report carries.
const chartLibrary = "Apache ECharts 5.6.0"

// notices holds list.txt, what is linked into the program or carried by its reports
// with licence and copyright, and the texts of licences that the reports do not carry.
//
//go:embed notices
var notices embed.FS

// licencesCommand returns `licences`.
func (a *app) licencesCommand() *cobra.Command {
	var full bool
	cmd := &cobra.Command{
		Use:   "licences",
		Short: "Print the licences of what the program is made of",
		Long: `Prints what is linked into the program or carried by its reports, with licence and
copyright; with --full the licence texts as well.`,
		Example: `  hazewright licences
  hazewright licences --full`,
		Aliases: []string{"licenses"},
		Args:    none,
		RunE: func(*cobra.Command, []string) error {
			list, err := noticeList()
			if err != nil {
				return err
			}
			if err := a.printColumns(list); err != nil || !full {
				return err
			}
			texts, err := licenceTexts()
			if err != nil {
				return err
			}
			for _, t := range texts {
				if _, err := fmt.Fprintf(a.stdout, "\n==== %s\n\n%s\n", t.Name, strings.TrimSpace(t.Text)); err != nil {
					return err
				}
			}
			return nil
		},
	}
	cmd.Flags().BoolVar(&full, "full", false, "print the licence texts as well")
	return cmd
}

// noticeList returns the rows of notices/list.txt: name, licence, copyright.
func noticeList() ([][]string, error) {
	text, err := notices.ReadFile("notices/list.txt")
	if err != nil {
		return nil, err
	}
	var rows [][]string
	for line := range strings.Lines(string(text)) {
		row := strings.Split(strings.TrimSpace(line), " | ")
		if len(row) != 3 {
			return nil, fmt.Errorf("notices/list.txt: %q does not have three columns", line)
		}
		rows = append(rows, row)
	}
	return rows, nil
}

// licenceTexts returns the text of every licence that the list names: those of this
// folder, then those that come with what the reports carry.
func licenceTexts() ([]reports.Licence, error) {
	var texts []reports.Licence
	for _, name := range []string{"BSD-3-Clause", "MIT"} {
		text, err := notices.ReadFile("notices/" + name + ".txt")
		if err != nil {
			return nil, err
		}
		texts = append(texts, reports.Licence{Name: name, Text: string(text)})
	}
	return append(texts, reports.Licences()...), nil
}
