package plan

import (
	"math"
	"reflect"
	"strings"
	"testing"

	"shadeledger/scenarios"
)

// ofTheExample opens files of the built-in example.
func ofTheExample(name string) ([]byte, error) {
	return examples.ReadFile("examples/" + BuiltIn + "/" + name)
}

// limited is a small plan with every limit and places of openings.
func limited(t testing.TB) string {
	t.Helper()
	return string(sound(t, `  - {name: Hole, opening: {circle: {diameter: 40 m}}, centres: centres.geojson}
  - {name: Holes, opening: {circle: {diameter: 40 m}}, count: 3}
limits:
  opening: 0.5 ac
  total_share: 15 %
  residual: {basal_area: 60 ft2/ac}
  adjacency: {area: 2 ha, unsecured: 0.8 ha}
  buffers: [{name: pool, distance: 100 ft, polygon: pool.geojson}, {name: stream, distance: 75 ft, polygon: stream.geojson}]
  no_cut: [{from: 1 Apr, to: 31 Aug}]
`))
}

// Limits are read in SI, in the order of the keys, and come back from the effective plan.
func TestLimitsAreRead(t *testing.T) {
	p, faults := parse("plan.yaml", []byte(limited(t)), Options{}, ofTheExample)
	if p == nil {
		t.Fatal(faults)
	}
	if len(p.Limits) != 7 {
		t.Fatalf("%d limits, want 7: %v", len(p.Limits), p.Limits)
	}
	const foot, acre = 0.3048, 4046.8564224
	near := func(what string, got, want float64) {
		if math.Abs(got-want) > 1e-9*want {
			t.Errorf("%s is %g, want %g", what, got, want)
		}
	}
	near("opening", p.Limits[0].(scenarios.OpeningLimit).Area, acre/2)
	near("share", p.Limits[1].(scenarios.ShareLimit).Share, 0.15)
	near("residual", p.Limits[2].(scenarios.ResidualLimit).BasalArea, 60*foot*foot/acre*1e4)
	near("adjacency", p.Limits[3].(scenarios.AdjacencyLimit).Area, 2e4)
	near("unsecured", p.Limits[3].(scenarios.AdjacencyLimit).Unsecured, 8e3)
	pool := p.Limits[4].(scenarios.BufferLimit)
	near("buffer", pool.Distance, 100*foot)
	if pool.Name != "pool" || p.Limits[5].(scenarios.BufferLimit).Name != "stream" {
		t.Errorf("buffers %v, %v", p.Limits[4], p.Limits[5])
	}
	if got, want := p.Limits[6].(scenarios.NoCutLimit).Period, (scenarios.Period{From: scenarios.Date{Month: 4, Day: 1}, To: scenarios.Date{Month: 8, Day: 31}}); got != want {
		t.Errorf("no cut %v, want %v", got, want)
	}
	none, hole, holes := p.Treatments[0], p.Treatments[1], p.Treatments[2]
	if none.Count != 0 || hole.Count != 12 || holes.Count != 3 || len(hole.Centres.Points) != 12 || hole.Centres.Points[2] != (scenarios.Centre{Name: "3", X: 205, Y: 392}) {
		t.Errorf("counts %d, %d, %d; centres %v", none.Count, hole.Count, holes.Count, hole.Centres)
	}
	q := again(t, p, BuiltIn)
	if d := difference(p, q); d != "" {
		t.Errorf("(-plan +read back):\n%s", d)
	}
}

// A count left out is one opening, and assumed where the share of all openings is limited.
func TestCountLeftOut(t *testing.T) {
	hole := "  - {name: Hole, opening: {circle: {diameter: 40 m}}}\n"
	for text, want := range map[string]int{hole: 0, hole + "limits: {total_share: 10 %}\n": 1} {
		p, faults := parse("plan.yaml", sound(t, text), Options{}, nil)
		if p == nil {
			t.Fatal(faults)
		}
		got := 0
		for _, a := range p.Assumed {
			if a.Key == "treatments[1].count" && a.Value == "1" {
				got++
			}
		}
		if got != want || p.Treatments[1].Count != 1 {
			t.Errorf("count %d, assumed %d times, want 1 and %d", p.Treatments[1].Count, got, want)
		}
	}
}

// Longitude and latitude near the site and metres of a plane are told apart; both give the same distance of an opening from a pool, and
// files that differ are a fault.
func TestMapFiles(t *testing.T) {
	const middle, pool = `{"type":"Point","coordinates":[%]}`, `{"type":"Polygon","coordinates":[[[@]]]}`
	// a degree of latitude at 44.35 N is 111 115 m, of longitude 79 714 m (Snyder 1987, from the ellipsoid WGS 84)
	files := map[string]string{
		"m-centre.geojson": strings.Replace(middle, "%", "0, 0", 1),
		"m-pool.geojson":   strings.Replace(pool, "@", "79.714, 0], [159.428, 0], [159.428, 111.115], [79.714, 111.115], [79.714, 0", 1),
		"d-centre.geojson": strings.Replace(middle, "%", "-71.90, 44.35", 1),
		"d-pool.geojson":   strings.Replace(pool, "@", "-71.899, 44.35], [-71.898, 44.35], [-71.898, 44.351], [-71.899, 44.351], [-71.899, 44.35", 1),
	}
	read := func(a, b string) (*scenarios.Plan, []Fault) {
		text := sound(t, "  - {name: Hole, opening: {circle: {diameter: 40 m}}, centres: "+a+"-centre.geojson}\nlimits: {buffers: [{name: pool, distance: 50 m, polygon: "+b+"-pool.geojson}]}\n")
		return parse("plan.yaml", text, Options{}, func(name string) ([]byte, error) { return []byte(files[name]), nil })
	}
	for _, frame := range []string{"m", "d"} {
		p, faults := read(frame, frame)
		if p == nil {
			t.Fatal(faults)
		}
		at := p.Treatments[1].Centres.Points[0]
		got := p.Limits[0].(scenarios.BufferLimit).Land.From(p.Treatments[1].Opening.(scenarios.Cleared).Stems, at.X, at.Y)
		if want := 79.714 - 20; math.Abs(got-want) > 0.05 {
			t.Errorf("%s: %g m from the pool, want %g", frame, got, want)
		}
	}
	p, faults := read("m", "d")
	if got := only(t, faults); p != nil || !strings.Contains(got, "d-pool.geojson: limits.buffers[0].polygon: in lon/lat, but the file before it is in metres") {
		t.Errorf("mixed files: %q", got)
	}
}

// Rain and the soil's water are there for the caution of drought, in mm and m.
func TestWaterOfTheSite(t *testing.T) {
	p, faults := ReadExample(BuiltIn, Options{Set: []string{"weather.normals.rain_unit=in"}})
	if p == nil {
		t.Fatal(faults)
	}
	if got, want := p.Water.Rain[6], 112*25.4; math.Abs(got-want) > 1e-9 {
		t.Errorf("rain of July %g mm, want %g", got, want)
	}
	if got, want := p.Water.Capacity, 4.3*0.0254; math.Abs(got-want) > 1e-12 {
		t.Errorf("capacity %g m, want %g", got, want)
	}
	p, faults = parse("plan.yaml", sound(t, ""), Options{}, nil)
	if p == nil {
		t.Fatal(faults)
	}
	if !math.IsNaN(p.Water.Capacity) || !math.IsNaN(p.Water.Rain[0]) || !reflect.DeepEqual(p.Limits, []scenarios.Limit(nil)) {
		t.Errorf("a plan that says nothing has water %v and limits %v", p.Water, p.Limits)
	}
}
