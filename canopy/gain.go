package canopy

import (
	"math"

	"shadeledger/leaf"
)

// Foliage is the leaves of one kind in a slab of an endless canopy at one instant.
type Foliage struct {
	LAI      float64       // present, m2 per m2 of level ground
	Response leaf.Response // at the slab's growth light and the air's temperature, per hemisurface area

	chi, clumping, absorptance float64
	norm, sqrtA                float64
	incidence                  *Incidence
}

// NewFoliage is a kind of leaves by angle parameter, clumping (over 1 it is taken as 1: leaves cannot be lit more than wholly) and
// absorptance, without area and response yet.
func NewFoliage(chi, clumping, absorptance float64) Foliage {
	return Foliage{chi: chi, clumping: min(1, clumping), absorptance: absorptance, norm: projectionNorm(chi),
		sqrtA: math.Sqrt(absorptance), incidence: NewIncidence(chi)}
}

// towards is Omega G LAI for a zenith angle.
func (f *Foliage) towards(cosZ, sinZ float64) float64 {
	return f.clumping * projection(f.chi, f.norm, cosZ, sinZ) * f.LAI
}

// Slab is a thin piece of an endless canopy between two heights.
type Slab struct {
	Leaves []Foliage
	Wood   float64 // Omega * wood area, m2 m-2, black
}

// Arriving is the light at the top and the bottom of a slab, umol m-2 s-1 per level ground, as it comes through all that stands above.
type Arriving struct {
	Elevation float64    // of the sun, rad
	Path      float64    // path per depth of the beam, 1/(m cos beta); 1/sin beta on the level
	Normal    float64    // I_n, beam facing the sun above the canopy, umol m-2 s-1
	Chance    [2]float64 // P0 at top, bottom: chance that the sun is seen
	Through   [2]float64 // T at top, bottom: with light scattered down by leaves
	Sky       [2]float64 // D at top, bottom
}

// Gain is what a slab takes and makes of light.
type Gain struct {
	Gross   float64 // gross assimilation, umol CO2 m-2 s-1 of level ground
	Leaves  float64 // light absorbed by leaves, umol m-2 s-1 of level ground
	Wood    float64 // light absorbed by wood
	Sunlit  float64 // share of the leaf area that sees the sun
	Of      []float64
	sunlitA []float64
	// beyond the beam itself, of what is scattered down from it, by kind
	scattered []float64
}

// Take works one slab out, sunlit and shaded leaves apart (Norman 1982; de Pury & Farquhar 1997, Plant Cell Environ. 20:537-557).
//
// The sunlit share of a kind's leaf area is Omega times the mean chance that the sun is seen, P0. Sunlit leaves get the beam by their angles, I_n mu,
// above the light all leaves get. Of the stream of the beam, T with what is scattered down, wood and each kind take what it loses in the slab by
// sqrt(alpha) Omega G LAI, G towards the sun, and Omega G WAI; what kinds take of it beyond the beam itself is scattered light. Sky
// light is shared out alike, with G at the zenith angle from which a beam would lose the share that sky light loses. Light
// that all leaves get is per leaf area and over alpha, for the response is per incident photon. Gain by kind goes to g.Of.
func (s *Slab) Take(a *Arriving, g *Gain) {
	n := len(s.Leaves)
	if cap(g.Of) < n {
		g.Of, g.sunlitA, g.scattered = make([]float64, n), make([]float64, n), make([]float64, n)
	}
	g.Of, g.sunlitA, g.scattered = g.Of[:n], g.sunlitA[:n], g.scattered[:n]
	clear(g.Of)
	clear(g.sunlitA)
	clear(g.scattered)
	g.Gross, g.Leaves, g.Wood, g.Sunlit = 0, 0, 0, 0
	s.beam(a, g)
	s.assimilate(a, g, max(0, a.Sky[0]-a.Sky[1]))
}

// beam shares out what the slab takes of the beam and of what is scattered down from it.
func (s *Slab) beam(a *Arriving, g *Gain) {
	cosZ, sinZ := math.Sincos(a.Elevation)
	weight := WoodProjection * s.Wood
	stream := weight
	for i := range s.Leaves {
		w := s.Leaves[i].towards(cosZ, sinZ)
		weight += w
		stream += s.Leaves[i].sqrtA * w
	}
	if stream <= 0 || a.Path <= 0 {
		return
	}
	flux := a.Normal / a.Path
	caught := flux * (a.Chance[0] - a.Chance[1]) / weight
	taken := flux * (a.Through[0] - a.Through[1]) / stream
	lit := (a.Chance[0] - a.Chance[1]) / (a.Path * weight) // mean chance through the slab
	for i := range s.Leaves {
		f := &s.Leaves[i]
		w := f.towards(cosZ, sinZ)
		direct := f.absorptance * caught * w
		g.scattered[i] = f.sqrtA*taken*w - direct
		g.Leaves += direct
		g.sunlitA[i] = f.LAI * min(1, f.clumping*lit)
	}
	g.Wood = taken * WoodProjection * s.Wood
}

// skyward is the direction, as cosine and sine of the zenith angle, from which a beam would lose the share that sky light loses in the slab:
// exp(-(sum of sqrt(alpha) Omega G LAI + Omega G WAI) / cos) = D1/D0. It starts from 60 degrees, that of an even sky above spherical leaves.
func (s *Slab) skyward(a *Arriving) (cosZ, sinZ float64) {
	cosZ, sinZ = 0.5, math.Sqrt(0.75)
	if !(a.Sky[1] > 0 && a.Sky[0] > a.Sky[1]) {
		return cosZ, sinZ
	}
	loss := math.Log(a.Sky[0] / a.Sky[1])
	for range 3 {
		depth := WoodProjection * s.Wood
		for i := range s.Leaves {
			depth += s.Leaves[i].sqrtA * s.Leaves[i].towards(cosZ, sinZ)
		}
		cosZ = max(0.1, min(1, depth/loss))
		sinZ = math.Sqrt(1 - cosZ*cosZ)
	}
	return cosZ, sinZ
}

// assimilate shares the lost sky light out and sums what leaves make of their light.
func (s *Slab) assimilate(a *Arriving, g *Gain, lost float64) {
	cosZ, sinZ := s.skyward(a)
	weight, area, lit := WoodProjection*s.Wood, 0.0, 0.0
	for i := range s.Leaves {
		f := &s.Leaves[i]
		weight += f.sqrtA * f.towards(cosZ, sinZ)
		area += f.LAI
	}
	if weight <= 0 {
		return
	}
	g.Wood += lost * WoodProjection * s.Wood / weight
	for i := range s.Leaves {
		f := &s.Leaves[i]
		if f.LAI <= 0 || f.absorptance <= 0 {
			continue
		}
		absorbed := g.scattered[i] + lost*f.sqrtA*f.towards(cosZ, sinZ)/weight
		g.Leaves += absorbed
		diffuse := max(0, absorbed) / (f.LAI * f.absorptance)
		shade := f.Response.Gross(diffuse)
		g.Of[i] = shade * f.LAI
		if g.sunlitA[i] > 0 && a.Normal > 0 {
			g.Of[i] += g.sunlitA[i] * (f.sunlit(a, diffuse) - shade)
			lit += g.sunlitA[i]
		}
		g.Gross += g.Of[i]
	}
	if area > 0 {
		g.Sunlit = lit / area
	}
}

// sunlit is the mean gross rate of leaves that see the sun.
func (f *Foliage) sunlit(a *Arriving, diffuse float64) (sum float64) {
	if f.chi == 1 {
		return f.Response.MeanGross(diffuse, a.Normal)
	}
	cosZ, sinZ := math.Sincos(a.Elevation)
	k := IncidenceRule(a.Elevation)
	scale := a.Normal * projection(f.chi, f.norm, cosZ, sinZ)
	for j, node := range f.incidence.Node[k] {
		sum += f.incidence.Weight[k][j] * f.Response.Gross(diffuse+scale*node)
	}
	return sum
}
