package report

import (
	"encoding/json"
	"io"
	"strings"

	"shadeledger/scenarios"
)

// deference stands under every list of cautions.
const deference = "Local rules and a licensed forester go before anything printed here."

type jsonAssumed struct {
	Key    string `json:"key"`
	Value  string `json:"value"`
	Source string `json:"source"`
}

type jsonWarning struct {
	Key  string `json:"key"`
	Text string `json:"text"`
}

type jsonCaution struct {
	Key   string `json:"key"`
	State string `json:"state"`
	Text  string `json:"text"`
	By    string `json:"by,omitempty"`
	Note  string `json:"note,omitempty"`
}

// document is JSON output, its fields in this order.
type document struct {
	Plan     string          `json:"plan"`
	Rows     json.RawMessage `json:"rows"`
	Assumed  []jsonAssumed   `json:"assumed"`
	Warnings []jsonWarning   `json:"warnings"`
	Cautions []jsonCaution   `json:"cautions"`
	Neutral  []jsonNeutral   `json:"neutral_shade,omitempty"`
	Conflict json.RawMessage `json:"conflicts,omitempty"`
	Notice   string          `json:"notice"`
}

// jsonNeutral is a break-even in neutral shade; null where there is none.
type jsonNeutral struct {
	Species   string   `json:"species"`
	BreakEven *float64 `json:"break_even_pct"`
}

// writeJSON writes rows with the notes.
func (n notes) writeJSON(w io.Writer, rows json.RawMessage) error {
	d := document{Plan: Name(n.plan), Rows: rows, Notice: deference,
		Assumed: []jsonAssumed{}, Warnings: []jsonWarning{}, Cautions: []jsonCaution{}, Conflict: n.conflicts}
	for _, a := range n.assumed {
		d.Assumed = append(d.Assumed, jsonAssumed(a))
	}
	for _, x := range n.warnings {
		d.Warnings = append(d.Warnings, jsonWarning(x))
	}
	for _, c := range n.plan.Cautions {
		d.Cautions = append(d.Cautions, jsonCaution{c.Key, c.State, c.Text, c.By, c.Note})
	}
	for _, x := range n.neutral {
		row := jsonNeutral{Species: x.Seedling}
		if x.BreakEven.Found {
			row.BreakEven = &x.BreakEven.Season
		}
		d.Neutral = append(d.Neutral, row)
	}
	e := json.NewEncoder(w)
	e.SetEscapeHTML(false)
	e.SetIndent("", " ")
	return e.Encode(d)
}

// write prints warnings, what was assumed and the cautions.
func (n notes) write(w io.Writer) error {
	p := &printer{w: w}
	n.doubts(p)
	n.cautions(p)
	return p.err
}

// doubts prints warnings and what was assumed.
func (n notes) doubts(p *printer) {
	for _, l := range n.named {
		p.f("%s\n", l)
	}
	for i, x := range n.warnings {
		hang(p, "Note "+itoa(i+1)+": ", x.Key+": "+x.Text)
	}
	if len(n.neutral) > 0 {
		var items []string
		for _, x := range n.neutral {
			at := "none at any light"
			if x.BreakEven.Found {
				at = decimal(x.BreakEven.Season, 1) + " %"
			}
			items = append(items, x.Seedling+" "+at)
		}
		hang(p, "Break-even if sun and sky were dimmed alike all year: ", strings.Join(items, ", "))
	}
	if len(n.assumed) > 0 {
		p.f("Assumed, because the plan does not say (%d values; sources: shadeledger check):\n", len(n.assumed))
		var items []string
		for _, a := range n.assumed {
			items = append(items, a.Key+" "+a.Value)
		}
		hang(p, "  ", strings.Join(items, "; "))
	}
}

// cautions prints the state of every caution and the words of those not closed. Nothing switches it off.
func (n notes) cautions(p *printer) {
	if len(n.plan.Cautions) > 0 {
		p.f("Cautions:\n")
	}
	var closed []string
	for _, c := range n.plan.Cautions {
		if c.State == "addressed" || c.State == "not applicable" {
			closed = append(closed, c.Key+" ("+c.State+")")
			continue
		}
		hang(p, "  "+c.State+"  "+c.Key+": ", c.Text)
	}
	if len(closed) > 0 {
		hang(p, "  closed by the plan: ", strings.Join(closed, "; "))
	}
	hang(p, "", deference)
}

// hang prints text wrapped to the screen's width, its later lines indented.
func hang(p *printer, lead, text string) {
	indent := strings.Repeat(" ", min(len(lead), 4))
	for i, l := range wrap(text, Width-len(lead), Width-len(indent)) {
		if i == 0 {
			p.f("%s%s\n", lead, l)
		} else {
			p.f("%s%s\n", indent, l)
		}
	}
}

// wrap breaks text at spaces into lines of at most the given widths; longer words are kept whole.
func wrap(text string, first, rest int) []string {
	var lines []string
	line, width := "", first
	for _, word := range strings.Fields(text) {
		switch {
		case line == "":
			line = word
		case runes(line)+1+runes(word) <= width:
			line += " " + word
		default:
			lines = append(lines, line)
			line, width = word, rest
		}
	}
	return append(lines, line)
}

// open counts the cautions that the plan leaves open or to check.
func open(p *scenarios.Plan) int {
	n := 0
	for _, c := range p.Cautions {
		if c.State != "addressed" && c.State != "not applicable" {
			n++
		}
	}
	return n
}
