package fit

import (
	"errors"
	"math"

	"shadeledger/leaf"
)

// Gas is one reading of a curve of assimilation over CO2.
type Gas struct {
	Ci          float64 // CO2 within the leaf, ppm
	Net         float64 // net assimilation, umol CO2 m-2 s-1
	PPFD        float64 // incident, umol m-2 s-1
	Temperature float64 // of the leaf, deg C
	Pressure    float64 // of the air, kPa; 0 is 101.325
}

// Capacities are what a curve over CO2 tells of a leaf (Farquhar, von Caemmerer & Berry 1980, Planta 149:78-90), umol m-2 s-1, with 95 %
// intervals: net A = (1 - Gamma*/Ci) min(Wc, Wj), at most 3 Export, less Rd. Vcmax, Jmax and Rd are at 25 deg C. Export, the use of triose
// phosphates (Sharkey 1985, Bot. Rev. 51:53-105), is at the leaf's temperature, NaN where the curve does not ask for it by AICc.
// A capacity that limits no reading is NaN.
type Capacities struct {
	Vcmax, Jmax, Rd, Export Estimate
	RMSE                    float64 // umol m-2 s-1
	AICc                    float64
	Points                  int
}

// limits are what one reading allows per unit of each capacity.
type limits struct {
	net         float64
	rubisco     float64 // per Vcmax
	byElectrons float64 // per electron
	light       float64 // electrons that the light would drive
	jmax, rd    float64 // heat factors
	exports     bool    // export is looked for here
}

// CO2Curve fits capacities to the readings of one leaf by least squares; heat says how they follow temperature. At least six readings on both
// sides of the usual CO2 are needed.
func CO2Curve(readings []Gas, heat leaf.Heat) (Capacities, error) {
	if heat == nil {
		return Capacities{}, errors.New("no temperature response: give leaf.Bernacchi, or leaf.Acclimated to a growth temperature")
	}
	if err := checkGas(readings); err != nil {
		return Capacities{}, err
	}
	list := make([]limits, len(readings))
	for i, g := range readings {
		list[i] = limit(g, heat)
	}
	best, err := capacities(gas{list: list})
	if err != nil {
		return best, err
	}
	// AICc of four capacities and a variance takes seven readings
	if full, err := capacities(gas{list: list, export: true}); len(list) > leastGas && err == nil && full.AICc < best.AICc {
		return full, nil
	}
	return best, nil
}

func limit(g Gas, heat leaf.Heat) limits {
	k := leaf.Limits(g.Ci, leaf.Air{PPFD: g.PPFD, Temperature: g.Temperature, Pressure: g.Pressure}, heat)
	return limits{net: g.Net, rubisco: k.Rubisco, byElectrons: k.Electrons, light: k.Light, jmax: k.Jmax, rd: k.Rd, exports: g.Ci >= leastExports}
}

// gross is what q, Vcmax, Jmax, Rd and export, gives and which of them limits: 0, 1 or 3. The slower carboxylation limits; below the
// compensation point, where rates are negative, that is the greater rate.
func (l *limits) gross(q [4]float64, export bool) (rate float64, by int) {
	rate, by = q[0]*l.rubisco, 0
	if v := leaf.Electrons(l.light, q[1]*l.jmax) * l.byElectrons; v < rate != (l.rubisco < 0) {
		rate, by = v, 1
	}
	if export && l.exports && 3*q[3] < rate {
		rate, by = 3*q[3], 3
	}
	return rate, by
}

// slopes are the derivatives of net assimilation.
func (l *limits) slopes(q [4]float64, export bool) (d [4]float64) {
	d[2] = -l.rd
	switch _, by := l.gross(q, export); by {
	case 0:
		d[0] = l.rubisco
	case 1:
		h := 1e-4 * q[1]
		d[1] = (leaf.Electrons(l.light, (q[1]+h)*l.jmax) - leaf.Electrons(l.light, (q[1]-h)*l.jmax)) / (2 * h) * l.byElectrons
	default:
		d[3] = 3
	}
	return d
}

// Range that Vcmax, Jmax, Rd and export are held to, umol m-2 s-1: wider than any leaf's (common practice).
var leastCapacity, mostCapacity = [4]float64{1, 1, -3, 0.1}, [4]float64{400, 800, 15, 100}

// gas is the readings of a curve, fitted without or with export.
type gas struct {
	list   []limits
	export bool
}

func (c gas) free() (n int, low, high [4]float64) {
	if c.export {
		return 4, leastCapacity, mostCapacity
	}
	return 3, leastCapacity, mostCapacity
}

func (c gas) squares(q [4]float64) (sum float64) {
	for i := range c.list {
		l := &c.list[i]
		rate, _ := l.gross(q, c.export)
		e := l.net - rate + q[2]*l.rd
		sum += e * e
	}
	return sum
}

func (c gas) normal(q [4]float64) (A [4][4]float64, g [4]float64) {
	for i := range c.list {
		l := &c.list[i]
		rate, _ := l.gross(q, c.export)
		e := l.net - rate + q[2]*l.rd
		d := l.slopes(q, c.export)
		for a := range d {
			g[a] += d[a] * e
			for b := range d {
				A[a][b] += d[a] * d[b]
			}
		}
	}
	return A, g
}

// capacities are fitted from several starts; the best counts.
func capacities(c gas) (Capacities, error) {
	best, rss := [4]float64{}, math.Inf(1)
	for _, q := range c.starts() {
		if r := descend(c, &q); r < rss {
			best, rss = q, r
		}
	}
	if math.IsNaN(rss) || math.IsInf(rss, 1) {
		return Capacities{}, errors.New("no capacities fit; are CO2 in ppm and assimilation in umol m-2 s-1?")
	}
	return c.result(best, rss), nil
}

// result puts intervals to capacities as to a light response; one that limits no point is not told.
func (c gas) result(q [4]float64, rss float64) Capacities {
	n, _, _ := c.free()
	count := float64(len(c.list))
	out := Capacities{RMSE: math.Sqrt(rss / count), AICc: aicc(rss, count, n), Points: len(c.list)}
	A, _ := c.normal(q)
	v := intervals(A, n, rss, count)
	for i, to := range []*Estimate{&out.Vcmax, &out.Jmax, &out.Rd, &out.Export} {
		if A[i][i] == 0 {
			*to = Estimate{math.NaN(), math.NaN(), math.NaN(), math.NaN()}
			continue
		}
		one := [4]float64{}
		one[i] = 1
		*to = v.of(q[i], mostCapacity[i], one)
	}
	return out
}
