package decide

import (
	"math"
	"testing"

	"shadeledger/radiation"
	"shadeledger/scenarios"
	"shadeledger/scenarios/ledger"
)

// The example came with a story worked out by hand for the same stand, with inputs of its own: a canopy of one slab from crown base to top (clumping 0.95, leaf area 5.0, thinned
// 3.3 and 2.2) under an overcast sky, break-evens of a season with leaves on, crown edges that come in at one speed for ever and grow 0.2 m a year upwards.
type storyInputs struct {
	steady, rising, breakEvens, slab bool
}

// inputs of the story, in the order in which they are put into the program.
var storyOrder = []struct {
	name string
	set  func(*storyInputs)
}{
	{"the program's own", func(*storyInputs) {}},
	{"edge speed that neither slows nor stops", func(s *storyInputs) { s.steady = true }},
	{"edges that grow 0.2 m a year upwards", func(s *storyInputs) { s.rising = true }},
	{"the story's break-evens", func(s *storyInputs) { s.breakEvens = true }},
	{"the story's canopy and sky", func(s *storyInputs) { s.slab = true }},
}

var (
	storyBreakEven = map[string]float64{"Maple": 6, "Hemlock": 7, "Birch": 8, "Red oak 2-0": 11, "White pine": 13}
	storyLeafArea  = map[string]float64{"No action": 5, "Thin to 90": 3.3, "Thin to 60": 2.2, "Circle 1.0 H": 5, "Oval E-W": 5}
)

// stage is the example with some of the story's inputs.
type stage struct {
	storyInputs
	mapper *scenarios.Mapper
	plan   *scenarios.Plan
}

func newStage(t *testing.T, in storyInputs) *stage {
	t.Helper()
	p := sized(t)
	if in.slab {
		p.Sampling.Sky = radiation.Overcast{}
	}
	m, err := scenarios.NewMapper(p, 2)
	if err != nil {
		t.Fatal(err)
	}
	return &stage{in, m, m.Plan()}
}

// spot is a station of a treatment some years after the cut: leaf-on light, break-even and class by seedling.
func (s *stage) spot(t *testing.T, name, station string, pace Pace, year int) []scenarios.Spot {
	t.Helper()
	tr := treatmentOf(t, s.plan, name)
	c := courseOf(s.plan, tr)
	now := c.at(pace, float64(year))
	if s.steady {
		now.advance = s.plan.Years.Closing[pace] * float64(year)
	}
	then, err := later(s.plan, tr, now)
	if err != nil {
		t.Fatal(err)
	}
	then.Matrix = append([]scenarios.Layer(nil), then.Matrix...)
	if s.slab {
		one := then.Matrix[0]
		one.Bottom, one.Top, one.LAI, one.WAI, one.Clumping, one.Chi = s.plan.Stand.CrownBase, s.plan.Stand.Height, storyLeafArea[name], 0, 0.95, 1
		then.Matrix, then.Understory = []scenarios.Layer{one}, nil
	}
	if s.rising {
		for k := range then.Matrix {
			then.Matrix[k].Top += 0.2 * float64(year)
		}
	}
	for _, x := range s.plan.StationsOf(tr) {
		if x.Name == station {
			maps, err := s.mapper.Map(then, [][2]float64{{x.X, x.Y}}, scenarios.BreakEvens)
			if err != nil {
				t.Fatal(err)
			}
			out := make([]scenarios.Spot, len(maps))
			for i := range maps {
				out[i] = maps[i][0]
				if s.breakEvens {
					b := storyBreakEven[s.plan.Seedlings[i].Name]
					out[i].BreakEven = ledger.NewBreakEven(b, b, 2)
					out[i].Class = ledger.ClassOf(out[i].LightLeafOn-b, out[i].LightLeafOn, out[i].BreakEven)
				}
			}
			return out
		}
	}
	t.Fatalf("no station %q", station)
	return nil
}

// lost is the year in which stock of the plan's size falls below its threshold, +Inf beyond 25.
func (s *stage) lost(t *testing.T, name, station, species string) (years [3]float64) {
	for pace := Late; pace <= Early; pace++ {
		years[pace] = math.Inf(1)
		for year := 0; year <= 25; year++ {
			for i, x := range s.spot(t, name, station, pace, year) {
				if s.plan.Seedlings[i].Name == species && x.LightLeafOn < x.BreakEven.Threshold.LeafOn {
					years[pace] = math.Min(years[pace], float64(year))
				}
			}
			if !math.IsInf(years[pace], 1) {
				break
			}
		}
	}
	return years
}

// apart is the greatest difference of two ranges of years, those beyond 25 taken as 26.
func apart(a, b [3]float64) (most float64) {
	for pace := range a {
		most = math.Max(most, math.Abs(math.Min(a[pace], 26)-math.Min(b[pace], 26)))
	}
	return most
}

// Years for which the north third keeps oak and pine, beside the story's. The program's differ by more than 5 years because its edges slow and stop; with the story's
// inputs put in one after the other they agree, and the log names the last one that was needed.
func TestStoryYears(t *testing.T) {
	beyond := math.Inf(1)
	f, err := FindYears(sized(t, "years.horizon=25"), 2)
	if err != nil {
		t.Fatal(err)
	}
	for _, row := range []struct {
		treatment, species string
		years              [3]float64 // late, likely, early
		needs              int        // inputs of the story until they agree
	}{
		{"Circle 1.0 H", "Red oak 2-0", [3]float64{beyond, 24, 12}, 1},
		{"Circle 1.0 H", "White pine", [3]float64{beyond, 18, 9}, 2},
		{"Oval E-W", "Red oak 2-0", [3]float64{beyond, beyond, 20}, 1},
	} {
		var in storyInputs
		for n, input := range storyOrder {
			input.set(&in)
			years := newStage(t, in).lost(t, row.treatment, "N third", row.species)
			off := apart(years, row.years)
			if n == 0 {
				for _, span := range f.Spans {
					if span.Treatment == row.treatment && span.Station == "N third" && span.Species == row.species && apart(span.Stock, years) > 1 {
						t.Errorf("%s, %s: %v, the command says %v", row.treatment, row.species, years, span.Stock)
					}
				}
			}
			t.Logf("%s, north third, %s: early %.0f, likely %.0f, late %.0f with %s; the story has %.0f, %.0f, %.0f", row.treatment, row.species, years[Early], years[Likely], years[Late],
				input.name, row.years[Early], row.years[Likely], row.years[Late])
			if agrees := off <= 5; agrees != (n >= row.needs) {
				t.Errorf("%s, %s: %.0f years apart with %s", row.treatment, row.species, off, input.name)
			}
			if n == row.needs {
				break
			}
		}
	}
}

// Classes right after the cut beside the story's. Five of the twelve differ on the program's own inputs; four of them by the break-evens, which the story took over the season
// with leaves on and the program over the year (spring and autumn light carry hemlock and maple, and pine less), or by both. With the story's break-evens, canopy and
// sky all agree but hemlock under the lighter thinning and pine under both, which then stand within 2.5 points of the border: the story's light there was 12 and 24 %, by hand.
func TestStoryClasses(t *testing.T) {
	own, given := newStage(t, storyInputs{}), newStage(t, storyInputs{breakEvens: true})
	all := newStage(t, storyInputs{breakEvens: true, slab: true})
	differ, left := 0, 0
	for _, row := range []struct {
		treatment string
		light     float64 // percent, by hand
		class     map[string]ledger.Class
	}{
		{"No action", 5, map[string]ledger.Class{"Red oak 2-0": ledger.Below, "White pine": ledger.Below, "Birch": ledger.Below, "Maple": ledger.Below, "Hemlock": ledger.Below}},
		{"Thin to 90", 12, map[string]ledger.Class{"Red oak 2-0": ledger.Marginal, "White pine": ledger.Below, "Birch": ledger.Marginal, "Maple": ledger.Comfortable, "Hemlock": ledger.Marginal}},
		{"Thin to 60", 24, map[string]ledger.Class{"Red oak 2-0": ledger.Comfortable, "White pine": ledger.Marginal}},
	} {
		a, b, c := own.spot(t, row.treatment, scenarios.UnderCanopy, Likely, 0), given.spot(t, row.treatment, scenarios.UnderCanopy, Likely, 0), all.spot(t, row.treatment, scenarios.UnderCanopy, Likely, 0)
		if math.Abs(c[0].LightLeafOn-row.light) > 3 {
			t.Errorf("%s: %.1f %% of leaf-on light under the story's canopy, %g %% by hand", row.treatment, c[0].LightLeafOn, row.light)
		}
		for i, s := range own.plan.Seedlings {
			want, known := row.class[s.Name]
			if !known {
				continue
			}
			why := ""
			if a[i].Class != want {
				differ++
				why = "; explained by the story's break-evens"
				if b[i].Class != want {
					why = "; explained by its break-evens and canopy"
				}
			}
			if c[i].Class != want {
				left++
				why = "; and by its light of hand"
				border := c[i].BreakEven.LeafOn
				if want == ledger.Marginal {
					border = c[i].BreakEven.Threshold.LeafOn
				}
				if off := c[i].LightLeafOn - border; off < 0 || off > 2.5 {
					t.Errorf("%s, %s: %s at %.1f %% for %s, %.1f points from the border", row.treatment, s.Name, c[i].Class, c[i].LightLeafOn, want, off)
				}
			}
			t.Logf("%s, %s: %s at %.0f %% (break-even %.1f); with the story's break-evens %s; with its canopy too %s at %.0f %%; the story: %s at %.0f %%%s", row.treatment, s.Name, a[i].Class, a[i].LightLeafOn,
				a[i].BreakEven.LeafOn, b[i].Class, c[i].Class, c[i].LightLeafOn, want, row.light, why)
		}
	}
	if differ != 5 || left > 3 {
		t.Errorf("%d classes differ, %d with all inputs of the story", differ, left)
	}
}
