package inventory

import (
	"fmt"
	"math"
)

// stemUnits finds what the species columns of a wide table count: trees per area, basal area, or trees.
func (r *sheetReader) stemUnits(units map[sheetRole]sheetUnit) {
	unit := sheetUnit{}
	perArea, trees := units[perAreaRole]
	basal, areas := units[basalAreaRole]
	_, tally := units[countRole]
	switch {
	case trees && (!areas || r.head.has(basalAreaRole)):
		unit = perArea
	case areas && !trees:
		unit = basal
	case tally && !trees && !areas:
		r.tally = true
	default:
		unit = r.unitBySums()
	}
	for i := range r.head.columns {
		c := &r.head.columns[i]
		if c.role == stemRole && c.unit.measure != densities && c.unit.measure != basals {
			c.unit = unit
		}
	}
	for i := range r.head.columns {
		if c := &r.head.columns[i]; c.role == totalRole && c.unit.measure == noMeasure {
			c.unit = r.firstOf(stemRole).unit
		}
	}
	if r.head.has(stemRole) && (r.head.has(heightRole) || r.head.has(crownBaseRole)) {
		r.note(0, "heights of a line read as those of all its species")
	}
}

// unitBySums is the unit of a column that the species columns add to on every line.
func (r *sheetReader) unitBySums() sheetUnit {
	for _, total := range r.head.columns {
		if total.role != perAreaRole && total.role != basalAreaRole || total.needs() {
			continue
		}
		lines := 0
		for _, rec := range r.body {
			sum, stated := r.stemSum(rec), r.plainNumber(rec.cell(total.index))
			if math.IsNaN(stated) {
				continue
			}
			if !agree(sum, stated) {
				lines = 0
				break
			}
			lines++
		}
		if lines > 0 && r.head.has(stemRole) {
			r.note(0, fmt.Sprintf("species columns read in %s: on every line they add to column %q", total.unit.name, total.title))
			return total.unit
		}
	}
	return sheetUnit{}
}

func (r *sheetReader) stemSum(rec sheetRecord) float64 {
	sum := 0.0
	for _, c := range r.head.columns {
		named := c.role == stemRole || c.role == unknownRole && !sideColumn.MatchString(c.title)
		if x := r.plainNumber(rec.cell(c.index)); named && !math.IsNaN(x) {
			sum += x
		}
	}
	return sum
}

// plainNumber is NaN where a cell is no number.
func (r *sheetReader) plainNumber(cell string) float64 {
	if v, err := r.mark.cellNumber(cell); err == nil && !missing(cell) {
		return v.value
	}
	return math.NaN()
}

// readWide reads a line of one diameter class and many species.
func (r *sheetReader) readWide(rec sheetRecord) {
	kind, label := r.kindOf(rec)
	if kind == meanLine || kind == noTotal && !r.counted(rec) {
		r.note(rec.line, fmt.Sprintf("not read: %q", rec.cells[r.firstFilled(rec)]))
		return
	}
	base := r.readClass(rec)
	if kind != noTotal {
		r.wideTotals(rec, base, label)
		return
	}
	sum := 0.0
	for _, c := range r.head.columns {
		if c.role != stemRole {
			continue
		}
		x := r.cellValue(rec, c)
		if math.IsNaN(x) || x == 0 {
			continue
		}
		e := base
		e.species, e.perArea, e.basal = c.species, math.NaN(), math.NaN()
		r.put(&e, c, x)
		r.entries = append(r.entries, e)
		sum += x
	}
	if sum > 0 && math.IsNaN(base.dbh) && missing(r.text(rec, dbhRole)) {
		r.fault(Fault{Line: rec.line, Column: r.titleOf(dbhRole), Fix: "the diameter class, or total where the line is one"})
	}
	r.lineTotals(rec, base)
}

func (r *sheetReader) firstFilled(rec sheetRecord) int {
	for i, c := range rec.cells {
		if c != "" {
			return i
		}
	}
	return 0
}

// readClass reads what a line of a wide table says of all its species.
func (r *sheetReader) readClass(rec sheetRecord) sheetEntry {
	e := emptyEntry(rec.line)
	e.dbh = r.diameter(rec)
	e.height, e.crownBase = r.value(rec, heightRole), r.value(rec, crownBaseRole)
	e.perArea, e.ground = r.value(rec, perAreaRole), r.value(rec, plotAreaRole)
	e.plot = r.plotOf(rec)
	for _, c := range r.head.columns {
		switch {
		case c.role == basalAreaRole && !c.needs():
			e.basal = r.cellValue(rec, c)
		case c.role == totalRole && c.unit.measure == densities && math.IsNaN(e.perArea):
			e.perArea = r.cellValue(rec, c)
		case c.role == totalRole && c.unit.measure == basals && math.IsNaN(e.basal):
			e.basal = r.cellValue(rec, c)
		case c.role == countRole || c.role == totalRole && r.tally:
			e.count = r.cellValue(rec, c)
		}
	}
	return e
}

// put sets the number of a species column.
func (r *sheetReader) put(e *sheetEntry, c sheetColumn, x float64) {
	e.count = math.NaN()
	switch c.unit.measure {
	case densities:
		e.perArea = x
	case basals:
		e.basal = x
	default:
		e.count = x
	}
}

// wideTotals takes the totals of each species and of the whole from one line.
func (r *sheetReader) wideTotals(rec sheetRecord, base sheetEntry, label string) {
	base.dbh = math.NaN()
	if label != "" {
		r.note(rec.line, fmt.Sprintf("a total of %q, not read as a class", label))
		return
	}
	for _, c := range r.head.columns {
		if c.role != stemRole {
			continue
		}
		if x := r.cellValue(rec, c); !math.IsNaN(x) {
			e := base
			e.species, e.total, e.perArea, e.basal = c.species, wholeTotal, math.NaN(), math.NaN()
			r.put(&e, c, x)
			r.totals = append(r.totals, e)
		}
	}
	r.takeTotal(base, wholeTotal, "")
}

// lineTotals notes where the sums of a line differ from what its total columns say.
func (r *sheetReader) lineTotals(rec sheetRecord, base sheetEntry) {
	trees, basal := 0.0, 0.0
	for _, e := range r.entries {
		if e.line == rec.line {
			trees += e.perArea
			if math.IsNaN(e.basal) {
				basal += e.perArea * StemArea(e.dbh)
			} else {
				basal += e.basal
			}
		}
	}
	r.missed(rec.line, perAreaRole, base.perArea, trees)
	r.missed(rec.line, basalAreaRole, base.basal, basal)
}

// missed notes a stated number that is over 2 % from what the rows add to, in the unit of the sheet.
func (r *sheetReader) missed(line int, role sheetRole, stated, summed float64) {
	if math.IsNaN(stated) || math.IsNaN(summed) || agree(stated, summed) {
		return
	}
	unit := sheetUnit{factor: 1, name: role.likely(false)}
	for _, c := range r.head.columns {
		if c.unit.measure == role.measure() && (c.role == role || c.role == stemRole) {
			unit = c.unit
			break
		}
	}
	r.note(line, fmt.Sprintf("the sheet says %.4g %s, the trees on its lines make %.4g", stated/unit.factor, unit.name, summed/unit.factor))
}
