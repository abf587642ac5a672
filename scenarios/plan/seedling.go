package plan

import (
	"fmt"
	"math"
	"strings"

	"go.yaml.in/yaml/v4"

	"shadeledger/canopy/inventory"
	"shadeledger/leaf"
	"shadeledger/leaf/traits"
	"shadeledger/scenarios"
	"shadeledger/scenarios/ledger"
)

func (r *reader) seedlings(v val, p *scenarios.Plan) {
	if v.node == nil {
		return
	}
	items := r.items(v)
	if len(items) == 0 && v.node.Kind == yaml.SequenceNode {
		r.fault(v, " ", "at least one seedling")
	}
	seen := map[string]int{}
	for _, item := range items {
		s := r.seedling(item)
		at := item
		if f := r.peek(item, "name"); f.present() {
			at = f
		}
		r.unique(at, s.Name, seen)
		p.Seedlings = append(p.Seedlings, s)
	}
}

// peek finds a key of a block without checking the block.
func (r *reader) peek(v val, name string) val {
	if v.node == nil || v.node.Kind != yaml.MappingNode {
		return val{}
	}
	for i := 0; i+1 < len(v.node.Content); i += 2 {
		if v.node.Content[i].Value == name {
			return val{node: v.node.Content[i+1], path: join(v.path, name), key: join(v.key, name)}
		}
	}
	return val{}
}

// plantReader reads one seedling; from lists what comes from the library.
type plantReader struct {
	*reader
	block   val
	f       map[string]val
	species *traits.Species
	base    traits.Plant
	from    []string
}

// take gives a value, the library's, or a fault that it is missing.
func (r *plantReader) take(x float64, ok bool, f map[string]val, block val, name string, fallback float64) float64 {
	switch {
	case ok:
		return x
	case f[name].present():
		return math.NaN() // a fault already
	case r.species == nil:
		r.need(block, f, name)
		return math.NaN()
	}
	r.from = append(r.from, strings.TrimPrefix(join(block.path, name), r.block.path+"."))
	return fallback
}

func (r *reader) seedling(item val) scenarios.Seedling {
	q := &plantReader{reader: r, block: item, f: r.fields(item)}
	var s scenarios.Seedling
	if q.f["species"].present() {
		if q.species = r.find(q.f["species"]); q.species != nil {
			s.Botanical, s.Name = q.species.Botanical, q.species.Botanical
			q.base = q.stock()
		} else if sp := q.f["species"]; sp.scalar() {
			s.Name = sp.node.Value
			return s // the rest would only repeat the fault
		}
	}
	if name, ok := r.text(q.f["name"]); ok {
		s.Name = name
	}
	if s.Name == "" {
		r.fault(item, " ", "give species, a library name, or name beside a full set under leaf")
	}
	if q.species == nil && !q.f["species"].present() && !q.f["leaf"].present() {
		if s.Name != "" {
			r.fault(item, " ", "give species, a library name, or leaf with sun or shade: amax, rd, phi, theta, lma")
		}
		return s
	}
	if q.species == nil && q.f["stock"].present() {
		r.fault(q.f["stock"], "", "sizes of stock are of the library's species; give species too, or the sizes themselves")
	}
	q.plant(&s.Plant)
	q.ranges(&s)
	if len(q.from) > 0 {
		r.assume(item.path, strings.Join(q.from, ", ")+" of "+s.Botanical, "species library: shadeledger species "+s.Botanical)
	}
	return s
}

// stock is the library's plant, of the kind of stock that the plan names.
func (r *plantReader) stock() traits.Plant {
	kind, given := r.choice(r.f["stock"])
	if !given {
		return r.species.Plant()
	}
	p, err := r.species.PlantOf(kind)
	if err != nil {
		r.fault(r.f["stock"], "", err.Error())
		return r.species.Plant()
	}
	r.from = append(r.from, "height and masses of stock "+kind+" where not given")
	return p
}

func (r *plantReader) plant(p *ledger.Plant) {
	x, ok := r.quantity(r.f["height"])
	p.Height = r.take(x, ok, r.f, r.block, "height", r.base.Height)
	x, ok = r.number(r.f["crown_lai"])
	p.CrownLAI = r.take(x, ok, r.f, r.block, "crown_lai", r.base.CrownLAI)
	x, ok = r.number(r.f["chi"])
	p.Chi = r.take(x, ok, r.f, r.block, "chi", r.base.Chi)
	p.Absorptance = 0.85
	if x, ok := r.number(r.f["absorptance"]); ok {
		p.Absorptance = x
	} else if !r.f["absorptance"].present() {
		r.assume(r.block.path+".absorptance", "0.85", practice)
	}
	switch {
	case r.f["leaves"].present():
		p.Leaves = r.calendar(r.f["leaves"], r.species)
	case r.species != nil:
		p.Leaves = r.species.SeedlingCalendar()
		r.assume(r.block.path+".leaves", calendarText(p.Leaves), "species library, "+r.species.Botanical)
	default:
		r.need(r.block, r.f, "leaves")
		p.Leaves = leaf.Evergreen{}
	}
	r.leaf(p)
	r.sizes(p)
	r.turnover(p)
	if s, ok := r.choice(r.f["ledger"]); ok && s == "first season" {
		p.Ledger = ledger.FirstSeason
	}
	p.Factor = 2
	if x, ok := r.number(r.f["threshold_factor"]); ok {
		p.Factor = x
	} else if !r.f["threshold_factor"].present() {
		r.assume(r.block.path+".threshold_factor", "2.0", "a margin for comfort, chosen; field minima were 1.5 to 3.5 times those of gas exchange (Baltzer & Thomas 2007)")
	}
}

// leaf reads traits, their temperature response and acclimation.
func (r *plantReader) leaf(p *ledger.Plant) {
	block := r.part("leaf")
	f := r.fields(block)
	own := f["sun"].present() || f["shade"].present()
	t := leaf.Temperature{Ref: 25, Opt: 25, Width: 18, Q10: 2}
	if r.species != nil {
		t = r.species.Temperature()
		if own {
			t.Ref = 25
		}
	}
	temperature := func(name string, dst *float64, fallback string) {
		if x, ok := r.quantity(f[name]); ok {
			*dst = x
		} else if !f[name].present() && (own || r.species == nil) {
			r.assume(block.path+"."+name, fmt.Sprintf("%g C", *dst), fallback)
		}
	}
	if f["t_ref"].present() && !own {
		r.fault(f["t_ref"], "", "t_ref belongs beside sun or shade; the library's sets have their own")
	}
	temperature("t_ref", &t.Ref, "usual measuring temperature, "+practice)
	temperature("t_opt", &t.Opt, "broadleaf default, June, Evans & Farquhar 2004")
	temperature("t_width", &t.Width, "June, Evans & Farquhar 2004")
	if x, ok := r.number(f["q10"]); ok {
		t.Q10 = x
	} else if !f["q10"].present() && r.species == nil {
		r.assume(block.path+".q10", "2.0", practice)
	}
	if err := t.Check(); err != nil {
		r.fault(block, " ", err.Error())
	}
	p.Temperature = t
	p.LightRespiration = 1
	if x, ok := r.number(f["light_respiration"]); ok {
		p.LightRespiration = x
	} else if !f["light_respiration"].present() && r.species == nil {
		r.assume(block.path+".light_respiration", "1", "left out: as in the dark")
	}
	if f["biochemistry"].present() {
		r.biochemistry(p, block, f)
		return
	}
	what := ""
	if own {
		what = "rates and lma"
	}
	p.Traits = r.acclimation(block, f, r.basis(f, what), p.Temperature)
}

// basis is what values per given leaf area are multiplied by to stand per half of the total surface; what names those the plan gives, "" for
// none. A needle is taken as half a cylinder: total over projected 1 + pi/2, so half over projected 1.285 (geometry).
func (r *plantReader) basis(f map[string]val, what string) float64 {
	block := r.block.path + ".leaf"
	needles := r.species != nil && r.species.Needled()
	s, ok := r.choice(f["area_basis"])
	switch {
	case !ok && what != "" && needles && !f["area_basis"].present():
		r.need(val{node: r.f["leaf"].node, at: r.f["leaf"].at, path: block, key: "seedlings[].leaf"}, f, "area_basis")
	case what == "" && (s == "all" || s == "projected" && needles):
		r.fault(f["area_basis"], "", "nothing here is given per leaf area; the library's values are per half, so leave it out")
	case s == "all":
		r.assume(block+".area_basis", what+" times 2", "half of the total surface, from all of it")
		return 2
	case s == "projected" && needles:
		r.assume(block+".area_basis", what+" divided by 1.285", "needle as half a cylinder: total over projected area 1 + pi/2 (geometry)")
		return 1 / inventory.Hemisurface
	}
	return 1
}

// growth lights where the plan gives none, percent: leaves of the upper crown and of the understory (common practice).
const sunLight, shadeLight = 50, 5

// acclimation builds the rule from the sets of the plan and the library.
func (r *plantReader) acclimation(block val, f map[string]val, scale float64, t leaf.Temperature) leaf.Acclimation {
	mode, _ := r.choice(f["acclimation"])
	library, librarySun, libraryShade := r.librarySets(t.Ref)
	sun, sunAt, hasSun := r.set(f["sun"], librarySun, sunLight, scale)
	shade, shadeAt, hasShade := r.set(f["shade"], libraryShade, shadeLight, scale)
	switch {
	case hasSun && hasShade:
		if mode == "none" {
			r.fault(f["acclimation"], "", "none goes with one set; two sets acclimate between them")
		}
		return r.two(block, leaf.TwoSets{Sun: sun, Shade: shade, SunLight: sunAt, ShadeLight: shadeAt})
	case hasSun || hasShade:
		one, at := sun, sunAt
		if hasShade {
			one, at = shade, shadeAt
		}
		if mode == "none" {
			return leaf.Constant{Set: one}
		}
		switch a := library.(type) {
		case leaf.TwoSets:
			if hasSun {
				a.Sun, a.SunLight = one, at
			} else {
				a.Shade, a.ShadeLight = one, at
			}
			return r.two(block, a)
		case leaf.PowerLaw:
			a.Ref, a.RefLight = one, at
			return a
		}
		r.assume(block.path+".acclimation", "none", "one set and no library species")
		return leaf.Constant{Set: one}
	case library == nil:
		if !f["sun"].present() && !f["shade"].present() {
			r.fault(val{node: block.node, at: r.block.at, path: block.path}, " ", "missing; give species, or sun or shade with amax, rd, phi, theta, lma")
		}
		return leaf.Constant{}
	case mode == "none":
		return leaf.Constant{Set: librarySun}
	}
	r.from = append(r.from, "leaf ("+library.Rule()+")")
	if !r.species.Measured() {
		r.warnings = append(r.warnings, scenarios.Warning{Key: block.path, Text: "of " + r.species.Botanical +
			" itself no light-saturated rate with its respiration was seen: leaves of its group stand for it, so its class tells the group's (give leaf.sun where measured)"})
	}
	return library
}

// librarySets are the library's rule and sets brought to a reference temperature by the species' own response, so that
// they may stand beside sets of the plan.
func (r *plantReader) librarySets(ref float64) (rule leaf.Acclimation, sun, shade leaf.Set) {
	if r.species == nil {
		return nil, sun, shade
	}
	t := r.species.Temperature()
	at := func(s leaf.Set) leaf.Set {
		if ref == t.Ref {
			return s
		}
		return t.At(s, ref)
	}
	switch a := r.species.SeedlingAcclimation().(type) {
	case leaf.TwoSets:
		a.Sun, a.Shade = at(a.Sun), at(a.Shade)
		return a, a.Sun, a.Shade
	case leaf.PowerLaw:
		a.Ref = at(a.Ref)
		return a, a.Ref, a.Ref
	default:
		return a, sun, shade
	}
}

func (r *plantReader) two(block val, t leaf.TwoSets) leaf.Acclimation {
	if t.Sun == t.Shade {
		return leaf.Constant{Set: t.Sun}
	}
	a, err := leaf.NewTwoSets(t)
	if err != nil {
		r.fault(block, " ", err.Error())
	}
	return a
}

// set reads one trait set; keys left out come from the library's.
func (r *plantReader) set(v val, library leaf.Set, light, scale float64) (s leaf.Set, at float64, ok bool) {
	if !v.present() {
		return s, 0, false
	}
	f := r.fields(v)
	before := len(r.faults)
	get := func(name string, fallback float64) float64 {
		x, ok := r.number(f[name])
		return r.take(x, ok, f, v, name, fallback)
	}
	amax, rd := get("amax", library.Amax()/scale), get("rd", library.Rd/scale)
	phi, theta, lma := get("phi", library.Phi), get("theta", library.Theta), get("lma", library.LMA/scale)
	x, given := r.number(f["growth_light"])
	at = r.or(x, given, f["growth_light"], v.path+".growth_light", light, fmt.Sprintf("%g %%", light), practice+", by leaf position")
	if len(r.faults) > before {
		return s, at, false
	}
	s = leaf.Set{Ag: (amax + rd) * scale, Rd: rd * scale, Phi: phi, Theta: theta, LMA: lma * scale}
	if err := s.Check(); err != nil {
		r.fault(v, " ", err.Error())
		return s, at, false
	}
	return s, at, true
}
