package plan

import (
	"bytes"
	"encoding/csv"
	"errors"
	"fmt"
	"io"
	"math"
	"slices"
	"strconv"
	"strings"

	"shadeledger/leaf/fit"
)

// LeafCurve is the light-response readings of one leaf, in the order of the file.
type LeafCurve struct {
	Species, Plant, Leaf string
	GrowthLight          float64 // percent of full light; NaN where not given
	Line                 int     // of its first reading
	Readings             []fit.Reading
}

// curveColumns are the columns of a light-curve file, each with the headings of common instruments, in lower case.
var curveColumns = []struct {
	name string
	also []string
	need bool
}{
	{"ppfd_umol_m2_s", []string{"ppfd", "par", "pari", "qin", "q"}, true},
	{"net_umol_m2_s", []string{"net", "a", "photo", "anet", "pn"}, true},
	{"leaf", []string{"sample_id", "sampleid", "sample", "id", "curve"}, true},
	{"species", []string{"usda_code", "usda_species_code", "taxon"}, false},
	{"plant", []string{"tree", "individual"}, false},
	{"leaf_temp_c", []string{"tleaf", "tleaf_c"}, false},
	{"growth_light_pct", nil, false},
	{"gsw_mol_m2_s", []string{"gsw", "cond"}, false},
	{"ci_ppm", []string{"ci"}, false},
	{"pressure_kpa", []string{"patm", "press", "pa"}, false},
}

// CurveColumns are the names of the columns of a light-curve file.
func CurveColumns() (out []string) {
	for _, c := range curveColumns {
		out = append(out, c.name)
	}
	return out
}

// ReadCurves reads light-response readings by leaf. columns names the heading of a column where it is none of the usual.
func ReadCurves(path string, columns map[string]string) ([]LeafCurve, []Fault) {
	data, err := load(path, largestData)
	if err != nil {
		return nil, []Fault{{File: path, Fix: explain(err, largestData, "check the name")}}
	}
	c := curveReader{file: path, at: map[string]int{}}
	out := c.read(data, columns)
	return out, sortFaults(c.faults)
}

type curveReader struct {
	file   string
	faults []Fault
	at     map[string]int // column by name
	head   []string
}

func (c *curveReader) fault(line int, key, value, fix string) {
	if len(c.faults) < mostRowFaults {
		c.faults = append(c.faults, Fault{File: c.file, Line: line, Key: key, Value: value, Fix: fix})
	}
}

func (c *curveReader) read(data []byte, columns map[string]string) (out []LeafCurve) {
	rows := csv.NewReader(bytes.NewReader(bytes.TrimPrefix(data, []byte("\xef\xbb\xbf"))))
	rows.FieldsPerRecord = -1
	rows.TrimLeadingSpace = true
	head, err := rows.Read()
	if err != nil {
		c.fault(1, "", "", "a header line: "+strings.Join(CurveColumns(), ", "))
		return nil
	}
	if len(head) == 1 && strings.ContainsAny(head[0], ";\t") {
		c.fault(1, "", head[0], "columns are separated by commas and numbers use a point")
		return nil
	}
	if !c.place(head, columns) {
		return nil
	}
	by := map[string]int{}
	for {
		row, err := rows.Read()
		if errors.Is(err, io.EOF) {
			break
		}
		var broken *csv.ParseError
		if errors.As(err, &broken) {
			c.fault(broken.StartLine, "", broken.Err.Error(), "a quote that is opened is closed in its cell")
			break
		}
		line, _ := rows.FieldPos(0)
		if err != nil || len(row) != len(head) {
			c.fault(line, "", strings.Join(row, ","), fmt.Sprintf("%d cells, as in the header; a decimal comma? numbers use a point", len(head)))
			continue
		}
		r, ok := c.reading(row, line)
		if !ok {
			continue
		}
		l := LeafCurve{Species: c.text(row, "species"), Plant: c.text(row, "plant"), Leaf: c.text(row, "leaf"), GrowthLight: c.number(row, line, "growth_light_pct"), Line: line}
		key := l.Species + "\x00" + l.Plant + "\x00" + l.Leaf
		i, known := by[key]
		if !known {
			i = len(out)
			by[key] = i
			out = append(out, l)
		}
		out[i].Readings = append(out[i].Readings, r)
	}
	c.plausible(out)
	return out
}

// place finds the columns.
func (c *curveReader) place(head []string, columns map[string]string) bool {
	c.head = head
	lower := make([]string, len(head))
	for i, h := range head {
		lower[i] = strings.ToLower(strings.TrimSpace(h))
	}
	for _, col := range curveColumns {
		names := append([]string{col.name}, col.also...)
		if own, ok := columns[col.name]; ok {
			names = []string{strings.ToLower(own)}
		}
		for _, n := range names {
			if i := slices.Index(lower, n); i >= 0 {
				c.at[col.name] = i
				break
			}
		}
		if _, ok := c.at[col.name]; !ok && (col.need || columns[col.name] != "") {
			c.fault(1, col.name, strings.Join(head, ","), "this column is missing; name it: --column "+col.name+"=HEADING")
		}
	}
	return len(c.faults) == 0
}

func (c *curveReader) text(row []string, name string) string {
	if i, ok := c.at[name]; ok {
		return strings.TrimSpace(row[i])
	}
	return ""
}

// number reads a cell; empty, NA, - and -9999 are not given.
func (c *curveReader) number(row []string, line int, name string) float64 {
	s := c.text(row, name)
	switch s {
	case "", "NA", "-", "n/a", ".", "-9999":
		return math.NaN()
	}
	v, err := strconv.ParseFloat(s, 64)
	if err != nil || math.IsInf(v, 0) {
		c.fault(line, c.head[c.at[name]], s, "a number with a point; leave the cell empty where nothing was measured")
		return math.NaN()
	}
	return v
}

func (c *curveReader) reading(row []string, line int) (fit.Reading, bool) {
	r := fit.Reading{Point: fit.Point{PPFD: c.number(row, line, "ppfd_umol_m2_s"), Net: c.number(row, line, "net_umol_m2_s")},
		Conductance: c.number(row, line, "gsw_mol_m2_s"), Ci: c.number(row, line, "ci_ppm"), Temperature: c.number(row, line, "leaf_temp_c"), Pressure: c.number(row, line, "pressure_kpa")}
	if math.IsNaN(r.PPFD) || math.IsNaN(r.Net) {
		return r, false
	}
	if r.PPFD < -20 || r.PPFD > 4000 {
		c.fault(line, "ppfd_umol_m2_s", c.text(row, "ppfd_umol_m2_s"), "light, 0 to 4000 umol m-2 s-1")
	}
	if math.Abs(r.Net) > 100 {
		c.fault(line, "net_umol_m2_s", c.text(row, "net_umol_m2_s"), "net assimilation within 100 umol m-2 s-1; was it nmol g-1 s-1?")
	}
	r.PPFD = math.Max(0, r.PPFD)
	return r, true
}

// plausible asks about units where a whole file looks like another one.
func (c *curveReader) plausible(curves []LeafCurve) {
	light, rate := 0.0, 0.0
	for _, l := range curves {
		for _, r := range l.Readings {
			light, rate = math.Max(light, r.PPFD), math.Max(rate, math.Abs(r.Net))
		}
	}
	switch {
	case len(curves) == 0 && len(c.faults) == 0:
		c.fault(0, "", "", "no readings; at least one curve of 8 points")
	case light > 0 && light < 5:
		c.fault(0, "ppfd_umol_m2_s", fmt.Sprintf("%.3g at most", light), "light in umol m-2 s-1; was it mol or mmol?")
	case rate > 0 && rate < 0.01:
		c.fault(0, "net_umol_m2_s", fmt.Sprintf("%.3g at most", rate), "net assimilation in umol m-2 s-1; was it mol or mmol?")
	}
}
