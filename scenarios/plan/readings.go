package plan

import (
	"fmt"
	"math"
	"strings"
	"time"

	"shadeledger/canopy/correct"
	"shadeledger/radiation"
	"shadeledger/scenarios"
)

// readings reads what corrects the leaf area: paired light, closure or both.
func (r *reader) readings(f map[string]val, p *scenarios.Plan) {
	to := &p.Stand.Readings
	if v := f["readings"]; v.present() {
		if name, data, ok := r.open(v); ok {
			to.File = name
			to.Pairs = r.pairs(name, data, p.Site)
			if len(to.Pairs) < 2 && len(r.faults) == 0 {
				r.fault(v, name, "at least 2 pairs of readings; 12 are the floor for trust")
			}
		}
	}
	r.closure(f["closure_readings"], to)
}

var (
	skies      = map[string]correct.Sky{"overcast": correct.Overcast, "clear": correct.Clear, "mixed": correct.Mixed}
	quantities = map[string]correct.Quantity{"ppfd": correct.PPFD, "": correct.PPFD, "lux": correct.Lux}
	yesNo      = map[string]bool{"yes": true, "no": false, "": false}
)

// pairs reads a file of paired light readings at a site.
func (r *reader) pairs(name string, data []byte, site radiation.Site) (out []scenarios.LightReading) {
	t, ok := r.table(name, data, []string{"time", "below", "above", "height", "sky"}, []string{"point", "quantity", "above_shrubs"})
	if !ok {
		return nil
	}
	point, when, below, above := t.column("point"), t.column("time"), t.column("below"), t.column("above")
	quantity, height, sky, shrubs := t.column("quantity"), t.column("height"), t.column("sky"), t.column("above_shrubs")
	var c clock
	for t.row() {
		var x scenarios.LightReading
		x.Point = strings.Clone(t.cell(point))
		if x.Point == "" {
			x.Point = fmt.Sprintf("line %d", t.line)
		}
		if x.Time, ok = c.moment(t.cell(when)); !ok {
			t.fault(when.name, strings.Clone(t.cell(when)), "a time as 2026-07-11T10:30, local standard time")
		}
		x.Below, x.Above = t.number(below), t.number(above)
		for _, v := range []struct {
			c column
			x float64
		}{{below, x.Below}, {above, x.Above}} {
			if v.x < 0 {
				t.fault(v.c.name, strings.Clone(t.cell(v.c)), "light, 0 or more")
			}
		}
		if x.Height = t.number(height); !(x.Height >= 0 && x.Height <= 60) {
			t.fault(height.name, strings.Clone(t.cell(height)), "height of the sensor above the ground, 0 to 60 m")
		}
		var known [3]bool
		x.Sky, known[0] = skies[t.cell(sky)]
		x.Quantity, known[1] = quantities[t.cell(quantity)]
		x.AboveShrubs, known[2] = yesNo[t.cell(shrubs)]
		for i, want := range []struct {
			c   column
			fix string
		}{{sky, "overcast, clear or mixed"}, {quantity, "ppfd or lux"}, {shrubs, "yes or no"}} {
			if !known[i] {
				t.fault(want.c.name, strings.Clone(t.cell(want.c)), want.fix)
			}
		}
		x.Midday = math.Abs(hourAngle(x.Time, site)) < middayHours
		out = append(out, x)
	}
	return out
}

// middayHours is how near to the sun's noon a reading counts as midday (common practice).
const middayHours = 2

// hourAngle is the sun's time less noon, h, at a moment of local standard time.
func hourAngle(t time.Time, s radiation.Site) float64 {
	utc := t.Add(-time.Duration(s.UTCOffset * float64(time.Hour)))
	return radiation.NewHorizontal(s).HourAngle(radiation.At(utc)) / rad / 15
}

// closure reads canopy closure or openness, percent at points.
func (r *reader) closure(v val, to *scenarios.Readings) {
	if v.node == nil {
		return
	}
	f := r.fields(v)
	kind, _ := r.choice(r.need(v, f, "kind"))
	to.Instrument, _ = r.text(f["instrument"])
	items := r.items(r.need(v, f, "values"))
	for _, item := range items {
		x, ok := r.number(item)
		if !ok {
			continue
		}
		if kind == "closed" {
			x = 100 - x
		}
		if !(x > 0 && x <= 100) {
			r.fault(item, "", "percent, with some sky open")
			continue
		}
		to.Openness = append(to.Openness, x/100)
	}
	if len(items) == 1 {
		r.fault(f["values"], describe(f["values"].node), "at least 2 values; 8 points are usual")
	}
}

// ReadReadings reads a file of paired light readings at a site.
func ReadReadings(path string, site radiation.Site) (scenarios.Readings, []Fault) {
	data, err := load(path, largestData)
	if err != nil {
		return scenarios.Readings{}, []Fault{{File: path, Fix: explain(err, largestData, "check the name")}}
	}
	r := &reader{file: path}
	out := scenarios.Readings{File: path, Pairs: r.pairs(path, data, site)}
	if len(r.faults) == 0 && len(out.Pairs) < 2 {
		r.faults = append(r.faults, Fault{File: path, Fix: "at least 2 pairs of readings; 12 are the floor for trust"})
	}
	return out, sortFaults(r.faults)
}
