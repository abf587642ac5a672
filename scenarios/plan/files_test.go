package plan

import (
	"fmt"
	"io/fs"
	"math"
	"math/rand/v2"
	"os"
	"path/filepath"
	"strconv"
	"strings"
	"testing"
	"time"

	"shadeledger/radiation/weather"
)

// only is the one fault that a plan has, as printed.
func only(t *testing.T, faults []Fault) string {
	t.Helper()
	if len(faults) != 1 {
		t.Fatalf("%d faults, want 1: %v", len(faults), faults)
	}
	return faults[0].Error()
}

func TestFilesThatAreNoPlans(t *testing.T) {
	dir := t.TempDir()
	huge := filepath.Join(dir, "huge.yaml")
	f, err := os.Create(huge)
	if err != nil {
		t.Fatal(err)
	}
	if err := f.Truncate(1 << 30); err != nil { // a hole of 1 GB; it must not be read
		t.Fatal(err)
	}
	if err := f.Close(); err != nil {
		t.Fatal(err)
	}
	for _, c := range []struct{ path, want string }{
		{huge, huge + ": larger than 4 MB, which no such file needs; is it the right one?"},
		{filepath.Join(dir, "none.yaml"), "no such file; check the name, or write a plan with: shadeledger start DIR"},
		{dir, filepath.Join(dir, "plan.yaml") + ": no such file"},
	} {
		p, faults := Read(c.path, Options{})
		if got := only(t, faults); p != nil || !strings.Contains(got, c.want) {
			t.Errorf("%s: %q, want %q", c.path, got, c.want)
		}
	}
	if got := explain(&fs.PathError{Op: "open", Err: fs.ErrPermission}, largestPlan, ""); got != "no permission to read it; ask for read access" {
		t.Errorf("no permission: %q", got)
	}
}

func TestAFolderHoldsPlanYaml(t *testing.T) {
	dir := t.TempDir()
	if err := os.WriteFile(filepath.Join(dir, "plan.yaml"), sound(t, ""), 0o600); err != nil {
		t.Fatal(err)
	}
	p, faults := Read(dir, Options{})
	if p == nil {
		t.Fatal(faults)
	}
	if want := filepath.Join(dir, "plan.yaml"); p.File != want {
		t.Errorf("read from %s, want %s", p.File, want)
	}
}

// measured is a plan on weather of a file.
func measured(t testing.TB, key string) []byte {
	t.Helper()
	text := string(sound(t, ""))
	from, to := strings.Index(text, "weather:"), strings.Index(text, "stand:")
	return []byte(text[:from] + "weather: {" + key + "}\n" + text[to:])
}

// year writes hourly rows of 2015: a plain day of 12 h of sun.
func year(rows int) string {
	var b strings.Builder
	b.WriteString("time,ghi_w_m2,air_temp_c\n")
	at := time.Date(2015, 1, 1, 0, 0, 0, 0, time.UTC)
	for range rows {
		ghi := 0
		if h := at.Hour(); h >= 9 && h < 15 {
			ghi = 120
		}
		fmt.Fprintf(&b, "%s,%d,%g\n", at.Format("2006-01-02T15:04"), ghi, 4.5)
		at = at.Add(time.Hour)
	}
	return b.String()
}

func readMeasured(t testing.TB, key, csv string) (weather.Source, []Fault) {
	t.Helper()
	p, faults := parse("plan.yaml", measured(t, key), Options{}, func(string) ([]byte, error) { return []byte(csv), nil })
	if p == nil {
		return nil, faults
	}
	return p.Weather, nil
}

func TestHourlyFile(t *testing.T) {
	w, faults := readMeasured(t, "hourly: w.csv, stamp: end, max_gap: 90 min", "\xef\xbb\xbf"+strings.ReplaceAll(year(8760), "\n", "\r\n"))
	r, ok := w.(*weather.Records)
	if !ok {
		t.Fatal(faults)
	}
	if len(r.Rows) != 8760 || r.Stamp != weather.StampEnd || r.MaxGap != 90*time.Minute {
		t.Errorf("%d rows, stamp %v, gap %v", len(r.Rows), r.Stamp, r.MaxGap)
	}
	if row := r.Rows[12]; row.Line != 14 || row.Global != 120 || row.Temperature != 4.5 || row.Time.Hour() != 12 || row.PPFD == row.PPFD {
		t.Errorf("13th row is %+v", row)
	}
}

// Each file is a sound year with one thing wrong; the fault names its line.
func TestBadHourlyFiles(t *testing.T) {
	good := year(8760)
	change := func(old, new string) string {
		if !strings.Contains(good, old) {
			t.Fatalf("the year has no %q", old)
		}
		return strings.Replace(good, old, new, 1)
	}
	for _, c := range []struct{ name, csv, want string }{
		{"one row short", year(8759), "w.csv:8760: time: "},
		{"decimal comma", change("2015-01-01T01:00,0,4.5", "2015-01-01T01:00,0,4,5"), "w.csv:3: 2015-01-01T01:00,0,4,5; 3 cells, as in the header; a decimal comma? numbers use a point"},
		{"semicolons", strings.ReplaceAll(good, ",", ";"), "w.csv:1: time;ghi_w_m2;air_temp_c; columns are separated by commas and numbers use a point"},
		{"unknown column", change("ghi_w_m2", "ghi"), "w.csv:1: ghi: not a column here; known are time, ghi_w_m2, air_temp_c"},
		{"missing column", "time,ghi_w_m2\n2015-01-01T00:00,0\n", "w.csv:1: air_temp_c: this column is missing"},
		{"column twice", change("air_temp_c", "air_temp_c,air_temp_c"), "w.csv:1: air_temp_c: each column once"},
		{"text", change("2015-01-01T09:00,120", "2015-01-01T09:00,sunny"), "w.csv:11: ghi_w_m2: sunny; a number with a point"},
		{"NaN", change("2015-01-01T09:00,120", "2015-01-01T09:00,NaN"), "w.csv:11: ghi_w_m2: NaN; a number with a point"},
		{"hexadecimal", change("2015-01-01T09:00,120", "2015-01-01T09:00,0x1p6"), "w.csv:11: ghi_w_m2: 0x1p6; a number with a point"},
		{"30 February", change("2015-03-01T00:00", "2015-02-30T00:00"), "w.csv:1418: time: 2015-02-30T00:00; local standard time as 2015-06-01T13:30"},
		{"impossible", change("2015-01-01T09:00,120", "2015-01-01T09:00,9000"), "w.csv:11: ghi_w_m2: 9000; "},
		{"negative", change("2015-01-01T09:00,120", "2015-01-01T09:00,-120"), "w.csv:11: ghi_w_m2: -120; "},
		{"gap", change("2015-01-01T09:00,120", "2015-01-01T09:00,"), "w.csv:12: time: 8760 rows; 1h0m0s missing from 2015-01-01T09:00; "},
		{"sun at night", change("2015-01-01T01:00,0", "2015-01-01T01:00,400"), "w.csv:3: ghi_w_m2: 400; "},
		{"empty", "", "w.csv: the file is empty; it needs a header line: time,ghi_w_m2,air_temp_c"},
		{"no rows", "time,ghi_w_m2,air_temp_c\n", "plan.yaml:4:19: time: 0; a file of whole calendar years needs more rows"},
	} {
		w, faults := readMeasured(t, "hourly: w.csv", c.csv)
		if w != nil {
			t.Errorf("%s: read without a fault", c.name)
			continue
		}
		found := false
		for _, f := range faults {
			found = found || strings.HasPrefix(f.Error(), c.want)
		}
		if !found {
			t.Errorf("%s: %v, want %q", c.name, faults, c.want)
		}
	}
}

// Many bad rows are counted, not all printed.
func TestBadRowsAreCounted(t *testing.T) {
	_, faults := readMeasured(t, "hourly: w.csv", strings.ReplaceAll(year(8760), ",0,", ",none,"))
	if len(faults) != mostRowFaults+1 || !strings.HasSuffix(faults[len(faults)-1].Error(), "more faults in this file") {
		t.Errorf("%d faults, the last %v; want %d and a count of the rest", len(faults), faults[len(faults)-1], mostRowFaults)
	}
}

func TestDailyFile(t *testing.T) {
	var b strings.Builder
	b.WriteString("date,ghi_mj_m2,tmin_c,tmax_c,rain_mm\n")
	for at := time.Date(2015, 1, 1, 0, 0, 0, 0, time.UTC); at.Year() == 2015; at = at.AddDate(0, 0, 1) {
		fmt.Fprintf(&b, "%s,4.2,-3.5,7,0\n", at.Format("2006-01-02"))
	}
	w, faults := readMeasured(t, "daily: w.csv", b.String())
	d, ok := w.(*weather.Daily)
	if !ok {
		t.Fatal(faults)
	}
	if r := d.Rows[1]; len(d.Rows) != 365 || r.Line != 3 || r.Global != 4.2 || r.Tmin != -3.5 || r.Tmax != 7 || r.Sunshine == r.Sunshine {
		t.Errorf("%d rows, the second %+v", len(d.Rows), r)
	}
	for _, c := range []struct{ old, new, want string }{
		{"ghi_mj_m2", "sunshine_h,ghi_mj_m2", "w.csv:1: ghi_mj_m2: one of the columns ghi_mj_m2 and sunshine_h"},
		{"2015-01-02,4.2,-3.5,7", "2015-01-02,4.2,9.5,7", "w.csv:3: tm"},
		{"2015-01-02", "2 Jan 2015", "w.csv:3: date: 2 Jan 2015; a date as 2015-06-01"},
	} {
		_, faults := readMeasured(t, "daily: w.csv", strings.Replace(b.String(), c.old, c.new, 1))
		if len(faults) == 0 || !strings.HasPrefix(faults[0].Error(), c.want) {
			t.Errorf("%s for %s: %v, want %q", c.new, c.old, faults, c.want)
		}
	}
}

func TestNoPermissionForTheWeather(t *testing.T) {
	_, faults := parse("plan.yaml", measured(t, "hourly: w.csv"), Options{}, func(string) ([]byte, error) { return nil, fs.ErrPermission })
	if got := only(t, faults); got != "plan.yaml:4:19: weather.hourly: w.csv; no permission to read it; ask for read access" {
		t.Error(got)
	}
}

// The short way through a plain decimal gives the bits of strconv.
func TestPlainDecimals(t *testing.T) {
	random := rand.New(rand.NewPCG(1, 2))
	for range 100000 {
		s := strconv.FormatFloat((random.Float64()-0.5)*2000, 'f', random.IntN(12), 64)
		want, err := strconv.ParseFloat(s, 64)
		if err != nil {
			t.Fatal(err)
		}
		if got, ok := plainDecimal(s); ok && math.Float64bits(got) != math.Float64bits(want) {
			t.Fatalf("%s is %v, want %v", s, got, want)
		}
	}
	for _, s := range []string{"", "-", ".", "-.", "1.2.3", "1e3", "+1", "NaN", "0x1", "1_0", "1234567890123456"} {
		if v, ok := plainDecimal(s); ok {
			t.Errorf("%q is read as %v", s, v)
		}
	}
}
