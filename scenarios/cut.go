package scenarios

import "math"

// Cut is how much a treatment takes: the share of the basal area between openings, of leaf area where the stand is stated by layers, and
// one opening's legal area.
type Cut struct {
	Matrix  float64 // 0..1
	Opening float64 // m2
}

// CutOf measures a treatment against the uncut stand.
func CutOf(p *Plan, t *Treatment) Cut {
	var c Cut
	before, after := LeafArea(p.Stand.Layers), LeafArea(t.Matrix)
	if len(t.Trees.Trees) > 0 {
		before, after = p.Stand.Trees.Sums().BasalArea, t.Trees.Sums().BasalArea
	}
	if before > 0 {
		c.Matrix = math.Max(0, 1-after/before)
	}
	if o, ok := t.Opening.(Cleared); ok {
		c.Opening = o.Stems.Area()
	}
	return c
}

// LeafArea is the leaf area index of layers, m2 m-2.
func LeafArea(layers []Layer) (sum float64) {
	for _, l := range layers {
		sum += l.LAI
	}
	return sum
}

// Lighter orders cuts: first the share taken between openings, then the opening's area.
func (c Cut) Lighter(d Cut) bool {
	if math.Abs(c.Matrix-d.Matrix) > 1e-9 {
		return c.Matrix < d.Matrix
	}
	return c.Opening < d.Opening-1e-9
}
