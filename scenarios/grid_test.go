package scenarios_test

import (
	"math"
	"reflect"
	"testing"
	"time"

	"shadeledger/canopy"
	"shadeledger/leaf"
	"shadeledger/radiation/weather"
	"shadeledger/scenarios"
	"shadeledger/scenarios/ledger"
	"shadeledger/scenarios/light"
)

func TestGridIsTheSameForAnyWorkers(t *testing.T) {
	p := invented(t)
	q := scenarios.Grid{Treatment: 2, Columns: 9, Rows: 7, Step: 5, Workers: 1}
	one, err := scenarios.RunGrid(p, q)
	if err != nil {
		t.Fatal(err)
	}
	for _, q.Workers = range []int{2, 7} {
		many, err := scenarios.RunGrid(p, q)
		if err != nil {
			t.Fatal(err)
		}
		if !reflect.DeepEqual(one, many) {
			t.Errorf("%d workers give another map than one", q.Workers)
		}
	}
}

// A map has coarser days and sky than a station: the same spot agrees within 0.5 points of full light and
// 4 % of the year's net (measured 0.3 points and 2.3 %).
func TestGridAgreesWithStations(t *testing.T) {
	p := invented(t)
	r := run(t, p, scenarios.Options{Depth: scenarios.Ledgers, By: scenarios.ByYear})
	var centre scenarios.BalanceRow
	for _, row := range r.Balance {
		if row.Treatment == "Circle" && row.Station == "centre" && row.Species == p.Seedlings[0].Name {
			centre = row
		}
	}
	grid, err := scenarios.RunGrid(p, scenarios.Grid{Treatment: 2, Columns: 3, Rows: 3, Step: 4, Workers: 1})
	if err != nil {
		t.Fatal(err)
	}
	spot := grid[0][4]
	if spot.X != 0 || spot.Y != 0 {
		t.Fatalf("the middle spot is at %g, %g; want the centre", spot.X, spot.Y)
	}
	t.Logf("centre: %.2f %% by station, %.2f %% on the map; net %.3f and %.3f g C", centre.Light, spot.Light, centre.Lines.Net(), spot.Net)
	if math.Abs(spot.Light-centre.Light) > 0.5 || math.Abs(spot.Net/centre.Lines.Net()-1) > 0.04 {
		t.Errorf("map says %.2f %% and %.3f g C, station %.2f %% and %.3f", spot.Light, spot.Net, centre.Light, centre.Lines.Net())
	}
}

func TestGridRefusesNonsense(t *testing.T) {
	p := invented(t)
	for _, q := range []scenarios.Grid{{Treatment: 3, Columns: 1, Rows: 1, Step: 1}, {Columns: 0, Rows: 1, Step: 1}, {Columns: 1, Rows: 1, Step: math.NaN()}} {
		if _, err := scenarios.RunGrid(p, q); err == nil {
			t.Errorf("%+v was run", q)
		}
	}
}

// The survey with its ledgers needs as many allocations for a year as for thirty days: no inner loop allocates.
func TestAllocationsDoNotGrowWithDays(t *testing.T) {
	p := invented(t)
	year := p.Weather.Series(p.Site, time.Hour, p.Par)
	profile, err := canopy.NewProfile([]canopy.Layer{p.Stand.Layers[0].Layer})
	if err != nil {
		t.Fatal(err)
	}
	stand, err := canopy.NewStand(profile, nil, p.Ground, p.Horizon)
	if err != nil {
		t.Fatal(err)
	}
	points := []canopy.Point{{X: 1, Height: 0.4}, {X: 2, Height: 0.4}, {X: 3, Height: 0.4}}
	count := func(s *weather.Series) float64 {
		above := light.NewAbove(s, p.Sampling.Sky, light.Station)
		scene := light.NewScene(above, stand, func(int) []float64 { return []float64{1} })
		plant := ledger.Prepare(&p.Seedlings[0].Plant, above)
		all := scenarios.Mask(s, scenarios.Period{From: scenarios.Date{Month: 1, Day: 1}, To: scenarios.Date{Month: 12, Day: 31}})
		return testing.AllocsPerRun(3, func() {
			keeper := ledger.NewKeeper(all, all)
			var account ledger.Account
			scene.Survey(points, 1, func(_, _ int, g *light.Regime) {
				keeper.Take(g)
				keeper.Keep(plant, &account)
			})
		})
	}
	long, short := count(year), count(days(year, 181, 211))
	t.Logf("%.0f allocations for 365 days, %.0f for 30", long, short)
	if long != short {
		t.Errorf("%.0f allocations for 365 days, %.0f for 30; want the same", long, short)
	}
}

// A whole run needs as many allocations for a year as for thirty days. Evergreens are left out: a year warns of their
// winter, and a warning has its text.
func TestAllocationsOfAWholeRun(t *testing.T) {
	p := invented(t)
	p.Sampling.Step = time.Hour
	p.Season = scenarios.Period{From: scenarios.Date{Month: 7, Day: 1}, To: scenarios.Date{Month: 7, Day: 30}}
	p.Treatments = p.Treatments[2:]
	var deciduous []scenarios.Seedling
	for _, s := range p.Seedlings {
		if _, ok := s.Leaves.(leaf.Deciduous); ok {
			deciduous = append(deciduous, s)
		}
	}
	p.Seedlings = deciduous
	year := p.Weather.Series(p.Site, p.Sampling.Step, p.Par)
	count := func(s *weather.Series) float64 {
		return testing.AllocsPerRun(2, func() {
			if _, err := scenarios.RunSeries(p, s, scenarios.Options{Depth: scenarios.Ledgers, By: scenarios.ByYear}); err != nil {
				t.Fatal(err)
			}
		})
	}
	long, short := count(year), count(days(year, 181, 211))
	t.Logf("%.0f allocations for 365 days, %.0f for 30", long, short)
	const pool = 10 // the eigenvalue routine and the scheduler keep pools, which a collection of the larger run may empty; 335 days lie between
	if math.Abs(long-short) > pool || len(deciduous) == 0 {
		t.Errorf("%.0f allocations for 365 days, %.0f for 30, of %d plants; want the same", long, short, len(deciduous))
	}
}

// days cuts a series to the days from..to-1.
func days(s *weather.Series, from, to int) *weather.Series {
	out := *s
	out.Days = append([]weather.Day(nil), s.Days[from:to]...)
	a, b := s.Days[from].LitFrom, s.Days[to-1].LitTo
	for d := range out.Days {
		out.Days[d].LitFrom -= a
		out.Days[d].LitTo -= a
	}
	out.Temperature = s.Temperature[from*s.PerDay : to*s.PerDay]
	l := &out.Lit
	l.Step = append([]int32(nil), s.Lit.Step[a:b]...)
	for i := range l.Step {
		l.Step[i] -= int32(from * s.PerDay)
	}
	for _, v := range []*[]float64{&l.Elevation, &l.Azimuth, &l.Beam, &l.Diffuse, &l.Clearness, &l.Brightness} {
		*v = (*v)[a:b]
	}
	return &out
}
