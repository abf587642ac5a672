package plan

import (
	"encoding/json"
	"fmt"
	"math"

	"github.com/peterstace/simplefeatures/geom"

	"shadeledger/canopy"
	"shadeledger/scenarios"
)

// mapFrame is what the numbers of a map file are: metres of a plane, or lon/lat.
type mapFrame int

const (
	noFrame mapFrame = iota
	inMetresOfAPlane
	inLonLat
)

func (m mapFrame) String() string { return [...]string{"nothing", "metres", "lon/lat"}[m] }

// shape is one shape of a map file with its name, "" for none.
type shape struct {
	name string
	geom geom.Geometry
}

// shapes reads the shapes of a GeoJSON file.
func (r *reader) shapes(v val) (file string, out []shape, ok bool) {
	file, data, ok := r.open(v)
	if !ok {
		return file, nil, false
	}
	bad := func(fix string) (string, []shape, bool) {
		r.faults = append(r.faults, Fault{File: file, Key: v.path, Fix: fix})
		return file, nil, false
	}
	type feature struct {
		Geometry   json.RawMessage
		Properties struct{ Name any }
	}
	var head struct {
		Type string
		feature
		Features []feature
	}
	if err := json.Unmarshal(data, &head); err != nil {
		return bad("not GeoJSON: " + err.Error())
	}
	list := head.Features
	switch head.Type {
	case "FeatureCollection":
	case "Feature":
		list = []feature{head.feature}
	default:
		list = []feature{{Geometry: data}}
	}
	for _, f := range list {
		g, err := geom.UnmarshalGeoJSON(f.Geometry)
		if err != nil {
			return bad("not a sound shape: " + err.Error())
		}
		s := shape{geom: g}
		if f.Properties.Name != nil {
			s.name = fmt.Sprint(f.Properties.Name)
		}
		out = append(out, s)
	}
	return file, out, true
}

// land reads the one polygon of a file.
func (r *reader) land(v val, p *scenarios.Plan) (canopy.Land, bool) {
	file, list, ok := r.shapes(v)
	if !ok {
		return canopy.Land{}, false
	}
	bad := func(fix string) (canopy.Land, bool) {
		r.faults = append(r.faults, Fault{File: file, Key: v.path, Fix: fix})
		return canopy.Land{}, false
	}
	if len(list) != 1 {
		return bad(fmt.Sprintf("%d shapes; a file with one polygon is wanted", len(list)))
	}
	g, ok := list[0].geom.AsPolygon()
	if m, many := list[0].geom.AsMultiPolygon(); many && m.NumPolygons() == 1 {
		g, ok = m.PolygonN(0), true
	}
	if !ok || g.IsEmpty() {
		return bad(fmt.Sprintf("a %s; one polygon is wanted, a stream as its bed", list[0].geom.Type()))
	}
	if g.NumInteriorRings() > 0 {
		return bad("the polygon has a hole; draw its outer edge")
	}
	ring := g.ExteriorRing().Coordinates()
	var corners [][2]float64
	for i := range ring.Length() {
		c := ring.GetXY(i)
		corners = append(corners, [2]float64{c.X, c.Y})
	}
	if !r.onMap(file, v, p, corners) {
		return canopy.Land{}, false
	}
	land, err := canopy.NewLand(corners)
	if err != nil {
		return bad(err.Error())
	}
	return land, true
}

// centres reads the points of a file.
func (r *reader) centres(v val, p *scenarios.Plan) ([]scenarios.Centre, bool) {
	file, list, ok := r.shapes(v)
	if !ok {
		return nil, false
	}
	var names []string
	var at [][2]float64
	bad := func(fix string) ([]scenarios.Centre, bool) {
		r.faults = append(r.faults, Fault{File: file, Key: v.path, Fix: fix})
		return nil, false
	}
	for _, s := range list {
		points := geom.MultiPoint{}
		if one, ok := s.geom.AsPoint(); ok {
			points = geom.NewMultiPoint([]geom.Point{one})
		} else if many, ok := s.geom.AsMultiPoint(); ok {
			points = many
		} else {
			return bad(fmt.Sprintf("a %s; points are wanted, one for the middle of each opening", s.geom.Type()))
		}
		for i := range points.NumPoints() {
			c, ok := points.PointN(i).XY()
			if !ok {
				return bad("an empty point; give its two numbers")
			}
			name := s.name
			if name == "" || points.NumPoints() > 1 {
				name = fmt.Sprint(len(at) + 1)
			}
			names, at = append(names, name), append(at, [2]float64{c.X, c.Y})
		}
	}
	if len(at) == 0 {
		return bad("no points; one for the middle of each opening")
	}
	if !r.onMap(file, v, p, at) {
		return nil, false
	}
	out := make([]scenarios.Centre, len(at))
	for i := range at {
		out[i] = scenarios.Centre{Name: names[i], X: at[i][0], Y: at[i][1]}
	}
	return out, true
}

// nearSite is how far from the site, degrees, numbers of a map file may lie to be lon/lat.
const nearSite = 1.0

// onMap brings numbers of a map file to metres on one plane for all files of the plan: as they are, or from lon/lat near the site on the
// plane that touches the ellipsoid there (Snyder 1987, eqs 4-18 and 4-20).
func (r *reader) onMap(file string, v val, p *scenarios.Plan, at [][2]float64) bool {
	lat, lon := p.Site.Latitude/rad, p.Site.Longitude/rad
	frame := inLonLat
	for _, c := range at {
		if math.Abs(c[0]-lon) > nearSite || math.Abs(c[1]-lat) > nearSite {
			frame = inMetresOfAPlane
		}
	}
	if r.placed != noFrame && r.placed != frame {
		r.faults = append(r.faults, Fault{File: file, Key: v.path, Fix: fmt.Sprintf("in %s, but the file before it is in %s; give centres and buffers in the same, lon/lat near the site or metres of one plane", frame, r.placed)})
		return false
	}
	r.placed = frame
	if frame == inMetresOfAPlane {
		return true
	}
	east, north := perDegree(lat)
	for i, c := range at {
		at[i] = [2]float64{(c[0] - lon) * east, (c[1] - lat) * north}
	}
	return true
}

// perDegree is the length of a degree of longitude and latitude at a latitude in degrees, m.
func perDegree(lat float64) (east, north float64) {
	e2 := earthFlattening * (2 - earthFlattening)
	sin, cos := math.Sincos(lat * rad)
	w := 1 - e2*sin*sin
	return rad * earthMajor / math.Sqrt(w) * cos, rad * earthMajor * (1 - e2) / math.Pow(w, 1.5)
}
