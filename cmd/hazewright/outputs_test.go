package main

import (
	"context"
	"errors"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"testing"
)

func write(t *testing.T, path, text string, mode os.FileMode) {
	t.Helper()
	if err := os.WriteFile(path, []byte(text), mode); err != nil {
		t.Fatal(err)
	}
}

func read(t *testing.T, path string) string {
	t.Helper()
	data, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	return string(data)
}

// planned returns the file for a path that must be writable.
func planned(t *testing.T, path, text string) file {
	t.Helper()
	target, err := planFile("--json", path)
	if err != nil {
		t.Fatal(err)
	}
	return file{target, []byte(text)}
}

func TestCommitWritesAll(t *testing.T) {
	dir := t.TempDir()
	old, fresh, tables := filepath.Join(dir, "old"), filepath.Join(dir, "fresh"), filepath.Join(dir, "tables")
	write(t, old, "before", 0o640)
	files := []file{planned(t, old, "after"), planned(t, fresh, "new"),
		{target{final: filepath.Join(tables, "a.csv")}, []byte("a")}}
	if err := commit(context.Background(), []string{tables}, files); err != nil {
		t.Fatal(err)
	}
	if got := read(t, old) + read(t, fresh) + read(t, filepath.Join(tables, "a.csv")); got != "afternewa" {
		t.Errorf("wrote %q", got)
	}
	if info, _ := os.Stat(old); info.Mode().Perm() != 0o640 {
		t.Errorf("the mode became %v, was 0640", info.Mode().Perm())
	}
	if got := names(dir); !slices.Equal(got, []string{"fresh", "old", "tables"}) {
		t.Errorf("left %q", got)
	}
}

// TestCommitUndoesAll makes the last of several writes fail, at each of its two steps:
// everything is as before.
func TestCommitUndoesAll(t *testing.T) {
	for _, step := range []string{"stage", "rename"} {
		dir := t.TempDir()
		old, fresh, tables := filepath.Join(dir, "old"), filepath.Join(dir, "fresh"), filepath.Join(dir, "tables")
		write(t, old, "before", 0o666)
		files := []file{planned(t, old, "after"), planned(t, fresh, "new")}
		left := []string{"old"}
		switch step {
		case "stage": // its folder went away after the plan
			files = append(files, file{target{flag: "--json", final: filepath.Join(dir, "gone", "x")}, []byte("x")})
		case "rename": // a folder took its name after the plan
			files = append(files, planned(t, filepath.Join(dir, "taken"), "x"))
			if err := os.Mkdir(filepath.Join(dir, "taken"), 0o777); err != nil {
				t.Fatal(err)
			}
			left = append(left, "taken")
		}
		err := commit(context.Background(), []string{tables}, files)
		if err == nil || !strings.HasPrefix(err.Error(), "--json: ") {
			t.Errorf("%s: got %v, want an error that names the flag", step, err)
		}
		if got := read(t, old); got != "before" {
			t.Errorf("%s: the file that was there holds %q", step, got)
		}
		if got := names(dir); !slices.Equal(got, left) {
			t.Errorf("%s: left %q, want %q", step, got, left)
		}
	}
}

func TestCommitStopsWhenInterrupted(t *testing.T) {
	dir := t.TempDir()
	ctx, cancel := context.WithCancel(context.Background())
	cancel()
	err := commit(ctx, []string{filepath.Join(dir, "tables")}, []file{planned(t, filepath.Join(dir, "a"), "a")})
	if !errors.Is(err, context.Canceled) {
		t.Errorf("got %v, want context.Canceled", err)
	}
	if got := names(dir); got != nil {
		t.Errorf("left %q", got)
	}
}

// TestLinksStayLinks holds that writing to a link replaces what it leads to.
func TestLinksStayLinks(t *testing.T) {
	dir := t.TempDir()
	real, link := filepath.Join(dir, "real"), filepath.Join(dir, "link")
	write(t, real, "before", 0o666)
	if err := os.Symlink("real", link); err != nil {
		t.Skip("no symbolic links here:", err)
	}
	if err := commit(context.Background(), nil, []file{planned(t, link, "after")}); err != nil {
		t.Fatal(err)
	}
	if info, err := os.Lstat(link); err != nil || info.Mode()&os.ModeSymlink == 0 {
		t.Errorf("the link became %v, %v", info.Mode(), err)
	}
	if got := read(t, real); got != "after" {
		t.Errorf("the file behind the link holds %q", got)
	}
}

// TestDevicesAreNotReplaced holds that a device is written to, never renamed over.
func TestDevicesAreNotReplaced(t *testing.T) {
	before, err := os.Stat(os.DevNull)
	if err != nil {
		t.Skip(err)
	}
	f := planned(t, os.DevNull, "x")
	if !f.direct {
		t.Fatal("the null device is taken for a file")
	}
	if err := commit(context.Background(), nil, []file{f}); err != nil {
		t.Fatal(err)
	}
	if after, err := os.Stat(os.DevNull); err != nil || after.Mode() != before.Mode() {
		t.Errorf("the null device became %v, %v", after, err)
	}
}

func TestWrongTargetsAreToldEarly(t *testing.T) {
	dir := t.TempDir()
	plain, locked := filepath.Join(dir, "plain"), filepath.Join(dir, "locked")
	write(t, plain, "", 0o666)
	write(t, locked, "", 0o444)
	dangling := filepath.Join(dir, "dangling")
	if err := os.Symlink("nowhere", dangling); err != nil {
		t.Skip("no symbolic links here:", err)
	}
	for _, c := range []struct {
		plan func(flag, path string) (target, error)
		path string
		want string
		hint string
	}{
		{planFile, dir, "is a folder", "give a file, such as " + filepath.Join(dir, "results.json")},
		{planFile, filepath.Join(dir, "no", "such", "x"), "folder " + filepath.Join(dir, "no", "such") + " does not exist", "mkdir -p "},
		{planFile, filepath.Join(plain, "x"), plain + " is not a folder", ""},
		{planFile, locked, "is read-only", ""},
		{planFile, dangling, "is a link to nowhere, which does not exist", ""},
		{planFolder, plain, "is a file, not a folder", ""},
		{planFolder, filepath.Join(dir, "no", "such"), "folder " + filepath.Join(dir, "no") + " does not exist", "mkdir -p "},
		{planFolder, filepath.Join(plain, "x"), plain + " is not a folder", ""},
		{planFolder, "-", "cannot go to standard output", "give a folder"},
	} {
		_, err := c.plan("--json", c.path)
		usage, ok := err.(*usageError)
		if !ok || !strings.HasPrefix(usage.text, "--json") || !strings.Contains(usage.text, c.want) || !strings.Contains(usage.hint, c.hint) {
			t.Errorf("%s: got %v, want %q with hint %q", c.path, err, c.want, c.hint)
		}
	}
	for _, path := range []string{"-", plain, filepath.Join(dir, "fresh"), "fresh"} {
		if _, err := planFile("--json", path); err != nil {
			t.Errorf("%s: %v", path, err)
		}
	}
}

func TestTargetsMustDiffer(t *testing.T) {
	dir := t.TempDir()
	t.Chdir(dir)
	write(t, "study.yaml", "", 0o666)
	if err := os.Symlink("study.yaml", "alias.yaml"); err != nil {
		t.Skip("no symbolic links here:", err)
	}
	for _, c := range []struct{ a, b, want string }{
		{"x", "y", ""},
		{"-", "y", ""},
		{"-", "-", "--report and --json cannot both go to standard output"},
		{"x", "./x", "--report and --json name the same file, ./x"},
		{"x", filepath.Join(dir, "x"), "name the same file"},
		{"study.yaml", "y", "--report would overwrite the study study.yaml"},
		{"y", "alias.yaml", "--json would overwrite the study study.yaml"},
		{"gold.csv", "y", "--report would overwrite the optical table gold.csv"},
	} {
		a, err := planFile("--report", c.a)
		if err != nil {
			t.Fatal(err)
		}
		b, err := planFile("--json", c.b)
		if err != nil {
			t.Fatal(err)
		}
		err = distinct([]input{{"study", "study.yaml"}, {"optical table", "gold.csv"}}, a, b)
		if (err == nil) != (c.want == "") || err != nil && !strings.Contains(err.Error(), c.want) {
			t.Errorf("%s and %s: got %v, want %q", c.a, c.b, err, c.want)
		}
	}
}
