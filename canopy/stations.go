package canopy

import "math"

// Station is a named spot in or near an opening; x, y from its centre.
type Station struct {
	Name string
	X, Y float64 // m
}

// edgeInside is how far inside the crown outline the edge stations stand, m.
const edgeInside = 0.5

// DefaultStations are the thirteen spots of an opening with crown outline o in a stand of height H (m): the
// centre; towards N, E, S and W (true) a third, two thirds of the way to the outline, an edge, 0.5 m inside it, and
// outside, H/2 beyond it. Where the edge would fall inside the third it stands at the third.
func DefaultStations(o Outline, H float64) []Station {
	out := []Station{{Name: "centre"}}
	for i, name := range [4]string{"N", "E", "S", "W"} {
		ux, uy := math.Sincos(float64(i) * math.Pi / 2)
		reach := Reach(o, float64(i)*math.Pi/2)
		third := reach * 2 / 3
		for _, spot := range []struct {
			name string
			at   float64
		}{{"third", third}, {"edge", math.Max(third, reach-edgeInside)}, {"outside", reach + H/2}} {
			out = append(out, Station{name + " " + spot.name, spot.at * ux, spot.at * uy})
		}
	}
	return out
}

// Zone is a part of an opening.
type Zone int

// The zones: Centre is within a third of the way to the outline, the others from there to the outline within
// 45 degrees of their direction; Beyond is outside it.
const (
	Centre Zone = iota
	North
	East
	South
	West
	Beyond
)

// ZoneAt tells in which zone of an opening a spot lies.
func ZoneAt(o Outline, x, y float64) Zone {
	if !o.Contains(x, y) {
		return Beyond
	}
	φ := math.Atan2(x, y)
	if math.Hypot(x, y) <= Reach(o, φ)/3 {
		return Centre
	}
	quarter := int(math.Floor(φ/(math.Pi/2)+0.5)+4) % 4
	return North + Zone(quarter)
}
