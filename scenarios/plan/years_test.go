package plan

import (
	"math"
	"os"
	"path/filepath"
	"strings"
	"testing"
)

// Without a region crowns come in at the speed measured on the leading species, else at the usual one; a region or the plan's own figure goes before. Each is listed with its source.
func TestClosingBySpecies(t *testing.T) {
	const text = `
title: check
REGION
site: {latitude: 45, longitude: -90, utc_offset: -6}
weather: {normals: {temperature_unit: C, radiation_unit: MJ m-2 d-1, mean: [0,0,5,9,13,17,19,18,14,8,3,0], min: [-4,-4,0,4,8,12,14,13,9,4,0,-4], max: [4,4,10,14,18,22,24,23,19,12,7,4], radiation: [5,7,11,15,19,21,21,18,13,8,5,4]}}
season: {from: 06-01, to: 08-31}
stand:
  height: 24 m
  basal_area: {SPECIES: 25 m2/ha, Acer saccharum: 3 m2/ha}
seedlings:
  - {species: Quercus alba}
treatments:
  - name: check
`
	for _, c := range []struct {
		species, region string
		want            [3]float64
		source          string
	}{
		{"Populus tremuloides", "", [3]float64{0.10, 0.15, 0.20}, "Pritchard & Comeau 2004"},
		{"Quercus rubra", "", [3]float64{0.06, 0.14, 0.26}, "Hibbs 1982"},
		{"Picea abies", "", [3]float64{0.05, 0.12, 0.20}, "Bayer & Pretzsch 2017"},
		{"Quercus alba", "", [3]float64{0.10, 0.18, 0.40}, "Runkle & Yetter 1987"},
		{"Quercus rubra", "region: coastal-douglas-fir", [3]float64{0.10, 0.20, 0.35}, "the region's"},
	} {
		file := filepath.Join(t.TempDir(), "plan.yaml")
		if err := os.WriteFile(file, []byte(strings.NewReplacer("REGION", c.region, "SPECIES", c.species).Replace(text)), 0o600); err != nil {
			t.Fatal(err)
		}
		p, faults := Read(file, Options{})
		if len(faults) > 0 {
			t.Fatal(faults)
		}
		for i, x := range p.Years.Closing {
			if math.Abs(x-c.want[i]) > 1e-12 {
				t.Errorf("%s %s: %v m a year for %v", c.species, c.region, p.Years.Closing, c.want)
			}
		}
		listed := false
		for _, a := range p.Assumed {
			listed = listed || a.Key == "years.side_closure" && strings.Contains(a.Source, c.source)
		}
		if !listed {
			t.Errorf("%s %s: side_closure is not listed with its source", c.species, c.region)
		}
	}
}
