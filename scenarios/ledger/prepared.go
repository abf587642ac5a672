package ledger

import (
	"math"

	"shadeledger/canopy"
	"shadeledger/leaf"
	"shadeledger/scenarios/light"
)

// gramsPerMol of carbon.
const gramsPerMol = 12.011

// Prepared is a plant with everything worked out that does not depend on where it stands: its crown's optics, the
// season's leafed sub-steps, temperature factors, and its fixed costs day by day. It is shared by all workers.
type Prepared struct {
	plant *Plant
	made  leaf.Set // of a first-season plant
	above *light.Above
	crown *crown
	steps []step
	sun   []float64 // by step and depth: exp(-G_s l / cos theta_sun)
	open  []float64 // by sky pattern and depth: I_d of the free sky for unit D_above
	angle *canopy.Incidence
	// leaf respiration of a unit of Rd and of leaf area, g C m-2 per (umol m-2 s-1), by day
	leafDay, leafNight []float64
	// sums over the mean year
	leafDayYear, leafNightYear float64
	fixed                      []Lines // stem, root and root replacement by day, g C
	fixedYear                  Lines
	share                      []float64 // of a year's turnover that a day carries
	years                      float64
}

// step is a lit sub-step on which the plant has leaves, is awake and is not under snow.
type step struct {
	lit    int32
	day    int32
	rule   int32   // incidence rule
	normal float64 // I_n = I_b / sin beta, umol m-2 s-1
	mu     float64 // mean cosine of incidence, G_s
	factor float64 // Ag over its reference
	slope  float64 // Phi over its reference; light is multiplied by it
	cap    float64 // Cap over its reference
	weight float64 // g C m-2 per umol m-2 s-1 of rate on full leaf area: s * share * awake * 12.011e-6
	yearly float64 // day weight / years
}

// Prepare works a plant out for a series.
func Prepare(p *Plant, above *light.Above) *Prepared {
	s := above.Series
	r := &Prepared{plant: p, above: above, crown: newCrown(p, above.Zenith), years: float64(s.Years)}
	if p.Ledger == FirstSeason {
		r.made = madeSet(p)
	}
	if p.Chi != 1 {
		r.angle = above.Incidence(p.Chi)
	}
	days := len(s.Days)
	r.leafDay, r.leafNight = make([]float64, days), make([]float64, days)
	r.share = make([]float64, days)
	r.fixed = make([]Lines, days)
	r.calendar()
	r.lit()
	patterns := len(above.OpenRings) / above.Rings()
	n := len(r.crown.depth)
	r.open = make([]float64, patterns*n)
	for k := range patterns {
		r.crown.diffuse(above.OpenRings[k*above.Rings():(k+1)*above.Rings()], r.open[k*n:(k+1)*n])
	}
	return r
}

// calendar sums what temperature and the calendar alone decide: respiration and turnover, day by day.
func (r *Prepared) calendar() {
	p, s := r.plant, r.above.Series
	k := s.Seconds * 1e-6 * gramsPerMol
	total := 0.0
	for d := range s.Days {
		total += s.Days[d].Weight
	}
	slope := make([]float64, len(p.Organs)) // Q10^(x/10) = exp(slope x)
	for j, o := range p.Organs {
		slope[j] = math.Log(o.Q10) / 10
	}
	for d := range s.Days {
		day := &s.Days[d]
		share := p.Leaves.Share(day.Month, day.Day)
		T := s.Temperature[d*s.PerDay : (d+1)*s.PerDay]
		lit := day.LitFrom
		for i, t := range T {
			for j, o := range p.Organs {
				r.fixed[d][o.Line] += k * 1e-3 * o.Rate * o.Mass * math.Exp(slope[j]*(t-o.TRef))
			}
			isLit := lit < day.LitTo && int(s.Lit.Step[lit]) == d*s.PerDay+i
			if isLit {
				lit++
			}
			if share > 0 {
				rate := k * share * p.Temperature.RdFactor(t)
				if isLit {
					r.leafDay[d] += rate
				} else {
					r.leafNight[d] += rate
				}
			}
		}
		r.share[d] = r.years / total
		w := day.Weight / r.years
		r.fixed[d][RootReplacement] = r.rootTurnover() * r.share[d]
		r.leafDayYear += w * r.leafDay[d]
		r.leafNightYear += w * r.leafNight[d]
		for l := range r.fixed[d] {
			r.fixedYear[l] += w * r.fixed[d][l]
		}
	}
}

// rootTurnover is a year's fine-root replacement, g C: root mass * fine share / lifespan * construction cost.
func (r *Prepared) rootTurnover() float64 {
	t := r.plant.Turnover
	for _, o := range r.plant.Organs {
		if o.Line == Root && t.FineRootLifespan > 0 {
			return o.Mass * t.FineRootShare / t.FineRootLifespan * t.ConstructionCost
		}
	}
	return 0
}

// leafTurnover is a year's leaf replacement, g C: leaf mass / lifespan * construction cost; deciduous plants make one
// set a year.
func (r *Prepared) leafTurnover() float64 {
	life := r.plant.Turnover.LeafLifespan
	if _, deciduous := r.plant.Leaves.(leaf.Deciduous); deciduous {
		life = math.Max(1, life)
	}
	return r.plant.LeafMass / life * r.plant.Turnover.ConstructionCost
}

// lit lists the leafed lit sub-steps.
func (r *Prepared) lit() {
	p, s := r.plant, r.above.Series
	n := len(r.crown.depth)
	r.steps = make([]step, 0, len(s.Lit.Step))
	r.sun = make([]float64, 0, len(s.Lit.Step)*n)
	var sunlit [maxDepths]float64
	states := p.Dormancy.States(s.DailyMeans())
	air := newAir(p, r.above)
	for d := range s.Days {
		day := &s.Days[d]
		share := p.Leaves.Share(day.Month, day.Day)
		if share == 0 || (p.SnowDays != nil && p.SnowDays(d)) {
			continue
		}
		for i := day.LitFrom; i < day.LitTo; i++ {
			if s.Lit.Beam[i]+s.Lit.Diffuse[i] <= 0 {
				continue
			}
			β := s.Lit.Elevation[i]
			sinβ, cosβ := math.Sincos(β)
			T := s.Temperature[s.Lit.Step[i]]
			awake := p.Dormancy.Awake(states[d], air.warmth(d, T))
			if awake == 0 {
				continue
			}
			to := air.ratios(d, int(s.Lit.Step[i]))
			if to.Ag == 0 {
				continue
			}
			r.steps = append(r.steps, step{
				lit: int32(i), day: int32(d), rule: int32(canopy.IncidenceRule(β)),
				normal: to.Phi * s.Lit.Beam[i] / sinβ, mu: canopy.LeafProjection(p.Chi, sinβ, cosβ),
				factor: to.Ag, slope: to.Phi, cap: to.Cap,
				weight: s.Seconds * share * gramsPerMol * 1e-6 * awake,
				yearly: day.Weight / r.years,
			})
			r.crown.sunlit(β, sunlit[:n])
			r.sun = append(r.sun, sunlit[:n]...)
		}
	}
}

// traits is the set in force at a leaf-on light: acclimated to it, or the first season's as made before the cut.
func (r *Prepared) traits(leafOn float64) leaf.Set {
	if r.plant.Ledger == FirstSeason {
		return r.made
	}
	return r.plant.Traits.At(leafOn)
}

// madeSet is the set of the leaves as measured: at MadeAt, or at the light whose LMA is nearest to the leaf mass over
// leaf area, found by halving in the logarithm of light (LMA does not fall with light).
func madeSet(p *Plant) leaf.Set {
	if p.MadeAt > 0 {
		return p.Traits.At(p.MadeAt)
	}
	lma := p.LeafMass / p.LeafArea
	low, high := 0.0, math.Log(100)
	for range 50 {
		if mid := (low + high) / 2; p.Traits.At(math.Exp(mid)).LMA < lma {
			low = mid
		} else {
			high = mid
		}
	}
	return p.Traits.At(math.Exp((low + high) / 2))
}

// area is the plant's leaf area (m2) with leaves of a trait set.
func (r *Prepared) area(set leaf.Set) float64 {
	if r.plant.Ledger == FirstSeason {
		return r.plant.LeafArea
	}
	return r.plant.LeafMass / set.LMA
}

// yearCosts is a mean year's costs with leaves of a trait set, g C.
func (r *Prepared) yearCosts(set leaf.Set) Lines {
	l := r.fixedYear
	A := r.area(set)
	l[LeafDay] = A * set.Rd * r.plant.LightRespiration * r.leafDayYear
	l[LeafNight] = A * set.Rd * r.leafNightYear
	l[LeafReplacement] = r.leafTurnover()
	return l
}
