package plan

import (
	"fmt"
	"math"

	"shadeledger/scenarios"
)

const usualHorizon = 30 // years

// usualClosing is the edge speed of border crowns where no region tells, m a year: low, best, high (Hibbs 1982, Runkle & Yetter 1987; common practice).
var usualClosing = [3]float64{0.10, 0.18, 0.40}

// closing is an edge speed of border crowns, m a year: low, best, high.
type closing struct {
	speed  [3]float64
	source string
}

const hibbs = "Hibbs 1982, hemlock and hardwoods, 0.06 to 0.14 m/y"

// speciesClosing are edge speeds measured on a species, by botanical name; they stand where no region is given and the species leads the stand. Hibbs 1982, Can. J. For.
// Res. 12:522-527: 6 to 14 cm a year by species, 26 at most, red oak fastest. Pritchard & Comeau 2004, For. Ecol. Manage. 188:235-248: branches of aspen edges 15.2 cm a year; its range is common practice.
// Spruce puts what an opening gives into diameter, beech into its crown (Bayer & Pretzsch 2017, Silva Fenn. 51(5):7748); the figures for both are common practice.
var speciesClosing = map[string]closing{
	"Populus tremuloides":   {[3]float64{0.10, 0.15, 0.20}, "Pritchard & Comeau 2004, aspen edges; range common practice"},
	"Quercus rubra":         {[3]float64{0.06, 0.14, 0.26}, "Hibbs 1982, the fastest of hemlock and hardwoods"},
	"Acer rubrum":           {[3]float64{0.06, 0.10, 0.14}, hibbs},
	"Betula alleghaniensis": {[3]float64{0.06, 0.10, 0.14}, hibbs},
	"Betula lenta":          {[3]float64{0.06, 0.10, 0.14}, hibbs},
	"Tsuga canadensis":      {[3]float64{0.06, 0.10, 0.14}, hibbs},
	"Picea abies":           {[3]float64{0.05, 0.12, 0.20}, practice + ", spruce widens little (Bayer & Pretzsch 2017)"},
	"Fagus sylvatica":       {[3]float64{0.10, 0.20, 0.40}, practice + ", beech widens most (Bayer & Pretzsch 2017)"},
}

// closingOf is the edge speed to assume: the region's, the leading species', or what is usual.
func (r *reader) closingOf(p *scenarios.Plan) closing {
	if r.region != nil {
		return closing{r.region.closing, "the region's, " + practice}
	}
	if p.Stand.Cruised() {
		if c, known := speciesClosing[p.Stand.Trees.Leading().Species.Botanical]; known {
			return c
		}
	}
	return closing{usualClosing, practice + "; Hibbs 1982, Runkle & Yetter 1987"}
}

// years reads how the stand closes again.
func (r *reader) years(v val, p *scenarios.Plan) {
	f := r.fields(v)
	assumed := r.closingOf(p)
	p.Years = scenarios.YearsAhead{Horizon: usualHorizon, Closing: assumed.speed}
	if x, ok := r.number(f["horizon"]); ok {
		if x != math.Trunc(x) {
			r.fault(f["horizon"], "", "whole years, 1 to 60")
		}
		p.Years.Horizon = int(x)
	}
	if x, ok := r.quantity(f["side_closure"]); ok {
		p.Years.Closing = r.doubtOf(f["side_closure"], x)
	} else if !f["side_closure"].present() {
		c := p.Years.Closing
		r.assume("years.side_closure", fmt.Sprintf("%.2f m/y (%.2f to %.2f)", c[1], c[0], c[2]), assumed.source)
		r.doubts = append(r.doubts, scenarios.Doubt{Key: "years.side_closure", Best: c[1], Low: c[0], High: c[2]})
	}
	if x, ok := r.number(f["leaf_regrowth"]); ok {
		p.Years.Regrowth = r.doubtOf(f["leaf_regrowth"], x)
	}
}

// doubtOf is low, best and high of a value just read.
func (r *reader) doubtOf(v val, best float64) [3]float64 {
	for _, d := range r.doubts {
		if d.Key == v.path {
			return [3]float64{d.Low, best, d.High}
		}
	}
	return [3]float64{best, best, best}
}

// What is drawn where the plan does not say.
const usualDraws, usualSeed = 2000, 1

// drawn reads how ranges are drawn.
func (r *reader) drawn(v val, p *scenarios.Plan) {
	f := r.fields(v)
	p.Draws = scenarios.Draws{Count: usualDraws, Seed: usualSeed}
	if x, ok := r.whole(f["count"]); ok {
		p.Draws.Count = int(x)
	}
	if x, ok := r.whole(f["seed"]); ok {
		p.Draws.Seed = uint64(x)
	}
}

// whole reads a whole number.
func (r *reader) whole(v val) (float64, bool) {
	x, ok := r.number(v)
	if ok && x != math.Trunc(x) {
		r.fault(v, "", "a whole number")
		return 0, false
	}
	return x, ok
}
