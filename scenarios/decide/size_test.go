package decide

import (
	"fmt"
	"math"
	"strings"
	"testing"
	"time"

	"shadeledger/canopy"
	"shadeledger/scenarios"
	"shadeledger/scenarios/ledger"
	"shadeledger/scenarios/plan"
)

// sized is the example at an hour's step.
func sized(t *testing.T, set ...string) *scenarios.Plan {
	t.Helper()
	p, faults := plan.ReadExample(plan.BuiltIn, plan.Options{Set: set})
	if len(faults) > 0 {
		t.Fatal(faults)
	}
	p.Sampling.Step = time.Hour
	return p
}

// Every answer is verified on a grid of its own, finer and shifted: the share asked for is there within two cells, and one step smaller it is not.
func TestSizesHoldForward(t *testing.T) {
	p := sized(t)
	q := SizeQuery{Share: 0.5, UpTo: 2 * p.Stand.Height, Shapes: []Shape{Round, Oval, Band}, Bearing: math.Pi / 2, Workers: 2}
	found, err := FindSizes(p, q)
	if err != nil {
		t.Fatal(err)
	}
	m, err := scenarios.NewMapper(p, 2)
	if err != nil {
		t.Fatal(err)
	}
	share := func(seedling int, shape Shape, size float64) float64 {
		stems, err := shape.Outline(size, q.Bearing)
		if err != nil {
			t.Fatal(err)
		}
		crowns, err := canopy.Inset(stems, m.Plan().Stand.CrownRadius)
		if err != nil {
			t.Fatal(err)
		}
		base := opened(m.Plan())
		base.Opening = scenarios.Cleared{Stems: stems, Crowns: crowns, Inside: base.Opening.(scenarios.Cleared).Inside}
		var spots [][2]float64
		width := size - 2*m.Plan().Stand.CrownRadius
		for x := -1.5 * size; x <= 1.5*size; x += width / 13 {
			for y := -1.5 * size; y <= 1.5*size; y += width / 13 {
				if u, v := x+0.37*width/13, y+0.21*width/13; crowns.Contains(u, v) {
					spots = append(spots, [2]float64{u, v})
				}
			}
		}
		maps, err := m.Map(&base, spots, scenarios.BreakEvens)
		if err != nil {
			t.Fatal(err)
		}
		n := 0.0
		for _, s := range maps[seedling] {
			if s.Class == ledger.Comfortable {
				n++
			}
		}
		return n / float64(len(spots))
	}
	for _, r := range found.Rows { // reproduction fails below half a tree height (Hibbs 1982), but for the most tolerant
		if r.Size <= 0.5*p.Stand.Height && r.Species != "Maple" && r.Species != "Hemlock" {
			t.Errorf("%s is comfortable in a %s of %.1f H", r.Species, r.Shape, r.Size/p.Stand.Height)
		}
	}
	const slack = 0.08 // cells at the rim of a small opening
	for i := range p.Seedlings {
		for _, r := range found.Rows[i*3 : i*3+3] {
			at := share(i, r.Shape, r.Size)
			t.Logf("%s, %s: %.1f H, %.0f %% there, %.0f %% on the other grid", r.Species, r.Shape, r.Size/p.Stand.Height, 100*r.Share, 100*at)
			if !r.Found || r.Share < q.Share || at < q.Share-slack {
				t.Errorf("%s, %s: %+v, %.2f on the other grid", r.Species, r.Shape, r, at)
			}
			if !math.IsNaN(r.Smaller) && (r.Smaller >= q.Share || share(i, r.Shape, r.Size-stepOfHeight*p.Stand.Height) >= q.Share+slack) {
				t.Errorf("%s, %s: a smaller one does, %.2f", r.Species, r.Shape, r.Smaller)
			}
		}
	}
}

// A larger opening is never darker at its centre, and more share asked for never takes a smaller opening.
func TestLargerOpeningsAreNoDarker(t *testing.T) {
	p := sized(t)
	m, err := scenarios.NewMapper(p, 2)
	if err != nil {
		t.Fatal(err)
	}
	last := 0.0
	for k := 4; k <= 30; k += 2 {
		stems, err := Round.Outline(0.1*float64(k)*p.Stand.Height, 0)
		if err != nil {
			t.Fatal(err)
		}
		crowns, err := canopy.Inset(stems, p.Stand.CrownRadius)
		if err != nil {
			t.Fatal(err)
		}
		base := opened(m.Plan())
		base.Opening = scenarios.Cleared{Stems: stems, Crowns: crowns}
		maps, err := m.Map(&base, [][2]float64{{0, 0}}, scenarios.Ledgers)
		if err != nil {
			t.Fatal(err)
		}
		if light := maps[0][0].Light; light < last {
			t.Errorf("%.1f H: %.3f %% at the centre, %.3f in a smaller opening", 0.1*float64(k), light, last)
		} else {
			last = light
		}
	}
	before := 0.0
	for _, share := range []float64{0.2, 0.5, 0.8, 0.95} {
		r, err := FindSizes(p, SizeQuery{Share: share, UpTo: 3 * p.Stand.Height, Shapes: []Shape{Round}, Workers: 2})
		if err != nil {
			t.Fatal(err)
		}
		size := r.Rows[0].Size
		if !r.Rows[0].Found {
			size = math.Inf(1)
		}
		if size < before {
			t.Errorf("%.0f %%: %g m, less than for a smaller share", 100*share, size)
		}
		before = size
	}
}

func TestSizesOfAnyWorkersAndLimits(t *testing.T) {
	p := sized(t)
	q := SizeQuery{Share: 0.5, UpTo: 1.5 * p.Stand.Height, Shapes: []Shape{Round}, Against: "Birch", Workers: 1}
	one, err := FindSizes(p, q)
	if err != nil {
		t.Fatal(err)
	}
	q.Workers = 3
	three, err := FindSizes(p, q)
	if err != nil {
		t.Fatal(err)
	}
	one.Plan, three.Plan, one.Query, three.Query = nil, nil, q, q
	if fmt.Sprint(one.Rows) != fmt.Sprint(three.Rows) {
		t.Errorf("one worker %+v, three %+v", one.Rows, three.Rows)
	}
	for _, r := range one.Rows {
		if r.Species == "Birch" && !math.IsNaN(r.Upper) {
			t.Error("birch is outgrown by itself")
		}
	}
	q.UpTo = 0.5 * p.Stand.Height
	short, err := FindSizes(p, q)
	if err != nil {
		t.Fatal(err)
	}
	if r := short.Rows[0]; r.Found || !strings.Contains(r.Verdict, "no opening up to 0.5 H") {
		t.Errorf("oak in half a tree height: %+v", r)
	}
	for _, bad := range []SizeQuery{{Share: 0.5, UpTo: 5, Shapes: []Shape{Round}}, {Share: 0.5, UpTo: 50, Shapes: []Shape{Round}, Against: "Rowan"}} {
		if _, err := FindSizes(p, bad); err == nil {
			t.Errorf("%+v is answered", bad)
		}
	}
}

// All of the ground can be asked for: a share that adds up to one but for rounding is one.
func TestTheWholeOpeningCanBeComfortable(t *testing.T) {
	p := sized(t)
	s, err := FindSizes(p, SizeQuery{Share: 1, UpTo: 2 * p.Stand.Height, Shapes: []Shape{Round}, Workers: 2})
	if err != nil {
		t.Fatal(err)
	}
	for _, r := range s.Rows {
		if r.Species == "Maple" && !(r.Found && r.Share > 1-rounding) {
			t.Errorf("%s: %s, share %g", r.Species, r.Verdict, r.Share)
		}
	}
}
