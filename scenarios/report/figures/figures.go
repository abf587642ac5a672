// Package figures draws curves with their bands and readings as SVG or PNG, one panel or many on the same axes. It knows neither leaves nor
// plans: points, names and axis titles are given. The same figure always gives the same bytes.
package figures

import (
	"errors"
	"fmt"
	"image/color"
	"io"
	"math"
	"sync"

	"golang.org/x/image/font/gofont/goregular"
	"golang.org/x/image/font/opentype"
	"gonum.org/v1/plot"
	"gonum.org/v1/plot/font"
	"gonum.org/v1/plot/plotter"
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

// Curve is a line, with a band between Low and High and with readings where they are given.
type Curve struct {
	Name      string
	Line      []Point
	Low, High []Point
	Readings  []Point
}

// Panel is one set of axes.
type Panel struct {
	Title  string
	Curves []Curve
}

// Figure is a set of panels on the same axes. X and Y are their titles with units.
type Figure struct {
	X, Y   string
	Panels []Panel
}

const (
	wide, high   = 16 * vg.Centimeter, 10 * vg.Centimeter // a single panel
	small, short = 6 * vg.Centimeter, 4.5 * vg.Centimeter // one of many
	across       = 4                                      // panels beside each other
	dpi          = 200
	// MostPanels is as many as one figure holds.
	MostPanels = 24
)

// style of curves in their order: colours that all eyes tell apart (Okabe & Ito 2008), with dashes that hold in grey.
var style = []struct {
	line, band color.NRGBA
	dashes     []vg.Length
}{
	{color.NRGBA{0, 114, 178, 255}, color.NRGBA{204, 225, 240, 255}, nil},
	{color.NRGBA{213, 94, 0, 255}, color.NRGBA{250, 225, 206, 255}, []vg.Length{vg.Points(7), vg.Points(3)}},
	{color.NRGBA{0, 0, 0, 255}, color.NRGBA{222, 222, 222, 255}, []vg.Length{vg.Points(2), vg.Points(2)}},
	{color.NRGBA{0, 158, 115, 255}, color.NRGBA{205, 236, 227, 255}, []vg.Length{vg.Points(8), vg.Points(3), vg.Points(2), vg.Points(3)}},
}

// face readies the font once: the usual one of the library drops glyphs that units need.
var face = sync.OnceValue(func() error {
	parsed, err := opentype.Parse(goregular.TTF)
	if err != nil {
		return err
	}
	f := font.Font{Typeface: "Go"}
	font.DefaultCache.Add([]font.Face{{Font: f, Face: parsed}})
	plot.DefaultFont, plotter.DefaultFont = f, f
	return nil
})

// Write draws a figure. It refuses one without panels or curves, with over MostPanels, or with a number that is not finite.
func Write(w io.Writer, f Figure, kind Kind) error {
	if err := f.check(); err != nil {
		return err
	}
	if err := face(); err != nil {
		return fmt.Errorf("the font of figures cannot be read: %w", err)
	}
	width, height, columns, rows := wide, high, 1, 1
	if n := len(f.Panels); n > 1 {
		columns = min(across, n)
		rows = (n + columns - 1) / columns
		width, height = small*vg.Length(columns), short*vg.Length(rows)
		if n == 2 {
			width, height = wide*1.25, high
		}
	}
	paint := func(c vg.CanvasSizer) error { return f.paint(draw.New(c), columns, rows) }
	if kind == PNG {
		c := vgimg.NewWith(vgimg.UseWH(width, height), vgimg.UseDPI(dpi))
		if err := paint(c); err != nil {
			return err
		}
		_, err := vgimg.PngCanvas{Canvas: c}.WriteTo(w)
		return err
	}
	c := vgsvg.NewWith(vgsvg.UseWH(width, height), vgsvg.EmbedFonts(true))
	if err := paint(c); err != nil {
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
	}
	for _, p := range f.Panels {
		if len(p.Curves) == 0 || len(p.Curves) > len(style) {
			return fmt.Errorf("panel %q has %d curves; it must have 1 to %d", p.Title, len(p.Curves), len(style))
		}
		for _, c := range p.Curves {
			if len(c.Low) != len(c.High) {
				return fmt.Errorf("%s: a band with %d points below and %d above", c.Name, len(c.Low), len(c.High))
			}
			for _, list := range [][]Point{c.Line, c.Low, c.High, c.Readings} {
				for _, q := range list {
					if math.IsNaN(q.X+q.Y) || math.IsInf(q.X+q.Y, 0) {
						return fmt.Errorf("%s: a point that is not a number", c.Name)
					}
				}
			}
		}
	}
	return nil
}

// paint lays the panels out and draws each.
func (f *Figure) paint(c draw.Canvas, columns, rows int) error {
	gap := vg.Points(6)
	tiles := draw.Tiles{Rows: rows, Cols: columns, PadX: gap, PadY: gap, PadTop: gap, PadBottom: gap, PadLeft: gap, PadRight: vg.Points(12)}
	if len(f.Panels) > 1 {
		tiles.PadLeft, tiles.PadBottom = titleRoom, titleRoom
		f.titles(c)
	}
	box := f.extent()
	plots := make([][]*plot.Plot, rows)
	for r := range plots {
		plots[r] = make([]*plot.Plot, columns)
	}
	for i, panel := range f.Panels {
		p := plot.New()
		f.dress(p, panel, box)
		if err := fill(p, panel.Curves, len(panel.Curves) > 1 && i == 0); err != nil {
			return err
		}
		plots[i/columns][i%columns] = p
	}
	for r, row := range plot.Align(plots, tiles, c) {
		for k, canvas := range row {
			if p := plots[r][k]; p != nil {
				p.Draw(canvas)
			}
		}
	}
	return nil
}

// extent is the axes' range over all panels; 0 is always on them.
func (f *Figure) extent() (box [4]float64) {
	for _, p := range f.Panels {
		for _, c := range p.Curves {
			for _, list := range [][]Point{c.Line, c.Low, c.High, c.Readings} {
				for _, q := range list {
					box[0], box[1] = math.Min(box[0], q.X), math.Max(box[1], q.X)
					box[2], box[3] = math.Min(box[2], q.Y), math.Max(box[3], q.Y)
				}
			}
		}
	}
	return box
}

// titleRoom is what the axis titles of many panels take.
const titleRoom = 20

// titles writes the axis titles of many panels once, beside and below them all.
func (f *Figure) titles(c draw.Canvas) {
	text := draw.TextStyle{Color: color.Black, Font: font.From(plot.DefaultFont, 9), Handler: plot.DefaultTextHandler, XAlign: draw.XCenter, YAlign: draw.YBottom}
	c.FillText(text, vg.Point{X: c.Center().X, Y: c.Min.Y + 4}, f.X)
	text.Rotation, text.YAlign = math.Pi/2, draw.YTop
	c.FillText(text, vg.Point{X: c.Min.X + 3, Y: c.Center().Y}, f.Y)
}

// dress sets titles, ranges and the line of zero.
func (f *Figure) dress(p *plot.Plot, panel Panel, box [4]float64) {
	many := len(f.Panels) > 1
	text := vg.Points(10)
	if len(f.Panels) > 2 {
		text = vg.Points(7)
	}
	p.Title.Text = panel.Title
	p.Title.TextStyle.Font.Size = text + 1
	p.Title.Padding = vg.Points(3)
	if !many {
		p.X.Label.Text, p.Y.Label.Text = f.X, f.Y
	}
	room := 0.04 * (box[3] - box[2])
	p.X.Min, p.X.Max, p.Y.Min, p.Y.Max = box[0], box[1], box[2]-room, box[3]+room
	if n := len(f.Panels[0].Curves); n > 1 { // room for the names below the curves
		p.Y.Min -= room * float64(2*n-1)
	}
	p.X.Padding, p.Y.Padding = 0, 0
	for _, a := range []*plot.Axis{&p.X, &p.Y} {
		a.Label.TextStyle.Font.Size = text
		a.Tick.Label.Font.Size = text - 1
		a.Tick.Marker = plot.TickerFunc(ticks)
	}
	p.Legend.TextStyle.Font.Size = text
	p.Legend.Padding = vg.Points(3)
	p.Legend.ThumbnailWidth = vg.Points(30)
	p.Legend.XOffs, p.Legend.YOffs = -vg.Points(8), vg.Points(8)
	zero := plotter.NewFunction(func(float64) float64 { return 0 })
	zero.Color, zero.Width = color.Gray{150}, vg.Points(0.6)
	p.Add(zero)
}

// ticks are at most seven round numbers.
func ticks(low, high float64) []plot.Tick {
	step := math.Pow(10, math.Floor(math.Log10((high-low)/3)))
	for _, m := range []float64{1, 2, 5, 10} {
		if (high-low)/(m*step) <= 6 {
			step *= m
			break
		}
	}
	var out []plot.Tick
	for k := math.Ceil(low / step); k*step <= high*(1+1e-12); k++ {
		label := fmt.Sprintf("%g", math.Round(math.Abs(k)*step*1e6)/1e6)
		if k < 0 {
			label = "−" + label
		}
		out = append(out, plot.Tick{Value: k * step, Label: label})
	}
	return out
}

func xys(list []Point) plotter.XYs {
	out := make(plotter.XYs, len(list))
	for i, q := range list {
		out[i] = plotter.XY{X: q.X, Y: q.Y}
	}
	return out
}

// fill draws bands, then lines over all of them, then readings.
func fill(p *plot.Plot, curves []Curve, named bool) error {
	for k, c := range curves {
		if len(c.Low) == 0 {
			continue
		}
		ring := xys(c.High)
		for i := len(c.Low) - 1; i >= 0; i-- {
			ring = append(ring, plotter.XY{X: c.Low[i].X, Y: c.Low[i].Y})
		}
		band, err := plotter.NewPolygon(ring)
		if err != nil {
			return err
		}
		band.Color = style[k].band
		band.LineStyle = draw.LineStyle{Color: style[k].line, Width: vg.Points(0.4)} // where bands overlap
		p.Add(band)
	}
	for k, c := range curves {
		line, err := plotter.NewLine(xys(c.Line))
		if err != nil {
			return err
		}
		line.Color, line.Width, line.Dashes = style[k].line, vg.Points(1.6), style[k].dashes
		p.Add(line)
		if named {
			p.Legend.Add(c.Name, line)
		}
		if len(c.Readings) == 0 {
			continue
		}
		dots, err := plotter.NewScatter(xys(c.Readings))
		if err != nil {
			return err
		}
		dots.GlyphStyle = draw.GlyphStyle{Color: color.Black, Radius: vg.Points(1.8), Shape: draw.RingGlyph{}}
		p.Add(dots)
	}
	return nil
}
