package report

import (
	"strings"

	"shadeledger/scenarios"
	"shadeledger/scenarios/ledger"
)

// FirstScreen writes the answer of a run in at most Height lines of Width columns: the decision, then a row a
// treatment and a column a seedling. Doubts, where there are any, put years, chances, the flip and what to measure on it.
func FirstScreen(o Output, r *scenarios.Results, d *Doubts) error {
	b := gather(r)
	b.doubts = d
	var lines []string
	lines = append(lines, heading(r.Plan)...)
	lines = append(lines, wrap(readAs(r, o.Units), Width, Width)...)
	lines = append(lines, wrap(b.decision(), Width, Width)...)
	last := footer(r, d)
	lines = append(lines, b.grid(o.Units, Height-len(lines)-len(last))...)
	lines = append(lines, last...)
	p := &printer{w: o.Out}
	for _, l := range lines {
		p.f("%s\n", strings.TrimRight(l, " "))
	}
	if d.told() {
		p.f("\n")
		b.sentences(p, o.Units)
	}
	return p.err
}

// heading names the stand and the season, on one line where they fit.
func heading(p *scenarios.Plan) []string {
	name, season := Name(p), "season "+dateText(p.Season.From)+" - "+dateText(p.Season.To)
	if gap := Width - runes(name) - runes(season); gap >= 2 {
		return []string{name + strings.Repeat(" ", gap) + season}
	}
	return append(wrap(name, Width, Width), season)
}

// readAs says what the stand was taken for.
func readAs(r *scenarios.Results, u scenarios.Units) string {
	p := r.Plan
	s := "Read as: "
	if p.Stand.Cruised() {
		sums, leading := p.Stand.Trees.Sums(), p.Stand.Trees.Leading()
		s += basalArea(sums.BasalArea, u)
		if p.Stand.Trees.Measured() {
			s += ", " + density(sums.PerHa, u) + ", QMD " + diameter(sums.QMD(), u) + ", H:D " + text0(p.Stand.Trees.Slenderness(), 0)
		} else {
			s += " without diameters, height " + length(p.Stand.Height, u)
		}
		s += " (" + lastWord(leading.Species.Common) + ")"
	} else {
		s += "height " + length(p.Stand.Height, u)
	}
	s += ", leaf area " + text0(scenarios.LeafArea(p.Stand.Layers), 1) + leafSource(r)
	if n := len(p.Stand.Understory); n > 0 {
		var names []string
		for _, x := range p.Stand.Understory {
			names = append(names, x.Name)
		}
		s += ", under it " + strings.Join(names, ", ")
	}
	return s
}

// lastWord is the kind in a common name: oak of northern red oak.
func lastWord(name string) string { return name[strings.LastIndex(name, " ")+1:] }

// leafSource says in a word where the leaf area comes from.
func leafSource(r *scenarios.Results) string {
	switch {
	case r.Correction.Source != "":
		return " (readings)"
	case r.Plan.Stand.Foliage.LeafStated:
		return " (stated)"
	case r.Plan.Stand.Cruised() && !r.Plan.Stand.Trees.Measured():
		return " (basal area)"
	case r.Plan.Stand.Cruised():
		return " (dbh)"
	}
	for _, a := range r.Plan.Assumed {
		if a.Key == "stand.lai" {
			return " (assumed)"
		}
	}
	return ""
}

// footer points to the notes below the screen, to what was assumed and to the cautions.
func footer(r *scenarios.Results, d *Doubts) []string {
	s := itoa(open(r.Plan)) + " cautions open, " + itoa(len(r.Assumed)) + " values assumed: shadeledger check. "
	if d == nil {
		s += "Range: --range."
	} else {
		s += itoa(d.Spreads.Done) + " draws."
	}
	switch n := len(r.Warnings); {
	case n == 1:
		s = "1 note, " + s
	case n > 1:
		s = itoa(n) + " notes, " + s
	}
	return append(d.flips(), wrap(s, Width, Width)...)
}

// cell is the words of an outcome.
func (o outcome) cell() (class, at string) {
	if o.class == ledger.Below {
		return o.class.String(), ""
	}
	return o.class.String(), letters(o)
}

// row is a treatment on the screen: each field a first and a second line.
type row [][2]string

// grid lays the table out in at most the given lines: one line a treatment where cells with their stations fit, else
// a second line for the stations.
func (b *board) grid(u scenarios.Units, most int) []string {
	p := b.results.Plan
	shown := len(p.Seedlings)
	for {
		for _, how := range []layout{oneLineRows, oneLineMarks, twoLineRows} {
			lines, ok := b.lay(u, how, shown)
			if ok {
				return b.fitNamed(lines, most, len(p.Seedlings)-shown, how)
			}
		}
		if shown == 1 {
			lines, _ := b.lay(u, twoLineRows, shown)
			return b.fitNamed(lines, most, len(p.Seedlings)-shown, twoLineRows)
		}
		shown--
	}
}

// layout is how a row is set.
type layout int

// In the first conflicts stand in words at the end of a row; in the others as signs, with names below the table.
const (
	oneLineRows layout = iota
	oneLineMarks
	twoLineRows
)

// leastName is the narrowest column of treatment names.
const leastName = 9

// lay sets header and rows; each element is one treatment's lines. ok is false where they are too wide.
func (b *board) lay(u scenarios.Units, how layout, seedlings int) (blocks [][]string, ok bool) {
	rows := []row{b.header(how, seedlings)}
	for t := range b.cells {
		rows = append(rows, b.row(u, how, t, seedlings))
	}
	width := make([]int, len(rows[0]))
	for _, r := range rows {
		for i, f := range r {
			width[i] = max(width[i], runes(f[0]), runes(f[1]))
		}
	}
	rest := 0
	for _, w := range width[1:] {
		rest += 1 + w
	}
	roomy := Width - rest
	if how != twoLineRows && width[0] > roomy || roomy < leastName {
		return nil, false
	}
	if spare := roomy - width[0] - (len(width) - 1); spare > 0 { // room for a second space between columns
		for i := 1; i < len(width)-1; i++ {
			width[i]++
		}
	}
	width[0] = min(width[0], roomy)
	for _, r := range rows {
		if line, ok := r.hung(width); ok && how == twoLineRows {
			blocks = append(blocks, []string{line})
			continue
		}
		name := wrap(r[0][0], width[0], width[0])
		block := []string{}
		for l := 0; l < 2 || l < len(name); l++ {
			s := ""
			if l < len(name) {
				s = clip(name[l], width[0])
			}
			s = pad(s, width[0])
			for k, f := range r[1:] {
				text := ""
				if l < 2 {
					text = f[l]
				}
				s += " " + pad(text, width[k+1])
			}
			if l == 0 || strings.TrimSpace(s) != "" {
				block = append(block, s)
			}
		}
		blocks = append(blocks, block)
	}
	return blocks, true
}

// hung sets a row of one line whose name is a little too long: the name runs on into the room left beside the cut.
func (r row) hung(width []int) (string, bool) {
	for _, f := range r {
		if f[1] != "" {
			return "", false
		}
	}
	name, cut := r[0][0], r[1][0]
	end := width[0] + 1 + width[1]
	if runes(name) <= width[0] || runes(name)+1+runes(cut) > end {
		return "", false
	}
	s := pad(name, end-runes(cut)) + cut
	for k, f := range r[2:] {
		s += " " + pad(f[0], width[k+2])
	}
	return s, true
}

// fitNamed is fit with the conflicts named below, in one line where their names would cost a treatment its place.
func (b *board) fitNamed(blocks [][]string, most, hidden int, how layout) []string {
	if how == oneLineRows || len(b.marks.rules) == 0 {
		return b.fit(blocks, most, hidden)
	}
	total := 0
	for _, x := range blocks {
		total += len(x)
	}
	named := b.marks.legend(b.results.Plan)
	if total+len(named) > most {
		named = b.marks.brief()
	}
	return append(b.fit(blocks, most-len(named), hidden), named...)
}

// fit joins blocks into lines, leaving out the last treatments where there is no room, and says so.
func (b *board) fit(blocks [][]string, most, hidden int) []string {
	total := 0
	for _, x := range blocks {
		total += len(x)
	}
	left := 0
	for total+min(1, left+hidden) > most && len(blocks) > 2 {
		total -= len(blocks[len(blocks)-1])
		blocks = blocks[:len(blocks)-1]
		left++
	}
	var out []string
	for _, x := range blocks {
		out = append(out, x...)
	}
	if left+hidden > 0 {
		out = append(out, "Not shown for want of room: "+itoa(left)+" treatments, "+itoa(hidden)+" seedlings: --stations")
	}
	return out
}

func (b *board) header(how layout, seedlings int) row {
	h := row{{"treatment"}, {"cut"}, {"light"}}
	widest := 14
	if seedlings > 4 {
		widest = len("comfortable") // five columns of it fill the screen
	}
	for _, s := range b.results.Plan.Seedlings[:seedlings] {
		name := wrap(s.Name, 11, 11)
		f := [2]string{clip(name[0], widest)}
		if len(name) > 1 {
			f[1] = clip(strings.Join(name[1:], " "), widest)
		}
		h = append(h, f)
	}
	if how == oneLineRows {
		h = append(h, [2]string{})
	}
	return h
}

func (b *board) row(u scenarios.Units, how layout, t, seedlings int) row {
	p := b.results.Plan
	r := row{{p.Treatments[t].Name}, cutText(scenarios.CutOf(p, &p.Treatments[t]), u, how), b.marks.light(p.Treatments[t].Name, lightText(b.low[t], b.up[t]), how)}
	for s := range seedlings {
		class, at := b.cells[t][s].cell()
		if years := b.doubts.years(t, s); years != "" && at != "" {
			at = years
		}
		switch {
		case at == "":
			r = append(r, [2]string{class})
		case how == oneLineRows:
			r = append(r, [2]string{class + ": " + at})
		case how == oneLineMarks:
			r = append(r, [2]string{class + ": " + b.marks.cell(p.Treatments[t].Name, p.Seedlings[s].Name, at)})
		default:
			r = append(r, [2]string{class, b.marks.cell(p.Treatments[t].Name, p.Seedlings[s].Name, at)})
		}
	}
	if how == oneLineRows {
		r = append(r, [2]string{b.marks.words(p.Treatments[t].Name)})
	}
	return r
}

// cutText is what a treatment takes: percent of leaf area between openings, the opening's legal area.
func cutText(c scenarios.Cut, u scenarios.Units, how layout) [2]string {
	matrix := whole(100*c.Matrix) + "%"
	if c.Matrix == 0 {
		matrix = "0"
	}
	if c.Opening == 0 {
		return [2]string{matrix}
	}
	opening := area(c.Opening, u)
	switch {
	case c.Matrix > 0 && how != twoLineRows:
		return [2]string{matrix + " + " + opening}
	case c.Matrix > 0:
		return [2]string{matrix, strings.ReplaceAll(opening, " ", "")}
	case how != twoLineRows:
		return [2]string{opening}
	}
	number, unit, _ := strings.Cut(opening, " ")
	return [2]string{number, unit}
}

func lightText(low, up float64) string {
	if whole(low) == whole(up) {
		return whole(up)
	}
	return whole(low) + "-" + whole(up)
}

func pad(s string, width int) string {
	return s + strings.Repeat(" ", max(0, width-runes(s)))
}

func clip(s string, width int) string {
	if r := []rune(s); len(r) > width {
		return string(r[:width-1]) + "."
	}
	return s
}
