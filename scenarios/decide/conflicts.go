package decide

import (
	"fmt"
	"math"
	"slices"
	"strings"

	"shadeledger/scenarios"
	"shadeledger/scenarios/ledger"
)

// State of a finding.
type State int

// The states: a limit is kept, the rule could not be looked at or leaves the last word to the forester, it speaks against the treatment.
const (
	Within State = iota
	ToCheck
	Conflict
)

func (s State) String() string { return [...]string{"within", "to check", "conflict"}[s] }

// Kind of a figure.
type Kind int

// The kinds.
const (
	None     Kind = iota
	Plain         // without unit
	Percent       // of what the rule says
	Squares       // m2
	Metres        // m
	Basal         // m2/ha
	Depth         // mm of water
	Carbon        // g C a year
	Relative      // percent a year
)

// Measure is a figure with its kind.
type Measure struct {
	Kind  Kind
	Value float64
}

// Finding is what a rule found.
type Finding struct {
	Rule         *Rule
	Name         string   // of a buffer; "" where the rule's key says all
	Treatment    string   // "" for all of the plan
	Seedling     string   // "" for any
	Stations     []string // where; nil for everywhere
	State        State
	Found, Limit Measure
	Detail       string // words without figures in units
}

// Findings are what speaks against the treatments of a run, in the plan's order, and how they stand to the plan's limits.
type Findings struct {
	Conflicts []Finding // computed by rules, and limits that are overstepped
	Limits    []Finding // every limit for every treatment it applies to
}

// finder collects findings of one run.
type finder struct {
	p    *scenarios.Plan
	rows map[[2]string][]spot // by treatment and seedling, in the order of stations
	out  Findings
}

// spot is the year of one seedling at one station inside.
type spot struct {
	row  *scenarios.BalanceRow
	net  float64 // g C in a mean year
	x, y float64 // m from the centre
}

// FindConflicts reads a run with break-evens, whatever its rows are divided by.
func FindConflicts(r *scenarios.Results) *Findings {
	f := &finder{p: r.Plan, rows: map[[2]string][]spot{}}
	f.gather(r)
	for i := range f.p.Treatments {
		t := &f.p.Treatments[i]
		f.windthrow(t)
		f.invaded(t)
		for j := range f.p.Seedlings {
			s := &f.p.Seedlings[j]
			f.frost(t, s)
			f.shrubs(t, s)
			f.edge(t, s)
			f.spring(t, s)
			if f.p.Size.Against != "" {
				f.rival(t, s)
			}
		}
		f.limits(t)
	}
	f.whole()
	slices.SortStableFunc(f.out.Limits, func(a, b Finding) int { return f.order(a) - f.order(b) })
	return &f.out
}

// order of a limit: that of the plan.
func (f *finder) order(x Finding) int {
	return slices.IndexFunc(f.p.Limits, func(l scenarios.Limit) bool {
		rule, name := ruleOf(l)
		return rule == x.Rule && name == x.Name
	})
}

func (f *finder) add(x Finding) { f.out.Conflicts = append(f.out.Conflicts, x) }

// gather keeps one row for each station inside; the year's net is the mean of its years.
func (f *finder) gather(r *scenarios.Results) {
	type place struct{ treatment, station string }
	inside := map[place][2]float64{}
	for i := range r.Stations {
		st := &r.Stations[i]
		spots := f.p.StationsOf(st.Treatment)
		for k, name := range st.Names {
			if st.Inside[k] {
				var at [2]float64
				if k < len(spots) {
					at = [2]float64{spots[k].X, spots[k].Y}
				}
				inside[place{st.Treatment.Name, name}] = at
			}
		}
	}
	seen := map[[3]string]bool{}
	for i := range r.Balance {
		row := &r.Balance[i]
		at, in := inside[place{row.Treatment, row.Station}]
		key := [3]string{row.Treatment, row.Station, row.Species}
		if !in || seen[key] {
			continue
		}
		seen[key] = true
		s := spot{row: row, x: at[0], y: at[1]}
		for _, n := range row.Years {
			s.net += n / float64(len(row.Years))
		}
		k := [2]string{row.Treatment, row.Species}
		f.rows[k] = append(f.rows[k], s)
	}
}

// best are the spots of a seedling's best class in a treatment; none where it is below everywhere, for then nobody plants it.
func (f *finder) best(treatment, seedling string) (out []spot) {
	class := ledger.Marginal
	for _, s := range f.rows[[2]string{treatment, seedling}] {
		if s.row.Class > class {
			class, out = s.row.Class, nil
		}
		if s.row.Class == class {
			out = append(out, s)
		}
	}
	return out
}

// frost looks at leaf-out against the last frost where much of the sky is seen.
func (f *finder) frost(t *scenarios.Treatment, s *scenarios.Seedling) {
	out, sheds := scenarios.LeafOut(s.Leaves)
	last := f.p.Frost.Last
	if !sheds || last.Month == 0 || out.DaysBefore(last) <= 0 {
		return
	}
	x := Finding{Rule: &ruleFrost, Treatment: t.Name, Seedling: s.Name, State: Conflict, Limit: Measure{Percent, 100 * frostView},
		Found: Measure{Percent, 0}, Detail: "leaves " + dayText(out) + ", last frost " + dayText(last)}
	for _, b := range f.best(t.Name, s.Name) {
		if b.row.SkyView > 100*frostView {
			x.Stations = append(x.Stations, b.row.Station)
			x.Found.Value = math.Max(x.Found.Value, b.row.SkyView)
		}
	}
	if x.Stations != nil {
		f.add(x)
	}
}

func dayText(d scenarios.Date) string { return fmt.Sprintf("%d %s", d.Day, d.Month.String()[:3]) }

// staying is the share of basal area, or of leaf area where no trees are known, that a treatment leaves between openings.
func staying(p *scenarios.Plan, t *scenarios.Treatment) float64 {
	if len(t.Trees.Trees) > 0 {
		return t.Trees.Sums().BasalArea / p.Stand.Trees.Sums().BasalArea
	}
	before, after := 0.0, 0.0
	for _, l := range p.Stand.Layers {
		before += l.LAI
	}
	for _, l := range t.Matrix {
		after += l.LAI
	}
	if before == 0 {
		return 1
	}
	return after / before
}

// hair is a share of basal area or leaf area that is no cut.
const hair = 1e-9

// cuts tells whether a treatment fells anything.
func cuts(p *scenarios.Plan, t *scenarios.Treatment) bool {
	_, opened := t.Opening.(scenarios.Cleared)
	return opened || staying(p, t) < 1-hair
}

func (f *finder) windthrow(t *scenarios.Treatment) {
	if !cuts(f.p, t) {
		return
	}
	if trees := f.p.Stand.Trees; f.p.Stand.Cruised() && trees.Measured() {
		x := Finding{Rule: &ruleWind, Treatment: t.Name, State: Conflict, Found: Measure{Plain, trees.Slenderness()}, Limit: Measure{Plain, slender},
			Detail: "leading species " + trees.Leading().Species.Common}
		if x.Found.Value > verySlender {
			x.Limit.Value = verySlender
			x.Detail += ", great danger"
		}
		if x.Found.Value > slender {
			f.add(x)
		}
	}
	if stays := staying(f.p, t); stays < leastStaying {
		f.add(Finding{Rule: &ruleHeavy, Treatment: t.Name, State: Conflict, Found: Measure{Percent, 100 * stays}, Limit: Measure{Percent, 100 * leastStaying}})
	}
}

// invaded looks at small openings where the plan has not closed the caution of invasive plants.
func (f *finder) invaded(t *scenarios.Treatment) {
	c, ok := t.Opening.(scenarios.Cleared)
	if !ok || c.Stems.Area() >= invaded || closed(f.p, ruleInvaded.Caution) {
		return
	}
	f.add(Finding{Rule: &ruleInvaded, Treatment: t.Name, State: ToCheck, Found: Measure{Squares, c.Stems.Area()}, Limit: Measure{Squares, invaded}})
}

// closed tells whether the plan says that a caution was addressed or does not apply.
func closed(p *scenarios.Plan, key string) bool {
	for _, c := range p.Cautions {
		if c.Key == key {
			return c.State == "addressed" || c.State == "not applicable"
		}
	}
	return false
}

func (f *finder) shrubs(t *scenarios.Treatment, s *scenarios.Seedling) {
	for _, u := range t.Understory {
		if u.LAI > 0 && u.Top > s.Height {
			f.add(Finding{Rule: &ruleShrub, Treatment: t.Name, Seedling: s.Name, State: Conflict, Found: Measure{Metres, u.Top}, Limit: Measure{Metres, s.Height}, Detail: u.Name})
		}
	}
}

// whole adds what holds for the whole plan: what could not be looked at, the leaf-out of evergreens, drought.
func (f *finder) whole() {
	note := func(r *Rule, detail string) { f.add(Finding{Rule: r, State: ToCheck, Detail: detail}) }
	cut := slices.ContainsFunc(f.p.Treatments, func(t scenarios.Treatment) bool { return cuts(f.p, &t) })
	var sheds, keeps []string
	for _, s := range f.p.Seedlings {
		if _, ok := scenarios.LeafOut(s.Leaves); ok {
			sheds = append(sheds, s.Name)
		} else {
			keeps = append(keeps, s.Name)
		}
	}
	if f.p.Frost.Last.Month == 0 && len(sheds) > 0 {
		note(&ruleFrost, "not assessed: the plan has no site.frost.last")
	}
	if len(keeps) > 0 {
		note(&ruleFrost, "not assessed for "+strings.Join(keeps, ", ")+": evergreen, the flush of their shoots is not known")
	}
	if !(f.p.Stand.Cruised() && f.p.Stand.Trees.Measured()) && cut {
		note(&ruleWind, "H:D not assessed: the plan has no diameters of the leading species")
	}
	f.late()
	if f.p.Size.Against == "" {
		f.rivals()
	}
	f.dry()
}

// late looks at leaf-out of seedlings under a canopy against the stand's.
func (f *finder) late() {
	for _, s := range f.p.Seedlings {
		out, sheds := scenarios.LeafOut(s.Leaves)
		if !sheds {
			continue
		}
		for i := range f.p.Treatments {
			t := &f.p.Treatments[i]
			if _, opened := t.Opening.(scenarios.Cleared); opened {
				continue
			}
			if stand, _, ok := scenarios.Leafing(t.Matrix); ok && stand.DaysBefore(out) > 0 {
				f.add(Finding{Rule: &ruleLate, Treatment: t.Name, Seedling: s.Name, State: Conflict, Detail: "seedling " + dayText(out) + ", stand " + dayText(stand)})
			}
		}
	}
}

func (f *finder) dry() {
	d, ok := f.p.DryQuarter()
	if !ok {
		f.add(Finding{Rule: &ruleDry, State: ToCheck, Detail: "not assessed: the plan has no monthly rain and radiation"})
		return
	}
	lack := d.Demand - d.Rain
	x := Finding{Rule: &ruleDry, State: ToCheck, Found: Measure{Depth, lack}, Limit: Measure{Depth, 1000 * f.p.Water.Capacity}, Detail: d.Months}
	switch {
	case lack <= 0:
	case math.IsNaN(f.p.Water.Capacity):
		x.Limit = Measure{}
		x.Detail += "; the plan has no site.soil.water_capacity"
		f.add(x)
	case lack > x.Limit.Value:
		f.add(x)
	}
}
