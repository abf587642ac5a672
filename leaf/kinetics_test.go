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
			for i, co2 := range []float64{300, 420, 800} {
				for _, vpd := range []float64{0.01, 0.6, 3} {
					air := Air{Temperature: celsius, CO2: co2, VPD: vpd, Pressure: []float64{0, 101.325, 75}[i]}
					r := k.Ratios(air)
					for _, ppfd := range []float64{0, 15, 150, 900, 2000} {
						at := Set{Ag: s.Ag * r.Ag, Phi: s.Phi * r.Phi, Cap: s.Cap * r.Cap, Theta: s.Theta}
						air.PPFD = ppfd
						want := b.Assimilate(air).Gross
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

// Thin air by partial pressures: CO2, oxygen and the compensation point in Pa, the affinities as printed for air at sea level.
func TestThinAirByPartialPressures(t *testing.T) {
	b := Biochemistry{Vcmax: 60, Jmax: 110, Rd: 1, G1: 4.45, Heat: Bernacchi{}}
	for _, kPa := range []float64{101.325, 90, 75} {
		for _, ci := range []float64{20, 80, 270, 700} {
			k := Limits(ci, Air{PPFD: 1500, Temperature: 30, Pressure: kPa}, b.Heat)
			Pa := ci * kPa * 1e-3
			O := 210 * kPa * 1e-3                                                    // kPa
			Kc, Ko := carboxylation.at(30)*101.325e-3, oxygenation.at(30)*101.325e-3 // Pa, kPa
			gamma := compensation.at(30) * 101.325e-3 * O / (210 * 101.325e-3)       // Pa, proportional to oxygen
			rubisco := b.Heat.vcmax(30) * (Pa - gamma) / (Pa + Kc*(1+O/Ko))
			if math.Abs(k.Rubisco-rubisco) > 1e-12 || math.Abs(k.Electrons-(Pa-gamma)/(4*(Pa+2*gamma))) > 1e-12 {
				t.Errorf("%g kPa, %g ppm: %+v, want Rubisco %g", kPa, ci, k, rubisco)
			}
		}
	}
	high, low := b.Assimilate(Air{PPFD: 1800, Temperature: 25, CO2: 420, VPD: 1, Pressure: PressureAt(2000)}), b.Assimilate(Air{PPFD: 1800, Temperature: 25, CO2: 420, VPD: 1})
	t.Logf("net in bright light at 2000 m, %.1f kPa: %.2f for %.2f at sea level", PressureAt(2000), high.Net, low.Net)
	if math.Abs(PressureAt(2000)-79.50) > 0.01 || math.Abs(PressureAt(0)-101.325) > 1e-12 {
		t.Errorf("standard atmosphere: %g kPa at 2000 m", PressureAt(2000)) // 79.495 kPa in ISO 2533
	}
	if high.Net >= low.Net {
		t.Error("thin air feeds better")
	}
}

// The optimum of electron transport is where it is largest.
func TestOptimumOfElectronTransport(t *testing.T) {
	for _, growth := range []float64{11, 18, 35} {
		a := Acclimated{growth}
		best := a.optimum()
		if at := a.jmax(best); a.jmax(best-0.5) >= at || a.jmax(best+0.5) >= at || best < 25 || best > 40 {
			t.Errorf("grown at %g: %g deg C is not the optimum", growth, best)
		}
		if k := (Kinetics{Heat: a}); k.Warmth(best) != 1 || k.Warmth(5) >= k.Warmth(15) {
			t.Errorf("grown at %g: warmth %g at 5, %g at 15 deg C", growth, k.Warmth(5), k.Warmth(15))
		}
	}
}
