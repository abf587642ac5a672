package scenarios_test

import (
	"math"
	"reflect"
	"strings"
	"testing"
	"time"

	"shadeledger/leaf"
	"shadeledger/radiation/weather"
	"shadeledger/scenarios"
	"shadeledger/scenarios/ledger"
	"shadeledger/scenarios/plan"
)

func TestRowsKeepThePlansOrder(t *testing.T) {
	p := invented(t)
	r := run(t, p, scenarios.Options{Depth: scenarios.BreakEvens, By: scenarios.ByYear})
	want := 0
	for i, s := range r.Stations {
		for _, station := range s.Names {
			for _, seedling := range p.Seedlings {
				row := r.Balance[want]
				if row.Treatment != p.Treatments[i].Name || row.Station != station || row.Species != seedling.Name || row.Period != "year" {
					t.Fatalf("row %d is %s, %s, %s, %s; want %s, %s, %s, year", want, row.Treatment, row.Station, row.Species, row.Period,
						p.Treatments[i].Name, station, seedling.Name)
				}
				want++
			}
		}
	}
	if len(r.Balance) != want || want != (1+1+13)*2 {
		t.Errorf("%d rows for %d places; want 30", len(r.Balance), want)
	}
}

func TestWorkersChangeNothing(t *testing.T) {
	p := invented(t)
	for _, depth := range []scenarios.Depth{scenarios.Light, scenarios.BreakEvens} {
		one := run(t, p, scenarios.Options{Workers: 1, Depth: depth, By: scenarios.ByMonth})
		for _, workers := range []int{2, 7} {
			many := run(t, p, scenarios.Options{Workers: workers, Depth: depth, By: scenarios.ByMonth})
			if !reflect.DeepEqual(one.Light, many.Light) || !reflect.DeepEqual(one.Balance, many.Balance) {
				t.Errorf("depth %d: %d workers give other rows than one", depth, workers)
			}
		}
	}
}

func TestOrderOfTreatmentsChangesNothing(t *testing.T) {
	p := invented(t)
	a := run(t, p, scenarios.Options{Depth: scenarios.Ledgers, By: scenarios.ByYear})
	q := *p
	q.Treatments = []scenarios.Treatment{p.Treatments[2], p.Treatments[0], p.Treatments[1]}
	b := run(t, &q, scenarios.Options{Depth: scenarios.Ledgers, By: scenarios.ByYear})
	find := func(rows []scenarios.BalanceRow, like scenarios.BalanceRow) scenarios.BalanceRow {
		for _, r := range rows {
			if r.Treatment == like.Treatment && r.Station == like.Station && r.Species == like.Species {
				return r
			}
		}
		t.Fatalf("no row for %s, %s", like.Treatment, like.Station)
		return like
	}
	for _, row := range a.Balance {
		if got := find(b.Balance, row); !reflect.DeepEqual(got, row) {
			t.Errorf("%s, %s, %s: %v in one order, %v in another", row.Treatment, row.Station, row.Species, row.Lines, got.Lines)
		}
	}
}

// Months and days add to the year, every line of it.
func TestPeriodsAddToTheYear(t *testing.T) {
	p := invented(t)
	year := run(t, p, scenarios.Options{Depth: scenarios.Ledgers, By: scenarios.ByYear})
	for _, c := range []struct {
		by    scenarios.By
		parts int
	}{{scenarios.ByMonth, 12}, {scenarios.ByDay, 365}} {
		r := run(t, p, scenarios.Options{Depth: scenarios.Ledgers, By: c.by})
		if len(r.Balance) != c.parts*len(year.Balance) {
			t.Fatalf("%d rows; want %d for each of %d", len(r.Balance), c.parts, len(year.Balance))
		}
		for i, y := range year.Balance {
			var sum ledger.Lines
			for _, part := range r.Balance[i*c.parts : (i+1)*c.parts] {
				sum.Add(part.Lines, 1)
			}
			for l := range sum {
				if math.Abs(sum[l]-y.Lines[l]) > 1e-9*math.Abs(y.Lines[l]) {
					t.Errorf("%s, %s, line %d: parts add to %g, the year is %g", y.Treatment, y.Station, l, sum[l], y.Lines[l])
				}
			}
		}
	}
}

func TestNamesOfPeriods(t *testing.T) {
	p := invented(t)
	p.Treatments = p.Treatments[:1]
	for _, c := range []struct {
		by          scenarios.By
		first, last string
	}{
		{scenarios.BySeason, "season", "season"}, {scenarios.ByLeafOn, "leaf-on", "leaf-on"}, {scenarios.ByYear, "year", "year"},
		{scenarios.ByMonth, "01", "12"}, {scenarios.ByDay, "01-01", "12-31"},
	} {
		r := run(t, p, scenarios.Options{By: c.by})
		if f, l := r.Light[0].Period, r.Light[len(r.Light)-1].Period; f != c.first || l != c.last {
			t.Errorf("by %d: periods %s to %s; want %s to %s", c.by, f, l, c.first, c.last)
		}
	}
}

// dated is n years of flat daily weather from the first of 2023, the second year brighter.
func dated(n int) *weather.Daily {
	d := &weather.Daily{}
	for day := time.Date(2023, 1, 1, 0, 0, 0, 0, time.UTC); day.Year() < 2023+n; day = day.AddDate(0, 0, 1) {
		d.Rows = append(d.Rows, weather.DailyRecord{Date: day, Global: 12 + 4*float64(day.Year()-2023), Sunshine: math.NaN(),
			Tmin: 8, Tmax: 18, Humidity: math.NaN(), Rain: math.NaN()})
	}
	return d
}

// Several years give means, and every year is kept.
func TestSeveralYearsAreMeans(t *testing.T) {
	p := invented(t)
	p.Treatments = p.Treatments[:1]
	p.Weather = dated(2)
	r := run(t, p, scenarios.Options{Depth: scenarios.Ledgers, By: scenarios.ByYear})
	for _, row := range r.Balance {
		if len(row.Years) != 2 || row.Years[0] >= row.Years[1] {
			t.Fatalf("%s: years are %v; want two, the second brighter", row.Species, row.Years)
		}
		if mean := (row.Years[0] + row.Years[1]) / 2; math.Abs(mean-row.Lines.Net()) > 1e-9*math.Abs(mean) {
			t.Errorf("%s: net %g is not the mean of %v", row.Species, row.Lines.Net(), row.Years)
		}
	}
	months := run(t, p, scenarios.Options{Depth: scenarios.Ledgers, By: scenarios.ByMonth})
	if n := len(months.Balance); n != 24*len(r.Balance) || months.Balance[23].Period != "2024-12" {
		t.Errorf("%d monthly rows, the 24th %s; want 24 for each, 2024-12", n, months.Balance[23].Period)
	}
}

func TestLeafOnPeriod(t *testing.T) {
	p := invented(t)
	p.Treatments = p.Treatments[:1]
	r := run(t, p, scenarios.Options{By: scenarios.ByLeafOn})
	season := run(t, p, scenarios.Options{By: scenarios.BySeason})
	if !(r.Light[0].Light < season.Light[0].Light) {
		t.Errorf("leaf-on %.2f %% is not darker than the season's %.2f %%, which holds leafless days", r.Light[0].Light, season.Light[0].Light)
	}
	p.Treatments[0].Matrix = []scenarios.Layer{slab(5, leaf.Evergreen{})}
	r, season = run(t, p, scenarios.Options{By: scenarios.ByLeafOn}), run(t, p, scenarios.Options{By: scenarios.BySeason})
	if r.Light[0].Light != season.Light[0].Light {
		t.Errorf("evergreen: leaf-on %.4f %% differs from the season's %.4f %%", r.Light[0].Light, season.Light[0].Light)
	}
}

func TestSeasonAcrossNewYear(t *testing.T) {
	p := scenarios.Period{From: scenarios.Date{Month: 10, Day: 1}, To: scenarios.Date{Month: 3, Day: 31}}
	for _, c := range []struct {
		date scenarios.Date
		in   bool
	}{
		{scenarios.Date{Month: 10, Day: 1}, true}, {scenarios.Date{Month: 12, Day: 31}, true}, {scenarios.Date{Month: 1, Day: 1}, true},
		{scenarios.Date{Month: 3, Day: 31}, true}, {scenarios.Date{Month: 4, Day: 1}, false}, {scenarios.Date{Month: 9, Day: 30}, false},
	} {
		if p.Holds(c.date) != c.in {
			t.Errorf("%v in October to March: %v; want %v", c.date, !c.in, c.in)
		}
	}
}

// Snow above a seedling takes its income in those days and no more.
func TestSnowCoversLowPlants(t *testing.T) {
	p := invented(t)
	p.Treatments = p.Treatments[:1]
	bare := run(t, p, scenarios.Options{Depth: scenarios.Ledgers, By: scenarios.ByMonth})
	p.Snow = scenarios.Snow{Period: scenarios.Period{From: scenarios.Date{Month: 12, Day: 1}, To: scenarios.Date{Month: 3, Day: 31}}, Depth: 0.3}
	snowy := run(t, p, scenarios.Options{Depth: scenarios.Ledgers, By: scenarios.ByMonth})
	for i, b := range bare.Balance {
		s := snowy.Balance[i]
		covered := b.Species == p.Seedlings[1].Name && (b.Period <= "03" || b.Period == "12")
		if covered && s.Lines[ledger.Income] != 0 || !covered && s.Lines != b.Lines {
			t.Errorf("%s in month %s: income %g without snow, %g with 0.3 m", b.Species, b.Period, b.Lines[ledger.Income], s.Lines[ledger.Income])
		}
	}
}

// Where dormancy is off, evergreens above the snow on days of frost are named, by the day's lowest temperature; mild winters, snow over
// the plants and the dormancy that is the rule bring no note.
func TestFrostOnEvergreensIsTold(t *testing.T) {
	note := func(example string, set ...string) string {
		p, faults := plan.ReadExample(example, plan.Options{Set: set})
		if faults != nil {
			t.Fatal(faults)
		}
		p.Treatments = p.Treatments[:1]
		p.Sampling.Step = time.Hour
		r, err := scenarios.Run(p, scenarios.Options{Depth: scenarios.Ledgers})
		if err != nil {
			t.Fatal(err)
		}
		for _, w := range r.Warnings {
			if strings.Contains(w.Text, "dormancy") {
				return w.Text
			}
		}
		return ""
	}
	if got := note("kettle-bench"); got != "" {
		t.Errorf("with dormancy: %q", got)
	}
	const awake = "sampling.dormancy=none"
	if got := note("kettle-bench", awake); !strings.Contains(got, "White pine, Hemlock;") {
		t.Errorf("kettle-bench: %q", got)
	}
	if got := note("kestrel-fork", awake); got != "" {
		t.Errorf("kestrel-fork has no frost, yet: %q", got)
	}
	// means above 0 C, nights below
	if got := note("kestrel-fork", awake, "weather.normals.min=[-5, 1.1, 2.2, 3.7, 6.6, 9.3, 11.5, 11.6, 9.5, 6.4, 3.3, 1.2]"); !strings.Contains(got, "Thuja plicata") {
		t.Errorf("frosty nights: %q", got)
	}
	if got := note("kettle-bench", awake, "snow.from=10-01", "snow.to=05-31"); got != "" {
		t.Errorf("under snow all winter, yet: %q", got)
	}
}

// Dormancy lowers the income of evergreens in the cold half of the year only, and leaves deciduous plants alone.
func TestDormancyIsOfEvergreensInWinter(t *testing.T) {
	p := invented(t)
	by := scenarios.Options{Workers: 2, Depth: scenarios.Ledgers, By: scenarios.ByMonth}
	asleep := run(t, p, by).Balance
	p.Sampling.Dormancy = leaf.Dormancy{}
	for i, awake := range run(t, p, by).Balance {
		ratio := asleep[i].Lines[ledger.Income] / awake.Lines[ledger.Income]
		summer := awake.Period >= "06" && awake.Period <= "09"
		switch evergreen := awake.Species == p.Seedlings[1].Name; {
		case awake.Lines[ledger.Income] == 0:
		case !evergreen && ratio != 1, evergreen && summer && ratio < 0.99, evergreen && awake.Period <= "02" && ratio > 0.05, ratio > 1:
			t.Errorf("%s, %s, month %s: income %.3f of that without dormancy", awake.Species, awake.Treatment, awake.Period, ratio)
		}
	}
}
