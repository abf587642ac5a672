package plan

import (
	"fmt"
	"math"
	"strings"

	"shadeledger/scenarios"
)

// rainUnits are mm in a unit of rain.
var rainUnits = map[string]float64{"mm": 1, "in": 25.4}

// noWater is what is known of a site's water before the plan says anything.
func noWater() scenarios.Water {
	w := scenarios.Water{Capacity: math.NaN()}
	for m := range w.Rain {
		w.Rain[m] = math.NaN()
	}
	return w
}

func limitKeys() []Key {
	const p = "limits"
	return []Key{
		{Path: p, Kind: Map, Default: "none", Meaning: "limits that the owner or the law sets; shadeledger cautions holds every treatment to them"},
		{Path: p + ".opening", Kind: Quantity, dim: area, Low: 1, Top: 1e7, Range: "1 m2 to 1000 ha", Example: "0.5 ac", Meaning: "largest area of one opening, stem to stem"},
		{Path: p + ".total_share", Kind: Quantity, dim: share, Low: 0.001, Top: 1, Range: "0.1 to 100 %", Example: "15 %", Meaning: "largest share of the stand in openings of one entry; needs stand.area"},
		{Path: p + ".residual", Kind: Map, Meaning: "what must stay between openings: basal_area or cover"},
		{Path: p + ".residual.basal_area", Kind: Quantity, dim: basalArea, Low: 0.1, Top: 120, Range: "0.1 to 120 m2/ha", Example: "60 ft2/ac", Meaning: "least basal area that stays"},
		{Path: p + ".residual.cover", Kind: Quantity, dim: share, Low: 0.01, Top: 1, Range: "1 to 100 %", Example: "50 %", Meaning: "least crown cover that stays"},
		{Path: p + ".adjacency", Kind: Map, Meaning: "an opening together with young growth that adjoins it"},
		{Path: p + ".adjacency.area", Kind: Quantity, dim: area, Low: 1, Top: 1e8, Range: "1 m2 to 10 000 ha", Example: "2 ha", Meaning: "largest area of both together"},
		{Path: p + ".adjacency.unsecured", Kind: Quantity, dim: area, Low: 0, Top: 1e8, Range: "0 to 10 000 ha", Default: "0 m2", Example: "0.8 ha", Meaning: "area of unsecured regeneration next to the openings, also of neighbours"},
		{Path: p + ".buffers", Kind: List, Meaning: "land that openings keep away from"},
		{Path: p + ".buffers[]", Kind: Map, Meaning: "one buffer"},
		{Path: p + ".buffers[].name", Kind: Text, Example: "stream", Meaning: "unique name; required"},
		{Path: p + ".buffers[].distance", Kind: Quantity, dim: length, Low: 0, Top: 2000, Range: "0 to 2000 m", Example: "75 ft", Meaning: "least distance of border stems from it; required"},
		{Path: p + ".buffers[].polygon", Kind: File, Example: "stream.geojson", Meaning: "GeoJSON polygon, in metres or lon/lat as the centres of openings are; required"},
		{Path: p + ".no_cut", Kind: List, Meaning: "periods in which nothing is felled"},
		{Path: p + ".no_cut[]", Kind: Map, Meaning: "one period; may cross New Year"},
		{Path: p + ".no_cut[].from", Kind: Date, Example: "1 Apr", Meaning: "first day, in"},
		{Path: p + ".no_cut[].to", Kind: Date, Example: "31 Aug", Meaning: "last day, in"},
	}
}

// limits reads what the owner or the law asks for.
func (r *reader) limits(v val, p *scenarios.Plan) {
	f := r.fields(v)
	add := func(l scenarios.Limit) { p.Limits = append(p.Limits, l) }
	if x, ok := r.quantity(f["opening"]); ok {
		add(scenarios.OpeningLimit{Area: x})
	}
	if x, ok := r.quantity(f["total_share"]); ok {
		add(scenarios.ShareLimit{Share: x})
		for _, path := range r.uncounted {
			r.assume(path+".count", "1", "left out: one opening")
		}
	}
	r.residual(f["residual"], add)
	r.adjacency(f["adjacency"], add)
	r.buffers(f["buffers"], p, add)
	for _, item := range r.items(f["no_cut"]) {
		f := r.fields(item)
		from, ok := r.date(r.need(item, f, "from"))
		to, both := r.date(r.need(item, f, "to"))
		if ok && both {
			add(scenarios.NoCutLimit{Period: scenarios.Period{From: from, To: to}})
		}
	}
}

func (r *reader) residual(v val, add func(scenarios.Limit)) {
	if !v.present() {
		return
	}
	before := len(r.faults)
	f := r.fields(v)
	basal, hasBasal := r.quantity(f["basal_area"])
	cover, hasCover := r.quantity(f["cover"])
	switch {
	case f["basal_area"].present() && f["cover"].present():
		r.fault(f["cover"], "", "basal_area or cover, not both")
	case hasBasal:
		add(scenarios.ResidualLimit{BasalArea: basal})
	case hasCover:
		add(scenarios.CoverLimit{Cover: cover})
	case len(r.faults) == before:
		r.fault(v, " ", "one of basal_area and cover, such as basal_area: 60 ft2/ac")
	}
}

func (r *reader) adjacency(v val, add func(scenarios.Limit)) {
	if !v.present() {
		return
	}
	f := r.fields(v)
	most, ok := r.quantity(r.need(v, f, "area"))
	x, given := r.quantity(f["unsecured"])
	x = r.or(x, given, f["unsecured"], v.path+".unsecured", 0, "0 m2", "left out: no young growth adjoins")
	if ok {
		add(scenarios.AdjacencyLimit{Area: most, Unsecured: x})
	}
}

func (r *reader) buffers(v val, p *scenarios.Plan, add func(scenarios.Limit)) {
	seen := map[string]int{}
	for _, item := range r.items(v) {
		f := r.fields(item)
		var b scenarios.BufferLimit
		named, far := false, false
		b.Name, named = r.text(r.need(item, f, "name"))
		r.unique(f["name"], b.Name, seen)
		b.Distance, far = r.quantity(r.need(item, f, "distance"))
		land, drawn := r.land(r.need(item, f, "polygon"), p)
		if named && far && drawn {
			b.Land, b.File = land, f["polygon"].node.Value
			add(b)
		}
	}
}

// count reads how many openings there are, and where.
func (r *reader) count(item val, f map[string]val, p *scenarios.Plan, t *scenarios.Treatment) {
	if _, ok := t.Opening.(scenarios.Cleared); !ok {
		return // what stands without an opening is a fault already
	}
	t.Count = 1
	if v := f["centres"]; v.present() {
		if points, ok := r.centres(v, p); ok {
			t.Centres = scenarios.Centres{File: v.node.Value, Points: points}
			t.Count = len(points)
		}
	} else if !f["count"].present() {
		r.uncounted = append(r.uncounted, item.path)
	}
	x, ok := r.number(f["count"])
	switch {
	case !ok:
	case x != math.Trunc(x):
		r.fault(f["count"], "", "a whole number of openings")
	case len(t.Centres.Points) > 0 && int(x) != t.Count:
		r.fault(f["count"], "", fmt.Sprintf("%d, the number of centres; or leave it out", t.Count))
	default:
		t.Count = int(x)
	}
}

// limits writes them back.
func (w *writer) limits(p *scenarios.Plan) {
	if len(p.Limits) == 0 {
		return
	}
	w.line(0, "limits", "")
	percent := func(x float64) string {
		return exact(x, 100*x, func(v float64) float64 { return v * 0.01 }) + " %"
	}
	squares := func(x float64) string { return number(x) + " m2" }
	var buffers, closed []string
	for _, l := range p.Limits {
		switch l := l.(type) {
		case scenarios.OpeningLimit:
			w.line(1, "opening", w.given("limits.opening", l.Area, squares))
		case scenarios.ShareLimit:
			w.line(1, "total_share", w.given("limits.total_share", l.Share, percent))
		case scenarios.ResidualLimit:
			w.line(1, "residual", "{basal_area: "+w.given("limits.residual.basal_area", l.BasalArea, func(x float64) string { return number(x) + " m2/ha" })+"}")
		case scenarios.CoverLimit:
			w.line(1, "residual", "{cover: "+w.given("limits.residual.cover", l.Cover, percent)+"}")
		case scenarios.AdjacencyLimit:
			w.line(1, "adjacency", "{area: "+w.given("limits.adjacency.area", l.Area, squares)+", unsecured: "+w.given("limits.adjacency.unsecured", l.Unsecured, squares)+"}")
		case scenarios.BufferLimit:
			path := fmt.Sprintf("limits.buffers[%d].distance", len(buffers))
			buffers = append(buffers, "{name: "+quote(l.Name)+", distance: "+w.given(path, l.Distance, metres)+", polygon: "+quote(l.File)+"}")
		case scenarios.NoCutLimit:
			closed = append(closed, fmt.Sprintf("{from: %s, to: %s}", day(l.From), day(l.To)))
		}
	}
	if buffers != nil {
		w.line(1, "buffers", "["+strings.Join(buffers, ", ")+"]")
	}
	if closed != nil {
		w.line(1, "no_cut", "["+strings.Join(closed, ", ")+"]")
	}
}
