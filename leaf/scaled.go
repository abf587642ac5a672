package leaf

import "math"

// Factors change a leaf: its light-saturated net rate (and the cap by Rubisco), dark respiration, initial slope and leaf mass per area. 1 leaves it.
type Factors struct{ Amax, Rd, Phi, LMA float64 }

// Scaled is an acclimation whose sets are multiplied at every growth light. The slope is held at 0.125, the most that photosynthesis can do.
func Scaled(a Acclimation, by Factors) Acclimation {
	switch a := a.(type) {
	case Constant:
		return Constant{a.Set.scaled(by)}
	case TwoSets:
		a.Sun, a.Shade = a.Sun.scaled(by), a.Shade.scaled(by)
		return a
	case PowerLaw:
		a.Ref = a.Ref.scaled(by)
		return a
	}
	return a
}

func (s Set) scaled(by Factors) Set {
	out := Set{Rd: s.Rd * by.Rd, Phi: math.Min(mostPhi, s.Phi*by.Phi), Theta: s.Theta, LMA: s.LMA * by.LMA, Cap: s.Cap * by.Amax}
	if s.Cap > 0 {
		out.Ag = s.Ag * by.Amax
		return out
	}
	out.Ag = s.Amax()*by.Amax + out.Rd
	return out
}
