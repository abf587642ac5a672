package scenarios_test

import (
	"fmt"
	"math"
	"strings"
	"testing"
	"time"

	"shadeledger/canopy"
	"shadeledger/radiation"
	"shadeledger/radiation/weather"
	"shadeledger/scenarios/light"
)

// The rough light table of the invented Kettle Bench stand was made by hand geometry: a sharp-edged cylinder in a uniform slab
// from crown base to top, parallel to the slope; leaf projection 0.5, clumping 0.95, LAI 5.0 (thinned 3.3, 2.2, 1.5);
// standard overcast sky; PAR 2.04 mol per MJ; mid-month sun; the light on a plane parallel to the slope at 0.5 m over that on
// the level in the open, May to September. Here the program's parts make the same figures, then change one thing at a time.

// setup is how the table is made.
type setup struct {
	slopeAxis   bool // trees and the opening's walls stand square to the slope, not upright
	onOutline   bool // edge places on the outline
	circumsolar bool // light round the sun counts as beam: both terms of Spitters et al. 1986, eqs 9 and 10
	slopePlane  bool
	allWeather  bool
	everyDay    bool
	leafDates   bool
	absorptance float64
	wood        float64
	aspect      float64 // deg
}

var rough = setup{slopeAxis: true, onOutline: true, circumsolar: true, slopePlane: true, absorptance: 1, aspect: 155}

const tall, base = 78 * 0.3048, 30 * 0.3048

func kettleNormals(days int) *weather.Normals {
	n := &weather.Normals{
		Mean:         [12]float64{-8.3, -7.1, -1.6, 5.4, 12.4, 17.2, 19.6, 18.6, 14.3, 7.9, 1.9, -4.7},
		Min:          [12]float64{-13.9, -13.2, -7.4, -0.5, 5.7, 10.9, 13.4, 12.5, 8.3, 2.6, -2.4, -9},
		Max:          [12]float64{-2.7, -1, 4.2, 11.3, 19.1, 23.5, 25.8, 24.7, 20.3, 13.2, 6.2, -0.4},
		Global:       [12]float64{6.1, 9.4, 13.5, 16.4, 19.3, 21.1, 21, 17.9, 13.9, 8.9, 5.5, 4.7},
		DiffuseShare: [12]float64{.58, .54, .52, .52, .52, .5, .48, .49, .5, .54, .6, .62},
		DaysPerMonth: days,
	}
	for m := range n.SunshineShare {
		n.SunshineShare[m] = math.NaN()
	}
	return n
}

// season is the light of May to September at points of a stand, percent of full light.
func (u setup) season(t *testing.T, lai float64, o canopy.Outline, points []canopy.Point) []float64 {
	t.Helper()
	layer := canopy.Layer{Bottom: base, Top: tall, LAI: lai, WAI: u.wood * lai / 5, Chi: 1, Clumping: 0.95, Absorptance: u.absorptance}
	matrix, err := canopy.NewProfile([]canopy.Layer{layer})
	if err != nil {
		t.Fatal(err)
	}
	bare, err := canopy.NewProfile(nil)
	if err != nil {
		t.Fatal(err)
	}
	ground := canopy.Ground{Slope: math.Atan(0.18), Aspect: u.aspect * rad}
	var openings []canopy.Opening
	if o != nil {
		openings = []canopy.Opening{{Outline: o, Inside: bare}}
	}
	standing := ground
	if u.slopeAxis {
		standing = canopy.Ground{} // light is turned into the slope's own frame instead
	}
	stand, err := canopy.NewStand(matrix, openings, standing, canopy.Horizon{})
	if err != nil {
		t.Fatal(err)
	}
	days := 1
	if u.everyDay {
		days = 0
	}
	site := radiation.Site{Latitude: 44.35 * rad, Longitude: -71.9 * rad, UTCOffset: -5}
	series := kettleNormals(days).Series(site, 15*time.Minute, weather.Par{Fraction: 2.04 / 4.57})
	var sky radiation.Sky = radiation.Overcast{}
	if u.allWeather {
		sky = radiation.AllWeather{}
	}
	above := light.NewAbove(series, sky, light.Station)
	shares := func(d int) []float64 {
		if !u.leafDates {
			return []float64{1}
		}
		x := series.Days[d]
		n := time.Date(2015, x.Month, x.Day, 0, 0, 0, 0, time.UTC).YearDay() - 1
		return []float64{ramp(133, 154, 270, 290)(n)}
	}
	mask := make([]bool, len(series.Days))
	for d, x := range series.Days {
		mask[d] = x.Month >= 5 && x.Month <= 9
	}
	out := make([]float64, len(points))
	if !u.slopePlane {
		light.NewScene(above, stand, shares).Survey(points, 2, func(_, i int, r *light.Regime) {
			s, _ := r.Over(mask)
			out[i] = s.Percent()
		})
		return out
	}
	for i, p := range points {
		out[i] = u.onSlope(series, mask, stand, ground, p)
	}
	return out
}

// turned is a direction in the frame of the slope: elevation over its plane, azimuth on it.
func turned(d canopy.Direction, g canopy.Ground) canopy.Direction {
	sinS, cosS := math.Sincos(g.Slope)
	sinA, cosA := math.Sincos(g.Aspect)
	sinβ, cosβ := math.Sincos(d.Elevation)
	down := cosβ * math.Cos(d.Azimuth-g.Aspect)
	along := cosβ * math.Sin(d.Azimuth-g.Aspect) // along the contour
	down, up := down*cosS-sinβ*sinS, down*sinS+sinβ*cosS
	return canopy.Direction{Elevation: math.Asin(up), Azimuth: math.Atan2(down*sinA+along*cosA, down*cosA-along*sinA)}
}

// onSlope sums beam and overcast sky on a plane parallel to the slope over the light on the level in the open.
func (u setup) onSlope(series *weather.Series, mask []bool, stand *canopy.Stand, ground canopy.Ground, p canopy.Point) float64 {
	through := func(list []canopy.Direction) []canopy.Beam {
		seen := append([]canopy.Direction(nil), list...)
		if u.slopeAxis {
			for i, d := range seen {
				seen[i] = turned(d, ground)
			}
		}
		out := make([]canopy.Beam, len(seen))
		stand.NewTracer().Trace(p, stand.Rays(seen), make([]int32, len(seen)), [][]float64{{1}}, out)
		return out
	}
	incidence := func(d canopy.Direction) float64 { return math.Max(0, math.Sin(turned(d, ground).Elevation)) }
	var grid, suns []canopy.Direction
	for i := range 45 {
		for j := range 120 {
			grid = append(grid, canopy.Direction{Elevation: (float64(i) + 0.5) * 2 * rad, Azimuth: (float64(j) + 0.5) * 3 * rad})
		}
	}
	beams := through(grid)
	sky := 0.0
	for i, d := range grid {
		sky += beams[i].Transmittance * radiation.OvercastRadiance(math.Sin(d.Elevation)) * incidence(d) * math.Cos(d.Elevation) * 2 * rad * 3 * rad
	}
	lit := &series.Lit
	for i := range lit.Step {
		suns = append(suns, canopy.Direction{Elevation: lit.Elevation[i], Azimuth: lit.Azimuth[i]})
	}
	beams = through(suns)
	spot, open := 0.0, 0.0
	for d, x := range series.Days {
		if !mask[d] {
			continue
		}
		for i := x.LitFrom; i < x.LitTo; i++ {
			D, B := lit.Diffuse[i], lit.Beam[i]
			if u.circumsolar && D > 0 {
				q := globalShare(D / (D + B))
				β := lit.Elevation[i]
				less := 1 / (1 + (1-q*q)*math.Pow(math.Sin(β), 2)*math.Pow(math.Cos(β), 3))
				D, B = less*D, B+(1-less)*D
			}
			spot += x.Weight * (D*sky + beams[i].Transmittance*B/math.Sin(lit.Elevation[i])*incidence(suns[i]))
			open += x.Weight * (lit.Diffuse[i] + lit.Beam[i])
		}
	}
	return 100 * spot / open
}

// globalShare is the diffuse share of global radiation whose share of PAR is qp.
func globalShare(qp float64) float64 {
	low, high := 0.0, 1.0
	for range 40 {
		if m := (low + high) / 2; radiation.DiffusePAR(m) < qp {
			low = m
		} else {
			high = m
		}
	}
	return low
}

func feet(length, width, bearing float64) canopy.Outline {
	if length == width {
		c, err := canopy.NewCircle(length * 0.3048)
		if err != nil {
			panic(err)
		}
		return c
	}
	e, err := canopy.NewEllipse(length*0.3048, width*0.3048, bearing*rad)
	if err != nil {
		panic(err)
	}
	return e
}

// kettleRows are the treatments of the rough table with its figures: S edge, S third, centre, N third, N edge; one for no opening.
var kettleRows = []struct {
	name    string
	lai     float64
	outline canopy.Outline
	want    []float64
}{
	{"no action", 5, nil, []float64{5}}, {"thin to 90", 3.3, nil, []float64{12}}, {"thin to 60", 2.2, nil, []float64{24}}, {"thin to 40", 1.5, nil, []float64{36}},
	{"circle 78 ft", 5, feet(78, 78, 0), []float64{15, 23, 40, 41, 34}}, {"circle 117 ft", 5, feet(117, 117, 0), []float64{19, 41, 59, 54, 41}},
	{"oval E-W", 5, feet(166, 83, 90), []float64{21, 39, 61, 59, 50}}, {"oval N-S", 5, feet(166, 83, 0), []float64{16, 39, 53, 46, 31}},
	{"circle 156 ft", 5, feet(156, 156, 0), []float64{21, 55, 71, 64, 46}},
}

// spots are the table's five places, or one under the canopy. Its edge is the outline itself; the program's edge
// station stands 0.5 m inside.
func (u setup) spots(o canopy.Outline) []canopy.Point {
	if o == nil {
		return []canopy.Point{{Height: 0.5}}
	}
	if u.onOutline {
		N, S := canopy.Reach(o, 0), canopy.Reach(o, math.Pi)
		return []canopy.Point{{Y: -S, Height: 0.5}, {Y: -S * 2 / 3, Height: 0.5}, {Height: 0.5}, {Y: N * 2 / 3, Height: 0.5}, {Y: N, Height: 0.5}}
	}
	at := map[string]canopy.Point{}
	for _, s := range canopy.DefaultStations(o, tall) {
		at[s.Name] = canopy.Point{X: s.X, Y: s.Y, Height: 0.5}
	}
	return []canopy.Point{at["S edge"], at["S third"], at["centre"], at["N third"], at["N edge"]}
}

func (u setup) table(t *testing.T) (out [][]float64) {
	t.Helper()
	for _, r := range kettleRows {
		out = append(out, u.season(t, r.lai, r.outline, u.spots(r.outline)))
	}
	return out
}

func show(v []float64) string {
	var b strings.Builder
	for _, x := range v {
		fmt.Fprintf(&b, "%6.1f", x)
	}
	return b.String()
}

func TestKettleTable(t *testing.T) {
	got := rough.table(t)
	worst := 0.0
	for i, r := range kettleRows {
		t.Logf("%-14s made here %s   rough table %s", r.name, show(got[i]), show(r.want))
		for j, want := range r.want {
			miss := math.Abs(got[i][j] - want)
			worst = math.Max(worst, miss)
			if miss > 4 {
				t.Errorf("%s, place %d: %.1f, rough table %.0f", r.name, j+1, got[i][j], want)
			}
		}
	}
	t.Logf("worst %.1f points", worst)
}

// From the rough table's set-up to the program's own, one change at a time; what each does to every place is printed. The
// order of the table holds at every step, and at the end.
func TestKettleStepByStep(t *testing.T) {
	u := rough
	steps := []struct {
		name   string
		change func(*setup)
	}{
		{"the rough table's set-up", func(*setup) {}},
		{"upright trees and walls", func(u *setup) { u.slopeAxis = false }},
		{"edge stations 0.5 m inside", func(u *setup) { u.onOutline = false }},
		{"light round the sun counts as sky", func(u *setup) { u.circumsolar = false }},
		{"level plane", func(u *setup) { u.slopePlane = false }},
		{"leaves scatter (absorptance 0.85)", func(u *setup) { u.absorptance = 0.85 }},
		{"every day of its own clearness", func(u *setup) { u.everyDay = true }},
		{"all-weather sky", func(u *setup) { u.allWeather = true }},
		{"wood, area index 0.6", func(u *setup) { u.wood = 0.6 }},
		{"leaf-out in May", func(u *setup) { u.leafDates = true }},
	}
	var before [][]float64
	for _, s := range steps {
		s.change(&u)
		now := u.table(t)
		t.Logf("%s", s.name)
		for i, r := range kettleRows {
			if before == nil {
				t.Logf("  %-14s %s", r.name, show(now[i]))
				continue
			}
			effect := make([]float64, len(now[i]))
			for j := range effect {
				effect[j] = now[i][j] - before[i][j]
			}
			t.Logf("  %-14s %s   change %s", r.name, show(now[i]), show(effect))
		}
		before = now
		ordered(t, s.name, u, now)
	}
}

// ordered asserts what the table says: a larger circle is never darker at its centre, the oval lying east-west beats the same
// oval lying north-south at the north third, more leaf is darker, and a north slope is darker than a south slope.
func ordered(t *testing.T, name string, u setup, table [][]float64) {
	t.Helper()
	row := map[string][]float64{}
	for i, r := range kettleRows {
		row[r.name] = table[i]
	}
	if !(row["circle 78 ft"][2] < row["circle 117 ft"][2] && row["circle 117 ft"][2] < row["circle 156 ft"][2]) {
		t.Errorf("%s: larger circles are not brighter at the centre: %v", name, table)
	}
	if row["oval E-W"][3] <= row["oval N-S"][3] {
		t.Errorf("%s: north third of the oval: E-W %.1f, N-S %.1f", name, row["oval E-W"][3], row["oval N-S"][3])
	}
	if !(row["no action"][0] < row["thin to 90"][0] && row["thin to 90"][0] < row["thin to 60"][0] && row["thin to 60"][0] < row["thin to 40"][0]) {
		t.Errorf("%s: thinning does not brighten: %v", name, table[:4])
	}
	north := u
	north.aspect = 335
	o := feet(117, 117, 0)
	if n := north.season(t, 5, o, []canopy.Point{{Height: 0.5}})[0]; n >= row["circle 117 ft"][2] {
		t.Errorf("%s: the centre of the 117 ft circle has %.1f facing north, %.1f facing south", name, n, row["circle 117 ft"][2])
	} else {
		t.Logf("  117 ft circle turned to aspect 335: centre %.1f", n)
	}
}
