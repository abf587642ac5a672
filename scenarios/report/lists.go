package report

import (
	"github.com/jedib0t/go-pretty/v6/table"

	"shadeledger/scenarios"
)

// Key is one plan key as it is shown.
type Key struct{ Key, Form, Unit, Range, Default, Example, Meaning string }

var keyColumns = []column[Key]{
	words("key", func(k *Key) string { return k.Key }),
	words("form", func(k *Key) string { return k.Form }),
	words("unit", func(k *Key) string { return k.Unit }),
	words("range", func(k *Key) string { return k.Range }),
	words("default", func(k *Key) string { return k.Default }),
	words("example", func(k *Key) string { return k.Example }),
	words("meaning", func(k *Key) string { return k.Meaning }),
}

// Keys writes plan keys: a list of several, all of a single one.
func Keys(o Output, keys []Key) error {
	if o.Format != Table {
		return listed(o, "plan keys", keyColumns, keys)
	}
	p := &printer{w: o.Out}
	if len(keys) == 1 {
		for _, c := range keyColumns {
			if v := c.field(&keys[0]); v != "" {
				hang(p, pad(c.name, 9), v)
			}
		}
		return p.err
	}
	p.f("Plan keys. [] is an item of a list. One key in full: shadeledger keys KEY\n")
	t := newTable("key", "unit or range", "default", "meaning")
	for _, k := range keys {
		r := k.Range
		if r == "" {
			r = k.Unit
		}
		t.AppendRow(table.Row{k.Key, r, k.Default, k.Meaning})
	}
	p.table(t)
	return p.err
}

var assumedColumns = []column[scenarios.Assumed]{
	words("key", func(a *scenarios.Assumed) string { return a.Key }),
	words("value", func(a *scenarios.Assumed) string { return a.Value }),
	words("source", func(a *scenarios.Assumed) string { return a.Source }),
}

// Check writes what was assumed in a sound plan, its warnings and its cautions.
func Check(o Output, plan *scenarios.Plan) error {
	n := planNotes(plan)
	switch o.Format {
	case CSV:
		if err := writeCSV(o.Out, assumedColumns, plan.Assumed); err != nil {
			return err
		}
		n.assumed = nil
		return n.write(o.Notes)
	case JSON:
		rows, err := jsonRows(assumedColumns, plan.Assumed)
		if err != nil {
			return err
		}
		return n.writeJSON(o.Out, rows)
	}
	p := &printer{w: o.Out}
	p.f("%s\nThe plan is sound. ", Name(plan))
	if len(plan.Assumed) == 0 {
		p.f("Nothing was assumed.\n")
	} else {
		p.f("%d values were assumed:\n", len(plan.Assumed))
		for _, a := range plan.Assumed {
			hang(p, "  "+a.Key+": ", a.Value+"  ["+a.Source+"]")
		}
	}
	if p.err != nil {
		return p.err
	}
	p.f("\n")
	n.assumed = nil
	if p.err != nil {
		return p.err
	}
	return n.write(o.Out)
}
