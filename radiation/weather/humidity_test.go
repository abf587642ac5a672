package weather

import (
	"math"
	"testing"
	"time"

	"shadeledger/radiation"
)

// Printed examples of Allen et al. (1998, FAO Irrigation and Drainage Paper 56): saturation at 24.5 and 15 deg C is 3.075 and 1.705 kPa (example 3).
func TestSaturationAsPrinted(t *testing.T) {
	for celsius, want := range map[float64]float64{24.5: 3.075, 15: 1.705} {
		if got := Saturation(celsius); math.Abs(got-want) > 0.001 {
			t.Errorf("%g deg C: %.4f kPa, printed %.3f", celsius, got, want)
		}
	}
}

// Humidity comes from what the source tells of it, else from the coldest hour.
func TestVapourOfEverySource(t *testing.T) {
	site := radiation.Site{Latitude: 0.8}
	hourly := &Records{}
	start := time.Date(2023, 1, 1, 0, 0, 0, 0, time.UTC)
	for h := range 365 * 24 {
		row := Record{Time: start.Add(time.Duration(h) * time.Hour), Temperature: 10 + 5*math.Sin(float64(h%24)/24*2*math.Pi), Humidity: math.NaN(),
			Diffuse: math.NaN(), PPFD: math.NaN(), DiffusePPFD: math.NaN()}
		if h/24 != 100 { // a day without
			row.Humidity = 100 * 0.7 / Saturation(row.Temperature)
		}
		hourly.Rows = append(hourly.Rows, row)
	}
	s := hourly.Series(site, time.Hour, Par{Fraction: 0.45})
	for d, want := range map[int]float64{3: 0.7, 100: Saturation(5)} {
		if math.Abs(s.Vapour[d]-want) > 1e-9 {
			t.Errorf("hourly, day %d: %g kPa, want %g", d, s.Vapour[d], want)
		}
	}
	if got, want := s.Deficit(3*24+6), Saturation(15)-0.7; math.Abs(got-want) > 1e-9 {
		t.Errorf("deficit %g, want %g", got, want)
	}
	daily := &Daily{}
	for d := range 365 {
		row := DailyRecord{Date: start.AddDate(0, 0, d), Global: 10, Sunshine: math.NaN(), Tmin: 5, Tmax: 15, Humidity: math.NaN()}
		if d == 7 {
			row.Humidity = 60
		}
		daily.Rows = append(daily.Rows, row)
	}
	s = daily.Series(site, time.Hour, Par{Fraction: 0.45})
	mean, low := 0.0, math.Inf(1)
	for _, celsius := range s.Temperature[7*24 : 8*24] {
		mean += Saturation(celsius) / 24
	}
	for _, celsius := range s.Temperature[50*24 : 51*24] {
		low = math.Min(low, celsius)
	}
	if math.Abs(s.Vapour[7]-0.6*mean) > 1e-9 || math.Abs(s.Vapour[50]-Saturation(low)) > 1e-9 {
		t.Errorf("daily: %g and %g kPa, want %g and %g", s.Vapour[7], s.Vapour[50], 0.6*mean, Saturation(low))
	}
}
