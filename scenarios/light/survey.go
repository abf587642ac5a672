package light

import (
	"math"
	"sync"
	"sync/atomic"

	"shadeledger/canopy"
)

// Scene is a treatment's canopy through the series: what stands, and the share of leaf present each day.
type Scene struct {
	above *Above
	stand *canopy.Stand
	rays  *canopy.Rays
	// state of leaf by day; states[k] is a vector of shares by phenology
	dayState []int32
	states   [][]float64
	recipe   []recipe
	anchors  [][]float64
	store    []float64 // of states and anchors
	end      []float64 // scratch
	litState []int32
	// shape numbering: one shape for each (state, pattern) that occurs
	shapeState   []int32
	shapePattern []int32
	shape        []int32
}

// recipe makes a state's sky light from one anchor, or from two between which one share of leaf changes.
type recipe struct {
	a, b int
	f    float64 // 0: all a
}

// anchorsPerUnit says how far apart the anchors of a changing share lie; between them the logarithm of each cell's light is
// linear, to better than 0.1 % of that light.
const anchorsPerUnit = 5

// NewScene prepares a stand for a series; shares gives the share of leaf present by phenology on a series day.
func NewScene(a *Above, stand *canopy.Stand, shares func(day int) []float64) *Scene {
	series := a.Series
	days, lit := len(series.Days), len(series.Lit.Step)
	// room for all days at once: how often it allocates does not grow with them
	s := &Scene{
		above: a, stand: stand, dayState: make([]int32, days), states: make([][]float64, 0, days),
		recipe: make([]recipe, 0, days), anchors: make([][]float64, 0, 2*days),
		shapeState: make([]int32, 0, lit), shapePattern: make([]int32, 0, lit),
	}
	for d := range series.Days {
		s.dayState[d] = s.state(shares(d))
	}
	directions := make([]canopy.Direction, len(series.Lit.Step))
	s.litState = make([]int32, len(series.Lit.Step))
	for d := range series.Days {
		for i := series.Days[d].LitFrom; i < series.Days[d].LitTo; i++ {
			directions[i] = canopy.Direction{Elevation: series.Lit.Elevation[i], Azimuth: series.Lit.Azimuth[i]}
			s.litState[i] = s.dayState[d]
		}
	}
	s.rays = stand.Rays(directions)
	s.number()
	for _, v := range s.states {
		s.recipe = append(s.recipe, s.mix(v))
	}
	return s
}

// state finds or adds a vector of shares.
func (s *Scene) state(v []float64) int32 {
	for k := len(s.states) - 1; k >= 0; k-- {
		if same(s.states[k], v) {
			return int32(k)
		}
	}
	s.states = append(s.states, s.keep(v))
	return int32(len(s.states) - 1)
}

// keep copies a vector into the scene's store.
func (s *Scene) keep(v []float64) []float64 {
	if s.store == nil {
		s.store = make([]float64, 0, 3*len(s.dayState)*len(v))
		s.end = make([]float64, len(v))
	}
	from := len(s.store)
	s.store = append(s.store, v...)
	return s.store[from:len(s.store):len(s.store)]
}

func same(a, b []float64) bool {
	for i := range a {
		if a[i] != b[i] {
			return false
		}
	}
	return true
}

// number gives every pair of leaf state and sky pattern that occurs a shape.
func (s *Scene) number() {
	n := len(s.above.Pattern)
	s.shape = make([]int32, n)
	seen := make([]int32, len(s.states)*s.above.patterns)
	for i := range n {
		key := int(s.litState[i])*s.above.patterns + int(s.above.Pattern[i])
		if seen[key] == 0 {
			s.shapeState = append(s.shapeState, s.litState[i])
			s.shapePattern = append(s.shapePattern, s.above.Pattern[i])
			seen[key] = int32(len(s.shapeState))
		}
		s.shape[i] = seen[key] - 1
	}
}

// mix finds how a state is made of anchors.
func (s *Scene) mix(v []float64) recipe {
	varying, count := 0, 0
	for g, x := range v {
		if x > 0 && x < 1 {
			varying, count = g, count+1
		}
	}
	if count != 1 {
		return recipe{a: s.anchor(v)}
	}
	step := math.Floor(v[varying] * anchorsPerUnit)
	low := step / anchorsPerUnit
	end := s.end
	copy(end, v)
	end[varying] = low
	a := s.anchor(end)
	if v[varying] == low {
		return recipe{a: a}
	}
	end[varying] = (step + 1) / anchorsPerUnit
	return recipe{a: a, b: s.anchor(end), f: (v[varying] - low) * anchorsPerUnit}
}

func (s *Scene) anchor(v []float64) int {
	for k, w := range s.anchors {
		if same(v, w) {
			return k
		}
	}
	s.anchors = append(s.anchors, s.keep(v))
	return len(s.anchors) - 1
}

// Survey finds the regime at every point and hands it to visit, which must not keep it. Points are shared out over
// workers; visit is called once for each point, from one of them, with the worker's number.
func (s *Scene) Survey(points []canopy.Point, workers int, visit func(worker, point int, r *Regime)) {
	s.survey(points, workers, s.newObserver, visit)
}

// SurveyAlongGround is Survey with the sky's light through planes along the ground, per level area, in place of the level plane: what layers along a
// slope share out. The beam's flux through such planes is its own by m cos beta.
func (s *Scene) SurveyAlongGround(points []canopy.Point, workers int, visit func(worker, point int, r *Regime)) {
	s.survey(points, workers, func() *observer {
		o := s.newObserver()
		o.scan.AlongGround()
		return o
	}, visit)
}

func (s *Scene) survey(points []canopy.Point, workers int, hire func() *observer, visit func(worker, point int, r *Regime)) {
	observers := make([]*observer, max(1, workers))
	Share(len(points), workers, func(worker, i int) {
		if observers[worker] == nil {
			observers[worker] = hire()
		}
		visit(worker, i, observers[worker].observe(points[i]))
	})
}

// Share has n pieces of work done by workers, each piece once; a piece writes its own places only.
func Share(n, workers int, do func(worker, piece int)) {
	var next atomic.Int64
	var group sync.WaitGroup
	for w := range max(1, min(workers, n)) {
		group.Go(func() {
			for i := int(next.Add(1)) - 1; i < n; i = int(next.Add(1)) - 1 {
				do(w, i)
			}
		})
	}
	group.Wait()
}

// observer is one worker's scratch space.
type observer struct {
	scene   *Scene
	tracer  *canopy.Tracer
	scan    *canopy.SkyScan
	beams   []canopy.Beam
	anchors []canopy.CellLight
	// by leaf state: integral of T over each cell; ratio of plane to solid by ring
	solid, cosine []float64
	plane         []float64
	regime        *Regime
}

func (s *Scene) newObserver() *observer {
	a := s.above
	o := &observer{
		scene: s, tracer: s.stand.NewTracer(), scan: s.stand.NewSkyScan(a.dome),
		beams: make([]canopy.Beam, len(s.litState)), regime: newRegime(a),
		solid: make([]float64, len(s.states)*a.dome.Cells()), cosine: make([]float64, len(s.states)*a.Rings()),
		plane: make([]float64, len(s.shapeState)),
	}
	cells := a.dome.Cells()
	o.anchors = make([]canopy.CellLight, len(s.anchors))
	room := make([]float64, 2*cells*len(s.anchors))
	for k := range o.anchors {
		o.anchors[k] = canopy.CellLight{Plane: room[2*k*cells : (2*k+1)*cells], Solid: room[(2*k+1)*cells : (2*k+2)*cells]}
	}
	o.regime.ShapeRings = make([]float64, len(s.shapeState)*a.Rings())
	o.regime.ShapePattern = s.shapePattern
	copy(o.regime.Shape, s.shape)
	return o
}

// observe fills the regime of a point.
func (o *observer) observe(p canopy.Point) *Regime {
	s, r := o.scene, o.regime
	lit := &s.above.Series.Lit
	o.tracer.Trace(p, s.rays, s.litState, s.states, o.beams)
	for i, b := range o.beams {
		r.BeamChance[i] = b.Chance
		r.Scattered[i] = lit.Beam[i] * (b.Transmittance - b.Chance)
	}
	o.scan.Scan(p)
	r.SkyView = o.scan.SkyView()
	for k, shares := range s.anchors {
		o.scan.Transmit(shares, &o.anchors[k])
	}
	for k, recipe := range s.recipe {
		o.blend(k, recipe)
	}
	o.shapes()
	for i, k := range r.Shape {
		r.SkyPlane[i] = lit.Diffuse[i] * o.plane[k]
	}
	r.sumDays()
	return r
}

// blend makes the cells of leaf state k.
func (o *observer) blend(k int, recipe recipe) {
	d := o.scene.above.dome
	cells, rings := d.Cells(), d.Rings()
	solid := o.solid[k*cells : (k+1)*cells]
	a := &o.anchors[recipe.a]
	b, f := a, recipe.f
	if f > 0 {
		b = &o.anchors[recipe.b]
	}
	for r := range rings {
		sumS, sumP := 0.0, 0.0
		for c := r * d.Sectors; c < (r+1)*d.Sectors; c++ {
			S, P := a.Solid[c], a.Plane[c]
			if f > 0 && S > 0 && b.Solid[c] > 0 {
				k := math.Pow(b.Solid[c]/S, f)
				P *= k
				S *= k
			}
			solid[c] = S
			sumS += S
			sumP += P
		}
		if sumS > 0 {
			o.cosine[k*rings+r] = sumP / sumS
		} else {
			o.cosine[k*rings+r] = 0
		}
	}
}

// shapes sums radiance times transmittance over each ring, for every pair of leaf state and sky pattern.
func (o *observer) shapes() {
	a, s := o.scene.above, o.scene
	cells, rings, sectors := a.dome.Cells(), a.Rings(), a.dome.Sectors
	for k, state := range s.shapeState {
		pattern := int(s.shapePattern[k])
		radiance := a.radiance[pattern*cells : (pattern+1)*cells]
		solid := o.solid[int(state)*cells : (int(state)+1)*cells]
		cosine := o.cosine[int(state)*rings : (int(state)+1)*rings]
		out := o.regime.ShapeRings[k*rings : (k+1)*rings]
		plane := 0.0
		for r := range out {
			v := dot(radiance[r*sectors:(r+1)*sectors], solid[r*sectors:(r+1)*sectors])
			out[r] = v
			plane += v * cosine[r]
		}
		o.plane[k] = plane
	}
}

// dot is the sum of products in a fixed order, over two running sums.
func dot(a []float32, b []float64) float64 {
	b = b[:len(a)]
	var x, y float64
	i := 0
	for ; i+1 < len(a); i += 2 {
		x += float64(a[i]) * b[i]
		y += float64(a[i+1]) * b[i+1]
	}
	if i < len(a) {
		x += float64(a[i]) * b[i]
	}
	return x + y
}
