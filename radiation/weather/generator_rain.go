package weather

import (
	"math"
	"math/rand/v2"
)

// mixedExponential has mean 1: a share of the values about the smaller mean, the others about the larger (Woolhiser &
// Pegram 1979, J. Appl. Meteorol. 18:34-42).
type mixedExponential struct{ share, small, large float64 }

// one is the plain exponential.
var one = mixedExponential{1, 1, 1}

func (m mixedExponential) draw(from *rand.Rand) float64 {
	scale := m.large
	if from.Float64() < m.share {
		scale = m.small
	}
	return scale * from.ExpFloat64()
}

// variance is that of the mixture.
func (m mixedExponential) variance() float64 {
	return 2*(m.share*m.small*m.small+(1-m.share)*m.large*m.large) - 1
}

// leastScale keeps the smaller mean, as a share of the whole, off 0: rounded readings at the very threshold would draw it
// there (chosen).
const leastScale = 0.05

// fitMixed finds the mixture by expectation and maximisation, then scales it to mean 1. Fewer than 50 values give the
// plain exponential.
func fitMixed(values []float64) mixedExponential {
	if len(values) < 50 {
		return one
	}
	mean := 0.0
	for _, v := range values {
		mean += v / float64(len(values))
	}
	m := mixedExponential{0.5, 0.4 * mean, 1.6 * mean}
	for range 400 {
		var n, small, large float64
		for _, v := range values {
			a := m.share / m.small * math.Exp(-v/m.small)
			b := (1 - m.share) / m.large * math.Exp(-v/m.large)
			p := a / (a + b)
			n += p
			small += p * v
			large += (1 - p) * v
		}
		rest := float64(len(values)) - n
		if n < 5 || rest < 5 || small <= 0 {
			return one
		}
		m = mixedExponential{n / float64(len(values)), math.Max(small/n, leastScale*mean), large / rest}
	}
	whole := m.share*m.small + (1-m.share)*m.large
	m.small, m.large = m.small/whole, m.large/whole
	return m
}

// fitRain finds the chain and the amounts by month (Richardson 1981): counts of wet days after dry and after wet ones
// with half a day added to each kind (Jeffreys), and the mean of wet days.
func (g *Generator) fitRain(days []observed) {
	var after [12][states][states]float64 // month, state before, state
	var sum, n [12]float64
	for i := range days {
		d := &days[i]
		m := monthOf(d.day)
		if d.follows {
			after[m][days[i-1].state][d.state]++
		}
		if d.state == wet {
			sum[m] += d.rain
			n[m]++
		}
	}
	for i := range g.days {
		d, m := &g.days[i], monthOf(i)
		for was, count := range after[m] {
			d.wetAfter[was] = (count[wet] + 0.5) / (count[dry] + count[wet] + 1)
		}
		d.rain = wetDay
		if n[m] > 0 {
			d.rain = sum[m] / n[m]
		}
		if g.rainless {
			d.wetAfter = [states]float64{}
		}
	}
	g.amount = fitMixed(g.excesses(days))
}

// excesses are the amounts over the least of a wet day, in units of the month's mean.
func (g *Generator) excesses(days []observed) (out []float64) {
	for i := range days {
		if scale := g.days[days[i].day].rain - wetDay; days[i].state == wet && scale > 0 {
			out = append(out, (days[i].rain-wetDay)/scale)
		}
	}
	return out
}
