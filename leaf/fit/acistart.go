package fit

import (
	"math"
	"slices"

	"shadeledger/leaf"
)

// starts are capacities to descend from: a coarse grid, and those that the readings themselves give if Rubisco limits the first few in the order of CO2, electron
// transport the next and export, where it is looked for, the last one to five. A point at which one limit takes over is not smooth, and a descent seldom crosses it.
func (c gas) starts() (out [][4]float64) {
	most := 0.0
	for _, l := range c.list {
		most = math.Max(most, l.net)
	}
	for _, v := range []float64{15, 40, 80, 150} {
		for _, ratio := range []float64{1.3, 1.9, 2.6} {
			out = append(out, [4]float64{v, ratio * v, 0.015 * v, (most + 0.015*v) / 3})
		}
	}
	list := slices.Clone(c.list)
	slices.SortStableFunc(list, func(a, b limits) int {
		return map[bool]int{true: -1, false: 1}[a.rubisco < b.rubisco]
	})
	for k := 3; k < len(list); k++ {
		v, rd := rubiscoOf(list[:k])
		j := jmaxOf(list[k:min(k+3, len(list))], rd)
		out = append(out, [4]float64{v, j, rd, (most + rd) / 3})
		for last := 1; last <= 5; last++ {
			if c.export && k+last < len(list) {
				out = append(out, [4]float64{v, j, rd, exportOf(list[len(list)-last:], rd)})
			}
		}
	}
	for i := range out {
		for p := range out[i] {
			out[i][p] = math.Max(leastCapacity[p], math.Min(mostCapacity[p], out[i][p]))
		}
	}
	return out
}

// rubiscoOf is the least-squares Vcmax and Rd of readings that Rubisco limits; the usual share of respiration where they do not tell the two apart.
func rubiscoOf(list []limits) (v, rd float64) {
	var a, b, d, x, y float64 // of net = v rubisco - rd heat
	for _, l := range list {
		a, b, d = a+l.rubisco*l.rubisco, b-l.rubisco*l.rd, d+l.rd*l.rd
		x, y = x+l.net*l.rubisco, y-l.net*l.rd
	}
	det := a*d - b*b
	if det < 1e-9*a*d {
		return 40, 0.6
	}
	return (x*d - y*b) / det, (y*a - x*b) / det
}

// jmaxOf is the mean Jmax of readings that electron transport limits.
func jmaxOf(list []limits, rd float64) float64 {
	sum := 0.0
	for _, l := range list {
		low, high := leastCapacity[1], mostCapacity[1]
		for range 30 {
			mid := (low + high) / 2
			if leaf.Electrons(l.light, mid*l.jmax)*l.byElectrons < l.net+rd*l.rd {
				low = mid
			} else {
				high = mid
			}
		}
		sum += low
	}
	return sum / float64(len(list))
}

// exportOf is the mean export of readings that it limits.
func exportOf(list []limits, rd float64) (mean float64) {
	for _, l := range list {
		mean += (l.net + rd*l.rd) / 3 / float64(len(list))
	}
	return mean
}
