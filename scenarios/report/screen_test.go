package report

import (
	"bytes"
	"encoding/csv"
	"encoding/json"
	"math"
	"strings"
	"testing"
	"time"
	"unicode/utf8"

	"shadeledger/canopy"
	"shadeledger/canopy/inventory"
	"shadeledger/leaf/traits"
	"shadeledger/scenarios"
	"shadeledger/scenarios/ledger"
)

// class of a seedling at a station of a treatment.
type classOf func(treatment, station, seedling int) ledger.Class

// oaks are 29.2 m2/ha of red oak, 25 cm thick.
func oaks(t *testing.T) inventory.Stand {
	t.Helper()
	oak, err := traits.Find("Quercus rubra")
	if err != nil {
		t.Fatal(err)
	}
	class := inventory.Class{Species: oak, DBH: 0.25, PerHa: 29.2 / inventory.StemArea(0.25), Height: math.NaN(), CrownBase: math.NaN()}
	s, err := inventory.NewStand([]inventory.Class{class}, inventory.Setting{Height: 23.8, CrownBase: 9})
	if err != nil {
		t.Fatal(err)
	}
	return s
}

// made is a run of nine treatments and five seedlings with classes as told; light falls from 59 % by station.
func made(t *testing.T, class classOf) *scenarios.Results {
	t.Helper()
	layer := func(lai float64) []scenarios.Layer {
		return []scenarios.Layer{{Layer: canopy.Layer{Bottom: 9, Top: 24, LAI: lai, Chi: 1, Clumping: 1, Absorptance: 0.85}}}
	}
	p := &scenarios.Plan{Title: "Stand 7, Kettle Bench", Example: true, Units: scenarios.US,
		Season: scenarios.Period{From: scenarios.Date{Month: time.May, Day: 1}, To: scenarios.Date{Month: time.September, Day: 30}},
		Stand:  scenarios.Stand{Height: 23.8, CrownBase: 9, Layers: layer(5), Trees: oaks(t)},
	}
	for _, name := range []string{"Red oak 2-0", "White pine", "Yellow birch", "Sugar maple", "Hemlock"} {
		p.Seedlings = append(p.Seedlings, scenarios.Seedling{Name: name})
	}
	for i, name := range []string{"No action", "Thin to 90", "Thin to 60", "Thin to 40", "Circle 1.0 H", "Circle 1.5 H", "Oval E-W", "Oval N-S", "Circle 2.0 H"} {
		x := scenarios.Treatment{Name: name, Matrix: layer(5), Opening: scenarios.NoOpening{}}
		if i >= 1 && i <= 3 {
			x.Matrix = layer([]float64{3.3, 2.2, 1.5}[i-1])
		}
		if i > 3 {
			c, err := canopy.NewCircle(24 + 4*float64(i))
			if err != nil {
				t.Fatal(err)
			}
			x.Opening = scenarios.Cleared{Stems: c, Crowns: c}
		}
		p.Treatments = append(p.Treatments, x)
	}
	p.Cautions = []scenarios.Caution{{Key: "windthrow", Text: "New edges blow down.", State: "OPEN"}, {Key: "frost", Text: "Hollows freeze.", State: "addressed"}}
	p.Assumed = []scenarios.Assumed{{Key: "stand.lai", Value: "5.0", Source: "common practice"}}
	r := &scenarios.Results{Plan: p, Assumed: p.Assumed, Warnings: []scenarios.Warning{{Key: "weather", Text: "a gap was bridged"}}}
	for i := range p.Treatments {
		names := []string{scenarios.UnderCanopy}
		if i > 3 {
			names = []string{"centre", "N third", "N edge", "N outside", "E third", "E edge", "E outside"}
		}
		st := scenarios.TreatmentStations{Treatment: &p.Treatments[i], Names: names}
		for j, name := range names {
			st.Inside = append(st.Inside, !strings.HasSuffix(name, "outside"))
			for k, s := range p.Seedlings {
				r.Balance = append(r.Balance, scenarios.BalanceRow{Treatment: p.Treatments[i].Name, Station: name, Species: s.Name, Period: "year",
					Light: 59 - 10*float64(j), LightLeafOn: 58 - 10*float64(j), Class: class(i, j, k), BreakEven: ledger.NewBreakEven(40, 35, 2)})
			}
		}
		r.Stations = append(r.Stations, st)
	}
	return r
}

func screen(t *testing.T, r *scenarios.Results) []string {
	t.Helper()
	var b bytes.Buffer
	if err := FirstScreen(Output{Out: &b, Units: scenarios.US}, r, nil); err != nil {
		t.Fatal(err)
	}
	lines := strings.Split(strings.TrimSuffix(b.String(), "\n"), "\n")
	for _, l := range lines {
		if n := utf8.RuneCountInString(l); n > Width {
			t.Errorf("%d columns: %q", n, l)
		}
	}
	if len(lines) > Height {
		t.Errorf("%d lines\n%s", len(lines), b.String())
	}
	return lines
}

func TestDecision(t *testing.T) {
	for _, c := range []struct {
		name  string
		class classOf
		want  []string
	}{
		{"nothing", func(int, int, int) ledger.Class { return ledger.Marginal },
			[]string{"Nothing works", "Red oak 2-0 (wants 70 % leaf-on, brightest 58)"}},
		{"uncut", func(int, int, int) ledger.Class { return ledger.Comfortable }, []string{"Leave it alone", "No action"}},
		{"outside does not count", func(_, j, _ int) ledger.Class {
			if j == 3 || j == 6 {
				return ledger.Comfortable
			}
			return ledger.Below
		}, []string{"Nothing works"}},
		// one opening is lighter than a thinning of the whole stand
		{"lightest", func(i, j, k int) ledger.Class {
			if k < 2 && (i == 1 || i == 5 && j < 2 || i == 8) {
				return ledger.Comfortable
			}
			return ledger.Below
		}, []string{"Lightest cut that works: Circle 1.5 H for Red oak 2-0 (C N), White pine (C N); nothing for Yellow birch"}},
	} {
		r := made(t, c.class)
		got := gather(r).decision()
		for _, want := range c.want {
			if !strings.Contains(got, want) {
				t.Errorf("%s: %q does not say %q", c.name, got, want)
			}
		}
		screen(t, r)
	}
}

func TestScreenShowsEveryTreatmentAndSeedling(t *testing.T) {
	r := made(t, func(i, j, k int) ledger.Class { return ledger.Class((i + j + k) % 3) })
	text := strings.Join(screen(t, r), "\n")
	t.Log("\n" + text)
	for _, want := range []string{"invented data", "127 ft2/ac", "241 trees/ac", "QMD 9.8 in", "H:D 95 (oak)", "(dbh)", "1 cautions open", "Hemlock", "Circle", "2.0 H", "comfortable"} {
		if !strings.Contains(text, want) {
			t.Errorf("the screen does not show %q", want)
		}
	}
	if strings.Contains(text, "Not shown") {
		t.Error("nine treatments and five seedlings do not fit")
	}
}

func TestScreenStaysSmall(t *testing.T) {
	r := made(t, func(i, j, k int) ledger.Class { return ledger.Comfortable })
	for i := range r.Plan.Treatments {
		long := "A treatment with a rather long name " + itoa(i)
		for k := range r.Balance {
			if r.Balance[k].Treatment == r.Plan.Treatments[i].Name {
				r.Balance[k].Treatment = long
			}
		}
		r.Plan.Treatments[i].Name = long
	}
	if text := strings.Join(screen(t, r), "\n"); !strings.Contains(text, "Not shown for want of room") {
		t.Error("rows were left out without a word")
	}
}

func TestFormatsCarryTheNotes(t *testing.T) {
	r := made(t, func(int, int, int) ledger.Class { return ledger.Below })
	r.Balance[0].BreakEven = ledger.BreakEven{}
	r.Balance[0].Lines[ledger.Income] = math.NaN()
	var out, side bytes.Buffer
	if err := Balance(Output{Out: &out, Notes: &side, Format: CSV}, r, Screen, nil); err != nil {
		t.Fatal(err)
	}
	records, err := csv.NewReader(&out).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	if len(records) != len(r.Balance)+1 || len(records[0]) != 23 || records[1][18] != "" || records[1][8] != "" {
		t.Errorf("%d records of %d fields, break-even %q, income %q; want %d of 23, empty, empty", len(records), len(records[0]),
			records[1][18], records[1][8], len(r.Balance)+1)
	}
	for _, want := range []string{"a gap was bridged", "stand.lai", "OPEN  windthrow", deference} {
		if !strings.Contains(side.String(), want) {
			t.Errorf("the notes beside CSV lack %q", want)
		}
	}
	out.Reset()
	if err := Balance(Output{Out: &out, Format: JSON}, r, Screen, nil); err != nil {
		t.Fatal(err)
	}
	var doc struct {
		Plan                        string
		Rows                        []map[string]any
		Assumed, Warnings, Cautions []map[string]string
	}
	if err := json.Unmarshal(out.Bytes(), &doc); err != nil {
		t.Fatal(err)
	}
	if !strings.Contains(doc.Plan, "invented data") || len(doc.Rows) != len(r.Balance) || doc.Rows[0]["break_even_pct"] != nil ||
		len(doc.Assumed) != 1 || len(doc.Warnings) != 1 || len(doc.Cautions) != 2 {
		t.Errorf("JSON holds %q, %d rows, %v, %d assumed, %d warnings, %d cautions", doc.Plan, len(doc.Rows), doc.Rows[0]["break_even_pct"],
			len(doc.Assumed), len(doc.Warnings), len(doc.Cautions))
	}
}

func TestNumbersWithoutFalsePrecision(t *testing.T) {
	for _, c := range []struct{ got, want string }{
		{sig(127.13, 3), "127"}, {sig(0.2512, 2), "0.25"}, {sig(1234, 2), "1200"}, {sig(-0.0456, 2), "-0.046"}, {sig(0, 2), "0"},
		{whole(0.2), "<1"}, {whole(0), "0"}, {whole(12.5), "13"}, {whole(math.NaN()), "-"},
		{length(23.8, scenarios.US), "78.1 ft"}, {area(1011.7, scenarios.US), "0.25 ac"}, {area(962, scenarios.Metric), "960 m2"},
		{basalArea(29.2, scenarios.US), "127 ft2/ac"}, {basalArea(29.2, scenarios.Metric), "29.2 m2/ha"},
	} {
		if c.got != c.want {
			t.Errorf("printed %q; want %q", c.got, c.want)
		}
	}
}
