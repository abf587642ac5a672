package weather

import (
	"fmt"
	"math"
	"reflect"
	"strings"
	"sync"
	"testing"
	"time"

	"shadeledger/radiation"
)

func TestSameSeedGivesTheSameBits(t *testing.T) {
	g := fitted(t, harvardDays(t))
	want := make([][]DailyRecord, 40)
	for i := range want {
		want[i] = g.Year(5, uint64(i))
	}
	again := fitted(t, harvardDays(t))
	got := make([][]DailyRecord, len(want))
	var wait sync.WaitGroup
	for w := range 4 { // any order, any number of workers
		wait.Go(func() {
			for i := len(got) - 1 - w; i >= 0; i -= 4 {
				got[i] = again.Year(5, uint64(i))
			}
		})
	}
	wait.Wait()
	for i := range want {
		if bits(got[i]) != bits(want[i]) {
			t.Fatalf("year %d differs between two runs", i)
		}
		for k := range i {
			if bits(want[i]) == bits(want[k]) {
				t.Fatalf("years %d and %d are the same", i, k)
			}
		}
	}
	if bits(g.Year(6, 0)) == bits(want[0]) {
		t.Error("two seeds give the same year")
	}
}

// bits writes rows out exactly.
func bits(rows []DailyRecord) string { return fmt.Sprintf("%x", rows) }

// Years of neighbouring indices have nothing to do with each other.
func TestYearsAreIndependent(t *testing.T) {
	g := fitted(t, harvardDays(t))
	const n = 2000
	var first, mean [n]float64
	for i := range n {
		year := g.Year(1, uint64(i))
		first[i] = year[0].Tmax
		mean[i] = average(year, globalOf)
	}
	for name, x := range map[string][n]float64{"first day's highest temperature": first, "year's radiation": mean} {
		r := correlation(n-1, func(i int) float64 { return x[i] }, func(i int) float64 { return x[i+1] })
		if math.Abs(r) > 3.5/math.Sqrt(n) {
			t.Errorf("%s: correlation %.3f between neighbouring years; 0 expected within %.3f", name, r, 3.5/math.Sqrt(n))
		}
	}
}

func TestGeneratedDaysArePossible(t *testing.T) {
	rows := harvardDays(t)
	g := fitted(t, rows)
	least, most := math.Inf(1), 0.0
	for i := range rows {
		if kt := rows[i].Global / g.days[dayIndex(rows[i].Date.Month(), rows[i].Date.Day())].top; kt < least {
			least = kt
		} else if kt > most {
			most = kt
		}
	}
	for y := range 200 {
		year := g.Dated(2024, 3, uint64(y))
		if len(year) != 366 || len(g.Year(3, uint64(y))) != 365 {
			t.Fatal("a leap year has 366 days, a common one 365")
		}
		if p := (&Daily{Rows: year}).Check(harvard, 15*time.Minute); len(p) > 0 {
			t.Fatalf("year %d: %+v", y, p[0])
		}
		for i := range year {
			r := &year[i]
			kt := r.Global / g.days[i].top
			if r.Tmin > r.Tmax || kt < least-1e-9 || kt > most+1e-9 || r.Humidity < 0 || r.Humidity > 100 || r.Rain < 0 || (r.Rain > 0) != (r.Rain >= wetDay) {
				t.Fatalf("year %d: %+v, clearness %.3f outside %.3f..%.3f or impossible", y, *r, kt, least, most)
			}
		}
	}
	t.Logf("clearness of the record %.3f to %.3f", least, most)
}

// A year as a source gives the same series as its rows, and its light is the rows' radiation.
func TestGeneratedIsASource(t *testing.T) {
	g := fitted(t, harvardDays(t))
	source := &Generated{Generator: g, Seed: 9, First: 4, Years: 4}
	if p := source.Check(harvard, 15*time.Minute); len(p) > 0 {
		t.Fatal(p)
	}
	s := source.Series(harvard, 15*time.Minute, par)
	if len(s.Days) != 4*365+1 || s.Years != 4 {
		t.Errorf("%d days in %d years; four years from %d hold one leap day", len(s.Days), s.Years, sunYear)
	}
	want := 0.0
	for i := range 4 {
		for _, r := range g.Dated(sunYear+i, 9, 4+uint64(i)) {
			want += r.Global * par.Fraction * radiation.PhotonsPerJoule
		}
	}
	if got := total(s); math.Abs(got/want-1) > 0.002 {
		t.Errorf("light of the series %.1f mol m-2, of the rows %.1f", got, want)
	}
	if p := (&Generated{Generator: g}).Check(harvard, time.Hour); len(p) != 1 {
		t.Error("no years are not refused")
	}
	if p := (&Generated{Generator: g, Years: 1}).Check(site(-42), time.Hour); len(p) != 1 {
		t.Error("another latitude is not refused")
	}
}

// The anomalies are those of the year's own days, even out over many years, and change a series by as much.
func TestAnomalies(t *testing.T) {
	g := fitted(t, harvardDays(t))
	const n = 1000
	var radiation, celsius [12]float64
	for i := range n {
		for m, a := range g.Anomaly(2, uint64(i)) {
			radiation[m] += a.Radiation / n
			celsius[m] += a.Temperature / n
		}
	}
	for m := range radiation {
		if math.Abs(radiation[m]-1) > 0.012 || math.Abs(celsius[m]) > 0.25 {
			t.Errorf("month %d: mean factor %.4f, mean offset %+.3f K over %d years; 1 and 0 expected", m+1, radiation[m], celsius[m], n)
		}
	}
	a := g.Anomaly(2, 7)
	long, year := g.LongMean(), g.Year(2, 7)
	global := monthly(year, globalOf)
	mean := monthly(year, meanOf)
	for m := range a {
		if math.Abs(a[m].Radiation*long[m].Global-global[m]) > 1e-9 || math.Abs(a[m].Temperature+long[m].Temperature-mean[m]) > 1e-9 {
			t.Errorf("month %d: anomaly %+v is not that of the year", m+1, a[m])
		}
	}
	s := (&Generated{Generator: g, Seed: 1, Years: 1}).Series(harvard, time.Hour, par)
	before, _ := s.DailyMeans()
	changed := s.Changed(a)
	after, _ := changed.DailyMeans()
	again, _ := s.DailyMeans()
	if !reflect.DeepEqual(before, again) {
		t.Error("the series itself was changed")
	}
	for d := range after {
		if want := before[d] + a[s.Days[d].Month-1].Temperature; math.Abs(after[d]-want) > 1e-9 {
			t.Fatalf("day %d: %.3f deg C, want %.3f", d, after[d], want)
		}
	}
	for i := range s.Lit.Step {
		if want := (s.Lit.Beam[i] + s.Lit.Diffuse[i]) * a[s.Days[int(s.Lit.Step[i])/s.PerDay].Month-1].Radiation; math.Abs(changed.Lit.Beam[i]+changed.Lit.Diffuse[i]-want) > 1e-9*(1+want) {
			t.Fatalf("lit step %d: light %.3f, want %.3f", i, changed.Lit.Beam[i]+changed.Lit.Diffuse[i], want)
		}
	}
}

func meanOf(r *DailyRecord) float64 { return (r.Tmin + r.Tmax) / 2 }

func TestFaultsOfRecordsForTheGenerator(t *testing.T) {
	all := harvardDays(t)
	short := all[:4*365]
	holed := append([]DailyRecord(nil), all[:5*365+2]...)
	for i := range holed {
		if holed[i].Date.Month() == time.July && holed[i].Date.Day() > 24 {
			holed[i].Global = math.NaN()
		}
	}
	swapped := append([]DailyRecord(nil), all...)
	swapped[700].Tmin, swapped[700].Tmax = 20, 10
	unit := append([]DailyRecord(nil), all...)
	unit[20].Global = 30 // January
	order := append([]DailyRecord(nil), all...)
	order[3].Date = order[2].Date
	for _, c := range []struct {
		name string
		rows []DailyRecord
		want []string
	}{
		{"four years", short, []string{"124 sound days of January", "at least 148, 95 % of 5 years"}},
		{"July gaps", holed, []string{"120 sound days of July", "at least 148"}},
		{"tmin above tmax", swapped, []string{"line 702", "tmin_c: 20", "no more than tmax_c, 10"}},
		{"too bright", unit, []string{"line 22", "ghi_mj_m2: 30", "no more than 1"}},
		{"a day twice", order, []string{"line 5", "a later date"}},
		{"no rows", nil, []string{"0 sound days of January"}},
	} {
		g, err := FitGenerator(c.rows, harvard)
		if err == nil || g != nil {
			t.Errorf("%s: accepted", c.name)
			continue
		}
		for _, want := range c.want {
			if !strings.Contains(err.Error(), want) {
				t.Errorf("%s: the fault does not say %q:\n%v", c.name, want, err)
			}
		}
	}
}

// Sunshine hours do for radiation; without rain or humidity there is one kind of day, or no humidity, and it is said.
func TestRecordsWithLess(t *testing.T) {
	rows := harvardDays(t)
	g := fitted(t, rows)
	long := g.LongMean()
	for i := range rows {
		r := &rows[i]
		day := dayIndex(r.Date.Month(), r.Date.Day())
		r.Sunshine = math.Max(0, math.Min(1, (r.Global/g.days[day].top-angstromA)/angstromB)) * g.lightHours(day)
		r.Global, r.Rain = math.NaN(), math.NaN()
		if i%10 == 0 {
			r.Humidity = math.NaN()
		}
	}
	g = fitted(t, rows)
	said := strings.Join(g.Assumed(), "; ")
	if !strings.Contains(said, "no row has rain") || !strings.Contains(said, "humidity is not drawn") {
		t.Errorf("not said: %s", said)
	}
	for _, r := range g.Year(1, 1) {
		if !math.IsNaN(r.Rain) || !math.IsNaN(r.Humidity) || math.IsNaN(r.Global+r.Tmin+r.Tmax) {
			t.Fatalf("%+v", r)
		}
	}
	// sunshine has no clearness below a quarter, so the dark days come out brighter
	for m, x := range g.LongMean() {
		if off := x.Global/long[m].Global - 1; off < -0.01 || off > 0.15 {
			t.Errorf("month %d: radiation from sunshine %.2f MJ m-2 d-1, measured %.2f", m+1, x.Global, long[m].Global)
		}
	}
}
