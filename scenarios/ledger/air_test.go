package ledger

import (
	"math"
	"testing"

	"shadeledger/leaf"
	"shadeledger/radiation"
	"shadeledger/radiation/weather"
	"shadeledger/scenarios/light"
)

var bench = leaf.Biochemistry{Vcmax: 40, Jmax: 72, Rd: 0.6, G1: 4.45, Heat: leaf.Bernacchi{}}

// biochemical is the plant with a leaf by its capacities, in humid air of a series.
func biochemical(s *weather.Series, traits leaf.Acclimation) *Plant {
	s.Vapour = make([]float64, len(s.Days))
	for d := range s.Vapour {
		s.Vapour[d] = weather.Saturation(4 + float64(d%9))
	}
	p := plant(2.5, 0.8, traits)
	p.Chemistry = &Chemistry{Leaf: bench, CO2: 420}
	p.Temperature.Respiration = leaf.Heskel
	return p
}

// A year of a biochemical leaf against plain sums of the coupled solution of apparatus and stomata itself.
func TestBiochemicalIncomeAgainstPlainSums(t *testing.T) {
	s := synthetic(60)
	_, on := masks(s)
	above := light.NewAbove(s, radiation.Uniform{}, light.Station)
	for _, share := range []float64{0.05, 0.5} {
		p := biochemical(s, leaf.Constant{Set: bench.Set(50)})
		g := shade(above, share)
		k := NewKeeper(on, on)
		k.Take(g)
		var a Account
		k.Keep(Prepare(p, above), &a)
		income, fleck := bruteIncome(p, g, bench.Set(50), share, 1, func(float64) float64 { return 1 / math.Pi }, func(step int) func(I float64) float64 {
			air := leaf.Air{Temperature: s.Temperature[step], CO2: 420, VPD: s.Deficit(step)}
			return func(I float64) float64 {
				air.PPFD = I
				return bench.Assimilate(air).Gross
			}
		})
		t.Logf("share %g: income %+.4f %%, sunflecks %+.4f %%", share, 100*(a.Total[Income]/income-1), 100*(a.Total[Sunfleck]/fleck-1))
		if math.Abs(a.Total[Income]/income-1) > 0.005 || math.Abs(a.Total[Sunfleck]/fleck-1) > 0.005 {
			t.Errorf("share %g: income %v for %v, sunflecks %v for %v", share, a.Total[Income], income, a.Total[Sunfleck], fleck)
		}
	}
}

// Break-even of a biochemical plant is a root of the exact year, and more CO2 and moister air lower it.
func TestBiochemicalBreakEven(t *testing.T) {
	s := synthetic(3)
	season, on := masks(s)
	above := light.NewAbove(s, radiation.Overcast{}, light.Station)
	law := leaf.PowerLaw{Ref: bench.Set(60), RefLight: 50, LMA: 0.25, Amax: 0.275, Rd: 0.35}
	g := shade(above, 0.1)
	last := math.Inf(1)
	for _, c := range []struct {
		co2, moist float64
		acclimates bool
	}{{380, 1, false}, {420, 1, false}, {420, 1.2, false}, {700, 1.2, false}, {420, 1, true}} {
		p := biochemical(s, law)
		p.Chemistry.CO2, p.Chemistry.Acclimates = c.co2, c.acclimates
		for d := range s.Vapour {
			s.Vapour[d] *= c.moist
		}
		k := NewKeeper(season, on)
		k.Take(g)
		r := Prepare(p, above)
		b := k.BreakEven(r)
		net := func(percent float64) float64 {
			low, high := 0.0, 1e4
			for range 80 {
				if m := (low + high) / 2; k.capLeafOn.Percent(m) < percent {
					low = m
				} else {
					high = m
				}
			}
			set := r.traits(percent)
			costs := r.yearCosts(set)
			return r.area(set)*r.exact(g, &k.scratch, set, low) - costs.Costs()
		}
		t.Logf("%+v: break-even %.2f %%", c, b.LeafOn)
		if below, over := net(b.LeafOn-0.02), net(b.LeafOn+0.02); !(b.Found && below < 0 && over > 0) {
			t.Errorf("%+v: net %g just below %g %%, %g just above", c, below, b.LeafOn, over)
		}
		if !c.acclimates {
			if b.LeafOn >= last {
				t.Errorf("%+v: break-even %g, no lower than %g", c, b.LeafOn, last)
			}
			last = b.LeafOn
		}
	}
}

// The month before is the plain mean of thirty days, also of few days that stand for many, and round the year's end.
func TestMonthBefore(t *testing.T) {
	mean, one := make([]float64, 365), make([]float64, 365)
	for i := range mean {
		mean[i], one[i] = float64(i), 1
	}
	got := before(mean, one)
	if got[100] != 84.5 || math.Abs(got[0]-349.5) > 1e-9 {
		t.Errorf("day 100: %g, first day: %g", got[100], got[0])
	}
	if few := before([]float64{0, 10, 20, 30}, []float64{20, 20, 20, 20}); math.Abs(few[3]-(20*20+10*10)/30.0) > 1e-9 {
		t.Errorf("of four days: %g", few[3])
	}
}
