package ledger

import (
	"math"

	"shadeledger/canopy"
	"shadeledger/leaf"
	"shadeledger/scenarios/light"
)

// curve is the light response of one trait set, with 4 (1 - theta) and 1/(2 theta) kept.
type curve struct{ ag, phi, bend, half, cap float64 }

// sharp is the curvature above which the hyperbola may be taken from its difference form: the rounding error then stays
// below 1e-13 of ag, and it needs no division.
const sharp = 0.05

func newCurve(s leaf.Set) curve {
	c := curve{ag: s.Ag, phi: s.Phi, bend: 4 * (1 - s.Theta), cap: s.Cap}
	if s.Theta >= sharp {
		c.half = 1 / (2 * s.Theta)
	}
	return c
}

// gross is the non-rectangular hyperbola at incident PPFD I of a leaf whose rate ag is given; see leaf.Gross.
func (c *curve) gross(I, ag float64) float64 {
	x := c.phi * I
	X, d, S := x*ag, x-ag, x+ag
	root := math.Sqrt(d*d + c.bend*X)
	if c.half > 0 {
		return c.half * (S - root)
	}
	return 2 * X / (S + root)
}

// uniformMu is a rule for the mean over mu uniform on 0..1: Gauss-Legendre of five nodes in sqrt(mu), dense where
// leaves saturate.
var uniformMu = func() (rule struct {
	node, weight [canopy.IncidenceNodes]float64
}) {
	x := [canopy.IncidenceNodes]float64{-0.906179845938664, -0.5384693101056831, 0, 0.5384693101056831, 0.906179845938664}
	w := [canopy.IncidenceNodes]float64{0.23692688505618908, 0.47862867049936647, 0.5688888888888889, 0.47862867049936647, 0.23692688505618908}
	for i := range x {
		t := (1 + x[i]) / 2
		rule.node[i], rule.weight[i] = t*t, w[i]*t
	}
	return rule
}()

// rule gives the nodes (as PPFD from the beam) and weights of the incidence mean of a step.
func (r *Prepared) rule(s *step, node *[canopy.IncidenceNodes]float64) *[canopy.IncidenceNodes]float64 {
	if r.angle == nil {
		for i, v := range uniformMu.node {
			node[i] = s.normal * v
		}
		return &uniformMu.weight
	}
	scale := s.normal * s.mu
	for i, v := range r.angle.Node[s.rule] {
		node[i] = scale * v
	}
	return &r.angle.Weight[s.rule]
}

// scratch is one worker's working space for one plant.
type scratch struct {
	diffuse []float64 // by shape and depth: I_d for unit D_above
	bins    bins
}

// shapes works out I_d for unit D_above of every ring shape of a regime.
func (r *Prepared) shapes(g *light.Regime, w *scratch) {
	n, rings := len(r.crown.depth), r.crown.rings
	k := len(g.ShapeRings) / rings
	if cap(w.diffuse) < k*n {
		w.diffuse = make([]float64, k*n)
	}
	w.diffuse = w.diffuse[:k*n]
	for s := range k {
		r.crown.diffuse(g.ShapeRings[s*rings:(s+1)*rings], w.diffuse[s*n:(s+1)*n])
	}
}

// rates is gross income of one step per m2 of leaf, umol m-2 s-1: of shade light and of sunflecks.
type rates struct{ shade, fleck float64 }

// moment is the light on the leaves in one step.
type moment struct {
	sky    []float64 // I_d from the sky by depth, umol m-2 s-1
	sunlit []float64 // exp(-G_s l / cos theta_sun) by depth
	beam   float64   // chance that the sun is seen
	down   float64   // scattered beam on the level plane, umol m-2 s-1
}

// rate is the crown's mean gross income in one step.
func (r *Prepared) rate(s *step, m *moment, c *curve) (out rates) {
	var node [canopy.IncidenceNodes]float64
	if c.cap > 0 {
		return r.capped(s, m, c)
	}
	ag := c.ag * s.factor
	if m.beam <= 0 || s.normal <= 0 {
		for j, wj := range r.crown.weight {
			out.shade += wj * c.gross(m.sky[j]+m.down*r.crown.uniform[j], ag)
		}
		return out
	}
	weight := r.rule(s, &node)
	for j, wj := range r.crown.weight {
		Id := m.sky[j] + m.down*r.crown.uniform[j]
		P := c.gross(Id, ag)
		mean := weight[0]*c.gross(Id+node[0], ag) + weight[1]*c.gross(Id+node[1], ag) + weight[2]*c.gross(Id+node[2], ag) +
			weight[3]*c.gross(Id+node[3], ag) + weight[4]*c.gross(Id+node[4], ag)
		out.shade += wj * P
		out.fleck += wj * m.beam * m.sunlit[j] * (mean - P)
	}
	return out
}

// capped is rate of a biochemical leaf: no more than Rubisco allows.
func (r *Prepared) capped(s *step, m *moment, c *curve) (out rates) {
	var node [canopy.IncidenceNodes]float64
	ag, most := c.ag*s.factor, c.cap*s.cap
	lit := m.beam > 0 && s.normal > 0
	weight := &uniformMu.weight
	if lit {
		weight = r.rule(s, &node)
	}
	for j, wj := range r.crown.weight {
		Id := m.sky[j] + m.down*r.crown.uniform[j]
		P := least(c.gross(Id, ag), most)
		out.shade += wj * P
		if !lit {
			continue
		}
		mean := 0.0
		for i, v := range node {
			mean += weight[i] * least(c.gross(Id+v, ag), most)
		}
		out.fleck += wj * m.beam * m.sunlit[j] * (mean - P)
	}
	return out
}

// least is the smaller of two numbers that are not NaN.
func least(a, b float64) float64 {
	if a < b {
		return a
	}
	return b
}

// each walks the steps of a regime scaled by k and hands over each step's rates.
func (r *Prepared) each(g *light.Regime, w *scratch, set leaf.Set, k float64, do func(s *step, rate rates)) {
	n := len(r.crown.depth)
	lit := &r.above.Series.Lit
	c := newCurve(set)
	var sky [maxDepths]float64
	m := moment{sky: sky[:n]}
	for x := range r.steps {
		s := &r.steps[x]
		i := s.lit
		shape := int(g.Shape[i])
		pattern := int(g.ShapePattern[shape])
		D := lit.Diffuse[i] * s.slope
		unit, open := w.diffuse[shape*n:(shape+1)*n], r.open[pattern*n:(pattern+1)*n]
		for j := range m.sky {
			m.sky[j] = D * least(k*unit[j], open[j])
		}
		m.beam, m.down = k*g.BeamChance[i], k*g.Scattered[i]*s.slope
		if k > 1 {
			m.beam = least(1, m.beam)
			m.down = least(m.down, s.slope*lit.Beam[i]*(1-m.beam))
		}
		m.sunlit = r.sun[x*n : (x+1)*n]
		do(s, r.rate(s, &m, &c))
	}
}
