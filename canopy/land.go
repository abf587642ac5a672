package canopy

import (
	"errors"
	"fmt"
	"math"
)

// Land is a piece of ground of any simple shape that keeps its place on the map: a pool, a stream's bed. Unlike an opening it may be
// of any size and does not move to an origin. Build it with NewLand.
type Land struct{ ring []vertex }

// NewLand makes land of the corners given (m, x east and y north, in any order of turning, closed or not).
func NewLand(corners [][2]float64) (Land, error) {
	var ring []vertex
	for _, c := range corners {
		v := vertex{c[0], c[1]}
		if math.IsNaN(v.x+v.y) || math.IsInf(v.x+v.y, 0) {
			return Land{}, errors.New("a corner is not a finite number")
		}
		if len(ring) == 0 || v != ring[len(ring)-1] {
			ring = append(ring, v)
		}
	}
	if n := len(ring); n > 1 && ring[0] == ring[n-1] {
		ring = ring[:n-1]
	}
	if len(ring) < 3 {
		return Land{}, fmt.Errorf("a polygon has %d corners; it needs three or more", len(ring))
	}
	if i, j, crosses := selfCrossing(ring); crosses {
		return Land{}, fmt.Errorf("the outline crosses itself between corner %d and corner %d", i+1, j+1)
	}
	return Land{ring}, nil
}

// LandOf is the ground of an outline with its centre at x, y.
func LandOf(o Outline, x, y float64) Land {
	ring := corners(o)
	for i := range ring {
		ring[i].x += x
		ring[i].y += y
	}
	return Land{ring}
}

// roundCorners is how many corners stand for a round outline: the chords of a circle lie within 0.004 % of its radius.
const roundCorners = 360

// From is how far the land lies from an outline with its centre at x, y: the shortest way in m, 0 where they touch or overlap.
func (g Land) From(o Outline, x, y float64) float64 {
	ring := LandOf(o, x, y).ring
	if contains(ring, g.ring[0].x, g.ring[0].y) || contains(g.ring, ring[0].x, ring[0].y) {
		return 0
	}
	best := math.Inf(1)
	for i, a := range ring {
		b := ring[(i+1)%len(ring)]
		for j, c := range g.ring {
			best = math.Min(best, apart(a, b, c, g.ring[(j+1)%len(g.ring)]))
		}
	}
	return best
}

// corners of an outline about the origin; those of a round one lie on it.
func corners(o Outline) []vertex {
	switch o := o.(type) {
	case Polygon:
		return append([]vertex(nil), o.ring...)
	case Strip:
		sin, cos := math.Sincos(o.bearing)
		var out []vertex
		for _, s := range [4][2]float64{{1, 1}, {1, -1}, {-1, -1}, {-1, 1}} {
			along, across := s[0]*o.length/2, s[1]*o.width/2
			out = append(out, vertex{along*sin + across*cos, along*cos - across*sin})
		}
		return out
	}
	out := make([]vertex, roundCorners)
	for i := range out {
		φ := 2 * math.Pi * float64(i) / roundCorners
		sin, cos := math.Sincos(φ)
		r := Reach(o, φ)
		out[i] = vertex{r * sin, r * cos}
	}
	return out
}

// apart is the distance of two segments, ab and cd, 0 where they cross.
func apart(a, b, c, d vertex) float64 {
	if turn(a, b, c)*turn(a, b, d) < 0 && turn(c, d, a)*turn(c, d, b) < 0 {
		return 0
	}
	return math.Min(math.Min(toSegment(a, c, d), toSegment(b, c, d)), math.Min(toSegment(c, a, b), toSegment(d, a, b)))
}

// toSegment is the distance of a spot from the segment ab.
func toSegment(p, a, b vertex) float64 {
	dx, dy := b.x-a.x, b.y-a.y
	t := 0.0
	if l := dx*dx + dy*dy; l > 0 {
		t = math.Max(0, math.Min(1, ((p.x-a.x)*dx+(p.y-a.y)*dy)/l))
	}
	return math.Hypot(p.x-a.x-t*dx, p.y-a.y-t*dy)
}
