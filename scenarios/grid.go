package scenarios

import (
	"fmt"

	"shadeledger/canopy"
	"shadeledger/radiation/weather"
	"shadeledger/scenarios/ledger"
	"shadeledger/scenarios/light"
)

// Grid asks for a map: rows of spots from south to north, each from west to east, centred on the opening.
type Grid struct {
	Treatment     int // index in the plan
	Columns, Rows int
	Step          float64 // m between spots
	Workers       int
}

// Spot is one spot of a map for one seedling. BreakEven and Class are there where break-evens were asked for.
type Spot struct {
	X, Y               float64 // m
	Light, LightLeafOn float64 // percent of full light
	Net                float64 // g C in a mean year
	Ratio              float64
	BreakEven          ledger.BreakEven
	Class              ledger.Class
}

// mapDays is how many weighted days stand for a month in maps from normals.
const mapDays = 4

// Mapper maps treatments of one plan, its weather and plants worked out once. Normals are brought to a few weighted days a month.
type Mapper struct{ runner }

// NewMapper readies a plan, its leaf area corrected by readings.
func NewMapper(p *Plan, workers int) (*Mapper, error) {
	p, _, err := Corrected(p)
	if err != nil {
		return nil, err
	}
	source := p.Weather
	if n, ok := source.(*weather.Normals); ok {
		few := *n
		few.DaysPerMonth = mapDays
		source = &few
	}
	sky := &Sky{light.NewAbove(source.Series(p.Site, p.Sampling.Step, p.Par), p.Sampling.Sky, light.Map)}
	m := sky.Mapper(p)
	m.opts.Workers = max(1, workers)
	return m, nil
}

// Plan is the plan with its leaf area corrected.
func (m *Mapper) Plan() *Plan { return m.plan }

// Map gives Spots[seedling][spot] of a treatment at spots in m east and north of its centre; with depth BreakEvens their break-even and class too.
func (m *Mapper) Map(t *Treatment, spots [][2]float64, depth Depth) ([][]Spot, error) {
	return m.survey(t, spots, func(int, int) Depth { return depth })
}

// survey maps spots, each to its depth.
func (m *Mapper) survey(t *Treatment, spots [][2]float64, depth func(seedling, spot int) Depth) ([][]Spot, error) {
	s, err := newScene(m.plan, t, m.above)
	if err != nil {
		return nil, err
	}
	points := make([]canopy.Point, 0, len(spots)*len(m.heights))
	for _, q := range spots {
		for _, h := range m.heights {
			points = append(points, canopy.Point{X: q[0], Y: q[1], Height: h})
		}
	}
	out := make([][]Spot, len(m.plan.Seedlings))
	for i := range out {
		out[i] = make([]Spot, len(spots))
	}
	keepers := make([]*ledger.Keeper, m.opts.Workers)
	accounts := make([]ledger.Account, m.opts.Workers)
	s.light.Survey(points, m.opts.Workers, func(worker, point int, g *light.Regime) {
		if keepers[worker] == nil {
			keepers[worker] = ledger.NewKeeper(m.season, s.leafOn)
		}
		k := keepers[worker]
		k.Take(g)
		sums, _ := g.Over(m.season)
		for i := range m.plan.Seedlings {
			if m.heightOf[i] != point%len(m.heights) {
				continue
			}
			a := &accounts[worker]
			k.Keep(m.prepared[i], a)
			x := Spot{X: points[point].X, Y: points[point].Y, Light: sums.Percent(), LightLeafOn: k.LeafOnPercent(), Net: a.Total.Net(), Ratio: a.Total.Ratio()}
			if depth(i, point/len(m.heights)) == BreakEvens {
				x.classAt(k.BreakEven(m.prepared[i]))
			}
			out[i][point/len(m.heights)] = x
		}
	})
	return out, nil
}

// RunGrid maps a treatment: Spots[seedling][row*Columns+column], without break-evens.
func RunGrid(p *Plan, q Grid) ([][]Spot, error) {
	if q.Treatment < 0 || q.Treatment >= len(p.Treatments) || q.Columns < 1 || q.Rows < 1 || !(q.Step > 0) {
		return nil, fmt.Errorf("a map needs a treatment of the plan, at least one row and column and a step above 0 m")
	}
	m, err := NewMapper(p, q.Workers)
	if err != nil {
		return nil, err
	}
	return m.Map(&m.plan.Treatments[q.Treatment], q.spots(), Ledgers)
}

// spots of the grid, in m from its middle.
func (q Grid) spots() (out [][2]float64) {
	for row := range q.Rows {
		for column := range q.Columns {
			out = append(out, [2]float64{(float64(column) - float64(q.Columns-1)/2) * q.Step, (float64(row) - float64(q.Rows-1)/2) * q.Step})
		}
	}
	return out
}

// Months is a seedling's net at a spot by month of the mean year, January first, g C.
func (m *Mapper) Months(t *Treatment, spot [2]float64, seedling int) (net [12]float64, err error) {
	s, err := newScene(m.plan, t, m.above)
	if err != nil {
		return net, err
	}
	series := m.above.Series
	point := canopy.Point{X: spot[0], Y: spot[1], Height: m.heights[m.heightOf[seedling]]}
	s.light.Survey([]canopy.Point{point}, 1, func(_, _ int, g *light.Regime) {
		k := ledger.NewKeeper(m.season, s.leafOn)
		k.Take(g)
		var a ledger.Account
		k.Keep(m.prepared[seedling], &a)
		for d, l := range a.Days {
			net[series.Days[d].Month-1] += l.Net() * series.Days[d].Weight / float64(series.Years)
		}
	})
	return net, nil
}
