package report

import (
	"strings"
	"testing"

	"shadeledger/leaf/traits"
)

// The plot of every species shows its sun leaves in the brightest light, the highest point there is, and fits.
func TestPlotsShowTheirTop(t *testing.T) {
	for _, s := range traits.All() {
		var b strings.Builder
		p := &printer{w: &b}
		responses(p, s)
		var lines []string
		for _, l := range strings.Split(b.String(), "\n") {
			if len(l) > 8 && l[8] == '|' {
				lines = append(lines, l)
			}
		}
		if p.err != nil || len(lines) < 8 || len(lines) > plotRows {
			t.Errorf("%s: %d rows, %v", s.Botanical, len(lines), p.err)
		}
		for i, l := range lines {
			if len(l) == 9+plotColumns && l[8+plotColumns] == 'X' {
				break
			}
			if i == len(lines)-1 {
				t.Errorf("%s: the end of the sun leaf's response is not shown:\n%s", s.Botanical, b.String())
			}
		}
	}
}

// Whatever the range, all of it is on the rows, and no more than two thirds of them stand empty.
func TestRowsHoldTheRange(t *testing.T) {
	for low := -9.0; low <= 0; low += 0.37 {
		for high := 0.11; high < 60; high *= 1.07 {
			step, bottom := rows(low, high)
			if bottom > low || (high-bottom)/step >= plotRows-0.5 || (high-low)/step < plotRows/3 {
				t.Errorf("%g to %g: %g rows of %g from %g", low, high, (high-bottom)/step, step, bottom)
			}
		}
	}
}
