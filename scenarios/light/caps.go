package light

import "math"

// Caps tells the percent of full light of a regime scaled by k, over the days of a mask: beam chance
// min(1, k P0), sky light min(k D, D_open), scattered beam min(k S, I_b (1 - beam chance)). Beam and scattered
// beam together are I_b min(1, k T), so the sum over time is one of w min(1, k x); it is kept as a histogram of x
// with an eighth of an octave to a bin and each bin's own mean.
type Caps struct {
	weight, reach [capBins]float64 // sums of w and of w x
	total         float64
}

const (
	capOctaves = 24
	capPer     = 8
	capBins    = capOctaves*capPer + 1
)

// capBin is the bin of x in 0..1; the last is the brightest.
func capBin(x float64) int {
	if x <= 0 {
		return 0
	}
	// exponent and the first three bits of the mantissa
	b := int(math.Float64bits(x)>>49) - (1023-capOctaves)<<3
	return max(0, min(capBins-1, b))
}

func (c *Caps) add(w, x float64) {
	if w == 0 {
		return
	}
	b := capBin(x)
	c.weight[b] += w
	c.reach[b] += w * x
	c.total += w
}

// Caps fills c for the days of a mask.
func (r *Regime) Caps(mask []bool, c *Caps) {
	*c = Caps{}
	lit := &r.Above.Series.Lit
	for d, in := range mask {
		if !in {
			continue
		}
		day := &r.Above.Series.Days[d]
		for i := day.LitFrom; i < day.LitTo; i++ {
			if Ib := lit.Beam[i]; Ib > 0 {
				c.add(day.Weight*Ib, r.BeamChance[i]+r.Scattered[i]/Ib)
			}
			if D := lit.Diffuse[i]; D > 0 {
				c.add(day.Weight*D, r.SkyPlane[i]/D)
			}
		}
	}
}

// Percent of full light of the regime scaled by k.
func (c *Caps) Percent(k float64) float64 {
	if c.total == 0 {
		return 0
	}
	sum := 0.0
	for b, w := range c.weight {
		sum += math.Min(w, k*c.reach[b])
	}
	return 100 * sum / c.total
}
