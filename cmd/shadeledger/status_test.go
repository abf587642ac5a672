package main

import (
	"os"
	"path/filepath"
	"strings"
	"testing"
)

func TestExitStatus(t *testing.T) {
	bad := filepath.Join(t.TempDir(), "bad.yaml")
	if err := os.WriteFile(bad, []byte("title: bad\nsite: {latitude: 95, longitude: 1}\n"), 0o600); err != nil {
		t.Fatal(err)
	}
	curves := filepath.Join(t.TempDir(), "bad.csv")
	if err := os.WriteFile(curves, []byte("leaf,ppfd,net\na,0,-1\na,100,\"2\n"), 0o600); err != nil {
		t.Fatal(err)
	}
	picture := filepath.Join(t.TempDir(), "out.svg")
	for _, c := range []struct {
		want int
		args []string
	}{
		{0, []string{"keys"}},
		{0, []string{"species"}},
		{2, []string{"nonsense"}},
		{2, []string{"light", "--nonsense"}},
		{2, []string{"light", "--format", "xml"}},
		{2, []string{"light", bad}},
		{2, []string{"check", bad}},
		{2, []string{"species", "Quercus nonsense"}},
		{2, []string{"keys", "nonsense"}},
		{2, []string{"start"}},
		{2, []string{"fit", "nonsense"}},
		{2, []string{"fit", "leaf"}},
		{2, []string{"fit", "leaf", curves}},
		{2, []string{"fit", "leaf", curves, "--over", "co2"}},
		{2, []string{"fit", "leaf", curves, "--units", "us"}},
		{2, []string{"fit", "canopy", "", curves}},
		{2, []string{"species", "--units", "us"}},
		{2, []string{"species", "--compare", ""}},
		{2, []string{"species", "red oak", "--format", "csv", "--output", picture}},
		{2, []string{"species", "red oak", "--output", "oak.pdf"}},
		{2, []string{"balance", "--output", "balance.PDF"}},
		{2, []string{"keys", "stand", "--schema"}},
		{1, []string{"keys", "--output", filepath.Join(t.TempDir(), "no", "such", "folder")}},
	} {
		call(t, c.want, c.args...)
	}
	if _, err := os.Lstat(picture); err == nil {
		t.Error("a refused figure was written")
	}
}

// A first-season seedling whose leaves do not fit their light is a warning; --strict makes it an exit status.
func TestStrict(t *testing.T) {
	set := []string{"--set", "seedlings." + firstSeedling(t) + ".ledger=first season"}
	_, notes := call(t, 0, append([]string{"balance", "--format", "csv"}, set...)...)
	if !strings.Contains(notes, "Note 1") {
		t.Fatalf("no warning in:\n%s", notes)
	}
	out, _ := call(t, 3, append([]string{"balance", "--format", "csv", "--strict"}, set...)...)
	if !strings.HasPrefix(out, "treatment,") {
		t.Error("--strict took the result away")
	}
	call(t, 0, "keys")
}

// Every command that runs a plan keeps to --strict; the stand's height draws a warning.
func TestStrictEverywhere(t *testing.T) {
	set := []string{"--strict", "--quiet", "--format", "csv", "--set", "stand.height=70 m", "--set", "sampling.step=60 min", "--set", "sampling.grid=10 m", "--set", "years.horizon=1", "--set", "size.up_to=0.3 H"}
	for _, command := range [][]string{{"check"}, {"stand"}, {"where"}, {"years"}, {"size", "--shape", "circle"}} {
		call(t, 3, append(command, set...)...)
	}
}

// firstSeedling is the name of the built-in example's first seedling.
func firstSeedling(t *testing.T) string {
	t.Helper()
	p, err := loadPlan("", nil)
	if err != nil {
		t.Fatal(err)
	}
	return p.Seedlings[0].Name
}
