package plan

import (
	"bytes"
	"errors"
	"fmt"
	"io"
	"io/fs"
	"math"
	"os"
	"path/filepath"
	"strings"
	"time"

	"go.yaml.in/yaml/v4"

	"shadeledger/canopy"
	"shadeledger/leaf"
	"shadeledger/radiation"
	"shadeledger/radiation/weather"
	"shadeledger/scenarios"
)

// Largest files that are read, bytes: a plan of text, and some decades of half-hourly weather.
const (
	largestPlan = 4 << 20
	largestData = 256 << 20
)

// opener opens a file that a plan names, by its path relative to the plan.
type opener func(name string) ([]byte, error)

// Options of Read.
type Options struct {
	Set []string // KEY=VALUE, applied to the text before it is checked
}

// Read reads a plan, a file or a folder that holds plan.yaml. Faults are all that is wrong; the plan is nil if
// there is one.
func Read(path string, opts Options) (*scenarios.Plan, []Fault) {
	file := path
	if info, err := os.Stat(path); err == nil && info.IsDir() {
		file = filepath.Join(path, "plan.yaml")
	}
	data, err := load(file, largestPlan)
	if err != nil {
		return nil, []Fault{{File: file, Fix: explain(err, largestPlan, "check the name, or write a plan with: shadeledger start DIR")}}
	}
	dir := filepath.Dir(file)
	return parse(file, data, opts, func(name string) ([]byte, error) {
		if strings.HasPrefix(name, fromHere) {
			return load(strings.TrimPrefix(name, fromHere), largestData)
		}
		if filepath.IsAbs(name) {
			return load(name, largestData)
		}
		return load(filepath.Join(dir, name), largestData)
	})
}

// ReadExample reads a built-in example.
func ReadExample(name string, opts Options) (*scenarios.Plan, []Fault) {
	dir := "examples/" + name
	data, err := examples.ReadFile(dir + "/plan.yaml")
	if err != nil {
		return nil, []Fault{{File: name, Fix: "not an example; there are " + strings.Join(Examples(), ", ")}}
	}
	p, faults := parse("example "+name, data, opts, func(file string) ([]byte, error) {
		if strings.HasPrefix(file, fromHere) {
			return load(strings.TrimPrefix(file, fromHere), largestData)
		}
		return examples.ReadFile(dir + "/" + file)
	})
	if p != nil {
		p.File, p.Example = "", name == BuiltIn
	}
	return p, faults
}

// errTooLarge is a file over the size that is read.
var errTooLarge = errors.New("too large")

// load reads a regular file up to a size.
func load(name string, most int64) ([]byte, error) {
	f, err := os.Open(name)
	if err != nil {
		return nil, err
	}
	defer f.Close()
	info, err := f.Stat()
	switch {
	case err != nil:
		return nil, err
	case info.IsDir():
		return nil, errors.New("a folder stands where a file is wanted")
	case info.Size() > most:
		return nil, errTooLarge
	}
	data, err := io.ReadAll(io.LimitReader(f, most+1))
	if err == nil && int64(len(data)) > most {
		err = errTooLarge
	}
	return data, err
}

// explain says what to do about a file that cannot be read, and about one that is missing.
func explain(err error, most int64, missing string) string {
	switch {
	case errors.Is(err, fs.ErrNotExist):
		return "no such file; " + missing
	case errors.Is(err, fs.ErrPermission):
		return "no permission to read it; ask for read access"
	case errors.Is(err, errTooLarge):
		return fmt.Sprintf("larger than %d MB, which no such file needs; is it the right one?", most>>20)
	}
	return err.Error()
}

// parse reads a plan's text.
func parse(file string, data []byte, opts Options, files opener) (*scenarios.Plan, []Fault) {
	r := &reader{file: file, files: files}
	root, ok := r.document(data)
	if !ok {
		return nil, r.faults
	}
	for _, s := range opts.Set {
		r.override(root, s)
	}
	if root.Kind != yaml.MappingNode {
		r.fields(val{node: root})
		return nil, r.faults
	}
	p := r.plan(val{node: root})
	if len(r.faults) > 0 {
		return nil, sortFaults(r.faults)
	}
	p.File = file
	p.Assumed, p.Warnings = r.assumed, r.warnings
	p.Facts, p.Doubts = r.facts, r.doubts
	return p, nil
}

// document parses the one YAML document.
func (r *reader) document(data []byte) (*yaml.Node, bool) {
	var doc yaml.Node
	err := yaml.Load(data, &doc)
	if err == nil && len(doc.Content) == 1 && doc.Content[0].Tag != "!!null" {
		return doc.Content[0], true
	}
	f := Fault{File: r.file, Fix: "write a plan: a block of keys; shadeledger keys lists them"}
	if len(bytes.TrimSpace(data)) == 0 {
		f.Fix = "the file is empty; write a plan with: shadeledger start DIR"
		r.faults = append(r.faults, f)
		return nil, false
	}
	var one *yaml.LoadError
	var many *yaml.LoadErrors
	switch {
	case errors.As(err, &many) && len(many.Errors) > 0:
		one = many.Errors[0]
		fallthrough
	case one != nil || errors.As(err, &one):
		f.Line, f.Column, f.Fix = one.Mark.Line, one.Mark.Column, "not sound YAML: "+one.Message
	case err != nil:
		f.Fix = "not sound YAML: " + err.Error()
	}
	if strings.Contains(f.Fix, "document") {
		f.Fix = "one plan in a file: take out the second document (---)"
	}
	r.faults = append(r.faults, f)
	return nil, false
}

func monthOf(m int) time.Month { return time.Month(m) }

// plan reads all sections; the order matters: H, the region and the declination are needed early.
func (r *reader) plan(v val) *scenarios.Plan {
	f := r.fields(v)
	p := &scenarios.Plan{}
	p.Title, _ = r.text(f["title"])
	if s, ok := r.choice(f["units"]); ok && s == "us" {
		p.Units = scenarios.US
	}
	if s, ok := r.choice(f["region"]); ok {
		r.region = regions[s]
		r.carry(f["region"])
	}
	r.site(r.need(v, f, "site"), p)
	r.sampling(f["sampling"], p)
	r.season(r.need(v, f, "season"), p)
	r.snow(f["snow"], p)
	r.weather(r.need(v, f, "weather"), p)
	stand := r.stand(r.need(v, f, "stand"), p)
	r.seedlings(r.need(v, f, "seedlings"), p)
	r.treatments(r.need(v, f, "treatments"), p, stand)
	r.stations(f["stations"], p)
	r.size(f["size"], p)
	r.years(f["years"], p)
	r.drawn(f["draws"], p)
	p.Cautions = r.cautions(f["cautions"])
	r.limits(f["limits"], p)
	r.record(f["record"], p)
	return p
}

// mostApart is how far standard time lies from the sun's at most, hours; the widest in use is about three (common practice).
const mostApart = 4

func (r *reader) site(v val, p *scenarios.Plan) {
	f := r.fields(v)
	before := len(r.faults)
	coordinate := func(name, positive, negative string, limit float64) float64 {
		if v.node == nil {
			return 0
		}
		x, _ := r.doubted(r.need(v, f, name), func(s string) (float64, error) { return parseCoordinate(s, positive, negative, limit) })
		return x * rad
	}
	p.Site.Latitude = coordinate("latitude", "N", "S", 90)
	p.Site.Longitude = coordinate("longitude", "E", "W", 180)
	x, ok := r.number(f["utc_offset"])
	solar := p.Site.Longitude / rad / 15
	if apart := math.Abs(math.Remainder(x-solar, 24)); ok && len(r.faults) == before && apart > mostApart {
		r.fault(f["utc_offset"], "", fmt.Sprintf("within %d hours of the sun's own time at this longitude, %.1f hours; a bare longitude is east positive: west is -, or W", mostApart, solar))
	}
	p.Site.UTCOffset = r.or(x, ok, f["utc_offset"], "site.utc_offset", solar, fmt.Sprintf("%.2f hours", solar), "solar time of the longitude")
	x, ok = r.quantity(f["elevation"])
	p.Site.Elevation = r.or(x, ok, f["elevation"], "site.elevation", 0, "0 m", "left out")
	r.declination, r.declared = r.quantity(f["declination"])
	p.Declination = r.declination
	x, ok = r.quantity(f["slope"])
	p.Ground.Slope = r.or(x, ok, f["slope"], "site.slope", 0, "0 %", "left out: flat ground; slope moves light where it is over 10 %")
	if φ, ok := r.bearing(f["aspect"]); ok {
		p.Ground.Aspect = φ
	} else if p.Ground.Slope > 0 && !f["aspect"].present() {
		r.need(v, f, "aspect")
	}
	p.Horizon = r.horizon(f["horizon"])
	frost := r.fields(f["frost"])
	p.Frost.Last, _ = r.date(frost["last"])
	p.Frost.First, _ = r.date(frost["first"])
	soil := r.fields(f["soil"])
	r.text(soil["texture"])
	r.text(soil["drainage"])
	r.quantity(soil["restricting_depth"])
	p.Water = noWater()
	if x, ok := r.quantity(soil["water_capacity"]); ok {
		p.Water.Capacity = x
	}
	r.carry(soil["texture"], soil["drainage"], soil["restricting_depth"], soil["water_capacity"])
}

// horizon reads pairs of azimuth and elevation, degrees.
func (r *reader) horizon(v val) canopy.Horizon {
	var h canopy.Horizon
	for _, item := range r.items(v) {
		if item.node == nil {
			continue
		}
		if item.node.Kind != yaml.SequenceNode || len(item.node.Content) != 2 {
			r.fault(item, describe(item.node), "a pair [azimuth, elevation] in degrees")
			continue
		}
		var pair [2]float64
		sound := true
		for i, n := range item.node.Content {
			x, err := parseNumber(n.Value)
			if err != nil || (i == 0 && (x < 0 || x >= 360)) || (i == 1 && (x < 0 || x >= 90)) {
				r.fault(val{node: n, path: item.path}, n.Value, "azimuth 0 to 360 (360 left out), elevation 0 to 90 degrees")
				sound = false
			}
			pair[i] = x * rad
		}
		if n := len(h.Azimuth); sound && n > 0 && pair[0] <= h.Azimuth[n-1] {
			r.fault(item, "", "azimuths in rising order")
			sound = false
		}
		if sound {
			h.Azimuth, h.Elevation = append(h.Azimuth, pair[0]), append(h.Elevation, pair[1])
		}
	}
	return h
}

func (r *reader) sampling(v val, p *scenarios.Plan) {
	f := r.fields(v)
	p.Sampling = scenarios.Sampling{Step: 15 * time.Minute, Grid: 1, Sky: radiation.AllWeather{}}
	if h, ok := r.quantity(f["step"]); ok {
		step := time.Duration(math.Round(h*3600)) * time.Second
		if step <= 0 || time.Hour%step != 0 {
			r.fault(f["step"], "", "a step that divides an hour, such as 15 min")
		} else {
			p.Sampling.Step = step
		}
	}
	if x, ok := r.quantity(f["grid"]); ok {
		p.Sampling.Grid = x
	}
	for _, item := range r.items(f["heights"]) {
		if x, ok := r.quantity(item); ok {
			p.Sampling.Heights = append(p.Sampling.Heights, x)
		}
	}
	switch s, _ := r.choice(f["sky"]); s {
	case "overcast":
		p.Sampling.Sky = radiation.Overcast{}
	case "uniform":
		p.Sampling.Sky = radiation.Uniform{}
	}
	_, natural := p.Sampling.Sky.(radiation.AllWeather) // the other skies are for checks by hand
	if rule, _ := r.choice(f["dormancy"]); rule == "lagged" || rule == "" && natural {
		p.Sampling.Dormancy = leaf.Pine
	}
}

func (r *reader) season(v val, p *scenarios.Plan) {
	f := r.fields(v)
	if v.node == nil {
		return
	}
	p.Season.From, _ = r.date(r.need(v, f, "from"))
	p.Season.To, _ = r.date(r.need(v, f, "to"))
}

func (r *reader) snow(v val, p *scenarios.Plan) {
	f := r.fields(v)
	if len(f) == 0 {
		return
	}
	p.Snow.From, _ = r.date(r.need(v, f, "from"))
	p.Snow.To, _ = r.date(r.need(v, f, "to"))
	p.Snow.Depth, _ = r.quantity(r.need(v, f, "depth"))
}

func (r *reader) stations(v val, p *scenarios.Plan) {
	if v.scalar() {
		if v.node.Value != "default" {
			r.fault(v, "", "default, or a list of name, bearing, distance")
		}
		return
	}
	seen := map[string]int{}
	for _, item := range r.items(v) {
		f := r.fields(item)
		var s scenarios.Station
		s.Name, _ = r.text(r.need(item, f, "name"))
		r.unique(f["name"], s.Name, seen)
		s.Distance, _ = r.quantity(r.need(item, f, "distance"))
		if b, ok := r.bearing(f["bearing"]); ok {
			s.Bearing = b
		} else if s.Distance > 0 && !f["bearing"].present() {
			r.need(item, f, "bearing")
		}
		p.Stations = append(p.Stations, s)
	}
}

// unique reports a name that stands twice.
func (r *reader) unique(v val, name string, seen map[string]int) {
	if !v.present() || name == "" {
		return
	}
	if line, ok := seen[name]; ok {
		r.fault(v, name, fmt.Sprintf("a name of its own; line %d has it already", line))
		return
	}
	seen[name] = v.node.Line
}

func (r *reader) record(v val, p *scenarios.Plan) {
	f := r.fields(v)
	p.Record.Forest, _ = r.text(f["forest"])
	p.Record.Stand, _ = r.text(f["stand"])
	p.Record.OwnerGoal, _ = r.text(f["owner_goal"])
	p.Record.Preparer, _ = r.text(f["preparer"])
	p.Record.Licence, _ = r.text(f["licence"])
	p.Record.Date, _ = r.text(f["date"])
}

// problem turns a problem of a data file into a fault.
func (r *reader) problem(file string, v val, p weather.Problem) {
	if p.Line == 0 {
		at := v
		if c := r.peek(v, p.Field[strings.LastIndex(p.Field, ".")+1:]); c.present() {
			at = c
		}
		r.fault(val{node: at.node, at: v.at, path: p.Field}, p.Value, p.Want)
		return
	}
	r.faults = append(r.faults, Fault{File: file, Line: p.Line, Key: p.Field, Value: p.Value, Fix: p.Want})
}
