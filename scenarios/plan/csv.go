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
		if len(bytes.TrimSpace(line)) == 0 || line[0] == '#' {
			continue
		}
		t.cells = t.cells[:0]
		for {
			i := bytes.IndexByte(line, ',')
			if i < 0 {
				t.cells = append(t.cells, line)
				return true
			}
			t.cells = append(t.cells, line[:i])
			line = line[i+1:]
		}
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

// cell is a column's text in the row; "" where the column is not there.
func (t *table) cell(column string) string {
	i, ok := t.place[column]
	if !ok {
		return ""
	}
	c := bytes.TrimSpace(t.cells[i])
	return unsafe.String(unsafe.SliceData(c), len(c))
}

// number reads a column; empty, NA and - are not given (NaN).
func (t *table) number(column string) float64 {
	s := t.cell(column)
	switch s {
	case "", "NA", "-", "n/a", ".":
		return math.NaN()
	}
	v, err := strconv.ParseFloat(s, 64)
	if err != nil || math.IsInf(v, 0) || math.IsNaN(v) || strings.ContainsAny(s, "xX_") {
		t.fault(column, strings.Clone(s), "a number with a point; leave the cell empty where nothing was measured")
		return math.NaN()
	}
	return v
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

// moment reads 2015-06-01T13:30[:00] or with a space; seconds must be 0.
func moment(s string, clock bool) (time.Time, bool) {
	y, s, a := digits(s, 4)
	s, b := cut(s, '-')
	m, s, c := digits(s, 2)
	s, d := cut(s, '-')
	day, s, e := digits(s, 2)
	if !(a && b && c && d && e) || m < 1 || m > 12 || day < 1 || day > 31 {
		return time.Time{}, false
	}
	hour, minute := 0, 0
	if clock {
		if len(s) < 6 || (s[0] != 'T' && s[0] != ' ') {
			return time.Time{}, false
		}
		var f, g, h bool
		hour, s, f = digits(s[1:], 2)
		s, g = cut(s, ':')
		minute, s, h = digits(s, 2)
		if s == ":00" {
			s = ""
		}
		if !(f && g && h) || hour > 24 || minute > 59 {
			return time.Time{}, false
		}
	}
	t := time.Date(y, time.Month(m), day, hour, minute, 0, 0, time.UTC)
	return t, s == "" && t.Add(-time.Duration(hour)*time.Hour).Day() == day
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
	for t.row() {
		at, ok := moment(t.cell("time"), true)
		if !ok {
			t.fault("time", strings.Clone(t.cell("time")), "local standard time as 2015-06-01T13:30")
		}
		rows = append(rows, weather.Record{
			Line: t.line, Time: at, Global: t.number("ghi_w_m2"), Temperature: t.number("air_temp_c"), Humidity: t.number("rh_pct"),
			Diffuse: t.number("dhi_w_m2"), PPFD: t.number("ppfd_umol_m2_s"), DiffusePPFD: t.number("diffuse_ppfd_umol_m2_s"),
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
	for t.row() {
		at, ok := moment(t.cell("date"), false)
		if !ok {
			t.fault("date", strings.Clone(t.cell("date")), "a date as 2015-06-01")
		}
		rows = append(rows, weather.DailyRecord{
			Line: t.line, Date: at, Global: t.number("ghi_mj_m2"), Sunshine: t.number("sunshine_h"),
			Tmin: t.number("tmin_c"), Tmax: t.number("tmax_c"), Humidity: t.number("rh_pct"), Rain: t.number("rain_mm"),
		})
	}
	return rows
}
