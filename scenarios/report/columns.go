package report

import (
	"bytes"
	"encoding/csv"
	"encoding/json"
	"io"
	"math"
	"strconv"

	"shadeledger/scenarios"
	"shadeledger/scenarios/ledger"
)

// column is one field of a row type: text or a number.
type column[T any] struct {
	name   string
	text   func(*T) string
	number func(*T) float64 // NaN is an empty field
}

func words[T any](name string, of func(*T) string) column[T] {
	return column[T]{name: name, text: of}
}

func figure[T any](name string, of func(*T) float64) column[T] {
	return column[T]{name: name, number: of}
}

// digits of a number in CSV and JSON.
const digits = 8

// field is a column's value as it stands in CSV.
func (c column[T]) field(row *T) string {
	if c.text != nil {
		return c.text(row)
	}
	v := c.number(row)
	if math.IsNaN(v) || math.IsInf(v, 0) {
		return ""
	}
	return strconv.FormatFloat(v, 'g', digits, 64)
}

// lightColumns are the fields of `light`.
var lightColumns = []column[scenarios.LightRow]{
	words("treatment", func(r *scenarios.LightRow) string { return r.Treatment }),
	words("station", func(r *scenarios.LightRow) string { return r.Station }),
	figure("x_m", func(r *scenarios.LightRow) float64 { return r.X }),
	figure("y_m", func(r *scenarios.LightRow) float64 { return r.Y }),
	figure("height_m", func(r *scenarios.LightRow) float64 { return r.Height }),
	words("period", func(r *scenarios.LightRow) string { return r.Period }),
	figure("light_pct", func(r *scenarios.LightRow) float64 { return r.Light }),
	figure("par_mol_m2_d", func(r *scenarios.LightRow) float64 { return r.PAR }),
	figure("sunfleck_pct", func(r *scenarios.LightRow) float64 { return r.Sunfleck }),
	figure("sky_view_pct", func(r *scenarios.LightRow) float64 { return r.SkyView }),
}

func line(l ledger.Line) func(*scenarios.BalanceRow) float64 {
	return func(r *scenarios.BalanceRow) float64 { return r.Lines[l] }
}

// ifFound is a figure of a break-even that exists.
func ifFound(of func(ledger.BreakEven) float64) func(*scenarios.BalanceRow) float64 {
	return func(r *scenarios.BalanceRow) float64 {
		if !r.BreakEven.Found {
			return math.NaN()
		}
		return of(r.BreakEven)
	}
}

// balanceColumns are the fields of `balance`.
var balanceColumns = []column[scenarios.BalanceRow]{
	words("treatment", func(r *scenarios.BalanceRow) string { return r.Treatment }),
	words("station", func(r *scenarios.BalanceRow) string { return r.Station }),
	words("species", func(r *scenarios.BalanceRow) string { return r.Species }),
	words("botanical", func(r *scenarios.BalanceRow) string { return r.Botanical }),
	words("period", func(r *scenarios.BalanceRow) string { return r.Period }),
	figure("light_pct", func(r *scenarios.BalanceRow) float64 { return r.Light }),
	figure("light_leaf_on_pct", func(r *scenarios.BalanceRow) float64 { return r.LightLeafOn }),
	figure("par_mol_m2_d", func(r *scenarios.BalanceRow) float64 { return r.PAR }),
	figure("income_gC", line(ledger.Income)),
	figure("sunfleck_income_gC", line(ledger.Sunfleck)),
	figure("leaf_day_gC", line(ledger.LeafDay)),
	figure("leaf_night_gC", line(ledger.LeafNight)),
	figure("stem_gC", line(ledger.Stem)),
	figure("root_gC", line(ledger.Root)),
	figure("leaf_replacement_gC", line(ledger.LeafReplacement)),
	figure("root_replacement_gC", line(ledger.RootReplacement)),
	figure("net_gC", func(r *scenarios.BalanceRow) float64 { return r.Lines.Net() }),
	figure("income_cost_ratio", func(r *scenarios.BalanceRow) float64 { return r.Lines.Ratio() }),
	figure("break_even_pct", ifFound(func(b ledger.BreakEven) float64 { return b.Season })),
	figure("threshold_pct", ifFound(func(b ledger.BreakEven) float64 { return b.Threshold.Season })),
	figure("break_even_leaf_on_pct", ifFound(func(b ledger.BreakEven) float64 { return b.LeafOn })),
	figure("threshold_leaf_on_pct", ifFound(func(b ledger.BreakEven) float64 { return b.Threshold.LeafOn })),
	words("class", func(r *scenarios.BalanceRow) string { return r.Class.String() }),
}

// writeCSV writes a header and the rows.
func writeCSV[T any](w io.Writer, columns []column[T], rows []T) error {
	out := csv.NewWriter(w)
	record := make([]string, len(columns))
	for i, c := range columns {
		record[i] = c.name
	}
	if err := out.Write(record); err != nil {
		return err
	}
	for r := range rows {
		for i, c := range columns {
			record[i] = c.field(&rows[r])
		}
		if err := out.Write(record); err != nil {
			return err
		}
	}
	out.Flush()
	return out.Error()
}

// jsonRows writes rows as a list of objects, fields in the order of the columns, a missing number as null.
func jsonRows[T any](columns []column[T], rows []T) (json.RawMessage, error) {
	var b bytes.Buffer
	b.WriteByte('[')
	for r := range rows {
		if r > 0 {
			b.WriteByte(',')
		}
		object, err := jsonObject(columns, &rows[r])
		if err != nil {
			return nil, err
		}
		b.Write(object)
	}
	b.WriteByte(']')
	return b.Bytes(), nil
}

func jsonObject[T any](columns []column[T], row *T) (json.RawMessage, error) {
	var b bytes.Buffer
	b.WriteByte('{')
	for i, c := range columns {
		if i > 0 {
			b.WriteByte(',')
		}
		b.WriteString(strconv.Quote(c.name) + ":")
		value := c.field(row)
		switch {
		case c.text != nil:
			text, err := json.Marshal(value)
			if err != nil {
				return nil, err
			}
			b.Write(text)
		case value == "":
			b.WriteString("null")
		default:
			b.WriteString(value)
		}
	}
	b.WriteByte('}')
	return b.Bytes(), nil
}

// data writes rows as CSV, their notes apart, or as JSON with the notes in it.
func data[T any](o Output, n notes, columns []column[T], list []T) error {
	if o.Format == CSV {
		if err := writeCSV(o.Out, columns, list); err != nil {
			return err
		}
		return n.write(o.Notes)
	}
	rows, err := jsonRows(columns, list)
	if err != nil {
		return err
	}
	return n.writeJSON(o.Out, rows)
}

// listed writes rows that belong to no plan as CSV, or as JSON under a name.
func listed[T any](o Output, name string, columns []column[T], list []T) error {
	if o.Format == CSV {
		return writeCSV(o.Out, columns, list)
	}
	rows, err := jsonRows(columns, list)
	if err != nil {
		return err
	}
	e := json.NewEncoder(o.Out)
	e.SetEscapeHTML(false)
	e.SetIndent("", " ")
	return e.Encode(struct {
		Name string          `json:"name"`
		Rows json.RawMessage `json:"rows"`
	}{name, rows})
}
