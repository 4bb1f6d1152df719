package main

import (
	"context"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"github.com/rogpeppe/go-internal/testscript"
)

func TestMain(m *testing.M) {
	testscript.Main(m, map[string]func(){"platemeld": func() {
		os.Exit(run(context.Background(), os.Args[1:], os.Stdin, os.Stdout, os.Stderr))
	}})
}

// TestScripts runs every script of testdata/script in a folder of its own
// that holds a copy of testdata/small.
func TestScripts(t *testing.T) {
	scripts, err := filepath.Glob("testdata/script/*.txtar")
	if err != nil {
		t.Fatal(err)
	}
	if len(scripts) < 8 {
		t.Fatalf("found only %d scripts", len(scripts))
	}
	small, err := filepath.Abs("testdata/small")
	if err != nil {
		t.Fatal(err)
	}
	demo, err := filepath.Abs("../../testdata/demo")
	if err != nil {
		t.Fatal(err)
	}
	testscript.Run(t, testscript.Params{
		Dir: "testdata/script",
		Setup: func(env *testscript.Env) error {
			env.Setenv("DEMO", demo)
			return os.CopyFS(env.WorkDir, os.DirFS(small))
		},
		Cmds: map[string]func(*testscript.TestScript, bool, []string){
			"replace": replaceInFile,
			"width":   checkWidth,
		},
	})
}

// replaceInFile is the script command "replace FILE OLD NEW": it changes the
// first place where OLD stands, and fails when there is none. \n in the texts
// is a line break.
func replaceInFile(script *testscript.TestScript, negated bool, arguments []string) {
	if negated || len(arguments) != 3 {
		script.Fatalf("usage: replace FILE OLD NEW")
	}
	path := script.MkAbs(arguments[0])
	old := strings.ReplaceAll(arguments[1], `\n`, "\n")
	text := script.ReadFile(path)
	if !strings.Contains(text, old) {
		script.Fatalf("%s holds no %q", arguments[0], old)
	}
	text = strings.Replace(text, old, strings.ReplaceAll(arguments[2], `\n`, "\n"), 1)
	script.Check(os.WriteFile(path, []byte(text), 0o644))
}

// checkWidth is the script command "width N": the last command's standard
// output has no line of more than N characters.
func checkWidth(script *testscript.TestScript, negated bool, arguments []string) {
	if negated || len(arguments) != 1 || arguments[0] != "80" {
		script.Fatalf("usage: width 80")
	}
	for i, line := range strings.Split(script.ReadFile("stdout"), "\n") {
		if n := len([]rune(line)); n > 80 {
			script.Fatalf("line %d of the output is %d characters wide: %s", i+1, n, line)
		}
	}
}
