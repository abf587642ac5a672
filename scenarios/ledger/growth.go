package ledger

import "math"

// How a plant's parts keep pace with its wood (stem with branches) as it grows, as exponents of wood mass over that of the plant as given. All are anchored at the
// plant's own height and masses, so that a plant that has not grown is itself.
const (
	// leafOnWood: 291 wild saplings of six conifers, 0.3 to 6.2 m, ordinary least squares of ln leaf on ln wood, r2 0.87 (Claveau, Messier & Comeau 2005, Tree
	// Physiol. 25:373-384, harvests in Falster et al. 2015, Ecology 96:1445). Enquist & Niklas 2002 (Science 295:1517-1520): 3/4 over all seed plants, and roots in
	// proportion to stems.
	leafOnWood = 0.79
	// heightOnWood and kilogramHeight, m: height is the second times wood in kg to the first. The same saplings 0.361 and 2.42, r2 0.86; 1,059 broadleaf seedlings
	// on their stems 0.364 and 3.10, r2 0.69 (Poorter 1999, Funct. Ecol. 13:396-410, same archive); one relation between them for all.
	heightOnWood, kilogramHeight = 0.36, 2.7
	// crownOnLeaf is the exponent of crown projection on leaf area: 128 saplings of beech, ash and sycamore, 0.8 to 6.2 m, r2 0.93 (Petritan, von Luepke &
	// Petritan 2009, Eur. J. For. Res. 128:61-74, same archive). Leaf area over crown projection rises with what is left.
	crownOnLeaf = 0.836
	// breathOnWood is the exponent of the respiration of stems and roots: whole plants of more than some grams (Mori et al. 2010, PNAS 107:1447-1451, 0.78, from
	// memory). Saplings of one experiment breathe in proportion to mass (Reich et al. 2006, Nature 439:457-461), since their nitrogen does; wood gets poorer in it.
	breathOnWood = 0.78
	// leastCost is the carbon in a gram of dry mass, g C: no growth is cheaper (common practice).
	leastCost = 0.45
)

// usualHeight is the height of a sapling by its wood, m.
func usualHeight(grams float64) float64 { return kilogramHeight * math.Pow(grams/1000, heightOnWood) }

// wood is the plant's own, g: its stem, or where it has none what its leaves weigh.
func (p *Plant) wood() float64 {
	for _, o := range p.Organs {
		if o.Line == Stem && o.Mass > 0 {
			return o.Mass
		}
	}
	return p.LeafMass
}

// HeightAt is the plant's height, m, with some times its own wood: it gains what saplings gain. Stock that is taller or shorter than saplings of its wood stays so by
// as much.
func (p *Plant) HeightAt(wood float64) float64 {
	return p.Height + (usualHeight(wood*p.wood()) - usualHeight(p.wood()))
}

// WoodAt is how many times its own wood the plant has at a height no less than its own, m.
func (p *Plant) WoodAt(height float64) float64 {
	usual := math.Max(0, height-p.Height) + usualHeight(p.wood())
	return 1000 * math.Pow(usual/kilogramHeight, 1/heightOnWood) / p.wood()
}

// LeafAt is how many times its own leaf mass the plant has with some times its own wood.
func LeafAt(wood float64) float64 { return math.Pow(wood, leafOnWood) }

// MassAt is the plant's dry mass, g, with some times its own wood.
func (p *Plant) MassAt(wood float64) float64 {
	m := p.LeafMass * LeafAt(wood)
	for _, o := range p.Organs {
		m += o.Mass * wood
	}
	return m
}

// Grown is the plant with some times its own wood, its leaves made in the light they stand in. Fine roots go with leaves.
func (p *Plant) Grown(wood float64) Plant {
	out := *p
	out.Ledger = Acclimated
	leaves := LeafAt(wood)
	out.Height = p.HeightAt(wood)
	out.LeafMass, out.LeafArea = p.LeafMass*leaves, p.LeafArea*leaves
	out.CrownLAI = p.CrownLAI * math.Pow(leaves, 1-crownOnLeaf)
	out.Organs = append([]Organ(nil), p.Organs...)
	for i := range out.Organs {
		out.Organs[i].Mass *= wood
		out.Organs[i].Rate *= math.Pow(wood, breathOnWood-1)
	}
	out.Turnover.FineRootShare = p.Turnover.FineRootShare * leaves / wood
	return out
}

// NewMass is the dry mass, g, that a year's net, g C, makes: net over construction cost, which holds the growth's own respiration. A loss makes none and takes none.
func (p *Plant) NewMass(net float64) float64 {
	return math.Max(0, net) / math.Max(leastCost, p.Turnover.ConstructionCost)
}

// Grow is how many times its own wood a plant has a year on, after a net of g C; no more than most.
func (p *Plant) Grow(wood, net, most float64) float64 {
	mass := p.MassAt(wood) + p.NewMass(net)
	if net <= 0 || wood >= most {
		return wood
	}
	if p.MassAt(most) <= mass {
		return most
	}
	low, high := math.Log(wood), math.Log(most)
	for range 60 {
		if mid := (low + high) / 2; p.MassAt(math.Exp(mid)) < mass {
			low = mid
		} else {
			high = mid
		}
	}
	return math.Exp(high)
}
