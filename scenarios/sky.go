package scenarios

import (
	"math"
	"time"

	"shadeledger/canopy"
	"shadeledger/radiation/weather"
	"shadeledger/scenarios/ledger"
	"shadeledger/scenarios/light"
)

// drawStep is the sub-step of light in draws. Against quarter hours it moves light by 0.1 points and break-even by 0.02 in the median.
const drawStep = time.Hour

// Sky is the light above a stand on a few weighted days a month, painted once for many plans of one site.
type Sky struct{ above *light.Above }

// NewSky takes the normals of a plan, or those of its dated weather.
func NewSky(p *Plan) *Sky {
	source, step := p.Weather, max(p.Sampling.Step, drawStep)
	n, ok := source.(*weather.Normals)
	if !ok {
		n = source.Series(p.Site, p.Sampling.Step, p.Par).Normals(p.Par)
	}
	few := *n
	few.DaysPerMonth = mapDays
	return &Sky{light.NewAbove(few.Series(p.Site, step, p.Par), p.Sampling.Sky, light.Draw)}
}

// Changed is the sky of another year: light times the month's factor, air warmer by its offset. Patterns of the sky stay.
func (s *Sky) Changed(by [12]weather.MonthAnomaly) *Sky {
	above := *s.above
	above.Series = s.above.Series.Changed(by)
	return &Sky{&above}
}

// Mapper maps a plan of the sky's site, whose leaf area is corrected already, by one worker.
func (s *Sky) Mapper(p *Plan) *Mapper {
	m := &Mapper{runner{plan: p, above: s.above, season: Mask(s.above.Series, p.Season), opts: Options{Workers: 1, Depth: Ledgers}}}
	m.heights, m.heightOf = heights(p, Ledgers)
	m.prepared = prepare(p, s.above)
	return m
}

// Draw gives Spots[seedling][station] at stations of a treatment, with the break-even of each seedling at one of them.
func (m *Mapper) Draw(t *Treatment, stations []canopy.Station, at []int) ([][]Spot, error) {
	spots := make([][2]float64, len(stations))
	for i, s := range stations {
		spots[i] = [2]float64{s.X, s.Y}
	}
	return m.survey(t, spots, func(seedling, spot int) Depth {
		if at[seedling] == spot {
			return BreakEvens
		}
		return Ledgers
	})
}

// classAt places a seedling at a spot.
func (x *Spot) classAt(b ledger.BreakEven) {
	x.BreakEven = b
	x.Class = ledger.ClassOf(x.Net, x.LightLeafOn, b)
}

// YearsOf is the generator of a plan's years: fitted to its own days where these are enough, else from its normals.
func YearsOf(p *Plan) (*weather.Generator, error) {
	switch w := p.Weather.(type) {
	case *weather.Normals:
		return weather.GeneratorFromNormals(climate(p, w), p.Site)
	case *weather.Daily:
		if g, err := weather.FitGenerator(w.Rows, p.Site); err == nil {
			return g, nil
		}
	}
	s := p.Weather.Series(p.Site, p.Sampling.Step, p.Par)
	if g, err := weather.FitGenerator(s.Daily(p.Par), p.Site); err == nil {
		return g, nil
	}
	return weather.GeneratorFromNormals(climate(p, s.Normals(p.Par)), p.Site)
}

// climate is what normals tell a generator, with the plan's monthly rain; of wet days and of the spread of days they say nothing.
func climate(p *Plan, n *weather.Normals) weather.Climate {
	c := weather.Climate{Normals: n, Rain: p.Water.Rain}
	for m := range c.Rain {
		c.WetDays[m], c.Spread[m] = math.NaN(), math.NaN()
	}
	return c
}
