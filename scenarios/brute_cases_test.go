package scenarios_test

import (
	"math"
	"strings"
	"testing"
)

const oneSet = `
  - name: Fir
    height: 0.5 m
    leaf_area: 200 cm2
    crown_lai: 1
    chi: 1
    absorptance: 0.85
    leaves: evergreen
    mass: {leaf: 2.4 g, stem: 2 g, root: 1.5 g}
    leaf:
      acclimation: none
      sun: {amax: 6, rd: 0.5, phi: 0.04, theta: 0.7, lma: 120, growth_light: 50}
      t_ref: 25 C
      t_opt: 22 C
      t_width: 18 C
      q10: 2.1
    respiration: {stem: 1.2, root: 1.2, t_ref: 20 C, q10: 2}
    replacement: {leaf_lifespan: 5, fine_root_share: 0.2, fine_root_lifespan: 1, construction_cost: 0.6}
`

func fir() *brutePlant {
	s := bruteSet{6, 0.5, 0.04, 0.7, 120, 50}
	return &brutePlant{height: 0.5, leafArea: 0.02, leafMass: 2.4, stem: 2, root: 1.5, crownLAI: 1, chi: 1, absorptance: 0.85,
		rate: 1.2, rateT: 20, rateQ10: 2, sun: s, shade: s, tRef: 25, tOpt: 22, tWidth: 18, q10: 2.1, share: always,
		lifespan: 5, fineShare: 0.2, fineLife: 1, cost: 0.6}
}

const twoSets = `
  - name: Beech
    height: 0.4 m
    leaf_area: 250 cm2
    crown_lai: 1.5
    chi: 2.5
    absorptance: 0.9
    leaves: {out: 04-25, full: 05-15, colour: 09-25, bare: 10-20}
    mass: {leaf: 1 g, stem: 1.5 g, root: 1.8 g}
    leaf:
      sun: {amax: 8, rd: 0.9, phi: 0.05, theta: 0.8, lma: 60, growth_light: 60}
      shade: {amax: 4, rd: 0.3, phi: 0.055, theta: 0.9, lma: 30, growth_light: 4}
      t_ref: 25 C
      t_opt: 25 C
      t_width: 18 C
      q10: 2
    respiration: {stem: 0.8, root: 0.8, t_ref: 20 C, q10: 1.8}
    replacement: {leaf_lifespan: 0.5, fine_root_share: 0.25, fine_root_lifespan: 1, construction_cost: 0.6}
`

func beech() *brutePlant {
	return &brutePlant{height: 0.4, leafArea: 0.025, leafMass: 1, stem: 1.5, root: 1.8, crownLAI: 1.5, chi: 2.5, absorptance: 0.9,
		rate: 0.8, rateT: 20, rateQ10: 1.8, sun: bruteSet{8, 0.9, 0.05, 0.8, 60, 60}, shade: bruteSet{4, 0.3, 0.055, 0.9, 30, 4},
		tRef: 25, tOpt: 25, tWidth: 18, q10: 2, deciduous: true, share: ramp(114, 134, 267, 292),
		lifespan: 0.5, fineShare: 0.25, fineLife: 1, cost: 0.6}
}

// hungry is a fir with so much stem that it breaks even only in more light than the stand lets through.
func hungry() *brutePlant {
	p := fir()
	p.stem = 9
	return p
}

var hungrySet = strings.NewReplacer("name: Fir", "name: Hungry", "stem: 2 g", "stem: 9 g").Replace(oneSet)

// Evergreen stand, circle on the flat, one constant set; a second plant whose break-even lies above the light under the stand.
func TestPlainEvergreenCircle(t *testing.T) {
	t.Parallel()
	c := &bruteCase{lat: 44.35, lon: -71.9, offset: -5, stepMinutes: 60, season: span(120, 272), leafOn: span(120, 272),
		inside: func(x, y float64) bool { return x*x+y*y < 15*15 },
		matrix: []bruteLayer{{9, 24, 4, 0, 1, 0.95, 0.85, always}}}
	hours(c)
	check(t, c, `
site: {latitude: 44.35, longitude: -71.9, utc_offset: -5}
weather: {hourly: weather.csv, stamp: start, par_fraction: 0.45}
season: {from: 05-01, to: 09-30}
sampling: {step: 60 min, sky: uniform}
stand:
  height: 24 m
  crown_base: 9 m
  layers: [{from: 9 m, to: 24 m, lai: 4, wai: 0, chi: 1, clumping: 0.95, absorptance: 0.85, leaves: evergreen}]
seedlings:`+oneSet+strings.TrimPrefix(hungrySet, "\n")+`
treatments: [{name: Circle, opening: {circle: {diameter: 30 m}}, measured: crowns}]
stations:
  - {name: centre, distance: 0 m}
  - {name: north, bearing: N, distance: 14.5 m}
  - {name: under, bearing: SE, distance: 27 m}
`, false, []*brutePlant{fir(), hungry()})
}

// Deciduous stand over a deciduous understory on a slope, oval opening, overcast sky, sets that differ, early leaves.
func TestPlainDeciduousSlope(t *testing.T) {
	t.Parallel()
	sin, cos := math.Sincos(70 * rad)
	leaves, shrub := ramp(133, 154, 270, 290), ramp(125, 140, 265, 285)
	under := bruteLayer{0.6, 2, 0.8, 0.1, 1, 1, 0.85, shrub}
	c := &bruteCase{lat: 44.35, lon: -71.9, offset: -5, slope: 0.3, aspect: 155, overcast: true, stepMinutes: 60,
		season: span(120, 272), leafOn: span(154, 265),
		inside: func(x, y float64) bool {
			u, v := x*sin+y*cos, x*cos-y*sin
			return u*u/400+v*v/100 < 1
		},
		matrix:  []bruteLayer{{9, 24, 3.5, 0.5, 1.6, 0.9, 0.85, leaves}, under},
		opening: []bruteLayer{under}}
	hours(c)
	check(t, c, `
site: {latitude: 44.35, longitude: -71.9, utc_offset: -5, slope: 30 %, aspect: 155}
weather: {hourly: weather.csv, stamp: start, par_fraction: 0.45}
season: {from: 05-01, to: 09-30}
sampling: {step: 60 min, sky: overcast}
stand:
  height: 24 m
  crown_base: 9 m
  layers: [{from: 9 m, to: 24 m, lai: 3.5, wai: 0.5, chi: 1.6, clumping: 0.9, absorptance: 0.85, leaves: {out: 05-14, full: 06-04, colour: 09-28, bare: 10-18}}]
  understory: [{name: shrubs, base: 0.6 m, height: 2 m, lai: 0.8, wai: 0.1, chi: 1, clumping: 1, absorptance: 0.85, leaves: {out: 05-06, full: 05-21, colour: 09-23, bare: 10-13}}]
seedlings:`+twoSets+`
treatments: [{name: Oval, opening: {ellipse: {length: 40 m, width: 20 m, bearing: 70}}, measured: crowns}]
stations:
  - {name: centre, distance: 0 m}
  - {name: south edge, bearing: S, distance: 9 m}
  - {name: under, bearing: W, distance: 30 m}
`, false, []*brutePlant{beech()})
}

// Southern hemisphere, season across New Year, stamps at the end of the hour, a strip, clumped layers with wood, two plants.
func TestPlainSouthernStripEndStamp(t *testing.T) {
	t.Parallel()
	sin, cos := math.Sincos(120 * rad)
	c := &bruteCase{lat: -41, lon: 146, offset: 10, stepMinutes: 30, season: span(304, 89), leafOn: span(304, 89),
		inside: func(x, y float64) bool {
			return math.Abs(x*sin+y*cos) < 30 && math.Abs(x*cos-y*sin) < 8
		},
		matrix: []bruteLayer{{8, 20, 2.5, 0.4, 1, 0.7, 0.85, always}, {14, 26, 1.5, 0.2, 0.7, 0.8, 0.8, always}}}
	hours(c)
	check(t, c, `
site: {latitude: 41 S, longitude: 146 E, utc_offset: 10}
weather: {hourly: weather.csv, stamp: end, par_fraction: 0.45}
season: {from: 11-01, to: 03-31}
sampling: {step: 30 min, sky: uniform}
stand:
  height: 26 m
  crown_base: 8 m
  layers:
    - {from: 8 m, to: 20 m, lai: 2.5, wai: 0.4, chi: 1, clumping: 0.7, absorptance: 0.85, leaves: evergreen}
    - {from: 14 m, to: 26 m, lai: 1.5, wai: 0.2, chi: 0.7, clumping: 0.8, absorptance: 0.8, leaves: evergreen}
seedlings:`+oneSet+`
treatments: [{name: Strip, opening: {strip: {length: 60 m, width: 16 m, bearing: 120}}, measured: crowns}]
stations:
  - {name: centre, distance: 0 m}
  - {name: north side, bearing: 30, distance: 7 m}
`, true, []*brutePlant{fir()})
}
