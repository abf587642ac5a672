package plan

import (
	"os"
	"path/filepath"
	"strings"
	"testing"
)

const plans = "../../testdata/plans/"

// sound is a small plan without fault, with text added at its end, which is in the list of treatments.
func sound(t testing.TB, more string) []byte {
	t.Helper()
	data, err := os.ReadFile(plans + "sound.yaml")
	if err != nil {
		t.Fatal(err)
	}
	return append(data, more...)
}

// expected holds, by plan, the lines that its faults print.
func expected(t testing.TB) map[string][]string {
	t.Helper()
	data, err := os.ReadFile(plans + "bad/expected.txt")
	if err != nil {
		t.Fatal(err)
	}
	out := map[string][]string{}
	name := ""
	for _, line := range strings.Split(strings.TrimSpace(string(data)), "\n") {
		switch {
		case line == "" || line[0] == '#':
		case line[0] != '\t':
			name = line
			out[name] = nil
		default:
			out[name] = append(out[name], line[1:])
		}
	}
	return out
}

// Every bad plan gets all its faults at once, each with place, key, value and what would be right, and no plan.
func TestBadPlans(t *testing.T) {
	want := expected(t)
	files, err := filepath.Glob(plans + "bad/*.yaml")
	if err != nil || len(files) == 0 {
		t.Fatal("no bad plans", err)
	}
	if len(files) != len(want) {
		t.Errorf("%d bad plans but %d in expected.txt", len(files), len(want))
	}
	for _, file := range files {
		name := filepath.Base(file)
		p, faults := Read(file, Options{})
		if p != nil {
			t.Errorf("%s: a plan in spite of faults", name)
		}
		var got []string
		for _, f := range faults {
			got = append(got, strings.TrimPrefix(f.Error(), filepath.Dir(file)+string(filepath.Separator)))
		}
		if strings.Join(got, "\n") != strings.Join(want[name], "\n") {
			t.Errorf("%s\n\t%s\nwant\n\t%s", name, strings.Join(got, "\n\t"), strings.Join(want[name], "\n\t"))
		}
	}
}

func TestTheSoundPlanIsSound(t *testing.T) {
	if p, faults := Read(plans+"sound.yaml", Options{}); p == nil {
		t.Fatal(faults)
	}
}
