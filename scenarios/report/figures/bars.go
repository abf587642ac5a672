package figures

import (
	"errors"
	"fmt"
	"image/color"
	"io"
	"math"

	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"
)

// Bar lies between two values and has a name on its left.
type Bar struct {
	Name     string
	Low, End float64 // where it begins and ends, in any order: from Low to the middle it is open, from there to End full
}

// BarPanel is a column of bars, the longest first by custom, about a middle: what they are with nothing changed.
type BarPanel struct {
	Title  string
	Middle float64
	Bars   []Bar
}

// Bars is a set of panels below each other on one axis, with an upright line at Mark.
type Bars struct {
	X, Key   string // title of the axis with its unit; what open and full bars are
	Mark     float64
	MarkName string
	Panels   []BarPanel
}

const (
	barHigh   = 9.0 // points
	barApart  = 4.0
	barNames  = 0.36 // of the width for names
	barLetter = 8.0
)

// WriteBars draws bars 16 cm wide, as high as they are many.
func WriteBars(w io.Writer, b Bars, kind Kind) error {
	if err := b.check(); err != nil {
		return err
	}
	if err := face(); err != nil {
		return fmt.Errorf("the font of figures cannot be read: %w", err)
	}
	return output(w, vg.Point{X: wide, Y: b.height()}, kind, b.paint)
}

func (b *Bars) check() error {
	if len(b.Panels) == 0 {
		return errors.New("a figure of bars without panels")
	}
	for _, p := range b.Panels {
		if len(p.Bars) == 0 {
			return fmt.Errorf("%s: no bars", p.Title)
		}
		for _, x := range p.Bars {
			if !drawable(x.Low) || !drawable(x.End) {
				return fmt.Errorf("%s, %s: %g to %g cannot be drawn", p.Title, x.Name, x.Low, x.End)
			}
		}
	}
	return nil
}

// panelHigh is the height of a panel: its title and its bars.
func (p *BarPanel) panelHigh() vg.Length {
	return line*(barLetter+1) + breath + vg.Length(len(p.Bars))*(barHigh+barApart) + apart
}

func (b *Bars) height() vg.Length {
	sum := vg.Length(2*edge + 4*line*barLetter + 2*breath)
	for i := range b.Panels {
		sum += b.Panels[i].panelHigh()
	}
	return sum
}

// ends of the axis: all bars, middles and the mark.
func (b *Bars) ends() (low, high float64) {
	low, high = b.Mark, b.Mark
	for _, p := range b.Panels {
		low, high = math.Min(low, p.Middle), math.Max(high, p.Middle)
		for _, x := range p.Bars {
			low, high = math.Min(low, math.Min(x.Low, x.End)), math.Max(high, math.Max(x.Low, x.End))
		}
	}
	if low == high {
		return low - 1, high + 1
	}
	pad := 0.03 * (high - low)
	return low - pad, high + pad
}

func (b *Bars) paint(c draw.Canvas) error {
	c.SetColor(color.White)
	c.Fill(c.Rectangle.Path())
	low, high := b.ends()
	left, right := c.Min.X+barNames*wide, c.Max.X-edge-2*barLetter
	x := func(v float64) vg.Length { return left + vg.Length((v-low)/(high-low))*(right-left) }
	y := c.Max.Y - edge - line*barLetter - breath
	bottom := c.Min.Y + edge + 3*line*barLetter + breath
	c.StrokeLine2(draw.LineStyle{Color: markLine, Width: 1, Dashes: []vg.Length{4, 2}}, x(b.Mark), bottom, x(b.Mark), y)
	write(c, letters(barLetter, draw.XCenter, draw.YBottom), vg.Point{X: x(b.Mark), Y: y + breath/2}, right-left, b.MarkName)
	for i := range b.Panels {
		b.panel(c, &b.Panels[i], y, x)
		y -= b.Panels[i].panelHigh()
	}
	c.StrokeLine2(draw.LineStyle{Color: color.Black, Width: 0.6}, left, bottom, right, bottom)
	for _, t := range ticks(low, high) {
		if t.Label == "" || t.Value < low || t.Value > high {
			continue
		}
		c.StrokeLine2(draw.LineStyle{Color: color.Black, Width: 0.6}, x(t.Value), bottom, x(t.Value), bottom-tick)
		write(c, letters(barLetter-1, draw.XCenter, draw.YTop), vg.Point{X: x(t.Value), Y: bottom - tick - 1}, right-left, t.Label)
	}
	write(c, letters(barLetter, draw.XCenter, draw.YBottom), vg.Point{X: (c.Min.X + c.Max.X) / 2, Y: c.Min.Y + edge + line*barLetter}, wide-2*edge, b.X)
	write(c, letters(barLetter, draw.XCenter, draw.YBottom), vg.Point{X: (c.Min.X + c.Max.X) / 2, Y: c.Min.Y + edge}, wide-2*edge, b.Key)
	return nil
}

// panel draws one column of bars from y down.
func (b *Bars) panel(c draw.Canvas, p *BarPanel, y vg.Length, x func(float64) vg.Length) {
	write(c, letters(barLetter+1, draw.XLeft, draw.YTop), vg.Point{X: c.Min.X + edge, Y: y}, wide-2*edge, p.Title)
	y -= line*(barLetter+1) + breath
	top := y
	for _, bar := range p.Bars {
		write(c, letters(barLetter, draw.XRight, draw.YCenter), vg.Point{X: c.Min.X + barNames*wide - breath, Y: y - barHigh/2}, barNames*wide-2*edge, bar.Name)
		bars(c, x(bar.Low), x(p.Middle), y, color.White)
		bars(c, x(p.Middle), x(bar.End), y, style[0].color)
		y -= barHigh + barApart
	}
	c.StrokeLine2(draw.LineStyle{Color: color.Black, Width: 0.8}, x(p.Middle), top+1, x(p.Middle), y+barApart-1)
}

// bars draws a box between two places.
func bars(c draw.Canvas, a, b, top vg.Length, fill color.Color) {
	box := vg.Rectangle{Min: vg.Point{X: min(a, b), Y: top - barHigh}, Max: vg.Point{X: max(a, b), Y: top}}
	c.SetColor(fill)
	c.Fill(box.Path())
	c.SetColor(style[0].color)
	c.SetLineWidth(0.7)
	c.SetLineDash(nil, 0)
	c.Stroke(box.Path())
}
