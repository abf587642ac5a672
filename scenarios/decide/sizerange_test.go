package decide

import (
	"context"
	"fmt"
	"math"
	"testing"
)

// The range of a size holds the best answer, is in steps, does not depend on workers, and is empty where the draws were cut short.
func TestSizeRanges(t *testing.T) {
	p := small(t, "Birch")
	q := SizeQuery{Share: 0.5, UpTo: 3 * p.Stand.Height, Shapes: []Shape{Round, Band}, Bearing: math.Pi / 2, Workers: 2}
	ranged := func(workers int) *Sizes {
		t.Helper()
		s, err := FindSizes(p, q)
		if err != nil {
			t.Fatal(err)
		}
		if err := s.Range(context.Background(), p, SpreadQuery{Count: 40, Seed: 2, Workers: workers}); err != nil {
			t.Fatal(err)
		}
		return s
	}
	one, two := ranged(1), ranged(2)
	if fmt.Sprint(one.Rows) != fmt.Sprint(two.Rows) {
		t.Error("workers change the ranges")
	}
	for _, r := range two.Rows {
		t.Logf("%s %s: %.1f H (%.1f to %.1f), none in %.0f %%", r.Species, r.Shape, r.Size/p.Stand.Height, r.Low/p.Stand.Height, r.High/p.Stand.Height, 100*r.Missed)
		steps := r.Low / (stepOfHeight * p.Stand.Height)
		if !(r.Low < r.Size && r.Size < r.High) || math.Abs(steps-math.Round(steps)) > 1e-6 {
			t.Errorf("%s %s: %g m, range %g to %g", r.Species, r.Shape, r.Size, r.Low, r.High)
		}
	}
	s, err := FindSizes(p, q)
	if err != nil {
		t.Fatal(err)
	}
	stopped, stop := context.WithCancel(context.Background())
	stop()
	if err := s.Range(stopped, p, SpreadQuery{Count: 40, Workers: 1}); err != nil || s.Drawn != 0 || !math.IsNaN(s.Rows[0].Low) {
		t.Errorf("stopped before it began: %d draws, low %g, %v", s.Drawn, s.Rows[0].Low, err)
	}
}

// The search near a guess finds what plain halving finds, whatever the guess.
func TestSmallestNear(t *testing.T) {
	for answer := 3; answer <= 21; answer++ {
		for guess := 0; guess <= 25; guess++ {
			asked := 0
			got, err := smallestNear(guess, 3, 20, func(k int) (bool, error) { asked++; return k >= answer, nil })
			if err != nil || got != answer || asked > 12 {
				t.Errorf("guess %d: %d for %d in %d looks, %v", guess, got, answer, asked, err)
			}
		}
	}
}
