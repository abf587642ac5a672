package decide

import (
	"math"
	"testing"
	"time"

	"shadeledger/scenarios"
	"shadeledger/scenarios/ledger"
)

// Classes and lost years go together, seedlings never shrink, a faster pace is never better, and stock of the plan's size sees light that only falls.
func TestYearsHangTogether(t *testing.T) {
	p := sized(t)
	f, err := FindYears(p, 2)
	if err != nil {
		t.Fatal(err)
	}
	n := p.Years.Horizon + 1
	if len(f.Rows) != n*len(f.Spans) {
		t.Fatalf("%d rows, %d spots", len(f.Rows), len(f.Spans))
	}
	for i, l := range f.Spans {
		for y, r := range f.Rows[i*n : (i+1)*n] {
			if r.Treatment != l.Treatment || r.Station != l.Station || r.Species != l.Species || r.Year != y {
				t.Fatalf("row %+v beside %+v", r, l)
			}
			for pace := Late; pace <= Early; pace++ {
				if y > 0 && r.StockLight[pace] > f.Rows[i*n+y-1].StockLight[pace]+0.05 {
					t.Errorf("%s, %s, year %d, pace %d: %.2f %% after %.2f", r.Treatment, r.Station, y, pace, r.StockLight[pace], f.Rows[i*n+y-1].StockLight[pace])
				}
				if wrong := r.Class[pace] == ledger.Comfortable && float64(y) >= l.Lost[pace] || float64(y) == l.Lost[pace]-1 && r.Class[pace] != ledger.Comfortable; wrong && pace == Likely {
					t.Errorf("%s, %s, %s, year %d, pace %d: %s, lost in %g", r.Treatment, r.Station, r.Species, y, pace, r.Class[pace], l.Lost[pace])
				}
				if y > 0 && r.Height[pace] < f.Rows[i*n+y-1].Height[pace] {
					t.Errorf("%s, %s, %s, year %d, pace %d shrinks to %g m", r.Treatment, r.Station, r.Species, y, pace, r.Height[pace])
				}
				if y > 0 && r.Height[pace] > f.Rows[i*n+y-1].Height[pace] && f.Rows[i*n+y-1].Net[pace] <= 0 {
					t.Errorf("%s, %s, %s, year %d, pace %d grows after a net of %g g C", r.Treatment, r.Station, r.Species, y, pace, f.Rows[i*n+y-1].Net[pace])
				}
			}
			if r.StockLight[Early] > r.StockLight[Likely]+1e-9 || r.StockLight[Likely] > r.StockLight[Late]+1e-9 {
				t.Errorf("%s, %s, year %d: %v %% by pace", r.Treatment, r.Station, y, r.StockLight)
			}
			if r.Height[Early] > r.Height[Likely]+1e-6 || r.Height[Likely] > r.Height[Late]+1e-6 {
				t.Errorf("%s, %s, %s, year %d: %v m by pace", r.Treatment, r.Station, r.Species, y, r.Height)
			}
		}
		for pace := Late; pace <= Early; pace++ {
			last := 0.0 // years are put in order, so that the early one may be that of the likely pace
			for y, r := range f.Rows[i*n : (i+1)*n] {
				if r.Class[pace] == ledger.Comfortable {
					last = float64(y + 1)
				}
			}
			if math.Min(last, float64(n)) < math.Min(l.Lost[Early], float64(n)) || last > l.Lost[Late] && last <= float64(n-1) {
				t.Errorf("%+v: comfortable until %g at pace %d", l, last, pace)
			}
		}
		for _, years := range [][3]float64{l.Lost, l.Stock} {
			if years[Early] > years[Likely] || years[Likely] > years[Late] {
				t.Errorf("%+v: lost later at a faster pace", l)
			}
		}
	}
}

// A thinned stand is back near uncut light after 13 to 20 years (Beaudet et al. 2004; Domke 2006), a light thinning after 8 (Chan et al. 2006): of the light gained by the
// cut at most a fourth is left. Wood does not come back, so that all of it never goes.
func TestThinnedStandsCloseAgain(t *testing.T) {
	p := sized(t)
	p.Treatments = p.Treatments[:4]
	for i := range p.Treatments {
		p.Treatments[i].Understory = nil
	}
	f, err := FindYears(p, 2)
	if err != nil {
		t.Fatal(err)
	}
	light := func(treatment, year int, pace Pace) float64 {
		for _, r := range f.Rows {
			if r.Treatment == p.Treatments[treatment].Name && r.Year == year {
				return r.StockLight[pace]
			}
		}
		t.Fatal("no such row")
		return 0
	}
	uncut := light(0, 0, Likely)
	for i, year := range map[int]int{1: 13, 2: 20, 3: 20} {
		gained, left := light(i, 0, Likely)-uncut, light(i, year, Likely)-uncut
		t.Logf("%s: %.1f points over the uncut stand's %.1f, %.1f in year %d", p.Treatments[i].Name, gained, uncut, left, year)
		if left > gained/4 || left < -0.5 {
			t.Errorf("%s: %.1f of %.1f points are left in year %d", p.Treatments[i].Name, left, gained, year)
		}
	}
}

// A light thinning is back near uncut light after 8 years (Chan et al. 2006, CJFR 36:2696, Douglas-fir), heavy ones in the same stand are not: of the light
// gained by taking a twelfth of the basal area at most three tenths are left in year 8, of that by taking half of it more than that.
func TestLightThinningsCloseInEightYears(t *testing.T) {
	p := example(t, "kestrel-fork")
	p.Sampling.Step = time.Hour
	q := QueryOf(p)
	uncut := p.Stand.Trees.Sums().BasalArea
	s, err := newStands(p, q)
	if err != nil {
		t.Fatal(err)
	}
	thinned, _, err := s.plan([]float64{uncut, uncut * 11 / 12, uncut / 2})
	if err != nil {
		t.Fatal(err)
	}
	f, err := FindYears(thinned, 2)
	if err != nil {
		t.Fatal(err)
	}
	per := len(thinned.Seedlings) * (thinned.Years.Horizon + 1)
	for i, cut := range []float64{1.0 / 12, 0.5} {
		none, now, then, end := f.Rows[0].StockLight[Likely], f.Rows[(i+1)*per].StockLight[Likely], f.Rows[(i+1)*per+8].StockLight[Likely], f.Rows[(i+1)*per+20].StockLight[Likely]
		left := (then - none) / (now - none)
		t.Logf("%.0f %% cut: light %.2f %% uncut, %.2f after the cut, %.2f in year 8, %.2f in year 20: %.0f %% of the gain left in year 8", 100*cut, none, now, then, end, 100*left)
		if (left > 0.3) != (i == 1) {
			t.Errorf("%.0f %% cut: %.0f %% of the gain is left in year 8", 100*cut, 100*left)
		}
	}
}

// The thin command's years are those of the same thinning in the plan.
func TestThinYearsAreThePlans(t *testing.T) {
	p := sized(t)
	p.Treatments = p.Treatments[2:3]
	f, err := FindYears(p, 2)
	if err != nil {
		t.Fatal(err)
	}
	q := QueryOf(p)
	q.Workers = 2
	table, err := Thin(p, q, []float64{p.Stand.Trees.Sums().BasalArea, p.Treatments[0].Trees.Sums().BasalArea})
	if err != nil {
		t.Fatal(err)
	}
	for i, s := range f.Spans {
		row := table.Rows[len(p.Seedlings)+i]
		want := s.Lost
		if row.Class != ledger.Comfortable {
			want = [3]float64{}
		}
		t.Logf("%s: %v", row.Species, row.Above)
		if row.Species != s.Species || row.Above != want {
			t.Errorf("%s stays comfortable for %v years, the plan says %v", row.Species, row.Above, s.Lost)
		}
	}
}

// Nothing moves where nothing was cut, and an opening that closes over is the stand again.
func TestYearsOfTheUncutAndTheClosed(t *testing.T) {
	p := sized(t)
	p.Years.Closing, p.Years.Horizon = [3]float64{2, 2, 2}, 20
	var small int
	for i := range p.Treatments {
		if p.Treatments[i].Name == "Circle 1.0 H" {
			small = i
		}
	}
	p.Treatments = []scenarios.Treatment{p.Treatments[0], p.Treatments[small]}
	p.Treatments[1].Understory = p.Treatments[0].Understory
	f, err := FindYears(p, 2)
	if err != nil {
		t.Fatal(err)
	}
	uncut := f.Rows[0].StockLight[Likely]
	for _, r := range f.Rows {
		switch {
		case r.Treatment == p.Treatments[0].Name && r.StockLight[Likely] != uncut:
			t.Errorf("the uncut stand has %.3f %% in year %d, %.3f in the first", r.StockLight[Likely], r.Year, uncut)
		case r.Treatment == p.Treatments[1].Name && r.Year == 20 && r.Station == "centre" && math.Abs(r.StockLight[Likely]-uncut) > 0.2:
			t.Errorf("closed over: %.2f %% at the centre, %.2f under the stand", r.StockLight[Likely], uncut)
		}
	}
}

// An opening in a thinned stand closes from both sides: light falls every year at every pace, and once the leaves are back it is that of the opening in the uncut stand,
// but for the wood that was taken.
func TestOpeningsInThinnedStands(t *testing.T) {
	p := sized(t)
	thin, open := *treatmentOf(t, p, "Thin to 60"), *treatmentOf(t, p, "Circle 1.0 H")
	both := open
	both.Name, both.Matrix = "both", thin.Matrix
	p.Treatments = []scenarios.Treatment{open, both}
	f, err := FindYears(p, 2)
	if err != nil {
		t.Fatal(err)
	}
	n := p.Years.Horizon + 1
	half := len(f.Spans) / 2
	for i := range half {
		alone, with := f.Rows[i*n:(i+1)*n], f.Rows[(half+i)*n:(half+i+1)*n]
		if with[0].StockLight[Likely] < alone[0].StockLight[Likely]+1 {
			t.Errorf("%s: %.1f %% in the thinned stand, %.1f in the uncut one", with[0].Station, with[0].StockLight[Likely], alone[0].StockLight[Likely])
		}
		if off := with[n-1].StockLight[Likely] - alone[n-1].StockLight[Likely]; off < -0.5 || off > 5 {
			t.Errorf("%s: in year 30 %.1f points over the opening in the uncut stand", with[0].Station, off)
		}
		for y := 1; y < n; y++ {
			for pace := Late; pace <= Early; pace++ {
				if with[y].StockLight[pace] > with[y-1].StockLight[pace]+0.05 {
					t.Errorf("%s, year %d, pace %d: %.2f %% after %.2f", with[y].Station, y, pace, with[y].StockLight[pace], with[y-1].StockLight[pace])
				}
			}
		}
	}
}

// A first-season plant has its own leaves in the year of the cut and new ones, made in the light it stands in, from then on; new stock always has its own.
func TestFirstSeasonLastsOneYear(t *testing.T) {
	p, q := sized(t), sized(t)
	for i := range q.Seedlings {
		q.Seedlings[i].Ledger = ledger.FirstSeason
	}
	p.Treatments, q.Treatments = p.Treatments[:3], q.Treatments[:3]
	acclimated, err := FindYears(p, 2)
	if err != nil {
		t.Fatal(err)
	}
	first, err := FindYears(q, 2)
	if err != nil {
		t.Fatal(err)
	}
	m, err := scenarios.NewMapper(q, 2)
	if err != nil {
		t.Fatal(err)
	}
	n, other := p.Years.Horizon+1, 0
	for i := range first.Spans {
		maps, err := m.Map(&m.Plan().Treatments[i/len(q.Seedlings)], [][2]float64{{0, 0}}, scenarios.BreakEvens)
		if err != nil {
			t.Fatal(err)
		}
		row, want := first.Rows[i*n], maps[i%len(q.Seedlings)][0]
		if row.Net[Likely] != want.Net || row.Class[Likely] != want.Class || row.StockClass[Late] != want.Class {
			t.Errorf("%s, %s: net %g, %s, for %g, %s", row.Treatment, row.Species, row.Net[Likely], row.Class[Likely], want.Net, want.Class)
		}
		if row.Net[Likely] != acclimated.Rows[i*n].Net[Likely] {
			other++
		}
		if grew := first.Rows[i*n+1].Height[Likely] > row.Height[Likely]; grew != (row.Net[Likely] > 0) {
			t.Errorf("%s, %s: net %g, grew %v", row.Treatment, row.Species, row.Net[Likely], grew)
		}
	}
	if other == 0 {
		t.Error("first-season leaves earn what acclimated ones do everywhere")
	}
}
