package canopy

import "math"

// grazing is the least rise of a ray over the ground, per horizontal metre; below it the hill blocks.
const grazing = 1e-9

// rise is m = tan(beta) + tan(slope) cos(phi - aspect): how fast a ray gains height above the ground.
func (s *Stand) rise(tanβ, azimuth float64) float64 {
	if s.tanSlope == 0 {
		return tanβ
	}
	return tanβ + s.tanSlope*math.Cos(azimuth-s.ground.Aspect)
}

// Rays are directions shared by many points of a stand, with what does not depend on the point.
type Rays struct {
	rays []ray
	// coefficients of optical depth per Omega*leaf area, by profile, ray and kind: G / (m cos beta)
	leaf [][]float64
}

type ray struct {
	blocked bool
	m       float64
	ux, uy  float64
	wood    float64 // 0.5 / (m cos beta)
}

// Rays prepares directions for this stand.
func (s *Stand) Rays(directions []Direction) *Rays {
	r := &Rays{rays: make([]ray, len(directions)), leaf: make([][]float64, len(s.profiles))}
	for i, p := range s.profiles {
		r.leaf[i] = make([]float64, len(directions)*len(p.kinds))
	}
	for i, d := range directions {
		sinβ, cosβ := math.Sincos(d.Elevation)
		cosβ = math.Max(cosβ, 1e-9)
		x := &r.rays[i]
		x.m = s.rise(sinβ/cosβ, d.Azimuth)
		x.blocked = d.Elevation <= 0 || x.m <= grazing || d.Elevation < s.horizon.At(d.Azimuth)
		if x.blocked {
			continue
		}
		x.ux, x.uy = math.Sincos(d.Azimuth)
		slant := 1 / (x.m * cosβ)
		x.wood = WoodProjection * slant
		for j, p := range s.profiles {
			for k := range p.kinds {
				r.leaf[j][i*len(p.kinds)+k] = slant * projection(p.kinds[k].Chi, p.kinds[k].norm, sinβ, cosβ)
			}
		}
	}
	return r
}

// Tracer follows rays; it holds scratch space and serves one goroutine.
type Tracer struct {
	stand   *Stand
	buf     []float64
	track   []stretch
	leaf    []float64 // optical depth of leaves by phenology
	scatter []float64 // the same times sqrt(absorptance)
	wood    float64
}

// NewTracer makes scratch space for a stand.
func (s *Stand) NewTracer() *Tracer {
	return &Tracer{
		stand: s, buf: make([]float64, 0, 8), track: make([]stretch, 0, 8),
		leaf: make([]float64, s.groups), scatter: make([]float64, s.groups),
	}
}

// Beam is what becomes of a beam on its way to a point.
type Beam struct {
	Chance        float64 // P0: unintercepted share, the chance that the sun is seen
	Transmittance float64 // T: with light scattered on by leaves
}

// Trace follows every ray up from a point. day[i] picks the vector of leaf shares (by phenology) of ray i.
// tau_L = sum of Omega G LAI / (m cos beta) over what the ray crosses, tau_W the same of wood with G = 0.5;
// P0 = exp(-tau_L - tau_W), T = exp(-sum sqrt(alpha) tau_L - tau_W) (Goudriaan 1977).
func (t *Tracer) Trace(p Point, r *Rays, day []int32, shares [][]float64, out []Beam) {
	for i := range r.rays {
		x := &r.rays[i]
		if x.blocked {
			out[i] = Beam{}
			continue
		}
		share := shares[day[i]]
		var beam, through float64
		if len(t.stand.openings) == 0 {
			beam, through = t.stretch(0, p.Height, math.Inf(1), r, i, share)
		} else {
			beam, through = t.walk(p, r, i, share)
		}
		switch {
		case beam == 0:
			out[i] = Beam{1, 1}
		case beam == through:
			e := math.Exp(-beam)
			out[i] = Beam{e, e}
		default:
			out[i] = Beam{math.Exp(-beam), math.Exp(-through)}
		}
	}
}

// walk sums depth over the profiles that ray i runs through.
func (t *Tracer) walk(p Point, r *Rays, i int, share []float64) (beam, through float64) {
	x := &r.rays[i]
	t.track, t.buf = t.stand.track(p.X, p.Y, x.ux, x.uy, t.buf, t.track[:0])
	low := p.Height
	for _, piece := range t.track {
		high := p.Height + piece.to*x.m
		b, s := t.stretch(piece.profile, low, high, r, i, share)
		beam += b
		through += s
		low = high
		if low >= t.stand.top {
			break
		}
	}
	return beam, through
}

// stretch is the optical depth between two heights of one profile.
func (t *Tracer) stretch(profile int, low, high float64, r *Rays, i int, share []float64) (beam, through float64) {
	p := t.stand.profiles[profile]
	if len(p.kinds) == 0 || low >= p.Top() {
		return 0, 0
	}
	a, b := p.locate(low), p.locate(high)
	coef := r.leaf[profile][i*len(p.kinds) : (i+1)*len(p.kinds)]
	for k := range p.kinds {
		q := &p.kinds[k]
		τ := coef[k] * (b.read(q.leaf) - a.read(q.leaf)) * share[q.Phenology]
		beam += τ
		through += q.sqrtA * τ
	}
	w := r.rays[i].wood * (b.read(p.wood) - a.read(p.wood))
	return beam + w, through + w
}
