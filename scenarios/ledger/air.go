package ledger

import (
	"math"

	"shadeledger/leaf"
	"shadeledger/scenarios/light"
)

// air says, sub-step by sub-step, what the air makes of a plant's trait sets.
type air struct {
	plant *Plant
	above *light.Above
	month []float64 // mean temperature of the 30 days before by day, deg C; nil where nothing acclimates
}

const monthBefore = 30 // d, over which leaves acclimate (Kattge & Knorr 2007)

func newAir(p *Plant, above *light.Above) air {
	a := air{plant: p, above: above}
	if p.Chemistry != nil && p.Chemistry.Acclimates {
		a.month = before(above.Series.DailyMeans())
	}
	return a
}

// before is the mean of the days up to monthBefore before each, round the end of the series.
func before(mean, weight []float64) []float64 {
	out := make([]float64, len(mean))
	for d := range out {
		sum, days := 0.0, 0.0
		for k := 1; k <= len(mean) && days < monthBefore; k++ {
			i := (d - k + len(mean)) % len(mean)
			w := math.Min(weight[i], monthBefore-days)
			sum, days = sum+w*mean[i], days+w
		}
		out[d] = sum / days
	}
	return out
}

// ratios of a sub-step: by temperature alone, or by temperature, humidity, pressure and carbon dioxide.
func (a *air) ratios(day, step int) leaf.Ratios {
	celsius := a.above.Series.Temperature[step]
	c := a.plant.Chemistry
	if c == nil {
		return leaf.Ratios{Ag: a.plant.Temperature.AgFactor(celsius), Phi: 1, Cap: 1}
	}
	return a.kinetics(day).Ratios(leaf.Air{Temperature: celsius, CO2: c.CO2, VPD: a.above.Series.Deficit(step), Pressure: c.Pressure})
}

// warmth is the capacity at a temperature over that at its optimum.
func (a *air) warmth(day int, celsius float64) float64 {
	if a.plant.Chemistry == nil {
		return a.plant.Temperature.Warmth(celsius)
	}
	return a.kinetics(day).Warmth(celsius)
}

// kinetics of a biochemical plant on a day.
func (a *air) kinetics(day int) leaf.Kinetics {
	c := a.plant.Chemistry
	k := leaf.Kinetics{G1: c.Leaf.G1, Heat: leaf.Bernacchi{}}
	if c.Acclimates {
		k.Heat = leaf.NewAcclimated(a.month[day])
	}
	return k
}
