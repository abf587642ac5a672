package plan

import (
	"fmt"
	"math"
	"strings"

	"go.yaml.in/yaml/v4"

	"shadeledger/scenarios"
)

// val is a node of the plan with where it stands: path with item numbers for messages, key with [] for the table.
type val struct {
	node *yaml.Node
	path string
	key  string
	at   *yaml.Node // the key's own node, for faults about the key
}

func (v val) present() bool { return v.node != nil }

// scalar tells whether a text stands there.
func (v val) scalar() bool { return v.node != nil && v.node.Kind == yaml.ScalarNode }

// reader walks a plan and collects faults, assumed values and warnings.
type reader struct {
	file        string
	files       opener
	faults      []Fault
	assumed     []scenarios.Assumed
	warnings    []scenarios.Warning
	height      float64 // H, m; 0 until known
	facts       []scenarios.Fact
	doubts      []scenarios.Doubt
	region      *region
	declination float64
	co2         float64 // ppm
	declared    bool
	uncounted   []string // openings without a count
	placed      mapFrame // what the first map file of the plan is in
}

// fault adds a fault about a value.
func (r *reader) fault(v val, value, fix string) {
	f := Fault{File: r.file, Key: v.path, Value: value, Fix: fix}
	n := v.node
	if n == nil {
		n = v.at
	}
	if n != nil {
		f.Line, f.Column = n.Line, n.Column
		if file, ok := overrideOf(n); ok {
			f.File, f.Line, f.Column = file, 0, 0
		}
		if value == "" && n.Kind == yaml.ScalarNode {
			f.Value = n.Value
		}
	}
	r.faults = append(r.faults, f)
}

// carry keeps values that no result depends on, as they are written.
func (r *reader) carry(list ...val) {
	for _, v := range list {
		if v.node == nil {
			continue
		}
		text := v.node.Value
		if v.node.Kind == yaml.SequenceNode {
			var parts []string
			for _, n := range v.node.Content {
				parts = append(parts, n.Value)
			}
			text = "[" + strings.Join(parts, ", ") + "]"
		}
		r.facts = append(r.facts, scenarios.Fact{Key: v.path, Value: text})
	}
}

// assume records a value that the plan left out.
func (r *reader) assume(path, value, source string) {
	r.assumed = append(r.assumed, scenarios.Assumed{Key: path, Value: value, Source: source})
}

func join(path, name string) string {
	if path == "" {
		return name
	}
	return path + "." + name
}

// fields opens a block and finds its keys; unknown and doubled keys and keys of later versions are faults.
func (r *reader) fields(v val) map[string]val {
	out := map[string]val{}
	if v.node == nil {
		return out
	}
	if v.node.Kind != yaml.MappingNode {
		if v.node.Kind == yaml.ScalarNode && v.node.Tag == "!!null" {
			return out
		}
		r.fault(v, describe(v.node), "a block of keys: "+strings.Join(usable(v.key), ", "))
		return out
	}
	for i := 0; i+1 < len(v.node.Content); i += 2 {
		k, n := v.node.Content[i], v.node.Content[i+1]
		c := val{node: n, path: join(v.path, k.Value), key: join(v.key, k.Value), at: k}
		where := val{node: k, path: c.path, key: c.key}
		spec, known := Find(c.key)
		switch {
		case n.Kind == yaml.AliasNode || k.Kind == yaml.AliasNode:
			r.fault(where, k.Value, "write the value out; aliases are not used in plans")
		case !known:
			r.unknown(where, v)
		case out[k.Value].present():
			r.fault(where, k.Value, fmt.Sprintf("give this key once; it stands on line %d already", out[k.Value].at.Line))
		case spec.Kind == Later:
			r.fault(where, k.Value, spec.Meaning)
		case n.Kind == yaml.ScalarNode && n.Tag == "!!null":
			// an empty value is as good as none
		default:
			out[k.Value] = c
		}
	}
	return out
}

func (r *reader) unknown(where, block val) {
	name := where.node.Value
	fix := "not a key here; known are " + strings.Join(usable(block.key), ", ")
	if name != "" && name[0] >= '0' && name[0] <= '9' {
		fix = "not a key; a decimal comma? numbers use a point"
	} else if near := nearest(name, usable(block.key)); len(near) > 0 {
		fix = "not a key here; did you mean " + strings.Join(near, " or ") + "?"
	}
	r.fault(where, name, fix)
}

func describe(n *yaml.Node) string {
	switch n.Kind {
	case yaml.MappingNode:
		return "a block"
	case yaml.SequenceNode:
		return "a list"
	}
	return n.Value
}

// items opens a list.
func (r *reader) items(v val) []val {
	if v.node == nil {
		return nil
	}
	if v.node.Kind != yaml.SequenceNode {
		r.fault(v, describe(v.node), "a list, one item after each dash")
		return nil
	}
	out := make([]val, len(v.node.Content))
	for i, n := range v.node.Content {
		out[i] = val{node: n, path: fmt.Sprintf("%s[%d]", v.path, i), key: v.key + "[]", at: n}
		if n.Kind == yaml.AliasNode {
			r.fault(out[i], "*"+n.Value, "write the value out; aliases are not used in plans")
			out[i].node = nil
		}
	}
	return out
}

// single gives the text of a scalar, or a fault.
func (r *reader) single(v val) (string, bool) {
	if v.node == nil {
		return "", false
	}
	if v.node.Kind != yaml.ScalarNode {
		r.fault(v, describe(v.node), "a single value")
		return "", false
	}
	return v.node.Value, true
}

func (r *reader) text(v val) (string, bool) { return r.single(v) }

// doubted reads a value, or the best of {low, best, high}, by a parser.
func (r *reader) doubted(v val, parse func(string) (float64, error)) (float64, bool) {
	if v.node == nil {
		return 0, false
	}
	if v.node.Kind == yaml.MappingNode {
		return r.lowBestHigh(v, parse)
	}
	s, ok := r.single(v)
	if !ok {
		return 0, false
	}
	spec, known := Find(v.key)
	main, spread, doubtful := splitDoubt(s)
	x, err := parse(main)
	if err != nil {
		r.fault(v, s, err.Error())
		return 0, false
	}
	if known && (spec.Low != 0 || spec.Top != 0) && !within(x, spec.Low, spec.Top) {
		r.outOfRange(v, s, x, spec)
		return 0, false
	}
	if doubtful {
		se, err := parseSpread(main, spread, spec.dim, parse)
		if err != nil {
			r.fault(v, s, err.Error())
			return 0, false
		}
		r.doubts = append(r.doubts, scenarios.Doubt{Key: v.path, Best: x, StandardError: se, Low: x - se, High: x + se})
	}
	return x, true
}

func within(x, low, top float64) bool {
	slack := 1e-9 * math.Max(math.Abs(low), math.Abs(top))
	return x >= low-slack && x <= top+slack
}

// lowBestHigh reads {low, best, high} and gives best.
func (r *reader) lowBestHigh(v val, parse func(string) (float64, error)) (float64, bool) {
	got := map[string]float64{}
	for i := 0; i+1 < len(v.node.Content); i += 2 {
		k, n := v.node.Content[i], v.node.Content[i+1]
		c := val{node: n, path: join(v.path, k.Value), key: v.key, at: k}
		if k.Value != "low" && k.Value != "best" && k.Value != "high" {
			r.fault(val{node: k, path: c.path}, k.Value, "a value with doubt is {low, best, high}")
			return 0, false
		}
		if n.Kind == yaml.MappingNode {
			r.fault(c, describe(n), "a single value")
			return 0, false
		}
		if _, _, twice := splitDoubt(n.Value); twice {
			r.fault(c, "", "+- or {low, best, high}, not both")
			return 0, false
		}
		x, ok := r.doubted(c, parse)
		if !ok {
			return 0, false
		}
		got[k.Value] = x
	}
	best, ok := got["best"]
	if !ok || len(got) != 3 || !(got["low"] <= best && best <= got["high"]) {
		r.fault(v, "", "a value with doubt is {low, best, high} with low <= best <= high")
		return 0, false
	}
	r.doubts = append(r.doubts, scenarios.Doubt{Key: v.path, Best: best, Low: got["low"], High: got["high"]})
	return best, true
}

func (r *reader) outOfRange(v val, s string, x float64, spec Key) {
	fix := "allowed is " + spec.Range
	if spec.dim == length && x > 60 && inMetres(s) && x*foot >= spec.Low && x*foot <= spec.Top {
		fix += "; feet? then write ft"
	}
	r.fault(v, s, fix)
}

func inMetres(s string) bool {
	m := quantityPattern.FindStringSubmatch(strings.TrimSpace(s))
	return m != nil && m[2] == "m"
}

// quantity reads a number with a unit.
func (r *reader) quantity(v val) (float64, bool) {
	spec, _ := Find(v.key)
	return r.doubted(v, func(s string) (float64, error) { return parseQuantity(s, spec.dim, r.height) })
}

// number reads a bare number.
func (r *reader) number(v val) (float64, bool) { return r.doubted(v, parseNumber) }

func (r *reader) bearing(v val) (float64, bool) {
	return r.doubted(v, func(s string) (float64, error) { return parseBearing(s, r.declination, r.declared) })
}

// choice reads one of the key's words.
func (r *reader) choice(v val) (string, bool) {
	s, ok := r.single(v)
	if !ok {
		return "", false
	}
	spec, _ := Find(v.key)
	for _, w := range spec.Words {
		if s == w {
			return s, true
		}
	}
	r.fault(v, s, "one of "+strings.Join(spec.Words, ", "))
	return "", false
}

func (r *reader) date(v val) (scenarios.Date, bool) {
	s, ok := r.single(v)
	if !ok {
		return scenarios.Date{}, false
	}
	m, d, err := parseDate(s)
	if err != nil {
		r.fault(v, s, err.Error())
		return scenarios.Date{}, false
	}
	return scenarios.Date{Month: monthOf(m), Day: d}, true
}

// need reports a required key that is missing from a block.
func (r *reader) need(block val, f map[string]val, name string) val {
	v, ok := f[name]
	if block.node != nil && block.node.Kind != yaml.MappingNode && block.node.Tag != "!!null" {
		return v // a fault already
	}
	if !ok {
		spec, _ := Find(join(block.key, name))
		meaning, _, _ := strings.Cut(spec.Meaning, ";")
		fix := "missing; give " + meaning
		if spec.Example != "" {
			fix += fmt.Sprintf(", such as %s: %s", name, spec.Example)
		}
		r.fault(val{node: block.node, at: block.at, path: join(block.path, name)}, " ", fix)
	}
	return v
}

// or gives a value or its default, recorded as assumed.
func (r *reader) or(x float64, ok bool, v val, path string, fallback float64, shown, source string) float64 {
	if ok {
		return x
	}
	if !v.present() {
		r.assume(path, shown, source)
	}
	return fallback
}
