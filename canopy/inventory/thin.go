package inventory

import (
	"fmt"
	"math"
	"slices"

	"shadeledger/leaf/traits"
)

// Order in which trees are taken.
type Order int

// The orders: thinnest first, thickest first, or the same share of every class.
const (
	SmallestFirst Order = iota
	LargestFirst
	AllSizes
)

// Thinning takes trees of a stand down to a basal area.
type Thinning struct {
	Order Order
	Leave float64           // m2/ha that is left standing, >= 0
	Only  []*traits.Species // where not empty, no other species is taken
	Spare []*traits.Species // never taken
}

// Removal is what is taken of a class; Class.PerHa is the trees taken.
type Removal struct{ Tree }

// Thin takes trees in order until the basal area left is reached, a part of the last class if need be. It reports
// how near it came: more than asked may have to stay where species are spared. Trees kept and trees cut make the trees there were.
func (s Stand) Thin(t Thinning) (left Stand, cut []Removal, err error) {
	total := s.Sums().BasalArea
	if !(t.Leave >= 0) {
		return s, nil, fmt.Errorf("a basal area of %g m2/ha cannot be left; it must be 0 or more", t.Leave)
	}
	share := make([]float64, len(s.Trees)) // taken of each class
	excess := total - t.Leave
	open := func(x Tree) bool {
		return (len(t.Only) == 0 || slices.Contains(t.Only, x.Species)) && !slices.Contains(t.Spare, x.Species)
	}
	if t.Order == AllSizes {
		may := 0.0
		for _, x := range s.Trees {
			if open(x) {
				may += x.BasalArea()
			}
		}
		for i, x := range s.Trees {
			if open(x) && excess > 0 {
				share[i] = math.Min(1, excess/may)
			}
		}
	} else {
		for _, i := range s.places(t.Order) {
			x := s.Trees[i]
			if excess <= 0 || !open(x) {
				continue
			}
			share[i] = math.Min(1, excess/x.BasalArea())
			excess -= share[i] * x.BasalArea()
		}
	}
	left, cut = s.take(share)
	return left, cut, nil
}

// places lists the trees' indices in the order in which they are taken.
func (s Stand) places(o Order) []int {
	out := make([]int, len(s.Trees))
	for i := range out {
		out[i] = i
	}
	slices.SortStableFunc(out, func(a, b int) int {
		if o == LargestFirst {
			a, b = b, a
		}
		switch d := s.Trees[a].DBH - s.Trees[b].DBH; {
		case d < 0:
			return -1
		case d > 0:
			return 1
		}
		return 0
	})
	return out
}

// take removes a share of every class. Trees that stay keep their leaves and crowns.
func (s Stand) take(share []float64) (left Stand, cut []Removal) {
	left = s
	left.Trees = nil
	for i, x := range s.Trees {
		stays := x
		stays.PerHa = x.PerHa * (1 - share[i])
		if share[i] > 0 {
			x.PerHa *= share[i]
			cut = append(cut, Removal{x})
		}
		if stays.PerHa > 0 {
			left.Trees = append(left.Trees, stays)
		}
	}
	left.clumping = s.Clumping()
	return left, cut
}

// Kept says which trees stay in an opening.
type Kept struct {
	PerHa   float64           // trees per hectare of opening; taken from the thickest down
	Share   float64           // of the trees, 0..1; used where PerHa is 0
	Species []*traits.Species // where not empty, of these only
	// Only trees of a dbh from Thinnest to Thickest, m, both in, stay.
	Thinnest, Thickest float64
}

// Keep leaves only chosen trees: so many to the hectare from the thickest down, or a share of every class.
func (s Stand) Keep(k Kept) Stand {
	share := make([]float64, len(s.Trees))
	room := k.PerHa
	for _, i := range s.places(LargestFirst) {
		x := s.Trees[i]
		share[i] = 1
		switch {
		case len(k.Species) > 0 && !slices.Contains(k.Species, x.Species), x.DBH < k.Thinnest, x.DBH > k.Thickest:
		case k.PerHa > 0:
			stay := math.Min(room, x.PerHa)
			room -= stay
			share[i] = 1 - stay/x.PerHa
		default:
			share[i] = 1 - k.Share
		}
	}
	left, _ := s.take(share)
	return left
}
