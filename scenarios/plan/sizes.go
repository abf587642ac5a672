package plan

import (
	"fmt"
	"math"

	"shadeledger/leaf"
	"shadeledger/scenarios/ledger"
)

// sizes reads leaf area, masses and organ respiration.
func (r *plantReader) sizes(p *ledger.Plant) {
	block := r.part("mass")
	f := r.fields(block)
	r.leafSize(p, f)
	scale := 1.0
	if r.base.LeafMass > 0 && p.LeafMass > 0 {
		scale = p.LeafMass / r.base.LeafMass // keeps the library's mass fractions
	}
	woody, isWoody := r.quantity(f["woody"])
	if isWoody && (f["stem"].present() || f["root"].present()) {
		r.fault(f["woody"], "", "woody, or stem and root, not both")
	}
	rates := r.rates()
	if f["woody"].present() {
		p.Organs = []ledger.Organ{{Line: ledger.Stem, Mass: woody, Rate: rates.stem, TRef: rates.tRef, Q10: rates.stemQ10}}
		return
	}
	x, ok := r.quantity(f["stem"])
	stem := r.take(x, ok, f, block, "stem", r.base.StemMass*scale)
	x, ok = r.quantity(f["root"])
	root := r.take(x, ok, f, block, "root", r.base.RootMass*scale)
	p.Organs = []ledger.Organ{
		{Line: ledger.Stem, Mass: stem, Rate: rates.stem, TRef: rates.tRef, Q10: rates.stemQ10},
		{Line: ledger.Root, Mass: root, Rate: rates.root, TRef: rates.tRef, Q10: rates.rootQ10},
	}
}

// part is a block of the seedling; where it is left out its faults stand at the seedling.
func (r *plantReader) part(name string) val {
	v := r.f[name]
	v.path, v.key = r.block.path+"."+name, "seedlings[]."+name
	if v.node == nil {
		v.at = r.block.node
	}
	return v
}

// agree is how far leaf mass may be from leaf area times LMA beside constant traits.
const agree = 0.05

// leafSize reads leaf area and mass; one follows from the other by LMA.
func (r *plantReader) leafSize(p *ledger.Plant, f map[string]val) {
	area, hasArea := r.quantity(r.f["leaf_area"])
	mass, hasMass := r.quantity(f["leaf"])
	lma := r.measuredLMA(p.Traits)
	switch {
	case hasArea && hasMass:
		if c, constant := p.Traits.(leaf.Constant); constant && c.Set.LMA > 0 && math.Abs(mass/area/c.Set.LMA-1) > agree {
			r.fault(f["leaf"], "", fmt.Sprintf("mass.leaf over leaf_area is %.4g g m-2 but lma is %.4g; within 5 %% of each other", mass/area, c.Set.LMA))
		}
	case hasArea && lma > 0:
		mass = area * lma
		r.assume(r.block.path+".mass.leaf", fmt.Sprintf("%.3g g", mass), fmt.Sprintf("leaf_area times LMA %.3g g m-2", lma))
	case hasMass && lma > 0:
		area = mass / lma
		r.assume(r.block.path+".leaf_area", fmt.Sprintf("%.3g m2", area), fmt.Sprintf("mass.leaf over LMA %.3g g m-2", lma))
	case r.species != nil && !r.f["leaf_area"].present() && !f["leaf"].present():
		area, mass = r.base.LeafArea, r.base.LeafMass
		if c, constant := p.Traits.(leaf.Constant); constant {
			mass = area * c.Set.LMA
		}
		r.from = append(r.from, "leaf_area", "mass.leaf")
	case !r.f["leaf_area"].present() && !f["leaf"].present():
		r.need(r.block, r.f, "leaf_area")
	}
	p.LeafArea, p.LeafMass = area, mass
}

// measuredLMA is the LMA of the plant's leaves as measured where the plan gives only one of area and mass: the one set's,
// the library plant's, or the sun set's.
func (r *plantReader) measuredLMA(a leaf.Acclimation) float64 {
	switch a := a.(type) {
	case leaf.Constant:
		return a.Set.LMA
	case leaf.TwoSets:
		if r.base.LeafArea > 0 && !r.peek(r.f["leaf"], "sun").present() {
			return r.base.LeafMass / r.base.LeafArea
		}
		return a.Sun.LMA
	case leaf.PowerLaw:
		if r.base.LeafArea > 0 && !r.peek(r.f["leaf"], "sun").present() && !r.peek(r.f["leaf"], "shade").present() {
			return r.base.LeafMass / r.base.LeafArea
		}
		return a.Ref.LMA
	}
	return 0
}

type organRates struct{ stem, root, tRef, stemQ10, rootQ10 float64 }

// rates reads organ respiration.
func (r *plantReader) rates() organRates {
	block := r.part("respiration")
	f := r.fields(block)
	out := organRates{r.base.StemRate, r.base.RootRate, r.base.OrganTRef, r.base.StemQ10, r.base.RootQ10}
	if r.species == nil {
		out.tRef, out.stemQ10, out.rootQ10 = 20, 2, 2
		if !f["q10"].present() && !(f["stem_q10"].present() && f["root_q10"].present()) {
			r.assume(block.path+".q10", "2", practice)
		}
		if !f["t_ref"].present() {
			r.assume(block.path+".t_ref", "20 C", practice)
		}
	}
	if w, ok := r.number(f["woody"]); ok {
		out.stem, out.root = w, w
		for _, k := range []string{"stem", "root"} {
			if f[k].present() {
				r.fault(f[k], "", "woody, or stem and root, not both")
			}
		}
	} else if !f["woody"].present() {
		x, ok := r.number(f["stem"])
		out.stem = r.take(x, ok, f, block, "stem", out.stem)
		x, ok = r.number(f["root"])
		out.root = r.take(x, ok, f, block, "root", out.root)
	}
	if x, ok := r.quantity(f["t_ref"]); ok {
		out.tRef = x
	}
	if x, ok := r.number(f["q10"]); ok {
		out.stemQ10, out.rootQ10 = x, x
	}
	if x, ok := r.number(f["stem_q10"]); ok {
		out.stemQ10 = x
	}
	if x, ok := r.number(f["root_q10"]); ok {
		out.rootQ10 = x
	}
	return out
}

// turnover reads what replacing leaves and fine roots costs.
func (r *plantReader) turnover(p *ledger.Plant) {
	block := r.part("replacement")
	f := r.fields(block)
	get := func(name string, fallback float64) float64 {
		if c := f[name]; name == "construction_cost" && c.scalar() {
			if x, err := parseNumber(c.node.Value); err == nil && x > 1 {
				r.fault(c, "", "0 to 1 g C per g; was g glucose meant? times 0.40 gives g C")
				return x
			}
		}
		x, ok := r.number(f[name])
		if _, falls := p.Leaves.(leaf.Deciduous); falls && ok && name == "leaf_lifespan" && x > 1 {
			r.fault(f[name], "", fmt.Sprintf("deciduous leaves live less than a year; were months meant? %g months are %.2f", x, x/12))
		}
		return r.take(x, ok, f, block, name, fallback)
	}
	p.Turnover = ledger.Turnover{
		LeafLifespan: get("leaf_lifespan", r.base.LeafLifespan), FineRootShare: get("fine_root_share", r.base.FineRootShare),
		FineRootLifespan: get("fine_root_lifespan", r.base.FineRootLifespan), ConstructionCost: get("construction_cost", r.base.ConstructionCost),
	}
}
