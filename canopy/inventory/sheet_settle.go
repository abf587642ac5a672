package inventory

import (
	"fmt"
	"math"
)

// plotGround is what the plots of a sheet cover: 0 plots where it names none.
type plotGround struct {
	plots int
	area  float64 // ha over all plots; NaN where not given
}

// settle brings the entries to rows per hectare of the whole stand.
func (r *sheetReader) settle() {
	g := r.ground()
	r.settlePercent(g)
	derived := map[string]bool{}
	for _, e := range r.entries {
		if e.species == nil || e.zero() && e.given() {
			continue
		}
		perHa := r.perHa(e, g)
		if row, how, ok := r.rowOf(e, perHa, e.basal/float64(max(1, g.plots))); ok {
			r.sheet.Rows = append(r.sheet.Rows, row)
			derived[how] = true
		}
	}
	for _, how := range []string{treesDerived, dbhDerived} {
		if derived[how] {
			r.note(0, how)
		}
	}
	r.settleTotals(g)
	r.checkStand()
}

const (
	treesDerived = "trees per area taken from basal area and diameter class"
	dbhDerived   = "diameters taken as the quadratic mean from basal area and trees per area"
)

// given tells whether any amount is given.
func (e sheetEntry) given() bool {
	return !math.IsNaN(e.perArea) || !math.IsNaN(e.count) || !math.IsNaN(e.basal) || !math.IsNaN(e.percent)
}

// ground gathers the plots and their areas.
func (r *sheetReader) ground() plotGround {
	areas := map[string]float64{}
	for _, e := range r.entries {
		before, seen := areas[e.plot]
		switch {
		case !seen:
			areas[e.plot] = e.ground
			if e.plot != "" {
				r.sheet.Plots = append(r.sheet.Plots, e.plot)
			}
		case math.IsNaN(before):
			areas[e.plot] = e.ground
		case !math.IsNaN(e.ground) && !agree(before, e.ground):
			r.fault(Fault{Line: e.line, Column: r.titleOf(plotAreaRole), Value: fmt.Sprintf("%.4g ha", e.ground),
				Fix: fmt.Sprintf("one area for plot %s: a line above says %.4g ha", e.plot, before)})
		}
	}
	g := plotGround{plots: len(r.sheet.Plots)}
	if g.plots == 0 {
		g.area = r.oneGround(areas)
		return g
	}
	if _, unnamed := areas[""]; unnamed {
		r.fault(Fault{Column: r.titleOf(plotRole), Fix: "the plot on every line"})
	}
	for _, p := range r.sheet.Plots {
		g.area += areas[p]
	}
	return g
}

func (r *sheetReader) oneGround(areas map[string]float64) float64 {
	if a, ok := areas[""]; ok {
		return a
	}
	return math.NaN()
}

// perHa is trees per hectare of the stand: NaN where the entry gives none.
func (r *sheetReader) perHa(e sheetEntry, g plotGround) float64 {
	stated := e.perArea / float64(max(1, g.plots))
	if math.IsNaN(e.count) {
		return stated
	}
	counted := math.NaN()
	switch {
	case g.area > 0:
		counted = e.count / g.area
	case g.plots == 0 && r.options.Area > 0:
		counted = e.count / r.options.Area
	case math.IsNaN(stated):
		r.faultOnce(Fault{Column: r.titleOf(countRole), Fix: "the ground that was counted: a column plot_area [ac], [ha] or [m2] over all plots, or the area of the stand"})
		return math.NaN()
	}
	switch {
	case math.IsNaN(stated):
		return counted
	case !math.IsNaN(counted) && !agree(stated, counted):
		r.fault(Fault{Line: e.line, Column: r.titleOf(countRole), Value: fmt.Sprintf("%g", e.count),
			Fix: fmt.Sprintf("a count that fits %.4g trees/ha on this line: it makes %.4g", stated, counted)})
	}
	return stated
}

// rowOf completes a class from what its line gives; how says what was derived.
func (r *sheetReader) rowOf(e sheetEntry, perHa, basal float64) (row Row, how string, ok bool) {
	row = Row{Class: Class{Species: e.species, DBH: e.dbh, PerHa: perHa, Height: e.height, CrownBase: e.crownBase}, Line: e.line, BasalArea: basal, Plot: e.plot}
	hasDBH, hasTrees, hasBasal := !math.IsNaN(e.dbh), !math.IsNaN(perHa), !math.IsNaN(basal)
	switch {
	case hasDBH && hasTrees:
		row.BasalArea = row.Class.BasalArea()
		r.missed(e.line, basalAreaRole, basal, row.BasalArea)
	case hasDBH && hasBasal:
		row.PerHa, how = basal/StemArea(e.dbh), treesDerived
	case hasTrees && hasBasal && perHa > 0:
		row.DBH, how = math.Sqrt(4/math.Pi*basal/perHa), dbhDerived
		if !(row.DBH > 0 && row.DBH <= stoutest) {
			r.fault(Fault{Line: e.line, Column: r.titleOf(basalAreaRole), Fix: fmt.Sprintf("basal area and trees that fit: %.4g m2/ha and %.4g trees/ha make a mean diameter of %.3g m", basal, perHa, row.DBH)})
			return row, how, false
		}
	case hasBasal:
		row.DBH, row.PerHa = math.NaN(), math.NaN()
	case hasTrees:
		r.lineFault(e.line, dbhRole, "the diameter or the diameter class")
		return row, how, false
	case math.IsNaN(e.count) && math.IsNaN(e.percent):
		r.lineFault(e.line, perAreaRole, "how many trees, 0 for none")
		return row, how, false
	default:
		return row, how, false
	}
	return row, how, row.BasalArea > 0
}

// lineFault faults a cell that is missing, unless the line has a fault already.
func (r *sheetReader) lineFault(line int, role sheetRole, fix string) {
	for _, f := range r.faults {
		if f.Line == line {
			return
		}
	}
	r.fault(Fault{Line: line, Column: r.titleOf(role), Fix: fix})
}

// settlePercent turns shares of basal area to basal area, by the total of the sheet or of the options.
func (r *sheetReader) settlePercent(g plotGround) {
	sum, wanted := 0.0, false
	for _, e := range r.entries {
		if e.shared() {
			sum, wanted = sum+e.percent, true
		}
	}
	if !wanted {
		return
	}
	title, whole := r.titleOf(percentRole), 100.0
	if agree(sum, 1) {
		whole = 1
		r.note(0, fmt.Sprintf("column %q read as shares of one, which they add to", title))
	}
	if !agree(sum, whole) && len(r.faults) == 0 {
		r.fault(Fault{Column: title, Value: fmt.Sprintf("%.4g", sum), Fix: "shares that add to 100 %"})
	}
	if g.plots > 1 {
		r.fault(Fault{Column: title, Fix: "shares of the whole stand, not of plots"})
	}
	total := r.standBasal()
	if !(total > 0) {
		r.fault(Fault{Column: title, Fix: "the basal area of the stand beside the shares: a totals row with basal_area [m2/ha] or [ft2/ac], or the stand's own"})
		return
	}
	r.note(0, fmt.Sprintf("column %q read as shares of a basal area of %.4g m2/ha", title, total))
	for i := range r.entries {
		if e := &r.entries[i]; e.shared() {
			e.basal = e.percent / whole * total
		}
	}
}

// shared tells whether only a share says how much there is.
func (e sheetEntry) shared() bool {
	return !math.IsNaN(e.percent) && math.IsNaN(e.basal) && math.IsNaN(e.perArea) && math.IsNaN(e.count)
}

// standBasal is the basal area that the sheet says of the whole stand, else that of the options.
func (r *sheetReader) standBasal() float64 {
	for _, t := range r.totals {
		if t.species != nil || t.total != wholeTotal || t.plot != "" || math.IsNaN(t.basal) {
			continue
		}
		if r.options.BasalArea > 0 && !agree(t.basal, r.options.BasalArea) {
			r.note(t.line, fmt.Sprintf("the sheet's basal area of %.4g m2/ha taken, not the %.4g given beside it", t.basal, r.options.BasalArea))
		}
		return t.basal
	}
	return r.options.BasalArea
}
