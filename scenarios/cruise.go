package scenarios

import (
	"math"

	"gonum.org/v1/gonum/stat"
	"gonum.org/v1/gonum/stat/distuv"

	"shadeledger/canopy/inventory"
	"shadeledger/leaf"
)

// Cruise is what was counted in the field, beside the trees made of it.
type Cruise struct {
	Table  string // the stand table, as the plan names it; "" for none
	Totals []inventory.Total
	Notes  []inventory.Note
	Plots  []float64 // basal area of each plot of the table, m2/ha; none where it has no plots
	Factor float64   // of the angle count, m2/ha for each tree counted
	Counts []float64 // trees counted at each point; none without an angle count
}

// Points is the basal area at each point or plot, m2/ha: of the angle count, else of the table's plots.
func (c Cruise) Points() []float64 {
	if len(c.Counts) == 0 {
		return c.Plots
	}
	out := make([]float64, len(c.Counts))
	for i, n := range c.Counts {
		out[i] = c.Factor * n
	}
	return out
}

// Estimate is a mean of points with its doubt; N is 0 where nothing was counted by point.
type Estimate struct {
	Mean, SE, CI float64 // CI is half the 95 % interval by Student's t
	N            int
}

// BasalArea is the mean of the points, m2/ha. One point gives no doubt: NaN.
func (c Cruise) BasalArea() Estimate {
	x := c.Points()
	e := Estimate{N: len(x)}
	if e.N == 0 {
		return e
	}
	e.Mean = stat.Mean(x, nil)
	e.SE, e.CI = math.NaN(), math.NaN()
	if e.N > 1 {
		e.SE = stat.StdErr(stat.StdDev(x, nil), float64(e.N))
		e.CI = e.SE * distuv.StudentsT{Mu: 0, Sigma: 1, Nu: float64(e.N - 1)}.Quantile(0.975)
	}
	return e
}

// Foliage turns trees into canopy layers.
type Foliage struct {
	Calendars  map[string]leaf.Calendar // by botanical name
	LeafFactor float64                  // on leaf area: what readings tell, or the plan
	LeafStated bool                     // the plan states the leaf area that LeafFactor brings
	WoodFactor float64                  // on wood area
	// What the plan states for all layers; NaN where species and crowns tell.
	Chi, Clumping, Absorptance float64
}

// Layers of the trees, by species.
func (f Foliage) Layers(trees inventory.Stand) []Layer {
	var out []Layer
	for _, l := range trees.Layers() {
		l.LAI *= f.LeafFactor
		l.WAI *= f.WoodFactor
		if f.Clumping > 0 { // wood stands at random whatever the clumping of leaves is said to be
			l.WAI *= l.Clumping / f.Clumping
		}
		for _, set := range []struct{ to, v *float64 }{{&l.Chi, &f.Chi}, {&l.Clumping, &f.Clumping}, {&l.Absorptance, &f.Absorptance}} {
			if !math.IsNaN(*set.v) {
				*set.to = *set.v
			}
		}
		out = append(out, Layer{Layer: l.Layer, Species: l.Species.Botanical, Calendar: f.Calendars[l.Species.Botanical]})
	}
	return out
}
