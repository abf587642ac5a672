package weather

import (
	"math"
	"slices"
	"time"
)

// season places a day between the middles of two months: a share from the first to the second.
type season struct {
	first, second int
	share         float64
}

func seasonOf(d date) season {
	length := float64(time.Date(d.year, d.month+1, 0, 0, 0, 0, 0, time.UTC).Day())
	u := float64(d.month-1) + (float64(d.day)-0.5)/length - 0.5
	i := int(math.Floor(u))
	return season{(i + 12) % 12, (i + 13) % 12, u - float64(i)}
}

// scoreNodes is the number of steps of a tabulated quantile function.
const scoreNodes = 64

// quantiles are the values at shares 0, 1/scoreNodes .. 1 of the days.
type quantiles [scoreNodes + 1]float64

// scoreTable holds the distribution of a value by kind of day and month. Days between two months' middles take
// quantiles between those of the two.
type scoreTable [kinds][12]quantiles

// at is the value that a share of the days of that kind and season stays below.
func (t *scoreTable) at(kind int, s season, share float64) float64 {
	x := share * scoreNodes
	i := min(int(x), scoreNodes-1)
	f := x - float64(i)
	a, b := &t[kind][s.first], &t[kind][s.second]
	low := a[i] + f*(a[i+1]-a[i])
	high := b[i] + f*(b[i+1]-b[i])
	return low + s.share*(high-low)
}

// share is the inverse of at: the share of the days that stay below a value; the middle of the shares where
// many days have that value.
func (t *scoreTable) share(kind int, s season, value float64) float64 {
	node := func(i int) float64 { return t.at(kind, s, float64(i)/scoreNodes) }
	below := 0 // nodes below the value
	for below <= scoreNodes && node(below) < value {
		below++
	}
	upTo := below // nodes up to the value
	for upTo <= scoreNodes && node(upTo) <= value {
		upTo++
	}
	if upTo > below {
		return float64(below+upTo-1) / 2 / scoreNodes
	}
	if below == 0 || below > scoreNodes {
		return math.Min(1, float64(below)) // outside the table
	}
	a, b := node(below-1), node(below)
	return (float64(below-1) + (value-a)/(b-a)) / scoreNodes
}

// mean is the expected value of a kind and season.
func (t *scoreTable) mean(kind int, s season) float64 {
	return t[kind][s.first].mean()*(1-s.share) + t[kind][s.second].mean()*s.share
}

func (q *quantiles) mean() float64 {
	sum := (q[0] + q[scoreNodes]) / 2
	for _, v := range q[1:scoreNodes] {
		sum += v
	}
	return sum / scoreNodes
}

// quantilesOf tabulates the quantiles of a sample, which it sorts: the values at the middle of its ranks, linear
// between, the least and the greatest beyond them.
func quantilesOf(sample []float64) (q quantiles) {
	slices.Sort(sample)
	n := len(sample)
	for i := range q {
		x := float64(i)/scoreNodes*float64(n) - 0.5
		x = math.Max(0, math.Min(float64(n-1), x))
		k := min(int(x), max(n-2, 0))
		next := min(k+1, n-1)
		q[i] = sample[k] + (x-float64(k))*(sample[next]-sample[k])
	}
	return q
}

// keepMonths moves the tables at the months' middles such that the days of a month, taken between two middles, have the
// month's quantiles in the mean: they weigh 3/4 its own and 1/8 each neighbour's. No table leaves its month's range.
func keepMonths(want [12]quantiles) [12]quantiles {
	at := want
	for range 12 {
		was := at
		for m := range at {
			before, after := &was[(m+11)%12], &was[(m+1)%12]
			for i := range at[m] {
				v := was[m][i] + want[m][i] - (0.75*was[m][i] + 0.125*(before[i]+after[i]))
				at[m][i] = math.Max(want[m][0], math.Min(want[m][scoreNodes], v))
			}
			slices.Sort(at[m][:])
		}
	}
	return at
}

// share01 is the share of a standard normal below z.
func share01(z float64) float64 { return 0.5 * math.Erfc(-z/math.Sqrt2) }

// score01 is the inverse of share01, the share kept off 0 and 1 by half a day in n.
func score01(share float64, n int) float64 {
	edge := 0.5 / float64(n)
	share = math.Max(edge, math.Min(1-edge, share))
	return math.Sqrt2 * math.Erfinv(2*share-1)
}
