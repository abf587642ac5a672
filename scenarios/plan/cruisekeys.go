package plan

// cruiseKeys describe what was counted and read in the stand.
func cruiseKeys() []Key {
	return []Key{
		{Path: "stand.stand_table", Kind: File, Example: "stand.csv", Meaning: "CSV: species, dbh [, dbh_to], per_area or tree_count [, height, crown_base], units in the header; layers follow from it"},
		{Path: "stand.basal_area", Kind: Any, Example: "{Quercus rubra: 60 ft2/ac, Acer saccharum: 40 ft2/ac}", Meaning: "basal area by species, where there are no diameters"},
		{Path: "stand.angle_count", Kind: Map, Meaning: "trees counted by prism or relascope, for the error of the basal area"},
		{Path: "stand.angle_count.factor", Kind: Quantity, dim: basalArea, Low: 0.1, Top: 20, Range: "0.1 to 20 m2/ha", Example: "10 ft2/ac", Meaning: "basal area for each tree counted; required"},
		{Path: "stand.angle_count.counts", Kind: List, Example: "[13, 9, 16, 12]", Meaning: "trees counted at each point; required"},
		{Path: "stand.readings", Kind: File, Example: "readings.csv", Meaning: "CSV: point, time, below, above, quantity (ppfd|lux), height, sky (overcast|clear|mixed), above_shrubs (yes|no); corrects the leaf area"},
		{Path: "stand.closure_readings", Kind: Map, Meaning: "canopy closure or openness read at points; corrects the leaf area where there are no readings"},
		{Path: "stand.closure_readings.kind", Kind: Choice, Words: []string{"closed", "open"}, Example: "closed", Meaning: "whether the values are closure or openness; required"},
		{Path: "stand.closure_readings.instrument", Kind: Text, Example: "spherical densiometer", Meaning: "instrument"},
		{Path: "stand.closure_readings.values", Kind: List, Example: "[94, 92, 95]", Meaning: "percent at each point; required"},
	}
}

// thinKeys describe a thinning at a path.
func thinKeys(p string) []Key {
	return []Key{
		{Path: p, Kind: Map, Meaning: "trees taken from the matrix; needs stand_table or basal_area"},
		{Path: p + ".leave", Kind: Quantity, dim: basalArea, Low: 0, Top: 150, Range: "0 to 150 m2/ha", Example: "90 ft2/ac", Meaning: "basal area left standing"},
		{Path: p + ".take", Kind: Quantity, dim: share, Low: 0, Top: 1, Range: "0 to 100 %", Example: "30 %", Meaning: "share of the basal area taken, instead of leave"},
		{Path: p + ".order", Kind: Choice, Words: []string{"smallest first", "largest first", "all sizes"}, Default: "smallest first", Example: "all sizes", Meaning: "which trees go first"},
		{Path: p + ".only", Kind: List, Example: "[Fagus grandifolia]", Meaning: "species that are taken; no others"},
		{Path: p + ".only[]", Kind: Text, Example: "Fagus grandifolia", Meaning: "library species"},
		{Path: p + ".spare", Kind: List, Example: "[Quercus rubra]", Meaning: "species that are never taken"},
		{Path: p + ".spare[]", Kind: Text, Example: "Quercus rubra", Meaning: "library species"},
	}
}

// keptKeys describe trees that stay in an opening.
func keptKeys(p string) []Key {
	return []Key{
		{Path: p, Kind: Map, Meaning: "trees that stay in the opening, such as seed trees; needs stand_table or basal_area"},
		{Path: p + ".count", Kind: Number, Low: 0, Top: 10000, Range: "0 to 10 000", Example: "3", Meaning: "trees that stay in each opening, the thickest first"},
		{Path: p + ".share", Kind: Quantity, dim: share, Low: 0, Top: 1, Range: "0 to 100 %", Example: "10 %", Meaning: "share of the trees that stays, instead of count"},
		{Path: p + ".species", Kind: Text, Example: "Quercus rubra", Meaning: "only of this species"},
		{Path: p + ".from", Kind: Quantity, dim: length, Low: 0, Top: 3, Range: "0 to 3 m", Example: "14 in", Meaning: "only trees of at least this dbh"},
		{Path: p + ".to", Kind: Quantity, dim: length, Low: 0, Top: 3, Range: "0 to 3 m", Example: "20 in", Meaning: "only trees of at most this dbh"},
	}
}
