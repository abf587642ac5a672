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
		m = mixedExponential{n / float64(len(values)), small / n, large / rest}
	}
	m.small, m.large = m.small/mean, m.large/mean
	return m
}

// fitRain finds the chain and the amounts.
func (g *Generator) fitRain(days []observed) {
	var after [states][]point
	var amounts []point
	for i := range days {
		d := &days[i]
		if d.follows {
			was := days[i-1].state
			after[was] = append(after[was], point{d.day, float64(d.state)})
		}
		if d.state == wet {
			amounts = append(amounts, point{d.day, d.rain})
		}
	}
	var chance [states]wave
	for s := range chance {
		chance[s] = wave{logit(0)}
		if len(after[s]) > 0 {
			chance[s] = binaryFamily.choose(after[s], func(float64) float64 { return 1 })
		}
	}
	mean := wave{math.Log(wetDay)}
	if n := len(amounts); n > 0 {
		mean = gammaFamily.choose(amounts, func(d float64) float64 { return d / float64(n) })
	}
	for i := range g.days {
		d := &g.days[i]
		for s := range chance {
			d.wetAfter[s] = logistic(chance[s].at(i))
		}
		d.rain = math.Max(wetDay, math.Exp(mean.at(i)))
	}
	excess := make([]float64, 0, len(amounts))
	for _, p := range amounts {
		if scale := g.days[p.day].rain - wetDay; scale > 0 {
			excess = append(excess, (p.value-wetDay)/scale)
		}
	}
	g.amount = fitMixed(excess)
}
