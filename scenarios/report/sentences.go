package report

import (
	"fmt"
	"math"
	"strings"

	"shadeledger/canopy"
	"shadeledger/scenarios"
	"shadeledger/scenarios/decide"
	"shadeledger/scenarios/ledger"
)

// sentences say the decision as a prescription would: what to cut, what to bring up and where, for how long and how sure.
func (b *board) sentences(p *printer, u scenarios.Units) {
	lightest := b.lightest()
	for _, t := range b.byCut() {
		var parts []string
		for s, at := range lightest {
			if at == t {
				parts = append(parts, b.expectation(t, s))
			}
		}
		if parts != nil {
			hang(p, "", b.work(t, u)+" "+strings.Join(parts, " ")+b.against(t))
		}
	}
}

// against names the conflicts of a treatment, limits of the owner and law among them.
func (b *board) against(t int) string {
	rules := b.marks.rows[b.results.Plan.Treatments[t].Name]
	if rules == nil {
		return ""
	}
	return " Speaks against it: " + strings.Join(rules, ", ") + " (shadeledger cautions)."
}

// work is what to cut.
func (b *board) work(t int, u scenarios.Units) string {
	p := b.results.Plan
	x := &p.Treatments[t]
	cut := scenarios.CutOf(p, x)
	thin := ""
	if cut.Matrix > 0 {
		thin = fmt.Sprintf("take %.0f %% of the basal area", 100*cut.Matrix)
		if after := x.Trees.Sums().BasalArea; after > 0 {
			thin = "thin to " + basalArea(after, u) + ", " + thin
		}
	}
	o, opened := x.Opening.(scenarios.Cleared)
	switch {
	case opened && thin != "":
		return openings(x, o, p.Stand.Height, u) + "; between them " + thin + "."
	case opened:
		return openings(x, o, p.Stand.Height, u) + "."
	case thin != "":
		return strings.ToUpper(thin[:1]) + thin[1:] + "."
	}
	return "Leave the stand as it is."
}

// openings says how many of what shape and size, stem to stem.
func openings(t *scenarios.Treatment, o scenarios.Cleared, H float64, u scenarios.Units) string {
	number, plural := "an opening", ""
	if t.Count > 1 {
		number, plural = itoa(t.Count), "s"
	}
	heights := func(x float64) string { return text0(x/H, 1) }
	size := area(o.Stems.Area(), u)
	switch x := o.Stems.(type) {
	case canopy.Circle:
		return shape(number, "round opening", plural) + fmt.Sprintf(", %s across (%s tree heights, %s)", length(x.Diameter(), u), heights(x.Diameter()), size)
	case canopy.Ellipse:
		l, w, φ := x.Sides()
		return shape(number, "oval opening", plural) + fmt.Sprintf(", %s x %s (%s x %s tree heights, %s), long side %s", length(l, u), length(w, u), heights(l), heights(w), size, axis(φ))
	case canopy.Strip:
		l, w, φ := x.Sides()
		return shape(number, "strip", plural) + fmt.Sprintf(", %s x %s (%s x %s tree heights, %s), long side %s", length(l, u), length(w, u), heights(l), heights(w), size, axis(φ))
	}
	return shape(number, "opening", plural) + " of the outline given (" + size + ")"
}

func shape(number, kind, plural string) string {
	if number == "an opening" {
		if strings.HasPrefix(kind, "o") {
			return "Cut an " + kind
		}
		return "Cut a " + kind
	}
	return "Cut " + number + " " + kind + plural
}

// axis names a bearing of a long side by the nearest of eight directions, both ways.
func axis(φ float64) string {
	names := [...]string{"north-south", "northeast-southwest", "east-west", "southeast-northwest"}
	return names[int(math.Round(φ/(math.Pi/4)))%4]
}

// expectation is where one seedling is to come up and for how long.
func (b *board) expectation(t, seedling int) string {
	name := b.results.Plan.Seedlings[seedling].Name
	s := "Bring up " + name + " " + parts(b.cells[t][seedling]) + ": in " + percent(b.doubts.option(t, seedling).Chance) +
		" of the draws some spot inside is comfortable, the best one for " + b.doubts.lasting(t, seedling)
	return s + "."
}

// parts are the stations of an outcome in words.
func parts(o outcome) string {
	switch at := letters(o); at {
	case "":
		return "under the canopy"
	case "all":
		return "in all parts"
	default:
		words := strings.NewReplacer("C", "centre", "N", "north", "E", "east", "S", "south", "W", "west")
		var list []string
		for _, x := range strings.Fields(at) {
			list = append(list, words.Replace(x))
		}
		if len(list) == 1 {
			return "in the " + list[0]
		}
		return "in the " + strings.Join(list[:len(list)-1], ", ") + " and " + list[len(list)-1]
	}
}

// lasting is how long a seedling stays comfortable somewhere inside.
func (d *Doubts) lasting(t, seedling int) string {
	p := d.Years.Plan
	y := d.Years.Reentries[t*len(p.Seedlings)+seedling].Year
	early, likely, late := y[decide.Early], y[decide.Likely], y[decide.Late]
	horizon := itoa(p.Years.Horizon)
	switch {
	case likely == 0:
		return "no full year"
	case math.IsInf(early, 1):
		return "more than " + horizon + " years"
	case math.IsInf(likely, 1):
		return fmt.Sprintf("more than %s years, about %.0f if crowns close fast; look again in %.0f", horizon, early, early)
	case math.IsInf(late, 1):
		return fmt.Sprintf("about %.0f years, %.0f if crowns close fast, more than %s if slowly; look again in %.0f", likely, early, horizon, early)
	case early == late:
		return fmt.Sprintf("about %.0f years; look again then", likely)
	}
	return fmt.Sprintf("about %.0f years, %.0f if crowns close fast, %.0f if slowly; look again in %.0f", likely, early, late, early)
}

// lightest is for each seedling the lightest treatment under which it is comfortable; -1 where there is none.
func (b *board) lightest() []int {
	out := make([]int, len(b.results.Plan.Seedlings))
	for s := range out {
		out[s] = -1
		for _, t := range b.byCut() {
			if b.cells[t][s].class == ledger.Comfortable {
				out[s] = t
				break
			}
		}
	}
	return out
}
