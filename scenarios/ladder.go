package scenarios

import (
	"shadeledger/canopy"
	"shadeledger/scenarios/ledger"
	"shadeledger/scenarios/light"
)

// Ladder is one seedling at several sizes, worked out for a series.
type Ladder struct {
	Heights []float64 // m, rising
	Wood    []float64 // times the seedling's own
	// Own is the rung of the plant as the plan gives it: the first, or one after the last for a first-season plant, whose own leaves last one year.
	Own   int
	rungs []*ledger.Prepared
}

// Ladder readies a seedling of the plan at heights, m, from its own upwards.
func (m *Mapper) Ladder(seedling int, heights []float64) *Ladder {
	plant := &m.plan.Seedlings[seedling].Plant
	l := &Ladder{Heights: heights}
	for i, h := range heights {
		wood := 1.0
		if i > 0 {
			wood = plant.WoodAt(h)
		}
		l.Wood, l.rungs = append(l.Wood, wood), append(l.rungs, prepareOne(m.plan, plant.Grown(wood), m.above))
	}
	if plant.Ledger == ledger.FirstSeason {
		l.Own = len(l.rungs)
		l.rungs = append(l.rungs, m.prepared[seedling])
	}
	return l
}

// height of a rung, m.
func (l *Ladder) height(rung int) float64 {
	if rung < len(l.Heights) {
		return l.Heights[rung]
	}
	return l.Heights[0]
}

// Climb gives Spots[seedling][rung][spot] of a treatment, each rung in the light at its own height. Break-even is there for the first rung and the
// plan's own plant; with depth BreakEvens for every rung.
func (m *Mapper) Climb(t *Treatment, spots [][2]float64, ladders []*Ladder, depth Depth) ([][][]Spot, error) {
	s, err := newScene(m.plan, t, m.above)
	if err != nil {
		return nil, err
	}
	var heights []float64
	at := map[float64]int{}
	out := make([][][]Spot, len(ladders))
	for i, l := range ladders {
		out[i] = make([][]Spot, len(l.rungs))
		for j := range l.rungs {
			out[i][j] = make([]Spot, len(spots))
			if _, known := at[l.height(j)]; !known {
				at[l.height(j)] = len(heights)
				heights = append(heights, l.height(j))
			}
		}
	}
	points := make([]canopy.Point, 0, len(spots)*len(heights))
	for _, q := range spots {
		for _, h := range heights {
			points = append(points, canopy.Point{X: q[0], Y: q[1], Height: h})
		}
	}
	keepers := make([]*ledger.Keeper, m.opts.Workers)
	accounts := make([]ledger.Account, m.opts.Workers)
	s.light.Survey(points, m.opts.Workers, func(worker, point int, g *light.Regime) {
		if keepers[worker] == nil {
			keepers[worker] = ledger.NewKeeper(m.season, s.leafOn)
		}
		k, a := keepers[worker], &accounts[worker]
		k.Take(g)
		sums, _ := g.Over(m.season)
		for i, l := range ladders {
			for j, r := range l.rungs {
				if at[l.height(j)] != point%len(heights) {
					continue
				}
				k.Keep(r, a)
				x := Spot{X: points[point].X, Y: points[point].Y, Light: sums.Percent(), LightLeafOn: k.LeafOnPercent(), Net: a.Total.Net(), Ratio: a.Total.Ratio()}
				if depth == BreakEvens || j == 0 || j == l.Own {
					x.BreakEven = k.BreakEven(r)
				}
				out[i][j][point/len(heights)] = x
			}
		}
	})
	return out, nil
}
