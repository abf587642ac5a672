package ledger

import (
	"math"

	"shadeledger/canopy"
	"shadeledger/leaf"
	"shadeledger/scenarios/light"
)

// The search for break-even: k is bracketed in bracketSteps logarithmic steps and closed to tolerance points.
const (
	bracketSteps = 40
	tolerance    = 0.01  // points of full light
	stride       = 3     // steps that the rough net takes at a time
	fitted       = 0.005 // the bins' miss below which, scaled out, they need no exact pass for dimmer light
	far          = 50    // but not for light this many times dimmer
	sure         = 0.1   // points: after a move this small, the bins' slope leaves a few thousandths
	faintest     = 0.02  // percent of full light at the first step
	mostScale    = 1 << 20
)

// bins is a year's steps gathered where light on the leaves is alike. With temperature divided out (light over the
// temperature factor f, weight times f) the curve is the same for all, so each bin stands for its steps by its means;
// the error is of second order in the bin's width, and is taken out at the end by an exact pass.
type bins struct {
	index []int32 // by key: place in list + 1
	used  []int32 // keys in use
	list  []bin
	depth []float64 // by bin and depth: sky, open sky, sunlit
}

type bin struct {
	weight                              float64 // sum of w f
	normal, beam, down, level, rule, mu float64 // weighted sums of I_n/f, P0, S/f, I_b/f, rule index, G_s
	cap                                 float64 // of Cap over Ag, each over its reference
}

const (
	keyLight  = 40 // half octaves of diffuse leaf light
	keyBeam   = 36 // half octaves of beam
	keyChance = 5
	keyCap    = 3
	usualBins = 2048 // room made at once; more is rare
)

// halfOctave bins x from 2^low up.
func halfOctave(x float64, low, n int) int {
	if x <= 0 {
		return 0
	}
	return max(0, min(n-1, int(math.Float64bits(x)>>51)-(1023+low)<<1))
}

// chanceClass keeps apart beam chances that reach 1 at different scales.
func chanceClass(p float64) int {
	switch {
	case p <= 0.02:
		return 0
	case p <= 0.1:
		return 1
	case p <= 0.3:
		return 2
	case p <= 0.7:
		return 3
	}
	return 4
}

// gather fills the bins from a regime.
func (r *Prepared) gather(g *light.Regime, w *scratch) {
	n := len(r.crown.depth)
	b := &w.bins
	if b.index == nil {
		b.index = make([]int32, keyLight*keyBeam*keyChance*keyCap)
		b.used, b.list, b.depth = make([]int32, 0, usualBins), make([]bin, 0, usualBins), make([]float64, 0, usualBins*3*maxDepths)
	}
	for _, k := range b.used {
		b.index[k] = 0
	}
	b.used, b.list, b.depth = b.used[:0], b.list[:0], b.depth[:0]
	lit := &r.above.Series.Lit
	for x := range r.steps {
		s := &r.steps[x]
		i := s.lit
		shape := int(g.Shape[i])
		pattern := int(g.ShapePattern[shape])
		unit, open := w.diffuse[shape*n:(shape+1)*n], r.open[pattern*n:(pattern+1)*n]
		f := 1 / s.factor
		light := f * s.slope
		D := lit.Diffuse[i] * light
		down := g.Scattered[i] * light
		u := D*unit[n/2] + down*r.crown.uniform[n/2]
		reach := 0
		if q := unit[n/2]; q > 0.25*open[n/2] {
			reach = 1
			if q > 0.6*open[n/2] {
				reach = 2
			}
		}
		key := ((halfOctave(u, -9, keyLight)*keyBeam+halfOctave(s.normal*f, -6, keyBeam))*keyChance+chanceClass(g.BeamChance[i]))*keyCap + reach
		k := b.index[key]
		if k == 0 {
			b.list = append(b.list, bin{})
			for range 3 * n {
				b.depth = append(b.depth, 0)
			}
			k = int32(len(b.list))
			b.index[key] = k
			b.used = append(b.used, int32(key))
		}
		wf := s.weight * s.yearly * s.factor
		q := &b.list[k-1]
		q.weight += wf
		q.normal += wf * s.normal * f
		q.beam += wf * g.BeamChance[i]
		q.down += wf * down
		q.level += wf * lit.Beam[i] * light
		q.cap += wf * s.cap * f
		q.rule += wf * float64(s.rule)
		q.mu += wf * s.mu
		at := b.depth[int(k-1)*3*n:]
		sun := r.sun[x*n : (x+1)*n]
		for j := range sun {
			at[3*j] += wf * D * unit[j]
			at[3*j+1] += wf * D * open[j]
			at[3*j+2] += wf * sun[j]
		}
	}
	for k := range b.list {
		q := &b.list[k]
		inv := 1 / q.weight
		q.normal, q.beam, q.down, q.level, q.rule, q.mu = q.normal*inv, q.beam*inv, q.down*inv, q.level*inv, q.rule*inv, q.mu*inv
		q.cap *= inv
		for j := k * 3 * n; j < (k+1)*3*n; j++ {
			b.depth[j] *= inv
		}
	}
}

// binned is a year's gross income on 1 m2 of leaf from the bins scaled by k, g C.
func (r *Prepared) binned(w *scratch, set leaf.Set, k float64) float64 {
	n := len(r.crown.depth)
	c := newCurve(set)
	var sky, sunlit [maxDepths]float64
	m := moment{sky: sky[:n], sunlit: sunlit[:n]}
	sum := 0.0
	for x := range w.bins.list {
		q := &w.bins.list[x]
		at := w.bins.depth[x*3*n : (x+1)*3*n]
		for j := range m.sky {
			m.sky[j] = least(k*at[3*j], at[3*j+1])
			m.sunlit[j] = at[3*j+2]
		}
		m.beam = least(1, k*q.beam)
		m.down = least(k*q.down, q.level*(1-m.beam))
		s := step{normal: q.normal, mu: q.mu, factor: 1, cap: q.cap, rule: int32(q.rule + 0.5)}
		rate := r.rate(&s, &m, &c)
		sum += q.weight * (rate.shade + rate.fleck)
	}
	return sum
}

// rough is binned with the middle depth standing for the whole crown and without caps: it only points the search to a bracket.
func (r *Prepared) rough(w *scratch, set leaf.Set, k float64) float64 {
	n := len(r.crown.depth)
	mid := n / 2
	c := newCurve(set)
	var node [canopy.IncidenceNodes]float64
	sum := 0.0
	for x := range w.bins.list {
		q := &w.bins.list[x]
		at := w.bins.depth[x*3*n+3*mid:]
		beam := least(1, k*q.beam)
		Id := least(k*at[0], at[1]) + least(k*q.down, q.level*(1-beam))*r.crown.uniform[mid]
		P := c.gross(Id, c.ag)
		if beam > 0 && q.normal > 0 {
			s := step{normal: q.normal, mu: q.mu, factor: 1, cap: q.cap, rule: int32(q.rule + 0.5)}
			weight := r.rule(&s, &node)
			mean := 0.0
			for i, v := range node {
				mean += weight[i] * c.gross(Id+v, c.ag)
			}
			P += beam * at[2] * (mean - P)
		}
		sum += q.weight * P
	}
	return sum
}

// exact is the same sum over every step.
func (r *Prepared) exact(g *light.Regime, w *scratch, set leaf.Set, k float64) float64 {
	sum := 0.0
	r.each(g, w, set, k, func(s *step, rate rates) {
		sum += s.weight * s.yearly * (rate.shade + rate.fleck)
	})
	return sum
}

// BreakEven finds the light at which the year's net of a plant is zero, scaling the regime in hand: the lowest k at
// which net crosses zero upwards.
func (k *Keeper) BreakEven(r *Prepared) BreakEven {
	if !k.capped {
		k.regime.Caps(k.season, &k.capSeason)
		k.regime.Caps(k.leafOn, &k.capLeafOn)
		k.capped = true
	}
	k.shape(r)
	r.gather(k.regime, &k.scratch)
	net := func(scale float64, income func(leaf.Set, float64) float64) float64 {
		set := r.traits(k.capLeafOn.Percent(scale))
		costs := r.yearCosts(set)
		return r.area(set)*income(set, scale) - costs.Costs()
	}
	// what the bins miss at the regime in hand, where Keep has summed every step, they miss near it
	fit := 1.0
	if kept := k.kept; kept.plant == r && kept.income > 0 {
		fit = kept.income / r.binned(&k.scratch, kept.set, 1)
	}
	quick := func(scale float64) float64 {
		return net(scale, func(set leaf.Set, s float64) float64 { return fit * r.binned(&k.scratch, set, s) })
	}
	scale, found := k.search(func(scale float64) float64 {
		return net(scale, func(set leaf.Set, s float64) float64 { return r.rough(&k.scratch, set, s) })
	}, quick)
	if !found {
		return BreakEven{}
	}
	if scale > 0 && !(fit != 1 && math.Abs(fit-1) < fitted && scale > 1/far && scale < 1) {
		scale = k.polish(scale, quick, func(scale float64) float64 {
			return net(scale, func(set leaf.Set, s float64) float64 { return r.exact(k.regime, &k.scratch, set, s) })
		})
	}
	return NewBreakEven(k.capSeason.Percent(scale), k.capLeafOn.Percent(scale), r.plant.Factor)
}

// NeutralShade is the break-even light under neutral shade: beam chance and sky share the same number all year and
// nothing scattered. It depends on species and site only. The keeper's regime is replaced.
func (k *Keeper) NeutralShade(r *Prepared) BreakEven {
	k.Take(light.Uniformly(r.above, 0.1))
	return k.BreakEven(r)
}

// NewBreakEven adds the working thresholds, min(100, factor * break-even).
func NewBreakEven(season, leafOn, factor float64) BreakEven {
	return BreakEven{Found: true, Season: season, LeafOn: leafOn, Threshold: Threshold{
		math.Min(100, factor*season), math.Min(100, factor*leafOn),
	}}
}

// bracket is the lowest scale tried above 0 and the ratio from one trial to the next; the last lies beyond where scaling
// brightens no more. 0 where there is no light to scale.
func (k *Keeper) bracket() (low, ratio float64) {
	at := k.capLeafOn.Percent(1)
	if at <= 0 {
		return 0, 1
	}
	low = faintest / at
	high := 1.0
	for high < mostScale && k.capLeafOn.Percent(2*high) > 1.0002*k.capLeafOn.Percent(high) {
		high *= 2
	}
	return low, math.Pow(2*high/low, 1.0/bracketSteps)
}

// search finds the lowest upward crossing of net. A rough net picks the step of the bracket; the net itself then moves
// it down or up until it holds.
func (k *Keeper) search(rough, net func(float64) float64) (scale float64, found bool) {
	if net(0) >= 0 {
		return 0, true
	}
	low, ratio := k.bracket()
	if low == 0 {
		return 0, false // no light at all to scale
	}
	at := func(i int) float64 {
		if i < 0 {
			return 0
		}
		return low * math.Pow(ratio, float64(i))
	}
	i := 0
	for i < bracketSteps && rough(at(i)) < 0 {
		i = min(i+stride, bracketSteps)
	}
	if net(at(i)) >= 0 {
		for i > 0 && net(at(i-1)) >= 0 {
			i--
		}
		return k.close(net, at(i-1), at(i)), true
	}
	for i++; i <= bracketSteps; i++ {
		if net(at(i)) >= 0 {
			return k.close(net, at(i-1), at(i)), true
		}
	}
	// the rough net may have stepped over a short stretch of gain
	for i = range bracketSteps {
		if net(at(i)) >= 0 {
			return k.close(net, at(i-1), at(i)), true
		}
	}
	return 0, false
}

// close narrows a bracket (net < 0 at a, >= 0 at b) by the Illinois form of false position, falling back on halving.
func (k *Keeper) close(net func(float64) float64, a, b float64) float64 {
	fa, fb := net(a), net(b)
	for i := range 60 {
		if k.capLeafOn.Percent(b)-k.capLeafOn.Percent(a) < tolerance || b-a < 1e-12*b {
			break
		}
		m := (a*fb - b*fa) / (fb - fa)
		if i%3 == 2 || !(m > a && m < b) {
			m = (a + b) / 2
		}
		if f := net(m); f < 0 {
			a, fa = m, f
			fb /= 2
		} else {
			b, fb = m, f
			fa /= 2
		}
	}
	return (a + b) / 2
}

// polish moves the bins' root to the exact one by a secant whose slope the bins give.
func (k *Keeper) polish(scale float64, quick, exact func(float64) float64) float64 {
	for range 3 {
		miss := exact(scale)
		h := 1e-3 * scale
		slope := (quick(scale+h) - quick(scale-h)) / (2 * h)
		if !(slope > 0) {
			break
		}
		move := -miss / slope
		if math.Abs(move) > 0.3*scale {
			move = math.Copysign(0.3*scale, move)
		}
		before := k.capLeafOn.Percent(scale)
		scale += move
		if math.Abs(k.capLeafOn.Percent(scale)-before) < sure {
			break
		}
	}
	return scale
}
