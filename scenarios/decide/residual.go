package decide

import (
	"fmt"
	"math"

	"shadeledger/scenarios"
	"shadeledger/scenarios/ledger"
)

// Target is what a residual basal area is sought for: LightTarget or ComfortTarget.
type Target interface {
	// met tells whether a thinned stand's rows are bright enough.
	met(rows []scenarios.BalanceRow) bool
	depth() scenarios.Depth
	String() string
	// lasts is for how many years a thinned stand meets the target, by pace; +Inf is beyond the horizon.
	lasts(f *Future) [3]float64
}

// LightTarget is a percent of full light over the season.
type LightTarget struct{ Percent float64 }

// ComfortTarget is a seedling, by its name, in the class comfortable.
type ComfortTarget struct{ Seedling string }

func (t LightTarget) met(rows []scenarios.BalanceRow) bool { return rows[0].Light >= t.Percent }

func (t ComfortTarget) met(rows []scenarios.BalanceRow) bool {
	for _, r := range rows {
		if r.Species == t.Seedling {
			return r.Class == ledger.Comfortable
		}
	}
	return false
}

// lasts counts the years from the cut in which the light stays, at the height of the plan's first seedling.
func (t LightTarget) lasts(f *Future) (years [3]float64) {
	for pace := range years {
		first := f.Rows[0].StockLight[pace] // light of maps; the answer itself is at the target
		for _, r := range f.Rows[:f.Plan.Years.Horizon+1] {
			if r.StockLight[pace] < math.Min(t.Percent, first) {
				break
			}
			years[pace]++
		}
		if years[pace] > float64(f.Plan.Years.Horizon) {
			years[pace] = math.Inf(1)
		}
	}
	return years
}

// lasts is when the seedling is lost as it grows.
func (t ComfortTarget) lasts(f *Future) [3]float64 {
	for _, s := range f.Spans {
		if s.Species == t.Seedling {
			for pace := range s.Lost { // likewise
				s.Lost[pace] = math.Max(1, s.Lost[pace])
			}
			return s.Lost
		}
	}
	return [3]float64{}
}

func (LightTarget) depth() scenarios.Depth   { return scenarios.Ledgers }
func (ComfortTarget) depth() scenarios.Depth { return scenarios.BreakEvens }

func (t LightTarget) String() string   { return fmt.Sprintf("%.3g %% of full light", t.Percent) }
func (t ComfortTarget) String() string { return t.Seedling + " comfortable" }

// Residual is the answer: the most basal area that meets a target.
type Residual struct {
	Target  Target
	Found   bool       // false: not even with all trees gone that may go
	Uncut   bool       // the uncut stand meets it
	Leave   float64    // m2/ha
	Cut     float64    // percent of the basal area
	Light   float64    // percent over the season there, computed forward
	Next    float64    // the least basal area tried that misses the target, m2/ha
	Above   [3]float64 // years for which the target is met from there, by pace; +Inf is beyond the horizon
	Runs    int
	Rows    []scenarios.BalanceRow // at Leave, by seedling
	Results *scenarios.Results
}

// width is to what basal area residuals are found, m2/ha.
const width = 0.2

// FindResidual halves the basal area between the uncut stand and none until the target is met to 0.2 m2/ha. Light never falls as more
// is taken, so that one crossing is all there is; a class may in principle cross twice, and the last stand that is bright enough counts.
func FindResidual(p *scenarios.Plan, q ThinQuery, t Target) (*Residual, error) {
	if c, ok := t.(ComfortTarget); ok && !HasSeedling(p, c.Seedling) {
		return nil, fmt.Errorf("%q is not a seedling of the plan; there are %v", c.Seedling, Seedlings(p))
	}
	s, err := newStands(p, q)
	if err != nil {
		return nil, err
	}
	series := s.base.Weather.Series(s.base.Site, s.base.Sampling.Step, s.base.Par)
	out := &Residual{Target: t}
	asked := 0.0 // the most that met the target, as it was asked for
	try := func(ba float64, depth scenarios.Depth) (bool, error) {
		plan, trees, err := s.plan([]float64{ba})
		if err != nil {
			return false, err
		}
		r, err := scenarios.RunSeries(plan, series, scenarios.Options{Workers: q.Workers, Depth: depth})
		if err != nil {
			return false, err
		}
		out.Runs++
		ok := t.met(r.Balance)
		if ok {
			asked, out.Found, out.Leave = ba, true, trees[0].Sums().BasalArea
			out.Cut, out.Light = 100*(1-out.Leave/s.uncut), r.Balance[0].Light
			out.Rows, out.Results = r.Balance, r
		}
		return ok, nil
	}
	if out.Uncut, err = try(s.uncut, t.depth()); err != nil {
		return out, err
	}
	if !out.Uncut {
		if out.Next, err = halve(s.uncut, func(ba float64) (bool, error) { return try(ba, t.depth()) }); err != nil || !out.Found {
			return out, err
		}
	}
	if _, err = try(asked, scenarios.BreakEvens); err != nil { // the answer computed forward, with its classes
		return out, err
	}
	plan, _, err := s.plan([]float64{asked})
	if err != nil {
		return out, err
	}
	future, err := FindYears(plan, q.Workers)
	if err != nil {
		return out, err
	}
	out.Above = t.lasts(future)
	return out, nil
}

// halve looks for the most basal area that is enough between none and one that is not; it gives the least one tried that is not.
func halve(high float64, enough func(float64) (bool, error)) (float64, error) {
	low := 0.0
	ok, err := enough(low)
	for err == nil && ok && high-low > width/2 {
		var good bool
		mid := (low + high) / 2
		if good, err = enough(mid); good {
			low = mid
		} else {
			high = mid
		}
	}
	return high, err
}

// Seedlings are the names of a plan's seedlings.
func Seedlings(p *scenarios.Plan) (out []string) {
	for _, s := range p.Seedlings {
		out = append(out, s.Name)
	}
	return out
}

// HasSeedling tells whether a plan has a seedling of a name.
func HasSeedling(p *scenarios.Plan, name string) bool {
	for _, s := range Seedlings(p) {
		if s == name {
			return true
		}
	}
	return false
}
