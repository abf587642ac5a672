package weather

import (
	"fmt"
	"math"
	"time"

	"shadeledger/radiation"
)

// spread is measured weather on its regular intervals of whole years; row < 0 where one is missing.
type spread struct {
	from, to int           // years
	every    time.Duration // interval
	phase    time.Duration // how long after midnight the first interval of the year begins, below every
	row      []int32       // by interval: index in Rows
}

// shift is from a stamp to the start of its interval.
func (r *Records) shift(every time.Duration) time.Duration {
	switch r.Stamp {
	case StampMiddle:
		return -every / 2
	case StampEnd:
		return -every
	}
	return 0
}

// interval is the most usual difference between neighbouring stamps, found as the smallest.
func (r *Records) interval() time.Duration {
	every := time.Duration(0)
	for i := 1; i < len(r.Rows); i++ {
		if d := r.Rows[i].Time.Sub(r.Rows[i-1].Time); d > 0 && (every == 0 || d < every) {
			every = d
		}
	}
	return every
}

// lay puts the rows on their intervals. A row that falls just before the first year, as the first of a
// file stamped at interval ends or middles from 00:00, serves for the missing last interval; an interval that runs over the
// end of the last year goes on at the start of the first.
func (r *Records) lay() spread {
	every := r.interval()
	if every <= 0 {
		return spread{}
	}
	shift := r.shift(every)
	last := r.Rows[len(r.Rows)-1].Time.Add(shift)
	first := r.Rows[0].Time.Add(shift)
	s := spread{from: first.Add(every).Year(), to: last.Year(), every: every}
	if s.to < s.from {
		s.to = s.from
	}
	start := time.Date(s.from, 1, 1, 0, 0, 0, 0, time.UTC)
	s.phase = ((first.Sub(start) % every) + every) % every
	start = start.Add(s.phase)
	n := int(time.Date(s.to+1, 1, 1, 0, 0, 0, 0, time.UTC).Add(s.phase).Sub(start) / every)
	s.row = make([]int32, n)
	for i := range s.row {
		s.row[i] = -1
	}
	for i := range r.Rows {
		k := int(math.Floor(float64(r.Rows[i].Time.Add(shift).Sub(start)) / float64(every)))
		if k == -1 {
			k = n - 1
		}
		if k >= 0 && k < n && s.row[k] < 0 && !math.IsNaN(r.Rows[i].Global+r.Rows[i].Temperature) {
			s.row[k] = int32(i)
		}
	}
	return s
}

// Series brings measured weather to sub-steps. Temperature is constant within an interval; global
// radiation follows the clearness kt = G / mean of the extraterrestrial, so G is conserved.
func (r *Records) Series(site radiation.Site, step time.Duration, par Par) *Series {
	sp := r.lay()
	f := newFrame(site, step, yearDates(sp.from, sp.to))
	s := f.series
	s.Years, s.Dated = sp.to-sp.from+1, true
	per := int(sp.every / step)
	dropped := 0.0
	at := f.litAt()
	lit := make([]int32, 0, per)
	first := int(sp.phase / step)
	for k, v := range r.fill(f, sp, per) {
		lit = lit[:0]
		top := 0.0
		for j := range per {
			x := (first + k*per + j) % len(at)
			s.Temperature[x] = v.temperature
			if i := at[x]; i >= 0 {
				lit = append(lit, i)
				top += f.top[i]
			}
		}
		if len(lit) == 0 {
			dropped += math.Max(0, v.global) * sp.every.Seconds()
			continue
		}
		f.interval(lit, top/float64(per), v, par)
	}
	s.moisten(r.dailyHumidity(sp, len(s.Days)))
	s.Warnings = append(s.Warnings, r.bridged(sp)...)
	if MJ := dropped / 1e6 / float64(s.Years); MJ > 0.05 {
		s.Warnings = append(s.Warnings, fmt.Sprintf("%.1f MJ m-2 a year of light in intervals without sun was dropped; mind the clock and the stamp", MJ))
	}
	return s
}

// litAt gives the lit place of every sub-step, -1 in the dark.
func (f *frame) litAt() []int32 {
	at := make([]int32, len(f.series.Temperature))
	for i := range at {
		at[i] = -1
	}
	for i, step := range f.series.Lit.Step {
		at[step] = int32(i)
	}
	return at
}

// value is the weather of one interval; NaN for what was not measured.
type value struct{ global, temperature, diffuse, ppfd, diffusePPFD float64 }

// fill gives every interval its values; gaps are bridged by clearness and linear temperature.
func (r *Records) fill(f *frame, sp spread, per int) []value {
	out := make([]value, len(sp.row))
	nan := math.NaN()
	for k, i := range sp.row {
		if i >= 0 {
			row := &r.Rows[i]
			out[k] = value{math.Max(0, row.Global), row.Temperature, row.Diffuse, row.PPFD, row.DiffusePPFD}
		}
	}
	var top []float64
	for k := 0; k < len(out); k++ {
		if sp.row[k] >= 0 {
			continue
		}
		if top == nil {
			top = f.intervalTop(len(out), per, int(sp.phase/(sp.every/time.Duration(per))))
		}
		end := k
		for end < len(out) && sp.row[end] < 0 {
			end++
		}
		for g := k; g < end; g++ {
			kt := between(k, end, g, func(i int) float64 { return clearness(out[i].global, top[i]) }, len(out))
			T := between(k, end, g, func(i int) float64 { return out[i].temperature }, len(out))
			out[g] = value{kt * top[g], T, nan, nan, nan}
		}
		k = end
	}
	return out
}

// between is linear from interval from-1 to interval to, at g; the one end stands where the other is off the data
// or NaN.
func between(from, to, g int, at func(int) float64, n int) float64 {
	a, b := math.NaN(), math.NaN()
	if from > 0 {
		a = at(from - 1)
	}
	if to < n {
		b = at(to)
	}
	switch {
	case math.IsNaN(a) && math.IsNaN(b):
		return 0
	case math.IsNaN(a):
		return b
	case math.IsNaN(b):
		return a
	}
	return a + (b-a)*float64(g-from+1)/float64(to-from+1)
}

func clearness(global, top float64) float64 {
	if top <= 0 {
		return math.NaN()
	}
	return global / top
}

// intervalTop is the mean extraterrestrial energy of each interval.
func (f *frame) intervalTop(n, per, first int) []float64 {
	top := make([]float64, n)
	for i, step := range f.series.Lit.Step {
		top[(int(step)-first+n*per)%(n*per)/per] += f.top[i] / float64(per)
	}
	return top
}

// interval shares one interval's light out over its lit sub-steps; top is the interval's mean
// extraterrestrial energy, dark sub-steps counting 0.
func (f *frame) interval(lit []int32, top float64, v value, par Par) {
	kt := v.global / top
	q := radiation.DiffuseShare(math.Min(kt, 1))
	if !math.IsNaN(v.diffuse) {
		q = share(v.diffuse, v.global)
	}
	Q := v.global * par.Fraction * radiation.PhotonsPerJoule
	if !math.IsNaN(v.ppfd) {
		Q = math.Max(0, v.ppfd)
	}
	qp := radiation.DiffusePAR(q)
	if !math.IsNaN(v.diffusePPFD) {
		qp = share(v.diffusePPFD, Q)
	}
	for _, i := range lit {
		part := f.top[i] / top
		f.put(int(i), light{v.global * part, q, Q * part, qp * Q * part})
	}
}

// share is part of whole, 0..1; all where there is nothing to share.
func share(part, whole float64) float64 {
	if whole <= 0 {
		return 1
	}
	return math.Max(0, math.Min(1, part/whole))
}

// bridged reports the gaps that were filled.
func (r *Records) bridged(sp spread) []string {
	missing, runs := 0, 0
	for k, i := range sp.row {
		if i < 0 {
			missing++
			if k == 0 || sp.row[k-1] >= 0 {
				runs++
			}
		}
	}
	if missing == 0 {
		return nil
	}
	return []string{fmt.Sprintf("%d missing intervals in %d gaps were bridged", missing, runs)}
}
