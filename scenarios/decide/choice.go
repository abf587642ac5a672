package decide

import (
	"math"
	"sort"

	"shadeledger/radiation/weather"
	"shadeledger/scenarios"
	"shadeledger/scenarios/decide/draws"
	"shadeledger/scenarios/ledger"
	"shadeledger/scenarios/light"
)

// Choice is what the draws say about the decision for one seedling.
type Choice struct {
	Species  string
	Options  []Option // the lightest cut first
	Lightest int      // the option that is the lightest cut that works by the best values; -1 where none does
	Decides  int      // the option that doubt is told of: the lightest, else the one nearest to working
	Best     float64  // margin there of the best values, points
	Margin   Range    // there, points of leaf-on light above the threshold at the best station
	Fit      float64  // share of the ranks' variance that the drivers explain
	Drivers  []Driver // what moves the margin, most first
	Flip     Flip
	Measures []FieldWork // what would narrow the margin, most first
}

// Option is one treatment for one seedling.
type Option struct {
	Treatment, Station string // the station with most light over its threshold by the best values
	Works              bool   // comfortable there by the best values
	Chance             float64
	Light              Range // season percent there
	Net                Range // g C a year there
	// Like names the options whose net differs from this one's by nothing that 90 % of the draws agree on.
	Like []string
	row  int
}

// Driver is what one input does to the margin. Alone it brings the margin from Low, its 5th percentile, to High, its 95th, all else at best.
type Driver struct {
	Input       Input
	Coefficient float64 // standardised rank regression
	Share       float64 // of the ranks' variance
	Low, High   float64 // margin, points; NaN for the year's weather
}

// Flip is the one input whose doubt changes the decision soonest.
type Flip struct {
	Found bool
	Input Input
	Value float64 // where the class at the best station changes
	Above bool    // it changes above the value
	Far   float64 // normal deviates from the best value
	Runs  int
}

// choices works every seedling's choice out.
func (s *sample) choices() ([]Choice, error) {
	ends, err := s.oneAtATime()
	if err != nil {
		return nil, err
	}
	out := make([]Choice, len(s.p.Seedlings))
	for i := range s.p.Seedlings {
		out[i] = s.choice(i)
		if err := s.explain(&out[i], i, ends); err != nil {
			return nil, err
		}
	}
	return out, nil
}

// byCut is the treatments from the lightest cut to the heaviest.
func (s *sample) byCut() []int {
	order := make([]int, len(s.p.Treatments))
	for i := range order {
		order[i] = i
	}
	sort.SliceStable(order, func(a, b int) bool {
		return scenarios.CutOf(s.p, &s.p.Treatments[order[a]]).Lighter(scenarios.CutOf(s.p, &s.p.Treatments[order[b]]))
	})
	return order
}

// choice lists a seedling's options.
func (s *sample) choice(seedling int) Choice {
	c := Choice{Species: s.p.Seedlings[seedling].Name, Lightest: -1}
	nearest := math.Inf(-1)
	for n, t := range s.byCut() {
		o := s.option(t, seedling)
		if o.Works && c.Lightest < 0 {
			c.Lightest = n
		}
		if m := s.bestMargin(o.row); m > nearest && c.Lightest < 0 {
			nearest, c.Decides = m, n
		}
		c.Options = append(c.Options, o)
	}
	if c.Lightest >= 0 {
		c.Decides = c.Lightest
	}
	for a := range c.Options {
		for b := range c.Options {
			if a != b && !s.separate(c.Options[a].row, c.Options[b].row) {
				c.Options[a].Like = append(c.Options[a].Like, c.Options[b].Treatment)
			}
		}
	}
	return c
}

// bestMargin is the margin of the balance's own figures.
func (s *sample) bestMargin(row int) float64 {
	f := &s.full[row]
	if !f.BreakEven.Found {
		return f.LightLeafOn - 100
	}
	return f.LightLeafOn - f.BreakEven.Threshold.LeafOn
}

// option gathers one treatment for one seedling.
func (s *sample) option(t, seedling int) Option {
	o := Option{Treatment: s.p.Treatments[t].Name, Station: s.at[t][s.lead[t][seedling]].Name, row: s.row(t, seedling, s.lead[t][seedling])}
	o.Works = s.full[o.row].Class == ledger.Comfortable
	comfortable, n := 0.0, 0.0
	for i := range s.draw {
		if !s.finished[i] {
			continue
		}
		n++
		for k := range s.at[t] {
			if s.draw[i].spots[s.row(t, seedling, k)].class() == ledger.Comfortable {
				comfortable++
				break
			}
		}
	}
	o.Chance = comfortable / n
	r := s.rangesOf(o.row)
	o.Light, o.Net = r.Light, r.Net
	return o
}

// separate tells whether 90 % of the draws agree which of two rows earns more.
func (s *sample) separate(a, b int) bool {
	var d []float64
	for i := range s.draw {
		if s.finished[i] {
			d = append(d, s.draw[i].spots[a].net-s.draw[i].spots[b].net)
		}
	}
	x := draws.NewSpread(d)
	return x.Low > 0 || x.High < 0
}

// margin of a draw's spot, points.
func (x *drawnSpot) margin() float64 { return x.leafOn - x.threshold }

// end is what the ends of one input make of every row, all else at best.
type end struct{ low, high []drawnSpot }

// oneAtATime runs every input at its 5th and 95th percentile, all else at best, in the mean year.
func (s *sample) oneAtATime() ([]end, error) {
	out := make([]end, len(s.inputs))
	failed := make([]error, 2*len(s.inputs))
	light.Share(2*len(s.inputs), s.workers, func(_, n int) {
		k := n / 2
		x := s.bestInputs()
		to := &out[k].low
		if x[k] = s.inputs[k].Doubt.Low; n%2 == 1 {
			to, x[k] = &out[k].high, s.inputs[k].Doubt.High
		}
		*to, failed[n] = s.spots(x, meanYear())
	})
	for _, err := range failed {
		if err != nil {
			return nil, err
		}
	}
	return out, nil
}

func (w *world) bestInputs() []float64 {
	x := make([]float64, len(w.inputs))
	for k, in := range w.inputs {
		x[k] = in.Doubt.Best
	}
	return x
}

// meanYear is no anomaly.
func meanYear() (y [12]weather.MonthAnomaly) {
	for m := range y {
		y[m].Radiation = 1
	}
	return y
}
