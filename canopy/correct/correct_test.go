package correct

import (
	"fmt"
	"math"
	"math/rand/v2"
	"strings"
	"testing"
)

// beer is an endless layer of a leaf area seen through a path that differs between readings.
func beer(leaf float64, path []float64) func(int, float64) float64 {
	return func(i int, f float64) float64 { return math.Exp(-0.5 * leaf * f * path[i]) }
}

// Twelve pairs with 15 % noise: transmittance within 10 % of the truth, and the 90 % interval of the factor holds the true one in 85 to 95 %
// of 500 simulations, for log-normal and normal noise, with and without a canopy that differs between points.
func TestCoverage(t *testing.T) {
	const n, runs, noise = 12, 500, 0.15
	for _, c := range []struct {
		name    string
		draw    func(*rand.Rand) float64
		between float64 // relative standard deviation of light between points
	}{
		{"log-normal", func(g *rand.Rand) float64 {
			s := math.Sqrt(math.Log(1 + noise*noise))
			return math.Exp(s*g.NormFloat64() - s*s/2)
		}, 0},
		{"normal", func(g *rand.Rand) float64 { return math.Max(0.05, 1+noise*g.NormFloat64()) }, 0},
		{"uneven canopy", func(g *rand.Rand) float64 { return math.Max(0.05, 1+noise*g.NormFloat64()) }, 0.3},
	} {
		t.Run(c.name, func(t *testing.T) {
			held, near, worst, biased := 0, 0, 0.0, 0.0
			for k := range runs {
				g := rand.New(rand.NewPCG(uint64(k), 7))
				truth := 0.5 + 1.1*g.Float64()
				path := make([]float64, n)
				for i := range path {
					path[i] = 1 + 0.4*g.Float64()
				}
				model := beer(4, path)
				pairs := make([]Reading, n)
				spread := math.Sqrt(math.Log(1 + c.between*c.between))
				light := 0.0
				for i := range pairs {
					here := math.Exp(spread*g.NormFloat64() - spread*spread/2)
					pairs[i] = Reading{Point: fmt.Sprint(i), Below: 600 * model(i, truth) * here * c.draw(g), Above: 600}
					light += model(i, truth) / n
				}
				r, err := Pairs(pairs, model)
				if err != nil {
					t.Fatal(err)
				}
				if r.Low <= truth && truth <= r.High {
					held++
				}
				off := r.After/light - 1
				biased += off / runs
				if math.Abs(off) <= 0.10 {
					near++
				}
				worst = math.Max(worst, math.Abs(off))
			}
			t.Logf("interval holds the truth in %.1f %%; light within 10 %% in %.1f %%, worst %.0f %%, mean error %.2f %%",
				100*float64(held)/runs, 100*float64(near)/runs, 100*worst, 100*biased)
			if held < runs*85/100 || held > runs*95/100 {
				t.Errorf("the interval holds the truth in %d of %d", held, runs)
			}
			if math.Abs(biased) > 0.01 {
				t.Errorf("light is off by %.3f on the mean", biased)
			}
			// 15 % over the root of 12 is 4.3 %: one in fifty lies beyond 10 %
			if c.between == 0 && near < runs*97/100 {
				t.Errorf("light within 10 %% in %d of %d", near, runs)
			}
		})
	}
}

// Without noise the factor comes back exactly and nothing is left over.
func TestExactPairs(t *testing.T) {
	path := []float64{1, 1.1, 1.2, 1.3}
	model := beer(5, path)
	var pairs []Reading
	for i := range path {
		pairs = append(pairs, Reading{Below: 500 * model(i, 0.8), Above: 500})
	}
	r, err := Pairs(pairs, model)
	if err != nil {
		t.Fatal(err)
	}
	if math.Abs(r.Factor-0.8) > 1e-9 || r.RMSE > 1e-9 || r.RMSEBefore < 0.01 || math.Abs(r.High-r.Low) > 1e-6 {
		t.Errorf("%+v", r)
	}
}

func TestWarnings(t *testing.T) {
	model := func(_ int, f float64) float64 { return math.Exp(-3 * f) }
	good := Reading{Below: 30, Above: 600}
	for _, c := range []struct {
		name string
		add  []Reading
		want string
	}{
		{"unpaired", []Reading{{Below: 30, Above: math.NaN()}}, "1 of 13 readings without light below or above"},
		{"brighter below", []Reading{{Below: 700, Above: 600}}, "brighter below than above"},
		{"above shrubs", []Reading{{Below: 30, Above: 600, AboveShrubs: true}}, "taken above shrubs"},
		{"clear noon", []Reading{{Below: 30, Above: 600, Sky: Clear, Midday: true}}, "near midday"},
		{"mixed", []Reading{{Below: 30, Above: 600, Sky: Mixed}}, "not under an overcast sky"},
		{"lux", []Reading{{Below: 30, Above: 600, Quantity: Lux}}, "screening grade"},
	} {
		pairs := c.add
		for range 12 {
			pairs = append(pairs, good)
		}
		r, err := Pairs(pairs, model)
		if err != nil {
			t.Fatal(err)
		}
		if got := strings.Join(r.Warnings, "\n"); !strings.Contains(got, c.want) {
			t.Errorf("%s: %q", c.name, got)
		}
	}
	for n, want := range map[int]string{4: "too few", 8: "below the floor"} {
		var pairs []Reading
		for range n {
			pairs = append(pairs, good)
		}
		r, err := Pairs(pairs, model)
		if err != nil || !strings.Contains(strings.Join(r.Warnings, "\n"), want) {
			t.Errorf("%d pairs: %v %v", n, r.Warnings, err)
		}
	}
	if _, err := Pairs([]Reading{good}, model); err == nil {
		t.Error("one pair gives an interval")
	}
	if r, err := Pairs([]Reading{{Below: 599.9, Above: 600}, {Below: 599.8, Above: 600}}, model); err != nil || !strings.Contains(strings.Join(r.Warnings, "\n"), "brighter than the stand") {
		t.Errorf("open ground under trees: %v %v", r.Warnings, err)
	}
}

func TestOpenness(t *testing.T) {
	r, err := Openness([]float64{0.06, 0.08, 0.05, 0.11, 0.07, 0.09, 0.04, 0.10}, func(f float64) float64 { return math.Exp(-3 * f) })
	if err != nil {
		t.Fatal(err)
	}
	if want := -math.Log(0.075) / 3; math.Abs(r.Factor-want) > 1e-9 || !(r.Low < r.Factor && r.Factor < r.High) {
		t.Errorf("%+v, factor %g wanted", r, want)
	}
	if _, err := Openness([]float64{0.06}, nil); err == nil {
		t.Error("one value gives an interval")
	}
	if _, err := Openness([]float64{0.06, 94}, nil); err == nil {
		t.Error("94 taken as a share")
	}
}

// Readings that leave an end of the interval open say so; five readings alike do not.
func TestOpenEndIsTold(t *testing.T) {
	beer := func(_ int, factor float64) float64 { return math.Exp(-2 * factor) }
	told := func(below ...float64) bool {
		var all []Reading
		for _, b := range below {
			all = append(all, Reading{Below: b, Above: 1000, Sky: Overcast, Quantity: PPFD})
		}
		r, err := Pairs(all, beer)
		if err != nil {
			t.Fatal(err)
		}
		for _, w := range r.Warnings {
			if strings.Contains(w, "open at an end") {
				return true
			}
		}
		return false
	}
	if !told(50, 500) || told(130, 135, 140, 128, 133) {
		t.Errorf("two far pairs: %v, five alike: %v", told(50, 500), told(130, 135, 140, 128, 133))
	}
}
