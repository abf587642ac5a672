// Package inventory brings what a cruise counted to trees by class, and trees to leaf area, wood and crowns: stand
// tables as foresters keep them, published allometry, the spread of leaves over crowns, and thinning. It knows no
// plans and no light.
//
// Metres, square metres and hectares inside. Leaf and wood areas are hemisurface.
package inventory

import (
	"math"

	"shadeledger/leaf/traits"
)

// Class is trees alike: one species and diameter class of a stand, or one tree of a list.
type Class struct {
	Species   *traits.Species // never nil
	DBH       float64         // m, at breast height, the class mid-point; above 0
	PerHa     float64         // trees per hectare, >= 0
	Height    float64         // m; NaN where not measured
	CrownBase float64         // m; NaN where not measured
	DBHTaken  bool            // diameter and trees are taken from height and basal area, none was measured
}

// BasalArea of the class, m2/ha: pi/4 DBH^2 for each tree.
func (c Class) BasalArea() float64 { return StemArea(c.DBH) * c.PerHa }

// StemArea is the cross-section of a stem, m2, at a diameter, m.
func StemArea(dbh float64) float64 { return math.Pi / 4 * dbh * dbh }
