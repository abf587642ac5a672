package decide

import (
	"math"
	"strings"
	"time"

	"shadeledger/canopy"
	"shadeledger/scenarios"
)

// ruleOf is the rule that a limit makes, and the name of what it protects.
func ruleOf(l scenarios.Limit) (*Rule, string) {
	switch l := l.(type) {
	case scenarios.OpeningLimit:
		return &limitOpening, ""
	case scenarios.ShareLimit:
		return &limitShare, ""
	case scenarios.ResidualLimit:
		return &limitResidual, ""
	case scenarios.CoverLimit:
		return &limitCover, ""
	case scenarios.AdjacencyLimit:
		return &limitAdjacency, ""
	case scenarios.BufferLimit:
		return &limitBuffer, l.Name
	}
	return &limitNoCut, ""
}

// limits holds a treatment to the plan's limits. Those overstepped are conflicts too.
func (f *finder) limits(t *scenarios.Treatment) {
	if !cuts(f.p, t) {
		return
	}
	for _, l := range f.p.Limits {
		x := Finding{Treatment: t.Name, State: ToCheck}
		x.Rule, x.Name = ruleOf(l)
		if !f.hold(&x, l, t) {
			continue
		}
		f.out.Limits = append(f.out.Limits, x)
		if x.State == Conflict {
			f.add(x)
		}
	}
}

// over is the state of a figure that may not pass a limit.
func over(found, limit float64) State {
	if found > limit*(1+hair) {
		return Conflict
	}
	return Within
}

// hold fills a finding; false where the limit is not about the treatment.
func (f *finder) hold(x *Finding, l scenarios.Limit, t *scenarios.Treatment) bool {
	c, opened := t.Opening.(scenarios.Cleared)
	switch l := l.(type) {
	case scenarios.OpeningLimit:
		if opened {
			x.Found, x.Limit = Measure{Squares, x.joined(t, c)}, Measure{Squares, l.Area}
			x.State = over(x.Found.Value, l.Area)
		}
		return opened
	case scenarios.ShareLimit:
		if opened {
			f.share(x, l.Share, float64(max(1, t.Count))*c.Stems.Area())
		}
		return opened
	case scenarios.AdjacencyLimit:
		if opened {
			x.Found, x.Limit = Measure{Squares, x.joined(t, c) + l.Unsecured}, Measure{Squares, l.Area}
			x.State = over(x.Found.Value, l.Area)
		}
		return opened
	case scenarios.ResidualLimit:
		x.Limit = Measure{Basal, l.BasalArea}
		f.residual(x, t, Measure{Basal, t.Trees.Sums().BasalArea})
	case scenarios.CoverLimit:
		x.Limit = Measure{Percent, 100 * l.Cover}
		f.residual(x, t, Measure{Percent, 100 * t.Trees.Sums().Cover()})
	case scenarios.BufferLimit:
		f.buffer(x, l, t, c, opened)
	case scenarios.NoCutLimit:
		f.season(x, l)
	}
	return true
}

func (f *finder) share(x *Finding, most, area float64) {
	x.Limit = Measure{Percent, 100 * most}
	if !(f.p.Stand.Area > 0) {
		x.Detail = "not assessed: the plan has no stand.area"
		return
	}
	share := area / (f.p.Stand.Area * 1e4)
	x.Found, x.State = Measure{Percent, 100 * share}, over(share, most)
}

// joined is the area of one opening, m2, or of the most openings that touch one another where their centres are known; what they share of ground
// counts for each.
func (x *Finding) joined(t *scenarios.Treatment, c scenarios.Cleared) float64 {
	reach := 0.0
	for d := range 72 {
		reach = math.Max(reach, canopy.Reach(c.Stems, float64(d)*math.Pi/36))
	}
	points := t.Centres.Points
	group := make([]int, len(points)) // of each opening: the first one that it hangs together with
	for i, a := range points {
		group[i] = i
		land := canopy.LandOf(c.Stems, a.X, a.Y)
		for j, b := range points[:i] {
			if math.Hypot(a.X-b.X, a.Y-b.Y) > 2.1*reach || land.From(c.Stems, b.X, b.Y) > 0 {
				continue
			}
			for k, g := range group[:i+1] { // both groups are one
				if g == group[i] {
					group[k] = group[j]
				}
			}
		}
	}
	most := []string{""}
	for g := range points {
		var names []string
		for i := range points {
			if group[i] == g {
				names = append(names, points[i].Name)
			}
		}
		if len(names) > len(most) {
			most = names
		}
	}
	if len(most) > 1 {
		x.Detail = "openings " + strings.Join(most, ", ") + " touch and count as one"
	}
	return float64(len(most)) * c.Stems.Area()
}

// residual holds what stays between openings to the least asked for.
func (f *finder) residual(x *Finding, t *scenarios.Treatment, found Measure) {
	if len(t.Trees.Trees) == 0 {
		x.Detail = "not assessed: the treatment states layers, not trees"
		return
	}
	x.Found, x.State = found, over(x.Limit.Value, found.Value)
}

// buffer measures from the border stems of every opening.
func (f *finder) buffer(x *Finding, l scenarios.BufferLimit, t *scenarios.Treatment, c scenarios.Cleared, opened bool) {
	x.Limit = Measure{Metres, l.Distance}
	switch {
	case !opened:
		x.Detail = "not assessed: cut all over the stand; leave it out there"
		return
	case len(t.Centres.Points) == 0:
		x.Detail = "not assessed: no centres of the openings"
		return
	}
	x.Found, x.State = Measure{Metres, math.Inf(1)}, Within
	var near []string
	for _, at := range t.Centres.Points {
		d := l.Land.From(c.Stems, at.X, at.Y)
		x.Found.Value = math.Min(x.Found.Value, d)
		if d < l.Distance*(1-hair) {
			near = append(near, at.Name)
		}
	}
	if near != nil {
		x.State, x.Detail = Conflict, "opening "+strings.Join(near, ", ")
	}
}

// season names the months that are left whole by all periods without felling.
func (f *finder) season(x *Finding, l scenarios.NoCutLimit) {
	free := [13]bool{}
	days := 0
	for d := time.Date(2024, 1, 1, 0, 0, 0, 0, time.UTC); d.Year() == 2024; d = d.AddDate(0, 0, 1) {
		free[d.Month()] = free[d.Month()] || d.Day() == 1
		if f.felling(scenarios.Date{Month: d.Month(), Day: d.Day()}) {
			days++
		} else {
			free[d.Month()] = false
		}
	}
	var months []string
	for m := time.January; m <= time.December; m++ {
		if free[m] {
			months = append(months, m.String()[:3])
		}
	}
	x.Detail = dayText(l.From) + " to " + dayText(l.To) + "; whole months left: "
	switch {
	case days == 0:
		x.State = Conflict
		x.Detail += "none, and no day"
	case months == nil:
		x.Detail += "none"
	default:
		x.Detail += strings.Join(months, " ")
	}
}

// felling tells whether no period closes a day.
func (f *finder) felling(d scenarios.Date) bool {
	for _, l := range f.p.Limits {
		if n, ok := l.(scenarios.NoCutLimit); ok && n.Holds(d) {
			return false
		}
	}
	return true
}
