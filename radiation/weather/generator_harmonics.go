package weather

import "math"

// mostHarmonics is the highest harmonic of the year in any fit; with it a season has 2*3 + 1 coefficients.
const mostHarmonics = 3

// terms is the number of coefficients of an order.
func terms(order int) int { return 2*order + 1 }

// wave is a curve over the year by its coefficients: constant, cosine, sine of each harmonic.
type wave []float64

// at is the curve on a day of the table of days.
func (w wave) at(day int) float64 {
	basis := basisOf(day)
	sum := 0.0
	for i, c := range w {
		sum += c * basis[i]
	}
	return sum
}

// basisOf gives the terms of a day.
func basisOf(day int) (b [2*mostHarmonics + 1]float64) {
	b[0] = 1
	t := 2 * math.Pi * (float64(day) + 0.5) / leapDays
	for k := 1; k <= mostHarmonics; k++ {
		b[2*k-1], b[2*k] = math.Cos(float64(k)*t), math.Sin(float64(k)*t)
	}
	return b
}

// point is an observed value on a day of the table of days.
type point struct {
	day   int
	value float64
}

// family says how values scatter round their mean and what curve the harmonics make of it (generalised linear
// models, McCullagh & Nelder 1989): the linear predictor of the overall mean, and the working response of iterated
// least squares at a linear predictor. Both kinds here have constant working weight.
type family struct {
	first func(mean float64) float64
	step  func(eta, y float64) (response float64)
}

// normalFamily is plain least squares.
var normalFamily = family{
	first: func(mean float64) float64 { return mean },
	step:  func(_, y float64) float64 { return y },
}

// gammaFamily is a gamma distribution of constant shape with the logarithm of its mean in harmonics.
var gammaFamily = family{
	first: func(mean float64) float64 { return math.Log(math.Max(mean, 1e-9)) },
	step:  func(eta, y float64) float64 { return eta + y*math.Exp(-eta) - 1 },
}

// ridge pulls harmonics towards 0, in observations: enough to keep a fit finite where a season has no wet day
// at all, too little to be seen elsewhere.
const ridge = 0.5

// fit finds the curve of an order by iterated weighted least squares.
func (f family) fit(points []point, order int) wave {
	n := terms(order)
	w := make(wave, n)
	mean := 0.0
	for _, p := range points {
		mean += p.value / float64(len(points))
	}
	w[0] = f.first(mean)
	for range 30 {
		var m [terms3][terms3 + 1]float64
		for _, p := range points {
			b := basisOf(p.day)
			response := f.step(w.at(p.day), p.value)
			for i := range n {
				for j := range n {
					m[i][j] += b[i] * b[j]
				}
				m[i][terms3] += b[i] * response
			}
		}
		for i := 1; i < n; i++ {
			m[i][i] += ridge
		}
		next := eliminate(&m, n)
		change := 0.0
		for i := range next {
			next[i] = math.Max(w[i]-4, math.Min(w[i]+4, next[i])) // no wild steps on the log scales
			change = math.Max(change, math.Abs(next[i]-w[i]))
		}
		w = next
		if change < 1e-9 {
			break
		}
	}
	return w
}

const terms3 = 2*mostHarmonics + 1

// eliminate solves the normal equations, positive definite by the ridge; the right side stands in the last column.
func eliminate(m *[terms3][terms3 + 1]float64, n int) wave {
	for i := range n {
		for r := i + 1; r < n; r++ {
			f := m[r][i] / m[i][i]
			for c := i; c < n; c++ {
				m[r][c] -= f * m[i][c]
			}
			m[r][terms3] -= f * m[i][terms3]
		}
	}
	x := make(wave, n)
	for i := n - 1; i >= 0; i-- {
		x[i] = m[i][terms3]
		for c := i + 1; c < n; c++ {
			x[i] -= m[i][c] * x[c]
		}
		x[i] /= m[i][i]
	}
	return x
}
