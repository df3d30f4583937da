package main

import (
	"errors"
	"fmt"
	"strings"

	"github.com/spf13/cobra"
	"github.com/spf13/pflag"

	"hazewright"
)

const rootLong = `hazewright works out, from one study file, whether engineered particles could warm
a cold planet with a thin atmosphere, and what that would take: infrared blocking,
time aloft, burden, production, ore, power, landed mass, schedule and hazards.
Scope: whole planet, annual mean, feasibility grade.`

const rootExample = `  hazewright new thaw                                     a starter study in thaw/study.yaml
  hazewright assess thaw/study.yaml                       the answer as a table
  hazewright assess thaw/study.yaml --report thaw.html    the same with the full report
  hazewright spectrum thaw/study.yaml --wavelengths 10um   cross-sections of its particles
  hazewright catalogue inputs                             every input with unit, default and range`

const rootAfter = `Settings (a flag wins over its environment variable, that over the settings file,
that over the default): ` + "`hazewright help settings`" + `.

Exit codes:
    0  done
    1  failed
    2  bad usage, or a study with mistakes
    3  done, with warnings, under --strict
  130  interrupted

Data goes to standard output, everything else to standard error. As FILE, "-" is
standard output; as STUDY, "-" is standard input.
`

// rootCommand returns the command tree.
func (a *app) rootCommand() *cobra.Command {
	root := &cobra.Command{
		Use:           "hazewright COMMAND",
		Short:         "Feasibility of engineered aerosols that warm a cold planet",
		Long:          rootLong,
		Example:       rootExample,
		SilenceErrors: true,
		SilenceUsage:  true,
		Version:       version,
		RunE: func(cmd *cobra.Command, _ []string) error {
			a.shortHelp(cmd)
			return errShown
		},
		PersistentPreRunE: func(cmd *cobra.Command, _ []string) error {
			s, err := loadSettings(cmd.Flags())
			a.settings = s
			return err
		},
	}
	root.Flags().Bool("version", false, "print the version")
	root.SetVersionTemplate("{{.Version}}\n")
	root.SetHelpTemplate(helpTemplate)
	root.SetUsageTemplate(usageTemplate)
	root.SetFlagErrorFunc(flagError)
	root.SetHelpCommand(helpCommand())
	root.CompletionOptions.HiddenDefaultCmd = true
	addSettingFlags(root.PersistentFlags(), "workers", "color", "quiet")
	root.PersistentFlags().String("settings", "", "read settings from `FILE` (YAML) [HAZEWRIGHT_SETTINGS]")
	root.PersistentFlags().SortFlags = false
	root.PersistentFlags().BoolP("help", "h", false, "print this help")
	root.AddCommand(
		a.assessCommand(),
		a.compareCommand(),
		a.spectrumCommand(),
		a.checkCommand(),
		a.newCommand(),
		a.catalogueCommand(),
		a.versionCommand(),
		a.licencesCommand(),
	)
	cobra.EnableCommandSorting = false
	return root
}

const helpTemplate = `{{with (or .Long .Short)}}{{. | trimTrailingWhitespaces}}

{{end}}{{.UsageString}}`

var usageTemplate = `Usage:
  {{.UseLine}}
{{if .HasExample}}
Examples:
{{.Example}}
{{end}}{{if .HasAvailableSubCommands}}
Commands:
{{range .Commands}}{{if .IsAvailableCommand}}  {{rpad .Name 11}} {{.Short}}
{{end}}{{end}}{{end}}{{if .HasAvailableLocalFlags}}
Flags:
{{.LocalFlags.FlagUsagesWrapped 100 | trimTrailingWhitespaces}}
{{end}}{{if .HasAvailableInheritedFlags}}
Flags of every command:
{{.InheritedFlags.FlagUsagesWrapped 100 | trimTrailingWhitespaces}}
{{end}}{{if not .HasParent}}
` + rootAfter + `{{end}}`

// shortHelp prints what the program is for and its commands to standard error.
func (a *app) shortHelp(root *cobra.Command) {
	fmt.Fprintf(a.stderr, "%s\n\nUsage:\n  %s\n\nCommands:\n", root.Short, root.Use)
	for _, c := range root.Commands() {
		if c.IsAvailableCommand() {
			fmt.Fprintf(a.stderr, "  %-11s %s\n", c.Name(), c.Short)
		}
	}
	fmt.Fprint(a.stderr, "\nStart with `hazewright new DIR`; `hazewright -h` and `hazewright COMMAND -h` say more.\n")
}

// helpCommand returns `help [COMMAND]`.
func helpCommand() *cobra.Command {
	return &cobra.Command{
		Use:   "help [COMMAND | settings]",
		Short: "Help on a command, or on the settings",
		Args:  atMostOne("a command"),
		// Help needs no settings, so it works while the settings file is broken.
		PersistentPreRunE: func(*cobra.Command, []string) error { return nil },
		RunE: func(cmd *cobra.Command, args []string) error {
			root := cmd.Root()
			if len(args) == 0 {
				return root.Help()
			}
			if args[0] == "settings" {
				_, err := fmt.Fprint(cmd.OutOrStdout(), settingsHelp())
				return err
			}
			topic, rest, err := root.Find(args)
			if err != nil {
				return err
			}
			if len(rest) > 0 || topic == root {
				return badUsage("unknown command %q", args[0])
			}
			return topic.Help()
		},
	}
}

// atMostOne accepts no argument or one, which is a what.
func atMostOne(what string) cobra.PositionalArgs {
	return func(cmd *cobra.Command, args []string) error {
		if len(args) > 1 {
			return badUsage("%s takes %s, not %d arguments", cmd.CommandPath(), what, len(args)).withHint("%s", synopsis(cmd))
		}
		return nil
	}
}

// exactlyOne accepts one argument, which is a what.
func exactlyOne(what string) cobra.PositionalArgs {
	return func(cmd *cobra.Command, args []string) error {
		switch {
		case len(args) == 0:
			return badUsage("%s needs %s", cmd.CommandPath(), what).withHint("%s", synopsis(cmd))
		case len(args) > 1:
			return badUsage("%s takes one argument, %s, not %d", cmd.CommandPath(), what, len(args)).withHint("%s", synopsis(cmd))
		}
		return nil
	}
}

// none accepts no arguments.
func none(cmd *cobra.Command, args []string) error {
	if len(args) > 0 {
		return badUsage("%s takes no arguments, not %q", cmd.CommandPath(), args[0]).withHint("%s", synopsis(cmd))
	}
	return nil
}

// synopsis is the usage line of a command, for hints.
func synopsis(cmd *cobra.Command) string { return "usage: " + cmd.UseLine() }

// flagError turns what pflag says about a flag into a usageError in the program's words.
func flagError(cmd *cobra.Command, err error) error {
	var unknown *pflag.NotExistError
	var invalid *pflag.InvalidValueError
	var bare *pflag.ValueRequiredError
	switch {
	case errors.Is(err, pflag.ErrHelp):
		return err
	case errors.As(err, &unknown):
		name := unknown.GetSpecifiedName()
		if short := unknown.GetSpecifiedShortnames(); short != "" {
			return badUsage("unknown flag -%s", name).withHint("`%s -h` lists the flags", cmd.CommandPath())
		}
		e := badUsage("unknown flag --%s", name)
		var known []string
		cmd.Flags().VisitAll(func(f *pflag.Flag) { known = append(known, f.Name) })
		if near := hazewright.Nearest(name, known); near != "" {
			return e.withHint("did you mean --%s?", near)
		}
		return e.withHint("`%s -h` lists the flags", cmd.CommandPath())
	case errors.As(err, &invalid):
		return badUsage("--%s: %q: %v", invalid.GetFlag().Name, invalid.GetValue(), errors.Unwrap(invalid))
	case errors.As(err, &bare):
		return badUsage("--%s needs a value", bare.GetFlag().Name).withHint("%s", synopsis(cmd))
	}
	return badUsage("%v", err)
}

// asUsage turns cobra's own errors, which all are about what was typed, into usage
// errors; other errors come back as they are.
func asUsage(err error) error {
	text, list, found := strings.Cut(err.Error(), "\n\nDid you mean this?\n")
	if !strings.HasPrefix(text, "unknown command ") {
		return err
	}
	text, _, _ = strings.Cut(text, " for ")
	e := &usageError{text: text, hint: "`hazewright -h` lists the commands"}
	if found {
		e.hint = "did you mean " + strings.Join(strings.Fields(list), " or ") + "?"
	}
	return e
}
