package weather

import (
	"encoding/csv"
	"math"
	"os"
	"slices"
	"strconv"
	"testing"
	"time"

	"shadeledger/radiation"
)

var harvard = radiation.Site{Latitude: 42.53 * deg, Longitude: -72.19 * deg, UTCOffset: -5}

// harvardDays reads the record, 2002 to 2014.
func harvardDays(t testing.TB) []DailyRecord {
	t.Helper()
	f, err := os.Open("../../testdata/weather-harvard-daily/daily.csv")
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	table, err := csv.NewReader(f).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	number := func(text string) float64 {
		if text == "" {
			return math.NaN()
		}
		v, err := strconv.ParseFloat(text, 64)
		if err != nil {
			t.Fatal(err)
		}
		return v
	}
	rows := make([]DailyRecord, 0, len(table))
	for i, x := range table[1:] {
		date, err := time.Parse(time.DateOnly, x[0])
		if err != nil {
			t.Fatal(err)
		}
		rows = append(rows, DailyRecord{
			Line: i + 2, Date: date, Global: number(x[1]), Sunshine: math.NaN(),
			Tmin: number(x[2]), Tmax: number(x[3]), Humidity: number(x[4]), Rain: number(x[5]),
		})
	}
	if len(rows) < 4700 {
		t.Fatalf("only %d days", len(rows))
	}
	return rows
}

// halves are the odd years 2003, 2005 .. 2013 and the even years 2002, 2004 .. 2014.
func halves(t testing.TB) (odd, even []DailyRecord) {
	t.Helper()
	for _, r := range harvardDays(t) {
		if r.Date.Year()%2 == 1 {
			odd = append(odd, r)
		} else {
			even = append(even, r)
		}
	}
	return odd, even
}

// generated draws years one after another, dated from 3001 on.
func generated(g *Generator, years int) []DailyRecord {
	var out []DailyRecord
	for i := range years {
		out = append(out, g.Dated(3001+i, 7, uint64(i))...)
	}
	return out
}

// monthly is a mean by calendar month of what the days give, NaN left out.
func monthly(rows []DailyRecord, of func(*DailyRecord) float64) (mean [12]float64) {
	var n [12]float64
	for i := range rows {
		if v := of(&rows[i]); !math.IsNaN(v) {
			m := rows[i].Date.Month() - 1
			mean[m] += v
			n[m]++
		}
	}
	for m := range mean {
		mean[m] /= n[m]
	}
	return mean
}

func rainOf(r *DailyRecord) float64   { return r.Rain }
func globalOf(r *DailyRecord) float64 { return r.Global }
func isWet(r *DailyRecord) float64 {
	if r.Rain >= wetDay {
		return 1
	}
	return 0
}

func average(rows []DailyRecord, of func(*DailyRecord) float64) float64 {
	sum, n := 0.0, 0.0
	for i := range rows {
		if v := of(&rows[i]); !math.IsNaN(v) {
			sum, n = sum+v, n+1
		}
	}
	return sum / n
}

// radiationQuantiles are those of the daily radiation of months from..to, at 5, 10, 25, 50, 75, 90, 95 %.
func radiationQuantiles(rows []DailyRecord, from, to time.Month) []float64 {
	var x []float64
	for i := range rows {
		if m := rows[i].Date.Month(); m >= from && m <= to && !math.IsNaN(rows[i].Global) {
			x = append(x, rows[i].Global)
		}
	}
	slices.Sort(x)
	var out []float64
	for _, p := range quantileShares {
		out = append(out, midQuantile(x, p))
	}
	return out
}

// midQuantile is the quantile of sorted readings that were rounded: linear between the distinct values, each
// standing at the middle of its days (Ma, Genton & Parzen 2011, Ann. Inst. Statist. Math. 63:227-243). The record
// is in steps of 0.1 MJ m-2 d-1, 6 % of its fifth percentile.
func midQuantile(x []float64, p float64) float64 {
	before, value := 0.0, x[0]
	for i := 0; i < len(x); {
		end := i
		for end < len(x) && x[end] == x[i] {
			end++
		}
		at := float64(i+end) / 2 / float64(len(x))
		if at >= p {
			if i == 0 {
				return x[0]
			}
			return value + (p-before)/(at-before)*(x[i]-value)
		}
		before, value, i = at, x[i], end
	}
	return value
}

var quantileShares = []float64{0.05, 0.10, 0.25, 0.50, 0.75, 0.90, 0.95}

// fitted is a generator from rows that must be sound.
func fitted(t testing.TB, rows []DailyRecord) *Generator {
	t.Helper()
	g, err := FitGenerator(rows, harvard)
	if err != nil {
		t.Fatal(err)
	}
	return g
}

// yearSD is the standard deviation between years of the mean over months from..to.
func yearSD(rows []DailyRecord, from, to time.Month, of func(*DailyRecord) float64) float64 {
	by := map[int][]DailyRecord{}
	for _, r := range rows {
		if m := r.Date.Month(); m >= from && m <= to {
			by[r.Date.Year()] = append(by[r.Date.Year()], r)
		}
	}
	var n, s, ss float64
	for y := range 4000 {
		if len(by[y]) > 0 {
			v := average(by[y], of)
			n, s, ss = n+1, s+v, ss+v*v
		}
	}
	return math.Sqrt((ss - s*s/n) / (n - 1))
}
