package weather

import "math"

// monthLine is a value at the middles of the months; days between take it linearly.
type monthLine [12]float64

// at is the value in a season.
func (l *monthLine) at(s season) float64 { return l[s.first] + s.share*(l[s.second]-l[s.first]) }

// lineThrough has the months' means that are wanted: the days of a month weigh 3/4 its own middle and 1/8 each neighbour's.
func lineThrough(want monthLine) monthLine {
	l := want
	for range 12 {
		was := l
		for m := range l {
			l[m] += want[m] - (0.75*was[m] + 0.125*(was[(m+11)%12]+was[(m+1)%12]))
		}
	}
	return l
}

// leastSample is the number of days that a distribution is told from (chosen).
const leastSample = 30

// sampleOf gathers the values of a kind of day in a month; in its neighbours too, in the end of every kind, until there are
// leastSample. NaN values do not count.
func sampleOf(days []observed, kind, month int, value func(*observed) float64) (sample []float64) {
	for reach := 0; reach <= 7 && len(sample) < leastSample; reach++ {
		sample = sample[:0]
		for i := range days {
			d := &days[i]
			apart := (monthOf(d.day) - month + 12) % 12
			if (d.kind() != kind && reach < 7) || min(apart, 12-apart) > reach {
				continue
			}
			if v := value(d); !math.IsNaN(v) {
				sample = append(sample, v)
			}
		}
	}
	return sample
}

// meanSpread is the mean and the standard deviation of a sample.
func meanSpread(sample []float64) spreadOf {
	var m spreadOf
	for _, v := range sample {
		m.mean += v / float64(len(sample))
	}
	for _, v := range sample {
		m.sd += (v - m.mean) * (v - m.mean) / float64(len(sample))
	}
	m.sd = math.Sqrt(m.sd)
	return m
}
