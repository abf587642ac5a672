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

// Spot is one spot of a map for one seedling.
type Spot struct {
	X, Y               float64 // m
	Light, LightLeafOn float64 // percent of full light
	Net                float64 // g C in a mean year
	Ratio              float64
}

// mapDays is how many weighted days stand for a month in maps from normals.
const mapDays = 4

// RunGrid maps a treatment: Spots[seedling][row*Columns+column]. Normals are brought to a few weighted days a month;
// break-even is not sought.
func RunGrid(p *Plan, q Grid) ([][]Spot, error) {
	if q.Treatment < 0 || q.Treatment >= len(p.Treatments) || q.Columns < 1 || q.Rows < 1 || !(q.Step > 0) {
		return nil, fmt.Errorf("a map needs a treatment of the plan, at least one row and column and a step above 0 m")
	}
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
	series := source.Series(p.Site, p.Sampling.Step, p.Par)
	above := light.NewAbove(series, p.Sampling.Sky, light.Map)
	r := &runner{plan: p, above: above, season: Mask(series, p.Season), opts: Options{Workers: max(1, q.Workers), Depth: Ledgers}}
	r.heights, r.heightOf = heights(p, Ledgers)
	r.prepared = prepare(p, above)
	s, err := newScene(p, &p.Treatments[q.Treatment], above)
	if err != nil {
		return nil, err
	}
	points := q.points(r.heights)
	out := make([][]Spot, len(p.Seedlings))
	for i := range out {
		out[i] = make([]Spot, q.Columns*q.Rows)
	}
	keepers := make([]*ledger.Keeper, r.opts.Workers)
	accounts := make([]ledger.Account, r.opts.Workers)
	s.light.Survey(points, r.opts.Workers, func(worker, point int, g *light.Regime) {
		if keepers[worker] == nil {
			keepers[worker] = ledger.NewKeeper(r.season, s.leafOn)
		}
		k := keepers[worker]
		k.Take(g)
		sums, _ := g.Over(r.season)
		for i := range p.Seedlings {
			if r.heightOf[i] != point%len(r.heights) {
				continue
			}
			a := &accounts[worker]
			k.Keep(r.prepared[i], a)
			out[i][point/len(r.heights)] = Spot{X: points[point].X, Y: points[point].Y, Light: sums.Percent(),
				LightLeafOn: k.LeafOnPercent(), Net: a.Total.Net(), Ratio: a.Total.Ratio()}
		}
	})
	return out, nil
}

// points are the grid's spots, every height of a spot in turn.
func (q Grid) points(heights []float64) []canopy.Point {
	out := make([]canopy.Point, 0, q.Columns*q.Rows*len(heights))
	for row := range q.Rows {
		for column := range q.Columns {
			for _, h := range heights {
				out = append(out, canopy.Point{
					X:      (float64(column) - float64(q.Columns-1)/2) * q.Step,
					Y:      (float64(row) - float64(q.Rows-1)/2) * q.Step,
					Height: h,
				})
			}
		}
	}
	return out
}
