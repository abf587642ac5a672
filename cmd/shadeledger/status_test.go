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
		{1, []string{"keys", "--output", filepath.Join(t.TempDir(), "no", "such", "folder")}},
	} {
		call(t, c.want, c.args...)
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

// firstSeedling is the name of the built-in example's first seedling.
func firstSeedling(t *testing.T) string {
	t.Helper()
	p, err := loadPlan("", nil)
	if err != nil {
		t.Fatal(err)
	}
	return p.Seedlings[0].Name
}
