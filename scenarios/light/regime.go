// Package light brings the sky and the canopy together: the light at every station through the
// year. It knows no species.
package light

import (
	"math"
	"sync"

	"shadeledger/canopy"
	"shadeledger/radiation"
	"shadeledger/radiation/weather"
)

// Above is the light above the canopy of a plan, shared by all stations.
type Above struct {
	Series *weather.Series
	// Zenith holds the ring bounds, rad, of every ring shape.
	Zenith []float64
	// OpenRings[k*rings+r] = integral of R dOmega over ring r of the free sky (no canopy, no hill), for unit
	// level-plane diffuse flux, of sky pattern k; Pattern[i] is the pattern of lit sub-step i.
	OpenRings []float64
	Pattern   []int32

	angles *angles
	dome   *canopy.Dome
	open   *canopy.CellLight
	// radiance of every cell by pattern, normalised to unit level-plane flux
	radiance []float32
	patterns int
}

// angles keeps the incidence rules of leaf angles that were asked for under one sky.
type angles struct {
	sync.Mutex
	of map[float64]*canopy.Incidence
}

// Incidence is the rules of a leaf angle, worked out once under this sky.
func (a *Above) Incidence(chi float64) *canopy.Incidence {
	a.angles.Lock()
	defer a.angles.Unlock()
	if a.angles.of[chi] == nil {
		a.angles.of[chi] = canopy.NewIncidence(chi)
	}
	return a.angles.of[chi]
}

// Rings is the number of rings of a shape.
func (a *Above) Rings() int { return len(a.Zenith) - 1 }

// Resolution says how finely the sky is divided.
type Resolution int

// The resolutions: Station for single spots, Map for thousands, Draw for the same spots over and over.
const (
	Station Resolution = iota
	Map
	Draw
)

// patternSeconds is how long an all-weather sky pattern is kept: the sun moves half a cell in this time. The light's amount
// follows every sub-step.
const patternSeconds = 1800

// NewAbove prepares the sky over a plan.
func NewAbove(series *weather.Series, sky radiation.Sky, resolution Resolution) *Above {
	a := &Above{Series: series, Pattern: make([]int32, len(series.Lit.Step)), angles: &angles{of: map[float64]*canopy.Incidence{}}}
	switch sky.(type) {
	case radiation.Uniform, radiation.Overcast:
		a.dome = canopy.FixedSkyDome()
	default:
		a.dome = canopy.AllWeatherDome()
		switch resolution {
		case Map:
			a.dome = canopy.MapDome()
		case Draw:
			a.dome = canopy.DrawDome()
		}
	}
	a.Zenith = a.dome.Zenith
	a.open = a.dome.Open()
	switch sky.(type) {
	case radiation.Uniform:
		a.fixed(func(float64, float64) float64 { return radiation.UniformRadiance })
	case radiation.Overcast:
		a.fixed(func(c0, c1 float64) float64 { // cosine-weighted ring mean of 3/(7 pi)(1 + 2 cos)
			return radiation.OvercastRadiance(2.0 / 3 * (c0*c0*c0 - c1*c1*c1) / (c0*c0 - c1*c1))
		})
	default:
		a.allWeather()
	}
	return a
}

// fixed is a sky whose radiance depends on the ring only and never changes.
func (a *Above) fixed(radiance func(c0, c1 float64) float64) {
	a.patterns = 1
	a.radiance = make([]float32, a.dome.Cells())
	a.OpenRings = make([]float64, a.Rings())
	for r := range a.Rings() {
		R := radiance(math.Cos(a.Zenith[r]), math.Cos(a.Zenith[r+1]))
		for s := range a.dome.Sectors {
			c := r*a.dome.Sectors + s
			a.radiance[c] = float32(R)
			a.OpenRings[r] += R * a.open.Solid[c]
		}
	}
}

// allWeather keeps a pattern for every half hour of daylight.
func (a *Above) allWeather() {
	lit := &a.Series.Lit
	hold := int32(max(1, math.Round(patternSeconds/a.Series.Seconds)))
	a.patterns = 0
	last := int32(-1)
	middle := make([]int, 0, len(lit.Step))
	for i, step := range lit.Step {
		if block := step / hold; block != last {
			last = block
			a.patterns++
			middle = append(middle, i)
		}
		a.Pattern[i] = int32(a.patterns - 1)
	}
	// the pattern is that of the block's middle lit sub-step
	for k := range middle {
		end := len(lit.Step)
		if k+1 < len(middle) {
			end = middle[k+1]
		}
		middle[k] = (middle[k] + end - 1) / 2
	}
	cells, rings := a.dome.Cells(), a.Rings()
	a.radiance = make([]float32, a.patterns*cells)
	a.OpenRings = make([]float64, a.patterns*rings)
	var group sync.WaitGroup
	for w := range painters {
		group.Go(func() {
			p := newPainter(a.dome, a.open)
			for k := w; k < len(middle); k += painters {
				p.paint(lit, middle[k], a.radiance[k*cells:(k+1)*cells], a.OpenRings[k*rings:(k+1)*rings])
			}
		})
	}
	group.Wait()
}

// painters is how many goroutines paint; each pattern is painted by itself, so their number changes no bit.
const painters = 4

// painter fills cells with the radiance of an all-weather sky.
type painter struct {
	dome       *canopy.Dome
	open       *canopy.CellLight
	sinZ, cosZ []float64 // of ring middles
	azimuth    []float64 // of sector middles
	toSun      []float64
	table      radiation.SkyTable
	cell       []float64
}

func newPainter(d *canopy.Dome, open *canopy.CellLight) *painter {
	p := &painter{dome: d, open: open, toSun: make([]float64, d.Sectors), cell: make([]float64, d.Cells())}
	for r := range d.Rings() {
		// the zenith angle that halves the ring's solid angle
		c := (math.Cos(d.Zenith[r]) + math.Cos(d.Zenith[r+1])) / 2
		p.cosZ, p.sinZ = append(p.cosZ, c), append(p.sinZ, math.Sqrt(1-c*c))
	}
	for s := range d.Sectors {
		p.azimuth = append(p.azimuth, (float64(s)+0.5)*2*math.Pi/float64(d.Sectors))
	}
	return p
}

// paint writes the radiance of lit sub-step i's sky and its ring sums, for unit level-plane flux.
func (p *painter) paint(lit *weather.Lit, i int, radiance []float32, rings []float64) {
	sinβ, cosβ := math.Sincos(lit.Elevation[i])
	sky := radiation.PerezSky(lit.Clearness[i], lit.Brightness[i], math.Pi/2-lit.Elevation[i])
	p.table.Tabulate(sky)
	for s, φ := range p.azimuth {
		p.toSun[s] = cosβ * math.Cos(φ-lit.Azimuth[i])
	}
	sectors := p.dome.Sectors
	sum := 0.0
	for r := range p.cosZ {
		gradation := sky.Gradation(p.cosZ[r])
		for s, to := range p.toSun {
			c := r*sectors + s
			R := math.Max(1e-6, gradation*p.table.At(p.cosZ[r]*sinβ+p.sinZ[r]*to))
			p.cell[c] = R
			sum += R * p.open.Plane[c]
		}
	}
	for r := range p.cosZ {
		ring := 0.0
		for c := r * sectors; c < (r+1)*sectors; c++ {
			R := p.cell[c] / sum
			radiance[c] = float32(R)
			ring += R * p.open.Solid[c]
		}
		rings[r] = ring
	}
}

// Regime is the light at one spot and height through the series. One value per lit sub-step.
type Regime struct {
	Above *Above
	// BeamChance is P0, the chance that the sun is seen; 0 behind a hill or a terrain horizon.
	BeamChance []float64
	// Scattered is I_b (T - P0), umol m-2 s-1 on the level plane: beam scattered down by leaves.
	Scattered []float64
	// SkyPlane is D, umol m-2 s-1 on the level plane: sky light that reaches the spot.
	SkyPlane []float64
	// Shape[i] is the index of sub-step i's ring shape.
	Shape []int32
	// ShapeRings[s*rings+r] = integral over ring r of R T dOmega for unit D_above.
	ShapeRings []float64
	// ShapePattern[s] is the free-sky pattern that shape s comes from.
	ShapePattern []int32
	// SkyView is the cosine-weighted visible sky, 0..1, leaves at full, wood in, hill and horizon dark.
	SkyView float64
	// Days holds the light sums of each series day.
	Days []Sums
}

// Sums are light sums on the level plane, mol m-2.
type Sums struct {
	Open      float64 // under a free horizon
	Beam      float64 // unscattered beam at the spot
	Scattered float64
	Sky       float64
}

// Spot is all PAR at the spot.
func (s Sums) Spot() float64 { return s.Beam + s.Scattered + s.Sky }

// Percent of full light.
func (s Sums) Percent() float64 {
	if s.Open == 0 {
		return 0
	}
	return 100 * s.Spot() / s.Open
}

// SunfleckPercent is the share of PAR at the spot that comes as unscattered beam.
func (s Sums) SunfleckPercent() float64 {
	if s.Spot() == 0 {
		return 0
	}
	return 100 * s.Beam / s.Spot()
}

// add adds weighted sums.
func (s *Sums) add(o Sums, weight float64) {
	s.Open += weight * o.Open
	s.Beam += weight * o.Beam
	s.Scattered += weight * o.Scattered
	s.Sky += weight * o.Sky
}

// Over sums the days of a mask and counts them (weighted).
func (r *Regime) Over(mask []bool) (s Sums, days float64) {
	for d, in := range mask {
		if in {
			w := r.Above.Series.Days[d].Weight
			s.add(r.Days[d], w)
			days += w
		}
	}
	return s, days
}

// sumDays fills Days.
func (r *Regime) sumDays() {
	series := r.Above.Series
	k := series.Seconds * 1e-6
	for d := range series.Days {
		var s Sums
		for i := series.Days[d].LitFrom; i < series.Days[d].LitTo; i++ {
			s.Open += series.Lit.Beam[i] + series.Lit.Diffuse[i]
			s.Beam += r.BeamChance[i] * series.Lit.Beam[i]
			s.Scattered += r.Scattered[i]
			s.Sky += r.SkyPlane[i]
		}
		r.Days[d] = Sums{s.Open * k, s.Beam * k, s.Scattered * k, s.Sky * k}
	}
}

// newRegime makes room for a regime of a series.
func newRegime(a *Above) *Regime {
	n := len(a.Series.Lit.Step)
	v := make([]float64, 3*n)
	return &Regime{
		Above: a, BeamChance: v[:n:n], Scattered: v[n : 2*n : 2*n], SkyPlane: v[2*n:],
		Shape: make([]int32, n), Days: make([]Sums, len(a.Series.Days)),
	}
}

// Uniformly is the regime of neutral shade: beam chance = sky share = x at every moment, nothing scattered. x = 1 is
// the free sky.
func Uniformly(a *Above, x float64) *Regime {
	r := newRegime(a)
	r.ShapeRings = make([]float64, len(a.OpenRings))
	r.ShapePattern = make([]int32, a.patterns)
	for k := range r.ShapePattern {
		r.ShapePattern[k] = int32(k)
	}
	for i, v := range a.OpenRings {
		r.ShapeRings[i] = x * v
	}
	copy(r.Shape, a.Pattern)
	for i, D := range a.Series.Lit.Diffuse {
		r.BeamChance[i] = x
		r.SkyPlane[i] = x * D
	}
	r.SkyView = x
	r.sumDays()
	return r
}
