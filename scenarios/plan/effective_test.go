package plan

import (
	"math"
	"reflect"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"
	"github.com/google/go-cmp/cmp/cmpopts"

	"shadeledger/scenarios"
)

// again reads a plan's effective text with the files of an example.
func again(t *testing.T, p *scenarios.Plan, example string) *scenarios.Plan {
	t.Helper()
	text := Effective(p)
	q, faults := parse("effective", text, Options{}, func(name string) ([]byte, error) {
		return examples.ReadFile("examples/" + example + "/" + name)
	})
	for _, f := range faults {
		t.Error(f.Error())
	}
	if q == nil {
		t.Fatalf("the effective plan is not read back:\n%s", text)
	}
	return q
}

// difference of two plans but for where they came from and what was assumed on the way. NaN is not given.
func difference(a, b *scenarios.Plan) string {
	return cmp.Diff(a, b, cmp.Exporter(func(reflect.Type) bool { return true }), cmpopts.EquateNaNs(),
		cmpopts.EquateEmpty(), cmpopts.IgnoreFields(scenarios.Plan{}, "File", "Example", "Assumed", "Doubts"),
		cmpopts.SortSlices(func(a, b scenarios.Fact) bool { return a.Key < b.Key }))
}

// The effective plan of every example reads back to the same plan, bit for bit, with nothing left to assume.
func TestEffectivePlanIsThePlan(t *testing.T) {
	for _, name := range Examples() {
		p, faults := ReadExample(name, Options{})
		if len(faults) > 0 {
			t.Fatal(faults[0].Error())
		}
		q := again(t, p, name)
		if d := difference(p, q); d != "" {
			t.Errorf("%s (-plan +read back):\n%s", name, d)
		}
		for _, a := range q.Assumed {
			t.Errorf("%s: the effective plan leaves %s to assume", name, a.Key)
		}
	}
}

// Doubt, facts, every shape, part of an understory, own traits: whatever a plan may say comes back.
func TestEffectivePlanKeepsEverything(t *testing.T) {
	p, faults := parse("everything.yaml", []byte(everything), Options{}, nil)
	for _, f := range faults {
		t.Error(f.Error())
	}
	if p == nil {
		t.FailNow()
	}
	q := again(t, p, BuiltIn)
	if d := difference(p, q); d != "" {
		t.Errorf("(-plan +read back):\n%s", d)
	}
	if len(p.Doubts) != 5 || len(q.Doubts) != len(p.Doubts) {
		t.Errorf("%d doubts and %d when read back; the plan has 5", len(p.Doubts), len(q.Doubts))
	}
	if twice := Effective(q); string(twice) != string(Effective(p)) {
		t.Errorf("the effective plan of the effective plan differs:\n%s", twice)
	}
	for _, a := range q.Assumed {
		t.Errorf("the effective plan leaves %s to assume", a.Key)
	}
}

// everything uses what the examples do not.
const everything = `
title: 'All: "keys" # of a plan'
units: us
site:
  latitude: 44 21 00 N
  longitude: 71.90 W
  slope: 18 % +- 2 %
  aspect: 155 magnetic
  declination: -14 deg
  horizon: [[0, 3], [90, 12.5], [181, 5]]
  soil: {texture: loam, restricting_depth: 24 in}
weather:
  normals:
    temperature_unit: F
    radiation_unit: kWh m-2 d-1
    mean: [20, 22, 30, 41, 54, 63, 67, 65, 57, 46, 35, 24]
    min: [10, 12, 20, 31, 42, 51, 55, 53, 45, 35, 26, 15]
    max: [30, 32, 40, 51, 66, 75, 79, 77, 69, 57, 44, 33]
    radiation: [1.7, 2.6, 3.7, 4.5, 5.3, 5.8, 5.8, 5.0, 3.8, 2.5, 1.5, 1.3]
snow: {from: 12-01, to: 04-10, depth: 20 in}
season: {from: 11-01, to: 02-28}
stand:
  height: 78 ft +- 4 ft
  area: 31.4 ac
  age: 85
  site_index: {value: 60 ft, base_age: 50, system: sugar maple}
  smallest_dbh: 3 in
  lai: {low: 4, best: 5, high: 6}
  wai: 0.6 +- 0.1
  species: Quercus rubra
  understory:
    - {name: beech, species: Fagus grandifolia, height: 12 ft, lai: 0.8}
    - {name: 'fern: tall', height: 3 ft, lai: 1.1, leaves: {out: 05-20, full: 06-10, colour: 09-01, bare: 09-20}}
seedlings:
  - {species: Quercus rubra, height: 20 in, leaf_area: 550 cm2, leaves: {earlier: 8 d}}
  - {species: Picea rubens, name: hemisurface, leaf: {sun: {amax: 5.1, rd: 0.62, growth_light: 60}, area_basis: projected, t_ref: 22 C}}
  - species: Pinus strobus
    name: constant
    ledger: first season
    leaf: {acclimation: none, shade: {amax: 3.3, rd: 0.31, phi: 0.04, theta: 0.7, lma: 61}, area_basis: all}
    respiration: {q10: 1.9}
  - name: of our own
    height: 0.31 m
    leaf_area: 0.0131 m2
    crown_lai: 1.3
    chi: 1.7
    mass: {woody: 3.7 g}
    leaves: evergreen
    leaf:
      sun: {amax: 6.55, rd: 0.85, phi: 0.048, theta: 0.8, lma: 55.3, growth_light: 50}
      shade: {amax: 3.07, rd: 0.31, phi: 0.051, theta: 0.77, lma: 33.9, growth_light: 4}
    respiration: {woody: 3.5}
    replacement: {leaf_lifespan: 0.5, fine_root_share: 0.2, fine_root_lifespan: 1.0, construction_cost: 0.60}
treatments:
  - name: No action
  - {name: Thin, matrix: {lai: 2.7}, understory: {'fern: tall': remove}}
  - {name: Circle, opening: {circle: {diameter: 1.7 H +- 2 ft}}, understory: remove}
  - {name: Acre, opening: {circle: {area: 0.25 ac}}, measured: crowns}
  - {name: Oval, opening: {ellipse: {area: 0.3 ac, ratio: 2, bearing: ENE}}}
  - {name: Strip, opening: {strip: {length: 61.7 m, width: 19.3 m, bearing: 33}}, inside: {layers: [{from: 0 m, to: 4 ft, lai: 1.3}]}}
stations:
  - {name: 'plot "3"', bearing: NNE, distance: 30 ft}
  - {name: plot 4, distance: 0 m}
sampling: {step: 10 min, grid: 2 ft, heights: [1 ft, 1.3 m], sky: uniform}
cautions:
  frost: {state: addressed, by: 'forester: me'}
record: {forest: 'A: b', date: 2026-05-01}
`

// A polygon is written by its file, and by how it was taped, which makes another opening of it.
func TestEffectivePolygon(t *testing.T) {
	file := func(string) ([]byte, error) {
		return []byte(`{"type":"Polygon","coordinates":[[[0,0],[60,0],[60,30],[30,30],[30,60],[0,60],[0,0]]]}`), nil
	}
	for _, measured := range []string{"stems", "crowns"} {
		text := sound(t, "  - {name: L, opening: {polygon: l.geojson}, measured: "+measured+"}\n")
		p, faults := parse("polygon.yaml", text, Options{}, file)
		if p == nil {
			t.Fatal(faults)
		}
		q, faults := parse("effective", Effective(p), Options{}, file)
		if q == nil {
			t.Fatal(faults)
		}
		if d := difference(p, q); d != "" {
			t.Errorf("measured %s (-plan +read back):\n%s", measured, d)
		}
		const want = 2700.0 // 60 x 60 less a corner of 30 x 30, m2
		c := q.Treatments[len(q.Treatments)-1].Opening.(scenarios.Cleared)
		taped := map[string]float64{"stems": c.Stems.Area(), "crowns": c.Crowns.Area()}[measured]
		if math.Abs(taped-want) > 1e-6 {
			t.Errorf("measured %s: the outline taped has %g m2, want %g", measured, taped, want)
		}
	}
}

func TestEffectiveSaysInsideAndMeasured(t *testing.T) {
	p, faults := parse("everything.yaml", []byte(everything), Options{}, nil)
	if p == nil {
		t.Fatal(faults)
	}
	text := string(Effective(p))
	for _, want := range []string{"measured: stems", "understory: remove", `understory: {"fern: tall": remove}`, "sky: uniform",
		"height: 23.7744 m +- 1.2192 m", "lai: {low: 4, best: 5, high: 6}"} {
		if !strings.Contains(text, want) {
			t.Errorf("the effective plan does not say %q", want)
		}
	}
}
