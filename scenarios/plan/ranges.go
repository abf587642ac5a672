package plan

import (
	"math"
	"strings"

	"shadeledger/leaf"
	"shadeledger/leaf/traits"
	"shadeledger/scenarios"
)

// leastRange is the factor between the best value and either end that a trait has at least: plants of one stock vary by 15 to 30 % (common
// practice), whatever one study found.
const leastRange = 1.15

// usualRange stands where neither the plan nor the library tells (common practice).
const usualRange = 1.25

// ranged is one trait: the library's values that it scales with, first found, and the keys of a plan that doubt it.
type ranged struct {
	trait  scenarios.Trait
	values []string
	keys   []string
}

var rangedTraits = []ranged{
	{scenarios.Saturated, []string{"amax"}, []string{".amax", ".vcmax", ".jmax"}},
	{scenarios.Respiration, []string{"rd"}, []string{".rd"}},
	{scenarios.Slope, []string{"phi"}, []string{".phi"}},
	{scenarios.LeafMass, []string{"seedling_lma", "lma"}, []string{".lma"}},
	{scenarios.Organs, []string{"stem_rate"}, []string{"respiration.stem", "respiration.root", "respiration.woody"}},
	{scenarios.Wood, nil, []string{"mass.stem", "mass.root", "mass.woody"}},
	{scenarios.LeafAngle, []string{"chi"}, []string{"].chi"}},
	{scenarios.CrownArea, []string{"crown_lai"}, []string{"crown_lai"}},
	{scenarios.Lifespan, []string{"leaf_lifespan"}, []string{"leaf_lifespan"}},
	{scenarios.FineRoots, []string{"fine_root_lifespan"}, []string{"fine_root_lifespan"}},
	{scenarios.Construction, []string{"construction_cost"}, []string{"construction_cost"}},
}

// leadDays is how far a seedling's own leaf-out may shift either way (practitioners' dates are good to 7 to 10 days; common practice).
const leadDays = 7

// ranges says how well every trait of a seedling is known: by the plan's own doubt, else the library's range about its value, else what is usual.
func (r *plantReader) ranges(s *scenarios.Seedling) {
	for _, t := range rangedTraits {
		x := scenarios.TraitRange{Trait: t.trait, Low: 1 / usualRange, High: usualRange, Source: "plants vary by 15 to 30 %, " + practice}
		if low, high, ok := r.doubtAmong(t.keys); ok {
			x.Low, x.High, x.Source = low, high, "the plan"
		} else if v, ok := r.libraryRange(t.values); ok {
			x.Low, x.High = math.Min(v.Low/v.Value, 1/leastRange), math.Max(v.High/v.Value, leastRange)
			x.Source = "species library: " + v.Source
		}
		if x.Trait == scenarios.LeafMass && r.species != nil && r.species.Needled() {
			x.Trait = scenarios.NeedleMass
		}
		s.Ranges = append(s.Ranges, x)
	}
	if _, deciduous := s.Leaves.(leaf.Deciduous); deciduous {
		s.Ranges = append(s.Ranges, scenarios.TraitRange{Trait: scenarios.OwnLeafOut, Low: -leadDays, High: leadDays, Source: "dates vary by a week, " + practice})
	}
}

// normal90 is the deviate of the 95th percentile.
const normal90 = 1.6449

// doubtAmong finds doubt that the plan gives for one of several keys, over its best value.
func (r *plantReader) doubtAmong(keys []string) (low, high float64, ok bool) {
	for _, d := range r.doubts {
		if !strings.HasPrefix(d.Key, r.block.path+".") || d.Best <= 0 {
			continue
		}
		for _, key := range keys {
			if !strings.HasSuffix("]"+strings.TrimPrefix(d.Key, r.block.path), key) {
				continue
			}
			if d.StandardError > 0 { // as a factor, so that it stays above 0
				f := math.Exp(normal90 * d.StandardError / d.Best)
				return 1 / f, f, true
			}
			return d.Low / d.Best, d.High / d.Best, true
		}
	}
	return 0, 0, false
}

// libraryRange is the first of some values that the species has.
func (r *plantReader) libraryRange(names []string) (traits.Value, bool) {
	if r.species == nil {
		return traits.Value{}, false
	}
	for _, name := range names {
		if v, ok := r.species.Value(name); ok && v.Value > 0 && v.Low > 0 {
			return v, true
		}
	}
	return traits.Value{}, false
}
