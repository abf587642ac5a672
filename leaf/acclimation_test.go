package leaf

import (
	"math"
	"strings"
	"testing"
)

// Northern red oak, New Hampshire light response curves: upper and lower crown (see testdata/leaf).
var (
	oakSun   = Set{Ag: 15.04, Rd: 1.22, Phi: 0.0512, Theta: 0.78, LMA: 84.3}
	oakShade = Set{Ag: 6.60, Rd: 0.46, Phi: 0.0418, Theta: 0.86, LMA: 49.7}
)

func TestTwoSetsLieBetweenTheirEnds(t *testing.T) {
	two, err := NewTwoSets(TwoSets{Sun: oakSun, Shade: oakShade, SunLight: 50, ShadeLight: 5})
	if err != nil {
		t.Fatal(err)
	}
	for _, c := range []struct {
		light float64
		want  Set
	}{{50, oakSun}, {100, oakSun}, {1e9, oakSun}, {5, oakShade}, {1, oakShade}, {-3, oakShade}, {0, oakShade}} {
		if got := two.At(c.light); got != c.want {
			t.Errorf("at %g %%: %+v, want %+v", c.light, got, c.want)
		}
	}
	near(t, "halfway in the logarithm", two.At(math.Sqrt(5*50)).Ag, (oakSun.Ag+oakShade.Ag)/2, 1e-12)
	last := -1.0
	for l := 0.5; l < 200; l *= 1.1 {
		s := two.SunShare(l)
		if s < 0 || s > 1 || s < last {
			t.Errorf("share %g at %g %%", s, l)
		}
		last = s
	}
}

func TestPowerLawGivesItsReferenceAndLevelsOff(t *testing.T) {
	for _, ref := range []float64{1, 5, 20, 50, 80, 100} {
		p, err := NewPowerLaw(PowerLaw{Ref: oakSun, RefLight: ref, LMA: 0.25, Amax: 0.25, Rd: 0.35})
		if err != nil {
			t.Fatal(err)
		}
		at := p.At(ref)
		near(t, "Ag at the reference light", at.Ag, oakSun.Ag, 1e-14)
		near(t, "LMA at the reference light", at.LMA, oakSun.LMA, 1e-14)
		if p.At(50) != p.At(100) || p.At(0.2) != p.At(1) {
			t.Errorf("reference %g: not held above 50 or below 1 %%", ref)
		}
	}
	p := PowerLaw{Ref: oakSun, RefLight: 50, LMA: 0.25, Amax: 0.25, Rd: 0.35}
	s := p.At(5)
	r := math.Pow(0.1, 0.25)
	near(t, "LMA", s.LMA, 84.3*r, 1e-14)
	near(t, "net Amax", s.Amax(), 13.82*r, 1e-12)
	near(t, "Rd", s.Rd, 1.22*math.Pow(r, 1.4), 1e-12)
	if s.Phi != oakSun.Phi || s.Theta != oakSun.Theta {
		t.Error("the slope or the curvature changed")
	}
}

func TestRulesPrintTheirNumbers(t *testing.T) {
	for _, c := range []struct {
		a    Acclimation
		want []string
	}{
		{Constant{oakSun}, []string{"13.8", "1.22", "84.3"}},
		{TwoSets{oakSun, oakShade, 50, 5}, []string{"50", "5 %", "logarithm"}},
		{PowerLaw{oakSun, 50, 0.25, 0.25, 0.35}, []string{"0.25", "0.35", "50 %"}},
	} {
		for _, w := range c.want {
			if !strings.Contains(c.a.Rule(), w) {
				t.Errorf("%q does not tell %q", c.a.Rule(), w)
			}
		}
	}
}

func TestBadTraitsAreRefused(t *testing.T) {
	change := func(f func(*Set)) Set { s := oakSun; f(&s); return s }
	for want, s := range map[string]Set{
		"positive cost":   change(func(s *Set) { s.Rd = -1 }),
		"above 0":         change(func(s *Set) { s.Ag = 1 }),
		"0.125":           change(func(s *Set) { s.Phi = 0.2 }),
		"0 to 1":          change(func(s *Set) { s.Theta = 1.1 }),
		"leaf mass":       change(func(s *Set) { s.LMA = 0 }),
		"finite":          change(func(s *Set) { s.Ag = math.NaN() }),
		"a finite number": change(func(s *Set) { s.LMA = math.Inf(1) }),
	} {
		if _, err := NewConstant(s); err == nil || !strings.Contains(err.Error(), want) {
			t.Errorf("%+v: got error %v, want one that says %q", s, err, want)
		}
	}
	if _, err := NewTwoSets(TwoSets{oakSun, oakShade, 5, 50}); err == nil {
		t.Error("a shade light above the sun light passed")
	}
	if _, err := NewPowerLaw(PowerLaw{oakSun, 0.5, 0.25, 0.25, 0.25}); err == nil {
		t.Error("a growth light below 1 % passed")
	}
}

func TestTemperatureResponse(t *testing.T) {
	temp, err := NewTemperature(25, 25, 18, 2)
	if err != nil {
		t.Fatal(err)
	}
	if temp.At(oakSun, 25) != oakSun {
		t.Error("the set changes at its own temperature")
	}
	near(t, "Ag one width off", temp.At(oakSun, 43).Ag, oakSun.Ag/math.E, 1e-14)
	near(t, "Ag is even about the optimum", temp.AgFactor(7), temp.AgFactor(43), 1e-14)
	near(t, "Rd ten degrees up", temp.At(oakSun, 35).Rd, 2*oakSun.Rd, 1e-14)
	if s := temp.At(oakSun, 5); s.Phi != oakSun.Phi || s.Theta != oakSun.Theta || s.LMA != oakSun.LMA {
		t.Error("slope, curvature or LMA follows temperature")
	}
	for _, bad := range []Temperature{{25, 25, 0, 2, 0}, {25, 25, 18, 0, 0}, {90, 25, 18, 2, 0}, {25, 25, 18, 2, 9}, {math.NaN(), 25, 18, 2, 0}} {
		if bad.Check() == nil {
			t.Errorf("%+v passed", bad)
		}
	}
}

func TestRespirationMeasuredElsewhereComesToTheReference(t *testing.T) {
	temp := Temperature{Ref: 25, Opt: 25, Width: 18, Q10: 2}
	s, err := temp.Set(Measured{Amax: 8, Rd: 1, RdTemp: 35, Phi: 0.05, Theta: 0.8, LMA: 60})
	if err != nil {
		t.Fatal(err)
	}
	near(t, "Rd", s.Rd, 0.5, 1e-14)
	near(t, "Ag", s.Ag, 8.5, 1e-14)
	near(t, "there and back", temp.At(s, 35).Rd, 1, 1e-14)
}

func BenchmarkAt(b *testing.B) {
	two := TwoSets{Sun: oakSun, Shade: oakShade, SunLight: 50, ShadeLight: 5}
	power := PowerLaw{oakSun, 50, 0.25, 0.25, 0.35}
	b.Run("two sets", func(b *testing.B) {
		for b.Loop() {
			sink += two.At(12).Ag
		}
	})
	b.Run("power law", func(b *testing.B) {
		for b.Loop() {
			sink += power.At(12).Ag
		}
	})
}

func TestTheClampThatAppliedIsTold(t *testing.T) {
	two := TwoSets{oakSun, oakShade, 50, 5}
	power := PowerLaw{oakSun, 50, 0.25, 0.25, 0.35}
	for _, c := range []struct {
		a     Acclimation
		light float64
		want  string // what follows the rule
	}{
		{two, 20, ""}, {two, 3, "; the shade set as it stands"}, {two, 80, "; the sun set as it stands"},
		{two, 0.4, "; 0.4 % taken as 1 %; the shade set as it stands"}, {power, 20, ""}, {power, 70, "; as at 50 %"},
		{power, 105, "; 105 % taken as 100 %; as at 50 %"}, {Constant{oakSun}, 0.5, "; 0.5 % taken as 1 %"},
	} {
		if got := Applied(c.a, c.light); got != c.a.Rule()+c.want {
			t.Errorf("at %g: %q, want the rule and %q", c.light, got, c.want)
		}
	}
}
