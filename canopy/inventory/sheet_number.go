package inventory

import (
	"fmt"
	"regexp"
	"strconv"
	"strings"
)

// decimalMark is what the sheet's numbers show of their mark.
type decimalMark struct {
	point, comma bool // seen as a decimal mark where nothing else is possible
	delimiter    rune
}

var (
	numeralPattern = regexp.MustCompile(`^[0-9][0-9.,'’]*$|^[.,][0-9]+$`)
	leadPattern    = regexp.MustCompile(`^[+-]?[.,]?[0-9][0-9.,]*(?:['’ ][0-9]{3})*(?:[.,][0-9]+)?`)
	rangePattern   = regexp.MustCompile(`^([0-9][0-9.,]*)\s*(?:"|″|cm|in)?\s*(?:-|–|—|−|to|bis)\s*<?([0-9][0-9.,]*)(.*)$`)
	groupPattern   = regexp.MustCompile(`^[1-9][0-9]{0,2}([.,'’ ][0-9]{3})+$`)
)

// decisive tells which mark of a numeral can be nothing but a decimal mark: 0 where none is.
func decisive(numeral string) byte {
	last := strings.LastIndexAny(numeral, ".,")
	if last < 0 {
		return 0
	}
	mark := numeral[last]
	other := byte('.' + ',' - mark)
	switch {
	case strings.Count(numeral, string(mark)) > 1:
		return 0
	case strings.IndexByte(numeral, other) >= 0:
		return mark
	case len(numeral)-last-1 != 3 || last == 0 || last > 3 || numeral[0] == '0':
		return mark
	}
	return 0
}

// learn takes what a cell shows of the decimal mark.
func (m *decimalMark) learn(cell string) {
	for _, numeral := range numeralsOf(cell) {
		switch decisive(numeral) {
		case '.':
			m.point = true
		case ',':
			m.comma = true
		}
	}
}

// learnColumn takes what a column of trees shows: a mark before three digits is that of thousands where the other
// numbers of the column are whole and of three digits or more.
func (m *decimalMark) learnColumn(cells []string) (mark byte) {
	whole := false
	for _, c := range cells {
		switch last := strings.LastIndexAny(c, ".,"); {
		case !numeralPattern.MatchString(c) || decisive(c) != 0:
			return 0
		case last >= 0 && mark != 0 && mark != c[last]:
			return 0
		case last >= 0:
			mark = c[last]
		default:
			whole = whole || len(c) >= 3
		}
	}
	switch {
	case !whole:
		return 0
	case mark == '.':
		m.comma = true
	case mark == ',':
		m.point = true
	}
	return mark
}

// numeralsOf are the one or two numerals a cell begins with.
func numeralsOf(cell string) []string {
	if g := rangePattern.FindStringSubmatch(cell); g != nil {
		return g[1:3]
	}
	if n := strings.TrimSpace(leadPattern.FindString(cell)); n != "" {
		return []string{n}
	}
	return nil
}

// number reads a numeral; the error says what would be right.
func (m decimalMark) number(numeral string) (float64, error) {
	n := strings.TrimPrefix(numeral, "+")
	if strings.HasPrefix(n, "-") {
		return 0, fmt.Errorf("a number of 0 or more")
	}
	if strings.ContainsAny(n, " '’") {
		head, tail := n, ""
		if i := strings.LastIndexAny(n, ".,"); i >= 0 {
			head, tail = n[:i], "."+n[i+1:]
		}
		if !groupPattern.MatchString(head) {
			return 0, fmt.Errorf("a number such as 1234 or 23.5")
		}
		n = strings.NewReplacer(" ", "", "'", "", "’", "").Replace(head) + tail
	}
	if !numeralPattern.MatchString(n) {
		return 0, fmt.Errorf("a number such as 12 or 23.5")
	}
	if len(n) > 1 && n[0] == '0' && n[1] >= '0' && n[1] <= '9' {
		return 0, fmt.Errorf("a number that does not begin with 0; a number with a thousands mark needs quotation marks round it")
	}
	decimal, err := m.decimalOf(n)
	if err != nil {
		return 0, err
	}
	head, tail := n, ""
	if decimal != 0 {
		i := strings.LastIndexByte(n, decimal)
		head, tail = n[:i], "."+n[i+1:]
	}
	if strings.ContainsAny(head, ".,") {
		if !groupPattern.MatchString(head) || strings.Contains(head, ".") && strings.Contains(head, ",") {
			return 0, fmt.Errorf("a number with thousands in groups of three, or with one decimal mark")
		}
		head = strings.NewReplacer(".", "", ",", "").Replace(head)
	}
	return strconv.ParseFloat(head+tail, 64)
}

// decimalOf is the decimal mark of a numeral, 0 where it has none.
func (m decimalMark) decimalOf(n string) (byte, error) {
	if d := decisive(n); d != 0 {
		return d, nil
	}
	last := strings.LastIndexAny(n, ".,")
	if last < 0 || strings.Count(n, n[last:last+1]) > 1 {
		return 0, nil
	}
	mark := n[last]
	point, comma := m.point, m.comma
	if !point && !comma {
		point = m.delimiter == ','
	}
	switch {
	case point == comma:
		return 0, fmt.Errorf("%s or %s: the sheet does not show which, so write it without the mark, or with a decimal mark and two digits",
			strings.Replace(n, string(mark), "", 1), n[:last]+"."+n[last+1:])
	case point == (mark == '.'):
		return mark, nil
	}
	return 0, nil
}

// measured is a number with the unit that was written behind it, if any.
type measured struct {
	value float64
	unit  string
}

var months = regexp.MustCompile(`(?i)\b(jan|feb|mar|mrz|apr|may|mai|jun|jul|aug|sep|oct|okt|nov|dec|dez)[a-zä]*\b`)

// cellNumber reads a cell of a number with or without a unit.
func (m decimalMark) cellNumber(cell string) (measured, error) {
	numeral := strings.TrimSpace(leadPattern.FindString(cell))
	switch {
	case months.MatchString(cell) && strings.ContainsAny(cell, "0123456789"):
		return measured{}, fmt.Errorf("the class as two numbers, such as 10-12: a spreadsheet has made a date of it")
	case strings.HasPrefix(cell, "<") || strings.HasPrefix(cell, ">") || strings.HasSuffix(cell, "+"):
		return measured{}, fmt.Errorf("the mid-point of this open class")
	case numeral == "":
		return measured{}, fmt.Errorf("a number, or leave it empty where nothing was measured")
	}
	x, err := m.number(numeral)
	return measured{x, strings.TrimSpace(strings.TrimPrefix(cell, leadPattern.FindString(cell)))}, err
}

// cellClass reads a diameter: a number, or a class of two whose mid-point stands for it.
func (m decimalMark) cellClass(cell string) (measured, error) {
	g := rangePattern.FindStringSubmatch(cell)
	if g == nil {
		return m.cellNumber(cell)
	}
	low, err := m.number(g[1])
	if err != nil {
		return measured{}, err
	}
	high, err := m.number(g[2])
	if err != nil {
		return measured{}, err
	}
	if low >= high {
		return measured{}, fmt.Errorf("the smaller end of the class first")
	}
	return measured{(low + high) / 2, strings.TrimSpace(g[3])}, nil
}

// numeric tells whether a cell is a number or a class, whatever its mark.
func numeric(cell string) bool {
	for _, m := range []decimalMark{{point: true}, {comma: true}} {
		if v, err := m.cellClass(cell); err == nil {
			if _, ok := unitOf(v.unit); ok || v.unit == "" {
				return true
			}
		}
	}
	return false
}
