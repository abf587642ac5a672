package plan

import "shadeledger/leaf/traits"

func seedlingKeys() []Key {
	const p = "seedlings[]"
	k := []Key{
		{Path: "seedlings", Kind: List, Meaning: "plants to bring up; at least one"},
		{Path: p, Kind: Map, Meaning: "one plant; what is left out comes from the library"},
		{Path: p + ".species", Kind: Text, Example: "Quercus rubra", Meaning: "library name, botanical or common"},
		{Path: p + ".name", Kind: Text, Default: "the species", Example: "Red oak 2-0", Meaning: "unique name in tables"},
		{Path: p + ".height", Kind: Quantity, dim: length, Low: 0, Top: 10, Range: "0 to 10 m", Example: "0.5 m", Meaning: "height of the crown above the ground"},
		{Path: p + ".leaf_area", Kind: Quantity, dim: area, Low: 1e-5, Top: 20, Range: "0.1 cm2 to 20 m2", Example: "550 cm2", Meaning: "leaf area, half of total surface, as measured"},
		{Path: p + ".stock", Kind: Choice, Words: traits.StockNames(), Default: "the library's common plant", Example: "2-0", Meaning: "kind of planting stock: its usual height and masses where the plan gives none"},
		{Path: p + ".crown_lai", Kind: Number, Low: 0.05, Top: 10, Range: "0.05 to 10", Example: "0.8", Meaning: "leaf area over crown projection"},
		{Path: p + ".chi", Kind: Number, Low: 0.1, Top: 10, Range: "0.1 to 10", Example: "2.5", Meaning: "leaf angle parameter of the crown"},
		{Path: p + ".absorptance", Kind: Number, Low: 0.5, Top: 1, Range: "0.5 to 1", Default: "0.85", Example: "0.85", Meaning: "leaf absorptance"},
		{Path: p + ".mass", Kind: Map, Meaning: "dry mass as measured: leaf, stem, root; or woody for stem and root together"},
		{Path: p + ".leaves", Kind: Any, Default: "the library's", Example: "{earlier: 8 d}", Meaning: leafKey},
		{Path: p + ".leaf", Kind: Map, Default: "the library's", Meaning: "leaf traits"},
		{Path: p + ".leaf.acclimation", Kind: Choice, Words: []string{"library", "none"}, Default: "library", Example: "none", Meaning: "none: the one set given holds at every light"},
		{Path: p + ".leaf.t_ref", Kind: Quantity, dim: temperature, Low: 0, Top: 45, Range: "0 to 45 C", Example: "25 C", Meaning: "temperature of amax and rd"},
		{Path: p + ".leaf.t_opt", Kind: Quantity, dim: temperature, Low: 5, Top: 50, Range: "5 to 50 C", Example: "25 C", Meaning: "optimum of the gross light-saturated rate"},
		{Path: p + ".leaf.t_width", Kind: Quantity, dim: temperature, Low: 4, Top: 60, Range: "4 to 60 C", Example: "18 C", Meaning: "distance from the optimum at which the rate is 1/e"},
		{Path: p + ".leaf.q10", Kind: Number, Low: 1, Top: 4, Range: "1 to 4", Default: "2.0", Example: "2.0", Meaning: "Q10 of leaf respiration"},
		{Path: p + ".leaf.light_respiration", Kind: Number, Low: 0, Top: 1, Range: "0 to 1", Default: "1", Example: "0.7", Meaning: "respiration in the light, share of that in the dark"},
		{Path: p + ".leaf.area_basis", Kind: Choice, Words: []string{"half", "projected", "all"}, Example: "half", Meaning: "area that rates, capacities and lma are per; required for needles given in the plan"},
		{Path: p + ".respiration", Kind: Map, Meaning: "maintenance respiration of organs, nmol CO2 g-1 s-1"},
		{Path: p + ".respiration.stem", Kind: Number, Low: 0, Top: 50, Range: "0 to 50", Example: "1.0", Meaning: "of stem"},
		{Path: p + ".respiration.root", Kind: Number, Low: 0, Top: 50, Range: "0 to 50", Example: "1.0", Meaning: "of root"},
		{Path: p + ".respiration.woody", Kind: Number, Low: 0, Top: 50, Range: "0 to 50", Example: "3.5", Meaning: "of stem and root together"},
		{Path: p + ".respiration.t_ref", Kind: Quantity, dim: temperature, Low: 0, Top: 45, Range: "0 to 45 C", Example: "20 C", Meaning: "temperature of these rates"},
		{Path: p + ".respiration.q10", Kind: Number, Low: 1, Top: 4, Range: "1 to 4", Example: "2.0", Meaning: "Q10 of organs"},
		{Path: p + ".respiration.stem_q10", Kind: Number, Low: 1, Top: 4, Range: "1 to 4", Default: "q10", Example: "1.7", Meaning: "Q10 of the stem, where it differs"},
		{Path: p + ".respiration.root_q10", Kind: Number, Low: 1, Top: 4, Range: "1 to 4", Default: "q10", Example: "2.0", Meaning: "Q10 of the root, where it differs"},
		{Path: p + ".ledger", Kind: Choice, Words: []string{"acclimated", "first season"}, Default: "acclimated", Example: "first season", Meaning: "leaves made in the light of the spot, or before the cut"},
		{Path: p + ".replacement", Kind: Map, Meaning: "cost of replacing leaves and fine roots"},
		{Path: p + ".replacement.leaf_lifespan", Kind: Number, Low: 0.05, Top: 25, Range: "0.05 to 25 years", Example: "0.5", Meaning: "leaf lifespan"},
		{Path: p + ".replacement.fine_root_share", Kind: Number, Low: 0, Top: 1, Range: "0 to 1", Example: "0.2", Meaning: "fine roots, share of root mass"},
		{Path: p + ".replacement.fine_root_lifespan", Kind: Number, Low: 0.05, Top: 25, Range: "0.05 to 25 years", Example: "1.0", Meaning: "fine-root lifespan"},
		{Path: p + ".replacement.construction_cost", Kind: Number, Low: 0, Top: 1, Range: "0 to 1 g C per g", Example: "0.60", Meaning: "carbon spent per new dry mass, its own included"},
		{Path: p + ".threshold_factor", Kind: Number, Low: 1, Top: 10, Range: "1 to 10, usual 1.5 to 3.5", Default: "2.0", Example: "2.0", Meaning: "working threshold over break-even"},
	}
	k = append(k, biochemistryKeys(p)...)
	for _, m := range []string{"leaf", "stem", "root", "woody"} {
		k = append(k, Key{Path: p + ".mass." + m, Kind: Quantity, dim: mass, Low: 0, Top: 1e5, Range: "0 to 100 kg", Example: "2.2 g", Meaning: "dry mass"})
	}
	k = append(k, leavesKeys(p+".leaves")...)
	for _, set := range []string{"sun", "shade"} {
		q := p + ".leaf." + set
		k = append(k,
			Key{Path: q, Kind: Map, Meaning: "trait set of a " + set + " leaf"},
			Key{Path: q + ".amax", Kind: Number, Low: 0.1, Top: 60, Range: "0.1 to 60", Example: "6.5", Meaning: "net light-saturated rate"},
			Key{Path: q + ".rd", Kind: Number, Low: 0.001, Top: 15, Range: "0.001 to 15, positive", Example: "0.85", Meaning: "dark respiration"},
			Key{Path: q + ".phi", Kind: Number, Low: 0.001, Top: 0.125, Range: "0.001 to 0.125", Example: "0.048", Meaning: "initial slope"},
			Key{Path: q + ".theta", Kind: Number, Low: 0, Top: 1, Range: "0 to 1", Example: "0.8", Meaning: "curvature"},
			Key{Path: q + ".lma", Kind: Number, Low: 5, Top: 1000, Range: "5 to 1000", Example: "55", Meaning: "leaf mass per area"},
			Key{Path: q + ".growth_light", Kind: Number, Low: 0.1, Top: 100, Range: "0.1 to 100", Example: "50", Meaning: "light the leaf grew in"},
		)
	}
	return k
}

func treatmentKeys() []Key {
	const p = "treatments[]"
	k := []Key{
		{Path: "treatments", Kind: List, Meaning: "alternatives; at least one"},
		{Path: p, Kind: Map, Meaning: "one alternative"},
		{Path: p + ".name", Kind: Text, Example: "Circle 1.5 H", Meaning: "unique name; required"},
		{Path: p + ".matrix", Kind: Map, Default: "the uncut stand", Meaning: "the stand between openings, stated"},
		{Path: p + ".matrix.lai", Kind: Number, Low: 0, Top: 20, Range: "0 to 20", Example: "3.3", Meaning: "leaf area index after thinning; each layer keeps its share, wood likewise"},
		{Path: p + ".matrix.layers", Kind: List, Meaning: "the layers after the treatment"},
		{Path: p + ".understory", Kind: Any, Default: "keep", Example: "remove", Meaning: "keep, remove, or {NAME: remove}"},
		{Path: p + ".opening", Kind: Map, Default: "none", Meaning: "one outline; bearing is that of the long side"},
		{Path: p + ".opening.circle", Kind: Map, Meaning: "round opening"},
		{Path: p + ".opening.circle.diameter", Kind: Quantity, dim: length, Low: 0, Top: 1000, Range: "0 to 1000 m", Example: "1.5 H", Meaning: "diameter"},
		{Path: p + ".opening.circle.area", Kind: Quantity, dim: area, Low: 0, Top: 785398, Range: "0 to 78.5 ha", Example: "0.25 ac", Meaning: "area"},
		{Path: p + ".opening.ellipse", Kind: Map, Meaning: "oval opening"},
		{Path: p + ".opening.ellipse.length", Kind: Quantity, dim: length, Low: 0, Top: 1000, Range: "0 to 1000 m", Example: "166 ft", Meaning: "long side"},
		{Path: p + ".opening.ellipse.width", Kind: Quantity, dim: length, Low: 0, Top: 1000, Range: "0 to 1000 m", Example: "83 ft", Meaning: "short side"},
		{Path: p + ".opening.ellipse.area", Kind: Quantity, dim: area, Low: 0, Top: 785398, Range: "0 to 78.5 ha", Example: "0.25 ac", Meaning: "area, with ratio"},
		{Path: p + ".opening.ellipse.ratio", Kind: Number, Low: 1, Top: 20, Range: "1 to 20", Example: "2", Meaning: "length over width"},
		{Path: p + ".opening.ellipse.bearing", Kind: Bearing, Example: "E", Meaning: "bearing of the long side; required"},
		{Path: p + ".opening.strip", Kind: Map, Meaning: "rectangular opening"},
		{Path: p + ".opening.strip.length", Kind: Quantity, dim: length, Low: 0, Top: 1000, Range: "0 to 1000 m", Example: "60 m", Meaning: "long side"},
		{Path: p + ".opening.strip.width", Kind: Quantity, dim: length, Low: 0, Top: 1000, Range: "0 to 1000 m", Example: "9 m", Meaning: "short side"},
		{Path: p + ".opening.strip.bearing", Kind: Bearing, Example: "E", Meaning: "bearing of the long side; required"},
		{Path: p + ".opening.polygon", Kind: File, Example: "opening.geojson", Meaning: "GeoJSON polygon in metres or lon/lat"},
		{Path: p + ".measured", Kind: Choice, Words: []string{"stems", "crowns"}, Default: "stems", Example: "crowns", Meaning: "how the size was taped: stem to stem or crown edge to crown edge"},
		{Path: p + ".inside", Kind: Any, Default: "bare", Example: "bare", Meaning: "what stands in the opening: bare, layers or kept trees"},
		{Path: p + ".inside.layers", Kind: List, Meaning: "layers inside the opening"},
	}
	k = append(k, layerKeys(p+".matrix.layers[]")...)
	k = append(k, leavesKeys(p+".matrix.layers[].leaves")...)
	k = append(k, layerKeys(p+".inside.layers[]")...)
	k = append(k, leavesKeys(p+".inside.layers[].leaves")...)
	k = append(k, thinKeys(p+".thin")...)
	k = append(k, Key{Path: p + ".steps", Kind: List, Meaning: "thinnings one after another, each compared by itself, without growth between"},
		Key{Path: p + ".steps[]", Kind: Map, Meaning: "one entry"},
		Key{Path: p + ".steps[].year", Kind: Number, Low: 0, Top: 100, Range: "0 to 100 years", Example: "8", Meaning: "years from now; required"})
	k = append(k, thinKeys(p+".steps[].thin")...)
	k = append(k, keptKeys(p+".inside.keep")...)
	return append(k,
		Key{Path: p + ".count", Kind: Number, Low: 1, Top: 10000, Range: "1 to 10 000", Default: "1, or the number of centres", Example: "12", Meaning: "openings of that shape in the stand"},
		Key{Path: p + ".centres", Kind: File, Example: "centres.geojson", Meaning: "GeoJSON points, the middles of the openings, in metres or lon/lat as the buffers are"})
}

func restKeys() []Key {
	k := []Key{
		{Path: "stations", Kind: Any, Default: "default", Example: "default", Meaning: "default: the thirteen of each opening; or a list of name, bearing, distance"},
		{Path: "stations[]", Kind: Map, Meaning: "a spot by bearing and horizontal distance from the opening's centre"},
		{Path: "stations[].name", Kind: Text, Example: "plot 3", Meaning: "unique name; required"},
		{Path: "stations[].bearing", Kind: Bearing, Example: "NNE", Meaning: "bearing from the centre"},
		{Path: "stations[].distance", Kind: Quantity, dim: length, Low: 0, Top: 2000, Range: "0 to 2000 m", Example: "30 ft", Meaning: "distance from the centre"},
		{Path: "sampling", Kind: Map, Meaning: "how finely time and space are sampled"},
		{Path: "sampling.step", Kind: Quantity, dim: duration, Low: 1.0 / 60, Top: 1, Range: "1 to 60 min, dividing an hour", Default: "15 min", Example: "15 min", Meaning: "sub-step of the day"},
		{Path: "sampling.grid", Kind: Quantity, dim: length, Low: 0.1, Top: 100, Range: "0.1 to 100 m", Default: "1 m", Example: "1 m", Meaning: "grid of maps"},
		{Path: "sampling.heights", Kind: List, Default: "none", Example: "[0.3 m, 1.3 m]", Meaning: "further heights for light"},
		{Path: "sampling.heights[]", Kind: Quantity, dim: length, Low: 0, Top: 60, Range: "0 to 60 m", Example: "1.3 m", Meaning: "height above the ground"},
		{Path: "sampling.sky", Kind: Choice, Words: []string{"all-weather", "overcast", "uniform"}, Default: "all-weather", Example: "overcast", Meaning: "how diffuse light is spread over the sky"},
		{Path: "sampling.dormancy", Kind: Choice, Words: []string{"lagged", "none"}, Default: "lagged; none under an overcast or uniform sky", Example: "none", Meaning: "whether evergreens sleep through cold: capacity follows temperature with a lag"},
		{Path: "years", Kind: Map, Meaning: "how the stand closes again"},
		{Path: "years.horizon", Kind: Number, Low: 1, Top: 60, Range: "1 to 60 years", Default: "30", Example: "30", Meaning: "years looked ahead"},
		{Path: "years.side_closure", Kind: Quantity, dim: speed, Low: 0, Top: 2, Range: "0 to 2 m/y", Default: "the region's, else the leading species', else 0.18 m/y, 0.10 to 0.40", Example: "0.18 m/y", Meaning: "how fast border crowns grow in, a side, at the start"},
		{Path: "years.leaf_regrowth", Kind: Number, Low: 1, Top: 60, Range: "1 to 60 years", Default: "8 for light to 20 for heavy thinnings", Example: "13", Meaning: "years until a thinned canopy has its leaf area again"},
		{Path: "size", Kind: Map, Meaning: "what openings are sought for"},
		{Path: "size.share", Kind: Quantity, dim: share, Low: 0.01, Top: 1, Range: "1 to 100 %", Default: "50 %", Example: "50 %", Meaning: "share of an opening's crown outline that is to be comfortable"},
		{Path: "size.up_to", Kind: Quantity, dim: length, Low: 1, Top: 1000, Range: "1 to 1000 m", Default: "3 H", Example: "3 H", Meaning: "largest opening: diameter, or short side"},
		{Path: "size.against", Kind: Text, Default: "none", Example: "Birch", Meaning: "seedling of the plan that is to be outgrown"},
		{Path: "draws", Kind: Map, Meaning: "how ranges are drawn"},
		{Path: "draws.count", Kind: Number, Low: 100, Top: 100000, Range: "100 to 100000", Default: "2000", Example: "2000", Meaning: "draws of everything not known for sure"},
		{Path: "draws.seed", Kind: Number, Low: 0, Top: 1e9, Range: "0 to 1000000000", Default: "1", Example: "1", Meaning: "where the draws begin: the same seed gives the same draws"},
	}
	k = append(append(k, limitKeys()...),
		Key{Path: "cautions", Kind: Map, Default: "all OPEN", Meaning: "what was done about each caution"},
		Key{Path: "record", Kind: Map, Meaning: "who prepared the plan for what"})
	for _, r := range []string{"forest", "stand", "owner_goal", "preparer", "licence", "date"} {
		k = append(k, Key{Path: "record." + r, Kind: Text, Meaning: "for the record"})
	}
	for _, c := range cautionTable {
		p := "cautions." + c.key
		k = append(k,
			Key{Path: p, Kind: Map, Meaning: c.text},
			Key{Path: p + ".state", Kind: Choice, Words: []string{"addressed", "not applicable", "to check"}, Default: "OPEN", Example: "addressed", Meaning: "what was done about it"},
			Key{Path: p + ".by", Kind: Text, Meaning: "by whom"},
			Key{Path: p + ".note", Kind: Text, Meaning: "note"},
		)
	}
	for _, later := range []string{"planting"} {
		k = append(k, Key{Path: later, Kind: Later, Meaning: "not available in this version: leave it out"})
	}
	return k
}
