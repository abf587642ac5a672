package draws

import (
	"errors"
	"math"
	"reflect"
	"testing"
)

// outputs runs f on rows.
func outputs(rows [][]float64, f func([]float64) float64) (out []float64) {
	for _, r := range rows {
		out = append(out, f(r))
	}
	return out
}

// A linear model of even inputs: coefficients are the weights over their length, and rank the inputs; shares are their squares.
func TestRegressRecoversALinearModel(t *testing.T) {
	weights := []float64{4, -3, 2, 1, 0}
	linear := func(u []float64) (y float64) {
		for j, w := range weights {
			y += w * u[j]
		}
		return y
	}
	length := math.Sqrt(30)
	rows := Hypercube(2000, len(weights), 2)
	r, err := Regress(rows, outputs(rows, linear))
	if err != nil {
		t.Fatal(err)
	}
	shares := 0.0
	for j, c := range r.Inputs {
		near(t, "coefficient", c.Value, weights[j]/length, 0.02) // ranks of a sum of even draws bend a little
		near(t, "share", c.Share, weights[j]*weights[j]/30, 0.04)
		if j > 0 && math.Abs(c.Value) >= math.Abs(r.Inputs[j-1].Value) {
			t.Errorf("input %d comes before %d", j, j-1)
		}
		near(t, "standard error", c.Error, math.Sqrt((1-r.R2)/2000), 0.1*c.Error) // columns nearly independent
		shares += c.Share
	}
	near(t, "shares", shares, r.R2, 1e-9)
	if r.R2 < 0.97 {
		t.Errorf("R2 %g", r.R2)
	}
}

// Ranks do not see a monotone bend: of one input R2 is 1, whatever the bend; straight lines would not fit.
func TestRegressIsBlindToMonotoneBends(t *testing.T) {
	rows := Hypercube(1000, 3, 4)
	r, err := Regress(rows, outputs(rows, func(u []float64) float64 { return math.Exp(30 * u[1]) }))
	if err != nil {
		t.Fatal(err)
	}
	near(t, "R2", r.R2, 1, 1e-12)
	near(t, "driver", r.Inputs[1].Value, 1, 1e-12)
	sum := func(u []float64) float64 { return 2*u[0] - u[1] + 0.5*u[2] }
	straight, err := Regress(rows, outputs(rows, sum))
	if err != nil {
		t.Fatal(err)
	}
	bent, err := Regress(rows, outputs(rows, func(u []float64) float64 { return math.Exp(5 * sum(u)) }))
	if err != nil {
		t.Fatal(err)
	}
	if !reflect.DeepEqual(straight, bent) {
		t.Errorf("straight %+v, bent %+v", straight, bent)
	}
	if bent.R2 < 0.95 {
		t.Errorf("R2 %g", bent.R2)
	}
}

// Standard errors are those seen over repeated samples with noise.
func TestRegressStandardErrors(t *testing.T) {
	var values []float64
	stated := 0.0
	const repeats = 300
	for seed := range uint64(repeats) {
		rows := Hypercube(100, 4, seed)
		r, err := Regress(rows, outputs(rows, func(u []float64) float64 { return u[0] + 2*u[3] }))
		if err != nil {
			t.Fatal(err)
		}
		values, stated = append(values, r.Inputs[1].Value), stated+r.Inputs[1].Error/repeats
	}
	square := 0.0
	for _, v := range values {
		square += v * v / repeats // the true coefficient is 0
	}
	near(t, "standard error", stated, math.Sqrt(square), 0.15*stated)
}

func TestRegressTakesTiesAndRefusesFaults(t *testing.T) {
	got, err := ranks([]float64{5, 1, 5, 0, 5})
	if err != nil || !reflect.DeepEqual(got, []float64{4, 2, 4, 1, 4}) {
		t.Error(got, err)
	}
	x := [][]float64{{1, 7, 2}, {2, 7, 9}, {3, 7, 1}, {4, 7, 4}, {5, 7, 3}, {6, 7, 8}}
	r, err := Regress(x, []float64{1, 2, 3, 4, 6, 5})
	if err != nil || r.Inputs[1] != (Coefficient{}) || r.Inputs[0].Value < 0.8 {
		t.Error(r, err)
	}
	if _, err := Regress(x, []float64{3, 3, 3, 3, 3, 3}); !errors.Is(err, ErrConstant) {
		t.Error(err)
	}
	for name, c := range map[string]struct {
		x [][]float64
		y []float64
	}{
		"too few":        {x[:4], []float64{1, 2, 3, 4}},
		"none":           {nil, nil},
		"unequal":        {x, []float64{1, 2}},
		"ragged":         {[][]float64{{1}, {2}, {}, {3}}, []float64{1, 2, 3, 4}},
		"NaN output":     {x, []float64{1, 2, math.NaN(), 4, 5, 6}},
		"NaN input":      {[][]float64{{1}, {math.NaN()}, {3}, {4}}, []float64{1, 2, 3, 4}},
		"repeated input": {[][]float64{{1, 1}, {2, 4}, {3, 9}, {4, 16}, {5, 25}}, []float64{1, 3, 2, 5, 4}},
	} {
		if r, err := Regress(c.x, c.y); err == nil {
			t.Errorf("%s: %+v", name, r)
		}
	}
}

// ishigami with a = 7, b = 0.1 of chances.
func ishigami(u []float64) float64 {
	x := func(j int) float64 { return math.Pi * (2*u[j] - 1) }
	return math.Sin(x(0)) + 7*math.Pow(math.Sin(x(1)), 2) + 0.1*math.Pow(x(2), 4)*math.Sin(x(0))
}

// The closed form of Ishigami & Homma 1990, from memory.
func TestIndicesOfIshigami(t *testing.T) {
	const a, b = 7.0, 0.1
	p4 := math.Pow(math.Pi, 4)
	v1, v2, v13 := math.Pow(1+b*p4/5, 2)/2, a*a/8, b*b*p4*p4*(1.0/18-1.0/50)
	v := v1 + v2 + v13
	s, err := Indices(ishigami, 3, 1<<15, 1)
	if err != nil {
		t.Fatal(err)
	}
	near(t, "variance", s.Variance, v, 0.02*v)
	for g, want := range []float64{v1 / v, v2 / v, 0} {
		near(t, "first", s.First[g].Value, want, 0.02)
		near(t, "first in errors", (s.First[g].Value-want)/s.First[g].Error, 0, 4)
	}
	for g, want := range []float64{(v1 + v13) / v, v2 / v, v13 / v} {
		near(t, "total", s.Total[g].Value, want, 0.02)
		near(t, "total in errors", (s.Total[g].Value-want)/s.Total[g].Error, 0, 4)
	}
	t.Logf("%+v", s)
	again, _ := Indices(ishigami, 3, 1<<15, 1)
	if !reflect.DeepEqual(s, again) {
		t.Error("the same seed gives other indices")
	}
}

// Without interplay first and total are the same, and of groups they add.
func TestIndicesOfALinearFunctionAndOfGroups(t *testing.T) {
	weights := []float64{1, 2, 3, 4}
	run := func(d Design) Sensitivity {
		y := make([]float64, d.Runs())
		for i := len(y) - 1; i >= 0; i-- { // in any order
			for j, u := range d.Row(i) {
				y[i] += weights[j] * u
			}
		}
		s, err := d.Indices(y)
		if err != nil {
			t.Fatal(err)
		}
		return s
	}
	for _, c := range []struct {
		groups [][]int
		want   []float64
	}{
		{nil, []float64{1.0 / 30, 4.0 / 30, 9.0 / 30, 16.0 / 30}},
		{[][]int{{0, 3}, {2}}, []float64{17.0 / 30, 9.0 / 30}},
		{[][]int{{0, 1, 2, 3}}, []float64{1}},
	} {
		d, err := NewDesign(4096, 4, c.groups, 9)
		if err != nil {
			t.Fatal(err)
		}
		s := run(d)
		for g, want := range c.want {
			near(t, "first", s.First[g].Value, want, 0.03)
			near(t, "total", s.Total[g].Value, want, 0.03)
		}
	}
	// interplay within a group is the group's own
	d, err := NewDesign(1<<14, 3, [][]int{{0, 2}, {1}}, 6)
	if err != nil {
		t.Fatal(err)
	}
	y := make([]float64, d.Runs())
	for i := range y {
		y[i] = ishigami(d.Row(i))
	}
	s, err := d.Indices(y)
	if err != nil {
		t.Fatal(err)
	}
	for g, want := range []float64{0.5576, 0.4424} {
		near(t, "first of a group", s.First[g].Value, want, 0.02)
		near(t, "total of a group", s.Total[g].Value, want, 0.02)
	}
	y[7] = math.NaN()
	if part, err := d.Indices(y[:4*1000+3]); err != nil || part.Blocks != 999 || part.Missing != 1 {
		t.Errorf("%+v %v", part, err)
	}
}

// Stated standard errors are those seen over repeated designs, to the strata's favour.
func TestIndexErrors(t *testing.T) {
	const repeats = 100
	var first, total Spread
	var firsts, totals []float64
	stated := [2]float64{}
	for seed := range uint64(repeats) {
		s, err := Indices(ishigami, 3, 1024, seed)
		if err != nil {
			t.Fatal(err)
		}
		firsts, totals = append(firsts, s.First[0].Value), append(totals, s.Total[0].Value)
		stated[0] += s.First[0].Error / repeats
		stated[1] += s.Total[0].Error / repeats
	}
	first, total = NewSpread(firsts), NewSpread(totals)
	t.Logf("first %+v, stated %.4f; total %+v, stated %.4f", first, stated[0], total, stated[1])
	for i, s := range []Spread{first, total} {
		seen := (s.High - s.Low) / (2 * z95)
		if ratio := stated[i] / seen; ratio < 0.75 || ratio > 1.8 {
			t.Errorf("index %d: stated %.4f, seen %.4f", i, stated[i], seen)
		}
	}
}

func TestDesignsRefuseFaults(t *testing.T) {
	for name, groups := range map[string][][]int{"empty": {{}}, "beyond": {{3}}, "below": {{-1}}} {
		if _, err := NewDesign(10, 3, groups, 1); err == nil {
			t.Errorf("%s group passes", name)
		}
	}
	if _, err := NewDesign(1, 3, nil, 1); err == nil {
		t.Error("one block passes")
	}
	if _, err := Indices(func([]float64) float64 { return 4 }, 2, 10, 1); !errors.Is(err, ErrConstant) {
		t.Error(err)
	}
	d, _ := NewDesign(10, 3, nil, 1)
	for _, n := range []int{0, 9, 51} {
		if _, err := d.Indices(make([]float64, n)); err == nil || errors.Is(err, ErrConstant) {
			t.Errorf("%d outputs: %v", n, err)
		}
	}
}

func BenchmarkRegress(b *testing.B) {
	rows := Hypercube(2000, 60, 1)
	y := outputs(rows, ishigami)
	for b.Loop() {
		if _, err := Regress(rows, y); err != nil {
			b.Fatal(err)
		}
	}
}

func BenchmarkIndices(b *testing.B) {
	for b.Loop() {
		if _, err := Indices(ishigami, 60, 2000, 1); err != nil {
			b.Fatal(err)
		}
	}
}
