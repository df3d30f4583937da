package main

import (
	"bytes"
	"context"
	"path/filepath"
	"slices"

	"github.com/spf13/cobra"

	"hazewright"
	"hazewright/reports"
)

// assessCommand returns `assess STUDY`.
func (a *app) assessCommand() *cobra.Command {
	var sets []string
	cmd := &cobra.Command{
		Use:   "assess STUDY",
		Short: "Work out every design of a study, from optics to schedule",
		Long: `Works out every design of a study, the whole chain: optics, fall and time aloft,
warming, burden, production, landed mass, schedule, limits and gates. Prints a table,
unless results as JSON or the report go to standard output.`,
		Example: `  hazewright assess thaw/study.yaml
  hazewright assess thaw/study.yaml --report thaw.html --csv thaw-tables
  hazewright assess thaw/study.yaml --set 'fate.burial_time=12 yr' --set 'goal.warming=30 K'
  hazewright assess thaw/study.yaml --json - --quiet | jq '.designs[].figures.burden'`,
		Args: exactlyOne("a study file"),
		RunE: func(cmd *cobra.Command, args []string) error {
			return a.runAssess(cmd.Context(), args[0], sets)
		},
	}
	cmd.Flags().SortFlags = false
	addSettingFlags(cmd.Flags(), "report", "json", "csv")
	addSetFlag(cmd, &sets)
	addSettingFlags(cmd.Flags(), "strict")
	return cmd
}

// addSetFlag gives a command --set.
func addSetFlag(cmd *cobra.Command, sets *[]string) {
	cmd.Flags().StringArrayVar(sets, "set", nil,
		"change one input by `PATH=VALUE`, such as 'fate.sticking=5 %'; may be repeated")
}

func (a *app) runAssess(ctx context.Context, path string, sets []string) error {
	plan, err := a.plan([]input{{"study", path}})
	if err != nil {
		return err
	}
	study, err := a.loadStudy(path, sets)
	if err != nil {
		return err
	}
	inputs := inputsOf(path, study)
	if err := distinct(inputs, plan.targets()...); err != nil {
		return err
	}
	results, err := a.assess(ctx, []*hazewright.Study{study})
	if err != nil {
		return err
	}
	result := results[0]
	from := reports.Provenance{Version: version, Command: reproducing("assess", []string{path}, sets)}

	// Everything is prepared in memory before anything is written.
	var out prepared
	if plan.report.path != "" {
		var b bytes.Buffer
		if err := reports.HTML(&b, result, from); err != nil {
			return err
		}
		out.add(plan.report, b.Bytes())
	}
	if plan.json.path != "" {
		var b bytes.Buffer
		if err := reports.JSON(&b, result, from); err != nil {
			return err
		}
		out.add(plan.json, b.Bytes())
	}
	if plan.csv.path != "" {
		tables, err := reports.CSV(result)
		if err != nil {
			return err
		}
		out.folders = append(out.folders, plan.csv.path)
		for _, t := range tables {
			f, err := planInside(plan.csv, t.Name)
			if err != nil {
				return err
			}
			out.add(f, t.Data)
		}
	}
	if !plan.usesStdout() {
		var b bytes.Buffer
		if err := reports.Table(&b, result, a.style()); err != nil {
			return err
		}
		out.stdout = b.Bytes()
	}
	out.inputs = inputs
	if err := a.deliver(ctx, out); err != nil {
		return err
	}
	switch n := warnings(results); {
	case plan.usesStdout(): // so there was no table to tell them
		a.warnAbout(results)
	case n > 0 && terminalWidth(a.stdout) == 0:
		a.note("warning: %s, listed in the table", counted(n, "warning"))
	}
	return a.strictly(warnings(results))
}

// plan is where the results go; a target without a path is not wanted.
type plan struct{ report, json, csv target }

// usesStdout says whether standard output is taken, so that no table goes there.
func (p plan) usesStdout() bool { return p.report.toStdout() || p.json.toStdout() }

// targets returns the targets that are wanted.
func (p plan) targets() []target {
	return slices.DeleteFunc([]target{p.report, p.json, p.csv}, func(t target) bool { return t.path == "" })
}

// plan checks the targets that the settings name, before the work starts. inputs are
// the files that must not be overwritten.
func (a *app) plan(inputs []input) (p plan, err error) {
	if a.settings.Report != "" {
		if p.report, err = planFile("--report", a.settings.Report); err != nil {
			return p, err
		}
	}
	if a.settings.JSON != "" {
		if p.json, err = planFile("--json", a.settings.JSON); err != nil {
			return p, err
		}
	}
	if a.settings.CSV != "" {
		if p.csv, err = planFolder("--csv", a.settings.CSV); err != nil {
			return p, err
		}
	}
	return p, distinct(inputs, p.targets()...)
}

// planInside checks that a file can be written under a name in the folder of a target,
// which may not exist yet.
func planInside(folder target, name string) (target, error) {
	t, err := planFile(folder.flag, filepath.Join(folder.path, name))
	t.folder = folder.path
	if !exists(folder.path) {
		return t, nil // it will be made
	}
	return t, err
}

// prepared is everything a run will write.
type prepared struct {
	inputs  []input // that must not be overwritten
	folders []string
	files   []file
	stdout  []byte
}

// add puts the bytes for a target in their place.
func (p *prepared) add(t target, data []byte) {
	if t.toStdout() {
		p.stdout = data
		return
	}
	p.files = append(p.files, file{t, data})
}

// deliver writes everything that was prepared: standard output, then the files, all or
// none.
func (a *app) deliver(ctx context.Context, out prepared) error {
	targets := make([]target, len(out.files))
	for i, f := range out.files {
		targets[i] = f.target
	}
	if err := distinct(out.inputs, targets...); err != nil {
		return err // such as --json with the name of a file of --csv
	}
	// Standard output first: a run that cannot print leaves no file behind.
	if _, err := a.stdout.Write(out.stdout); err != nil {
		return err
	}
	if err := commit(ctx, out.folders, out.files); err != nil {
		return err
	}
	inFolder := map[string]int{}
	for _, f := range out.files {
		inFolder[f.folder]++
		if f.folder == "" {
			a.note("wrote %s", f.path)
		}
	}
	for _, dir := range out.folders {
		a.note("wrote %s in %s", counted(inFolder[dir], "file"), dir)
	}
	return nil
}

// style is how tables are to look on standard output.
func (a *app) style() reports.Style {
	return reports.Style{Color: inColour(a.settings.Color, a.stdout), Width: terminalWidth(a.stdout)}
}
