package weather

import (
	"fmt"
	"math"
	"sort"
	"time"

	"shadeledger/radiation"
)

// sunYear is the common year whose sun normals use; declination differs between years by up to 0.2 deg.
const sunYear = 2025

// Series makes a year of days whose means are the months' normals.
func (n *Normals) Series(site radiation.Site, step time.Duration, par Par) *Series {
	dates := n.dates()
	f := newFrame(site, step, dates)
	s := f.series
	s.Years = 1
	for d := range s.Days {
		s.Days[d].Year = 0 // of no year in particular; sunYear lends its sun
	}
	days := make([]dayWeather, len(dates))
	first := 0
	for month := time.January; month <= time.December; month++ {
		end := first
		for end < len(dates) && dates[end].month == month {
			end++
		}
		n.monthLight(f, days, first, end, int(month)-1)
		first = end
	}
	tmin, tmax, mean := n.smooth(dates, n.Min), n.smooth(dates, n.Max), n.smooth(dates, n.Mean)
	for d := range days {
		days[d].tmin, days[d].tmax = tmin[d], math.Max(tmax[d], tmin[d])
	}
	f.spread(days, par)
	f.level(mean)
	s.moisten(unknown)
	return s
}

// dates are every calendar day of a common year, or DaysPerMonth days spread evenly over each month.
func (n *Normals) dates() []date {
	if n.DaysPerMonth <= 0 {
		return yearDates(sunYear, sunYear)
	}
	var out []date
	for month := time.January; month <= time.December; month++ {
		length := time.Date(sunYear, month+1, 0, 0, 0, 0, 0, time.UTC).Day()
		k := min(n.DaysPerMonth, length)
		for i := range k {
			day := 1 + int((float64(i)+0.5)*float64(length)/float64(k))
			out = append(out, date{sunYear, min(day, length), month, float64(length) / float64(k)})
		}
	}
	return out
}

// golden is the fractional part whose multiples fill 0..1 most evenly (Weyl sequence of the golden ratio).
const golden = 0.6180339887498949

// order gives each of n days the rank of its clearness, low-discrepancy through the month.
func order(n int) []int {
	place := make([]int, n)
	for i := range place {
		place[i] = i
	}
	key := func(i int) float64 { _, f := math.Modf(float64(i+1) * golden); return f }
	sort.SliceStable(place, func(a, b int) bool { return key(place[a]) < key(place[b]) })
	rank := make([]int, n)
	for r, i := range place {
		rank[i] = r
	}
	return rank
}

// monthLight gives the days first..end of a month their global radiation and diffuse share.
func (n *Normals) monthLight(f *frame, days []dayWeather, first, end, month int) {
	count := end - first
	top := make([]float64, count)
	sumTop, sumN := 0.0, 0.0
	for i := range top {
		top[i] = f.dayTop(first + i)
		sumTop += top[i]
		sumN += float64(f.series.Days[first+i].LitTo - f.series.Days[first+i].LitFrom)
	}
	if sumTop <= 0 {
		return
	}
	H := n.Global[month] * float64(count) // summed over the days
	if math.IsNaN(n.Global[month]) {
		H = (angstromA + angstromB*n.SunshineShare[month]) * sumTop
	}
	mean := H / sumTop
	quantile := clearnessDistribution(mean)
	rank := order(count)
	sum := 0.0
	kt := make([]float64, count)
	for i := range kt {
		kt[i] = quantile((float64(rank[i]) + 0.5) / float64(count))
		sum += kt[i] * top[i]
	}
	for i := range kt {
		kt[i] *= H / sum
		ws := sunsetAngle(f.series.Site.Latitude, f.declination[first+i])
		days[first+i].global = kt[i] * top[i]
		days[first+i].q = radiation.DiffuseShareDaily(math.Min(kt[i], 1), ws)
	}
	if want := n.DiffuseShare[month]; !math.IsNaN(want) {
		diffuse, global := make([]float64, count), make([]float64, count)
		for i := range count {
			global[i] = days[first+i].global
			diffuse[i] = days[first+i].q * global[i]
		}
		k := balance(diffuse, global, want*H)
		for i := first; i < end; i++ {
			days[i].q = math.Min(1, k*days[i].q)
		}
	}
}

// clearnessDistribution gives the quantiles of daily clearness in a month with the mean given: Bendt,
// Collares-Pereira & Rabl (1981) Solar Energy 27:1-5, F(K) = (e^(g Kmin) - e^(g K)) / (e^(g Kmin) - e^(g Kmax)),
// Kmin = 0.05; Kmax after Hollands & Huget (1983) Solar Energy 30:195-209 (both from memory).
// Means out of the distribution's reach give that mean every day.
func clearnessDistribution(mean float64) func(share float64) float64 {
	kmin := 0.05
	kmax := 0.6313 + 0.267*mean - 11.9*math.Pow(mean-0.75, 8)
	if kmax > 1 {
		kmax = 1
	}
	if mean <= kmin+0.005 || mean >= kmax-0.005 {
		return func(float64) float64 { return mean }
	}
	// mean of the truncated exponential with rate g on kmin..kmax
	width := kmax - kmin
	at := func(g float64) float64 {
		if math.Abs(g*width) < 1e-6 {
			return (kmin + kmax) / 2
		}
		return kmin + width/(1-math.Exp(-g*width)) - 1/g
	}
	lo, hi := -500.0, 500.0
	for range 100 {
		if mid := (lo + hi) / 2; at(mid) < mean {
			lo = mid
		} else {
			hi = mid
		}
	}
	g := (lo + hi) / 2
	return func(share float64) float64 {
		if math.Abs(g*width) < 1e-6 {
			return kmin + share*width
		}
		return kmin + math.Log1p(share*math.Expm1(g*width))/g
	}
}

// smooth draws a line through the months' middles such that each month keeps its mean.
func (n *Normals) smooth(dates []date, want [12]float64) []float64 {
	node := want
	out := make([]float64, len(dates))
	var length [13]float64
	for m := time.January; m <= time.December; m++ {
		length[m] = float64(time.Date(sunYear, m+1, 0, 0, 0, 0, 0, time.UTC).Day())
	}
	for range 12 {
		var sum, weight [12]float64
		for d, date := range dates {
			u := float64(date.month-1) + (float64(date.day)-0.5)/length[date.month] - 0.5
			i := int(math.Floor(u))
			f := u - float64(i)
			a, b := (i+12)%12, (i+13)%12
			out[d] = node[a] + f*(node[b]-node[a])
			sum[date.month-1] += out[d] * date.weight
			weight[date.month-1] += date.weight
		}
		for m := range node {
			node[m] += want[m] - sum[m]/weight[m]
		}
	}
	return out
}

// level moves each day's temperature curve to the day's mean.
func (f *frame) level(mean []float64) {
	s := f.series
	for d, want := range mean {
		day := s.Temperature[d*s.PerDay : (d+1)*s.PerDay]
		sum := 0.0
		for _, T := range day {
			sum += T
		}
		for j := range day {
			day[j] += want - sum/float64(s.PerDay)
		}
	}
}

// Check lists the faults of normals.
func (n *Normals) Check(site radiation.Site, step time.Duration) []Problem {
	var c collector
	for m := range 12 {
		name := time.Month(m + 1).String()
		if n.Min[m] > n.Mean[m] || n.Mean[m] > n.Max[m] {
			c.add(0, "weather.normals.mean", fmt.Sprintf("%g in %s", n.Mean[m], name), "min <= mean <= max in every month")
		}
		for _, x := range []struct {
			field string
			v     float64
		}{{"min", n.Min[m]}, {"max", n.Max[m]}} {
			if x.v < coldest || x.v > hottest {
				c.add(0, "weather.normals."+x.field, fmt.Sprintf("%g in %s", x.v, name), "-90 to 60 deg C")
			}
		}
		if v := n.Global[m]; v < 0 || v > 40 {
			c.add(0, "weather.normals.radiation", fmt.Sprintf("%g in %s", v, name), "0 to 40 MJ m-2 d-1")
		}
		if v := n.SunshineShare[m]; v < 0 || v > 1 {
			c.add(0, "weather.normals.sunshine_share", fmt.Sprintf("%g in %s", v, name), "0 to 1")
		}
		if v := n.DiffuseShare[m]; v <= 0 || v > 1 {
			c.add(0, "weather.normals.diffuse_share", fmt.Sprintf("%g in %s", v, name), "above 0, up to 1")
		}
	}
	if len(c.list) == 0 {
		n.checkTop(&c, site)
	}
	return c.done()
}

// checkTop compares each month with what the sun sends.
func (n *Normals) checkTop(c *collector, site radiation.Site) {
	f := newFrame(site, time.Hour/2, (&Normals{DaysPerMonth: 2}).dates())
	for m := range 12 {
		if top := (f.dayTop(2*m) + f.dayTop(2*m+1)) / 2; n.Global[m] > 0.9*top+0.3 {
			c.add(0, "weather.normals.radiation", fmt.Sprintf("%g in %s", n.Global[m], time.Month(m+1)),
				fmt.Sprintf("no more than %.1f MJ m-2 d-1 there; check the unit and the hemisphere", 0.9*top+0.3))
		}
	}
}
