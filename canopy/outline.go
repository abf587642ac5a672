package canopy

import (
	"fmt"
	"math"
)

// A Circle is a round opening about the origin.
type Circle struct{ diameter float64 }

// An Ellipse about the origin; its long side lies along a bearing.
type Ellipse struct{ length, width, bearing float64 }

// A Strip is a rectangle about the origin; its long side lies along a bearing.
type Strip struct{ length, width, bearing float64 }

// Sizes of openings that can be meant, m.
const smallest, largest = 0.0, 1000.0

func checkSize(name string, v float64) error {
	if !(v >= smallest && v <= largest) {
		return fmt.Errorf("%s is %.4g m; it must be 0 to 1000 m", name, v)
	}
	return nil
}

// NewCircle makes a circle of a diameter in m; 0 is no opening at all.
func NewCircle(diameter float64) (Circle, error) {
	return Circle{diameter}, checkSize("diameter", diameter)
}

// NewEllipse makes an ellipse of length and width (m), the long side along bearing (rad).
func NewEllipse(length, width, bearing float64) (Ellipse, error) {
	if err := checkSides(length, width); err != nil {
		return Ellipse{}, err
	}
	return Ellipse{length, width, bearing}, nil
}

// NewStrip makes a rectangle of length and width (m), the long side along bearing (rad).
func NewStrip(length, width, bearing float64) (Strip, error) {
	if err := checkSides(length, width); err != nil {
		return Strip{}, err
	}
	return Strip{length, width, bearing}, nil
}

func checkSides(length, width float64) error {
	if err := checkSize("length", length); err != nil {
		return err
	}
	if err := checkSize("width", width); err != nil {
		return err
	}
	if width > length {
		return fmt.Errorf("width %.4g m is more than length %.4g m; the bearing is that of the long side", width, length)
	}
	return nil
}

// Diameter, m.
func (c Circle) Diameter() float64 { return c.diameter }

// Sides are length and width, m, and the bearing of the length, rad.
func (e Ellipse) Sides() (length, width, bearing float64) { return e.length, e.width, e.bearing }

// Sides are length and width, m, and the bearing of the length, rad.
func (s Strip) Sides() (length, width, bearing float64) { return s.length, s.width, s.bearing }

// Contains tells whether a spot is inside.
func (c Circle) Contains(x, y float64) bool { return 4*(x*x+y*y) < c.diameter*c.diameter }

// Area, m2.
func (c Circle) Area() float64 { return math.Pi / 4 * c.diameter * c.diameter }

// grow moves the outline outward by d.
func (c Circle) grow(d float64) (Outline, error) { return NewCircle(c.diameter + 2*d) }

func (c Circle) cross(x, y, ux, uy float64, dst []float64) []float64 {
	return crossRound(x, y, ux, uy, 0.25*c.diameter*c.diameter, dst)
}

// crossRound is where a ray leaves or enters x^2 + y^2 = r2.
func crossRound(x, y, ux, uy, r2 float64, dst []float64) []float64 {
	a := ux*ux + uy*uy
	b := x*ux + y*uy
	disc := b*b - a*(x*x+y*y-r2)
	if disc <= 0 {
		return dst
	}
	root := math.Sqrt(disc)
	if s := (-b - root) / a; s > 0 {
		dst = append(dst, s)
	}
	if s := (-b + root) / a; s > 0 {
		dst = append(dst, s)
	}
	return dst
}

// local turns a vector into along and across a bearing.
func local(x, y, bearing float64) (along, across float64) {
	s, c := math.Sincos(bearing)
	return x*s + y*c, x*c - y*s
}

// Contains tells whether a spot is inside.
func (e Ellipse) Contains(x, y float64) bool {
	u, v := local(x, y, e.bearing)
	u, v = u/(e.length/2), v/(e.width/2)
	return u*u+v*v < 1
}

// Area, m2.
func (e Ellipse) Area() float64 { return math.Pi / 4 * e.length * e.width }

// grow lengthens both axes by 2d: the parallel curve of an ellipse is not one, and differs by at most a few
// hundredths of d for the shapes that are cut.
func (e Ellipse) grow(d float64) (Outline, error) {
	return NewEllipse(e.length+2*d, e.width+2*d, e.bearing)
}

func (e Ellipse) cross(x, y, ux, uy float64, dst []float64) []float64 {
	if e.length == 0 || e.width == 0 {
		return dst
	}
	a, b := 2/e.length, 2/e.width
	u, v := local(x, y, e.bearing)
	du, dv := local(ux, uy, e.bearing)
	return crossRound(u*a, v*b, du*a, dv*b, 1, dst)
}

// Contains tells whether a spot is inside.
func (s Strip) Contains(x, y float64) bool {
	u, v := local(x, y, s.bearing)
	return math.Abs(u) < s.length/2 && math.Abs(v) < s.width/2
}

// Area, m2.
func (s Strip) Area() float64 { return s.length * s.width }

func (s Strip) grow(d float64) (Outline, error) {
	return NewStrip(s.length+2*d, s.width+2*d, s.bearing)
}

func (s Strip) cross(x, y, ux, uy float64, dst []float64) []float64 {
	u, v := local(x, y, s.bearing)
	du, dv := local(ux, uy, s.bearing)
	in, out := math.Inf(-1), math.Inf(1)
	for _, side := range [2][3]float64{{u, du, s.length / 2}, {v, dv, s.width / 2}} {
		x, d, half := side[0], side[1], side[2]
		if d == 0 {
			if math.Abs(x) >= half {
				return dst
			}
			continue
		}
		a, b := (-half-x)/d, (half-x)/d
		in, out = math.Max(in, math.Min(a, b)), math.Min(out, math.Max(a, b))
	}
	if in >= out {
		return dst
	}
	if in > 0 {
		dst = append(dst, in)
	}
	if out > 0 {
		dst = append(dst, out)
	}
	return dst
}

// Reach is how far a ray from the origin runs along an azimuth before it first leaves the outline, m.
func Reach(o Outline, azimuth float64) float64 {
	ux, uy := math.Sincos(azimuth)
	s := o.cross(0, 0, ux, uy, nil)
	if len(s) == 0 {
		return 0
	}
	return s[0]
}

// Inset is the crown outline of a stem outline: it lies r inside. Nothing left is an error.
func Inset(o Outline, r float64) (Outline, error) {
	in, err := o.grow(-r)
	if err != nil {
		return nil, fmt.Errorf("the opening is smaller than the crowns that reach %.3g m into it from every side: %w", r, err)
	}
	return in, nil
}

// Outset is the stem outline of a crown outline: it lies r outside.
func Outset(o Outline, r float64) (Outline, error) { return o.grow(r) }
