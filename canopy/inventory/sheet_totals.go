package inventory

import (
	"fmt"
	"math"

	"shadeledger/leaf/traits"
)

// takeTotal keeps a line of totals apart from the classes. A total of neither the stand nor one species is only noted.
func (r *sheetReader) takeTotal(e sheetEntry, kind totalKind, label string) {
	r.filler = filler{}
	e.total, e.label = kind, label
	if label != "" {
		s, err := nameSpecies(label)
		if err != nil {
			r.note(e.line, fmt.Sprintf("a total of %q, not read as a class", label))
			return
		}
		e.species = s
	}
	r.totals = append(r.totals, e)
}

// settleTotals brings the totals to the stand and notes what the rows miss.
func (r *sheetReader) settleTotals(g plotGround) {
	last := 0
	for _, t := range r.totals {
		if t.species == nil && t.plot == "" {
			last = t.line
		}
	}
	above := 0
	for _, t := range r.totals {
		r.settleTotal(t, g, totalPlace{above: above, last: t.line == last})
		above = t.line
	}
}

// totalPlace is where a total stands among the others.
type totalPlace struct {
	above int // line of the total before it
	last  bool
}

func (r *sheetReader) settleTotal(t sheetEntry, g plotGround, place totalPlace) {
	all := func(Row) bool { return true }
	block := func(row Row) bool { return row.Line > place.above && row.Line < t.line }
	switch {
	case t.plot != "" && g.plots > 0:
		perHa, basal := r.sums(func(row Row) bool { return row.Plot == t.plot && (t.species == nil || row.Species == t.species) })
		r.missed(t.line, perAreaRole, t.perArea, perHa*float64(g.plots))
		r.missed(t.line, basalAreaRole, t.basal, basal*float64(g.plots))
		r.note(t.line, fmt.Sprintf("a total of plot %s, not read as a class", t.plot))
	case t.species != nil:
		r.keep(t.species, r.compare(t, g, func(row Row) bool { return row.Species == t.species }))
	case t.total == subTotal || !place.last && !r.fits(t, g, all) && r.fits(t, g, block):
		total := r.compare(t, g, block)
		if s := r.oneSpecies(block); s != nil {
			r.keep(s, total)
			return
		}
		r.note(t.line, "a subtotal, not read as a class")
	default:
		r.keep(nil, r.compare(t, g, all))
	}
}

func (r *sheetReader) keep(s *traits.Species, t Total) {
	if t.Species = s; !math.IsNaN(t.PerHa) || !math.IsNaN(t.BasalArea) {
		r.sheet.Totals = append(r.sheet.Totals, t)
	}
}

// oneSpecies is the only species of some rows; nil where there are several or none.
func (r *sheetReader) oneSpecies(of func(Row) bool) *traits.Species {
	var s *traits.Species
	for _, row := range r.sheet.Rows {
		switch {
		case !of(row) || row.Species == s:
		case s == nil:
			s = row.Species
		default:
			return nil
		}
	}
	return s
}

// sums adds the rows up: trees/ha and m2/ha.
func (r *sheetReader) sums(of func(Row) bool) (perHa, basal float64) {
	for _, row := range r.sheet.Rows {
		if of(row) {
			perHa += row.PerHa
			basal += row.BasalArea
		}
	}
	return perHa, basal
}

// totalOf is a total of the whole stand. One over several plots may be their sum or their mean: their mean, unless only
// the sum fits the rows.
func (r *sheetReader) totalOf(t sheetEntry, g plotGround, perHa, basal float64) Total {
	plots := float64(max(1, g.plots))
	mean := func(stated, rows float64) float64 {
		if !agree(stated, rows) && agree(stated/plots, rows) {
			return stated / plots
		}
		return stated
	}
	total := Total{Line: t.line, PerHa: mean(t.perArea, perHa), BasalArea: mean(t.basal, basal)}
	if math.IsNaN(total.PerHa) && !math.IsNaN(t.count) {
		switch {
		case g.area > 0:
			total.PerHa = t.count / g.area
		case g.plots == 0 && r.options.Area > 0:
			total.PerHa = t.count / r.options.Area
		}
	}
	return total
}

func (r *sheetReader) fits(t sheetEntry, g plotGround, of func(Row) bool) bool {
	perHa, basal := r.sums(of)
	total := r.totalOf(t, g, perHa, basal)
	if math.IsNaN(total.PerHa) {
		return agree(total.BasalArea, basal)
	}
	return agree(total.PerHa, perHa)
}

// compare notes where a total and its rows are over 2 % apart.
func (r *sheetReader) compare(t sheetEntry, g plotGround, of func(Row) bool) Total {
	perHa, basal := r.sums(of)
	total := r.totalOf(t, g, perHa, basal)
	r.missed(t.line, perAreaRole, total.PerHa, perHa)
	r.missed(t.line, basalAreaRole, total.BasalArea, basal)
	return total
}
