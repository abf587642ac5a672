package plan

import "shadeledger/scenarios"

// cautionTable holds what always prints. Its rules are common practice; the numbers with a source name it.
var cautionTable = []struct{ key, text string }{
	{"windthrow", "New edges, wet or shallow soil and exposed shoulders let trees blow down; thin in steps where height over diameter (same unit) of the leading species is above 80, with great care above 95 (common practice)."},
	{"felling safety", "Hung-up and dead trees and small openings kill; trained fellers only, others two tree lengths away; light figures are no felling plan."},
	{"browse", "Deer, hare and livestock undo any light: survey first, then fence, tubes or slash."},
	{"frost", "Night minima fall as more sky is seen; hollows are worse; judge by sky view at the planting spot (Groot & Carlson 1996: 0.3)."},
	{"drought and roots", "The bright side is also the hot and dry one, and roots of the stand reach into openings; water is taken as enough here."},
	{"competing vegetation", "Fern, bramble, grass, shrubs and sprouts gain from the same light: treat before opening."},
	{"invasive plants", "Openings spread invasives where seed is near: scout, treat first, clean machines."},
	{"insects and disease", "Bark beetles, root rot, weevils and wilts follow cutting: mind season and stump treatment."},
	{"water", "Streams, springs, pools, wetlands and steep soils need buffers and a dry or frozen season."},
	{"nesting and protected species", "Birds, bats and listed species: survey before entry and keep to local dates."},
	{"law and certification", "Opening size, residual cover, notice and restocking are set locally; the local rule stands over any figure here."},
	{"heritage and access", "Archaeology, utilities, boundaries and rights of way: check before marking."},
	{"seed source", "Seed zone, provenance and stock quality decide as much as light."},
	{"fire and slash", "Slash feeds fire and blocks planting; some dead wood must stay."},
	{"model limits", "No survival, volume, money, wind or water is computed; traits come from few plants, and normals are the past."},
	{"professional judgement", "A prescription follows a site visit by a licensed forester where the law asks for one; this supports and never replaces that person."},
}

// openState is the state of a caution that the plan does not mention.
const openState = "OPEN"

func (r *reader) cautions(v val) []scenarios.Caution {
	out := make([]scenarios.Caution, len(cautionTable))
	given := r.fields(v)
	for i, c := range cautionTable {
		out[i] = scenarios.Caution{Key: c.key, Text: c.text, State: openState}
		item := given[c.key]
		f := r.fields(item)
		if !item.present() {
			continue
		}
		if s, ok := r.choice(f["state"]); ok {
			out[i].State = s
		} else if !f["state"].present() {
			r.fault(item, "", "say state: addressed, not applicable or to check")
		}
		out[i].By, _ = r.text(f["by"])
		out[i].Note, _ = r.text(f["note"])
	}
	return out
}
