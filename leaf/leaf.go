// Package leaf is the theory of one leaf: light response, temperature, sun and shade traits and
// what lies between them, and the days on which leaves are there. It does not know where light came from.
package leaf

import (
	"fmt"
	"math"
	"time"
)

// Set is one measured or derived leaf trait set, all at the reference temperature.
type Set struct {
	Ag    float64 // gross light-saturated rate, Amax (net) + Rd, umol CO2 m-2 s-1
	Rd    float64 // dark respiration, positive, umol CO2 m-2 s-1
	Phi   float64 // initial slope, mol CO2 per mol incident PAR
	Theta float64 // curvature, 0..1
	LMA   float64 // leaf mass per hemisurface area, g m-2
	Cap   float64 // rate that Rubisco allows, gross, of a biochemical leaf; 0 is none
}

// Acclimation gives the trait set of a leaf grown at a light L, percent of full light (leaf-on).
// L is clamped to 1..100. It is one of Constant, TwoSets, PowerLaw.
type Acclimation interface {
	At(light float64) Set
	// Rule names the rule in words for the list of assumptions.
	Rule() string
	acclimation()
}

// Calendar says what share of a plant's leaf area is present on a day: Evergreen or Deciduous.
type Calendar interface {
	Share(month time.Month, day int) float64 // 0..1
	FullOn(month time.Month, day int) bool   // full leaf: Share is 1
	calendar()
}

// Amax is the net light-saturated rate Ag - Rd, umol CO2 m-2 s-1.
func (s Set) Amax() float64 {
	if s.Cap > 0 {
		return math.Min(s.Ag, s.Cap) - s.Rd
	}
	return s.Ag - s.Rd
}

// Gross is gross assimilation at incident PPFD, umol CO2 m-2 s-1.
func (s Set) Gross(ppfd float64) float64 {
	P := Gross(ppfd, s.Ag, s.Phi, s.Theta)
	if s.Cap > 0 {
		return math.Min(P, s.Cap)
	}
	return P
}

// Net is net assimilation at incident PPFD, umol CO2 m-2 s-1: -Rd in darkness.
func (s Set) Net(ppfd float64) float64 { return s.Gross(ppfd) - s.Rd }

// CompensationPoint is the PPFD of zero net assimilation, umol m-2 s-1; see Response.CompensationPoint.
func (s Set) CompensationPoint() float64 { return s.Response().CompensationPoint() }

// mostPhi is one CO2 per eight photons, mol mol-1.
const mostPhi = 0.125

// Check tells whether the set can stand for a leaf: all finite, Ag > Rd >= 0, Phi > 0,
// Theta 0..1, LMA > 0.
func (s Set) Check() error {
	for _, v := range []float64{s.Ag, s.Rd, s.Phi, s.Theta, s.LMA} {
		if math.IsNaN(v) || math.IsInf(v, 0) {
			return fmt.Errorf("leaf trait set has a value that is not a finite number: %+v", s)
		}
	}
	switch {
	case s.Rd < 0:
		return fmt.Errorf("dark respiration is %g umol m-2 s-1; it is given as a positive cost, 0 or more", s.Rd)
	case s.Ag <= s.Rd:
		return fmt.Errorf("net saturated rate is %g umol m-2 s-1; it must be above 0", s.Ag-s.Rd)
	case s.Phi <= 0 || s.Phi > mostPhi:
		return fmt.Errorf("initial slope is %g mol mol-1; it must be above 0 and at most 0.125, one CO2 per eight photons", s.Phi)
	case s.Theta < 0 || s.Theta > 1:
		return fmt.Errorf("curvature is %g; it must be 0 to 1", s.Theta)
	case s.LMA <= 0:
		return fmt.Errorf("leaf mass per area is %g g m-2; it must be above 0", s.LMA)
	}
	return nil
}
