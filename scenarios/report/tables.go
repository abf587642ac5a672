package report

import (
	"io"
	"math"
	"strings"

	"github.com/jedib0t/go-pretty/v6/table"
	"github.com/jedib0t/go-pretty/v6/text"

	"shadeledger/leaf"
	"shadeledger/scenarios"
	"shadeledger/scenarios/decide"
	"shadeledger/scenarios/ledger"
)

// Light writes the light of a run.
func Light(o Output, r *scenarios.Results) error {
	n := notesOf(r)
	if o.Format != Table {
		return data(o, n, lightColumns, r.Light)
	}
	p := &printer{w: o.Out}
	p.f("%s\n%s\n", Name(r.Plan), seasonLine(r.Plan))
	if p.err != nil {
		return p.err
	}
	t := newTable("treatment", "station", "height "+lengthUnit(o.Units), "period", "light %", "mol/m2/d", "sunfleck %", "sky %")
	for i := range r.Light {
		l := &r.Light[i]
		t.AppendRow(table.Row{l.Treatment, l.Station, sig(lengthValue(l.Height, o.Units), 2), l.Period, whole(l.Light),
			decimal(l.PAR, 1), whole(l.Sunfleck), whole(l.SkyView)})
	}
	if err := render(o.Out, t, 3, 5, 6, 7, 8); err != nil {
		return err
	}
	p.f("light: percent of full light; sunfleck: share of PAR as unscattered beam; sky: cosine-weighted sky view.\n")
	if p.err != nil {
		return p.err
	}
	return n.write(o.Out)
}

// View is how `balance` shows a run as a table.
type View int

// The views: the first screen, every station, every line of the ledger.
const (
	Screen View = iota
	Stations
	Ledger
)

// Balance writes the ledgers of a run; d is nil without ranges.
func Balance(o Output, r *scenarios.Results, v View, d *Doubts) error {
	n := notesOf(r)
	if m := marksOf(r); m.rules != nil && (o.Format != Table || v != Screen) {
		n.named = m.legend(r.Plan)
	}
	if o.Format != Table {
		var err error
		if n.conflicts, err = jsonRows(findingColumns, linesOf("conflict", decide.FindConflicts(r).Conflicts)); err != nil {
			return err
		}
		return data(o, n, d.ranged(balanceColumns), r.Balance)
	}
	var err error
	switch v {
	case Screen:
		err = FirstScreen(o, r, d)
	case Stations:
		err = stations(o, r, d)
	case Ledger:
		err = ledgerTable(o, r)
	}
	if err != nil {
		return err
	}
	p := &printer{w: o.Out}
	p.f("\n")
	if p.err != nil {
		return p.err
	}
	return n.write(o.Out)
}

// stations is the table of every station.
func stations(o Output, r *scenarios.Results, d *Doubts) error {
	p := &printer{w: o.Out}
	p.f("%s\n%s\n", Name(r.Plan), seasonLine(r.Plan))
	t := newTable("treatment", "station", "seedling", "period", "light %", "leaf-on %", "net g C", "income:cost", "break-even %", "threshold %", "class")
	for i := range r.Balance {
		b := &r.Balance[i]
		t.AppendRow(table.Row{b.Treatment, b.Station, b.Species, b.Period, whole(b.Light),
			d.between(b, whole(b.LightLeafOn), func(x *decide.SpreadRow) decide.Range { return x.LeafOn }),
			d.between(b, sig(b.Lines.Net(), 2), func(x *decide.SpreadRow) decide.Range { return x.Net }),
			decimal(b.Lines.Ratio(), 2), whole(ifFound(func(x ledger.BreakEven) float64 { return x.LeafOn })(b)),
			d.between(b, whole(ifFound(func(x ledger.BreakEven) float64 { return x.Threshold.LeafOn })(b)), func(x *decide.SpreadRow) decide.Range { return x.Threshold }),
			b.Class.String()})
	}
	if p.err == nil {
		p.err = render(o.Out, t, 5, 6, 7, 8, 9, 10)
	}
	p.f("break-even and threshold: leaf-on percent of full light; - where the year stays below zero at every light.\n")
	if d == nil {
		p.f("Ranges: --range.\n")
	} else {
		p.f("In brackets the 5th to the 95th percentile of %d draws, at stations inside and under the canopy.\n", d.Spreads.Done)
	}
	return p.err
}

// ledgerTable is the table of every line.
func ledgerTable(o Output, r *scenarios.Results) error {
	p := &printer{w: o.Out}
	p.f("%s\n%s\nEvery line of the ledger, g C per plant and period; costs positive.\n", Name(r.Plan), seasonLine(r.Plan))
	t := newTable("treatment", "station", "seedling", "period", "income", "of it sunfleck", "leaf day", "leaf night", "stem", "root",
		"leaf repl.", "root repl.", "net", "class")
	for i := range r.Balance {
		b := &r.Balance[i]
		row := table.Row{b.Treatment, b.Station, b.Species, b.Period}
		for _, v := range b.Lines {
			row = append(row, sig(v, 3))
		}
		t.AppendRow(append(row, sig(b.Lines.Net(), 3), b.Class.String()))
	}
	if p.err == nil {
		p.err = render(o.Out, t, 5, 6, 7, 8, 9, 10, 11, 12, 13)
	}
	leafRules(p, r)
	return p.err
}

// leafRules prints for each seedling the rule of its leaf traits, with what took hold at its darkest and brightest spot.
func leafRules(p *printer, r *scenarios.Results) {
	for _, s := range r.Plan.Seedlings {
		low, up := math.Inf(1), math.Inf(-1)
		for j := range r.Balance {
			if b := &r.Balance[j]; b.Species == s.Name {
				low, up = min(low, b.LightLeafOn), max(up, b.LightLeafOn)
			}
		}
		if s.Ledger == ledger.FirstSeason || low > up {
			continue
		}
		rule := s.Traits.Rule()
		at := func(L float64) string {
			held := strings.TrimPrefix(strings.TrimPrefix(leaf.Applied(s.Traits, L), rule), "; ")
			if held == "" {
				held = "between"
			}
			return whole(L) + " %: " + held
		}
		hang(p, "Leaves of "+s.Name+": ", rule+". At "+at(low)+"; at "+at(up)+".")
	}
}

// seasonLine names the season and the sky the figures stand for.
func seasonLine(p *scenarios.Plan) string {
	return "season " + dateText(p.Season.From) + " - " + dateText(p.Season.To) + "; light in percent of full light over the season"
}

func dateText(d scenarios.Date) string {
	return itoa(d.Day) + " " + d.Month.String()[:3]
}

func decimal(v float64, places int) string {
	if math.IsNaN(v) {
		return "-"
	}
	return text0(v, places)
}

// newTable starts a table with a header kept as written.
func newTable(header ...any) table.Writer {
	t := table.NewWriter()
	style := table.StyleLight
	style.Format.Header = text.FormatDefault
	style.Options = table.OptionsNoBordersAndSeparators
	style.Box.PaddingLeft, style.Box.PaddingRight = "", "  "
	t.SetStyle(style)
	t.AppendHeader(header)
	return t
}

// table writes a table as render does.
func (p *printer) table(t table.Writer, right ...int) {
	if p.err == nil {
		p.err = render(p.w, t, right...)
	}
}

// render writes a table, the numbered columns (from 1) set right.
func render(w io.Writer, t table.Writer, right ...int) error {
	var c []table.ColumnConfig
	for _, i := range right {
		c = append(c, table.ColumnConfig{Number: i, Align: text.AlignRight, AlignHeader: text.AlignRight})
	}
	t.SetColumnConfigs(c)
	p := &printer{w: w}
	for _, l := range strings.Split(t.Render(), "\n") {
		p.f("%s\n", strings.TrimRight(l, " "))
	}
	return p.err
}
