package decide

import (
	"math"
	"slices"
	"strings"
	"testing"
	"time"

	"shadeledger/canopy"
	"shadeledger/canopy/inventory"
	"shadeledger/leaf"
	"shadeledger/leaf/traits"
	"shadeledger/radiation/weather"
	"shadeledger/scenarios"
	"shadeledger/scenarios/ledger"
)

func on(month time.Month, day int) scenarios.Date { return scenarios.Date{Month: month, Day: day} }

// sheds is a calendar of leaves that begin to come out on a day and are full three weeks later.
func sheds(t *testing.T, month time.Month, day int) leaf.Calendar {
	t.Helper()
	out := leaf.Date{Month: month, Day: day}
	d, err := leaf.NewDeciduous(out, out.Shift(21), out.Shift(140), out.Shift(160))
	if err != nil {
		t.Fatal(err)
	}
	return d
}

// trees are oaks of a diameter in m, 400 a hectare, 24 m high.
func trees(t *testing.T, dbh float64) inventory.Stand {
	t.Helper()
	oak, err := traits.Find("Quercus rubra")
	if err != nil {
		t.Fatal(err)
	}
	s, err := inventory.NewStand([]inventory.Class{{Species: oak, DBH: dbh, PerHa: 400, Height: math.NaN(), CrownBase: math.NaN()}}, inventory.Setting{Height: 24, CrownBase: 9})
	if err != nil {
		t.Fatal(err)
	}
	return s
}

func hole(t *testing.T, stems float64) scenarios.Opening {
	t.Helper()
	a, err := canopy.NewCircle(stems)
	if err != nil {
		t.Fatal(err)
	}
	b, err := canopy.NewCircle(stems - 7)
	if err != nil {
		t.Fatal(err)
	}
	return scenarios.Cleared{Stems: a, Crowns: b}
}

// calm is a plan against which nothing speaks: stout oaks uncut, lightly thinned and with three holes; an oak that leafs after the last frost
// and a fir.
func calm(t *testing.T) *scenarios.Plan {
	t.Helper()
	stand := trees(t, 0.35)
	layers := []scenarios.Layer{{Layer: canopy.Layer{Bottom: 9, Top: 24, LAI: 4}, Calendar: sheds(t, time.May, 14)}}
	light, _, err := stand.Thin(inventory.Thinning{Leave: 0.8 * stand.Sums().BasalArea, Order: inventory.AllSizes})
	if err != nil {
		t.Fatal(err)
	}
	plant := ledger.Plant{Height: 0.5, LeafMass: 2, Organs: []ledger.Organ{{Line: ledger.Stem, Mass: 8}}, Turnover: ledger.Turnover{ConstructionCost: 0.5}}
	oak, fir := plant, plant
	oak.Leaves, fir.Leaves = sheds(t, time.May, 14), leaf.Evergreen{}
	p := &scenarios.Plan{
		Frost:     scenarios.Frost{Last: on(time.May, 10)},
		Stand:     scenarios.Stand{Height: 24, Layers: layers, Trees: stand, Area: 10},
		Seedlings: []scenarios.Seedling{{Name: "Oak", Plant: oak}, {Name: "Fir", Plant: fir}},
		Treatments: []scenarios.Treatment{
			{Name: "Uncut", Matrix: layers, Trees: stand, Opening: scenarios.NoOpening{}},
			{Name: "Thin", Matrix: layers, Trees: light, Opening: scenarios.NoOpening{}},
			{Name: "Hole", Matrix: layers, Trees: stand, Opening: hole(t, 60), Count: 3},
		},
		Cautions: []scenarios.Caution{{Key: "invasive plants", State: "OPEN"}},
	}
	p.Site.Latitude = 0.8
	p.Water = scenarios.Water{Capacity: 0.1}
	n := &weather.Normals{}
	for m := range 12 {
		n.Mean[m], n.Global[m], p.Water.Rain[m] = 17, 16, 100
	}
	p.Weather = n
	return p
}

// judged are the findings on a plan whose rows an edit may change; the oak earns 10 g C a year everywhere, the fir the same.
func judged(t *testing.T, p *scenarios.Plan, edit func(*scenarios.BalanceRow)) *Findings {
	t.Helper()
	r := &scenarios.Results{Plan: p}
	for i := range p.Treatments {
		x := &p.Treatments[i]
		st := scenarios.TreatmentStations{Treatment: x}
		for _, s := range p.StationsOf(x) {
			c, opened := x.Opening.(scenarios.Cleared)
			st.Names, st.Inside = append(st.Names, s.Name), append(st.Inside, !opened || c.Crowns.Contains(s.X, s.Y))
			for _, plant := range p.Seedlings {
				row := scenarios.BalanceRow{Treatment: x.Name, Station: s.Name, Species: plant.Name, Class: ledger.Comfortable,
					LightLeafOn: 40, SkyView: 20, BreakEven: ledger.NewBreakEven(12, 10, 2), Years: []float64{8, 12}, Spring: 3}
				if edit != nil {
					edit(&row)
				}
				r.Balance = append(r.Balance, row)
			}
		}
		r.Stations = append(r.Stations, st)
	}
	return FindConflicts(r)
}

// of lists the findings of a rule in a state.
func (f *Findings) of(rule *Rule, state State) (out []Finding) {
	for _, x := range f.Conflicts {
		if x.Rule == rule && x.State == state {
			out = append(out, x)
		}
	}
	return out
}

func TestNothingSpeaksAgainstACalmPlan(t *testing.T) {
	for _, x := range judged(t, calm(t), nil).Conflicts {
		if x.State == Conflict {
			t.Errorf("%s under %s for %s: %v, limit %v, %s", x.Rule.Key, x.Treatment, x.Seedling, x.Found, x.Limit, x.Detail)
		}
	}
}

// Every rule speaks for a plan changed in one thing, and is silent for its twin that is changed a little less.
func TestEveryRuleFiresAndStaysSilent(t *testing.T) {
	sky := func(view float64) func(*scenarios.BalanceRow) {
		return func(r *scenarios.BalanceRow) {
			if r.Station == "centre" {
				r.SkyView = view
			}
		}
	}
	thin := func(share float64) func(*scenarios.Plan) {
		return func(p *scenarios.Plan) {
			left, _, err := p.Stand.Trees.Thin(inventory.Thinning{Leave: share * p.Stand.Trees.Sums().BasalArea, Order: inventory.AllSizes})
			if err != nil {
				t.Fatal(err)
			}
			p.Treatments[1].Trees = left
		}
	}
	stout := func(dbh float64) func(*scenarios.Plan) {
		return func(p *scenarios.Plan) {
			p.Stand.Trees = trees(t, dbh)
			for i := range p.Treatments {
				p.Treatments[i].Trees = p.Stand.Trees
			}
		}
	}
	last := func(d scenarios.Date) func(*scenarios.Plan) { return func(p *scenarios.Plan) { p.Frost.Last = d } }
	south := func(month time.Month, day int) func(*scenarios.Plan) {
		return func(p *scenarios.Plan) {
			p.Site.Latitude, p.Frost.Last = -0.8, on(time.October, 10)
			p.Seedlings[0].Leaves = sheds(t, month, day)
		}
	}
	under := func(top float64) func(*scenarios.Plan) {
		return func(p *scenarios.Plan) {
			u := scenarios.Understory{Name: "hazel"}
			u.LAI, u.Top = 1, top
			p.Treatments[2].Understory = []scenarios.Understory{u}
		}
	}
	against := func(p *scenarios.Plan) { p.Size.Against = "Fir" }
	nets := func(oak, fir float64) func(*scenarios.BalanceRow) {
		return func(r *scenarios.BalanceRow) {
			r.Years = []float64{map[string]float64{"Oak": oak, "Fir": fir}[r.Species]}
		}
	}
	dim := func(station string) func(*scenarios.BalanceRow) {
		return func(r *scenarios.BalanceRow) {
			if r.Species == "Oak" && r.Treatment == "Hole" && r.Station == station {
				r.Class, r.LightLeafOn = ledger.Marginal, 14
			}
		}
	}
	spring := func(gain float64) func(*scenarios.BalanceRow) {
		return func(r *scenarios.BalanceRow) {
			if r.Treatment == "Uncut" && r.Species == "Fir" {
				r.Spring = gain
			}
		}
	}
	leafs := func(month time.Month, day int) func(*scenarios.Plan) {
		return func(p *scenarios.Plan) { p.Seedlings[0].Leaves = sheds(t, month, day) }
	}
	dry := func(capacity float64) func(*scenarios.Plan) {
		return func(p *scenarios.Plan) {
			p.Water.Capacity = capacity
			p.Water.Rain[6], p.Water.Rain[7], p.Water.Rain[8] = 20, 20, 20
		}
	}
	opening := func(d float64) func(*scenarios.Plan) {
		return func(p *scenarios.Plan) { p.Treatments[2].Opening = hole(t, d) }
	}
	frosty := last(on(time.May, 24))
	for _, c := range []struct {
		name            string
		rule            *Rule
		state           State
		loud, still     func(*scenarios.Plan)
		loudly, stilly  func(*scenarios.BalanceRow)
		treatment, seed string
		found           float64 // of the loud one
	}{
		{name: "frost by sky view", rule: &ruleFrost, state: Conflict, loud: frosty, still: frosty, loudly: sky(31), stilly: sky(29.9), treatment: "Hole", seed: "Oak", found: 31},
		{name: "frost by date", rule: &ruleFrost, state: Conflict, loud: frosty, still: last(on(time.May, 14)), loudly: sky(45), stilly: sky(45), treatment: "Hole", seed: "Oak", found: 45},
		{name: "frost in the south", rule: &ruleFrost, state: Conflict, loud: south(time.September, 20), still: south(time.October, 20), loudly: sky(45), stilly: sky(45), treatment: "Hole", seed: "Oak", found: 45},
		{name: "windthrow", rule: &ruleWind, state: Conflict, loud: stout(0.245), still: stout(0.31), treatment: "Hole", found: 24 / 0.245},
		{name: "heavy thinning", rule: &ruleHeavy, state: Conflict, loud: thin(0.39), still: thin(0.41), treatment: "Thin", found: 39},
		{name: "shrubs", rule: &ruleShrub, state: Conflict, loud: under(0.6), still: under(0.5), treatment: "Hole", seed: "Oak", found: 0.6},
		{name: "rival", rule: &ruleRival, state: Conflict, loud: against, still: against, loudly: nets(10, 11), stilly: nets(10, 10), treatment: "Hole", seed: "Oak", found: 220},
		{name: "rival not named", rule: &ruleRival, state: ToCheck, loudly: nets(10, 11), stilly: nets(10, 10), seed: "Oak", found: 220},
		{name: "dark edge", rule: &ruleEdge, state: Conflict, loudly: dim("S third"), stilly: dim("S edge"), treatment: "Hole", seed: "Oak", found: 14},
		{name: "dark edge is to the south", rule: &ruleEdge, state: Conflict, loudly: dim("S third"), stilly: dim("N third"), treatment: "Hole", seed: "Oak", found: 14},
		{name: "spring window", rule: &ruleSpring, state: Conflict, loudly: spring(10.1), stilly: spring(9.9), treatment: "Uncut", seed: "Fir", found: 10.1},
		{name: "late leaf-out", rule: &ruleLate, state: Conflict, loud: leafs(time.May, 15), still: leafs(time.May, 14), treatment: "Thin", seed: "Oak", found: 0},
		{name: "dry quarter", rule: &ruleDry, state: ToCheck, loud: dry(0.1), still: dry(0.4), found: 92*0.013*17/32*(23.885*16+50) - 60},
		{name: "invasives", rule: &ruleInvaded, state: ToCheck, loud: opening(50), still: opening(51), treatment: "Hole", found: math.Pi / 4 * 2500},
	} {
		look := func(change func(*scenarios.Plan), edit func(*scenarios.BalanceRow)) *Findings {
			p := calm(t)
			if change != nil {
				change(p)
			}
			return judged(t, p, edit)
		}
		hits := slices.DeleteFunc(look(c.loud, c.loudly).of(c.rule, c.state), func(x Finding) bool { return strings.HasPrefix(x.Detail, "not assessed") })
		at := slices.IndexFunc(hits, func(x Finding) bool { return x.Treatment == c.treatment && x.Seedling == c.seed })
		switch {
		case at < 0:
			t.Errorf("%s: not found, but %v", c.name, hits)
		case math.Abs(hits[at].Found.Value-c.found) > 1e-6*c.found:
			t.Errorf("%s: found %g, want %g", c.name, hits[at].Found.Value, c.found)
		}
		for _, x := range look(c.still, c.stilly).of(c.rule, c.state) {
			if !strings.HasPrefix(x.Detail, "not assessed") {
				t.Errorf("%s: speaks where it should not: %+v", c.name, x)
			}
		}
	}
}

// In the southern hemisphere the dark edge is the northern one.
func TestDarkEdgeMirrors(t *testing.T) {
	p := calm(t)
	p.Site.Latitude = -0.8
	f := judged(t, p, func(r *scenarios.BalanceRow) {
		if r.Treatment == "Hole" && r.Species == "Oak" && (r.Station == "N third" || r.Station == "S third") {
			r.Class = ledger.Marginal
		}
	})
	hits := f.of(&ruleEdge, Conflict)
	if len(hits) != 1 || !slices.Equal(hits[0].Stations, []string{"N third"}) {
		t.Errorf("%+v; want one finding at N third", hits)
	}
}

// Nobody plants where a seedling is below everywhere: frost, rivals and spring are then silent. What cannot be looked at is said.
func TestWhatIsNotAssessedIsSaid(t *testing.T) {
	p := calm(t)
	p.Frost, p.Stand.Trees, p.Weather = scenarios.Frost{}, inventory.Stand{}, &weather.Daily{}
	p.Treatments[0].Trees, p.Treatments[1].Trees, p.Treatments[2].Trees = inventory.Stand{}, inventory.Stand{}, inventory.Stand{}
	f := judged(t, p, func(r *scenarios.BalanceRow) { r.SkyView = 60 })
	for rule, want := range map[*Rule]string{&ruleFrost: "site.frost.last", &ruleWind: "no diameters", &ruleDry: "no monthly rain"} {
		if list := f.of(rule, ToCheck); len(list) == 0 || !strings.Contains(list[0].Detail, want) {
			t.Errorf("%s: %+v; want %q", rule.Key, list, want)
		}
	}
	if list := f.of(&ruleFrost, ToCheck); !strings.Contains(list[len(list)-1].Detail, "Fir: evergreen") {
		t.Errorf("no word of the fir: %+v", list)
	}
	p = calm(t)
	p.Frost.Last, p.Size.Against = on(time.June, 1), "Fir"
	f = judged(t, p, func(r *scenarios.BalanceRow) {
		r.SkyView, r.Class, r.Spring, r.Years = 60, ledger.Below, 1, []float64{-1}
		if r.Species == "Fir" {
			r.Years = []float64{5}
		}
	})
	for _, rule := range []*Rule{&ruleFrost, &ruleRival, &ruleSpring} {
		if hits := f.of(rule, Conflict); hits != nil {
			t.Errorf("%s speaks where nobody plants: %+v", rule.Key, hits)
		}
	}
}
