package fit

import (
	"math"
	"testing"

	"shadeledger/leaf"
)

// No start of a fine grid leads lower than the starts that are taken: every third measured leaf, without and with export. The coarse grid alone left
// 20 of these 76 fits higher.
func TestNoOtherStartIsBetter(t *testing.T) {
	curves := gasCurves(t, "panama.csv")
	leaves, _ := aciTable(t, "panama-published.csv")
	worst, tried := 1.0, 0
	for k, l := range leaves {
		if k%3 != 0 {
			continue
		}
		c := gas{}
		for _, g := range curves[l] {
			c.list = append(c.list, limit(g, leaf.Bernacchi{}))
		}
		for _, c.export = range []bool{false, true} {
			found, err := capacities(c)
			if err != nil {
				t.Fatal(l, err)
			}
			rss := found.RMSE * found.RMSE * float64(found.Points)
			best := math.Inf(1)
			for _, v := range []float64{10, 20, 35, 60, 110} {
				for _, ratio := range []float64{1.3, 1.5, 1.7, 2, 2.5} {
					for _, export := range []float64{2, 4, 8} {
						q := [4]float64{v, ratio * v, 0.015 * v, export}
						best = math.Min(best, descend(c, &q))
					}
				}
			}
			tried++
			worst = math.Max(worst, rss/best)
			if rss > 1.01*best {
				t.Errorf("%s, export %t: squares %g, %g from another start", l, c.export, rss, best)
			}
		}
	}
	t.Logf("%d fits, squares at most %.5f of the best of 75 other starts", tried, worst)
}
