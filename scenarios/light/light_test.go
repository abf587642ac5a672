package light

import (
	"math"
	"testing"
	"time"

	"shadeledger/canopy"
	"shadeledger/radiation"
	"shadeledger/radiation/weather"
)

const deg = math.Pi / 180

// normals make a series of a few days a month at a latitude, sunshine in half of the hours.
func normals(latitude float64, step time.Duration, days int) *weather.Series {
	n := &weather.Normals{DaysPerMonth: days}
	for m := range 12 {
		n.Mean[m], n.Min[m], n.Max[m] = 8, 3, 13
		n.Global[m], n.DiffuseShare[m], n.SunshineShare[m] = math.NaN(), math.NaN(), 0.5
	}
	return n.Series(radiation.Site{Latitude: latitude * deg, Longitude: 0.1}, step, weather.Par{Fraction: 0.45})
}

func profile(t testing.TB, layers ...canopy.Layer) *canopy.Profile {
	t.Helper()
	p, err := canopy.NewProfile(layers)
	if err != nil {
		t.Fatal(err)
	}
	return p
}

func stand(t testing.TB, matrix *canopy.Profile, diameter float64, g canopy.Ground, h canopy.Horizon) *canopy.Stand {
	t.Helper()
	c, err := canopy.NewCircle(diameter)
	if err != nil {
		t.Fatal(err)
	}
	s, err := canopy.NewStand(matrix, []canopy.Opening{{Outline: c, Inside: profile(t)}}, g, h)
	if err != nil {
		t.Fatal(err)
	}
	return s
}

var trees = []canopy.Layer{{Bottom: 9, Top: 24, LAI: 4, WAI: 0.4, Chi: 1, Clumping: 0.95, Absorptance: 0.85}}

func always(int) []float64 { return []float64{1} }

func every(s *weather.Series) []bool {
	m := make([]bool, len(s.Days))
	for i := range m {
		m[i] = true
	}
	return m
}

// percent is the year's light at points.
func percent(a *Above, s *canopy.Stand, shares func(int) []float64, points ...canopy.Point) []float64 {
	out := make([]float64, len(points))
	NewScene(a, s, shares).Survey(points, 1, func(_, i int, r *Regime) {
		sums, _ := r.Over(every(a.Series))
		out[i] = sums.Percent()
	})
	return out
}

var skies = map[string]radiation.Sky{"uniform": radiation.Uniform{}, "overcast": radiation.Overcast{}, "all-weather": radiation.AllWeather{}}

// Open ground has all light under every sky; free shapes carry a flux of one; an opening of no size is the matrix; a hill or
// a horizon takes the sun away; unscattered, scattered and sky light add up.
func TestOpenAndEmpty(t *testing.T) {
	series := normals(47, 30*time.Minute, 2)
	for name, sky := range skies {
		a := NewAbove(series, sky, Station)
		if v := percent(a, stand(t, profile(t), 0, canopy.Ground{}, canopy.Horizon{}), always, canopy.Point{})[0]; math.Abs(v-100) > 1e-4 {
			t.Errorf("%s: open ground has %.6f %%", name, v)
		}
		for k := 0; k < len(a.OpenRings); k += a.Rings() {
			flux := 0.0
			for r := range a.Rings() {
				c0, c1 := math.Cos(a.Zenith[r]), math.Cos(a.Zenith[r+1])
				flux += a.OpenRings[k+r] * (c0 + c1) / 2 // mean cosine over a ring's solid angle
			}
			if math.Abs(flux-1) > 0.002 { // rings of one radiance; overcast varies within a ring
				t.Fatalf("%s: a free pattern carries %.5f", name, flux)
			}
		}
		matrix := profile(t, trees...)
		whole, err := canopy.NewStand(matrix, nil, canopy.Ground{}, canopy.Horizon{})
		if err != nil {
			t.Fatal(err)
		}
		p := canopy.Point{Height: 0.5}
		if x, y := percent(a, whole, always, p)[0], percent(a, stand(t, matrix, 0, canopy.Ground{}, canopy.Horizon{}), always, p)[0]; x != y {
			t.Errorf("%s: an opening of no size has %.9f %%, the matrix %.9f", name, y, x)
		}
		NewScene(a, stand(t, matrix, 20, canopy.Ground{}, canopy.Horizon{}), always).Survey([]canopy.Point{p}, 1, func(_, _ int, r *Regime) {
			for i, P := range r.BeamChance {
				if P < 0 || P > 1 || r.Scattered[i] < 0 || r.SkyPlane[i] < 0 || r.SkyPlane[i] > series.Lit.Diffuse[i]*(1+1e-6) || r.Scattered[i] > series.Lit.Beam[i] {
					t.Fatalf("%s, sub-step %d: chance %g, scattered %g of %g, sky %g of %g", name, i, P, r.Scattered[i], series.Lit.Beam[i], r.SkyPlane[i], series.Lit.Diffuse[i])
				}
			}
			s, days := r.Over(every(series))
			if math.Abs(s.SunfleckPercent()-100*s.Beam/(s.Beam+s.Scattered+s.Sky)) > 1e-9 || math.Abs(days-365) > 1e-9 {
				t.Errorf("%s: sums %+v over %g days", name, s, days)
			}
		})
		dark := canopy.Horizon{Azimuth: []float64{0}, Elevation: []float64{1.4}}
		if v := percent(a, stand(t, profile(t), 0, canopy.Ground{}, dark), always, canopy.Point{})[0]; v > 6 {
			t.Errorf("%s: below a horizon of 80 degrees there is %.2f %%", name, v)
		}
	}
}

// Any number of workers gives the same bits.
func TestWorkersGiveTheSameBits(t *testing.T) {
	series := normals(47, 30*time.Minute, 1)
	s := stand(t, profile(t, trees...), 30, canopy.Ground{Slope: 0.2, Aspect: 1}, canopy.Horizon{})
	var points []canopy.Point
	for i := range 23 {
		points = append(points, canopy.Point{X: float64(i) - 11, Y: float64(i*i%17) - 8, Height: 0.5})
	}
	scene := NewScene(NewAbove(series, radiation.AllWeather{}, Station), s, always)
	var first []Sums
	for _, workers := range []int{1, 2, 7} {
		out := make([]Sums, len(points))
		scene.Survey(points, workers, func(_, i int, r *Regime) { out[i], _ = r.Over(every(series)) })
		if first == nil {
			first = out
		}
		for i := range out {
			if out[i] != first[i] {
				t.Fatalf("point %d: %v with %d workers, %v with one", i, out[i], workers, first[i])
			}
		}
	}
}

// The all-weather sky at every step by a fine even grid of directions, against the cells that keep a pattern for half an hour:
// a third of a point at any station and 0.2 points on the season.
func TestAllWeatherAgainstFineSky(t *testing.T) {
	series := normals(44, 15*time.Minute, 1)
	s := stand(t, profile(t, trees...), 36, canopy.Ground{Slope: 0.3, Aspect: 2.7}, canopy.Horizon{})
	points := []canopy.Point{{Height: 0.5}, {Y: 12, Height: 0.5}, {Y: -17, Height: 0.5}, {X: 17.5, Height: 0.5}, {Y: 30, Height: 0.5}}
	got := make([]Sums, len(points))
	NewScene(NewAbove(series, radiation.AllWeather{}, Station), s, always).Survey(points, 1, func(_, i int, r *Regime) { got[i], _ = r.Over(every(series)) })
	const rows, columns = 60, 120
	var directions []canopy.Direction
	for i := range rows {
		for j := range columns {
			directions = append(directions, canopy.Direction{Elevation: math.Pi/2 - (float64(i)+0.5)/rows*math.Pi/2, Azimuth: (float64(j) + 0.5) / columns * 2 * math.Pi})
		}
	}
	out := make([]canopy.Beam, len(directions))
	lit := &series.Lit
	worst := 0.0
	for k, p := range points {
		s.NewTracer().Trace(p, s.Rays(directions), make([]int32, len(directions)), [][]float64{{1}}, out)
		var sky, open float64
		for d := range series.Days {
			for i := series.Days[d].LitFrom; i < series.Days[d].LitTo; i++ {
				sun := lit.Elevation[i]
				p := radiation.PerezSky(lit.Clearness[i], lit.Brightness[i], math.Pi/2-sun)
				var through, all float64
				for n, v := range directions {
					sinE, cosE := math.Sincos(v.Elevation)
					R := p.Relative(sinE, sinE*math.Sin(sun)+cosE*math.Cos(sun)*math.Cos(v.Azimuth-lit.Azimuth[i])) * sinE * cosE
					through += R * out[n].Transmittance
					all += R
				}
				sky += lit.Diffuse[i] * through / all * series.Days[d].Weight
				open += (lit.Diffuse[i] + lit.Beam[i]) * series.Days[d].Weight
			}
		}
		open *= series.Seconds * 1e-6
		sky *= series.Seconds * 1e-6
		miss := 100 * math.Abs(sky-got[k].Sky) / open
		worst = math.Max(worst, miss)
		if miss > 0.2 || math.Abs(open/got[k].Open-1) > 1e-9 {
			t.Errorf("point %d: sky light %.3f %% of all, by the fine grid %.3f", k, 100*got[k].Sky/open, 100*sky/open)
		}
	}
	t.Logf("worst %.3f points of full light", worst)
}

// Leaf shares between anchors: the blended sky against scanning with the very share, with one and with two calendars.
func TestLeafSharesBetweenAnchors(t *testing.T) {
	series := normals(47, time.Hour, 1)
	two := profile(t, trees[0], canopy.Layer{Bottom: 0.6, Top: 3, LAI: 1.5, Chi: 1, Clumping: 1, Absorptance: 0.85, Phenology: 1})
	s := stand(t, two, 20, canopy.Ground{}, canopy.Horizon{})
	a := NewAbove(series, radiation.Uniform{}, Station)
	for _, shares := range [][]float64{{0.1, 1}, {0.37, 0}, {0.9, 1}, {0.4, 0.7}, {0, 0}} {
		p := canopy.Point{Y: 4, Height: 0.5}
		scan := s.NewSkyScan(a.dome)
		scan.Scan(p)
		c := canopy.NewCellLight(a.dome)
		scan.Transmit(shares, c)
		want := 0.0
		for _, v := range c.Plane {
			want += v / math.Pi
		}
		NewScene(a, s, func(int) []float64 { return shares }).Survey([]canopy.Point{p}, 1, func(_, _ int, r *Regime) {
			for i, D := range series.Lit.Diffuse {
				if D > 0 && math.Abs(r.SkyPlane[i]/D-want) > 1e-3*want { // what anchorsPerUnit promises
					t.Fatalf("shares %v: sky %.6f, want %.6f", shares, r.SkyPlane[i]/D, want)
				}
			}
		})
	}
}

// The scaled regime's percent of full light from the histogram against the sum over every step.
func TestCapsAgainstPlainSum(t *testing.T) {
	series := normals(47, 30*time.Minute, 2)
	s := stand(t, profile(t, trees...), 24, canopy.Ground{Slope: 0.3, Aspect: 0.4}, canopy.Horizon{})
	mask := every(series)
	worst := 0.0
	for name, sky := range skies {
		points := []canopy.Point{{Height: 0.5}, {Y: -11, Height: 0.5}, {Y: 40, Height: 0.5}}
		NewScene(NewAbove(series, sky, Station), s, always).Survey(points, 1, func(_, i int, r *Regime) {
			var caps Caps
			r.Caps(mask, &caps)
			for _, k := range []float64{0.01, 0.5, 1, 1.3, 2, 5, 20, 300} {
				spot, full := 0.0, 0.0
				for d := range series.Days {
					for i := series.Days[d].LitFrom; i < series.Days[d].LitTo; i++ {
						Ib, D := series.Lit.Beam[i], series.Lit.Diffuse[i]
						c := math.Min(1, k*r.BeamChance[i])
						spot += series.Days[d].Weight * (c*Ib + math.Min(k*r.SkyPlane[i], D) + math.Min(k*r.Scattered[i], Ib*(1-c)))
						full += series.Days[d].Weight * (Ib + D)
					}
				}
				miss := math.Abs(caps.Percent(k) - 100*spot/full)
				worst = math.Max(worst, miss)
				if miss > 0.1 {
					t.Errorf("%s, point %d, k %g: %.4f %%, plainly %.4f", name, i, k, caps.Percent(k), 100*spot/full)
				}
			}
		})
	}
	t.Logf("worst %.4f points", worst)
}

// The southern hemisphere half a year on, with north and south exchanged, has the same light.
func TestSouthMirrorsNorth(t *testing.T) {
	north, south := normals(45, 30*time.Minute, 2), normals(-45, 30*time.Minute, 2)
	m := profile(t, trees...)
	a := NewAbove(north, radiation.AllWeather{}, Station)
	b := NewAbove(south, radiation.AllWeather{}, Station)
	x := percent(a, stand(t, m, 30, canopy.Ground{Slope: 0.3, Aspect: math.Pi}, canopy.Horizon{}), always, canopy.Point{Y: 9, Height: 0.5}, canopy.Point{Y: -9, Height: 0.5})
	y := percent(b, stand(t, m, 30, canopy.Ground{Slope: 0.3, Aspect: 0}, canopy.Horizon{}), always, canopy.Point{Y: -9, Height: 0.5}, canopy.Point{Y: 9, Height: 0.5})
	for i := range x {
		if math.Abs(x[i]-y[i]) > 0.7 { // the sun is nearer in the southern summer, the days do not fall alike
			t.Errorf("point %d: north %.2f %%, south %.2f", i, x[i], y[i])
		}
	}
	if x[0] < x[1]+5 {
		t.Errorf("north of the equator the north side has %.1f %%, the south side %.1f", x[0], x[1])
	}
}

func BenchmarkSurvey(b *testing.B) {
	series := normals(44, 15*time.Minute, 0)
	s := stand(b, profile(b, trees...), 36, canopy.Ground{Slope: 0.2, Aspect: 2.7}, canopy.Horizon{})
	var points []canopy.Point
	for _, st := range canopy.DefaultStations(must(canopy.NewCircle(36)), 24) {
		points = append(points, canopy.Point{X: st.X, Y: st.Y, Height: 0.5})
	}
	for name, sky := range skies {
		scene := NewScene(NewAbove(series, sky, Station), s, always)
		b.Run(name, func(b *testing.B) {
			b.ReportAllocs()
			for range b.N {
				scene.Survey(points, 1, func(int, int, *Regime) {})
			}
			b.ReportMetric(float64(b.Elapsed().Nanoseconds())/float64(b.N)/float64(len(points))/float64(len(series.Lit.Step)), "ns/point-step")
		})
	}
}

func must[T any](v T, err error) T {
	if err != nil {
		panic(err)
	}
	return v
}
