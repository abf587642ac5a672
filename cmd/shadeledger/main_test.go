package main

import (
	"bytes"
	"os"
	"strings"
	"testing"
	"unicode/utf8"

	"github.com/rogpeppe/go-internal/testscript"

	"shadeledger/scenarios/report"
)

func TestMain(m *testing.M) {
	testscript.Main(m, map[string]func(){"shadeledger": main})
}

func TestScripts(t *testing.T) {
	testscript.Run(t, testscript.Params{Dir: "testdata/script", RequireExplicitExec: true, RequireUniqueNames: true})
}

// call runs the program in this process, away from any settings.
func call(t *testing.T, want int, args ...string) (stdout, stderr string) {
	t.Helper()
	t.Setenv("XDG_CONFIG_HOME", t.TempDir())
	var out, errs bytes.Buffer
	if got := run(args, &out, &errs); got != want {
		t.Fatalf("shadeledger %s: exit status %d, want %d\n%s", strings.Join(args, " "), got, want, errs.String())
	}
	return out.String(), errs.String()
}

// firstScreen is what balance prints above its first empty line.
func firstScreen(out string) []string {
	screen, _, _ := strings.Cut(out, "\n\n")
	return strings.Split(screen, "\n")
}

func TestFirstScreenFitsATerminal(t *testing.T) {
	for _, units := range []string{"us", "metric"} {
		out, _ := call(t, 0, "balance", "--units", units)
		lines := firstScreen(out)
		if len(lines) > report.Height {
			t.Errorf("%d lines; at most %d\n%s", len(lines), report.Height, strings.Join(lines, "\n"))
		}
		for _, l := range lines {
			if n := utf8.RuneCountInString(l); n > report.Width {
				t.Errorf("%d columns; at most %d: %q", n, report.Width, l)
			}
		}
		if !strings.Contains(lines[0], "built-in example, invented data") && !strings.Contains(lines[1], "built-in example, invented data") {
			t.Errorf("the first line %q does not say that the example is invented", lines[0])
		}
		if strings.Contains(out, "Not shown for want of room") {
			t.Error("the built-in example does not fit the first screen")
		}
		if !strings.Contains(out, "licensed forester") || !strings.Contains(out, "Cautions:") {
			t.Error("no cautions under the table")
		}
	}
}

// readmeCommand is the run that README.md shows.
const readmeCommand = "    $ go run ./cmd/shadeledger balance"

// README.md shows what the program prints today.
func TestReadmeShowsTheRealOutput(t *testing.T) {
	text, err := os.ReadFile("../../README.md")
	if err != nil {
		t.Fatal(err)
	}
	_, after, found := strings.Cut(string(text), readmeCommand+"\n")
	if !found {
		t.Fatalf("README.md has no line %q with the output under it", readmeCommand)
	}
	out, _ := call(t, 0, "balance")
	shown := strings.Split(after, "\n")
	for i, want := range firstScreen(out) {
		if got := strings.TrimPrefix(shown[i], "    "); got != want {
			t.Errorf("line %d under %q is\n%s\nthe program prints\n%s", i+1, readmeCommand, got, want)
		}
	}
}

// Any number of workers writes the same bytes.
func TestWorkersWriteTheSameBytes(t *testing.T) {
	for _, command := range [][]string{{"balance", "--format", "csv"}, {"light", "--format", "json", "--by", "month"}} {
		one, _ := call(t, 0, append(command, "--workers", "1")...)
		if !strings.Contains(one, "light_pct") {
			t.Fatalf("%v prints no rows", command)
		}
		for _, n := range []string{"2", "7"} {
			if many, _ := call(t, 0, append(command, "--workers", n)...); many != one {
				t.Errorf("%v: %s workers write other bytes than one", command, n)
			}
		}
	}
}

// --quiet takes progress away, not the cautions.
func TestQuietKeepsCautions(t *testing.T) {
	_, notes := call(t, 0, "light", "--format", "csv", "--quiet")
	if !strings.Contains(notes, "windthrow") || !strings.Contains(notes, "licensed forester") {
		t.Errorf("no cautions with --quiet: %q", notes)
	}
}
