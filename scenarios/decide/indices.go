package decide

import (
	"context"
	"math"
	"sync/atomic"

	"shadeledger/scenarios/decide/draws"
	"shadeledger/scenarios/light"
)

// Group of inputs whose share of the variance is told together.
type Group int

// The groups: canopy above and beside; ground, weather and the year; leaves of seedlings; their stems, roots, shape and turnover.
const (
	Canopy Group = iota
	Site
	Leaves
	Body
	groups
)

func (g Group) String() string {
	return [...]string{"the stand", "site and weather", "leaves of the seedling", "stem, root and shape"}[g]
}

// GroupShare is what a group of inputs does to a seedling's margin: alone (first-order index), and with all it does together with others (total).
type GroupShare struct {
	Species      string
	Group        Group
	First, Total draws.Index
}

// FindShares gives Sobol indices of every seedling's margin at its deciding treatment, by groups of inputs, from about as many runs as draws are asked for. A
// cancelled context keeps whole blocks of runs.
func (s *Spreads) FindShares(ctx context.Context, q SpreadQuery) error {
	w := s.sample
	year := len(w.inputs) // one more column: which generated year
	d, err := draws.NewDesign(max(2, q.Count/(int(groups)+2)), year+1, w.grouped(), q.Seed)
	if err != nil {
		return err
	}
	rows := make([]int, len(s.Choices))
	for i := range s.Choices {
		rows[i] = s.Choices[i].Options[s.Choices[i].Decides].row
	}
	margins := make([][]float64, len(s.Choices))
	for i := range margins {
		margins[i] = make([]float64, d.Runs())
	}
	failed, ran := make([]error, d.Runs()), make([]bool, d.Runs())
	var done atomic.Int64
	light.Share(d.Runs(), q.Workers, func(_, n int) {
		if ctx.Err() != nil {
			return
		}
		u := d.Row(n)
		x := make([]float64, year)
		for k, in := range w.inputs {
			x[k] = in.Doubt.At(u[k])
		}
		spots, err := w.spots(x, w.years.Anomaly(q.Seed, uint64(u[year]*float64(q.Count))))
		failed[n], ran[n] = err, err == nil
		if err == nil {
			for i, r := range rows {
				margins[i][n] = spots[r].margin()
			}
		}
		if n := int(done.Add(1)); q.Progress != nil {
			q.Progress(n)
		}
	})
	for n := range ran {
		if failed[n] != nil {
			return failed[n]
		}
		for i := range margins {
			if !ran[n] {
				margins[i][n] = math.NaN()
			}
		}
	}
	for i := range s.Choices {
		found, err := d.Indices(margins[i])
		if err != nil {
			return err
		}
		for g := range groups {
			s.Shares = append(s.Shares, GroupShare{s.Choices[i].Species, g, found.First[g], found.Total[g]})
		}
	}
	s.ShareRuns = int(done.Load())
	return nil
}

// grouped lists the columns of every group; the last column is the year, of the site.
func (w *sample) grouped() [][]int {
	out := make([][]int, groups)
	for k, in := range w.inputs {
		out[in.Group] = append(out[in.Group], k)
	}
	out[Site] = append(out[Site], len(w.inputs))
	return out
}
