package figures

import (
	"fmt"
	"testing"

	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"
	"gonum.org/v1/plot/vg/recorder"
)

// word is a text with the page that its letters take, points.
type word struct {
	text string
	at   vg.Rectangle
}

// words are all texts of a figure as they are drawn.
func words(t *testing.T, f Figure) ([]word, *sheet) {
	t.Helper()
	f = f.legible()
	s := newSheet(&f)
	var c recorder.Canvas
	if err := s.paint(draw.NewCanvas(&c, s.width, s.height)); err != nil {
		t.Fatal(err)
	}
	var out []word
	turned := false
	for _, a := range c.Actions {
		switch a := a.(type) {
		case *recorder.Rotate:
			turned = true
		case *recorder.Pop:
			turned = false
		case *recorder.FillString:
			size := a.Size
			style := letters(size, draw.XLeft, draw.YBottom)
			low, high := a.Point, vg.Point{X: a.Point.X + style.Width(a.String), Y: a.Point.Y + 0.75*size}
			low.Y -= 0.2 * size
			if turned { // a quarter to the left: x is -y of the page before it
				low, high = vg.Point{X: -high.Y, Y: low.X}, vg.Point{X: -low.Y, Y: high.X}
			}
			out = append(out, word{a.String, vg.Rectangle{Min: low, Max: high}})
		}
	}
	return out, s
}

// No text is cut by the page, stands on another, or stands on the axes of a panel.
func TestTextsAreFree(t *testing.T) {
	all := examples()
	for n := 1; n <= MostPanels; n += 7 {
		for _, columns := range []int{0, 1, 3, 7, 10} {
			f := Figure{X: lightAxis, Y: netAxis, Panels: leaves(n), Columns: columns}
			f.Panels[n/2] = both("Abies lasiocarpa var. arizonica, corkbark fir, second plant, first leaf below", 12)
			all[fmt.Sprintf("%d panels, %d columns", n, columns)] = f
		}
	}
	for name, f := range all {
		list, s := words(t, f)
		if len(list) < 6 {
			t.Errorf("%s: only %d texts", name, len(list))
		}
		for i, a := range list {
			if a.at.Min.X < 1 || a.at.Min.Y < 1 || a.at.Max.X > s.width-1 || a.at.Max.Y > s.height-1 {
				t.Errorf("%s: %q is cut: %v on %v x %v", name, a.text, a.at, s.width, s.height)
			}
			for _, b := range list[:i] {
				if meet(a.at, b.at) {
					t.Errorf("%s: %q stands on %q", name, a.text, b.text)
				}
			}
			for k := range f.Panels {
				if box := s.axes(draw.Canvas{}, k).Rectangle; meet(a.at, box) {
					t.Errorf("%s: %q stands on panel %d", name, a.text, k)
				}
			}
		}
	}
}

func meet(a, b vg.Rectangle) bool {
	return a.Min.X < b.Max.X && b.Min.X < a.Max.X && a.Min.Y < b.Max.Y && b.Min.Y < a.Max.Y
}

// A long text loses its middle and keeps its end, which tells leaves apart.
func TestShortened(t *testing.T) {
	if err := face(); err != nil {
		t.Fatal(err)
	}
	style := letters(8, draw.XLeft, draw.YBottom)
	const text = "Pseudotsuga menziesii var. glauca, plant 12, leaf 7"
	if got := shortened(style, length(style, text), text); got != text {
		t.Errorf("%q", got)
	}
	got := shortened(style, 100, text)
	if length(style, got) > 100 || got != "Pseudotsuga…t 12, leaf 7" {
		t.Errorf("%q takes %v", got, length(style, got))
	}
}
