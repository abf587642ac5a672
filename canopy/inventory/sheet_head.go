package inventory

import (
	"fmt"
	"regexp"
	"strings"

	"shadeledger/leaf/traits"
)

// sheetColumn is one column that is read.
type sheetColumn struct {
	heading
	index   int
	title   string          // as the sheet writes it
	lowest  string          // the part of the title nearest to the numbers
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
		c := sheetColumn{heading: joined(parts), index: i, title: strings.Join(parts, " "), lowest: parts[len(parts)-1]}
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
		if grouped := c.lowest != c.title; c.role != unknownRole && !grouped {
			continue
		}
		if s, _ := nameSpecies(parseHeading(c.lowest).bare); s != nil {
			c.role, c.species = stemRole, s
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

// joined understands the parts together, else the lowest part that can be understood alone.
func joined(parts []string) heading {
	h := parseHeading(strings.Join(parts, " "))
	for k := len(parts) - 1; k >= 0 && h.role == unknownRole && len(parts) > 1; k-- {
		h = parseHeading(parts[k])
	}
	return h
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
				phrase, _, _ = strings.Cut(phrase, " by ")
				h := parseHeading(phrase)
				if h.role == unknownRole || h.unit.measure != h.role.measure() {
					continue
				}
				if _, said := units[h.role]; !said {
					units[h.role] = h.unit
				}
			}
		}
	}
	return units
}

var basalPattern = regexp.MustCompile(`(?i)(?:basal area|grundfläche|\bba\b)[^0-9]{0,15}([0-9][0-9.,]*)\s*((?:m2|m²|ft2|ft²|sq\.? ?ft\.?)\s*(?:/|per|je)\s*(?:ha|ac|acre|hectare|hektar)\b)`)

// statedBasal is the basal area of the stand in m2/ha that the lines about the table give.
func (r *sheetReader) statedBasal(records []sheetRecord) {
	for _, rec := range records {
		g := basalPattern.FindStringSubmatch(strings.Join(rec.cells, " "))
		if g == nil {
			continue
		}
		u, known := unitOf(g[2])
		x, err := r.mark.number(strings.TrimRight(g[1], ".,"))
		if known && err == nil && x > 0 {
			t := emptyEntry(rec.line)
			t.total, t.basal = wholeTotal, x*u.factor
			r.totals = append(r.totals, t)
			r.note(rec.line, fmt.Sprintf("basal area of the stand taken from the line %q", strings.Join(rec.cells, " ")))
		}
	}
}
