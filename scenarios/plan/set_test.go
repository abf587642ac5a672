package plan

import (
	"math"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"shadeledger/canopy"
	"shadeledger/scenarios"
)

func TestOverrides(t *testing.T) {
	text := sound(t, "  - {name: Circle 1.5 H, opening: {circle: {diameter: 1.5 H}}}\n")
	diameter := func(p *scenarios.Plan) float64 {
		return p.Treatments[1].Opening.(scenarios.Cleared).Stems.(canopy.Circle).Diameter()
	}
	for _, c := range []struct {
		set  string
		get  func(*scenarios.Plan) float64
		want float64
	}{
		{"treatments.Circle 1.5 H.opening.circle.diameter=1.2 H", diameter, 28.8},
		{"stand.height=30 m", diameter, 45},
		{"site.latitude=45 30 00 N", func(p *scenarios.Plan) float64 { return p.Site.Latitude / rad }, 45.5},
		{"sampling.grid=2 m", func(p *scenarios.Plan) float64 { return p.Sampling.Grid }, 2}, // the block is not in the plan
		{"sampling.heights=[1 m, 2 m]", func(p *scenarios.Plan) float64 { return p.Sampling.Heights[1] }, 2},
		{"seedlings.Quercus rubra.height=0.7 m", func(p *scenarios.Plan) float64 { return p.Seedlings[0].Height }, 0.7}, // by species
		{"seedlings.0.height=0.8 m", func(p *scenarios.Plan) float64 { return p.Seedlings[0].Height }, 0.8},
		{"weather.normals.mean=[-8, -7, -1, 5, 12, 17, 19, 18, 14, 7, 1, -4]", func(p *scenarios.Plan) float64 { return p.Stand.Height }, 24},
	} {
		p, faults := parse("plan.yaml", text, Options{Set: []string{c.set}}, nil)
		if p == nil {
			t.Errorf("%s: %v", c.set, faults)
			continue
		}
		if got := c.get(p); math.Abs(got-c.want) > 1e-9 {
			t.Errorf("%s: got %g, want %g", c.set, got, c.want)
		}
	}
}

// A fault of an override names the flag, as the plan's text is not to blame.
func TestBadOverrides(t *testing.T) {
	for _, c := range []struct{ set, want string }{
		{"site.latitude=95", "--set site.latitude=95: site.latitude: 95; degrees from -90 to 90, such as 44.35 N or 44 21 00 S"},
		{"stand.hight=24 m", "--set stand.hight=24 m: stand.hight: hight; not a key here; did you mean height?"},
		{"stand.height", "--set stand.height: write --set KEY=VALUE"},
		{"stand.height=24", "--set stand.height=24: stand.height: 24; a unit is missing: write 24 m or 24 ft"},
		{"treatments.Thin.matrix.lai=3", "--set treatments.Thin.matrix.lai=3: no item of that name; there are No action"},
		{"stand.height.best=3 m", "--set stand.height.best=3 m: stand.height: a value with doubt is {low, best, high} with low <= best <= high"},
	} {
		p, faults := parse("plan.yaml", sound(t, ""), Options{Set: []string{c.set}}, nil)
		if p != nil {
			t.Errorf("%s: read without a fault", c.set)
			continue
		}
		if got := only(t, faults); got != c.want {
			t.Errorf("%s: %q, want %q", c.set, got, c.want)
		}
	}
}

// Paths of the plan count from its folder, paths of an override from the current one.
func TestPathsOfOverridesCountFromHere(t *testing.T) {
	here, there, plan := t.TempDir(), t.TempDir(), measured(t, "hourly: w.csv")
	t.Chdir(here)
	write := func(dir, name, text string) {
		if err := os.WriteFile(filepath.Join(dir, name), []byte(text), 0o600); err != nil {
			t.Fatal(err)
		}
	}
	write(there, "plan.yaml", string(plan))
	write(there, "w.csv", year(8760))
	write(here, "w.csv", strings.Replace(year(8760), ",4.5", ",9.5", 1))
	first := func(set ...string) float64 {
		p, faults := Read(there, Options{Set: set})
		if p == nil {
			t.Fatal(faults)
		}
		return p.Weather.Series(p.Site, p.Sampling.Step, p.Par).Temperature[0]
	}
	if a, b := first(), first("weather.hourly=w.csv"); math.Abs(a-4.5) > 1 || b <= a {
		t.Errorf("first temperatures %g from the plan's folder and %g from here; want about 4.5 and a warmer one", a, b)
	}
}
