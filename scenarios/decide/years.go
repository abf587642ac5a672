package decide

import (
	"math"
	"slices"

	"shadeledger/scenarios"
	"shadeledger/scenarios/ledger"
)

// YearRow is one seedling at one station in one year. Ranges span the paces.
type YearRow struct {
	Treatment, Station, Species string
	Year                        int
	Light                       [3]float64 // percent over the season at the seedling's height, by pace
	LeafOn                      [3]float64
	Height                      [3]float64 // m
	Net                         [3]float64 // g C in the year
	Class                       [3]ledger.Class
	StockLight                  [3]float64 // percent over the season at the height of the plan's own size
	StockClass                  [3]ledger.Class
}

// Span is what becomes of one seedling at one station, in years after the cut by pace; +Inf is not within the horizon.
type Span struct {
	Treatment, Station, Species string
	Inside                      bool
	Lost                        [3]float64 // the first year from which it is not comfortable any more; 0 where it never is
	Stock                       [3]float64 // the same for new stock of the plan's size, planted in that year
	Above                       [3]float64 // the first year in which it stands above the treatment's understory; 0 where there is none above it
	Dies                        [3]float64 // after three years of loss in a row
}

// Reentry is the year by which the crew is due again for a seedling: the first in which no station inside keeps it comfortable; 0 where none does to begin with.
type Reentry struct {
	Treatment, Species string
	Year               [3]float64
	Stock              [3]float64 // the same for new stock of the plan's size: until then it can be planted
	Best               int        // index in Spans of the station that keeps it longest at the likely pace
}

// Future is every year of every treatment.
type Future struct {
	Plan      *scenarios.Plan
	Rows      []YearRow // by treatment, station, seedling, year
	Spans     []Span    // by treatment, station, seedling
	Reentries []Reentry // by treatment, seedling
	Runs      int
}

// FindYears follows every treatment for the plan's horizon: border crowns grow in, thinned canopies get their leaf area back, seedlings grow from their own net, at
// three paces. Stations keep their places. Light is that of maps: a few weighted days a month.
func FindYears(p *scenarios.Plan, workers int) (*Future, error) {
	m, err := scenarios.NewMapper(p, workers)
	if err != nil {
		return nil, err
	}
	f := &Future{Plan: m.Plan()}
	for i := range f.Plan.Treatments {
		if err := f.treatment(m, &f.Plan.Treatments[i]); err != nil {
			return nil, err
		}
	}
	return f, nil
}

// treatment follows one treatment.
func (f *Future) treatment(m *scenarios.Mapper, t *scenarios.Treatment) error {
	c := courseOf(f.Plan, t)
	tracks, place := c.tracks(f.Plan.Years.Horizon)
	ladders := make([]*scenarios.Ladder, len(f.Plan.Seedlings))
	for i := range ladders {
		ladders[i] = m.Ladder(i, rungs(f.Plan.Seedlings[i].Height, ceiling(&f.Plan.Stand), t.Understory))
	}
	if err := f.light(m, t, tracks, ladders); err != nil {
		return err
	}
	opening, cleared := t.Opening.(scenarios.Cleared)
	from := len(f.Spans)
	for k, s := range f.Plan.StationsOf(t) {
		inside := !cleared || opening.Crowns.Contains(s.X, s.Y)
		for i := range f.Plan.Seedlings {
			plant := &f.Plan.Seedlings[i]
			one := climber{plant: &plant.Plant, ladder: ladders[i], tracks: tracks, place: place, over: competing(t, plant.Height), sees: i, station: k}
			f.write(&one, Span{Treatment: t.Name, Station: s.Name, Species: plant.Name, Inside: inside})
		}
	}
	f.reenter(from, t.Name)
	return nil
}

// competing is the top of the understory above a seedling, m; 0 where nothing stands above it.
func competing(t *scenarios.Treatment, height float64) (top float64) {
	for _, u := range t.Understory {
		if u.Top > height {
			top = math.Max(top, u.Top)
		}
	}
	return top
}

// light works the tracks out.
func (f *Future) light(m *scenarios.Mapper, t *scenarios.Treatment, tracks [3]*track, ladders []*scenarios.Ladder) error {
	stations := f.Plan.StationsOf(t)
	spots := make([][2]float64, len(stations))
	for k, s := range stations {
		spots[k] = [2]float64{s.X, s.Y}
	}
	for pace, tr := range tracks {
		for n := len(tr.values); n < len(tr.u); n++ {
			if n == 0 && pace > 0 {
				tr.values = append(tr.values, tracks[0].values[0])
				continue
			}
			if n > 0 && tr.states[n] == tr.states[n-1] && (tr.whole(n-1) || !tr.whole(n)) {
				tr.values = append(tr.values, tr.values[n-1])
				continue
			}
			then, err := later(f.Plan, t, tr.states[n])
			if err != nil {
				return err
			}
			depth := scenarios.Ledgers
			if tr.whole(n) {
				depth = scenarios.BreakEvens
			}
			x, err := m.Climb(then, spots, ladders, depth)
			if err != nil {
				return err
			}
			f.Runs++
			tr.values = append(tr.values, x)
		}
	}
	for _, tr := range tracks {
		tr.thresholds(f.Plan)
	}
	return nil
}

// write follows a seedling at every pace and keeps its rows.
func (f *Future) write(c *climber, s Span) {
	var lives [3]life
	for pace := Late; pace <= Early; pace++ {
		l := c.follow(pace, f.Plan.Years.Horizon)
		lives[pace] = l
		s.Lost[pace], s.Stock[pace], s.Above[pace], s.Dies[pace] = l.lost, l.stock, l.above, l.dies
	}
	s.Lost, s.Dies = ends(s.Lost), ends(s.Dies)
	for year := 0; year <= f.Plan.Years.Horizon; year++ {
		row := YearRow{Treatment: s.Treatment, Station: s.Station, Species: s.Species, Year: year}
		for pace := Late; pace <= Early; pace++ {
			l := &lives[pace]
			row.Light[pace], row.LeafOn[pace], row.Net[pace] = l.at[year].light, l.at[year].leafOn, l.at[year].net
			row.Height[pace], row.Class[pace] = l.height[year], l.class[year]
			row.StockLight[pace], row.StockClass[pace] = l.fresh[year].light, l.fresh[year].class()
		}
		f.Rows = append(f.Rows, row)
	}
	f.Spans = append(f.Spans, s)
}

// ends puts the first year to the early and the last to the late pace: a seedling kept smaller by a faster pace may do with less light for a little longer.
func ends(years [3]float64) [3]float64 {
	years[Early], years[Late] = slices.Min(years[:]), slices.Max(years[:])
	return years
}

// reenter finds the years in which the treatment's last stations inside are lost.
func (f *Future) reenter(from int, treatment string) {
	n := len(f.Plan.Seedlings)
	for i := range n {
		r := Reentry{Treatment: treatment, Species: f.Plan.Seedlings[i].Name, Best: -1}
		for k := from + i; k < len(f.Spans); k += n {
			s := &f.Spans[k]
			if !s.Inside {
				continue
			}
			for pace := range s.Lost {
				r.Year[pace], r.Stock[pace] = math.Max(r.Year[pace], s.Lost[pace]), math.Max(r.Stock[pace], s.Stock[pace])
			}
			if r.Best < 0 || longer(s, &f.Spans[r.Best]) {
				r.Best = k
			}
		}
		if r.Best < 0 { // no station lies inside
			r.Best = from + i
			r.Year, r.Stock = f.Spans[r.Best].Lost, f.Spans[r.Best].Stock
		}
		f.Reentries = append(f.Reentries, r)
	}
}

// longer compares by the likely pace, then by the early and the late one.
func longer(a, b *Span) bool {
	for _, pace := range []Pace{Likely, Early, Late} {
		if a.Lost[pace] != b.Lost[pace] {
			return a.Lost[pace] > b.Lost[pace]
		}
	}
	return false
}
