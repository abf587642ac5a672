package inventory

import (
	"fmt"
	"math"
	"regexp"
	"strings"

	"shadeledger/leaf/traits"
)

// sheetColumn is one column that is read.
type sheetColumn struct {
	heading
	index   int
	title   string          // as the sheet writes it
	parts   []string        // of the title, from above
	species *traits.Species // of stemRole
}

// sheetHead is the heading of a sheet: where it stands and what its columns hold.
type sheetHead struct {
	first, rows int // records of the heading
	columns     []sheetColumn
	score       int
}

const (
	headSearch = 25 // records that may stand above the heading
	headRows   = 3  // records that may make it up
	headScore  = 20 // two columns understood
)

// findHead takes the records that can be understood best as headings; of equals the fewest and first.
func findHead(records []sheetRecord) (sheetHead, bool) {
	var best sheetHead
	for first := range records[:min(headSearch, len(records))] {
		if records[first].filled() < 2 {
			continue
		}
		for rows := 1; rows <= headRows && first+rows <= len(records); rows++ {
			if rows > 1 && hasNumber(records[first+rows-1]) {
				break
			}
			h := readHead(records[first : first+rows])
			h.first, h.rows = first, rows
			if h.score > best.score || h.score == best.score && h.rows < best.rows {
				best = h
			}
		}
	}
	return best, best.score >= headScore
}

func hasNumber(r sheetRecord) bool {
	for _, c := range r.cells {
		if !missing(c) && numeric(c) {
			return true
		}
	}
	return false
}

// readHead understands each column of a heading. A role counts ten, a unit one.
func readHead(block []sheetRecord) sheetHead {
	var h sheetHead
	columns := 0
	for _, r := range block {
		columns = max(columns, len(r.cells))
	}
	classes := false
	for i := range columns {
		parts := partsOf(block, i)
		if len(parts) == 0 {
			continue
		}
		c := sheetColumn{index: i, parts: parts}
		c.heading, c.title = joined(parts)
		classes = classes || c.role == dbhRole
		h.columns = append(h.columns, c)
	}
	h.wide(classes)
	for _, c := range h.columns {
		if c.role != unknownRole {
			h.score += 10
		}
		if c.unit.measure != noMeasure && c.unit.measure == c.role.measure() {
			h.score++
		}
	}
	if hasNumber(block[0]) && !(classes && h.has(stemRole)) {
		h.score = 0
	}
	return h
}

// wide looks for species among the headings of a sheet that has no species column.
func (h *sheetHead) wide(classes bool) {
	if !classes || h.has(speciesRole) {
		return
	}
	for i := range h.columns {
		c := &h.columns[i]
		if c.role != unknownRole && len(c.parts) == 1 {
			continue
		}
		lowest := c.parts[len(c.parts)-1]
		if s, _ := nameSpecies(parseHeading(lowest).bare); s != nil {
			c.role, c.species, c.title = stemRole, s, lowest
		}
	}
}

func (h *sheetHead) has(role sheetRole) bool {
	for _, c := range h.columns {
		if c.role == role {
			return true
		}
	}
	return false
}

// partsOf are the cells of a column's heading from above. A cell above that is empty stands for its left neighbour, as
// in merged cells, where a cell below parts it.
func partsOf(block []sheetRecord, column int) []string {
	var parts []string
	last := len(block) - 1
	for k, r := range block {
		c := r.cell(column)
		if c == "" && k < last && block[last].cell(column) != "" {
			for left := column - 1; left > 0 && c == ""; left-- {
				c = r.cell(left)
			}
		}
		if c != "" {
			parts = append(parts, c)
		}
	}
	return parts
}

// joined understands the parts together, else the lowest part that can be understood alone, and says which that was.
func joined(parts []string) (h heading, title string) {
	title = strings.Join(parts, " ")
	h = parseHeading(title)
	for k := len(parts) - 1; k >= 0 && h.role == unknownRole && len(parts) > 1; k-- {
		if alone := parseHeading(parts[k]); alone.role != unknownRole {
			h, title = alone, parts[k]
		}
	}
	for k := 0; k < len(parts) && h.needs(); k++ {
		if u, ok := unitOf(strings.Trim(parts[k], "[]() ")); ok && u.measure == h.role.measure() {
			h.unit = u
		}
	}
	return h, title
}

var phrasePattern = regexp.MustCompile(`\s*(?:[,;.:/]\s|[,;]|\band\b|\bund\b|\s-\s|\s–\s)\s*`)

// stated are the units that the lines about the table give: "dbh in inches, trees per acre".
func stated(records []sheetRecord) map[sheetRole]sheetUnit {
	units := map[sheetRole]sheetUnit{}
	for _, r := range records {
		if hasNumber(r) {
			continue
		}
		for _, c := range r.cells {
			for _, phrase := range phrasePattern.Split(c, -1) {
				h := parsePhrase(phrase)
				if _, said := units[h.role]; !said && h.role != unknownRole {
					units[h.role] = h.unit
				}
			}
		}
	}
	return units
}

// parsePhrase reads role and unit from the end of a phrase: "stand table with dbh in inches". The role is unknown where
// either is missing.
func parsePhrase(phrase string) heading {
	phrase, _, _ = strings.Cut(phrase, " by ")
	fields := strings.Fields(strings.Trim(phrase, "()[] "))
	for i := range fields {
		rest := strings.Join(fields[i:], " ")
		for _, text := range []string{rest, strings.Trim(rest, "()[]"), rest + ")"} {
			if h := parseHeading(text); h.role != unknownRole && !h.needs() && (i == 0 || h.role.measure() != noMeasure) {
				return h
			}
		}
	}
	return heading{}
}

var basalPattern = regexp.MustCompile(`(?i)(?:basal area|grundfläche|\bba\b)[^0-9]{0,15}([0-9][0-9.,]*)\s*((?:m2|m²|ft2|ft²|sq\.? ?ft\.?)\s*(?:/|per|je)\s*(?:ha|ac|acre|hectare|hektar)\b)`)

// basalLine reads a line such as "basal area [m2/ha]; 32": NaN where it is none.
func (r *sheetReader) basalLine(rec sheetRecord) float64 {
	first := r.firstFilled(rec)
	if h := parseHeading(rec.cells[first]); h.role == basalAreaRole && !h.needs() && rec.filled() == 2 {
		for _, cell := range rec.cells[first+1:] {
			if v, err := r.mark.cellNumber(cell); err == nil && v.unit == "" && v.value > 0 {
				return v.value * h.unit.factor
			}
		}
	}
	return math.NaN()
}

// statedBasal is the basal area of the stand in m2/ha that the lines about the table give.
func (r *sheetReader) statedBasal(records []sheetRecord) {
	for _, rec := range records {
		x := r.basalLine(rec)
		if g := basalPattern.FindStringSubmatch(strings.Join(rec.cells, " ")); g != nil && math.IsNaN(x) {
			u, known := unitOf(g[2])
			n, err := r.mark.number(strings.TrimRight(g[1], ".,"))
			if known && err == nil {
				x = n * u.factor
			}
		}
		if x > 0 {
			t := emptyEntry(rec.line)
			t.total, t.basal = wholeTotal, x
			r.totals = append(r.totals, t)
			r.note(rec.line, fmt.Sprintf("basal area of the stand taken from the line %q", strings.Join(rec.cells, " ")))
		}
	}
}
