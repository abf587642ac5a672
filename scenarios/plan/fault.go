// Package plan turns a plan's text into a scenarios.Plan or a list of located faults, records every default it
// filled in, and writes the effective plan back. It knows no physics.
package plan

import (
	"fmt"
	"sort"
	"strings"
)

// Fault is one thing wrong with a plan or a file it names.
type Fault struct {
	File   string // as the user named it; "--set" for an override
	Line   int    // 0 for none
	Column int    // 0 for none
	Key    string // path in the plan or column in a file
	Value  string // as written
	Fix    string // what would be right
}

// Error prints the fault on one line.
func (f Fault) Error() string {
	var b strings.Builder
	b.WriteString(f.File)
	if f.Line > 0 {
		fmt.Fprintf(&b, ":%d", f.Line)
		if f.Column > 0 {
			fmt.Fprintf(&b, ":%d", f.Column)
		}
	}
	b.WriteString(": ")
	if f.Key != "" {
		b.WriteString(f.Key + ": ")
	}
	if strings.TrimSpace(f.Value) != "" {
		b.WriteString(f.Value + "; ")
	}
	b.WriteString(f.Fix)
	return b.String()
}

// sortFaults puts faults in the order of the text, each once.
func sortFaults(list []Fault) []Fault {
	sort.SliceStable(list, func(i, j int) bool {
		a, b := list[i], list[j]
		if a.File != b.File {
			return false
		}
		if a.Line != b.Line {
			return a.Line < b.Line
		}
		return a.Column < b.Column
	})
	seen := map[Fault]bool{}
	out := list[:0]
	for _, f := range list {
		if !seen[f] {
			seen[f] = true
			out = append(out, f)
		}
	}
	return out
}

// nearest lists the candidates closest to a misspelt name, best first, at most three.
func nearest(name string, candidates []string) []string {
	type scored struct {
		name string
		d    int
	}
	var near []scored
	for _, c := range candidates {
		if d := editDistance(strings.ToLower(name), strings.ToLower(c)); d <= 2+len(name)/4 {
			near = append(near, scored{c, d})
		}
	}
	sort.SliceStable(near, func(i, j int) bool { return near[i].d < near[j].d })
	var out []string
	for i := 0; i < len(near) && i < 3; i++ {
		out = append(out, near[i].name)
	}
	return out
}

// editDistance is the number of letters to change, add or drop.
func editDistance(a, b string) int {
	row := make([]int, len(b)+1)
	for j := range row {
		row[j] = j
	}
	for i := 1; i <= len(a); i++ {
		prev := row[0]
		row[0] = i
		for j := 1; j <= len(b); j++ {
			cost := 1
			if a[i-1] == b[j-1] {
				cost = 0
			}
			prev, row[j] = row[j], min(row[j]+1, row[j-1]+1, prev+cost)
		}
	}
	return row[len(b)]
}
