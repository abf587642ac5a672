package decide

import (
	"fmt"
	"math"

	"shadeledger/canopy"
	"shadeledger/scenarios"
	"shadeledger/scenarios/ledger"
)

// edge looks at the zone towards the equator: its spots from one to three quarters of the way to the crowns, so that the strip at the
// very edge, dark in every opening, does not count.
func (f *finder) edge(t *scenarios.Treatment, s *scenarios.Seedling) {
	c, ok := t.Opening.(scenarios.Cleared)
	if !ok {
		return
	}
	dark := canopy.South
	if f.p.Site.Latitude < 0 {
		dark = canopy.North
	}
	x := Finding{Rule: &ruleEdge, Treatment: t.Name, Seedling: s.Name, State: Conflict, Found: Measure{Percent, math.Inf(1)}}
	elsewhere := false
	for _, b := range f.rows[[2]string{t.Name, s.Name}] {
		if b.row.Class == ledger.Comfortable {
			elsewhere = true
			continue
		}
		way := math.Hypot(b.x, b.y) / canopy.Reach(c.Crowns, math.Atan2(b.x, b.y))
		if canopy.ZoneAt(c.Crowns, b.x, b.y) != dark || way > 0.75 {
			continue
		}
		x.Stations = append(x.Stations, b.row.Station)
		if b.row.LightLeafOn < x.Found.Value {
			x.Found.Value = b.row.LightLeafOn
			x.Limit = Measure{}
			if b.row.BreakEven.Found {
				x.Limit = Measure{Percent, b.row.BreakEven.Threshold.LeafOn}
			}
		}
	}
	if elsewhere && x.Stations != nil {
		f.add(x)
	}
}

// spring looks for seedlings that live on light before the stand's leaves.
func (f *finder) spring(t *scenarios.Treatment, s *scenarios.Seedling) {
	x := Finding{Rule: &ruleSpring, Treatment: t.Name, Seedling: s.Name, State: Conflict}
	most := math.Inf(-1)
	for _, b := range f.best(t.Name, s.Name) {
		if b.row.Spring <= b.net {
			continue
		}
		x.Stations = append(x.Stations, b.row.Station)
		if b.net > most {
			most = b.net
			x.Found, x.Limit = Measure{Carbon, b.row.Spring}, Measure{Carbon, b.net}
		}
	}
	if x.Stations != nil {
		f.add(x)
	}
}

// relative is growth, percent a year, of what a plant is made of.
func relative(s *scenarios.Seedling, net float64) float64 {
	m := grown(&s.Plant)
	if !(m > 0) {
		return math.NaN()
	}
	return 100 * net / m
}

// prime is the spot of its best class at which a seedling grows most; false where it is below everywhere.
func (f *finder) prime(t *scenarios.Treatment, s *scenarios.Seedling) (at spot, ok bool) {
	for _, b := range f.best(t.Name, s.Name) {
		if !ok || b.net > at.net {
			at, ok = b, true
		}
	}
	return at, ok
}

// rival holds a seedling against the one that the plan names.
func (f *finder) rival(t *scenarios.Treatment, s *scenarios.Seedling) {
	if x, ok := f.outgrown(t, s, f.p.Size.Against); ok {
		x.State = Conflict
		f.add(x)
	}
}

// outgrown tells whether a rival, "" for any, grows faster where a seedling does best.
func (f *finder) outgrown(t *scenarios.Treatment, s *scenarios.Seedling, rival string) (x Finding, ok bool) {
	at, plants := f.prime(t, s)
	if !plants {
		return x, false
	}
	mine := relative(s, at.net)
	x = Finding{Rule: &ruleRival, Treatment: t.Name, Seedling: s.Name, Stations: []string{at.row.Station}, State: ToCheck, Found: Measure{Relative, mine}, Limit: Measure{Relative, mine}}
	for i := range f.p.Seedlings {
		r := &f.p.Seedlings[i]
		if r.Name == s.Name || rival != "" && r.Name != rival {
			continue
		}
		for _, b := range f.rows[[2]string{t.Name, r.Name}] {
			if g := relative(r, b.net); b.row.Station == at.row.Station && g > x.Found.Value {
				x.Found.Value, x.Detail, ok = g, "by "+r.Name, true
			}
		}
	}
	return x, ok
}

// rivals notes for each seedling, where the plan names no rival, in which treatments others outgrow it; figures are of the widest lead.
func (f *finder) rivals() {
	for i := range f.p.Seedlings {
		s := &f.p.Seedlings[i]
		var worst Finding
		outgrown, planted := 0, 0
		for j := range f.p.Treatments {
			t := &f.p.Treatments[j]
			if f.best(t.Name, s.Name) != nil {
				planted++
			}
			if x, ok := f.outgrown(t, s, ""); ok {
				if worst.Rule == nil || x.Found.Value-x.Limit.Value > worst.Found.Value-worst.Limit.Value {
					worst = x
				}
				outgrown++
			}
		}
		if worst.Rule != nil {
			worst.Detail += fmt.Sprintf(" under %s; outgrown in %d of %d treatments", worst.Treatment, outgrown, planted)
			worst.Treatment = ""
			f.add(worst)
		}
	}
}
