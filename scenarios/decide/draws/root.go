package draws

import "math"

// mostTries bounds a search; every three tries at least halve the bracket, so that 200 shrink it by more than 2^60.
const mostTries = 200

// Zero is what a search for a root found.
type Zero struct {
	X           float64 // NaN where the ends have the same sign
	Evaluations int
	Converged   bool
}

// Root finds where a continuous f crosses zero between a and b, to tol in x or as near as numbers lie. False position in the Illinois
// form (Dowell & Jarratt 1971, BIT 11:168-174, from memory), with a halving where three tries have not halved the bracket. It has not converged where f has the same
// sign at both ends, is not a number, or after 200 evaluations; X is then the middle of the last bracket, if there was one.
func Root(f func(float64) float64, a, b, tol float64) Zero {
	fa, fb := f(a), f(b)
	switch {
	case fa == 0:
		return Zero{a, 2, true}
	case fb == 0:
		return Zero{b, 2, true}
	case !(fa < 0 && fb > 0 || fa > 0 && fb < 0):
		return Zero{math.NaN(), 2, false}
	}
	last := 0 // the end moved last: -1 for a, 1 for b
	before := math.Abs(b - a)
	for tries := 2; tries < mostTries; tries++ {
		middle, width := a+(b-a)/2, math.Abs(b-a)
		if width <= tol || middle == a || middle == b {
			return Zero{middle, tries, true}
		}
		x := (a*fb - b*fa) / (fb - fa)
		x = max(min(a, b)+tol/2, min(max(a, b)-tol/2, x)) // past the root, so that both ends close in
		slow := tries%3 == 1 && width > before/2
		if slow || !(x > min(a, b) && x < max(a, b)) {
			x = middle
		}
		switch {
		case slow:
			before = width / 2
		case tries%3 == 1:
			before = width
		}
		fx := f(x)
		switch {
		case fx == 0:
			return Zero{x, tries + 1, true}
		case math.IsNaN(fx):
			return Zero{middle, tries + 1, false}
		case fx < 0 == (fa < 0):
			if a, fa = x, fx; last == -1 {
				fb /= 2
			}
			last = -1
		default:
			if b, fb = x, fx; last == 1 {
				fa /= 2
			}
			last = 1
		}
	}
	return Zero{a + (b-a)/2, mostTries, false}
}
