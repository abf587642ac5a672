// Package traits is the species library: measured leaf traits, plant budgets and calendars with
// unit, range, source and basis, and named group rules for what was not measured. It knows no plans.
//
// Measured leaves are one set per species: understory or lower-crown and upper-crown leaves of one
// study where it has both, else the row lowest in the crown of the light-curve studies, else the sunlit leaf of
// Wright et al. (2004). Respiration seen in another record of Wright et al. goes before a rule. Rates and leaf mass per area of needles stand per area as their studies give
// it, which is the projected area; both scale alike, so carbon per leaf mass is not affected.
// Low and High of a measured value span all rows known for the species in that crown position.
package traits

import (
	_ "embed" // the tables
	"encoding/csv"
	"fmt"
	"sort"
	"strconv"
	"strings"
	"sync"
)

//go:embed species.csv
var speciesTable string

//go:embed library.csv
var libraryTable string

//go:embed rules.csv
var rulesTable string

//go:embed sources.csv
var sourcesTable string

// Basis says how a value came to be known.
type Basis string

// The bases.
const (
	Seen    Basis = "seen"    // figure or raw data read in the source, or in a compilation of it
	Memory  Basis = "memory"  // recalled from the source
	Derived Basis = "derived" // filled by a named rule
)

// Value is one number of the library.
type Value struct {
	Name             string
	Value, Low, High float64
	Unit             string
	Source           string
	Basis            Basis
	Rule             string // of Derived
}

// Group is the leaf kind that group rules go by.
type Group string

// The groups.
const (
	Broadleaf Group = "broadleaf" // deciduous
	Evergreen Group = "evergreen" // broadleaf
	Pine      Group = "pine"      // evergreen, bundles of long needles
	Needle    Group = "needle"    // evergreen, single short needles or scales
	Larch     Group = "larch"     // deciduous needles
)

// Class of shade tolerance: the index of Niinemets & Valladares (2006) cut at 2.25 and 3.5.
type Class string

// The classes.
const (
	Low  Class = "low"
	Mid  Class = "mid"
	High Class = "high"
)

type rule struct {
	group string
	class string
	value Value
}

// Catalogue is the whole library, read once and never changed.
type Catalogue struct {
	species []*Species
	byName  map[string]*Species
	byAlias map[string][]*Species // by aliasKey
	aliases []string              // in file order
	rules   map[string][]rule
	order   []string // rule variables in file order
}

// Library reads the embedded tables at the first call.
func Library() *Catalogue { return shared() }

var shared = sync.OnceValue(func() *Catalogue {
	c, err := load()
	if err != nil {
		panic(fmt.Sprintf("embedded species library: %v", err))
	}
	return c
})

// Find is Library().Find.
func Find(name string) (*Species, error) { return Library().Find(name) }

// All is every species in the order of the library.
func All() []*Species { return append([]*Species(nil), Library().species...) }

// Find looks a species up by botanical or common name, whatever the case and spacing, or by a published code or further
// name. A name not held gets an error with the nearest names, one that stands for several species gets an error with them.
func (c *Catalogue) Find(name string) (*Species, error) {
	if s, ok := c.byName[plain(name)]; ok {
		return s, nil
	}
	if s, err := c.alias(name); s != nil || err != nil {
		return s, err
	}
	return nil, fmt.Errorf("species %q is not in the library; nearest names: %s", name, strings.Join(c.nearest(name), ", "))
}

// plain is the name in lower case with letters only.
func plain(name string) string {
	return strings.Map(func(r rune) rune {
		switch {
		case r >= 'a' && r <= 'z':
			return r
		case r >= 'A' && r <= 'Z':
			return r + 'a' - 'A'
		}
		return -1
	}, name)
}

// nearest lists three names: those that hold the words asked for first, then by letters that differ.
func (c *Catalogue) nearest(name string) []string {
	type hit struct {
		distance int
		name     string
	}
	var hits []hit
	want := plain(name)
	for _, s := range c.species {
		d, show := distance(want, plain(s.Botanical)), s.Botanical
		if e := distance(want, plain(s.Common)); e < d {
			d, show = e, s.Common
		}
		if strings.Contains(plain(s.Common), want) {
			d, show = -1, s.Common
		}
		hits = append(hits, hit{d, show})
	}
	sort.SliceStable(hits, func(i, j int) bool { return hits[i].distance < hits[j].distance })
	names := make([]string, 0, 4)
	if a, ok := c.nearAlias(name); ok && hits[0].distance > 1 {
		names = append(names, a)
	}
	for _, h := range hits[:min(3, len(hits))] {
		names = append(names, h.name)
	}
	return names
}

// distance is the number of single-letter edits between two words (Levenshtein 1966).
func distance(a, b string) int {
	row := make([]int, len(b)+1)
	for j := range row {
		row[j] = j
	}
	for i := range len(a) {
		diagonal := row[0]
		row[0] = i + 1
		for j := range len(b) {
			cost := diagonal
			if a[i] != b[j] {
				cost++
			}
			diagonal = row[j+1]
			row[j+1] = min(cost, row[j]+1, row[j+1]+1)
		}
	}
	return row[len(b)]
}

func load() (*Catalogue, error) {
	c := &Catalogue{byName: map[string]*Species{}, byAlias: map[string][]*Species{}, rules: map[string][]rule{}}
	sources := map[string]string{}
	steps := []struct {
		table string
		take  func([]string) error
	}{
		{sourcesTable, func(f []string) error { sources[f[0]] = f[1]; return nil }},
		{rulesTable, func(f []string) error { return c.takeRule(f, sources) }},
		{speciesTable, c.takeSpecies},
		{aliasTable, c.takeAlias},
		{libraryTable, func(f []string) error { return c.takeValue(f, sources) }},
	}
	for _, step := range steps {
		records, err := csv.NewReader(strings.NewReader(step.table)).ReadAll()
		if err != nil {
			return nil, err
		}
		for _, f := range records[1:] {
			if err := step.take(f); err != nil {
				return nil, err
			}
		}
	}
	return c, nil
}

func (c *Catalogue) takeSpecies(f []string) error {
	s := &Species{Botanical: f[0], Common: f[1], Group: Group(f[2]), position: f[3], shadePosition: f[4], Regions: strings.Fields(f[5]), own: map[string]Value{}, library: c}
	c.species = append(c.species, s)
	for _, n := range []string{plain(f[0]), plain(f[1])} {
		if _, twice := c.byName[n]; twice {
			return fmt.Errorf("name %q stands twice", n)
		}
		c.byName[n] = s
	}
	return nil
}

func (c *Catalogue) takeRule(f []string, sources map[string]string) error {
	v, err := number(f[0], f[3:6])
	if err != nil {
		return err
	}
	v.Unit, v.Source, v.Basis, v.Rule = f[6], sources[f[7]], Derived, f[8]
	if _, known := c.rules[f[0]]; !known {
		c.order = append(c.order, f[0])
	}
	c.rules[f[0]] = append(c.rules[f[0]], rule{f[1], f[2], v})
	return nil
}

func (c *Catalogue) takeValue(f []string, sources map[string]string) error {
	s, ok := c.byName[plain(f[0])]
	if !ok {
		return fmt.Errorf("value %s of unknown species %q", f[1], f[0])
	}
	v, err := number(f[1], f[2:5])
	if err != nil {
		return fmt.Errorf("%s: %w", f[0], err)
	}
	v.Unit, v.Source, v.Basis, v.Rule = f[5], sources[f[6]], Basis(f[7]), f[8]
	s.own[v.Name] = v
	return nil
}

func number(name string, f []string) (Value, error) {
	v := Value{Name: name}
	for i, to := range []*float64{&v.Value, &v.Low, &v.High} {
		x, err := strconv.ParseFloat(f[i], 64)
		if err != nil {
			return v, fmt.Errorf("%s: %q is not a number", name, f[i])
		}
		*to = x
	}
	return v, nil
}
