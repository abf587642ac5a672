package plan

import (
	"bytes"
	"fmt"
	"math"
	"strconv"
	"strings"
	"time"
	"unsafe"

	"shadeledger/radiation/weather"
)

// table is a data file's rows with a header, split without copying.
type table struct {
	r       *reader
	name    string
	columns []string
	place   map[string]int
	rest    []byte
	line    int
	cells   [][]byte
	faults  int
}

// mostRowFaults is how many rows of one file are reported.
const mostRowFaults = 20

// open reads the header; required columns missing and columns unknown are faults.
func (r *reader) table(name string, data []byte, required, optional []string) (*table, bool) {
	data = bytes.TrimPrefix(data, []byte("\xef\xbb\xbf"))
	t := &table{r: r, name: name, rest: data, place: map[string]int{}}
	if !t.next() {
		t.fault("", "", "the file is empty; it needs a header line: "+strings.Join(required, ","))
		return nil, false
	}
	header := string(bytes.Join(t.cells, []byte(",")))
	if len(t.cells) == 1 && strings.ContainsAny(header, ";\t") {
		t.fault("", header, "columns are separated by commas and numbers use a point")
		return nil, false
	}
	known := append(append([]string{}, required...), optional...)
	ok := true
	for i, c := range t.cells {
		col := strings.TrimSpace(string(c))
		if _, double := t.place[col]; double {
			t.fault(col, "", "each column once")
			ok = false
		}
		if !contains(known, col) {
			t.fault(col, "", "not a column here; known are "+strings.Join(known, ", "))
			ok = false
		}
		t.place[col] = i
		t.columns = append(t.columns, col)
	}
	for _, col := range required {
		if _, has := t.place[col]; !has {
			t.fault(col, " ", "this column is missing")
			ok = false
		}
	}
	return t, ok
}

func contains(list []string, s string) bool {
	for _, x := range list {
		if x == s {
			return true
		}
	}
	return false
}

func (t *table) fault(column, value, fix string) {
	t.faults++
	if t.faults <= mostRowFaults {
		t.r.faults = append(t.r.faults, Fault{File: t.name, Line: t.line, Key: column, Value: value, Fix: fix})
	}
}

// next splits the next line that is not empty into cells.
func (t *table) next() bool {
	for len(t.rest) > 0 {
		line := t.rest
		if i := bytes.IndexByte(t.rest, '\n'); i >= 0 {
			line, t.rest = t.rest[:i], t.rest[i+1:]
		} else {
			t.rest = nil
		}
		t.line++
		line = bytes.TrimSuffix(line, []byte("\r"))
		if len(line) == 0 || line[0] == '#' || line[0] <= ' ' && len(bytes.TrimSpace(line)) == 0 {
			continue
		}
		t.cells = t.cells[:0]
		from := 0
		for i, c := range line {
			if c == ',' {
				t.cells = append(t.cells, line[from:i])
				from = i + 1
			}
		}
		t.cells = append(t.cells, line[from:])
		return true
	}
	return false
}

// row moves to the next row with the header's number of cells.
func (t *table) row() bool {
	for t.next() {
		if len(t.cells) == len(t.columns) {
			return true
		}
		t.fault("", string(bytes.Join(t.cells, []byte(","))), fmt.Sprintf("%d cells, as in the header; a decimal comma? numbers use a point", len(t.columns)))
	}
	if t.faults > mostRowFaults {
		t.r.faults = append(t.r.faults, Fault{File: t.name, Line: t.line, Fix: fmt.Sprintf("%d more faults in this file", t.faults-mostRowFaults)})
	}
	return false
}

// column is a column by place; -1 where the file has none.
func (t *table) column(name string) column {
	if i, ok := t.place[name]; ok {
		return column{name, i}
	}
	return column{name, -1}
}

type column struct {
	name string
	at   int
}

// cell is a column's text in the row; "" where the column is not there.
func (t *table) cell(c column) string {
	if c.at < 0 {
		return ""
	}
	b := t.cells[c.at]
	for len(b) > 0 && (b[0] == ' ' || b[0] == '\t') {
		b = b[1:]
	}
	for len(b) > 0 && (b[len(b)-1] == ' ' || b[len(b)-1] == '\t') {
		b = b[:len(b)-1]
	}
	return unsafe.String(unsafe.SliceData(b), len(b))
}

// number reads a column; empty, NA and - are not given (NaN).
func (t *table) number(c column) float64 {
	s := t.cell(c)
	if v, ok := plainDecimal(s); ok {
		return v
	}
	switch s {
	case "", "NA", "-", "n/a", ".":
		return math.NaN()
	}
	v, err := strconv.ParseFloat(s, 64)
	if err != nil || math.IsInf(v, 0) || math.IsNaN(v) || strings.ContainsAny(s, "xX_") {
		t.fault(c.name, strings.Clone(s), "a number with a point; leave the cell empty where nothing was measured")
		return math.NaN()
	}
	return v
}

var powersOfTen = [...]float64{1, 1e1, 1e2, 1e3, 1e4, 1e5, 1e6, 1e7, 1e8, 1e9, 1e10, 1e11, 1e12, 1e13, 1e14, 1e15}

// plainDecimal reads up to 15 digits with a sign and a point. Digits and power of ten are then exact in binary, so that
// their one division rounds right, as strconv does.
func plainDecimal(s string) (float64, bool) {
	negative := len(s) > 0 && s[0] == '-'
	if negative {
		s = s[1:]
	}
	if len(s) == 0 || len(s) > 16 {
		return 0, false
	}
	mantissa, digits, after, point := uint64(0), 0, 0, false
	for i := range len(s) {
		c := s[i]
		switch {
		case c >= '0' && c <= '9':
			mantissa = mantissa*10 + uint64(c-'0')
			digits++
			if point {
				after++
			}
		case c == '.' && !point:
			point = true
		default:
			return 0, false
		}
	}
	if digits == 0 || digits > 15 {
		return 0, false
	}
	v := float64(mantissa) / powersOfTen[after]
	if negative {
		v = -v
	}
	return v, true
}

// digits reads n digits from the start of s.
func digits(s string, n int) (int, string, bool) {
	if len(s) < n {
		return 0, s, false
	}
	v := 0
	for i := range n {
		c := s[i] - '0'
		if c > 9 {
			return 0, s, false
		}
		v = v*10 + int(c)
	}
	return v, s[n:], true
}

// clock reads moments; rows of one day share its midnight.
type clock struct {
	date     string
	midnight time.Time
}

// moment reads 2015-06-01T13:30[:00] or with a space; seconds must be 0.
func (c *clock) moment(s string) (time.Time, bool) {
	if len(s) < 16 || (s[10] != 'T' && s[10] != ' ') {
		return time.Time{}, false
	}
	if s[:10] != c.date {
		at, ok := dateOf(s[:10])
		if !ok {
			return time.Time{}, false
		}
		c.date, c.midnight = s[:10], at
	}
	hour, rest, a := digits(s[11:], 2)
	rest, b := cut(rest, ':')
	minute, rest, d := digits(rest, 2)
	if rest == ":00" {
		rest = ""
	}
	if !(a && b && d) || rest != "" || hour > 24 || minute > 59 {
		return time.Time{}, false
	}
	return c.midnight.Add(time.Duration(hour*60+minute) * time.Minute), true
}

// dateOf reads 2015-06-01.
func dateOf(s string) (time.Time, bool) {
	y, s, a := digits(s, 4)
	s, b := cut(s, '-')
	m, s, c := digits(s, 2)
	s, d := cut(s, '-')
	day, s, e := digits(s, 2)
	if !(a && b && c && d && e) || s != "" || m < 1 || m > 12 || day < 1 || day > 31 {
		return time.Time{}, false
	}
	t := time.Date(y, time.Month(m), day, 0, 0, 0, 0, time.UTC)
	return t, t.Day() == day
}

func cut(s string, c byte) (string, bool) {
	if len(s) == 0 || s[0] != c {
		return s, false
	}
	return s[1:], true
}

// hourly reads weather at an even interval.
func (r *reader) hourly(name string, data []byte) []weather.Record {
	t, ok := r.table(name, data, []string{"time", "ghi_w_m2", "air_temp_c"}, []string{"rh_pct", "dhi_w_m2", "ppfd_umol_m2_s", "diffuse_ppfd_umol_m2_s"})
	if !ok {
		return nil
	}
	rows := make([]weather.Record, 0, bytes.Count(data, []byte("\n"))+1)
	at, ghi, air, rh := t.column("time"), t.column("ghi_w_m2"), t.column("air_temp_c"), t.column("rh_pct")
	dhi, ppfd, diffuse := t.column("dhi_w_m2"), t.column("ppfd_umol_m2_s"), t.column("diffuse_ppfd_umol_m2_s")
	var c clock
	for t.row() {
		when, ok := c.moment(t.cell(at))
		if !ok {
			t.fault(at.name, strings.Clone(t.cell(at)), "local standard time as 2015-06-01T13:30")
		}
		rows = append(rows, weather.Record{
			Line: t.line, Time: when, Global: t.number(ghi), Temperature: t.number(air), Humidity: t.number(rh),
			Diffuse: t.number(dhi), PPFD: t.number(ppfd), DiffusePPFD: t.number(diffuse),
		})
	}
	return rows
}

// daily reads a row a day.
func (r *reader) daily(name string, data []byte) []weather.DailyRecord {
	t, ok := r.table(name, data, []string{"date", "tmin_c", "tmax_c"}, []string{"ghi_mj_m2", "sunshine_h", "rh_pct", "rain_mm"})
	if !ok {
		return nil
	}
	_, radiation := t.place["ghi_mj_m2"]
	if _, sunshine := t.place["sunshine_h"]; radiation == sunshine {
		t.fault("ghi_mj_m2", " ", "one of the columns ghi_mj_m2 and sunshine_h")
		return nil
	}
	rows := make([]weather.DailyRecord, 0, bytes.Count(data, []byte("\n"))+1)
	date, ghi, sun := t.column("date"), t.column("ghi_mj_m2"), t.column("sunshine_h")
	low, high, rh, rain := t.column("tmin_c"), t.column("tmax_c"), t.column("rh_pct"), t.column("rain_mm")
	for t.row() {
		when, ok := dateOf(t.cell(date))
		if !ok {
			t.fault(date.name, strings.Clone(t.cell(date)), "a date as 2015-06-01")
		}
		rows = append(rows, weather.DailyRecord{
			Line: t.line, Date: when, Global: t.number(ghi), Sunshine: t.number(sun),
			Tmin: t.number(low), Tmax: t.number(high), Humidity: t.number(rh), Rain: t.number(rain),
		})
	}
	return rows
}
