package weather

import "math"

// MonthAnomaly is how a month of one year differs from the generator's long mean of that month.
type MonthAnomaly struct {
	Radiation   float64 // factor on global radiation; 1 where the sun does not rise
	Temperature float64 // K, added
}

// Anomaly is what Year(seed, index) means by month, against the long mean: a cheap stand-in for running a model
// on the days of the year. January first.
func (g *Generator) Anomaly(seed, index uint64) [12]MonthAnomaly {
	var global, celsius, days [12]float64
	for _, r := range g.Year(seed, index) {
		m := r.Date.Month() - 1
		global[m] += r.Global
		celsius[m] += (r.Tmin + r.Tmax) / 2
		days[m]++
	}
	long := g.LongMean()
	var out [12]MonthAnomaly
	for m := range out {
		out[m] = MonthAnomaly{1, celsius[m]/days[m] - long[m].Temperature}
		if long[m].Global > 0 {
			out[m].Radiation = global[m] / days[m] / long[m].Global
		}
	}
	return out
}

// MonthMean is the mean of a month over all years that a generator can draw.
type MonthMean struct {
	Global      float64 // MJ m-2 d-1
	Temperature float64 // deg C, mean of the day's highest and lowest
	WetDays     float64 // share of days with 0.3 mm of rain or more
	Rain        float64 // mm d-1
}

// LongMean gives the months' expected values, January first, from the chain's chances and the distributions, not from
// drawn years.
func (g *Generator) LongMean() [12]MonthMean {
	var out [12]MonthMean
	var days [12]float64
	for i := range g.days {
		d := &g.days[i]
		if d.date.month == 2 && d.date.day == 29 {
			continue
		}
		m := &out[d.date.month-1]
		days[d.date.month-1]++
		rained := g.wet[(i+leapDays-1)%leapDays] // the day before
		for before, chance := range [states]float64{1 - rained, rained} {
			rains := d.wetAfter[before]
			for state, chance := range [states]float64{chance * (1 - rains), chance * rains} {
				k := kindOf(before, state)
				m.Temperature += chance * (d.temperature[warmest][k].mean + d.temperature[coldestOfDay][k].mean) / 2
				m.Global += chance * d.top * g.clear.mean(k, d.place)
			}
		}
		m.WetDays += g.wet[i]
		m.Rain += g.wet[i] * d.rain
	}
	for i := range out {
		m := &out[i]
		m.Global, m.Temperature = m.Global/days[i], m.Temperature/days[i]
		m.WetDays, m.Rain = m.WetDays/days[i], m.Rain/days[i]
		if g.rainless {
			m.WetDays, m.Rain = math.NaN(), math.NaN()
		}
	}
	return out
}

// Changed is the series with a year's anomalies put on its days: light times the month's factor, air warmer by the
// month's offset, vapour kept at the same share of saturation at the day's mean temperature. The split of light into
// beam and sky stays, which understates the change of the beam. The series itself is not touched.
func (s *Series) Changed(by [12]MonthAnomaly) *Series {
	out := *s
	out.Temperature = append([]float64(nil), s.Temperature...)
	out.Vapour = append([]float64(nil), s.Vapour...)
	out.Lit.Beam = append([]float64(nil), s.Lit.Beam...)
	out.Lit.Diffuse = append([]float64(nil), s.Lit.Diffuse...)
	for d := range s.Days {
		change := by[s.Days[d].Month-1]
		mean := 0.0
		for j := d * s.PerDay; j < (d+1)*s.PerDay; j++ {
			mean += s.Temperature[j] / float64(s.PerDay)
			out.Temperature[j] += change.Temperature
		}
		if len(out.Vapour) > 0 {
			out.Vapour[d] *= Saturation(mean+change.Temperature) / Saturation(mean)
		}
		for i := s.Days[d].LitFrom; i < s.Days[d].LitTo; i++ {
			out.Lit.Beam[i] *= change.Radiation
			out.Lit.Diffuse[i] *= change.Radiation
		}
	}
	return &out
}
