package canopy

import (
	"math"
	"testing"
)

func profile(t testing.TB, layers ...Layer) *Profile {
	t.Helper()
	p, err := NewProfile(layers)
	if err != nil {
		t.Fatal(err)
	}
	return p
}

func stand(t testing.TB, matrix *Profile, ground Ground, openings ...Opening) *Stand {
	t.Helper()
	s, err := NewStand(matrix, openings, ground, Horizon{})
	if err != nil {
		t.Fatal(err)
	}
	return s
}

func circle(t testing.TB, d float64) Outline {
	t.Helper()
	c, err := NewCircle(d)
	if err != nil {
		t.Fatal(err)
	}
	return c
}

// skyLight is the share of a uniform or overcast sky's light on the level plane at a point.
func skyLight(s *Stand, p Point, d *Dome, shares []float64, overcast bool) float64 {
	both := skyLights(s, p, d, shares)
	if overcast {
		return both[1]
	}
	return both[0]
}

// skyLights are the shares of a uniform and of an overcast sky, from one scan.
func skyLights(s *Stand, p Point, d *Dome, shares []float64) [2]float64 {
	scan := s.NewSkyScan(d)
	scan.Scan(p)
	c := NewCellLight(d)
	scan.Transmit(shares, c)
	open := d.Open()
	var sum, all [2]float64
	for i := range c.Plane {
		// mean of an overcast sky over the ring, cosine-weighted: 1 + 2 <cos>
		r := i / d.Sectors
		c0, c1 := math.Cos(d.Zenith[r]), math.Cos(d.Zenith[r+1])
		for sky, R := range [2]float64{1, 1 + 2*(2.0/3)*(c0*c0*c0-c1*c1*c1)/(c0*c0-c1*c1)} {
			sum[sky] += R * c.Plane[i]
			all[sky] += R * open.Plane[i]
		}
	}
	return [2]float64{sum[0] / all[0], sum[1] / all[1]}
}

// slab is one uniform layer of spherical, black, unclumped leaves.
func slab(bottom, top, lai float64) Layer {
	return Layer{Bottom: bottom, Top: top, LAI: lai, Chi: 1, Clumping: 1, Absorptance: 1}
}

func TestOpaqueWallRoundCircle(t *testing.T) {
	const H = 20.0
	wall := make([]Layer, 20) // LAI 600: a wall that lets almost nothing over its rim
	for i := range wall {
		wall[i] = slab(0, H, 30)
	}
	for _, ratio := range []float64{0.25, 0.5, 1, 1.5, 2, 4} {
		D := ratio * H
		s := stand(t, profile(t, wall...), Ground{}, Opening{circle(t, D), profile(t)})
		want := D * D / 4 / (D*D/4 + H*H)
		for name, d := range map[string]*Dome{"fixed": FixedSkyDome(), "all-weather": AllWeatherDome(), "map": MapDome()} {
			if got := skyLight(s, Point{}, d, []float64{1}, false); math.Abs(got-want) > 0.002 {
				t.Errorf("%s sky, D/H %g: %.5f of the sky, want %.5f", name, ratio, got, want)
			}
		}
	}
}

func mixed() []Layer {
	return []Layer{
		{Bottom: 2, Top: 12, LAI: 1.5, WAI: 0.2, Chi: 2, Clumping: 0.8, Absorptance: 0.8, Phenology: 1},
		{Bottom: 9, Top: 24, LAI: 3, WAI: 0.4, Chi: 0.8, Clumping: 0.95, Absorptance: 0.85},
	}
}

// skyAndBeam is the share of sky light and of a few suns at a point.
func skyAndBeam(s *Stand, p Point, suns []Direction, shares []float64) (sky float64, beams []Beam) {
	beams = make([]Beam, len(suns))
	s.NewTracer().Trace(p, s.Rays(suns), make([]int32, len(suns)), [][]float64{shares}, beams)
	return skyLight(s, p, evenDome(18, 1, 360), shares, false), beams
}

var someSuns = []Direction{{0.1, 1}, {0.5, 3}, {0.9, 4.1}, {1.3, 2.2}, {1.5, 0.3}}

// No leaves let all light through; an opening of no size is the matrix; one without end is open ground.
func TestEmptyAndEndless(t *testing.T) {
	bare := stand(t, profile(t), Ground{})
	if sky, beams := skyAndBeam(bare, Point{}, someSuns, []float64{1}); math.Abs(sky-1) > 1e-9 || beams[0] != (Beam{1, 1}) {
		t.Errorf("open ground: sky %.9f, beam %v", sky, beams[0])
	}
	m := profile(t, mixed()...)
	full := []float64{1, 1}
	sky, beams := skyAndBeam(stand(t, m, Ground{0.2, 1}), Point{Height: 0.5}, someSuns, full)
	sky0, beams0 := skyAndBeam(stand(t, m, Ground{0.2, 1}, Opening{circle(t, 0), profile(t)}), Point{Height: 0.5}, someSuns, full)
	if sky != sky0 || beams[2] != beams0[2] {
		t.Errorf("an opening of no size changes the light: %.9f and %.9f", sky, sky0)
	}
	wide, _ := skyAndBeam(stand(t, m, Ground{}, Opening{circle(t, 1000), profile(t)}), Point{Height: 0.5}, someSuns, full)
	if wide < 0.995 {
		t.Errorf("an opening of 1000 m lets through %.4f of the sky", wide)
	}
	if sky, _ := skyAndBeam(stand(t, m, Ground{}), Point{Height: 30}, someSuns, full); math.Abs(sky-1) > 1e-9 {
		t.Errorf("above the trees the sky is %.6f", sky)
	}
}

// Turning stand, opening, slope, point and sun together changes nothing.
func TestTurningChangesNothing(t *testing.T) {
	m := profile(t, mixed()...)
	first := 0.0
	var firstBeam Beam
	for k, turn := range []float64{0, 0.7, 2.5, 4.4} {
		e, err := NewEllipse(40, 20, 0.3+turn)
		if err != nil {
			t.Fatal(err)
		}
		s := stand(t, m, Ground{0.3, 1.1 + turn}, Opening{e, profile(t)})
		y, x := math.Cos(2+turn), math.Sin(2+turn)
		p := Point{7 * x, 7 * y, 0.5}
		sky := skyLight(s, p, evenDome(18, 1, 1440), []float64{1, 1}, true)
		_, beams := skyAndBeam(s, p, []Direction{{0.8, 2.2 + turn}}, []float64{1, 1})
		if k == 0 {
			first, firstBeam = sky, beams[0]
			continue
		}
		if math.Abs(sky-first) > 1e-4 || math.Abs(beams[0].Chance-firstBeam.Chance) > 1e-9 {
			t.Errorf("turned by %g: sky %.6f and beam %.9f, before %.6f and %.9f", turn, sky, beams[0].Chance, first, firstBeam.Chance)
		}
	}
}

// More leaf or wood never brightens; a larger circle is never darker at its centre; T lies between P0 and 1.
func TestMonotone(t *testing.T) {
	last, lastCentre := 2.0, -1.0
	for _, lai := range []float64{0, 0.5, 1, 2, 4, 8} {
		l := mixed()
		l[1].LAI = lai
		l[1].WAI = lai / 10
		s := stand(t, profile(t, l...), Ground{0.3, 2}, Opening{circle(t, 20), profile(t)})
		sky, beams := skyAndBeam(s, Point{4, 3, 0.5}, someSuns, []float64{1, 1})
		for _, b := range beams {
			if b.Chance > b.Transmittance || b.Transmittance > 1 || b.Chance < 0 {
				t.Errorf("LAI %g: chance %g, transmittance %g", lai, b.Chance, b.Transmittance)
			}
		}
		if sky > last {
			t.Errorf("LAI %g is brighter than less: %.6f after %.6f", lai, sky, last)
		}
		last = sky
	}
	for D := 0.0; D < 80; D += 2.4 {
		s := stand(t, profile(t, mixed()...), Ground{0.3, 2}, Opening{circle(t, D), profile(t)})
		sky, _ := skyAndBeam(s, Point{0, 0, 0.5}, someSuns, []float64{1, 1})
		if sky < lastCentre-1e-9 {
			t.Errorf("a circle of %.1f m is darker at its centre than a smaller one: %.6f after %.6f", D, sky, lastCentre)
		}
		lastCentre = sky
	}
}

// Leaves that fall leave the wood; a horizon and a hill take their part of the sky.
func TestLeafFallHorizonAndHill(t *testing.T) {
	m := profile(t, mixed()...)
	s := stand(t, m, Ground{})
	onlyWood := profile(t, Layer{Bottom: 2, Top: 12, WAI: 0.2, Chi: 1, Clumping: 0.8, Absorptance: 1}, Layer{Bottom: 9, Top: 24, WAI: 0.4, Chi: 1, Clumping: 0.95, Absorptance: 1})
	a, _ := skyAndBeam(s, Point{}, someSuns, []float64{0, 0})
	b, _ := skyAndBeam(stand(t, onlyWood, Ground{}), Point{}, someSuns, []float64{1, 1})
	if math.Abs(a-b) > 1e-9 {
		t.Errorf("leafless %.9f, wood alone %.9f", a, b)
	}
	ring := Horizon{Azimuth: []float64{0}, Elevation: []float64{0.5}}
	h, err := NewStand(profile(t), nil, Ground{}, ring)
	if err != nil {
		t.Fatal(err)
	}
	if sky, beams := skyAndBeam(h, Point{}, someSuns, []float64{1}); math.Abs(sky-math.Pow(math.Cos(0.5), 2)) > 1e-9 || beams[0].Chance != 0 || beams[2].Chance != 1 {
		t.Errorf("a horizon of 0.5 rad all round leaves %.6f of the sky, want cos^2", sky)
	}
	slope := 0.6
	// level plane on a bare slope: half the sky below the hill's edge is dark; (1 + cos slope)/2 is for the slope's own plane,
	// on the level plane the lost part is the lune integral (1 - cos slope)/2 as well (both by symmetry of the cosine)
	if sky, _ := skyAndBeam(stand(t, profile(t), Ground{slope, 2}), Point{}, someSuns, []float64{1}); math.Abs(sky-(1+math.Cos(slope))/2) > 1e-4 {
		t.Errorf("a bare slope of %.1f rad sees %.5f of the sky, want %.5f", slope, sky, (1+math.Cos(slope))/2)
	}
}

// What black leaves take in and what comes through add up to what arrived: the light lost between two heights is the light on
// the leaves between them.
func TestAbsorbedAndTransmitted(t *testing.T) {
	const lai = 4.0
	β := 0.7
	l := Layer{Bottom: 0, Top: 10, LAI: lai, Chi: 1.7, Clumping: 1, Absorptance: 1}
	s := stand(t, profile(t, l), Ground{})
	sin, cos := math.Sincos(β)
	K := LeafProjection(l.Chi, sin, cos) / sin
	absorbed := 0.0
	const n = 2000
	out := make([]Beam, 1)
	tracer, rays := s.NewTracer(), s.Rays([]Direction{{β, 0}})
	for i := range n {
		tracer.Trace(Point{Height: (float64(i) + 0.5) / n * 10}, rays, []int32{0}, [][]float64{{1}}, out)
		absorbed += K * out[0].Chance * lai / n
	}
	tracer.Trace(Point{}, rays, []int32{0}, [][]float64{{1}}, out)
	if sum := absorbed + out[0].Chance; math.Abs(sum-1) > 1e-4 {
		t.Errorf("absorbed %.5f and transmitted %.5f make %.5f", absorbed, out[0].Chance, sum)
	}
}

// A point on the outline itself has the light of its neighbours.
func TestOnTheOutline(t *testing.T) {
	m := profile(t, mixed()...)
	for name, o := range shapes(t) {
		s := stand(t, m, Ground{0.2, 1}, Opening{o, profile(t)})
		for _, φ := range []float64{0, math.Pi / 2, 2, 4} {
			d := Reach(o, φ)
			sin, cos := math.Sincos(φ)
			at := func(d float64) float64 {
				return skyLight(s, Point{d * sin, d * cos, 0.5}, evenDome(18, 1, 720), []float64{1, 1}, false)
			}
			in, on, out := at(d-0.01), at(d), at(d+0.01)
			if on < math.Min(in, out)-0.002 || on > math.Max(in, out)+0.002 {
				t.Errorf("%s, azimuth %.2f: %.4f on the outline, %.4f inside, %.4f outside", name, φ, on, in, out)
			}
		}
	}
}
