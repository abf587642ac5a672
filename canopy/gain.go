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
}

// Take works one slab out, sunlit and shaded leaves apart (Norman 1982; de Pury & Farquhar 1997, Plant Cell Environ. 20:537-557).
//
// The sunlit share of a kind's leaf area is Omega times the mean chance that the sun is seen, P0, so that leaves and wood together catch
// just the beam lost between top and bottom. Sunlit leaves get the beam by their angles, I_n mu, above the light all leaves get; that is what sky
// light, beam scattered down and beam scattered by the slab's own leaves lose on the way, shared out by math.Sqrt(alpha) Omega G LAI of
// leaves and Omega G WAI of wood, per leaf area and over alpha, for the response is per incident photon. G of that share is 0.5: at a
// zenith angle near one radian, about which such light comes, all leaf angles project alike. Gain by kind goes to g.Of, which is made once.
func (s *Slab) Take(a *Arriving, g *Gain) {
	n := len(s.Leaves)
	if cap(g.Of) < n {
		g.Of, g.sunlitA = make([]float64, n), make([]float64, n)
	}
	g.Of, g.sunlitA = g.Of[:n], g.sunlitA[:n]
	lost := s.beam(a, g)
	pool := a.Sky[0] - a.Sky[1] + lost
	s.assimilate(a, g, max(0, pool))
}

// beam finds what leaves catch of the beam and gives what is left for the pool of scattered light.
func (s *Slab) beam(a *Arriving, g *Gain) (scattered float64) {
	cosZ, sinZ := math.Sincos(a.Elevation)
	weight := WoodProjection * s.Wood
	for i := range s.Leaves {
		weight += s.Leaves[i].towards(cosZ, sinZ)
	}
	g.Leaves, g.Wood, g.Sunlit = 0, 0, 0
	for i := range g.sunlitA {
		g.sunlitA[i] = 0
	}
	if weight <= 0 || a.Path <= 0 {
		return 0
	}
	flux := a.Normal / a.Path
	caught := flux * (a.Chance[0] - a.Chance[1])
	scattered = flux * (a.Through[0] - a.Through[1])
	lit := (a.Chance[0] - a.Chance[1]) / (a.Path * weight) // mean chance through the slab
	for i := range s.Leaves {
		f := &s.Leaves[i]
		direct := f.absorptance * caught * f.towards(cosZ, sinZ) / weight
		g.Leaves += direct
		scattered -= direct
		g.sunlitA[i] = f.LAI * min(1, f.clumping*lit)
	}
	g.Wood = caught * WoodProjection * s.Wood / weight
	return scattered - g.Wood
}

// assimilate shares the pool of scattered light out and sums what leaves make of their light.
func (s *Slab) assimilate(a *Arriving, g *Gain, pool float64) {
	weight, area, lit := s.Wood, 0.0, 0.0
	for i := range s.Leaves {
		f := &s.Leaves[i]
		weight += f.sqrtA * f.clumping * f.LAI
		area += f.LAI
	}
	g.Gross = 0
	if weight <= 0 {
		return
	}
	g.Wood += pool * s.Wood / weight
	for i := range s.Leaves {
		f := &s.Leaves[i]
		g.Of[i] = 0
		if f.LAI <= 0 {
			continue
		}
		absorbed := pool * f.sqrtA * f.clumping * f.LAI / weight
		g.Leaves += absorbed
		diffuse := absorbed / (f.LAI * f.absorptance)
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
