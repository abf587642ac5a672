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
	scan := s.NewSkyScan(d)
	scan.Scan(p)
	c := NewCellLight(d)
	scan.Transmit(shares, c)
	open := d.Open()
	sum, all := 0.0, 0.0
	for i := range c.Plane {
		R := 1.0
		if overcast { // mean over the ring, cosine-weighted: 1 + 2 <cos>
			r := i / d.Sectors
			c0, c1 := math.Cos(d.Zenith[r]), math.Cos(d.Zenith[r+1])
			R = 1 + 2*(2.0/3)*(c0*c0*c0-c1*c1*c1)/(c0*c0-c1*c1)
		}
		sum += R * c.Plane[i]
		all += R * open.Plane[i]
	}
	return sum / all
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
