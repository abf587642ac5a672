package leaf

import "math"

// Standard air, in which a biochemical leaf is written as a Set.
const (
	standardTemperature = 25.0  // deg C
	standardCO2         = 400.0 // ppm
	standardVPD         = 1.0   // kPa
)

// Set writes the leaf as a light response in standard air (25 deg C, 400 ppm, 1 kPa, sea level), without residual conductance: since the CO2 within
// then depends on the air alone, electron transport is a non-rectangular hyperbola of light and Rubisco a cap on it. lma in g m-2.
func (b Biochemistry) Set(lma float64) Set {
	ci := Kinetics{G1: b.G1}.within(standardCO2, standardVPD)
	e := enzymesAt(standardTemperature, 1)
	return Set{Ag: b.Jmax / 4 * e.regenerated(ci), Cap: b.Vcmax * e.carboxylated(ci), Rd: b.Rd, Phi: QuantumYield(ci, standardTemperature), Theta: curvature, LMA: lma}
}

// Kinetics carries a biochemical set to other air.
type Kinetics struct {
	G1   float64 // kPa^0.5
	Heat Heat
}

// Ratios are what other air makes of a set: factors on Ag, Phi and Cap.
type Ratios struct{ Ag, Phi, Cap float64 }

// within is the CO2 in the leaf, ppm (Medlyn et al. 2011).
func (k Kinetics) within(co2, vpd float64) float64 {
	open := k.G1 / math.Sqrt(math.Max(leastVPD, vpd))
	return co2 * open / (1 + open)
}

// Ratios compares air with standard air; the light in it does not matter. Where the CO2 within is below the compensation point all are 0.
func (k Kinetics) Ratios(a Air) Ratios {
	shares := func(a Air) (electrons, rubisco float64) {
		ci, e := k.within(a.CO2, a.VPD), enzymesAt(a.Temperature, a.thinness())
		return math.Max(0, e.regenerated(ci)), math.Max(0, e.carboxylated(ci))
	}
	m, v := shares(a)
	m0, v0 := shares(Air{Temperature: standardTemperature, CO2: standardCO2, VPD: standardVPD})
	return Ratios{Ag: m / m0 * k.Heat.jmax(a.Temperature), Phi: m / m0, Cap: v / v0 * k.Heat.vcmax(a.Temperature)}
}

// Warmth is the capacity of electron transport at a temperature over that at its optimum; a response without one
// (Bernacchi) is taken as full from 25 deg C on.
func (k Kinetics) Warmth(celsius float64) float64 {
	best := 25.0
	if a, peaks := k.Heat.(Acclimated); peaks {
		best = a.optimum()
	}
	return math.Min(1, k.Heat.jmax(celsius)/k.Heat.jmax(best))
}
