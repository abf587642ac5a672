package decide

import (
	"math"
	"testing"
)

// Draws of a later year are darker, by what the years of the same plan say at the likely pace; how fast crowns come in is drawn and spreads the light further.
func TestDrawsOfALaterYear(t *testing.T) {
	p := small(t, "Birch")
	f, err := FindYears(p, 2)
	if err != nil {
		t.Fatal(err)
	}
	at := func(after float64) (*sample, Range) {
		t.Helper()
		q := SpreadQuery{Count: 100, Seed: 2, Workers: 2, After: after}
		s, err := newSample(p, q)
		if err != nil {
			t.Fatal(err)
		}
		if err := s.run(t.Context(), q); err != nil {
			t.Fatal(err)
		}
		return s, s.rangesOf(s.row(1, 0, s.lead[1][0])).Light
	}
	now, light := at(0)
	later, dimmer := at(10)
	station := later.at[1][later.lead[1][0]].Name
	likely := math.NaN()
	for _, r := range f.Rows {
		if r.Treatment == p.Treatments[1].Name && r.Station == station && r.Year == 10 {
			likely = r.StockLight[Likely]
		}
	}
	best := later.best[later.row(1, 0, later.lead[1][0])].Light
	t.Logf("%s: light %.0f (%.0f to %.0f) at first, %.0f (%.0f to %.0f) in year 10; best %.1f, %.1f by the years", station, light[1], light[0], light[2], dimmer[1], dimmer[0], dimmer[2], best, likely)
	if math.Abs(best-likely) > 2 {
		t.Errorf("best values give %.1f %% in year 10, the years %.1f", best, likely)
	}
	if dimmer[1] >= light[1] || dimmer[2]-dimmer[0] <= light[2]-light[0] || len(later.inputs) != len(now.inputs)+2 {
		t.Errorf("light %v at first, %v in year 10; %d and %d inputs", light, dimmer, len(now.inputs), len(later.inputs))
	}
}
