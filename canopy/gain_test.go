package canopy

import (
	"fmt"
	"math"
	"testing"

	"shadeledger/leaf"
)

// endless is a canopy of one or two kinds, alike at every depth, with wood, on level ground.
type endless struct {
	leaves []Foliage // LAI of the whole
	wood   float64   // Omega WAI of the whole
	sun    float64   // elevation, rad
	beam   float64   // I_b on the level, umol m-2 s-1
	sky    float64   // D above, even over the sky
}

var testLeaf = leaf.Set{Ag: 9, Rd: 0.8, Phi: 0.05, Theta: 0.8, LMA: 60}

func foliage(lai, chi, omega, alpha float64) Foliage {
	f := NewFoliage(chi, omega, alpha)
	f.LAI, f.Response = lai, testLeaf.Response()
	return f
}

// depth is tau of the whole towards a zenith angle, leaves weighted by a power of their absorptance.
func (e endless) depth(zenith float64, scatter bool) float64 {
	sin, cos := math.Sincos(zenith)
	tau := WoodProjection * e.wood
	for _, f := range e.leaves {
		w := 1.0
		if scatter {
			w = math.Sqrt(f.absorptance)
		}
		tau += w * f.clumping * LeafProjection(f.chi, cos, sin) * f.LAI
	}
	return tau / cos
}

// skyAt is the even sky's light below a share of the canopy.
func (e endless) skyAt(share float64) (sum float64) {
	const n = 600
	for i := range n {
		z := (float64(i) + 0.5) / n * math.Pi / 2
		sum += math.Exp(-share*e.depth(z, true)) * math.Sin(2*z) * math.Pi / 2 / n
	}
	return e.sky * sum
}

// at is the light at a depth share as the slab wants it.
func (e endless) at(top, bottom float64) Arriving {
	zenith := math.Pi/2 - e.sun
	a := Arriving{Elevation: e.sun, Path: 1 / math.Sin(e.sun), Normal: e.beam / math.Sin(e.sun)}
	for i, s := range []float64{top, bottom} {
		a.Chance[i], a.Through[i], a.Sky[i] = math.Exp(-s*e.depth(zenith, false)), math.Exp(-s*e.depth(zenith, true)), e.skyAt(s)
	}
	return a
}

// slabs splits the canopy evenly and sums what every slab gains and takes.
func (e endless) slabs(n int) (gross, leaves, wood float64) {
	s := Slab{Leaves: append([]Foliage(nil), e.leaves...), Wood: e.wood / float64(n)}
	for i := range s.Leaves {
		s.Leaves[i].LAI /= float64(n)
	}
	var g Gain
	for i := range n {
		a := e.at(float64(i)/float64(n), float64(i+1)/float64(n))
		s.Take(&a, &g)
		gross, leaves, wood = gross+g.Gross, leaves+g.Leaves, wood+g.Wood
	}
	return gross, leaves, wood
}

// cases over leaf area, clumping, leaf angle, sun and share of beam.
func gainCases() map[string]endless {
	out := map[string]endless{
		"one kind":       {[]Foliage{foliage(4, 1, 1, 0.85)}, 0, 0.9, 900, 300},
		"clumped":        {[]Foliage{foliage(6, 1, 0.5, 0.85)}, 0, 0.6, 700, 250},
		"flat leaves":    {[]Foliage{foliage(3, 3, 0.8, 0.85)}, 0, 1.2, 1300, 200},
		"upright leaves": {[]Foliage{foliage(5, 0.5, 0.9, 0.85)}, 0, 0.4, 400, 150},
		"wood":           {[]Foliage{foliage(4, 2.1, 0.7, 0.85)}, 0.8, 1.0, 1000, 300},
		"two kinds":      {[]Foliage{foliage(3, 2.1, 0.7, 0.85), foliage(2, 1, 0.5, 0.8)}, 0.5, 0.8, 900, 300},
		"low sun":        {[]Foliage{foliage(4, 1, 0.8, 0.85)}, 0.3, 0.09, 20, 60},
		"sky alone":      {[]Foliage{foliage(8, 2.1, 0.7, 0.85)}, 0.6, 0.8, 0, 500},
		"thin":           {[]Foliage{foliage(1, 2.1, 0.6, 0.85)}, 0.2, 1.3, 1500, 200},
		"black leaves":   {[]Foliage{foliage(4, 1, 1, 1)}, 0, 0.9, 900, 300},
	}
	return out
}

// Absorbed and transmitted light are what arrived, in every stack of slabs, clumped, mixed and with wood.
func TestGainConservesLight(t *testing.T) {
	worst := 0.0
	for name, e := range gainCases() {
		for _, n := range []int{1, 7, 40} {
			_, leaves, wood := e.slabs(n)
			arrived := e.beam + e.skyAt(0)
			a := e.at(0, 1)
			through := e.beam*a.Through[1] + a.Sky[1]
			off := math.Abs((leaves+wood+through)/arrived - 1)
			worst = math.Max(worst, off)
			if off > 0.001 {
				t.Errorf("%s in %d slabs: %.3f absorbed and %.3f through of %.3f", name, n, leaves+wood, through, arrived)
			}
		}
	}
	t.Logf("worst %.1e of the light that arrived", worst)
}

// One thick layer split finer and finer converges: 40 slabs are within 0.2 % of 160.
func TestGainConverges(t *testing.T) {
	for name, e := range gainCases() {
		fine, _, _ := e.slabs(160)
		line := ""
		for _, n := range []int{1, 5, 10, 20, 40, 80} {
			x, _, _ := e.slabs(n)
			line += fmt.Sprintf(" %+.2f %%", 100*(x/fine-1))
			if n == 40 && math.Abs(x/fine-1) > 0.002 {
				t.Errorf("%s: 40 slabs give %.4f, 160 give %.4f", name, x, fine)
			}
		}
		t.Logf("%-14s 1, 5, 10, 20, 40, 80 slabs against 160:%s", name, line)
	}
}

// No light, no gain; more light never gains less.
func TestGainFollowsLight(t *testing.T) {
	dark := endless{[]Foliage{foliage(4, 2.1, 0.7, 0.85)}, 0.5, 0.8, 0, 0}
	if x, leaves, wood := dark.slabs(5); x != 0 || leaves != 0 || wood != 0 {
		t.Errorf("gain %g, absorbed %g and %g in the dark", x, leaves, wood)
	}
	for name, e := range gainCases() {
		last := -1.0
		for _, k := range []float64{0, 0.1, 0.5, 1, 2} {
			f := e
			f.beam, f.sky = k*e.beam, k*e.sky
			x, _, _ := f.slabs(10)
			if x < last {
				t.Errorf("%s: %.4f at %g times the light, %.4f at less", name, x, k, last)
			}
			last = x
		}
	}
}

func BenchmarkGainSlab(b *testing.B) {
	e := gainCases()["two kinds"]
	s := Slab{Leaves: e.leaves, Wood: e.wood}
	a := e.at(0, 0.1)
	var g Gain
	b.ReportAllocs()
	for b.Loop() {
		s.Take(&a, &g)
	}
}
