package canopy

import (
	"fmt"
	"math"
	"testing"
)

// spots are the default stations of an outline at one height.
func spots(o Outline, H, z float64) (out []Point) {
	for _, s := range DefaultStations(o, H) {
		out = append(out, Point{s.X, s.Y, z})
	}
	return out
}

// The domes in use against a dome of many azimuths and rings, at every default station.
func TestDomesConverge(t *testing.T) {
	const H = 24.0
	l := Layer{Bottom: 9, Top: H, LAI: 5, Chi: 1, Clumping: 0.95, Absorptance: 0.85}
	m := profile(t, l)
	ell, _ := NewEllipse(50, 25, 0.7)
	strip, _ := NewStrip(60, 15, 1.1)
	poly, _, _, err := NewPolygon([][2]float64{{0, 0}, {40, 0}, {40, 18}, {18, 18}, {18, 40}, {0, 40}})
	if err != nil {
		t.Fatal(err)
	}
	fine := evenDome(30, 1, 720)
	outlines := map[string]Outline{"circle 0.25 H": circle(t, 6), "circle 1 H": circle(t, 24), "circle 4 H": circle(t, 96), "ellipse": ell, "strip": strip, "L": poly}
	domes := []struct {
		name         string
		dome         *Dome
		limit, worst float64 // points of full light
		where        string
	}{
		{name: "fixed", dome: FixedSkyDome(), limit: 0.1},
		{name: "all-weather", dome: AllWeatherDome(), limit: 0.2},
		{name: "map", dome: MapDome(), limit: 0.7},
	}
	for shape, o := range outlines {
		for _, g := range []Ground{{}, {math.Atan(0.4), 1}} {
			s := stand(t, m, g, Opening{o, profile(t)})
			for i, p := range spots(o, H, 0.5) {
				want := skyLights(s, p, fine, []float64{1})
				for k := range domes {
					d := &domes[k]
					for sky, got := range skyLights(s, p, d.dome, []float64{1}) {
						if diff := 100 * math.Abs(got-want[sky]); diff > d.worst {
							d.worst, d.where = diff, fmt.Sprintf("%s station %d slope %.2f overcast %v", shape, i, g.Slope, sky == 1)
						}
					}
				}
			}
		}
	}
	for _, d := range domes {
		t.Logf("%s dome: worst %.3f points of full light at %s", d.name, d.worst, d.where)
		if d.worst > d.limit {
			t.Errorf("%s dome: %.3f points, limit %g", d.name, d.worst, d.limit)
		}
	}
}

func BenchmarkScan(b *testing.B) {
	const H = 24.0
	m := profile(b, Layer{Bottom: 9, Top: H, LAI: 5, Chi: 1, Clumping: 0.95, Absorptance: 0.85})
	for name, d := range map[string]*Dome{"fixed": FixedSkyDome(), "all-weather": AllWeatherDome(), "map": MapDome()} {
		s := stand(b, m, Ground{0.2, 1}, Opening{circle(b, 36), profile(b)})
		v, c := s.NewSkyScan(d), NewCellLight(d)
		b.Run(name, func(b *testing.B) {
			b.ReportAllocs()
			for range b.N {
				v.Scan(Point{3, 10, 0.5})
			}
			b.ReportMetric(float64(len(v.nodes)), "nodes")
		})
		b.Run(name+" transmit", func(b *testing.B) {
			for range b.N {
				v.Transmit([]float64{0.5}, c)
			}
		})
	}
}
