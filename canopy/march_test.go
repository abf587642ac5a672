package canopy_test

import (
	"fmt"
	"math"
	"math/rand/v2"
	"testing"

	"shadeledger/canopy"
)

// A plain ray marcher: the ground track is followed in 0.05 m steps with a point-in-outline test at each, the sky is an even
// grid of directions, and layers are met by the heights between which the track runs in or out. It takes only data from the
// package under test.

type marched struct {
	inside          func(x, y float64) bool
	matrix, opening []canopy.Layer
	slope, aspect   float64 // tangent, rad
	extent          float64 // m from the centre beyond which nothing is inside
}

const trackStep = 0.05

// switches lists the distances at which a track from (x, y) passes the outline, and whether it starts inside.
func (m *marched) switches(x, y, φ float64) (at []float64, startsIn bool) {
	sin, cos := math.Sincos(φ)
	startsIn = m.inside(x, y)
	in := startsIn
	for s := trackStep; s < math.Hypot(x, y)+m.extent; s += trackStep {
		if m.inside(x+s*sin, y+s*cos) != in {
			in = !in
			at = append(at, s-trackStep/2)
		}
	}
	return at, startsIn
}

// depth is the optical depth of beam and of beam with scattering up a ray.
func (m *marched) depth(z, β, φ float64, at []float64, in bool) (beam, through float64, blocked bool) {
	rise := math.Tan(β) + m.slope*math.Cos(φ-m.aspect)
	if rise <= 1e-9 {
		return 0, 0, true
	}
	from := z
	for i := 0; i <= len(at); i++ {
		to := math.Inf(1)
		if i < len(at) {
			to = z + at[i]*rise
		}
		layers := m.matrix
		if in {
			layers = m.opening
		}
		for _, l := range layers {
			share := (math.Min(to, l.Top) - math.Max(from, l.Bottom)) / (l.Top - l.Bottom)
			if share <= 0 {
				continue
			}
			θ := math.Pi/2 - β
			G := 0.5
			if l.Chi != 1 {
				G = math.Sqrt(math.Pow(l.Chi*math.Cos(θ), 2)+math.Pow(math.Sin(θ), 2)) / (l.Chi + 1.774*math.Pow(l.Chi+1.182, -0.733))
			}
			slant := l.Clumping * share / (rise * math.Cos(β))
			beam += slant * (G*l.LAI + 0.5*l.WAI)
			through += slant * (math.Sqrt(l.Absorptance)*G*l.LAI + 0.5*l.WAI)
		}
		in = !in
		from = to
	}
	return beam, through, false
}

// sky is the share of a uniform and of an overcast sky's light at a spot, from directions `step` degrees apart.
func (m *marched) sky(x, y, z, step float64) (uniform, overcast float64) {
	rows, columns := int(math.Round(90/step)), int(math.Round(360/step))
	var all, allO float64
	for j := range columns {
		φ := (float64(j) + 0.5) * step * math.Pi / 180
		at, in := m.switches(x, y, φ)
		for i := range rows {
			θ := (float64(i) + 0.5) * step * math.Pi / 180
			w := math.Sin(θ) * math.Cos(θ)
			o := w * (1 + 2*math.Cos(θ))
			all += w
			allO += o
			if _, τ, blocked := m.depth(z, math.Pi/2-θ, φ, at, in); !blocked {
				uniform += w * math.Exp(-τ)
				overcast += o * math.Exp(-τ)
			}
		}
	}
	return uniform / all, overcast / allO
}

type marchCase struct {
	name    string
	outline canopy.Outline
	marched
}

func must[T any](v T, err error) T {
	if err != nil {
		panic(err)
	}
	return v
}

const H = 24.0

func leaves(from, to, lai, wai, chi, clumping float64) canopy.Layer {
	return canopy.Layer{Bottom: from, Top: to, LAI: lai, WAI: wai, Chi: chi, Clumping: clumping, Absorptance: 0.85}
}

// marchCases are shapes, slopes and layers; outlines are told apart by their own inequalities.
func marchCases() []marchCase {
	one := func(lai float64) []canopy.Layer { return []canopy.Layer{leaves(9, H, lai, 0, 1, 0.95)} }
	two := []canopy.Layer{leaves(3, 12, 1.5, 0.2, 2, 0.9), leaves(10, H, 3, 0.5, 0.7, 0.7)}
	shrubs := []canopy.Layer{leaves(0, 2, 1, 0.1, 1, 1)}
	disc := func(d float64) func(x, y float64) bool {
		return func(x, y float64) bool { return x*x+y*y < d*d/4 }
	}
	turned := func(bearing float64, in func(u, v float64) bool) func(x, y float64) bool {
		s, c := math.Sincos(bearing)
		return func(x, y float64) bool { return in(x*s+y*c, x*c-y*s) }
	}
	var out []marchCase
	for i, ratio := range []float64{0.25, 0.5, 1, 1.5, 2, 4} {
		lai := []float64{5, 3, 8, 5, 0.5, 5}[i]
		slope := []float64{0, 0.3, 0, 1, 0.2, 0}[i]
		out = append(out, marchCase{fmt.Sprintf("circle %g H, LAI %g, slope %g", ratio, lai, slope), must(canopy.NewCircle(ratio * H)),
			marched{disc(ratio * H), one(lai), nil, slope, 2.5, ratio*H + 1}})
	}
	ellipse := turned(0.6, func(u, v float64) bool { return u*u/625+v*v/156.25 < 1 })
	out = append(out,
		marchCase{"ellipse, two layers", must(canopy.NewEllipse(50, 25, 0.6)), marched{ellipse, two, nil, 0, 0, 60}},
		marchCase{"ellipse, shrubs inside, slope 0.6", must(canopy.NewEllipse(50, 25, 0.6)), marched{ellipse, append(one(4), shrubs...), shrubs, 0.6, 5, 60}},
		marchCase{"strip 9 m", must(canopy.NewStrip(80, 9, 2)), marched{turned(2, func(u, v float64) bool { return math.Abs(u) < 40 && math.Abs(v) < 4.5 }), two, nil, 0.3, 1, 90}},
		marchCase{"strip 20 m, LAI 8", must(canopy.NewStrip(60, 20, 1)), marched{turned(1, func(u, v float64) bool { return math.Abs(u) < 30 && math.Abs(v) < 10 }), one(8), nil, 0, 0, 70}},
	)
	L, cx, cy, err := canopy.NewPolygon([][2]float64{{0, 0}, {44, 0}, {44, 18}, {18, 18}, {18, 40}, {0, 40}})
	if err != nil {
		panic(err)
	}
	inL := func(x, y float64) bool {
		x, y = x+cx, y+cy
		return x > 0 && y > 0 && ((x < 44 && y < 18) || (x < 18 && y < 40))
	}
	return append(out, marchCase{"L, slope 0.4", L, marched{inL, one(5), nil, 0.4, 4, 80}})
}

func standOf(c marchCase) *canopy.Stand {
	matrix, inside := must(canopy.NewProfile(c.matrix)), must(canopy.NewProfile(c.opening))
	return must(canopy.NewStand(matrix, []canopy.Opening{{Outline: c.outline, Inside: inside}},
		canopy.Ground{Slope: math.Atan(c.slope), Aspect: c.aspect}, canopy.Horizon{}))
}

// program is the same two figures from the package.
func program(s *canopy.Stand, d *canopy.Dome, p canopy.Point) (uniform, overcast float64) {
	scan := s.NewSkyScan(d)
	scan.Scan(p)
	light := canopy.NewCellLight(d)
	scan.Transmit([]float64{1}, light)
	open := d.Open()
	var all, allO float64
	for c := range light.Plane {
		r := c / d.Sectors
		c0, c1 := math.Cos(d.Zenith[r]), math.Cos(d.Zenith[r+1])
		R := 1 + 2*2.0/3*(c0*c0*c0-c1*c1*c1)/(c0*c0-c1*c1)
		uniform += light.Plane[c]
		overcast += R * light.Plane[c]
		all += open.Plane[c]
		allO += R * open.Plane[c]
	}
	return uniform / all, overcast / allO
}

// The marcher's own fineness: skies of 0.5, 0.25 and 0.125 degrees agree to 0.05 points.
func TestMarchedSkiesAgree(t *testing.T) {
	for _, c := range []marchCase{marchCases()[2], marchCases()[8]} {
		u1, o1 := c.sky(3, 7, 0.5, 0.5)
		u2, o2 := c.sky(3, 7, 0.5, 0.25)
		u3, o3 := c.sky(3, 7, 0.5, 0.125)
		t.Logf("%s: uniform %.5f %.5f %.5f, overcast %.5f %.5f %.5f", c.name, u1, u2, u3, o1, o2, o3)
		for _, d := range []float64{u1 - u2, u2 - u3, o1 - o2, o2 - o3} {
			if math.Abs(d) > 0.0005 {
				t.Errorf("%s: skies differ by %.3f points", c.name, 100*d)
			}
		}
	}
}

// Every default station of every case under both skies, within 0.2 points of full light.
func TestSkyAgainstMarching(t *testing.T) {
	worst, where := 0.0, ""
	for _, c := range marchCases() {
		s := standOf(c)
		for _, st := range canopy.DefaultStations(c.outline, H) {
			u, o := c.sky(st.X, st.Y, 0.5, 0.5)
			for name, d := range map[string]*canopy.Dome{"fixed": canopy.FixedSkyDome(), "all-weather": canopy.AllWeatherDome()} {
				pu, po := program(s, d, canopy.Point{X: st.X, Y: st.Y, Height: 0.5})
				miss := 100 * math.Max(math.Abs(pu-u), math.Abs(po-o))
				if miss > worst {
					worst, where = miss, c.name+", "+st.Name+", "+name+" dome"
				}
				if miss > 0.2 {
					t.Errorf("%s, %s, %s dome: uniform %.3f %% marched %.3f, overcast %.3f marched %.3f", c.name, st.Name, name, 100*pu, 100*u, 100*po, 100*o)
				}
			}
		}
	}
	t.Logf("worst %.3f points at %s", worst, where)
}

// The beam over suns of a summer, each ray exact: its level-plane sum within 0.2 points of full light, single rays alike
// but for those that graze a corner within half a step.
func TestBeamAgainstMarching(t *testing.T) {
	rng := rand.New(rand.NewPCG(1, 2))
	var suns []canopy.Direction
	for range 400 {
		suns = append(suns, canopy.Direction{Elevation: math.Asin(rng.Float64() * 0.9), Azimuth: rng.Float64() * 2 * math.Pi})
	}
	day := make([]int32, len(suns))
	out := make([]canopy.Beam, len(suns))
	worst, where := 0.0, ""
	for _, c := range marchCases() {
		s := standOf(c)
		rays, tracer := s.Rays(suns), s.NewTracer()
		for _, st := range canopy.DefaultStations(c.outline, H) {
			tracer.Trace(canopy.Point{X: st.X, Y: st.Y, Height: 0.5}, rays, day, [][]float64{{1}}, out)
			var beam, through, beamM, throughM, all float64
			for i, d := range suns {
				w := math.Sin(d.Elevation)
				all += w
				beam += w * out[i].Chance
				through += w * out[i].Transmittance
				at, in := c.switches(st.X, st.Y, d.Azimuth)
				if b, τ, blocked := c.depth(0.5, d.Elevation, d.Azimuth, at, in); !blocked {
					beamM += w * math.Exp(-b)
					throughM += w * math.Exp(-τ)
				}
			}
			miss := 100 * math.Max(math.Abs(beam-beamM), math.Abs(through-throughM)) / all
			if miss > worst {
				worst, where = miss, c.name+", "+st.Name
			}
			if miss > 0.2 {
				t.Errorf("%s, %s: beam %.3f %%, marched %.3f", c.name, st.Name, 100*beam/all, 100*beamM/all)
			}
		}
	}
	t.Logf("worst %.3f points at %s", worst, where)
}
