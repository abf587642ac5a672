package plan

import (
	"bytes"
	"os"
	"path/filepath"
	"strings"
	"testing"
	"time"

	"github.com/santhosh-tekuri/jsonschema/v6"
	"go.yaml.in/yaml/v4"
)

func compiled(t *testing.T) *jsonschema.Schema {
	t.Helper()
	doc, err := jsonschema.UnmarshalJSON(bytes.NewReader(Schema()))
	if err != nil {
		t.Fatal(err)
	}
	c := jsonschema.NewCompiler()
	if err := c.AddResource("urn:shadeledger:plan", doc); err != nil {
		t.Fatal(err)
	}
	s, err := c.Compile("urn:shadeledger:plan")
	if err != nil {
		t.Fatal(err)
	}
	return s
}

// instance is a plan's text as JSON has it.
func instance(t *testing.T, text []byte) any {
	t.Helper()
	var v any
	if err := yaml.Load(text, &v); err != nil {
		t.Fatal(err)
	}
	return plain(v)
}

// plain turns maps with keys of any kind into maps by text.
func plain(v any) any {
	switch v := v.(type) {
	case map[string]any:
		for k, x := range v {
			v[k] = plain(x)
		}
	case []any:
		for i, x := range v {
			v[i] = plain(x)
		}
	case time.Time: // JSON has no dates
		return v.Format("2006-01-02")
	}
	return v
}

// What the reader takes, the schema takes.
func TestSchemaTakesSoundPlans(t *testing.T) {
	s := compiled(t)
	check := func(name string, text []byte) {
		if err := s.Validate(instance(t, text)); err != nil {
			t.Errorf("%s: %v", name, err)
		}
	}
	check("sound", sound(t, ""))
	check("everything", []byte(everything))
	check("from trees", []byte(fromTrees))
	check("limits", []byte(limited(t)))
	for _, name := range Examples() {
		text, err := examples.ReadFile("examples/" + name + "/plan.yaml")
		if err != nil {
			t.Fatal(err)
		}
		check(name, text)
		p, faults := ReadExample(name, Options{})
		if p == nil {
			t.Fatal(faults)
		}
		check(name+", effective", Effective(p))
	}
}

// beyond are the bad plans whose fault lies between keys, in the size of a quantity, in a date, a name or a file, or in
// how YAML writes a number (hex, overflow): only the reader sees it.
var beyond = strings.Fields(`acclimation-none-of-two alias angle-count-alone basal-area-and-species basal-area-beside-layers basal-area-high basal-area-species biochemistry-beside-sun
	circle-both circle-feet circle-over-1-km closure-over co2 crown-base-above-height doubt-negative doubt-out-of-order doubt-twice
	doubt-without-unit earlier-and-dates earlier-of-evergreen elevation ellipse-mixed ellipse-wide grid growth-lights
	height-feet-as-metres height-in-h hex horizon-high horizon-order keep-and-layers keep-without-trees lai-beside-layers lai-missing
	latitude-minutes layer-upside-down leaf-dates-order leaf-dates-three leaf-lifespan-months limits-files longitude-east magnetic-without-declination matrix-both
	matrix-lai-grows max-gap measured-alone month-13 needles-without-basis normals-both normals-impossible normals-no-radiation-unit
	normals-order normals-rain-unit overflow own-leaf-area-missing own-leaf-mass own-without-leaves own-without-rd own-without-traits
	polygon-crossing polygon-hole polygon-missing polygon-point readings-dirty seedling-leafless seedling-nameless seedling-names
	seedling-tall seedling-unknown slope-400 slope-negative slope-without-aspect smaller-than-crowns snow-deep species-unknown
	stand-table-dirty stand-table-missing station-names station-no-bearing step-long step-odd steps-order stock-without-species t-ref-of-library
	thin-and-matrix thin-grows thin-species thin-without-trees thirty-february treatment-names two-weathers understory-names
	understory-stems understory-stranger understory-upside-down weather-folder weather-no-file weather-none woody-and-stem-rate
	woody-and-stem`)

// What the schema refuses, the reader refuses; and the schema refuses every bad plan but those beyond it.
func TestSchemaRefusesBadPlans(t *testing.T) {
	s := compiled(t)
	files, err := filepath.Glob(plans + "bad/*.yaml")
	if err != nil || len(files) == 0 {
		t.Fatal("no bad plans", err)
	}
	var passed []string
	for _, file := range files {
		text, err := os.ReadFile(file)
		if err != nil {
			t.Fatal(err)
		}
		var v any
		if err := yaml.Load(text, &v); err != nil {
			continue // no YAML of one document with keys given once
		}
		if s.Validate(plain(v)) == nil {
			passed = append(passed, strings.TrimSuffix(filepath.Base(file), ".yaml"))
		}
	}
	if got, want := strings.Join(passed, " "), strings.Join(beyond, " "); got != want {
		t.Errorf("the schema lets pass\n%s\nwant\n%s", got, want)
	}
}

// A key that the schema requires is one that the reader misses, wherever its block stands.
func TestRequiredKeysAreMissed(t *testing.T) {
	s := compiled(t)
	text := strings.Replace(everything, "stations:", "  - {name: more, matrix: {layers: [{from: 1 m, to: 9 m, lai: 3}]}}\nstations:", 1)
	layered := strings.Replace(text, "  lai: {low: 4, best: 5, high: 6}\n  wai: 0.6 +- 0.1\n  species: Quercus rubra\n", "  layers: [{from: 1 m, to: 9 m, lai: 3}]\n", 1)
	for path := range required {
		if strings.HasPrefix(path, "cautions.") && path != "cautions.frost.state" {
			continue // one table, one rule
		}
		out, ok := without(t, path, layered, fromTrees, limited(t))
		if !ok {
			t.Errorf("%s: the test's plans have no such key", path)
			continue
		}
		if s.Validate(instance(t, out)) == nil {
			t.Errorf("%s: the schema does not miss it", path)
		}
		p, faults := parse("plan.yaml", out, Options{}, ofTheExample)
		found := false
		for _, f := range faults {
			key := strings.NewReplacer("0", "", "1", "", "2", "", "3", "", "4", "", "5", "", "6", "").Replace(f.Key)
			found = found || key == path || strings.HasPrefix(path, f.Key) && strings.HasPrefix(path, "cautions.")
		}
		if p != nil || !found {
			t.Errorf("%s: the reader does not miss it: %v", path, faults)
		}
	}
}

// without gives the first of some plans that has a key, without it.
func without(t *testing.T, path string, texts ...string) ([]byte, bool) {
	t.Helper()
	for _, text := range texts {
		var doc yaml.Node
		if err := yaml.Load([]byte(text), &doc); err != nil {
			t.Fatal(err)
		}
		if drop(doc.Content[0], path) == 0 {
			continue
		}
		out, err := yaml.Dump(&doc)
		if err != nil {
			t.Fatal(err)
		}
		return out, true
	}
	return nil, false
}

// drop takes a key out of every block at its path.
func drop(n *yaml.Node, path string) int {
	name, rest, _ := strings.Cut(path, ".")
	name, isList := strings.CutSuffix(name, "[]")
	dropped := 0
	for i := 0; i+1 < len(n.Content); i += 2 {
		if n.Content[i].Value != name {
			continue
		}
		child := n.Content[i+1]
		switch {
		case rest == "":
			n.Content = append(n.Content[:i], n.Content[i+2:]...)
			return 1
		case isList:
			for _, item := range child.Content {
				dropped += drop(item, rest)
			}
		default:
			dropped += drop(child, rest)
		}
	}
	return dropped
}
