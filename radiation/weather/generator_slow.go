package weather

import (
	"math"
	"math/rand/v2"
	"time"
)

// A process of first order forgets within days, so years drawn from it are more alike than measured ones (Katz & Parlange
// 1998, J. Climate 11:591-601; Hansen & Mavromatis 2001, Agric. For. Meteorol. 109:297-310). slowPart gives each part of a
// year a shift of its own: scores, the logit of the chance of rain and the logarithm of the amounts. Its spread is what the
// means of the record's seasons vary by beyond what the fast process explains.
type slowPart [halvesOfYear][slowKinds]float64 // standard deviations, in the shifted quantity's own units

// Kinds of shifts: those of the scores come first, in their order.
const (
	chanceOfRain = variables + iota
	amountOfRain
	slowKinds
)

const (
	halvesOfYear = 2   // of the year: light from 21 March to 22 September in the north, and dark
	parts        = 3   // of a calendar year: dark, light, dark
	mostSlow     = 0.4 // share of a score's variance that may be slow (chosen)
	leastPart    = 60  // sound days that make a part of a year count (chosen)
)

// partOf is the part of the calendar year of a day of the table.
func partOf(day int) int {
	switch {
	case day < equinox[0]:
		return 0
	case day < equinox[1]:
		return 1
	}
	return 2
}

// equinox are the days of the table on which the light half begins and ends.
var equinox = [2]int{dayIndex(time.March, 21), dayIndex(time.September, 23)}

// halfOf is the half of the year that a part belongs to.
func halfOf(part int) int { return part % 2 }

// shifts are one year's.
type shifts [parts][slowKinds]float64

// draw gives a year its shifts. Highest and lowest temperature shift together.
func (s *slowPart) draw(from *rand.Rand) (out shifts) {
	for part := range out {
		for k := range out[part] {
			e := from.NormFloat64()
			out[part][k] = e * s[halfOf(part)][k]
			if k == coldestOfDay && s[halfOf(part)][warmest] > 0 {
				out[part][k] = out[part][warmest] / s[halfOf(part)][warmest] * s[halfOf(part)][k]
			}
		}
	}
	return out
}

// join adds a part's shifts to the scores, whose fast spread is narrowed to keep their variance at 1.
func (s *slowPart) join(fast vector, shift *shifts, part int) vector {
	for v := range fast {
		sd := s[halfOf(part)][v]
		fast[v] = fast[v]*math.Sqrt(1-sd*sd) + shift[part][v]
	}
	return fast
}

// chance is the chance of rain with a year's shift.
func (x *shifts) chance(p float64, part int) float64 {
	if s := x[part][chanceOfRain]; s != 0 {
		return p / (p + (1-p)*math.Exp(-s))
	}
	return p
}

// amount is the factor on the amounts, of mean 1 over the years.
func (s *slowPart) amount(x *shifts, part int) float64 {
	sd := s[halfOf(part)][amountOfRain]
	return math.Exp(x[part][amountOfRain] - sd*sd/2)
}

// group is a part of one year of the record.
type group struct {
	part int
	days []*observed
}

// groupsOf cuts a record into parts of years that have enough days.
func groupsOf(days []observed) (out []group) {
	for i := 0; i < len(days); {
		end := i
		g := group{part: partOf(days[i].day)}
		for end < len(days) && days[end].year == days[i].year && partOf(days[end].day) == g.part {
			g.days = append(g.days, &days[end])
			end++
		}
		if len(g.days) >= leastPart {
			out = append(out, g)
		}
		i = end
	}
	return out
}

// fitSlow finds the slow spreads and the fast process that together keep the correlations.
func (g *Generator) fitSlow(days []observed, size int) {
	m0, m1 := correlations(days, size)
	groups := groupsOf(days)
	g.process = newMatalas(size, m0, m1)
	for range 6 {
		g.slow.fitScores(groups, &g.process)
		g.process = g.slow.fast(size, m0, m1)
	}
	g.fitSlowRain(groups)
}

// fitScores compares the spread of group means with that of the fast process.
func (s *slowPart) fitScores(groups []group, p *matalas) {
	for h := range s {
		for v := range p.size {
			before := s[h][v]
			excess := excessOf(groups, h, func(x *group) (mean, explained float64) {
				n := 0
				for _, d := range x.days {
					if !math.IsNaN(d.score[v]) {
						mean += d.score[v]
						n++
					}
				}
				return mean / float64(n), (1 - before*before) * p.meanVariance(v, n)
			})
			s[h][v] = math.Sqrt(math.Min(mostSlow, excess))
		}
	}
}

// excessOf is the variance of the groups' means in a half of the year beyond that explained; 0 with fewer than leastYears
// groups. Parts differ in their long means; each is compared with its own.
func excessOf(groups []group, half int, of func(*group) (mean, explained float64)) float64 {
	var n, sum, square, explained [parts]float64
	for i := range groups {
		g := &groups[i]
		if halfOf(g.part) != half {
			continue
		}
		m, e := of(g)
		if math.IsNaN(m + e) {
			continue
		}
		n[g.part]++
		sum[g.part] += m
		square[g.part] += m * m
		explained[g.part] += e
	}
	total, free := 0.0, 0.0
	for part, k := range n {
		if k < leastYears {
			continue
		}
		total += square[part] - sum[part]*sum[part]/k - explained[part]*(k-1)/k
		free += k - 1
	}
	if free == 0 {
		return 0
	}
	return math.Max(0, total/free)
}

// fast is the process whose scores, joined with the slow part, have the correlations m0 and m1.
func (s *slowPart) fast(size int, m0, m1 matrix) matalas {
	for i := range size {
		for j := range size {
			shared, rest := 0.0, 0.0
			for h := range s {
				a, b := s[h][i], s[h][j]
				if i == j || i <= coldestOfDay && j <= coldestOfDay {
					shared += a * b / halvesOfYear
				}
				rest += math.Sqrt((1-a*a)*(1-b*b)) / halvesOfYear
			}
			m0[i][j] = (m0[i][j] - shared) / rest
			m1[i][j] = (m1[i][j] - shared) / rest
		}
	}
	return newMatalas(size, m0, m1)
}

// fitSlowRain does the same for the share of wet days (logit of the chances) and the mean amount of a wet day.
func (g *Generator) fitSlowRain(groups []group) {
	if g.rainless {
		return
	}
	spread := g.amount.variance()
	for h := range g.slow {
		slope, parts := 0.0, 0.0
		variance := excessOf(groups, h, func(x *group) (mean, explained float64) {
			k := float64(len(x.days))
			for _, d := range x.days {
				after, share := g.days[d.day].wetAfter, g.wet[d.day]
				memory := after[wet] - after[dry]
				mean += float64(d.state) / k
				explained += share * (1 - share) * (1 + memory) / (1 - memory) / (k * k)
				slope += (after[dry]*(1-after[dry])*(1-share) + after[wet]*(1-after[wet])*share) / (1 - memory) / k
			}
			parts++
			return mean, explained
		})
		if variance > 0 {
			g.slow[h][chanceOfRain] = math.Min(1, math.Sqrt(variance)/(slope/parts))
		}
		g.slow[h][amountOfRain] = math.Sqrt(math.Min(mostSlow, excessOf(groups, h, func(x *group) (mean, explained float64) {
			n := 0.0
			for _, d := range x.days {
				if scale := g.days[d.day].rain - wetDay; d.state == wet && scale > 0 {
					mean += (d.rain - wetDay) / scale
					n++
				}
			}
			return mean / n, spread / n
		})))
	}
}
