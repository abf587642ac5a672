// Package leaf is the theory of one leaf: light response, temperature, sun and shade traits and
// what lies between them, and the days on which leaves are there. It does not know where light came from.
package leaf

import "time"

// Set is one measured or derived leaf trait set, all at the reference temperature.
type Set struct {
	Ag    float64 // gross light-saturated rate, Amax (net) + Rd, umol CO2 m-2 s-1
	Rd    float64 // dark respiration, positive, umol CO2 m-2 s-1
	Phi   float64 // initial slope, mol CO2 per mol incident PAR
	Theta float64 // curvature, 0..1
	LMA   float64 // leaf mass per hemisurface area, g m-2
}

// Acclimation gives the trait set of a leaf grown at a light L, percent of full light (leaf-on).
// L is clamped to 1..100. It is one of Constant, TwoSets, PowerLaw.
type Acclimation interface {
	At(light float64) Set
	// Rule names the rule in words for the list of assumptions.
	Rule() string
	acclimation()
}

// Temperature is how rates follow leaf temperature (deg C).
type Temperature struct {
	Ref   float64 // T_ref of every Set
	Opt   float64 // T_opt (June, Evans & Farquhar 2004)
	Width float64 // w of the same, deg C, > 0
	Q10   float64 // of leaf respiration
}

// Calendar says what share of a plant's leaf area is present on a day: Evergreen or Deciduous.
type Calendar interface {
	Share(month time.Month, day int) float64 // 0..1
	calendar()
}
