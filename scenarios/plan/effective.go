package plan

import (
	"bytes"
	"encoding/json"
	"fmt"
	"math"
	"reflect"
	"strconv"
	"strings"
	"time"

	"shadeledger/canopy"
	"shadeledger/radiation"
	"shadeledger/radiation/weather"
	"shadeledger/scenarios"
)

// writer sets a plan as YAML text, one key a line, every number such that it is read back to the same bits.
type writer struct {
	b      strings.Builder
	doubts map[string]scenarios.Doubt
}

// Effective writes a plan with every value explicit. Read from the same folder it gives the same plan, with nothing
// assumed but the powers of a library species that has one measured set.
func Effective(p *scenarios.Plan) []byte {
	w := &writer{doubts: map[string]scenarios.Doubt{}}
	for _, d := range p.Doubts {
		w.doubts[d.Key] = d
	}
	w.line(0, "title", quote(p.Title))
	w.line(0, "units", map[scenarios.Units]string{scenarios.Metric: "metric", scenarios.US: "us"}[p.Units])
	w.facts(p, 0, "region")
	w.site(p)
	w.weather(p)
	if p.Snow.Depth > 0 {
		w.line(0, "snow", fmt.Sprintf("{from: %s, to: %s, depth: %s}", day(p.Snow.From), day(p.Snow.To), metres(p.Snow.Depth)))
	}
	w.line(0, "season", fmt.Sprintf("{from: %s, to: %s}", day(p.Season.From), day(p.Season.To)))
	w.stand(p)
	w.seedlings(p)
	w.treatments(p)
	w.rest(p)
	return []byte(w.b.String())
}

// line writes one key; an empty value opens a block.
func (w *writer) line(depth int, key, value string) {
	w.b.WriteString(strings.Repeat("  ", depth) + key + ":")
	if value != "" {
		w.b.WriteString(" " + value)
	}
	w.b.WriteByte('\n')
}

// facts writes the carried values of the given keys.
func (w *writer) facts(p *scenarios.Plan, depth int, keys ...string) {
	for _, key := range keys {
		for _, f := range p.Facts {
			if f.Key == key {
				value := f.Value
				if k, _ := Find(key); k.Kind != List {
					value = quote(value)
				}
				w.line(depth, key[strings.LastIndex(key, ".")+1:], value)
			}
		}
	}
}

// block opens a block if one of the carried values stands in it, and writes them.
func (w *writer) block(p *scenarios.Plan, depth int, path string) {
	var keys []string
	for _, name := range children(path) {
		for _, f := range p.Facts {
			if f.Key == join(path, name) {
				keys = append(keys, f.Key)
			}
		}
	}
	if len(keys) > 0 {
		w.line(depth, path[strings.LastIndex(path, ".")+1:], "")
		w.facts(p, depth+1, keys...)
	}
}

func quote(s string) string {
	var b bytes.Buffer
	e := json.NewEncoder(&b)
	e.SetEscapeHTML(false)
	if err := e.Encode(s); err != nil {
		panic(err) // a text
	}
	return strings.TrimSuffix(b.String(), "\n")
}

func number(x float64) string  { return strconv.FormatFloat(x, 'g', -1, 64) }
func metres(x float64) string  { return number(x) + " m" }
func degrees(x float64) string { return exact(x, x/rad, func(v float64) float64 { return v * rad }) }

// steepness writes a slope in degrees, or in percent where only that gives the same bits.
func steepness(x float64) string {
	atan := func(v float64) float64 { return math.Atan(v / 100) }
	percent := exact(x, 100*math.Tan(x), atan)
	if v, err := strconv.ParseFloat(percent, 64); err == nil && atan(v) == x && len(percent) < len(degrees(x)) {
		return percent + " %"
	}
	return degrees(x) + " deg"
}

// exact is the shortest decimal near a guess that a conversion brings to x, to the last bit where there is one.
func exact(x, guess float64, convert func(float64) float64) string {
	for precision := 1; precision <= 17; precision++ {
		s := strconv.FormatFloat(guess, 'g', precision, 64)
		if v, err := strconv.ParseFloat(s, 64); err == nil && convert(v) == x {
			return number(v)
		}
	}
	up, down := guess, guess
	for range 8 {
		up, down = math.Nextafter(up, math.Inf(1)), math.Nextafter(down, math.Inf(-1))
		for _, v := range []float64{up, down} {
			if convert(v) == x {
				return number(v)
			}
		}
	}
	return number(guess)
}

func day(d scenarios.Date) string { return fmt.Sprintf("%02d-%02d", int(d.Month), d.Day) }

// given is a value with the doubt that the plan gave it.
func (w *writer) given(path string, x float64, write func(float64) string) string {
	d, ok := w.doubts[path]
	switch {
	case !ok:
		return write(x)
	case d.StandardError > 0:
		return write(x) + " +- " + write(d.StandardError)
	}
	return fmt.Sprintf("{low: %s, best: %s, high: %s}", write(d.Low), write(x), write(d.High))
}

func (w *writer) site(p *scenarios.Plan) {
	w.line(0, "site", "")
	w.line(1, "latitude", w.given("site.latitude", p.Site.Latitude, degrees))
	w.line(1, "longitude", w.given("site.longitude", p.Site.Longitude, degrees))
	w.line(1, "utc_offset", w.given("site.utc_offset", p.Site.UTCOffset, number))
	w.line(1, "elevation", w.given("site.elevation", p.Site.Elevation, metres))
	deg := func(x float64) string { return degrees(x) + " deg" }
	slope := w.given("site.slope", p.Ground.Slope, steepness)
	if d := w.doubts["site.slope"]; d.StandardError > 0 {
		slope = steepness(d.Best) + " +- " + deg(d.StandardError) // a standard error in percent would count from the value
	}
	w.line(1, "slope", slope)
	w.line(1, "aspect", w.given("site.aspect", p.Ground.Aspect, degrees))
	w.line(1, "declination", w.given("site.declination", p.Declination, deg))
	if len(p.Horizon.Azimuth) > 0 {
		var pairs []string
		for i, a := range p.Horizon.Azimuth {
			pairs = append(pairs, fmt.Sprintf("[%s, %s]", degrees(a), degrees(p.Horizon.Elevation[i])))
		}
		w.line(1, "horizon", "["+strings.Join(pairs, ", ")+"]")
	}
	var frosts []string
	if p.Frost.Last.Month > 0 {
		frosts = append(frosts, "last: "+day(p.Frost.Last))
	}
	if p.Frost.First.Month > 0 {
		frosts = append(frosts, "first: "+day(p.Frost.First))
	}
	if frosts != nil {
		w.line(1, "frost", "{"+strings.Join(frosts, ", ")+"}")
	}
	w.block(p, 1, "site.soil")
}

func (w *writer) weather(p *scenarios.Plan) {
	w.line(0, "weather", "")
	w.line(1, "par_fraction", w.given("weather.par_fraction", p.Par.Fraction, number))
	w.facts(p, 1, "weather.co2", "weather.source")
	gap := func(d time.Duration) string {
		return w.given("weather.max_gap", d.Hours(), func(h float64) string { return number(h) + " h" })
	}
	switch s := p.Weather.(type) {
	case *weather.Records:
		w.line(1, "hourly", quote(p.WeatherFile))
		w.line(1, "stamp", map[weather.Stamp]string{weather.StampStart: "start", weather.StampMiddle: "middle", weather.StampEnd: "end"}[s.Stamp])
		w.line(1, "max_gap", gap(s.MaxGap))
	case *weather.Daily:
		w.line(1, "daily", quote(p.WeatherFile))
		w.line(1, "max_gap", gap(s.MaxGap))
	case *weather.Normals:
		w.normals(p, s)
	}
}

func (w *writer) normals(p *scenarios.Plan, n *weather.Normals) {
	w.line(1, "normals", "")
	w.line(2, "temperature_unit", "C")
	list := func(key string, x [12]float64) {
		if math.IsNaN(x[0]) {
			return
		}
		var parts []string
		for m, v := range x {
			parts = append(parts, w.given(fmt.Sprintf("weather.normals.%s[%d]", key, m), v, number))
		}
		w.line(2, key, "["+strings.Join(parts, ", ")+"]")
	}
	list("mean", n.Mean)
	list("min", n.Min)
	list("max", n.Max)
	if !math.IsNaN(n.Global[0]) {
		w.line(2, "radiation_unit", "MJ m-2 d-1")
	}
	list("radiation", n.Global)
	list("sunshine_share", n.SunshineShare)
	list("diffuse_share", n.DiffuseShare)
	w.facts(p, 2, "weather.normals.rain_unit", "weather.normals.rain")
}

func (w *writer) treatments(p *scenarios.Plan) {
	w.line(0, "treatments", "")
	for i, t := range p.Treatments {
		path := fmt.Sprintf("treatments[%d]", i)
		w.b.WriteString("  - name: " + quote(t.Name) + "\n")
		w.line(2, "matrix", "")
		w.line(3, "layers", w.layers(t.Matrix, path+".matrix.layers"))
		w.line(2, "understory", kept(p.Stand.Understory, t.Understory))
		c, ok := t.Opening.(scenarios.Cleared)
		if !ok {
			continue
		}
		taped, measured := c.Stems, "stems"
		if in, err := canopy.Inset(c.Stems, p.Stand.CrownRadius); err != nil || !reflect.DeepEqual(in, c.Crowns) {
			taped, measured = c.Crowns, "crowns"
		}
		w.line(2, "opening", w.outline(taped, c.File, path+".opening"))
		w.line(2, "measured", measured)
		w.line(2, "count", w.given(path+".count", float64(t.Count), number))
		if t.Centres.File != "" {
			w.line(2, "centres", quote(t.Centres.File))
		}
		if len(c.Inside) > 0 {
			w.line(2, "inside", "{layers: "+w.layers(c.Inside, path+".inside.layers")+"}")
		} else {
			w.line(2, "inside", "bare")
		}
	}
}

// kept is the understory key of a treatment.
func kept(all, left []scenarios.Understory) string {
	switch len(left) {
	case len(all):
		return "keep"
	case 0:
		return "remove"
	}
	stays := map[string]bool{}
	for _, u := range left {
		stays[u.Name] = true
	}
	var gone []string
	for _, u := range all {
		if !stays[u.Name] {
			gone = append(gone, quote(u.Name)+": remove")
		}
	}
	return "{" + strings.Join(gone, ", ") + "}"
}

func (w *writer) outline(o canopy.Outline, file, path string) string {
	size := func(shape, key string, x float64) string {
		return key + ": " + w.given(path+"."+shape+"."+key, x, metres)
	}
	switch o := o.(type) {
	case canopy.Circle:
		return "{circle: {" + size("circle", "diameter", o.Diameter()) + "}}"
	case canopy.Ellipse:
		l, b, φ := o.Sides()
		return "{ellipse: {" + size("ellipse", "length", l) + ", " + size("ellipse", "width", b) + ", bearing: " + degrees(φ) + "}}"
	case canopy.Strip:
		l, b, φ := o.Sides()
		return "{strip: {" + size("strip", "length", l) + ", " + size("strip", "width", b) + ", bearing: " + degrees(φ) + "}}"
	}
	return "{polygon: " + quote(file) + "}"
}

func (w *writer) rest(p *scenarios.Plan) {
	if len(p.Stations) == 0 {
		w.line(0, "stations", "default")
	} else {
		w.line(0, "stations", "")
		for i, s := range p.Stations {
			path := fmt.Sprintf("stations[%d]", i)
			w.b.WriteString("  - {name: " + quote(s.Name) + ", bearing: " + w.given(path+".bearing", s.Bearing, degrees) +
				", distance: " + w.given(path+".distance", s.Distance, metres) + "}\n")
		}
	}
	w.line(0, "sampling", "")
	w.line(1, "step", number(p.Sampling.Step.Minutes())+" min")
	w.line(1, "grid", metres(p.Sampling.Grid))
	var heights []string
	for _, h := range p.Sampling.Heights {
		heights = append(heights, metres(h))
	}
	w.line(1, "heights", "["+strings.Join(heights, ", ")+"]")
	sky := "all-weather"
	switch p.Sampling.Sky.(type) {
	case radiation.Overcast:
		sky = "overcast"
	case radiation.Uniform:
		sky = "uniform"
	}
	w.line(1, "sky", sky)
	dormancy := "none"
	if p.Sampling.Dormancy.Lag > 0 {
		dormancy = "lagged"
	}
	w.line(1, "dormancy", dormancy)
	w.line(0, "years", "")
	w.line(1, "horizon", fmt.Sprint(p.Years.Horizon))
	w.line(1, "side_closure", w.given("years.side_closure", p.Years.Closing[1], func(x float64) string { return number(x) + " m/y" }))
	if p.Years.Regrowth[1] > 0 {
		w.line(1, "leaf_regrowth", w.given("years.leaf_regrowth", p.Years.Regrowth[1], number))
	}
	size := fmt.Sprintf("{share: %s %%, up_to: %s", number(100*p.Size.Share), metres(p.Size.UpTo))
	if p.Size.Against != "" {
		size += ", against: " + quote(p.Size.Against)
	}
	w.line(0, "size", size+"}")
	w.line(0, "draws", fmt.Sprintf("{count: %d, seed: %d}", p.Draws.Count, p.Draws.Seed))
	w.limits(p)
	w.cautions(p)
	r := p.Record
	w.line(0, "record", fmt.Sprintf("{forest: %s, stand: %s, owner_goal: %s, preparer: %s, licence: %s, date: %s}",
		quote(r.Forest), quote(r.Stand), quote(r.OwnerGoal), quote(r.Preparer), quote(r.Licence), quote(r.Date)))
}

func (w *writer) cautions(p *scenarios.Plan) {
	open := true
	for _, c := range p.Cautions {
		if c.State == openState {
			continue
		}
		if open {
			w.line(0, "cautions", "")
			open = false
		}
		w.line(1, c.Key, fmt.Sprintf("{state: %s, by: %s, note: %s}", c.State, quote(c.By), quote(c.Note)))
	}
}
