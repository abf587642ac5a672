package inventory

import "strings"

// Lengths in m and areas in m2, exact by definition (international foot of 1959; an acre is 43 560 square feet).
const (
	Inch    = 0.0254
	Foot    = 0.3048
	Acre    = 4046.8564224
	Hectare = 1e4
)

// BasalUS is 1 ft2/ac in m2/ha: 0.229568411.
const BasalUS = Foot * Foot / (Acre / Hectare)

// sheetMeasure is what a unit of a sheet measures.
type sheetMeasure int

const (
	noMeasure sheetMeasure = iota
	lengths                // m
	densities              // trees/ha
	basals                 // m2/ha
	grounds                // ha
	percents               // %
)

// sheetUnit turns a number of the sheet to the program's: value * factor.
type sheetUnit struct {
	measure sheetMeasure
	factor  float64
	name    string
	us      bool // of the inch, the foot or the acre
}

var lengthUnits = map[string]sheetUnit{
	"in": {lengths, Inch, "in", true}, "inch": {lengths, Inch, "in", true}, "inches": {lengths, Inch, "in", true},
	`"`: {lengths, Inch, "in", true}, "″": {lengths, Inch, "in", true}, "”": {lengths, Inch, "in", true},
	"zoll": {lengths, Inch, "in", true}, "''": {lengths, Inch, "in", true},
	"ft": {lengths, Foot, "ft", true}, "foot": {lengths, Foot, "ft", true}, "feet": {lengths, Foot, "ft", true},
	"'": {lengths, Foot, "ft", true}, "′": {lengths, Foot, "ft", true}, "’": {lengths, Foot, "ft", true},
	"mm": {lengths, 0.001, "mm", false}, "cm": {lengths, 0.01, "cm", false}, "dm": {lengths, 0.1, "dm", false},
	"m": {lengths, 1, "m", false}, "meter": {lengths, 1, "m", false}, "meters": {lengths, 1, "m", false},
	"metre": {lengths, 1, "m", false}, "metres": {lengths, 1, "m", false}, "centimetres": {lengths, 0.01, "cm", false},
	"centimeters": {lengths, 0.01, "cm", false}, "millimetres": {lengths, 0.001, "mm", false},
	"millimeters": {lengths, 0.001, "mm", false},
}

var groundUnits = map[string]sheetUnit{
	"ac": {grounds, Acre / Hectare, "ac", true}, "acre": {grounds, Acre / Hectare, "ac", true},
	"acres": {grounds, Acre / Hectare, "ac", true}, "ha": {grounds, 1, "ha", false}, "hectare": {grounds, 1, "ha", false},
	"hectares": {grounds, 1, "ha", false}, "hektar": {grounds, 1, "ha", false}, "m2": {grounds, 1 / Hectare, "m2", false},
	"qm": {grounds, 1 / Hectare, "m2", false}, "ft2": {grounds, Foot * Foot / Hectare, "ft2", true},
	"sqft": {grounds, Foot * Foot / Hectare, "ft2", true},
}

var percentUnits = map[string]sheetUnit{
	"%": {percents, 1, "%", false}, "percent": {percents, 1, "%", false}, "pct": {percents, 1, "%", false},
	"prozent": {percents, 1, "%", false}, "vh": {percents, 1, "%", false},
}

var wholeDensities = map[string]sheetUnit{
	"tpa": {densities, Hectare / Acre, "trees/ac", true}, "tph": {densities, 1, "trees/ha", false},
	"sph": {densities, 1, "trees/ha", false}, "spa": {densities, Hectare / Acre, "trees/ac", true},
}

// countedWords may stand before the slash of a density.
const countedWords = " trees tree stems stem n no number stk stück stueck bäume baeume stämme staemme st 1 count anzahl stammzahl baumzahl ind individuals live livetrees livestems "

// unitOf reads a unit as people write it: "ft² ac⁻¹", "sq. ft. per acre", "Stk/ha".
func unitOf(text string) (sheetUnit, bool) {
	t := squeeze(text)
	for _, units := range []map[string]sheetUnit{lengthUnits, percentUnits, wholeDensities, groundUnits} {
		if u, ok := units[t]; ok {
			return u, true
		}
	}
	for _, ground := range []string{"acres", "acre", "ac", "hectares", "hectare", "hektar", "ha"} {
		head, found := strings.CutSuffix(t, ground)
		if !found {
			continue
		}
		head, _ = strings.CutSuffix(head, "/")
		return areal(head, groundUnits[ground], t)
	}
	return sheetUnit{}, false
}

// areal is a unit per ground area: what stands above the line, the ground, and the whole.
func areal(head string, ground sheetUnit, whole string) (sheetUnit, bool) {
	switch head {
	case "ft2", "sqft", "sf", "squarefeet", "squarefoot", "squareft":
		if ground.us {
			return sheetUnit{basals, BasalUS, "ft2/ac", true}, true
		}
		return sheetUnit{}, false
	case "m2", "qm", "sqm", "squaremetres", "squaremeters":
		if !ground.us {
			return sheetUnit{basals, 1, "m2/ha", false}, true
		}
		return sheetUnit{}, false
	case "":
		if !strings.Contains(whole, "/") {
			return sheetUnit{}, false
		}
	default:
		if !strings.Contains(countedWords, " "+head+" ") {
			return sheetUnit{}, false
		}
	}
	return sheetUnit{densities, 1 / ground.factor, "trees/" + ground.name, ground.us}, true
}

var unitSpelling = strings.NewReplacer("²", "2", "^2", "2", "⁻¹", "-1", " ", "", ".", "", "_", "", "*", "", "·", "")

// squeeze is a unit in lower case without spaces and points, with 2 for squares and one slash for "per".
func squeeze(text string) string {
	t := " " + strings.ToLower(text) + " "
	for _, per := range []string{" per ", "_per_", " je ", " pro "} {
		t = strings.ReplaceAll(t, per, "/")
	}
	t = unitSpelling.Replace(t)
	for _, ground := range []string{"ac", "ha"} {
		if head, found := strings.CutSuffix(t, ground+"-1"); found {
			t = strings.TrimSuffix(head, "/") + "/" + ground
		}
	}
	return t
}
