package decide

import (
	"testing"

	"shadeledger/scenarios"
	"shadeledger/scenarios/ledger"
)

// Ends as near as one another keep the order of the inputs, low before high, in every run.
func TestCandidatesOrder(t *testing.T) {
	s := &sample{world: &world{inputs: make([]Input, 3)}, full: make([]scenarios.BalanceRow, 1)}
	s.full[0].LightLeafOn = 90
	s.full[0].BreakEven = ledger.BreakEven{Found: true, Threshold: ledger.Threshold{LeafOn: 85}}
	lost := []drawnSpot{{leafOn: 80, threshold: 85}}
	ends := []end{{lost, lost}, {lost, lost}, {lost, lost}}
	want := []candidate{{0, false, 0.5}, {0, true, 0.5}, {1, false, 0.5}}
	for range 50 {
		got := s.candidates(0, ends, func(x *drawnSpot) bool { return x.margin() < 0 })
		if len(got) != len(want) {
			t.Fatalf("%d candidates, want %d", len(got), len(want))
		}
		for i := range want {
			if got[i] != want[i] {
				t.Fatalf("candidates %v, want %v", got, want)
			}
		}
	}
}
