package report

import (
	"slices"
	"strings"

	"shadeledger/scenarios"
	"shadeledger/scenarios/decide"
)

// marks are the conflicts of a run as the first screen shows them: words or a sign in the row, a sign in the seedling's cell, and one
// line or two that name them.
type marks struct {
	rules     []string            // in the order found
	at        map[string][]string // treatments by rule
	rows      map[string][]string // rules by treatment
	seedlings map[[2]string]bool  // by treatment and seedling
}

// sign of a conflict.
const sign = "!"

func marksOf(r *scenarios.Results) *marks {
	m := &marks{at: map[string][]string{}, rows: map[string][]string{}, seedlings: map[[2]string]bool{}}
	for _, x := range decide.FindConflicts(r).Conflicts {
		if x.State != decide.Conflict {
			continue
		}
		rule := ruleName(&x)
		if !slices.Contains(m.rules, rule) {
			m.rules = append(m.rules, rule)
		}
		if !slices.Contains(m.at[rule], x.Treatment) {
			m.at[rule] = append(m.at[rule], x.Treatment)
			m.rows[x.Treatment] = append(m.rows[x.Treatment], rule)
		}
		if x.Seedling != "" {
			m.seedlings[[2]string{x.Treatment, x.Seedling}] = true
		}
	}
	return m
}

// words are a treatment's conflicts in a row that has room for them.
func (m *marks) words(treatment string) string {
	if list := m.rows[treatment]; list != nil {
		return sign + " " + strings.Join(list, ", ")
	}
	return ""
}

// light puts the row's sign beside the light, or under it where the light takes the column.
func (m *marks) light(treatment, text string, how layout) [2]string {
	const narrow = 3
	switch {
	case m.rows[treatment] == nil || how == oneLineRows:
		return [2]string{text}
	case how == oneLineMarks || runes(text) <= narrow:
		return [2]string{text + " " + sign}
	}
	return [2]string{text, sign}
}

// cell puts the sign behind a seedling's stations.
func (m *marks) cell(treatment, seedling, at string) string {
	if m.seedlings[[2]string{treatment, seedling}] {
		return at + " " + sign
	}
	return at
}

// legend names the conflicts with their treatments.
func (m *marks) legend(p *scenarios.Plan) []string {
	var parts []string
	last := ""
	for _, rule := range m.rules {
		group := groupOf(p, m.at[rule])
		if group == last {
			parts[len(parts)-1] = strings.Replace(parts[len(parts)-1], ": ", ", "+rule+": ", 1)
			continue
		}
		last = group
		parts = append(parts, rule+": "+group)
	}
	return wrap(sign+" "+strings.Join(parts, "; ")+". In words: shadeledger cautions.", Width, Width)
}

// brief is the legend where there is no room for names.
func (m *marks) brief() []string {
	return []string{clip(sign+" conflicts: shadeledger cautions says which", Width)}
}

// groupOf is the word for a set of treatments where there is one, else their names.
func groupOf(p *scenarios.Plan, names []string) string {
	if len(names) == len(p.Treatments) && len(names) > 1 {
		return "all treatments"
	}
	var openings, cut []string
	for i := range p.Treatments {
		t := &p.Treatments[i]
		c := scenarios.CutOf(p, t)
		if c.Opening > 0 {
			openings = append(openings, t.Name)
		}
		if c != (scenarios.Cut{}) {
			cut = append(cut, t.Name)
		}
	}
	holds := func(all []string) bool {
		return len(all) > 1 && !slices.ContainsFunc(all, func(n string) bool { return !slices.Contains(names, n) })
	}
	var out []string
	rest := func(all []string) {
		for _, n := range names {
			if !slices.Contains(all, n) {
				out = append(out, n)
			}
		}
	}
	switch {
	case holds(cut):
		rest(cut)
		out = append(out, "all cuts")
	case holds(openings):
		rest(openings)
		out = append(out, "all openings")
	default:
		out = names
	}
	return strings.Join(out, ", ")
}
