package hazewright

import (
	"go/parser"
	"go/token"
	"io/fs"
	"os"
	"path/filepath"
	"sort"
	"strconv"
	"strings"
	"testing"
)

// layers says what each package of the program may import, tests left aside: the
// project's own packages, and those of others by their first words. Data flows one
// way: study file -> optics, settling -> greenhouse -> logistics -> figures -> reports.
var layers = map[string][]string{
	".":                      {"hazewright/optics", "hazewright/optics/material", "hazewright/optics/greenhouse", "hazewright/settling", "hazewright/settling/atmosphere", "hazewright/logistics", "go.yaml.in/yaml/v3", "gonum.org/v1/gonum"},
	"optics":                 {"hazewright/optics/internal/planck", "hazewright/optics/material", "hazewright/optics/mie", "hazewright/optics/rod", "gonum.org/v1/gonum"},
	"optics/internal/planck": {},
	"optics/material":        {"hazewright/optics/internal/planck", "gonum.org/v1/gonum"},
	"optics/mie":             {"gonum.org/v1/gonum"},
	"optics/rod":             {"hazewright/optics/mie", "gonum.org/v1/gonum"},
	"optics/greenhouse":      {"hazewright/settling/atmosphere", "gonum.org/v1/gonum"},
	"settling":               {"hazewright/settling/atmosphere", "gonum.org/v1/gonum"},
	"settling/atmosphere":    {"gonum.org/v1/gonum"},
	"logistics":              {"gonum.org/v1/gonum"},
	"reports":                {"hazewright", "hazewright/logistics", "github.com/go-echarts/go-echarts/v2", "gonum.org/v1/gonum"},
	"cmd/hazewright":         {"hazewright", "hazewright/reports", "hazewright/optics/material", "github.com/spf13", "golang.org/x/term"},
}

// quiet packages take values and return values: no files, no network, no program.
var quiet = []string{"optics", "settling", "logistics"}

func TestImportsFlowOneWay(t *testing.T) {
	got := importsByPackage(t)
	for dir, imports := range got {
		allowed, known := layers[dir]
		if !known {
			t.Errorf("package %s is not in the table of layers; add it with what it may import", dir)
			continue
		}
		for _, path := range imports {
			if strings.Contains(strings.SplitN(path, "/", 2)[0], ".") || strings.HasPrefix(path, "hazewright") {
				if !permitted(path, allowed) {
					t.Errorf("package %s imports %s, which its layer may not", dir, path)
				}
			}
			if path == "net" || strings.HasPrefix(path, "net/") {
				t.Errorf("package %s imports %s: the program has no network code", dir, path)
			}
			for _, q := range quiet {
				if (dir == q || strings.HasPrefix(dir, q+"/")) && (path == "os" || path == "os/exec" || path == "path/filepath") {
					t.Errorf("package %s imports %s: it takes values and returns values", dir, path)
				}
			}
		}
	}
	for dir := range layers {
		if _, found := got[dir]; !found {
			t.Errorf("the table of layers has %s, but there is no such package", dir)
		}
	}
}

// permitted reports whether path is one of the project's own packages allowed, or
// inside a module of others that is.
func permitted(path string, allowed []string) bool {
	for _, a := range allowed {
		if path == a || !strings.HasPrefix(a, "hazewright") && strings.HasPrefix(path, a+"/") {
			return true
		}
	}
	return false
}

// importsByPackage reads the imports of every package of the program, by folder.
func importsByPackage(t *testing.T) map[string][]string {
	t.Helper()
	found := map[string]map[string]bool{}
	err := filepath.WalkDir(".", func(path string, d fs.DirEntry, err error) error {
		if err != nil {
			return err
		}
		name := d.Name()
		if d.IsDir() {
			if path != "." && (strings.HasPrefix(name, ".") || name == "testdata") {
				return filepath.SkipDir
			}
			return nil
		}
		if !strings.HasSuffix(name, ".go") || strings.HasSuffix(name, "_test.go") {
			return nil
		}
		file, err := parser.ParseFile(token.NewFileSet(), path, nil, parser.ImportsOnly)
		if err != nil {
			return err
		}
		dir := filepath.ToSlash(filepath.Dir(path))
		if found[dir] == nil {
			found[dir] = map[string]bool{}
		}
		for _, spec := range file.Imports {
			p, err := strconv.Unquote(spec.Path.Value)
			if err != nil {
				return err
			}
			found[dir][p] = true
		}
		return nil
	})
	if err != nil {
		t.Fatal(err)
	}
	out := map[string][]string{}
	for dir, set := range found {
		for p := range set {
			out[dir] = append(out[dir], p)
		}
		sort.Strings(out[dir])
	}
	return out
}

// TestTopLevelIsAsAgreed holds the folders of the repository to the agreed list.
func TestTopLevelIsAsAgreed(t *testing.T) {
	allowed := map[string]bool{"cmd": true, "optics": true, "settling": true, "logistics": true, "reports": true, "examples": true}
	entries, err := os.ReadDir(".")
	if err != nil {
		t.Fatal(err)
	}
	for _, e := range entries {
		if e.IsDir() && !strings.HasPrefix(e.Name(), ".") && !allowed[e.Name()] {
			t.Errorf("folder %s at the top level is not one of the agreed ones", e.Name())
		}
	}
}
