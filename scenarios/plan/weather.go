package plan

import (
	"fmt"
	"math"
	"strings"
	"time"

	"shadeledger/radiation/weather"
	"shadeledger/scenarios"
)

// normalsRadiation brings a radiation unit to MJ m-2 d-1.
var normalsRadiation = map[string]float64{"MJ m-2 d-1": 1, "kWh m-2 d-1": 3.6, "W m-2": 0.0864}

// usualCO2 is that of the years around 2020, ppm (common practice).
const usualCO2 = 420

func (r *reader) weather(v val, p *scenarios.Plan) {
	f := r.fields(v)
	if v.node == nil {
		return
	}
	p.Par.Fraction = 0.45
	x, ok := r.number(f["par_fraction"])
	p.Par.Fraction = r.or(x, ok, f["par_fraction"], "weather.par_fraction", 0.45, "0.45 of global energy", "common practice; measured years give 0.43 to 0.47")
	r.co2 = usualCO2
	if x, ok := r.quantity(f["co2"]); ok {
		r.co2 = x
	}
	r.text(f["source"])
	r.carry(f["co2"], f["source"])
	stamps := map[string]weather.Stamp{"start": weather.StampStart, "middle": weather.StampMiddle, "end": weather.StampEnd}
	stamp, given := r.choice(f["stamp"])
	if !given && f["hourly"].present() && !f["stamp"].present() {
		r.assume("weather.stamp", "start", "a stamp names the start of its interval")
	}
	gap := time.Duration(0)
	if h, ok := r.quantity(f["max_gap"]); ok {
		gap = time.Duration(h * float64(time.Hour))
	}
	kinds := 0
	for _, k := range []string{"hourly", "daily", "normals"} {
		if f[k].present() {
			kinds++
		}
	}
	if kinds != 1 {
		r.fault(val{node: v.node, at: v.at, path: "weather"}, fmt.Sprintf("%d kinds of weather", kinds), "give one of hourly, daily and normals")
		return
	}
	switch {
	case f["hourly"].present():
		if name, data, ok := r.open(f["hourly"]); ok {
			rows := r.hourly(name, data)
			r.source(f["hourly"], name, &weather.Records{Rows: rows, Stamp: stamps[stamp], MaxGap: gap}, p)
		}
	case f["daily"].present():
		if name, data, ok := r.open(f["daily"]); ok {
			r.source(f["daily"], name, &weather.Daily{Rows: r.daily(name, data), MaxGap: gap}, p)
		}
	default:
		if n := r.normals(f["normals"], p); n != nil {
			r.source(f["normals"], "", n, p)
		}
	}
	p.WeatherFile = fileNamed(f)
}

// fileNamed is the weather file as the plan names it.
func fileNamed(f map[string]val) string {
	for _, k := range []string{"hourly", "daily"} {
		if v := f[k]; v.scalar() {
			return v.node.Value
		}
	}
	return ""
}

// open loads a file that a key names.
func (r *reader) open(v val) (name string, data []byte, ok bool) {
	name, ok = r.single(v)
	if !ok {
		return "", nil, false
	}
	path := name
	if _, set := overrideOf(v.node); set {
		path = fromHere + name
	}
	data, err := r.files(path)
	if err != nil {
		r.fault(v, name, explain(err, largestData, "check the name; it counts from the folder of the plan, in --set from the current folder"))
		return "", nil, false
	}
	return name, data, true
}

// source checks weather against the site and keeps it.
func (r *reader) source(v val, name string, s weather.Source, p *scenarios.Plan) {
	for _, f := range r.faults {
		if f.File == name || strings.HasPrefix(f.Key, "site.l") || strings.HasPrefix(f.Key, "site.utc") || strings.HasPrefix(f.Key, v.path) {
			return // a fault in the place or the rows would only breed more
		}
	}
	for _, problem := range s.Check(p.Site, p.Sampling.Step) {
		r.problem(name, v, problem)
	}
	p.Weather = s
}

func (r *reader) normals(v val, p *scenarios.Plan) *weather.Normals {
	f := r.fields(v)
	if len(f) == 0 {
		r.fault(v, "", "give mean, min, max and radiation or sunshine_share, twelve numbers each")
		return nil
	}
	n := &weather.Normals{}
	unit, _ := r.choice(r.need(v, f, "temperature_unit"))
	celsius := func(x float64) float64 {
		if unit == "F" {
			return (x - 32) * 5 / 9
		}
		return x
	}
	r.twelve(r.need(v, f, "mean"), &n.Mean, celsius)
	r.twelve(r.need(v, f, "min"), &n.Min, celsius)
	r.twelve(r.need(v, f, "max"), &n.Max, celsius)
	same := func(x float64) float64 { return x }
	for _, x := range []*[12]float64{&n.Global, &n.SunshineShare, &n.DiffuseShare} {
		for m := range x {
			x[m] = math.NaN()
		}
	}
	switch {
	case f["radiation"].present() && f["sunshine_share"].present():
		r.fault(f["sunshine_share"], "", "radiation or sunshine_share, not both")
	case f["radiation"].present():
		u, _ := r.choice(r.need(v, f, "radiation_unit"))
		r.twelve(f["radiation"], &n.Global, func(x float64) float64 { return x * normalsRadiation[u] })
	case f["sunshine_share"].present():
		r.twelve(f["sunshine_share"], &n.SunshineShare, same)
	default:
		r.need(v, f, "radiation")
	}
	if f["diffuse_share"].present() {
		r.twelve(f["diffuse_share"], &n.DiffuseShare, same)
	}
	if f["rain"].present() {
		unit, _ := r.choice(r.need(v, f, "rain_unit"))
		r.twelve(f["rain"], &p.Water.Rain, func(x float64) float64 { return x * rainUnits[unit] })
		r.carry(f["rain_unit"], f["rain"])
	}
	return n
}

// twelve reads a month's list.
func (r *reader) twelve(v val, out *[12]float64, convert func(float64) float64) {
	if v.node == nil {
		return
	}
	items := r.items(v)
	if len(items) != 12 {
		r.fault(v, fmt.Sprintf("%d numbers", len(items)), "twelve numbers, January first")
		return
	}
	for m, item := range items {
		if x, ok := r.number(item); ok {
			out[m] = convert(x)
		}
	}
}
