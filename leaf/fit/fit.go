// Package fit finds leaf parameters from readings, leaf by leaf and by least squares: three shapes of light response, compared by AICc, and
// capacities from curves over CO2; each parameter with a 95 % interval, and what is wrong with a curve. It knows no files.
package fit

import (
	"errors"
	"fmt"
	"math"

	"shadeledger/leaf"
)

// Point is one reading of a leaf.
type Point struct {
	PPFD float64 // incident, umol m-2 s-1
	Net  float64 // net assimilation, umol CO2 m-2 s-1
}

// Shape of a light response.
type Shape int

// The shapes.
const (
	NonRectangular Shape = iota // non-rectangular hyperbola (Marshall & Biscoe 1980)
	Exponential                 // Ag (1 - exp(-phi I / Ag)) - Rd
	Rectangular                 // rectangular hyperbola, the first with theta 0
)

func (s Shape) String() string {
	return []string{"non-rectangular hyperbola", "exponential", "rectangular hyperbola"}[s]
}

// Estimate is a value with its 95 % interval, NaN where the readings do not determine it.
type Estimate struct{ Value, SE, Low, High float64 }

// Fit is a response fitted to one leaf.
type Fit struct {
	Shape        Shape
	Ag, Rd, Phi  Estimate // Ag gross light-saturated rate, Rd positive
	Theta        Estimate // curvature; 0 without a standard error for the rectangular hyperbola, NaN for the exponential
	Amax         Estimate // net, Ag - Rd
	Compensation Estimate // light compensation point, umol m-2 s-1
	RMSE         float64  // umol m-2 s-1
	AICc         float64
	Points       int

	interval interval // of Ag, phi, Rd, theta
}

// Net is the fitted net assimilation at a light.
func (f *Fit) Net(ppfd float64) float64 {
	return f.Shape.gross(ppfd, [4]float64{f.Ag.Value, f.Phi.Value, f.Rd.Value, f.Theta.Value}) - f.Rd.Value
}

// Band is half the width of the pointwise 95 % band of the fitted curve at a light, umol m-2 s-1; NaN where the readings do not tell it.
func (f *Fit) Band(ppfd float64) float64 {
	return f.interval.half(f.Shape.slopes(ppfd, [4]float64{f.Ag.Value, f.Phi.Value, f.Rd.Value, f.Theta.Value}))
}

// gross is the response without respiration; q is Ag, phi, Rd, theta.
func (s Shape) gross(ppfd float64, q [4]float64) float64 {
	switch s {
	case Exponential:
		return -q[0] * math.Expm1(-q[1]*ppfd/q[0])
	case Rectangular:
		return leaf.Gross(ppfd, q[0], q[1], 0)
	}
	return leaf.Gross(ppfd, q[0], q[1], q[3])
}

// slopes are the derivatives of net assimilation by Ag, phi, Rd and theta.
func (s Shape) slopes(ppfd float64, q [4]float64) (d [4]float64) {
	x := q[1] * ppfd
	d[2] = -1
	if s == Exponential {
		e := math.Exp(-x / q[0])
		d[0], d[1] = 1-e-x/q[0]*e, ppfd*e
		return d
	}
	theta := q[3]
	if s == Rectangular {
		theta = 0
	}
	// theta P^2 - (x + Ag) P + x Ag = 0, differentiated
	P := leaf.Gross(ppfd, q[0], q[1], theta)
	by := x + q[0] - 2*theta*P
	if by <= 0 {
		by = 1e-12
	}
	d[0], d[1], d[3] = (x-P)/by, (q[0]-P)/by*ppfd, P*P/by
	return d
}

// parameters is how many a shape has.
func (s Shape) parameters() int {
	if s == NonRectangular {
		return 4
	}
	return 3
}

// Range that parameters are held to: phi of any plant is below one CO2 for eight photons, 0.125; theta at its ends is not told from 0 or 1.
const (
	highestPhi             = 0.125
	lowestTheta, mostTheta = 0.0, 0.999
	lowestAg, highestAg    = 0.05, 200.0
	lowestRd, highestRd    = -5.0, 20.0
	brightest              = 4000.0 // light, umol m-2 s-1; full sun is about half of it
)

// Curve fits one shape to the points of a leaf, at least one more than the shape's parameters.
func Curve(points []Point, s Shape) (Fit, error) {
	if len(points) < s.parameters()+1 {
		return Fit{}, fmt.Errorf("%s; a %s needs at least %d", counted(len(points), "point"), s, s.parameters()+1)
	}
	best, rss := [4]float64{}, math.Inf(1)
	for _, theta := range s.starts() {
		q := guess(points)
		q[3] = theta
		if r := descend(light{s, points}, &q); r < rss {
			best, rss = q, r
		}
	}
	if math.IsInf(rss, 1) || math.IsNaN(rss) {
		return Fit{}, errors.New("no parameters fit; are light and assimilation in umol m-2 s-1?")
	}
	return s.result(points, best, rss), nil
}

// counted is a number with its noun.
func counted(n int, noun string) string {
	if n == 1 {
		return "1 " + noun
	}
	return fmt.Sprintf("%d %ss", n, noun)
}

func (s Shape) starts() []float64 {
	if s == NonRectangular {
		return []float64{0.1, 0.5, 0.8, 0.95}
	}
	return []float64{0}
}

// guess starts from the darkest point, the brightest rate and the slope between the dim points.
func guess(points []Point) [4]float64 {
	most, dark, rd := math.Inf(-1), math.Inf(1), 0.5
	for _, p := range points {
		most = math.Max(most, p.Net)
		if p.PPFD < dark {
			dark, rd = p.PPFD, math.Max(0.05, -p.Net)
		}
	}
	slope, n := 0.0, 0.0
	for _, p := range points {
		if p.PPFD > dark && p.PPFD <= 100 {
			slope += (p.Net + rd) / (p.PPFD - dark)
			n++
		}
	}
	phi := 0.045
	if n > 0 {
		phi = math.Max(0.005, math.Min(0.1, slope/n))
	}
	return [4]float64{math.Max(0.5, most+rd), phi, rd, 0}
}

// light is a shape with the points it is fitted to.
type light struct {
	Shape
	points []Point
}

func (l light) free() (n int, low, high [4]float64) {
	return l.parameters(), [4]float64{lowestAg, 1e-5, lowestRd, lowestTheta}, [4]float64{highestAg, highestPhi, highestRd, mostTheta}
}

func (l light) squares(q [4]float64) (sum float64) {
	for _, p := range l.points {
		e := p.Net - l.gross(p.PPFD, q) + q[2]
		sum += e * e
	}
	return sum
}

func (l light) normal(q [4]float64) (A [4][4]float64, g [4]float64) {
	for _, p := range l.points {
		e := p.Net - l.gross(p.PPFD, q) + q[2]
		d := l.slopes(p.PPFD, q)
		for i := range d {
			g[i] += d[i] * e
			for j := range d {
				A[i][j] += d[i] * d[j]
			}
		}
	}
	return A, g
}

// result puts intervals to the parameters: the linear approximation at the optimum, by Student's t over the points less the parameters. A curvature at the end
// of its range is taken as known.
func (s Shape) result(points []Point, q [4]float64, rss float64) Fit {
	n, k := float64(len(points)), s.parameters()
	f := Fit{Shape: s, RMSE: math.Sqrt(rss / n), AICc: aicc(rss, n, k), Points: len(points)}
	told := k
	if s == NonRectangular && (q[3] <= lowestTheta+0.01 || q[3] >= mostTheta-0.005) {
		told = 3
	}
	A, _ := light{s, points}.normal(q)
	f.interval = intervals(A, told, rss, n)
	estimate := f.interval.of
	f.Ag = estimate(q[0], highestAg, [4]float64{1})
	f.Phi = estimate(q[1], highestPhi, [4]float64{0, 1})
	f.Rd = estimate(q[2], highestRd, [4]float64{0, 0, 1})
	f.Amax = estimate(q[0]-q[2], highestAg, [4]float64{1, 0, -1})
	f.Theta = estimate(q[3], mostTheta, [4]float64{0, 0, 0, 1})
	if s == Exponential {
		f.Theta = Estimate{math.NaN(), math.NaN(), math.NaN(), math.NaN()}
	}
	f.Compensation = estimate(s.compensation(q), brightest, s.compensationSlopes(q))
	return f
}

// compensation is the light at which the net rate is zero; NaN where respiration is not positive or not below Ag.
func (s Shape) compensation(q [4]float64) float64 {
	switch {
	case q[2] <= 0 || q[2] >= q[0]:
		return math.NaN()
	case s == Exponential:
		return -q[0] / q[1] * math.Log1p(-q[2]/q[0])
	case s == Rectangular:
		return leaf.Set{Ag: q[0], Rd: q[2], Phi: q[1]}.CompensationPoint()
	}
	return leaf.Set{Ag: q[0], Rd: q[2], Phi: q[1], Theta: q[3]}.CompensationPoint()
}

func (s Shape) compensationSlopes(q [4]float64) (d [4]float64) {
	for i := range d {
		h := 1e-5 * math.Max(1e-3, math.Abs(q[i]))
		up, down := q, q
		up[i], down[i] = q[i]+h, q[i]-h
		if d[i] = (s.compensation(up) - s.compensation(down)) / (2 * h); math.IsNaN(d[i]) {
			d[i] = 0
		}
	}
	return d
}

// Best fits all shapes and gives them in the order of AICc, the best first. Shapes that cannot be fitted are left out.
func Best(points []Point) ([]Fit, error) {
	var out []Fit
	var last error
	for _, s := range []Shape{NonRectangular, Exponential, Rectangular} {
		f, err := Curve(points, s)
		if err != nil {
			last = err
			continue
		}
		at := len(out)
		for at > 0 && out[at-1].AICc > f.AICc {
			at--
		}
		out = append(out[:at], append([]Fit{f}, out[at:]...)...)
	}
	if len(out) == 0 {
		return nil, last
	}
	return out, nil
}
