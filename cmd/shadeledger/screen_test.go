package main

import (
	"path/filepath"
	"strings"
	"testing"
	"unicode/utf8"

	"shadeledger/scenarios/plan"
	"shadeledger/scenarios/report"
)

// Every example fits the first screen, whole.
func TestExamplesFitATerminal(t *testing.T) {
	for _, name := range plan.Examples() {
		dir := filepath.Join(t.TempDir(), name)
		call(t, 0, "start", dir, "--example", name)
		out, _ := call(t, 0, "balance", dir)
		lines := firstScreen(out)
		if len(lines) > report.Height {
			t.Errorf("%s: %d lines; at most %d", name, len(lines), report.Height)
		}
		for _, l := range lines {
			if utf8.RuneCountInString(l) > report.Width {
				t.Errorf("%s: wider than %d columns: %q", name, report.Width, l)
			}
		}
		if strings.Contains(out, "Not shown for want of room") {
			t.Errorf("%s does not fit the first screen", name)
		}
	}
}

// The text that start writes gives the built-in example's numbers.
func TestStartedPlanIsTheExample(t *testing.T) {
	dir := filepath.Join(t.TempDir(), "stand")
	call(t, 0, "start", dir)
	want, _ := call(t, 0, "balance", "--format", "csv")
	if got, _ := call(t, 0, "balance", dir, "--format", "csv"); got != want {
		t.Error("the plan that start writes gives other rows than the built-in example")
	}
}
