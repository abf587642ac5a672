package figures

import (
	"fmt"
	"os"
	"path/filepath"
	"testing"
)

// measured is a leaf with readings, a band that widens and its compensation point.
func measured(title, name string, top, below, wide float64) Panel {
	c := Curve{Name: name, Line: bent(top, below)}
	for i, q := range c.Line {
		half := wide * (0.2 + q.X/2000)
		c.Low, c.High = append(c.Low, Point{q.X, q.Y - half}), append(c.High, Point{q.X, q.Y + half})
		if i%9 == 0 {
			c.Readings = append(c.Readings, Point{q.X, q.Y + half*0.4*float64(i%4-1)})
		}
	}
	at := 200 * below / (top - below)
	return Panel{Title: title, Curves: []Curve{c}, Marks: []Mark{{at, fmt.Sprintf("compensation %.0f", at)}}}
}

const lightAxis, netAxis = "PPFD, µmol m⁻² s⁻¹", "net assimilation, µmol CO₂ m⁻² s⁻¹"

// both leaves of a species on the same axes.
func both(title string, top float64) Panel {
	p := measured(title, "grown at 5 % of full light", top*0.5, 0.4, 1)
	q := measured(title, "grown in full light", top, 1.4, 3)
	return Panel{title, append(p.Curves, q.Curves...), []Mark{{p.Marks[0].X, "shade: " + p.Marks[0].Name}, {q.Marks[0].X, "sun: " + q.Marks[0].Name}}}
}

func leaves(n int) (out []Panel) {
	for i := range n {
		out = append(out, measured(fmt.Sprintf("Pseudotsuga menziesii var. glauca, plant %d, leaf %d", i/3+1, i+1), "", 6+float64(i*7%9), 0.4+float64(i%4)*0.3, 0.8))
	}
	return out
}

// examples are figures that a picky reader looks at.
func examples() map[string]Figure {
	six := Panel{Title: "Six curves"}
	for k := range 6 {
		p := measured("", fmt.Sprintf("species number %d, as grown", k+1), 4+2.5*float64(k), 0.3+0.2*float64(k), 0.5)
		six.Curves = append(six.Curves, p.Curves...)
	}
	marks := both("Marks near both ends", 14)
	marks.Marks = append(marks.Marks, Mark{1990, "full sun at noon in June"}, Mark{1900, "light saturation"}, Mark{700, "half of full light"})
	wild := leaves(8)
	for i := range wild[3].Curves[0].High {
		wild[3].Curves[0].High[i].Y *= 40
		wild[3].Curves[0].Low[i].Y -= 300
	}
	figure := func(columns int, p ...Panel) Figure { return Figure{lightAxis, netAxis, p, columns} }
	long := figure(0, both("Quercus rubra, northern red oak", 13))
	long.X += " (bands: Amax, Rd and slope at the ends of their ranges, as far as they are known)"
	return map[string]Figure{
		"one":       figure(0, both("Quercus rubra, northern red oak", 13)),
		"plain":     figure(0, measured("", "", 9, 0.8, 1)),
		"long":      long,
		"six":       figure(0, six),
		"marks":     figure(0, marks),
		"two":       figure(0, both("Quercus rubra, northern red oak", 16), both("Acer saccharum, sugar maple", 7)),
		"two-below": figure(1, both("Quercus rubra, northern red oak", 16), both("Acer saccharum, sugar maple", 7)),
		"three":     figure(0, both("Quercus rubra", 16), both("Acer saccharum", 7), both("Tsuga canadensis", 5)),
		"seven":     figure(0, leaves(7)...),
		"wild":      figure(0, wild...),
		"column":    figure(1, leaves(3)...),
		"sixty":     figure(6, leaves(60)...),
	}
}

// FIGURES=folder go test writes the examples there.
func TestWriteExamples(t *testing.T) {
	dir := os.Getenv("FIGURES")
	if dir == "" {
		t.Skip("FIGURES names no folder")
	}
	for name, f := range examples() {
		for k, end := range map[Kind]string{SVG: ".svg", PNG: ".png"} {
			if err := os.WriteFile(filepath.Join(dir, name+end), drawn(t, f, k), 0o644); err != nil {
				t.Fatal(err)
			}
		}
	}
}
