package main

import (
	"errors"
	"fmt"
	"io/fs"
	"os"
	"path/filepath"

	"github.com/spf13/cobra"

	"hazewright"
)

// newCommand returns `new DIR`.
func (a *app) newCommand() *cobra.Command {
	return &cobra.Command{
		Use:   "new DIR",
		Short: "Write a starter study, DIR/study.yaml",
		Long: `Writes a small study with comments, DIR/study.yaml, that can be assessed as it is and
changed from there. DIR is made if missing; a study that is there is never overwritten.`,
		Example: `  hazewright new thaw
  hazewright new .`,
		Args: exactlyOne("a folder"),
		RunE: func(_ *cobra.Command, args []string) error {
			if args[0] == "" {
				return badUsage("the folder has no name").withHint("`hazewright new .` writes into this one")
			}
			path := filepath.Join(args[0], "study.yaml")
			if err := writeStarter(path); err != nil {
				return err
			}
			a.note("wrote %s", path)
			a.note("next: hazewright assess %s", quoted(path))
			return nil
		},
	}
}

// writeStarter writes the starter study to path unless there is something already.
func writeStarter(path string) error {
	dir := filepath.Dir(path)
	if info, err := os.Stat(dir); err == nil && !info.IsDir() || isNotDir(err) {
		return badUsage("%s is a file, not a folder", dir).withHint("give a folder; the study in it is named study.yaml")
	}
	if err := os.MkdirAll(dir, 0o777); err != nil {
		return badUsage("%v", err)
	}
	// The file appears under its name only when it is whole.
	staged, err := stage(file{target: target{final: path}, data: []byte(hazewright.Starter())})
	if err != nil {
		return err
	}
	defer os.Remove(staged)
	err = os.Link(staged, path) // fails if path exists, unlike a rename
	if err != nil && !exists(path) {
		err = os.Rename(staged, path) // for file systems without hard links
	}
	switch {
	case errors.Is(err, fs.ErrExist):
		return badUsage("%s exists", path).withHint("give another folder, or assess it: hazewright assess %s", quoted(path))
	case err != nil:
		return fmt.Errorf("writing %s: %w", path, err)
	}
	return nil
}
