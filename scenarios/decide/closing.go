package decide

import (
	"math"

	"shadeledger/canopy"
	"shadeledger/scenarios"
	"shadeledger/scenarios/ledger"
)

// Pace of closing: early goes with fast crowns and quick leaves.
type Pace int

// The paces.
const (
	Late Pace = iota
	Likely
	Early
)

// Years until leaf area is back after a light and a heavy thinning, and the share cut that is heavy (Chan et al. 2006: light thinnings
// after 8; Beaudet et al. 2004 and Domke 2006: 13 to 20, its ends with the paces).
const (
	lightRegrowth, heavyRegrowth = 8.0, 16.0
	heavy                        = 0.5
)

// same is the share of leaf area that may be missing from a stand that is not thinned: rounding.
const same = 1e-9

var regrowthPace = [3]float64{Late: 1.25, Likely: 1, Early: 0.8}

// state is how far a treatment is back: how far border crowns have come in, m, and the share of the leaf area lost that is there again.
type state struct{ advance, back float64 }

// course is how a treatment closes at each pace.
type course struct {
	opens, thinned bool
	closing        [3]canopy.Closing
	span           [3]float64 // years until leaf area is back
}

func courseOf(p *scenarios.Plan, t *scenarios.Treatment) (c course) {
	before, now := scenarios.LeafArea(p.Stand.Layers), scenarios.LeafArea(t.Matrix)
	c.thinned = now > 0 && now < before*(1-same)
	o, opens := t.Opening.(scenarios.Cleared)
	c.opens = opens
	for pace := Late; pace <= Early; pace++ {
		if opens {
			c.closing[pace] = canopy.Closing{Speed: p.Years.Closing[pace], Stop: canopy.ClosingStop(o.Stems.Area())}
		}
		c.span[pace] = p.Years.Regrowth[Early-pace] // quick leaves go with early
		if c.span[pace] == 0 && c.thinned {
			c.span[pace] = regrowthPace[pace] * (lightRegrowth + (heavyRegrowth-lightRegrowth)*math.Min(1, (1-now/before)/heavy))
		}
	}
	return c
}

// at is the state some years after the cut.
func (c *course) at(pace Pace, years float64) (s state) {
	if c.opens {
		s.advance = c.closing[pace].Advance(years)
	}
	if c.thinned {
		s.back = math.Min(1, years/c.span[pace])
	}
	return s
}

// later is a treatment in a state: crowns come in, leaf area comes back with the clumping of the uncut stand, wood does not.
func later(p *scenarios.Plan, t *scenarios.Treatment, s state) (*scenarios.Treatment, error) {
	out := *t
	if before, now := scenarios.LeafArea(p.Stand.Layers), scenarios.LeafArea(t.Matrix); now > 0 && now < before*(1-same) {
		out.Matrix = append([]scenarios.Layer(nil), t.Matrix...)
		closed, opened := clumping(p.Stand.Layers), clumping(t.Matrix)
		for i := range out.Matrix {
			l := &out.Matrix[i]
			l.LAI *= 1 + s.back*(before/now-1)
			gaps := 1 + s.back*(closed/opened-1) // between crowns, which fill them again
			l.Clumping = math.Min(1, l.Clumping*gaps)
			l.WAI /= gaps // wood stands at random
		}
	}
	c, ok := t.Opening.(scenarios.Cleared)
	if !ok {
		return &out, nil
	}
	crowns, err := canopy.Inset(c.Crowns, s.advance)
	if err != nil { // closed over: a speck is left
		if crowns, err = canopy.NewCircle(speck); err != nil {
			return nil, err
		}
	}
	out.Opening = scenarios.Cleared{Stems: c.Stems, Crowns: crowns, Inside: c.Inside, File: c.File}
	return &out, nil
}

// speck is the diameter of an opening that is none, m.
const speck = 0.02

// clumping of layers, by leaf area.
func clumping(layers []scenarios.Layer) float64 {
	sum := 0.0
	for _, l := range layers {
		sum += l.Clumping * l.LAI
	}
	return sum / scenarios.LeafArea(layers)
}

// track is a row of states in which light is worked out; u is what rises along it: meters come in, share back, or years.
type track struct {
	u      []float64
	states []state
	values [][][][]scenarios.Spot // by state, seedling, rung, station
}

// intervals of a track on which one thing alone moves; every fourth state has the break-even of every size, between them its ratio to that of the first size is linear.
const intervals, full = 8, 4

// worked are the years in which light is worked out where crowns and leaves move together. Lateral growth stops after 11 to 16 years, leaves are back
// after 8 to 20.
var worked = []float64{0, 2, 4, 6, 8, 10, 12, 14, 16, 20, 25, 30, 40, 50, 60}

// tracks are the states to work out by pace, and where on them a pace is in a year. Where one thing alone moves all paces share one track.
func (c *course) tracks(horizon int) (tracks [3]*track, place func(pace Pace, year int) float64) {
	switch {
	case c.opens && c.thinned:
		for pace := Late; pace <= Early; pace++ {
			tracks[pace] = &track{}
			for _, y := range append(append([]float64(nil), worked...), float64(horizon)) {
				if y < float64(horizon) || len(tracks[pace].u) == 0 || y == float64(horizon) && tracks[pace].u[len(tracks[pace].u)-1] < y {
					tracks[pace].u, tracks[pace].states = append(tracks[pace].u, y), append(tracks[pace].states, c.at(pace, y))
				}
			}
		}
		return tracks, func(_ Pace, year int) float64 { return float64(year) }
	case !c.opens && !c.thinned:
		still := &track{u: []float64{0}, states: []state{{}}}
		return [3]*track{still, still, still}, func(Pace, int) float64 { return 0 }
	}
	along := func(s state) float64 {
		if c.opens {
			return s.advance
		}
		return s.back
	}
	one := &track{}
	end := 0.0
	for pace := Late; pace <= Early; pace++ {
		end = math.Max(end, along(c.at(pace, float64(horizon))))
	}
	for i := 0; i <= intervals && (i == 0 || end > 0); i++ {
		u := end * float64(i) / intervals
		s := state{back: u}
		if c.opens {
			s = state{advance: u}
		}
		one.u, one.states = append(one.u, u), append(one.states, s)
	}
	return [3]*track{one, one, one}, func(pace Pace, year int) float64 { return along(c.at(pace, float64(year))) }
}

// between finds the states round a place: the first of the two and the share of the second.
func (t *track) between(u float64) (i int, s float64) {
	for i+2 < len(t.u) && t.u[i+1] <= u {
		i++
	}
	if i+1 >= len(t.u) {
		return i, 0
	}
	return i, math.Max(0, math.Min(1, (u-t.u[i])/(t.u[i+1]-t.u[i])))
}

// whole tells whether a state has the break-even of every size.
func (t *track) whole(n int) bool { return n%full == 0 || n == len(t.u)-1 }

// thresholds gives every state the break-even of every size.
func (t *track) thresholds(p *scenarios.Plan) {
	for n := range t.u {
		if t.whole(n) {
			continue
		}
		a, b := n-n%full, min(n-n%full+full, len(t.u)-1)
		s := (t.u[n] - t.u[a]) / (t.u[b] - t.u[a])
		for i, rungs := range t.values[n] {
			for j := range rungs {
				for k := range rungs[j] {
					if x := &rungs[j][k]; !x.BreakEven.Found {
						from := step{t.values[a][i][0][k].BreakEven, t.values[a][i][j][k].BreakEven}
						to := step{t.values[b][i][0][k].BreakEven, t.values[b][i][j][k].BreakEven}
						x.BreakEven = ratioed(rungs[0][k].BreakEven, from, to, s).of(p.Seedlings[i].Factor)
					}
				}
			}
		}
	}
}

// step is the break-even of the first size and of another, in one state.
type step struct{ first, other ledger.BreakEven }

// point is a break-even to be.
type point struct {
	found          bool
	season, leafOn float64
}

func (x point) of(factor float64) ledger.BreakEven {
	if !x.found {
		return ledger.BreakEven{}
	}
	return ledger.NewBreakEven(x.season, x.leafOn, factor)
}

// ratioed is the break-even of the other size between two states: that of the first size times the ratio of both; where one of them has none or is 0, what lies between
// the other size's own.
func ratioed(first ledger.BreakEven, a, b step, s float64) point {
	found := a.other.Found && b.other.Found
	x := point{found, a.other.Season + s*(b.other.Season-a.other.Season), a.other.LeafOn + s*(b.other.LeafOn-a.other.LeafOn)}
	if !(found && first.Found && least(a.first) > 0 && least(b.first) > 0) {
		return x
	}
	ratio := func(of func(ledger.BreakEven) float64) float64 {
		p, q := of(a.other)/of(a.first), of(b.other)/of(b.first)
		return of(first) * (p + s*(q-p))
	}
	return point{true, ratio(func(b ledger.BreakEven) float64 { return b.Season }), ratio(func(b ledger.BreakEven) float64 { return b.LeafOn })}
}

// least of a break-even's figures; 0 where there is none.
func least(b ledger.BreakEven) float64 {
	if !b.Found {
		return 0
	}
	return math.Min(b.Season, b.LeafOn)
}
