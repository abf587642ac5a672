package decide

import (
	"math"

	"shadeledger/canopy"
	"shadeledger/scenarios"
	"shadeledger/scenarios/ledger"
)

// Pace of closing: early goes with fast crowns and quick leaves.
type Pace int

// The paces.
const (
	Late Pace = iota
	Likely
	Early
)

// YearRow is one seedling at one station in one year. Ranges span the paces.
type YearRow struct {
	Treatment, Station, Species string
	Year                        int
	Light                       [3]float64 // percent over the season, by pace
	LeafOn                      [3]float64
	Class                       [3]ledger.Class
}

// Lost is when one seedling at one station falls below its working threshold, years after the cut by pace: 0 where it is not above it to begin with, +Inf
// where it stays above to the horizon.
type Lost struct {
	Treatment, Station, Species string
	Year                        [3]float64
}

// Future is every year of every treatment.
type Future struct {
	Plan *scenarios.Plan
	Rows []YearRow
	Lost []Lost
	Runs int
}

// worked are the years in which light is worked out; between them it is linear. Lateral growth stops after 11 to 16 years, leaves are back after 8 to 20.
var worked = []int{0, 2, 4, 6, 8, 10, 12, 14, 16, 20, 25, 30, 40, 50, 60}

// at is what a station gives a seedling in a worked year.
type at struct {
	light, leafOn, net, threshold float64
}

// FindYears follows every treatment for the plan's horizon: border crowns grow in and thinned canopies get their leaf area back, at three paces.
// Stations keep their places, seedlings their size. Light is that of maps: a few weighted days a month.
func FindYears(p *scenarios.Plan, workers int) (*Future, error) {
	m, err := scenarios.NewMapper(p, workers)
	if err != nil {
		return nil, err
	}
	f := &Future{Plan: m.Plan()}
	years := []int{}
	for _, y := range worked {
		if y < f.Plan.Years.Horizon {
			years = append(years, y)
		}
	}
	years = append(years, f.Plan.Years.Horizon)
	for i := range f.Plan.Treatments {
		if err := f.treatment(m, &f.Plan.Treatments[i], years); err != nil {
			return nil, err
		}
	}
	return f, nil
}

// treatment follows one treatment.
func (f *Future) treatment(m *scenarios.Mapper, t *scenarios.Treatment, years []int) error {
	stations := f.Plan.StationsOf(t)
	spots := make([][2]float64, len(stations))
	for k, s := range stations {
		spots[k] = [2]float64{s.X, s.Y}
	}
	var values [3][][][]scenarios.Spot // by pace, worked year, seedling, station
	for pace := Late; pace <= Early; pace++ {
		for n, year := range years {
			if n == 0 && pace > Late {
				values[pace] = append(values[pace], values[Late][0])
				continue
			}
			later, changed, err := ahead(f.Plan, t, float64(year), pace)
			if err != nil {
				return err
			}
			if !changed && n > 0 {
				values[pace] = append(values[pace], values[pace][n-1])
				continue
			}
			x, err := m.Map(later, spots, scenarios.BreakEvens)
			if err != nil {
				return err
			}
			f.Runs++
			values[pace] = append(values[pace], x)
		}
	}
	for k, s := range stations {
		for i, seedling := range f.Plan.Seedlings {
			lost := Lost{Treatment: t.Name, Station: s.Name, Species: seedling.Name, Year: [3]float64{math.Inf(1), math.Inf(1), math.Inf(1)}}
			for year := 0; year <= f.Plan.Years.Horizon; year++ {
				row := YearRow{Treatment: t.Name, Station: s.Name, Species: seedling.Name, Year: year}
				for pace := Late; pace <= Early; pace++ {
					row.set(pace, inYear(years, values[pace], i, k, year))
					if row.Class[pace] != ledger.Comfortable && math.IsInf(lost.Year[pace], 1) {
						lost.Year[pace] = float64(year)
					}
				}
				f.Rows = append(f.Rows, row)
			}
			f.Lost = append(f.Lost, lost)
		}
	}
	return nil
}

// set places a seedling in a year: below where it loses carbon, comfortable at its threshold.
func (r *YearRow) set(pace Pace, x at) {
	r.Light[pace], r.LeafOn[pace] = x.light, x.leafOn
	switch {
	case x.net < 0:
		r.Class[pace] = ledger.Below
	case x.leafOn >= x.threshold:
		r.Class[pace] = ledger.Comfortable
	default:
		r.Class[pace] = ledger.Marginal
	}
}

// inYear is what a station gives a seedling, linear between worked years.
func inYear(years []int, values [][][]scenarios.Spot, seedling, station, year int) at {
	of := func(i int) at {
		x := values[i][seedling][station]
		y := at{x.Light, x.LightLeafOn, x.Net, 100}
		if x.BreakEven.Found {
			y.threshold = x.BreakEven.Threshold.LeafOn
		}
		return y
	}
	i := 0
	for i+1 < len(years) && years[i+1] <= year {
		i++
	}
	a := of(i)
	if years[i] == year || i+1 == len(years) {
		return a
	}
	b := of(i + 1)
	s := float64(year-years[i]) / float64(years[i+1]-years[i])
	mix := func(x, y float64) float64 { return x + s*(y-x) }
	return at{mix(a.light, b.light), mix(a.leafOn, b.leafOn), mix(a.net, b.net), mix(a.threshold, b.threshold)}
}

// Years until leaf area is back after a light and a heavy thinning, and the share cut that is heavy (Chan et al. 2006: light thinnings
// after 8; Beaudet et al. 2004 and Domke 2006: 13 to 20, its ends with the paces).
const (
	lightRegrowth, heavyRegrowth = 8.0, 16.0
	heavy                        = 0.5
)

var regrowthPace = [3]float64{Late: 1.25, Likely: 1, Early: 0.8}

// ahead is a treatment some years after the cut; changed tells whether anything still moves.
func ahead(p *scenarios.Plan, t *scenarios.Treatment, years float64, pace Pace) (later *scenarios.Treatment, changed bool, err error) {
	out := *t
	full, now := scenarios.LeafArea(p.Stand.Layers), scenarios.LeafArea(t.Matrix)
	if now > 0 && now < full {
		span := p.Years.Regrowth[Early-pace] // quick leaves go with early
		if span == 0 {
			span = regrowthPace[pace] * (lightRegrowth + (heavyRegrowth-lightRegrowth)*math.Min(1, (1-now/full)/heavy))
		}
		back := math.Min(1, years/span)
		out.Matrix = append([]scenarios.Layer(nil), t.Matrix...)
		closed, opened := clumping(p.Stand.Layers), clumping(t.Matrix)
		for i := range out.Matrix {
			l := &out.Matrix[i]
			l.LAI *= 1 + back*(full/now-1)
			gaps := 1 + back*(closed/opened-1) // between crowns, which fill them again
			l.Clumping = math.Min(1, l.Clumping*gaps)
			l.WAI /= gaps // wood stands at random
		}
		changed = changed || years <= span+2
	}
	c, ok := t.Opening.(scenarios.Cleared)
	if !ok {
		return &out, changed, nil
	}
	k := canopy.Closing{Speed: p.Years.Closing[pace], Stop: canopy.ClosingStop(c.Stems.Area())}
	crowns, err := canopy.Inset(c.Crowns, k.Advance(years))
	if err != nil { // closed over: a speck is left
		if crowns, err = canopy.NewCircle(speck); err != nil {
			return nil, false, err
		}
	}
	out.Opening = scenarios.Cleared{Stems: c.Stems, Crowns: crowns, Inside: c.Inside, File: c.File}
	return &out, changed || years <= k.Stop+4, nil
}

// speck is the diameter of an opening that is none, m.
const speck = 0.02

// clumping of layers, by leaf area.
func clumping(layers []scenarios.Layer) float64 {
	sum := 0.0
	for _, l := range layers {
		sum += l.Clumping * l.LAI
	}
	return sum / scenarios.LeafArea(layers)
}
