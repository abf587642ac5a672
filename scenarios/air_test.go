package scenarios_test

import (
	"testing"

	"shadeledger/leaf"
	"shadeledger/radiation"
	"shadeledger/scenarios"
	"shadeledger/scenarios/ledger"
)

// Thin air takes from a biochemical seedling what it takes from its leaves, and nothing from one that is a light response or under a check sky.
func TestPressureFollowsElevation(t *testing.T) {
	b := leaf.Biochemistry{Vcmax: 60, Jmax: 110, Rd: 0.8, G1: 4.45, Heat: leaf.Bernacchi{}}
	income := func(elevation float64, sky radiation.Sky, chemical bool) float64 {
		p := invented(t)
		p.Site.Elevation, p.Sampling.Sky = elevation, sky
		p.Treatments = p.Treatments[:1]
		p.Seedlings = p.Seedlings[:1]
		if chemical {
			p.Seedlings[0].Traits = leaf.Constant{Set: b.Set(60)}
			p.Seedlings[0].Chemistry = &ledger.Chemistry{Leaf: b, CO2: 420}
		}
		return run(t, p, scenarios.Options{Workers: 2, Depth: scenarios.Ledgers}).Balance[0].Lines[ledger.Income]
	}
	high, low := income(2000, radiation.AllWeather{}, true), income(0, radiation.AllWeather{}, true)
	t.Logf("income at 2000 m over sea level %.3f", high/low)
	if !(high < 0.995*low && high > 0.85*low) {
		t.Errorf("income %g at 2000 m, %g at sea level", high, low)
	}
	if income(2000, radiation.Overcast{}, true) != income(0, radiation.Overcast{}, true) || income(2000, radiation.AllWeather{}, false) != income(0, radiation.AllWeather{}, false) {
		t.Error("elevation bears on a check sky or on a light response")
	}
}
