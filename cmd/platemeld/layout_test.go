package main

import (
	"go/parser"
	"go/token"
	"io/fs"
	"path/filepath"
	"strconv"
	"strings"
	"testing"
)

// order is the way of the data: a package imports only packages named before
// it. Those that stand on one line know nothing of each other.
var order = [][]string{
	{"platemeld/epochs/ephemeris", "platemeld/zeropoints", "platemeld/harmonize/tables", "platemeld/harmonize/printed"},
	{"platemeld/epochs"},
	{"platemeld/harmonize/plan"},
	{"platemeld/harmonize"},
	{"platemeld/harmonize/bundle"},
	{"platemeld/cmd/platemeld"},
}

// TestImportsFollowTheData reads every file's imports.
func TestImportsFollowTheData(t *testing.T) {
	rank := map[string]int{}
	for level, packages := range order {
		for _, name := range packages {
			rank[name] = level
		}
	}
	libraries := map[string]bool{"platemeld/epochs": true, "platemeld/zeropoints": true, "platemeld/epochs/ephemeris": true}
	files := 0
	err := filepath.WalkDir("../..", func(path string, entry fs.DirEntry, err error) error {
		if err != nil || entry.IsDir() || !strings.HasSuffix(path, ".go") || strings.HasSuffix(path, "_test.go") {
			return err
		}
		here := strings.TrimSuffix("platemeld/"+filepath.ToSlash(filepath.Dir(strings.TrimPrefix(path, "../../"))), "/.")
		if strings.Contains(here, "testdata") {
			return nil
		}
		files++
		level, known := rank[here]
		if !known {
			t.Errorf("%s is in a package that has no place in the order", path)
			return nil
		}
		parsed, err := parser.ParseFile(token.NewFileSet(), path, nil, parser.ImportsOnly)
		if err != nil {
			return err
		}
		for _, spec := range parsed.Imports {
			name, err := strconv.Unquote(spec.Path.Value)
			if err != nil {
				return err
			}
			inner, ours := rank[name]
			if strings.HasPrefix(name, "platemeld/") && !ours {
				t.Errorf("%s imports %s, which has no place in the order", path, name)
			}
			if ours && inner >= level {
				t.Errorf("%s imports %s, against the way of the data", path, name)
			}
			if ours && libraries[here] && !libraries[name] {
				t.Errorf("%s is a library of its own and imports %s", path, name)
			}
		}
		return nil
	})
	if err != nil {
		t.Fatal(err)
	}
	if files < 30 {
		t.Errorf("only %d files were looked at", files)
	}
}
