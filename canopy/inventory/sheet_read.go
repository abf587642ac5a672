package inventory

import (
	"fmt"
	"math"
	"regexp"
	"slices"

	"shadeledger/leaf/traits"
)

// ReadSheet reads a stand table from the text foresters keep: comma, semicolon or tab, units in the heading, below it or
// in a line above, one line a class or a tree, or one line a diameter class and one column a species. Lines of totals
// are kept apart. What cannot be read, or could be read in two ways, is a fault, all of them at once; with faults the
// sheet is not to be used.
func ReadSheet(data []byte, o SheetOptions) (Sheet, []Fault) {
	r := &sheetReader{options: o}
	text, encoding := decodeSheet(data)
	if encoding != "" {
		r.note(0, "the text is not UTF-8 and was read as "+encoding)
	}
	delimiter := delimiterOf(text)
	records, faults := splitSheet(text, delimiter)
	if r.faults = faults; len(faults) > 0 {
		return r.done()
	}
	head, ok := findHead(records)
	if !ok {
		r.fault(Fault{Fix: "a row of headings such as species, dbh [in], per_area [trees/ac]"})
		return r.done()
	}
	r.head = head
	r.mark.delimiter = delimiter
	r.heads, r.body = records[head.first:head.first+head.rows], records[head.first+head.rows:]
	r.learnMarks()
	r.findUnits(records)
	r.statedBasal(records[:head.first])
	r.checkHead()
	r.readBody()
	if !r.broken {
		r.checkEntries()
		r.settle()
	}
	return r.done()
}

// sheetReader gathers what was read.
type sheetReader struct {
	options SheetOptions
	mark    decimalMark
	head    sheetHead
	heads   []sheetRecord // of the heading
	body    []sheetRecord // below it
	entries []sheetEntry
	totals  []sheetEntry
	faults  []Fault
	broken  bool // a heading or its unit is missing, so that lines are checked cell by cell only
	tally   bool // the species columns count trees
	filler  filler
	sheet   Sheet
}

// filler is the species that lines without one take from above.
type filler struct {
	species *traits.Species
	line    int
}

// sheetEntry is one class as its line gives it, in metres, per hectare of its plot, and hectares. NaN is not given.
type sheetEntry struct {
	line                                   int
	species                                *traits.Species
	total                                  totalKind
	label                                  string // what a total is of
	dbh, height, crownBase                 float64
	perArea, count, basal, percent, ground float64
	plot                                   string
}

func emptyEntry(line int) sheetEntry {
	n := math.NaN()
	return sheetEntry{line: line, dbh: n, height: n, crownBase: n, perArea: n, count: n, basal: n, percent: n, ground: n}
}

func (r *sheetReader) fault(f Fault) { r.faults = append(r.faults, f) }

// faultOnce keeps a fault that several lines or columns share from standing twice.
func (r *sheetReader) faultOnce(f Fault) {
	if !slices.Contains(r.faults, f) {
		r.fault(f)
	}
}

func (r *sheetReader) note(line int, text string) {
	r.sheet.Notes = append(r.sheet.Notes, Note{line, text})
}

// done orders faults and notes by line.
func (r *sheetReader) done() (Sheet, []Fault) {
	slices.SortStableFunc(r.faults, func(a, b Fault) int { return a.Line - b.Line })
	slices.SortStableFunc(r.sheet.Notes, func(a, b Note) int { return a.Line - b.Line })
	return r.sheet, r.faults
}

// learnMarks looks at every number of the sheet for its decimal mark.
func (r *sheetReader) learnMarks() {
	for _, rec := range r.body {
		for _, c := range r.head.columns {
			if cell := rec.cell(c.index); c.role.numeric() && !missing(cell) {
				r.mark.learn(cell)
			}
		}
	}
	if r.mark.comma && !r.mark.point {
		r.note(0, "commas read as decimal marks")
	}
	r.learnThousands()
}

// learnThousands looks at columns of trees where no number shows a decimal mark.
func (r *sheetReader) learnThousands() {
	for _, c := range r.head.columns {
		if r.mark.comma || r.mark.point || c.role != perAreaRole && c.role != countRole && c.role != stemRole {
			continue
		}
		var cells []string
		for _, rec := range r.body {
			if cell := rec.cell(c.index); !missing(cell) {
				cells = append(cells, cell)
			}
		}
		if mark := r.mark.learnColumn(cells); mark != 0 {
			r.note(0, fmt.Sprintf("%q read as the mark of thousands: the other numbers of column %q are whole", mark, c.title))
		}
	}
}

// numeric tells whether the cells of a role are numbers.
func (r sheetRole) numeric() bool {
	switch r {
	case unknownRole, speciesRole, plotRole, treeRole:
		return false
	}
	return true
}

// findUnits looks for units that the headings do not give in the lines above and below the table, then in the cells.
func (r *sheetReader) findUnits(records []sheetRecord) {
	units := stated(append(append([]sheetRecord(nil), records[:r.head.first+r.head.rows-1]...), r.body...))
	for i := range r.head.columns {
		c := &r.head.columns[i]
		if !c.needs() {
			continue
		}
		role := c.role
		if _, said := units[role]; !said && role == dbhToRole {
			role = dbhRole
		}
		if u, said := units[role]; said {
			c.unit = u
			r.note(0, fmt.Sprintf("column %q: %s, as the lines about the table say", c.title, u.name))
		} else if u, said := r.pairedUnit(c.role); said {
			c.unit = u
		} else if u, said := r.cellUnits(*c); said {
			c.unit = u
		}
	}
	r.stemUnits(units)
	r.twoUnits(stated(records[:r.head.first]))
}

// twoUnits faults a length whose heading and the lines above it say different units.
func (r *sheetReader) twoUnits(above map[sheetRole]sheetUnit) {
	for _, role := range []sheetRole{dbhRole, heightRole, crownBaseRole} {
		said, known := above[role]
		columns, first := 0, r.firstOf(role)
		for _, c := range r.head.columns {
			if c.role == role {
				columns++
			}
		}
		if known && columns == 1 && first.unit.measure == lengths && first.unit.factor != said.factor {
			r.fault(Fault{Line: r.heads[len(r.heads)-1].line, Column: first.title, Value: first.title,
				Fix: fmt.Sprintf("one unit: a line above says %s", said.name)})
		}
	}
}

// pairedUnit gives one end of a diameter class the unit of the other.
func (r *sheetReader) pairedUnit(role sheetRole) (sheetUnit, bool) {
	if role != dbhRole && role != dbhToRole {
		return sheetUnit{}, false
	}
	for _, c := range r.head.columns {
		if (c.role == dbhRole || c.role == dbhToRole) && c.unit.measure == lengths {
			return c.unit, true
		}
	}
	return sheetUnit{}, false
}

// cellUnits is the unit that every number of a column has behind it.
func (r *sheetReader) cellUnits(c sheetColumn) (sheetUnit, bool) {
	var unit sheetUnit
	for _, rec := range r.body {
		cell := rec.cell(c.index)
		if missing(cell) {
			continue
		}
		v, err := r.mark.cellClass(cell)
		if err != nil {
			continue
		}
		u, ok := unitOf(v.unit)
		if !ok || u.measure != c.role.measure() || unit.measure != noMeasure && unit.factor != u.factor {
			return sheetUnit{}, false
		}
		unit = u
	}
	return unit, unit.measure != noMeasure
}

// checkHead faults units that are nowhere stated, and columns that are missing or stand twice.
func (r *sheetReader) checkHead() {
	before, line := len(r.faults), r.heads[len(r.heads)-1].line
	for _, c := range r.head.columns {
		switch {
		case c.role == basalAreaRole && c.needs() && r.head.has(stemRole):
			r.note(0, fmt.Sprintf("column %q has no unit and was not read", c.title))
		case c.role == stemRole && c.unit.measure == noMeasure && !r.tally:
			r.faultOnce(Fault{Line: line, Column: r.titleOf(stemRole), Fix: fmt.Sprintf("say what the species columns count, in a line above or in brackets: %s is likely",
				perAreaRole.likely(r.us()))})
		case c.needs():
			r.fault(Fault{Line: line, Column: c.title, Value: c.title, Fix: fmt.Sprintf("write the unit into the heading: \"%s [%s]\" is likely",
				c.role, c.role.likely(r.us()))})
		}
	}
	r.checkPairs()
	switch h := r.head; {
	case !h.has(speciesRole) && !h.has(stemRole):
		r.fault(Fault{Line: line, Fix: "a column headed species"})
	case h.has(stemRole):
	case !h.has(perAreaRole) && !h.has(countRole) && !h.has(basalAreaRole) && !h.has(percentRole) && !h.has(treeRole):
		r.fault(Fault{Line: line, Fix: "a column of how many trees, such as per_area [trees/ac] or per_area [trees/ha], or tree_count"})
	case !h.has(dbhRole) && !h.has(basalAreaRole) && !h.has(percentRole):
		r.fault(Fault{Line: line, Fix: "a column of diameters, such as dbh [in] or dbh [cm], or of basal area"})
	}
	r.broken = len(r.faults) > before
}

// checkPairs faults two columns of one species.
func (r *sheetReader) checkPairs() {
	for i, a := range r.head.columns {
		for _, b := range r.head.columns[:i] {
			if a.role == stemRole && b.role == stemRole && a.species == b.species {
				r.fault(Fault{Line: r.heads[0].line, Column: a.title, Value: a.title, Fix: fmt.Sprintf("one column of %s: %q is another", a.species.Botanical, b.title)})
			}
		}
	}
}

// us tells whether the sheet shows inches, feet or acres.
func (r *sheetReader) us() bool {
	us, metric := 0, 0
	for _, c := range r.head.columns {
		switch {
		case c.unit.measure == noMeasure || c.unit.measure == percents:
		case c.unit.us:
			us++
		default:
			metric++
		}
	}
	return us > metric
}

// readBody turns the records below the heading to entries.
func (r *sheetReader) readBody() {
	r.ignoredColumns()
	for _, rec := range r.body {
		repeats := func(head sheetRecord) bool { return slices.Equal(head.cells, rec.cells) }
		switch {
		case slices.ContainsFunc(r.heads, repeats):
		case !hasNumber(rec) && readHead([]sheetRecord{rec}).score >= headScore:
			r.fault(Fault{Line: rec.line, Value: rec.cells[r.firstFilled(rec)], Fix: "one table a sheet: another begins here"})
			return
		case r.basalLine(rec) > 0:
			r.statedBasal([]sheetRecord{rec})
		case r.head.has(stemRole):
			r.readWide(rec)
		default:
			r.readLong(rec)
		}
	}
}

// ignoredColumns notes what is not read. A column between species that holds numbers must be a species.
func (r *sheetReader) ignoredColumns() {
	titled, leftmost := map[int]bool{}, math.MaxInt
	for _, c := range r.head.columns {
		titled[c.index], leftmost = true, min(leftmost, c.index)
		if c.role != unknownRole && (c.role != totalRole || r.head.has(stemRole)) {
			continue
		}
		if line, value := r.firstNumber(c.index); line > 0 && r.head.has(stemRole) && !sideColumn.MatchString(c.title) {
			_, err := nameSpecies(c.bare)
			r.fault(Fault{Line: line, Column: c.title, Value: value, Fix: "a heading that names a species or a total: " + err.Error()})
			continue
		}
		r.note(0, fmt.Sprintf("column %q not read", c.title))
		r.checkLiving(c)
	}
	r.untitledColumns(titled, leftmost)
}

var (
	statusColumn = regexp.MustCompile(`(?i)status|condition|zustand|live|dead|vigou?r`)
	deadWord     = regexp.MustCompile(`(?i)^(d|dead|snag|standing dead|tot|dürr|dürrständer)$`)
)

// checkLiving faults lines that a column of the trees' state calls dead.
func (r *sheetReader) checkLiving(c sheetColumn) {
	if !statusColumn.MatchString(c.title) {
		return
	}
	for _, rec := range r.body {
		if cell := rec.cell(c.index); deadWord.MatchString(cell) {
			r.fault(Fault{Line: rec.line, Column: c.title, Value: cell, Fix: "living trees alone: take this line out"})
		}
	}
}

// untitledColumns notes numbers left of the table, and faults those within and right of it.
func (r *sheetReader) untitledColumns(titled map[int]bool, leftmost int) {
	width := 0
	for _, rec := range r.body {
		width = max(width, len(rec.cells))
	}
	for i := range width {
		line, value := r.firstNumber(i)
		switch {
		case line == 0 || titled[i]:
		case i < leftmost:
			r.note(0, fmt.Sprintf("column %d has no heading and was not read", i+1))
		default:
			r.fault(Fault{Line: line, Value: value, Fix: fmt.Sprintf("a heading over column %d, or nothing in it; decimal commas need semicolons or tabs between the cells", i+1)})
		}
	}
}

func (r *sheetReader) firstNumber(column int) (int, string) {
	for _, rec := range r.body {
		if c := rec.cell(column); !missing(c) && numeric(c) {
			return rec.line, c
		}
	}
	return 0, ""
}
