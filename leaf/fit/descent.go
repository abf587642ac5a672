package fit

import (
	"math"

	"gonum.org/v1/gonum/mat"
)

// model is what is fitted: the first n of four parameters, each held to its range.
type model interface {
	// squares is the residual sum of squares at q, normal its normal equations.
	squares(q [4]float64) float64
	normal(q [4]float64) (A [4][4]float64, g [4]float64)
	free() (n int, low, high [4]float64)
}

// descend goes down from q by the Levenberg-Marquardt method (Marquardt 1963, J. Soc. Ind. Appl. Math. 11:431-441) with steps held to the parameters'
// ranges; it gives the residual sum of squares.
func descend(m model, q *[4]float64) float64 {
	n, low, high := m.free()
	damping, rss := 1e-2, m.squares(*q)
	for range 200 {
		A, g := m.normal(*q)
		done := true
		for range 12 {
			step, ok := solve(A, g, n, damping)
			if !ok {
				damping *= 10
				continue
			}
			next := *q
			for i := range n {
				next[i] = math.Max(low[i], math.Min(high[i], next[i]+step[i]))
			}
			if r := m.squares(next); r < rss {
				done = rss-r < 1e-12*(rss+1e-12)
				*q, rss = next, r
				damping = math.Max(1e-12, damping/5)
				break
			}
			damping *= 4
		}
		if done {
			return rss
		}
	}
	return rss
}

// solve is a damped step of the first n parameters.
func solve(A [4][4]float64, g [4]float64, n int, damping float64) (step [4]float64, ok bool) {
	M := mat.NewSymDense(n, nil)
	for i := range n {
		for j := i; j < n; j++ {
			M.SetSym(i, j, A[i][j])
		}
		M.SetSym(i, i, A[i][i]*(1+damping)+1e-15)
	}
	var c mat.Cholesky
	if !c.Factorize(M) {
		return step, false
	}
	x := mat.NewVecDense(n, nil)
	if err := c.SolveVecTo(x, mat.NewVecDense(n, g[:n])); err != nil {
		return step, false
	}
	for i := range n {
		step[i] = x.AtVec(i)
	}
	return step, true
}

// aicc of a least-squares fit of n parameters and a variance (Hurvich & Tsai 1989, Biometrika 76:297-307). Where points are too few for its
// correction the denominator is held at 1.
func aicc(rss, points float64, n int) float64 {
	k := float64(n + 1)
	return points*math.Log(math.Max(rss, 1e-12)/points) + 2*k + 2*k*(k+1)/math.Max(1, points-k-1)
}
