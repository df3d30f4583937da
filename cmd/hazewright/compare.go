package main

import (
	"bytes"
	"context"
	"encoding/json"
	"errors"
	"slices"

	"github.com/spf13/cobra"

	"hazewright"
	"hazewright/reports"
)

// compareCommand returns `compare STUDY...`.
func (a *app) compareCommand() *cobra.Command {
	var sets []string
	var by string
	cmd := &cobra.Command{
		Use:   "compare STUDY [STUDY...]",
		Short: "Set the designs of one or more studies side by side",
		Long: `Works out every design of the studies and sets them side by side, ranked by one
figure, with the limits that each fails and by what factor. --set changes every study.`,
		Example: `  hazewright compare thaw/study.yaml
  hazewright compare rods.yaml veils.yaml --by landed_mass
  hazewright compare rods.yaml veils.yaml --json both.json`,
		Args: func(cmd *cobra.Command, args []string) error {
			if len(args) == 0 {
				return badUsage("%s needs at least one study file", cmd.CommandPath()).withHint("%s", synopsis(cmd))
			}
			return nil
		},
		RunE: func(cmd *cobra.Command, args []string) error {
			return a.runCompare(cmd.Context(), args, sets, by)
		},
	}
	cmd.Flags().SortFlags = false
	cmd.Flags().StringVar(&by, "by", "production_rate", "rank by `FIGURE`, best first; `hazewright catalogue figures` lists them")
	addSettingFlags(cmd.Flags(), "json")
	cmd.Flags().Lookup("json").Usage = "write the results of each study, as a JSON list, to `FILE` [HAZEWRIGHT_JSON]"
	addSetFlag(cmd, &sets)
	addSettingFlags(cmd.Flags(), "strict")
	return cmd
}

func (a *app) runCompare(ctx context.Context, paths, sets []string, by string) error {
	if _, ok := hazewright.FigureByID(by); !ok {
		return unknownFigure(by)
	}
	a.settings.Report, a.settings.CSV = "", "" // compare writes neither
	var inputs []input
	for _, path := range paths {
		inputs = append(inputs, input{"study", path})
	}
	plan, err := a.plan(inputs)
	if err != nil {
		return err
	}
	studies, err := a.loadStudies(paths, sets)
	if err != nil {
		return err
	}
	for i, s := range studies {
		inputs = append(inputs, inputsOf(paths[i], s)...)
	}
	if err := distinct(inputs, plan.targets()...); err != nil {
		return err
	}
	results, err := a.assess(ctx, studies)
	if err != nil {
		return err
	}
	out := prepared{inputs: inputs}
	if plan.json.path != "" {
		data, err := documents(results, paths, sets)
		if err != nil {
			return err
		}
		out.add(plan.json, data)
	}
	if !plan.usesStdout() {
		var b bytes.Buffer
		if err := reports.CompareTable(&b, results, by, a.style()); err != nil {
			return err
		}
		out.stdout = b.Bytes()
	}
	if err := a.deliver(ctx, out); err != nil {
		return err
	}
	for i, r := range results {
		if n := len(reports.Warnings(r)); n > 0 {
			a.note("warning: %s in %s; `%s` lists them", counted(n, "warning"), paths[i], command("assess", paths[i:i+1], sets))
		}
	}
	return a.strictly(warnings(results))
}

// loadStudies reads all studies; its error holds the mistakes of all.
func (a *app) loadStudies(paths, sets []string) ([]*hazewright.Study, error) {
	var all hazewright.StudyError
	studies := make([]*hazewright.Study, len(paths))
	for i, path := range paths {
		if path == "-" && slices.Contains(paths[:i], "-") {
			return nil, badUsage("standard input can be read only once")
		}
		var err error
		var mistakes *hazewright.StudyError
		switch studies[i], err = a.loadStudy(path, sets); {
		case errors.As(err, &mistakes):
			all.Mistakes = append(all.Mistakes, mistakes.Mistakes...)
		case err != nil:
			return nil, err
		}
	}
	if len(all.Mistakes) > 0 {
		return nil, &all
	}
	return studies, nil
}

// documents returns the JSON list of the results' own documents, each as `assess
// --json` writes it but for its command.
func documents(results []*hazewright.Result, paths, sets []string) ([]byte, error) {
	list := make([]json.RawMessage, len(results))
	from := reports.Provenance{Version: version, Command: reproducing("compare", paths, sets)}
	for i, r := range results {
		var b bytes.Buffer
		if err := reports.JSON(&b, r, from); err != nil {
			return nil, err
		}
		list[i] = b.Bytes()
	}
	data, err := json.MarshalIndent(list, "", "  ")
	return append(data, '\n'), err
}

// unknownFigure is the error for an id that no figure has.
func unknownFigure(id string) error {
	var ids []string
	for _, f := range hazewright.Figures() {
		ids = append(ids, f.ID)
	}
	e := badUsage("--by: unknown figure %q", id)
	if near := hazewright.Nearest(id, ids); near != "" {
		return e.withHint("did you mean %s?", near)
	}
	return e.withHint("`hazewright catalogue figures` lists them")
}
