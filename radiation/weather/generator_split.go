package weather

import "math"

const (
	splitSteps    = 256  // of the distribution of clearness
	steepestSplit = 60.0 // of the chance of rain over the rank: beyond it wet days are the darkest ones
)

// splitClearness parts a month's distribution of daily clearness into those of dry and of wet days: together they are the
// whole, wet days are a given share of it, and their mean is a given ratio of the mean of dry ones, or as near to it as
// the darkest days come. The chance that the day of rank u (0 darkest, 1 clearest) is wet falls as 1 / (1 + exp(k (u - c))).
func splitClearness(mean, share, ratio float64) (dryDays, wetDays quantiles) {
	at := clearnessDistribution(mean)
	if share <= 0 || share >= 1 || mean <= 0 {
		for i := range dryDays {
			dryDays[i] = at(float64(i) / scoreNodes)
		}
		return dryDays, dryDays
	}
	var value, chance [splitSteps]float64
	for i := range value {
		value[i] = at((float64(i) + 0.5) / splitSteps)
	}
	low, high := 0.0, steepestSplit
	for range 40 {
		k := (low + high) / 2
		chances(&chance, share, k)
		if wetOverDry(&value, &chance) > ratio {
			low = k
		} else {
			high = k
		}
	}
	wetDays = ranked(at, &chance)
	for i := range chance {
		chance[i] = 1 - chance[i]
	}
	return ranked(at, &chance), wetDays
}

// chances are those of rain by rank with steepness k; c follows from the share of wet days, the mean of the chances:
// exp(-k c) = (r - 1) / (exp(k) - r) with r = exp(k (1 - share)).
func chances(out *[splitSteps]float64, share, k float64) {
	r := math.Exp(k * (1 - share))
	e := (r - 1) / (math.Exp(k) - r)
	for i := range out {
		u := (float64(i) + 0.5) / splitSteps
		out[i] = 1 / (1 + e*math.Exp(k*u))
	}
}

// wetOverDry is the mean of wet days over that of dry ones.
func wetOverDry(value, chance *[splitSteps]float64) float64 {
	var sum, n [states]float64
	for i, p := range chance {
		sum[wet] += p * value[i]
		sum[dry] += (1 - p) * value[i]
		n[wet] += p
		n[dry] += 1 - p
	}
	return sum[wet] / n[wet] / (sum[dry] / n[dry])
}

// ranked are the quantiles of the days that are taken with a chance by rank.
func ranked(at func(share float64) float64, chance *[splitSteps]float64) (q quantiles) {
	total := 0.0
	for _, p := range chance {
		total += p
	}
	below, step := 0.0, 0
	for i := range q {
		want := total * float64(i) / scoreNodes
		for step < splitSteps-1 && below+chance[step] < want {
			below += chance[step]
			step++
		}
		inside := 0.0
		if chance[step] > 0 {
			inside = math.Max(0, math.Min(1, (want-below)/chance[step]))
		}
		q[i] = at((float64(step) + inside) / splitSteps)
	}
	return q
}
