package scenarios

import (
	"math"
	"time"

	"shadeledger/leaf"
	"shadeledger/radiation/weather"
	"shadeledger/scenarios/ledger"
)

// LeafOut is the day on which leaves begin to come out; false for evergreens.
func LeafOut(c leaf.Calendar) (Date, bool) {
	d, ok := c.(leaf.Deciduous)
	return Date(d.Out), ok
}

// Leafing is leaf-out and full leaf of the deciduous layer with the most leaves; false where less than half of the leaf area is
// deciduous, for then the stand is never bare.
func Leafing(layers []Layer) (out, full Date, ok bool) {
	most, falling, all := 0.0, 0.0, 0.0
	for _, l := range layers {
		all += l.LAI
		d, sheds := l.Calendar.(leaf.Deciduous)
		if !sheds {
			continue
		}
		falling += l.LAI
		if l.LAI > most {
			out, full, most = Date(d.Out), Date(d.Full), l.LAI
		}
	}
	return out, full, falling > 0 && falling >= all/2
}

// halfYear is how far before full leaf the spring of a stand begins, days.
const halfYear = 182

// before is the half year that ends the day before a date.
func before(d Date) Period {
	full := leaf.Date(d)
	return Period{Date(full.Shift(-halfYear)), Date(full.Shift(-1))}
}

// DaysBefore is how many days the first date lies before the second, the nearer way round the year: -182 to 182.
func (d Date) DaysBefore(o Date) int {
	place := func(x Date) int { return time.Date(2025, x.Month, x.Day, 0, 0, 0, 0, time.UTC).YearDay() }
	n := (place(o) - place(d) + 365) % 365
	if n > halfYear {
		n -= 365
	}
	return n
}

// gained sums the days of a mean year on which a ledger gains, g C.
func (r *runner) gained(a *ledger.Account, days []bool) (sum float64) {
	for d, in := range days {
		if in {
			sum += math.Max(0, a.Days[d].Net()) * r.above.Series.Days[d].Weight / float64(r.above.Series.Years)
		}
	}
	return sum
}

// Dry is the water balance of the dry quarter, July to September, January to March south of the equator.
type Dry struct {
	Months       string
	Rain, Demand float64 // mm
}

// Turc's relation for potential evaporation, mm d-1: 0.013 T / (T + 15) (Rs + 50), T in deg C, Rs in cal cm-2 d-1, where the air is not dry
// (Turc 1961, Annales agronomiques 12:13-49, from memory); 1 MJ m-2 is 23.885 cal cm-2.
const (
	turcSlope, turcHalf, turcBase = 0.013, 15.0, 50.0
	caloriesPerMJ                 = 23.885
)

var monthDays = [12]float64{31, 28.25, 31, 30, 31, 30, 31, 31, 30, 31, 30, 31}

// DryQuarter sets rain against evaporation; false where the plan gives no rain or no radiation by month.
func (p *Plan) DryQuarter() (Dry, bool) {
	n, ok := p.Weather.(*weather.Normals)
	if !ok || math.IsNaN(n.Global[0]) || math.IsNaN(p.Water.Rain[0]) {
		return Dry{}, false
	}
	first, d := 6, Dry{Months: "July to September"}
	if p.Site.Latitude < 0 {
		first, d.Months = 0, "January to March"
	}
	for m := first; m < first+3; m++ {
		d.Rain += p.Water.Rain[m]
		if T := n.Mean[m]; T > 0 {
			d.Demand += monthDays[m] * turcSlope * T / (T + turcHalf) * (caloriesPerMJ*n.Global[m] + turcBase)
		}
	}
	return d, true
}
