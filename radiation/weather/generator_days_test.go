package weather

import (
	"math"
	"testing"
	"time"
)

// spells are the lengths of runs of days in a state, within a record without gaps.
func spells(rows []DailyRecord, state float64) (lengths []float64) {
	run := 0.0
	for i := range rows {
		if isWet(&rows[i]) == state {
			run++
		} else if run > 0 {
			lengths, run = append(lengths, run), 0
		}
	}
	return lengths
}

func meanAndShare(x []float64, from float64) (mean, share float64) {
	for _, v := range x {
		mean += v / float64(len(x))
		if v >= from {
			share += 1 / float64(len(x))
		}
	}
	return mean, share
}

// Wet and dry weather lasts as long as measured.
func TestSpells(t *testing.T) {
	all := harvardDays(t)
	drawn := generated(fitted(t, all), drawnYears)
	for name, state := range map[string]float64{"wet": 1, "dry": 0} {
		mean, long := meanAndShare(spells(all, state), 5)
		gotMean, gotLong := meanAndShare(spells(drawn, state), 5)
		t.Logf("%s spells: %.2f days on average, measured %.2f; of 5 days or more: %.3f, measured %.3f", name, gotMean, mean, gotLong, long)
		if math.Abs(gotMean/mean-1) > 0.05 || math.Abs(gotLong-long) > 0.03 {
			t.Errorf("%s spells: %.2f days, measured %.2f; %.3f of them of 5 days or more, measured %.3f", name, gotMean, mean, gotLong, long)
		}
	}
}

// departures are values less the mean of their month, in units of the month's spread.
func departures(rows []DailyRecord, of func(*DailyRecord) float64) []float64 {
	mean := monthly(rows, of)
	variance := monthly(rows, func(r *DailyRecord) float64 { d := of(r) - mean[r.Date.Month()-1]; return d * d })
	out := make([]float64, len(rows))
	for i := range rows {
		m := rows[i].Date.Month() - 1
		out[i] = (of(&rows[i]) - mean[m]) / math.Sqrt(variance[m])
	}
	return out
}

// Values of one day hang together, and with the day before, as measured. The memory of humidity is reported only: it comes
// out short, since dry spells go on drying after their second day and the kinds of days look back one.
func TestCorrelationsOfDays(t *testing.T) {
	all := harvardDays(t)
	drawn := generated(fitted(t, all), drawnYears)
	figures := []struct {
		name string
		of   func(*DailyRecord) float64
	}{
		{"highest temperature", func(r *DailyRecord) float64 { return r.Tmax }},
		{"lowest temperature", func(r *DailyRecord) float64 { return r.Tmin }},
		{"radiation", globalOf},
		{"humidity", func(r *DailyRecord) float64 { return r.Humidity }},
	}
	at := func(rows []DailyRecord, a, b, lag int) float64 {
		x, y := departures(rows, figures[a].of), departures(rows, figures[b].of)
		return correlation(len(rows)-lag, func(i int) float64 { return x[i+lag] }, func(i int) float64 { return y[i] })
	}
	for a := range figures {
		for b := range figures {
			for lag := range 2 {
				if lag == 0 && b >= a {
					continue
				}
				want, got := at(all, a, b, lag), at(drawn, a, b, lag)
				t.Logf("%s with %s, %d days before: correlation %.3f, measured %.3f", figures[a].name, figures[b].name, lag, got, want)
				if math.Abs(got-want) > 0.07 && figures[a].name != "humidity" {
					t.Errorf("%s with %s, %d days before: correlation %.3f, measured %.3f", figures[a].name, figures[b].name, lag, got, want)
				}
			}
		}
	}
}

// Temperatures keep their mean and spread by month, and wet days their darkness.
func TestTemperaturesAndWetDays(t *testing.T) {
	all := harvardDays(t)
	drawn := generated(fitted(t, all), drawnYears)
	for name, of := range map[string]func(*DailyRecord) float64{
		"highest": func(r *DailyRecord) float64 { return r.Tmax }, "lowest": func(r *DailyRecord) float64 { return r.Tmin },
	} {
		want, got := monthly(all, of), monthly(drawn, of)
		sd := func(rows []DailyRecord, mean [12]float64) [12]float64 {
			return monthly(rows, func(r *DailyRecord) float64 { d := of(r) - mean[r.Date.Month()-1]; return d * d })
		}
		wantVar, gotVar := sd(all, want), sd(drawn, got)
		worst, worstSD := 0.0, 0.0
		for m := range want {
			off, ratio := got[m]-want[m], math.Sqrt(gotVar[m]/wantVar[m])
			worst, worstSD = math.Max(worst, math.Abs(off)), math.Max(worstSD, math.Abs(ratio-1))
			if math.Abs(off) > 0.5 || math.Abs(ratio-1) > 0.10 {
				t.Errorf("%s temperature, month %d: %.2f +- %.2f, measured %.2f +- %.2f", name, m+1, got[m], math.Sqrt(gotVar[m]), want[m], math.Sqrt(wantVar[m]))
			}
		}
		t.Logf("%s temperature: mean off by %.2f K at most, spread by %.1f %%", name, worst, 100*worstSD)
	}
	darkness := func(rows []DailyRecord) float64 {
		wetOnly := func(state float64) float64 {
			return average(rows, func(r *DailyRecord) float64 {
				if isWet(r) != state {
					return math.NaN()
				}
				return r.Global
			})
		}
		return wetOnly(1) / wetOnly(0)
	}
	want, got := darkness(all), darkness(drawn)
	t.Logf("radiation of wet over dry days: %.3f, measured %.3f", got, want)
	if math.Abs(got-want) > 0.05 {
		t.Errorf("radiation of wet over dry days: %.3f, measured %.3f", got, want)
	}
}

// South of the equator the same record, half a year on, gives the same weather half a year on.
func TestSouthernHemisphere(t *testing.T) {
	var south []DailyRecord
	for _, r := range harvardDays(t) {
		r.Date = r.Date.AddDate(0, 0, 182)
		south = append(south, r)
	}
	at := harvard
	at.Latitude = -harvard.Latitude
	g, err := FitGenerator(south, at)
	if err != nil {
		t.Fatal(err)
	}
	year := g.Dated(2024, 1, 1)
	if len(year) != 366 || year[59].Date.Day() != 29 || year[59].Date.Month() != time.February {
		t.Error("29 February is missing")
	}
	drawn := generated(g, drawnYears)
	want, got := monthly(south, globalOf), monthly(drawn, globalOf)
	for m := range want {
		if math.Abs(got[m]/want[m]-1) > radiationWithin {
			t.Errorf("month %d: radiation %.2f MJ m-2 d-1, given %.2f", m+1, got[m], want[m])
		}
	}
	if s := (&Generated{Generator: g, Years: 1}).Series(at, time.Hour, par); s.Temperature[12] < s.Temperature[12+24*182] {
		t.Errorf("January noon %.1f deg C, July %.1f", s.Temperature[12], s.Temperature[12+24*182])
	}
}

// Within the polar circle days without sun stay dark and fit.
func TestPolarNight(t *testing.T) {
	at := site(70)
	g := newGenerator(at)
	rows := harvardDays(t)
	for i := range rows {
		rows[i].Global = 0.5 * g.days[dayIndex(rows[i].Date.Month(), rows[i].Date.Day())].top
	}
	g, err := FitGenerator(rows, at)
	if err != nil {
		t.Fatal(err)
	}
	for i, r := range g.Dated(2024, 1, 1) {
		if want := 0.5 * g.days[i].top; math.Abs(r.Global-want) > 1e-9 {
			t.Fatalf("day %d: %.3f MJ m-2 d-1, want %.3f", i+1, r.Global, want)
		}
	}
}

// A record without any rain fits, and rains next to never.
func TestDesert(t *testing.T) {
	rows := harvardDays(t)
	for i := range rows {
		rows[i].Rain = 0
	}
	drawn := generated(fitted(t, rows), 100)
	if share := average(drawn, isWet); share > 0.005 || average(drawn, rainOf) > 0.002 {
		t.Errorf("%.4f of the days are wet", share)
	}
	if got, want := average(drawn, globalOf), average(rows, globalOf); math.Abs(got/want-1) > radiationWithin {
		t.Errorf("radiation %.2f MJ m-2 d-1, measured %.2f", got, want)
	}
}

func BenchmarkGeneratedYear(b *testing.B) {
	g := fitted(b, harvardDays(b))
	b.ReportAllocs()
	for i := 0; b.Loop(); i++ {
		g.Year(1, uint64(i))
	}
}

func BenchmarkAnomaly(b *testing.B) {
	g := fitted(b, harvardDays(b))
	for i := 0; b.Loop(); i++ {
		g.Anomaly(1, uint64(i))
	}
}

func BenchmarkFit(b *testing.B) {
	rows := harvardDays(b)
	for b.Loop() {
		fitted(b, rows)
	}
}
