package report

import (
	"fmt"
	"math"
	"strings"

	"github.com/jedib0t/go-pretty/v6/table"

	"shadeledger/scenarios"
	"shadeledger/scenarios/decide"
	"shadeledger/scenarios/ledger"
	"shadeledger/scenarios/report/figures"
)

// spanColumns are a range's low, middle and high.
func spanColumns(name string, of func(*decide.SpreadRow) decide.Range) []column[decide.SpreadRow] {
	at := func(k int) func(*decide.SpreadRow) float64 {
		return func(r *decide.SpreadRow) float64 { return of(r)[k] }
	}
	return []column[decide.SpreadRow]{figure(name+"_low", at(0)), figure(name+"_median", at(1)), figure(name+"_high", at(2))}
}

func chanceOf(c ledger.Class) func(*decide.SpreadRow) float64 {
	return func(r *decide.SpreadRow) float64 { return 100 * r.Chance[c] }
}

// spreadColumns are the fields of `spread`: 5th, 50th and 95th percentile of every figure and the chance of every class.
func spreadColumns() (out []column[decide.SpreadRow]) {
	out = append(out,
		words("treatment", func(r *decide.SpreadRow) string { return r.Treatment }),
		words("station", func(r *decide.SpreadRow) string { return r.Station }),
		words("species", func(r *decide.SpreadRow) string { return r.Species }),
		words("class", func(r *decide.SpreadRow) string { return r.Class.String() }),
		figure("below_pct", chanceOf(ledger.Below)), figure("marginal_pct", chanceOf(ledger.Marginal)), figure("comfortable_pct", chanceOf(ledger.Comfortable)))
	out = append(out, spanColumns("light_pct", func(r *decide.SpreadRow) decide.Range { return r.Light })...)
	out = append(out, spanColumns("light_leaf_on_pct", func(r *decide.SpreadRow) decide.Range { return r.LeafOn })...)
	out = append(out, spanColumns("net_gC", func(r *decide.SpreadRow) decide.Range { return r.Net })...)
	out = append(out, spanColumns("income_cost_ratio", func(r *decide.SpreadRow) decide.Range { return r.Ratio })...)
	out = append(out, spanColumns("break_even_leaf_on_pct", func(r *decide.SpreadRow) decide.Range { return r.BreakEven })...)
	return append(out, spanColumns("threshold_leaf_on_pct", func(r *decide.SpreadRow) decide.Range { return r.Threshold })...)
}

// Spread writes the ranges, what drives them, what would flip the decision and what to measure next.
func Spread(o Output, plan *scenarios.Plan, s *decide.Spreads) error {
	n := notes{plan: plan, assumed: plan.Assumed, warnings: append(append([]scenarios.Warning(nil), plan.Warnings...), spreadWarnings(s)...)}
	switch o.Format {
	case SVG, PNG:
		return tornado(o, s)
	case Table:
	default:
		return data(o, n, spreadColumns(), s.Rows)
	}
	p := &printer{w: o.Out}
	p.f("%s\n%s\n", Name(plan), seasonLine(plan))
	hang(p, "", drawsLine(s)+" Ranges run from the 5th to the 95th percentile.")
	for i := range s.Choices {
		choice(p, o, &s.Choices[i])
	}
	shares(p, o, s)
	p.f("\n")
	hang(p, "", "light: over the season, where it is most above the threshold. comf.: share of draws in which a station inside is comfortable. like: treatments, by number, under which nine draws in ten do not agree where this seedling earns more: cannot separate. Margin: leaf-on light less threshold; | is where they meet.")
	p.f("\n")
	if p.err != nil {
		return p.err
	}
	return n.write(o.Out)
}

// drawsLine says how many draws stand behind the ranges.
func drawsLine(s *decide.Spreads) string {
	line := fmt.Sprintf("draws %d of %d, seed %d: %d inputs not known for sure, and a generated year each.", s.Done, s.Query.Count, s.Query.Seed, len(s.Inputs))
	if s.Query.After > 0 {
		line = fmt.Sprintf("Year %g after the cut, new stock of the plan's size; ", s.Query.After) + line
	}
	if s.Done < s.Query.Count {
		line = "INTERRUPTED. " + line
	}
	if len(s.Rows) == 0 {
		line += " Too few for a range."
	}
	return line
}

// spreadWarnings travel with the rows.
func spreadWarnings(s *decide.Spreads) (out []scenarios.Warning) {
	if s.Done < s.Query.Count {
		out = append(out, scenarios.Warning{Key: "draws", Text: fmt.Sprintf("interrupted: draws %d of %d", s.Done, s.Query.Count)})
	}
	if len(s.Weather) > 0 {
		out = append(out, scenarios.Warning{Key: "weather.year", Text: "generated years: " + strings.Join(s.Weather, "; ")})
	}
	return out
}

// choice prints one seedling.
func choice(p *printer, o Output, c *decide.Choice) {
	p.f("\n%s\n", c.Species)
	t := newTable("treatment", "station", "light %", "net g C a year", "comf. %", "like")
	for i := range c.Options {
		x := &c.Options[i]
		t.AppendRow(table.Row{itoa(i+1) + " " + clip(x.Treatment, 13), x.Station, span(x.Light, 0), span(x.Net, 1), whole(100 * x.Chance), letterList(c, x)})
	}
	if p.err == nil {
		p.err = render(o.Out, t, 5)
	}
	hang(p, "  ", verdict(c))
	hang(p, "  ", flipLine(c, o)+" "+measureLine(c))
	if len(c.Drivers) == 0 {
		return
	}
	hang(p, "  ", fmt.Sprintf("What moves the margin, %s points, and its share (rank regression explains %.0f %%):", span(c.Margin, 0), 100*c.Fit))
	for _, d := range c.Drivers[:min(len(c.Drivers), 6)] {
		p.f("  %s\n", driverLine(d, c))
	}
}

// shares prints the Sobol indices by group.
func shares(p *printer, o Output, s *decide.Spreads) {
	if len(s.Shares) == 0 {
		return
	}
	p.f("\n")
	hang(p, "", fmt.Sprintf("Shares of the margin's variance by groups of inputs, %d runs (Sobol indices, Saltelli's and Jansen's estimators), percent with standard error:", s.ShareRuns))
	t := newTable("seedling", "group", "alone", "with others")
	for _, x := range s.Shares {
		text := func(v, e float64) string { return fmt.Sprintf("%.0f +- %.0f", 100*v, 100*e) }
		t.AppendRow(table.Row{x.Species, x.Group.String(), text(x.First.Value, x.First.Error), text(x.Total.Value, x.Total.Error)})
	}
	if p.err == nil {
		p.err = render(o.Out, t, 3, 4)
	}
}

// letterList names the options like one by their place in the table.
func letterList(c *decide.Choice, x *decide.Option) string {
	var out []string
	for _, name := range x.Like {
		for i := range c.Options {
			if c.Options[i].Treatment == name {
				out = append(out, itoa(i+1))
			}
		}
	}
	return strings.Join(out, " ")
}

// verdict is the decision with its chance.
func verdict(c *decide.Choice) string {
	x := &c.Options[c.Decides]
	if c.Lightest < 0 {
		return fmt.Sprintf("Nothing works by the best values; nearest is %s (%s), comfortable in %s of the draws.", x.Treatment, x.Station, percent(x.Chance))
	}
	s := fmt.Sprintf("Lightest cut that works: %s (%s), comfortable in %s of the draws.", x.Treatment, x.Station, percent(x.Chance))
	if len(x.Like) > 0 {
		s += " Cannot separate its carbon from that under " + strings.Join(x.Like, ", ") + "."
	}
	return s
}

// flipLine names the one input whose doubt changes the decision.
func flipLine(c *decide.Choice, o Output) string {
	if !c.Flip.Found {
		return "No single input within its range flips this."
	}
	way := "below"
	if c.Flip.Above {
		way = "above"
	}
	f := c.Flip.Input
	text := "Flips if: " + f.Label + " " + way + " " + inputText(f, c.Flip.Value, o)
	if f.Seedling < 0 && f.Doubt.Best != 0 {
		text += " (taken as " + inputText(f, f.Doubt.Best, o) + ")"
	}
	return text + "."
}

// inputText is a value of an input with its unit, lengths in the units of tables.
func inputText(in decide.Input, x float64, o Output) string {
	switch in.Unit {
	case "m":
		return length(x, o.Units)
	case "1":
		return sig(x, 2)
	}
	return sig(x, 2) + " " + in.Unit
}

func measureLine(c *decide.Choice) string {
	if len(c.Measures) == 0 {
		return "No single measurement narrows it much."
	}
	m := c.Measures[0]
	return fmt.Sprintf("Measure next: %s (range %s to %s points).", m.Work, whole(m.From), whole(m.To))
}

// driverLine is a bar of the tornado: the margin from the input's 5th to its 95th percentile on the margin's own scale.
func driverLine(d decide.Driver, c *decide.Choice) string {
	share := fmt.Sprintf("%3.0f %%", 100*d.Share)
	return pad(clip(d.Input.Label, 38), 38) + " " + share + " " + bar(d, c)
}

// barWidth is the width of a tornado's bars in the terminal.
const barWidth = 30

// bar draws a driver between the 5th and the 95th percentile of all draws; | is where light meets the threshold.
func bar(d decide.Driver, c *decide.Choice) string {
	if math.IsNaN(d.Low) {
		return ""
	}
	low, high := math.Min(c.Margin[0], 0), math.Max(c.Margin[2], 0)
	place := func(x float64) int {
		return max(0, min(barWidth-1, int(math.Round((x-low)/(high-low)*(barWidth-1)))))
	}
	out := []rune(strings.Repeat(".", barWidth))
	a, b := place(math.Min(d.Low, d.High)), place(math.Max(d.Low, d.High))
	for i := a; i <= b; i++ {
		out[i] = '='
	}
	out[place(0)] = '|'
	return string(out)
}

// span is a range with its middle: 12 (8 to 15).
func span(r decide.Range, places int) string {
	if math.IsNaN(r[1]) {
		return "-"
	}
	text := func(v float64) string { return strings.Replace(decimal(v, places), "-0.0", "0.0", 1) }
	return text(r[1]) + " (" + text(r[0]) + " to " + text(r[2]) + ")"
}

func percent(share float64) string { return whole(100*share) + " %" }

// mostBars of a seedling in a figure.
const mostBars = 8

// tornado draws what moves the margin of every seedling, one input at a time.
func tornado(o Output, s *decide.Spreads) error {
	f := figures.Bars{X: "margin: leaf-on light less threshold, points of full light", Key: "one input at a time, the others at best: open bars at its 5th percentile, full bars at its 95th", MarkName: "threshold"}
	for i := range s.Choices {
		c := &s.Choices[i]
		panel := figures.BarPanel{Title: c.Species + ", " + c.Options[c.Decides].Treatment, Middle: c.Best}
		for _, d := range c.Drivers {
			if !math.IsNaN(d.Low) && len(panel.Bars) < mostBars {
				panel.Bars = append(panel.Bars, figures.Bar{Name: d.Input.Label, Low: d.Low, End: d.High})
			}
		}
		if len(panel.Bars) > 0 {
			f.Panels = append(f.Panels, panel)
		}
	}
	if len(f.Panels) == 0 {
		return fmt.Errorf("%s no drivers to draw", drawsLine(s))
	}
	return figures.WriteBars(o.Out, f, o.kind())
}
