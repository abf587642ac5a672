package report

import (
	"fmt"
	"math"
	"slices"

	"github.com/jedib0t/go-pretty/v6/table"

	"shadeledger/scenarios"
	"shadeledger/scenarios/decide"
	"shadeledger/scenarios/ledger"
)

// yearLine is a year with what becomes of the seedling at its spot.
type yearLine struct {
	decide.YearRow
	span *decide.Span
	due  *decide.Reentry
}

// within leaves a year beyond the horizon empty.
func within(y float64) float64 {
	if math.IsInf(y, 1) {
		return math.NaN()
	}
	return y
}

func lostYear(pace decide.Pace) func(*yearLine) float64 {
	return func(r *yearLine) float64 { return within(r.span.Lost[pace]) }
}

func stockYear(pace decide.Pace) func(*yearLine) float64 {
	return func(r *yearLine) float64 { return within(r.span.Stock[pace]) }
}

func dueYear(pace decide.Pace) func(*yearLine) float64 {
	return func(r *yearLine) float64 { return within(r.due.Year[pace]) }
}

var yearColumns = []column[yearLine]{
	words("treatment", func(r *yearLine) string { return r.Treatment }),
	words("station", func(r *yearLine) string { return r.Station }),
	words("species", func(r *yearLine) string { return r.Species }),
	figure("year", func(r *yearLine) float64 { return float64(r.Year) }),
	figure("light_pct", func(r *yearLine) float64 { return r.Light[decide.Likely] }),
	figure("light_pct_low", func(r *yearLine) float64 { return slices.Min(r.Light[:]) }),
	figure("light_pct_high", func(r *yearLine) float64 { return slices.Max(r.Light[:]) }),
	words("class", func(r *yearLine) string { return r.Class[decide.Likely].String() }),
	words("class_low", func(r *yearLine) string { return slices.Min(r.Class[:]).String() }),
	words("class_high", func(r *yearLine) string { return slices.Max(r.Class[:]).String() }),
	figure("height_m", func(r *yearLine) float64 { return r.Height[decide.Likely] }),
	figure("height_m_low", func(r *yearLine) float64 { return slices.Min(r.Height[:]) }),
	figure("height_m_high", func(r *yearLine) float64 { return slices.Max(r.Height[:]) }),
	figure("net_gC", func(r *yearLine) float64 { return r.Net[decide.Likely] }),
	figure("stock_light_pct", func(r *yearLine) float64 { return r.StockLight[decide.Likely] }),
	words("stock_class", func(r *yearLine) string { return r.StockClass[decide.Likely].String() }),
	figure("lost_early", lostYear(decide.Early)),
	figure("lost_likely", lostYear(decide.Likely)),
	figure("lost_late", lostYear(decide.Late)),
	figure("stock_lost_early", stockYear(decide.Early)),
	figure("stock_lost_likely", stockYear(decide.Likely)),
	figure("stock_lost_late", stockYear(decide.Late)),
	figure("above_year", func(r *yearLine) float64 { return within(r.span.Above[decide.Likely]) }),
	figure("above_year_low", func(r *yearLine) float64 { return within(slices.Min(r.span.Above[:])) }),
	figure("above_year_high", func(r *yearLine) float64 { return within(slices.Max(r.span.Above[:])) }),
	figure("dies_early", func(r *yearLine) float64 { return within(r.span.Dies[decide.Early]) }),
	figure("dies_likely", func(r *yearLine) float64 { return within(r.span.Dies[decide.Likely]) }),
	figure("dies_late", func(r *yearLine) float64 { return within(r.span.Dies[decide.Late]) }),
	figure("reentry_early", dueYear(decide.Early)),
	figure("reentry_likely", dueYear(decide.Likely)),
	figure("reentry_late", dueYear(decide.Late)),
}

// yearLines joins every year with its spot.
func yearLines(f *decide.Future) []yearLine {
	years, seedlings := f.Plan.Years.Horizon+1, len(f.Plan.Seedlings)
	lines := make([]yearLine, len(f.Rows))
	due := map[[2]string]*decide.Reentry{}
	for i := range f.Reentries {
		due[[2]string{f.Reentries[i].Treatment, f.Reentries[i].Species}] = &f.Reentries[i]
	}
	for i, r := range f.Rows {
		lines[i] = yearLine{r, &f.Spans[i/years], due[[2]string{r.Treatment, f.Plan.Seedlings[i/years%seedlings].Name}]}
	}
	return lines
}

// Years writes how long every station keeps every seedling comfortable, and how tall it is by then.
func Years(o Output, plan *scenarios.Plan, f *decide.Future) error {
	n := planNotes(plan)
	if o.Format != Table {
		return data(o, n, yearColumns, yearLines(f))
	}
	p := &printer{w: o.Out}
	c := plan.Years.Closing
	p.f("%s\n%s\n", Name(plan), seasonLine(plan))
	hang(p, "", fmt.Sprintf("What the years do, to year %d, at an early, a likely and a late pace. Border crowns grow in at %.2f m a year and side (%.2f to %.2f), slowing, and stop after 11 to 16 years; thinned canopies have their leaves back %s. Seedlings grow from their own yearly net.",
		plan.Years.Horizon, c[1], c[0], c[2], regrowth(plan)))
	t := newTable("treatment", "seedling", "kept", "station", "lost", "new stock", lengthUnit(o.Units), "over")
	last := ""
	for i := range f.Reentries {
		r := &f.Reentries[i]
		shown := r.Treatment
		if shown == last {
			shown = ""
		}
		last = r.Treatment
		t.AppendRow(append(table.Row{clip(shown, 14), clip(r.Species, 13)}, yearCells(o, f, r)...))
	}
	if p.err == nil {
		p.err = render(o.Out, t, 7, 8)
	}
	hang(p, "", fmt.Sprintf("kept: stations inside that are comfortable right after the cut and in the last year, likely pace, of all inside; station: that which keeps the seedling longest. lost: early-likely-late, the year in which the last station inside stops being comfortable for the growing seedling; come back by then. new stock: the same for stock of the plan's size planted in that year. %d+ is beyond the last year followed; dies: after %d years of loss. %s: height at the station in the likely year lost or the last one, at most the crown base; over: the year it stands above the understory, - where none is taller, no where it never does. Plants that come up later are not followed.",
		plan.Years.Horizon, decide.Fading, lengthUnit(o.Units)))
	lightByYear(p, o, f)
	p.f("\n")
	if p.err != nil {
		return p.err
	}
	return n.write(o.Out)
}

// YearStations writes when every station is lost.
func YearStations(o Output, plan *scenarios.Plan, f *decide.Future) error {
	if o.Format != Table {
		return Years(o, plan, f)
	}
	n := planNotes(plan)
	p := &printer{w: o.Out}
	p.f("%s\n%s\n", Name(plan), seasonLine(plan))
	t := newTable("treatment", "station", "seedling", "lost", "new stock", lengthUnit(o.Units), "over")
	for i := range f.Spans {
		s := &f.Spans[i]
		last := rowsOf(f, i)[plan.Years.Horizon]
		t.AppendRow(table.Row{s.Treatment, s.Station, s.Species, lost(s.Lost, s, plan.Years.Horizon), yearRange(s.Stock, plan.Years.Horizon),
			text0(lengthValue(last.Height[decide.Likely], o.Units), 1), over(s)})
	}
	if p.err == nil {
		p.err = render(o.Out, t, 6, 7)
	}
	hang(p, "", fmt.Sprintf("lost: early-likely-late, the year in which the station stops being comfortable for the growing seedling; new stock: the same for stock of the plan's size planted in that year. %d+ is beyond the last year followed; dies: after %d years of loss. %s: height in year %d, likely pace, at most the crown base; over: the year it stands above the understory, - where none is taller, no where it never does.",
		plan.Years.Horizon, decide.Fading, lengthUnit(o.Units), plan.Years.Horizon))
	p.f("\n")
	if p.err != nil {
		return p.err
	}
	return n.write(o.Out)
}

// lightByYear writes the light of the first seedling's best station.
func lightByYear(p *printer, o Output, f *decide.Future) {
	var years []int
	header := []any{"light %"}
	right := []int{}
	for y := 0; y <= f.Plan.Years.Horizon; y += max(1, f.Plan.Years.Horizon/6) {
		years, header, right = append(years, y), append(header, fmt.Sprintf("year %d", y)), append(right, len(years)+2)
	}
	t := newTable(header...)
	n := len(f.Plan.Seedlings)
	for i := 0; i < len(f.Reentries); i += n {
		r := &f.Reentries[i]
		rows := rowsOf(f, r.Best)
		row := table.Row{r.Treatment}
		for _, y := range years {
			row = append(row, whole(rows[y].Light[decide.Likely]))
		}
		t.AppendRow(row)
	}
	p.f("\n")
	hang(p, "", fmt.Sprintf("Light over the season on %s at its best station, at its height in that year, likely pace:", f.Plan.Seedlings[0].Name))
	if p.err == nil {
		p.err = render(o.Out, t, right...)
	}
}

// rowsOf are the years of a span.
func rowsOf(f *decide.Future, span int) []decide.YearRow {
	n := f.Plan.Years.Horizon + 1
	return f.Rows[span*n : (span+1)*n]
}

func regrowth(p *scenarios.Plan) string {
	if r := p.Years.Regrowth; r[1] > 0 {
		return fmt.Sprintf("after %.0f years (%.0f to %.0f)", r[1], r[0], r[2])
	}
	return "after 8 years where the cut was light, 16 (13 to 20) where it was half or more"
}

// yearCells are one seedling's figures in one treatment.
func yearCells(o Output, f *decide.Future, r *decide.Reentry) table.Row {
	good, kept, inside := 0, 0, 0
	for i := range f.Spans {
		s := &f.Spans[i]
		if s.Treatment != r.Treatment || s.Species != r.Species || !s.Inside {
			continue
		}
		inside++
		if rowsOf(f, i)[0].Class[decide.Likely] == ledger.Comfortable {
			good++
		}
		if math.IsInf(s.Lost[decide.Likely], 1) {
			kept++
		}
	}
	best := &f.Spans[r.Best]
	rows := rowsOf(f, r.Best)
	then := rows[int(math.Min(r.Year[decide.Likely], float64(f.Plan.Years.Horizon)))]
	return table.Row{fmt.Sprintf("%d-%d/%d", good, kept, inside), best.Station, lost(r.Year, best, f.Plan.Years.Horizon), yearRange(r.Stock, f.Plan.Years.Horizon),
		text0(lengthValue(then.Height[decide.Likely], o.Units), 1), over(best)}
}

// over is the year in which a seedling stands above the understory, likely pace.
func over(s *decide.Span) string {
	switch y := s.Above[decide.Likely]; {
	case math.IsInf(y, 1):
		return "no"
	case y > 0:
		return fmt.Sprintf("%.0f", y)
	}
	return "-"
}

// lost is when a spot, or the last one, is lost; of a seedling that is never comfortable, whether it dies.
func lost(year [3]float64, s *decide.Span, horizon int) string {
	if y := s.Dies[decide.Likely]; slices.Max(year[:]) == 0 && !math.IsInf(y, 1) {
		return fmt.Sprintf("dies %.0f", y)
	}
	return yearRange(year, horizon)
}

// yearRange is early-likely-late, early-late where the likely year is beyond the horizon too.
func yearRange(year [3]float64, horizon int) string {
	if slices.Max(year[:]) == 0 {
		return "never"
	}
	text := func(y float64) string {
		if math.IsInf(y, 1) {
			return fmt.Sprintf("%d+", horizon)
		}
		return fmt.Sprintf("%.0f", y)
	}
	early, likely, late := text(year[decide.Early]), text(year[decide.Likely]), text(year[decide.Late])
	switch {
	case early == late && early == likely:
		return likely
	case math.IsInf(year[decide.Likely], 1):
		return early + "-" + late
	}
	return early + "-" + likely + "-" + late
}
