package scenarios

import "shadeledger/canopy"

// Limit is a limit that the owner or the law sets, as the plan gives it: one of the types below.
type Limit interface{ limit() }

// OpeningLimit is the largest area of one opening, m2, stem to stem.
type OpeningLimit struct{ Area float64 }

// ShareLimit is the largest share of the stand in openings of one entry, 0..1.
type ShareLimit struct{ Share float64 }

// ResidualLimit is the least basal area that stays between openings, m2/ha.
type ResidualLimit struct{ BasalArea float64 }

// CoverLimit is the least crown cover that stays between openings, 0..1.
type CoverLimit struct{ Cover float64 }

// AdjacencyLimit is the largest area of an opening together with the unsecured regeneration that adjoins it, m2.
type AdjacencyLimit struct{ Area, Unsecured float64 }

// BufferLimit is land that openings keep a distance from, m.
type BufferLimit struct {
	Name     string
	Distance float64
	Land     canopy.Land
	File     string // as the plan names it
}

// NoCutLimit is a period in which nothing is felled, both days in.
type NoCutLimit struct{ Period }

func (OpeningLimit) limit()   {}
func (ShareLimit) limit()     {}
func (ResidualLimit) limit()  {}
func (CoverLimit) limit()     {}
func (AdjacencyLimit) limit() {}
func (BufferLimit) limit()    {}
func (NoCutLimit) limit()     {}

// Centres are the places of a treatment's openings; without points they are not known.
type Centres struct {
	File   string // as the plan names it
	Points []Centre
}

// Centre is the middle of one opening, m east and north on the plane that buffers are on.
type Centre struct {
	Name string
	X, Y float64
}

// Water is what the site has of it, for the caution of drought. NaN where not given.
type Water struct {
	Capacity float64     // m of water that plants can take from the soil
	Rain     [12]float64 // mm a month, January first
}
