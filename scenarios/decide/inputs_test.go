package decide

import (
	"math"
	"testing"

	"shadeledger/scenarios"
)

// A plan's own doubt stands in place of what is usual, once: a seedling's standard error as a factor both ways, a stand's as it is, a range as its ends.
func TestPlansOwnDoubt(t *testing.T) {
	p := sized(t, "seedlings.Maple.chi=2 +- 0.4", "stand.height=78 ft +- 4 ft", "seedlings.Birch.crown_lai={low: 0.5, best: 0.8, high: 1.1}")
	corrected, c, err := scenarios.Corrected(p)
	if err != nil {
		t.Fatal(err)
	}
	found := map[string]Input{}
	for _, in := range inputs(corrected, c) {
		found[in.Key] = in
	}
	f := math.Exp(normal90 * 0.2)
	for key, want := range map[string][2]float64{"seedlings[3].chi": {1 / f, f}, "seedlings[2].crown_lai": {0.5 / 0.8, 1.1 / 0.8}, "stand.height": {(78 - normal90*4) * 0.3048, (78 + normal90*4) * 0.3048}} {
		d := found[key]
		if d.Source != "the plan" || math.Abs(d.Doubt.Low-want[0]) > 1e-9 || math.Abs(d.Doubt.High-want[1]) > 1e-9 {
			t.Errorf("%s: %+v from %s, want %v", key, d.Doubt, d.Source, want)
		}
	}
}
