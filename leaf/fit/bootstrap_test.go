package fit

import (
	"math"
	"math/rand/v2"
	"sort"
	"testing"

	"gonum.org/v1/gonum/stat"
)

func quantile(x []float64, p float64) float64 {
	s := append([]float64(nil), x...)
	sort.Float64s(s)
	return stat.Quantile(p, stat.Empirical, s, nil)
}

// The standard errors of the linear approximation against a residual bootstrap (Efron 1979) of measured curves: every fifth leaf of the New York set,
// 200 resamples of centred residuals brought to the freedom that the fit leaves. Curves without a plateau, whose Amax no method
// tells, are left out.
func TestIntervalsAgainstBootstrap(t *testing.T) {
	const resamples = 200
	ratios := map[string][]float64{}
	leaves := 0
	names, sets := curves(t, "new-york.csv")
	for k, name := range names {
		pts := sets[name]
		if k%5 != 0 {
			continue
		}
		f, err := Curve(pts, NonRectangular)
		if err != nil || f.Amax.SE > 0.1*f.Amax.Value || f.Theta.Value < 0.05 || f.Theta.Value > 0.98 {
			continue
		}
		leaves++
		rng := rand.New(rand.NewPCG(uint64(k), 9))
		residual := make([]float64, len(pts))
		mean := 0.0
		for i, p := range pts {
			residual[i] = p.Net - f.Net(p.PPFD)
			mean += residual[i] / float64(len(pts))
		}
		inflate := math.Sqrt(float64(len(pts)) / float64(len(pts)-4))
		draws := map[string][]float64{}
		for range resamples {
			again := make([]Point, len(pts))
			for i, p := range pts {
				again[i] = Point{p.PPFD, f.Net(p.PPFD) + inflate*(residual[rng.IntN(len(pts))]-mean)}
			}
			g, err := Curve(again, NonRectangular)
			if err != nil {
				t.Fatal(err)
			}
			for name, e := range map[string]Estimate{"Amax": g.Amax, "Rd": g.Rd, "phi": g.Phi, "theta": g.Theta, "compensation": g.Compensation} {
				draws[name] = append(draws[name], e.Value)
			}
		}
		for name, e := range map[string]Estimate{"Amax": f.Amax, "Rd": f.Rd, "phi": f.Phi, "theta": f.Theta, "compensation": f.Compensation} {
			// half the central 68 %: a few resamples without a plateau would rule a standard deviation
			ratios[name] = append(ratios[name], e.SE/((quantile(draws[name], 0.84)-quantile(draws[name], 0.16))/2))
		}
	}
	for name, r := range ratios {
		t.Logf("%s: standard error over that of the bootstrap %.2f in the median of %d leaves (%.2f to %.2f)", name, median(r), leaves, quantile(r, 0.1), quantile(r, 0.9))
		if m := median(r); m < 0.8 || m > 1.25 {
			t.Errorf("%s: the linear standard error is %.2f times the bootstrap's", name, m)
		}
	}
	if leaves < 10 {
		t.Errorf("%d leaves", leaves)
	}
}
