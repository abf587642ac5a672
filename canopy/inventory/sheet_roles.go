package inventory

import (
	"regexp"
	"slices"
	"strings"
)

// sheetRole is what a column holds.
type sheetRole int

const (
	unknownRole sheetRole = iota
	speciesRole
	dbhRole
	dbhToRole
	perAreaRole
	countRole
	heightRole
	crownBaseRole
	basalAreaRole
	percentRole
	plotRole
	plotAreaRole
	treeRole  // the name of a tree: one tree a line
	totalRole // the sum over the species of a line
	stemRole  // a species, in tables with one column for each
)

// measureOf is what the unit of a role must measure; noMeasure where it needs none.
func (r sheetRole) measure() sheetMeasure {
	switch r {
	case dbhRole, dbhToRole, heightRole, crownBaseRole:
		return lengths
	case perAreaRole:
		return densities
	case basalAreaRole:
		return basals
	case plotAreaRole:
		return grounds
	case percentRole:
		return percents
	}
	return noMeasure
}

// rolePhrases are the headings of the trade in lower case, without points and filler words.
var rolePhrases = phraseTable(map[sheetRole]string{
	speciesRole: "species|tree species|species name|species code|code|common name|botanical name|scientific name|name|" +
		"baumart|holzart|art|sp|spp",
	dbhRole: "dbh|diameter|diameters|class|dbh class|diameter class|diameter classes|size class|bhd|durchmesser|bhd stufe|" +
		"bhd klasse|durchmesserstufe|durchmesserklasse|diameter at breast height|breast height diameter|diam|dbh from|" +
		"class from|diameter from|diameter class from|from|bhd von|von|dbh lower|dbh min|lower|stärkeklasse|d1 3|d 1 3|d13|d|dg|qmd|quadratic diameter",
	dbhToRole: "dbh to|class to|diameter to|diameter class to|dbh class to|to|bhd bis|bis|dbh upper|dbh max|upper",
	perAreaRole: "per area|trees|stems|n|stem number|stammzahl|baumzahl|density|tree density|stem density|stand density|" +
		"live trees|live stems|stocking|densities|trees per area|stems per area",
	countRole: "tree count|count|tally|number trees|no trees|number stems|anzahl|stückzahl|trees counted|stems counted|tree tally",
	heightRole: "height|heights|ht|tree height|total height|heights total|height total|höhe|hoehe|baumhöhe|mittelhöhe|" +
		"tree heights|total ht|h|hg|hm",
	crownBaseRole: "crown base|crown base height|base live crown|base crown|height crown base|height to crown base|" +
		"heights crown base|height live crown|height to live crown|height to base live crown|live crown base|kronenansatz|" +
		"kronenansatzhöhe|hcb|crown base ht|ht to crown base|ht to live crown",
	basalAreaRole: "basal area|basal areas|ba|grundfläche|grundflaeche|kreisfläche|g|basal area per area|stand basal area",
	percentRole: "percent|%|share|shares|pct|proportion|anteil|prozent|percent basal area|% basal area|basal area %|ba %|" +
		"% ba|percent ba|basal area share|share basal area|ba share|basal area percent|grundflächenanteil|anteil grundfläche|" +
		"percentage|pct ba|ba pct|g%|g %|ba%|composition|species composition|mix|mixture|mischung|flächenanteil",
	plotRole: "plot|point|plot no|plot number|plot id|plot name|sample plot|sample point|probefläche|probekreis|plots",
	plotAreaRole: "plot area|plot size|area plot|probeflächengröße|probeflächengrösse|probeflächengroesse|" +
		"probekreisfläche|plot area each",
	treeRole:  "tree no|tree number|tree id|tree|tag|tag no|tree tag|baum nr|baumnummer|baum",
	totalRole: "total|totals|sum|all|all species|gesamt|summe|insgesamt",
})

func phraseTable(roles map[sheetRole]string) map[string]sheetRole {
	table := map[string]sheetRole{}
	for role, phrases := range roles {
		for p := range strings.SplitSeq(phrases, "|") {
			table[p] = role
		}
	}
	return table
}

// heading is a column's heading as understood.
type heading struct {
	role  sheetRole
	unit  sheetUnit
	bare  string // without the unit
	total bool   // named a total
}

var (
	bracketPattern = regexp.MustCompile(`[\[(]([^\])]*)[\])]`)
	perMinusOne    = strings.NewReplacer("ac-1", "/ac", "ha-1", "/ha", "ac⁻¹", "/ac", "ha⁻¹", "/ha")
	headingMarks   = strings.NewReplacer("_", " ", ".", "", ",", " ", ":", " ", ";", " ", "-", " ", "#", "no ", "=", " ", "ø", " d ")
)

var fillerWords = map[string]bool{"of": true, "the": true, "mean": true, "average": true, "avg": true, "mittlere": true,
	"mittlerer": true, "der": true, "des": true, "approx": true}

// words are a heading's words in lower case, without points and fillers.
func words(text string) []string {
	fields := strings.Fields(headingMarks.Replace(perMinusOne.Replace(strings.ToLower(text))))
	kept := fields[:0]
	for _, f := range fields {
		if !fillerWords[f] {
			kept = append(kept, f)
		}
	}
	return kept
}

// parseHeading reads role and unit from one heading.
func parseHeading(text string) heading {
	h := heading{}
	h.bare = strings.TrimSpace(bracketPattern.ReplaceAllStringFunc(text, func(b string) string {
		inner := strings.ToLower(strings.Trim(b, "[]() "))
		for _, t := range []string{strings.TrimPrefix(inner, "in "), inner} {
			if u, ok := unitOf(t); ok {
				h.unit = u
			}
		}
		return " "
	}))
	w := words(h.bare)
	if !h.phrase(w) {
		rest := slices.DeleteFunc(slices.Clone(w), func(word string) bool { return word == "total" || word == "all" })
		h.total = len(rest) > 0 && len(rest) < len(w) && h.phrase(rest)
	}
	h.total = h.total || h.role == totalRole
	h.settle()
	return h
}

// phrase looks the words up whole, then with a unit at the end.
func (h *heading) phrase(w []string) bool {
	if role, ok := rolePhrases[strings.Join(w, " ")]; ok {
		h.role = role
		return true
	}
	for i := range w {
		role, known := rolePhrases[strings.Join(w[:i], " ")]
		u, isUnit := unitOf(strings.Join(w[i:], " "))
		if !isUnit && w[i] == "in" {
			u, isUnit = unitOf(strings.Join(w[i+1:], " "))
		}
		switch {
		case !isUnit:
		case i == 0:
			h.unit = u
			switch u.measure {
			case densities:
				h.role = perAreaRole
			case basals:
				h.role = basalAreaRole
			case percents:
				h.role = percentRole
			default:
				return false
			}
			return true
		case known:
			h.role, h.unit = role, u
			return true
		}
	}
	return false
}

// settle brings role and unit together where the unit says more than the word.
func (h *heading) settle() {
	switch {
	case h.role == countRole && h.unit.measure == densities:
		h.role = perAreaRole
	case h.role == basalAreaRole && h.unit.measure == percents:
		h.role = percentRole
	case h.role == totalRole && h.unit.measure == densities:
		h.role = perAreaRole
	case h.role == totalRole && h.unit.measure == basals:
		h.role = basalAreaRole
	case h.role == percentRole && h.unit.measure == noMeasure:
		h.unit = percentUnits["%"]
	case h.role == perAreaRole && h.unit.measure == percents:
		h.role = unknownRole
	}
}

// needs tells whether the column's unit is still to be found; a unit of another measure counts as none.
func (h heading) needs() bool {
	return h.role.measure() != noMeasure && h.unit.measure != h.role.measure()
}

func (r sheetRole) String() string {
	return [...]string{"", "species", "dbh", "dbh_to", "per_area", "tree_count", "height", "crown_base", "basal_area",
		"percent", "plot", "plot_area", "tree", "total", "species"}[r]
}

// likely is the unit to name to someone who wrote none, by the units of the rest of the sheet.
func (r sheetRole) likely(us bool) string {
	units := map[sheetMeasure][2]string{lengths: {"m", "ft"}, densities: {"trees/ha", "trees/ac"},
		basals: {"m2/ha", "ft2/ac"}, grounds: {"m2", "ac"}}[r.measure()]
	if r == dbhRole || r == dbhToRole {
		units = [2]string{"cm", "in"}
	}
	if us {
		return units[1]
	}
	return units[0]
}
