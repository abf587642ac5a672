package scenarios_test

import (
	"fmt"
	"math"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"shadeledger/scenarios"
	"shadeledger/scenarios/ledger"
	"shadeledger/scenarios/plan"
)

// hours makes a year of plain hourly weather: clearness that changes from day to day, warm summers.
func hours(c *bruteCase) {
	c.global, c.temperature = make([]float64, 8760), make([]float64, 8760)
	for h := range c.global {
		day := h / 24
		mean := 0.0
		for k := range 4 {
			el, _, d := sunAt(day, float64(h%24)+(float64(k)+0.5)/4, c)
			mean += math.Max(0, 1361/d/d*math.Sin(el)) / 4
		}
		kt := 0.2 + 0.55*math.Abs(math.Sin(float64(day)*1.7)) + 0.03*math.Sin(float64(h))
		c.global[h] = math.Round(kt*mean*10) / 10
		season := -math.Cos(float64(day-20) / 365 * 2 * math.Pi)
		if c.lat < 0 {
			season = -season
		}
		c.temperature[h] = math.Round((9+11*season-5*math.Cos(float64(h%24-3)/24*2*math.Pi))*10) / 10
	}
}

// file writes the weather as a plan wants it; end stamps name the end of each hour.
func file(c *bruteCase, end bool) string {
	var b strings.Builder
	b.WriteString("time,ghi_w_m2,air_temp_c\n")
	for h, g := range c.global {
		if end {
			h++
		}
		d := h / 24
		month, day := 1, d+1
		for n := []int{31, 28, 31, 30, 31, 30, 31, 31, 30, 31, 30, 31}; month <= 12 && day > n[month-1]; month++ {
			day -= n[month-1]
		}
		year := 2015
		if month == 13 {
			year, month = 2016, 1
		}
		at := h
		if end {
			at--
		}
		fmt.Fprintf(&b, "%04d-%02d-%02dT%02d:00,%g,%g\n", year, month, day, h%24, g, c.temperature[at])
	}
	return b.String()
}

// span is a block of days of the year, both ends in, round New Year where from is after to.
func span(from, to int) func(int) bool {
	return func(d int) bool {
		if from <= to {
			return d >= from && d <= to
		}
		return d >= from || d <= to
	}
}

// ramp is a leaf calendar by days of the year, 0 first.
func ramp(out, full, colour, bare int) func(int) float64 {
	return func(d int) float64 {
		switch {
		case d >= full && d <= colour:
			return 1
		case d > out && d < full:
			return float64(d-out) / float64(full-out)
		case d > colour && d < bare:
			return float64(bare-d) / float64(bare-colour)
		}
		return 0
	}
}

func always(int) float64 { return 1 }

var bruteLines = []ledger.Line{ledger.Income, ledger.Sunfleck, ledger.LeafDay, ledger.LeafNight, ledger.Stem, ledger.Root, ledger.LeafReplacement, ledger.RootReplacement}

// check runs a plan and holds every station to the plain calculation: percent of full light 0.2 points, ledger lines
// 0.5 % (of income for sunflecks), break-even 0.2 points.
func check(t *testing.T, c *bruteCase, text string, end bool, plants []*brutePlant) {
	t.Helper()
	dir := t.TempDir()
	for name, s := range map[string]string{"plan.yaml": text, "weather.csv": file(c, end)} {
		if err := os.WriteFile(filepath.Join(dir, name), []byte(s), 0o600); err != nil {
			t.Fatal(err)
		}
	}
	p, faults := plan.Read(dir, plan.Options{})
	for _, f := range faults {
		t.Error(f.Error())
	}
	if p == nil {
		t.FailNow()
	}
	res, err := scenarios.Run(p, scenarios.Options{Workers: 2, Depth: scenarios.BreakEvens})
	if err != nil {
		t.Fatal(err)
	}
	var worstLight, worstLine, worstBreak float64
	regimes := map[[3]float64]*bruteRegime{} // by spot and height, shared by the plants there
	for i, row := range res.Balance {
		st := p.Stations[i/len(p.Seedlings)]
		pl := plants[i%len(p.Seedlings)]
		x, y := st.Distance*math.Sin(st.Bearing), st.Distance*math.Cos(st.Bearing)
		spot := [3]float64{x, y, pl.height}
		if regimes[spot] == nil {
			regimes[spot] = c.regime(x, y, pl.height)
		}
		r := regimes[spot]
		where := row.Station + ", " + row.Species
		season, on := r.percent(1, c.season), r.percent(1, c.leafOn)
		for name, v := range map[string][2]float64{"season": {row.Light, season}, "leaf-on": {row.LightLeafOn, on}} {
			worstLight = math.Max(worstLight, math.Abs(v[0]-v[1]))
			if math.Abs(v[0]-v[1]) > 0.2 {
				t.Errorf("%s: %s light %.3f %%, plainly %.3f", where, name, v[0], v[1])
			}
		}
		lines := r.ledger(pl, 1, on)
		for j, line := range bruteLines {
			scale := lines[j]
			if line == ledger.Sunfleck {
				scale = lines[0]
			}
			miss := math.Abs(row.Lines[line]-lines[j]) / scale
			worstLine = math.Max(worstLine, miss)
			if miss > 0.005 {
				t.Errorf("%s: line %d is %.5f g C, plainly %.5f", where, line, row.Lines[line], lines[j])
			}
		}
		bs, bo, found := r.breakEven(pl)
		if found != row.BreakEven.Found {
			t.Errorf("%s: break-even found %v, plainly %v", where, row.BreakEven.Found, found)
			continue
		}
		miss := math.Max(math.Abs(bs-row.BreakEven.Season), math.Abs(bo-row.BreakEven.LeafOn))
		worstBreak = math.Max(worstBreak, miss)
		if miss > 0.2 {
			t.Errorf("%s: break-even %.3f (leaf-on %.3f) %%, plainly %.3f (%.3f)", where, row.BreakEven.Season, row.BreakEven.LeafOn, bs, bo)
		}
		t.Logf("%s: light %.2f %%, income %.4f g C, net %.4f, break-even %.2f %% leaf-on", where, row.Light, row.Lines[ledger.Income], row.Lines.Net(), row.BreakEven.LeafOn)
	}
	t.Logf("worst: light %.3f points, line %.3f %%, break-even %.3f points", worstLight, 100*worstLine, worstBreak)
}
