package ledger

import (
	"math"

	"gonum.org/v1/gonum/integrate/quad"

	"shadeledger/canopy"
)

// crown is how a seedling's crown takes in light: at Gauss-Legendre depths l over 0..L_c, the share of light from
// each ring of the sky that a unit of leaf area gets, and the sunlit share's extinction.
type crown struct {
	chi    float64
	lai    float64   // L_c
	depth  []float64 // l, m2 m-2
	weight []float64 // sum 1
	// ring[j*rings+r]: mean of G_s e over ring r, e = exp(-sqrt(alpha_s) G_s l / cos theta)
	ring []float64
	// uniform[j] = integral of (1/pi) G_s e over the hemisphere: light scattered down by the overstory
	uniform []float64
	rings   int
}

// depthNodes is enough for the mean over the crown to 0.05 %.
func depthNodes(crownLAI float64) int {
	switch {
	case crownLAI <= 0.6:
		return 2
	case crownLAI <= 2:
		return 3
	case crownLAI <= 4:
		return 4
	}
	return maxDepths
}

// maxDepths is the most depths that a crown has.
const maxDepths = 6

func newCrown(p *Plant, zenith []float64) *crown {
	n := depthNodes(p.CrownLAI)
	c := &crown{chi: p.Chi, depth: make([]float64, n), weight: make([]float64, n), rings: len(zenith) - 1}
	quad.Legendre{}.FixedLocations(c.depth, c.weight, 0, 1)
	for j, t := range c.depth {
		c.depth[j], c.weight[j] = t*t*p.CrownLAI, 2*t*c.weight[j]
	}
	c.lai = p.CrownLAI
	root := math.Sqrt(p.Absorptance)
	c.ring = make([]float64, n*c.rings)
	c.uniform = make([]float64, n)
	for r := range c.rings {
		// the mean over the crown's depth is known in closed form; the nodes are scaled to meet it
		exact, solid := ringMean(zenith[r], zenith[r+1], func(sin, cos float64) float64 {
			G := canopy.LeafProjection(c.chi, cos, sin)
			return G * meanDecay(root*G*c.lai/cos)
		})
		sum := 0.0
		for j, l := range c.depth {
			mean, _ := ringMean(zenith[r], zenith[r+1], func(sin, cos float64) float64 {
				G := canopy.LeafProjection(c.chi, cos, sin)
				return G * math.Exp(-root*G*l/cos)
			})
			c.ring[j*c.rings+r] = mean
			sum += c.weight[j] * mean
		}
		for j := range c.depth {
			c.ring[j*c.rings+r] *= exact / sum
			c.uniform[j] += 2 * c.ring[j*c.rings+r] * solid
		}
	}
	return c
}

// meanDecay is the mean of exp(-x t) over t in 0..1.
func meanDecay(x float64) float64 {
	if x < 1e-8 {
		return 1
	}
	return -math.Expm1(-x) / x
}

// ringMean is the mean of f over a ring weighted by solid angle, and the ring's integral of sin theta.
func ringMean(from, to float64, f func(sin, cos float64) float64) (mean, solid float64) {
	const steps = 24
	for i := range steps {
		sin, cos := math.Sincos(from + (float64(i)+0.5)/steps*(to-from))
		mean += f(sin, cos) * sin
		solid += sin
	}
	return mean / solid, math.Cos(from) - math.Cos(to)
}

// diffuse gives I_d at every depth for unit D_above from a ring shape.
func (c *crown) diffuse(shape []float64, out []float64) {
	for j := range out {
		f := c.ring[j*c.rings : (j+1)*c.rings]
		sum := 0.0
		for r, v := range shape[:len(f)] {
			sum += v * f[r]
		}
		out[j] = sum
	}
}

// sunlit gives exp(-G_s l / cos theta_sun), without the beam chance, at every depth.
func (c *crown) sunlit(β float64, out []float64) {
	sin, cos := math.Sincos(β)
	K := canopy.LeafProjection(c.chi, sin, cos) / math.Max(sin, 1e-9)
	sum := 0.0
	for j, l := range c.depth {
		out[j] = math.Exp(-K * l)
		sum += c.weight[j] * out[j]
	}
	if sum == 0 { // the sun stands on the horizon: what is lit is the crown's outermost leaf
		out[0] = meanDecay(K*c.lai) / c.weight[0]
		return
	}
	for j := range out {
		out[j] *= meanDecay(K*c.lai) / sum
	}
}
