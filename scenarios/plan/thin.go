package plan

import (
	"fmt"
	"math"

	"shadeledger/canopy/inventory"
	"shadeledger/leaf/traits"
	"shadeledger/scenarios"
)

// alone reports keys that cannot stand beside another.
func (r *reader) alone(f map[string]val, name string, others ...string) {
	for _, k := range others {
		if f[k].present() {
			r.fault(f[k], describe(f[k].node), name+" or "+k+", not both")
		}
	}
}

// needTrees reports a key that works on trees in a stand given without.
func (r *reader) needTrees(v val, p *scenarios.Plan) bool {
	if p.Stand.Cruised() {
		return true
	}
	if len(r.faults) == 0 || !r.faulty("stand.") {
		r.fault(v, " ", "trees come from stand.stand_table or stand.basal_area; with stated layers, state the result in matrix or inside.layers")
	}
	return false
}

// faulty tells whether the stand has a fault of its own, which would only breed more.
func (r *reader) faulty(prefix string) bool {
	for _, f := range r.faults {
		if f.File != r.file || len(f.Key) >= len(prefix) && f.Key[:len(prefix)] == prefix {
			return true
		}
	}
	return false
}

var orders = map[string]inventory.Order{"smallest first": inventory.SmallestFirst, "largest first": inventory.LargestFirst, "all sizes": inventory.AllSizes}

// thin takes trees from a treatment's matrix.
func (r *reader) thin(v val, p *scenarios.Plan, t *scenarios.Treatment) {
	f := r.fields(v)
	var th inventory.Thinning
	order, given := r.choice(f["order"])
	if !given && !f["order"].present() {
		order = "smallest first"
		r.assume(v.path+".order", order, "left out")
	}
	th.Order = orders[order]
	th.Only, th.Spare = r.speciesList(f["only"]), r.speciesList(f["spare"])
	leave, hasLeave := r.quantity(f["leave"])
	take, hasTake := r.quantity(f["take"])
	if f["leave"].present() == f["take"].present() {
		r.fault(v, " ", "one of leave and take, such as leave: 20 m2/ha or take: 30 %")
		return
	}
	if !r.needTrees(v, p) || !hasLeave && !hasTake {
		return
	}
	standing := t.Trees.Sums().BasalArea
	th.Leave = leave
	if hasTake {
		th.Leave = standing * (1 - take)
	}
	if hasLeave && leave > standing*(1+1e-9) {
		r.fault(f["leave"], "", fmt.Sprintf("no more than stands, %.4g m2/ha (%.4g ft2/ac)", standing, standing/unitTable[basalArea]["ft2/ac"].scale))
		return
	}
	left, cut, err := t.Trees.Thin(th)
	if err != nil {
		r.fault(v, " ", err.Error())
		return
	}
	if got := left.Sums().BasalArea; got > th.Leave+0.01*math.Max(1, th.Leave) {
		r.warnings = append(r.warnings, scenarios.Warning{Key: v.path, Text: fmt.Sprintf("%.3g m2/ha stay where %.3g were to: no more trees may be taken", got, th.Leave)})
	}
	t.Trees, t.Cut, t.Thinning = left, append(t.Cut[:len(t.Cut):len(t.Cut)], cut...), th
	t.Matrix = p.Stand.Foliage.Layers(left)
}

func (r *reader) speciesList(v val) (out []*traits.Species) {
	for _, item := range r.items(v) {
		if s := r.find(item); s != nil {
			out = append(out, s)
		}
	}
	return out
}

// steps makes a treatment of each step, thinned after the ones before; nothing grows between them.
func (r *reader) steps(v val, p *scenarios.Plan, t scenarios.Treatment) (out []scenarios.Treatment) {
	last := -1.0
	items := r.items(v)
	if len(items) == 0 {
		r.fault(v, " ", "at least one step, such as {year: 0, thin: {leave: 20 m2/ha}}")
	}
	for _, item := range items {
		f := r.fields(item)
		year, ok := r.number(r.need(item, f, "year"))
		if ok && year <= last {
			r.fault(f["year"], "", fmt.Sprintf("a year after that of the step before, %g", last))
		}
		last = year
		if th := r.need(item, f, "thin"); th.present() {
			r.thin(th, p, &t)
		}
		step := t
		step.Name = fmt.Sprintf("%s, year %g", t.Name, year)
		step.Cut = t.Cut
		out = append(out, step)
	}
	if len(out) > 1 {
		r.warnings = append(r.warnings, scenarios.Warning{Key: v.path, Text: "each step is compared by itself: neither the trees that stay nor the seedlings grow between steps"})
	}
	return out
}

// kept reads trees that stay in an opening of a stem area, m2.
func (r *reader) kept(v val, p *scenarios.Plan, stemArea float64) []scenarios.Layer {
	f := r.fields(v)
	k := inventory.Kept{Thickest: math.Inf(1)}
	count, hasCount := r.number(f["count"])
	k.Share, _ = r.quantity(f["share"])
	if f["count"].present() == f["share"].present() {
		r.fault(v, " ", "one of count and share, such as count: 3")
		return nil
	}
	if f["species"].present() {
		if s := r.find(f["species"]); s != nil {
			k.Species = []*traits.Species{s}
		}
	}
	k.Thinnest, _ = r.quantity(f["from"])
	if x, ok := r.quantity(f["to"]); ok {
		k.Thickest = x
	}
	if !r.needTrees(v, p) {
		return nil
	}
	if hasCount {
		k.PerHa = count / (stemArea / 1e4)
		k.Share = 0
	}
	left := p.Stand.Trees.Keep(k)
	if stay := left.Sums().PerHa * stemArea / 1e4; hasCount && stay < count-0.01 {
		r.warnings = append(r.warnings, scenarios.Warning{Key: v.path, Text: fmt.Sprintf("%.3g trees stay where %g were to: the stand has no more of them on that area", stay, count)})
	}
	if len(left.Trees) == 0 {
		return nil
	}
	return p.Stand.Foliage.Layers(left)
}
