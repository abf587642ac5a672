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

var thinColumns = []column[decide.ThinRow]{
	figure("residual_ba_m2_ha", func(r *decide.ThinRow) float64 { return r.Residual }),
	figure("cut_pct", func(r *decide.ThinRow) float64 { return r.Cut }),
	figure("lai", func(r *decide.ThinRow) float64 { return r.LAI }),
	figure("light_pct", func(r *decide.ThinRow) float64 { return r.Light }),
	figure("light_leaf_on_pct", func(r *decide.ThinRow) float64 { return r.LightLeafOn }),
	figure("sky_view_pct", func(r *decide.ThinRow) float64 { return r.SkyView }),
	figure("stand_gain_gC_m2", func(r *decide.ThinRow) float64 { return r.StandGain }),
	words("species", func(r *decide.ThinRow) string { return r.Species }),
	figure("net_gC", func(r *decide.ThinRow) float64 { return r.Net }),
	words("class", func(r *decide.ThinRow) string { return r.Class.String() }),
	figure("years_above", func(r *decide.ThinRow) float64 { return within(r.Above[decide.Likely]) }),
	figure("years_above_low", func(r *decide.ThinRow) float64 { return within(r.Above[decide.Early]) }),
	figure("years_above_high", func(r *decide.ThinRow) float64 { return within(r.Above[decide.Late]) }),
}

// notesOfThin leaves out what is said of single treatments.
func notesOfThin(plan *scenarios.Plan, r *scenarios.Results, c scenarios.Correction) notes {
	n := notesOf(r)
	n.plan = plan
	n.warnings = append(c.Notes(), r.Warnings...)
	return n
}

// Thin writes residual basal areas against light, sky, classes and the stand's own gain. q says how trees go.
func Thin(o Output, plan *scenarios.Plan, t *decide.ThinTable, q decide.ThinQuery) error {
	n := notesOfThin(plan, t.Results, t.Results.Correction)
	if o.Format != Table {
		return data(o, n, thinColumns, t.Rows)
	}
	p := &printer{w: o.Out}
	p.f("%s\n%s\n", Name(plan), seasonLine(plan))
	hang(p, "", how(plan, q))
	header := []any{"left " + basalUnit(o.Units), "cut %", "leaf area", "light %", "leaf-on %", "sky %", "stand gain"}
	for _, s := range plan.Seedlings {
		header = append(header, s.Name)
	}
	w := newTable(header...)
	seedlings := len(plan.Seedlings)
	for i := 0; i < len(t.Rows); i += seedlings {
		r := t.Rows[i]
		row := table.Row{text0(basalValue(r.Residual, o.Units), 0), whole(r.Cut), text0(r.LAI, 1), whole(r.Light), whole(r.LightLeafOn), whole(r.SkyView), text0(r.StandGain, 0)}
		for _, x := range t.Rows[i : i+seedlings] {
			row = append(row, sig(x.Net, 2)+" "+x.Class.String()[:1]+keeps(&x, plan.Years.Horizon))
		}
		w.AppendRow(row)
	}
	if p.err == nil {
		right := []int{1, 2, 3, 4, 5, 6, 7}
		for i := range seedlings {
			right = append(right, 8+i)
		}
		p.err = render(o.Out, w, right...)
	}
	hang(p, "", "stand gain: what the trees' leaves assimilate less their respiration, g C per m2 of ground in a mean year; under each seedling its own net, g C per plant and year, and its class: b below, m marginal, c comfortable, with the years for which it stays so as it grows and the canopy closes, likely pace.")
	p.f("\n")
	if p.err != nil {
		return p.err
	}
	return n.write(o.Out)
}

// lasting says for how long an answer holds.
func lasting(years [3]float64, horizon int) string {
	if years[decide.Late] <= 1 {
		return "Crowns close again: the target is met in the first year and no longer. Leave less to keep it."
	}
	return fmt.Sprintf("Crowns close again: the target is met for %s years (early-likely-late). Leave less to keep it longer.", yearRange(years, horizon))
}

// keeps is the number of years a comfortable seedling stays so.
func keeps(r *decide.ThinRow, horizon int) string {
	switch y := r.Above[decide.Likely]; {
	case r.Class != ledger.Comfortable:
		return ""
	case math.IsInf(y, 1):
		return fmt.Sprintf(" %d+", horizon)
	default:
		return fmt.Sprintf(" %.0f", y)
	}
}

// how says in which order trees go and what is left below them.
func how(plan *scenarios.Plan, q decide.ThinQuery) string {
	order := []string{"smallest first", "largest first", "the same share of all sizes"}[q.Thinning.Order]
	s := "Trees taken " + order
	var names []string
	for _, x := range q.Thinning.Only {
		names = append(names, x.Common)
	}
	if names != nil {
		s += ", only " + strings.Join(names, ", ")
	}
	names = nil
	for _, x := range q.Thinning.Spare {
		names = append(names, x.Common)
	}
	if names != nil {
		s += ", sparing " + strings.Join(names, ", ")
	}
	switch {
	case len(plan.Stand.Understory) == 0:
		return s + "."
	case len(q.Understory) == 0:
		return s + "; the understory removed, in the uncut stand too."
	}
	names = nil
	for _, u := range q.Understory {
		names = append(names, u.Name)
	}
	return s + "; below them " + strings.Join(names, ", ") + "."
}

// Residual writes the answer to how much may stay.
func Residual(o Output, plan *scenarios.Plan, a *decide.Residual, q decide.ThinQuery, c scenarios.Correction) error {
	var n notes
	if a.Results != nil {
		n = notesOfThin(plan, a.Results, c)
	} else {
		n = planNotes(plan)
	}
	rows := []residualRow{{plan: plan, answer: a}}
	if o.Format != Table {
		return data(o, n, residualColumns, rows)
	}
	p := &printer{w: o.Out}
	p.f("%s\n%s\n", Name(plan), seasonLine(plan))
	hang(p, "", how(plan, q))
	u := o.Units
	switch {
	case a.Uncut:
		hang(p, "", fmt.Sprintf("%s: nothing needs to be cut; the uncut stand, %s, has %.1f %% of full light.", a.Target, basalArea(a.Leave, u), a.Light))
	case !a.Found:
		hang(p, "", fmt.Sprintf("%s: no residual basal area gives it; nothing works, not even with all trees gone that may go.", a.Target))
	default:
		hang(p, "", fmt.Sprintf("%s: leave %s (%.0f %% of the basal area cut). Computed forward there: %.1f %% of full light. At %s it is missed.",
			a.Target, residualText(a.Leave, u), a.Cut, a.Light, residualText(a.Next, u)))
		for _, r := range a.Rows {
			hang(p, "  ", fmt.Sprintf("%s: %s, net %s g C a year", r.Species, r.Class, sig(r.Lines.Net(), 2)))
		}
		hang(p, "", lasting(a.Above, plan.Years.Horizon))
	}
	p.f("\n")
	if p.err != nil {
		return p.err
	}
	return n.write(o.Out)
}

// residualText shows a basal area to a tenth of a unit.
func residualText(v float64, u scenarios.Units) string {
	return text0(basalValue(v, u), 1) + " " + basalUnit(u)
}

type residualRow struct {
	plan   *scenarios.Plan
	answer *decide.Residual
}

// found is a figure of an answer that exists.
func found(of func(*decide.Residual) float64) func(*residualRow) float64 {
	return func(r *residualRow) float64 {
		if !r.answer.Found {
			return math.NaN()
		}
		return of(r.answer)
	}
}

var residualColumns = []column[residualRow]{
	words("target", func(r *residualRow) string { return r.answer.Target.String() }),
	words("verdict", func(r *residualRow) string {
		switch {
		case r.answer.Uncut:
			return "uncut stand"
		case !r.answer.Found:
			return "nothing works"
		}
		return "found"
	}),
	figure("residual_ba_m2_ha", found(func(a *decide.Residual) float64 { return a.Leave })),
	figure("cut_pct", found(func(a *decide.Residual) float64 { return a.Cut })),
	figure("light_pct", found(func(a *decide.Residual) float64 { return a.Light })),
	figure("years_above", found(func(a *decide.Residual) float64 { return within(a.Above[decide.Likely]) })),
	figure("years_above_low", found(func(a *decide.Residual) float64 { return within(a.Above[decide.Early]) })),
	figure("years_above_high", found(func(a *decide.Residual) float64 { return within(a.Above[decide.Late]) })),
}

// layerRow is a slab of a treatment's trees for a period.
type layerRow struct {
	treatment, period                        string
	bottom, top, lai, light, gross, respired float64
}

var layerColumns = []column[layerRow]{
	words("treatment", func(r *layerRow) string { return r.treatment }),
	figure("from_m", func(r *layerRow) float64 { return r.bottom }),
	figure("to_m", func(r *layerRow) float64 { return r.top }),
	words("period", func(r *layerRow) string { return r.period }),
	figure("lai", func(r *layerRow) float64 { return r.lai }),
	figure("light_leaf_on_pct", func(r *layerRow) float64 { return r.light }),
	figure("gross_gC_m2", func(r *layerRow) float64 { return r.gross }),
	figure("leaf_respiration_gC_m2", func(r *layerRow) float64 { return r.respired }),
	figure("net_gC_m2", func(r *layerRow) float64 { return r.gross - r.respired }),
}

// Layers writes what every layer of the trees gains, from the top down, by year, month or day.
func Layers(o Output, r *scenarios.Results, by scenarios.By) error {
	n := notesOf(r)
	var rows []layerRow
	for _, g := range r.Gains {
		for i := range g.Slabs {
			s := &g.Slabs[i]
			for _, x := range s.By(r.Series, by) {
				rows = append(rows, layerRow{g.Treatment, x.Period, s.Bottom, s.Top, s.LAI, s.Light, x.Gross, x.Leaf})
			}
		}
	}
	if o.Format != Table {
		return data(o, n, layerColumns, rows)
	}
	p := &printer{w: o.Out}
	p.f("%s\nWhat the leaves of the trees gain by layer, g C per m2 of ground and period.\n", Name(r.Plan))
	t := newTable("treatment", "layer "+lengthUnit(o.Units), "period", "leaf area", "leaf-on %", "gross", "respired", "net")
	for _, x := range rows {
		t.AppendRow(table.Row{x.treatment, fmt.Sprintf("%s-%s", text0(lengthValue(x.bottom, o.Units), 0), text0(lengthValue(x.top, o.Units), 0)), x.period,
			text0(x.lai, 2), whole(x.light), text0(x.gross, 1), text0(x.respired, 1), text0(x.gross-x.respired, 1)})
	}
	if p.err == nil {
		p.err = render(o.Out, t, 2, 4, 5, 6, 7, 8)
	}
	p.f("\n")
	if p.err != nil {
		return p.err
	}
	return n.write(o.Out)
}

// cutRow is what a treatment takes of a class.
type cutRow struct {
	treatment, species, botanical string
	dbh, trees, basal             float64
}

var cutColumns = []column[cutRow]{
	words("treatment", func(r *cutRow) string { return r.treatment }),
	words("species", func(r *cutRow) string { return r.species }),
	words("botanical", func(r *cutRow) string { return r.botanical }),
	figure("dbh_cm", func(r *cutRow) float64 { return 100 * r.dbh }),
	figure("cut_trees_ha", func(r *cutRow) float64 { return r.trees }),
	figure("cut_basal_area_m2_ha", func(r *cutRow) float64 { return r.basal }),
}

// CutTrees writes which trees each thinned treatment of a plan takes, by species and class.
func CutTrees(o Output, plan *scenarios.Plan) error {
	n := planNotes(plan)
	var rows []cutRow
	for i := range plan.Treatments {
		t := &plan.Treatments[i]
		for _, c := range t.Cut {
			rows = append(rows, cutRow{t.Name, c.Species.Common, c.Species.Botanical, c.DBH, c.PerHa, c.BasalArea()})
		}
	}
	if o.Format != Table {
		return data(o, n, cutColumns, rows)
	}
	p := &printer{w: o.Out}
	p.f("%s\nTrees taken by class.\n", Name(plan))
	if len(rows) == 0 {
		p.f("No treatment of the plan thins.\n")
	}
	t := newTable("treatment", "species", "dbh", "trees", "basal area")
	total := map[string]float64{}
	for _, r := range rows {
		total[r.treatment] += r.basal
		t.AppendRow(table.Row{r.treatment, r.species, diameter(r.dbh, o.Units), density(r.trees, o.Units), text0(basalValue(r.basal, o.Units), 1) + " " + basalUnit(o.Units)})
	}
	if len(rows) > 0 && p.err == nil {
		p.err = render(o.Out, t, 3, 4, 5)
	}
	for i := range plan.Treatments {
		if name := plan.Treatments[i].Name; total[name] > 0 {
			p.f("%s: %s taken in all.\n", name, basalArea(total[name], o.Units))
		}
	}
	p.f("\n")
	if p.err != nil {
		return p.err
	}
	return n.write(o.Out)
}
