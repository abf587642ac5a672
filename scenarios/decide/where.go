package decide

import (
	"math"
	"sort"
	"time"

	"shadeledger/canopy"
	"shadeledger/scenarios"
	"shadeledger/scenarios/ledger"
)

// Zone is a piece of ground in one treatment where one seedling is comfortable: plant here.
type Zone struct {
	Treatment, Species string
	Number             int     // 1 for the largest
	Area               float64 // m2
	Share              float64 // of the crown outline's area, 0..1; ground outside it counts in Area, not here
	Bearing            float64 // rad, true, of its middle from the opening's centre
	Distance           float64 // m
	Light              float64 // percent, mean over the season
	Limiting           []time.Month
}

// Shares is how much of the crown outline is of each class for one seedling, 0..1.
type Shares struct {
	Treatment, Species string
	Of                 [3]float64 // by ledger.Class
	Light              [3]float64 // percent, mean of each
	// Best and Worst bearing of the long side, rad, with the comfortable share there; NaN where they were not tried.
	Best, BestShare, Worst, LeastGood float64
}

// Places is what `where` finds: shares first, then zones, by treatment and seedling in the plan's order.
type Places struct {
	Plan   *scenarios.Plan
	Shares []Shares
	Zones  []Zone
	Whole  []string // treatments without an opening: no places to find
}

// fewestCells is the smallest zone, in cells of the grid.
const fewestCells = 4

// field is a map of one treatment: cells of the grid from the south-west, half a tree height beyond the crowns.
type field struct {
	step    float64
	columns int
	spots   [][2]float64
	inside  []bool // the crown outline
	near    []bool // it and half a tree height beyond
}

// FindPlaces maps every opening of the plan on its grid.
func FindPlaces(p *scenarios.Plan, workers int, turn bool) (*Places, error) {
	m, err := scenarios.NewMapper(p, workers)
	if err != nil {
		return nil, err
	}
	out := &Places{Plan: m.Plan()}
	for i := range m.Plan().Treatments {
		t := &m.Plan().Treatments[i]
		c, ok := t.Opening.(scenarios.Cleared)
		if !ok {
			out.Whole = append(out.Whole, t.Name)
			continue
		}
		if err := out.map1(m, t, c, turn); err != nil {
			return nil, err
		}
	}
	return out, nil
}

func (out *Places) map1(m *scenarios.Mapper, t *scenarios.Treatment, c scenarios.Cleared, turn bool) error {
	f := newField(c.Crowns, m.Plan().Sampling.Grid, m.Plan().Stand.Height/2)
	fine, err := m.Map(t, f.spots, scenarios.Ledgers)
	if err != nil {
		return err
	}
	thresholds, err := f.thresholds(m, t)
	if err != nil {
		return err
	}
	for i, s := range m.Plan().Seedlings {
		class := make([]ledger.Class, len(f.spots))
		for k, x := range fine[i] {
			switch {
			case x.Net < 0:
				class[k] = ledger.Below
			case x.LightLeafOn >= thresholds[i][k]:
				class[k] = ledger.Comfortable
			default:
				class[k] = ledger.Marginal
			}
		}
		share := f.shares(fine[i], class)
		share.Treatment, share.Species = t.Name, s.Name
		if turn {
			if err := share.turned(m, t, c, i); err != nil {
				return err
			}
		}
		out.Shares = append(out.Shares, share)
		zones, err := f.zones(m, t, i, fine[i], class)
		if err != nil {
			return err
		}
		out.Zones = append(out.Zones, zones...)
	}
	return nil
}

func newField(crowns canopy.Outline, step, beyond float64) *field {
	reach := 0.0
	for d := range 72 {
		reach = math.Max(reach, canopy.Reach(crowns, float64(d)*math.Pi/36))
	}
	n := int(math.Ceil((reach + beyond) / step))
	f := &field{step: step, columns: 2*n + 1}
	wide, err := canopy.Outset(crowns, beyond)
	for j := -n; j <= n; j++ {
		for i := -n; i <= n; i++ {
			x, y := float64(i)*step, float64(j)*step
			in := crowns.Contains(x, y)
			f.spots = append(f.spots, [2]float64{x, y})
			f.inside = append(f.inside, in)
			f.near = append(f.near, in || err == nil && wide.Contains(x, y))
		}
	}
	return f
}

// between is about how far apart spots lie whose break-even is sought, m; it moves slowly over the ground and is taken as linear between them.
const between = 3

// thresholds are the leaf-on working thresholds of every seedling at every cell, percent.
func (f *field) thresholds(m *scenarios.Mapper, t *scenarios.Treatment) ([][]float64, error) {
	coarse := max(1, int(math.Round(between/f.step)))
	nodes := (f.columns-1)/coarse + 2
	var spots [][2]float64
	for j := range nodes {
		for i := range nodes {
			spots = append(spots, [2]float64{f.spots[0][0] + float64(i*coarse)*f.step, f.spots[0][1] + float64(j*coarse)*f.step})
		}
	}
	maps, err := m.Map(t, spots, scenarios.BreakEvens)
	if err != nil {
		return nil, err
	}
	out := make([][]float64, len(maps))
	for s, at := range maps {
		value := func(i, j int) float64 {
			if b := at[j*nodes+i].BreakEven; b.Found {
				return b.Threshold.LeafOn
			}
			return 100
		}
		out[s] = make([]float64, len(f.spots))
		for k := range f.spots {
			i, j := k%f.columns, k/f.columns
			x, y := float64(i%coarse)/float64(coarse), float64(j%coarse)/float64(coarse)
			i, j = i/coarse, j/coarse
			out[s][k] = (1-y)*((1-x)*value(i, j)+x*value(i+1, j)) + y*((1-x)*value(i, j+1)+x*value(i+1, j+1))
		}
	}
	return out, nil
}

// shares counts the classes inside the crowns.
func (f *field) shares(spots []scenarios.Spot, class []ledger.Class) Shares {
	s := Shares{Best: math.NaN(), BestShare: math.NaN(), Worst: math.NaN(), LeastGood: math.NaN()}
	n := 0.0
	for k, in := range f.inside {
		if in {
			s.Of[class[k]]++
			s.Light[class[k]] += spots[k].Light
			n++
		}
	}
	for c := range s.Of {
		if s.Of[c] > 0 {
			s.Light[c] /= s.Of[c]
			s.Of[c] /= n
		} else {
			s.Light[c] = math.NaN()
		}
	}
	return s
}

// zones are the connected pieces of comfortable ground, the largest first.
func (f *field) zones(m *scenarios.Mapper, t *scenarios.Treatment, seedling int, spots []scenarios.Spot, class []ledger.Class) ([]Zone, error) {
	good := func(k int) bool { return f.near[k] && class[k] == ledger.Comfortable }
	seen := make([]bool, len(f.spots))
	total := 0.0
	for _, in := range f.inside {
		if in {
			total++
		}
	}
	type piece struct{ cells []int }
	var pieces []piece
	for k := range f.spots {
		if seen[k] || !good(k) {
			continue
		}
		p := piece{[]int{k}}
		seen[k] = true
		for head := 0; head < len(p.cells); head++ {
			for _, next := range f.beside(p.cells[head]) {
				if !seen[next] && good(next) {
					seen[next] = true
					p.cells = append(p.cells, next)
				}
			}
		}
		if len(p.cells) >= fewestCells {
			pieces = append(pieces, p)
		}
	}
	sort.SliceStable(pieces, func(a, b int) bool { return len(pieces[a].cells) > len(pieces[b].cells) })
	var out []Zone
	for n, p := range pieces {
		z := Zone{Treatment: t.Name, Species: m.Plan().Seedlings[seedling].Name, Number: n + 1, Area: float64(len(p.cells)) * f.step * f.step}
		var x, y float64
		for _, k := range p.cells {
			x += f.spots[k][0] / float64(len(p.cells))
			y += f.spots[k][1] / float64(len(p.cells))
			z.Light += spots[k].Light / float64(len(p.cells))
			if f.inside[k] {
				z.Share += 1 / total
			}
		}
		z.Distance, z.Bearing = math.Hypot(x, y), math.Mod(math.Atan2(x, y)+2*math.Pi, 2*math.Pi)
		middle := p.cells[0]
		for _, k := range p.cells {
			if math.Hypot(f.spots[k][0]-x, f.spots[k][1]-y) < math.Hypot(f.spots[middle][0]-x, f.spots[middle][1]-y) {
				middle = k
			}
		}
		months, err := m.Months(t, f.spots[middle], seedling)
		if err != nil {
			return nil, err
		}
		for month := m.Plan().Season.From.Month; ; month = month%12 + 1 {
			if months[month-1] < 0 {
				z.Limiting = append(z.Limiting, month)
			}
			if month == m.Plan().Season.To.Month {
				break
			}
		}
		out = append(out, z)
	}
	return out, nil
}

// beside are the four neighbours of a cell.
func (f *field) beside(k int) (out []int) {
	if i := k % f.columns; i > 0 {
		out = append(out, k-1)
		if i < f.columns-1 {
			out = append(out, k+1)
		}
	} else if f.columns > 1 {
		out = append(out, k+1)
	}
	if k >= f.columns {
		out = append(out, k-f.columns)
	}
	if k+f.columns < len(f.spots) {
		out = append(out, k+f.columns)
	}
	return out
}

// turned tries the bearings 0 to 170 degrees by 10 of an ellipse or a strip.
func (s *Shares) turned(m *scenarios.Mapper, t *scenarios.Treatment, c scenarios.Cleared, seedling int) error {
	var width, length float64
	outline := func(length, width, φ float64) (canopy.Outline, error) { return canopy.NewEllipse(length, width, φ) }
	switch o := c.Crowns.(type) {
	case canopy.Ellipse:
		length, width, _ = o.Sides()
	case canopy.Strip:
		length, width, _ = o.Sides()
		outline = func(length, width, φ float64) (canopy.Outline, error) { return canopy.NewStrip(length, width, φ) }
	default:
		return nil
	}
	s.BestShare, s.LeastGood = -1, 2
	for d := 0; d < 180; d += 10 {
		φ := float64(d) * math.Pi / 180
		crowns, err := outline(length, width, φ)
		if err != nil {
			return err
		}
		turned := *t
		turned.Opening = scenarios.Cleared{Stems: c.Stems, Crowns: crowns, Inside: c.Inside}
		maps, err := m.Map(&turned, evenly(crowns, math.Min(length, width)/across, math.Max(length, width)/2), scenarios.BreakEvens)
		if err != nil {
			return err
		}
		share := 0.0
		for _, x := range maps[seedling] {
			if x.Class == ledger.Comfortable {
				share += 1 / float64(len(maps[seedling]))
			}
		}
		if share > s.BestShare {
			s.Best, s.BestShare = φ, share
		}
		if share < s.LeastGood {
			s.Worst, s.LeastGood = φ, share
		}
	}
	return nil
}
