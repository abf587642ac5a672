package report

import (
	"fmt"
	"math"
	"strings"

	"shadeledger/scenarios"
	"shadeledger/scenarios/decide"
)

// Doubts is how sure a balance is and how long it holds.
type Doubts struct {
	Spreads *decide.Spreads
	Years   *decide.Future
}

// told tells whether there are enough draws to say anything.
func (d *Doubts) told() bool { return d != nil && len(d.Spreads.Choices) > 0 }

// option of a treatment for a seedling, by their places in the plan.
func (d *Doubts) option(t, seedling int) *decide.Option {
	c := &d.Spreads.Choices[seedling]
	for i := range c.Options {
		if c.Options[i].Treatment == d.Spreads.Plan.Treatments[t].Name {
			return &c.Options[i]
		}
	}
	return nil
}

// years is the range in which the crew is due again, early to late: "5-7 y". Nothing where no station is comfortable to begin with.
func (d *Doubts) years(t, seedling int) string {
	if d == nil {
		return ""
	}
	p := d.Years.Plan
	x := &d.Years.Reentries[t*len(p.Seedlings)+seedling]
	early, late := x.Year[decide.Early], x.Year[decide.Late]
	if late == 0 {
		return ""
	}
	text := func(y float64) string {
		if math.IsInf(y, 1) {
			return itoa(p.Years.Horizon) + "+"
		}
		return text0(y, 0)
	}
	if text(early) == text(late) {
		return text(early) + " y"
	}
	return text(early) + "-" + text(late) + " y"
}

// sure says how likely a seedling is comfortable under a treatment and for how many years.
func (d *Doubts) sure(t, seedling int) string {
	if !d.told() {
		return ""
	}
	s := percent(d.option(t, seedling).Chance)
	if y := d.years(t, seedling); y != "" {
		s += ", " + y
	}
	return s
}

// flips says what would change the decision soonest and what to measure next, for the seedling whose decision hangs on least.
func (d *Doubts) flips() []string {
	if !d.told() {
		return nil
	}
	var soonest *decide.Choice
	for i := range d.Spreads.Choices {
		if c := &d.Spreads.Choices[i]; c.Flip.Found && (soonest == nil || c.Flip.Far < soonest.Flip.Far) {
			soonest = c
		}
	}
	o := Output{Units: d.Spreads.Plan.Units}
	if soonest == nil {
		c := &d.Spreads.Choices[0]
		return wrap("No single input within its range flips this. "+measureLine(c), Width, Width)
	}
	return wrap(soonest.Species+" flips if"+strings.TrimPrefix(flipLine(soonest, o), "Flips if:")+" "+measureLine(soonest), Width, Width)
}

// ranged adds NAME_low and NAME_high to the columns of the balance; rows of parts of a year and stations that were not drawn leave them empty.
func (d *Doubts) ranged(columns []column[scenarios.BalanceRow]) []column[scenarios.BalanceRow] {
	if d == nil {
		return columns
	}
	rows := map[[3]string]*decide.SpreadRow{}
	for i := range d.Spreads.Rows {
		x := &d.Spreads.Rows[i]
		rows[[3]string{x.Treatment, x.Station, x.Species}] = x
	}
	at := func(k int, of func(*decide.SpreadRow) decide.Range) func(*scenarios.BalanceRow) float64 {
		return func(r *scenarios.BalanceRow) float64 {
			x := rows[[3]string{r.Treatment, r.Station, r.Species}]
			if x == nil || r.Period != yearPeriod {
				return math.NaN()
			}
			return of(x)[k]
		}
	}
	out := columns
	for _, c := range []struct {
		name string
		of   func(*decide.SpreadRow) decide.Range
	}{
		{"light_pct", func(x *decide.SpreadRow) decide.Range { return x.Light }}, {"light_leaf_on_pct", func(x *decide.SpreadRow) decide.Range { return x.LeafOn }},
		{"net_gC", func(x *decide.SpreadRow) decide.Range { return x.Net }}, {"income_cost_ratio", func(x *decide.SpreadRow) decide.Range { return x.Ratio }},
		{"break_even_leaf_on_pct", func(x *decide.SpreadRow) decide.Range { return x.BreakEven }}, {"threshold_leaf_on_pct", func(x *decide.SpreadRow) decide.Range { return x.Threshold }},
	} {
		out = append(out, figure(c.name+"_low", at(0, c.of)), figure(c.name+"_high", at(2, c.of)))
	}
	for _, c := range []struct {
		name string
		of   func(*decide.SpreadRow) float64
	}{{"below_pct", chanceOf(0)}, {"marginal_pct", chanceOf(1)}, {"comfortable_pct", chanceOf(2)}} {
		out = append(out, figure(c.name, func(r *scenarios.BalanceRow) float64 {
			if x := rows[[3]string{r.Treatment, r.Station, r.Species}]; x != nil && r.Period == yearPeriod {
				return c.of(x)
			}
			return math.NaN()
		}))
	}
	return out
}

// yearPeriod is the period of a year's rows.
const yearPeriod = "year"

// between is a figure with its range for tables: 54 (49-58).
func (d *Doubts) between(r *scenarios.BalanceRow, value string, of func(*decide.SpreadRow) decide.Range) string {
	if d == nil || r.Period != yearPeriod {
		return value
	}
	for i := range d.Spreads.Rows {
		if x := &d.Spreads.Rows[i]; x.Treatment == r.Treatment && x.Station == r.Station && x.Species == r.Species {
			low, high := of(x)[0], of(x)[2]
			return value + fmt.Sprintf(" (%s to %s)", sig(low, 2), sig(high, 2))
		}
	}
	return value
}
