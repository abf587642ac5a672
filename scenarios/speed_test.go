package scenarios_test

import (
	"testing"
	"time"

	"shadeledger/scenarios"
)

// BenchmarkRun times a small plan: 15 stations, two seedlings, break-evens; and a map of 50 x 50 spots.
func BenchmarkRun(b *testing.B) {
	p := invented(b)
	p.Sampling.Step = 15 * time.Minute
	b.Run("balance", func(b *testing.B) {
		for b.Loop() {
			if _, err := scenarios.Run(p, scenarios.Options{Workers: 2, Depth: scenarios.BreakEvens, By: scenarios.ByYear}); err != nil {
				b.Fatal(err)
			}
		}
	})
	b.Run("map", func(b *testing.B) {
		for b.Loop() {
			if _, err := scenarios.RunGrid(p, scenarios.Grid{Treatment: 2, Columns: 50, Rows: 50, Step: 1, Workers: 2}); err != nil {
				b.Fatal(err)
			}
		}
	})
}
