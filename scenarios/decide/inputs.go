package decide

import (
	"fmt"
	"math"
	"strings"

	"shadeledger/leaf"
	"shadeledger/scenarios"
	"shadeledger/scenarios/decide/draws"
)

// Input is one thing that is not known for sure, with what is known of it: the median and the 5th and 95th percentile.
type Input struct {
	Key      string // as in a plan where it has one
	Label    string // for readers
	Unit     string
	Doubt    draws.Doubt
	Source   string
	Seedling int // its index; -1 for the stand and the site
	Group    Group
	vary     func(c *change, x float64)
}

// change is what one draw makes of a plan: factors where 1 leaves it, differences where 0 does.
type change struct {
	leafArea, clumping, understory, radiation float64
	height, base                              float64 // m
	crowns, leafOut, warmth                   float64 // m, days, K
	slope, aspect                             float64 // rad
	closing, regrowth                         float64 // speed of border crowns, years until leaves are back: factors
	traits                                    []traitChange
}

// traitChange is what a draw makes of one seedling.
type traitChange struct {
	leaf                                                            leaf.Factors
	organs, wood, angle, crown, lifespan, fineRoots, cost, leadDays float64
}

// key of an input without the seedling it is of.
func (in Input) key() string {
	if _, rest, of := strings.Cut(in.Key, "]."); of && in.Seedling >= 0 {
		return rest
	}
	return in.Key
}

func unchanged(p *scenarios.Plan) change {
	c := change{leafArea: 1, clumping: 1, understory: 1, radiation: 1, closing: 1, regrowth: 1, height: p.Stand.Height, base: p.Stand.CrownBase, slope: p.Ground.Slope, aspect: p.Ground.Aspect}
	for range p.Seedlings {
		c.traits = append(c.traits, traitChange{leaf.Factors{Amax: 1, Rd: 1, Phi: 1, LMA: 1}, 1, 1, 1, 1, 1, 1, 1, 0})
	}
	return c
}

// Spread of inputs that neither the plan nor readings tell, as factors or in the unit named (practitioners' usual errors, common practice).
const (
	cruisedLeafArea = 1.30 // of leaf area from trees: inside three measurements on 13 of 16 subplots in Michigan
	assumedLeafArea = 1.40 // of a region's or a stated leaf area
	clumpingRange   = 1.10
	bushRange       = 1.35 // of leaf area under the trees, from cover to 15 points
	heightRange     = 0.05 // standard error over height
	baseError       = 1.25 // m, standard error of crown base
	crownRange      = 0.15 // standard error over crown radius
	leafOutError    = 8.5  // days, standard error
	slopeError      = 0.03 // standard error of tan slope
	aspectError     = 10   // degrees
	radiationRange  = 1.10 // of normals
	parRange        = 1.06 // of the PAR share of 0.45 (0.42 to 0.48)
	warmthError     = 0.75 // K, of normals
)

const normal90 = 1.6449 // deviate of the 95th percentile

// inputs lists what is not known for sure of a plan whose leaf area is corrected; c is the correction.
func inputs(p *scenarios.Plan, c scenarios.Correction) []Input {
	l := inputList{p: p}
	l.stand(c)
	l.site()
	for i := range p.Seedlings {
		l.seedling(i)
	}
	return l.list
}

type inputList struct {
	p    *scenarios.Plan
	list []Input
}

// add takes the plan's own doubt of the key in place of a usual one. Inputs without doubt are left out.
func (l *inputList) add(in Input) {
	for _, d := range l.p.Doubts {
		if d.Key != in.Key || d.Best == 0 || in.Seedling >= 0 { // a seedling's ranges hold its plan's doubt already
			continue
		}
		scale := in.Doubt.Best / d.Best // the plan's value in the input's own unit
		in.Doubt.Low, in.Doubt.High, in.Source = d.Low*scale, d.High*scale, "the plan"
		if d.StandardError > 0 {
			in.Doubt.Low, in.Doubt.High = (d.Best-normal90*d.StandardError)*scale, (d.Best+normal90*d.StandardError)*scale
		}
	}
	if in.Doubt.Low < in.Doubt.High {
		l.list = append(l.list, in)
	}
}

func about(best, factor float64) draws.Doubt {
	return draws.Doubt{Low: best / factor, Best: best, High: best * factor}
}

func around(best, standardError float64) draws.Doubt {
	return draws.Doubt{Low: best - normal90*standardError, Best: best, High: best + normal90*standardError}
}

const practice = "usual error in the field, common practice"

// stand lists the canopy.
func (l *inputList) stand(c scenarios.Correction) {
	p := l.p
	lai := scenarios.LeafArea(p.Stand.Layers)
	if lai > 0 {
		d, source := about(lai, assumedLeafArea), "a stated or assumed leaf area"
		if p.Stand.Cruised() {
			d, source = about(lai, cruisedLeafArea), "leaf area from trees, against sixteen measured subplots"
		}
		if c.Source != "" {
			d, source = draws.Doubt{Low: lai * c.Low / c.Factor, Best: lai, High: lai * c.High / c.Factor}, c.Source+", their 90 % interval"
		}
		l.add(Input{Key: "stand.lai", Label: "leaf area of the stand", Unit: "m2 m-2", Doubt: d, Source: source, Seedling: -1, vary: func(c *change, x float64) { c.leafArea = x / lai }})
		if omega := clumping(p.Stand.Layers); c.Source == "" { // readings tell leaf area and clumping as one
			l.add(Input{Key: "stand.clumping", Label: "clumping of its leaves", Unit: "1", Doubt: about(omega, clumpingRange), Source: practice, Seedling: -1,
				vary: func(c *change, x float64) { c.clumping = x / omega }})
		}
	}
	if bushes := understoryArea(p); bushes > 0 {
		l.add(Input{Key: "stand.understory.lai", Label: "leaf area under the trees", Unit: "m2 m-2", Doubt: about(bushes, bushRange), Source: practice, Seedling: -1,
			vary: func(c *change, x float64) { c.understory = x / bushes }})
	}
	h := p.Stand.Height
	l.add(Input{Key: "stand.height", Label: "dominant height", Unit: "m", Doubt: around(h, heightRange*h), Source: practice, Seedling: -1, vary: func(c *change, x float64) { c.height = x }})
	l.add(Input{Key: "stand.crown_base", Label: "crown base", Unit: "m", Doubt: around(p.Stand.CrownBase, baseError), Source: practice, Seedling: -1, vary: func(c *change, x float64) { c.base = x }})
	r := p.Stand.CrownRadius
	if r > 0 && opens(p) {
		l.add(Input{Key: "stand.crown_radius", Label: "reach of border crowns", Unit: "m", Doubt: around(r, crownRange*r), Source: practice, Seedling: -1, vary: func(c *change, x float64) { c.crowns = x - r }})
	}
	if falls(p) {
		l.add(Input{Key: "stand.leaves.out", Label: "leaf-out of the stand", Unit: "days later", Doubt: around(0, leafOutError), Source: practice, Seedling: -1, vary: func(c *change, x float64) { c.leafOut = x }})
	}
}

// site lists ground and weather.
func (l *inputList) site() {
	p := l.p
	if p.Ground.Slope > 0 {
		t := math.Tan(p.Ground.Slope)
		l.add(Input{Key: "site.slope", Label: "slope", Unit: "%", Doubt: around(100*t, 100*slopeError), Source: practice, Seedling: -1, Group: Site, vary: func(c *change, x float64) { c.slope = math.Atan(math.Max(0, x) / 100) }})
		a := p.Ground.Aspect * 180 / math.Pi
		l.add(Input{Key: "site.aspect", Label: "aspect", Unit: "deg", Doubt: around(a, aspectError), Source: practice, Seedling: -1, Group: Site, vary: func(c *change, x float64) { c.aspect = x * math.Pi / 180 }})
	}
	l.add(Input{Key: "weather.radiation", Label: "mean radiation", Unit: "x normal", Doubt: about(1, radiationRange), Source: "normals, " + practice, Seedling: -1, Group: Site, vary: func(c *change, x float64) { c.radiation *= x }})
	l.add(Input{Key: "weather.par_fraction", Label: "PAR in radiation", Unit: "1", Doubt: about(p.Par.Fraction, parRange), Source: "0.42 to 0.48, common practice", Seedling: -1, Group: Site,
		vary: func(c *change, x float64) { c.radiation *= x / p.Par.Fraction }})
	l.add(Input{Key: "weather.temperature", Label: "mean temperature", Unit: "K warmer", Doubt: around(0, warmthError), Source: "normals, " + practice, Seedling: -1, Group: Site, vary: func(c *change, x float64) { c.warmth = x }})
}

// labels of traits, and how a draw takes them.
var traitInputs = map[scenarios.Trait]struct {
	key, label string
	vary       func(t *traitChange, x float64)
}{
	scenarios.Saturated:    {"leaf.amax", "light-saturated rate", func(t *traitChange, x float64) { t.leaf.Amax = x }},
	scenarios.Respiration:  {"leaf.rd", "leaf respiration", func(t *traitChange, x float64) { t.leaf.Rd *= x }},
	scenarios.Slope:        {"leaf.phi", "quantum yield", func(t *traitChange, x float64) { t.leaf.Phi = x }},
	scenarios.LeafMass:     {"leaf.lma", "leaf mass per area", func(t *traitChange, x float64) { t.leaf.LMA = x }},
	scenarios.NeedleMass:   {"leaf.lma", "leaf mass per area", func(t *traitChange, x float64) { t.leaf.LMA, t.leaf.Rd = x, t.leaf.Rd*x }},
	scenarios.Organs:       {"respiration", "respiration of stem and root", func(t *traitChange, x float64) { t.organs = x }},
	scenarios.Wood:         {"mass", "stem and root beside leaves", func(t *traitChange, x float64) { t.wood = x }},
	scenarios.LeafAngle:    {"chi", "how flat leaves lie (chi)", func(t *traitChange, x float64) { t.angle = x }},
	scenarios.CrownArea:    {"crown_lai", "crown leaf area index", func(t *traitChange, x float64) { t.crown = x }},
	scenarios.Lifespan:     {"replacement.leaf_lifespan", "leaf lifespan", func(t *traitChange, x float64) { t.lifespan = x }},
	scenarios.FineRoots:    {"replacement.fine_root_lifespan", "fine-root lifespan", func(t *traitChange, x float64) { t.fineRoots = x }},
	scenarios.Construction: {"replacement.construction_cost", "cost of new tissue", func(t *traitChange, x float64) { t.cost = x }},
	scenarios.OwnLeafOut:   {"leaves.out", "the seedling's leaf-out", func(t *traitChange, x float64) { t.leadDays = x }},
}

// seedling lists the traits of one seedling, as factors on their best values.
func (l *inputList) seedling(i int) {
	s := &l.p.Seedlings[i]
	for _, r := range s.Ranges {
		in := traitInputs[r.Trait]
		best, unit, group := 1.0, "x best", Body
		if r.Trait <= scenarios.NeedleMass {
			group = Leaves
		}
		if r.Trait == scenarios.OwnLeafOut {
			best, unit = 0, "days later"
		}
		l.add(Input{Key: fmt.Sprintf("seedlings[%d].%s", i, in.key), Label: in.label, Unit: unit, Doubt: draws.Doubt{Low: r.Low, Best: best, High: r.High},
			Source: r.Source, Seedling: i, Group: group, vary: func(c *change, x float64) { in.vary(&c.traits[i], x) }})
	}
}

// opens tells whether a treatment has an opening, falls whether a layer of the stand sheds its leaves.
func opens(p *scenarios.Plan) bool {
	for i := range p.Treatments {
		if _, ok := p.Treatments[i].Opening.(scenarios.Cleared); ok {
			return true
		}
	}
	return false
}

func falls(p *scenarios.Plan) bool {
	for i := range p.Stand.Layers {
		if _, ok := p.Stand.Layers[i].Calendar.(leaf.Deciduous); ok {
			return true
		}
	}
	return false
}

func understoryArea(p *scenarios.Plan) (sum float64) {
	for i := range p.Stand.Understory {
		sum += p.Stand.Understory[i].LAI
	}
	return sum
}
