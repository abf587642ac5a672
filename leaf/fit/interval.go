package fit

import (
	"math"

	"gonum.org/v1/gonum/mat"
	"gonum.org/v1/gonum/stat/distuv"
)

// confidence of intervals.
const confidence = 0.95

// singular is the condition of the normal matrix, scaled to a diagonal of ones, above which parameters are not told apart: rounding of 1e-16 would
// leave less than four digits of its inverse.
const singular = 1e12

// interval is what the linear approximation at the optimum tells of the parameters.
type interval struct {
	covariance [4][4]float64 // NaN where readings do not tell
	quantile   float64       // of Student's t over the points less the parameters that are told
}

// intervals of the first n parameters from their normal equations. A parameter on which no reading depends, with 0 on the diagonal, is not told and leaves the others
// alone; where the rest is singular none is. Parameters from n on are taken as known.
func intervals(A [4][4]float64, n int, rss, points float64) (v interval) {
	var told []int
	for i := range n {
		if A[i][i] > 0 {
			told = append(told, i)
		}
		for j := range n {
			v.covariance[i][j] = math.NaN()
		}
	}
	freedom := math.Max(1, points-float64(len(told)))
	v.quantile = distuv.StudentsT{Mu: 0, Sigma: 1, Nu: freedom}.Quantile((1 + confidence) / 2)
	if len(told) == 0 {
		return v
	}
	M := mat.NewSymDense(len(told), nil)
	scale := func(i, j int) float64 { return math.Sqrt(A[i][i]) * math.Sqrt(A[j][j]) }
	for k, i := range told {
		for l, j := range told[:k+1] {
			M.SetSym(k, l, A[i][j]/scale(i, j))
		}
	}
	var c mat.Cholesky
	var inverse mat.SymDense
	if !c.Factorize(M) || !(c.Cond() < singular) || c.InverseTo(&inverse) != nil {
		return v
	}
	for k, i := range told {
		for l, j := range told {
			v.covariance[i][j] = rss / freedom * inverse.At(k, l) / scale(i, j)
		}
	}
	return v
}

// variance of what has these slopes by the parameters; NaN where it depends on one that is not told.
func (v *interval) variance(slopes [4]float64) (sum float64) {
	for i, a := range slopes {
		for j, b := range slopes {
			if a != 0 && b != 0 {
				sum += a * v.covariance[i][j] * b
			}
		}
	}
	return math.Max(0, sum)
}

// half is half the width of the interval of what has these slopes.
func (v *interval) half(slopes [4]float64) float64 { return v.quantile * math.Sqrt(v.variance(slopes)) }

// of is a value with its interval. One whose half exceeds all that the value may be, most, tells nothing: NaN.
func (v *interval) of(value, most float64, slopes [4]float64) Estimate {
	half := v.half(slopes)
	if half > most {
		half = math.NaN()
	}
	return Estimate{value, half / v.quantile, value - half, value + half}
}
