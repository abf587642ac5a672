package scenarios_test

import (
	"math"
	"testing"
	"time"

	"shadeledger/canopy"
	"shadeledger/leaf"
	"shadeledger/leaf/traits"
	"shadeledger/radiation"
	"shadeledger/radiation/weather"
	"shadeledger/scenarios"
	"shadeledger/scenarios/ledger"
)

const degree = math.Pi / 180

// normals of an invented station near 44 N.
func normals() *weather.Normals {
	n := &weather.Normals{
		Mean:   [12]float64{-8, -7, -2, 5, 12, 17, 20, 19, 14, 8, 2, -5},
		Min:    [12]float64{-14, -13, -7, 0, 6, 11, 13, 12, 8, 3, -2, -9},
		Max:    [12]float64{-3, -1, 4, 11, 19, 23, 26, 25, 20, 13, 6, 0},
		Global: [12]float64{6, 9, 13, 16, 19, 21, 21, 18, 14, 9, 6, 5},
	}
	for m := range 12 {
		n.SunshineShare[m], n.DiffuseShare[m] = math.NaN(), math.NaN()
	}
	return n
}

func deciduous(t testing.TB) leaf.Calendar {
	t.Helper()
	d, err := leaf.NewDeciduous(leaf.Date{Month: 5, Day: 14}, leaf.Date{Month: 6, Day: 4}, leaf.Date{Month: 9, Day: 28}, leaf.Date{Month: 10, Day: 18})
	if err != nil {
		t.Fatal(err)
	}
	return d
}

func slab(lai float64, c leaf.Calendar) scenarios.Layer {
	return scenarios.Layer{Calendar: c, Layer: canopy.Layer{Bottom: 9, Top: 24, LAI: lai, WAI: 0.5, Chi: 1, Clumping: 0.95, Absorptance: 0.85}}
}

func seedling(t testing.TB, name string, height float64) scenarios.Seedling {
	t.Helper()
	s, err := traits.Find(name)
	if err != nil {
		t.Fatal(err)
	}
	p := s.Plant()
	return scenarios.Seedling{Name: s.Common, Botanical: s.Botanical, Plant: ledger.Plant{
		Height: height, LeafArea: p.LeafArea, LeafMass: p.LeafMass, CrownLAI: p.CrownLAI, Chi: p.Chi, Absorptance: p.Absorptance,
		Organs: []ledger.Organ{
			{Line: ledger.Stem, Mass: p.StemMass, Rate: p.StemRate, TRef: p.OrganTRef, Q10: p.StemQ10},
			{Line: ledger.Root, Mass: p.RootMass, Rate: p.RootRate, TRef: p.OrganTRef, Q10: p.RootQ10},
		},
		Leaves: s.SeedlingCalendar(), Traits: s.SeedlingAcclimation(), Temperature: s.Temperature(), LightRespiration: 1, Factor: 2,
		Turnover: ledger.Turnover{LeafLifespan: p.LeafLifespan, FineRootShare: p.FineRootShare, FineRootLifespan: p.FineRootLifespan,
			ConstructionCost: p.ConstructionCost},
	}}
}

func circle(t testing.TB, diameter float64) canopy.Outline {
	t.Helper()
	c, err := canopy.NewCircle(diameter)
	if err != nil {
		t.Fatal(err)
	}
	return c
}

// invented is a small plan: a deciduous slab, two seedlings, uncut, thinned and opened.
func invented(t testing.TB) *scenarios.Plan {
	t.Helper()
	d := deciduous(t)
	full, thin := []scenarios.Layer{slab(5, d)}, []scenarios.Layer{slab(2, d)}
	return &scenarios.Plan{
		Title:   "Invented stand",
		Site:    radiation.Site{Latitude: 44.35 * degree, Longitude: -71.9 * degree, UTCOffset: -5},
		Ground:  canopy.Ground{Slope: 10 * degree, Aspect: 155 * degree},
		Weather: normals(), Par: weather.Par{Fraction: 0.45},
		Season: scenarios.Period{From: scenarios.Date{Month: 5, Day: 1}, To: scenarios.Date{Month: 9, Day: 30}},
		Stand:  scenarios.Stand{Height: 24, CrownBase: 9, CrownRadius: 3.5, Layers: full},
		Treatments: []scenarios.Treatment{
			{Name: "No action", Matrix: full, Opening: scenarios.NoOpening{}},
			{Name: "Thinned", Matrix: thin, Opening: scenarios.NoOpening{}},
			{Name: "Circle", Matrix: full, Opening: scenarios.Cleared{Stems: circle(t, 43), Crowns: circle(t, 36)}},
		},
		Seedlings: []scenarios.Seedling{seedling(t, "Quercus rubra", 0.4), seedling(t, "Tsuga canadensis", 0.2)},
		Sampling:  scenarios.Sampling{Step: 30 * time.Minute, Sky: radiation.AllWeather{}, Dormancy: leaf.Pine},
	}
}

func run(t testing.TB, p *scenarios.Plan, o scenarios.Options) *scenarios.Results {
	t.Helper()
	r, err := scenarios.Run(p, o)
	if err != nil {
		t.Fatal(err)
	}
	return r
}
