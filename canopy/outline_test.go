package canopy

import (
	"math"
	"math/rand/v2"
	"testing"
)

func shapes(t *testing.T) map[string]Outline {
	t.Helper()
	e, err := NewEllipse(50, 25, 0.7)
	if err != nil {
		t.Fatal(err)
	}
	s, err := NewStrip(60, 15, 2)
	if err != nil {
		t.Fatal(err)
	}
	L, _, _, err := NewPolygon([][2]float64{{0, 0}, {44, 0}, {44, 18}, {18, 18}, {18, 40}, {0, 40}})
	if err != nil {
		t.Fatal(err)
	}
	return map[string]Outline{"circle": circle(t, 30), "ellipse": e, "strip": s, "L": L}
}

// Between its crossings a ray is inside or outside as Contains says; areas agree with counting.
func TestCrossingsAndAreas(t *testing.T) {
	rng := rand.New(rand.NewPCG(3, 4))
	for name, o := range shapes(t) {
		for range 400 {
			x, y, φ := rng.Float64()*80-40, rng.Float64()*80-40, rng.Float64()*2*math.Pi
			ux, uy := math.Sincos(φ)
			in := o.Contains(x, y)
			last := 0.0
			for _, d := range append(o.cross(x, y, ux, uy, nil), 500) {
				m := (last + d) / 2
				if o.Contains(x+m*ux, y+m*uy) != in {
					t.Fatalf("%s: from (%.2f, %.2f) along %.3f, at %.3f of %.3f..%.3f", name, x, y, φ, m, last, d)
				}
				in, last = !in, d
			}
			if !in {
				t.Fatalf("%s: a ray ends inside", name)
			}
		}
		count := 0
		const n = 900
		for i := range n {
			for j := range n {
				if o.Contains((float64(i)+0.5)/n*120-60, (float64(j)+0.5)/n*120-60) {
					count++
				}
			}
		}
		if got := float64(count) / n / n * 120 * 120; math.Abs(got/o.Area()-1) > 0.005 {
			t.Errorf("%s: area %.2f, counted %.2f", name, o.Area(), got)
		}
	}
}

// Crown outlines lie a crown radius inside; there and back is the same; what is too small is refused.
func TestInsetAndOutset(t *testing.T) {
	for name, o := range shapes(t) {
		in, err := Inset(o, 3.5)
		if err != nil {
			t.Fatal(err)
		}
		if name != "ellipse" { // an ellipse's parallel curve is no ellipse
			for φ := 0.0; φ < 6.2; φ += 0.1 {
				d := Reach(in, φ)
				x, y := d*math.Sin(φ), d*math.Cos(φ)
				gap := math.Inf(1)
				for ψ := 0.0; ψ < 2*math.Pi; ψ += 0.001 {
					s, c := math.Sincos(ψ)
					for _, d := range o.cross(x, y, s, c, nil) {
						gap = math.Min(gap, d)
					}
				}
				if math.Abs(gap-3.5) > 0.05 {
					t.Errorf("%s: the inset is %.3f m inside at azimuth %.1f", name, gap, φ)
				}
			}
		}
		if _, err := Inset(o, 20); err == nil {
			t.Errorf("%s: an inset of 20 m leaves something", name)
		}
	}
	back, err := Outset(circle(t, 10), 3.5)
	if err != nil || back.Area() != circle(t, 17).Area() {
		t.Errorf("outset of a circle: %v %v", back, err)
	}
}

// Polygons: the centre is the point inside farthest from the outline; turning of the ring and closing corner do not
// matter; bad rings are refused.
func TestPolygons(t *testing.T) {
	ring := [][2]float64{{0, 0}, {44, 0}, {44, 18}, {18, 18}, {18, 40}, {0, 40}}
	a, cx, cy, err := NewPolygon(ring)
	if err != nil {
		t.Fatal(err)
	}
	// two walls 0 and the inner corner (18, 18): x = y with x = distance to the corner
	want := 18 * math.Sqrt2 / (1 + math.Sqrt2)
	if math.Abs(cx-want) > 0.01 || math.Abs(cy-want) > 0.01 {
		t.Errorf("centre (%.3f, %.3f), want %.3f both", cx, cy, want)
	}
	var back [][2]float64
	for i := range ring {
		back = append(back, ring[len(ring)-1-i])
	}
	b, _, _, err := NewPolygon(append(back, back[0]))
	if err != nil || math.Abs(a.Area()-b.Area()) > 1e-9 || a.Area() != 44*18+18*22 {
		t.Errorf("turned ring: %v, area %g and %g", err, a.Area(), b.Area())
	}
	for name, bad := range map[string][][2]float64{
		"bow tie": {{0, 0}, {10, 10}, {10, 0}, {0, 10}}, "two corners": {{0, 0}, {1, 1}}, "a line": {{0, 0}, {5, 0}, {10, 0}},
		"nan": {{0, 0}, {math.NaN(), 0}, {10, 10}}, "too large": {{0, 0}, {5000, 0}, {0, 10}},
	} {
		if _, _, _, err := NewPolygon(bad); err == nil {
			t.Errorf("%s is taken for a polygon", name)
		}
	}
}

// The thirteen stations and the zones.
func TestStationsAndZones(t *testing.T) {
	s := DefaultStations(circle(t, 30), 24)
	if len(s) != 13 || s[0].Name != "centre" || s[1].Name != "N third" || math.Abs(s[1].Y-10) > 1e-9 || math.Abs(s[2].Y-14.5) > 1e-9 || math.Abs(s[3].Y-27) > 1e-9 || math.Abs(s[4].X-10) > 1e-9 {
		t.Errorf("stations %v", s)
	}
	if small := DefaultStations(circle(t, 2), 24); small[2].Y != small[1].Y {
		t.Errorf("in a small opening the edge stands at %.3f, the third at %.3f", small[2].Y, small[1].Y)
	}
	for _, z := range []struct {
		x, y float64
		want Zone
	}{{0, 1, Centre}, {0, 10, North}, {10, 1, East}, {1, -10, South}, {-10, -1, West}, {0, 16, Beyond}} {
		if got := ZoneAt(circle(t, 30), z.x, z.y); got != z.want {
			t.Errorf("(%g, %g) lies in zone %d, want %d", z.x, z.y, got, z.want)
		}
	}
}

// Several openings: a ray passes from one into the next through the matrix between.
func TestSeveralOpenings(t *testing.T) {
	one := circle(t, 20)
	far, _, _, err := NewPolygon([][2]float64{{30, -10}, {60, -10}, {60, 10}, {30, 10}})
	if err != nil {
		t.Fatal(err)
	}
	// a polygon is centred on its own middle; put it back east of the circle
	for i := range far.ring {
		far.ring[i].x += 45
	}
	m := profile(t, slab(0, 20, 4))
	both := stand(t, m, Ground{}, Opening{one, profile(t)}, Opening{far, profile(t)})
	alone := stand(t, m, Ground{}, Opening{one, profile(t)})
	sun := []Direction{{math.Atan(0.3), math.Pi / 2}} // height 20 at 66 m: across the circle, 20 m of matrix, the other opening
	_, a := skyAndBeam(both, Point{}, sun, []float64{1})
	_, b := skyAndBeam(alone, Point{}, sun, []float64{1})
	slant := 0.5 * 4 / 20 / math.Cos(math.Atan(0.3))
	if want := math.Exp(-slant * (20 + 20/0.3 - 60)); math.Abs(a[0].Chance-want) > 1e-9 {
		t.Errorf("two openings: %.6f, want %.6f", a[0].Chance, want)
	}
	if want := math.Exp(-slant * (20/0.3 - 10)); math.Abs(b[0].Chance-want) > 1e-9 {
		t.Errorf("one opening: %.6f, want %.6f", b[0].Chance, want)
	}
}
