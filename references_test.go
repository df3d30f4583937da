package hazewright

import (
	"io/fs"
	"os"
	"path/filepath"
	"regexp"
	"strings"
	"testing"
)

// A key in square brackets in the code resolves in REFERENCES.md.
func TestEveryReferenceResolves(t *testing.T) {
	list, err := os.ReadFile("REFERENCES.md")
	if err != nil {
		t.Fatal(err)
	}
	known := map[string]bool{}
	for _, m := range regexp.MustCompile(`\*\*([A-Za-z0-9]+)\*\*`).FindAllStringSubmatch(string(list), -1) {
		known[m[1]] = true
	}
	key := regexp.MustCompile(`\[([A-Z][A-Za-z]+(?:19|20)\d\d|COSPAR|NFPA484|ISO80004|WilliamsMars|MarsFactSheet|CRC97)\b`)
	used := 0
	err = filepath.WalkDir(".", func(path string, d fs.DirEntry, err error) error {
		if err != nil {
			return err
		}
		if d.IsDir() && strings.HasPrefix(d.Name(), ".") && path != "." {
			return filepath.SkipDir
		}
		if d.IsDir() || !strings.HasSuffix(path, ".go") || strings.HasSuffix(path, "fixture_test.go") {
			return nil
		}
		text, err := os.ReadFile(path)
		if err != nil {
			return err
		}
		for _, m := range key.FindAllStringSubmatch(string(text), -1) {
			used++
			if !known[m[1]] {
				t.Errorf("%s: [%s] is not in REFERENCES.md", path, m[1])
			}
		}
		return nil
	})
	if err != nil {
		t.Fatal(err)
	}
	if used < 50 {
		t.Errorf("only %d references found in the code; the pattern must have gone blind", used)
	}
}
