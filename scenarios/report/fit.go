package report

import (
	"fmt"

	"github.com/jedib0t/go-pretty/v6/table"

	"shadeledger/canopy/correct"
	"shadeledger/scenarios"
)

var residualLightColumns = []column[correct.Residual]{
	words("point", func(r *correct.Residual) string { return r.Point }),
	figure("measured_pct", func(r *correct.Residual) float64 { return 100 * r.Measured }),
	figure("before_pct", func(r *correct.Residual) float64 { return 100 * r.Before }),
	figure("after_pct", func(r *correct.Residual) float64 { return 100 * r.After }),
	figure("residual_pct", func(r *correct.Residual) float64 { return 100 * (r.After - r.Measured) }),
}

// FitCanopy writes the effective leaf area that readings give: before, after, its interval, and each reading beside the model.
func FitCanopy(o Output, p *scenarios.Plan, c scenarios.Correction) error {
	n := notes{plan: p, assumed: p.Assumed, warnings: append(c.Notes(), p.Warnings...)}
	if o.Format != Table {
		return data(o, n, residualLightColumns, c.Residuals)
	}
	before := scenarios.LeafArea(p.Stand.Layers)
	q := &printer{w: o.Out}
	q.f("%s\nEffective leaf area from %s\n", Name(p), c.Source)
	t := newTable("", "before", "after", "measured")
	t.AppendRow(table.Row{"leaf area index", text0(before, 2), text0(before*c.Factor, 2), ""})
	t.AppendRow(table.Row{"  90 % range", "", fmt.Sprintf("%s-%s", text0(before*c.Low, 2), text0(before*c.High, 2)), ""})
	t.AppendRow(table.Row{"factor", "1", text0(c.Factor, 2), fmt.Sprintf("%s-%s", text0(c.Low, 2), text0(c.High, 2))})
	t.AppendRow(table.Row{"light below, %", decimal(100*c.Before, 1), decimal(100*c.After, 1), decimal(100*c.Measured, 1)})
	t.AppendRow(table.Row{"RMSE, points", decimal(100*c.RMSEBefore, 1), decimal(100*c.RMSE, 1), ""})
	q.table(t, 2, 3, 4)
	if len(c.Residuals) > 0 {
		q.f("\n")
		t := newTable("reading", "measured %", "model before %", "after %", "after - measured")
		for _, r := range c.Residuals {
			t.AppendRow(table.Row{r.Point, decimal(100*r.Measured, 1), decimal(100*r.Before, 1), decimal(100*r.After, 1), fmt.Sprintf("%+.1f", 100*(r.After-r.Measured))})
		}
		q.table(t, 2, 3, 4, 5)
	}
	q.f("\nTo use it: readings: FILE under stand in the plan; every command then works with it.\n\n")
	if q.err != nil {
		return q.err
	}
	return n.write(o.Out)
}
