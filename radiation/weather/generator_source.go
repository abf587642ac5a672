package weather

import (
	"fmt"
	"time"

	"shadeledger/radiation"
)

// Generated is a run of generated years in the place of measured daily weather: years First, First+1 .. of a
// seed, with the dates of consecutive calendar years. Every year starts afresh: no weather carries over New Year.
type Generated struct {
	Generator   *Generator
	Seed, First uint64
	Years       int // 1 or more
}

var _ Source = (*Generated)(nil)

// Check lists the faults: a count of years below 1, a site that is not the generator's, and those of daily
// weather.
func (s *Generated) Check(site radiation.Site, step time.Duration) []Problem {
	var c collector
	if s.Years < 1 {
		c.add(0, "years", s.Years, "1 or more generated years")
		return c.done()
	}
	if site.Latitude != s.Generator.site.Latitude {
		c.add(0, "site.latitude", fmt.Sprintf("%g rad", site.Latitude), fmt.Sprintf("%g rad, for which the generator was made", s.Generator.site.Latitude))
		return c.done()
	}
	return s.daily().Check(site, step)
}

// Series brings the generated years to sub-steps as *Daily does.
func (s *Generated) Series(site radiation.Site, step time.Duration, par Par) *Series {
	return s.daily().Series(site, step, par)
}

// daily is the run as rows.
func (s *Generated) daily() *Daily {
	d := &Daily{Rows: make([]DailyRecord, 0, s.Years*leapDays)}
	for i := range s.Years {
		d.Rows = append(d.Rows, s.Generator.Dated(sunYear+i, s.Seed, s.First+uint64(i))...)
	}
	return d
}
