package canopy

import (
	"container/heap"
	"errors"
	"fmt"
	"math"
	"sort"
)

// A Polygon is an opening of any simple shape, convex or not. Its centre, the point inside that lies
// farthest from the outline, is the origin.
type Polygon struct{ ring []vertex }

// NewPolygon makes a polygon of the corners given (m, x east and y north, in any order of turning, closed or
// not) and tells where its centre lies in the coordinates given.
func NewPolygon(corners [][2]float64) (p Polygon, centreX, centreY float64, err error) {
	var ring []vertex
	for _, c := range corners {
		v := vertex{c[0], c[1]}
		if math.IsNaN(v.x+v.y) || math.IsInf(v.x+v.y, 0) {
			return p, 0, 0, errors.New("a corner is not a finite number")
		}
		if len(ring) == 0 || math.Hypot(v.x-ring[len(ring)-1].x, v.y-ring[len(ring)-1].y) > 1e-6 {
			ring = append(ring, v)
		}
	}
	if n := len(ring); n > 1 && math.Hypot(ring[0].x-ring[n-1].x, ring[0].y-ring[n-1].y) <= 1e-6 {
		ring = ring[:n-1]
	}
	if len(ring) < 3 {
		return p, 0, 0, fmt.Errorf("a polygon has %d corners; it needs three or more", len(ring))
	}
	if i, j, crosses := selfCrossing(ring); crosses {
		return p, 0, 0, fmt.Errorf("the outline crosses itself between corner %d and corner %d", i+1, j+1)
	}
	a := signedArea(ring)
	if math.Abs(a) < 0.01 {
		return p, 0, 0, errors.New("the polygon has no area")
	}
	if a < 0 {
		for i, j := 0, len(ring)-1; i < j; i, j = i+1, j-1 {
			ring[i], ring[j] = ring[j], ring[i]
		}
	}
	c := pole(ring)
	for i := range ring {
		ring[i].x -= c.x
		ring[i].y -= c.y
	}
	p = Polygon{ring}
	if d := p.extent(); d > largest {
		return p, c.x, c.y, fmt.Errorf("the polygon is %.4g m across; at most %g m", d, largest)
	}
	return p, c.x, c.y, nil
}

// extent is the longer side of the bounding box, m.
func (p Polygon) extent() float64 {
	lo, hi := bounds(p.ring)
	return math.Max(hi.x-lo.x, hi.y-lo.y)
}

func signedArea(ring []vertex) float64 {
	sum := 0.0
	for i, a := range ring {
		b := ring[(i+1)%len(ring)]
		sum += a.x*b.y - b.x*a.y
	}
	return sum / 2
}

func bounds(ring []vertex) (lo, hi vertex) {
	lo, hi = ring[0], ring[0]
	for _, v := range ring {
		lo.x, lo.y = math.Min(lo.x, v.x), math.Min(lo.y, v.y)
		hi.x, hi.y = math.Max(hi.x, v.x), math.Max(hi.y, v.y)
	}
	return lo, hi
}

// selfCrossing finds two sides that are not neighbours and meet.
func selfCrossing(ring []vertex) (i, j int, crosses bool) {
	n := len(ring)
	for i := range n {
		for j := i + 2; j < n; j++ {
			if i == 0 && j == n-1 {
				continue
			}
			a, b, c, d := ring[i], ring[i+1], ring[j], ring[(j+1)%n]
			if turn(a, b, c)*turn(a, b, d) <= 0 && turn(c, d, a)*turn(c, d, b) <= 0 {
				return i, j, true
			}
		}
	}
	return 0, 0, false
}

func turn(a, b, c vertex) float64 { return (b.x-a.x)*(c.y-a.y) - (b.y-a.y)*(c.x-a.x) }

func contains(ring []vertex, x, y float64) bool {
	in := false
	for i, a := range ring {
		b := ring[(i+1)%len(ring)]
		if (a.y > y) != (b.y > y) && x < a.x+(y-a.y)/(b.y-a.y)*(b.x-a.x) {
			in = !in
		}
	}
	return in
}

// distance from a spot to the outline, positive inside.
func distance(ring []vertex, x, y float64) float64 {
	best := math.Inf(1)
	for i, a := range ring {
		b := ring[(i+1)%len(ring)]
		dx, dy := b.x-a.x, b.y-a.y
		t := ((x-a.x)*dx + (y-a.y)*dy) / (dx*dx + dy*dy)
		t = math.Max(0, math.Min(1, t))
		best = math.Min(best, math.Hypot(x-a.x-t*dx, y-a.y-t*dy))
	}
	if !contains(ring, x, y) {
		return -best
	}
	return best
}

// square is a cell of the search for the pole; reach bounds the distance to be had in it.
type square struct{ x, y, half, d, reach float64 }

type squares []square

func (q squares) Len() int           { return len(q) }
func (q squares) Less(i, j int) bool { return q[i].reach > q[j].reach }
func (q squares) Swap(i, j int)      { q[i], q[j] = q[j], q[i] }
func (q *squares) Push(x any)        { *q = append(*q, x.(square)) }
func (q *squares) Pop() any {
	old := *q
	x := old[len(old)-1]
	*q = old[:len(old)-1]
	return x
}

// pole is the point inside farthest from the outline, to 1 mm: best-first search over squares, each bounded
// by the distance at its middle plus its half diagonal.
func pole(ring []vertex) vertex {
	lo, hi := bounds(ring)
	size := math.Min(hi.x-lo.x, hi.y-lo.y)
	var q squares
	var best square
	add := func(x, y, half float64) {
		d := distance(ring, x, y)
		c := square{x, y, half, d, d + half*math.Sqrt2}
		if d > best.d || best.half == 0 {
			best = c
		}
		heap.Push(&q, c)
	}
	for x := lo.x + size/2; x < hi.x+size/2; x += size {
		for y := lo.y + size/2; y < hi.y+size/2; y += size {
			add(x, y, size/2)
		}
	}
	for q.Len() > 0 {
		c := heap.Pop(&q).(square)
		if c.reach-best.d <= 1e-3 {
			break
		}
		h := c.half / 2
		add(c.x-h, c.y-h, h)
		add(c.x+h, c.y-h, h)
		add(c.x-h, c.y+h, h)
		add(c.x+h, c.y+h, h)
	}
	return vertex{best.x, best.y}
}

// Contains tells whether a spot is inside.
func (p Polygon) Contains(x, y float64) bool { return contains(p.ring, x, y) }

// Area, m2.
func (p Polygon) Area() float64 { return signedArea(p.ring) }

func (p Polygon) cross(x, y, ux, uy float64, dst []float64) []float64 {
	from := len(dst)
	for i, a := range p.ring {
		b := p.ring[(i+1)%len(p.ring)]
		// side of the ray that each end lies on; a corner counts to the left
		ca := ux*(a.y-y) - uy*(a.x-x)
		cb := ux*(b.y-y) - uy*(b.x-x)
		if (ca >= 0) == (cb >= 0) {
			continue
		}
		t := ca / (ca - cb)
		px, py := a.x+t*(b.x-a.x)-x, a.y+t*(b.y-a.y)-y
		if s := px*ux + py*uy; s > 0 {
			dst = append(dst, s)
		}
	}
	sort.Float64s(dst[from:])
	return dst
}

// arcStep is the largest turn of a side where the outline goes round a corner, rad.
const arcStep = math.Pi / 18

// grow moves every side by d, outward when positive. Corners that the move opens are rounded, so that the new
// outline keeps |d| from the old one. A shape that would fall apart is an error.
func (p Polygon) grow(d float64) (Outline, error) {
	if d == 0 {
		return p, nil
	}
	n := len(p.ring)
	var out []vertex
	for i, v := range p.ring {
		prev, next := p.ring[(i+n-1)%n], p.ring[(i+1)%n]
		n1, n2 := outward(prev, v), outward(v, next)
		cross := n1.x*n2.y - n1.y*n2.x // > 0 at a corner that points out
		dot := n1.x*n2.x + n1.y*n2.y
		if cross*d > 0 {
			from, sweep := math.Atan2(n1.y, n1.x), math.Atan2(cross, dot)
			k := int(math.Ceil(math.Abs(sweep) / arcStep))
			for j := range k + 1 {
				s, c := math.Sincos(from + sweep*float64(j)/float64(k))
				out = append(out, vertex{v.x + d*c, v.y + d*s})
			}
			continue
		}
		out = append(out, vertex{v.x + d*(n1.x+n2.x)/(1+dot), v.y + d*(n1.y+n2.y)/(1+dot)})
	}
	if _, _, bad := selfCrossing(out); bad || signedArea(out) < 0.01 {
		return nil, fmt.Errorf("the outline moved by %.3g m crosses itself or vanishes; draw a wider or simpler polygon", d)
	}
	for _, v := range out {
		if off := distance(p.ring, v.x, v.y); math.Abs(off+d) > 0.02*math.Abs(d)+0.01 {
			return nil, fmt.Errorf("a part of the polygon is too narrow to move its outline by %.3g m", d)
		}
	}
	return Polygon{out}, nil
}

// outward is the unit vector out of the polygon across the side from a to b.
func outward(a, b vertex) vertex {
	l := math.Hypot(b.x-a.x, b.y-a.y)
	return vertex{(b.y - a.y) / l, -(b.x - a.x) / l}
}
