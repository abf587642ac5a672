package figures

import (
	"image/color"
	"math"
	"strconv"

	"gonum.org/v1/plot"
	"gonum.org/v1/plot/plotter"
	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"
)

// look of a curve.
type look struct {
	color  color.NRGBA
	dashes []vg.Length
	shape  draw.GlyphDrawer
}

// style of curves in their order: colours that all eyes tell apart (after Okabe & Ito 2008), with dashes and shapes that hold in grey.
var style = []look{
	{color.NRGBA{0, 90, 150, 255}, nil, draw.RingGlyph{}},
	{color.NRGBA{213, 94, 0, 255}, []vg.Length{7, 3}, draw.SquareGlyph{}},
	{color.NRGBA{0, 0, 0, 255}, []vg.Length{2, 2}, draw.TriangleGlyph{}},
	{color.NRGBA{0, 158, 115, 255}, []vg.Length{9, 3, 2, 3}, draw.PlusGlyph{}},
	{color.NRGBA{190, 100, 150, 255}, []vg.Length{4, 2}, draw.CrossGlyph{}},
	{color.NRGBA{70, 160, 215, 255}, []vg.Length{12, 3, 2, 3, 2, 3}, draw.PyramidGlyph{}},
}

// thin is how much of a band's colour there is: lines, bands and the line of zero show through.
const thin = 46

var zeroLine, markLine = color.Gray{85}, color.Gray{110}

func (l look) band() color.NRGBA {
	c := l.color
	c.A = thin
	return c
}

func (l look) stroke(width vg.Length) draw.LineStyle {
	return draw.LineStyle{Color: l.color, Width: width, Dashes: l.dashes}
}

// look of curve k of a panel.
func (s *sheet) look(k int, c *Curve) look {
	if c.Name != "" {
		k = s.looks[c.Name]
	}
	return style[k]
}

// scale is 1 where one or two panels fill the page and less in small panels.
func (s *sheet) scale() vg.Length { return 0.3 + 0.07*s.size }

func xys(list []Point) plotter.XYs {
	out := make(plotter.XYs, len(list))
	for i, q := range list {
		out[i] = plotter.XY{X: q.X, Y: q.Y}
	}
	return out
}

// fill draws bands, then the line of zero and of marks, then lines over all of them, then readings.
func (s *sheet) fill(c draw.Canvas, plt *plot.Plot, p *Panel) error {
	for k := range p.Curves {
		if err := s.band(c, plt, &p.Curves[k], k); err != nil {
			return err
		}
	}
	_, y := plt.Transforms(&c)
	c.StrokeLine2(draw.LineStyle{Color: zeroLine, Width: 0.6}, c.Min.X, y(0), c.Max.X, y(0))
	s.markLines(c, p.Marks)
	for k := range p.Curves {
		if err := stroke(c, plt, p.Curves[k].Line, s.look(k, &p.Curves[k]).stroke(1.6*s.scale())); err != nil {
			return err
		}
	}
	for k := range p.Curves {
		s.readings(c, plt, &p.Curves[k], k)
	}
	return nil
}

// band fills what lies between the sides and draws both thinly, so that bands over each other can be told.
func (s *sheet) band(c draw.Canvas, plt *plot.Plot, curve *Curve, k int) error {
	if len(curve.Low) == 0 {
		return nil
	}
	ring := xys(curve.High)
	for i := len(curve.Low) - 1; i >= 0; i-- {
		ring = append(ring, plotter.XY{X: curve.Low[i].X, Y: curve.Low[i].Y})
	}
	area, err := plotter.NewPolygon(ring)
	if err != nil {
		return err
	}
	l := s.look(k, curve)
	area.Color, area.LineStyle.Width = l.band(), 0
	area.Plot(c, plt)
	side := draw.LineStyle{Color: color.NRGBA{l.color.R, l.color.G, l.color.B, 150}, Width: 0.4}
	if err := stroke(c, plt, curve.Low, side); err != nil {
		return err
	}
	return stroke(c, plt, curve.High, side)
}

func stroke(c draw.Canvas, plt *plot.Plot, list []Point, with draw.LineStyle) error {
	if len(list) == 0 {
		return nil
	}
	l, err := plotter.NewLine(xys(list))
	if err != nil {
		return err
	}
	l.LineStyle = with
	l.Plot(c, plt)
	return nil
}

// readings are hollow shapes on white, so that the line behind them ends at their rims.
func (s *sheet) readings(c draw.Canvas, plt *plot.Plot, curve *Curve, k int) {
	x, y := plt.Transforms(&c)
	for _, q := range curve.Readings {
		s.look(k, curve).dot(c, vg.Point{X: x(q.X), Y: y(q.Y)}, 2.3*s.scale())
	}
}

func (l look) dot(c draw.Canvas, at vg.Point, radius vg.Length) {
	c.DrawGlyphNoClip(draw.GlyphStyle{Color: color.White, Radius: radius, Shape: draw.CircleGlyph{}}, at)
	c.DrawGlyphNoClip(draw.GlyphStyle{Color: l.color, Radius: radius, Shape: l.shape}, at)
}

// drawAxes draws both axes with their ticks; labels stand at the left and below the lowest panels only, as all have the same axes.
func (s *sheet) drawAxes(c draw.Canvas, plt *plot.Plot, leftmost, lowest bool) {
	pen := draw.LineStyle{Color: color.Black, Width: 0.6}
	c.StrokeLines(pen, []vg.Point{{X: c.Min.X, Y: c.Max.Y}, c.Min, {X: c.Max.X, Y: c.Min.Y}})
	x, y := plt.Transforms(&c)
	t := letters(s.size-1, draw.XCenter, draw.YTop)
	for _, k := range s.xs {
		c.StrokeLine2(pen, x(k.Value), c.Min.Y, x(k.Value), c.Min.Y-tick)
		if lowest {
			c.FillText(t, vg.Point{X: x(k.Value), Y: c.Min.Y - tick - breath/2}, k.Label)
		}
	}
	t.XAlign, t.YAlign = draw.XRight, draw.YCenter
	for _, k := range s.ys {
		c.StrokeLine2(pen, c.Min.X, y(k.Value), c.Min.X-tick, y(k.Value))
		if leftmost {
			c.FillText(t, vg.Point{X: c.Min.X - tick - breath/2, Y: y(k.Value) + lift*t.Font.Size}, k.Label)
		}
	}
}

// ticks are two to seven round numbers.
func ticks(low, high float64) []plot.Tick {
	step := math.Pow(10, math.Floor(math.Log10((high-low)/3)))
	for _, m := range []float64{1, 2, 5, 10} {
		if (high-low)/(m*step) <= 6 {
			step *= m
			break
		}
	}
	digits := int(math.Max(0, -math.Floor(math.Log10(step)+1e-9)))
	var out []plot.Tick
	for k := math.Ceil(low/step - 1e-9); k*step <= high+step*1e-9; k++ {
		label := strconv.FormatFloat(math.Abs(k)*step, 'f', digits, 64)
		if k < 0 {
			label = "−" + label
		}
		out = append(out, plot.Tick{Value: k * step, Label: label})
	}
	return out
}
