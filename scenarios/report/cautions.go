package report

import (
	"math"
	"slices"
	"strings"

	"github.com/jedib0t/go-pretty/v6/table"

	"shadeledger/canopy/inventory"
	"shadeledger/scenarios"
	"shadeledger/scenarios/decide"
)

// findingLine is a row of `cautions`: a conflict, a limit of the plan, or a caution.
type findingLine struct {
	kind string
	decide.Finding
	state    string
	by, note string
}

// linesOf are findings as rows of a kind.
func linesOf(kind string, list []decide.Finding) (out []findingLine) {
	for _, x := range list {
		out = append(out, findingLine{kind: kind, Finding: x, state: x.State.String()})
	}
	return out
}

var findingColumns = []column[findingLine]{
	words("kind", func(r *findingLine) string { return r.kind }),
	words("treatment", func(r *findingLine) string { return r.Treatment }),
	words("species", func(r *findingLine) string { return r.Seedling }),
	words("rule", func(r *findingLine) string { return ruleName(&r.Finding) }),
	words("state", func(r *findingLine) string { return r.state }),
	words("stations", func(r *findingLine) string { return strings.Join(r.Stations, "; ") }),
	figure("found", func(r *findingLine) float64 { return plainValue(r.Found) }),
	figure("limit", func(r *findingLine) float64 { return plainValue(r.Limit) }),
	words("unit", func(r *findingLine) string { return metricUnits[max(r.Found.Kind, r.Limit.Kind)] }),
	words("detail", func(r *findingLine) string { return r.Detail }),
	words("text", func(r *findingLine) string { return r.Rule.Says }),
	words("source", func(r *findingLine) string { return r.Rule.Source }),
	words("change", func(r *findingLine) string { return r.Rule.Change }),
	words("by", func(r *findingLine) string { return r.by }),
	words("note", func(r *findingLine) string { return r.note }),
}

// metricUnits of figures in CSV and JSON, by kind.
var metricUnits = [...]string{decide.None: "", decide.Plain: "1", decide.Percent: "%", decide.Squares: "m2", decide.Metres: "m", decide.Basal: "m2/ha",
	decide.Depth: "mm", decide.Carbon: "g C", decide.Relative: "% per year"}

func plainValue(m decide.Measure) float64 {
	if m.Kind == decide.None {
		return math.NaN()
	}
	return m.Value
}

// ruleName is a rule with the name of what it protects.
func ruleName(x *decide.Finding) string { return strings.TrimSpace(x.Rule.Key + " " + x.Name) }

// measure is a figure for tables, with more digits where the usual ones do not tell it from another.
func measure(m decide.Measure, u scenarios.Units, more int) string {
	percent := func(v float64) string {
		if more == 0 {
			return whole(v)
		}
		return text0(v, more)
	}
	switch m.Kind {
	case decide.Plain:
		return percent(m.Value)
	case decide.Percent:
		return percent(m.Value) + " %"
	case decide.Squares:
		return areaTo(m.Value, u, 2+more)
	case decide.Metres:
		return sig(lengthValue(m.Value, u), 3+more) + " " + lengthUnit(u)
	case decide.Basal:
		return sig(basalValue(m.Value, u), 3+more) + " " + basalUnit(u)
	case decide.Depth:
		if u == scenarios.US {
			return sig(m.Value/1000/inventory.Inch, 2+more) + " in"
		}
		return percent(m.Value) + " mm"
	case decide.Carbon:
		return sig(m.Value, 2+more) + " g C"
	case decide.Relative:
		return percent(m.Value) + " % a year"
	}
	return ""
}

// mostDigits is how many more digits tell a figure from its limit.
const mostDigits = 3

// against sets what was found beside the limit, such that they read as different where they are.
func against(x *decide.Finding, u scenarios.Units) (found, limit string) {
	for more := range mostDigits + 1 {
		found, limit = measure(x.Found, u, more), measure(x.Limit, u, more)
		if found != limit || x.Found == x.Limit {
			break
		}
	}
	return found, limit
}

// foundText is what was found and the limit, in words.
func foundText(x *decide.Finding, u scenarios.Units) string {
	var parts []string
	found, limit := against(x, u)
	if found != "" {
		parts = append(parts, x.Rule.Of+" "+found)
	}
	if limit != "" {
		parts = append(parts, x.Rule.To+" "+limit)
	}
	if x.Detail != "" {
		parts = append(parts, x.Detail)
	}
	return strings.Join(parts, ", ")
}

// Cautions writes what speaks against each treatment, the plan's limits and every caution.
func Cautions(o Output, r *scenarios.Results) error {
	n, f := notesOf(r), decide.FindConflicts(r)
	if o.Format != Table {
		list := append(linesOf("conflict", f.Conflicts), linesOf("limit", f.Limits)...)
		return data(o, n, findingColumns, append(list, cautionLines(r.Plan)...))
	}
	p := &printer{w: o.Out}
	p.f("%s\n%s\n", Name(r.Plan), seasonLine(r.Plan))
	conflictList(p, r.Plan, f, o.Units)
	if p.err == nil {
		p.err = limitTable(o, f)
	}
	cautionList(p, r.Plan, f)
	n.doubts(p)
	hang(p, "", deference)
	return p.err
}

// cautionLines are the plan's cautions as rows.
func cautionLines(p *scenarios.Plan) (out []findingLine) {
	for _, c := range p.Cautions {
		out = append(out, findingLine{kind: "caution", Finding: decide.Finding{Rule: &decide.Rule{Key: c.Key, Says: c.Text}}, state: c.State, by: c.By, note: c.Note})
	}
	return out
}

// conflictList prints conflicts under each treatment, then what is to be checked, then the rules behind them.
func conflictList(p *printer, plan *scenarios.Plan, f *decide.Findings, u scenarios.Units) {
	var used []*decide.Rule
	part := func(state decide.State, title, none string) {
		var list []decide.Finding
		for _, x := range f.Conflicts {
			if x.State == state {
				list = append(list, x)
			}
		}
		if list == nil {
			p.f("%s\n", none)
			return
		}
		p.f("%s\n", title)
		for _, t := range append(treatmentsOf(plan), "") {
			findingItems(p, t, list, u, &used)
		}
	}
	part(decide.Conflict, "Conflicts, by treatment:", "No conflict was found by the rules that are computed.")
	part(decide.ToCheck, "To check, by treatment:", "Nothing that is computed is left to check.")
	if used != nil {
		p.f("The rules, where each is from, and what would change it:\n")
	}
	for _, r := range used {
		hang(p, "  "+r.Key+": ", r.Says+" ["+r.Source+"]. Would change it: "+r.Change+".")
	}
}

func treatmentsOf(p *scenarios.Plan) (out []string) {
	for _, t := range p.Treatments {
		out = append(out, t.Name)
	}
	return out
}

// findingItems prints a treatment's findings, a rule an item with its seedlings.
func findingItems(p *printer, treatment string, list []decide.Finding, u scenarios.Units, used *[]*decide.Rule) {
	named := false
	for i := range list {
		x := &list[i]
		if x.Treatment != treatment || slices.ContainsFunc(list[:i], func(y decide.Finding) bool { return y.Treatment == treatment && ruleName(&y) == ruleName(x) }) {
			continue
		}
		if !named {
			named = true
			if treatment == "" {
				p.f("  Whole plan\n")
			} else {
				p.f("  %s\n", treatment)
			}
		}
		if !slices.Contains(*used, x.Rule) {
			*used = append(*used, x.Rule)
		}
		item(p, "    "+ruleName(x)+": ", seedlingTexts(list[i:], x, u))
	}
}

// seedlingTexts are the findings of one rule in one treatment; seedlings with the same figures stand together.
func seedlingTexts(list []decide.Finding, first *decide.Finding, u scenarios.Units) string {
	var texts []string
	var names [][]string
	for i := range list {
		x := &list[i]
		if x.Treatment != first.Treatment || ruleName(x) != ruleName(first) {
			continue
		}
		text := foundText(x, u)
		at := slices.Index(texts, text)
		if at < 0 {
			at = len(texts)
			texts, names = append(texts, text), append(names, nil)
		}
		if x.Seedling != "" {
			names[at] = append(names[at], x.Seedling+where(outcome{stations: x.Stations}))
		}
	}
	for i := range texts {
		if names[i] != nil {
			texts[i] = strings.Join(names[i], ", ") + ": " + texts[i]
		}
	}
	return strings.Join(texts, "; ")
}

// item prints text under a lead, its later lines two steps in from it.
func item(p *printer, lead, text string) {
	const indent = "      "
	for i, l := range wrap(text, Width-runes(lead), Width-len(indent)) {
		if i == 0 {
			p.f("%s%s\n", lead, l)
		} else {
			p.f("%s%s\n", indent, l)
		}
	}
}

// limitTable sets every limit against every treatment it is about; treatments with the same finding stand together.
func limitTable(o Output, f *decide.Findings) error {
	p := &printer{w: o.Out}
	if len(f.Limits) == 0 {
		hang(p, "", "Your limits: the plan gives none that these treatments touch (key limits: opening area, total share, residual, adjacency, buffers, dates without felling).")
		return p.err
	}
	p.f("Your limits:\n")
	var rows []table.Row
	last := ""
	for i := range f.Limits {
		x := &f.Limits[i]
		if slices.ContainsFunc(f.Limits[:i], func(y decide.Finding) bool { return sameLimit(x, &y) }) {
			continue
		}
		names := alike(f.Limits, x)
		name := ruleName(x)
		if name == last {
			name = ""
		}
		last = ruleName(x)
		found, limit := against(x, o.Units)
		if x.Detail != "" {
			found = strings.TrimSpace(found + " " + x.Detail)
		}
		rows = append(rows, limitLines(name, limit, strings.Join(names, ", "), found, x.State.String())...)
	}
	t := newTable("your limit", "allowed", "treatment", "found", "state")
	for _, r := range rows {
		t.AppendRow(r)
	}
	if p.err == nil {
		p.err = render(o.Out, t)
	}
	return p.err
}

// alike are the treatments with the same finding on a limit, or the word for all that it is about.
func alike(list []decide.Finding, x *decide.Finding) (names []string) {
	all := true
	for i := range list {
		switch y := &list[i]; {
		case sameLimit(x, y):
			names = append(names, y.Treatment)
		case ruleName(x) == ruleName(y):
			all = false
		}
	}
	if all && len(names) > 1 {
		return []string{"all it touches"}
	}
	return names
}

func sameLimit(a, b *decide.Finding) bool {
	return a.Rule == b.Rule && a.Name == b.Name && a.State == b.State && a.Detail == b.Detail && (a.Found == b.Found || a.Found.Kind == decide.None && b.Found.Kind == decide.None)
}

// Widths of the limit table's columns, and 11 for what is allowed and 8 for the state with two spaces between them make 79.
const limitNameWidth, limitTreatmentWidth, limitFoundWidth = 16, 19, 17

// limitLines wraps a row.
func limitLines(name, limit, treatment, found, state string) (out []table.Row) {
	cells := [3][]string{wrap(name, limitNameWidth, limitNameWidth), wrap(treatment, limitTreatmentWidth, limitTreatmentWidth), wrap(found, limitFoundWidth, limitFoundWidth)}
	for i := 0; i < max(len(cells[0]), len(cells[1]), len(cells[2])); i++ {
		at := func(k int) string {
			if i < len(cells[k]) {
				return cells[k][i]
			}
			return ""
		}
		row := table.Row{at(0), "", at(1), at(2), ""}
		if i == 0 {
			row[1], row[4] = limit, state
		}
		out = append(out, row)
	}
	return out
}

// cautionList prints every caution with its state, what the plan says of it and the rules that speak in it.
func cautionList(p *printer, plan *scenarios.Plan, f *decide.Findings) {
	p.f("Cautions, none of which can be switched off:\n")
	for _, c := range plan.Cautions {
		text := c.Text
		var said []string
		for _, s := range []string{c.By, c.Note} {
			if s != "" {
				said = append(said, s)
			}
		}
		if said != nil {
			text += " [the plan: " + strings.Join(said, ": ") + "]"
		}
		if speak := speaking(c.Key, f); speak != "" {
			text += " [conflict above: " + speak + "]"
		}
		hang(p, "  "+c.State+"  "+c.Key+": ", text)
	}
}

// speaking lists the rules of a caution that found a conflict.
func speaking(caution string, f *decide.Findings) string {
	var out []string
	for i := range f.Conflicts {
		x := &f.Conflicts[i]
		if x.Rule.Caution == caution && x.State == decide.Conflict && !slices.Contains(out, ruleName(x)) {
			out = append(out, ruleName(x))
		}
	}
	return strings.Join(out, ", ")
}
