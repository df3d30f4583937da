package main

import (
	"context"
	"errors"
	"fmt"
	"io/fs"
	"math/rand/v2"
	"os"
	"path/filepath"
	"syscall"

	"hazewright"
)

// target is one place that results go to, checked before the work starts.
type target struct {
	flag   string // that named it, such as "--report"
	path   string // as given
	final  string // where the bytes go, links followed; "" for standard output
	folder string // of the several files that it is one of; "" if it stands alone
	direct bool   // a device or pipe, which is written to and never replaced
}

// file is one output, ready to be written.
type file struct {
	target
	data []byte
}

// toStdout says whether the target is standard output.
func (t target) toStdout() bool { return t.path == "-" }

// planFile checks that a file can be written at path, so that a wrong path is told
// before the work and not after it.
func planFile(flag, path string) (target, error) {
	t := target{flag: flag, path: path, final: path}
	if t.toStdout() {
		t.final = ""
		return t, nil
	}
	info, err := os.Stat(path)
	switch {
	case err == nil && info.IsDir():
		return t, badUsage("%s: %s is a folder", flag, path).withHint("give a file, such as %s", filepath.Join(path, "results"+suffix[flag]))
	case err == nil && !info.Mode().IsRegular():
		t.direct = true
		return t, nil
	case err == nil && info.Mode().Perm()&0o200 == 0:
		return t, badUsage("%s: %s is read-only", flag, path)
	case err == nil:
		t.final, err = filepath.EvalSymlinks(path)
		return t, err
	case !errors.Is(err, fs.ErrNotExist) && !isNotDir(err):
		return t, badUsage("%s: %v", flag, err)
	}
	if link, err := os.Readlink(path); err == nil {
		return t, badUsage("%s: %s is a link to %s, which does not exist", flag, path, link)
	}
	return t, parentExists(flag, path)
}

// suffix is what the names of files usually end with.
var suffix = map[string]string{"--report": ".html", "--json": ".json", "--csv": ".csv", "--chart": ".html"}

// planFolder checks that files can be written into the folder at path.
func planFolder(flag, path string) (target, error) {
	t := target{flag: flag, path: path, final: path}
	if t.toStdout() {
		return t, badUsage("%s writes several files, which cannot go to standard output", flag).withHint("give a folder")
	}
	info, err := os.Stat(path)
	switch {
	case err == nil && !info.IsDir():
		return t, badUsage("%s: %s is a file, not a folder", flag, path)
	case err == nil:
		return t, nil
	case !errors.Is(err, fs.ErrNotExist) && !isNotDir(err):
		return t, badUsage("%s: %v", flag, err)
	}
	return t, parentExists(flag, path)
}

// parentExists returns an error unless the folder that path lies in exists.
func parentExists(flag, path string) error {
	parent := filepath.Dir(filepath.Clean(path))
	info, err := os.Stat(parent)
	switch {
	case errors.Is(err, fs.ErrNotExist):
		return badUsage("%s: folder %s does not exist", flag, parent).withHint("make it first: mkdir -p %s", quoted(parent))
	case err == nil && !info.IsDir(), isNotDir(err):
		return badUsage("%s: %s is not a folder", flag, parent)
	case err != nil:
		return badUsage("%s: %v", flag, err)
	}
	return nil
}

// isNotDir says whether err comes from a path that runs through a file.
func isNotDir(err error) bool { return errors.Is(err, syscall.ENOTDIR) }

// input is a file that a run reads.
type input struct{ what, path string } // "study" or "optical table"

// inputsOf returns the files that a study was read from.
func inputsOf(path string, s *hazewright.Study) []input {
	list := []input{{"study", path}}
	for _, t := range s.Tables {
		list = append(list, input{"optical table", filepath.Join(filepath.Dir(path), filepath.FromSlash(t.File))})
	}
	return list
}

// distinct returns an error if two targets, or a target and one of the input files,
// are the same.
func distinct(inputs []input, targets ...target) error {
	stdout := ""
	for i, t := range targets {
		if t.toStdout() {
			if stdout != "" {
				return badUsage("%s and %s cannot both go to standard output", stdout, t.flag).withHint("give one of them a file")
			}
			stdout = t.flag
			continue
		}
		for _, other := range targets[:i] {
			if same(t.final, other.final) {
				return badUsage("%s and %s name the same file, %s", other.flag, t.flag, t.path)
			}
		}
		for _, in := range inputs {
			if same(t.final, in.path) {
				return badUsage("%s would overwrite the %s %s", t.flag, in.what, in.path)
			}
		}
	}
	return nil
}

// same says whether two paths lead to the same place, which need not exist.
func same(a, b string) bool {
	if a == "" || b == "" || a == "-" || b == "-" {
		return false
	}
	if x, err := os.Stat(a); err == nil {
		if y, err := os.Stat(b); err == nil {
			return os.SameFile(x, y) && x.Mode().IsRegular()
		}
	}
	x, errX := filepath.Abs(a)
	y, errY := filepath.Abs(b)
	return errX == nil && errY == nil && x == y
}

// commit writes all files, or none: each is first written and synced under a temporary
// name in its own folder, and only when all are there are they renamed. On an error or
// when ctx ends, everything is put back as it was. Folders are made if missing.
// Standard output is not its business.
func commit(ctx context.Context, folders []string, files []file) (err error) {
	var undo []func()
	defer func() {
		if err != nil {
			for i := len(undo) - 1; i >= 0; i-- {
				undo[i]()
			}
		}
	}()
	for _, dir := range folders {
		switch err := os.Mkdir(dir, 0o777); {
		case err == nil:
			undo = append(undo, func() { os.Remove(dir) })
		case !errors.Is(err, fs.ErrExist):
			return err
		}
	}
	staged := make([]string, len(files))
	for i, f := range files {
		if err := ctx.Err(); err != nil {
			return err
		}
		if f.direct {
			continue
		}
		if staged[i], err = stage(f); err != nil {
			return fmt.Errorf("%s: %w", f.flag, err)
		}
		undo = append(undo, func() { os.Remove(staged[i]) })
	}
	if err := ctx.Err(); err != nil {
		return err
	}
	for _, f := range files {
		if f.direct {
			if err := writeThrough(f); err != nil {
				return fmt.Errorf("%s: %w", f.flag, err)
			}
		}
	}
	var spares []string // the files that were there before
	for i, f := range files {
		if f.direct {
			continue
		}
		// Where the file system has no hard links there is no spare, and only the undoing of
		// a failed rename is lost.
		spare := temporary(f.final)
		if os.Link(f.final, spare) == nil {
			spares = append(spares, spare)
			undo = append(undo, func() { os.Rename(spare, f.final) })
		} else if _, err := os.Lstat(f.final); errors.Is(err, fs.ErrNotExist) {
			undo = append(undo, func() { os.Remove(f.final) })
		}
		if err := os.Rename(staged[i], f.final); err != nil {
			return fmt.Errorf("%s: %w", f.flag, err)
		}
	}
	for _, spare := range spares {
		os.Remove(spare)
	}
	return nil
}

// stage writes and syncs the bytes of f beside where they will go and returns the
// temporary name. Nothing is left behind on an error.
func stage(f file) (name string, err error) {
	name = temporary(f.final)
	w, err := os.OpenFile(name, os.O_WRONLY|os.O_CREATE|os.O_EXCL, 0o666)
	if err != nil {
		return "", err
	}
	defer func() {
		err = errors.Join(err, w.Close())
		if err != nil {
			os.Remove(name)
		}
	}()
	if old, err := os.Stat(f.final); err == nil {
		if err := w.Chmod(old.Mode().Perm()); err != nil {
			return "", err
		}
	}
	if _, err := w.Write(f.data); err != nil {
		return "", err
	}
	return name, w.Sync()
}

// writeThrough writes the bytes of f to a device or pipe.
func writeThrough(f file) error {
	w, err := os.OpenFile(f.final, os.O_WRONLY, 0)
	if err != nil {
		return err
	}
	_, err = w.Write(f.data)
	return errors.Join(err, w.Close())
}

// temporary returns a hidden name beside path that no file has.
func temporary(path string) string {
	return filepath.Join(filepath.Dir(path), fmt.Sprintf(".hazewright-%016x", rand.Uint64()))
}

// exists says whether there is anything at path.
func exists(path string) bool {
	_, err := os.Stat(path)
	return err == nil
}
