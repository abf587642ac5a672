package inventory

import (
	"fmt"
	"math"
	"math/rand/v2"
	"testing"

	"shadeledger/leaf/traits"
)

// tallied is a class of which species, diameter and number are known.
func tallied(s *traits.Species, dbh, perHa float64) Class {
	return Class{Species: s, DBH: dbh, PerHa: perHa, Height: math.NaN(), CrownBase: math.NaN()}
}

// anyStand is a stand of random classes of the library's species.
func anyStand(t *testing.T, g *rand.Rand) Stand {
	t.Helper()
	all := traits.All()
	var classes []Class
	for range 1 + g.IntN(30) {
		classes = append(classes, tallied(all[g.IntN(len(all))], 0.03+0.9*g.Float64()*g.Float64(), 200*g.Float64()))
	}
	s, err := NewStand(classes, Setting{8 + 35*g.Float64(), 4 * g.Float64()})
	if err != nil {
		t.Fatal(err)
	}
	return s
}

// Trees kept and trees cut are the trees there were, class by class; nothing is negative; the basal area asked for stays; kept
// trees keep their leaves.
func TestThinningConserves(t *testing.T) {
	for k := range 300 {
		g := rand.New(rand.NewPCG(uint64(k), 1))
		s := anyStand(t, g)
		total := s.Sums().BasalArea
		th := Thinning{Order: Order(g.IntN(3)), Leave: total * g.Float64()}
		if g.IntN(3) == 0 {
			th.Spare = []*traits.Species{s.Trees[0].Species}
		}
		left, cut, err := s.Thin(th)
		if err != nil {
			t.Fatal(err)
		}
		type key struct {
			s *traits.Species
			d float64
		}
		sum := map[key]float64{}
		for _, x := range s.Trees {
			sum[key{x.Species, x.DBH}] += x.PerHa
		}
		for _, x := range left.Trees {
			sum[key{x.Species, x.DBH}] -= x.PerHa
			if !(x.PerHa > 0 && x.LeafArea >= 0) {
				t.Fatalf("%d: %g trees with %g m2 of leaves", k, x.PerHa, x.LeafArea)
			}
		}
		for _, x := range cut {
			sum[key{x.Species, x.DBH}] -= x.PerHa
			if len(th.Spare) > 0 && x.Species == th.Spare[0] {
				t.Fatalf("%d: %s is spared and cut", k, x.Species.Botanical)
			}
		}
		for c, v := range sum {
			if math.Abs(v) > 1e-9 {
				t.Fatalf("%d: %g trees/ha of %s lost or made", k, v, c.s.Botanical)
			}
		}
		if got := left.Sums().BasalArea; len(th.Spare) == 0 && math.Abs(got-th.Leave) > 1e-9 {
			t.Fatalf("%d: %g m2/ha left, %g asked", k, got, th.Leave)
		}
		if a, b := s.Sums().LAI, left.Sums().LAI+leaves(cut); math.Abs(a-b) > 1e-9 {
			t.Fatalf("%d: leaf area %g, kept and cut %g", k, a, b)
		}
	}
}

func leaves(cut []Removal) (lai float64) {
	for _, x := range cut {
		lai += x.LeafArea * x.PerHa / hectare
	}
	return lai
}

// More taken never darkens the floor, from any direction, in any order.
func TestMoreRemovedNeverDarkens(t *testing.T) {
	for k := range 60 {
		g := rand.New(rand.NewPCG(uint64(k), 2))
		s := anyStand(t, g)
		order := Order(g.IntN(3))
		last := map[float64]float64{}
		for _, share := range []float64{1, 0.9, 0.7, 0.5, 0.3, 0.1, 0.01} {
			left, _, err := s.Thin(Thinning{Order: order, Leave: share * s.Sums().BasalArea})
			if err != nil {
				t.Fatal(err)
			}
			l := left.Layers()
			for _, z := range []float64{0, 0.5, 1, 1.4} {
				if v := through(l, z); v < last[z]*(1-1e-12) {
					t.Fatalf("%d, order %d: %g of the basal area passes %g at zenith angle %g, more of it %g", k, order, share, v, z, last[z])
				} else {
					last[z] = v
				}
			}
		}
	}
}

// Layers hold just the leaves and wood of the trees, between ground and top, and thinned in steps as at once.
func TestLayersHoldTheTrees(t *testing.T) {
	for k := range 100 {
		s := anyStand(t, rand.New(rand.NewPCG(uint64(k), 3)))
		lai, wai := 0.0, 0.0
		for _, l := range s.Layers() {
			if !(l.Bottom >= 0 && l.Top > l.Bottom && l.Top <= s.Height*(1+1e-9) && l.LAI >= 0 && l.WAI >= 0) {
				t.Fatalf("%d: %+v", k, l.Layer)
			}
			if l.LAI > 0 && l.Top-l.Bottom < thickness*(1-1e-9) && l.Top-l.Bottom < s.Height {
				if top := l.Top; top-l.Bottom < thickness/2 && s.Height > 4 {
					t.Fatalf("%d: a layer of %g m", k, l.Top-l.Bottom)
				}
			}
			lai, wai = lai+l.LAI, wai+l.WAI*l.Clumping // wood is at random
		}
		u := s.Sums()
		if math.Abs(lai-u.LAI) > 1e-9 || math.Abs(wai-u.WAI) > 1e-9 {
			t.Fatalf("%d: layers hold %g and %g, trees %g and %g", k, lai, wai, u.LAI, u.WAI)
		}
		half := 0.5 * u.BasalArea
		once, _, err := s.Thin(Thinning{Order: LargestFirst, Leave: half})
		if err != nil {
			t.Fatal(err)
		}
		first, _, err := s.Thin(Thinning{Order: LargestFirst, Leave: 0.8 * u.BasalArea})
		if err != nil {
			t.Fatal(err)
		}
		twice, _, err := first.Thin(Thinning{Order: LargestFirst, Leave: half})
		if err != nil {
			t.Fatal(err)
		}
		if a, b := once.Sums().LAI, twice.Sums().LAI; math.Abs(a-b) > 1e-9 {
			t.Fatalf("%d: leaf area %g in one step, %g in two", k, a, b)
		}
	}
}

// Clumping falls as crowns are taken: 27 to 5 m2/ha of hardwoods.
func TestThinnedStandsAreClumpier(t *testing.T) {
	s, err := NewStand([]Class{FromBasalArea(species(t, "Quercus alba"), 19, 25), FromBasalArea(species(t, "Acer rubrum"), 8.1, 25)}, Setting{25, 11})
	if err != nil {
		t.Fatal(err)
	}
	last := 1.1
	for _, ba := range []float64{27.1, 18.5, 10, 5.2, 1} {
		left, _, err := s.Thin(Thinning{Order: AllSizes, Leave: ba})
		if err != nil {
			t.Fatal(err)
		}
		c := left.Clumping()
		t.Logf("%.1f m2/ha: cover %.2f, clumping %.3f", ba, left.Sums().Cover(), c)
		if c >= last {
			t.Errorf("clumping %g at %g m2/ha, %g before", c, ba, last)
		}
		last = c
	}
}

// Kept trees: so many from the thickest, or a share, of a species and a class.
func TestKeep(t *testing.T) {
	oak, beech := species(t, "Quercus robur"), species(t, "Fagus sylvatica")
	s, err := NewStand([]Class{tallied(oak, 0.5, 30), tallied(oak, 0.3, 100), tallied(beech, 0.6, 40)}, Setting{28, 12})
	if err != nil {
		t.Fatal(err)
	}
	all := math.Inf(1)
	for _, c := range []struct {
		kept Kept
		want string
	}{
		{Kept{PerHa: 50, Thickest: all}, "40 beech 60, 10 oak 50"},
		{Kept{PerHa: 50, Species: []*traits.Species{oak}, Thickest: all}, "30 oak 50, 20 oak 30"},
		{Kept{PerHa: 50, Thinnest: 0.25, Thickest: 0.4}, "50 oak 30"},
		{Kept{Share: 0.1, Thickest: all}, "4 beech 60, 3 oak 50, 10 oak 30"},
		{Kept{PerHa: 0, Share: 0, Thickest: all}, ""},
	} {
		got := ""
		for _, x := range byDBH(s.Keep(c.kept).Trees, descending) {
			if got != "" {
				got += ", "
			}
			name := map[*traits.Species]string{oak: "oak", beech: "beech"}[x.Species]
			got += fmt.Sprintf("%.0f %s %.0f", x.PerHa, name, 100*x.DBH)
		}
		if got != c.want {
			t.Errorf("%+v keeps %q, %q wanted", c.kept, got, c.want)
		}
	}
}

// What an ellipsoid takes of the light in its shadow against chords at random places of the shadow.
func TestCrownTakesLightByItsChords(t *testing.T) {
	for _, x := range []float64{1e-5, 0.1, 1, 4, 12} {
		const n = 20000
		passed := 0.0
		for i := range n { // chord of a unit sphere at distance r: 2 sqrt(1-r^2), mean 4/3; r^2 even over the disc
			passed += math.Exp(-x*1.5*math.Sqrt(1-(float64(i)+0.5)/n)) / n
		}
		if got := caught(x); math.Abs(got-(1-passed)) > 1e-5*got {
			t.Errorf("depth %g: takes %g, chords %g", x, got, 1-passed)
		}
	}
}

// Crowns at random pass exp(-n A caught) on the mean: shadows of unit area thrown at random, seeded, against it.
func TestCrownsAtRandomPassAsTheFormulaSays(t *testing.T) {
	g := rand.New(rand.NewPCG(3, 5))
	const side, rays = 60.0, 40000
	radius := 1 / math.Sqrt(math.Pi)
	for _, c := range []struct{ density, depth float64 }{{0.7, 0.8}, {1.8, 2.5}} {
		crowns := make([][2]float64, int(c.density*side*side))
		for i := range crowns {
			crowns[i] = [2]float64{side * g.Float64(), side * g.Float64()}
		}
		cells := map[[2]int][]int{} // crowns by square of one metre
		for i, q := range crowns {
			cells[[2]int{int(q[0]), int(q[1])}] = append(cells[[2]int{int(q[0]), int(q[1])}], i)
		}
		passed := 0.0
		for range rays {
			x, y := 1+(side-2)*g.Float64(), 1+(side-2)*g.Float64()
			depth := 0.0
			for dx := -1; dx <= 1; dx++ {
				for dy := -1; dy <= 1; dy++ {
					for _, i := range cells[[2]int{int(x) + dx, int(y) + dy}] {
						if r := math.Hypot(x-crowns[i][0], y-crowns[i][1]) / radius; r < 1 {
							depth += 1.5 * c.depth * math.Sqrt(1-r*r)
						}
					}
				}
			}
			passed += math.Exp(-depth) / rays
		}
		want := math.Exp(-c.density * caught(c.depth))
		t.Logf("%g crowns over each spot, depth %g: %.3f, formula %.3f", c.density, c.depth, passed, want)
		if math.Abs(passed-want) > 0.01 {
			t.Errorf("%g crowns over each spot, depth %g: %g passes, the formula says %g", c.density, c.depth, passed, want)
		}
	}
}
