package decide

import (
	"context"
	"math"
	"slices"
	"sync/atomic"

	"shadeledger/canopy"
	"shadeledger/radiation/weather"
	"shadeledger/scenarios"
	"shadeledger/scenarios/ledger"
	"shadeledger/scenarios/light"
)

// coarse is how many spots stand beside each other over the short side in draws: a cell is a twentieth of the opening.
const coarse = 5

// Range finds the sizes again for draws of everything that is not known for sure, each in a generated year, and gives every row its 5th and 95th
// percentile. A cancelled context keeps the draws that were done, at least leastDraws or none.
func (t *Sizes) Range(ctx context.Context, p *scenarios.Plan, q SpreadQuery) error {
	w, err := newWorld(p, q.Seed, 0)
	if err != nil {
		return err
	}
	drawn := w.drawn(q.Count)
	best, err := t.steps(w, w.bestInputs(), meanYear())
	if err != nil {
		return err
	}
	found := make([][]int, q.Count) // by draw: the steps of every row; nil where it was not run
	failed := make([]error, q.Count)
	var done atomic.Int64
	light.Share(q.Count, q.Workers, func(_, i int) {
		if ctx.Err() != nil {
			return
		}
		found[i], failed[i] = t.steps(w, drawn[i], w.years.Anomaly(w.seed, uint64(i)))
		if n := int(done.Add(1)); q.Progress != nil {
			q.Progress(n)
		}
	})
	for _, err := range failed {
		if err != nil {
			return err
		}
	}
	found = slices.DeleteFunc(found, func(steps []int) bool { return steps == nil })
	if t.Drawn = len(found); t.Drawn < leastDraws {
		return nil
	}
	step := stepOfHeight * t.Plan.Stand.Height
	most := int(math.Floor(t.Query.UpTo/step + 1e-9))
	for r := range t.Rows {
		if row := &t.Rows[r]; row.Found { // draws look at fewer spots: they are moved to where the best values' own answer is
			move := int(math.Round(row.Size/step)) - best[r]
			for i := range found {
				if found[i][r] <= most {
					found[i][r] += move
				}
			}
		}
		t.Rows[r].ranged(found, r, most, step)
	}
	return nil
}

// ranged gives a row the percentiles of its steps: those that no draw is finer than, so that ends are steps too.
func (r *SizeRow) ranged(found [][]int, row, most int, step float64) {
	all := make([]int, len(found))
	missed := 0.0
	for i := range found {
		if all[i] = found[i][row]; all[i] > most {
			missed++
		}
	}
	slices.Sort(all)
	at := func(p float64) float64 {
		k := all[int(math.Round(p*float64(len(all)-1)))]
		if k > most {
			return math.Inf(1)
		}
		return float64(k) * step
	}
	r.Low, r.High, r.Missed = at(0.05), at(0.95), missed/float64(len(all))
}

// steps is the answer of every row for one draw, in steps of a tenth of the height of the stand as measured.
func (t *Sizes) steps(w *world, x []float64, year [12]weather.MonthAnomaly) ([]int, error) {
	s, err := newSizer(w.mapper(x, year), t.Query, coarse)
	if err != nil {
		return nil, err
	}
	s.height = w.p.Stand.Height
	s.most = int(math.Floor(t.Query.UpTo/(stepOfHeight*s.height) + 1e-9))
	out := make([]int, len(t.Rows))
	for r := range t.Rows {
		row := &t.Rows[r]
		seedling := r / len(t.Query.Shapes)
		out[r], err = smallestNear(int(math.Round(row.Size/(stepOfHeight*s.height))), s.least, s.most, func(k int) (bool, error) {
			v, err := s.glance(row.Shape, k, row.Bearing)
			return err == nil && v[seedling].share >= t.Query.Share-rounding, err
		})
		if err != nil {
			return nil, err
		}
	}
	return out, nil
}

// glance is look with the threshold of the middle of the opening for all of it, and without growth.
func (s *sizer) glance(shape Shape, k int, bearing float64) ([]view, error) {
	key := [3]int{int(shape), k, int(math.Round(bearing * 1800 / math.Pi))}
	if v, ok := s.seen[key]; ok {
		return v, nil
	}
	t, spots, err := s.cut(shape, k, bearing)
	if err != nil {
		return nil, err
	}
	stations := make([]canopy.Station, len(spots))
	middle := 0
	for i, spot := range spots {
		stations[i] = canopy.Station{X: spot[0], Y: spot[1]}
		if math.Hypot(spot[0], spot[1]) < math.Hypot(spots[middle][0], spots[middle][1]) {
			middle = i
		}
	}
	at := make([]int, len(s.m.Plan().Seedlings))
	for i := range at {
		at[i] = middle
	}
	found, err := s.m.Draw(t, stations, at)
	if err != nil {
		return nil, err
	}
	s.runs++
	out := make([]view, len(found))
	for i := range found {
		b := found[i][middle].BreakEven
		for _, x := range found[i] {
			if ledger.ClassOf(x.Net, x.LightLeafOn, b) == ledger.Comfortable {
				out[i].share += 1 / float64(len(spots))
			}
		}
	}
	s.seen[key] = out
	return out, nil
}

// smallestNear is smallest that looks near a guess first, by steps that double.
func smallestNear(guess, low, high int, enough func(int) (bool, error)) (int, error) {
	guess = max(low, min(high, guess))
	ok, err := enough(guess)
	if err != nil {
		return high + 1, err
	}
	for step := 1; ; step *= 2 {
		next := guess + step
		if ok {
			next = guess - step
		}
		if next < low {
			return smallest(low, guess, enough)
		}
		if next > high {
			return smallest(guess+1, high, enough)
		}
		was, err := enough(next)
		if err != nil {
			return high + 1, err
		}
		switch {
		case ok && !was:
			return smallest(next+1, guess, enough)
		case !ok && was:
			return smallest(guess+1, next, enough)
		}
		guess = next
	}
}
