package report

import (
	"math"
	"sort"
	"strings"

	"shadeledger/scenarios"
	"shadeledger/scenarios/ledger"
)

// outcome is what one treatment does for one seedling inside the opening or under the canopy.
type outcome struct {
	class    ledger.Class
	stations []string // of that class, in the plan's order
	all      bool     // every station inside is of that class
	light    float64  // brightest leaf-on percent inside
	need     float64  // lowest leaf-on threshold; NaN where the year is below zero at every light
}

// board is a run gathered by treatment and seedling.
type board struct {
	results *scenarios.Results
	cells   [][]outcome // by treatment and seedling
	low, up []float64   // by treatment: season percent of light inside, darkest and brightest
	doubts  *Doubts
	marks   *marks
}

// gather reads the year's rows of a run.
func gather(r *scenarios.Results) *board {
	b := &board{results: r, marks: marksOf(r)}
	place := map[[3]string]*scenarios.BalanceRow{}
	for i := range r.Balance {
		row := &r.Balance[i]
		place[[3]string{row.Treatment, row.Station, row.Species}] = row
	}
	for _, t := range r.Stations {
		low, up := math.Inf(1), math.Inf(-1)
		var cells []outcome
		for _, s := range r.Plan.Seedlings {
			o := outcome{light: math.Inf(-1), need: math.NaN()}
			inside := 0
			for i, name := range t.Names {
				row := place[[3]string{t.Treatment.Name, name, s.Name}]
				if row == nil || !t.Inside[i] {
					continue
				}
				inside++
				low, up = math.Min(low, row.Light), math.Max(up, row.Light)
				o.take(row)
			}
			o.all = len(o.stations) == inside
			cells = append(cells, o)
		}
		b.cells = append(b.cells, cells)
		b.low, b.up = append(b.low, low), append(b.up, up)
	}
	return b
}

// take adds a station's row.
func (o *outcome) take(row *scenarios.BalanceRow) {
	if o.stations == nil || row.Class > o.class {
		o.class, o.stations = row.Class, nil
	}
	if row.Class == o.class {
		o.stations = append(o.stations, row.Station)
	}
	o.light = math.Max(o.light, row.LightLeafOn)
	if row.BreakEven.Found && !(o.need <= row.BreakEven.Threshold.LeafOn) {
		o.need = row.BreakEven.Threshold.LeafOn
	}
}

// byCut lists the treatments from the lightest cut to the heaviest; equal ones keep the plan's order.
func (b *board) byCut() []int {
	p := b.results.Plan
	order := make([]int, len(b.cells))
	for i := range order {
		order[i] = i
	}
	sort.SliceStable(order, func(x, y int) bool {
		return scenarios.CutOf(p, &p.Treatments[order[x]]).Lighter(scenarios.CutOf(p, &p.Treatments[order[y]]))
	})
	return order
}

// decision says in words the lightest cut under which each seedling is comfortable, or why there is none.
func (b *board) decision() string {
	p := b.results.Plan
	lightest := b.lightest()
	works := 0
	for _, t := range lightest {
		if t >= 0 {
			works++
		}
	}
	if works == 0 {
		return "Nothing works: no seedling is comfortable under any treatment; " + b.lacking(lightest) + "."
	}
	var parts []string
	uncut := true
	for _, t := range b.byCut() {
		var names []string
		for s, at := range lightest {
			if at == t {
				names = append(names, p.Seedlings[s].Name+b.where(t, s))
			}
		}
		if names == nil {
			continue
		}
		cut := scenarios.CutOf(p, &p.Treatments[t])
		uncut = uncut && cut == scenarios.Cut{}
		parts = append(parts, p.Treatments[t].Name+" for "+strings.Join(names, ", "))
	}
	if works == len(lightest) && uncut {
		return "Leave it alone: every seedling is comfortable without a cut, under " + strings.Join(parts, "; ") + "."
	}
	if works < len(lightest) {
		parts = append(parts, "nothing for "+b.lacking(lightest))
	}
	return "Lightest cut that works: " + strings.Join(parts, "; ") + "."
}

// lacking gives the reason for every seedling without a treatment.
func (b *board) lacking(lightest []int) string {
	var out []string
	for s, at := range lightest {
		if at >= 0 {
			continue
		}
		light, need := math.Inf(-1), math.NaN()
		for t := range b.cells {
			c := b.cells[t][s]
			light = math.Max(light, c.light)
			if !(need <= c.need) {
				need = c.need
			}
		}
		name := b.results.Plan.Seedlings[s].Name
		if math.IsNaN(need) {
			out = append(out, name+" (loses carbon at every light)")
		} else {
			out = append(out, name+" (wants "+whole(need)+" % leaf-on, brightest "+whole(light)+")")
		}
	}
	return strings.Join(out, ", ")
}

// where names the stations of an outcome in brackets, or nothing under a canopy.
func where(o outcome) string {
	if s := letters(o); s != "" {
		return " (" + s + ")"
	}
	return ""
}

// where is the same with doubts: how sure it is and the years it holds.
func (b *board) where(t, seedling int) string {
	if s := b.doubts.sure(t, seedling); s != "" {
		return " (" + s + ")"
	}
	return where(b.cells[t][seedling])
}

// letters shortens default stations to C N E S W; stations the user named keep their names.
func letters(o outcome) string {
	if len(o.stations) == 1 && o.stations[0] == scenarios.UnderCanopy {
		return ""
	}
	if o.all {
		return "all"
	}
	var out []string
	for _, s := range o.stations {
		short := s
		switch direction, rest, _ := strings.Cut(s, " "); {
		case s == "centre":
			short = "C"
		case rest == "third" || rest == "edge":
			short = direction
		}
		if len(out) == 0 || out[len(out)-1] != short {
			out = append(out, short)
		}
	}
	return strings.Join(out, " ")
}
