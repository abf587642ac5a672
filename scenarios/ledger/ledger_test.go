package ledger

import (
	"fmt"
	"math"
	"testing"
	"time"

	"shadeledger/leaf"
	"shadeledger/radiation"
	"shadeledger/radiation/weather"
	"shadeledger/scenarios/light"
)

// synthetic is a series of every nth day of a year at half-hour steps, with an invented sun path from the
// horizon to 87 degrees and light that changes from day to day.
func synthetic(every int) *weather.Series {
	s := &weather.Series{PerDay: 48, Seconds: 1800, Years: 1}
	for d := 0; d < 365; d += every {
		date := time.Date(2025, 1, 1+d, 0, 0, 0, 0, time.UTC)
		w := math.Min(float64(every), float64(365-d))
		day := weather.Day{Year: 2025, Month: date.Month(), Day: date.Day(), Weight: w, LitFrom: len(s.Lit.Step)}
		season := math.Sin(2 * math.Pi * float64(d-80) / 365)
		for i := range 48 {
			h := (float64(i) + 0.5) / 2
			s.Temperature = append(s.Temperature, 9+11*season+5*math.Sin((h-9)/12*math.Pi))
			sin := 0.35*season + 0.65*math.Cos((h-12)/12*math.Pi)
			if sin <= 0 {
				continue
			}
			q := 0.25 + 0.7*math.Mod(float64(d)*0.618, 1)
			G := 2000 * sin * (1.1 - q)
			s.Lit.Step = append(s.Lit.Step, int32(len(s.Days)*48+i))
			s.Lit.Elevation = append(s.Lit.Elevation, math.Asin(sin))
			s.Lit.Azimuth = append(s.Lit.Azimuth, h/12*math.Pi)
			s.Lit.Beam = append(s.Lit.Beam, G*(1-q))
			s.Lit.Diffuse = append(s.Lit.Diffuse, G*q)
			s.Lit.Clearness = append(s.Lit.Clearness, 2)
			s.Lit.Brightness = append(s.Lit.Brightness, 0.2)
		}
		day.LitTo = len(s.Lit.Step)
		s.Days = append(s.Days, day)
	}
	return s
}

// shade is an invented regime over a free sky: sky light falls by share, beam chance flickers.
func shade(a *light.Above, share float64) *light.Regime {
	r := light.Uniformly(a, share)
	for i := range r.BeamChance {
		r.BeamChance[i] = share * (0.2 + 1.6*math.Mod(float64(i)*0.754877, 1))
		r.Scattered[i] = 0.1 * share * a.Series.Lit.Beam[i]
	}
	series, k := a.Series, a.Series.Seconds*1e-6
	for d := range series.Days {
		var s light.Sums
		for i := series.Days[d].LitFrom; i < series.Days[d].LitTo; i++ {
			s.Open += k * (series.Lit.Beam[i] + series.Lit.Diffuse[i])
			s.Beam += k * r.BeamChance[i] * series.Lit.Beam[i]
			s.Scattered += k * r.Scattered[i]
			s.Sky += k * r.SkyPlane[i]
		}
		r.Days[d] = s
	}
	return r
}

func masks(s *weather.Series) (season, leafOn []bool) {
	for _, d := range s.Days {
		season = append(season, d.Month >= 5 && d.Month <= 9)
		leafOn = append(leafOn, d.Month >= 6 && d.Month <= 8)
	}
	return season, leafOn
}

var (
	sunSet   = leaf.Set{Ag: 10, Rd: 1, Phi: 0.05, Theta: 0.8, LMA: 60}
	shadeSet = leaf.Set{Ag: 5, Rd: 0.35, Phi: 0.055, Theta: 0.9, LMA: 32}
	twoSets  = leaf.TwoSets{Sun: sunSet, Shade: shadeSet, SunLight: 60, ShadeLight: 3}
)

func plant(chi, crownLAI float64, traits leaf.Acclimation) *Plant {
	out := leaf.Deciduous{Out: leaf.Date{Month: 5, Day: 1}, Full: leaf.Date{Month: 5, Day: 20},
		Colour: leaf.Date{Month: 9, Day: 20}, Bare: leaf.Date{Month: 10, Day: 10}}
	return &Plant{
		LeafArea: 0.05, LeafMass: 2, CrownLAI: crownLAI, Chi: chi, Absorptance: 0.85, Leaves: out, Traits: traits,
		Organs:      []Organ{{Stem, 3, 1.2, 25, 2}, {Root, 2.5, 1.5, 25, 2}},
		Temperature: leaf.Temperature{Ref: 25, Opt: 25, Width: 18, Q10: 2}, LightRespiration: 1, Factor: 2,
		Turnover: Turnover{LeafLifespan: 0.5, FineRootShare: 0.3, FineRootLifespan: 1, ConstructionCost: 0.6},
	}
}

// byTemperature is the light response of a set through the year.
func byTemperature(p *Plant, set leaf.Set, s *weather.Series) func(step int) func(I float64) float64 {
	return func(step int) func(I float64) float64 { return p.Temperature.At(set, s.Temperature[step]).Gross }
}

// bruteIncome is a plant's year in neutral or uneven shade by plain sums: own projection, a fine grid over leaf
// inclination and azimuth, 80 midpoint depths, direct integral over the sky, no rules, tables or bins.
func bruteIncome(p *Plant, g *light.Regime, set leaf.Set, share, k float64, radiance func(cos float64) float64, leafAt func(step int) func(I float64) float64) (income, fleck float64) {
	s := g.Above.Series
	norm := 1 / (p.Chi + 1.774*math.Pow(p.Chi+1.182, -0.733))
	G := func(sin, cos float64) float64 {
		if p.Chi == 1 {
			return 0.5
		}
		return norm * math.Sqrt(p.Chi*p.Chi*cos*cos+sin*sin)
	}
	const depths, sky, na, nt = 80, 2000, 80, 60
	var fromSky, fromDown [depths]float64
	for j := range depths {
		l := (float64(j) + 0.5) / depths * p.CrownLAI
		for i := range sky {
			sin, cos := math.Sincos((float64(i) + 0.5) / sky * math.Pi / 2)
			f := G(sin, cos) * math.Exp(-math.Sqrt(p.Absorptance)*G(sin, cos)*l/cos) * 2 * math.Pi * sin * math.Pi / 2 / sky
			fromSky[j] += f * radiance(cos)
			fromDown[j] += f / math.Pi
		}
	}
	A := p.LeafMass / set.LMA
	for d, day := range s.Days {
		on := p.Leaves.Share(day.Month, day.Day)
		if on == 0 {
			continue
		}
		for i := day.LitFrom; i < day.LitTo; i++ {
			cosθ := math.Sin(s.Lit.Elevation[i])
			sinθ := math.Sqrt(1 - cosθ*cosθ)
			gross := leafAt(int(s.Lit.Step[i]))
			P0 := math.Min(1, k*g.BeamChance[i])
			down := math.Min(k*g.Scattered[i], s.Lit.Beam[i]*(1-P0))
			var mu, w []float64
			total := 0.0
			for x := range na {
				sa, ca := math.Sincos((float64(x) + 0.5) / na * math.Pi / 2)
				v := sa / math.Pow(ca*ca+p.Chi*p.Chi*sa*sa, 2)
				for y := range nt {
					mu = append(mu, math.Abs(cosθ*ca+sinθ*sa*math.Cos((float64(y)+0.5)/nt*math.Pi)))
					w = append(w, v)
					total += v
				}
			}
			for j := range depths {
				l := (float64(j) + 0.5) / depths * p.CrownLAI
				Id := s.Lit.Diffuse[i]*math.Min(1, k*share)*fromSky[j] + down*fromDown[j]
				P, mean := gross(Id), 0.0
				for m := range mu {
					mean += w[m] / total * gross(Id+s.Lit.Beam[i]/cosθ*mu[m])
				}
				f := P0 * math.Exp(-G(sinθ, cosθ)*l/cosθ) * (mean - P)
				c := A * on * s.Seconds * 12.011e-6 * s.Days[d].Weight / depths
				income += c * (P + f)
				fleck += c * f
			}
		}
	}
	return income, fleck
}

func cases() []*Plant {
	return []*Plant{plant(1, 0.5, twoSets), plant(2.5, 0.5, twoSets), plant(2.5, 3, twoSets), plant(0.6, 1.5, twoSets), plant(1, 3, twoSets)}
}

// The ledger's income and its sunfleck part against plain sums: 0.5 % asked for, most of the rest is the plain sums' own grid.
func TestIncomeAgainstPlainSums(t *testing.T) {
	s := synthetic(60)
	_, on := masks(s)
	for _, sky := range []struct {
		sky      radiation.Sky
		radiance func(float64) float64
	}{{radiation.Uniform{}, func(float64) float64 { return 1 / math.Pi }}, {radiation.Overcast{}, func(c float64) float64 { return 3 / (7 * math.Pi) * (1 + 2*c) }}} {
		above := light.NewAbove(s, sky.sky, light.Station)
		for _, share := range []float64{0.05, 0.5} {
			g := shade(above, share)
			for _, p := range cases() {
				k := NewKeeper(on, on)
				k.Take(g)
				var a Account
				k.Keep(Prepare(p, above), &a)
				income, fleck := bruteIncome(p, g, p.Traits.At(k.LeafOnPercent()), share, 1, sky.radiance, byTemperature(p, p.Traits.At(k.LeafOnPercent()), s))
				e, f := a.Total[Income]/income-1, (a.Total[Sunfleck]-fleck)/income
				t.Logf("%T share %g chi %g L %g: income %+.4f %%, sunfleck %+.4f %% of income", sky.sky, share, p.Chi, p.CrownLAI, 100*e, 100*f)
				if math.Abs(e) > 0.005 || math.Abs(a.Total[Sunfleck]/fleck-1) > 0.005 {
					t.Errorf("income %v for %v, sunfleck %v for %v", a.Total[Income], income, a.Total[Sunfleck], fleck)
				}
			}
		}
	}
}

// Break-even is a root of the exact year: net changes sign within 0.02 points of it.
func TestBreakEvenIsRoot(t *testing.T) {
	s := synthetic(3)
	season, on := masks(s)
	above := light.NewAbove(s, radiation.Overcast{}, light.Station)
	for _, share := range []float64{0.02, 0.1, 0.6} {
		k := NewKeeper(season, on)
		k.Take(shade(above, share))
		for _, p := range cases() {
			r := Prepare(p, above)
			b := k.BreakEven(r)
			if !b.Found || b.LeafOn <= 0 {
				t.Errorf("share %g chi %g: no break-even: %+v", share, p.Chi, b)
				continue
			}
			net := func(percent float64) float64 {
				low, high := 0.0, 1e4
				for range 80 {
					if m := (low + high) / 2; k.capLeafOn.Percent(m) < percent {
						low = m
					} else {
						high = m
					}
				}
				set := r.traits(percent)
				c := r.yearCosts(set)
				return r.area(set)*r.exact(k.regime, &k.scratch, set, low) - c.Costs()
			}
			if below, over := net(b.LeafOn-0.02), net(b.LeafOn+0.02); !(below < 0 && over > 0) {
				t.Errorf("share %g chi %g L %g: net %g just below %g %%, %g just above", share, p.Chi, p.CrownLAI, below, b.LeafOn, over)
			}
		}
	}
}

// Break-even against plain sums of income: net changes sign within 0.05 points, of 0.2 asked for.
func TestBreakEvenAgainstPlainSums(t *testing.T) {
	s := synthetic(60)
	season, on := masks(s)
	above := light.NewAbove(s, radiation.Uniform{}, light.Station)
	const share = 0.2
	g := shade(above, share)
	k := NewKeeper(season, on)
	k.Take(g)
	for _, p := range cases()[1:3] {
		r := Prepare(p, above)
		b := k.BreakEven(r)
		net := func(percent float64) float64 {
			low, high := 0.0, 1e3
			for range 60 {
				if m := (low + high) / 2; k.capLeafOn.Percent(m) < percent {
					low = m
				} else {
					high = m
				}
			}
			set := p.Traits.At(percent)
			income, _ := bruteIncome(p, g, set, share, low, func(float64) float64 { return 1 / math.Pi }, byTemperature(p, set, s))
			costs := r.yearCosts(set)
			return income - costs.Costs()
		}
		if below, over := net(b.LeafOn-0.05), net(b.LeafOn+0.05); !(b.Found && below < 0 && over > 0) {
			t.Errorf("chi %g L %g: net %g just below %g %%, %g just above", p.Chi, p.CrownLAI, below, b.LeafOn, over)
		}
	}
}

// Lines add to the net, days add to the year, darkness earns nothing.
func TestLaws(t *testing.T) {
	s := synthetic(5)
	season, on := masks(s)
	above := light.NewAbove(s, radiation.Uniform{}, light.Station)
	p := plant(2.5, 0.5, twoSets)
	r := Prepare(p, above)
	k := NewKeeper(season, on)
	var a Account
	k.Take(light.Uniformly(above, 0))
	k.Keep(r, &a)
	if a.Total[Income] != 0 || a.Total[Sunfleck] != 0 {
		t.Errorf("income in darkness: %v", a.Total)
	}
	last := math.Inf(-1)
	fixed := plant(2.5, 0.5, leaf.Constant{Set: shadeSet})
	rf := Prepare(fixed, above)
	for _, share := range []float64{0.01, 0.05, 0.2, 0.5, 1} {
		k.Take(shade(above, share))
		k.Keep(rf, &a)
		if a.Total.Net() <= last {
			t.Errorf("more light, less net at %g", share)
		}
		last = a.Total.Net()
	}
	var sum Lines
	for d := range a.Days {
		sum.Add(a.Days[d], s.Days[d].Weight)
	}
	if e := math.Abs(sum.Net() - a.Total.Net()); e > 1e-12 {
		t.Errorf("days miss the year by %g", e)
	}
	if e := a.Total[LeafReplacement]/(p.LeafMass*0.6) - 1; math.Abs(e) > 1e-12 {
		t.Errorf("a deciduous leaf of half a year is replaced once a year, got %v", a.Total[LeafReplacement])
	}
	first := *fixed
	first.Ledger, first.LeafArea = FirstSeason, first.LeafMass/shadeSet.LMA
	var b Account
	k.Keep(Prepare(&first, above), &b)
	if math.Abs(b.Total.Net()-a.Total.Net()) > 1e-12 {
		t.Errorf("equal sets, yet first season %v and acclimated %v", b.Total, a.Total)
	}
}

func BenchmarkKeepAndBreakEven(b *testing.B) {
	s := synthetic(1)
	season, on := masks(s)
	above := light.NewAbove(s, radiation.Overcast{}, light.Station)
	for _, p := range cases()[1:3] {
		r := Prepare(p, above)
		k := NewKeeper(season, on)
		g := shade(above, 0.1)
		var a Account
		for name, f := range map[string]func(){
			"keep": func() { k.Take(g); k.Keep(r, &a) }, "break-even": func() { k.Take(g); k.BreakEven(r) }} {
			b.Run(fmt.Sprintf("%s/L=%g/steps=%d", name, p.CrownLAI, len(r.steps)), func(b *testing.B) {
				b.ReportAllocs()
				for b.Loop() {
					f()
				}
			})
		}
	}
}
