package inventory

import (
	"fmt"
	"math"
	"regexp"
	"strings"

	"shadeledger/leaf/traits"
)

// sideColumn are headings of columns that need not be read.
var sideColumn = regexp.MustCompile(`(?i)volume|vorrat|note|remark|comment|bemerkung|age|alter|date|datum|biomass|value|crew|cords|bd ?ft|board`)

// agreement is how far two statements of one number may differ: rounding to two figures.
const agreement = 0.02

// agree compares two statements of one number.
func agree(a, b float64) bool {
	return math.Abs(a-b) <= agreement*math.Max(math.Abs(a), math.Abs(b))
}

// lastDigit is what the last digit of a number stands for: 0.1 in 12.5, where its mark can be nothing but decimal.
func lastDigit(cell string) float64 {
	numeral := leadPattern.FindString(cell)
	if mark := decisive(numeral); mark != 0 {
		return math.Pow(10, -float64(len(numeral)-1-strings.LastIndexByte(numeral, mark)))
	}
	return 1
}

// value reads the columns of a role on one line: NaN where none is filled. Two columns that do not agree are a fault.
func (r *sheetReader) value(rec sheetRecord, role sheetRole) float64 {
	found, at := math.NaN(), sheetColumn{}
	rounding := func(c sheetColumn) float64 { return 0.501 * c.factor() * lastDigit(rec.cell(c.index)) }
	for _, c := range r.head.columns {
		if c.role != role {
			continue
		}
		x := r.cellValue(rec, c)
		switch {
		case math.IsNaN(x):
		case math.IsNaN(found):
			found, at = x, c
		case !agree(found, x) && math.Abs(found-x) > rounding(at)+rounding(c):
			r.fault(Fault{Line: rec.line, Column: c.title, Value: rec.cell(c.index),
				Fix: fmt.Sprintf("the same number as %s in column %q, within 2 %%: these differ by %.0f %%",
					rec.cell(at.index), at.title, 100*math.Abs(x-found)/math.Max(x, found))})
		}
	}
	return found
}

// cellValue reads one cell in the unit of its column.
func (r *sheetReader) cellValue(rec sheetRecord, c sheetColumn) float64 {
	cell := rec.cell(c.index)
	if kind, _ := totalLabel(cell); missing(cell) || kind != noTotal {
		return math.NaN()
	}
	read := r.mark.cellNumber
	if c.role == dbhRole {
		read = r.mark.cellClass
	}
	v, err := read(cell)
	if err == nil && v.unit != "" {
		err = c.same(v.unit)
	}
	if err != nil {
		r.fault(Fault{Line: rec.line, Column: c.title, Value: cell, Fix: err.Error()})
		return math.NaN()
	}
	if x := v.value * c.factor(); x < 1e9 {
		return x
	}
	r.fault(Fault{Line: rec.line, Column: c.title, Value: cell, Fix: "a smaller number"})
	return math.NaN()
}

// factor is 1 for what needs no unit.
func (c sheetColumn) factor() float64 {
	if c.unit.measure == noMeasure {
		return 1
	}
	return c.unit.factor
}

// same tells whether a unit in a cell is that of the column.
func (c sheetColumn) same(unit string) error {
	u, ok := unitOf(unit)
	switch {
	case !ok:
		return fmt.Errorf("a number alone: %q is not a unit of %s", unit, c.role)
	case u.measure == c.unit.measure && u.factor == c.unit.factor:
		return nil
	case c.needs():
		return nil // its heading is a fault already
	case c.unit.measure == noMeasure:
		return fmt.Errorf("a number alone")
	}
	return fmt.Errorf("a number in %s, as the rest of the column, or that unit in every cell and none in the heading", c.unit.name)
}

// text is the first filled cell of a role.
func (r *sheetReader) text(rec sheetRecord, role sheetRole) string {
	for _, c := range r.head.columns {
		if t := rec.cell(c.index); c.role == role && !missing(t) {
			return t
		}
	}
	return ""
}

// firstOf is the first column of a role, empty where there is none.
func (r *sheetReader) firstOf(role sheetRole) sheetColumn {
	for _, c := range r.head.columns {
		if c.role == role {
			return c
		}
	}
	return sheetColumn{}
}

func (r *sheetReader) titleOf(role sheetRole) string { return r.firstOf(role).title }

// plotOf is the plot of a line, "" where that cell names a total.
func (r *sheetReader) plotOf(rec sheetRecord) string {
	plot := r.text(rec, plotRole)
	if kind, _ := totalLabel(plot); kind == wholeTotal || kind == meanLine && len(plot) > 2 {
		return ""
	}
	return plot
}

// kindOf looks for the name of a total on a line.
func (r *sheetReader) kindOf(rec sheetRecord) (totalKind, string) {
	kind, rest := noTotal, ""
	for i, c := range rec.cells {
		k, left := totalLabel(c)
		if k == noTotal || !r.mayTotal(i, c, k) {
			continue
		}
		if kind == noTotal || left != "" {
			kind, rest = k, left
		}
	}
	return kind, rest
}

// mayTotal tells whether a cell may name a total: remarks may not, and only species, diameters and cells without a
// heading may say more than that word. A plot may be named SE.
func (r *sheetReader) mayTotal(index int, cell string, kind totalKind) bool {
	for _, c := range r.head.columns {
		switch {
		case c.index != index || c.role == speciesRole || c.role == dbhRole:
		case c.role == unknownRole && sideColumn.MatchString(c.title):
			return false
		case kind == subTotal || kind == meanLine && len(cell) <= 2:
			return false
		}
	}
	return true
}

// readLong reads a line of one class.
func (r *sheetReader) readLong(rec sheetRecord) {
	name := r.text(rec, speciesRole)
	kind, label := r.kindOf(rec)
	switch {
	case kind == meanLine:
		r.note(rec.line, "a line of averages, not read")
		return
	case kind == noTotal && !r.counted(rec):
		r.loneLine(rec, name)
		return
	}
	e := r.readValues(rec)
	e.plot = r.plotOf(rec)
	if kind != noTotal {
		r.takeTotal(e, kind, totalName(name, label))
		return
	}
	switch e.species = r.speciesOf(rec, name); {
	case e.species != nil || e.zero() && e.plot != "":
		r.entries = append(r.entries, e)
	case name == "" && missing(r.text(rec, dbhRole)) && !e.zero():
		r.fault(Fault{Line: rec.line, Column: r.titleOf(speciesRole), Fix: "the species, or total where the line is one"})
	}
}

// totalName is what a total is of: what its label says beside that word, else the species of its line.
func totalName(name, label string) string {
	if kind, _ := totalLabel(name); label == "" && kind == noTotal {
		return name
	}
	return label
}

// zero tells whether a line counts nothing, as a plot without trees.
func (e sheetEntry) zero() bool {
	sum := 0.0
	for _, x := range []float64{e.perArea, e.count, e.basal, e.percent} {
		if !math.IsNaN(x) {
			sum += x
		}
	}
	return sum == 0
}

// counted tells whether a line has any number of a class.
func (r *sheetReader) counted(rec sheetRecord) bool {
	for _, c := range r.head.columns {
		if c.role.numeric() && c.role != plotAreaRole && !missing(rec.cell(c.index)) {
			return true
		}
	}
	return false
}

// loneLine takes a species that heads the lines below, a plot without trees, or a remark.
func (r *sheetReader) loneLine(rec sheetRecord, name string) {
	plot := r.plotOf(rec)
	if name == "" && plot != "" {
		e := emptyEntry(rec.line)
		e.plot, e.ground = plot, r.value(rec, plotAreaRole)
		r.entries = append(r.entries, e)
		r.note(rec.line, fmt.Sprintf("plot %s read as one without trees", plot))
		return
	}
	r.filler = filler{}
	if s, _ := nameSpecies(name); name != "" && s != nil {
		r.filler = filler{s, rec.line}
		r.note(rec.line, fmt.Sprintf("%s stands alone: read as the species of the lines below that name none", name))
		return
	}
	if name != "" && rec.filled() > 1 {
		r.speciesOf(rec, name)
		return
	}
	r.note(rec.line, fmt.Sprintf("not read: %q", strings.TrimSpace(strings.Join(rec.cells, " "))))
}

// readValues reads the numbers of a line.
func (r *sheetReader) readValues(rec sheetRecord) sheetEntry {
	e := emptyEntry(rec.line)
	e.dbh = r.diameter(rec)
	e.height, e.crownBase = r.value(rec, heightRole), r.value(rec, crownBaseRole)
	e.perArea, e.count = r.value(rec, perAreaRole), r.value(rec, countRole)
	e.basal, e.percent = r.value(rec, basalAreaRole), r.value(rec, percentRole)
	e.ground = r.value(rec, plotAreaRole)
	if r.head.has(treeRole) && !r.head.has(perAreaRole) && !r.head.has(countRole) && !r.head.has(basalAreaRole) {
		e.count = 1
	}
	return e
}

// diameter is the mid-point where a line gives both ends of its class.
func (r *sheetReader) diameter(rec sheetRecord) float64 {
	from, to := r.value(rec, dbhRole), r.value(rec, dbhToRole)
	switch {
	case math.IsNaN(to):
		return from
	case math.IsNaN(from) || from >= to:
		r.fault(Fault{Line: rec.line, Column: r.titleOf(dbhToRole), Value: r.text(rec, dbhToRole), Fix: "the larger end of the class, with the smaller end in its own column"})
		return math.NaN()
	}
	return (from + to) / 2
}

// speciesOf names the species of a line; a line that names none takes that of the line above.
func (r *sheetReader) speciesOf(rec sheetRecord, name string) *traits.Species {
	if name == "" {
		return r.filled(rec)
	}
	var found *traits.Species
	for _, c := range r.head.columns {
		cell := rec.cell(c.index)
		if c.role != speciesRole || missing(cell) {
			continue
		}
		s, err := nameSpecies(cell)
		if err == nil && found != nil && found != s {
			err = twoSpecies{cell + " beside " + name, found, s}
		}
		if err != nil {
			r.fault(Fault{Line: rec.line, Column: c.title, Value: cell, Fix: err.Error()})
			r.filler = filler{}
			return nil
		}
		found = s
	}
	r.filler = filler{found, rec.line}
	return found
}

// filled is the species from above for a line that gives a diameter and no name.
func (r *sheetReader) filled(rec sheetRecord) *traits.Species {
	if missing(r.text(rec, dbhRole)) {
		return nil
	}
	if r.filler.species == nil {
		r.fault(Fault{Line: rec.line, Column: r.titleOf(speciesRole), Fix: "the species, or total where the line is one"})
		return nil
	}
	r.note(rec.line, fmt.Sprintf("no species: taken as %s from line %d", r.filler.species.Botanical, r.filler.line))
	return r.filler.species
}
