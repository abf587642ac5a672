package inventory

import (
	"errors"
	"fmt"
	"math"

	"shadeledger/leaf/traits"
)

// Tree is a class with what allometry adds, all for one tree; nothing is left open.
type Tree struct {
	Class                 // Height and CrownBase filled
	Crown         float64 // crown radius, m
	LeafArea      float64 // hemisurface, m2
	Stem, Branch  float64 // wood area, hemisurface, m2
	Source        string  // of the leaf area
	HeightTaken   bool    // from the dominant height and the diameter
	CrownBaseMade bool    // from the crown base of the dominant trees
}

// Stand is the trees of a hectare.
type Stand struct {
	Height float64 // dominant height, m
	Trees  []Tree
	// Crowding is the share of their allometric leaf area and crown area that trees keep in this stand: 1 where it is
	// no denser than the stands that sample trees came from. Thinning leaves it as it is.
	Crowding float64
	crowns   float64 // crown sum of the uncut stand
	clumping float64 // that before the last thinning, which never raises it
}

// Setting is what a stand table does not say.
type Setting struct {
	Height    float64 // dominant height, m
	CrownBase float64 // of the dominant trees, m
}

// SampledCrowns is the crown area over ground, m2 m-2, of the closed stands that the trees of the regressions are taken to come
// from. Chosen on the Michigan subplots (Atkins et al. 2021).
const SampledCrowns = 2.2

// NewStand gives every class height, crown and leaf area. A sum of crown areas S over ground covers 1 - exp(-S) of it where crowns stand
// at random (Crookston & Stage 1999, USDA FS RMRS-GTR-24); trees share that cover, so that a tree in a stand of crown sum S
// carries (1 - exp(-S))/S over the same at the crown sum of sample stands, at most 1, of its allometric leaves, branches and crown area.
func NewStand(classes []Class, set Setting) (Stand, error) {
	s := Stand{Height: set.Height, Crowding: 1}
	if !(set.CrownBase >= 0 && set.CrownBase < set.Height) {
		return s, fmt.Errorf("crown base %g m; it must be 0 to below the height, %g m", set.CrownBase, set.Height)
	}
	sum := 0.0
	for _, c := range classes {
		switch {
		case !(c.DBH > 0 && c.DBH < 4):
			return s, fmt.Errorf("dbh %g m of %s; it must be above 0 and below 4 m", c.DBH, c.Species.Botanical)
		case !(c.PerHa >= 0 && c.PerHa < 1e6):
			return s, fmt.Errorf("%g trees/ha of %s; it must be 0 to 1 000 000", c.PerHa, c.Species.Botanical)
		case c.PerHa == 0:
			continue
		}
		r := CrownRadius(c.Species, c.DBH)
		sum += math.Pi * r * r * c.PerHa / hectare
		s.Trees = append(s.Trees, Tree{Class: c})
	}
	if len(s.Trees) == 0 {
		return s, errors.New("no trees; at least one class with trees is needed")
	}
	s.Crowding = math.Min(1, covered(sum)/covered(SampledCrowns))
	dominant := dominantDBH(s.Trees)
	for i := range s.Trees {
		if err := s.Trees[i].fill(set, dominant, s.Crowding); err != nil {
			return s, err
		}
	}
	s.favourTall()
	s.crowns = s.Sums().CrownSum
	s.clumping = s.clump()
	return s, nil
}

// favourTall shares the stand's leaf area anew, its sum kept: in proportion to allometry and to height over the dominant height.
// Regressions hold for trees of every position; within a stand the tall carry more leaves than their diameter tells and the suppressed
// fewer (leaf area over sapwood rises with tree size: Long & Smith 1988, after Shinozaki et al. 1964; held to DeRose & Seymour 2012).
func (s *Stand) favourTall() {
	before := s.Sums().LAI
	for i := range s.Trees {
		s.Trees[i].LeafArea *= math.Min(1, s.Trees[i].Height/s.Height)
	}
	if after := s.Sums().LAI; after > 0 {
		for i := range s.Trees {
			s.Trees[i].LeafArea *= before / after
		}
	}
}

const hectare = 1e4

// covered is the cover of random crowns over their sum.
func covered(sum float64) float64 { return -math.Expm1(-sum) / sum }

// topTrees is how many of the thickest trees of a hectare make the dominant height (top height, common practice).
const topTrees = 100

// dominantDBH is the quadratic mean diameter of the thickest trees.
func dominantDBH(trees []Tree) float64 {
	left, area, n := float64(topTrees), 0.0, 0.0
	for _, t := range byDBH(trees, descending) {
		take := math.Min(left, t.PerHa)
		area += take * StemArea(t.DBH)
		n += take
		left -= take
	}
	return math.Sqrt(area / n * 4 / math.Pi)
}

// Exponent of height on diameter within a stand: trees thinner than the dominant ones are lower by the root of the ratio (common
// practice for even crowns; elastic similarity would give 2/3, McMahon 1973, Science 179:1201-1204).
const heightExponent = 0.5

// Wood area, hemisurface: stems as cones, pi/4 dbh height; branches a multiple of it. Bark of branches is some three to four times that of
// stems in deciduous stands (Whittaker & Woodwell 1967, Am. J. Bot. 54:931-939, from memory; leafless towers ask for as much); under needles most branch wood is hidden.
const (
	BareBranches   = 3.0
	HiddenBranches = 0.5
)

func (t *Tree) fill(set Setting, dominant, crowding float64) error {
	if t.HeightTaken = math.IsNaN(t.Height); t.HeightTaken {
		t.Height = set.Height * math.Min(1, math.Pow(t.DBH/dominant, heightExponent))
	}
	if t.CrownBaseMade = math.IsNaN(t.CrownBase); t.CrownBaseMade {
		t.CrownBase = t.Height * set.CrownBase / set.Height
	}
	if !(t.Height > 0 && t.CrownBase >= 0 && t.CrownBase < t.Height) {
		return fmt.Errorf("crown base %g m of %s; it must be 0 to below the height, %g m", t.CrownBase, t.Species.Botanical, t.Height)
	}
	area, source := LeafArea(t.Species, t.DBH)
	t.LeafArea, t.Source = area*crowding, source
	t.Crown = CrownRadius(t.Species, t.DBH) * math.Sqrt(crowding)
	t.Stem = math.Pi / 4 * t.DBH * t.Height
	t.Branch = HiddenBranches * t.Stem * crowding
	if t.Species.Deciduous() {
		t.Branch = BareBranches * t.Stem * crowding
	}
	return nil
}

// Sums of a stand or a part of it.
type Sums struct {
	PerHa     float64 // trees per hectare
	BasalArea float64 // m2/ha
	LAI, WAI  float64 // m2 m-2
	CrownSum  float64 // crown area over ground, m2 m-2
}

// QMD is the quadratic mean diameter, m; NaN without trees.
func (u Sums) QMD() float64 { return math.Sqrt(u.BasalArea / u.PerHa * 4 / math.Pi) }

// Cover is the ground under crowns standing at random, 0..1.
func (u Sums) Cover() float64 { return -math.Expm1(-u.CrownSum) }

func (u *Sums) add(t Tree) {
	u.PerHa += t.PerHa
	u.BasalArea += t.BasalArea()
	u.LAI += t.LeafArea * t.PerHa / hectare
	u.WAI += (t.Stem + t.Branch) * t.PerHa / hectare
	u.CrownSum += math.Pi * t.Crown * t.Crown * t.PerHa / hectare
}

// Sums of all trees.
func (s Stand) Sums() (u Sums) {
	for _, t := range s.Trees {
		u.add(t)
	}
	return u
}

// SpeciesSums are the sums of one species.
type SpeciesSums struct {
	Species *traits.Species
	Sums
}

// BySpecies sums by species, the largest basal area first, ties in the order of the table.
func (s Stand) BySpecies() []SpeciesSums {
	var out []SpeciesSums
	for _, t := range s.Trees {
		i := 0
		for i < len(out) && out[i].Species != t.Species {
			i++
		}
		if i == len(out) {
			out = append(out, SpeciesSums{Species: t.Species})
		}
		out[i].add(t)
	}
	sortByBasalArea(out)
	return out
}

// Leading is the species of the largest basal area.
func (s Stand) Leading() SpeciesSums { return s.BySpecies()[0] }

// Measured tells whether the leading species has measured diameters, without which there is no H:D.
func (s Stand) Measured() bool {
	lead := s.Leading().Species
	for _, t := range s.Trees {
		if t.Species == lead && t.DBHTaken {
			return false
		}
	}
	return true
}

// Slenderness is H:D, dominant height over the quadratic mean diameter of the leading species (common practice).
func (s Stand) Slenderness() float64 { return s.Height / s.Leading().QMD() }
