package radiation

import (
	"encoding/csv"
	"math"
	"os"
	"strconv"
	"strings"
	"testing"
	"time"
)

func rows(t testing.TB, name string) []map[string]string {
	t.Helper()
	f, err := os.Open("../testdata/radiation/" + name)
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	r := csv.NewReader(f)
	r.Comment = '#'
	all, err := r.ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	var out []map[string]string
	for _, line := range all[1:] {
		row := map[string]string{}
		for i, k := range all[0] {
			row[k] = line[i]
		}
		out = append(out, row)
	}
	if len(out) == 0 {
		t.Fatalf("%s is empty", name)
	}
	return out
}

func number(t testing.TB, s string) float64 {
	t.Helper()
	v, err := strconv.ParseFloat(s, 64)
	if err != nil {
		t.Fatalf("%q is not a number", s)
	}
	return v
}

// Published and independently computed places of the sun, each within its own tolerance.
func TestPositionAgainstReference(t *testing.T) {
	worst := 0.0
	for _, r := range rows(t, "solar_position.csv") {
		when, err := time.Parse(time.RFC3339, r["utc_time"])
		if err != nil {
			t.Fatal(err)
		}
		site := Site{Latitude: number(t, r["latitude_deg"]) * deg, Longitude: number(t, r["longitude_east_deg"]) * deg}
		got := Position(when, site)
		el, az := number(t, r["elevation_geometric_deg"]), number(t, r["azimuth_from_north_clockwise_deg"])
		Δel := math.Abs(got.Elevation/deg - el)
		Δaz := math.Abs(math.Remainder(got.Azimuth/deg-az, 360)) * math.Cos(el*deg)
		tolerance := 0.01 // the promise of this package; rows with a finer one carry other corrections (delta T, site height)
		if tol := strings.Fields(r["suggested_tolerance"]); len(tol) > 0 {
			if v, err := strconv.ParseFloat(tol[0], 64); err == nil && v > tolerance {
				tolerance = v
			}
		}
		worst = max(worst, Δel, Δaz)
		if Δel > tolerance || Δaz > tolerance {
			t.Errorf("%s %s: elevation off by %.5f, azimuth by %.5f deg, tolerance %g", r["case_id"], r["utc_time"], Δel, Δaz, tolerance)
		}
		if d := r["earth_sun_distance_au"]; d != "" && math.Abs(got.Distance-number(t, d)) > 7e-5 { // geocentric against topocentric: up to 4.3e-5
			t.Errorf("%s: distance %.7f, want %s AU", r["case_id"], got.Distance, d)
		}
	}
	t.Logf("worst error %.5f deg", worst)
}
