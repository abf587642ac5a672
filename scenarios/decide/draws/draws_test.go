package draws

import (
	"math"
	"reflect"
	"slices"
	"testing"
)

func near(t *testing.T, what string, got, want, within float64) {
	t.Helper()
	if !(math.Abs(got-want) <= within) {
		t.Errorf("%s: %.6g, want %.6g to %.2g", what, got, want, within)
	}
}

// column is one input of a sample.
func column(rows [][]float64, j int) (out []float64) {
	for _, r := range rows {
		out = append(out, r[j])
	}
	return out
}

// A doubt's percentiles are what was asked for, and 90 % of draws lie between them.
func TestDoubtsAreCovered(t *testing.T) {
	u := column(Hypercube(4000, 1, 3), 0)
	for _, d := range []Doubt{{1, 2, 8}, {-3, 1, 2}, {0, 1, 4}, {5, 5, 9}, {2, 5, 5}, {7, 7, 7}, {-2, -2, -2}} {
		if err := d.Check(); err != nil {
			t.Fatal(err)
		}
		near(t, "5 %", d.At(0.05), d.Low, 1e-12)
		near(t, "50 %", d.At(0.5), d.Best, 1e-12)
		near(t, "95 %", d.At(0.95), d.High, 1e-12)
		last, inside := math.Inf(-1), 0
		var values []float64
		for _, v := range u {
			values = append(values, d.At(v))
			if x := d.At(v); x >= d.Low && x <= d.High {
				inside++
			}
		}
		for i := 1; i < 1000; i++ {
			x := d.At(float64(i) / 1000)
			if x < last {
				t.Fatalf("%v falls at %d", d, i)
			}
			last = x
		}
		s := NewSpread(values)
		width := 0.01 * (d.High - d.Low) // a stratum near the 95th percentile is some 0.1 % of the range
		near(t, "low", s.Low, d.Low, width)
		near(t, "median", s.Median, d.Best, width)
		near(t, "high", s.High, d.High, width)
		if d.Low < d.Best && d.Best < d.High {
			near(t, "inside", float64(inside)/4000, 0.9, 2.0/4000)
		}
	}
}

func TestDoubtEnds(t *testing.T) {
	d := Doubt{1, 2, 4}
	near(t, "held above", d.At(1), 2*math.Pow(2, 3/z95), 1e-12)
	near(t, "held below", d.At(0), 2*math.Pow(0.5, 3/z95), 1e-12)
	if d.At(1) != d.At(1-1e-9) || d.At(0.99) >= d.At(1) {
		t.Error("draws are not held at three deviates")
	}
	for _, u := range []float64{-0.1, 1.1, math.NaN()} {
		if v := d.At(u); !math.IsNaN(v) {
			t.Errorf("chance %g gives %g", u, v)
		}
	}
	for _, bad := range []Doubt{{2, 1, 3}, {1, 3, 2}, {math.NaN(), 1, 2}, {0, 1, math.Inf(1)}} {
		if bad.Check() == nil {
			t.Errorf("%v passes", bad)
		}
	}
}

// Type 7 by hand: of 0 to 10 the quantile p is 10 p.
func TestSpreadLeavesOutWhatIsNoNumber(t *testing.T) {
	values := []float64{10, 3, math.NaN(), 0, 1, 2, 9, 8, 7, 6, 5, 4, math.NaN()}
	before := slices.Clone(values)
	s := NewSpread(values)
	near(t, "low", s.Low, 0.5, 1e-12)
	near(t, "median", s.Median, 5, 0)
	near(t, "high", s.High, 9.5, 1e-12)
	if s.Counted != 11 || s.Missing != 2 || values[0] != before[0] || values[1] != before[1] {
		t.Errorf("%+v, values now %v", s, values)
	}
	if e := NewSpread([]float64{math.NaN()}); !math.IsNaN(e.Median) || e.Counted != 0 || e.Missing != 1 {
		t.Errorf("%+v", e)
	}
}

func TestHypercubeHitsEveryStratumOnce(t *testing.T) {
	const n, k = 500, 20
	rows := Hypercube(n, k, 11)
	for j := range k {
		var hit [n]int
		for _, u := range column(rows, j) {
			if !(u > 0 && u < 1) {
				t.Fatalf("chance %g", u)
			}
			hit[int(u*n)]++
		}
		for i, h := range hit {
			if h != 1 {
				t.Errorf("column %d: stratum %d hit %d times", j, i, h)
			}
		}
	}
	if !reflect.DeepEqual(rows, Hypercube(n, k, 11)) {
		t.Error("the same seed gives other draws")
	}
	if reflect.DeepEqual(rows[0], Hypercube(n, k, 12)[0]) {
		t.Error("another seed gives the same draws")
	}
}

// The first tenth of the rows has the mean and the variance of the whole, and no two columns go together.
func TestHypercubePrefixIsFair(t *testing.T) {
	const n, k = 2000, 60
	rows := Hypercube(n, k, 5)
	m := n / 10
	var y [k][]float64
	for j := range k {
		y[j] = column(rows, j)
		sum, square := 0.0, 0.0
		for _, u := range y[j][:m] {
			sum += u
			square += (u - 0.5) * (u - 0.5)
		}
		near(t, "mean", sum/float64(m), 0.5, 4*math.Sqrt(1.0/12/float64(m)))
		near(t, "variance", square/float64(m), 1.0/12, 4*math.Sqrt(1.0/180/float64(m)))
		for i := range j {
			r := 0.0
			for q := range n {
				r += 12 * (y[i][q] - 0.5) * (y[j][q] - 0.5) / n
			}
			near(t, "correlation", r, 0, 5/math.Sqrt(n)) // 1770 pairs
		}
	}
}

func BenchmarkHypercube(b *testing.B) {
	for b.Loop() {
		Hypercube(2000, 60, 1)
	}
}
