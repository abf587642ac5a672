package plan

import (
	"strings"
	"testing"
	"time"

	"shadeledger/radiation"
)

// somewhere and step of checks of weather by itself.
var somewhere = radiation.Site{Latitude: 44 * rad, Longitude: -72 * rad, UTCOffset: -5}

const step = 15 * time.Minute

func BenchmarkReadBuiltIn(b *testing.B) {
	b.ReportAllocs()
	for b.Loop() {
		if p, faults := ReadExample(BuiltIn, Options{}); p == nil {
			b.Fatal(faults)
		}
	}
}

// A plan with a year of half hours, checked.
func BenchmarkReadHalfHourly(b *testing.B) {
	b.ReportAllocs()
	for b.Loop() {
		if p, faults := ReadExample("macleish", Options{}); p == nil {
			b.Fatal(faults)
		}
	}
}

// The rows alone: 17 520 of them.
func BenchmarkRows(b *testing.B) {
	data, err := examples.ReadFile("examples/macleish/weather.csv")
	if err != nil {
		b.Fatal(err)
	}
	b.SetBytes(int64(len(data)))
	for b.Loop() {
		r := &reader{}
		if rows := r.hourly("weather.csv", data); len(rows) != strings.Count(string(data), "\n")-1 {
			b.Fatal(len(rows), r.faults)
		}
	}
}

// Rows are read without an allocation for each.
func TestRowsAreReadWithoutAllocations(t *testing.T) {
	count := func(rows int) float64 {
		data := []byte(year(rows))
		return testing.AllocsPerRun(3, func() { (&reader{}).hourly("w.csv", data) })
	}
	if few, many := count(10), count(8760); few != many {
		t.Errorf("%g allocations for 10 rows, %g for 8760; want the same", few, many)
	}
}
