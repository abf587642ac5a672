package plan

import (
	"encoding/json"
	"fmt"
	"slices"
	"strings"
)

// required keys, by path: they must stand wherever their block does.
var required = map[string]bool{}

func init() {
	for _, p := range []string{
		"site", "site.latitude", "site.longitude", "weather", "season", "season.from", "season.to", "stand", "stand.height",
		"seedlings", "treatments", "treatments[].name", "snow.from", "snow.to", "snow.depth",
		"weather.normals.temperature_unit", "weather.normals.mean", "weather.normals.min", "weather.normals.max",
		"stand.understory[].name", "stand.understory[].height", "stand.angle_count.factor", "stand.angle_count.counts",
		"stand.closure_readings.kind", "stand.closure_readings.values", "treatments[].steps[].year", "treatments[].steps[].thin", "stations[].name", "stations[].distance",
		"treatments[].opening.ellipse.bearing", "treatments[].opening.strip.length", "treatments[].opening.strip.width",
		"treatments[].opening.strip.bearing", "limits.adjacency.area", "limits.buffers[].name", "limits.buffers[].distance",
		"limits.buffers[].polygon", "limits.no_cut[].from", "limits.no_cut[].to",
	} {
		required[p] = true
	}
	for _, p := range []string{"stand.layers[]", "treatments[].matrix.layers[]", "treatments[].inside.layers[]"} {
		required[p+".from"], required[p+".to"], required[p+".lai"] = true, true, true
	}
	for _, c := range cautionTable {
		required["cautions."+c.key+".state"] = true
	}
}

const (
	digitsPattern = `[+-]?([0-9]+(\.[0-9]*)?|\.[0-9]+)([eE][+-]?[0-9]+)?`
	spreadPattern = `(\s*(\+-|\+/-|±).+)?`
)

// Schema is a JSON Schema (draft 2020-12) of a plan, for editors: which keys there are, what form their values have and
// the ranges of bare numbers. What depends on several keys or on a unit only the reader checks.
func Schema() []byte {
	root := object("")
	root["$schema"] = "https://json-schema.org/draft/2020-12/schema"
	root["$id"] = "urn:shadeledger:plan"
	root["title"] = "shadeledger plan"
	out, err := json.MarshalIndent(root, "", "  ")
	if err != nil {
		panic(err) // maps, lists and texts only
	}
	return out
}

// object is the schema of the block at a path.
func object(path string) map[string]any {
	properties := map[string]any{}
	var need []string
	for _, name := range usable(path) {
		p := join(path, name)
		k, _ := Find(p)
		s := value(k)
		if !required[p] {
			s = either(s, map[string]any{"type": "null"})
		} else {
			need = append(need, name)
		}
		s["description"] = describeKey(k)
		properties[name] = s
	}
	o := map[string]any{"type": "object", "properties": properties, "additionalProperties": false}
	if path == "treatments[].opening" {
		o["minProperties"], o["maxProperties"] = 1, 1
	}
	if len(need) > 0 {
		o["required"] = need
	}
	if list := oneOf[path[strings.LastIndex(path, ".")+1:]]; list != nil {
		var one []any
		for _, k := range list {
			one = append(one, map[string]any{"required": []string{k}})
		}
		o["oneOf"] = one
	}
	return o
}

// oneOf are the keys of a block of which just one must stand.
var oneOf = map[string][]string{"thin": {"leave", "take"}, "keep": {"count", "share"}, "understory[]": {"lai", "cover", "stems"}, "residual": {"basal_area", "cover"}}

func describeKey(k Key) string {
	text := k.Meaning
	for _, part := range []struct{ label, text string }{{"unit", k.Unit()}, {"range", k.Range}, {"default", k.Default}, {"example", k.Example}} {
		if part.text != "" {
			text += "; " + part.label + ": " + part.text
		}
	}
	return text
}

func either(list ...map[string]any) map[string]any {
	all := make([]any, len(list))
	for i, s := range list {
		all[i] = s
	}
	return map[string]any{"anyOf": all}
}

func text(pattern string) map[string]any {
	return map[string]any{"type": "string", "pattern": "^\\s*(" + pattern + ")\\s*$"}
}

func words(list ...string) map[string]any { return map[string]any{"enum": list} }

// value is the schema of a key's value.
func value(k Key) map[string]any {
	switch k.Kind {
	case Map:
		return object(k.Path)
	case List:
		return list(k)
	case Any:
		return free(k)
	case Quantity:
		one := text(digitsPattern + `\s*(` + units(k.dim) + `)` + spreadPattern)
		return either(one, doubt(one))
	case Number:
		n := map[string]any{"type": "number"}
		if k.Low != 0 || k.Top != 0 {
			n["minimum"], n["maximum"] = k.Low, k.Top
		}
		one := either(n, text(digitsPattern+spreadPattern))
		return either(one, doubt(one))
	case Bearing:
		one := either(map[string]any{"type": "number", "minimum": 0, "maximum": 360},
			text(strings.Join(compass, "|")+`|[0-9.]+\s*(deg)?\s*(true|magnetic)?`+spreadPattern))
		return either(one, doubt(one))
	case Place:
		letters, limit := "NSns", 90
		if strings.HasSuffix(k.Path, "longitude") {
			letters, limit = "EWew", 180
		}
		one := either(map[string]any{"type": "number", "minimum": -limit, "maximum": limit},
			text(`[+-]?[0-9.]+(\s+[0-9.]+){0,2}(\s+[`+letters+`])?`+spreadPattern))
		return either(one, doubt(one))
	case Choice:
		return words(k.Words...)
	case Date:
		return text(`[0-9]{1,2}-[0-9]{1,2}|[0-9]{1,2}\s+[A-Za-z]{3,}`)
	}
	return map[string]any{"type": []any{"string", "number", "boolean"}}
}

// units are the ways to write a dimension.
func units(d dimension) string {
	var names []string
	for name := range unitTable[d] {
		names = append(names, name)
	}
	if d == length {
		names = append(names, "H")
	}
	slices.Sort(names)
	return strings.Join(names, "|")
}

// doubt is {low, best, high} of a value.
func doubt(one map[string]any) map[string]any {
	return map[string]any{
		"type": "object", "additionalProperties": false, "required": []string{"low", "best", "high"},
		"properties": map[string]any{"low": one, "best": one, "high": one},
	}
}

func list(k Key) map[string]any {
	number := either(map[string]any{"type": "number"}, text(digitsPattern+spreadPattern))
	items := number
	switch item, ok := Find(k.Path + "[]"); {
	case ok:
		items = value(item)
	case k.Path == "site.horizon":
		items = map[string]any{"type": "array", "items": number, "minItems": 2, "maxItems": 2}
	}
	out := map[string]any{"type": "array", "items": items}
	var n int
	if _, err := fmt.Sscanf(k.Range, "%d numbers", &n); err == nil {
		out["minItems"], out["maxItems"] = n, n
	}
	if (required[k.Path] || k.Path == "treatments[].steps") && n == 0 {
		out["minItems"] = 1
	}
	return out
}

// free is the schema of the keys whose value is a word or a block.
func free(k Key) map[string]any {
	switch k.Path[strings.LastIndex(k.Path, ".")+1:] {
	case "leaves":
		return either(words("evergreen"), object(k.Path))
	case "inside":
		return either(words("bare"), object(k.Path))
	case "understory":
		return either(words("keep", "remove"), map[string]any{"type": "object", "additionalProperties": words("keep", "remove")})
	case "basal_area":
		one := text(digitsPattern + `\s*(` + units(basalArea) + `)` + spreadPattern)
		return map[string]any{"type": "object", "additionalProperties": either(one, doubt(one)), "minProperties": 1}
	case "stations":
		item, _ := Find("stations[]")
		return either(words("default"), map[string]any{"type": "array", "items": value(item)})
	}
	panic("plan keys: " + k.Path + " has no form")
}
