package canopy

import (
	"math"

	"gonum.org/v1/gonum/integrate/quad"
	"gonum.org/v1/gonum/mat"
)

// Incidence holds, for a leaf angle distribution, rules for the mean over mu, the cosine of incidence of the
// beam on a leaf, for every elevation of the sun: mu = |cos theta cos a + sin theta sin a cos psi|, psi
// uniform, leaf inclination a from g(a) ~ chi^3 sin a / (cos^2 a + chi^2 sin^2 a)^2 (Campbell 1990, Agric. For.
// Meteorol. 49:173-176). Each is the Gauss rule of the distribution itself, by the discretised Stieltjes
// procedure (Gautschi 2004, Orthogonal Polynomials, sec. 2.2), scaled so that the mean of mu is G exactly.
type Incidence struct {
	Node, Weight [elevations][IncidenceNodes]float64 // nodes relative to their mean
}

// IncidenceNodes is how many incidences a rule has.
const IncidenceNodes = 5

const (
	elevations = 46 // every 2 degrees
	angleNodes = 32 // of leaf inclination
	turnNodes  = 48 // of leaf azimuth, half a turn
)

// IncidenceRule is the index of the rule nearest to a sun elevation, rad.
func IncidenceRule(β float64) int {
	return max(0, min(elevations-1, int(math.Round(β/(math.Pi/2)*(elevations-1)))))
}

// NewIncidence works out the rules for chi.
func NewIncidence(chi float64) *Incidence {
	var in Incidence
	a, wa := make([]float64, angleNodes), make([]float64, angleNodes)
	quad.Legendre{}.FixedLocations(a, wa, 0, math.Pi/2)
	for j := range a {
		s, c := math.Sincos(a[j])
		d := c*c + chi*chi*s*s
		wa[j] *= s / (d * d)
	}
	mu := make([]float64, 0, angleNodes*turnNodes)
	w := make([]float64, 0, angleNodes*turnNodes)
	var turn [turnNodes]float64
	for k := range turn {
		turn[k] = math.Cos((float64(k) + 0.5) / turnNodes * math.Pi)
	}
	for e := range elevations {
		mu, w = mu[:0], w[:0]
		sinβ, cosβ := math.Sincos(float64(e) / (elevations - 1) * math.Pi / 2)
		for j := range a {
			sa, ca := math.Sincos(a[j])
			for _, t := range turn {
				mu = append(mu, math.Abs(sinβ*ca+cosβ*sa*t))
				w = append(w, wa[j])
			}
		}
		in.Node[e], in.Weight[e] = gaussRule(mu, w)
		mean := 0.0
		for i := range IncidenceNodes {
			mean += in.Weight[e][i] * in.Node[e][i]
		}
		for i := range IncidenceNodes {
			in.Node[e][i] /= mean
		}
	}
	return &in
}

// gaussRule is the Gauss rule of a discrete measure, its weights summing to 1: recurrence coefficients by Stieltjes,
// nodes and weights from the Jacobi matrix (Golub & Welsch 1969).
func gaussRule(x, w []float64) (node, weight [IncidenceNodes]float64) {
	n := len(x)
	prev, cur := make([]float64, n), make([]float64, n)
	for i := range cur {
		cur[i] = 1
	}
	J := mat.NewSymDense(IncidenceNodes, nil)
	norm, before := 0.0, 0.0
	for _, v := range w {
		norm += v
	}
	for k := range IncidenceNodes {
		xpp := 0.0
		for i := range x {
			xpp += w[i] * x[i] * cur[i] * cur[i]
		}
		alpha := xpp / norm
		J.SetSym(k, k, alpha)
		beta := 0.0
		if k > 0 {
			beta = norm / before
		}
		next := 0.0
		for i := range x {
			p := (x[i]-alpha)*cur[i] - beta*prev[i]
			prev[i], cur[i] = cur[i], p
			next += w[i] * p * p
		}
		before, norm = norm, next
		if k+1 < IncidenceNodes {
			J.SetSym(k, k+1, math.Sqrt(next/before))
		}
	}
	var eig mat.EigenSym
	if !eig.Factorize(J, true) {
		panic("canopy: eigenvalues of a symmetric matrix did not converge")
	}
	var V mat.Dense
	eig.VectorsTo(&V)
	for i, v := range eig.Values(nil) {
		node[i] = v
		weight[i] = V.At(0, i) * V.At(0, i)
	}
	return node, weight
}
