package decide

import (
	"math"
	"reflect"
	"testing"

	"shadeledger/scenarios"
)

// In the year of the cut every figure is that of the plan's own plant at the station, and any number of workers gives the same bits.
func TestYearZeroIsThePlan(t *testing.T) {
	p := sized(t, "years.horizon=12")
	f, err := FindYears(p, 1)
	if err != nil {
		t.Fatal(err)
	}
	g, err := FindYears(p, 3)
	if err != nil {
		t.Fatal(err)
	}
	if !reflect.DeepEqual(f.Rows, g.Rows) || !reflect.DeepEqual(f.Spans, g.Spans) || !reflect.DeepEqual(f.Reentries, g.Reentries) {
		t.Error("three workers give other figures than one")
	}
	m, err := scenarios.NewMapper(p, 2)
	if err != nil {
		t.Fatal(err)
	}
	r, err := scenarios.Run(p, scenarios.Options{Workers: 2, Depth: scenarios.BreakEvens})
	if err != nil {
		t.Fatal(err)
	}
	n, other, at := p.Years.Horizon+1, 0, 0
	for i := range f.Plan.Treatments {
		tr := &f.Plan.Treatments[i]
		var spots [][2]float64
		for _, s := range f.Plan.StationsOf(tr) {
			spots = append(spots, [2]float64{s.X, s.Y})
		}
		maps, err := m.Map(tr, spots, scenarios.BreakEvens)
		if err != nil {
			t.Fatal(err)
		}
		for k := range spots {
			for s := range f.Plan.Seedlings {
				row, want := f.Rows[at*n], maps[s][k]
				if row.Light[Likely] != want.Light || row.Net[Late] != want.Net || row.Class[Early] != want.Class || row.Height[Likely] != f.Plan.Seedlings[s].Height {
					t.Errorf("%s, %s, %s: %+v for %+v", row.Treatment, row.Station, row.Species, row, want)
				}
				b := r.Balance[at]
				if b.Treatment != row.Treatment || b.Station != row.Station || b.Species != row.Species {
					t.Fatalf("%s, %s beside %s, %s", row.Treatment, row.Station, b.Treatment, b.Station)
				}
				if math.Abs(b.Light-row.Light[Likely]) > 1 {
					t.Errorf("%s, %s: %.2f %% of light, the balance has %.2f", row.Treatment, row.Station, row.Light[Likely], b.Light)
				}
				if b.Class != row.Class[Likely] {
					other++
				}
				at++
			}
		}
	}
	t.Logf("of %d spots %d stand in another class than in the balance, whose days are all days", at, other)
	if other > at/50 {
		t.Errorf("%d of %d spots stand in another class than in the balance", other, at)
	}
}

// What is read between sizes and states of closing, against plants of that very size in that very state: light to 2 points, the year's net to a tenth of the
// year's costs, the threshold to 1 point. Both are worst at 6 m, half way up the highest step.
func TestBetweenSizesAndStates(t *testing.T) {
	p := sized(t)
	m, err := scenarios.NewMapper(p, 2)
	if err != nil {
		t.Fatal(err)
	}
	p = m.Plan()
	var worst struct{ light, net, threshold float64 }
	for _, name := range []string{"No action", "Thin to 60", "Circle 1.0 H", "Oval E-W"} {
		tr := treatmentOf(t, p, name)
		c := courseOf(p, tr)
		tracks, place := c.tracks(p.Years.Horizon)
		ladders := make([]*scenarios.Ladder, len(p.Seedlings))
		for i := range ladders {
			ladders[i] = m.Ladder(i, rungs(p.Seedlings[i].Height, ceiling(&p.Stand), tr.Understory))
		}
		if err := (&Future{Plan: p}).light(m, tr, tracks, ladders); err != nil {
			t.Fatal(err)
		}
		stations := p.StationsOf(tr)
		for _, spot := range []struct {
			pace    Pace
			year    int
			height  float64
			station string
		}{{Likely, 3, 0.8, "centre"}, {Early, 7, 2.2, "N third"}, {Late, 19, 6, "S third"}, {Early, 2, 4.5, "N edge"}} {
			k := 0
			for i, s := range stations {
				if s.Name == spot.station {
					k = i
				}
			}
			then, err := later(p, tr, c.at(spot.pace, float64(spot.year)))
			if err != nil {
				t.Fatal(err)
			}
			grown := *p
			grown.Seedlings = append([]scenarios.Seedling(nil), p.Seedlings...)
			for i := range grown.Seedlings {
				s := &grown.Seedlings[i]
				s.Plant = s.Grown(s.WoodAt(spot.height))
			}
			direct, err := scenarios.NewMapper(&grown, 2)
			if err != nil {
				t.Fatal(err)
			}
			want, err := direct.Map(then, [][2]float64{{stations[k].X, stations[k].Y}}, scenarios.BreakEvens)
			if err != nil {
				t.Fatal(err)
			}
			for i := range p.Seedlings {
				s := &p.Seedlings[i]
				one := climber{plant: &s.Plant, ladder: ladders[i], tracks: tracks, place: place, sees: i, station: k}
				got, w := one.in(spot.pace, spot.year, s.WoodAt(spot.height)), of(&want[i][0])
				costs := want[i][0].Net / (want[i][0].Ratio - 1)
				light, net, threshold := math.Abs(got.light-w.light), math.Abs(got.net-w.net)/costs, math.Abs(got.threshold-w.threshold)
				if light > 2 || net > 0.1 || threshold > 1 {
					t.Errorf("%s, %s, %s at %g m in year %d: light %.2f for %.2f, net %.3g for %.3g, threshold %.2f for %.2f", name, stations[k].Name, s.Name, spot.height, spot.year,
						got.light, w.light, got.net, w.net, got.threshold, w.threshold)
				}
				worst.light, worst.net, worst.threshold = math.Max(worst.light, light), math.Max(worst.net, net), math.Max(worst.threshold, threshold)
			}
		}
	}
	t.Logf("worst: light %.2f points, net %.1f %% of costs, threshold %.2f points", worst.light, 100*worst.net, worst.threshold)
}

func treatmentOf(t *testing.T, p *scenarios.Plan, name string) *scenarios.Treatment {
	t.Helper()
	for i := range p.Treatments {
		if p.Treatments[i].Name == name {
			return &p.Treatments[i]
		}
	}
	t.Fatalf("no treatment %q", name)
	return nil
}
