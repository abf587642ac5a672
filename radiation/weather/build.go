package weather

import (
	"math"
	"time"

	"shadeledger/radiation"
)

// frame is the sun over every sub-step of a series, before any weather is put in.
type frame struct {
	series *Series
	// for each lit sub-step: extraterrestrial energy on the level, W m-2, the sun's hour angle (rad)
	top       []float64
	hourAngle []float64
	normal    []float64 // extraterrestrial, facing the sun, W m-2
	// for each day: declination at noon (rad)
	declination []float64
	// scratch for the sub-steps of one day
	room [2][]float64
}

// date is a calendar day of local standard time; year is the one whose sun is used.
type date struct {
	year, day int
	month     time.Month
	weight    float64
}

// newFrame places the sun at the midpoint of every sub-step of the days.
func newFrame(site radiation.Site, step time.Duration, dates []date) *frame {
	per := int(24 * time.Hour / step)
	n := len(dates) * per
	s := &Series{
		Site: site, Days: make([]Day, len(dates)), PerDay: per, Seconds: step.Seconds(),
		Temperature: make([]float64, n),
	}
	s.Lit = Lit{
		Step: make([]int32, 0, n), Elevation: make([]float64, 0, n), Azimuth: make([]float64, 0, n),
		Beam: make([]float64, 0, n), Diffuse: make([]float64, 0, n),
		Clearness: make([]float64, 0, n), Brightness: make([]float64, 0, n),
	}
	f := &frame{
		series: s, top: make([]float64, 0, n), hourAngle: make([]float64, 0, n),
		normal: make([]float64, 0, n), declination: make([]float64, len(dates)),
	}
	f.room = [2][]float64{make([]float64, per), make([]float64, per)}
	h := radiation.NewHorizontal(site)
	offset := time.Duration(site.UTCOffset * float64(time.Hour))
	for d, date := range dates {
		midnight := time.Date(date.year, date.month, date.day, 0, 0, 0, 0, time.UTC).Add(-offset)
		f.day(h, midnight, d)
		x := &s.Days[d]
		x.Year, x.Month, x.Day, x.Weight = date.year, date.month, date.day, date.weight
	}
	m := len(s.Lit.Step)
	s.Lit.Beam, s.Lit.Diffuse = s.Lit.Beam[:m], s.Lit.Diffuse[:m]
	s.Lit.Clearness, s.Lit.Brightness = s.Lit.Clearness[:m], s.Lit.Brightness[:m]
	return f
}

// quarters of a day between which the ephemeris is blended.
const quarters = 4

// day fills the lit sub-steps of day d.
func (f *frame) day(h radiation.Horizontal, midnight time.Time, d int) {
	s := f.series
	var e [quarters + 1]radiation.Ephemeris
	for q := range e {
		e[q] = radiation.At(midnight.Add(time.Duration(q) * 24 * time.Hour / quarters))
	}
	f.declination[d] = e[quarters/2].Declination
	s.Days[d].LitFrom = len(s.Lit.Step)
	for i := range s.PerDay {
		u := (float64(i) + 0.5) / float64(s.PerDay) * quarters
		q := int(u)
		eph := radiation.Blend(e[q], e[q+1], u-float64(q))
		sun := h.Place(eph)
		if sun.Elevation <= 0 {
			continue
		}
		I0 := radiation.ExtraterrestrialNormal(sun.Distance)
		s.Lit.Step = append(s.Lit.Step, int32(d*s.PerDay+i))
		s.Lit.Elevation = append(s.Lit.Elevation, sun.Elevation)
		s.Lit.Azimuth = append(s.Lit.Azimuth, sun.Azimuth)
		f.top = append(f.top, I0*math.Sin(sun.Elevation))
		f.hourAngle = append(f.hourAngle, h.HourAngle(eph))
		f.normal = append(f.normal, I0)
	}
	s.Days[d].LitTo = len(s.Lit.Step)
}

// light is the light of one sub-step: global W m-2, diffuse share of it, PAR umol m-2 s-1 and diffuse PAR.
type light struct{ global, q, par, diffusePAR float64 }

// put stores the light of lit sub-step i.
func (f *frame) put(i int, l light) {
	lit := &f.series.Lit
	D := math.Min(l.diffusePAR, l.par)
	lit.Diffuse[i], lit.Beam[i] = D, l.par-D
	dhi := l.q * l.global
	β := lit.Elevation[i]
	sinβ := f.top[i] / f.normal[i]
	lit.Clearness[i] = radiation.Clearness(dhi, (l.global-dhi)/sinβ, math.Pi/2-β)
	lit.Brightness[i] = radiation.Brightness(dhi, β, f.normal[i])
}

// yearDates lists the days of whole years.
func yearDates(from, to int) []date {
	out := make([]date, 0, (to-from+1)*366)
	for t := time.Date(from, 1, 1, 0, 0, 0, 0, time.UTC); t.Year() <= to; t = t.AddDate(0, 0, 1) {
		out = append(out, date{t.Year(), t.Day(), t.Month(), 1})
	}
	return out
}
