// Package report turns results into text: tables, CSV and JSON, on writers it is given. It knows no
// files and no physics.
package report

import (
	"encoding/json"
	"fmt"
	"io"
	"strings"

	"shadeledger/scenarios"
	"shadeledger/scenarios/report/figures"
)

// Format of output.
type Format int

// The formats.
const (
	Table Format = iota
	CSV
	JSON
	SVG // figures, by the name of the file
	PNG
)

// ParseFormat reads table, csv or json.
func ParseFormat(s string) (Format, error) {
	switch s {
	case "table":
		return Table, nil
	case "csv":
		return CSV, nil
	case "json":
		return JSON, nil
	}
	return 0, fmt.Errorf("format %q is not known; it must be table, csv or json", s)
}

// kind of figure.
func (o Output) kind() figures.Kind {
	if o.Format == PNG {
		return figures.PNG
	}
	return figures.SVG
}

// Output is where text goes and in which form. Notes takes what accompanies CSV rows.
type Output struct {
	Out, Notes io.Writer
	Format     Format
	Units      scenarios.Units
}

// Width and Height of the first screen, in columns and lines of text.
const (
	Width  = 80
	Height = 24
)

// Name is the line that names the stand of a plan.
func Name(p *scenarios.Plan) string {
	title := p.Title
	if title == "" {
		title = p.File
	}
	if p.Example {
		title = strings.TrimSuffix(title, " (invented data)")
		return title + " (built-in example, invented data)"
	}
	return title
}

// notes are what was assumed, doubted and cautioned, ready to print.
type notes struct {
	plan     *scenarios.Plan
	assumed  []scenarios.Assumed
	warnings []scenarios.Warning
	neutral  []scenarios.NeutralShade
	// conflicts are rows for JSON; nil where they were not sought
	conflicts json.RawMessage
	// named are the lines that name conflicts, where no first screen does
	named []string
}

// planNotes are the notes of a plan, before it is run.
func planNotes(p *scenarios.Plan) notes {
	return notes{plan: p, assumed: p.Assumed, warnings: p.Warnings}
}

func notesOf(r *scenarios.Results) notes {
	return notes{plan: r.Plan, assumed: r.Assumed, warnings: r.Warnings, neutral: r.Neutral}
}

// printer collects the first error of a run of writes.
type printer struct {
	w   io.Writer
	err error
}

func (p *printer) f(format string, args ...any) {
	if p.err == nil {
		_, p.err = fmt.Fprintf(p.w, format, args...)
	}
}
