package report

import (
	"fmt"
	"math"
	"strings"
	"time"

	"github.com/jedib0t/go-pretty/v6/table"

	"shadeledger/scenarios"
	"shadeledger/scenarios/decide"
	"shadeledger/scenarios/ledger"
)

// placeRow is a zone, or ground of a class that is no zone.
type placeRow struct {
	treatment, species, class string
	zone                      int // 0 for none
	share, area               float64
	bearing, distance, light  float64
	months                    []time.Month
}

var placeColumns = []column[placeRow]{
	words("treatment", func(r *placeRow) string { return r.treatment }),
	words("species", func(r *placeRow) string { return r.species }),
	figure("zone", func(r *placeRow) float64 {
		if r.zone == 0 {
			return math.NaN()
		}
		return float64(r.zone)
	}),
	words("class", func(r *placeRow) string { return r.class }),
	figure("share_pct", func(r *placeRow) float64 { return 100 * r.share }),
	figure("area_m2", func(r *placeRow) float64 { return r.area }),
	figure("bearing_deg", func(r *placeRow) float64 { return r.bearing * 180 / math.Pi }),
	figure("distance_m", func(r *placeRow) float64 { return r.distance }),
	figure("light_pct", func(r *placeRow) float64 { return r.light }),
	words("limiting_months", func(r *placeRow) string { return monthNames(r.months) }),
}

func monthNames(list []time.Month) string {
	var out []string
	for _, m := range list {
		out = append(out, m.String()[:3])
	}
	return strings.Join(out, " ")
}

// placeRows are the zones of each treatment and seedling, then the ground of the other classes.
func placeRows(p *decide.Places) (out []placeRow) {
	nan := math.NaN()
	for _, s := range p.Shares {
		for _, z := range p.Zones {
			if z.Treatment == s.Treatment && z.Species == s.Species {
				out = append(out, placeRow{z.Treatment, z.Species, ledger.Comfortable.String(), z.Number, z.Share, z.Area, z.Bearing, z.Distance, z.Light, z.Limiting})
			}
		}
		for _, c := range []ledger.Class{ledger.Marginal, ledger.Below} {
			if s.Of[c] > 0 {
				out = append(out, placeRow{s.Treatment, s.Species, c.String(), 0, s.Of[c], nan, nan, nan, s.Light[c], nil})
			}
		}
	}
	return out
}

// Places writes the plant-here zones of every opening.
func Places(o Output, plan *scenarios.Plan, p *decide.Places) error {
	n := planNotes(plan)
	if o.Format != Table {
		return data(o, n, placeColumns, placeRows(p))
	}
	out := &printer{w: o.Out}
	out.f("%s\n%s\n", Name(plan), seasonLine(plan))
	hang(out, "", "Share of the ground inside the crowns that is comfortable, marginal and below, and the pieces of comfortable ground with the way to their middle from the opening's centre"+magnetic(plan)+".")
	t := newTable("treatment", "seedling", "comf. %", "marg. %", "below %", "plant here", "light %", "short months")
	last := ""
	for _, s := range p.Shares {
		name := s.Treatment
		if name == last {
			name = ""
		}
		last = s.Treatment
		row := table.Row{name, s.Species, whole(100 * s.Of[ledger.Comfortable]), whole(100 * s.Of[ledger.Marginal]), whole(100 * s.Of[ledger.Below])}
		zones := 0
		for _, z := range p.Zones {
			if z.Treatment != s.Treatment || z.Species != s.Species {
				continue
			}
			if zones++; zones > 1 {
				row = table.Row{"", "", "", "", ""}
			}
			t.AppendRow(append(row, way(plan, &z, o.Units), whole(z.Light), monthNames(z.Limiting)))
		}
		if zones == 0 {
			t.AppendRow(append(row, "nowhere", "", ""))
		}
	}
	if out.err == nil {
		out.err = render(o.Out, t, 3, 4, 5, 7)
	}
	turnedLines(out, p)
	if len(p.Whole) > 0 {
		hang(out, "", "Without an opening, so without places: "+strings.Join(p.Whole, ", ")+".")
	}
	hang(out, "", "A zone may reach beyond the crowns, under the border. Short months: months of the season in which the seedling at the zone's middle spends more than it earns. Ranges: shadeledger spread.")
	out.f("\n")
	if out.err != nil {
		return out.err
	}
	return n.write(o.Out)
}

// magnetic tells of the second bearing.
func magnetic(p *scenarios.Plan) string {
	if p.Declination == 0 {
		return ""
	}
	return ", true and, behind the stroke, magnetic"
}

// way is a zone as a crew would walk to it: area, distance and bearing rounded.
func way(p *scenarios.Plan, z *decide.Zone, u scenarios.Units) string {
	step := 1.0 // m
	unit := "m"
	d := z.Distance
	if u == scenarios.US {
		d, unit, step = d/0.3048, "ft", 5
	} else if d > 20 {
		step = 5
	}
	d = math.Round(d/step) * step
	if d == 0 {
		return area(z.Area, u) + " round the centre"
	}
	round := func(rad float64) float64 {
		return math.Mod(math.Round(math.Mod(rad*180/math.Pi+360, 360)/5)*5, 360)
	}
	s := fmt.Sprintf("%s, %.0f %s towards %.0f°", area(z.Area, u), d, unit, round(z.Bearing))
	if p.Declination != 0 {
		s += fmt.Sprintf("/%.0f°", round(z.Bearing-p.Declination))
	}
	return s
}

// turnedLines tells the best and the worst bearing of every seedling in openings that were turned.
func turnedLines(p *printer, places *decide.Places) {
	for _, s := range places.Shares {
		if !math.IsNaN(s.Best) {
			p.f("%s, %s: long side towards %.0f° best (%.0f %% comfortable), %.0f° worst (%.0f %%)\n", s.Treatment, s.Species,
				s.Best*180/math.Pi, 100*s.BestShare, s.Worst*180/math.Pi, 100*s.LeastGood)
		}
	}
}
