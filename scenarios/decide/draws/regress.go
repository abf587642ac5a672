package draws

import (
	"errors"
	"fmt"
	"math"
	"slices"

	"gonum.org/v1/gonum/mat"
)

// ErrConstant says that an output is the same in every run: nothing drives it.
var ErrConstant = errors.New("the output is the same in every run")

// worstCondition of the inputs' ranks: beyond it columns repeat one another. Common practice, from memory.
const worstCondition = 1e10

// Regression tells by how much an output's rank moves with each input's rank.
type Regression struct {
	Inputs []Coefficient // by column
	R2     float64       // share of the variance of the output's ranks that they explain, 0 to 1
}

// Coefficient is one input's. All are 0 for a column that does not vary.
type Coefficient struct {
	Value float64 // standardised rank regression coefficient
	Error float64 // its standard error
	Share float64 // of explained variance: value times rank correlation with the output; they add to R2, and may be negative
}

// Regress takes standardised rank regression coefficients of y on the columns of x: inputs and output are replaced by ranks (equal values
// by their mean rank), brought to mean 0 and variance 1, and fitted by least squares through QR (Iman & Conover 1979, Technometrics
// 21:499-509; Saltelli et al. 2008, Global Sensitivity Analysis: The Primer, both from memory). Standard errors are those of least squares with
// n - p - 1 degrees of freedom, p columns that vary. The share is Pratt's product measure (from memory). Fewer than k + 2 runs,
// rows of unequal length, numbers that are NaN and columns that repeat one another are errors; so is ErrConstant.
func Regress(x [][]float64, y []float64) (Regression, error) {
	n := len(y)
	if len(x) != n || n == 0 {
		return Regression{}, fmt.Errorf("%d rows of inputs and %d outputs: there must be as many, and some", len(x), n)
	}
	k := len(x[0])
	if n < k+2 {
		return Regression{}, fmt.Errorf("%d runs are too few for %d inputs: at least %d", n, k, k+2)
	}
	out := Regression{Inputs: make([]Coefficient, k)}
	right, varies, err := scores(y)
	if err != nil {
		return Regression{}, fmt.Errorf("output: %w", err)
	}
	if !varies {
		return Regression{}, ErrConstant
	}
	columns, which, err := varying(x, k)
	if err != nil || len(which) == 0 {
		return out, err
	}
	return out, out.fit(columns, which, right)
}

// varying gives the scores of columns that vary, and which they are.
func varying(x [][]float64, k int) (columns [][]float64, which []int, err error) {
	column := make([]float64, len(x))
	for j := range k {
		for i, row := range x {
			if len(row) != k {
				return nil, nil, fmt.Errorf("row %d has %d inputs, the first has %d", i+1, len(row), k)
			}
			column[i] = row[j]
		}
		s, varies, err := scores(column)
		if err != nil {
			return nil, nil, fmt.Errorf("input %d: %w", j+1, err)
		}
		if varies {
			columns, which = append(columns, s), append(which, j)
		}
	}
	return columns, which, nil
}

// fit solves for the coefficients of columns and fills in theirs.
func (r *Regression) fit(columns [][]float64, which []int, y []float64) error {
	n, p := len(y), len(columns)
	a := mat.NewDense(n, p, nil)
	for j, c := range columns {
		a.SetCol(j, c)
	}
	var qr mat.QR
	qr.Factorize(a)
	if !(qr.Cond() < worstCondition) {
		return errors.New("some inputs repeat one another; leave one of them out")
	}
	right := mat.NewVecDense(n, y)
	var beta, fitted mat.VecDense
	if err := qr.SolveVecTo(&beta, false, right); err != nil {
		return err
	}
	fitted.MulVec(a, &beta)
	fitted.SubVec(right, &fitted)
	left := mat.Dot(&fitted, &fitted)
	var full mat.Dense
	qr.RTo(&full)
	upper, inverse := mat.NewTriDense(p, mat.Upper, nil), mat.NewTriDense(p, mat.Upper, nil)
	upper.Copy(full.Slice(0, p, 0, p))
	if err := inverse.InverseTri(upper); err != nil {
		return err
	}
	sigma := math.Sqrt(left / float64(n-p-1))
	for j, at := range which {
		value, square := beta.AtVec(j), 0.0
		for m := j; m < p; m++ {
			square += inverse.At(j, m) * inverse.At(j, m)
		}
		r.Inputs[at] = Coefficient{value, sigma * math.Sqrt(square), value * mat.Dot(a.ColView(j), right) / float64(n)}
	}
	r.R2 = 1 - left/float64(n)
	return nil
}

// scores are ranks brought to mean 0 and variance 1, and whether they vary.
func scores(values []float64) (out []float64, varies bool, err error) {
	out, err = ranks(values)
	if err != nil {
		return nil, false, err
	}
	mean, sum := float64(len(out)+1)/2, 0.0
	for i := range out {
		out[i] -= mean
		sum += out[i] * out[i]
	}
	if sum == 0 {
		return out, false, nil
	}
	scale := math.Sqrt(float64(len(out)) / sum)
	for i := range out {
		out[i] *= scale
	}
	return out, true, nil
}

// ranks count from 1; equal values share their mean rank.
func ranks(values []float64) ([]float64, error) {
	type placed struct {
		value float64
		at    int
	}
	order := make([]placed, len(values))
	for i, v := range values {
		if math.IsNaN(v) {
			return nil, fmt.Errorf("run %d is not a number", i+1)
		}
		order[i] = placed{v, i}
	}
	slices.SortFunc(order, func(a, b placed) int {
		switch {
		case a.value < b.value:
			return -1
		case a.value > b.value:
			return 1
		}
		return a.at - b.at
	})
	out := make([]float64, len(values))
	for from := 0; from < len(order); {
		to := from + 1
		for to < len(order) && order[to].value == order[from].value {
			to++
		}
		for _, o := range order[from:to] {
			out[o.at] = float64(from+to+1) / 2
		}
		from = to
	}
	return out, nil
}
