package report

import (
	"bytes"
	"strings"
	"testing"
	"unicode/utf8"

	"shadeledger/scenarios"
	"shadeledger/scenarios/decide"
	"shadeledger/scenarios/ledger"
)

// limited is the made run with a limit that the two largest circles overstep, and shrubs that stay in one treatment.
func limited(t *testing.T, seedlings int) *scenarios.Results {
	t.Helper()
	r := made(t, func(int, int, int) ledger.Class { return ledger.Comfortable })
	r.Plan.Limits = []scenarios.Limit{scenarios.OpeningLimit{Area: 1900}} // circles of 52 and 56 m have 2124 and 2463 m2, the next 1810
	u := scenarios.Understory{Name: "brambles"}
	u.LAI, u.Top = 1, 1
	r.Plan.Treatments[4].Understory = []scenarios.Understory{u}
	r.Plan.Seedlings = r.Plan.Seedlings[:seedlings]
	return r
}

// Rows with room hold the words of their conflicts; rows without hold signs, in the row and in the cell, and a line names them.
func TestScreenShowsConflicts(t *testing.T) {
	words := screen(t, limited(t, 1))
	text := strings.Join(words, "\n")
	for _, want := range []string{"! windthrow, opening\n", "! windthrow, shrubs above\n"} {
		if !strings.Contains(text, want) {
			t.Errorf("no %q in\n%s", want, text)
		}
	}
	if strings.Contains(text, "In words") {
		t.Errorf("words and a legend\n%s", text)
	}
	lines := screen(t, limited(t, 5))
	text = strings.Join(lines, "\n")
	for _, want := range []string{"! windthrow: all cuts; heavy thinning: Thin to 40; shrubs above: Circle 1.0 H; ", "opening: Oval N-S, Circle 2.0 H", "shadeledger cautions", "all !"} {
		if !strings.Contains(strings.ReplaceAll(text, "\n", " "), want) {
			t.Errorf("no %q in\n%s", want, text)
		}
	}
	if strings.Contains(text, "Not shown") {
		t.Errorf("a treatment gave way to conflicts\n%s", text)
	}
	for _, l := range lines {
		if strings.HasPrefix(l, "No action") && strings.Contains(l, sign) {
			t.Errorf("a sign where nothing speaks against: %q", l)
		}
	}
}

func TestGroupsOfTreatments(t *testing.T) {
	p := made(t, func(int, int, int) ledger.Class { return ledger.Below }).Plan
	var all []string
	for _, x := range p.Treatments {
		all = append(all, x.Name)
	}
	for _, c := range []struct {
		names []string
		want  string
	}{
		{all, "all treatments"}, {all[1:], "all cuts"}, {all[4:], "all openings"}, {all[3:], "Thin to 40, all openings"},
		{all[:1], "No action"}, {all[2:4], "Thin to 60, Thin to 40"}, {append([]string{"No action"}, all[4:]...), "No action, all openings"},
	} {
		if got := groupOf(p, c.names); got != c.want {
			t.Errorf("%v is %q, want %q", c.names, got, c.want)
		}
	}
}

// Every caution prints with its state and the last line defers, whatever the plan says; nothing is wider than the screen.
func TestCautionsPrintAll(t *testing.T) {
	r := limited(t, 5)
	r.Plan.Limits = append(r.Plan.Limits, scenarios.ShareLimit{Share: 0.15}, scenarios.ResidualLimit{BasalArea: 12})
	for i := range r.Plan.Cautions {
		r.Plan.Cautions[i].State, r.Plan.Cautions[i].Note = "not applicable", "nothing to see"
	}
	for _, u := range []scenarios.Units{scenarios.Metric, scenarios.US} {
		var b bytes.Buffer
		if err := Cautions(Output{Out: &b, Units: u}, r); err != nil {
			t.Fatal(err)
		}
		text := b.String()
		flat := strings.Join(strings.Fields(text), " ")
		for _, c := range r.Plan.Cautions {
			if !strings.Contains(flat, "not applicable "+c.Key+": "+c.Text) {
				t.Errorf("no word of %s", c.Key)
			}
		}
		for _, want := range []string{"[conflict above: windthrow, heavy thinning]", "shrubs above: Red oak 2-0, White pine, Yellow birch, Sugar maple, Hemlock: its top", "total share 15 % all it touches not assessed"} {
			if !strings.Contains(flat, want) {
				t.Errorf("no %q in\n%s", want, text)
			}
		}
		if !strings.HasSuffix(text, deference+"\n") {
			t.Errorf("the last words are %q", text[len(text)-80:])
		}
		for _, l := range strings.Split(text, "\n") {
			if utf8.RuneCountInString(l) > Width {
				t.Errorf("%d columns: %q", utf8.RuneCountInString(l), l)
			}
		}
	}
}

// A figure that is over a limit reads as another number than the limit.
func TestFiguresDifferFromTheirLimits(t *testing.T) {
	for _, c := range []struct {
		found, limit decide.Measure
		want         string
	}{
		{decide.Measure{Kind: decide.Percent, Value: 15.2}, decide.Measure{Kind: decide.Percent, Value: 15}, "15.2 % 15.0 %"},
		{decide.Measure{Kind: decide.Percent, Value: 22}, decide.Measure{Kind: decide.Percent, Value: 15}, "22 % 15 %"},
		{decide.Measure{Kind: decide.Squares, Value: 5034}, decide.Measure{Kind: decide.Squares, Value: 5000}, "5030 m2 5000 m2"},
		{decide.Measure{Kind: decide.Metres, Value: 22.86}, decide.Measure{Kind: decide.Metres, Value: 22.86}, "22.9 m 22.9 m"},
		{decide.Measure{}, decide.Measure{Kind: decide.Basal, Value: 12}, " 12.0 m2/ha"},
	} {
		found, limit := against(&decide.Finding{Found: c.found, Limit: c.limit}, scenarios.Metric)
		if got := found + " " + limit; got != c.want {
			t.Errorf("%q, want %q", got, c.want)
		}
	}
}
