package plan

import (
	"bytes"
	"encoding/json"
	"fmt"
	"math"

	"github.com/peterstace/simplefeatures/geom"

	"shadeledger/canopy"
	"shadeledger/scenarios"
)

// polygon reads an outline from a GeoJSON file: metres on a plane, or lon/lat brought to a plane about its middle.
func (r *reader) polygon(v val) canopy.Outline {
	name, data, ok := r.open(v)
	if !ok {
		return nil
	}
	bad := func(fix string) canopy.Outline {
		r.faults = append(r.faults, Fault{File: name, Key: v.path, Fix: fix})
		return nil
	}
	var head struct {
		Type     string
		CRS      json.RawMessage
		Features []struct{ Geometry json.RawMessage }
		Geometry json.RawMessage
	}
	if err := json.Unmarshal(data, &head); err != nil {
		return bad("not GeoJSON: " + err.Error())
	}
	body := json.RawMessage(data)
	switch head.Type {
	case "FeatureCollection":
		body = nil
		for _, f := range head.Features {
			if len(f.Geometry) == 0 || bytes.Equal(bytes.TrimSpace(f.Geometry), []byte("null")) {
				continue
			}
			if body != nil {
				return bad("several shapes; a file with one polygon is wanted")
			}
			body = f.Geometry
		}
	case "Feature":
		body = head.Geometry
	}
	if len(head.CRS) > 0 {
		r.warnings = append(r.warnings, scenarios.Warning{Key: v.path, Text: name + " names a crs, which is not read: numbers within 180 and 90 are taken as lon/lat, others as metres"})
	}
	g, err := geom.UnmarshalGeoJSON(body)
	if err != nil {
		return bad("not a sound polygon: " + err.Error())
	}
	p, ok := g.AsPolygon()
	if m, many := g.AsMultiPolygon(); many && m.NumPolygons() == 1 {
		p, ok = m.PolygonN(0), true
	}
	if !ok || p.IsEmpty() {
		return bad(fmt.Sprintf("a %s; one polygon is wanted", g.Type()))
	}
	if p.NumInteriorRings() > 0 {
		return bad("the polygon has a hole; trees kept inside come with a later version")
	}
	o, _, _, err := canopy.NewPolygon(r.plane(p.ExteriorRing().Coordinates()))
	if err != nil {
		return bad(err.Error())
	}
	return o
}

// earthMajor and earthFlattening are WGS 84.
const earthMajor, earthFlattening = 6378137.0, 1 / 298.257223563

// plane brings corners to metres: as they are, or from lon/lat on the plane that touches the ellipsoid at their middle
// (radii of curvature in the meridian and across it, Snyder 1987, eqs 4-18 and 4-20).
func (r *reader) plane(s geom.Sequence) [][2]float64 {
	n := s.Length()
	out := make([][2]float64, n)
	lonLat := true
	var lat, lon float64
	for i := range n {
		c := s.GetXY(i)
		out[i] = [2]float64{c.X, c.Y}
		lonLat = lonLat && math.Abs(c.X) <= 180 && math.Abs(c.Y) <= 90
		lon, lat = lon+c.X/float64(n), lat+c.Y/float64(n)
	}
	if !lonLat || r.local(out) {
		return out
	}
	e2 := earthFlattening * (2 - earthFlattening)
	sin, cos := math.Sincos(lat * rad)
	w := 1 - e2*sin*sin
	across, along := earthMajor/math.Sqrt(w), earthMajor*(1-e2)/math.Pow(w, 1.5)
	for i := range out {
		out[i] = [2]float64{(out[i][0] - lon) * rad * across * cos, (out[i][1] - lat) * rad * along}
	}
	return out
}

// local tells a small plan in metres round a corner or a middle of 0 from lon/lat: as lon/lat it would be over 5 km across.
func (r *reader) local(c [][2]float64) bool {
	lo, hi := c[0], c[0]
	for _, p := range c {
		lo[0], lo[1] = math.Min(lo[0], p[0]), math.Min(lo[1], p[1])
		hi[0], hi[1] = math.Max(hi[0], p[0]), math.Max(hi[1], p[1])
	}
	return hi[0]-lo[0] > 0.05 || hi[1]-lo[1] > 0.05
}
