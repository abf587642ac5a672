package fit

import (
	"encoding/csv"
	"math"
	"math/rand/v2"
	"os"
	"strconv"
	"strings"
	"testing"

	"gonum.org/v1/gonum/stat"

	"shadeledger/leaf"
)

// aciTable reads rows by heading; empty cells are NaN.
func aciTable(t *testing.T, name string) (leaves []string, rows []map[string]float64) {
	t.Helper()
	f, err := os.Open("../../testdata/aci/" + name)
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	records, err := csv.NewReader(f).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	for _, r := range records[1:] {
		row := map[string]float64{}
		for i, h := range records[0][1:] {
			v, err := strconv.ParseFloat(r[i+1], 64)
			if err != nil {
				v = math.NaN()
			}
			row[h] = v
		}
		leaves, rows = append(leaves, r[0]), append(rows, row)
	}
	return leaves, rows
}

// gasCurves by leaf.
func gasCurves(t *testing.T, name string) map[string][]Gas {
	t.Helper()
	leaves, rows := aciTable(t, name)
	out := map[string][]Gas{}
	for i, r := range rows {
		p := r["pressure_kpa"] // 0 where the file has none
		out[leaves[i]] = append(out[leaves[i]], Gas{Ci: r["ci_ppm"], Net: r["net_umol_m2_s"], PPFD: r["ppfd_umol_m2_s"], Temperature: r["leaf_temp_c"], Pressure: p})
	}
	return out
}

// agreement of fits with published values: median relative difference and correlation.
func agreement(found, published []float64) (difference, r float64) {
	var d []float64
	for i := range found {
		d = append(d, math.Abs(found[i]/published[i]-1))
	}
	return median(d), stat.Correlation(found, published, nil)
}

// Yellow birch (Van Riel 2023), published at 25 deg C: capacities within 6 and 8 % in the median, respiration within 0.6.
func TestYellowBirchCapacities(t *testing.T) {
	curves := gasCurves(t, "yellow-birch.csv")
	leaves, published := aciTable(t, "yellow-birch-published.csv")
	var v, vp, j, jp, rd []float64
	for i, l := range leaves {
		c, err := CO2Curve(curves[l], leaf.Bernacchi{})
		if err != nil {
			t.Fatal(l, err)
		}
		v, vp = append(v, c.Vcmax.Value), append(vp, published[i]["vcmax"])
		j, jp = append(j, c.Jmax.Value), append(jp, published[i]["jmax"])
		rd = append(rd, math.Abs(c.Rd.Value-published[i]["rd"]))
	}
	dv, rv := agreement(v, vp)
	dj, rj := agreement(j, jp)
	t.Logf("%d leaves: Vcmax %.1f %%, r %.3f; Jmax %.1f %%, r %.3f; Rd %.2f", len(v), 100*dv, rv, 100*dj, rj, median(rd))
	if len(v) != 28 || dv > 0.06 || dj > 0.08 || rv < 0.97 || rj < 0.97 || median(rd) > 0.6 {
		t.Errorf("%d leaves: Vcmax %.1f %%, r %.3f; Jmax %.1f %%, r %.3f; Rd %.2f", len(v), 100*dv, rv, 100*dj, rj, median(rd))
	}
}

// Tropical canopy leaves (Lamour et al. 2021), measured at 28 to 33 deg C. The published values are said to be at 25, but are those at the temperature of the
// leaf: brought to 25 the fits fall from 0.7 to 0.5 of the published ones as leaves warm, at the leaf's own temperature they agree at
// every temperature.
func TestTropicalCapacities(t *testing.T) {
	curves := gasCurves(t, "panama.csv")
	leaves, published := aciTable(t, "panama-published.csv")
	var v, vp, j, jp, j25, warm, at25, own, heat, logs, rd25, rd, export []float64
	for i, l := range leaves {
		c, err := CO2Curve(curves[l], leaf.Bernacchi{})
		if err != nil {
			t.Fatal(l, err)
		}
		T := 0.0
		for _, g := range curves[l] {
			T += g.Temperature / float64(len(curves[l]))
		}
		factor := func(activation float64) float64 { // kJ mol-1, Bernacchi et al. (2001, 2003)
			return math.Exp(activation / 8.314e-3 * (1/298.15 - 1/(T+273.15)))
		}
		v, vp = append(v, c.Vcmax.Value*factor(65.33)), append(vp, published[i]["vcmax"])
		if p := published[i]["jmax"]; !math.IsNaN(p) && !math.IsNaN(c.Jmax.Value) {
			j, jp, j25 = append(j, c.Jmax.Value*factor(43.54)), append(jp, p), append(j25, c.Jmax.Value)
		}
		if p := published[i]["tp"]; !math.IsNaN(p + c.Export.Value) {
			export = append(export, math.Abs(c.Export.Value/p-1))
		}
		rd25, rd = append(rd25, math.Abs(c.Rd.Value-published[i]["rd"])), append(rd, math.Abs(c.Rd.Value*factor(46.39)-published[i]["rd"]))
		heat, logs = append(heat, math.Log(factor(1))), append(logs, math.Log(c.Vcmax.Value/published[i]["vcmax"]))
		warm, at25, own = append(warm, T), append(at25, c.Vcmax.Value/published[i]["vcmax"]), append(own, v[i]/vp[i])
	}
	dv, rv := agreement(v, vp)
	dj, rj := agreement(j, jp)
	t.Logf("%d leaves, at their temperature: Vcmax %.1f %%, r %.3f; %d with Jmax %.1f %%, r %.3f", len(v), 100*dv, rv, len(j), 100*dj, rj)
	var at25v []float64
	for i := range at25 {
		at25v = append(at25v, at25[i]*vp[i])
	}
	dv25, rv25 := agreement(at25v, vp)
	dj25, rj25 := agreement(j25, jp)
	t.Logf("if the published were at 25: Vcmax %.1f %%, r %.3f; Jmax %.1f %%, r %.3f; Rd %.2f, at the leaf's temperature %.2f", 100*dv25, rv25, 100*dj25, rj25, median(rd25), median(rd))
	_, energy := stat.LinearRegression(heat, logs, nil, false)
	t.Logf("our 25 over the published follows temperature by %.1f kJ mol-1 (0 if that were at 25, -65.3 at the leaf's); %d with export, %.1f %%", energy, len(export), 100*median(export))
	_, steep := stat.LinearRegression(warm, at25, nil, false)
	_, flat := stat.LinearRegression(warm, own, nil, false)
	t.Logf("Vcmax over the published: %.2f and %.3f per deg C if that were at 25; %.2f and %.3f at the leaf's", median(at25), steep, median(own), flat)
	if len(v) < 110 || dv > 0.10 || dj > 0.12 || rv < 0.95 || rj < 0.95 {
		t.Errorf("%d leaves: Vcmax %.1f %%, r %.3f; Jmax %.1f %%, r %.3f", len(v), 100*dv, rv, 100*dj, rj)
	}
	if math.Abs(flat) > 0.01 || steep > -0.03 {
		t.Errorf("the ratio falls by %.3f per deg C at the leaf's temperature, by %.3f at 25", -flat, -steep)
	}
}

// simulated is a curve of a known leaf, written from carboxylation rates: A = (1 - Gamma*/Ci) min(Wc, Wj), at most 3 export, less Rd. The
// first reading is below the compensation point of a warm leaf.
func simulated(b leaf.Biochemistry, export, celsius float64) (out []Gas) {
	gamma := math.Exp(19.02 - 37.83/(8.314e-3*(celsius+273.15))) // ppm, Bernacchi et al. (2001)
	for _, ci := range []float64{40, 70, 100, 150, 200, 260, 330, 450, 600, 800, 1100, 1400} {
		k := leaf.Limits(ci, leaf.Air{PPFD: 1500, Temperature: celsius}, b.Heat)
		share := 1 - gamma/ci
		wc, wj := b.Vcmax*k.Rubisco/share, leaf.Electrons(k.Light, b.Jmax*k.Jmax)*k.Electrons/share
		rate := math.Min(share*math.Min(wc, wj), 3*export)
		out = append(out, Gas{Ci: ci, Net: rate - b.Rd*k.Rd, PPFD: 1500, Temperature: celsius})
	}
	return out
}

var noExport = math.Inf(1)

// same to 1e-6 of the truth; not where it is NaN.
func same(e Estimate, truth float64) bool { return math.Abs(e.Value/truth-1) <= 1e-6 }

// Exact curves give their capacities back; with 0.3 umol noise errors are small and intervals hold the truth as often as they say.
func TestSimulatedCapacities(t *testing.T) {
	rng := rand.New(rand.NewPCG(7, 11))
	held, asked, falsely := [3]int{}, 0, 0
	var errV, errJ []float64
	for range 400 {
		v := 25 + 75*rng.Float64()
		b := leaf.Biochemistry{Vcmax: v, Jmax: v * (1.5 + 0.5*rng.Float64()), Rd: 0.015 * v, Heat: leaf.Acclimated{Growth: 18}}
		curve := simulated(b, noExport, 18+14*rng.Float64())
		exact, err := CO2Curve(curve, b.Heat)
		if err != nil || !same(exact.Vcmax, b.Vcmax) || !same(exact.Jmax, b.Jmax) || !same(exact.Rd, b.Rd) {
			t.Fatalf("%+v gives %+v, %v", b, exact, err)
		}
		for i := range curve {
			curve[i].Net += 0.3 * rng.NormFloat64()
		}
		c, err := CO2Curve(curve, b.Heat)
		if err != nil {
			t.Fatal(err)
		}
		asked++
		if !math.IsNaN(c.Export.Value) {
			falsely++
		}
		for i, e := range []struct {
			Estimate
			truth float64
		}{{c.Vcmax, b.Vcmax}, {c.Jmax, b.Jmax}, {c.Rd, b.Rd}} {
			if e.Low <= e.truth && e.truth <= e.High {
				held[i]++
			}
		}
		errV, errJ = append(errV, math.Abs(c.Vcmax.Value/b.Vcmax-1)), append(errJ, math.Abs(c.Jmax.Value/b.Jmax-1))
	}
	t.Logf("median error Vcmax %.1f %%, Jmax %.1f %%; intervals hold %v of %d; export found where there is none in %d", 100*median(errV), 100*median(errJ), held, asked, falsely)
	if falsely > asked/20 {
		t.Errorf("export found in %d of %d leaves without a limit by it", falsely, asked)
	}
	for i, h := range held {
		if share := float64(h) / float64(asked); share < 0.90 || share > 0.98 {
			t.Errorf("capacity %d: its interval holds the truth in %.1f %%", i, 100*share)
		}
	}
	if median(errV) > 0.05 || median(errJ) > 0.05 {
		t.Errorf("median error Vcmax %.1f %%, Jmax %.1f %%", 100*median(errV), 100*median(errJ))
	}
}

// A leaf limited by light from about 250 ppm, so that Jmax is told, and by export above 600: an exact curve gives the four back, noise of 0.3 leaves it found and its interval true.
func TestSimulatedExport(t *testing.T) {
	rng := rand.New(rand.NewPCG(5, 23))
	found, held, asked := 0, 0, 300
	for range asked {
		v := 40 + 60*rng.Float64()
		b := leaf.Biochemistry{Vcmax: v, Jmax: 1.4 * v, Rd: 0.015 * v, Heat: leaf.Bernacchi{}}
		celsius := 22 + 8*rng.Float64()
		k := leaf.Limits(600, leaf.Air{PPFD: 1500, Temperature: celsius}, b.Heat)
		export := leaf.Electrons(k.Light, b.Jmax*k.Jmax) * k.Electrons / 3
		curve := simulated(b, export, celsius)
		c, err := CO2Curve(curve, b.Heat)
		if err != nil || !same(c.Vcmax, v) || !same(c.Jmax, b.Jmax) || !same(c.Rd, b.Rd) || !same(c.Export, export) {
			t.Fatalf("%+v export %g gives %+v, %v", b, export, c, err)
		}
		for i := range curve {
			curve[i].Net += 0.3 * rng.NormFloat64()
		}
		if c, err = CO2Curve(curve, b.Heat); err != nil {
			t.Fatal(err)
		}
		if e := c.Export; !math.IsNaN(e.Value) {
			found++
			if e.Low <= export && export <= e.High {
				held++
			}
		}
	}
	t.Logf("export found in %d of %d, its interval true in %d", found, asked, held)
	if share := float64(held) / float64(found); found < asked*9/10 || share < 0.90 || share > 0.98 {
		t.Errorf("export found in %d of %d, its interval true in %d", found, asked, held)
	}
}

// Two readings below the compensation point: taking the lesser rate there gave Vcmax 44 for 50 and negative respiration. The formula with the
// constants of Bernacchi et al. (2001) is written out at 25 deg C.
func TestReadingsBelowCompensation(t *testing.T) {
	b := leaf.Biochemistry{Vcmax: 50, Jmax: 85, Rd: 0.8, Heat: leaf.Bernacchi{}}
	at := func(c, activation float64) float64 { return math.Exp(c - activation/(8.314e-3*298.15)) }
	gamma, km := at(19.02, 37.83), at(38.05, 79.43)*(1+210/at(20.30, 36.38))
	x := 1500 * 0.85 * 0.85 / 2
	j := (x + b.Jmax - math.Sqrt((x+b.Jmax)*(x+b.Jmax)-4*0.7*x*b.Jmax)) / 1.4
	var curve []Gas
	for _, ci := range []float64{20, 30, 60, 100, 150, 200, 260, 330, 450, 600, 800, 1100, 1400} {
		w := math.Min(b.Vcmax*ci/(ci+km), j*ci/(4*ci+8*gamma))
		curve = append(curve, Gas{Ci: ci, Net: (1-gamma/ci)*w - b.Rd, PPFD: 1500, Temperature: 25})
	}
	c, err := CO2Curve(curve, b.Heat)
	if err != nil || !same(c.Vcmax, b.Vcmax) || !same(c.Jmax, b.Jmax) || !same(c.Rd, b.Rd) {
		t.Errorf("%+v, %v", c, err)
	}
}

// A curve that Rubisco limits throughout says nothing of Jmax, and still gives intervals to the others.
func TestCapacityThatLimitsNothing(t *testing.T) {
	curve := simulated(leaf.Biochemistry{Vcmax: 30, Jmax: 300, Rd: 0.8, Heat: leaf.Bernacchi{}}, noExport, 25)
	for i := range curve {
		curve[i].Net += 0.1 * float64(i%3-1)
	}
	c, err := CO2Curve(curve, leaf.Bernacchi{})
	if err != nil || !math.IsNaN(c.Jmax.Value) || !(c.Vcmax.Low < 30 && 30 < c.Vcmax.High) || !(c.Rd.Low < 0.8 && 0.8 < c.Rd.High) {
		t.Errorf("%+v, %v", c, err)
	}
}

// Readings at two CO2, one limited by each capacity, do not tell three parameters apart: no interval.
func TestCapacitiesNotToldApart(t *testing.T) {
	var c gas
	for _, net := range []float64{3, 3.1, 2.9} {
		for _, ci := range []float64{100, 900} {
			c.list = append(c.list, limit(Gas{Ci: ci, Net: net, PPFD: 1500, Temperature: 25}, leaf.Bernacchi{}))
		}
	}
	out := c.result([4]float64{50, 90, 0.8}, 0.1)
	for name, e := range map[string]Estimate{"Vcmax": out.Vcmax, "Jmax": out.Jmax, "Rd": out.Rd} {
		if math.IsNaN(e.Value) || !math.IsNaN(e.SE) || !math.IsNaN(e.Low) || !math.IsNaN(e.High) {
			t.Errorf("%s: %+v", name, e)
		}
	}
	c.list = append(c.list, limit(Gas{Ci: 150, Net: 5, PPFD: 1500, Temperature: 25}, leaf.Bernacchi{}))
	if out = c.result([4]float64{50, 90, 0.8}, 0.1); !(out.Vcmax.Low < 50 && out.Jmax.Low < 90 && out.Rd.Low < 0.8) {
		t.Errorf("with a third CO2: %+v", out)
	}
}

func TestCO2CurveSaysWhatIsMissing(t *testing.T) {
	whole := simulated(leaf.Biochemistry{Vcmax: 50, Jmax: 90, Rd: 0.8, Heat: leaf.Bernacchi{}}, noExport, 25)
	changed := func(f func(*Gas)) []Gas {
		list := append([]Gas(nil), whole...)
		for i := range list {
			f(&list[i])
		}
		return list
	}
	for _, c := range []struct {
		name, want string
		list       []Gas
	}{
		{"none", "needs at least 6", nil},
		{"few", "needs at least 6", whole[:5]},
		{"low", "Jmax is not told", whole[:7]},
		{"high", "Vcmax is not told", whole[6:]},
		{"CO2 in Pa", "in ppm, not Pa", changed(func(g *Gas) { g.Ci *= 0.101325 })},
		{"CO2 endless", "give it in ppm", changed(func(g *Gas) { g.Ci = math.Inf(1) })},
		{"rates in mol", "give it in umol m-2 s-1", changed(func(g *Gas) { g.Net *= 1e-6 })},
		{"rates in nmol", "give it in umol m-2 s-1", changed(func(g *Gas) { g.Net *= 1e3 })},
		{"uptake negative", "uptake positive", changed(func(g *Gas) { g.Net = -math.Abs(g.Net) })},
		{"no rate", "a reading without", changed(func(g *Gas) { g.Net = math.NaN() })},
		{"light in mol", "give it in umol m-2 s-1", changed(func(g *Gas) { g.PPFD *= 1e-6 })},
		{"dark", "light is 0", changed(func(g *Gas) { g.PPFD = 0 })},
		{"kelvin", "give it in deg C", changed(func(g *Gas) { g.Temperature += 273.15 })},
		{"hPa", "give it in kPa", changed(func(g *Gas) { g.Pressure = 1013 })},
		{"negative pressure", "give it in kPa", changed(func(g *Gas) { g.Pressure = -5 })},
		{"no pressure known", "pressure is NaN", changed(func(g *Gas) { g.Pressure = math.NaN() })},
	} {
		if _, err := CO2Curve(c.list, leaf.Bernacchi{}); err == nil || !strings.Contains(err.Error(), c.want) {
			t.Errorf("%s: %v, want %q", c.name, err, c.want)
		}
	}
	if _, err := CO2Curve(whole, nil); err == nil || !strings.Contains(err.Error(), "temperature response") {
		t.Errorf("without a temperature response: %v", err)
	}
}

// A leaf measured on a mountain gives its capacities back where the pressure is told, and too little Rubisco where it is not. Rates are written in
// partial pressures here, Pa and kPa.
func TestPressureOfTheAir(t *testing.T) {
	const celsius, kPa = 25.0, 80.0
	b := leaf.Biochemistry{Vcmax: 60, Jmax: 105, Rd: 0.9, Heat: leaf.Bernacchi{}}
	at := func(c, activation float64) float64 { return math.Exp(c - activation/(8.314e-3*(celsius+273.15))) }
	Kc, Ko, gamma := at(38.05, 79.43)*0.101325, at(20.30, 36.38)*0.101325, at(19.02, 37.83)*0.101325*kPa/101.325
	var curve []Gas
	for _, ci := range []float64{60, 100, 150, 200, 260, 330, 450, 600, 800, 1100} {
		Pa, O := ci*kPa*1e-3, 0.210*kPa
		wc := b.Vcmax * (Pa - gamma) / (Pa + Kc*(1+O/Ko))
		wj := leaf.Electrons(1500*0.85*0.85/2, b.Jmax) * (Pa - gamma) / (4 * (Pa + 2*gamma))
		curve = append(curve, Gas{Ci: ci, Net: math.Min(wc, wj) - b.Rd, PPFD: 1500, Temperature: celsius, Pressure: kPa})
	}
	c, err := CO2Curve(curve, b.Heat)
	if err != nil || !same(c.Vcmax, b.Vcmax) || !same(c.Jmax, b.Jmax) || !same(c.Rd, b.Rd) {
		t.Errorf("%+v, %v", c, err)
	}
	for i := range curve {
		curve[i].Pressure = 0
	}
	if c, err = CO2Curve(curve, b.Heat); err != nil {
		t.Fatal(err)
	}
	t.Logf("taken for sea level: Vcmax %.1f for %g, Jmax %.1f for %g", c.Vcmax.Value, b.Vcmax, c.Jmax.Value, b.Jmax)
	if c.Vcmax.Value > 0.97*b.Vcmax {
		t.Error("the pressure makes no difference")
	}
}
