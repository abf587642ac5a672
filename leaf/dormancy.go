package leaf

import "math"

// Dormancy is the yearly cycle of evergreen leaves, as a state that follows the temperature of the air with a lag (Mäkelä et al. 2004, Tree
// Physiol. 24:369-376): dX/dt = (T - X)/Lag, and the share of the capacity that is awake is (X - From)/Span, 0 to 1. The zero value is
// no dormancy.
type Dormancy struct {
	Lag  float64 // d
	From float64 // deg C, below which leaves do no work
	Span float64 // deg C, from there to full capacity
}

// Pine is Scots pine at 62 N, which the rule was found for (Mäkelä et al. 2008, Glob. Change Biol. 14:92-108; values from memory, where studies give
// lags of 8 to 14 days, -6 to -3 and 16 to 20 deg C). It stands for all evergreens of cold places.
var Pine = Dormancy{Lag: 13, From: -4, Span: 17.3}

// States gives X day by day from mean temperatures (deg C) of days that stand for weight days each, in order of time. The first day follows the
// last, as in a mean year. The step is exact for a temperature that is constant over its days.
func (d Dormancy) States(mean, weight []float64) []float64 {
	X := make([]float64, len(mean))
	if len(mean) == 0 || d.Lag <= 0 {
		return X
	}
	x := mean[len(mean)-1]
	for range 2 { // the first round finds where the year begins
		for i, T := range mean {
			x = T + (x-T)*math.Exp(-weight[i]/d.Lag)
			X[i] = x
		}
	}
	return X
}

// Awake is the share, 0 to 1, of gross assimilation left at a state X (deg C), where temperature alone leaves the capacity at a share of that at its
// optimum, warmth: as much as brings the capacity down to the lesser of the two, since warmth on a spring day does not wake a leaf,
// and cold in summer is not charged twice. It bears on the initial slope as on the capacity: cold evergreens quench light for weeks (Öquist & Huner
// 2003, Annu. Rev. Plant Biol. 54:329-355).
func (d Dormancy) Awake(state, warmth float64) float64 {
	if d.Lag <= 0 {
		return 1
	}
	capacity := math.Max(0, math.Min(1, (state-d.From)/d.Span))
	if capacity >= warmth {
		return 1
	}
	return capacity / warmth
}
