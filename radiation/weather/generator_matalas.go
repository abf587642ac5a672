package weather

import (
	"math"
	"math/rand/v2"
)

// vector holds the standardised residuals of a day; matrix acts on it. Only the first size places count.
type (
	vector [variables]float64
	matrix [variables][variables]float64
)

// matalas is the stationary process of first order x(t) = A x(t-1) + B e(t) with standard normal e that keeps
// the correlations M0 of one day and M1 of a day (rows) with the day before (columns): A = M1 M0^-1,
// B B' = M0 - A M1' (Matalas 1967, Water Resources Research 3:937-945, eqs 5 to 8). B and the root of M0 are lower
// triangular.
type matalas struct {
	size    int
	a, b    matrix
	initial matrix // root of M0: draws the first day
}

// newMatalas finds A and B from the correlations. Where sampling left M0 - A M1' without a real root, its
// diagonal is raised until it has one, which lowers the correlations slightly.
func newMatalas(size int, m0, m1 matrix) matalas {
	p := matalas{size: size}
	p.initial = p.root(m0)
	p.a = p.overM0(m1)
	var rest matrix
	for i := range size {
		for j := range size {
			rest[i][j] = m0[i][j]
			for k := range size {
				rest[i][j] -= p.a[i][k] * m1[j][k]
			}
		}
	}
	p.b = p.root(rest)
	return p
}

// root is the lower triangular L with L L' = m (Cholesky).
func (p *matalas) root(m matrix) matrix {
	for raise := 0.0; ; raise = math.Max(1e-9, 4*raise) {
		var l matrix
		sound := true
		for i := range p.size {
			for j := range i + 1 {
				sum := m[i][j]
				if i == j {
					sum += raise
				}
				for k := range j {
					sum -= l[i][k] * l[j][k]
				}
				if i == j {
					sound = sound && sum > 0
					l[i][i] = math.Sqrt(math.Max(sum, 1e-300))
				} else {
					l[i][j] = sum / l[j][j]
				}
			}
		}
		if sound || raise > 1 {
			return l
		}
	}
}

// overM0 solves X M0 = m by the root of M0, row by row.
func (p *matalas) overM0(m matrix) (x matrix) {
	l := &p.initial
	for r := range p.size {
		var y vector
		for i := range p.size { // L y = m'
			y[i] = m[r][i]
			for k := range i {
				y[i] -= l[i][k] * y[k]
			}
			y[i] /= l[i][i]
		}
		for i := p.size - 1; i >= 0; i-- { // L' x = y
			x[r][i] = y[i]
			for k := i + 1; k < p.size; k++ {
				x[r][i] -= l[k][i] * x[r][k]
			}
			x[r][i] /= l[i][i]
		}
	}
	return x
}

// start draws the residuals of a first day.
func (p *matalas) start(from *rand.Rand) vector {
	return p.times(&p.initial, p.noise(from))
}

// next draws the residuals of the day after.
func (p *matalas) next(from *rand.Rand, was vector) vector {
	x, e := p.times(&p.a, was), p.times(&p.b, p.noise(from))
	for i := range p.size {
		x[i] += e[i]
	}
	return x
}

func (p *matalas) noise(from *rand.Rand) (e vector) {
	for i := range p.size {
		e[i] = from.NormFloat64()
	}
	return e
}

func (p *matalas) times(m *matrix, v vector) (out vector) {
	for i := range p.size {
		for k := range p.size {
			out[i] += m[i][k] * v[k]
		}
	}
	return out
}

// meanVariance is the variance of the mean of variable v over n days in a row: sum over lags of its autocorrelation.
func (p *matalas) meanVariance(v, n int) float64 {
	var lag matrix // correlations of a day with the day k before, A^k M0
	for i := range p.size {
		for j := range p.size {
			for k := range p.size {
				lag[i][j] += p.initial[i][k] * p.initial[j][k]
			}
		}
	}
	sum := float64(n) * lag[v][v]
	for k := 1; k < n; k++ {
		var next matrix
		for i := range p.size {
			for j := range p.size {
				for l := range p.size {
					next[i][j] += p.a[i][l] * lag[l][j]
				}
			}
		}
		lag = next
		sum += 2 * float64(n-k) * lag[v][v]
	}
	return sum / float64(n*n)
}

// correlationsOf are the stationary correlations of x(t) = A x(t-1) + B e(t): M0 = A M0 A' + B B', M1 = A M0, scaled to a
// unit diagonal of M0.
func correlationsOf(size int, a, b matrix) (m0, m1 matrix) {
	p := matalas{size: size}
	for range 200 { // the spectral radius of A is below 0.8
		var next matrix
		for i := range size {
			for j := range size {
				for k := range size {
					next[i][j] += b[i][k] * b[j][k]
					for l := range size {
						next[i][j] += a[i][k] * m0[k][l] * a[j][l]
					}
				}
			}
		}
		m0 = next
	}
	for j := range size {
		var column vector
		for i := range size {
			column[i] = m0[i][j]
		}
		for i, v := range p.times(&a, column) {
			m1[i][j] = v
		}
	}
	var sd vector
	for i := range size {
		sd[i] = math.Sqrt(m0[i][i])
	}
	for i := range size {
		for j := range size {
			m0[i][j] /= sd[i] * sd[j]
			m1[i][j] /= sd[i] * sd[j]
		}
	}
	return m0, m1
}
