// Package weather brings hourly, daily and monthly-normal weather to one series of sub-steps
// with the light above the canopy. It takes records, not files.
package weather

import (
	"time"

	"shadeledger/radiation"
)

// Series is the weather and the light above the canopy for every sub-step of one or several years.
// Night sub-steps have a temperature only; those with the sun above the horizon at their midpoint
// ("lit") carry light too, which may be zero.
type Series struct {
	Site     radiation.Site
	Days     []Day    // in order of time; whole calendar years unless representative days
	PerDay   int      // sub-steps in a day
	Seconds  float64  // s, length of one sub-step
	Years    int      // number of calendar years covered; results are means over them
	Dated    bool     // days belong to real years; false for normals
	Warnings []string // what was bridged, capped or dropped
	ParRatio float64  // umol PAR per J of global radiation in force, f_PAR * 4.57
	// Temperature of the air, deg C, len(Days)*PerDay.
	Temperature []float64
	Vapour      []float64 // vapour pressure of the air by day, kPa
	Lit         Lit
}

// Day is a calendar day of local standard time.
type Day struct {
	Year    int // 0 for normals
	Month   time.Month
	Day     int
	Weight  float64 // calendar days that this one stands for; 1 except in a representative series
	LitFrom int     // its lit sub-steps are Lit[LitFrom:LitTo]
	LitTo   int
}

// DailyMeans gives the mean temperature of every day, deg C, and the calendar days that each stands for.
func (s *Series) DailyMeans() (mean, weight []float64) {
	mean, weight = make([]float64, len(s.Days)), make([]float64, len(s.Days))
	for i, celsius := range s.Temperature {
		mean[i/s.PerDay] += celsius / float64(s.PerDay)
	}
	for d := range s.Days {
		weight[d] = s.Days[d].Weight
	}
	return mean, weight
}

// Lit holds one value for each lit sub-step, in order of time.
type Lit struct {
	Step      []int32   // index of the sub-step: day*PerDay + place in the day
	Elevation []float64 // rad, > 0
	Azimuth   []float64 // rad
	Beam      []float64 // I_b, PPFD of the beam on a level plane above the canopy, umol m-2 s-1
	Diffuse   []float64 // D_above, PPFD of sky light on a level plane above the canopy, umol m-2 s-1
	// Sky clearness epsilon and brightness Delta of Perez et al. (1993), from the energy split.
	Clearness  []float64
	Brightness []float64
}
