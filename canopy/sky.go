package canopy

import (
	"math"
	"sort"
)

// FixedSkyDome suits skies whose radiance depends on zenith angle only.
func FixedSkyDome() *Dome { return evenDome(18, 1, 144) }

// AllWeatherDome suits skies that brighten round the sun.
func AllWeatherDome() *Dome { return evenDome(12, 18, 8) }

// MapDome is coarser, for thousands of spots.
func MapDome() *Dome { return evenDome(9, 12, 5) }

// DrawDome is as fine in its cells with fewer azimuths in each, for draws that are moved to what a finer dome gives.
func DrawDome() *Dome { return evenDome(9, 12, 2) }

// evenDome has rings of equal width.
func evenDome(rings, sectors, azimuths int) *Dome {
	d := &Dome{Zenith: make([]float64, rings+1), Sectors: sectors, Azimuths: azimuths}
	for i := range d.Zenith {
		d.Zenith[i] = float64(i) / float64(rings) * math.Pi / 2
	}
	return d
}

// Rings is the number of rings.
func (d *Dome) Rings() int { return len(d.Zenith) - 1 }

// Cells is the number of cells.
func (d *Dome) Cells() int { return d.Rings() * d.Sectors }

// CellLight holds, for each cell of a dome, the integrals of T cos(theta) and of T over the cell's solid angle.
type CellLight struct{ Plane, Solid []float64 }

// NewCellLight makes room for a dome's cells.
func NewCellLight(d *Dome) *CellLight {
	return &CellLight{make([]float64, d.Cells()), make([]float64, d.Cells())}
}

// Open is the light of a sky without canopy or hill, in closed form.
func (d *Dome) Open() *CellLight {
	c := NewCellLight(d)
	width := 2 * math.Pi / float64(d.Sectors)
	for r := range d.Rings() {
		s0, c0 := math.Sincos(d.Zenith[r])
		s1, c1 := math.Sincos(d.Zenith[r+1])
		for s := range d.Sectors {
			c.Plane[r*d.Sectors+s] = width * (s1*s1 - s0*s0) / 2
			c.Solid[r*d.Sectors+s] = width * (c0 - c1)
		}
	}
	return c
}

// gauss is the Gauss-Legendre rule of three nodes on 0..1: its weights sum to 1.
var gauss = [3][2]float64{
	{0.5 - 0.5*0.7745966692414834, 5.0 / 18},
	{0.5, 8.0 / 18},
	{0.5 + 0.5*0.7745966692414834, 5.0 / 18},
}

// node is one direction of the sky integral from a point, with what the canopy does to it.
type node struct {
	plane, solid float64 // weights
	wood         float64
	cell         int32
}

// SkyScan is the sky as seen from one point: the edge-aware quadrature with the optical depth of every
// direction, from which the light under any share of leaf follows quickly. It is scratch space to be reused.
type SkyScan struct {
	tracer  *Tracer
	dome    *Dome
	nodes   []node
	scatter []float64 // by node and phenology
	clear   CellLight // sum over directions that meet nothing
	sky     float64   // integral of P0 cos(theta), leaves at full
	breaks  []float64
	ground  bool // Plane is through planes along the ground
}

// NewSkyScan makes scratch space for scanning a dome in a stand.
func (s *Stand) NewSkyScan(d *Dome) *SkyScan {
	return &SkyScan{tracer: s.NewTracer(), dome: d, clear: *NewCellLight(d)}
}

// AlongGround makes the integrals over planes those through planes along the ground, per level area: directions weigh by how fast they rise over
// the ground, m cos beta, and not over the level. A layer along a slope takes what such planes lose. The sky view is no longer one.
func (v *SkyScan) AlongGround() { v.ground = true }

// Scan looks round the sky from a point.
func (v *SkyScan) Scan(p Point) {
	v.nodes, v.scatter, v.sky = v.nodes[:0], v.scatter[:0], 0
	clear(v.clear.Plane)
	clear(v.clear.Solid)
	total := v.dome.Sectors * v.dome.Azimuths
	for a := range total {
		v.azimuth(p, (float64(a)+0.5)*2*math.Pi/float64(total), 2*math.Pi/float64(total), a/v.dome.Azimuths)
	}
}

// SkyView is the cosine-weighted visible sky, 0..1: (1/pi) integral of P0 cos(theta), leaves at full.
func (v *SkyScan) SkyView() float64 { return v.sky / math.Pi }

// azimuth integrates over the zenith angle along one azimuth, split at ring bounds and at the edges where the ray
// passes the outline at the height of a layer bound.
func (v *SkyScan) azimuth(p Point, φ, width float64, sector int) {
	t := v.tracer
	s := t.stand
	ux, uy := math.Sincos(φ)
	t.track, t.buf = s.track(p.X, p.Y, ux, uy, t.buf, t.track[:0])
	tilt := s.rise(0, φ)
	low := math.Atan2(1, grazing-tilt) // zenith angle where the hill begins
	limit := math.Min(math.Min(math.Pi/2, low), math.Pi/2-s.horizon.At(φ))
	v.split(p, tilt, limit)
	for i := 0; i+1 < len(v.breaks); i++ {
		θ0, θ1 := v.breaks[i], v.breaks[i+1]
		ring := sort.SearchFloat64s(v.dome.Zenith, (θ0+θ1)/2) - 1
		cell := int32(ring*v.dome.Sectors + sector)
		for _, g := range gauss {
			θ := θ0 + g[0]*(θ1-θ0)
			sinθ, cosθ := math.Sincos(θ)
			solid := g[1] * (θ1 - θ0) * sinθ * width
			m, rise := tilt+cosθ/sinθ, cosθ
			if v.ground {
				rise = m * sinθ
			}
			v.direction(p, m, sinθ, cosθ, node{plane: solid * rise, solid: solid, cell: cell})
		}
	}
}

// split lists the zenith angles between which the integrand is smooth.
func (v *SkyScan) split(p Point, tilt, limit float64) {
	v.breaks = v.breaks[:0]
	for _, θ := range v.dome.Zenith {
		if θ < limit {
			v.breaks = append(v.breaks, θ)
		}
	}
	rings := len(v.breaks)
	for _, piece := range v.tracer.track {
		if math.IsInf(piece.to, 1) {
			continue
		}
		for _, profile := range v.tracer.stand.profiles {
			for _, h := range profile.edges() {
				if h <= p.Height {
					continue
				}
				if θ := math.Atan2(1, (h-p.Height)/piece.to-tilt); θ > 0 && θ < limit {
					v.breaks = append(v.breaks, θ)
				}
			}
		}
	}
	v.breaks = append(v.breaks, limit)
	if len(v.breaks) > rings+1 {
		sort.Float64s(v.breaks)
	}
	// drop pieces too thin to matter
	keep := v.breaks[:1]
	for _, θ := range v.breaks[1:] {
		if θ-keep[len(keep)-1] > 1e-9 {
			keep = append(keep, θ)
		}
	}
	v.breaks = keep
}

// edges are the heights at which the sky integral is split: every layer bound of a simple profile, the
// lowest and highest of one with many layers, whose bounds make no sharp edge.
func (p *Profile) edges() []float64 {
	n := len(p.knots)
	if n == 1 {
		return nil
	}
	if n <= 6 {
		return p.knots[1:]
	}
	return p.ends
}

// direction adds one node.
func (v *SkyScan) direction(p Point, m, sinθ, cosθ float64, n node) {
	t := v.tracer
	clear(t.leaf)
	clear(t.scatter)
	t.wood = 0
	if m <= grazing {
		return
	}
	slant := 1 / (m * sinθ)
	low := p.Height
	for _, piece := range t.track {
		high := p.Height + piece.to*m
		t.depth(piece.profile, low, high, slant, cosθ, sinθ)
		low = high
		if low >= t.stand.top {
			break
		}
	}
	beam, all := t.wood, t.wood
	for g := range t.leaf {
		beam += t.leaf[g]
		all += t.scatter[g]
	}
	if beam == 0 {
		v.sky += n.plane
		v.clear.Plane[n.cell] += n.plane
		v.clear.Solid[n.cell] += n.solid
		return
	}
	v.sky += n.plane * math.Exp(-beam)
	n.wood = t.wood
	if n.wood > 40 {
		return // nothing comes through in any season
	}
	v.nodes = append(v.nodes, n)
	v.scatter = append(v.scatter, t.scatter...)
}

// depth adds the optical depth between two heights of one profile to the sums by phenology.
func (t *Tracer) depth(profile int, low, high, slant, cosθ, sinθ float64) {
	p := t.stand.profiles[profile]
	if len(p.kinds) == 0 || low >= p.Top() {
		return
	}
	a, b := p.locate(low), p.locate(high)
	for k := range p.kinds {
		q := &p.kinds[k]
		τ := slant * projection(q.Chi, q.norm, cosθ, sinθ) * (b.read(q.leaf) - a.read(q.leaf))
		t.leaf[q.Phenology] += τ
		t.scatter[q.Phenology] += q.sqrtA * τ
	}
	t.wood += slant * WoodProjection * (b.read(p.wood) - a.read(p.wood))
}

// Transmit gives the light of every cell where the share of leaf present is shares, by phenology.
func (v *SkyScan) Transmit(shares []float64, dst *CellLight) {
	copy(dst.Plane, v.clear.Plane)
	copy(dst.Solid, v.clear.Solid)
	groups := len(v.tracer.leaf)
	for i := range v.nodes {
		n := &v.nodes[i]
		τ := n.wood
		for g, x := range v.scatter[i*groups : (i+1)*groups] {
			τ += shares[g] * x
		}
		T := math.Exp(-τ)
		dst.Plane[n.cell] += T * n.plane
		dst.Solid[n.cell] += T * n.solid
	}
}
