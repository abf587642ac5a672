package scenarios

import (
	"fmt"
	"math"

	"shadeledger/canopy"
	"shadeledger/leaf"
	"shadeledger/radiation/weather"
	"shadeledger/scenarios/light"
)

// UnderCanopy is the one station of a treatment without an opening.
const UnderCanopy = "under canopy"

// scene is a treatment made ready: its canopy, its stations and the days its leaves are on.
type scene struct {
	treatment *Treatment
	stations  []canopy.Station
	light     *light.Scene
	leafOn    []bool
	spring    []bool // the half year before the overstory's full leaf; nil where it is not mostly deciduous
	warnings  []Warning
}

// newScene puts a treatment's stand together for a series.
func newScene(p *Plan, t *Treatment, above *light.Above) (*scene, error) {
	var c calendars
	matrix, err := c.profile(t.Matrix, t.Understory)
	if err != nil {
		return nil, fmt.Errorf("treatment %q: %w", t.Name, err)
	}
	var openings []canopy.Opening
	if o, ok := t.Opening.(Cleared); ok {
		inside, err := c.profile(o.Inside, t.Understory)
		if err != nil {
			return nil, fmt.Errorf("treatment %q, inside the opening: %w", t.Name, err)
		}
		openings = []canopy.Opening{{Outline: o.Crowns, Inside: inside}}
	}
	stand, err := canopy.NewStand(matrix, openings, p.Ground, p.Horizon)
	if err != nil {
		return nil, fmt.Errorf("treatment %q: %w", t.Name, err)
	}
	s := &scene{treatment: t, stations: p.StationsOf(t)}
	s.leafOn = c.leafOn(above.Series)
	if _, full, sheds := Leafing(t.Matrix); sheds {
		s.spring = Mask(above.Series, before(full))
	}
	if s.leafOn == nil {
		s.leafOn = Mask(above.Series, p.Season)
	} else if !anyIn(s.leafOn) {
		s.leafOn = Mask(above.Series, p.Season)
		s.warnings = append(s.warnings, Warning{Key: "treatments." + t.Name,
			Text: "its layers are never all at full leaf on one day; the leaf-on period is taken as the season"})
	}
	s.light = light.NewScene(above, stand, c.shares(above.Series))
	return s, nil
}

// StationsOf gives the spots of a treatment: the plan's own or the default ones of its crown outline.
func (p *Plan) StationsOf(t *Treatment) []canopy.Station {
	o, cleared := t.Opening.(Cleared)
	switch {
	case !cleared:
		return []canopy.Station{{Name: UnderCanopy}}
	case len(p.Stations) == 0:
		return canopy.DefaultStations(o.Crowns, p.Stand.Height)
	}
	out := make([]canopy.Station, len(p.Stations))
	for i, s := range p.Stations {
		sin, cos := math.Sincos(s.Bearing)
		out[i] = canopy.Station{Name: s.Name, X: s.Distance * sin, Y: s.Distance * cos}
	}
	return out
}

// calendars are the distinct leaf calendars of a treatment; a layer's phenology is its calendar's index.
type calendars struct{ list []leaf.Calendar }

func (c *calendars) index(x leaf.Calendar) int {
	for i, y := range c.list {
		if x == y {
			return i
		}
	}
	c.list = append(c.list, x)
	return len(c.list) - 1
}

// profile stacks layers with the understory that stays.
func (c *calendars) profile(layers []Layer, under []Understory) (*canopy.Profile, error) {
	out := make([]canopy.Layer, 0, len(layers)+len(under))
	add := func(l Layer) {
		l.Phenology = c.index(l.Calendar)
		out = append(out, l.Layer)
	}
	for _, l := range layers {
		add(l)
	}
	for _, u := range under {
		add(u.Layer)
	}
	return canopy.NewProfile(out)
}

// shares gives the share of leaf present by calendar on a series day.
func (c *calendars) shares(s *weather.Series) func(day int) []float64 {
	out := make([]float64, max(1, len(c.list)))
	return func(day int) []float64 {
		out[0] = 1
		for i, x := range c.list {
			out[i] = x.Share(s.Days[day].Month, s.Days[day].Day)
		}
		return out
	}
}

// leafOn marks the days on which all deciduous layers are at full leaf; nil where none is deciduous.
func (c *calendars) leafOn(s *weather.Series) []bool {
	var deciduous []leaf.Calendar
	for _, x := range c.list {
		if _, ok := x.(leaf.Deciduous); ok {
			deciduous = append(deciduous, x)
		}
	}
	if deciduous == nil {
		return nil
	}
	out := make([]bool, len(s.Days))
	for d := range out {
		out[d] = true
		for _, x := range deciduous {
			out[d] = out[d] && x.FullOn(s.Days[d].Month, s.Days[d].Day)
		}
	}
	return out
}

// Mask marks the days of a series that lie in a period, both ends in.
func Mask(s *weather.Series, p Period) []bool {
	out := make([]bool, len(s.Days))
	for d := range out {
		out[d] = p.Holds(Date{s.Days[d].Month, s.Days[d].Day})
	}
	return out
}

// Holds tells whether a date lies in the period; From after To crosses New Year.
func (p Period) Holds(d Date) bool {
	from, to, x := p.From.order(), p.To.order(), d.order()
	if from <= to {
		return from <= x && x <= to
	}
	return x >= from || x <= to
}

func (d Date) order() int { return int(d.Month)*32 + d.Day }

func anyIn(mask []bool) bool {
	for _, in := range mask {
		if in {
			return true
		}
	}
	return false
}
