package decide

import (
	"math"

	"shadeledger/canopy"
	"shadeledger/leaf"
	"shadeledger/scenarios"
	"shadeledger/scenarios/ledger"
)

// least height of crowns, m, that a draw leaves above their base.
const leastCrown = 0.5

// Bounds that draws are held to: what layers, seedlings and slopes may be.
const (
	mostClumping = 1.2
	mostLAI      = 30.0
	mostChi      = 20.0
	leastChi     = 0.05
)

// of is the plan that a draw makes of a plan. The plan is not touched.
func (c *change) of(p *scenarios.Plan) *scenarios.Plan {
	q := *p
	q.Ground.Slope, q.Ground.Aspect = c.slope, c.aspect
	q.Stand.Height = c.height
	q.Stand.CrownBase = math.Max(0, math.Min(c.base, c.height-leastCrown))
	q.Stand.CrownRadius = math.Max(0, p.Stand.CrownRadius+c.crowns)
	q.Stand.Layers = c.layers(p, p.Stand.Layers)
	q.Stand.Understory = c.bushes(p.Stand.Understory)
	q.Treatments = append([]scenarios.Treatment(nil), p.Treatments...)
	for i := range q.Treatments {
		t := &q.Treatments[i]
		t.Matrix, t.Understory = c.layers(p, t.Matrix), c.bushes(t.Understory)
		t.Opening = c.opening(p, t.Opening)
	}
	q.Seedlings = append([]scenarios.Seedling(nil), p.Seedlings...)
	for i := range q.Seedlings {
		c.traits[i].on(&q.Seedlings[i].Plant)
	}
	return &q
}

// layers changes leaf area, clumping, heights and leaf dates. Wood keeps its area and stands at random.
func (c *change) layers(p *scenarios.Plan, list []scenarios.Layer) []scenarios.Layer {
	out := append([]scenarios.Layer(nil), list...)
	for i := range out {
		l := &out[i]
		l.LAI = math.Min(mostLAI, l.LAI*c.leafArea)
		omega := math.Min(mostClumping, l.Clumping*c.clumping)
		l.WAI *= l.Clumping / omega
		l.Clumping = omega
		l.Bottom, l.Top = c.lift(p, l.Bottom), c.lift(p, l.Top)
		l.Calendar = c.leaves(l.Calendar)
	}
	return out
}

// lift moves a height of the stand: crowns stretch between their new base and top, stems below.
func (c *change) lift(p *scenarios.Plan, z float64) float64 {
	was, base := p.Stand.CrownBase, math.Max(0, math.Min(c.base, c.height-leastCrown))
	if z <= was {
		if was <= 0 {
			return z
		}
		return z * base / was
	}
	return base + (z-was)*(c.height-base)/(p.Stand.Height-was)
}

// bushes changes leaf area under the trees; they leaf with the stand.
func (c *change) bushes(list []scenarios.Understory) []scenarios.Understory {
	out := append([]scenarios.Understory(nil), list...)
	for i := range out {
		out[i].LAI = math.Min(mostLAI, out[i].LAI*c.understory)
		out[i].Calendar = c.leaves(out[i].Calendar)
	}
	return out
}

// leaves shifts the spring of a deciduous calendar by whole days, as far as its dates stay in order.
func (c *change) leaves(of leaf.Calendar) leaf.Calendar { return shifted(of, c.leafOut) }

func shifted(of leaf.Calendar, days float64) leaf.Calendar {
	d, ok := of.(leaf.Deciduous)
	if !ok {
		return of
	}
	if later, err := d.ShiftSpring(int(math.Round(days))); err == nil {
		return later
	}
	return of
}

// opening moves the crowns round an opening; one that closes keeps a speck.
func (c *change) opening(p *scenarios.Plan, o scenarios.Opening) scenarios.Opening {
	cleared, ok := o.(scenarios.Cleared)
	if !ok {
		return o
	}
	cleared.Inside = c.layers(p, cleared.Inside)
	if c.crowns == 0 {
		return cleared
	}
	crowns, err := canopy.Inset(cleared.Crowns, c.crowns)
	if err != nil {
		if crowns, err = canopy.NewCircle(speck); err != nil {
			return cleared
		}
	}
	cleared.Crowns = crowns
	return cleared
}

// on changes a plant.
func (t *traitChange) on(p *ledger.Plant) {
	p.Traits = leaf.Scaled(p.Traits, t.leaf)
	p.Organs = append([]ledger.Organ(nil), p.Organs...)
	for i := range p.Organs {
		p.Organs[i].Rate *= t.organs
		p.Organs[i].Mass *= t.wood
	}
	p.Chi = math.Max(leastChi, math.Min(mostChi, p.Chi*stepped(t.angle)))
	p.CrownLAI *= t.crown
	p.Turnover.LeafLifespan *= t.lifespan
	p.Turnover.FineRootLifespan *= t.fineRoots
	p.Turnover.ConstructionCost *= t.cost
	p.Leaves = shifted(p.Leaves, t.leadDays)
}

// chiStep is the ratio of neighbouring leaf angles that draws take: rules of incidence are then worked out once for many.
const chiStep = 1.05

// stepped is a factor on the nearest step.
func stepped(factor float64) float64 {
	return math.Pow(chiStep, math.Round(math.Log(factor)/math.Log(chiStep)))
}
