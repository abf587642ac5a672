package weather

import (
	"math"

	"shadeledger/radiation"
)

// observed is one sound day of a record.
type observed struct {
	year    int
	day     int // place in the table of days
	state   int
	before  int  // state of the day before; its own where that is not known
	follows bool // the day before it is observed too
	rain    float64
	value   [variables]float64 // highest, lowest temperature, clearness (NaN where there is no sun), humidity
	score   vector             // NaN where it has none
}

// leastTop is the extraterrestrial energy below which a day's clearness says nothing, MJ m-2 d-1 (chosen).
const leastTop = 0.5

// kind is the day's kind.
func (d *observed) kind() int { return kindOf(d.before, d.state) }

// FitGenerator finds a generator from daily rows in order of date; whole years may be missing between them. Days that lack
// radiation (or sunshine), a temperature or rain are left out. Every calendar month needs 95 % of the days of five years;
// more years tell rain and the difference between years better. The error is a *FitError listing every fault. Rain missing
// from every row makes a generator of one kind of day; humidity is drawn only if 95 % of the days give it.
func FitGenerator(rows []DailyRecord, site radiation.Site) (*Generator, error) {
	g := newGenerator(site)
	days, problems := g.observe(rows)
	if len(problems) > 0 {
		return nil, &FitError{problems}
	}
	g.fitRain(days)
	g.settle()
	size := humidity
	if g.humidShare(days) > leastSound {
		size = variables
	}
	for v := warmest; v <= coldestOfDay; v++ {
		g.fitTemperature(days, v)
	}
	g.clear = scoresOf(days, clearnessOfDay)
	g.score(days, &g.clear, clearnessOfDay)
	if size > humidity {
		g.humid = scoresOf(days, humidity)
		g.score(days, &g.humid, humidity)
	}
	g.fitSlow(days, size)
	return g, nil
}

// fitTemperature finds mean and spread by season for every kind of day, and the days' scores: a line through the months'
// means, and what the kind departs from it.
func (g *Generator) fitTemperature(days []observed, v int) {
	var sum, n monthLine
	for i := range days {
		m := monthOf(days[i].day)
		sum[m] += days[i].value[v]
		n[m]++
	}
	for m := range sum {
		sum[m] /= n[m]
	}
	line := lineThrough(sum)
	for k := range kinds {
		var mean, sd monthLine
		for m := range mean {
			x := meanSpread(sampleOf(days, k, m, func(d *observed) float64 { return d.value[v] - line.at(g.days[d.day].place) }))
			mean[m], sd[m] = x.mean, x.sd
		}
		mean, sd = lineThrough(mean), lineThrough(sd)
		for i := range g.days {
			place := g.days[i].place
			g.days[i].temperature[v][k] = spreadOf{line.at(place) + mean.at(place), math.Max(leastSpread, sd.at(place))}
		}
	}
	for i := range days {
		x := g.days[days[i].day].temperature[v][days[i].kind()]
		days[i].score[v] = (days[i].value[v] - x.mean) / x.sd
	}
}

// leastSpread keeps scores finite where a month never changes, K (chosen).
const leastSpread = 0.05

// scoresOf tabulates a value by kind of day and month.
func scoresOf(days []observed, v int) (t scoreTable) {
	for k := range kinds {
		var months [12]quantiles
		for m := range months {
			months[m] = quantilesOf(sampleOf(days, k, m, func(d *observed) float64 { return d.value[v] }))
		}
		t[k] = keepMonths(months)
	}
	return t
}

// score gives every day the normal score of a value.
func (g *Generator) score(days []observed, t *scoreTable, v int) {
	for i := range days {
		d := &days[i]
		d.score[v] = math.NaN()
		if !math.IsNaN(d.value[v]) {
			d.score[v] = score01(t.share(d.kind(), g.days[d.day].place, d.value[v]), leastSample)
		}
	}
}

// correlations are those of the scores of a day, and of a day (rows) with the day before (columns).
func correlations(days []observed, size int) (m0, m1 matrix) {
	same := func(v int) func(int) float64 { return func(i int) float64 { return days[i].score[v] } }
	before := func(v int) func(int) float64 {
		return func(i int) float64 {
			if !days[i].follows {
				return math.NaN()
			}
			return days[i-1].score[v]
		}
	}
	for i := range size {
		for j := range size {
			m0[i][j] = correlation(len(days), same(i), same(j))
			m1[i][j] = correlation(len(days), same(i), before(j))
		}
	}
	return m0, m1
}

// correlation is that of the pairs that are both known.
func correlation(n int, x, y func(int) float64) float64 {
	var count, sx, sy, sxx, syy, sxy float64
	for i := range n {
		a, b := x(i), y(i)
		if math.IsNaN(a + b) {
			continue
		}
		count++
		sx, sy, sxx, syy, sxy = sx+a, sy+b, sxx+a*a, syy+b*b, sxy+a*b
	}
	vx, vy := sxx-sx*sx/count, syy-sy*sy/count
	if !(vx*vy > 0) {
		return 0
	}
	return (sxy - sx*sy/count) / math.Sqrt(vx*vy)
}

// humidShare is the share of days with humidity.
func (g *Generator) humidShare(days []observed) float64 {
	n := 0
	for i := range days {
		if !math.IsNaN(days[i].value[humidity]) {
			n++
		}
	}
	share := float64(n) / float64(len(days))
	if share <= leastSound {
		g.assumed = append(g.assumed, "humidity is not drawn: it is missing on more than 5 % of the days")
	}
	return share
}
