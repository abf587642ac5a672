package decide

import (
	"errors"
	"math"
	"sort"

	"shadeledger/scenarios/decide/draws"
	"shadeledger/scenarios/ledger"
)

// Weather as drivers: what a draw's year was, beside the inputs.
var yearInputs = [2]Input{
	{Key: "weather.year", Label: "light of the year", Unit: "of the mean", Source: "generated years", Seedling: -1},
	{Key: "weather.year", Label: "warmth of the year", Unit: "K warmer", Source: "generated years", Seedling: -1},
}

// leastShare of the ranks' variance that is worth a line.
const leastShare = 0.005

// explain regresses the margin at the deciding option on everything drawn (standardised rank regression; Iman & Conover 1979, Technometrics
// 21:499-509) and looks for the flip and for what to measure.
func (s *sample) explain(c *Choice, seedling int, ends []end) error {
	row := c.Options[c.Decides].row
	c.Best = s.bestMargin(row)
	columns := s.concerning(seedling)
	var x [][]float64
	var y []float64
	for i := range s.draw {
		d := &s.draw[i]
		if !s.finished[i] {
			continue
		}
		at := append([]float64(nil), d.light[:]...)
		for _, k := range columns {
			at = append(at, d.x[k])
		}
		x, y = append(x, at), append(y, d.spots[row].margin())
	}
	margin := draws.NewSpread(y)
	c.Margin = Range{margin.Low, margin.Median, margin.High}
	told, err := s.drivers(c, columns, ends, x, y)
	if err != nil {
		return err
	}
	if c.Flip, err = s.flip(row, ends); err != nil {
		return err
	}
	c.Measures = s.measures(c, told, seedling)
	return nil
}

// concerning lists the inputs that bear on a seedling: its own and those of the stand and the site.
func (s *sample) concerning(seedling int) (columns []int) {
	for k, in := range s.inputs {
		if in.Seedling < 0 || in.Seedling == seedling {
			columns = append(columns, k)
		}
	}
	return columns
}

// drivers regresses the margin y on what was drawn x: the year's light and warmth, then the columns of the inputs. It gives every input's share of the
// ranks' variance. A margin that never moves tells of no drivers.
func (s *sample) drivers(c *Choice, columns []int, ends []end, x [][]float64, y []float64) (shares []float64, err error) {
	c.Fit = math.NaN()
	shares = make([]float64, len(s.inputs))
	fit, err := draws.Regress(x, y)
	if errors.Is(err, draws.ErrConstant) {
		return shares, nil
	}
	if err != nil {
		return nil, err
	}
	c.Fit = fit.R2
	row := c.Options[c.Decides].row
	for n, told := range fit.Inputs {
		d := Driver{Coefficient: told.Value, Share: math.Max(0, told.Share), Low: math.NaN(), High: math.NaN()}
		if n < len(yearInputs) {
			d.Input = yearInputs[n]
		} else {
			k := columns[n-len(yearInputs)]
			d.Input, d.Low, d.High = s.inputs[k], ends[k].low[row].margin(), ends[k].high[row].margin()
			shares[k] = d.Share
		}
		if d.Share >= leastShare {
			c.Drivers = append(c.Drivers, d)
		}
	}
	sort.SliceStable(c.Drivers, func(a, b int) bool { return c.Drivers[a].Share > c.Drivers[b].Share })
	return shares, nil
}

// flip finds the input that changes the class at a row with the least of its own doubt: the nearest ones by a straight line from the best margin to
// that at either end, then halved for. Nothing within the 5th and 95th percentile is no flip.
func (s *sample) flip(row int, ends []end) (Flip, error) {
	var f Flip
	works := s.full[row].Class == ledger.Comfortable
	changes := func(x *drawnSpot) bool { return (x.class() == ledger.Comfortable) != works }
	nearest := math.Inf(1)
	for _, to := range s.candidates(row, ends, changes) {
		value, far, err := s.crossing(to.input, to.above, row, changes)
		if err != nil {
			return f, err
		}
		f.Runs += halvings
		if far < nearest {
			nearest = far
			f = Flip{Found: true, Input: s.inputs[to.input], Value: value, Above: to.above, Far: far, Runs: f.Runs}
		}
	}
	return f, nil
}

// candidate is one end of an input at which the class is another one; way is where a straight line puts the change, 0 at best and 1 at the end.
type candidate struct {
	input int
	above bool
	way   float64
}

// tried is how many candidates are halved for.
const tried = 3

func (s *sample) candidates(row int, ends []end, changes func(*drawnSpot) bool) (out []candidate) {
	best := math.Abs(s.bestMargin(row))
	for k := range s.inputs {
		for i, at := range [2]*drawnSpot{&ends[k].low[row], &ends[k].high[row]} {
			if changes(at) {
				out = append(out, candidate{k, i == 1, best / (best + math.Abs(at.margin()))})
			}
		}
	}
	sort.SliceStable(out, func(a, b int) bool { return out[a].way < out[b].way })
	return out[:min(len(out), tried)]
}

// halvings along an input: its doubt is cut into 1/256 of the way to the end.
const halvings = 8

// crossing halves between the best value and one end of an input for where the class changes; far is how much of the way it is, in normal deviates.
func (s *sample) crossing(k int, above bool, row int, changes func(*drawnSpot) bool) (value, far float64, err error) {
	low, high := 0.0, normal90
	at := func(z float64) float64 {
		if !above {
			z = -z
		}
		return s.inputs[k].Doubt.At(0.5 * math.Erfc(-z/math.Sqrt2))
	}
	for range halvings {
		mid := (low + high) / 2
		x := s.bestInputs()
		x[k] = at(mid)
		spots, err := s.spots(x, meanYear())
		if err != nil {
			return 0, 0, err
		}
		if changes(&spots[row]) {
			high = mid
		} else {
			low = mid
		}
	}
	return at(high), high, nil
}

// FieldWork is work in the field that narrows the margin.
type FieldWork struct {
	Work     string
	From, To float64 // width of the 90 % range of the margin, points
	Narrows  []string
}

// work narrows some inputs to a share of their doubt.
type work struct {
	name   string
	keys   []string // of the stand and the site, or of the seedling's traits
	leaves float64  // of the standard deviation
}

// works are what practitioners measure (sizes of samples common practice). What is left: of leaf area, the 90 % interval of 7 % that 12 pairs
// with 15 % noise give, against 30 %; of plants, a mean of six that vary by 15 to 30 %, against the library's ranges; of heights and crowns, a mean of ten.
var works = []work{
	{"12 overcast light pairs", []string{"stand.lai", "stand.clumping", "stand.understory.lai"}, 0.27},
	{"height and crown base of 10 trees", []string{"stand.height", "stand.crown_base"}, 0.32},
	{"reach of 10 crowns at the edge", []string{"stand.crown_radius"}, 0.32},
	{"slope and aspect at the spot, three times", []string{"site.slope", "site.aspect"}, 0.58},
	{"leaf-out dates in two springs", []string{"stand.leaves.out", "leaves.out"}, 0.5},
	{"a radiation and temperature record nearby", []string{"weather.radiation", "weather.temperature"}, 0.5},
	{"light curves on 6 plants", []string{"leaf.amax", "leaf.rd", "leaf.phi"}, 0.45},
	{"leaf area and dry mass of 6 plants", []string{"leaf.lma", "mass", "crown_lai"}, 0.45},
	{"respiration of stems and roots of 6 plants", []string{"respiration"}, 0.3},
}

// leastGain is the share of the range that work must save to be named.
const leastGain = 0.03

// measures lists the work that would narrow the margin, by the shares of variance of what it tells: range times
// sqrt(1 - sum share (1 - left^2)).
func (s *sample) measures(c *Choice, shares []float64, seedling int) (out []FieldWork) {
	from := c.Margin[2] - c.Margin[0]
	for _, w := range works {
		saved := 0.0
		m := FieldWork{Work: w.name, From: from}
		for k, in := range s.inputs {
			if (in.Seedling < 0 || in.Seedling == seedling) && w.tells(in) && shares[k] > 0 {
				saved += shares[k] * (1 - w.leaves*w.leaves)
				m.Narrows = append(m.Narrows, in.Label)
			}
		}
		if m.To = from * math.Sqrt(math.Max(0, 1-saved)); m.To < from*(1-leastGain) {
			out = append(out, m)
		}
	}
	sort.SliceStable(out, func(a, b int) bool { return out[a].To < out[b].To })
	return out
}

// tells whether the work measures an input.
func (w work) tells(in Input) bool {
	for _, key := range w.keys {
		if in.key() == key {
			return true
		}
	}
	return false
}
