// Package figures draws curves with their bands, readings and marks as SVG or PNG, one panel or many on the same axes. It knows neither leaves
// nor plans: points, names and axis titles are given. The same figure always gives the same bytes.
package figures

import (
	"errors"
	"fmt"
	"io"
	"math"
	"slices"

	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"
	"gonum.org/v1/plot/vg/vgimg"
	"gonum.org/v1/plot/vg/vgsvg"
)

// Kind of file.
type Kind int

// The kinds.
const (
	SVG Kind = iota
	PNG
)

// Point in the units of the axes.
type Point struct{ X, Y float64 }

// Curve is a line, with a band between Low and High and with readings where they are given. A name has one look in all panels and stands in
// the key; curves without names look by their place in the panel.
type Curve struct {
	Name      string
	Line      []Point
	Low, High []Point
	Readings  []Point
}

// Mark is an upright line at X, named above the axes: a compensation point, say.
type Mark struct {
	X    float64
	Name string
}

// Panel is one set of axes.
type Panel struct {
	Title  string
	Curves []Curve
	Marks  []Mark
}

// Figure is a set of panels on the same axes. X and Y are their titles with units. Columns is how many panels stand beside each other; with 0
// the figure chooses.
type Figure struct {
	X, Y    string
	Panels  []Panel
	Columns int
}

const (
	wide, high   = 16 * vg.Centimeter, 10 * vg.Centimeter // a single panel
	small, short = 6 * vg.Centimeter, 4.5 * vg.Centimeter // one of many
	across       = 4                                      // panels beside each other unless told; two more where they are many
	mostAcross   = 10
	dpi          = 200
	largest      = 1e9 // a number on the axes
	// MostPanels is as many as one figure holds.
	MostPanels = 60
)

// Write draws a figure: 16 x 10 cm with one panel, more with many; PNG has 200 dots an inch. It refuses a figure without panels or with over
// MostPanels, a panel with nothing to draw, and a number that is not finite.
func Write(w io.Writer, f Figure, kind Kind) error {
	if err := f.check(); err != nil {
		return err
	}
	if err := face(); err != nil {
		return fmt.Errorf("the font of figures cannot be read: %w", err)
	}
	f = f.legible()
	s := newSheet(&f)
	return output(w, vg.Point{X: s.width, Y: s.height}, kind, s.paint)
}

// output draws a page of a size as SVG or PNG.
func output(w io.Writer, size vg.Point, kind Kind, paint func(draw.Canvas) error) error {
	if kind == PNG {
		c := vgimg.NewWith(vgimg.UseWH(size.X, size.Y), vgimg.UseDPI(dpi))
		if err := paint(draw.New(c)); err != nil {
			return err
		}
		_, err := vgimg.PngCanvas{Canvas: c}.WriteTo(w)
		return err
	}
	c := vgsvg.NewWith(vgsvg.UseWH(size.X, size.Y), vgsvg.EmbedFonts(true))
	if err := paint(draw.New(c)); err != nil {
		return err
	}
	_, err := c.WriteTo(w)
	return err
}

func (f *Figure) check() error {
	switch {
	case len(f.Panels) == 0:
		return errors.New("a figure without panels")
	case len(f.Panels) > MostPanels:
		return fmt.Errorf("%d panels; a figure holds %d", len(f.Panels), MostPanels)
	case f.Columns < 0 || f.Columns > mostAcross:
		return fmt.Errorf("%d columns; a figure has 1 to %d, or 0 to choose", f.Columns, mostAcross)
	}
	for i := range f.Panels {
		if err := f.Panels[i].check(); err != nil {
			return err
		}
	}
	if n := len(f.names()); n > len(style) {
		return fmt.Errorf("%d names of curves; a figure tells %d apart", n, len(style))
	}
	return nil
}

func (p *Panel) check() error {
	if len(p.Curves) == 0 || len(p.Curves) > len(style) {
		return fmt.Errorf("panel %q has %d curves; it must have 1 to %d", p.Title, len(p.Curves), len(style))
	}
	seen, points := map[string]bool{}, 0
	for _, c := range p.Curves {
		if c.Name != "" && seen[c.Name] {
			return fmt.Errorf("panel %q has two curves named %q", p.Title, c.Name)
		}
		seen[c.Name] = true
		if len(c.Low) != len(c.High) {
			return fmt.Errorf("%s: a band with %d points below and %d above", c.Name, len(c.Low), len(c.High))
		}
		for _, list := range c.lists() {
			points += len(list)
			if slices.ContainsFunc(list, func(q Point) bool { return !drawable(q.X) || !drawable(q.Y) }) {
				return fmt.Errorf("%s: a point that is not a number", c.Name)
			}
		}
	}
	for _, m := range p.Marks {
		if !drawable(m.X) {
			return fmt.Errorf("mark %q: a place that is not a number", m.Name)
		}
	}
	if points == 0 {
		return fmt.Errorf("panel %q has no points", p.Title)
	}
	return nil
}

// drawable is false for NaN too.
func drawable(v float64) bool { return math.Abs(v) <= largest }

func (c *Curve) lists() [][]Point { return [][]Point{c.Line, c.Readings, c.Low, c.High} }

// names of curves, each once, in their order.
func (f *Figure) names() (out []string) {
	for _, p := range f.Panels {
		for _, c := range p.Curves {
			if c.Name != "" && !slices.Contains(out, c.Name) {
				out = append(out, c.Name)
			}
		}
	}
	return out
}

// legible is the figure with every text in letters of the font.
func (f *Figure) legible() Figure {
	out := Figure{X: legible(f.X), Y: legible(f.Y), Columns: f.Columns}
	for _, p := range f.Panels {
		q := Panel{Title: legible(p.Title)}
		for _, c := range p.Curves {
			c.Name = legible(c.Name)
			q.Curves = append(q.Curves, c)
		}
		for _, m := range p.Marks {
			q.Marks = append(q.Marks, Mark{m.X, legible(m.Name)})
		}
		out.Panels = append(out.Panels, q)
	}
	return out
}
