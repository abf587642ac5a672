package main

import (
	"fmt"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"shadeledger/leaf"
	"shadeledger/scenarios/report"
)

// readings writes a file of light responses, of as many leaves as asked, each of its own plant.
func readings(t *testing.T, species string, leaves int, set leaf.Set) string {
	t.Helper()
	var b strings.Builder
	b.WriteString("species,plant,leaf,ppfd,net,tleaf\n")
	for k := range leaves {
		for _, ppfd := range []float64{0, 10, 25, 50, 100, 250, 600, 1100, 1800} {
			fmt.Fprintf(&b, "%s,p%d,l%d,%g,%.4f,24\n", species, k, k, ppfd, set.Net(ppfd))
		}
	}
	return written(t, "curves.csv", b.String())
}

// written puts text into a new folder.
func written(t *testing.T, name, text string) string {
	t.Helper()
	path := filepath.Join(t.TempDir(), name)
	if err := os.WriteFile(path, []byte(text), 0o600); err != nil {
		t.Fatal(err)
	}
	return path
}

var oakLeaf = leaf.Set{Ag: 12, Rd: 1.1, Phi: 0.05, Theta: 0.8, LMA: 60}

// More leaves than a figure holds go to several, whose names are told, unless --quiet.
func TestFigurePagesAreTold(t *testing.T) {
	file := readings(t, "Quercus rubra", report.MostLeaves+1, oakLeaf)
	for _, quiet := range []bool{false, true} {
		out := filepath.Join(t.TempDir(), "m.svg")
		args := []string{"fit", "leaf", file, "--output", out}
		if quiet {
			args = append(args, "--quiet")
		}
		_, notes := call(t, 0, args...)
		for _, page := range []string{"m-1.svg", "m-2.svg"} {
			if _, err := os.Lstat(filepath.Join(filepath.Dir(out), page)); err != nil {
				t.Error(err)
			}
			if strings.Contains(notes, page) == quiet {
				t.Errorf("quiet %t, %s: %q", quiet, page, notes)
			}
		}
	}
}
