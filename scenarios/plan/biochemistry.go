package plan

import (
	"fmt"
	"math"
	"slices"
	"strings"

	"shadeledger/leaf"
	"shadeledger/scenarios/ledger"
)

func biochemistryKeys(p string) []Key {
	q := p + ".leaf.biochemistry"
	return []Key{
		{Path: q, Kind: Map, Default: "none: the light response", Meaning: "leaf by its capacities, with carbon dioxide and humidity; in place of sun and shade"},
		{Path: q + ".vcmax", Kind: Number, Low: 1, Top: 300, Range: "1 to 300", Example: "50", Meaning: "Rubisco capacity at 25 C; the library's where it has one"},
		{Path: q + ".jmax", Kind: Number, Low: 1, Top: 600, Range: "1 to 600", Example: "90", Meaning: "electron transport capacity at 25 C; the library's where it has one"},
		{Path: q + ".rd", Kind: Number, Low: 0.001, Top: 15, Range: "0.001 to 15, positive", Example: "0.8", Meaning: "respiration at 25 C"},
		{Path: q + ".g1", Kind: Number, Low: 0.5, Top: 15, Range: "0.5 to 15 kPa^0.5", Example: "4.45", Meaning: "slope of the stomata"},
		{Path: q + ".lma", Kind: Number, Low: 5, Top: 1000, Range: "5 to 1000", Example: "55", Meaning: "leaf mass per area"},
		{Path: q + ".growth_light", Kind: Number, Low: 0.1, Top: 100, Range: "0.1 to 100", Example: "50", Meaning: "light the leaf grew in"},
		{Path: q + ".capacities", Kind: Choice, Words: []string{"acclimated", "fixed"}, Default: "acclimated", Example: "fixed", Meaning: "acclimated: their heat follows the month before (Kattge & Knorr 2007), respiration Heskel et al. 2016; fixed: all Bernacchi et al. 2001, 2003"},
	}
}

// biochemistry reads a leaf by its capacities.
func (r *plantReader) biochemistry(p *ledger.Plant, block val, leafKeys map[string]val) {
	b := leafKeys["biochemistry"]
	for _, other := range []string{"sun", "shade", "t_ref", "q10"} {
		if leafKeys[other].present() {
			r.fault(leafKeys[other], "", "leave it out beside biochemistry, whose rates are at 25 C and follow temperature by their own laws; or leave out biochemistry")
		}
	}
	f, before := r.fields(b), len(r.faults)
	x, given := r.number(f["growth_light"])
	light := r.or(x, given, f["growth_light"], b.path+".growth_light", sunLight, fmt.Sprintf("%d %%", sunLight), practice+", by leaf position")
	var perArea []string
	for _, name := range []string{"vcmax", "jmax", "rd", "lma"} {
		if f[name].present() {
			perArea = append(perArea, name)
		}
	}
	scale := r.basis(leafKeys, strings.Join(perArea, ", "))
	number := func(name string) float64 {
		x, given := r.number(f[name])
		fallback, held := r.held(name, light)
		if !given && !held {
			if !f[name].present() {
				r.need(b, f, name)
			}
			return math.NaN()
		}
		switch {
		case given && slices.Contains(perArea, name):
			return x * scale
		case given:
			return x
		}
		r.from = append(r.from, "leaf.biochemistry."+name)
		return fallback
	}
	q := leaf.Biochemistry{Vcmax: number("vcmax"), Jmax: number("jmax"), Rd: number("rd"), G1: number("g1"), Heat: leaf.Acclimated{Growth: 25}}
	lma := number("lma")
	choice, _ := r.choice(f["capacities"])
	if choice == "fixed" {
		q.Heat = leaf.Bernacchi{}
	}
	if len(r.faults) > before {
		return
	}
	if err := q.Check(); err != nil {
		r.fault(b, " ", err.Error())
		return
	}
	set := q.Set(lma)
	if err := set.Check(); err != nil {
		r.fault(b, " ", err.Error())
		return
	}
	p.Chemistry = &ledger.Chemistry{Leaf: q, CO2: r.co2, Acclimates: choice != "fixed"}
	p.Temperature.Ref, p.Temperature.Respiration = 25, leaf.Heskel
	if choice == "fixed" {
		p.Temperature.Respiration = leaf.Arrhenius
	}
	p.Traits = r.powers(leafKeys, set, light)
}

// held is a value of the library for a biochemical leaf.
func (r *plantReader) held(name string, light float64) (float64, bool) {
	if r.species == nil {
		return 0, false
	}
	switch name {
	case "vcmax", "jmax", "g1":
		v, ok := r.species.Value(name)
		return v.Value, ok
	case "rd":
		if v, ok := r.species.Value("biochemical_rd"); ok {
			return v.Value, true
		}
	}
	at := r.species.Temperature().At(r.species.SeedlingAcclimation().At(light), 25)
	if name == "rd" {
		return at.Rd, true
	}
	return at.LMA, true
}

// powers is how a biochemical set acclimates: by the powers of the species, those between its two measured sets, or not.
func (r *plantReader) powers(leafKeys map[string]val, set leaf.Set, light float64) leaf.Acclimation {
	if mode, _ := r.choice(leafKeys["acclimation"]); mode == "none" {
		return leaf.Constant{Set: set}
	}
	if r.species == nil {
		r.assume(r.block.path+".leaf.acclimation", "none", "one set and no library species")
		return leaf.Constant{Set: set}
	}
	law := leaf.PowerLaw{Ref: set, RefLight: light}
	switch a := r.species.SeedlingAcclimation().(type) {
	case leaf.PowerLaw:
		law.LMA, law.Amax, law.Rd = a.LMA, a.Amax, a.Rd
	case leaf.TwoSets:
		span := math.Log(a.SunLight / a.ShadeLight)
		law.LMA, law.Amax, law.Rd = math.Log(a.Sun.LMA/a.Shade.LMA)/span, math.Log(a.Sun.Amax()/a.Shade.Amax())/span, math.Log(a.Sun.Rd/a.Shade.Rd)/span
	}
	return law
}
