package report

import (
	"fmt"
	"math"
	"strings"

	"github.com/jedib0t/go-pretty/v6/table"

	"shadeledger/leaf/fit"
	"shadeledger/scenarios/report/figures"
)

// LeafFit is the light response of one leaf: the non-rectangular hyperbola, which plans take, and the shape that AICc prefers.
type LeafFit struct {
	Sample
	Fit    fit.Fit
	Points []fit.Point // the readings
	Best   fit.Shape
	Gain   float64 // AICc of the hyperbola less that of the best shape, 0 where it is best
	Flags  []string
}

func estimated(name string, of func(*fit.Fit) *fit.Estimate) []column[LeafFit] {
	return []column[LeafFit]{
		figure(name, func(l *LeafFit) float64 { return of(&l.Fit).Value }),
		figure(name+"_low", func(l *LeafFit) float64 { return of(&l.Fit).Low }),
		figure(name+"_high", func(l *LeafFit) float64 { return of(&l.Fit).High }),
	}
}

var leafFitColumns = func() []column[LeafFit] {
	c := []column[LeafFit]{
		words("species", func(l *LeafFit) string { return l.Species }),
		words("plant", func(l *LeafFit) string { return l.Plant }),
		words("leaf", func(l *LeafFit) string { return l.Leaf }),
		figure("points", func(l *LeafFit) float64 { return float64(l.Fit.Points) }),
	}
	c = append(c, estimated("amax", func(f *fit.Fit) *fit.Estimate { return &f.Amax })...)
	c = append(c, estimated("rd", func(f *fit.Fit) *fit.Estimate { return &f.Rd })...)
	c = append(c, estimated("phi", func(f *fit.Fit) *fit.Estimate { return &f.Phi })...)
	c = append(c, estimated("theta", func(f *fit.Fit) *fit.Estimate { return &f.Theta })...)
	c = append(c, estimated("compensation_umol_m2_s", func(f *fit.Fit) *fit.Estimate { return &f.Compensation })...)
	return append(c,
		figure("rmse_umol_m2_s", func(l *LeafFit) float64 { return l.Fit.RMSE }),
		words("best_by_aicc", func(l *LeafFit) string { return l.Best.String() }),
		figure("aicc_gain", func(l *LeafFit) float64 { return l.Gain }),
		words("flags", func(l *LeafFit) string { return strings.Join(l.Flags, "; ") }),
	)
}()

// MostLeaves is as many leaves as one figure holds.
const MostLeaves = figures.MostPanels

// FitLeafFigure draws the fitted curve of every leaf with its readings and the pointwise 95 % band of the fit, as far as the readings determine it.
func FitLeafFigure(o Output, fits []LeafFit) error {
	f := figures.Figure{X: ppfdAxis + " (bands: 95 % interval of the curve)", Y: netAxis}
	for i := range fits {
		l := &fits[i]
		most := 0.0
		c := figures.Curve{}
		for _, p := range l.Points {
			most = math.Max(most, p.PPFD)
			c.Readings = append(c.Readings, figures.Point{X: p.PPFD, Y: p.Net})
		}
		for k := range 101 {
			I := most * float64(k) / 100
			net, half := l.Fit.Net(I), l.Fit.Band(I)
			c.Line = append(c.Line, figures.Point{X: I, Y: net})
			if math.IsNaN(half) {
				continue
			}
			c.Low, c.High = append(c.Low, figures.Point{X: I, Y: net - half}), append(c.High, figures.Point{X: I, Y: net + half})
		}
		f.Panels = append(f.Panels, figures.Panel{Title: strings.TrimPrefix(l.Species+", "+l.Leaf, ", "), Curves: []figures.Curve{c}})
	}
	return figures.Write(o.Out, f, o.kind())
}

// clearly is how much lower AICc is where one shape is to be told from another (Burnham & Anderson 2002, Model Selection, sec. 2.6).
const clearly = 2

// plantsPerSpecies is the floor to print (common practice).
const plantsPerSpecies = 5

// FitLeaf writes fits leaf by leaf, then each species' mean with its spread between plants and a block that a plan takes.
func FitLeaf(o Output, name string, fits []LeafFit, takes Takes) error {
	if o.Format != Table {
		return listed(o, name, leafFitColumns, fits)
	}
	p := &printer{w: o.Out}
	hang(p, "", fmt.Sprintf("Light responses of %s: %s, non-rectangular hyperbola, 95 %% intervals. Amax (net), Rd and RMSE in umol CO2 m-2 s-1, phi in mol mol-1, compensation point in umol m-2 s-1.",
		name, counted(len(fits), "leaf", "leaves")))
	t := newTable("species", "leaf", "n", "Amax", "Rd", "phi", "theta", "comp.", "RMSE")
	for i := range fits {
		l := &fits[i]
		f := &l.Fit
		t.AppendRow(table.Row{l.Species, l.Leaf, f.Points, ranged(f.Amax, 1), ranged(f.Rd, 2), ranged(f.Phi, 3), decimal(f.Theta.Value, 2), ranged(f.Compensation, 0), decimal(f.RMSE, 2)})
	}
	p.table(t, 3, 4, 5, 6, 7, 8, 9)
	for i := range fits {
		if l := &fits[i]; len(l.Flags) > 0 {
			hang(p, "  "+l.Leaf+": ", strings.Join(l.Flags, "; "))
		}
	}
	for _, shape := range []fit.Shape{fit.Exponential, fit.Rectangular} {
		n := 0
		for i := range fits {
			if fits[i].Best == shape && fits[i].Gain > clearly {
				n++
			}
		}
		if n > 0 {
			p.f("%s met better by the %s (AICc lower by over %d).\n", counted(n, "leaf is", "leaves are"), shape, clearly)
		}
	}
	leaves := make([]Sample, len(fits))
	for i := range fits {
		leaves[i] = fits[i].Sample
	}
	for _, k := range kinsOf(leaves) {
		list := make([]fit.Fit, len(k.at))
		for i, at := range k.at {
			list[i] = fits[at].Fit
		}
		s := fit.Summarise(list, k.plants)
		k.head(p, fmt.Sprintf("Amax %s, Rd %s, phi %s, theta %s, compensation point %s",
			spread(s.Amax, 1), spread(s.Rd, 2), spread(s.Phi, 4), spread(s.Theta, 2), spread(s.Compensation, 0)))
		k.lightBlock(p, s, takes)
	}
	return p.err
}

// ranged shows an estimate with its interval.
func ranged(e fit.Estimate, places int) string {
	switch {
	case math.IsNaN(e.Value):
		return "-"
	case math.IsNaN(e.Low) || math.IsNaN(e.High):
		return text0(e.Value, places) + " (not determined)"
	}
	low, high, between := text0(e.Low, places), text0(e.High, places), "-"
	if strings.Trim(low, "-0.") == "" {
		low = strings.TrimPrefix(low, "-") // -0.00 is 0.00
	}
	if strings.HasPrefix(low, "-") {
		between = " to "
	}
	return text0(e.Value, places) + " (" + low + between + high + ")"
}

func spread(s fit.Spread, places int) string {
	if math.IsNaN(s.SD) {
		return decimal(s.Mean, places)
	}
	return decimal(s.Mean, places) + " (" + decimal(s.SD, places) + ")"
}
