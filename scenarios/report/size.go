package report

import (
	"fmt"
	"math"

	"github.com/jedib0t/go-pretty/v6/table"

	"shadeledger/scenarios"
	"shadeledger/scenarios/decide"
)

const hectare = 1e4 // m2

// sizeColumns; figures of an answer that was not found are empty.
func sizeColumns(height float64) []column[decide.SizeRow] {
	found := func(of func(*decide.SizeRow) float64) func(*decide.SizeRow) float64 {
		return func(r *decide.SizeRow) float64 {
			if !r.Found {
				return math.NaN()
			}
			return of(r)
		}
	}
	return []column[decide.SizeRow]{
		words("species", func(r *decide.SizeRow) string { return r.Species }),
		words("shape", func(r *decide.SizeRow) string { return r.Shape.String() }),
		figure("bearing_deg", func(r *decide.SizeRow) float64 {
			if r.Shape == decide.Round {
				return math.NaN()
			}
			return r.Bearing * 180 / math.Pi
		}),
		figure("size_H", found(func(r *decide.SizeRow) float64 { return r.Size / height })),
		figure("size_m", found(func(r *decide.SizeRow) float64 { return r.Size })),
		figure("stem_area_ha", found(func(r *decide.SizeRow) float64 { return r.Stems / hectare })),
		figure("crown_area_ha", found(func(r *decide.SizeRow) float64 { return r.Crowns / hectare })),
		figure("share_pct", func(r *decide.SizeRow) float64 { return 100 * r.Share }),
		figure("upper_H", func(r *decide.SizeRow) float64 { return r.Upper / height }),
		words("verdict", func(r *decide.SizeRow) string { return r.Verdict }),
		figure("smaller_share_pct", func(r *decide.SizeRow) float64 { return 100 * r.Smaller }),
		figure("best_bearing_deg", func(r *decide.SizeRow) float64 { return r.Best * 180 / math.Pi }),
		figure("best_share_pct", func(r *decide.SizeRow) float64 { return 100 * r.BestShare }),
		figure("worst_bearing_deg", func(r *decide.SizeRow) float64 { return r.Worst * 180 / math.Pi }),
		figure("size_H_low", func(r *decide.SizeRow) float64 { return r.Low / height }),
		figure("size_H_high", func(r *decide.SizeRow) float64 { return r.High / height }),
		figure("size_m_low", func(r *decide.SizeRow) float64 { return r.Low }),
		figure("size_m_high", func(r *decide.SizeRow) float64 { return r.High }),
		figure("none_pct", func(r *decide.SizeRow) float64 { return 100 * r.Missed }),
		figure("worst_share_pct", func(r *decide.SizeRow) float64 { return 100 * r.LeastGood }),
	}
}

// Sizes writes the smallest openings.
func Sizes(o Output, plan *scenarios.Plan, t *decide.Sizes) error {
	n := planNotes(plan)
	H := plan.Stand.Height
	if o.Format != Table {
		return data(o, n, sizeColumns(H), t.Rows)
	}
	p := &printer{w: o.Out}
	p.f("%s\n%s\n", Name(plan), seasonLine(plan))
	hang(p, "", fmt.Sprintf("Smallest opening in which at least %.0f %% of the ground inside the crowns is comfortable, up to %.3g H (H %s). Stem to stem: diameter of a circle, short side of an ellipse twice or a strip three times as long, long side towards %.0f degrees.",
		100*t.Query.Share, t.Query.UpTo/H, length(H, o.Units), t.Query.Bearing*180/math.Pi))
	header := []any{"seedling", "shape", "size H", "size", "area", "there %", "smaller %"}
	if t.Drawn > 0 {
		header = append(header, "range H")
	}
	if t.Query.Against != "" {
		header = append(header, "window to H")
	}
	if t.Query.Turn {
		header = append(header, "best", "worst")
	}
	w := newTable(append(header, "")...)
	for i := range t.Rows {
		w.AppendRow(sizeRow(&t.Rows[i], t, o.Units))
	}
	if p.err == nil {
		p.err = render(o.Out, w, 3, 4, 5, 6, 7)
	}
	hang(p, "", "there: share comfortable at that size; smaller: one step of 0.1 H less, the proof that it is the smallest. "+rangeWords(t)+" Light falls again as crowns close: shadeledger years.")
	p.f("\n")
	if p.err != nil {
		return p.err
	}
	return n.write(o.Out)
}

func sizeRow(r *decide.SizeRow, t *decide.Sizes, u scenarios.Units) table.Row {
	q, H := t.Query, t.Plan.Stand.Height
	row := table.Row{r.Species, r.Shape.String(), "-", "-", "-", whole(100 * r.Share), "-"}
	if r.Found {
		row = table.Row{r.Species, r.Shape.String(), text0(r.Size/H, 1), length(r.Size, u), area(r.Stems, u), whole(100 * r.Share), whole(100 * r.Smaller)}
	}
	if t.Drawn > 0 {
		row = append(row, sizeRange(r, H))
	}
	if q.Against != "" {
		upper := "-"
		if !math.IsNaN(r.Upper) {
			upper = text0(r.Upper/H, 1)
		}
		row = append(row, upper)
	}
	if q.Turn {
		turned := func(φ, share float64) string {
			if math.IsNaN(φ) {
				return "-"
			}
			return fmt.Sprintf("%.0f° %.0f %%", φ*180/math.Pi, 100*share)
		}
		row = append(row, turned(r.Best, r.BestShare), turned(r.Worst, r.LeastGood))
	}
	return append(row, r.Verdict)
}

// sizeRange is the size from its 5th to its 95th percentile, in tree heights; none where no opening up to the limit is large enough.
func sizeRange(r *decide.SizeRow, H float64) string {
	text := func(x float64) string {
		if math.IsInf(x, 1) {
			return "none"
		}
		return text0(x/H, 1)
	}
	if math.IsNaN(r.Low) {
		return "-"
	}
	if text(r.Low) == text(r.High) {
		return text(r.Low)
	}
	return text(r.Low) + " to " + text(r.High)
}

func rangeWords(t *decide.Sizes) string {
	if t.Drawn == 0 {
		return "Low and high: --range."
	}
	return fmt.Sprintf("Range: the 5th to the 95th percentile of %d draws; none: no opening up to the limit.", t.Drawn)
}
