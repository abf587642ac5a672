package inventory

import (
	"cmp"
	"math"
	"slices"

	"shadeledger/canopy"
	"shadeledger/leaf/traits"
)

type order int

const (
	ascending order = iota
	descending
)

// byDBH sorts a copy of the trees by diameter, ties in the order of the table.
func byDBH(trees []Tree, o order) []Tree {
	out := slices.Clone(trees)
	slices.SortStableFunc(out, func(a, b Tree) int {
		if o == descending {
			a, b = b, a
		}
		return cmp.Compare(a.DBH, b.DBH)
	})
	return out
}

func sortByBasalArea(list []SpeciesSums) {
	slices.SortStableFunc(list, func(a, b SpeciesSums) int { return cmp.Compare(b.BasalArea, a.BasalArea) })
}

// BorderCrown is the mean crown radius, m, of the thickest trees, those that stand at an opening's edge.
func BorderCrown(classes []Class) float64 {
	trees := make([]Tree, len(classes))
	for i, c := range classes {
		trees[i].Class = c
	}
	left, sum, n := float64(topTrees), 0.0, 0.0
	for _, t := range byDBH(trees, descending) {
		take := math.Min(left, t.PerHa)
		sum += take * CrownRadius(t.Species, t.DBH)
		n += take
		left -= take
	}
	return sum / n
}

// Chi of overstory leaves. Broadleaves: 2.1, the ellipsoid whose mean inclination, 9.65 (3 + chi)^-1.65 rad (Campbell 1990,
// Agric. For. Meteorol. 49:173-176), is the 38 degrees found on 54 temperate and boreal species (Pisek et al. 2013,
// Agric. For. Meteorol. 169:186-194). Needles: spherical.
func Chi(s *traits.Species) float64 {
	if !s.Needled() {
		return 2.1
	}
	return 1
}

// Within is the clumping of leaves within a crown, on branches and shoots: 0.75. Shoots of spruce and pine show 0.56 to 0.8 of the silhouette of
// their needles laid apart at random (Stenberg 1996, Tree Physiol. 16:99-108, from memory); broadleaf crowns 0.7 to 0.9 (Chen, Menges &
// Leblanc 2005, Remote Sens. Environ. 97:447-457, from memory). Chosen with the crown sum
// of sample stands and the regularities (DEVELOPERS.md).
const Within = 0.75

// Regularity D of the stand of crowns before any thinning: at 0 they stand at random, at 1 side by side (the binomial gap model, Nilson
// 1971, Agric. Meteorol. 8:25-38). Broadleaves: chosen on the Michigan subplots (Atkins et al. 2021) and light against basal area. Conifers,
// mostly planted and even in age: from floors of closed spruce and Douglas-fir stands at 3 to 6 % of full light (common practice).
const (
	broadleafRegularity = 0.48
	coniferRegularity   = 0.87
)

// regular says how much more ground crowns cover than at random: exp(-regular S) of it is open, regular = -ln(1-D)/D. Taking trees at
// random from a regular stand leaves one that is less so: D falls as the share of crowns that stay (a binomial count thinned is binomial). In
// conifer stands thinning keeps an even spacing, and floors stay dark long after it (Johansson 1987; Heithecker & Halpern 2006): D stays.
func regular(s *traits.Species, stay float64) float64 {
	d := coniferRegularity
	if !s.Needled() {
		d = broadleafRegularity * stay
	}
	if d < 1e-9 {
		return 1
	}
	return -math.Log1p(-d) / d
}

// slants are the zenith angles over which gaps are summed, with the cosine weights of an even sky.
const slants = 24

// Clumping is Omega between crowns: what makes an endless layer of the same leaf area pass as much of an even sky as ellipsoidal crowns do.
// Crowns at random pass exp(-sum over trees of number times shadow times what a crown takes of the light in its shadow), exact for a
// Poisson forest; regular stands take more by the regularity. Fewer crowns leave more gaps, so it falls as a broadleaf stand is thinned,
// and never rises. Leaves have their clumping within crowns besides. Wood stands at random.
func (s Stand) Clumping() float64 {
	if len(s.Trees) == 0 {
		return 1
	}
	return math.Min(s.clump(), s.clumping)
}

func (s Stand) clump() float64 {
	var tau, open [slants]float64
	light, stay := 0.0, math.Min(1, s.Sums().CrownSum/s.crowns)
	for i := range tau {
		sin, cos := math.Sincos((float64(i) + 0.5) / slants * math.Pi / 2)
		taken := 0.0
		for _, t := range s.Trees {
			perM2 := t.PerHa / hectare
			half := (t.Height - t.CrownBase) / 2
			shadow := math.Pi * t.Crown * math.Hypot(t.Crown, half*sin/cos)
			leaf := Within * canopy.LeafProjection(Chi(t.Species), cos, sin) * t.LeafArea / cos
			taken += regular(t.Species, stay) * perM2 * shadow * caught(leaf/shadow)
			tau[i] += perM2 * leaf
		}
		open[i] = sin * cos
		light += open[i] * math.Exp(-taken)
	}
	low, high := 0.05, 1.0
	for range 50 {
		mid := (low + high) / 2
		passed := 0.0
		for i := range tau {
			passed += open[i] * math.Exp(-mid*tau[i])
		}
		if passed > light {
			low = mid
		} else {
			high = mid
		}
	}
	return (low + high) / 2
}

// caught is the share of light that an ellipsoid of mean depth x takes, over all its chords: 1 - 2 (1 - exp(-k)(1 + k))/k^2, k = 3 x/2 that of its middle.
func caught(x float64) float64 {
	k := 1.5 * x
	if k < 1e-3 {
		return x
	}
	return 1 - 2*(-math.Expm1(-k)-k*math.Exp(-k))/(k*k)
}

// Layer is a piece of the canopy of one species.
type Layer struct {
	Species *traits.Species
	canopy.Layer
}

// thickness of layers, m.
const thickness = 1

// Absorptance of leaves in PAR (common practice).
const Absorptance = 0.85

// Layers spreads each tree's leaves and branches over its crown as the volume of an ellipsoid and its stem as a cone from the ground up, and
// sums them to layers of 1 m by species, the species of most basal area first, from the top down; wood below all crowns is one layer to a
// species. A layer's clumping works on its wood too, which stands at random: its wood area is given over its clumping.
func (s Stand) Layers() []Layer {
	omega := s.Clumping()
	var out []Layer
	for _, sp := range s.BySpecies() {
		out = append(out, s.layersOf(sp.Species, omega)...)
	}
	return out
}

func (s Stand) layersOf(sp *traits.Species, omega float64) (out []Layer) {
	top, base := 0.0, math.Inf(1)
	for _, t := range s.Trees {
		if t.Species == sp {
			top, base = math.Max(top, t.Height), math.Min(base, t.CrownBase)
		}
	}
	bounds := []float64{0}
	if base > 0 {
		bounds = append(bounds, base)
	}
	n := max(1, math.Floor((top-base)/thickness))
	for i := 1.0; i <= n; i++ {
		bounds = append(bounds, base+(top-base)*i/n)
	}
	for i := len(bounds) - 2; i >= 0; i-- {
		l := Layer{sp, canopy.Layer{Bottom: bounds[i], Top: bounds[i+1], Chi: Chi(sp), Clumping: math.Max(0.05, omega*Within), Absorptance: Absorptance}}
		for _, t := range s.Trees {
			if t.Species != sp {
				continue
			}
			perM2 := t.PerHa / hectare
			crown := crownShare(t, l.Top) - crownShare(t, l.Bottom)
			l.LAI += perM2 * t.LeafArea * crown
			l.WAI += perM2 / l.Clumping * (t.Branch*crown + t.Stem*(coneShare(t, l.Top)-coneShare(t, l.Bottom)))
		}
		if l.LAI+l.WAI > 0 {
			out = append(out, l)
		}
	}
	return out
}

// crownShare is the share of an ellipsoidal crown's volume below a height: u^2 (3 - 2u).
func crownShare(t Tree, z float64) float64 {
	u := math.Max(0, math.Min(1, (z-t.CrownBase)/(t.Height-t.CrownBase)))
	return u * u * (3 - 2*u)
}

// coneShare is the share of a cone's mantle below a height.
func coneShare(t Tree, z float64) float64 {
	u := math.Max(0, math.Min(1, z/t.Height))
	return 1 - (1-u)*(1-u)
}
