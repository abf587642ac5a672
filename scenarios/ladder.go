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
	// times is the break-even of each rung in neutral shade over that of the first.
	times []float64
}

// Ladder readies a seedling of the plan at heights, m, from its own upwards.
func (m *Mapper) Ladder(seedling int, heights []float64) *Ladder {
	plant := &m.plan.Seedlings[seedling].Plant
	l := &Ladder{Heights: heights}
	keeper := ledger.NewKeeper(m.season, m.season)
	var first float64
	for i, h := range heights {
		wood := 1.0
		if i > 0 {
			wood = plant.WoodAt(h)
		}
		r := prepareOne(m.plan, plant.Grown(wood), m.above)
		b := keeper.NeutralShade(r)
		if i == 0 {
			first = b.LeafOn
		}
		times := 1.0
		if b.Found && first > 0 {
			times = b.LeafOn / first
		}
		l.Wood, l.rungs, l.times = append(l.Wood, wood), append(l.rungs, r), append(l.times, times)
	}
	if plant.Ledger == ledger.FirstSeason {
		l.Own = len(l.rungs)
		l.rungs, l.times = append(l.rungs, m.prepared[seedling]), append(l.times, 1)
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

// Climb gives Spots[seedling][rung][spot] of a treatment, each rung in the light at its own height. Break-even is worked out for the first rung and carried to the higher
// ones as the ratio of both in neutral shade.
func (m *Mapper) Climb(t *Treatment, spots [][2]float64, ladders []*Ladder) ([][][]Spot, error) {
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
				if j == 0 || j == l.Own {
					x.BreakEven = k.BreakEven(r)
				}
				out[i][j][point/len(heights)] = x
			}
		}
	})
	for i, l := range ladders {
		l.carry(m.plan.Seedlings[i].Factor, out[i])
	}
	return out, nil
}

// carry gives every rung its break-even and class.
func (l *Ladder) carry(factor float64, rungs [][]Spot) {
	for j := range rungs {
		for k := range rungs[j] {
			x := &rungs[j][k]
			if b := rungs[0][k].BreakEven; j > 0 && j != l.Own && b.Found {
				x.BreakEven = ledger.NewBreakEven(b.Season*l.times[j], b.LeafOn*l.times[j], factor)
			}
			x.Class = ledger.ClassOf(x.Net, x.LightLeafOn, x.BreakEven)
		}
	}
}
