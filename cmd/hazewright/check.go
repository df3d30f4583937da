package main

import (
	"fmt"
	"strings"

	"github.com/spf13/cobra"

	"hazewright"
	"hazewright/reports"
)

// checkCommand returns `check STUDY`.
func (a *app) checkCommand() *cobra.Command {
	var sets []string
	var inputs bool
	cmd := &cobra.Command{
		Use:   "check STUDY",
		Short: "Check a study and say what it holds, without assessing it",
		Long: `Reads a study and the tables it names, holds world and particles against what the
stages are valid for, and lists every mistake with its place; ends with exit code 2 if
there is one. Otherwise prints what the study holds and the scope of
what can be assessed.`,
		Example: `  hazewright check thaw/study.yaml
  hazewright check thaw/study.yaml --inputs             every value it rests on, defaults too`,
		Args: exactlyOne("a study file"),
		RunE: func(cmd *cobra.Command, args []string) error {
			study, err := a.loadStudy(args[0], sets)
			if err != nil {
				return err
			}
			if err := hazewright.NewEngine(hazewright.Options{Workers: a.settings.Workers}).Check(cmd.Context(), study); err != nil {
				return err
			}
			if err := a.printColumns(summary(study)); err != nil {
				return err
			}
			if inputs {
				if err := a.printColumns(append([][]string{{""}}, inputRows(study)...)); err != nil {
					return err
				}
			}
			for _, w := range study.Warnings {
				a.note("warning: %s: %s", w.Where, w.Text)
			}
			return a.strictly(len(study.Warnings))
		},
	}
	cmd.Flags().SortFlags = false
	cmd.Flags().BoolVar(&inputs, "inputs", false, "list every input with its value, where that comes from, and its source")
	addSetFlag(cmd, &sets)
	addSettingFlags(cmd.Flags(), "strict")
	return cmd
}

// summary says in a few lines what a study holds.
func summary(s *hazewright.Study) [][]string {
	var goal []string
	origins := map[string]int{}
	for _, in := range s.Inputs() {
		origins[in.Origin.Kind]++
		if name, ok := strings.CutPrefix(in.Path, "goal."); ok {
			goal = append(goal, strings.ReplaceAll(name, "_", " ")+" "+in.Text)
		}
	}
	rows := [][]string{
		{"study", s.Title},
		{"file", s.File + ", sha256 " + s.SHA256},
	}
	for _, t := range s.Tables {
		rows = append(rows, []string{"table", t.File + ", sha256 " + t.SHA256})
	}
	rows = append(rows,
		[]string{"world", s.World.Name},
		[]string{"goal", strings.Join(goal, ", ")},
		[]string{"designs", fmt.Sprint(len(s.Designs))},
	)
	for _, d := range s.Designs {
		text := d.Name + ": " + counted(len(d.Particles), "population")
		if d.HasFate {
			text += ", fate of its own"
		}
		if d.HasSupply {
			text += ", supply of its own"
		}
		rows = append(rows, []string{"", text})
	}
	rows = append(rows,
		[]string{"inputs", fmt.Sprintf("%d from the file, %d from --set, %d defaults", origins["file"], origins["set"], origins["default"])},
		[]string{"limits", fmt.Sprint(len(s.Limits))},
		[]string{"benchmarks", fmt.Sprint(len(s.Benchmarks))},
	)
	if len(s.Uncertain)+len(s.Sweeps) > 0 {
		rows = append(rows, []string{"also", counted(len(s.Uncertain), "uncertain input") + ", " + counted(len(s.Sweeps), "sweep") +
			": checked, but no command of this version runs them"})
	}
	return append(rows, []string{"scope", reports.Scope}, []string{"result", "no mistakes found"})
}

// counted writes a number with its noun: "1 sweep", "2 sweeps".
func counted(n int, noun string) string {
	if n == 1 {
		return "1 " + noun
	}
	return fmt.Sprintf("%d %ss", n, noun)
}

// inputRows lists every effective input of a study.
func inputRows(s *hazewright.Study) [][]string {
	rows := [][]string{{"input", "value", "from", "source"}}
	for _, in := range s.Inputs() {
		from := in.Origin.Kind
		switch from {
		case "file":
			from += strings.TrimPrefix(in.Origin.Pos, s.File)
		case "set":
			from = in.Origin.Pos
		}
		rows = append(rows, []string{in.Path, in.Text, from, in.Source})
	}
	return rows
}
