package main

import (
	"io"
	"runtime"
	"testing"

	"shadeledger/scenarios"
	"shadeledger/scenarios/plan"
	"shadeledger/scenarios/report"
)

// BenchmarkSpeed times whole answers, each from the plan's text. On two processors the built-in example is to stay under
// 0.5 s, the hourly year under 1 s, the map under 5 s, and memory under 300 MB (peak-MB: what the process holds from the system).
func BenchmarkSpeed(b *testing.B) {
	b.Run("example", func(b *testing.B) { benchmarkBalance(b, plan.BuiltIn) })
	b.Run("hourly", func(b *testing.B) { benchmarkBalance(b, hourlyExample) })
	b.Run("map", benchmarkMap)
}

// hourlyExample is the example on a year of measured half-hourly weather.
const hourlyExample = "macleish"

func benchmarkBalance(b *testing.B, name string) {
	for b.Loop() {
		p := example(b, name)
		if name == hourlyExample {
			onlyOpening(b, p)
		}
		r, err := scenarios.Run(p, scenarios.Options{Workers: runtime.GOMAXPROCS(0), Depth: scenarios.BreakEvens, By: scenarios.ByYear})
		if err != nil {
			b.Fatal(err)
		}
		if err := report.Balance(report.Output{Out: io.Discard, Notes: io.Discard, Format: report.CSV}, r, report.Screen, nil); err != nil {
			b.Fatal(err)
		}
		b.ReportMetric(float64(len(r.Balance)), "rows")
	}
	reportPeak(b)
}

// onlyOpening keeps the first treatment with an opening: thirteen stations.
func onlyOpening(b *testing.B, p *scenarios.Plan) {
	b.Helper()
	for _, t := range p.Treatments {
		if _, ok := t.Opening.(scenarios.Cleared); ok {
			p.Treatments = []scenarios.Treatment{t}
			return
		}
	}
	b.Fatal("the plan has no opening")
}

func benchmarkMap(b *testing.B) {
	for b.Loop() {
		p := example(b, plan.BuiltIn)
		onlyOpening(b, p)
		spots, err := scenarios.RunGrid(p, scenarios.Grid{Columns: 100, Rows: 100, Step: 1, Workers: runtime.GOMAXPROCS(0)})
		if err != nil {
			b.Fatal(err)
		}
		b.ReportMetric(float64(len(spots)*len(spots[0])), "rows")
	}
	reportPeak(b)
}

func example(b *testing.B, name string) *scenarios.Plan {
	b.Helper()
	p, faults := plan.ReadExample(name, plan.Options{})
	if len(faults) > 0 {
		b.Fatal(faults)
	}
	return p
}

func reportPeak(b *testing.B) {
	var m runtime.MemStats
	runtime.ReadMemStats(&m)
	b.ReportMetric(float64(m.Sys)/1e6, "peak-MB")
}
