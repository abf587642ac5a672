package canopy

import (
	"math"
	"testing"
)

// Openings of three classes (Lu et al. 2015): with the edge speed that their area loss gives at the middle of the class, what remains when closure stops
// lies between what the smallest (to a tenth) and the largest opening of the class keep.
func TestClosingAsMeasured(t *testing.T) {
	for _, c := range []struct{ low, high, rate, stop, remaining float64 }{{68, 125, 11, 11, 12}, {174, 321, 25, 13, 69}, {514, 621, 39, 16, 223}} {
		middle := (c.low + c.high) / 2
		radius := func(area float64) float64 { return math.Sqrt(area / math.Pi) }
		k := Closing{Speed: c.rate / (2 * math.Pi * radius(middle)), Stop: c.stop}
		lost := math.Pi * (math.Pow(radius(middle), 2) - math.Pow(radius(middle)-k.Advance(1), 2))
		left := func(area float64) float64 { return math.Pi * math.Pow(math.Max(0, radius(area)-k.Advance(30)), 2) }
		t.Logf("%.0f m2: %.1f m2 in the first year (%.0f), %.0f left (%.0f; %.0f to %.0f over the class)", middle, lost, c.rate, left(middle), c.remaining, left(c.low), left(c.high))
		if math.Abs(lost/c.rate-1) > 0.1 || c.remaining < left(c.low)*0.9 || c.remaining > left(c.high) {
			t.Errorf("%.0f m2: %.1f m2 in the first year for %g, %.0f left for %g", middle, lost, c.rate, left(middle), c.remaining)
		}
		if got := ClosingStop(middle); math.Abs(got-c.stop) > 0.01 {
			t.Errorf("%.0f m2 stops after %g years, %g measured", middle, got, c.stop)
		}
	}
	if ClosingStop(10) != 11 || ClosingStop(5000) != 16 {
		t.Error("held outside the classes")
	}
	// without slowing a circle of 10 m closes at 0.1 m a year in 50 years (geometry); slowing never lets it come so far
	k := Closing{Speed: 0.1, Stop: 1000}
	for years := 1.0; years < 60; years++ {
		if k.Advance(years) > 0.1*years || k.Advance(years) <= k.Advance(years-1) {
			t.Errorf("after %g years %g m", years, k.Advance(years))
		}
	}
}
