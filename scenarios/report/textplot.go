package report

import (
	"fmt"
	"math"
	"strings"

	"shadeledger/scenarios/report/figures"
)

// Size of a plot made of letters.
const plotRows, plotColumns = 20, 61

// textPlot draws curves with one letter each; where two meet the later one shows. The horizontal line is zero.
func textPlot(p *printer, f figures.Figure, letters []byte) {
	curves := f.Panels[0].Curves
	low, high, right := 0.0, 0.0, 0.0
	for _, c := range curves {
		for _, q := range c.Line {
			low, high, right = math.Min(low, q.Y), math.Max(high, q.Y), math.Max(right, q.X)
		}
	}
	step, bottom := rows(low, high)
	row := func(y float64) int { return int(math.Round((y - bottom) / step)) }
	canvas := make([][]byte, plotRows)
	for r := range canvas {
		canvas[r] = []byte(strings.Repeat(" ", plotColumns))
	}
	canvas[row(0)] = []byte(strings.Repeat("-", plotColumns))
	for k, c := range curves {
		for column := range plotColumns {
			canvas[row(at(c.Line, right*float64(column)/(plotColumns-1)))][column] = letters[k]
		}
	}
	p.f("%s\n", f.Y)
	for r := row(high); r >= 0; r-- {
		label := ""
		if value := bottom + float64(r)*step; math.Abs(math.Remainder(value, 2*step)) < step/100 {
			label = fmt.Sprintf("%.4g", value+0)
		}
		p.f("%7s |%s\n", label, strings.TrimRight(string(canvas[r]), " "))
	}
	p.f("%7s +%s\n%7s 0%*.0f%*.0f\n", "", strings.Repeat("-", plotColumns), "", plotColumns/2, right/2, plotColumns/2, right)
	p.f("%*s\n", 9+plotColumns, f.X)
	for k, c := range curves {
		p.f("%9c %s\n", letters[k], c.Name)
	}
}

// rows are the height of a row, a round number, and that of the middle of the lowest: all from low to high is on one of plotRows.
func rows(low, high float64) (step, bottom float64) {
	for step = round125((high - low) / (plotRows - 1)); ; step = round125(1.01 * step) {
		bottom = math.Floor(low/step) * step
		if math.Round((high-bottom)/step) < plotRows {
			return step, bottom
		}
	}
}

// round125 is the smallest of 1, 2, 2.5, 5 times a power of ten that is no smaller.
func round125(x float64) float64 {
	power := math.Pow(10, math.Floor(math.Log10(x)))
	for _, m := range []float64{1, 2, 2.5, 5} {
		if m*power >= x {
			return m * power
		}
	}
	return 10 * power
}

// at is a line's height at x, straight between its points.
func at(line []figures.Point, x float64) float64 {
	for i := 1; i < len(line); i++ {
		if a, b := line[i-1], line[i]; x <= b.X {
			return a.Y + (b.Y-a.Y)*(x-a.X)/(b.X-a.X)
		}
	}
	return line[len(line)-1].Y
}
