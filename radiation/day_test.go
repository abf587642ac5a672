package radiation

import (
	"math"
	"strings"
	"testing"
	"time"
)

func TestDeclinationAndEquationOfTime(t *testing.T) {
	for _, r := range rows(t, "solar_declination_eot.csv") {
		day, err := time.Parse(time.DateOnly, r["date"])
		if err != nil {
			t.Fatal(err)
		}
		e := At(day.Add(12 * time.Hour))
		if got, want := e.Declination/deg, number(t, r["declination_apparent_deg"]); math.Abs(got-want) > 0.003 {
			t.Errorf("%s: declination %.5f, want %.5f", r["date"], got, want)
		}
		if got, want := e.EquationOfTime/deg*4, number(t, r["equation_of_time_min"]); math.Abs(got-want) > 0.03 {
			t.Errorf("%s: equation of time %.4f min, want %.4f", r["date"], got, want)
		}
		if got, want := e.Distance, number(t, r["earth_sun_distance_au"]); math.Abs(got-want) > 3e-5 {
			t.Errorf("%s: distance %.6f, want %.6f", r["date"], got, want)
		}
	}
}

// Daily extraterrestrial sums by true integration, within 0.5 %.
func TestDailyExtraterrestrial(t *testing.T) {
	worst := 0.0
	for _, r := range rows(t, "daily_extraterrestrial_integrated.csv") {
		h := NewHorizontal(Site{Latitude: number(t, r["latitude_deg"]) * deg})
		start := time.Date(2023, time.Month(int(number(t, r["month"]))), int(number(t, r["day"])), 0, 0, 0, 0, time.UTC)
		sum := 0.0
		for i := range 96 {
			s := h.Place(At(start.Add(time.Duration(i)*15*time.Minute + 450*time.Second)))
			sum += ExtraterrestrialNormal(s.Distance) * math.Max(0, math.Sin(s.Elevation)) * 900e-6
		}
		want := number(t, r["H0_S0_1361_MJ_m2_d"])
		if want > 0.5 {
			worst = math.Max(worst, math.Abs(sum/want-1))
		}
		if math.Abs(sum-want) > 0.005*want+0.005 { // 0.005 MJ: days on which the sun barely shows
			t.Errorf("latitude %s month %s: %.4f MJ, want %.4f", r["latitude_deg"], r["month"], sum, want)
		}
	}
	t.Logf("worst %.4f %%", 100*worst)
}

// crossing finds when the sun passes an elevation between two instants.
func crossing(h Horizontal, a, b time.Time, elevation float64) time.Time {
	up := func(t time.Time) bool { return h.Place(At(t)).Elevation > elevation }
	first := up(a)
	for b.Sub(a) > 100*time.Millisecond {
		m := a.Add(b.Sub(a) / 2)
		if up(m) == first {
			a = m
		} else {
			b = m
		}
	}
	return a
}

// Sunrise, noon and sunset, polar day and polar night.
func TestRiseAndSet(t *testing.T) {
	worst, polar := 0.0, 0
	for _, r := range rows(t, "solar_rise_set.csv") {
		site := Site{Latitude: number(t, r["latitude_deg"]) * deg, Longitude: number(t, r["longitude_east_deg"]) * deg}
		h := NewHorizontal(site)
		day, err := time.Parse(time.DateOnly, r["date_local"])
		if err != nil {
			t.Fatal(err)
		}
		offset := number(t, r["utc_offset_h"])
		start := day.Add(-time.Duration(offset * float64(time.Hour)))
		dip := 0.0
		if strings.HasPrefix(r["horizon_definition"], "refraction") {
			dip = -0.8333 * deg
		}
		noon := start
		for i := range 24 * 12 {
			if at := start.Add(time.Duration(i) * 5 * time.Minute); h.Place(At(at)).Elevation > h.Place(At(noon)).Elevation {
				noon = at
			}
		}
		if strings.Contains(r["horizon_definition"], "polar") {
			polar++
			lowest := start
			for i := range 24 * 12 {
				if at := start.Add(time.Duration(i) * 5 * time.Minute); h.Place(At(at)).Elevation < h.Place(At(lowest)).Elevation {
					lowest = at
				}
			}
			day := strings.Contains(r["horizon_definition"], "day")
			if day && h.Place(At(lowest)).Elevation < dip || !day && h.Place(At(noon)).Elevation > dip {
				t.Errorf("%s at %s: not %s", r["date_local"], r["latitude_deg"], r["horizon_definition"])
			}
			continue
		}
		for name, at := range map[string]time.Time{"sunrise_local": crossing(h, noon.Add(-12*time.Hour), noon, dip), "sunset_local": crossing(h, noon, noon.Add(12*time.Hour), dip)} {
			if r[name] == "" {
				continue
			}
			layout := "15:04:05"
			if len(r[name]) == 5 {
				layout = "15:04"
			}
			want, err := time.Parse(layout, r[name])
			if err != nil {
				t.Fatalf("%s: %v", r[name], err)
			}
			local := at.Add(time.Duration(offset * float64(time.Hour)))
			got := time.Date(0, 1, 1, local.Hour(), local.Minute(), local.Second(), local.Nanosecond(), time.UTC)
			miss := math.Abs(math.Remainder(got.Sub(want).Seconds(), 86400))
			// 0.006 deg of sun is 1.5 s at the equator and more where the sun rises aslant
			slant := math.Max(0.05, math.Sin(math.Acos(math.Min(1, math.Abs(math.Sin(site.Latitude))/math.Cos(At(at).Declination)))))
			limit := number(t, r["tolerance_s"]) + 0.006/360*86400/slant/math.Cos(At(at).Declination)
			worst = math.Max(worst, miss)
			if miss > limit {
				t.Errorf("%s at %s, %s: %s off by %.1f s, limit %.1f", r["date_local"], r["latitude_deg"], r["longitude_east_deg"], name, miss, limit)
			}
		}
	}
	t.Logf("worst %.1f s; %d polar days and nights", worst, polar)
	if polar < 5 {
		t.Errorf("only %d polar rows", polar)
	}
}

// The blended ephemeris against the direct one.
func TestBlend(t *testing.T) {
	h := NewHorizontal(Site{Latitude: 0.8, Longitude: -1.2})
	start := time.Date(2024, 3, 5, 0, 0, 0, 0, time.UTC)
	for d := range 360 {
		a := start.AddDate(0, 0, d)
		b := a.Add(6 * time.Hour)
		for _, f := range []float64{0.1, 0.5, 0.9} {
			got := h.Place(Blend(At(a), At(b), f))
			want := h.Place(At(a.Add(time.Duration(f * float64(6*time.Hour)))))
			Δ := math.Max(math.Abs(got.Elevation-want.Elevation), math.Abs(math.Remainder(got.Azimuth-want.Azimuth, 2*math.Pi))*math.Cos(want.Elevation)) / deg
			if Δ > 2e-4 {
				t.Fatalf("%v at %.1f: blended sun is off by %.6f deg", a, f, Δ)
			}
		}
	}
}

// Laws: the southern hemisphere mirrors the northern half a year on; the date line does not matter; the poles work.
func TestPlacesOnTheGlobe(t *testing.T) {
	at := time.Date(2024, 6, 1, 3, 0, 0, 0, time.UTC)
	a := Position(at, Site{Latitude: 0.5, Longitude: math.Pi - 1e-9})
	b := Position(at, Site{Latitude: 0.5, Longitude: -math.Pi + 1e-9})
	if math.Abs(a.Elevation-b.Elevation) > 1e-7 || math.Abs(math.Remainder(a.Azimuth-b.Azimuth, 2*math.Pi)) > 1e-7 {
		t.Errorf("the date line moves the sun: %v and %v", a, b)
	}
	for _, pole := range []float64{math.Pi / 2, -math.Pi / 2} {
		s := Position(at, Site{Latitude: pole})
		if δ := At(at).Declination; math.Abs(s.Elevation-math.Copysign(δ, pole*δ)) > 1e-4 {
			t.Errorf("at the pole %.1f the sun stands at %.4f, declination %.4f", pole, s.Elevation, δ)
		}
	}
	e := At(at)
	north, south := NewHorizontal(Site{Latitude: 0.7}), NewHorizontal(Site{Latitude: -0.7})
	flipped := e
	flipped.sinDec = -e.sinDec
	p, q := north.Place(e), south.Place(flipped)
	if math.Abs(p.Elevation-q.Elevation) > 1e-12 || math.Abs(math.Remainder(p.Azimuth+q.Azimuth-math.Pi, 2*math.Pi)) > 1e-9 {
		t.Errorf("mirrored suns differ: %v and %v", p, q)
	}
}

// The measured year of the MacLeish example: its radiation centroid lies within 4 min of computed noon, so its clock is
// eastern standard time, if the stamps are taken as the middles of their half hours; taken as starts it would be 15 min off,
// on the clearest days too.
func TestMeasuredClock(t *testing.T) {
	h := NewHorizontal(Site{Latitude: 42.45 * deg, Longitude: -72.68 * deg})
	var moment, sum, noon, days float64
	for _, r := range rows(t, "../../scenarios/plan/examples/macleish/weather.csv") {
		at, err := time.Parse("2006-01-02T15:04", r["time"])
		if err != nil {
			t.Fatal(err)
		}
		G := math.Max(0, number(t, r["ghi_w_m2"]))
		moment += G * (float64(at.Hour()) + float64(at.Minute())/60)
		sum += G
		if at.Hour() == 12 && at.Minute() == 0 {
			noon += 12 - h.HourAngle(At(at.Add(5*time.Hour)))*12/math.Pi
			days++
		}
	}
	miss := (moment/sum - noon/days) * 60
	t.Logf("centroid %.3f h, noon %.3f h", moment/sum, noon/days)
	if days != 365 || math.Abs(miss) > 4 {
		t.Errorf("radiation is centred %.1f min off noon over %.0f days", miss, days)
	}
}
