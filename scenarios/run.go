package scenarios

import (
	"errors"
	"fmt"
	"slices"
	"strings"

	"shadeledger/canopy"
	"shadeledger/leaf"
	"shadeledger/radiation"
	"shadeledger/radiation/weather"
	"shadeledger/scenarios/ledger"
	"shadeledger/scenarios/light"
)

// Depth is how far a run goes.
type Depth int

// The depths: light alone; the ledgers too; the break-even of every ledger too.
const (
	Light Depth = iota
	Ledgers
	BreakEvens
)

// Options of a run.
type Options struct {
	Workers int // goroutines over stations; below 1 is 1. The results do not depend on it
	Depth   Depth
	By      By   // how light rows (Depth Light) or ledger rows divide the time
	Gain    bool // the stand's own carbon gain too
}

// Run works a plan out: stand -> light -> ledger, for every treatment, station and seedling.
func Run(p *Plan, opts Options) (*Results, error) {
	series := p.Weather.Series(p.Site, p.Sampling.Step, p.Par)
	return RunSeries(p, series, opts)
}

// RunSeries is Run on weather already brought to a series.
func RunSeries(p *Plan, series *weather.Series, opts Options) (*Results, error) {
	if len(p.Treatments) == 0 {
		return nil, errors.New("the plan has no treatment; at least one is needed")
	}
	p, correction, err := Corrected(p)
	if err != nil {
		return nil, err
	}
	r := &runner{
		plan: p, opts: opts, above: light.NewAbove(series, p.Sampling.Sky, light.Station),
		season: Mask(series, p.Season), years: calendarYears(series),
	}
	if !anyIn(r.season) {
		return nil, errors.New("the season holds no day of the weather; it must hold at least one")
	}
	r.heights, r.heightOf = heights(p, opts.Depth)
	if opts.Depth > Light {
		r.prepared = prepare(p, r.above)
	}
	r.spans = r.divide()
	res := &Results{Plan: p, Series: series, Assumed: p.Assumed, Correction: correction}
	res.Warnings = append(res.Warnings, p.Warnings...)
	res.Warnings = append(res.Warnings, correction.Notes()...)
	for _, w := range series.Warnings {
		res.Warnings = append(res.Warnings, Warning{Key: "weather", Text: w})
	}
	if opts.Depth > Light {
		res.Warnings = append(res.Warnings, frozen(p, series)...)
	}
	if opts.Depth == BreakEvens {
		res.Neutral = r.neutral()
	}
	for i := range p.Treatments {
		if err := r.treatment(&p.Treatments[i], res); err != nil {
			return nil, err
		}
	}
	return res, nil
}

// runner is what all treatments of a run share.
type runner struct {
	plan     *Plan
	opts     Options
	above    *light.Above
	season   []bool
	years    [][]bool
	spans    []span // of the rows; nil for light over the season or the leaf-on period
	heights  []float64
	heightOf []int // by seedling: index into heights
	prepared []*ledger.Prepared
}

// heights are the distinct heights in the plan's order: of seedlings, then the further ones for light.
func heights(p *Plan, depth Depth) (list []float64, of []int) {
	add := func(h float64) int {
		for i, x := range list {
			if x == h {
				return i
			}
		}
		list = append(list, h)
		return len(list) - 1
	}
	for _, s := range p.Seedlings {
		of = append(of, add(s.Height))
	}
	if depth == Light {
		for _, h := range p.Sampling.Heights {
			add(h)
		}
	}
	return list, of
}

// prepare works every seedling out for the series: the days it lies under snow, the winter of evergreens, and the pressure of its air, which check skies
// leave at that of sea level.
func prepare(p *Plan, above *light.Above) []*ledger.Prepared {
	out := make([]*ledger.Prepared, len(p.Seedlings))
	for i, s := range p.Seedlings {
		out[i] = prepareOne(p, s.Plant, above)
	}
	return out
}

// prepareOne works a plant out for the series: under snow that is deeper than it is tall, asleep in the cold where it is evergreen.
func prepareOne(p *Plan, plant ledger.Plant, above *light.Above) *ledger.Prepared {
	if plant.SnowDays == nil && p.Snow.Depth > plant.Height {
		covered := Mask(above.Series, p.Snow.Period)
		plant.SnowDays = func(day int) bool { return covered[day] }
	}
	if _, evergreen := plant.Leaves.(leaf.Evergreen); evergreen {
		plant.Dormancy = p.Sampling.Dormancy
	}
	if _, natural := p.Sampling.Sky.(radiation.AllWeather); natural && plant.Chemistry != nil {
		thin := *plant.Chemistry
		thin.Pressure = leaf.PressureAt(p.Site.Elevation)
		plant.Chemistry = &thin
	}
	return ledger.Prepare(&plant, above)
}

// neutral finds every seedling's break-even in neutral shade.
func (r *runner) neutral() []NeutralShade {
	out := make([]NeutralShade, len(r.prepared))
	keeper := ledger.NewKeeper(r.season, r.season)
	for i, plant := range r.prepared {
		out[i] = NeutralShade{r.plan.Seedlings[i].Name, keeper.NeutralShade(plant)}
	}
	return out
}

// frozen warns, where dormancy is off, of evergreens whose needles stand in the light on days of frost: they are counted as working,
// which flatters them.
func frozen(p *Plan, s *weather.Series) []Warning {
	if p.Sampling.Dormancy.Lag > 0 {
		return nil
	}
	covered := Mask(s, p.Snow.Period)
	var names []string
	most := 0.0
	for _, plant := range p.Seedlings {
		if _, evergreen := plant.Leaves.(leaf.Evergreen); !evergreen {
			continue
		}
		days := 0.0
		for d := range s.Days {
			if slices.Min(s.Temperature[d*s.PerDay:(d+1)*s.PerDay]) < 0 && !(covered[d] && p.Snow.Depth > plant.Height) {
				days += s.Days[d].Weight / float64(s.Years)
			}
		}
		if days >= 1 {
			names = append(names, plant.Name)
			most = max(most, days)
		}
	}
	if len(names) == 0 {
		return nil
	}
	return []Warning{{Key: "seedlings", Text: fmt.Sprintf("evergreen and above the snow on %.0f days of frost a year: %s; sampling.dormancy is none, so read their class as too favourable, most of all under leafless trees",
		most, strings.Join(names, ", "))}}
}

// divide gives the spans that rows are made for.
func (r *runner) divide() []span {
	if r.opts.By == BySeason || r.opts.By == ByLeafOn {
		if r.opts.Depth == Light {
			return nil
		}
		return spans(r.above.Series, ByYear)
	}
	return spans(r.above.Series, r.opts.By)
}

// treatment surveys one treatment and appends its rows.
func (r *runner) treatment(t *Treatment, res *Results) error {
	s, err := newScene(r.plan, t, r.above)
	if err != nil {
		return err
	}
	res.Warnings = append(res.Warnings, s.warnings...)
	named := TreatmentStations{Treatment: t}
	opening, cleared := t.Opening.(Cleared)
	points := make([]canopy.Point, 0, len(s.stations)*len(r.heights))
	for _, st := range s.stations {
		named.Names = append(named.Names, st.Name)
		named.Inside = append(named.Inside, !cleared || opening.Crowns.Contains(st.X, st.Y))
		for _, h := range r.heights {
			points = append(points, canopy.Point{X: st.X, Y: st.Y, Height: h})
		}
	}
	res.Stations = append(res.Stations, named)
	if r.opts.Gain {
		gain, warnings, err := r.standGain(t)
		if err != nil {
			return err
		}
		res.Gains = append(res.Gains, gain)
		res.Warnings = append(res.Warnings, warnings...)
	}
	if r.opts.Depth == Light {
		r.lightRows(s, points, res)
		return nil
	}
	r.balanceRows(s, points, res)
	return nil
}

// lightRows fills the rows of a treatment; each point writes its own places only.
func (r *runner) lightRows(s *scene, points []canopy.Point, res *Results) {
	of := r.spans
	switch {
	case of == nil && r.opts.By == ByLeafOn:
		of = []span{{name: "leaf-on", days: s.leafOn}}
	case of == nil:
		of = []span{{name: "season", days: r.season}}
	}
	base := len(res.Light)
	res.Light = append(res.Light, make([]LightRow, len(points)*len(of))...)
	s.light.Survey(points, r.opts.Workers, func(_, point int, g *light.Regime) {
		p := points[point]
		years := r.yearsLight(g)
		for k, sp := range of {
			sums, days := g.Over(sp.days)
			res.Light[base+point*len(of)+k] = LightRow{
				Treatment: s.treatment.Name, Station: s.stations[point/len(r.heights)].Name,
				X: p.X, Y: p.Y, Height: p.Height, Period: sp.name, Light: sums.Percent(),
				PAR: sums.Spot() / days, Sunfleck: sums.SunfleckPercent(), SkyView: 100 * g.SkyView, Years: years,
			}
		}
	})
}

// yearsLight is the season's percent of full light in every calendar year.
func (r *runner) yearsLight(g *light.Regime) []float64 {
	out := make([]float64, len(r.years))
	mask := make([]bool, len(r.season))
	for y, days := range r.years {
		for d := range mask {
			mask[d] = days[d] && r.season[d]
		}
		sums, _ := g.Over(mask)
		out[y] = sums.Percent()
	}
	return out
}

// balanceRows keeps the ledgers of a treatment; each point writes its own places only.
func (r *runner) balanceRows(s *scene, points []canopy.Point, res *Results) {
	seedlings, n := len(r.plan.Seedlings), len(r.spans)
	base := len(res.Balance)
	res.Balance = append(res.Balance, make([]BalanceRow, len(s.stations)*seedlings*n)...)
	mismatch := make([]float64, len(s.stations)*seedlings)
	workers := max(1, r.opts.Workers)
	keepers := make([]*ledger.Keeper, workers)
	accounts := make([]ledger.Account, workers)
	s.light.Survey(points, workers, func(worker, point int, g *light.Regime) {
		if keepers[worker] == nil {
			keepers[worker] = ledger.NewKeeper(r.season, s.leafOn)
		}
		keeper := keepers[worker]
		keeper.Take(g)
		station := point / len(r.heights)
		sums, days := g.Over(r.season)
		for i := range r.plan.Seedlings {
			if r.heightOf[i] != point%len(r.heights) {
				continue
			}
			at := station*seedlings + i
			row := BalanceRow{
				Treatment: s.treatment.Name, Station: s.stations[station].Name,
				Species: r.plan.Seedlings[i].Name, Botanical: r.plan.Seedlings[i].Botanical,
				Light: sums.Percent(), LightLeafOn: keeper.LeafOnPercent(), PAR: sums.Spot() / days, SkyView: 100 * g.SkyView,
			}
			r.keep(keeper, i, &accounts[worker], &row)
			row.Spring = r.gained(&accounts[worker], s.spring)
			mismatch[at] = keeper.LeafMassMismatch(r.prepared[i])
			for k, sp := range r.spans {
				row.Period, row.Lines = sp.name, r.over(&accounts[worker], sp)
				res.Balance[base+at*n+k] = row
			}
		}
	})
	r.warnMismatch(s, mismatch, res)
}

// keep runs one seedling's ledger at the regime in the keeper's hand.
func (r *runner) keep(k *ledger.Keeper, seedling int, account *ledger.Account, row *BalanceRow) {
	k.Keep(r.prepared[seedling], account)
	if r.opts.Depth == BreakEvens {
		row.BreakEven = k.BreakEven(r.prepared[seedling])
	}
	row.Class = ledger.ClassOf(account.Total.Net(), row.LightLeafOn, row.BreakEven)
	row.Years = make([]float64, len(r.years))
	for y, days := range r.years {
		l := r.over(account, span{days: days, years: 1})
		row.Years[y] = l.Net()
	}
}

// over sums a ledger over a span.
func (r *runner) over(a *ledger.Account, sp span) (l ledger.Lines) {
	for d, in := range sp.days {
		if in {
			l.Add(a.Days[d], r.above.Series.Days[d].Weight/sp.years)
		}
	}
	return l
}

// massTolerance is how far a first-season plant's leaf mass over leaf area may lie from that of its light.
const massTolerance = 0.20

// warnMismatch adds one warning for each first-season seedling whose leaves do not fit their light.
func (r *runner) warnMismatch(s *scene, mismatch []float64, res *Results) {
	for i, seedling := range r.plan.Seedlings {
		worst, where := 0.0, ""
		for st := range s.stations {
			if m := mismatch[st*len(r.plan.Seedlings)+i]; m > worst {
				worst, where = m, s.stations[st].Name
			}
		}
		if worst > massTolerance {
			res.Warnings = append(res.Warnings, Warning{Key: "seedlings." + seedling.Name, Text: fmt.Sprintf(
				"first season under %s, %s: leaf mass per area at that light is %.0f %% away from mass.leaf / leaf_area",
				s.treatment.Name, where, 100*worst)})
		}
	}
}
