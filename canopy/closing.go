package canopy

import "math"

// Closing is how border crowns grow into an opening: an edge speed that slows as v0 exp(-t/slowing) and stops.
type Closing struct {
	Speed float64 // v0 at the start, m a year and side
	Stop  float64 // years after which crowns grow sideways no more
}

// slowing is the time, years, in which edge speed falls to 1/e: openings of 174 to 621 m2 whose area fell by 25 and 39 m2 a year kept 69 and
// 223 m2 when closure stopped (Lu et al. 2015, Silva Fenn. 49(5):1310), which takes 18 to 20 years.
const slowing = 19

// Advance is how far crowns have come in after some years, m.
func (c Closing) Advance(years float64) float64 {
	return c.Speed * slowing * -math.Expm1(-math.Min(years, c.Stop)/slowing)
}

// ClosingStop is the number of years until lateral growth stops in an opening of an area, m2: 11 at 96, 13 at 248 and 16 at 568 (Lu et al. 2015, middles
// of their classes), linear between and held outside.
func ClosingStop(area float64) float64 {
	at := [3][2]float64{{96, 11}, {248, 13}, {568, 16}}
	for i, p := range at {
		if area <= p[0] {
			if i == 0 {
				return p[1]
			}
			q := at[i-1]
			return q[1] + (p[1]-q[1])*(area-q[0])/(p[0]-q[0])
		}
	}
	return at[2][1]
}
