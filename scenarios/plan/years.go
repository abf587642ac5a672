package plan

import (
	"fmt"
	"math"

	"shadeledger/scenarios"
)

const usualHorizon = 30 // years

// usualClosing is the edge speed of border crowns where no region tells, m a year: low, best, high (Hibbs 1982, Runkle & Yetter 1987; common practice).
var usualClosing = [3]float64{0.10, 0.18, 0.40}

// years reads how the stand closes again.
func (r *reader) years(v val, p *scenarios.Plan) {
	f := r.fields(v)
	p.Years = scenarios.YearsAhead{Horizon: usualHorizon, Closing: usualClosing}
	if x, ok := r.number(f["horizon"]); ok {
		if x != math.Trunc(x) {
			r.fault(f["horizon"], "", "whole years, 1 to 60")
		}
		p.Years.Horizon = int(x)
	}
	if r.region != nil {
		p.Years.Closing = r.region.closing
	}
	if x, ok := r.quantity(f["side_closure"]); ok {
		p.Years.Closing = r.doubtOf(f["side_closure"], x)
	} else if !f["side_closure"].present() {
		c := p.Years.Closing
		source := "common practice; Hibbs 1982, Runkle & Yetter 1987"
		if r.region != nil {
			source = "the region's, " + practice
		}
		r.assume("years.side_closure", fmt.Sprintf("%.2f m/y (%.2f to %.2f)", c[1], c[0], c[2]), source)
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
	for key, to := range map[string]func(float64){"count": func(x float64) { p.Draws.Count = int(x) }, "seed": func(x float64) { p.Draws.Seed = uint64(x) }} {
		x, ok := r.number(f[key])
		if ok && x != math.Trunc(x) {
			r.fault(f[key], "", "a whole number")
		} else if ok {
			to(x)
		}
	}
}
