package weather

import (
	"math"
	"strings"
	"testing"
	"time"

	"shadeledger/radiation"
)

const deg = math.Pi / 180

func site(latitude float64) radiation.Site {
	return radiation.Site{Latitude: latitude * deg, Longitude: -72 * deg, UTCOffset: -5}
}

var par = Par{Fraction: 0.45}

// measured makes a year of hourly records: kt changes from hour to hour, temperature is the hour's number.
func measured(s radiation.Site, year int, every time.Duration, stamp Stamp) *Records {
	r := &Records{Stamp: stamp}
	h := radiation.NewHorizontal(s)
	shift := map[Stamp]time.Duration{StampStart: 0, StampMiddle: every / 2, StampEnd: every}[stamp]
	nan := math.NaN()
	i := 0
	for t := time.Date(year, 1, 1, 0, 0, 0, 0, time.UTC); t.Year() == year; t = t.Add(every) {
		top := 0.0
		for k := range 4 {
			at := t.Add(time.Duration(2*k+1) * every / 8).Add(-time.Duration(s.UTCOffset * float64(time.Hour)))
			sun := h.Place(radiation.At(at))
			top += radiation.ExtraterrestrialNormal(sun.Distance) * math.Max(0, math.Sin(sun.Elevation)) / 4
		}
		kt := 0.15 + 0.6*math.Abs(math.Sin(float64(i)))
		r.Rows = append(r.Rows, Record{Line: i + 2, Time: t.Add(shift), Global: kt * top, Temperature: float64(i%50) - 10, Humidity: nan, Diffuse: nan, PPFD: nan, DiffusePPFD: nan})
		i++
	}
	return r
}

// total is a year's light above the canopy, mol m-2.
func total(s *Series) float64 {
	sum := 0.0
	for d := range s.Days {
		for i := s.Days[d].LitFrom; i < s.Days[d].LitTo; i++ {
			sum += (s.Lit.Beam[i] + s.Lit.Diffuse[i]) * s.Days[d].Weight
		}
	}
	return sum * s.Seconds * 1e-6
}

// Each interval keeps its energy, its temperature and its place, whatever its stamp means.
func TestRecordsKeepEnergyAndTemperature(t *testing.T) {
	for _, latitude := range []float64{44, -41, 70, 0.1} {
		for _, every := range []time.Duration{time.Hour, 30 * time.Minute} {
			for _, stamp := range []Stamp{StampStart, StampMiddle, StampEnd} {
				if stamp == StampMiddle && every == 30*time.Minute {
					every = time.Hour
				}
				r := measured(site(latitude), 2015, every, stamp)
				if p := r.Check(site(latitude), 15*time.Minute); len(p) > 0 {
					t.Fatalf("latitude %g, every %v, stamp %v: %+v", latitude, every, stamp, p[0])
				}
				s := r.Series(site(latitude), 15*time.Minute, par)
				per := int(every / (15 * time.Minute))
				sum := make([]float64, len(r.Rows))
				for i, x := range s.Lit.Step {
					sum[int(x)/per] += (s.Lit.Beam[i] + s.Lit.Diffuse[i]) / float64(per)
				}
				for k, row := range r.Rows {
					want := row.Global * par.Fraction * radiation.PhotonsPerJoule
					if math.Abs(sum[k]-want) > 1e-9*want && sum[k] != 0 {
						t.Fatalf("latitude %g, stamp %v, row %d: %.6f umol, want %.6f", latitude, stamp, k, sum[k], want)
					}
					if got := s.Temperature[k*per+per/2]; got != row.Temperature {
						t.Fatalf("stamp %v: temperature %g in interval %d, want %g", stamp, got, k, row.Temperature)
					}
				}
				for i := range s.Lit.Step {
					if s.Lit.Elevation[i] <= 0 || s.Lit.Beam[i] < 0 || s.Lit.Diffuse[i] < 0 || s.Lit.Clearness[i] < 1 || math.IsNaN(s.Lit.Brightness[i]) {
						t.Fatalf("lit sub-step %d: elevation %g, beam %g, diffuse %g, epsilon %g", i, s.Lit.Elevation[i], s.Lit.Beam[i], s.Lit.Diffuse[i], s.Lit.Clearness[i])
					}
				}
			}
		}
	}
}

// Stamps of half hours by their middles, from midnight: the first record reaches back into the year before.
func TestMiddleStampsFromMidnight(t *testing.T) {
	r := measured(site(44), 2015, 30*time.Minute, StampStart)
	r.Stamp = StampMiddle
	if p := r.Check(site(44), 15*time.Minute); len(p) > 0 {
		t.Fatal(p[0])
	}
	s := r.Series(site(44), 15*time.Minute, par)
	if s.Temperature[0] != r.Rows[0].Temperature || s.Temperature[1] != r.Rows[1].Temperature || s.Temperature[len(s.Temperature)-1] != r.Rows[0].Temperature {
		t.Errorf("a middle stamp holds for a quarter hour either side: got %v, last %g", s.Temperature[:4], s.Temperature[len(s.Temperature)-1])
	}
}

// Measured columns go before relations.
func TestMeasuredColumnsTakePrecedence(t *testing.T) {
	base := measured(site(44), 2015, time.Hour, StampStart)
	share := func(change func(*Record)) (diffuse, all float64) {
		r := &Records{Rows: append([]Record(nil), base.Rows...)}
		for i := range r.Rows {
			change(&r.Rows[i])
		}
		s := r.Series(site(44), 15*time.Minute, par)
		for i := range s.Lit.Step {
			diffuse += s.Lit.Diffuse[i]
			all += s.Lit.Beam[i] + s.Lit.Diffuse[i]
		}
		return diffuse, all
	}
	_, plain := share(func(*Record) {})
	d, a := share(func(x *Record) { x.Diffuse = 0.3 * x.Global })
	if want := radiation.DiffusePAR(0.3); math.Abs(d/a-want) > 1e-12 || math.Abs(a/plain-1) > 1e-12 {
		t.Errorf("dhi at 0.3 of global: diffuse share of PAR %.6f, want %.6f", d/a, want)
	}
	_, a = share(func(x *Record) { x.PPFD = 2.2 * x.Global })
	if want := 2.2 / (0.45 * radiation.PhotonsPerJoule); math.Abs(a/plain-want) > 1e-12 {
		t.Errorf("ppfd given: %.6f of the default, want %.6f", a/plain, want)
	}
	d, a = share(func(x *Record) { x.PPFD, x.DiffusePPFD = 2*x.Global, 0.5*x.Global })
	if math.Abs(d/a-0.25) > 1e-12 {
		t.Errorf("diffuse ppfd given: share %.6f, want 0.25", d/a)
	}
}

// Gaps are bridged by clearness, reported, and faults beyond max_gap; part years are faults with the count of rows.
func TestGapsAndPartYears(t *testing.T) {
	full := measured(site(44), 2015, time.Hour, StampStart)
	want := total(full.Series(site(44), 15*time.Minute, par))
	cut := &Records{Rows: append(append([]Record(nil), full.Rows[:4000]...), full.Rows[4003:]...), MaxGap: 3 * time.Hour}
	if p := cut.Check(site(44), 15*time.Minute); len(p) > 0 {
		t.Fatal(p[0])
	}
	s := cut.Series(site(44), 15*time.Minute, par)
	if got := total(s); math.Abs(got/want-1) > 1e-3 || len(s.Warnings) != 1 || !strings.Contains(s.Warnings[0], "3 missing") {
		t.Errorf("a gap of three hours: %.1f mol, want about %.1f; warnings %q", got, want, s.Warnings)
	}
	cut.MaxGap = 2 * time.Hour
	if p := cut.Check(site(44), 15*time.Minute); len(p) != 1 || !strings.Contains(p[0].Value, "3h") {
		t.Errorf("a gap over max_gap: %+v", p)
	}
	short := &Records{Rows: full.Rows[:8759]}
	if p := short.Check(site(44), 15*time.Minute); len(p) != 1 || !strings.Contains(p[0].Value, "8759 rows") || !strings.Contains(p[0].Want, "8760 rows") {
		t.Errorf("8759 rows: %+v", p)
	}
	leap := measured(site(44), 2016, time.Hour, StampStart)
	if len(leap.Rows) != 8784 || len(leap.Check(site(44), 15*time.Minute)) > 0 {
		t.Errorf("a leap year of %d rows is refused", len(leap.Rows))
	}
	two := &Records{Rows: append(append([]Record(nil), full.Rows...), leap.Rows...)}
	for i := range two.Rows {
		two.Rows[i].Line = i + 2
	}
	s = two.Series(site(44), 15*time.Minute, par)
	if s.Years != 2 || len(s.Days) != 731 || s.Days[0].Year != 2015 || s.Days[730].Year != 2016 {
		t.Errorf("two years: %d years, %d days", s.Years, len(s.Days))
	}
}

// Every impossible value is a fault of its own line.
func TestImpossibleValues(t *testing.T) {
	for name, spoil := range map[string]func(*Record){
		"ghi_w_m2": func(x *Record) { x.Global = -60 }, "air_temp_c": func(x *Record) { x.Temperature = 75 },
		"rh_pct": func(x *Record) { x.Humidity = 150 }, "dhi_w_m2": func(x *Record) { x.Diffuse = x.Global + 500 },
		"ppfd_umol_m2_s": func(x *Record) { x.PPFD = 9000 }, "time": func(x *Record) { x.Time = x.Time.Add(-5 * time.Hour) },
	} {
		r := measured(site(44), 2015, time.Hour, StampStart)
		spoil(&r.Rows[3000])
		p := r.Check(site(44), 15*time.Minute)
		if len(p) == 0 || p[0].Field != name || (p[0].Line != 3002 && p[0].Line != 3003) {
			t.Errorf("%s: %+v", name, p)
		}
	}
	r := measured(site(44), 2015, time.Hour, StampStart)
	r.Rows[12].Global = 1500 // a January noon
	if p := r.Check(site(44), 15*time.Minute); len(p) != 1 || p[0].Line != 14 {
		t.Errorf("more light than the sun sends: %+v", p)
	}
}

// Days keep their sums; the diffuse part keeps the day's share.
func TestDailyKeepsSums(t *testing.T) {
	for _, latitude := range []float64{48, -35, 66} {
		r := &Daily{}
		nan := math.NaN()
		for d := range 365 {
			at := time.Date(2015, 1, 1+d, 0, 0, 0, 0, time.UTC)
			r.Rows = append(r.Rows, DailyRecord{Line: d + 2, Date: at, Global: 0.5 + 3*math.Abs(math.Sin(float64(d))), Sunshine: nan, Tmin: 2, Tmax: 14, Humidity: nan, Rain: nan})
		}
		s := r.Series(site(latitude), 15*time.Minute, par)
		for d := range s.Days {
			sum := 0.0
			for i := s.Days[d].LitFrom; i < s.Days[d].LitTo; i++ {
				sum += (s.Lit.Beam[i] + s.Lit.Diffuse[i]) * s.Seconds * 1e-6
			}
			want := r.Rows[d].Global * par.Fraction * radiation.PhotonsPerJoule
			if s.Days[d].LitTo > s.Days[d].LitFrom && math.Abs(sum-want) > 1e-9*want {
				t.Fatalf("latitude %g day %d: %.6f mol, want %.6f", latitude, d, sum, want)
			}
			for _, T := range s.Temperature[d*96 : (d+1)*96] {
				if T < 1.99 || T > 14.01 {
					t.Fatalf("latitude %g day %d: %.2f C outside its minimum and maximum", latitude, d, T)
				}
			}
		}
	}
}

func kettle() *Normals {
	n := &Normals{
		Mean:         [12]float64{-8.3, -7.1, -1.6, 5.4, 12.4, 17.2, 19.6, 18.6, 14.3, 7.9, 1.9, -4.7},
		Min:          [12]float64{-13.9, -13.2, -7.4, -0.5, 5.7, 10.9, 13.4, 12.5, 8.3, 2.6, -2.4, -9},
		Max:          [12]float64{-2.7, -1, 4.2, 11.3, 19.1, 23.5, 25.8, 24.7, 20.3, 13.2, 6.2, -0.4},
		Global:       [12]float64{6.1, 9.4, 13.5, 16.4, 19.3, 21.1, 21, 17.9, 13.9, 8.9, 5.5, 4.7},
		DiffuseShare: [12]float64{.58, .54, .52, .52, .52, .5, .48, .49, .5, .54, .6, .62},
	}
	for m := range n.SunshineShare {
		n.SunshineShare[m] = math.NaN()
	}
	return n
}

// Months keep their mean radiation, temperature and diffuse share, with every day or with a few that stand for it; the
// days of a month differ in clearness as the published distribution has them.
func TestNormalsKeepMeans(t *testing.T) {
	for _, days := range []int{0, 6} {
		n := kettle()
		n.DaysPerMonth = days
		if p := n.Check(site(44.35), 15*time.Minute); len(p) > 0 {
			t.Fatal(p[0])
		}
		s := n.Series(site(44.35), 15*time.Minute, par)
		var light, temperature, weight, low, high [12]float64
		for m := range low {
			low[m] = math.Inf(1)
		}
		for d := range s.Days {
			day := &s.Days[d]
			m := day.Month - 1
			sum := 0.0
			for i := day.LitFrom; i < day.LitTo; i++ {
				sum += (s.Lit.Beam[i] + s.Lit.Diffuse[i]) * s.Seconds * 1e-6
			}
			low[m], high[m] = math.Min(low[m], sum), math.Max(high[m], sum)
			light[m] += day.Weight * sum
			weight[m] += day.Weight
			for _, T := range s.Temperature[d*96 : (d+1)*96] {
				temperature[m] += day.Weight * T / 96
			}
		}
		for m := range light {
			if want := n.Global[m] * par.Fraction * radiation.PhotonsPerJoule; math.Abs(light[m]/weight[m]/want-1) > 1e-9 {
				t.Errorf("month %d: %.4f mol a day, want %.4f", m+1, light[m]/weight[m], want)
			}
			if got := temperature[m] / weight[m]; math.Abs(got-n.Mean[m]) > 0.02 {
				t.Errorf("month %d: mean %.3f C, want %.1f", m+1, got, n.Mean[m])
			}
			if high[m] < 2*low[m] {
				t.Errorf("month %d: days from %.1f to %.1f mol are too alike", m+1, low[m], high[m])
			}
		}
	}
}

// The quantiles of daily clearness have the month's mean and rise.
func TestClearnessDistribution(t *testing.T) {
	for _, mean := range []float64{0.2, 0.35, 0.5, 0.65} {
		q := clearnessDistribution(mean)
		sum, last := 0.0, 0.0
		const n = 4000
		for i := range n {
			k := q((float64(i) + 0.5) / n)
			if k < last || k < 0.05-1e-9 || k > 1 {
				t.Fatalf("mean %g: quantile %g after %g", mean, k, last)
			}
			last = k
			sum += k / n
		}
		if math.Abs(sum-mean) > 2e-4 {
			t.Errorf("the distribution of mean %g has mean %.5f", mean, sum)
		}
	}
}

// Allocations do not grow with days.
func TestAllocationsDoNotGrow(t *testing.T) {
	year := measured(site(44), 2015, time.Hour, StampStart)
	two := &Records{Rows: append(append([]Record(nil), year.Rows...), measured(site(44), 2016, time.Hour, StampStart).Rows...)}
	one := testing.AllocsPerRun(3, func() { year.Series(site(44), 15*time.Minute, par) })
	both := testing.AllocsPerRun(3, func() { two.Series(site(44), 15*time.Minute, par) })
	if one != both {
		t.Errorf("%g allocations for one year, %g for two", one, both)
	}
}

func BenchmarkSeries(b *testing.B) {
	hourly, normals := measured(site(44), 2015, time.Hour, StampStart), kettle()
	for name, source := range map[string]Source{"hourly": hourly, "normals": normals} {
		b.Run(name, func(b *testing.B) {
			b.ReportAllocs()
			for range b.N {
				source.Series(site(44), 15*time.Minute, par)
			}
		})
	}
}
