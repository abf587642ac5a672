package main

import (
	"bytes"
	"go/ast"
	"go/parser"
	"go/token"
	"io/fs"
	"os"
	"path/filepath"
	"slices"
	"strconv"
	"strings"
	"testing"
)

const root = "../.."

// allowed holds for every package the packages of the project it may import; nothing points back. DEVELOPERS.md draws it.
var allowed = map[string][]string{
	"radiation":                {},
	"radiation/weather":        {"radiation"},
	"leaf":                     {},
	"leaf/traits":              {"leaf"},
	"leaf/fit":                 {"leaf"},
	"canopy":                   {"leaf"},
	"canopy/correct":           {},
	"canopy/inventory":         {"canopy", "leaf", "leaf/traits"},
	"scenarios/light":          {"radiation", "radiation/weather", "canopy"},
	"scenarios/ledger":         {"leaf", "canopy", "scenarios/light"},
	"scenarios":                {"radiation", "radiation/weather", "canopy", "canopy/correct", "canopy/inventory", "leaf", "leaf/traits", "scenarios/light", "scenarios/ledger"},
	"scenarios/plan":           {"leaf/fit", "radiation", "radiation/weather", "canopy", "canopy/correct", "canopy/inventory", "leaf", "leaf/traits", "scenarios", "scenarios/ledger"},
	"scenarios/decide/draws":   {},
	"scenarios/decide":         {"radiation/weather", "leaf", "canopy", "canopy/inventory", "scenarios", "scenarios/light", "scenarios/ledger", "scenarios/decide/draws"},
	"scenarios/report/figures": {},
	"scenarios/report":         {"scenarios/report/figures", "leaf/fit", "canopy", "canopy/correct", "canopy/inventory", "scenarios/decide", "leaf", "leaf/traits", "scenarios", "scenarios/ledger"},
	"cmd/shadeledger":          {"leaf", "leaf/fit", "canopy/inventory", "scenarios/decide", "leaf/traits", "scenarios", "scenarios/plan", "scenarios/report"},
}

// theories hold the physics: the standard library and gonum only.
var theories = []string{"radiation", "radiation/weather", "leaf", "leaf/traits", "canopy", "canopy/correct", "canopy/inventory", "scenarios/light", "scenarios/ledger", "scenarios", "scenarios/decide", "scenarios/decide/draws"}

// fromSeeds is what theories may take of math/rand/v2: generators from a seed they are given. Its functions draw from hidden seeds.
var fromSeeds = []string{"New", "NewPCG", "Rand", "PCG"}

const mostLines = 400

type source struct {
	dir, path string
	test      bool
	file      *ast.File
	lines     int
}

// sources parses every Go file of the project.
func sources(t *testing.T) []source {
	t.Helper()
	var out []source
	err := filepath.WalkDir(root, func(path string, d fs.DirEntry, err error) error {
		if err != nil {
			return err
		}
		if d.IsDir() && path != root && strings.HasPrefix(d.Name(), ".") || d.Name() == "testdata" {
			return filepath.SkipDir
		}
		if d.IsDir() || filepath.Ext(path) != ".go" {
			return nil
		}
		text, err := os.ReadFile(path)
		if err != nil {
			return err
		}
		f, err := parser.ParseFile(token.NewFileSet(), path, text, 0)
		if err != nil {
			return err
		}
		rel, err := filepath.Rel(root, path)
		if err != nil {
			return err
		}
		rel = filepath.ToSlash(rel)
		out = append(out, source{filepath.ToSlash(filepath.Dir(rel)), rel, strings.HasSuffix(rel, "_test.go"), f, bytes.Count(text, []byte("\n"))})
		return nil
	})
	if err != nil {
		t.Fatal(err)
	}
	if len(out) < 50 {
		t.Fatalf("only %d Go files found under %s", len(out), root)
	}
	return out
}

func TestImportsFollowTheDiagram(t *testing.T) {
	for _, s := range sources(t) {
		own, known := allowed[s.dir]
		if !known {
			t.Errorf("%s: package %s has no place in the diagram", s.path, s.dir)
			continue
		}
		for _, i := range s.file.Imports {
			name, err := strconv.Unquote(i.Path.Value)
			if err != nil {
				t.Fatal(err)
			}
			in, ours := strings.CutPrefix(name, "shadeledger/")
			switch {
			case ours && in != s.dir && !slices.Contains(own, in) && !s.test:
				t.Errorf("%s imports %s; %s may import %v", s.path, in, s.dir, own)
			case !ours && strings.Contains(name, ".") && !s.test && slices.Contains(theories, s.dir) && !strings.HasPrefix(name, "gonum.org/"):
				t.Errorf("%s imports %s; a theory takes the standard library and gonum only", s.path, name)
			}
		}
	}
}

// Below plan and report there is no clock, environment, printing or hidden randomness.
func TestTheoriesArePure(t *testing.T) {
	forbidden := map[string][]string{
		"os": nil, "log": nil, "math/rand": nil, "net/http": nil,
		"time": {"Now", "Since", "Sleep", "Until"}, "fmt": {"Print", "Printf", "Println", "Fprint", "Fprintf", "Fprintln"},
	}
	for _, s := range sources(t) {
		if s.test || !slices.Contains(theories, s.dir) {
			continue
		}
		for _, i := range s.file.Imports {
			name, _ := strconv.Unquote(i.Path.Value)
			if names, listed := forbidden[name]; listed && names == nil || name == "math/rand/v2" && i.Name != nil {
				t.Errorf("%s imports %s", s.path, name)
			}
		}
		ast.Inspect(s.file, func(n ast.Node) bool {
			if sel, ok := n.(*ast.SelectorExpr); ok {
				pkg, ok := sel.X.(*ast.Ident)
				if ok && (slices.Contains(forbidden[pkg.Name], sel.Sel.Name) || pkg.Name == "rand" && !slices.Contains(fromSeeds, sel.Sel.Name)) {
					t.Errorf("%s uses %s.%s", s.path, pkg.Name, sel.Sel.Name)
				}
			}
			return true
		})
	}
}

// Goroutines live in scenarios/light and nowhere else.
func TestGoroutinesLiveInLight(t *testing.T) {
	found := 0
	for _, s := range sources(t) {
		if s.test {
			continue
		}
		ast.Inspect(s.file, func(n ast.Node) bool {
			switch x := n.(type) {
			case *ast.GoStmt:
				found++
				if s.dir != "scenarios/light" {
					t.Errorf("%s starts a goroutine", s.path)
				}
			case *ast.SelectorExpr:
				if x.Sel.Name == "Go" {
					found++
					if s.dir != "scenarios/light" {
						t.Errorf("%s starts a goroutine by .Go", s.path)
					}
				}
			}
			return true
		})
	}
	if found == 0 {
		t.Error("no goroutine found anywhere; this test looks in the wrong place")
	}
}

func TestFilesAreShort(t *testing.T) {
	for _, s := range sources(t) {
		if s.lines > mostLines {
			t.Errorf("%s has %d lines; at most %d", s.path, s.lines, mostLines)
		}
	}
}

func TestTopLevel(t *testing.T) {
	entries, err := os.ReadDir(root)
	if err != nil {
		t.Fatal(err)
	}
	want := []string{"cmd", "radiation", "leaf", "canopy", "scenarios", "testdata", "go.mod", "go.sum", "README.md", "DEVELOPERS.md", "LICENSE"}
	for _, e := range entries {
		if !strings.HasPrefix(e.Name(), ".") && e.Name() != "shadeledger" && !slices.Contains(want, e.Name()) {
			t.Errorf("%s stands at the top level; a new one needs a reason as strong as the others", e.Name())
		}
	}
	for _, name := range want {
		if _, err := os.Stat(filepath.Join(root, name)); err != nil {
			t.Errorf("%s is not there: %v", name, err)
		}
	}
}
