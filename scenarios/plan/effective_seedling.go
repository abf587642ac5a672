package plan

import (
	"fmt"

	"shadeledger/leaf"
	"shadeledger/scenarios"
	"shadeledger/scenarios/ledger"
)

func grams(x float64) string { return number(x) + " g" }

func (w *writer) seedlings(p *scenarios.Plan) {
	w.line(0, "seedlings", "")
	for i, s := range p.Seedlings {
		path := fmt.Sprintf("seedlings[%d]", i)
		w.b.WriteString("  - name: " + quote(s.Name) + "\n")
		if s.Botanical != "" {
			w.line(2, "species", quote(s.Botanical))
		}
		plain := func(key string, x float64) { w.line(2, key, w.given(path+"."+key, x, number)) }
		w.line(2, "height", w.given(path+".height", s.Height, metres))
		w.line(2, "leaf_area", w.given(path+".leaf_area", s.LeafArea, func(x float64) string { return number(x) + " m2" }))
		plain("crown_lai", s.CrownLAI)
		plain("chi", s.Chi)
		plain("absorptance", s.Absorptance)
		w.line(2, "leaves", leaves(s.Leaves))
		w.leaf(s, path)
		w.organs(s, path)
		w.line(2, "ledger", map[ledger.Kind]string{ledger.Acclimated: "acclimated", ledger.FirstSeason: "first season"}[s.Ledger])
		w.line(2, "replacement", "")
		for _, v := range []struct {
			key string
			x   float64
		}{{"leaf_lifespan", s.Turnover.LeafLifespan}, {"fine_root_share", s.Turnover.FineRootShare},
			{"fine_root_lifespan", s.Turnover.FineRootLifespan}, {"construction_cost", s.Turnover.ConstructionCost}} {
			w.line(3, v.key, w.given(path+".replacement."+v.key, v.x, number))
		}
		plain("threshold_factor", s.Factor)
	}
}

func (w *writer) leaf(s scenarios.Seedling, path string) {
	w.line(2, "leaf", "")
	if s.Chemistry != nil {
		w.biochemistry(s, path)
		return
	}
	switch a := s.Traits.(type) {
	case leaf.TwoSets:
		w.set("sun", a.Sun, a.SunLight)
		w.set("shade", a.Shade, a.ShadeLight)
		w.line(3, "acclimation", "library")
	case leaf.PowerLaw:
		w.set("sun", a.Ref, a.RefLight)
		w.line(3, "acclimation", "library")
	case leaf.Constant:
		w.set("sun", a.Set, sunLight)
		w.line(3, "acclimation", "none")
	}
	celsius := func(key string, x float64) {
		w.line(3, key, w.given(path+".leaf."+key, x, func(x float64) string { return number(x) + " C" }))
	}
	celsius("t_ref", s.Temperature.Ref)
	celsius("t_opt", s.Temperature.Opt)
	celsius("t_width", s.Temperature.Width)
	w.line(3, "q10", w.given(path+".leaf.q10", s.Temperature.Q10, number))
	w.line(3, "light_respiration", w.given(path+".leaf.light_respiration", s.LightRespiration, number))
	w.line(3, "area_basis", "half")
}

// biochemistry writes a leaf by its capacities.
func (w *writer) biochemistry(s scenarios.Seedling, path string) {
	b := s.Chemistry.Leaf
	set, light, rule := leaf.Set{}, float64(sunLight), "library"
	switch a := s.Traits.(type) {
	case leaf.PowerLaw:
		set, light = a.Ref, a.RefLight
	case leaf.Constant:
		set, rule = a.Set, "none"
	}
	capacities := map[bool]string{true: "acclimated", false: "fixed"}[s.Chemistry.Acclimates]
	w.line(3, "biochemistry", fmt.Sprintf("{vcmax: %s, jmax: %s, rd: %s, g1: %s, lma: %s, growth_light: %s, capacities: %s}",
		number(b.Vcmax), number(b.Jmax), number(b.Rd), number(b.G1), number(set.LMA), number(light), capacities))
	w.line(3, "area_basis", "half")
	w.line(3, "acclimation", rule)
	w.line(3, "t_opt", w.given(path+".leaf.t_opt", s.Temperature.Opt, func(x float64) string { return number(x) + " C" }))
	w.line(3, "t_width", w.given(path+".leaf.t_width", s.Temperature.Width, func(x float64) string { return number(x) + " C" }))
	w.line(3, "light_respiration", w.given(path+".leaf.light_respiration", s.LightRespiration, number))
}

// set writes one trait set; amax is the net rate that with rd gives the gross rate to the last bit.
func (w *writer) set(name string, s leaf.Set, light float64) {
	amax := exact(s.Ag, s.Amax(), func(a float64) float64 { return a + s.Rd })
	w.line(3, name, fmt.Sprintf("{amax: %s, rd: %s, phi: %s, theta: %s, lma: %s, growth_light: %s}",
		amax, number(s.Rd), number(s.Phi), number(s.Theta), number(s.LMA), number(light)))
}

func (w *writer) organs(s scenarios.Seedling, path string) {
	mass := func(key string, x float64) string { return key + ": " + w.given(path+".mass."+key, x, grams) }
	rate := func(key string, x float64) string {
		return key + ": " + w.given(path+".respiration."+key, x, number)
	}
	leafMass := mass("leaf", s.LeafMass)
	if len(s.Organs) == 1 {
		o := s.Organs[0]
		w.line(2, "mass", "{"+leafMass+", "+mass("woody", o.Mass)+"}")
		w.line(2, "respiration", fmt.Sprintf("{%s, t_ref: %s C, q10: %s}", rate("woody", o.Rate), number(o.TRef), number(o.Q10)))
		return
	}
	stem, root := s.Organs[0], s.Organs[1]
	w.line(2, "mass", "{"+leafMass+", "+mass("stem", stem.Mass)+", "+mass("root", root.Mass)+"}")
	q10 := "q10: " + number(stem.Q10)
	if stem.Q10 != root.Q10 {
		q10 = fmt.Sprintf("stem_q10: %s, root_q10: %s", number(stem.Q10), number(root.Q10))
	}
	w.line(2, "respiration", fmt.Sprintf("{%s, %s, t_ref: %s C, %s}", rate("stem", stem.Rate), rate("root", root.Rate), number(stem.TRef), q10))
}
