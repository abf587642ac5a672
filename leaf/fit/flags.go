package fit

import (
	"fmt"
	"math"

	"gonum.org/v1/gonum/stat"
)

// Reading is a point with what was recorded beside it; NaN where it was not.
type Reading struct {
	Point
	Conductance float64 // stomatal, mol m-2 s-1
	Ci          float64 // CO2 within the leaf, ppm
	Temperature float64 // of the leaf, deg C
	Pressure    float64 // of the air, kPa
}

// Limits of a sound curve (common practice but for the first two, practice of published data sets: open stomata keep 180 ppm within and 0.05 mol m-2 s-1).
const (
	closedCi          = 180.0
	closedConductance = 0.05
	fewest            = 8    // points
	dimPoints         = 3    // below dim
	dim               = 100  // umol m-2 s-1
	darkest           = 5    // umol m-2 s-1, still darkness
	plateau           = 0.90 // of Amax at the brightest point
	inhibited         = 0.05 // fall from the highest rate, share of it
	drifted           = 0.10 // difference of two readings at one light, share of Amax
)

// Flags says what is wrong with a curve, in words; none where nothing is.
func Flags(readings []Reading, f *Fit) (out []string) {
	flag := func(format string, args ...any) { out = append(out, fmt.Sprintf(format, args...)) }
	low, high, dims := math.Inf(1), 0.0, 0
	for _, r := range readings {
		low, high = math.Min(low, r.PPFD), math.Max(high, r.PPFD)
		if r.PPFD < dim {
			dims++
		}
	}
	if len(readings) < fewest || dims < dimPoints {
		flag("few points: %d, %d of them below %d umol; at least %d and %d", len(readings), dims, dim, fewest, dimPoints)
	}
	if low > darkest {
		flag("no dark point: the darkest is at %.4g umol, so Rd is extrapolated", low)
	}
	if f.Rd.Value <= 0 {
		flag("Rd is not positive: check the sign of the readings and the leak of the chamber")
	}
	switch top := f.Net(high); {
	case f.Amax.Value <= 0 || top <= 0:
		flag("no net uptake at the brightest point, %.4g umol: a dead leaf, or the sign of the readings", high)
	case top < plateau*f.Amax.Value:
		flag("no plateau: %.0f %% of Amax at the brightest point, so Amax is extrapolated", 100*top/f.Amax.Value)
	}
	flagInhibition(readings, f, high, flag)
	flagDrift(readings, f, flag)
	flagStomata(readings, flag)
	return out
}

// flagInhibition looks for rates that fall in the brightest light.
func flagInhibition(readings []Reading, f *Fit, high float64, flag func(string, ...any)) {
	best, at, last := math.Inf(-1), 0.0, 0.0
	for _, r := range readings {
		if r.Net > best {
			best, at = r.Net, r.PPFD
		}
		if r.PPFD == high {
			last = r.Net
		}
	}
	if at < high && best > 0 && best-last > math.Max(inhibited*best, 3*f.RMSE) {
		flag("photoinhibition: the rate falls by %.0f %% from %.4g to %.4g umol", 100*(best-last)/best, at, high)
	}
}

// flagDrift looks for one light read twice with different rates.
func flagDrift(readings []Reading, f *Fit, flag func(string, ...any)) {
	for i, a := range readings {
		for _, b := range readings[i+1:] {
			if math.Abs(a.PPFD-b.PPFD) <= 0.02*math.Max(a.PPFD, dim) && math.Abs(a.Net-b.Net) > math.Max(drifted*f.Amax.Value, 4*f.RMSE) {
				flag("drift: %.3g and %.3g umol CO2 m-2 s-1 at %.4g umol of light", a.Net, b.Net, a.PPFD)
				return
			}
		}
	}
}

// flagStomata looks for stomata that close the leaf off in the light.
func flagStomata(readings []Reading, flag func(string, ...any)) {
	for _, r := range readings {
		if r.PPFD >= 2*dim && (r.Ci < closedCi || r.Conductance < closedConductance) {
			flag("closed stomata at %.4g umol: the curve is not that of the leaf's capacity", r.PPFD)
			return
		}
	}
}

// Spread is a mean over leaves or plants with their standard deviation.
type Spread struct {
	Mean, SD float64
	N        int
}

// Summary is a species' mean over plants, each plant the mean of its leaves: leaves of one plant are not independent.
type Summary struct {
	Amax, Rd, Phi, Theta, Compensation Spread
}

// MeanOfPlants is the mean over plants of a value of n leaves, each plant the mean of its leaves; NaN values are left out.
func MeanOfPlants(n int, plants []string, value func(leaf int) float64) Spread {
	var order []string
	sum, count := map[string]float64{}, map[string]float64{}
	for i := range n {
		if v := value(i); !math.IsNaN(v) {
			if count[plants[i]] == 0 {
				order = append(order, plants[i])
			}
			sum[plants[i]] += v
			count[plants[i]]++
		}
	}
	var means []float64
	for _, p := range order {
		means = append(means, sum[p]/count[p])
	}
	s := Spread{N: len(means), Mean: math.NaN(), SD: math.NaN()}
	if len(means) > 0 {
		s.Mean = stat.Mean(means, nil)
	}
	if len(means) > 1 {
		s.SD = stat.StdDev(means, nil)
	}
	return s
}

// Summarise averages the fits of a species by plant; curvature leaves out shapes without one.
func Summarise(fits []Fit, plants []string) Summary {
	of := func(get func(*Fit) float64) Spread {
		return MeanOfPlants(len(fits), plants, func(i int) float64 { return get(&fits[i]) })
	}
	return Summary{
		Amax: of(func(f *Fit) float64 { return f.Amax.Value }), Rd: of(func(f *Fit) float64 { return f.Rd.Value }),
		Phi: of(func(f *Fit) float64 { return f.Phi.Value }), Theta: of(func(f *Fit) float64 { return f.Theta.Value }),
		Compensation: of(func(f *Fit) float64 { return f.Compensation.Value }),
	}
}
