package figures

import (
	"image/color"
	"slices"

	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"
)

// place of a mark's name above the axes; left and right are where it stands, row 0 is the lowest. Lengths are points from the axes' left end.
type place struct {
	mark           Mark
	x, left, right vg.Length
	row            int
}

// places puts the names of marks beside their lines, to the right where they fit and else to the left. A name that would meet another, or the
// line of one beyond it, stands a row above.
func (s *sheet) places(marks []Mark) []place {
	t := letters(s.size-1, draw.XLeft, draw.YBottom)
	var right, left []place
	for _, m := range byX(marks) {
		m.Name = shortened(t, s.box.X, m.Name)
		q := place{mark: m, x: s.box.X * vg.Length((m.X-s.low.X)/(s.high.X-s.low.X))}
		w := length(t, m.Name)
		if q.left, q.right = q.x, q.x+w; q.right <= s.box.X+s.gap/2 {
			right = append(right, q)
			continue
		}
		q.left = max(0, q.x-w)
		q.right = q.left + w
		left = append(left, q)
	}
	slices.Reverse(left)
	var out []place
	for _, q := range append(left, right...) {
		for _, o := range out {
			if q.right+breath > o.left && q.left < o.right+breath {
				q.row = max(q.row, o.row+1)
			}
		}
		out = append(out, q)
	}
	return out
}

// markRows is how many rows of names the marks need.
func (s *sheet) markRows(marks []Mark) (rows int) {
	for _, q := range s.places(marks) {
		rows = max(rows, q.row+1)
	}
	return rows
}

// markLines draws the lines of marks from the axis up to their names.
func (s *sheet) markLines(c draw.Canvas, marks []Mark) {
	pen := draw.LineStyle{Color: markLine, Width: 0.7, Dashes: []vg.Length{1.2, 1.8}}
	for _, q := range s.places(marks) {
		c.StrokeLine2(pen, c.Min.X+q.x, c.Min.Y, c.Min.X+q.x, s.markBase(c, q.row))
	}
}

// markNames writes the names on white.
func (s *sheet) markNames(c draw.Canvas, marks []Mark) {
	for _, q := range s.places(marks) {
		low := vg.Point{X: c.Min.X + q.left, Y: s.markBase(c, q.row)}
		high := vg.Point{X: c.Min.X + q.right, Y: low.Y + line*(s.size-1)}
		c.FillPolygon(color.White, []vg.Point{low, {X: high.X, Y: low.Y}, high, {X: low.X, Y: high.Y}})
		c.FillText(letters(s.size-1, draw.XLeft, draw.YBottom), vg.Point{X: low.X, Y: low.Y + 1}, q.mark.Name)
	}
}

// markBase is the foot of a row of names.
func (s *sheet) markBase(c draw.Canvas, row int) vg.Length {
	return c.Max.Y + breath/2 + vg.Length(row)*line*(s.size-1)
}

// byX are marks from the right to the left.
func byX(marks []Mark) []Mark {
	return slices.SortedStableFunc(slices.Values(marks), func(a, b Mark) int {
		switch {
		case a.X > b.X:
			return -1
		case a.X < b.X:
			return 1
		}
		return 0
	})
}
