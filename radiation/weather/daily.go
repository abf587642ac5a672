package weather

import (
	"fmt"
	"math"
	"time"

	"shadeledger/radiation"
)

// Angstrom-Prescott coefficients: H / H0 = a + b n / N (Allen et al. 1998, FAO-56, eq. 35).
const angstromA, angstromB = 0.25, 0.50

// dayWeather is one day to be spread over its sub-steps.
type dayWeather struct {
	global       float64 // MJ m-2 d-1
	q            float64 // diffuse share of the day
	tmin, tmax   float64 // deg C
	shift        float64 // deg C, added to the day's curve
	tminNext     float64
	sunsetBefore float64 // temperature at the sunset before, deg C; NaN on the first day
}

// Series brings daily weather to sub-steps.
func (r *Daily) Series(site radiation.Site, step time.Duration, par Par) *Series {
	from, to, row := r.lay()
	f := newFrame(site, step, yearDates(from, to))
	s := f.series
	s.Years, s.Dated = to-from+1, true
	kt := r.clearness(f, row)
	days := make([]dayWeather, len(s.Days))
	missing := 0
	for d := range days {
		H0, ws := f.dayTop(d), sunsetAngle(site.Latitude, f.declination[d])
		if row[d] < 0 {
			missing++
		}
		days[d] = dayWeather{
			global: kt[d] * H0, q: radiation.DiffuseShareDaily(math.Min(kt[d], 1), ws),
			tmin: bridge(row, d, func(d int) float64 { return r.Rows[row[d]].Tmin }),
			tmax: bridge(row, d, func(d int) float64 { return r.Rows[row[d]].Tmax }),
		}
	}
	if missing > 0 {
		s.Warnings = append(s.Warnings, fmt.Sprintf("%d missing days were bridged", missing))
	}
	f.spread(days, par)
	s.moisten(func(d int) float64 {
		if row[d] < 0 {
			return math.NaN()
		}
		return r.Rows[row[d]].Humidity
	})
	return s
}

// lay puts the rows on the days of whole years; -1 where one is missing.
func (r *Daily) lay() (from, to int, row []int32) {
	from, to = r.Rows[0].Date.Year(), r.Rows[len(r.Rows)-1].Date.Year()
	start := time.Date(from, 1, 1, 0, 0, 0, 0, time.UTC)
	n := int(time.Date(to+1, 1, 1, 0, 0, 0, 0, time.UTC).Sub(start) / (24 * time.Hour))
	row = make([]int32, max(n, 0))
	for i := range row {
		row[i] = -1
	}
	for i := range r.Rows {
		x := &r.Rows[i]
		sound := !math.IsNaN(x.Tmin+x.Tmax) && !(math.IsNaN(x.Global) && math.IsNaN(x.Sunshine))
		if k := int(x.Date.Sub(start) / (24 * time.Hour)); k >= 0 && k < n && row[k] < 0 && sound {
			row[k] = int32(i)
		}
	}
	return from, to, row
}

// bridge is a value of day d, given or linear across a gap; at reads a day that has a row.
func bridge(row []int32, d int, at func(day int) float64) float64 {
	if row[d] >= 0 {
		return at(d)
	}
	from, to := d, d
	for from > 0 && row[from-1] < 0 {
		from--
	}
	for to < len(row) && row[to] < 0 {
		to++
	}
	return between(from, to, d, at, len(row))
}

// clearness gives each day's global over extraterrestrial, 0 without sun.
func (r *Daily) clearness(f *frame, row []int32) []float64 {
	at := func(d int) float64 {
		x := &r.Rows[row[d]]
		if !math.IsNaN(x.Global) {
			return clearness(x.Global, f.dayTop(d))
		}
		N := float64(f.series.Days[d].LitTo-f.series.Days[d].LitFrom) * f.series.Seconds / 3600
		if N == 0 {
			return 0
		}
		return angstromA + angstromB*math.Min(1, x.Sunshine/N)
	}
	kt := make([]float64, len(row))
	for d := range row {
		if v := bridge(row, d, at); !math.IsNaN(v) {
			kt[d] = v
		}
	}
	return kt
}

// dayTop is a day's extraterrestrial energy on the level, MJ m-2 d-1.
func (f *frame) dayTop(d int) float64 {
	sum := 0.0
	for i := f.series.Days[d].LitFrom; i < f.series.Days[d].LitTo; i++ {
		sum += f.top[i]
	}
	return sum * f.series.Seconds / 1e6
}

// sunsetAngle is the hour angle of the geometric sunset, rad: cos ws = -tan lat tan dec.
func sunsetAngle(latitude, declination float64) float64 {
	return math.Acos(math.Max(-1, math.Min(1, -math.Tan(latitude)*math.Tan(declination))))
}

// spread gives every sub-step its temperature and light.
func (f *frame) spread(days []dayWeather, par Par) {
	before := math.NaN()
	for d := range days {
		days[d].tminNext = days[(d+1)%len(days)].tmin
		days[d].sunsetBefore = before
		f.dayLight(d, days[d], par)
		before = f.dayTemperature(d, days[d])
	}
}

// dayLight spreads a day's global radiation over its hours after Collares-Pereira & Rabl (1979) Solar
// Energy 22:155-164, r_t ~ (a + b cos w)(cos w - cos ws), and its diffuse part after Liu & Jordan (1960)
// Solar Energy 4(3):1-19, r_d ~ cos w - cos ws, each rescaled to sum to the day. cos w - cos ws is
// proportional to the sine of the sun's elevation.
func (f *frame) dayLight(d int, w dayWeather, par Par) {
	s := f.series
	from, to := s.Days[d].LitFrom, s.Days[d].LitTo
	ws := sunsetAngle(s.Site.Latitude, f.declination[d])
	x := math.Sin(ws - math.Pi/3)
	a, b := 0.409+0.5016*x, 0.6609-0.4767*x
	n := to - from
	global, diffuse := f.room[0][:n], f.room[1][:n]
	sumG, sumD := 0.0, 0.0
	for i := range n {
		top := f.top[from+i]
		global[i], diffuse[i] = math.Max(0, a+b*math.Cos(f.hourAngle[from+i]))*top, top
		sumG += global[i]
		sumD += top
	}
	if sumG <= 0 {
		return
	}
	total := w.global * 1e6 / s.Seconds // W m-2 summed over sub-steps
	for i := range n {
		global[i] *= total / sumG
		diffuse[i] *= w.q * total / sumD
	}
	scale := balance(diffuse, global, w.q*total)
	for i, G := range global {
		q := share(scale*diffuse[i], G)
		Q := G * par.Fraction * radiation.PhotonsPerJoule
		f.put(from+i, light{G, q, Q, radiation.DiffusePAR(q) * Q})
	}
}

// balance finds the factor k with sum of min(k a_i, limit_i) = target, so that diffuse light never exceeds
// global light in a sub-step and still sums to the day.
func balance(a, limit []float64, target float64) float64 {
	sum := func(k float64) (s float64) {
		for i, v := range a {
			if v *= k; v < limit[i] {
				s += v
			} else {
				s += limit[i]
			}
		}
		return s
	}
	if math.Abs(sum(1)-target) <= 1e-12*target {
		return 1 // no limit is met
	}
	lo, hi := 0.0, 1.0
	for sum(hi) < target*(1-1e-12) && hi < 1e6 {
		hi *= 2
	}
	for range 60 {
		if mid := (lo + hi) / 2; sum(mid) < target {
			lo = mid
		} else {
			hi = mid
		}
	}
	return hi
}

// Parton & Logan (1981) Agric. Meteorol. 23:205-216, table 1, air at 1.5 m: lag of the maximum (h),
// night coefficient, lag of the minimum after sunrise (h).
const lagMax, nightFall, lagMin = 1.86, 2.20, -0.17

// dayTemperature gives a day's sub-steps their temperature and returns that at sunset.
func (f *frame) dayTemperature(d int, w dayWeather) float64 {
	s := f.series
	Y := sunsetAngle(s.Site.Latitude, f.declination[d]) * 24 / math.Pi // day length, h
	Y = math.Max(1, math.Min(23, Y))
	rise, set := 12-Y/2+lagMin, 12+Y/2
	day := func(h float64) float64 {
		return w.tmin + (w.tmax-w.tmin)*math.Sin(math.Pi*(h-rise)/(Y+2*lagMax))
	}
	sunset := day(set)
	night := func(n, start, end float64) float64 { return end + (start-end)*math.Exp(-nightFall*n/(24-Y)) }
	before := w.sunsetBefore
	if math.IsNaN(before) {
		before = sunset
	}
	noon := 12.0 // clock time of apparent noon, h
	if from, to := s.Days[d].LitFrom, s.Days[d].LitTo; to > from {
		i := (from + to) / 2
		noon = (float64(int(s.Lit.Step[i])-d*s.PerDay)+0.5)*s.Seconds/3600 - f.hourAngle[i]*12/math.Pi
	}
	for j := range s.PerDay {
		h := (float64(j)+0.5)*s.Seconds/3600 - noon + 12 // solar time
		var T float64
		switch {
		case h < rise:
			T = night(h+24-set, before, w.tmin)
		case h <= set:
			T = day(h)
		default:
			T = night(h-set, sunset, w.tminNext)
		}
		s.Temperature[d*s.PerDay+j] = T + w.shift
	}
	return sunset
}

// Check lists the faults of daily weather.
func (r *Daily) Check(site radiation.Site, step time.Duration) []Problem {
	var c collector
	if len(r.Rows) < 2 {
		c.add(0, "date", len(r.Rows), "a file of whole calendar years needs more rows")
		return c.done()
	}
	sound := true
	for i := range r.Rows {
		x := &r.Rows[i]
		checkDay(&c, x)
		if i > 0 && !x.Date.After(r.Rows[i-1].Date) {
			c.add(x.Line, "date", x.Date.Format(time.DateOnly), "a later date than the row before; each day once, in order")
			sound = false
		}
	}
	if !sound {
		return c.done()
	}
	from, to, row := r.lay()
	for k := 0; k < len(row); k++ {
		if row[k] >= 0 {
			continue
		}
		end := k
		for end < len(row) && row[end] < 0 {
			end++
		}
		if gap := time.Duration(end-k) * 24 * time.Hour; gap > r.MaxGap {
			at := time.Date(from, 1, 1+k, 0, 0, 0, 0, time.UTC)
			c.add(r.Rows[len(r.Rows)-1].Line, "date", fmt.Sprintf("%d rows; %d days missing from %s", len(r.Rows), end-k, at.Format(time.DateOnly)),
				fmt.Sprintf("whole calendar years, %d rows for %s; or weather.max_gap of at least %g h to bridge it", len(row), yearsText(from, to), gap.Hours()))
		}
		k = end
	}
	return c.done()
}

func checkDay(c *collector, x *DailyRecord) {
	if x.Global < 0 || x.Global > 45 {
		c.add(x.Line, "ghi_mj_m2", x.Global, "0 to 45 MJ m-2 d-1")
	}
	if x.Sunshine < 0 || x.Sunshine > 24 {
		c.add(x.Line, "sunshine_h", x.Sunshine, "0 to 24 h")
	}
	if x.Tmin < coldest || x.Tmin > hottest {
		c.add(x.Line, "tmin_c", x.Tmin, "-90 to 60 deg C")
	}
	if x.Tmax < coldest || x.Tmax > hottest {
		c.add(x.Line, "tmax_c", x.Tmax, "-90 to 60 deg C")
	}
	if x.Tmin > x.Tmax {
		c.add(x.Line, "tmin_c", x.Tmin, fmt.Sprintf("no more than tmax_c, %g", x.Tmax))
	}
	if x.Humidity < 0 || x.Humidity > 105 {
		c.add(x.Line, "rh_pct", x.Humidity, "0 to 100 %")
	}
	if x.Rain < 0 || x.Rain > 2000 {
		c.add(x.Line, "rain_mm", x.Rain, "0 to 2000 mm")
	}
}
