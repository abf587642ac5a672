package fit

import (
	"math"
	"strings"
	"testing"

	"shadeledger/leaf"
)

func sound() []Reading {
	set := leaf.Set{Ag: 11, Rd: 1, Phi: 0.05, Theta: 0.8, LMA: 60}
	var out []Reading
	for _, I := range lights {
		out = append(out, Reading{Point{I, set.Net(I)}, math.NaN(), math.NaN(), 25, math.NaN()})
	}
	return out
}

// Each defect is flagged, and a sound curve is not.
func TestFlags(t *testing.T) {
	for _, c := range []struct {
		name, want string
		change     func([]Reading) []Reading
	}{
		{"sound", "", func(r []Reading) []Reading { return r }},
		{"few", "few points", func(r []Reading) []Reading { return append(r[:2], r[9:]...) }},
		{"no dark point", "no dark point", func(r []Reading) []Reading { return r[2:] }},
		{"no plateau", "no plateau", func(r []Reading) []Reading { return r[:9] }},
		{"dead leaf", "no net uptake at the brightest point, 2000 umol", func(r []Reading) []Reading {
			for i := range r {
				r[i].Net = -1 - 0.01*float64(i%3)
			}
			return r
		}},
		{"wrong sign", "Rd is not positive", func(r []Reading) []Reading {
			for i := range r {
				r[i].Net += 1.5
			}
			return r
		}},
		{"photoinhibition", "photoinhibition", func(r []Reading) []Reading {
			r[len(r)-1].Net -= 3
			return r
		}},
		{"drift", "drift", func(r []Reading) []Reading {
			again := r[10]
			again.Net -= 4
			return append(r, again)
		}},
		{"closed stomata", "closed stomata", func(r []Reading) []Reading {
			r[12].Conductance = 0.02
			return r
		}},
		{"empty leaf", "closed stomata", func(r []Reading) []Reading {
			r[12].Ci = 90
			return r
		}},
	} {
		r := c.change(sound())
		var pts []Point
		for _, x := range r {
			pts = append(pts, x.Point)
		}
		f, err := Curve(pts, NonRectangular)
		if err != nil {
			t.Fatal(err)
		}
		if got := strings.Join(Flags(r, &f), "; "); c.want == "" && got != "" || !strings.Contains(got, c.want) {
			t.Errorf("%s: %q", c.name, got)
		}
		if got := strings.Join(Flags(r, &f), "; "); f.Amax.Value <= 0 && strings.Contains(got, "% of Amax") {
			t.Errorf("%s: a share of no Amax: %q", c.name, got)
		}
	}
}

// Leaves of one plant count once.
func TestSummarise(t *testing.T) {
	fits := []Fit{{Amax: Estimate{Value: 4}}, {Amax: Estimate{Value: 6}}, {Amax: Estimate{Value: 9}}}
	s := Summarise(fits, []string{"a", "a", "b"})
	if s.Amax.Mean != 7 || s.Amax.N != 2 || math.Abs(s.Amax.SD-math.Sqrt(8)) > 1e-12 {
		t.Errorf("%+v", s)
	}
}

func TestTooFewPoints(t *testing.T) {
	if _, err := Best([]Point{{0, -1}, {100, 3}, {1000, 8}}); err == nil || !strings.Contains(err.Error(), "3 points") {
		t.Errorf("a curve of three points: %v", err)
	}
	if _, err := Curve([]Point{{0, -1}}, Rectangular); err == nil || !strings.HasPrefix(err.Error(), "1 point;") {
		t.Errorf("a curve of one point: %v", err)
	}
}
