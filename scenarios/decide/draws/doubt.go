// Package draws holds the numerics of uncertainty runs: what is drawn for a doubtful number, samples that fill all inputs evenly, and
// which input a result hangs on. It knows nothing of stands, light or plants.
package draws

import (
	"fmt"
	"math"
	"slices"

	"gonum.org/v1/gonum/mathext"
)

const (
	z95      = 1.6448536269514722 // standard normal deviate of the 95th percentile, from memory
	farthest = 3.0                // deviates are held within this, common practice: 0.27 % of draws
)

// Doubt is a number in doubt: Low and High are its 5th and 95th percentile, Best its median, all in the number's own unit.
type Doubt struct{ Low, Best, High float64 }

// Check refuses numbers that are not finite or out of order; a side may have no width.
func (d Doubt) Check() error {
	for _, v := range []float64{d.Low, d.Best, d.High} {
		if math.IsNaN(v) || math.IsInf(v, 0) {
			return fmt.Errorf("low %g, best %g, high %g: all three must be finite numbers", d.Low, d.Best, d.High)
		}
	}
	if d.Low > d.Best || d.Best > d.High {
		return fmt.Errorf("low %g, best %g, high %g: they must rise in this order", d.Low, d.Best, d.High)
	}
	return nil
}

// At is the value at the cumulative chance u, from 0 to 1. With the normal deviate z = clamp(Phi^-1(u), -3, 3) and side = Low below the
// median, High above: Best (side/Best)^(|z|/1.645) where Low > 0, a lognormal of two pieces; else Best + (side - Best) |z|/1.645, a normal
// of two pieces. It never falls as u rises. NaN for u outside 0 to 1.
func (d Doubt) At(u float64) float64 {
	if !(u >= 0 && u <= 1) {
		return math.NaN()
	}
	z := max(-farthest, min(farthest, mathext.NormalQuantile(u))) / z95
	side := d.High
	if z < 0 {
		side, z = d.Low, -z
	}
	if d.Low > 0 {
		return d.Best * math.Pow(side/d.Best, z)
	}
	return d.Best + (side-d.Best)*z
}

// Spread is what many runs give: the 5, 50 and 95 % quantiles of those that gave a number.
type Spread struct {
	Low, Median, High float64 // NaN where no run gave a number
	Counted, Missing  int     // runs with a number, and without (NaN)
}

// NewSpread takes quantiles by linear interpolation between order statistics at h = (n - 1) p, type 7 of Hyndman & Fan 1996, Am. Stat.
// 50:361-365 (from memory). NaN are left out and counted.
func NewSpread(values []float64) Spread {
	var kept []float64
	for _, v := range values {
		if !math.IsNaN(v) {
			kept = append(kept, v)
		}
	}
	slices.Sort(kept)
	return Spread{quantile(kept, 0.05), quantile(kept, 0.5), quantile(kept, 0.95), len(kept), len(values) - len(kept)}
}

// quantile is of type 7; values are sorted.
func quantile(sorted []float64, p float64) float64 {
	if len(sorted) == 0 {
		return math.NaN()
	}
	h := float64(len(sorted)-1) * p
	i := int(h)
	if share := h - float64(i); share > 0 {
		return (1-share)*sorted[i] + share*sorted[i+1]
	}
	return sorted[i]
}
