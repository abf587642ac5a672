package inventory

import (
	"fmt"
	"math"
	"slices"
)

// Bounds of what a stand can be; what lies beyond was mostly meant in another unit. Common practice; the tallest trees
// known are near 115 m, stands above 90 m do not occur where these sheets come from.
const (
	stoutest     = 2.5   // m, diameter
	thinnest     = 0.02  // m, median diameter
	tallest      = 90.0  // m
	breastHeight = 1.3   // m
	densest      = 120.0 // m2/ha
)

// checkEntries faults numbers that are not plausible.
func (r *sheetReader) checkEntries() {
	var diameters []float64
	for _, e := range r.entries {
		if !math.IsNaN(e.dbh) && !e.zero() {
			diameters = append(diameters, e.dbh)
		}
		r.checkEntry(e)
	}
	if len(diameters) == 0 {
		return
	}
	slices.Sort(diameters)
	if m := diameters[len(diameters)/2]; m < thinnest {
		r.fault(Fault{Column: r.titleOf(dbhRole), Value: fmt.Sprintf("median %.3g cm", 100*m),
			Fix: fmt.Sprintf("a median diameter of at least %g cm: which unit was meant?", 100*thinnest)})
	}
}

func (r *sheetReader) checkEntry(e sheetEntry) {
	bad := func(role sheetRole, value, fix string) {
		r.fault(Fault{Line: e.line, Column: r.titleOf(role), Value: value, Fix: fix})
	}
	if e.dbh > stoutest {
		bad(dbhRole, fmt.Sprintf("%.4g m", e.dbh), fmt.Sprintf("a diameter of at most %g m: which unit was meant, mm?", stoutest))
	}
	if e.dbh <= 0 {
		bad(dbhRole, "0", "a diameter above 0")
	}
	if e.basal > densest {
		bad(basalAreaRole, fmt.Sprintf("%.4g m2/ha", e.basal), fmt.Sprintf("at most %g m2/ha: were feet meant (ft2/ac)?", densest))
	}
	if e.height > tallest {
		bad(heightRole, fmt.Sprintf("%.4g m", e.height), fmt.Sprintf("a height of at most %g m: were feet meant?", tallest))
	}
	if e.height <= breastHeight && e.dbh > 0 {
		bad(heightRole, fmt.Sprintf("%.4g m", e.height), fmt.Sprintf("a height above %g m, where the diameter is measured", breastHeight))
	}
	if e.crownBase > tallest || e.crownBase >= e.height {
		bad(crownBaseRole, fmt.Sprintf("%.4g m", e.crownBase), "a crown base below the height, in the unit of its heading")
	}
}

// checkStand faults a basal area no stand has, and a sheet without a class.
func (r *sheetReader) checkStand() {
	if len(r.sheet.Rows) == 0 && len(r.faults) == 0 {
		r.fault(Fault{Fix: "at least one line with a species and trees or basal area"})
	}
	_, basal := r.sums(func(Row) bool { return true })
	if basal > densest {
		r.fault(Fault{Value: fmt.Sprintf("%.4g m2/ha in all", basal),
			Fix: fmt.Sprintf("a stand of at most %g m2/ha: were feet meant, or acres?", densest)})
	}
}
