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

// difference of two plans but for where they came from and what was assumed on the way. NaN is not given. The effective plan
// states layers where the plan gave trees: the trees and what is said of them are left out.
func difference(a, b *scenarios.Plan) string {
	left := []string{"File", "Example", "Assumed", "Doubts"}
	if a.Stand.Cruised() {
		left = append(left, "Warnings")
	}
	return cmp.Diff(a, b, cmp.Exporter(func(reflect.Type) bool { return true }), cmpopts.EquateNaNs(),
		cmpopts.EquateEmpty(), cmpopts.IgnoreFields(scenarios.Plan{}, left...),
		cmpopts.IgnoreFields(scenarios.Stand{}, "Trees", "Foliage", "Cruise"), cmpopts.IgnoreFields(scenarios.Treatment{}, "Trees", "Cut", "Thinning"),
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
	if len(p.Doubts) != 7 || len(q.Doubts) != len(p.Doubts) {
		t.Errorf("%d doubts and %d when read back; the plan has 6 and the speed of border crowns one", len(p.Doubts), len(q.Doubts))
	}
	if twice := Effective(q); string(twice) != string(Effective(p)) {
		t.Errorf("the effective plan of the effective plan differs:\n%s", twice)
	}
	for _, a := range q.Assumed {
		t.Errorf("the effective plan leaves %s to assume", a.Key)
	}
}

// A stand by its trees, with all that may be asked of them, comes back as layers that are the same.
func TestEffectivePlanOfTrees(t *testing.T) {
	p, faults := parse("trees.yaml", []byte(fromTrees), Options{}, nil)
	if p == nil {
		t.Fatal(faults)
	}
	q, faults := parse("effective", Effective(p), Options{}, nil)
	if q == nil {
		t.Fatalf("%v\n%s", faults, Effective(p))
	}
	if d := difference(p, q); d != "" {
		t.Errorf("(-plan +read back):\n%s", d)
	}
	if n := len(p.Treatments); n != 6 {
		t.Errorf("%d treatments; two steps make two", n)
	}
}

// fromTrees uses every key that works on trees.
const fromTrees = `
title: trees
site: {latitude: 48.2 N, longitude: 12.4 E}
weather:
  normals:
    temperature_unit: C
    radiation_unit: MJ m-2 d-1
    mean: [-8.3, -7.1, -1.6, 5.4, 12.4, 17.2, 19.6, 18.6, 14.3, 7.9, 1.9, -4.7]
    min: [-13.9, -13.2, -7.4, -0.5, 5.7, 10.9, 13.4, 12.5, 8.3, 2.6, -2.4, -9.0]
    max: [-2.7, -1.0, 4.2, 11.3, 19.1, 23.5, 25.8, 24.7, 20.3, 13.2, 6.2, -0.4]
    radiation: [6.1, 9.4, 13.5, 16.4, 19.3, 21.1, 21.0, 17.9, 13.9, 8.9, 5.5, 4.7]
season: {from: 05-01, to: 09-30}
stand:
  height: 31 m
  basal_area: {Picea abies: 30 m2/ha, Fagus sylvatica: 12 m2/ha +- 2 m2/ha}
  angle_count: {factor: 4 m2/ha, counts: [10, 11, 9, 12]}
  closure_readings: {kind: closed, instrument: sight, values: [93, 95, 91.5]}
  lai: 6.1
  wai: 0.7
  chi: 1.2
  clumping: 0.7
  absorptance: 0.86
  leaves: {out: 05-01, full: 05-20, colour: 10-01, bare: 10-20}
  understory:
    - {name: bramble, height: 1 m, cover: 45 %, leaves: evergreen}
    - {name: beech, species: Fagus sylvatica, height: 3 m, stems: 2000 stems/ha}
seedlings:
  - {species: Abies alba, height: 0.3 m}
treatments:
  - name: No action
  - {name: Low, thin: {take: 30 %, only: [Fichte]}}
  - {name: High, thin: {leave: 20 m2/ha, order: largest first, spare: [Fagus sylvatica]}, understory: {bramble: remove}}
  - {name: Shelter, steps: [{year: 0, thin: {leave: 30 m2/ha}}, {year: 8, thin: {leave: 20 m2/ha, order: all sizes}}]}
  - {name: Hole, opening: {circle: {diameter: 40 m}}, inside: {keep: {count: 4, species: Fagus sylvatica, from: 20 cm, to: 50 cm}}}
`

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
  - {species: Betula alleghaniensis, leaf: {biochemistry: {g1: 3.9}}}
  - {species: Acer saccharum, leaf: {biochemistry: {vcmax: 37.7, jmax: 66.1, capacities: fixed, growth_light: 33}, acclimation: none}}
  - {species: Picea rubens, name: capacities, leaf: {biochemistry: {vcmax: 41, jmax: 71, rd: 0.7, lma: 160}, area_basis: projected}}
limits: {opening: 0.5 ac +- 0.1 ac, total_share: 13.7 %, residual: {cover: 41.3 %}, adjacency: {area: 2.1 ha}, no_cut: [{from: 1 Nov, to: 15 Jan}, {from: 04-01, to: 08-31}]}
years: {horizon: 25, leaf_regrowth: 11}
size: {share: 65 %, up_to: 2.2 H, against: constant}
treatments:
  - name: No action
  - {name: Thin, matrix: {lai: 2.7}, understory: {'fern: tall': remove}}
  - {name: Circle, opening: {circle: {diameter: 1.7 H +- 2 ft}}, understory: remove, count: 7}
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
