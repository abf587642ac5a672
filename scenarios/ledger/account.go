package ledger

import (
	"math"

	"shadeledger/leaf"
	"shadeledger/scenarios/light"
)

// Costs are all lines but income, g C.
func (l Lines) Costs() float64 {
	return l[LeafDay] + l[LeafNight] + l[Stem] + l[Root] + l[LeafReplacement] + l[RootReplacement]
}

// Net is income less costs, g C.
func (l Lines) Net() float64 { return l[Income] - l.Costs() }

// Ratio is income over costs; 1 is break-even. NaN without costs.
func (l Lines) Ratio() float64 {
	if l.Costs() == 0 {
		return math.NaN()
	}
	return l[Income] / l.Costs()
}

// Add adds weighted lines.
func (l *Lines) Add(o Lines, weight float64) {
	for i, v := range o {
		l[i] += weight * v
	}
}

// Account is a plant's ledger at one spot.
type Account struct {
	Days  []Lines // by series day
	Total Lines   // of a mean calendar year
}

// Keeper runs ledgers; it holds one worker's scratch space and the regime in hand.
type Keeper struct {
	regime         *light.Regime
	season, leafOn []bool
	capSeason      light.Caps
	capLeafOn      light.Caps
	capped         bool
	kept           kept      // the last ledger of the regime in hand
	shaped         *Prepared // plant whose crown the scratch space holds for the regime in hand
	scratch
}

// kept is what a ledger found for a plant: the mean year's gross income of 1 m2 of leaf, g C, with its trait set.
type kept struct {
	plant  *Prepared
	set    leaf.Set
	income float64
}

// NewKeeper makes a worker's scratch space; season and leafOn mark series days.
func NewKeeper(season, leafOn []bool) *Keeper { return &Keeper{season: season, leafOn: leafOn} }

// Take sets the regime that the following calls are about.
func (k *Keeper) Take(g *light.Regime) {
	k.regime, k.capped, k.shaped, k.kept = g, false, nil, kept{}
}

// shape readies the scratch space for a plant at the regime in hand.
func (k *Keeper) shape(r *Prepared) {
	if k.shaped != r {
		r.shapes(k.regime, &k.scratch)
		k.shaped = r
	}
}

// LeafOnPercent is the leaf-on percent of full light of the regime in hand.
func (k *Keeper) LeafOnPercent() float64 {
	s, _ := k.regime.Over(k.leafOn)
	return s.Percent()
}

// Keep writes the plant's ledger at the regime in hand, day by day and for the mean year.
func (k *Keeper) Keep(r *Prepared, out *Account) {
	set := r.traits(k.LeafOnPercent())
	A := r.area(set)
	if cap(out.Days) < len(r.fixed) {
		out.Days = make([]Lines, len(r.fixed))
	}
	out.Days = out.Days[:len(r.fixed)]
	turnover := r.leafTurnover()
	for d, l := range r.fixed {
		l[LeafDay] = A * set.Rd * r.plant.LightRespiration * r.leafDay[d]
		l[LeafNight] = A * set.Rd * r.leafNight[d]
		l[LeafReplacement] = turnover * r.share[d]
		out.Days[d] = l
	}
	k.shape(r)
	r.each(k.regime, &k.scratch, set, 1, func(s *step, rate rates) {
		day := &out.Days[s.day]
		day[Income] += A * s.weight * (rate.shade + rate.fleck)
		day[Sunfleck] += A * s.weight * rate.fleck
	})
	out.Total = Lines{}
	for d := range out.Days {
		out.Total.Add(out.Days[d], r.above.Series.Days[d].Weight/r.years)
	}
	k.kept = kept{r, set, out.Total[Income] / A}
}

// LeafMassMismatch tells by what share LMA at the plant's growth light differs from the leaf mass over leaf area of a
// first-season plant; 0 for an acclimated one.
func (k *Keeper) LeafMassMismatch(r *Prepared) float64 {
	if r.plant.Ledger != FirstSeason {
		return 0
	}
	given := r.plant.LeafMass / r.plant.LeafArea
	return math.Abs(r.plant.Traits.At(k.LeafOnPercent()).LMA-given) / given
}

// ClassOf places a plant by its year's net and its leaf-on light.
func ClassOf(net, leafOn float64, b BreakEven) Class {
	switch {
	case net < 0:
		return Below
	case b.Found && leafOn >= b.Threshold.LeafOn:
		return Comfortable
	}
	return Marginal
}

// String is the word for a class.
func (c Class) String() string { return [...]string{"below", "marginal", "comfortable"}[c] }
