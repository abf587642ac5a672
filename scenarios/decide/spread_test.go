package decide

import (
	"context"
	"fmt"
	"math"
	"math/rand/v2"
	"slices"
	"testing"
	"time"

	"shadeledger/radiation/weather"
	"shadeledger/scenarios"
	"shadeledger/scenarios/decide/draws"
	"shadeledger/scenarios/ledger"
)

// small is the example with two treatments and one seedling.
func small(t *testing.T, seedling string) *scenarios.Plan {
	t.Helper()
	p := *example(t, "kettle-bench")
	p.Treatments = []scenarios.Treatment{p.Treatments[0], *treatmentOf(t, &p, "Circle 1.0 H")}
	for i := range p.Seedlings {
		if p.Seedlings[i].Name == seedling {
			p.Seedlings = p.Seedlings[i : i+1]
			return &p
		}
	}
	t.Fatalf("no seedling %q", seedling)
	return nil
}

func spreadOf(t *testing.T, p *scenarios.Plan, q SpreadQuery) *Spreads {
	t.Helper()
	s, err := FindSpreads(context.Background(), p, q)
	if err != nil {
		t.Fatal(err)
	}
	s.sample = nil
	for i := range s.Inputs {
		s.Inputs[i].vary = nil
	}
	for i := range s.Choices {
		s.Choices[i].Flip.Input.vary = nil
		for k := range s.Choices[i].Drivers {
			s.Choices[i].Drivers[k].Input.vary = nil
		}
	}
	return s
}

// Any number of workers gives the same bits, another seed others; ranges hold their middle and the chances add to one.
func TestSpreadOfAnyWorkers(t *testing.T) {
	p := small(t, "Maple")
	q := SpreadQuery{Count: 120, Seed: 3, Workers: 1}
	one := spreadOf(t, p, q)
	q.Workers = 3
	three := spreadOf(t, p, q)
	if fmt.Sprintf("%v", one.Rows) != fmt.Sprintf("%v", three.Rows) || fmt.Sprintf("%v", one.Choices) != fmt.Sprintf("%v", three.Choices) {
		t.Error("workers change the answer")
	}
	q.Seed = 4
	if other := spreadOf(t, p, q); fmt.Sprintf("%v", one.Rows) == fmt.Sprintf("%v", other.Rows) {
		t.Error("the seed changes nothing")
	}
	for _, r := range one.Rows {
		if sum := r.Chance[0] + r.Chance[1] + r.Chance[2]; math.Abs(sum-1) > 1e-12 {
			t.Errorf("%s %s: chances add to %g", r.Treatment, r.Station, sum)
		}
		for _, x := range []Range{r.Light, r.LeafOn, r.Net, r.Ratio, r.Threshold} {
			if !(x[0] <= x[1] && x[1] <= x[2]) {
				t.Errorf("%s %s: range %v", r.Treatment, r.Station, x)
			}
		}
	}
	c := one.Choices[0]
	t.Logf("%s: %s comfortable in %.2f of the draws, margin %.0f, R2 %.2f, flip %v at %.3g", c.Species, c.Options[c.Decides].Treatment, c.Options[c.Decides].Chance, c.Margin, c.Fit, c.Flip.Input.Label, c.Flip.Value)
	if c.Fit < 0.7 {
		t.Errorf("rank regression explains %.2f", c.Fit)
	}
}

// All at best in the mean year is the balance's own figures.
func TestBestDrawIsTheBalance(t *testing.T) {
	s, err := newSample(small(t, "Red oak 2-0"), SpreadQuery{Count: 2, Workers: 2})
	if err != nil {
		t.Fatal(err)
	}
	spots, err := s.spots(s.bestInputs(), meanYear())
	if err != nil {
		t.Fatal(err)
	}
	for r, x := range spots {
		f := &s.full[r]
		if math.Abs(x.light-f.Light) > 1e-6 || math.Abs(x.leafOn-f.LightLeafOn) > 1e-6 || math.Abs(x.net-f.Lines.Net()) > 1e-6 ||
			math.Abs(x.threshold-f.BreakEven.Threshold.LeafOn) > 1e-6 || x.class() != f.Class {
			t.Errorf("%s %s: draw %+v, balance light %g, net %g, threshold %g", f.Treatment, f.Station, x, f.Light, f.Lines.Net(), f.BreakEven.Threshold.LeafOn)
		}
	}
}

// Thresholds that move with the best station's break-even are those found at every station; at the best station they are the same.
func TestThresholdsMoveTogether(t *testing.T) {
	s, err := newSample(small(t, "Red oak 2-0"), SpreadQuery{Count: 30, Seed: 5, Workers: 2})
	if err != nil {
		t.Fatal(err)
	}
	var off []float64
	same, all := 0, 0
	for i := range s.draw {
		c := unchanged(s.p)
		for k, in := range s.inputs {
			in.vary(&c, s.draw[i].x[k])
		}
		p := c.of(s.p)
		moved, err := s.spots(s.draw[i].x, meanYear())
		if err != nil {
			t.Fatal(err)
		}
		year := meanYear()
		for k := range year {
			year[k].Radiation, year[k].Temperature = c.radiation, c.warmth
		}
		m := s.sky.Changed(year).Mapper(p)
		for tr := range p.Treatments {
			var spots [][2]float64
			for _, at := range s.at[tr] {
				spots = append(spots, [2]float64{at.X, at.Y})
			}
			found, err := m.Map(&p.Treatments[tr], spots, scenarios.BreakEvens)
			if err != nil {
				t.Fatal(err)
			}
			for k := range spots {
				r := s.row(tr, 0, k)
				if !found[0][k].BreakEven.Found {
					continue
				}
				direct := found[0][k].BreakEven.LeafOn * ratio(s.full[r].BreakEven.LeafOn, s.best[r].BreakEven.LeafOn)
				off = append(off, math.Abs(moved[r].breakEven/direct-1))
				if k == s.lead[tr][0] && off[len(off)-1] > 1e-9 {
					t.Errorf("%s: %g at the best station, %g found", s.at[tr][k].Name, moved[r].breakEven, direct)
				}
				all++
				x := moved[r]
				x.breakEven, x.threshold = direct, math.Min(100, s.p.Seedlings[0].Factor*direct)
				if x.class() == moved[r].class() {
					same++
				}
			}
		}
	}
	x := draws.NewSpread(off)
	t.Logf("break-even off by %.1f %% in the median, %.1f %% at the 95th percentile, %.1f %% at most; %d of %d classes the same", 100*x.Median, 100*x.High, 100*slices.Max(off), same, all)
	if x.High > 0.15 || float64(same) < 0.97*float64(all) {
		t.Errorf("break-even off by %.1f %% at the 95th percentile, %d of %d classes the same", 100*x.High, same, all)
	}
}

// A cancelled run keeps the draws that were done and says how many.
func TestInterruptedSpread(t *testing.T) {
	ctx, stop := context.WithCancel(context.Background())
	defer stop()
	s, err := FindSpreads(ctx, small(t, "Maple"), SpreadQuery{Count: 400, Seed: 1, Workers: 2, Progress: func(done int) {
		if done == 60 {
			stop()
		}
	}})
	if err != nil {
		t.Fatal(err)
	}
	if s.Done < 60 || s.Done > 70 || len(s.Rows) == 0 || s.Choices[0].Options[0].Chance < 0 {
		t.Errorf("%d draws, %d rows", s.Done, len(s.Rows))
	}
	many := *example(t, "kettle-bench") // fewer draws than inputs: those of each seedling are fewer
	many.Treatments = many.Treatments[:1]
	short, cut := context.WithCancel(context.Background())
	defer cut()
	few, err := FindSpreads(short, &many, SpreadQuery{Count: 400, Seed: 1, Workers: 1, Progress: func(done int) {
		if done == leastDraws {
			cut()
		}
	}})
	if err != nil || few.Done != leastDraws || len(few.Rows) == 0 || few.Done >= len(few.Inputs) || len(few.Choices[0].Drivers) == 0 {
		t.Errorf("after %d draws of %d inputs: %v", few.Done, len(few.Inputs), err)
	}
	stopped, end := context.WithCancel(context.Background())
	end()
	if s, err = FindSpreads(stopped, small(t, "Maple"), SpreadQuery{Count: 100, Workers: 1}); err != nil || s.Done != 0 || len(s.Rows) != 0 {
		t.Errorf("stopped before it began: %d draws, %d rows, %v", s.Done, len(s.Rows), err)
	}
}

// The flip is where the class changes: just short of it the class is that of the best values, at it another one.
func TestFlipHoldsForward(t *testing.T) {
	p := small(t, "White pine")
	s, err := FindSpreads(context.Background(), p, SpreadQuery{Count: 120, Seed: 1, Workers: 2})
	if err != nil {
		t.Fatal(err)
	}
	c := &s.Choices[0]
	if !c.Flip.Found {
		t.Fatal("no flip")
	}
	for k, in := range s.sample.inputs {
		if in.Key != c.Flip.Input.Key {
			continue
		}
		row := c.Options[c.Decides].row
		short := in.Doubt.Best + 0.97*(c.Flip.Value-in.Doubt.Best)
		for value, flips := range map[float64]bool{c.Flip.Value: true, short: false} {
			x := s.sample.bestInputs()
			x[k] = value
			spots, err := s.sample.spots(x, meanYear())
			if err != nil {
				t.Fatal(err)
			}
			if got := (spots[row].class() == ledger.Comfortable) != (s.sample.full[row].Class == ledger.Comfortable); got != flips {
				t.Errorf("%s at %g: flips %v", in.Label, value, got)
			}
		}
	}
}

// Of two hundred stands (seeds 1 to 200), each measured anew with the errors that its plan admits, the 90 % ranges hold the true light, net and
// threshold as often as they say.
func TestRangesCoverTheTruth(t *testing.T) {
	const stands = 200
	base := small(t, "Maple")
	base.Treatments = base.Treatments[1:]
	base.Stations = []scenarios.Station{{Name: "centre"}}
	base.Sampling.Step = time.Hour
	corrected, _, err := scenarios.Corrected(base)
	if err != nil {
		t.Fatal(err)
	}
	held := [3]int{}
	for seed := uint64(1); seed <= stands; seed++ {
		from := rand.New(rand.NewPCG(seed, 9))
		truth := anotherStand(corrected, from)
		s, err := newSample(truth, SpreadQuery{Count: 2, Seed: seed, Workers: 1})
		if err != nil {
			t.Fatal(err)
		}
		year := s.years.Anomaly(seed, stands)
		real, err := s.spots(s.bestInputs(), year)
		if err != nil {
			t.Fatal(err)
		}
		q := SpreadQuery{Count: 160, Seed: seed, Workers: 2}
		m, err := newSample(measured(s, from), q)
		if err != nil {
			t.Fatal(err)
		}
		if err := m.run(context.Background(), q); err != nil {
			t.Fatal(err)
		}
		r := m.rangesOf(0)
		for k, x := range []struct {
			Range
			truth float64
		}{{r.Light, real[0].light}, {r.Net, real[0].net}, {r.Threshold, real[0].threshold}} {
			if x.Range[0] <= x.truth && x.truth <= x.Range[2] {
				held[k]++
			}
		}
	}
	for k, name := range []string{"light", "net", "threshold"} {
		share := float64(held[k]) / stands
		t.Logf("%s: the range holds the truth in %.1f %%", name, 100*share)
		if share < 0.85 || share > 0.95 {
			t.Errorf("%s: the range holds the truth in %.1f %%", name, 100*share)
		}
	}
}

// anotherStand is a stand of other leaf area, height and slope.
func anotherStand(p *scenarios.Plan, from *rand.Rand) *scenarios.Plan {
	c := unchanged(p)
	c.leafArea, c.clumping = 0.6+0.8*from.Float64(), 0.9+0.2*from.Float64()
	c.height += 8 * (from.Float64() - 0.5)
	c.base = c.height * (0.3 + 0.3*from.Float64())
	c.slope, c.aspect = 0.3*from.Float64(), 2*math.Pi*from.Float64()
	return c.of(p)
}

// measured is a stand as it is measured: every input off by an error of its own.
func measured(s *sample, from *rand.Rand) *scenarios.Plan {
	c := unchanged(s.p)
	for _, in := range s.inputs {
		in.vary(&c, in.Doubt.At(from.Float64()))
	}
	p := c.of(s.p)
	n := *p.Weather.(*weather.Normals)
	for m := range n.Global {
		n.Global[m] *= c.radiation
		n.Mean[m], n.Min[m], n.Max[m] = n.Mean[m]+c.warmth, n.Min[m]+c.warmth, n.Max[m]+c.warmth
	}
	p.Weather = &n
	return p
}

// What draws save in days, steps and azimuths of the sky moves their figures, once these are moved to the balance's own, by little beside their ranges: each
// draw is held against a map of the same plan with a finer sky, every quarter hour.
func TestDrawsAgainstFinerRuns(t *testing.T) {
	base := small(t, "Birch")
	s, err := newSample(base, SpreadQuery{Count: 20, Seed: 8, Workers: 2})
	if err != nil {
		t.Fatal(err)
	}
	fine, err := scenarios.NewMapper(s.p, 2)
	if err != nil {
		t.Fatal(err)
	}
	exact := func(p *scenarios.Plan) (light, net []float64) {
		m, err := scenarios.NewMapper(p, 2)
		if err != nil {
			t.Fatal(err)
		}
		for tr := range p.Treatments {
			var spots [][2]float64
			for _, at := range s.at[tr] {
				spots = append(spots, [2]float64{at.X, at.Y})
			}
			found, err := m.Map(&p.Treatments[tr], spots, scenarios.Ledgers)
			if err != nil {
				t.Fatal(err)
			}
			for _, x := range found[0] {
				light, net = append(light, x.Light), append(net, x.Net)
			}
		}
		return light, net
	}
	lightBest, netBest := exact(fine.Plan())
	var offLight, offNet []float64
	for i := range s.draw {
		c := unchanged(s.p)
		for k, in := range s.inputs {
			if in.Key != "weather.radiation" && in.Key != "weather.par_fraction" && in.Key != "weather.temperature" {
				in.vary(&c, s.draw[i].x[k])
			} else {
				s.draw[i].x[k] = in.Doubt.Best
			}
		}
		moved, err := s.spots(s.draw[i].x, meanYear())
		if err != nil {
			t.Fatal(err)
		}
		light, net := exact(c.of(s.p))
		for r := range moved {
			offLight = append(offLight, math.Abs(moved[r].light-light[r]*s.full[r].Light/lightBest[r]))
			offNet = append(offNet, math.Abs(moved[r].net-(net[r]+s.full[r].Lines.Net()-netBest[r])))
		}
	}
	l, n := draws.NewSpread(offLight), draws.NewSpread(offNet)
	t.Logf("light off by %.2f points in the median, %.2f at the 95th percentile; net by %.3f and %.3f g C", l.Median, l.High, n.Median, n.High)
	if l.High > 1.5 || n.High > 0.3 {
		t.Errorf("light off by %.2f points, net by %.3f g C at the 95th percentile", l.High, n.High)
	}
}

// Sobol indices by group: each total is no less than what the group does alone, within errors, alone they add to no more than all, workers change nothing.
func TestSharesByGroup(t *testing.T) {
	shares := func(workers int) []GroupShare {
		t.Helper()
		q := SpreadQuery{Count: 400, Seed: 1, Workers: workers}
		s, err := FindSpreads(context.Background(), small(t, "Maple"), q)
		if err != nil {
			t.Fatal(err)
		}
		if err := s.FindShares(context.Background(), q); err != nil {
			t.Fatal(err)
		}
		return s.Shares
	}
	one := shares(1)
	if fmt.Sprint(one) != fmt.Sprint(shares(2)) || len(one) != int(groups) {
		t.Fatalf("workers change the shares, or some are missing: %v", one)
	}
	sum, variance := 0.0, 0.0
	for _, x := range one {
		t.Logf("%s: alone %.2f +- %.2f, with others %.2f +- %.2f", x.Group, x.First.Value, x.First.Error, x.Total.Value, x.Total.Error)
		if x.First.Value > x.Total.Value+3*math.Hypot(x.First.Error, x.Total.Error) || x.Total.Value < -3*x.Total.Error {
			t.Errorf("%s: alone %v, with others %v", x.Group, x.First, x.Total)
		}
		sum, variance = sum+x.First.Value, variance+x.First.Error*x.First.Error
	}
	if sum > 1+3*math.Sqrt(variance) {
		t.Errorf("alone they add to %.2f", sum)
	}
}
