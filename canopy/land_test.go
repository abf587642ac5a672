package canopy

import (
	"math"
	"testing"
)

// Distances that follow from plane geometry; moving opening and ground alike changes nothing, and a larger opening is never farther.
func TestLandFromOpenings(t *testing.T) {
	circle, err := NewCircle(20)
	if err != nil {
		t.Fatal(err)
	}
	strip, err := NewStrip(40, 10, math.Pi/2)
	if err != nil {
		t.Fatal(err)
	}
	ell, _, _, err := NewPolygon([][2]float64{{-10, -10}, {10, -10}, {10, 10}, {-10, 10}})
	if err != nil {
		t.Fatal(err)
	}
	square := [][2]float64{{30, -5}, {50, -5}, {50, 5}, {30, 5}}
	pool, err := NewLand(square)
	if err != nil {
		t.Fatal(err)
	}
	for _, c := range []struct {
		name string
		o    Outline
		x, y float64
		want float64
	}{
		{"circle beside a side", circle, 0, 0, 20},
		{"circle off a corner", circle, 0, 45, math.Hypot(30, 40) - 10},
		{"strip of its long side east", strip, 0, 0, 10},
		{"polygon", ell, 0, 0, 20},
		{"round it", circle, 40, 0, 0},
		{"across its side", circle, 25, 0, 0},
		{"within a wide pool", circle, 40, 3, 0},
	} {
		if got := pool.From(c.o, c.x, c.y); math.Abs(got-c.want) > 0.001 {
			t.Errorf("%s: %g m, want %g", c.name, got, c.want)
		}
	}
	var moved [][2]float64
	for _, s := range square {
		moved = append(moved, [2]float64{s[0] + 500, s[1] - 300})
	}
	there, err := NewLand(moved)
	if err != nil {
		t.Fatal(err)
	}
	wider, err := NewCircle(26)
	if err != nil {
		t.Fatal(err)
	}
	for x := -60.0; x < 120; x += 7 {
		a := pool.From(circle, x, 31)
		if b := there.From(circle, x+500, 31-300); math.Abs(a-b) > 1e-9 {
			t.Errorf("at %g: %g m, moved %g", x, a, b)
		}
		if b := pool.From(wider, x, 31); b > a {
			t.Errorf("at %g: a wider opening is farther, %g for %g m", x, b, a)
		}
	}
}

func TestLandThatIsNone(t *testing.T) {
	for name, c := range map[string][][2]float64{
		"two corners": {{0, 0}, {1, 1}}, "crossing": {{0, 0}, {10, 10}, {10, 0}, {0, 10}}, "not a number": {{0, 0}, {math.NaN(), 1}, {2, 2}}, "none": nil,
	} {
		if _, err := NewLand(c); err == nil {
			t.Errorf("%s is taken", name)
		}
	}
}
