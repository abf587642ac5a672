package scenarios

import (
	"fmt"

	"shadeledger/radiation/weather"
)

// By is how rows divide the time.
type By int

// The divisions. BySeason and ByLeafOn are of light only; a ledger's default is the year.
const (
	BySeason By = iota
	ByLeafOn
	ByYear
	ByMonth
	ByDay
)

// span is a named set of series days.
type span struct {
	name string
	days []bool
	// years that the set's sums are the total of; sums are divided by it
	years float64
}

// spans divides a series: months of dated weather stand each for itself (2025-07), months of normals and days
// are means over the years, so that they add to the mean year.
func spans(s *weather.Series, by By) []span {
	if by == ByYear {
		return []span{{name: "year", days: allDays(s), years: float64(s.Years)}}
	}
	var out []span
	at := map[string]int{}
	for d, day := range s.Days {
		name, years := fmt.Sprintf("%02d", int(day.Month)), float64(s.Years)
		switch {
		case by == ByDay:
			name += fmt.Sprintf("-%02d", day.Day)
		case s.Dated:
			name, years = fmt.Sprintf("%04d-%s", day.Year, name), 1
		}
		i, ok := at[name]
		if !ok {
			i = len(out)
			at[name] = i
			out = append(out, span{name, make([]bool, len(s.Days)), years})
		}
		out[i].days[d] = true
	}
	return out
}

func allDays(s *weather.Series) []bool {
	out := make([]bool, len(s.Days))
	for d := range out {
		out[d] = true
	}
	return out
}

// calendarYears are the distinct years of a dated series, in order; one unnamed year for normals.
func calendarYears(s *weather.Series) [][]bool {
	if !s.Dated {
		return [][]bool{allDays(s)}
	}
	var out [][]bool
	last := 0
	for d, day := range s.Days {
		if out == nil || day.Year != last {
			out = append(out, make([]bool, len(s.Days)))
			last = day.Year
		}
		out[len(out)-1][d] = true
	}
	return out
}
