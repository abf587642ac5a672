package figures

import (
	"image/color"
	"math"

	"gonum.org/v1/plot"
	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"
)

// Lengths of the page, points.
const (
	edge   = 6.0 // free on all sides
	breath = 4.0 // between texts
	apart  = 9.0 // between axes and what is above the next ones
	tick   = 3.0 // marks on the axes
	line   = 1.3 // of text, in sizes of its letters
)

// sheet is a figure laid out. Lengths are points.
type sheet struct {
	f             *Figure
	columns, rows int
	width, height vg.Length
	size          vg.Length      // of the letters in panels
	looks         map[string]int // of named curves
	key           [][]entry
	low, high     Point // ends of the axes
	xs, ys        []plot.Tick
	left, bottom  vg.Length // of the first axes
	top, headline vg.Length // above all panels; of that the title of a single one
	head, names   vg.Length // above each panel; of that the names of marks
	gap           vg.Length // between panels beside each other
	box           vg.Point  // width and height of the axes
}

func newSheet(f *Figure) *sheet {
	n := len(f.Panels)
	s := &sheet{f: f, columns: f.Columns, size: 10, looks: map[string]int{}}
	if s.columns == 0 {
		s.columns = across
		if n > across*6 {
			s.columns = across + 2
		}
	}
	s.columns = min(s.columns, n)
	s.rows = (n + s.columns - 1) / s.columns
	for k, name := range f.names() {
		s.looks[name] = k
	}
	s.width, s.height = wide, high
	if n == 2 {
		s.width, s.height = wide*vg.Length(s.columns)*0.625, high*vg.Length(s.rows)
		s.width = max(s.width, wide)
	}
	if n > 2 {
		s.size = 7
		s.width = max(wide/2, small*vg.Length(s.columns))
	}
	s.key = s.entries()
	s.findEnds()
	s.xs, s.ys = ticks(s.low.X, s.high.X), ticks(s.low.Y, s.high.Y)
	s.across()
	s.heads()
	if n > 2 {
		s.height = s.top + s.bottom + vg.Length(s.rows)*short
	}
	s.box.Y = (s.height-s.top-s.bottom-apart*vg.Length(s.rows-1))/vg.Length(s.rows) - s.head
	return s
}

// titleSize is the size of the letters of titles that all panels share.
func (s *sheet) titleSize() vg.Length { return max(8, s.size) }

// across shares the width out.
func (s *sheet) across() {
	t := letters(s.size-1, draw.XCenter, draw.YTop)
	tall := 0.0
	for _, y := range s.ys {
		tall = max(tall, float64(length(t, y.Label)))
	}
	s.left = edge + line*s.titleSize() + breath + vg.Length(tall) + breath + tick
	right, first := length(t, s.xs[len(s.xs)-1].Label)/2, length(t, s.xs[0].Label)/2
	s.gap = max(10, right+first+breath)
	s.box.X = (s.width - s.left - edge - right - s.gap*vg.Length(s.columns-1)) / vg.Length(s.columns)
	s.bottom = edge + line*s.titleSize() + breath + line*(s.size-1) + tick
}

// heads finds the room above all panels and above each.
func (s *sheet) heads() {
	rows, titled := 0, false
	for _, p := range s.f.Panels {
		rows, titled = max(rows, s.markRows(p.Marks)), titled || p.Title != ""
	}
	s.top = edge
	if alone := len(s.f.Panels) == 1; titled && alone {
		s.headline, titled = line*(s.size+1)+breath, false
		s.top += s.headline
	}
	if len(s.key) > 0 {
		s.top += line*s.size*vg.Length(len(s.key)) + breath
	}
	if rows > 0 {
		s.names = line*(s.size-1)*vg.Length(rows) + breath
	}
	s.head = s.names
	if titled {
		s.head += line*(s.size+1) + breath
	}
}

// findEnds finds the ends of the axes over all panels; 0 is always on them. A band may take as much again as lines and readings, on either
// side; what is beyond is cut, so that one wide band does not flatten the rest.
func (s *sheet) findEnds() {
	var inner, outer [4]float64
	for _, p := range s.f.Panels {
		for _, c := range p.Curves {
			for k, list := range c.lists() {
				stretch(&outer, list)
				if k < 2 || len(c.Line)+len(c.Readings) == 0 {
					stretch(&inner, list)
				}
			}
		}
		for _, m := range p.Marks {
			stretch(&outer, []Point{{m.X, 0}})
		}
	}
	reach := inner[3] - inner[2]
	s.low = Point{outer[0], max(outer[2], inner[2]-reach)}
	s.high = Point{outer[1], min(outer[3], inner[3]+reach)}
	if s.high.X == s.low.X {
		s.high.X++
	}
	if s.high.Y == s.low.Y {
		s.high.Y++
	}
	x, y := 0.015*(s.high.X-s.low.X), 0.04*(s.high.Y-s.low.Y)
	s.low, s.high = Point{s.low.X - x, s.low.Y - y}, Point{s.high.X + x, s.high.Y + y}
}

func stretch(box *[4]float64, list []Point) {
	for _, q := range list {
		box[0], box[1] = math.Min(box[0], q.X), math.Max(box[1], q.X)
		box[2], box[3] = math.Min(box[2], q.Y), math.Max(box[3], q.Y)
	}
}

// axes is where panel i draws.
func (s *sheet) axes(c draw.Canvas, i int) draw.Canvas {
	x := s.left + vg.Length(i%s.columns)*(s.box.X+s.gap)
	y := s.height - s.top - s.head - s.box.Y - vg.Length(i/s.columns)*(s.box.Y+s.head+apart)
	at := vg.Point{X: x, Y: y}
	return draw.Canvas{Canvas: c.Canvas, Rectangle: vg.Rectangle{Min: at, Max: at.Add(s.box)}}
}

// paint draws all.
func (s *sheet) paint(c draw.Canvas) error {
	c.SetColor(color.White)
	c.Fill(c.Rectangle.Path())
	s.drawKey(c)
	for i := range s.f.Panels {
		if err := s.panel(s.axes(c, i), i); err != nil {
			return err
		}
	}
	if s.headline > 0 {
		s.title(c, letters(s.size+1, draw.XCenter, draw.YTop), vg.Point{X: s.left + s.box.X/2, Y: s.height - edge}, edge, s.f.Panels[0].Title)
	}
	right := s.left + vg.Length(s.columns)*(s.box.X+s.gap) - s.gap
	s.title(c, letters(s.titleSize(), draw.XCenter, draw.YBottom), vg.Point{X: (s.left + right) / 2, Y: edge}, edge, s.f.X)
	t, room := upright(s.titleSize()), s.height-edge-s.beside()
	y := between((s.bottom+s.height-s.top-s.head)/2, s.beside(), s.height-edge, min(room, length(t, s.f.Y)))
	write(c, t, vg.Point{X: edge, Y: y}, room, s.f.Y)
	return nil
}

// beside is where the page is free of an axis title along its edge.
func (s *sheet) beside() vg.Length { return edge + line*s.titleSize() + breath }

// title writes a text that may be wider than its axes; it stands at the middle it is given as far as it fits there.
func (s *sheet) title(c draw.Canvas, t draw.TextStyle, at vg.Point, least vg.Length, text string) {
	room := s.width - edge - least
	at.X = between(at.X, least, s.width-edge, min(room, length(t, text)))
	write(c, t, at, room, text)
}

// between is the middle of what is long, moved so that it stays in its bounds.
func between(middle, least, most, long vg.Length) vg.Length {
	return min(max(middle, least+long/2), most-long/2)
}

// panel draws the axes of panel i and all in them.
func (s *sheet) panel(c draw.Canvas, i int) error {
	p := &s.f.Panels[i]
	plt := plot.New()
	plt.X.Min, plt.X.Max, plt.Y.Min, plt.Y.Max = s.low.X, s.high.X, s.low.Y, s.high.Y
	if err := s.fill(c, plt, p); err != nil {
		return err
	}
	s.drawAxes(c, plt, i%s.columns == 0, i+s.columns >= len(s.f.Panels))
	s.markNames(c, p.Marks)
	t, at := letters(s.size+1, draw.XCenter, draw.YBottom), vg.Point{X: c.Center().X, Y: c.Max.Y + s.names + breath/2}
	switch {
	case s.headline > 0: // it stands above the key
	case s.columns == 1:
		s.title(c, t, at, s.beside(), p.Title)
	default:
		write(c, t, at, c.Size().X, p.Title)
	}
	return nil
}
