package weather

import (
	"math"
	"testing"
	"time"
)

// What a generated record must keep of a measured one.
const (
	rainWithin      = 0.15 // of the month's rain
	wetWithin       = 0.03 // share of wet days, each month
	radiationWithin = 0.03 // of the year's mean
	quantilesWithin = 0.08 // of the daily radiation's quantiles
	drawnYears      = 500
)

// monthFigure is a figure of every month and how two records are compared by it.
type monthFigure struct {
	name   string
	of     func(*DailyRecord) float64
	within float64
	ratio  bool
}

var monthFigures = []monthFigure{
	{"rain, mm d-1", rainOf, rainWithin, true},
	{"share of wet days", isWet, wetWithin, false},
	{"radiation, MJ m-2 d-1", globalOf, math.Inf(1), true}, // reported by month; its limit is the year's
}

func (f monthFigure) off(a, b [12]float64) (out [12]float64) {
	for m := range out {
		out[m] = a[m] - b[m]
		if f.ratio {
			out[m] = a[m]/b[m] - 1
		}
	}
	return out
}

// splits are the record fitted on one half of its years and compared with the other.
func splits(t *testing.T) []struct {
	name     string
	own, out []DailyRecord
} {
	odd, even := halves(t)
	return []struct {
		name     string
		own, out []DailyRecord
	}{{"fitted on 2003, 2005 .. 2013", odd, even}, {"fitted on 2002, 2004 .. 2014", even, odd}}
}

// The radiation of the half that was not fitted: the year's mean and the quantiles of daily values.
func TestRadiationOfYearsNotFitted(t *testing.T) {
	for _, c := range splits(t) {
		drawn := generated(fitted(t, c.own), drawnYears)
		got, want := average(drawn, globalOf), average(c.out, globalOf)
		t.Logf("%s: radiation %.3f MJ m-2 d-1, fitted years %.3f, other years %.3f (%+.1f %%)", c.name, got, average(c.own, globalOf), want, 100*(got/want-1))
		if math.Abs(got/want-1) > radiationWithin {
			t.Errorf("%s: radiation %.3f MJ m-2 d-1, measured %.3f", c.name, got, want)
		}
		for _, season := range [][2]time.Month{{time.May, time.September}, {time.January, time.December}} {
			got, own, want := radiationQuantiles(drawn, season[0], season[1]), radiationQuantiles(c.own, season[0], season[1]), radiationQuantiles(c.out, season[0], season[1])
			for i, p := range quantileShares {
				off := got[i]/want[i] - 1
				t.Logf("%s, %v to %v, %2.0f %%: %5.2f MJ m-2 d-1, fitted years %5.2f, other years %5.2f (%+.1f %%; halves %+.1f %%)", c.name, season[0], season[1], 100*p, got[i], own[i], want[i], 100*off, 100*(own[i]/want[i]-1))
				if math.Abs(off) > quantilesWithin {
					t.Errorf("%s, %v to %v: %.0f %% quantile %.2f MJ m-2 d-1, measured %.2f", c.name, season[0], season[1], 100*p, got[i], want[i])
				}
			}
		}
	}
}

// Every month of the years that were fitted keeps its rain, wet days and radiation, whichever years these are.
func TestMonthsOfFittedYears(t *testing.T) {
	all := harvardDays(t)
	odd, even := halves(t)
	for name, rows := range map[string][]DailyRecord{"all years": all, "odd years": odd, "even years": even} {
		drawn := generated(fitted(t, rows), drawnYears)
		for _, f := range monthFigures {
			within := f.within
			if math.IsInf(within, 1) {
				within = radiationWithin // harder than asked for
			}
			got, want := monthly(drawn, f.of), monthly(rows, f.of)
			worst := 0.0
			for m, off := range f.off(got, want) {
				worst = math.Max(worst, math.Abs(off))
				if math.Abs(off) > within {
					t.Errorf("%s, month %d: %s %.3f, measured %.3f", name, m+1, f.name, got[m], want[m])
				}
			}
			t.Logf("%s: %s off by %.3f at most, limit %.2f", name, f.name, worst, within)
		}
	}
}

// Months of the years that were not fitted. Halves of six and seven years differ by chance by more than the limits in
// about half the months, so no generator could keep to them; it must wherever the two measured halves agree to two
// thirds of the limit, and may miss no more months than a generated record of that length does between its own halves.
func TestMonthsOfYearsNotFitted(t *testing.T) {
	for _, c := range splits(t) {
		g := fitted(t, c.own)
		drawn := generated(g, drawnYears)
		for _, f := range monthFigures {
			got, own, want := monthly(drawn, f.of), monthly(c.own, f.of), monthly(c.out, f.of)
			off, apart := f.off(got, want), f.off(own, want)
			missed, differ := 0, 0
			for m := range off {
				verdict := ""
				if math.Abs(apart[m]) > f.within {
					differ++
				}
				if math.Abs(off[m]) > f.within {
					missed++
					verdict = "missed"
					if math.Abs(apart[m]) < f.within*2/3 {
						t.Errorf("%s, month %d: %s %.3f, measured %.3f, though the halves agree", c.name, m+1, f.name, got[m], want[m])
					}
				}
				t.Logf("%s, month %2d: %s %6.3f, fitted years %6.3f, other years %6.3f: off by %+.3f, halves by %+.3f %s", c.name, m+1, f.name, got[m], own[m], want[m], off[m], apart[m], verdict)
			}
			if math.IsInf(f.within, 1) {
				continue
			}
			mean, most := missesByChance(f, drawn, years(c.own), years(c.out))
			t.Logf("%s: %s misses %d months of 12; the measured halves differ in %d, generated halves in %.1f on average, 99 %% of them in %d or fewer", c.name, f.name, missed, differ, mean, most)
			if missed > most {
				t.Errorf("%s: %s misses %d months, by chance %d at most", c.name, f.name, missed, most)
			}
		}
	}
}

func years(rows []DailyRecord) int {
	n, last := 0, 0
	for i := range rows {
		if y := rows[i].Date.Year(); y != last {
			n, last = n+1, y
		}
	}
	return n
}

// missesByChance cuts generated years into pairs of halves and counts the months in which these differ by more than the
// limit: mean, and what 99 % stay at or below.
func missesByChance(f monthFigure, drawn []DailyRecord, n1, n2 int) (mean float64, most int) {
	from := func(year int) int {
		for i := range drawn {
			if drawn[i].Date.Year() >= year {
				return i
			}
		}
		return len(drawn)
	}
	var count [13]float64
	pairs := 0.0
	for y := drawn[0].Date.Year(); y+n1+n2 <= drawn[len(drawn)-1].Date.Year()+1; y += n1 + n2 {
		a, b, c := from(y), from(y+n1), from(y+n1+n2)
		missed := 0
		for _, off := range f.off(monthly(drawn[a:b], f.of), monthly(drawn[b:c], f.of)) {
			if math.Abs(off) > f.within {
				missed++
			}
		}
		count[missed]++
		pairs++
	}
	below := 0.0
	for k, n := range count {
		mean += float64(k) * n / pairs
		if below/pairs < 0.99 {
			most = k
		}
		below += n
	}
	return mean, most
}

// Years of a generated record differ from each other as measured ones do. Thirteen years know their standard deviation
// to a factor of 0.7 to 1.65 (95 %, chi-squared with 12 degrees of freedom).
func TestYearsDifferAsMeasured(t *testing.T) {
	all := harvardDays(t)
	g := fitted(t, all)
	drawn := generated(g, 1000)
	for _, c := range []struct {
		name     string
		of       func(*DailyRecord) float64
		from, to time.Month
	}{
		{"radiation May to September, MJ m-2 d-1", globalOf, time.May, time.September},
		{"radiation of the year, MJ m-2 d-1", globalOf, time.January, time.December},
		{"rain of the year, mm d-1", rainOf, time.January, time.December},
		{"temperature May to September, deg C", meanOf, time.May, time.September},
		{"temperature of the year, deg C", meanOf, time.January, time.December},
	} {
		measured, got := yearSD(all, c.from, c.to, c.of), yearSD(drawn, c.from, c.to, c.of)
		t.Logf("%s: standard deviation between years %.3f, measured %.3f, factor %.2f", c.name, got, measured, got/measured)
		if r := got / measured; r < 1/1.65 || r > 1/0.7 {
			t.Errorf("%s: years differ by %.3f, measured %.3f", c.name, got, measured)
		}
	}
}
