package report

import (
	"fmt"
	"math"
	"strings"

	"github.com/jedib0t/go-pretty/v6/table"

	"shadeledger/scenarios"
	"shadeledger/scenarios/decide"
	"shadeledger/scenarios/ledger"
)

// yearLine is a year with when the seedling loses the spot.
type yearLine struct {
	decide.YearRow
	lost *decide.Lost
}

// lostYear leaves a spot that is never lost up to the horizon empty.
func lostYear(pace decide.Pace) func(*yearLine) float64 {
	return func(r *yearLine) float64 {
		if y := r.lost.Year[pace]; !math.IsInf(y, 1) {
			return y
		}
		return math.NaN()
	}
}

var yearColumns = []column[yearLine]{
	words("treatment", func(r *yearLine) string { return r.Treatment }),
	words("station", func(r *yearLine) string { return r.Station }),
	words("species", func(r *yearLine) string { return r.Species }),
	figure("year", func(r *yearLine) float64 { return float64(r.Year) }),
	figure("light_pct", func(r *yearLine) float64 { return r.Light[decide.Likely] }),
	figure("light_pct_low", func(r *yearLine) float64 { return r.Light[decide.Early] }),
	figure("light_pct_high", func(r *yearLine) float64 { return r.Light[decide.Late] }),
	words("class", func(r *yearLine) string { return r.Class[decide.Likely].String() }),
	words("class_low", func(r *yearLine) string { return r.Class[decide.Early].String() }),
	words("class_high", func(r *yearLine) string { return r.Class[decide.Late].String() }),
	figure("lost_early", lostYear(decide.Early)),
	figure("lost_likely", lostYear(decide.Likely)),
	figure("lost_late", lostYear(decide.Late)),
}

// Years writes how long every station keeps every seedling comfortable.
func Years(o Output, plan *scenarios.Plan, f *decide.Future) error {
	n := notes{plan: plan, assumed: plan.Assumed, warnings: plan.Warnings}
	if o.Format != Table {
		perLost := plan.Years.Horizon + 1
		lines := make([]yearLine, len(f.Rows))
		for i, r := range f.Rows {
			lines[i] = yearLine{r, &f.Lost[i/perLost]}
		}
		return data(o, n, yearColumns, lines)
	}
	p := &printer{w: o.Out}
	c := plan.Years.Closing
	p.f("%s\n%s\n", Name(plan), seasonLine(plan))
	hang(p, "", fmt.Sprintf("Years after the cut for which a seedling stays comfortable, early to late, to year %d. Border crowns grow in at %.2f m a year and side (%.2f to %.2f), slowing, and stop after 11 to 16 years; thinned canopies have their leaves back %s.",
		plan.Years.Horizon, c[1], c[0], c[2], regrowth(plan)))
	t := newTable("treatment", "seedling", "at the start", "centre", "longest", "years there", "light now", "year 10", fmt.Sprintf("year %d", plan.Years.Horizon))
	last := ""
	for _, name := range treatmentNames(f) {
		for _, s := range plan.Seedlings {
			shown := name
			if shown == last {
				shown = ""
			}
			last = name
			t.AppendRow(append(table.Row{shown, s.Name}, yearCells(plan, f, name, s.Name)...))
		}
	}
	if p.err == nil {
		p.err = render(o.Out, t, 7, 8, 9)
	}
	hang(p, "", "at the start: stations inside that are comfortable right after the cut; longest: the station that keeps it longest; light: over the season at that station, likely pace. + is beyond the last year. Seedlings keep their size; competing plants are not followed.")
	p.f("\n")
	if p.err != nil {
		return p.err
	}
	return n.write(o.Out)
}

func regrowth(p *scenarios.Plan) string {
	if r := p.Years.Regrowth; r[1] > 0 {
		return fmt.Sprintf("after %.0f years (%.0f to %.0f)", r[1], r[0], r[2])
	}
	return "after 8 years where the cut was light, 16 (13 to 20) where it was half or more"
}

func treatmentNames(f *decide.Future) (out []string) {
	for _, l := range f.Lost {
		if len(out) == 0 || out[len(out)-1] != l.Treatment {
			out = append(out, l.Treatment)
		}
	}
	return out
}

// yearCells are one seedling's figures in one treatment.
func yearCells(plan *scenarios.Plan, f *decide.Future, treatment, seedling string) table.Row {
	var start, centre, longest string
	var best *decide.Lost
	var lights [3]string
	perLost := plan.Years.Horizon + 1
	good, inside := 0, 0
	for i := range f.Lost {
		l := &f.Lost[i]
		if l.Treatment != treatment || l.Species != seedling || strings.HasSuffix(l.Station, "outside") {
			continue
		}
		inside++
		rows := f.Rows[i*perLost : (i+1)*perLost]
		if rows[0].Class[decide.Likely] == ledger.Comfortable {
			good++
		}
		if l.Station == "centre" || l.Station == scenarios.UnderCanopy {
			centre = kept(l, plan.Years.Horizon)
		}
		if best == nil || longer(l, best) {
			best, longest = l, l.Station
			for k, year := range []int{0, min(10, plan.Years.Horizon), plan.Years.Horizon} {
				lights[k] = whole(rows[year].Light[decide.Likely])
			}
		}
	}
	start = fmt.Sprintf("%d of %d", good, inside)
	return table.Row{start, centre, longest, kept(best, plan.Years.Horizon), lights[0], lights[1], lights[2]}
}

// longer compares by the likely pace, then by the early and the late one.
func longer(a, b *decide.Lost) bool {
	for _, pace := range []decide.Pace{decide.Likely, decide.Early, decide.Late} {
		if a.Year[pace] != b.Year[pace] {
			return a.Year[pace] > b.Year[pace]
		}
	}
	return false
}

// kept is the range of years, early to late.
func kept(l *decide.Lost, horizon int) string {
	if l == nil {
		return "-"
	}
	text := func(y float64) string {
		if math.IsInf(y, 1) {
			return fmt.Sprintf("%d+", horizon)
		}
		return fmt.Sprintf("%.0f", y)
	}
	a, b := text(l.Year[decide.Early]), text(l.Year[decide.Late])
	switch {
	case l.Year[decide.Late] == 0:
		return "none"
	case a == b:
		return a
	}
	return a + "-" + b
}
