package traits

import (
	_ "embed" // the table
	"fmt"
	"strings"
	"unicode"
)

// Further names of the species: alias, kind, botanical, source. Kinds are plants (symbols of the USDA PLANTS
// Database), fia (species codes of the national forest inventory of the United States), german, common (English) and
// synonym (botanical). A name that stands for two species has two rows.
//
//go:embed aliases.csv
var aliasTable string

func (c *Catalogue) takeAlias(f []string) error {
	s, ok := c.byName[plain(f[2])]
	if !ok {
		return fmt.Errorf("alias %q of unknown species %q", f[0], f[2])
	}
	k := aliasKey(f[0])
	if k == "" {
		return fmt.Errorf("alias %q has neither letters nor digits", f[0])
	}
	if _, taken := c.byName[k]; taken {
		return fmt.Errorf("alias %q is a name of the library already", f[0])
	}
	for _, other := range c.byAlias[k] {
		if other == s {
			return fmt.Errorf("alias %q of %s stands twice", f[0], f[2])
		}
	}
	c.aliases = append(c.aliases, f[0])
	c.byAlias[k] = append(c.byAlias[k], s)
	return nil
}

// alias is the one species a further name stands for: nil where the name is not held, an error where it stands for
// several.
func (c *Catalogue) alias(name string) (*Species, error) {
	held := c.byAlias[aliasKey(name)]
	switch len(held) {
	case 0:
		return nil, nil
	case 1:
		return held[0], nil
	}
	names := make([]string, len(held))
	for i, s := range held {
		names[i] = fmt.Sprintf("%s (%s)", s.Botanical, s.Common)
	}
	return nil, fmt.Errorf("species %q may be %s; write which", name, strings.Join(names, " or "))
}

// nearAlias is the further name nearest to one that is not held, of those that differ in a third of its letters at most.
func (c *Catalogue) nearAlias(name string) (string, bool) {
	want, best, show := aliasKey(name), len(name), ""
	for _, a := range c.aliases {
		key := aliasKey(a)
		d := distance(want, key)
		if numbered := strings.Trim(key, "0123456789") == ""; numbered || 3*d > len(want) || d >= best {
			continue
		}
		best, show = d, a
		if held := c.byAlias[key]; len(held) == 1 {
			show = fmt.Sprintf("%s (%s)", a, held[0].Botanical)
		}
	}
	return show, show != ""
}

var germanLetters = strings.NewReplacer("ä", "ae", "ö", "oe", "ü", "ue", "ß", "ss")

// aliasKey is the name in lower case with letters and digits only, umlauts written out, and without leading zeros
// where it is a number.
func aliasKey(name string) string {
	k := strings.Map(func(r rune) rune {
		if unicode.IsLetter(r) || unicode.IsDigit(r) {
			return r
		}
		return -1
	}, germanLetters.Replace(strings.ToLower(name)))
	if strings.Trim(k, "0123456789") == "" {
		return strings.TrimLeft(k, "0")
	}
	return k
}
