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
	step := round125((high - low) / (plotRows - 1))
	bottom := math.Floor(low/step) * step
	canvas := make([][]byte, plotRows)
	for r := range canvas {
		canvas[r] = []byte(strings.Repeat(" ", plotColumns))
	}
	row := func(y float64) int { return int(math.Round((y - bottom) / step)) }
	if z := row(0); z >= 0 && z < plotRows {
		canvas[z] = []byte(strings.Repeat("-", plotColumns))
	}
	for k, c := range curves {
		for column := range plotColumns {
			y := at(c.Line, right*float64(column)/(plotColumns-1))
			if r := row(y); r >= 0 && r < plotRows {
				canvas[r][column] = letters[k]
			}
		}
	}
	p.f("%s\n", f.Y)
	top := min(plotRows-1, row(high))
	for r := top; r >= 0; r-- {
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
