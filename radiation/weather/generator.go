package weather

import (
	"math"
	"math/rand/v2"
	"time"

	"shadeledger/radiation"
)

// Generator draws years of daily weather that are like a record, or like monthly normals, without repeating
// them (Richardson 1981, Water Resources Research 17:182-190). Wet and dry days are a first-order Markov chain
// whose chances follow the season; rain of a wet day is a mixed exponential; highest and lowest temperature,
// clearness and, where known, humidity are the residuals of one stationary process of first order (Matalas
// 1967) with means and spreads by season, apart for wet and dry days and by the weather of the day
// before. Clearness and humidity pass through the normal score of their own distribution, so they keep its bounds
// and its skew.
//
// A generator never changes after it is made: any number of goroutines may draw from it.
type Generator struct {
	site     radiation.Site
	days     [leapDays]generatorDay
	amount   mixedExponential
	clear    scoreTable
	humid    scoreTable // used where process.size > humidity
	process  matalas
	slow     slowPart
	wet      [leapDays]float64 // chance of a wet day
	rainless bool              // the record says nothing of rain: one kind of day, rain not given
	assumed  []string
}

// leapDays is the length of the table of days: those of a leap year.
const leapDays = 366

// State of a day: an index.
const (
	dry = iota
	wet
	states
)

// kinds of days, by the state of the day before and the day's own: dry weather after rain is moister and duller than in a
// long dry spell.
const kinds = states * states

func kindOf(before, state int) int { return states*state + before }

// Places in the vector of residuals.
const (
	warmest = iota
	coldestOfDay
	clearnessOfDay
	humidity
	variables
)

// wetDay is the least rain of a wet day, mm (0.01 inch, 0.254 mm, in Richardson 1981; 0.3 here, which gauges
// of 0.1 and of 0.254 mm tell apart from a trace).
const wetDay = 0.3

// leastRange is the smallest span from lowest to highest temperature of a generated day, K (chosen).
const leastRange = 0.2

// generatorDay is what holds on one day of the year.
type generatorDay struct {
	date        date
	declination float64         // rad, at noon
	top         float64         // extraterrestrial energy on the level, MJ m-2 d-1
	wetAfter    [states]float64 // chance of rain after a dry and after a wet day
	rain        float64         // mm, mean of a wet day
	temperature [2][kinds]spreadOf
	place       season
}

// spreadOf is a mean and its standard deviation.
type spreadOf struct{ mean, sd float64 }

// Assumed lists what the generator took from defaults instead of from data, each a sentence.
func (g *Generator) Assumed() []string { return append([]string(nil), g.assumed...) }

// Year is year number index of a seed: 365 days with dates of a common year. The same seed and index give the
// same days, whatever was drawn before. Global is MJ m-2 d-1, temperatures deg C, rain mm; humidity is NaN where
// the record had none, rain where it had none.
func (g *Generator) Year(seed, index uint64) []DailyRecord {
	return g.Dated(sunYear, seed, index)
}

// Dated is the same weather with the dates of a calendar year: 365 or 366 days.
func (g *Generator) Dated(year int, seed, index uint64) []DailyRecord {
	rows := make([]DailyRecord, 0, leapDays)
	g.draw(rand.New(rand.NewPCG(seed, index)), func(d *generatorDay, r DailyRecord) {
		at := time.Date(year, d.date.month, d.date.day, 0, 0, 0, 0, time.UTC)
		if at.Month() != d.date.month {
			return // 29 February of a common year
		}
		r.Date, r.Line = at, len(rows)+2
		rows = append(rows, r)
	})
	return rows
}

// draw runs the process through a leap year and hands on every day.
func (g *Generator) draw(from *rand.Rand, day func(*generatorDay, DailyRecord)) {
	slow := g.slow.draw(from)
	state := dry // of the day before the first
	if from.Float64() < g.wet[leapDays-1] {
		state = wet
	}
	score := g.process.start(from)
	for i := range g.days {
		d, part, before := &g.days[i], partOf(i), state
		if state = dry; from.Float64() < slow.chance(d.wetAfter[before], part) {
			state = wet
		}
		if i > 0 {
			score = g.process.next(from, score)
		}
		r := g.record(d, kindOf(before, state), g.slow.join(score, &slow, part))
		if state == wet {
			r.Rain = wetDay + (d.rain-wetDay)*g.amount.draw(from)*g.slow.amount(&slow, part)
		}
		day(d, r)
	}
}

// record turns the scores of a day to its weather but for the amount of rain.
func (g *Generator) record(d *generatorDay, kind int, score vector) DailyRecord {
	r := DailyRecord{Sunshine: math.NaN(), Humidity: math.NaN()}
	high, low := d.temperature[warmest][kind], d.temperature[coldestOfDay][kind]
	r.Tmax = high.mean + high.sd*score[warmest]
	r.Tmin = low.mean + low.sd*score[coldestOfDay]
	if r.Tmax-r.Tmin < leastRange { // the mean stays
		middle := (r.Tmax + r.Tmin) / 2
		r.Tmin, r.Tmax = middle-leastRange/2, middle+leastRange/2
	}
	r.Global = d.top * g.clear.at(kind, d.place, share01(score[clearnessOfDay]))
	if g.process.size > humidity {
		r.Humidity = g.humid.at(kind, d.place, share01(score[humidity]))
	}
	if g.rainless {
		r.Rain = math.NaN()
	}
	return r
}

// settle works out the chance of a wet day on every day of the year: the chain run round the year until it
// repeats.
func (g *Generator) settle() {
	now := 0.5
	for range 3 {
		for i := range g.days {
			after := g.days[i].wetAfter
			now = after[dry] + now*(after[wet]-after[dry])
			g.wet[i] = now
		}
	}
}

// newGenerator lays out the days of the year and their sun.
func newGenerator(site radiation.Site) *Generator {
	g := &Generator{site: site}
	dates := yearDates(sunYear-1, sunYear-1) // a leap year
	f := newFrame(site, topStep, dates)
	for i := range g.days {
		g.days[i].date = dates[i]
		g.days[i].top = f.dayTop(i)
		g.days[i].declination = f.declination[i]
		g.days[i].place = seasonOf(dates[i])
	}
	return g
}

// topStep is the sub-step of the day's extraterrestrial energy: within 0.1 % of the integral.
const topStep = 15 * time.Minute

// dayIndex is the place of a date in the table of days.
func dayIndex(month time.Month, day int) int {
	return time.Date(sunYear-1, month, day, 0, 0, 0, 0, time.UTC).YearDay() - 1
}
