package weather

import (
	"fmt"
	"math"
	"time"

	"shadeledger/radiation"
)

// Limits of what a value can be: wide enough for the hottest and coldest places measured, and for the
// night offset of a pyranometer (common practice).
const (
	coldest, hottest = -90.0, 60.0 // deg C
	nightOffset      = -20.0       // W m-2; negative readings down to this count as 0
	enhancement      = 1.5         // times the extraterrestrial at a lit moment: edge-of-cloud peaks
	slack            = 100.0       // W m-2, for intervals near sunrise
	most             = 20          // faults of one kind that are listed one by one
)

// collector keeps the list of problems short: after `most` of a kind only their number is given.
type collector struct {
	list []Problem
	kind map[string]int
}

func (c *collector) add(line int, field string, value any, want string) {
	if c.kind == nil {
		c.kind = map[string]int{}
	}
	c.kind[field+want]++
	if n := c.kind[field+want]; n > most {
		return
	}
	c.list = append(c.list, Problem{line, field, fmt.Sprint(value), want})
}

func (c *collector) done() []Problem {
	for k, n := range c.kind {
		if n > most {
			for i := len(c.list) - 1; i >= 0; i-- {
				if c.list[i].Field+c.list[i].Want == k {
					c.list[i].Want += fmt.Sprintf(" (and %d more like it)", n-most)
					break
				}
			}
		}
	}
	return c.list
}

// Check lists the faults of measured weather.
func (r *Records) Check(site radiation.Site, step time.Duration) []Problem {
	var c collector
	if len(r.Rows) < 2 {
		c.add(0, "time", len(r.Rows), "a file of whole calendar years needs more rows")
		return c.done()
	}
	for i := range r.Rows {
		checkRecord(&c, &r.Rows[i])
	}
	every := r.interval()
	if every <= 0 {
		c.add(r.Rows[1].Line, "time", stampText(r.Rows[1].Time), "a later time than the row before; each time once, in order")
		return c.done()
	}
	sound := true
	for i := 1; i < len(r.Rows); i++ {
		d := r.Rows[i].Time.Sub(r.Rows[i-1].Time)
		if d <= 0 {
			c.add(r.Rows[i].Line, "time", stampText(r.Rows[i].Time), "a later time than the row before; each time once, in order")
			sound = false
		} else if d%every != 0 {
			c.add(r.Rows[i].Line, "time", stampText(r.Rows[i].Time), fmt.Sprintf("an even interval of %v throughout", every))
			sound = false
		}
	}
	switch {
	case every%step != 0:
		c.add(r.Rows[1].Line, "time", every, fmt.Sprintf("an interval that is a whole multiple of the sub-step %v", step))
	case (24*time.Hour)%every != 0:
		c.add(r.Rows[1].Line, "time", every, "an interval that divides a day")
	case r.Rows[0].Time.Add(r.shift(every)).Sub(r.Rows[0].Time.Truncate(24*time.Hour))%step != 0:
		c.add(r.Rows[0].Line, "time", stampText(r.Rows[0].Time), fmt.Sprintf("intervals that begin on a sub-step of %v; check weather.stamp", step))
	case sound:
		r.checkCover(&c, site)
	}
	return c.done()
}

// checkRecord looks at one row by itself.
func checkRecord(c *collector, r *Record) {
	between := func(field string, v, lo, hi float64, want string) {
		if v < lo || v > hi || math.IsInf(v, 0) {
			c.add(r.Line, field, v, want)
		}
	}
	between("ghi_w_m2", r.Global, nightOffset, 2500, "0 to 2500 W m-2 (down to -20 for a night offset)")
	between("air_temp_c", r.Temperature, coldest, hottest, "-90 to 60 deg C")
	between("rh_pct", r.Humidity, 0, 105, "0 to 100 %")
	between("dhi_w_m2", r.Diffuse, nightOffset, 2000, "0 to 2000 W m-2")
	between("ppfd_umol_m2_s", r.PPFD, -50, 5000, "0 to 5000 umol m-2 s-1")
	between("diffuse_ppfd_umol_m2_s", r.DiffusePPFD, -50, 4000, "0 to 4000 umol m-2 s-1")
	if r.Diffuse > r.Global+30 && r.Diffuse > 1.1*r.Global {
		c.add(r.Line, "dhi_w_m2", r.Diffuse, "no more than the global ghi_w_m2")
	}
	if r.DiffusePPFD > r.PPFD+60 && r.DiffusePPFD > 1.1*r.PPFD {
		c.add(r.Line, "diffuse_ppfd_umol_m2_s", r.DiffusePPFD, "no more than ppfd_umol_m2_s")
	}
}

// checkCover looks for whole years, gaps, and more light than the sun sends.
func (r *Records) checkCover(c *collector, site radiation.Site) {
	sp := r.lay()
	whole := fmt.Sprintf("whole calendar years of local standard time, %d rows for %s", len(sp.row), yearsText(sp.from, sp.to))
	missing := 0
	for _, i := range sp.row {
		if i < 0 {
			missing++
		}
	}
	lastLine := r.Rows[len(r.Rows)-1].Line
	for k := 0; k < len(sp.row); k++ {
		if sp.row[k] >= 0 {
			continue
		}
		end := k
		for end < len(sp.row) && sp.row[end] < 0 {
			end++
		}
		gap := time.Duration(end-k) * sp.every
		if gap > r.MaxGap {
			line := lastLine
			if end < len(sp.row) {
				line = r.Rows[sp.row[end]].Line
			}
			at := time.Date(sp.from, 1, 1, 0, 0, 0, 0, time.UTC).Add(sp.phase + time.Duration(k)*sp.every)
			c.add(line, "time", fmt.Sprintf("%d rows; %v missing from %s", len(r.Rows), gap, stampText(at)),
				fmt.Sprintf("%s; or weather.max_gap of at least %g h to bridge it", whole, gap.Hours()))
		}
		k = end
	}
	given := 0
	for i := range r.Rows {
		if !math.IsNaN(r.Rows[i].Global + r.Rows[i].Temperature) {
			given++
		}
	}
	if given > len(sp.row)-missing {
		c.add(lastLine, "time", len(r.Rows), whole)
	}
	h := radiation.NewHorizontal(site)
	back := r.shift(sp.every) + sp.every/2 - time.Duration(site.UTCOffset*float64(time.Hour))
	for i := range r.Rows {
		if row := &r.Rows[i]; row.Global > 300 {
			sun := h.Place(radiation.At(row.Time.Add(back)))
			top := radiation.ExtraterrestrialNormal(sun.Distance) * math.Max(0, math.Sin(sun.Elevation))
			if row.Global > enhancement*top+slack {
				c.add(row.Line, "ghi_w_m2", row.Global, fmt.Sprintf("no more than %.0f W m-2 at this hour; check the clock, weather.stamp and site.utc_offset", enhancement*top+slack))
			}
		}
	}
}

func stampText(t time.Time) string { return t.Format("2006-01-02T15:04") }

func yearsText(from, to int) string {
	if from == to {
		return fmt.Sprint(from)
	}
	return fmt.Sprintf("%d-%d", from, to)
}
