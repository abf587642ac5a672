package ledger

import (
	"math"
	"testing"

	"shadeledger/canopy"
	"shadeledger/leaf"
	"shadeledger/radiation"
	"shadeledger/scenarios/light"
)

// Neutral shade is the same wherever its scaling starts, and its beam and sky share is its percent of full light.
func TestNeutralShade(t *testing.T) {
	s := synthetic(5)
	season, on := masks(s)
	above := light.NewAbove(s, radiation.Overcast{}, light.Station)
	k := NewKeeper(season, on)
	for _, kind := range []Kind{Acclimated, FirstSeason} {
		p := plant(2.5, 0.5, twoSets)
		p.Ledger = kind
		r := Prepare(p, above)
		b := k.NeutralShade(r)
		k.Take(light.Uniformly(above, 0.7))
		c := k.BreakEven(r)
		if !b.Found || math.Abs(b.LeafOn-c.LeafOn) > 0.02 || math.Abs(b.Season-b.LeafOn) > 1e-9 {
			t.Errorf("kind %d: %+v from 10 %%, %+v from 70 %%", kind, b, c)
		}
		for _, side := range []float64{-0.02, 0.02} {
			k.Take(light.Uniformly(above, (b.LeafOn+side)/100))
			var a Account
			k.Keep(r, &a)
			if a.Total.Net()*side <= 0 {
				t.Errorf("kind %d: net %g at %+g points from break-even", kind, a.Total.Net(), side)
			}
		}
	}
}

// Less respiration in the light alters leaf_day only; snow takes income only; leaves may cross the new year.
func TestWhatMovesWhichLine(t *testing.T) {
	s := synthetic(5)
	season, on := masks(s)
	above := light.NewAbove(s, radiation.Uniform{}, light.Station)
	k := NewKeeper(season, on)
	k.Take(shade(above, 0.2))
	run := func(change func(*Plant)) (a Account) {
		p := plant(1, 0.5, twoSets)
		p.Leaves = leaf.Deciduous{Out: leaf.Date{Month: 10, Day: 1}, Full: leaf.Date{Month: 10, Day: 20},
			Colour: leaf.Date{Month: 4, Day: 1}, Bare: leaf.Date{Month: 4, Day: 20}}
		change(p)
		k.Keep(Prepare(p, above), &a)
		return a
	}
	base := run(func(*Plant) {})
	light := run(func(p *Plant) { p.LightRespiration = 0.5 })
	snow := run(func(p *Plant) { p.SnowDays = func(d int) bool { return s.Days[d].Month == 1 } })
	for l := range base.Total {
		if (Line(l) == LeafDay) == (light.Total[l] == base.Total[l]) {
			t.Errorf("light respiration and line %d: %g, %g", l, base.Total[l], light.Total[l])
		}
		if (Line(l) <= Sunfleck) == (snow.Total[l] == base.Total[l]) {
			t.Errorf("snow and line %d: %g, %g", l, base.Total[l], snow.Total[l])
		}
	}
	for d, day := range s.Days {
		leafed := day.Month >= 11 || day.Month <= 3
		if summer := day.Month >= 5 && day.Month <= 9; leafed && base.Days[d][Income] <= 0 || summer && base.Days[d][LeafNight] != 0 {
			t.Errorf("%v-%d: %v", day.Month, day.Day, base.Days[d])
		}
	}
}

// A plant that costs nothing breaks even in the dark; one that costs more than full light earns never does.
func TestBreakEvenEnds(t *testing.T) {
	s := synthetic(5)
	season, on := masks(s)
	above := light.NewAbove(s, radiation.Uniform{}, light.Station)
	k := NewKeeper(season, on)
	k.Take(shade(above, 0.2))
	free := plant(1, 0.5, leaf.Constant{Set: leaf.Set{Ag: 5, Phi: 0.05, Theta: 0.8, LMA: 40}})
	free.Organs, free.Turnover.ConstructionCost = nil, 0
	if b := k.BreakEven(Prepare(free, above)); !b.Found || b.LeafOn != 0 {
		t.Errorf("no costs: %+v", b)
	}
	dear := plant(1, 0.5, twoSets)
	dear.Organs[0].Mass = 1e4
	if b := k.BreakEven(Prepare(dear, above)); b.Found {
		t.Errorf("costs beyond reach: %+v", b)
	}
}

// The sun may stand on the horizon: the sunlit share stays a number, with the mean over the crown that the closed form gives.
func TestSunlitShareOnTheHorizon(t *testing.T) {
	p := plant(1, 0.5, twoSets)
	c := newCrown(p, []float64{0, 0.5, 1, math.Pi / 2})
	out := make([]float64, len(c.depth))
	for _, β := range []float64{1e-12, 1e-6, 1e-4, 0.01, 0.3} {
		c.sunlit(β, out)
		mean := 0.0
		for j, w := range c.weight {
			mean += w * out[j]
		}
		K := canopy.LeafProjection(1, math.Sin(β), math.Cos(β)) / math.Max(math.Sin(β), 1e-9)
		if want := meanDecay(K * c.lai); !(math.Abs(mean/want-1) < 1e-9) {
			t.Errorf("elevation %g: mean sunlit share %g, want %g", β, mean, want)
		}
	}
}
