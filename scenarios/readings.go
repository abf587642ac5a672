package scenarios

import (
	"fmt"
	"math"
	"slices"
	"time"

	"shadeledger/canopy"
	"shadeledger/canopy/correct"
	"shadeledger/radiation"
)

// LightReading is a pair of readings with when and where it was taken.
type LightReading struct {
	correct.Reading
	Time   time.Time // local standard time
	Height float64   // m above the ground
}

// Readings are what was read in the stand to correct its leaf area; empty where nothing was.
type Readings struct {
	File       string // as the plan names it
	Pairs      []LightReading
	Instrument string    // of Openness
	Openness   []float64 // 0..1 at points
}

// Correction is the effective leaf area found from readings. Its zero value is none.
type Correction struct {
	correct.Result
	Source string // what it comes from: light readings or closure; "" for none
	Other  string // what the readings of the other kind say, where there are both
}

// Corrected gives the plan with its leaf area as readings say: every layer's leaf area by one factor, wood as it is. A plan without
// readings comes back as it is. Paired light goes before closure, which sees the sky and not the light.
func Corrected(p *Plan) (*Plan, Correction, error) {
	var c Correction
	r := p.Stand.Readings
	if len(r.Pairs) == 0 && len(r.Openness) == 0 {
		return p, c, nil
	}
	m, err := newReadingModel(p)
	if err != nil {
		return nil, c, err
	}
	var closure correct.Result
	if len(r.Openness) > 0 {
		if closure, err = correct.Openness(r.Openness, m.openness); err != nil {
			return nil, c, fmt.Errorf("stand.closure_readings: %w", err)
		}
		c.Source, c.Result = "closure", closure
	}
	if len(r.Pairs) > 0 {
		pairs := make([]correct.Reading, len(r.Pairs))
		for i, x := range r.Pairs {
			pairs[i] = x.Reading
		}
		if c.Source != "" {
			c.Other = fmt.Sprintf("closure readings alone would make it %.2f (%.2f to %.2f) times the leaf area", closure.Factor, closure.Low, closure.High)
		}
		c.Source = "light readings"
		if c.Result, err = correct.Pairs(pairs, m.light); err != nil {
			return nil, c, fmt.Errorf("stand.readings: %w", err)
		}
	}
	return p.scaled(c.Factor), c, nil
}

// Notes say what a correction did.
func (c Correction) Notes() (out []Warning) {
	if c.Source == "" {
		return nil
	}
	key := map[string]string{"light readings": "stand.readings", "closure": "stand.closure_readings"}[c.Source]
	say := func(text string) { out = append(out, Warning{Key: key, Text: text}) }
	say(fmt.Sprintf("leaf area times %.2f (90 %% range %.2f to %.2f), so that the uncut stand passes %.1f %% as measured and not %.1f %%",
		c.Factor, c.Low, c.High, 100*c.Measured, 100*c.Before))
	for _, w := range c.Warnings {
		say(w)
	}
	if c.Other != "" {
		say(c.Other)
	}
	return out
}

// scaled is a copy of the plan with every leaf area times a factor.
func (p *Plan) scaled(factor float64) *Plan {
	layers := func(list []Layer) []Layer {
		out := slices.Clone(list)
		for i := range out {
			out[i].LAI *= factor
		}
		return out
	}
	under := func(list []Understory) []Understory {
		out := slices.Clone(list)
		for i := range out {
			out[i].LAI *= factor
		}
		return out
	}
	q := *p
	q.Stand.Layers, q.Stand.Understory = layers(p.Stand.Layers), under(p.Stand.Understory)
	q.Stand.Foliage.LeafFactor *= factor
	q.Stand.Readings = Readings{}
	q.Treatments = slices.Clone(p.Treatments)
	for i := range q.Treatments {
		t := &q.Treatments[i]
		t.Matrix, t.Understory = layers(t.Matrix), under(t.Understory)
		if o, ok := t.Opening.(Cleared); ok {
			o.Inside = layers(o.Inside)
			t.Opening = o
		}
	}
	return &q
}

// readingModel predicts what readings in the uncut stand should show.
type readingModel struct {
	plan          *Plan
	calendars     calendars
	stand         *canopy.Stand
	black         *canopy.Stand // the same with leaves that scatter nothing
	dome          *canopy.Dome
	open, through *canopy.CellLight
	known         map[skyKey]float64
	scans         map[scanKey]*canopy.SkyScan
}

// scanKey is what the sky seen through the stand depends on before its leaves do.
type scanKey struct {
	stand  *canopy.Stand
	height float64
}

// scan is the sky seen at a height in the stand, kept for every factor.
func (m *readingModel) scan(s *canopy.Stand, height float64) *canopy.SkyScan {
	key := scanKey{s, height}
	if m.scans[key] == nil {
		m.scans[key] = s.NewSkyScan(m.dome)
		m.scans[key].Scan(canopy.Point{Height: height})
	}
	return m.scans[key]
}

// skyKey is what the light of the sky at a reading depends on.
type skyKey struct {
	height, factor float64
	month, day     int
	overcast       bool
}

func newReadingModel(p *Plan) (*readingModel, error) {
	m := &readingModel{plan: p, dome: canopy.FixedSkyDome(), known: map[skyKey]float64{}, scans: map[scanKey]*canopy.SkyScan{}}
	m.open, m.through = m.dome.Open(), canopy.NewCellLight(m.dome)
	matrix, err := m.calendars.profile(p.Stand.Layers, p.Stand.Understory)
	if err != nil {
		return nil, fmt.Errorf("the uncut stand: %w", err)
	}
	q := *p
	q.Stand.Layers, q.Stand.Understory = slices.Clone(p.Stand.Layers), slices.Clone(p.Stand.Understory)
	for i := range q.Stand.Layers {
		q.Stand.Layers[i].Absorptance = 1
	}
	for i := range q.Stand.Understory {
		q.Stand.Understory[i].Absorptance = 1
	}
	opaque, err := m.calendars.profile(q.Stand.Layers, q.Stand.Understory)
	if err != nil {
		return nil, fmt.Errorf("the uncut stand: %w", err)
	}
	if m.stand, err = canopy.NewStand(matrix, nil, p.Ground, p.Horizon); err != nil {
		return nil, err
	}
	m.black, err = canopy.NewStand(opaque, nil, p.Ground, p.Horizon)
	return m, err
}

// shares of leaf present on a date, times a factor on the leaf area.
func (m *readingModel) shares(t time.Time, factor float64) []float64 {
	out := make([]float64, max(1, len(m.calendars.list)))
	out[0] = factor
	for i, c := range m.calendars.list {
		out[i] = factor * c.Share(t.Month(), t.Day())
	}
	return out
}

// clearKt is the clearness of a clear hour near midday (common practice); it gives the share of beam in readings under a clear sky.
// Half of that beam stands for a mixed sky.
const clearKt = 0.75

// light is the transmittance at a reading for a factor on the leaf area, over light on the level in the open.
func (m *readingModel) light(reading int, factor float64) float64 {
	r := m.plan.Stand.Readings.Pairs[reading]
	sky := m.sky(r, factor)
	if r.Sky == correct.Overcast {
		return sky
	}
	sun := radiation.Position(r.Time.Add(-time.Duration(m.plan.Site.UTCOffset*float64(time.Hour))), m.plan.Site)
	if sun.Elevation <= 0 {
		return sky
	}
	beam := 1 - radiation.DiffusePAR(radiation.DiffuseShare(clearKt))
	if r.Sky == correct.Mixed {
		beam /= 2
	}
	rays := m.stand.Rays([]canopy.Direction{{Elevation: sun.Elevation, Azimuth: sun.Azimuth}})
	var out [1]canopy.Beam
	m.stand.NewTracer().Trace(canopy.Point{Height: r.Height}, rays, []int32{0}, [][]float64{m.shares(r.Time, factor)}, out[:])
	return beam*out[0].Transmittance + (1-beam)*sky
}

// sky is the transmittance of the sky's light at a reading: an overcast sky by the standard overcast radiance, else an even one.
func (m *readingModel) sky(r LightReading, factor float64) float64 {
	key := skyKey{r.Height, factor, int(r.Time.Month()), r.Time.Day(), r.Sky == correct.Overcast}
	if v, ok := m.known[key]; ok {
		return v
	}
	m.scan(m.stand, r.Height).Transmit(m.shares(r.Time, factor), m.through)
	below, above := 0.0, 0.0
	for i := range m.dome.Rings() {
		R := 1.0
		if key.overcast {
			R = radiation.OvercastRadiance((math.Cos(m.dome.Zenith[i]) + math.Cos(m.dome.Zenith[i+1])) / 2)
		}
		below += R * m.through.Plane[i]
		above += R * m.open.Plane[i]
	}
	m.known[key] = below / above
	return below / above
}

// openCone is the zenith angle up to which closure is read: a spherical densiometer shows about 60 degrees (common practice).
const openCone = math.Pi / 3

// openness is the share of the sky within the cone that is open, leaves at full, at breast height.
func (m *readingModel) openness(factor float64) float64 {
	shares := make([]float64, max(1, len(m.calendars.list)))
	for i := range shares {
		shares[i] = factor
	}
	m.scan(m.black, breast).Transmit(shares, m.through)
	open, all := 0.0, 0.0
	for i := range m.dome.Rings() {
		if m.dome.Zenith[i+1] <= openCone*(1+1e-9) {
			open += m.through.Solid[i]
			all += m.open.Solid[i]
		}
	}
	return open / all
}

const breast = 1.3 // m
