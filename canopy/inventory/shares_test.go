package inventory

import (
	"cmp"
	"math"
	"slices"
	"testing"

	"shadeledger/leaf/traits"
)

// Shares of leaf area taken by thinning from above, in the crown and from below at the same relative density (DeRose & Seymour 2012, Int. J. For.
// Res. 2012:181057: 54, 46 and 35 %, mean of cuts of 33 and 50 % of relative density), within 8 points. The stand is invented: red spruce with a
// third of balsam fir, 8 to 36 cm, as such stands are; relative density goes by the sum of dbh^1.605 (Reineke 1933). Crown thinning spares
// the thickest tenth of the density, the crop trees, and takes the next.
func TestLeafAreaTakenByKindOfThinning(t *testing.T) {
	spruce, fir := species(t, "Picea rubens"), species(t, "Abies balsamea")
	var classes []Class
	for i, d := range []float64{8, 12, 16, 20, 24, 28, 32, 36} {
		n := []float64{420, 380, 320, 240, 160, 90, 40, 12}[i]
		classes = append(classes, tallied(spruce, d/100, 0.67*n), tallied(fir, d/100, 0.33*n))
	}
	s, err := NewStand(classes, Setting{18, 9})
	if err != nil {
		t.Fatal(err)
	}
	density := func(x Tree) float64 { return x.PerHa * math.Pow(x.DBH, 1.605) }
	total := 0.0
	for _, x := range s.Trees {
		total += density(x)
	}
	taken := func(order []Tree, spared, share float64) float64 {
		lai, skip, room := 0.0, spared*total, share*total
		for _, x := range order {
			d := density(x)
			pass := math.Min(skip, d)
			skip -= pass
			take := math.Min(room, d-pass)
			room -= take
			lai += x.LeafArea * x.PerHa / hectare * take / d
		}
		return 100 * lai / s.Sums().LAI
	}
	up := slices.Clone(s.Trees)
	slices.SortStableFunc(up, func(a, b Tree) int { return cmp.Compare(a.DBH, b.DBH) })
	down := slices.Clone(up)
	slices.Reverse(down)
	for _, c := range []struct {
		name   string
		order  []Tree
		spared float64
		want   float64
	}{{"from above", down, 0, 54}, {"crown", down, 0.1, 46}, {"from below", up, 0, 35}} {
		got := (taken(c.order, c.spared, 0.33) + taken(c.order, c.spared, 0.50)) / 2
		t.Logf("%s: %.1f %% of the leaf area, %g measured", c.name, got, c.want)
		if math.Abs(got-c.want) > 8 {
			t.Errorf("%s: %.1f %% of the leaf area taken, %g measured", c.name, got, c.want)
		}
	}
}

// Crown width from dbh by species group against single trees: root mean square error at most 30 %, bias at most 10 % of what was measured.
func TestCrownWidths(t *testing.T) {
	groups := map[string]*traits.Species{"broadleaf": species(t, "Fagus sylvatica"), "needle": species(t, "Picea abies")}
	sum := map[string][3]float64{}
	for _, r := range table(t, "crown-dimensions-trees/trees.csv") {
		dbh, width, group := float(t, r["dbh_m"]), float(t, r["crown_width_m"]), r["group"]
		e := 2*CrownRadius(groups[group], dbh)/width - 1
		x := sum[group]
		sum[group] = [3]float64{x[0] + 1, x[1] + e, x[2] + e*e}
	}
	for name, x := range sum {
		bias, rmse := x[1]/x[0], math.Sqrt(x[2]/x[0])
		t.Logf("%s, %.0f trees: bias %+.1f %%, RMSE %.1f %%", name, x[0], 100*bias, 100*rmse)
		if math.Abs(bias) > 0.10 || rmse > 0.30 {
			t.Errorf("%s: bias %.3f, RMSE %.3f", name, bias, rmse)
		}
	}
	if len(sum) != 2 {
		t.Errorf("groups %v", sum)
	}
}
