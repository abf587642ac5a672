package canopy

import (
	"fmt"
	"math"
	"sort"
)

// Profile is a stack of layers, ready for rays: cumulative leaf and wood area over height for each
// kind of foliage. It does not change once made.
type Profile struct {
	knots     []float64 // heights of every layer bound, ascending, from 0
	kinds     []kind
	wood      []float64 // cumulative Omega * WAI at the knots
	phenology int       // one more than the highest index
	ends      []float64 // lowest bound above the ground, and the highest
}

// kind is foliage alike in everything that meets light.
type kind struct {
	Layer           // bounds and areas unused
	leaf  []float64 // cumulative Omega * LAI at the knots
	norm  float64   // normaliser of the projection
	sqrtA float64   // sqrt(absorptance)
}

// NewProfile checks layers and stacks them; they may overlap. No layers is open ground.
func NewProfile(layers []Layer) (*Profile, error) {
	p := &Profile{knots: []float64{0}}
	for i, l := range layers {
		if err := l.check(); err != nil {
			return nil, fmt.Errorf("layer %d: %w", i+1, err)
		}
		p.knots = append(p.knots, l.Bottom, l.Top)
	}
	p.knots = distinct(p.knots)
	p.wood = make([]float64, len(p.knots))
	if n := len(p.knots); n > 2 {
		p.ends = []float64{p.knots[1], p.knots[n-1]}
	}
	for _, l := range layers {
		p.add(l)
	}
	return p, nil
}

func (l Layer) check() error {
	for _, c := range []struct {
		name       string
		v, low, hi float64
	}{
		{"bottom", l.Bottom, 0, 150}, {"top", l.Top, 0, 150}, {"lai", l.LAI, 0, 30}, {"wai", l.WAI, 0, 10},
		{"chi", l.Chi, 0.05, 20}, {"clumping", l.Clumping, 0.05, 1.2}, {"absorptance", l.Absorptance, 0, 1},
	} {
		if !(c.v >= c.low && c.v <= c.hi) {
			return fmt.Errorf("%s is %g; it must be %g to %g", c.name, c.v, c.low, c.hi)
		}
	}
	if l.Top <= l.Bottom {
		return fmt.Errorf("top %g m is not above bottom %g m", l.Top, l.Bottom)
	}
	if l.Phenology < 0 {
		return fmt.Errorf("phenology index is %d; it must be 0 or more", l.Phenology)
	}
	return nil
}

// distinct sorts and drops equal heights.
func distinct(v []float64) []float64 {
	sort.Float64s(v)
	out := v[:1]
	for _, x := range v[1:] {
		if x > out[len(out)-1] {
			out = append(out, x)
		}
	}
	return out
}

func (p *Profile) add(l Layer) {
	p.phenology = max(p.phenology, l.Phenology+1)
	var k *kind
	for i := range p.kinds {
		q := &p.kinds[i]
		if q.Chi == l.Chi && q.Clumping == l.Clumping && q.Absorptance == l.Absorptance && q.Phenology == l.Phenology {
			k = q
		}
	}
	if k == nil {
		p.kinds = append(p.kinds, kind{Layer: l, leaf: make([]float64, len(p.knots)), norm: projectionNorm(l.Chi), sqrtA: math.Sqrt(l.Absorptance)})
		k = &p.kinds[len(p.kinds)-1]
	}
	for i, h := range p.knots {
		share := math.Max(0, math.Min(1, (h-l.Bottom)/(l.Top-l.Bottom)))
		k.leaf[i] += share * l.Clumping * l.LAI
		p.wood[i] += share * l.Clumping * l.WAI
	}
}

// Top is the highest layer bound, m.
func (p *Profile) Top() float64 { return p.knots[len(p.knots)-1] }

// place is a height among the knots: index of the knot below and the share of the way to the next.
type place struct {
	i int
	f float64
}

// locate finds a height; above the top it is the top.
func (p *Profile) locate(h float64) place {
	n := len(p.knots) - 1
	if h >= p.knots[n] {
		return place{n, 0}
	}
	if h <= 0 {
		return place{0, 0}
	}
	i := 0
	for p.knots[i+1] <= h {
		i++
	}
	return place{i, (h - p.knots[i]) / (p.knots[i+1] - p.knots[i])}
}

// read gives a cumulative curve at a place.
func (at place) read(cumulative []float64) float64 {
	if at.f == 0 {
		return cumulative[at.i]
	}
	return cumulative[at.i] + at.f*(cumulative[at.i+1]-cumulative[at.i])
}

// LeafProjection is G, the mean projection of unit leaf area towards a zenith angle for ellipsoidal leaf
// angles of parameter chi: sqrt(chi^2 cos^2 + sin^2) / (chi + 1.774 (chi + 1.182)^-0.733) (Campbell 1986,
// Agric. For. Meteorol. 36:317-321; 1990, 49:173-176). chi = 1 is spherical, 0.5 exactly.
func LeafProjection(chi, cosZenith, sinZenith float64) float64 {
	return projection(chi, projectionNorm(chi), cosZenith, sinZenith)
}

func projectionNorm(chi float64) float64 {
	if chi == 1 {
		return 0.5 // the approximation gives 0.4997
	}
	return 1 / (chi + 1.774*math.Pow(chi+1.182, -0.733))
}

func projection(chi, norm, cosZenith, sinZenith float64) float64 {
	if chi == 1 {
		return 0.5
	}
	return norm * math.Sqrt(chi*chi*cosZenith*cosZenith+sinZenith*sinZenith)
}

// WoodProjection is G of wood: spherical.
const WoodProjection = 0.5
