package inventory

import (
	"regexp"
	"strings"

	"shadeledger/leaf/traits"
)

var (
	nameParts    = regexp.MustCompile(`\s*[()/=|]\s*|\s+[-–—]\s+|\s*[,;:]\s+`)
	codeBefore   = regexp.MustCompile(`^([0-9]{2,3})\s+(\D.*)$`)
	codeName     = regexp.MustCompile(`^([A-Z]{4}[0-9]{0,2})-(.+)$`)
	codeBehind   = regexp.MustCompile(`^(\D.*)\s+([0-9]{2,3})$`)
	authorBehind = regexp.MustCompile(`^([A-Z][a-z]+ [a-z]+)\s+(?:\(?[A-Z][a-z.]*\)?\.?\s*)+$`)
)

// nameSpecies finds a species by one name, or by several that all say the same: "833 - Northern red oak".
func nameSpecies(text string) (*traits.Species, error) {
	t := strings.TrimSpace(strings.TrimRight(text, " *†‡"))
	for _, p := range []*regexp.Regexp{codeBefore, codeBehind, codeName} {
		if g := p.FindStringSubmatch(t); g != nil {
			return sameSpecies(t, g[1:])
		}
	}
	s, err := traits.Find(t)
	if s != nil {
		return s, nil
	}
	if g := authorBehind.FindStringSubmatch(t); g != nil {
		return traits.Find(g[1])
	}
	if g := turnedName.FindStringSubmatch(t); g != nil {
		if turned, wrong := traits.Find(g[2] + " " + g[1]); wrong == nil {
			return turned, nil
		}
	}
	if g := shortGenus.FindStringSubmatch(t); g != nil {
		return ofGenus(g[1], g[2], err)
	}
	if parts := nameParts.Split(t, -1); len(parts) > 1 {
		if s, all := sameSpecies(t, parts); all == nil {
			return s, nil
		}
	}
	return nil, err
}

var (
	turnedName = regexp.MustCompile(`^([^,]+),\s*([^,]+)$`)
	shortGenus = regexp.MustCompile(`^([A-Z])\. ?([a-z]+)$`)
)

// ofGenus is the one species of the library with that initial and epithet: "Q. alba". The error is kept where none is.
func ofGenus(initial, epithet string, otherwise error) (*traits.Species, error) {
	var found *traits.Species
	for _, s := range traits.All() {
		if !strings.HasPrefix(s.Botanical, initial) || !strings.HasSuffix(s.Botanical, " "+epithet) {
			continue
		}
		if found != nil {
			return nil, twoSpecies{initial + ". " + epithet, found, s}
		}
		found = s
	}
	if found == nil {
		return nil, otherwise
	}
	return found, nil
}

// sameSpecies wants every part that is not empty to name one species.
func sameSpecies(whole string, parts []string) (*traits.Species, error) {
	var found *traits.Species
	for _, p := range parts {
		if p == "" {
			continue
		}
		s, err := traits.Find(p)
		if err != nil {
			return nil, err
		}
		if found != nil && found != s {
			return nil, twoSpecies{whole, found, s}
		}
		found = s
	}
	if found == nil {
		return traits.Find(whole)
	}
	return found, nil
}

// twoSpecies is a name whose parts do not agree.
type twoSpecies struct {
	name        string
	first, then *traits.Species
}

func (t twoSpecies) Error() string {
	return "one species: " + t.name + " names both " + t.first.Botanical + " and " + t.then.Botanical
}

// totalKind tells what a line sums up.
type totalKind int

const (
	noTotal totalKind = iota
	wholeTotal
	subTotal
	meanLine // an average, which is neither class nor total
)

var (
	totalWord = regexp.MustCompile(`^(grand |stand )?(totals?|sums?|all|all species|all trees|all classes|summe|summen|gesamt|insgesamt|gesamtsumme|alle|σ|∑|\*\*+|stand total|whole stand)$`)
	subWord   = regexp.MustCompile(`^(sub ?totals?|zwischensumme|teilsumme)\b`)
	meanWord  = regexp.MustCompile(`^(weighted |stand |overall )?(mean|means|average|avg|median|mittel|mittelwert|durchschnitt)\b|^(qmd|std dev|sd|se|standard (error|deviation)|cv)$`)
	totalPart = regexp.MustCompile(`(?i)^(?:total|sum|all|summe|gesamt|subtotal|sub-total|zwischensumme)\b[\s:,-]*|[\s:,-]*\b(?:totals?|sum|all|summe|gesamt|subtotal|sub-total)$|^\*+|\*\*+$`)
)

// wholeWords may stand beside the word of a total without making it one of a part.
var wholeWords = map[string]bool{"all": true, "species": true, "stand": true, "trees": true, "stems": true, "live": true,
	"living": true, "grand": true, "classes": true, "whole": true, "overall": true, "per": true, "acre": true, "ac": true,
	"ha": true, "hectare": true, "alle": true, "arten": true, "baumarten": true, "bestand": true, "je": true, "mean": true, "average": true, "avg": true}

// onlyTotal tells whether a label says total, and nothing beside it that the total would be of.
func onlyTotal(label string) bool {
	total := false
	for _, w := range strings.FieldsFunc(label, func(r rune) bool { return strings.ContainsRune(" /()&+", r) }) {
		isTotal := totalWord.MatchString(w)
		if !isTotal && !wholeWords[w] {
			return false
		}
		total = total || isTotal && w != "all" && w != "alle"
	}
	return total
}

// totalLabel tells whether a cell names a total, and what is left of it without that word.
func totalLabel(cell string) (totalKind, string) {
	if strings.Trim(cell, "0123456789.,") == "" {
		return noTotal, cell
	}
	t := strings.Trim(strings.ToLower(strings.Join(strings.Fields(headingMarks.Replace(cell)), " ")), " ")
	bare := strings.Trim(t, "* ")
	switch {
	case t == "" || missing(cell) || numeric(bare) && bare != t && !strings.HasPrefix(t, "*"):
		return noTotal, cell
	case bare == "" || totalWord.MatchString(bare) || onlyTotal(bare):
		return wholeTotal, ""
	case subWord.MatchString(bare) || strings.Contains(t, "**") || totalPart.MatchString(cell):
		return subTotal, strings.TrimSpace(totalPart.ReplaceAllString(totalPart.ReplaceAllString(cell, ""), ""))
	case meanWord.MatchString(bare):
		return meanLine, ""
	}
	return noTotal, cell
}
