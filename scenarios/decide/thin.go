// Package decide asks questions over runs: what a row of thinnings does, and how much may stay for a wanted light or for a species to
// be comfortable. It renders nothing.
package decide

import (
	"errors"
	"fmt"
	"math"

	"shadeledger/canopy/inventory"
	"shadeledger/scenarios"
	"shadeledger/scenarios/ledger"
)

// ThinQuery says how trees are taken and what is left of the understory.
type ThinQuery struct {
	Thinning   inventory.Thinning // its Leave is not used
	Understory []scenarios.Understory
	Workers    int
	By         scenarios.By // how the stand's gain divides the time
}

// QueryOf takes order, species and understory from the plan's first thinned treatment; without one trees go smallest first and the understory stays.
func QueryOf(p *scenarios.Plan) ThinQuery {
	q := ThinQuery{Understory: p.Stand.Understory}
	for i := range p.Treatments {
		if t := &p.Treatments[i]; len(t.Cut) > 0 {
			q.Thinning, q.Understory = t.Thinning, t.Understory
			break
		}
	}
	return q
}

// ThinRow is one residual basal area for one seedling.
type ThinRow struct {
	Residual, Cut      float64 // m2/ha left; percent of the basal area taken
	LAI                float64 // of the trees
	Light, LightLeafOn float64 // percent of full light over the season, over the leaf-on period
	SkyView            float64 // percent
	StandGain          float64 // gross assimilation less leaf respiration of the trees, g C m-2 in a mean year
	Species            string  // of the seedling
	Net                float64 // of the seedling, g C in a mean year
	Class              ledger.Class
	Above              [3]float64 // years for which it stays comfortable as it grows, by pace; 0 where it is not, +Inf beyond the horizon
}

// ThinTable is a row of thinnings.
type ThinTable struct {
	Results *scenarios.Results // the runs, a treatment each
	Trees   []inventory.Stand  // what stands, by treatment
	Rows    []ThinRow
}

// errNoTrees is a plan whose stand is stated.
var errNoTrees = errors.New("thinning needs the stand's trees: give stand.stand_table or stand.basal_area")

// Thin runs the uncut stand and every residual basal area, m2/ha.
func Thin(p *scenarios.Plan, q ThinQuery, leave []float64) (*ThinTable, error) {
	s, err := newStands(p, q)
	if err != nil {
		return nil, err
	}
	plan, trees, err := s.plan(leave)
	if err != nil {
		return nil, err
	}
	r, err := scenarios.Run(plan, scenarios.Options{Workers: q.Workers, Depth: scenarios.BreakEvens, Gain: true})
	if err != nil {
		return nil, err
	}
	r.Correction = s.correction
	future, err := FindYears(plan, q.Workers)
	if err != nil {
		return nil, err
	}
	out := &ThinTable{Results: r, Trees: trees}
	uncut := trees[0].Sums().BasalArea
	n := len(plan.Seedlings)
	for i := range trees {
		ba := trees[i].Sums().BasalArea
		gross, respired := r.Gains[i].Year(r.Series)
		lai := 0.0
		for _, l := range plan.Treatments[i].Matrix {
			lai += l.LAI
		}
		for k, b := range r.Balance[i*n : (i+1)*n] {
			row := ThinRow{Residual: ba, Cut: 100 * (1 - ba/uncut), LAI: lai, Light: b.Light, LightLeafOn: b.LightLeafOn,
				SkyView: b.SkyView, StandGain: gross - respired, Species: b.Species, Net: b.Lines.Net(), Class: b.Class}
			if b.Class == ledger.Comfortable {
				row.Above = future.Spans[i*n+k].Lost
			}
			out.Rows = append(out.Rows, row)
		}
	}
	return out, nil
}

// stands makes plans of thinned stands.
type stands struct {
	base       *scenarios.Plan // leaf area corrected
	query      ThinQuery
	correction scenarios.Correction
	uncut      float64 // m2/ha
}

func newStands(p *scenarios.Plan, q ThinQuery) (*stands, error) {
	if !p.Stand.Cruised() {
		return nil, errNoTrees
	}
	base, correction, err := scenarios.Corrected(p)
	if err != nil {
		return nil, err
	}
	if correction.Source != "" { // the plan's own notes speak of the leaf area before it
		q.Understory = under(base, q.Understory)
	}
	return &stands{base, q, correction, base.Stand.Trees.Sums().BasalArea}, nil
}

// under is the understory of the corrected plan by the names of another.
func under(p *scenarios.Plan, names []scenarios.Understory) (out []scenarios.Understory) {
	for _, u := range p.Stand.Understory {
		for _, n := range names {
			if n.Name == u.Name {
				out = append(out, u)
			}
		}
	}
	return out
}

// plan has a treatment for each residual basal area.
func (s *stands) plan(leave []float64) (*scenarios.Plan, []inventory.Stand, error) {
	p := *s.base
	p.Treatments = nil
	var trees []inventory.Stand
	for _, ba := range leave {
		th := s.query.Thinning
		th.Leave = math.Min(ba, s.uncut)
		left, cut, err := s.base.Stand.Trees.Thin(th)
		if err != nil {
			return nil, nil, err
		}
		p.Treatments = append(p.Treatments, scenarios.Treatment{
			Name: fmt.Sprintf("%.4g m2/ha", ba), Matrix: s.base.Stand.Foliage.Layers(left), Trees: left, Cut: cut, Thinning: th,
			Understory: s.query.Understory, Opening: scenarios.NoOpening{},
		})
		trees = append(trees, left)
	}
	return &p, trees, nil
}

// Steps are residual basal areas from the uncut stand down, n of them evenly spaced to a tenth of it, m2/ha.
func Steps(p *scenarios.Plan, n int) []float64 {
	uncut := p.Stand.Trees.Sums().BasalArea
	out := make([]float64, n)
	for i := range out {
		out[i] = uncut * (1 - 0.9*float64(i)/float64(n-1))
	}
	return out
}
