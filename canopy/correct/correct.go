// Package correct finds the effective leaf area of a stand from light readings under and above it: the factor on its
// leaf area at which a model of its light gives what was measured, with an interval. It knows no files and no stand; the
// model comes as a function.
package correct

import (
	"errors"
	"fmt"
	"math"

	"gonum.org/v1/gonum/stat"
	"gonum.org/v1/gonum/stat/distuv"
)

// Sky at a reading.
type Sky int

// The skies.
const (
	Overcast Sky = iota
	Clear
	Mixed
)

// Quantity that a sensor reads.
type Quantity int

// The quantities.
const (
	PPFD Quantity = iota
	Lux           // screening grade: leaves change the spectrum
)

// Reading is one pair. Below and Above share a unit; a value that was not taken is NaN.
type Reading struct {
	Point        string
	Below, Above float64
	Sky          Sky
	Midday       bool // within two hours of the sun's noon
	Quantity     Quantity
	AboveShrubs  bool // the sensor stood above shrubs that the profile holds
}

// ratio is the measured transmittance.
func (r Reading) ratio() float64 { return r.Below / r.Above }

// Residual is one pair beside the model.
type Residual struct {
	Point                   string
	Measured, Before, After float64 // transmittance, 0..1
}

// Result is an effective leaf area.
type Result struct {
	Factor, Low, High float64 // on the leaf area, with its 90 % interval
	Measured          float64 // mean transmittance of the pairs
	Before, After     float64 // of the model at factor 1 and at Factor
	RMSEBefore, RMSE  float64 // of transmittance over the pairs
	Residuals         []Residual
	Warnings          []string
}

// Range of the factor that is looked through, and the level of intervals.
const (
	lowest, highest = 0.05, 20.0
	confidence      = 0.90
)

// What readings should be: pairs below which there is no trust, and the floor to print (common practice).
const (
	fewest = 6
	floor  = 12
)

// luxError is the relative standard error that pairs in lux share whatever their number: 25 to 40 % is taken as a 90 % range (common practice).
const luxError = 0.2

// Pairs finds the factor at which the mean transmittance of the model over the readings is the mean of the measured ratios. That mean is
// unbiased for pairs whose errors are multiplicative with mean 1 (ratios of means would weigh bright moments more; Cochran 1977, Sampling
// Techniques, ch. 6). Its relative error is that of the ratios over the model's own, by Student's t over n - 1; the interval of the
// factor is the model turned round at both ends. model gives the transmittance of a reading's place and sky at a factor, falling with it.
func Pairs(all []Reading, model func(reading int, factor float64) float64) (Result, error) {
	var r Result
	used := r.sort(all)
	n := float64(len(used))
	if len(used) == 0 {
		return r, errors.New("no pair of readings with light below and above; at least 2 are needed, 12 are the floor for trust")
	}
	if len(used) == 1 {
		return r, errors.New("one pair of readings gives no interval; at least 2 are needed, 12 are the floor for trust")
	}
	for _, i := range used {
		r.Measured += all[i].ratio() / n
	}
	mean := func(factor float64) (sum float64) {
		for _, i := range used {
			sum += model(i, factor) / n
		}
		return sum
	}
	r.Factor = r.invert(mean, r.Measured, "readings")
	relative := make([]float64, len(used))
	sum, squares := 0.0, 0.0
	for k, i := range used {
		m := model(i, r.Factor)
		relative[k] = all[i].ratio() / m
		sum, squares = sum+m, squares+m*m
	}
	// the mean weighs each reading's relative error by its modelled light
	se := stat.StdDev(relative, nil) / stat.Mean(relative, nil) * math.Sqrt(squares) / sum
	half := student(n-1) * se
	for _, i := range used {
		if all[i].Quantity == Lux {
			half = math.Hypot(half, normal*luxError)
			r.warn("pairs in lux are of screening grade: leaves change the spectrum; the interval is widened")
			break
		}
	}
	r.between(mean, half)
	r.residuals(all, used, model)
	r.Before, r.After = mean(1), mean(r.Factor)
	return r, nil
}

// student is the quantile of the interval for a mean of few readings.
func student(freedom float64) float64 {
	return distuv.StudentsT{Mu: 0, Sigma: 1, Nu: freedom}.Quantile((1 + confidence) / 2)
}

// normal is the quantile for an error that all readings share and whose size is known.
var normal = distuv.UnitNormal.Quantile((1 + confidence) / 2)

// between sets the interval of the factor from half the interval of the logarithm of the mean light. An end that the search is held at is told.
func (r *Result) between(mean func(float64) float64, half float64) {
	r.Low = r.invert(mean, math.Min(1, r.Measured*math.Exp(half)), "")
	r.High = r.invert(mean, r.Measured*math.Exp(-half), "")
	if r.Low <= lowest || r.High >= highest {
		r.warn(fmt.Sprintf("the readings leave the leaf area open at an end: the interval is cut at %g and %g times the plan's", lowest, highest))
	}
}

// sort lists the pairs that count and warns of those that do not and of doubtful ones.
func (r *Result) sort(all []Reading) (used []int) {
	unpaired, brighter, shrubs, clear, noon := 0, 0, 0, 0, 0
	for i, x := range all {
		switch {
		case math.IsNaN(x.Below), math.IsNaN(x.Above), x.Above <= 0:
			unpaired++
			continue
		case x.Below > x.Above, x.Below <= 0:
			brighter++
			continue
		}
		used = append(used, i)
		if x.AboveShrubs {
			shrubs++
		}
		if x.Sky != Overcast {
			clear++
			if x.Midday {
				noon++
			}
		}
	}
	for _, w := range []struct {
		n    int
		text string
	}{
		{unpaired, "without light below or above: left out"},
		{brighter, "dark, or brighter below than above: left out"},
		{shrubs, "taken above shrubs: the leaf area found is that above the sensor only"},
		{noon, "under a clear or mixed sky near midday: sunflecks make them the most variable"},
		{clear - noon, "not under an overcast sky: less sure"},
	} {
		if w.n > 0 {
			r.warn(fmt.Sprintf("%d of %d readings %s", w.n, len(all), w.text))
		}
	}
	switch {
	case len(used) < fewest:
		r.warn(fmt.Sprintf("%d pairs are too few to trust; %d are the least, %d the floor", len(used), fewest, floor))
	case len(used) < floor:
		r.warn(fmt.Sprintf("%d pairs are below the floor of %d for a stand", len(used), floor))
	}
	return used
}

func (r *Result) warn(text string) { r.Warnings = append(r.Warnings, text) }

// invert finds the factor at which a falling function has a value, by bisection in its logarithm.
func (r *Result) invert(f func(float64) float64, value float64, what string) float64 {
	low, high := lowest, highest
	switch {
	case f(low) <= value:
		if what != "" {
			r.warn("the " + what + " are brighter than the stand with a twentieth of its leaves: check heights, wood and sensors")
		}
		return low
	case f(high) >= value:
		if what != "" {
			r.warn("the " + what + " are darker than the stand with twenty times its leaves: check sensors")
		}
		return high
	}
	for range 60 {
		mid := math.Sqrt(low * high)
		if f(mid) > value {
			low = mid
		} else {
			high = mid
		}
	}
	return math.Sqrt(low * high)
}

// residuals fills what each pair says beside the model.
func (r *Result) residuals(all []Reading, used []int, model func(int, float64) float64) {
	for _, i := range used {
		x := Residual{all[i].Point, all[i].ratio(), model(i, 1), model(i, r.Factor)}
		r.Residuals = append(r.Residuals, x)
		r.RMSEBefore += (x.Before - x.Measured) * (x.Before - x.Measured)
		r.RMSE += (x.After - x.Measured) * (x.After - x.Measured)
	}
	n := float64(len(used))
	r.RMSEBefore, r.RMSE = math.Sqrt(r.RMSEBefore/n), math.Sqrt(r.RMSE/n)
}

// Openness finds the factor from openness, 0..1, read at points; model gives the stand's openness at a factor, falling with it.
func Openness(values []float64, model func(factor float64) float64) (Result, error) {
	var r Result
	if len(values) < 2 {
		return r, errors.New("one value of closure or openness gives no interval; at least 2 are needed")
	}
	for _, v := range values {
		if !(v > 0 && v <= 1) {
			return r, fmt.Errorf("openness %g; it must be above 0 to 1", v)
		}
	}
	r.Measured = stat.Mean(values, nil)
	r.Factor = r.invert(model, r.Measured, "values")
	n := float64(len(values))
	r.between(model, math.Hypot(student(n-1)*stat.StdDev(values, nil)/math.Sqrt(n), normal*observerError)/r.Measured)
	r.Before, r.After = model(1), model(r.Factor)
	r.RMSEBefore, r.RMSE = math.Abs(r.Before-r.Measured), math.Abs(r.After-r.Measured)
	r.warn("closure is read from a point and is not cover; observers differ by 5 to 10 points, which the interval holds")
	if n < enough {
		r.warn(fmt.Sprintf("%d values are few; %d points are usual", len(values), enough))
	}
	return r, nil
}

// observerError is the standard error that one observer's readings share, of openness: 5 to 10 points between observers are taken as a
// 90 % range of 5 points to each side (common practice). enough is how many points are usual.
const (
	observerError = 0.03
	enough        = 8
)
