package weather

import (
	"math"
	"time"

	"shadeledger/radiation"
)

// Normals are the months' means of a series: temperatures of its days and global radiation by its PAR. How light is split into beam and sky is left to
// the relation of daily sums. Where PAR was measured, par says what radiation it was part of.
func (s *Series) Normals(par Par) *Normals {
	n := &Normals{}
	var days [12]float64
	for d := range s.Days {
		m, w := s.Days[d].Month-1, s.Days[d].Weight
		low, high, mean := s.range24(d)
		n.Min[m], n.Max[m], n.Mean[m] = n.Min[m]+w*low, n.Max[m]+w*high, n.Mean[m]+w*mean
		n.Global[m] += w * s.global(d, par)
		days[m] += w
	}
	for m := range days {
		for _, v := range []*float64{&n.Min[m], &n.Max[m], &n.Mean[m], &n.Global[m]} {
			*v /= days[m]
		}
		n.SunshineShare[m], n.DiffuseShare[m] = math.NaN(), math.NaN()
	}
	return n
}

// range24 is a day's lowest, highest and mean temperature, deg C.
func (s *Series) range24(day int) (low, high, mean float64) {
	low, high = math.Inf(1), math.Inf(-1)
	for _, celsius := range s.Temperature[day*s.PerDay : (day+1)*s.PerDay] {
		low, high, mean = math.Min(low, celsius), math.Max(high, celsius), mean+celsius/float64(s.PerDay)
	}
	return low, high, mean
}

// global radiation of a day by its PAR, MJ m-2.
func (s *Series) global(day int, par Par) (sum float64) {
	ratio := s.ParRatio
	if ratio == 0 {
		ratio = par.Fraction * radiation.PhotonsPerJoule
	}
	for i := s.Days[day].LitFrom; i < s.Days[day].LitTo; i++ {
		sum += s.Lit.Beam[i] + s.Lit.Diffuse[i]
	}
	return sum * s.Seconds / ratio * 1e-6
}

// Daily are the days of a dated series as daily rows, without rain; par as in Normals.
func (s *Series) Daily(par Par) []DailyRecord {
	out := make([]DailyRecord, len(s.Days))
	for d := range s.Days {
		low, high, _ := s.range24(d)
		day := &s.Days[d]
		out[d] = DailyRecord{Date: time.Date(day.Year, day.Month, day.Day, 0, 0, 0, 0, time.UTC), Global: s.global(d, par), Tmin: low, Tmax: high,
			Sunshine: math.NaN(), Humidity: math.NaN(), Rain: math.NaN()}
	}
	return out
}
