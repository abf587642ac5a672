package leaf

import (
	"math"
	"testing"
)

// A set in standard air carried to other air by ratios is the coupled solution itself.
func TestKineticsAreTheCoupledSolution(t *testing.T) {
	worst := 0.0
	for _, heat := range []Heat{Bernacchi{}, Acclimated{12}, Acclimated{28}} {
		b := Biochemistry{Vcmax: 55, Jmax: 98, Rd: 0.9, G1: 4.45, Heat: heat}
		s, k := b.Set(60), Kinetics{G1: b.G1, Heat: heat}
		for _, celsius := range []float64{-5, 5, 15, 25, 38} {
			for _, co2 := range []float64{300, 420, 800} {
				for _, vpd := range []float64{0.01, 0.6, 3} {
					r := k.Ratios(Air{Temperature: celsius, CO2: co2, VPD: vpd})
					for _, ppfd := range []float64{0, 15, 150, 900, 2000} {
						at := Set{Ag: s.Ag * r.Ag, Phi: s.Phi * r.Phi, Cap: s.Cap * r.Cap, Theta: s.Theta}
						want := b.Assimilate(Air{ppfd, celsius, co2, vpd}).Gross
						if d := math.Abs(at.Gross(ppfd) - math.Max(0, want)); d > worst {
							worst = d
						}
					}
				}
			}
		}
	}
	t.Logf("worst %.1e umol m-2 s-1", worst)
	if worst > 1e-10 {
		t.Errorf("off by %g", worst)
	}
	dry := Kinetics{G1: 0.6, Heat: Bernacchi{}}.Ratios(Air{Temperature: 45, CO2: 250, VPD: 8})
	if dry.Ag != 0 || dry.Cap != 0 {
		t.Errorf("below the compensation point of CO2: %+v", dry)
	}
}
