package figures

import (
	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"
)

// sampleWidth is the piece of line in the key, points.
const sampleWidth = 32.0

// spare is room for the wider letters of viewers that do not take the font of an SVG.
const spare = 1.1

// entry of the key: a name with a piece of its line, of its band and a reading.
type entry struct {
	name               string
	look               look
	line, band, points bool
	width              vg.Length // with the space behind it
}

// entries are the named curves in rows that fit the width.
func (s *sheet) entries() (rows [][]entry) {
	t := letters(s.size, draw.XLeft, draw.YCenter)
	room := s.width - 2*edge
	used := room
	for _, name := range s.f.names() {
		e := entry{name: shortened(t, room-sampleWidth-breath, name), look: style[s.looks[name]]}
		for _, p := range s.f.Panels {
			for _, c := range p.Curves {
				if c.Name == name {
					e.line, e.band, e.points = e.line || len(c.Line) > 0, e.band || len(c.Low) > 0, e.points || len(c.Readings) > 0
				}
			}
		}
		e.width = sampleWidth + breath + spare*length(t, e.name) + 4*breath
		if used += e.width; used-4*breath > room {
			rows, used = append(rows, nil), e.width
		}
		rows[len(rows)-1] = append(rows[len(rows)-1], e)
	}
	return rows
}

// drawKey writes the key above the panels, its rows in the middle of the page.
func (s *sheet) drawKey(c draw.Canvas) {
	for i, row := range s.key {
		total := -vg.Length(4 * breath)
		for _, e := range row {
			total += e.width
		}
		at := vg.Point{X: (s.width - total) / 2, Y: s.height - edge - s.headline - line*s.size*(vg.Length(i)+0.5)}
		for _, e := range row {
			s.drawEntry(c, at, e)
			at.X += e.width
		}
	}
}

func (s *sheet) drawEntry(c draw.Canvas, at vg.Point, e entry) {
	end := at.X + sampleWidth
	if tall := 0.4 * s.size; e.band {
		c.FillPolygon(e.look.band(), []vg.Point{{X: at.X, Y: at.Y - tall}, {X: end, Y: at.Y - tall}, {X: end, Y: at.Y + tall}, {X: at.X, Y: at.Y + tall}})
	}
	if e.line {
		c.StrokeLine2(e.look.stroke(1.6*s.scale()), at.X, at.Y, end, at.Y)
	}
	if e.points {
		e.look.dot(c, vg.Point{X: (at.X + end) / 2, Y: at.Y}, 2.3*s.scale())
	}
	c.FillText(letters(s.size, draw.XLeft, draw.YCenter), vg.Point{X: end + breath, Y: at.Y + lift*s.size}, e.name)
}
