package weather

import "math"

// Saturation is the vapour pressure of saturated air, kPa, over water: 0.6108 exp(17.27 T/(T + 237.3)) (Tetens 1930; Allen et al. 1998, FAO
// Irrigation and Drainage Paper 56, eq. 11). celsius -40..60.
func Saturation(celsius float64) float64 { return 0.6108 * math.Exp(17.27*celsius/(celsius+237.3)) }

// Deficit is the vapour pressure deficit of a sub-step, kPa: saturation at its temperature less the day's vapour pressure, never below 0.
func (s *Series) Deficit(step int) float64 {
	return math.Max(0, Saturation(s.Temperature[step])-s.Vapour[step/s.PerDay])
}

// moisten gives every day its vapour pressure, constant over the day: from relative humidity (percent; NaN where not known), of the day's mean
// temperature curve, else saturation at the day's lowest temperature (Allen et al. 1998, eq. 48: dew in the morning).
func (s *Series) moisten(relative func(day int) float64) {
	s.Vapour = make([]float64, len(s.Days))
	for d := range s.Vapour {
		mean, low := 0.0, math.Inf(1)
		for _, celsius := range s.Temperature[d*s.PerDay : (d+1)*s.PerDay] {
			mean += Saturation(celsius) / float64(s.PerDay)
			low = math.Min(low, celsius)
		}
		s.Vapour[d] = Saturation(low)
		if h := relative(d); !math.IsNaN(h) {
			s.Vapour[d] = h / 100 * mean
		}
	}
}

// unknown is the humidity of sources without it.
func unknown(int) float64 { return math.NaN() }

// dailyHumidity is the relative humidity of every day from rows of an interval: that of the vapour they hold over what saturated air of their
// temperatures would.
func (r *Records) dailyHumidity(sp spread, days int) func(int) float64 {
	held, could := make([]float64, days), make([]float64, days)
	perDay := len(sp.row) / days
	for k, i := range sp.row {
		if i < 0 || math.IsNaN(r.Rows[i].Humidity) {
			continue
		}
		full := Saturation(r.Rows[i].Temperature)
		held[k/perDay] += r.Rows[i].Humidity / 100 * full
		could[k/perDay] += full
	}
	return func(day int) float64 { return 100 * held[day] / could[day] } // NaN where no row tells
}
