package weather

import (
	"math"
	"math/rand/v2"
	"testing"
	"time"
)

// known is a process with given correlations of a day and with the day before.
func known() (m0, m1 matrix) {
	m0 = matrix{{1, 0.65, 0.20, -0.1}, {0.65, 1, -0.25, 0.3}, {0.20, -0.25, 1, -0.6}, {-0.1, 0.3, -0.6, 1}}
	m1 = matrix{{0.62, 0.48, 0.05, 0}, {0.55, 0.65, -0.10, 0.15}, {0.04, -0.08, 0.25, -0.1}, {0, 0.12, -0.2, 0.4}}
	return m0, m1
}

// A and B give M0 and M1 back, by algebra and in a long draw.
func TestMatalasKeepsCorrelations(t *testing.T) {
	m0, m1 := known()
	for size := 1; size <= variables; size++ {
		p := newMatalas(size, m0, m1)
		got0, got1 := correlationsOf(size, p.a, p.b)
		from := rand.New(rand.NewPCG(1, uint64(size)))
		const n = 200000
		series := make([]vector, n)
		for i, x := 0, p.start(from); i < n; i, x = i+1, p.next(from, x) {
			series[i] = x
		}
		for i := range size {
			for j := range size {
				if math.Abs(got0[i][j]-m0[i][j]) > 1e-9 || math.Abs(got1[i][j]-m1[i][j]) > 1e-9 {
					t.Errorf("size %d, %d with %d: correlations %.6f and %.6f, want %.6f and %.6f", size, i, j, got0[i][j], got1[i][j], m0[i][j], m1[i][j])
				}
				today := correlation(n, func(k int) float64 { return series[k][i] }, func(k int) float64 { return series[k][j] })
				before := correlation(n-1, func(k int) float64 { return series[k+1][i] }, func(k int) float64 { return series[k][j] })
				if math.Abs(today-m0[i][j]) > 0.012 || math.Abs(before-m1[i][j]) > 0.012 {
					t.Errorf("size %d, %d with %d: drawn correlations %.4f and %.4f, want %.4f and %.4f", size, i, j, today, before, m0[i][j], m1[i][j])
				}
			}
		}
	}
}

// The variance of means is that of drawn means.
func TestVarianceOfMeans(t *testing.T) {
	p := newMatalas(3, first(known()), second(known()))
	from := rand.New(rand.NewPCG(2, 2))
	const runs, n = 20000, 60
	for v := range 3 {
		sum := 0.0
		for range runs {
			mean := 0.0
			for i, x := 0, p.start(from); i < n; i, x = i+1, p.next(from, x) {
				mean += x[v] / n
			}
			sum += mean * mean / runs
		}
		if want := p.meanVariance(v, n); math.Abs(sum/want-1) > 0.05 {
			t.Errorf("variable %d: variance of the mean of %d days %.4f, worked out %.4f", v, n, sum, want)
		}
	}
}

func first(m, _ matrix) matrix  { return m }
func second(_, m matrix) matrix { return m }

// Correlations that no process can have are brought back to ones that it can.
func TestMatalasOfImpossibleCorrelations(t *testing.T) {
	p := newMatalas(2, matrix{{1, 0.9}, {0.9, 1}}, matrix{{0.95, 0.2}, {0.2, 0.95}})
	for i := range 2 {
		for j := range 2 {
			if math.IsNaN(p.b[i][j]) || math.IsNaN(p.a[i][j]) {
				t.Fatalf("A %v, B %v", p.a, p.b)
			}
		}
	}
}

// The default matrices follow from the correlations that Richardson (1982) gives: highest with lowest temperature 0.633, with
// radiation 0.186, lowest with radiation -0.193; the day before 0.621, 0.674 and 0.251 with themselves (from memory).
func TestDefaultMatrices(t *testing.T) {
	m0, m1 := correlationsOf(3, matrixA, matrixB)
	for _, c := range []struct{ got, want float64 }{
		{m0[0][1], 0.633}, {m0[0][2], 0.186}, {m0[1][2], -0.193}, {m1[0][0], 0.621}, {m1[1][1], 0.674}, {m1[2][2], 0.251},
	} {
		t.Logf("correlation %.3f, published %.3f", c.got, c.want)
		if math.Abs(c.got-c.want) > 0.015 {
			t.Errorf("correlation %.3f, published %.3f", c.got, c.want)
		}
	}
}

// A record drawn from a known generator gives its parameters back.
func TestFitRecoversAKnownProcess(t *testing.T) {
	truth := fitted(t, harvardDays(t))
	rows := generated(truth, 120)
	g := fitted(t, rows)
	worstChance, worstShare, worstMean, worstSpread, worstClear := 0.0, 0.0, 0.0, 0.0, 0.0
	worse := func(worst *float64, off float64) { *worst = math.Max(*worst, math.Abs(off)) }
	want, got := truth.LongMean(), g.LongMean()
	for m := range want {
		worse(&worstShare, got[m].WetDays-want[m].WetDays)
		worse(&worstClear, got[m].Global/want[m].Global-1)
		worse(&worstMean, got[m].Temperature-want[m].Temperature)
	}
	for i := range truth.days {
		a, b := &truth.days[i], &g.days[i]
		for s := range states {
			worse(&worstChance, b.wetAfter[s]-a.wetAfter[s])
		}
		for v := range a.temperature {
			for k := range kinds {
				worse(&worstSpread, b.temperature[v][k].sd/a.temperature[v][k].sd-1)
			}
		}
	}
	t.Logf("from 120 years: chance of rain off by %.3f, share of wet days by %.3f, radiation by %.1f %%, temperature by %.2f K, its spread by %.0f %% at most", worstChance, worstShare, 100*worstClear, worstMean, 100*worstSpread)
	if worstChance > 0.05 || worstShare > 0.03 || worstClear > 0.03 || worstMean > 0.6 || worstSpread > 0.15 {
		t.Error("the parameters do not come back")
	}
	for i := range variables {
		for j := range variables {
			if math.Abs(g.process.a[i][j]-truth.process.a[i][j]) > 0.04 || math.Abs(g.process.b[i][j]-truth.process.b[i][j]) > 0.04 {
				t.Errorf("A[%d][%d] %.3f, was %.3f; B %.3f, was %.3f", i, j, g.process.a[i][j], truth.process.a[i][j], g.process.b[i][j], truth.process.b[i][j])
			}
		}
	}
	for h := range g.slow {
		t.Logf("slow shifts, half %d: %.3f, were %.3f", h, g.slow[h], truth.slow[h])
		for k := range g.slow[h] {
			if math.Abs(g.slow[h][k]-truth.slow[h][k]) > 0.08 {
				t.Errorf("half %d: slow shift %d is %.3f, was %.3f", h, k, g.slow[h][k], truth.slow[h][k])
			}
		}
	}
	t.Logf("amounts %+v, were %+v", g.amount, truth.amount)
	if math.Abs(g.amount.variance()/truth.amount.variance()-1) > 0.15 {
		t.Errorf("amounts %+v, were %+v", g.amount, truth.amount)
	}
}

// Quantile tables give values at shares and shares at values, and keep the months' means.
func TestScoreTables(t *testing.T) {
	g := fitted(t, harvardDays(t))
	for i := range g.days {
		for k := range kinds {
			for _, share := range []float64{0.03, 0.2, 0.5, 0.77, 0.98} {
				v := g.clear.at(k, g.days[i].place, share)
				if back := g.clear.share(k, g.days[i].place, v); math.Abs(back-share) > 0.5/scoreNodes {
					t.Fatalf("day %d, kind %d: share %.3f gives %.4f gives share %.3f", i, k, share, v, back)
				}
			}
		}
	}
	for _, z := range []float64{-2.2, -0.5, 0, 1, 2.3} {
		if back := score01(share01(z), 1e6); math.Abs(back-z) > 1e-9 {
			t.Errorf("score %g comes back as %g", z, back)
		}
	}
	line := lineThrough(monthLine{1, 5, 2, 8, 3, 1, 0, 4, 4, 9, -3, 2})
	var sum, n [12]float64
	for d := time.Date(2025, 1, 1, 0, 0, 0, 0, time.UTC); d.Year() == 2025; d = d.AddDate(0, 0, 1) {
		m := d.Month() - 1
		sum[m] += line.at(seasonOf(date{2025, d.Day(), d.Month(), 1}))
		n[m]++
	}
	for m, want := range [12]float64{1, 5, 2, 8, 3, 1, 0, 4, 4, 9, -3, 2} {
		if math.Abs(sum[m]/n[m]-want) > 0.02 {
			t.Errorf("month %d: mean %.3f, want %.3f", m+1, sum[m]/n[m], want)
		}
	}
}

// The parts of a split distribution make the whole again, with the share and the ratio asked for.
func TestSplitClearness(t *testing.T) {
	for _, c := range []struct{ mean, share, ratio float64 }{{0.45, 0.4, 0.6}, {0.3, 0.7, 0.5}, {0.6, 0.05, 0.66}, {0.5, 0.95, 0.8}} {
		dryDays, wetDays := splitClearness(c.mean, c.share, c.ratio)
		whole := (1-c.share)*dryDays.mean() + c.share*wetDays.mean()
		if math.Abs(whole/c.mean-1) > 0.005 || math.Abs(wetDays.mean()/dryDays.mean()-c.ratio) > 0.01 {
			t.Errorf("%+v: mean %.4f, ratio %.3f", c, whole, wetDays.mean()/dryDays.mean())
		}
		at := clearnessDistribution(c.mean)
		for _, share := range []float64{0.1, 0.5, 0.9} { // the share of all days below a value
			below := (1-c.share)*shareBelow(&dryDays, at(share)) + c.share*shareBelow(&wetDays, at(share))
			if math.Abs(below-share) > 0.01 {
				t.Errorf("%+v: %.3f of the days below the quantile of %.1f", c, below, share)
			}
		}
	}
	for _, share := range []float64{0, 1} {
		if dryDays, wetDays := splitClearness(0.45, share, 0.6); dryDays != wetDays || math.Abs(dryDays.mean()-0.45) > 0.002 {
			t.Errorf("share %g: means %.4f and %.4f, want 0.45", share, dryDays.mean(), wetDays.mean())
		}
	}
}

func shareBelow(q *quantiles, value float64) float64 {
	t := scoreTable{}
	t[0][0] = *q
	return t.share(0, season{}, value)
}
