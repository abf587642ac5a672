package weather

import (
	"fmt"
	"math"
	"strings"
	"time"
)

// What a record must have for a fit.
const (
	leastYears = 5    // years of every calendar month (common practice: fewer say little of the spread between days)
	leastSound = 0.95 // share of a month's days in those years that must be sound
)

// FitError lists the faults that keep a generator from being made.
type FitError struct{ Problems []Problem }

func (e *FitError) Error() string {
	var all []string
	for _, p := range e.Problems {
		at := ""
		if p.Line > 0 {
			at = fmt.Sprintf("line %d: ", p.Line)
		}
		all = append(all, fmt.Sprintf("%s%s: %s; want %s", at, p.Field, p.Value, p.Want))
	}
	return strings.Join(all, "\n")
}

// observe brings rows to sound days.
func (g *Generator) observe(rows []DailyRecord) (days []observed, problems []Problem) {
	var c collector
	g.rainless = true
	for i := range rows {
		if !math.IsNaN(rows[i].Rain) {
			g.rainless = false
		}
	}
	if g.rainless {
		g.assumed = append(g.assumed, "rain is not drawn and wet days are not told from dry ones: no row has rain")
	}
	var last time.Time
	var count [12]int
	for i := range rows {
		x := &rows[i]
		checkDay(&c, x)
		if i > 0 && !x.Date.After(rows[i-1].Date) {
			c.add(x.Line, "date", x.Date.Format(time.DateOnly), "a later date than the row before; each day once, in order")
		}
		d, sound := g.observeDay(&c, x)
		if !sound {
			continue
		}
		d.before = d.state
		if d.follows = len(days) > 0 && x.Date.Equal(last.AddDate(0, 0, 1)); d.follows {
			d.before = days[len(days)-1].state
		}
		last = x.Date
		count[x.Date.Month()-1]++
		days = append(days, d)
	}
	for m, n := range count {
		if want := int(math.Ceil(leastYears * leastSound * float64(monthLength(m)))); n < want {
			c.add(0, "date", fmt.Sprintf("%d sound days of %s", n, time.Month(m+1)),
				fmt.Sprintf("at least %d, 95 %% of %d years, each with radiation (or sunshine), tmin, tmax and rain", want, leastYears))
		}
	}
	return days, c.done()
}

// observeDay is one row as a sound day, or not.
func (g *Generator) observeDay(c *collector, x *DailyRecord) (d observed, sound bool) {
	d.year, d.day = x.Date.Year(), dayIndex(x.Date.Month(), x.Date.Day())
	top := g.days[d.day].top
	global := x.Global
	if math.IsNaN(global) && !math.IsNaN(x.Sunshine) {
		hours := g.lightHours(d.day)
		global = 0
		if hours > 0 {
			global = (angstromA + angstromB*math.Min(1, x.Sunshine/hours)) * top
		}
	}
	if math.IsNaN(global+x.Tmin+x.Tmax) || math.IsNaN(x.Rain) && !g.rainless {
		return d, false
	}
	if limit := top + 0.3; global > limit {
		c.add(x.Line, "ghi_mj_m2", global, fmt.Sprintf("no more than %.1f MJ m-2 d-1, what the sun sends there on that day; check the unit and the site", limit))
	}
	if x.Rain >= wetDay {
		d.state, d.rain = wet, x.Rain
	}
	d.value = [variables]float64{x.Tmax, x.Tmin, math.NaN(), x.Humidity}
	if top > leastTop {
		d.value[clearnessOfDay] = global / top
	}
	return d, true
}

// lightHours is the length of a day from sunrise to sunset, h, the sun's centre on the true horizon.
func (g *Generator) lightHours(day int) float64 {
	return 24 / math.Pi * sunsetAngle(g.site.Latitude, g.days[day].declination)
}

func monthOf(day int) int { return monthByDay[day] }

// monthLength is the number of days of a month, January 0, in a common year.
func monthLength(month int) int {
	return time.Date(sunYear, time.Month(month+2), 0, 0, 0, 0, 0, time.UTC).Day()
}

// monthByDay is the month of every day of a leap year, January 0.
var monthByDay = func() (m [leapDays]int) {
	for i := range m {
		m[i] = int(time.Date(sunYear-1, 1, 1+i, 0, 0, 0, 0, time.UTC).Month()) - 1
	}
	return m
}()
