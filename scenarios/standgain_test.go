package scenarios_test

import (
	"math"
	"testing"

	"shadeledger/scenarios"
	"shadeledger/scenarios/plan"
)

// example is a built-in plan of trees.
func example(t *testing.T, name string, set ...string) *scenarios.Plan {
	t.Helper()
	p, faults := plan.ReadExample(name, plan.Options{Set: set})
	if p == nil {
		t.Fatal(faults)
	}
	return p
}

// Yearly gross assimilation of closed stands lies where eddy covariance finds it: humid temperate deciduous 1375 and evergreen 1762 g C m-2, boreal
// humid deciduous about 1200 (Luyssaert et al. 2007, Glob. Change Biol. 13:2509-2537, from memory), within 30 %. Thinning lowers it, by less than
// it lowers leaf area, and the layers add to the stand.
func TestStandGainIsOfTheWorld(t *testing.T) {
	for _, c := range []struct {
		name      string
		published float64
	}{{"kettle-bench", 1375}, {"hinterlohe", 1762}, {"kestrel-fork", 1762}, {"moosewillow", 1200}} {
		r := run(t, example(t, c.name), scenarios.Options{Workers: 2, Depth: scenarios.Light, Gain: true})
		uncut, respired := r.Gains[0].Year(r.Series)
		t.Logf("%s: gross %.0f, published %.0f; leaf respiration %.0f", c.name, uncut, c.published, respired)
		if math.Abs(uncut/c.published-1) > 0.30 || respired <= 0 || respired >= uncut/2 {
			t.Errorf("%s: gross %.0f g C m-2 a year, leaf respiration %.0f", c.name, uncut, respired)
		}
		last, lastLAI := uncut, lai(r.Plan.Treatments[0].Matrix)
		for i, treatment := range r.Plan.Treatments {
			if len(treatment.Cut) == 0 {
				continue
			}
			gross, _ := r.Gains[i].Year(r.Series)
			now := lai(treatment.Matrix)
			if now >= lastLAI {
				continue
			}
			if gross >= last || gross/last < now/lastLAI {
				t.Errorf("%s, %s: gross %.0f after %.0f, leaf area %.2f after %.2f", c.name, treatment.Name, gross, last, now, lastLAI)
			}
			last, lastLAI = gross, now
		}
		months := 0.0
		for i := range r.Gains[0].Slabs {
			for _, m := range r.Gains[0].Slabs[i].By(r.Series, scenarios.ByMonth) {
				months += m.Gross
			}
		}
		if math.Abs(months/uncut-1) > 1e-9 {
			t.Errorf("%s: months add to %.3f, the year is %.3f", c.name, months, uncut)
		}
	}
}

func lai(layers []scenarios.Layer) (sum float64) {
	for _, l := range layers {
		sum += l.LAI
	}
	return sum
}

// Any number of workers gives the same bits.
func TestStandGainWorkers(t *testing.T) {
	p := example(t, "moosewillow")
	a := run(t, p, scenarios.Options{Workers: 1, Depth: scenarios.Light, Gain: true})
	b := run(t, p, scenarios.Options{Workers: 3, Depth: scenarios.Light, Gain: true})
	for i := range a.Gains {
		for k := range a.Gains[i].Slabs {
			x, y := &a.Gains[i].Slabs[k], &b.Gains[i].Slabs[k]
			for d := range x.Gross {
				if x.Gross[d] != y.Gross[d] || x.Leaf[d] != y.Leaf[d] {
					t.Fatalf("slab %d, day %d: %g and %g", k, d, x.Gross[d], y.Gross[d])
				}
			}
		}
	}
}

// The readings of the example bring the uncut stand to what was measured; the factor is on every leaf and on no wood.
func TestReadingsCorrectTheLight(t *testing.T) {
	p := example(t, "kettle-bench")
	q, c, err := scenarios.Corrected(p)
	if err != nil {
		t.Fatal(err)
	}
	if math.Abs(c.After-c.Measured) > 1e-6 || math.Abs(c.Measured-0.0508) > 0.0005 {
		t.Errorf("the corrected stand passes %.4f, measured %.4f; the twelve pairs have a mean of 5.1 %%", c.After, c.Measured)
	}
	if !(c.Low < c.Factor && c.Factor < c.High) {
		t.Errorf("%+v", c.Result)
	}
	for i := range p.Treatments {
		for k, l := range p.Treatments[i].Matrix {
			m := q.Treatments[i].Matrix[k]
			if math.Abs(m.LAI-c.Factor*l.LAI) > 1e-12 || m.WAI != l.WAI {
				t.Fatalf("%s, layer %d: leaf area %g of %g, wood %g of %g", p.Treatments[i].Name, k, m.LAI, l.LAI, m.WAI, l.WAI)
			}
		}
	}
	if again, none, err := scenarios.Corrected(q); err != nil || again != q || none.Source != "" {
		t.Errorf("a corrected plan is corrected again: %+v %v", none, err)
	}
}

// What the demo stands are read as, by hand from their tables.
func TestCruisesReadBack(t *testing.T) {
	for _, c := range []struct {
		name                          string
		basalArea, trees, qmd, hd, ci float64 // m2/ha, trees/ha, cm, 1, relative half width of the 95 % interval
	}{
		{"kettle-bench", 127.0 * 0.229568411, 237 / 0.40468564224, 9.9 * 2.54, 60, 0.11},
		{"hinterlohe", 42.3, 526, 32.0, 98, 0},
		{"kestrel-fork", 178 * 0.229568411, 174 / 0.40468564224, 13.7 * 2.54, 94, 0},
		{"moosewillow", 25.7, 950, 18.6, 101, 0},
	} {
		s := example(t, c.name).Stand
		u := s.Trees.Sums()
		for _, x := range []struct {
			what           string
			got, want, tol float64
		}{
			{"basal area", u.BasalArea, c.basalArea, 0.003}, {"trees", u.PerHa, c.trees, 0.003},
			{"QMD", 100 * u.QMD(), c.qmd, 0.005}, {"H:D", s.Trees.Slenderness(), c.hd, 0.008},
		} {
			if math.Abs(x.got/x.want-1) > x.tol {
				t.Errorf("%s: %s %.4g, %.4g wanted", c.name, x.what, x.got, x.want)
			}
		}
		if e := s.Cruise.BasalArea(); c.ci > 0 && (e.N != 16 || math.Abs(e.CI/e.Mean-c.ci) > 0.005 || math.Abs(e.Mean/0.229568411-126.9) > 0.1) {
			t.Errorf("%s: %+v", c.name, e)
		}
	}
}
