package decide

import (
	"math"
	"testing"

	"shadeledger/canopy"
	"shadeledger/scenarios"
	"shadeledger/scenarios/ledger"
)

// Shares add to one, zones hold no more than the comfortable ground, and their classes are those of break-evens sought at the very spots.
func TestPlacesAddUpAndHold(t *testing.T) {
	p := sized(t, "sampling.grid=2 m")
	places, err := FindPlaces(p, 2, false)
	if err != nil {
		t.Fatal(err)
	}
	if len(places.Shares) != 5*len(p.Seedlings) || len(places.Whole) != 4 {
		t.Fatalf("%d shares, %v without an opening", len(places.Shares), places.Whole)
	}
	for _, s := range places.Shares {
		if sum := s.Of[0] + s.Of[1] + s.Of[2]; math.Abs(sum-1) > 1e-9 {
			t.Errorf("%s, %s: shares add to %g", s.Treatment, s.Species, sum)
		}
		inZones := 0.0
		for _, z := range places.Zones {
			if z.Treatment == s.Treatment && z.Species == s.Species {
				inZones += z.Share
				if z.Area < fewestCells*4 || z.Distance < 0 || z.Bearing < 0 || z.Bearing >= 2*math.Pi {
					t.Errorf("%+v", z)
				}
			}
		}
		if inZones > s.Of[ledger.Comfortable]+1e-9 || inZones < s.Of[ledger.Comfortable]-0.02 {
			t.Errorf("%s, %s: %.3f in zones, %.3f comfortable", s.Treatment, s.Species, inZones, s.Of[ledger.Comfortable])
		}
	}
}

// Thresholds between the spots whose break-even is sought are within 1.2 points (1.0 found, of some 30), and not one spot in a hundred changes its class by it.
func TestThresholdsBetweenSpots(t *testing.T) {
	p := sized(t)
	m, err := scenarios.NewMapper(p, 2)
	if err != nil {
		t.Fatal(err)
	}
	var opening *scenarios.Treatment
	for i := range m.Plan().Treatments {
		if m.Plan().Treatments[i].Name == "Circle 1.0 H" {
			opening = &m.Plan().Treatments[i]
		}
	}
	f := newField(opening.Opening.(scenarios.Cleared).Crowns, 1.7, 0)
	between, err := f.thresholds(m, opening)
	if err != nil {
		t.Fatal(err)
	}
	exact, err := m.Map(opening, f.spots, scenarios.BreakEvens)
	if err != nil {
		t.Fatal(err)
	}
	n, changed, worst := 0, 0, 0.0
	for i := range exact {
		for k, in := range f.inside {
			if x := exact[i][k]; in && x.BreakEven.Found {
				n++
				worst = math.Max(worst, math.Abs(between[i][k]-x.BreakEven.Threshold.LeafOn))
				if (x.LightLeafOn >= between[i][k]) != (x.LightLeafOn >= x.BreakEven.Threshold.LeafOn) {
					changed++
				}
			}
		}
	}
	t.Logf("%d spots and seedlings: thresholds off by %.2f points at most, %d classes changed", n, worst, changed)
	if n < 500 || worst > 1.2 || float64(changed) > 0.01*float64(n) {
		t.Errorf("%d of %d classes changed, thresholds off by %.2f points", changed, n, worst)
	}
}

// Two pieces are two zones, the larger first; their middles are where they should be.
func TestZonesArePieces(t *testing.T) {
	crowns, err := canopy.NewStrip(20, 10, math.Pi/2)
	if err != nil {
		t.Fatal(err)
	}
	f := newField(crowns, 1, 0)
	p := sized(t)
	m, err := scenarios.NewMapper(p, 1)
	if err != nil {
		t.Fatal(err)
	}
	class := make([]ledger.Class, len(f.spots))
	spots := make([]scenarios.Spot, len(f.spots))
	for k, q := range f.spots {
		if math.Abs(q[0]+7) <= 1 && math.Abs(q[1]) <= 1 || math.Abs(q[0]-6) <= 2 && math.Abs(q[1]) <= 1 || q == [2]float64{0, 4} {
			class[k] = ledger.Comfortable
		}
	}
	zones, err := f.zones(m, &m.Plan().Treatments[4], 0, spots, class)
	if err != nil {
		t.Fatal(err)
	}
	if len(zones) != 2 || zones[0].Area != 15 || zones[1].Area != 9 {
		t.Fatalf("%+v", zones)
	}
	for i, want := range []struct{ distance, bearing float64 }{{6, 90}, {7, 270}} {
		if z := zones[i]; math.Abs(z.Distance-want.distance) > 1e-9 || math.Abs(z.Bearing*180/math.Pi-want.bearing) > 1e-9 {
			t.Errorf("zone %d: %.2f m towards %.1f", z.Number, z.Distance, z.Bearing*180/math.Pi)
		}
	}
}
