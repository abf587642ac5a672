package decide

import (
	"fmt"
	"math"

	"shadeledger/canopy"
	"shadeledger/scenarios"
	"shadeledger/scenarios/ledger"
)

// Shape of an opening whose size is sought.
type Shape int

// The shapes; size is the diameter, or the short side.
const (
	Round Shape = iota
	Oval        // twice as long as wide
	Band        // three times as long as wide
)

func (s Shape) String() string { return [...]string{"circle", "ellipse", "strip"}[s] }

// lengths over widths.
var lengths = [...]float64{1, 2, 3}

// Outline of a size, m, its long side along a bearing, rad.
func (s Shape) Outline(size, bearing float64) (canopy.Outline, error) {
	switch s {
	case Oval:
		return canopy.NewEllipse(lengths[s]*size, size, bearing)
	case Band:
		return canopy.NewStrip(lengths[s]*size, size, bearing)
	}
	return canopy.NewCircle(size)
}

// SizeQuery asks for the smallest openings.
type SizeQuery struct {
	Share   float64 // of the crown outline's area that is to be comfortable, 0..1
	UpTo    float64 // m, the largest size
	Shapes  []Shape
	Bearing float64 // rad, of the long side
	Against string  // a seedling to be outgrown; "" for none
	Turn    bool    // try bearings 0 to 170 degrees by 10 at the size found
	Workers int
}

// SizeRow is the answer for one seedling and shape.
type SizeRow struct {
	Species   string
	Shape     Shape
	Bearing   float64 // rad
	Found     bool    // false: not up to the limit
	Uncut     bool    // comfortable under the uncut stand: no opening is needed
	Size      float64 // m, stem to stem: diameter or short side
	Stems     float64 // m2
	Crowns    float64 // m2
	Share     float64 // comfortable there, 0..1
	Smaller   float64 // comfortable in the next smaller opening; NaN where there is none
	Upper     float64 // m: from this size on the rival outgrows it; NaN where it does not up to the limit, or none is named
	Behind    bool    // the rival outgrows it at the size found already
	Best      float64 // rad, bearing with the largest share at that size; NaN where bearings were not tried
	BestShare float64
	Worst     float64
	LeastGood float64 // share at the worst bearing
	Verdict   string
	// Over draws of what is not known for sure: the 5th and 95th percentile of the size, m; +Inf where none up to the limit is large enough. Missed is the
	// share of draws without an answer. NaN where nothing was drawn.
	Low, High, Missed float64
}

// Sizes is the table.
type Sizes struct {
	Plan  *scenarios.Plan // its leaf area corrected
	Query SizeQuery
	Rows  []SizeRow
	Runs  int
	Drawn int // draws that stand behind the ranges
}

// stepOfHeight is the step of sizes in tree heights.
const stepOfHeight = 0.1

// across is how many spots stand beside each other over the short side of an opening: a cell is then a hundredth of its area or less.
const across = 9

// sizer evaluates openings once each.
type sizer struct {
	q      SizeQuery
	m      *scenarios.Mapper
	base   scenarios.Treatment
	seen   map[[3]int][]view
	runs   int
	height float64 // m, of which sizes are tenths
	fine   int     // spots beside each other over the short side
	least  int     // steps of the smallest opening with ground inside its crown outline
	most   int
}

// view is one opening for one seedling.
type view struct{ share, growth float64 }

// FindSizes finds for every seedling and shape the smallest opening, to 0.1 tree height, that is comfortable over the share asked for. Openings
// have what the plan's first one has inside. More size brings more light, so that one crossing is all there is; it is halved for, and
// the opening one step smaller is kept as the proof.
func FindSizes(p *scenarios.Plan, q SizeQuery) (*Sizes, error) {
	if q.Against != "" && !HasSeedling(p, q.Against) {
		return nil, fmt.Errorf("%q is not a seedling of the plan; there are %v", q.Against, Seedlings(p))
	}
	m, err := scenarios.NewMapper(p, q.Workers)
	if err != nil {
		return nil, err
	}
	s, err := newSizer(m, q, across)
	if err != nil {
		return nil, err
	}
	uncut, err := s.uncut()
	if err != nil {
		return nil, err
	}
	out := &Sizes{Plan: m.Plan(), Query: q}
	for i, seedling := range m.Plan().Seedlings {
		for _, shape := range q.Shapes {
			row, err := s.row(i, seedling.Name, shape, uncut[i])
			if err != nil {
				return nil, err
			}
			out.Rows = append(out.Rows, row)
		}
	}
	out.Runs = s.runs
	return out, nil
}

// newSizer readies the sizes between those with ground inside their crowns and the limit; fine is how many spots stand beside each other.
func newSizer(m *scenarios.Mapper, q SizeQuery, fine int) (*sizer, error) {
	H, r := m.Plan().Stand.Height, m.Plan().Stand.CrownRadius
	s := &sizer{q: q, m: m, base: opened(m.Plan()), seen: map[[3]int][]view{}, fine: fine, height: H}
	s.least = int(math.Ceil((2*r + 1) / (stepOfHeight * H)))
	s.most = int(math.Floor(q.UpTo/(stepOfHeight*H) + 1e-9))
	if s.most < s.least {
		return nil, fmt.Errorf("the largest size is %.3g m; with crowns of %.3g m round it an opening needs %.3g m", q.UpTo, r, float64(s.least)*stepOfHeight*H)
	}
	return s, nil
}

// opened is the treatment that sizes are tried on: the plan's first opening, else the uncut stand with a bare one.
func opened(p *scenarios.Plan) scenarios.Treatment {
	for _, t := range p.Treatments {
		if _, ok := t.Opening.(scenarios.Cleared); ok {
			return t
		}
	}
	return scenarios.Treatment{Name: "opening", Matrix: p.Stand.Layers, Understory: p.Stand.Understory, Opening: scenarios.Cleared{}}
}

// uncut tells which seedlings are comfortable under the stand as it is.
func (s *sizer) uncut() ([]bool, error) {
	p := s.m.Plan()
	t := scenarios.Treatment{Name: "uncut", Matrix: p.Stand.Layers, Understory: p.Stand.Understory, Opening: scenarios.NoOpening{}}
	spots, err := s.m.Map(&t, [][2]float64{{0, 0}}, scenarios.BreakEvens)
	if err != nil {
		return nil, err
	}
	out := make([]bool, len(spots))
	for i := range spots {
		out[i] = spots[i][0].Class == ledger.Comfortable
	}
	return out, nil
}

func (s *sizer) size(k int) float64 { return float64(k) * stepOfHeight * s.height }

// look evaluates an opening of k steps for every seedling.
func (s *sizer) look(shape Shape, k int, bearing float64) ([]view, error) {
	key := [3]int{int(shape), k, int(math.Round(bearing * 1800 / math.Pi))}
	if v, ok := s.seen[key]; ok {
		return v, nil
	}
	t, spots, err := s.cut(shape, k, bearing)
	if err != nil {
		return nil, err
	}
	maps, err := s.m.Map(t, spots, scenarios.BreakEvens)
	if err != nil {
		return nil, err
	}
	s.runs++
	out := make([]view, len(maps))
	for i, spots := range maps {
		plant := &s.m.Plan().Seedlings[i].Plant
		for _, x := range spots {
			if x.Class == ledger.Comfortable {
				out[i].share += 1 / float64(len(spots))
			}
			out[i].growth += x.Net / grown(plant) / float64(len(spots))
		}
	}
	s.seen[key] = out
	return out, nil
}

// cut is the treatment with an opening of k steps, and spots evenly over the ground inside its crowns.
func (s *sizer) cut(shape Shape, k int, bearing float64) (*scenarios.Treatment, [][2]float64, error) {
	stems, err := shape.Outline(s.size(k), bearing)
	if err != nil {
		return nil, nil, err
	}
	r := s.m.Plan().Stand.CrownRadius
	crowns, err := canopy.Inset(stems, r)
	if err != nil {
		return nil, nil, err
	}
	t := s.base
	t.Opening = scenarios.Cleared{Stems: stems, Crowns: crowns, Inside: t.Opening.(scenarios.Cleared).Inside}
	return &t, evenly(crowns, (s.size(k)-2*r)/float64(s.fine), lengths[shape]*s.size(k)/2), nil
}

// grown is what a plant is made of, g C spent, so that net over it is relative growth, per year.
func grown(p *ledger.Plant) float64 {
	mass := p.LeafMass
	for _, o := range p.Organs {
		mass += o.Mass
	}
	return mass * p.Turnover.ConstructionCost
}

// evenly lists spots a step apart over an outline that reaches no farther than reach, m.
func evenly(o canopy.Outline, step, reach float64) (out [][2]float64) {
	n := int(math.Ceil(reach / step))
	for j := -n; j <= n; j++ {
		for i := -n; i <= n; i++ {
			if x, y := float64(i)*step, float64(j)*step; o.Contains(x, y) {
				out = append(out, [2]float64{x, y})
			}
		}
	}
	return out
}

func (s *sizer) row(i int, name string, shape Shape, uncut bool) (SizeRow, error) {
	nan := math.NaN()
	row := SizeRow{Species: name, Shape: shape, Bearing: s.q.Bearing, Uncut: uncut, Smaller: nan, Upper: nan, Best: nan, Worst: nan, BestShare: nan, LeastGood: nan, Low: nan, High: nan, Missed: nan}
	enough := func(k int) (bool, error) {
		v, err := s.look(shape, k, s.q.Bearing)
		return err == nil && v[i].share >= s.q.Share-rounding, err
	}
	k, err := smallest(s.least, s.most, enough)
	if err != nil {
		return row, err
	}
	if k > s.most {
		row.Verdict = fmt.Sprintf("no opening up to %.3g H", s.size(s.most)/s.height)
		if v, err := s.look(shape, s.most, s.q.Bearing); err == nil {
			row.Share = v[i].share
		}
		return row, nil
	}
	row.Found, row.Size = true, s.size(k)
	v, err := s.look(shape, k, s.q.Bearing)
	if err != nil {
		return row, err
	}
	row.Share = v[i].share
	if k > s.least {
		if v, err = s.look(shape, k-1, s.q.Bearing); err != nil {
			return row, err
		}
		row.Smaller = v[i].share
	}
	if stems, err := shape.Outline(row.Size, s.q.Bearing); err == nil {
		row.Stems = stems.Area()
		if crowns, err := canopy.Inset(stems, s.m.Plan().Stand.CrownRadius); err == nil {
			row.Crowns = crowns.Area()
		}
	}
	if err := s.rival(&row, i, shape, k); err != nil {
		return row, err
	}
	if s.q.Turn && shape != Round {
		if err := s.turn(&row, i, shape, k); err != nil {
			return row, err
		}
	}
	row.Verdict = row.verdict(s.q)
	return row, nil
}

// rounding of a share that is summed over spots.
const rounding = 1e-9

// smallest halves for the least k of low..high that is enough, taking what lies below it as not enough; high+1 where even the largest is not.
func smallest(low, high int, enough func(int) (bool, error)) (int, error) {
	if ok, err := enough(high); err != nil || !ok {
		return high + 1, err
	}
	for low < high {
		mid := (low + high) / 2
		ok, err := enough(mid)
		if err != nil {
			return high + 1, err
		}
		if ok {
			high = mid
		} else {
			low = mid + 1
		}
	}
	return low, nil
}

// rival finds the size from which on the named seedling outgrows this one, by mean relative growth over the opening.
func (s *sizer) rival(row *SizeRow, i int, shape Shape, k int) error {
	j := -1
	for n, x := range s.m.Plan().Seedlings {
		if x.Name == s.q.Against {
			j = n
		}
	}
	if j < 0 || j == i {
		return nil
	}
	behind := func(k int) (bool, error) {
		v, err := s.look(shape, k, s.q.Bearing)
		return err == nil && v[j].growth > v[i].growth, err
	}
	at, err := smallest(k, s.most, behind)
	if err != nil || at > s.most {
		return err
	}
	row.Upper, row.Behind = s.size(at), at == k
	return nil
}

// turn tries bearings at the size found.
func (s *sizer) turn(row *SizeRow, i int, shape Shape, k int) error {
	row.BestShare, row.LeastGood = -1, 2
	for d := 0; d < 180; d += 10 {
		φ := float64(d) * math.Pi / 180
		v, err := s.look(shape, k, φ)
		if err != nil {
			return err
		}
		if v[i].share > row.BestShare {
			row.Best, row.BestShare = φ, v[i].share
		}
		if v[i].share < row.LeastGood {
			row.Worst, row.LeastGood = φ, v[i].share
		}
	}
	return nil
}

func (r *SizeRow) verdict(q SizeQuery) string {
	switch {
	case r.Uncut:
		return "comfortable without an opening"
	case r.Behind:
		return q.Against + " outgrows it there already"
	case !math.IsNaN(r.Upper):
		return "window up to where " + q.Against + " outgrows it"
	}
	return "found"
}
