package weather

import (
	"fmt"
	"math"
	"time"

	"shadeledger/radiation"
)

// Climate is what a generator can be made of where there is no daily record. January first; NaN stands for not known.
type Climate struct {
	Normals *Normals
	Rain    [12]float64 // mm a month
	WetDays [12]float64 // share of days with rain, 0..1
	Spread  [12]float64 // K, standard deviation of the day's highest and lowest temperature round the month's
}

// Defaults of a climate, after Richardson & Wright (1984), USDA-ARS-8, where they give the same for every place. Their
// matrices are from memory; the correlations that follow from them are tested against Richardson (1982), Trans. ASAE
// 25:735-739. The others are marked.
var (
	matrixA = matrix{{0.567, 0.086, -0.002}, {0.253, 0.504, -0.050}, {-0.006, -0.039, 0.244}}
	matrixB = matrix{{0.781, 0, 0}, {0.328, 0.637, 0}, {0.238, -0.341, 0.873}}
	// Slow shifts of the dark and the light half of the year, as fitted on Harvard Forest, Massachusetts, 2002-2014.
	slowDefault = slowPart{
		{warmest: 0.19, coldestOfDay: 0.22, clearnessOfDay: 0.11},
		{warmest: 0.04, coldestOfDay: 0.04, clearnessOfDay: 0.18},
	}
)

const (
	// rainOfWetDay is the mean rain of a wet day where only the month's rain is known, mm (from memory: humid temperate
	// stations have 6 to 10; Harvard Forest 8.2).
	rainOfWetDay = 8.0
	// Geng, Penning de Vries & Supit (1986), Agric. For. Meteorol. 36:363-376: chance of rain after a dry day over the
	// share of wet days, and how much more likely rain is after a wet day.
	gengDry, gengMore = 0.75, 0.25
	// continental is the span from coldest to warmest month at Harvard Forest, K, where the next rules were measured.
	continental = 26.0
)

// wetRule is a difference or ratio of wet to dry days at the cold and at the warm end of a continental year (measured at
// Harvard Forest, 2002-2014, rounded).
type wetRule struct{ cold, warm float64 }

var (
	wetTmax      = wetRule{1.5, -2.0}  // K
	wetTmin      = wetRule{3.0, 1.0}   // K
	wetClearness = wetRule{0.47, 0.66} // ratio
)

// at is the rule in a month colder than the year's warmest by some kelvin.
func (r wetRule) at(colder float64) float64 {
	return r.warm + (r.cold-r.warm)*math.Max(0, math.Min(1, colder/continental))
}

// spreadRule is the default spread of daily temperatures, K: 1 + (0.08 warmest .. 0.17 coldest month) times the year's span of
// monthly means. Chosen: Harvard Forest has 3.2 and 5.6 K, the lowland tropics (from memory) 1 to 1.5 K.
func spreadRule(colder, span float64) float64 {
	if span <= 0 {
		return 1
	}
	return 1 + span*(0.08+0.09*colder/span)
}

// GeneratorFromNormals makes a generator from monthly means (Richardson & Wright 1984). Clearness of all days together
// follows the distribution that normals have everywhere here (Bendt et al. 1981), with the month's mean kept. What is not
// given comes from defaults, each in Assumed. The error is a *FitError listing every fault.
func GeneratorFromNormals(c Climate, site radiation.Site) (*Generator, error) {
	if problems := c.check(site); len(problems) > 0 {
		return nil, &FitError{problems}
	}
	g := newGenerator(site)
	share := g.climateRain(&c)
	g.climateTemperature(&c, share)
	g.climateClearness(&c, share)
	g.settle()
	m0, m1 := correlationsOf(humidity, matrixA, matrixB)
	g.process, g.slow = newMatalas(humidity, m0, m1), slowDefault
	g.assumed = append(g.assumed,
		"correlations between days: Richardson & Wright (1984), the same everywhere",
		"temperature and clearness of wet against dry days, and how much years differ: as at Harvard Forest, Massachusetts")
	return g, nil
}

// check lists the faults of a climate.
func (c *Climate) check(site radiation.Site) []Problem {
	if c.Normals == nil {
		return []Problem{{0, "weather.normals", "missing", "monthly means of temperature and radiation"}}
	}
	problems := c.Normals.Check(site, time.Hour/2)
	var more collector
	for m := range 12 {
		name := time.Month(m + 1).String()
		if v := c.Rain[m]; v < 0 || v > 5000 {
			more.add(0, "rain", fmt.Sprintf("%g in %s", v, name), "0 to 5000 mm a month")
		}
		if v := c.WetDays[m]; v < 0 || v > 1 {
			more.add(0, "wet_days", fmt.Sprintf("%g in %s", v, name), "0 to 1, the share of days with rain")
		}
		if v := c.Spread[m]; v < 0 || v > 20 {
			more.add(0, "spread", fmt.Sprintf("%g in %s", v, name), "0 to 20 K")
		}
		if math.IsNaN(c.Rain[m]) != math.IsNaN(c.Rain[0]) {
			more.add(0, "rain", "NaN", "a figure for every month or for none")
		}
	}
	return append(problems, more.done()...)
}

// climateRain sets the chain and the amounts, and gives the share of wet days by month.
func (g *Generator) climateRain(c *Climate) (share [12]float64) {
	g.amount = one
	g.rainless = math.IsNaN(c.Rain[0])
	if g.rainless {
		g.assumed = append(g.assumed, "rain is not drawn and wet days are not told from dry ones: no rain is given")
		return share
	}
	guessed := false
	for m := range share {
		rain := c.Rain[m] / float64(monthLength(m)) // mm d-1
		share[m] = c.WetDays[m]
		if math.IsNaN(share[m]) {
			share[m], guessed = rain/rainOfWetDay, true
		}
		share[m] = math.Min(share[m], math.Min(rain/wetDay, 1))
	}
	if guessed {
		g.assumed = append(g.assumed, fmt.Sprintf("a wet day has %g mm of rain (from memory), which gives the share of wet days", rainOfWetDay))
	}
	g.assumed = append(g.assumed, "chances of rain after a dry and a wet day: Geng et al. (1986); amounts of wet days are exponential")
	for i := range g.days {
		d, m := &g.days[i], monthOf(i)
		after := gengDry * share[m]
		d.wetAfter = [states]float64{after, math.Min(1, gengMore+after)}
		d.rain = wetDay
		if share[m] > 0 {
			d.rain = math.Max(wetDay, c.Rain[m]/float64(monthLength(m))/share[m])
		}
	}
	return share
}

// climateTemperature spreads the months' temperatures over the days, wet and dry about their mean.
func (g *Generator) climateTemperature(c *Climate, share [12]float64) {
	n := c.Normals
	dates := yearDates(sunYear-1, sunYear-1)
	low, high, mean := n.smooth(dates, n.Min), n.smooth(dates, n.Max), n.smooth(dates, n.Mean)
	warm, cold := math.Inf(-1), math.Inf(1)
	for _, T := range n.Mean {
		warm, cold = math.Max(warm, T), math.Min(cold, T)
	}
	assumed := false
	for i := range g.days {
		d, m := &g.days[i], monthOf(i)
		colder := math.Max(0, math.Min(warm-cold, warm-mean[i]))
		sd := c.Spread[m]
		if math.IsNaN(sd) {
			sd, assumed = spreadRule(colder, warm-cold), true
		}
		for s, part := range [states]float64{-share[m], 1 - share[m]} {
			for before := range states {
				d.temperature[warmest][kindOf(before, s)] = spreadOf{high[i] + part*wetTmax.at(colder), sd}
				d.temperature[coldestOfDay][kindOf(before, s)] = spreadOf{low[i] + part*wetTmin.at(colder), sd}
			}
		}
	}
	if assumed {
		g.assumed = append(g.assumed, fmt.Sprintf("daily temperatures scatter by %.1f K in the warmest and %.1f K in the coldest month (a rule that fits Harvard Forest)",
			spreadRule(0, warm-cold), spreadRule(warm-cold, warm-cold)))
	}
}

// climateClearness sets the distribution of clearness by month and state such that the month's mean stays.
func (g *Generator) climateClearness(c *Climate, share [12]float64) {
	n := c.Normals
	warm := math.Inf(-1)
	for _, T := range n.Mean {
		warm = math.Max(warm, T)
	}
	var top, days [12]float64
	for i := range g.days {
		top[monthOf(i)] += g.days[i].top
		days[monthOf(i)]++
	}
	var months [states][12]quantiles
	for m := range 12 {
		mean := n.Global[m] / (top[m] / days[m])
		if math.IsNaN(mean) {
			mean = angstromA + angstromB*n.SunshineShare[m]
		}
		if top[m] <= 0 {
			mean = 0
		}
		ratio := wetClearness.at(warm - n.Mean[m])
		months[dry][m], months[wet][m] = splitClearness(mean, share[m], ratio)
	}
	for s := range months {
		for before := range states {
			g.clear[kindOf(before, s)] = keepMonths(months[s])
		}
	}
}
