package leaf

import "math"

// Standard air, in which a biochemical leaf is written as a Set.
const (
	standardTemperature = 25.0  // deg C
	standardCO2         = 400.0 // ppm
	standardVPD         = 1.0   // kPa
)

// Set writes the leaf as a light response in standard air (25 deg C, 400 ppm, 1 kPa), without residual conductance: since the CO2 within then
// depends on the air alone, electron transport is a non-rectangular hyperbola of light and Rubisco a cap on it. lma in g m-2.
func (b Biochemistry) Set(lma float64) Set {
	k := Kinetics{G1: b.G1, Heat: b.Heat}
	ci := k.within(standardCO2, standardVPD)
	gamma, rubisco := compensation.at(standardTemperature), michaelis(standardTemperature)
	return Set{
		Ag:  b.Jmax * b.Heat.jmax(standardTemperature) / 4 * (ci - gamma) / (ci + 2*gamma),
		Cap: b.Vcmax * b.Heat.vcmax(standardTemperature) * (ci - gamma) / (ci + rubisco),
		Rd:  b.Rd * b.Heat.rd(standardTemperature), Phi: QuantumYield(ci, standardTemperature), Theta: curvature, LMA: lma,
	}
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

// michaelis is Kc (1 + O/Ko), ppm.
func michaelis(celsius float64) float64 {
	return carboxylation.at(celsius) * (1 + oxygen/oxygenation.at(celsius))
}

// Ratios compares air with standard air; the light in it does not matter. Where the CO2 within is below the compensation point all are 0.
func (k Kinetics) Ratios(a Air) Ratios {
	shares := func(celsius, co2, vpd float64) (electrons, rubisco float64) {
		ci, gamma := k.within(co2, vpd), compensation.at(celsius)
		over := math.Max(0, ci-gamma)
		return over / (ci + 2*gamma), over / (ci + michaelis(celsius))
	}
	m, v := shares(a.Temperature, a.CO2, a.VPD)
	m0, v0 := shares(standardTemperature, standardCO2, standardVPD)
	return Ratios{
		Ag:  m / m0 * k.Heat.jmax(a.Temperature) / k.Heat.jmax(standardTemperature),
		Phi: m / m0,
		Cap: v / v0 * k.Heat.vcmax(a.Temperature) / k.Heat.vcmax(standardTemperature),
	}
}
