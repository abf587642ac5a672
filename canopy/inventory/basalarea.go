package inventory

import (
	"math"

	"shadeledger/leaf/traits"
)

// UsualSlenderness is the H:D that gives a diameter to basal area without diameters (common practice for closed stands).
const UsualSlenderness = 80

// FromBasalArea makes one class of a basal area, m2/ha, of a species in a stand of a dominant height, m: its diameter is the height
// over 80, its trees what fills the basal area.
func FromBasalArea(s *traits.Species, basalArea, height float64) Class {
	dbh := height / UsualSlenderness
	return Class{Species: s, DBH: dbh, PerHa: basalArea / StemArea(dbh), Height: math.NaN(), CrownBase: math.NaN(), DBHTaken: true}
}
