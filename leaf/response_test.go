package leaf

import (
	"math"
	"math/rand/v2"
	"sort"
	"testing"
)

func near(t *testing.T, what string, got, want, relative float64) {
	t.Helper()
	if !(math.Abs(got-want) <= relative*math.Abs(want)) {
		t.Errorf("%s: got %.15g, want %.15g", what, got, want)
	}
}

func randomSet(r *rand.Rand) Set {
	rd := 0.05 + 3*r.Float64()
	return Set{Ag: rd + 0.5 + 30*r.Float64(), Rd: rd, Phi: 0.01 + 0.1*r.Float64(), Theta: 0.999 * r.Float64(), LMA: 20 + 200*r.Float64()}
}

func TestLawsOfTheLightResponse(t *testing.T) {
	r := rand.New(rand.NewPCG(1, 2))
	for range 2000 {
		s := randomSet(r)
		k := s.Response()
		if s.Net(0) != -s.Rd || k.Net(0) != -s.Rd {
			t.Fatalf("darkness gives %g, want -Rd = %g", s.Net(0), -s.Rd)
		}
		const small = 1e-7
		near(t, "initial slope", s.Gross(small)/small, s.Phi, 1e-7)
		near(t, "root at compensation point", s.Gross(s.CompensationPoint()), s.Rd, 1e-12)
		last := 0.0
		for i := 1.0; i < 3000; i *= 1.3 {
			g := s.Gross(i)
			if g <= last || g >= s.Ag*(1+1e-15) || g > s.Phi*i*(1+1e-15) {
				t.Fatalf("%+v at %g: %g after %g", s, i, g, last)
			}
			near(t, "kernel", k.Gross(i), g, 1e-14)
			last = g
		}
		f := r.Float64()
		near(t, "light for a share", s.Gross(k.LightFor(f)), f*s.Ag, 1e-10)
	}
}

func TestLimitingCurvatures(t *testing.T) {
	for _, i := range []float64{1e-3, 1, 50, 199, 201, 2000} {
		near(t, "theta 0 is the rectangular hyperbola", Gross(i, 10, 0.05, 0), 0.05*i*10/(0.05*i+10), 1e-15)
		near(t, "theta 1 is the broken line", Gross(i, 10, 0.05, 1), math.Min(0.05*i, 10), 1e-15)
		near(t, "theta near 0", Gross(i, 10, 0.05, 1e-14), Gross(i, 10, 0.05, 0), 1e-12)
	}
}

func TestAShadeLeafInASunfleckGainsLessThanASunLeaf(t *testing.T) {
	// Red oak, upper and lower crown, New Hampshire light response curves (see testdata/leaf).
	sun := Set{Ag: 15.04, Rd: 1.22, Phi: 0.0512, Theta: 0.78, LMA: 84.3}
	shade := Set{Ag: 6.60, Rd: 0.46, Phi: 0.0418, Theta: 0.86, LMA: 49.7}
	const background, fleck = 10, 800
	if shade.Net(fleck)-shade.Net(background) >= sun.Net(fleck)-sun.Net(background) {
		t.Error("the shade leaf gains as much from a sunfleck as the sun leaf")
	}
	if shade.Net(background) <= sun.Net(background) {
		t.Error("the shade leaf does no better than the sun leaf in shade")
	}
}

// brute is the mean by many panels of five-point Gauss-Legendre, fine near 0 and where the curve bends.
func brute(r *Response, diffuse, normal float64) float64 {
	x := [...]float64{0, 0.5384693101056831, 0.9061798459386640}
	w := [...]float64{0.5688888888888889, 0.4786286704993665, 0.2369268850561891}
	edges := []float64{0}
	for m := 1e-9; m < 1; m *= 1.02 {
		edges = append(edges, m)
	}
	for i := range 400 {
		edges = append(edges, float64(i+1)/400)
	}
	kink := (r.ag/r.phi - diffuse) / normal
	for d := 1e-9; d < 1; d *= 1.05 {
		edges = append(edges, kink-d, kink+d)
	}
	sort.Float64s(edges)
	sum, last := 0.0, 0.0
	for _, e := range edges {
		if e <= last || e > 1 {
			continue
		}
		mid, half := (last+e)/2, (e-last)/2
		for i := range x {
			g := r.Gross(diffuse+normal*(mid+half*x[i])) + r.Gross(diffuse+normal*(mid-half*x[i]))
			if i == 0 {
				g /= 2
			}
			sum += w[i] * half * g
		}
		last = e
	}
	return sum
}

func TestMeanOverAnglesIsExact(t *testing.T) {
	r := rand.New(rand.NewPCG(3, 4))
	worst := 0.0
	for range 300 {
		s := randomSet(r)
		if r.IntN(10) == 0 {
			s.Theta = []float64{0, 0.9, 0.99, 0.999}[r.IntN(4)]
		}
		k := s.Response()
		diffuse, normal := math.Pow(10, -6+9*r.Float64()), math.Pow(10, -6+10*r.Float64())
		if r.IntN(5) == 0 {
			diffuse = 0
		}
		got, want := k.MeanGross(diffuse, normal), brute(&k, diffuse, normal)
		e := math.Abs(got-want) / want
		worst = math.Max(worst, e)
		if !(e <= 1e-9) {
			t.Errorf("%+v, %g + %g mu: got %.15g, want %.15g, off by %g", s, diffuse, normal, got, want, e)
		}
	}
	t.Logf("largest relative error %.2g", worst)
}

func TestMeanOverAnglesMeetsItsNarrowForm(t *testing.T) {
	k := Set{Ag: 10, Rd: 1, Phi: 0.05, Theta: 0.8}.Response()
	at := narrow * k.ag / k.phi
	for _, diffuse := range []float64{0, 1, 100, 200, 1000} {
		near(t, "join", k.MeanGross(diffuse, at*(1+1e-12)), k.MeanGross(diffuse, at*(1-1e-12)), 1e-9)
		near(t, "no beam", k.MeanGross(diffuse, 0), k.Gross(diffuse), 1e-14)
	}
}

func BenchmarkGross(b *testing.B) {
	sum, i := 0.0, 0.0
	for b.Loop() {
		i = math.Mod(i+37, 1500)
		sum += Gross(i, 10, 0.05, 0.8)
	}
	sink = sum
}

func BenchmarkResponseGross(b *testing.B) {
	k := Set{Ag: 10, Rd: 1, Phi: 0.05, Theta: 0.8}.Response()
	sum, i := 0.0, 0.0
	for b.Loop() {
		i += 1e-3
		sum += k.Gross(i)
	}
	sink = sum
}

func BenchmarkMeanGross(b *testing.B) {
	k := Set{Ag: 10, Rd: 1, Phi: 0.05, Theta: 0.8}.Response()
	sum, i := 0.0, 0.0
	for b.Loop() {
		i += 1e-3
		sum += k.MeanGross(20+i, 900)
	}
	sink = sum
}

var sink float64
