package ledger

import (
	"math"
	"testing"
)

// A plant that has not grown is itself; grown, its parts keep their sums and its height its place.
func TestGrownKeepsTheBooks(t *testing.T) {
	for _, p := range cases() {
		same := p.Grown(1)
		if same.Height != p.Height || same.LeafMass != p.LeafMass || same.LeafArea != p.LeafArea || same.CrownLAI != p.CrownLAI || same.Turnover != p.Turnover {
			t.Errorf("grown by nothing: %+v, %+v before", same, p)
		}
		for i, o := range same.Organs {
			if o != p.Organs[i] {
				t.Errorf("organ %+v, %+v before", o, p.Organs[i])
			}
		}
		for _, wood := range []float64{1, 1.7, 20, 900} {
			g := p.Grown(wood)
			sum := g.LeafMass
			for i, o := range g.Organs {
				sum += o.Mass
				if wood > 1 && (o.Rate >= p.Organs[i].Rate || o.Rate*o.Mass <= p.Organs[i].Rate*p.Organs[i].Mass) {
					t.Errorf("%g times the wood: an organ breathes %g g-1 and %g in all, %g and %g before", wood, o.Rate, o.Rate*o.Mass, p.Organs[i].Rate, p.Organs[i].Rate*p.Organs[i].Mass)
				}
			}
			if math.Abs(sum/p.MassAt(wood)-1) > 1e-12 {
				t.Errorf("%g times the wood: parts of %g g make %g", wood, sum, p.MassAt(wood))
			}
			if back := p.WoodAt(g.Height); math.Abs(back/wood-1) > 1e-9 {
				t.Errorf("%g times the wood stands %g m, which is %g", wood, g.Height, back)
			}
		}
	}
}

// New mass times its cost is the net, to the last milligram; nothing grows from nothing, nothing shrinks, and the top is kept.
func TestGrowthSpendsTheNet(t *testing.T) {
	p := plant(2.5, 0.5, twoSets)
	const most = 1e4
	for _, wood := range []float64{1, 3, 50} {
		last := wood
		for _, net := range []float64{1e-6, 0.1, 2, 40, 900} {
			next := p.Grow(wood, net, most)
			if spent := (p.MassAt(next) - p.MassAt(wood)) * p.Turnover.ConstructionCost; math.Abs(spent-net) > 1e-9*p.MassAt(next) {
				t.Errorf("a net of %g g C makes mass for %g", net, spent)
			}
			if next <= last || p.HeightAt(next) <= p.HeightAt(last) {
				t.Errorf("net %g: %g times the wood after %g", net, next, last)
			}
			last = next
		}
		for _, net := range []float64{0, -1, -1e6} {
			if next := p.Grow(wood, net, most); next != wood {
				t.Errorf("net %g changes %g to %g", net, wood, next)
			}
		}
		if next := p.Grow(wood, 1e9, most); next != most {
			t.Errorf("grown beyond the top, to %g", next)
		}
	}
}

// Saplings of six conifers by height class (medians of Claveau, Messier & Comeau 2005, 291 plants, harvests in Falster et al. 2015): a plant that starts as the median of
// the first class has the leaves and the height of the later ones to a quarter; so have broadleaf saplings
// their crowns (medians of classes of 13 to 42 plants of Petritan et al. 2009) from the line fitted to them.
func TestAllometryAgainstHarvests(t *testing.T) {
	p := plant(1, 0.6, twoSets)
	p.Height, p.LeafMass = 0.38, 7.0
	p.Organs = []Organ{{Line: Stem, Mass: 8.7, Rate: 1, TRef: 20, Q10: 2}}
	for _, c := range []struct{ height, wood, leaf float64 }{{0.55, 24.3, 14.9}, {0.87, 78.9, 45.4}, {1.24, 171.6, 70}, {1.84, 484.3, 167.1}, {2.81, 1244.8, 378.6}, {4.42, 2239.6, 559}} {
		g := p.Grown(c.wood / 8.7)
		t.Logf("wood %.0f g: height %.2f m (%.2f), leaves %.0f g (%.0f)", c.wood, g.Height, c.height, g.LeafMass, c.leaf)
		if math.Abs(g.Height/c.height-1) > 0.25 || math.Abs(g.LeafMass/c.leaf-1) > 0.25 {
			t.Errorf("wood %.0f g: height %.2f m for %.2f, leaves %.0f g for %.0f", c.wood, g.Height, c.height, g.LeafMass, c.leaf)
		}
	}
	onLine := math.Exp(-0.220) * math.Pow(0.051, crownOnLeaf)
	p.LeafArea, p.CrownLAI = 0.051, 0.051/onLine
	for _, c := range []struct{ leaf, crown float64 }{{0.193, 0.199}, {0.538, 0.420}, {1.550, 1.484}, {3.841, 2.122}} {
		g := p.Grown(math.Pow(c.leaf/0.051, 1/leafOnWood))
		got := g.LeafArea / g.CrownLAI
		t.Logf("leaves %.2f m2: crown %.2f m2 (%.2f)", g.LeafArea, got, c.crown)
		if math.Abs(got/c.crown-1) > 0.25 {
			t.Errorf("leaves of %.2f m2 under a crown of %.2f m2 for %.2f", g.LeafArea, got, c.crown)
		}
	}
}
