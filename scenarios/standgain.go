package scenarios

import (
	"fmt"
	"math"

	"shadeledger/canopy"
	"shadeledger/canopy/inventory"
	"shadeledger/leaf"
	"shadeledger/leaf/traits"
	"shadeledger/radiation/weather"
	"shadeledger/scenarios/light"
)

// StandGain is what the trees of a matrix gain, slab by slab, from the top down.
type StandGain struct {
	Treatment string
	Slabs     []SlabGain
}

// Year is the mean year's gross assimilation and leaf respiration of all slabs, g C per m2 of ground.
func (g StandGain) Year(s *weather.Series) (gross, respired float64) {
	for i := range g.Slabs {
		a, b := g.Slabs[i].Over(s, allDays(s), float64(s.Years))
		gross, respired = gross+a, respired+b
	}
	return gross, respired
}

// SlabGain is a slab of the matrix, all species of the overstory together.
type SlabGain struct {
	Bottom, Top float64   // m
	LAI         float64   // at full leaf
	Light       float64   // percent of full light in its middle, leaf-on
	Gross, Leaf []float64 // gross assimilation and leaf respiration by series day, g C per m2 of ground
}

// Over sums a slab over a mask of days, weights in, and divides by years: g C m-2.
func (g *SlabGain) Over(s *weather.Series, days []bool, years float64) (gross, respired float64) {
	for d, in := range days {
		if in {
			w := s.Days[d].Weight / years
			gross += w * g.Gross[d]
			respired += w * g.Leaf[d]
		}
	}
	return gross, respired
}

// slabThickness is that of slabs, m.
const slabThickness = 1

// gramsPerMol of carbon.
const gramsPerMol = 12.011

// guild is leaves of one species, calendar and way of standing, through the whole stand.
type guild struct {
	Layer    // of which bounds and areas are unused
	species  *traits.Species
	standing bool // of the overstory
	traits   leaf.Acclimation
	warm     []float64 // Ag(T)/Ag(T_ref) by lit sub-step
	awake    []float64 // share of gross assimilation that winter leaves, by lit sub-step
	respired []float64 // sum of Rd(T)/Rd(T_ref) by day
	foliage  canopy.Foliage
	area     float64 // of the slab at hand, at full leaf
}

// holds tells whether a layer's leaves are of this kind.
func (q *guild) holds(l Layer, standing bool) bool {
	return q.standing == standing && q.Species == l.Species && q.Calendar == l.Calendar && q.Chi == l.Chi &&
		q.Clumping == l.Clumping && q.Absorptance == l.Absorptance
}

// standGain works the matrix of a treatment out, as if it had no opening. Layers without a species have no leaf traits: they take
// light, and are named.
func (r *runner) standGain(treatment *Treatment) (StandGain, []Warning, error) {
	closed := *treatment
	closed.Opening = NoOpening{}
	t := &closed
	s, err := newScene(r.plan, t, r.above)
	if err != nil {
		return StandGain{}, nil, err
	}
	guilds, warnings := guildsOf(t)
	for i := range guilds {
		guilds[i].heat(r.above.Series, r.plan.Sampling.Dormancy)
	}
	top := 0.0
	for _, l := range t.Matrix {
		top = math.Max(top, l.Top)
	}
	n := int(math.Ceil(top / slabThickness))
	g := StandGain{Treatment: t.Name, Slabs: make([]SlabGain, n)}
	field := r.lightField(s, n)
	light.Share(n, r.opts.Workers, func(_, i int) {
		k := n - 1 - i // from the top down
		g.Slabs[i] = r.slab(t, guilds, field, k)
	})
	kept := g.Slabs[:0]
	for _, x := range g.Slabs {
		if x.LAI > 0 {
			kept = append(kept, x)
		}
	}
	g.Slabs = kept
	return g, warnings, nil
}

// lightField is the light at the bounds of every slab in the closed matrix: [bound] values by lit sub-step.
type lightField struct {
	chance, through, sky [][]float64
	leafOn               []float64 // percent
}

// lightField surveys the matrix without its opening at every bound.
func (r *runner) lightField(s *scene, n int) *lightField {
	f := &lightField{make([][]float64, n+1), make([][]float64, n+1), make([][]float64, n+1), make([]float64, n+1)}
	points := make([]canopy.Point, n+1)
	for k := range points {
		points[k].Height = float64(k * slabThickness)
	}
	lit := &r.above.Series.Lit
	s.light.SurveyAlongGround(points, r.opts.Workers, func(_, k int, g *light.Regime) {
		f.chance[k] = append([]float64(nil), g.BeamChance...)
		f.sky[k] = append([]float64(nil), g.SkyPlane...)
		f.through[k] = make([]float64, len(lit.Step))
		for i, b := range lit.Beam {
			f.through[k][i] = g.BeamChance[i]
			if b > 0 {
				f.through[k][i] += g.Scattered[i] / b
			}
		}
		sums, _ := g.Over(s.leafOn)
		f.leafOn[k] = sums.Percent()
	})
	return f
}

// guildsOf lists the kinds of leaves of a treatment.
func guildsOf(t *Treatment) (out []guild, warnings []Warning) {
	nameless := 0.0
	add := func(l Layer, standing bool) {
		for i := range out {
			if out[i].holds(l, standing) {
				return
			}
		}
		q := guild{Layer: l, standing: standing, foliage: canopy.NewFoliage(l.Chi, l.Clumping, l.Absorptance)}
		if sp, err := traits.Find(l.Species); err == nil {
			q.species, q.traits = sp, sp.Acclimation()
		} else if standing {
			nameless += l.LAI
		}
		out = append(out, q)
	}
	for _, l := range t.Matrix {
		add(l, true)
	}
	for _, u := range t.Understory {
		add(u.Layer, false)
	}
	if nameless > 0 {
		warnings = append(warnings, Warning{Key: "treatments." + t.Name, Text: fmt.Sprintf(
			"layers without a species hold leaf area %.2g: they take light, but their gain is not counted", nameless)})
	}
	return out, warnings
}

// fill sets the leaf area that each kind has between two heights; it gives the wood there, times clumping, and the overstory's leaf area.
func fill(guilds []guild, t *Treatment, bottom, top float64) (wood, lai float64) {
	for i := range guilds {
		guilds[i].area = 0
	}
	add := func(l Layer, standing bool) {
		share := math.Max(0, math.Min(top, l.Top)-math.Max(bottom, l.Bottom)) / (l.Top - l.Bottom)
		if share == 0 {
			return
		}
		wood += share * l.Clumping * l.WAI
		if standing {
			lai += share * l.LAI
		}
		for i := range guilds {
			q := &guilds[i]
			if q.holds(l, standing) {
				q.area += share * l.LAI
				return
			}
		}
	}
	for _, l := range t.Matrix {
		add(l, true)
	}
	for _, u := range t.Understory {
		add(u.Layer, false)
	}
	return wood, lai
}

// slab keeps the books of the slab between bounds k and k+1.
func (r *runner) slab(t *Treatment, all []guild, f *lightField, k int) SlabGain {
	series := r.above.Series
	bottom, top := float64(k*slabThickness), float64((k+1)*slabThickness)
	guilds := append([]guild(nil), all...)
	out := SlabGain{Bottom: bottom, Top: top, Light: (f.leafOn[k] + f.leafOn[k+1]) / 2,
		Gross: make([]float64, len(series.Days)), Leaf: make([]float64, len(series.Days))}
	var slab canopy.Slab
	slab.Wood, out.LAI = fill(guilds, t, bottom, top)
	if out.LAI == 0 {
		return out
	}
	present := guilds[:0]
	var sets []leaf.Set
	for _, q := range guilds {
		if q.area > 0 {
			present = append(present, q)
			sets = append(sets, q.set(out.Light))
			slab.Leaves = append(slab.Leaves, q.foliage)
		}
	}
	b := slabBooks{runner: r, slab: &slab, guilds: present, sets: sets, field: f, k: k}
	for d := range series.Days {
		out.Gross[d], out.Leaf[d] = b.day(d)
	}
	return out
}

// heat works out what the temperature of the air does to the rates of a kind.
func (q *guild) heat(s *weather.Series, winter leaf.Dormancy) {
	if q.species == nil {
		return
	}
	T := q.species.Temperature()
	q.warm, q.respired = make([]float64, len(s.Lit.Step)), make([]float64, len(s.Days))
	q.awake = make([]float64, len(s.Lit.Step))
	if q.species.Deciduous() {
		winter = leaf.Dormancy{}
	}
	states := winter.States(s.DailyMeans())
	for i, step := range s.Lit.Step {
		celsius := s.Temperature[step]
		q.warm[i] = T.AgFactor(celsius)
		q.awake[i] = winter.Awake(states[int(step)/s.PerDay], T.Warmth(celsius))
	}
	for i, celsius := range s.Temperature {
		q.respired[i/s.PerDay] += T.RdFactor(celsius)
	}
}

// set is the leaf traits of a kind at a growth light, per hemisurface area; none without a species. The library's rates of needles are per
// projected area.
func (q *guild) set(growth float64) leaf.Set {
	if q.species == nil {
		return leaf.Set{}
	}
	x := q.traits.At(growth)
	if q.species.Needled() {
		x.Ag, x.Rd, x.LMA = x.Ag/inventory.Hemisurface, x.Rd/inventory.Hemisurface, x.LMA/inventory.Hemisurface
	}
	return x
}

// slabBooks is a slab at work.
type slabBooks struct {
	*runner
	slab   *canopy.Slab
	guilds []guild
	sets   []leaf.Set
	field  *lightField
	k      int
	gain   canopy.Gain
}

// day is a day's gross assimilation and leaf respiration of the overstory, g C m-2.
func (b *slabBooks) day(d int) (gross, respired float64) {
	series := b.above.Series
	day := &series.Days[d]
	leafed := false
	for i, q := range b.guilds {
		b.slab.Leaves[i].LAI = q.area * q.Calendar.Share(day.Month, day.Day)
		leafed = leafed || b.slab.Leaves[i].LAI > 0
	}
	if !leafed {
		return 0, 0
	}
	for i := day.LitFrom; i < day.LitTo; i++ {
		a := b.arriving(i)
		for j, q := range b.guilds {
			if q.species != nil {
				warm := b.sets[j]
				warm.Ag *= q.warm[i] * q.awake[i]
				warm.Phi *= q.awake[i]
				b.slab.Leaves[j].Response = warm.Response()
			}
		}
		b.slab.Take(&a, &b.gain)
		for j, q := range b.guilds {
			if q.standing {
				gross += b.gain.Of[j]
			}
		}
	}
	for j, q := range b.guilds {
		if q.standing && q.species != nil {
			respired += b.slab.Leaves[j].LAI * b.sets[j].Rd * q.respired[d]
		}
	}
	k := series.Seconds * 1e-6 * gramsPerMol
	return gross * k, respired * k
}

// arriving is the light at the slab in a lit sub-step.
func (b *slabBooks) arriving(i int) canopy.Arriving {
	lit := &b.above.Series.Lit
	sin, cos := math.Sincos(lit.Elevation[i])
	rise := sin
	if tan := math.Tan(b.plan.Ground.Slope); tan > 0 {
		rise = math.Max(1e-9, sin+tan*cos*math.Cos(lit.Azimuth[i]-b.plan.Ground.Aspect))
	}
	f, k := b.field, b.k
	return canopy.Arriving{
		Elevation: lit.Elevation[i], Path: 1 / rise, Normal: lit.Beam[i] / sin,
		Chance: [2]float64{f.chance[k+1][i], f.chance[k][i]}, Through: [2]float64{f.through[k+1][i], f.through[k][i]},
		Sky: [2]float64{f.sky[k+1][i], f.sky[k][i]},
	}
}

// PeriodGain is what a slab gains over a period, g C m-2.
type PeriodGain struct {
	Period      string
	Gross, Leaf float64
}

// By divides a slab's gain as ledgers are: by year, month or day.
func (g *SlabGain) By(s *weather.Series, by By) (out []PeriodGain) {
	for _, sp := range spans(s, by) {
		gross, respired := g.Over(s, sp.days, sp.years)
		out = append(out, PeriodGain{sp.name, gross, respired})
	}
	return out
}
