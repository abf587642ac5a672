package decide

import (
	"math"

	"shadeledger/scenarios"
	"shadeledger/scenarios/ledger"
)

// Fading is how many years in a row of loss a plant lives through: aspen planted under aspen was dead after two growing seasons (Landhausser & Lieffers 2001, Tree
// Physiol. 21:243-250); one more for reserves (from memory).
const Fading = 3

// stride is the greatest ratio between heights at which light and ledger are worked out; shrubs add their own.
const stride = 2.1

// ceiling is the height at which seedlings are followed no further, m: the crown base of the stand, where they enter the canopy; no less than a quarter of
// its height.
func ceiling(s *scenarios.Stand) float64 { return math.Max(s.CrownBase, s.Height/4) }

// rungs are the heights at which a seedling is worked out in a treatment, m.
func rungs(from, top float64, under []scenarios.Understory) []float64 {
	out := []float64{from}
	add := func(h float64) {
		at := len(out)
		for at > 0 && out[at-1] > h {
			at--
		}
		if h > from*1.02 && h < top*0.98 && h > out[at-1]*1.1 && (at == len(out) || out[at] > h*1.1) {
			out = append(out[:at], append([]float64{h}, out[at:]...)...)
		}
	}
	for _, u := range under {
		if u.Top > from {
			add(u.Top)
			add((math.Max(u.Bottom, from) + u.Top) / 2)
		}
	}
	if top > from*1.02 {
		out = append(out, top)
	}
	for i := 0; i+1 < len(out); i++ {
		if n := math.Ceil(math.Log(out[i+1]/out[i]) / math.Log(stride)); n > 1 {
			h := out[i] * math.Pow(out[i+1]/out[i], 1/n)
			out = append(out[:i+1], append([]float64{h}, out[i+1:]...)...)
		}
	}
	return out
}

// at is what a station gives a seedling at a height in a year.
type at struct {
	light, leafOn, net, threshold float64
}

func mix(a, b at, s float64) at {
	of := func(x, y float64) float64 { return x + s*(y-x) }
	return at{of(a.light, b.light), of(a.leafOn, b.leafOn), of(a.net, b.net), of(a.threshold, b.threshold)}
}

func of(x *scenarios.Spot) at {
	y := at{x.Light, x.LightLeafOn, x.Net, 100}
	if x.BreakEven.Found {
		y.threshold = x.BreakEven.Threshold.LeafOn
	}
	return y
}

// climber is one seedling at one station of a treatment.
type climber struct {
	plant   *ledger.Plant
	ladder  *scenarios.Ladder
	tracks  [3]*track
	place   func(pace Pace, year int) float64
	over    float64 // m, the top of what competes with it; 0 for nothing
	sees    int     // seedling
	station int
}

// on is what the station gives at some wood in a state of a track: between rungs light, threshold and net over leaf mass go with height.
func (c *climber) on(values [][][]scenarios.Spot, wood float64) at {
	rungs := values[c.sees]
	w := c.ladder.Wood
	i := 0
	for i+2 < len(w) && w[i+1] <= wood {
		i++
	}
	if len(w) == 1 {
		return of(&rungs[0][c.station])
	}
	a, b := of(&rungs[i][c.station]), of(&rungs[i+1][c.station])
	a.net, b.net = a.net/ledger.LeafAt(w[i]), b.net/ledger.LeafAt(w[i+1])
	h := c.ladder.Heights
	x := mix(a, b, (c.plant.HeightAt(wood)-h[i])/(h[i+1]-h[i]))
	x.net *= ledger.LeafAt(wood)
	return x
}

// in is what the station gives at some wood in a year; in the year of the cut it is the plan's own plant.
func (c *climber) in(pace Pace, year int, wood float64) at {
	if year == 0 {
		return c.planted(pace, year)
	}
	return c.between(pace, year, func(values [][][]scenarios.Spot) at { return c.on(values, wood) })
}

// planted is what the station gives stock of the plan's own size that comes in a year.
func (c *climber) planted(pace Pace, year int) at {
	return c.between(pace, year, func(values [][][]scenarios.Spot) at { return of(&values[c.sees][c.ladder.Own][c.station]) })
}

// between mixes what the two states round a year give.
func (c *climber) between(pace Pace, year int, in func(values [][][]scenarios.Spot) at) at {
	t := c.tracks[pace]
	i, s := t.between(c.place(pace, year))
	if s == 0 {
		return in(t.values[i])
	}
	return mix(in(t.values[i]), in(t.values[i+1]), s)
}

// life is one seedling through the years at one pace. Years beyond the horizon are +Inf.
type life struct {
	at     []at
	fresh  []at      // what new stock of the plan's size gets
	height []float64 // m
	class  []ledger.Class
	lost   float64 // the first year from which it is not comfortable any more
	stock  float64 // the first year from which new stock would not be comfortable any more
	above  float64 // the first year it stands above what competes
	dies   float64
}

// follow grows a seedling year by year: each year's net becomes the next year's size.
func (c *climber) follow(pace Pace, horizon int) life {
	l := life{above: math.Inf(1), dies: math.Inf(1)}
	top := len(c.ladder.Wood) - 1
	wood, poor := 1.0, 0
	for year := 0; year <= horizon; year++ {
		x := c.in(pace, year, wood)
		alive := math.IsInf(l.dies, 1)
		class := x.class()
		if !alive {
			class = ledger.Below
		}
		h := math.Min(c.plant.HeightAt(wood), c.ladder.Heights[top])
		l.at, l.height, l.class = append(l.at, x), append(l.height, h), append(l.class, class)
		if class == ledger.Comfortable {
			l.lost = float64(year + 1)
		}
		l.fresh = append(l.fresh, c.planted(pace, year))
		if l.fresh[year].class() == ledger.Comfortable {
			l.stock = float64(year + 1)
		}
		if alive && h >= c.over {
			l.above = math.Min(l.above, float64(year))
		}
		if poor++; x.net >= 0 {
			poor = 0
		}
		if alive && poor == Fading {
			l.dies = float64(year)
		} else if alive {
			wood = c.plant.Grow(wood, x.net, c.ladder.Wood[top])
		}
	}
	end := float64(horizon + 1)
	if l.lost == end {
		l.lost = math.Inf(1)
	}
	if l.stock == end {
		l.stock = math.Inf(1)
	}
	return l
}

// class is below where the year's net is negative, comfortable at the threshold.
func (x at) class() ledger.Class {
	switch {
	case x.net < 0:
		return ledger.Below
	case x.leafOn >= x.threshold:
		return ledger.Comfortable
	}
	return ledger.Marginal
}
