package fit

import (
	"encoding/csv"
	"math"
	"math/rand/v2"
	"os"
	"sort"
	"strconv"
	"testing"

	"shadeledger/leaf"
)

// lights and leaves are as in the field sets: some 14 levels, sun leaves whose respiration is a tenth of their capacity.
var lights = []float64{0, 5, 15, 25, 40, 60, 80, 100, 200, 400, 800, 1200, 1600, 2000}

func median(x []float64) float64 {
	s := append([]float64(nil), x...)
	sort.Float64s(s)
	return s[len(s)/2]
}

// Simulated curves with 0.3 umol m-2 s-1 of noise: median error at most 5 % of Amax and 10 % of Rd, and the intervals hold the truth in 90 to 98 %.
func TestSimulatedCurves(t *testing.T) {
	const runs = 600
	var amax, rd []float64
	held := map[string]int{}
	for k := range runs {
		g := rand.New(rand.NewPCG(uint64(k), 3))
		ag := 10 + 12*g.Float64()
		set := leaf.Set{Ag: ag, Rd: ag * (0.08 + 0.06*g.Float64()), Phi: 0.035 + 0.025*g.Float64(), Theta: 0.4 + 0.5*g.Float64(), LMA: 60}
		var pts []Point
		for _, I := range lights {
			pts = append(pts, Point{I, set.Net(I) + 0.3*g.NormFloat64()})
		}
		f, err := Curve(pts, NonRectangular)
		if err != nil {
			t.Fatal(err)
		}
		amax = append(amax, math.Abs(f.Amax.Value/set.Amax()-1))
		rd = append(rd, math.Abs(f.Rd.Value/set.Rd-1))
		for name, e := range map[string]struct {
			Estimate
			truth float64
		}{"Amax": {f.Amax, set.Amax()}, "Rd": {f.Rd, set.Rd}, "phi": {f.Phi, set.Phi}, "theta": {f.Theta, set.Theta}, "compensation": {f.Compensation, set.CompensationPoint()}} {
			if e.Low <= e.truth && e.truth <= e.High {
				held[name]++
			}
		}
	}
	t.Logf("median error of Amax %.1f %%, of Rd %.1f %%; held: %v of %d", 100*median(amax), 100*median(rd), held, runs)
	if median(amax) > 0.05 || median(rd) > 0.10 {
		t.Errorf("median error %.3f and %.3f", median(amax), median(rd))
	}
	for name, n := range held {
		if share := float64(n) / runs; share < 0.90 || share > 0.98 {
			t.Errorf("the interval of %s holds the truth in %.3f", name, share)
		}
	}
}

// curves reads a set of testdata by leaf, in order.
func curves(t testing.TB, name string) (names []string, out map[string][]Point) {
	t.Helper()
	out = map[string][]Point{}
	for _, r := range rows(t, name) {
		I, err1 := strconv.ParseFloat(r[2], 64)
		A, err2 := strconv.ParseFloat(r[3], 64)
		if err1 != nil || err2 != nil {
			t.Fatal(r)
		}
		if out[r[1]] == nil {
			names = append(names, r[1])
		}
		out[r[1]] = append(out[r[1]], Point{I, A})
	}
	return names, out
}

func rows(t testing.TB, name string) [][]string {
	t.Helper()
	f, err := os.Open("../../testdata/light-curves/" + name)
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	all, err := csv.NewReader(f).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	return all[1:]
}

// Measured curves are met to 0.3 umol m-2 s-1 in the median.
func TestMeasuredCurves(t *testing.T) {
	for _, name := range []string{"new-york.csv", "harvard.csv", "arctic.csv", "panama.csv"} {
		names, sets := curves(t, name)
		var rmse []float64
		good := 0
		shapes := map[string]int{}
		for _, n := range names {
			if len(sets[n]) < 6 {
				continue // leftovers of quality control
			}
			f, err := Curve(sets[n], NonRectangular)
			if err != nil {
				t.Fatalf("%s %s: %v", name, n, err)
			}
			rmse = append(rmse, f.RMSE)
			if f.RMSE <= 0.3 {
				good++
			}
			all, err := Best(sets[n])
			if err != nil {
				t.Fatal(err)
			}
			shapes[all[0].Shape.String()]++
		}
		t.Logf("%s: %d curves, median RMSE %.3f, %d within 0.3; best by AICc: %v", name, len(names), median(rmse), good, shapes)
		if median(rmse) > 0.3 {
			t.Errorf("%s: median RMSE %.3f umol m-2 s-1", name, median(rmse))
		}
	}
}

// Fits made elsewhere: none is nearer to its points; Amax within 5 % and compensation point within 10 % in the median.
func TestPublishedFits(t *testing.T) {
	for data, published := range map[string]string{"arctic.csv": "arctic-published.csv", "panama.csv": "panama-fits.csv"} {
		_, sets := curves(t, data)
		var ag, lcp []float64
		for _, r := range rows(t, published) {
			var v [6]float64
			for i := range v {
				v[i], _ = strconv.ParseFloat(r[i+1], 64)
			}
			pts := sets[r[0]]
			if len(pts) < 6 || v[4] <= 0 {
				continue
			}
			f, err := Curve(pts, NonRectangular)
			if err != nil {
				t.Fatal(err)
			}
			if f.RMSE > 1.1*v[5] {
				t.Errorf("%s %s: RMSE %.3f, %.3f published", data, r[0], f.RMSE, v[5])
			}
			ag = append(ag, math.Abs(f.Amax.Value/(v[0]-v[1])-1))
			if !math.IsNaN(f.Compensation.Value) {
				lcp = append(lcp, math.Abs(f.Compensation.Value/v[4]-1))
			}
		}
		t.Logf("%s: %d leaves, median difference of Amax %.2f %%, of the compensation point %.2f %%", data, len(ag), 100*median(ag), 100*median(lcp))
		if len(ag) < 80 || median(ag) > 0.05 || median(lcp) > 0.10 {
			t.Errorf("%s: %d leaves, Amax off by %.3f, compensation point by %.3f", data, len(ag), median(ag), median(lcp))
		}
	}
}

// Readings at too few lights do not tell the parameters apart: no interval, where inversion gave 1e7 or 0 for its width. What no reading depends on leaves
// the others alone, and an interval wider than the range of any leaf is none.
func TestWhatReadingsDoNotDetermine(t *testing.T) {
	for _, c := range []struct {
		name         string
		points       []Point
		shape        Shape
		told, untold func(*Fit) []Estimate
	}{
		{"two lights", []Point{{0, -1}, {0, -1.1}, {0, -0.9}, {500, 5}, {500, 5.2}, {500, 5.3}}, NonRectangular, nil,
			func(f *Fit) []Estimate { return []Estimate{f.Amax, f.Rd, f.Phi, f.Theta, f.Compensation} }},
		{"three lights", []Point{{0, -1}, {0, -1.1}, {50, 1}, {50, 1.1}, {500, 5}, {500, 5.2}, {500, 5.3}}, NonRectangular, nil,
			func(f *Fit) []Estimate { return []Estimate{f.Amax, f.Rd, f.Phi, f.Theta, f.Compensation} }},
		{"three lights, three parameters", []Point{{0, -1}, {0, -1.1}, {50, 1}, {50, 1.1}, {500, 5}, {500, 5.2}, {500, 5.3}}, Rectangular,
			func(f *Fit) []Estimate { return []Estimate{f.Amax, f.Rd, f.Phi, f.Compensation} }, nil},
		{"darkness", []Point{{0, -1}, {0, -1.1}, {0, -0.9}, {0, -1}, {0, -1}, {0, -1.3}}, NonRectangular,
			func(f *Fit) []Estimate { return []Estimate{f.Rd} },
			func(f *Fit) []Estimate { return []Estimate{f.Ag, f.Amax, f.Phi, f.Theta} }},
		{"no bend", []Point{{0, -1.1}, {20, 0.05}, {40, 1}, {60, 1.9}, {80, 3.1}, {100, 4}}, Rectangular,
			func(f *Fit) []Estimate { return []Estimate{f.Rd, f.Phi, f.Compensation} },
			func(f *Fit) []Estimate { return []Estimate{f.Ag, f.Amax} }},
	} {
		f, err := Curve(c.points, c.shape)
		if err != nil {
			t.Fatal(c.name, err)
		}
		for i, e := range list(c.untold, &f) {
			if math.IsNaN(e.Value) || !math.IsNaN(e.SE) || !math.IsNaN(e.Low) || !math.IsNaN(e.High) {
				t.Errorf("%s, untold %d: %+v", c.name, i, e)
			}
		}
		for i, e := range list(c.told, &f) {
			if !(e.Low < e.Value && e.Value < e.High) {
				t.Errorf("%s, told %d: %+v", c.name, i, e)
			}
		}
	}
}

func list(of func(*Fit) []Estimate, f *Fit) []Estimate {
	if of == nil {
		return nil
	}
	return of(f)
}

// Slopes of every shape against differences.
func TestSlopes(t *testing.T) {
	q := [4]float64{11, 0.045, 1.1, 0.7}
	for _, s := range []Shape{NonRectangular, Exponential, Rectangular} {
		for _, I := range []float64{0, 30, 300, 1500} {
			d := s.slopes(I, q)
			for i := range s.parameters() {
				h := 1e-6 * q[i]
				up, down := q, q
				up[i], down[i] = q[i]+h, q[i]-h
				want := (s.gross(I, up) - up[2] - s.gross(I, down) + down[2]) / (2 * h)
				if math.Abs(d[i]-want) > 1e-5*math.Max(1, math.Abs(want)) {
					t.Errorf("%s at %g: slope %d is %g, %g by differences", s, I, i, d[i], want)
				}
			}
		}
	}
}

// 240 curves, three shapes each, are to take less than a second.
func BenchmarkBest240(b *testing.B) {
	names, sets := curves(b, "panama.csv")
	for b.Loop() {
		for k := range 240 {
			if _, err := Best(sets[names[k%len(names)]]); err != nil {
				b.Fatal(err)
			}
		}
	}
}
