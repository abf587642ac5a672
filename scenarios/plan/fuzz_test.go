package plan

import (
	"errors"
	"math"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"testing"

	"shadeledger/radiation/weather"
)

// Whatever the text, there is a plan or a fault, never both or neither, every fault says what would be right, and a plan
// written out is the same plan.
func FuzzPlan(f *testing.F) {
	f.Add(sound(f, ""), "")
	f.Add([]byte(everything), "treatments.Circle.opening.circle.diameter=1.2 H")
	files, err := filepath.Glob(plans + "bad/*.yaml")
	if err != nil || len(files) == 0 {
		f.Fatal("no bad plans", err)
	}
	for _, file := range files {
		text, err := os.ReadFile(file)
		if err != nil {
			f.Fatal(err)
		}
		f.Add(text, "stand.lai=3")
	}
	none := func(string) ([]byte, error) { return nil, errors.New("no files here") }
	f.Fuzz(func(t *testing.T, text []byte, set string) {
		var o Options
		if set != "" {
			o.Set = []string{set}
		}
		p, faults := parse("plan.yaml", text, o, none)
		if (p == nil) == (len(faults) == 0) {
			t.Fatalf("plan %v with faults %v", p != nil, faults)
		}
		for _, x := range faults {
			if x.Fix == "" || x.File == "" || (strings.Contains(x.Error(), "%!") && !strings.Contains(string(text)+set, "%!")) {
				t.Fatalf("a fault that says nothing: %+v", x)
			}
		}
		if p == nil {
			return
		}
		q, faults := parse("effective", Effective(p), Options{}, none)
		// a number worked out from sound ones, such as a needle's rate per half of its surface or a leaf mass from area and LMA, may
		// lie outside what its key allows to be written
		faults = slices.DeleteFunc(faults, func(f Fault) bool { return strings.HasPrefix(f.Fix, "allowed is ") })
		if q == nil && len(faults) > 0 {
			t.Fatalf("the effective plan has faults: %v\n%s", faults, Effective(p))
		}
	})
}

// Whatever the file, a record's numbers are finite or not given, its lines rise, and what is wrong names the file.
func FuzzHourly(f *testing.F) {
	f.Add([]byte(year(30)))
	f.Add([]byte("\xef\xbb\xbftime,air_temp_c,ghi_w_m2,rh_pct\r\n2015-06-01 13:30:00,NA,1e3,\r\n# remark\r\n\r\n2015-06-01T24:00,-,.,5"))
	f.Add([]byte("time;ghi_w_m2;air_temp_c\n2015-01-01T00:00;0,5;1"))
	f.Add([]byte("time,ghi_w_m2,air_temp_c\n,,\n2015-02-29T00:00,NaN,Inf\nx"))
	f.Fuzz(func(t *testing.T, data []byte) {
		r := &reader{file: "plan.yaml"}
		rows := r.hourly("w.csv", data)
		last := 1
		for _, row := range rows {
			if row.Line <= last {
				t.Fatalf("line %d after line %d", row.Line, last)
			}
			last = row.Line
			for _, x := range []float64{row.Global, row.Temperature, row.Humidity, row.Diffuse, row.PPFD, row.DiffusePPFD} {
				if math.IsInf(x, 0) {
					t.Fatalf("line %d has an infinite number", row.Line)
				}
			}
		}
		for _, x := range r.faults {
			if x.Fix == "" || x.File != "w.csv" {
				t.Fatalf("a fault without a place: %+v", x)
			}
		}
		if len(r.faults) == 0 {
			(&weather.Records{Rows: rows}).Check(somewhere, step)
		}
	})
}

func FuzzDaily(f *testing.F) {
	f.Add([]byte("date,ghi_mj_m2,tmin_c,tmax_c\n2015-01-01,4.2,-3,7\n2015-01-02,,,\n"))
	f.Add([]byte("date,sunshine_h,tmin_c,tmax_c,rh_pct,rain_mm\n2016-02-29,9,1,2,80,0\n2015-13-01,x,1,2,3,4\n"))
	f.Fuzz(func(t *testing.T, data []byte) {
		r := &reader{file: "plan.yaml"}
		rows := r.daily("w.csv", data)
		if len(r.faults) == 0 {
			(&weather.Daily{Rows: rows}).Check(somewhere, step)
		}
	})
}

// Quantities: a number comes out finite, and doubling the number doubles a length.
func FuzzQuantity(f *testing.F) {
	for _, s := range []string{"78 ft", "1.5 H", "24,5 m", "24", "1e999 m", "-3 cm", "5 +- 1", "± m", "24m", "1_0 m", "0x1 m"} {
		f.Add(s)
	}
	f.Fuzz(func(t *testing.T, s string) {
		for d := bare; d <= ppm; d++ {
			if x, err := parseQuantity(s, d, 24); err == nil && math.IsNaN(x) {
				t.Fatalf("%q is NaN", s)
			}
		}
		if x, err := parseNumber(s); err == nil && (math.IsNaN(x) || math.IsInf(x, 0)) {
			t.Fatalf("%q is not finite", s)
		}
	})
}
