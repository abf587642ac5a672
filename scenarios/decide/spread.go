package decide

import (
	"context"
	"fmt"
	"math"
	"sync/atomic"

	"shadeledger/canopy"
	"shadeledger/radiation/weather"
	"shadeledger/scenarios"
	"shadeledger/scenarios/decide/draws"
	"shadeledger/scenarios/ledger"
	"shadeledger/scenarios/light"
)

// SpreadQuery asks for the ranges of a plan's answers.
type SpreadQuery struct {
	Count    int
	Seed     uint64
	Workers  int
	After    float64        // years after the cut that the draws are of, with stock of the plan's size; 0 is the first year
	Progress func(done int) // called now and then; nil for none
}

// Range is the 5th, 50th and 95th percentile over the draws.
type Range [3]float64

// SpreadRow is one seedling at one station of a treatment.
type SpreadRow struct {
	Treatment, Station, Species string
	Light, LeafOn               Range        // percent of full light, over the season and the leaf-on period
	Net, Ratio                  Range        // g C a year; income over costs
	BreakEven, Threshold        Range        // leaf-on percent
	Chance                      [3]float64   // of each class, below first
	Class                       ledger.Class // of the best values
}

// Spreads are the ranges of every answer and what drives them.
type Spreads struct {
	Plan    *scenarios.Plan // its leaf area corrected
	Query   SpreadQuery
	Done    int // draws that were run; below Query.Count where it was interrupted
	Inputs  []Input
	Weather []string // what the generator of years assumed
	Rows    []SpreadRow
	Choices []Choice
	// Shares are Sobol indices by groups of inputs, where they were asked for, from ShareRuns runs.
	Shares    []GroupShare
	ShareRuns int
	sample    *sample
}

// world is a plan with everything that is not known for sure of it.
type world struct {
	p      *scenarios.Plan // its leaf area corrected
	sky    *scenarios.Sky
	years  *weather.Generator
	seed   uint64
	after  float64 // years after the cut
	inputs []Input
}

func newWorld(p *scenarios.Plan, seed uint64, after float64) (*world, error) {
	corrected, c, err := scenarios.Corrected(p)
	if err != nil {
		return nil, err
	}
	years, err := scenarios.YearsOf(corrected)
	if err != nil {
		return nil, err
	}
	w := &world{p: corrected, sky: scenarios.NewSky(corrected), years: years, seed: seed, after: after, inputs: inputs(corrected, c)}
	if after > 0 {
		w.inputs = append(w.inputs, closingInputs(corrected)...)
	}
	return w, nil
}

// drawn gives the inputs of every draw of a Latin hypercube.
func (w *world) drawn(count int) [][]float64 {
	out := draws.Hypercube(count, len(w.inputs), w.seed)
	for _, x := range out {
		for k, in := range w.inputs {
			x[k] = in.Doubt.At(x[k])
		}
	}
	return out
}

// mapper is ready to map the plan that inputs x make, in a year.
func (w *world) mapper(x []float64, year [12]weather.MonthAnomaly) *scenarios.Mapper {
	c := unchanged(w.p)
	for k, in := range w.inputs {
		in.vary(&c, x[k])
	}
	for m := range year {
		year[m].Radiation *= c.radiation
		year[m].Temperature += c.warmth
	}
	return w.sky.Changed(year).Mapper(c.aged(c.of(w.p), w.after))
}

// sample holds what every draw gave.
type sample struct {
	*world
	workers  int
	at       [][]canopy.Station // by treatment
	base     []int              // first row of a treatment
	rows     int
	best     []scenarios.Spot // by row, of the best values on the draws' own sky and step
	full     []scenarios.BalanceRow
	lead     [][]int // by treatment and seedling: the station with most light over its threshold
	draw     []drawn
	finished []bool
}

// drawn is one draw: its inputs, and its spots by row.
type drawn struct {
	x     []float64  // by input, in the input's unit
	light [2]float64 // factor on the year's radiation and its warmth, K, over the season: weather as an input of regressions
	spots []drawnSpot
}

// drawnSpot is what a draw keeps of a seedling at a station.
type drawnSpot struct{ light, leafOn, net, ratio, threshold, breakEven float64 }

// FindSpreads runs draws of everything that is not known for sure: a Latin hypercube over the inputs, each draw in a generated year of its own. Stations
// are those inside the openings and under the canopy; break-even is found where a seedling has most light over its threshold, and moves with it at the
// others (within 12 % at the 95th percentile; 98 % of the classes are the same). Ranges are moved so that the best values give the figures of the balance. A cancelled context ends the
// run after the draws in hand; the answer is then that of fewer draws. At least leastDraws are needed.
func FindSpreads(ctx context.Context, p *scenarios.Plan, q SpreadQuery) (*Spreads, error) {
	s, err := newSample(p, q)
	if err != nil {
		return nil, err
	}
	if err := s.run(ctx, q); err != nil {
		return nil, err
	}
	out := &Spreads{Plan: s.p, Query: q, Inputs: s.inputs, Weather: s.years.Assumed(), sample: s}
	for _, done := range s.finished {
		if done {
			out.Done++
		}
	}
	if out.Done < leastDraws {
		return out, nil
	}
	out.Rows = s.summary()
	out.Choices, err = s.choices()
	return out, err
}

// leastDraws is the number below which no range is told; it is more than the inputs that bear on one seedling.
const leastDraws = 40

func newSample(p *scenarios.Plan, q SpreadQuery) (*sample, error) {
	w, err := newWorld(p, q.Seed, q.After)
	if err != nil {
		return nil, err
	}
	s := &sample{world: w, workers: q.Workers}
	corrected := w.p
	for i := range corrected.Treatments {
		t := &corrected.Treatments[i]
		s.base = append(s.base, s.rows)
		s.at = append(s.at, decisive(corrected, t))
		s.rows += len(s.at[i]) * len(corrected.Seedlings)
	}
	if err := s.bestSpots(); err != nil {
		return nil, err
	}
	if err := s.align(p, q); err != nil {
		return nil, err
	}
	s.leads()
	s.draw, s.finished = make([]drawn, q.Count), make([]bool, q.Count)
	for i, x := range w.drawn(q.Count) {
		s.draw[i].x = x
	}
	return s, nil
}

// decisive are the stations that decide: those inside the crown outline, or under the canopy. Where the plan's own stations are all outside, these.
func decisive(p *scenarios.Plan, t *scenarios.Treatment) []canopy.Station {
	all := p.StationsOf(t)
	c, ok := t.Opening.(scenarios.Cleared)
	if !ok {
		return all
	}
	var inside []canopy.Station
	for _, s := range all {
		if c.Crowns.Contains(s.X, s.Y) {
			inside = append(inside, s)
		}
	}
	if inside == nil {
		return all
	}
	return inside
}

// row of a treatment, seedling and station.
func (s *sample) row(t, seedling, station int) int {
	return s.base[t] + seedling*len(s.at[t]) + station
}

// bestSpots runs the best values with every break-even.
func (s *sample) bestSpots() error {
	s.best = make([]scenarios.Spot, s.rows)
	m := s.mapper(s.bestInputs(), meanYear())
	for t := range s.p.Treatments {
		spots := make([][2]float64, len(s.at[t]))
		for k, at := range s.at[t] {
			spots[k] = [2]float64{at.X, at.Y}
		}
		found, err := m.Map(&m.Plan().Treatments[t], spots, scenarios.BreakEvens)
		if err != nil {
			return err
		}
		for i := range found {
			copy(s.best[s.row(t, i, 0):], found[i])
		}
	}
	return nil
}

// align finds the balance's own row for every row of the draws; of a later year the draws' own best values stand for it.
func (s *sample) align(p *scenarios.Plan, q SpreadQuery) error {
	s.full = make([]scenarios.BalanceRow, s.rows)
	if s.after > 0 {
		for r := range s.full {
			x := &s.best[r]
			s.full[r] = scenarios.BalanceRow{Light: x.Light, LightLeafOn: x.LightLeafOn, BreakEven: x.BreakEven, Class: x.Class}
			s.full[r].Lines[ledger.Income] = x.Net
		}
		return nil
	}
	full, err := scenarios.Run(p, scenarios.Options{Workers: q.Workers, Depth: scenarios.BreakEvens, By: scenarios.ByYear})
	if err != nil {
		return err
	}
	place := map[[3]string]int{}
	for i := range full.Balance {
		r := &full.Balance[i]
		place[[3]string{r.Treatment, r.Station, r.Species}] = i
	}
	for t := range s.p.Treatments {
		for i := range s.p.Seedlings {
			for k, at := range s.at[t] {
				s.full[s.row(t, i, k)] = full.Balance[place[[3]string{s.p.Treatments[t].Name, at.Name, s.p.Seedlings[i].Name}]]
			}
		}
	}
	return nil
}

// leads finds each seedling's best station of each treatment: draws find their break-even there.
func (s *sample) leads() {
	for t := range s.p.Treatments {
		lead := make([]int, len(s.p.Seedlings))
		for i := range lead {
			for k := range s.at[t] {
				if s.bestMargin(s.row(t, i, k)) > s.bestMargin(s.row(t, i, lead[i])) {
					lead[i] = k
				}
			}
		}
		s.lead = append(s.lead, lead)
	}
}

// run shares the draws over workers; each writes its own place only.
func (s *sample) run(ctx context.Context, q SpreadQuery) error {
	failed := make([]error, len(s.draw))
	var done atomic.Int64
	light.Share(len(s.draw), q.Workers, func(_, i int) {
		if ctx.Err() != nil {
			return
		}
		if failed[i] = s.one(i); failed[i] == nil {
			s.finished[i] = true
		}
		if n := int(done.Add(1)); q.Progress != nil {
			q.Progress(n)
		}
	})
	for i, err := range failed {
		if err != nil {
			return fmt.Errorf("draw %d: %w", i+1, err)
		}
	}
	return nil
}

// one runs a draw.
func (s *sample) one(i int) error {
	d := &s.draw[i]
	anomaly := s.years.Anomaly(s.seed, uint64(i))
	d.light = seasonMean(s.p, anomaly)
	spots, err := s.spots(d.x, anomaly)
	d.spots = spots
	return err
}

// spots runs a plan with inputs x in a year.
func (s *sample) spots(x []float64, year [12]weather.MonthAnomaly) ([]drawnSpot, error) {
	m := s.mapper(x, year)
	p := m.Plan()
	out := make([]drawnSpot, s.rows)
	for t := range p.Treatments {
		found, err := m.Draw(&p.Treatments[t], s.at[t], s.lead[t])
		if err != nil {
			return nil, err
		}
		for i := range found {
			s.keep(out, t, i, found[i])
		}
	}
	return out, nil
}

// keep moves what a draw found to the balance's own figures and gives every station its threshold.
func (s *sample) keep(out []drawnSpot, t, seedling int, found []scenarios.Spot) {
	first, lead := s.row(t, seedling, 0), s.lead[t][seedling]
	was, now := s.best[first+lead].BreakEven, found[lead].BreakEven
	for k := range found {
		r := first + k
		full, best, x := &s.full[r], &s.best[r], &found[k]
		y := drawnSpot{light: x.Light * ratio(full.Light, best.Light), leafOn: x.LightLeafOn * ratio(full.LightLeafOn, best.LightLeafOn),
			net: x.Net + full.Lines.Net() - best.Net, ratio: x.Ratio * ratio(full.Lines.Ratio(), best.Ratio), breakEven: math.NaN(), threshold: 100}
		if now.Found {
			y.breakEven = now.LeafOn
			if was.Found && was.LeafOn > 0 && full.BreakEven.Found {
				y.breakEven = full.BreakEven.LeafOn * now.LeafOn / was.LeafOn
			}
			y.threshold = math.Min(100, s.p.Seedlings[seedling].Factor*y.breakEven)
		}
		out[r] = y
	}
}

// ratio of two figures; 1 where the second is nothing.
func ratio(a, b float64) float64 {
	if b == 0 || math.IsNaN(a) || math.IsNaN(b) {
		return 1
	}
	return a / b
}

// class places what a draw found.
func (x *drawnSpot) class() ledger.Class {
	b := ledger.BreakEven{Found: !math.IsNaN(x.breakEven), LeafOn: x.breakEven, Threshold: ledger.Threshold{LeafOn: x.threshold}}
	return ledger.ClassOf(x.net, x.leafOn, b)
}

// seasonMean is a year's radiation over the long mean and its warmth, over the months of the plan's season.
func seasonMean(p *scenarios.Plan, by [12]weather.MonthAnomaly) (out [2]float64) {
	n := 0.0
	for m, from := int(p.Season.From.Month)-1, 0; from < 12; from++ {
		out[0], out[1], n = out[0]+by[m].Radiation, out[1]+by[m].Temperature, n+1
		if m == int(p.Season.To.Month)-1 {
			break
		}
		m = (m + 1) % 12
	}
	return [2]float64{out[0] / n, out[1] / n}
}
