package report

import (
	"fmt"
	"math"
	"strings"
	"testing"

	"shadeledger/leaf/traits"
)

// Two species measured at different temperatures are held against each other at one, by the formulas of June et al. and of a constant Q10 written out.
func TestComparedAtOneTemperature(t *testing.T) {
	oak, err := traits.Find("Quercus rubra")
	if err != nil {
		t.Fatal(err)
	}
	maple, err := traits.Find("Acer rubrum")
	if err != nil {
		t.Fatal(err)
	}
	if a, b := named(oak, "t_ref").Value, named(maple, "t_ref").Value; a == b || a == 25 {
		t.Fatalf("measured at %g and %g C: the test needs two temperatures", a, b)
	}
	var b strings.Builder
	if err := CompareSpecies(Output{Out: &b}, oak, maple); err != nil {
		t.Fatal(err)
	}
	for _, s := range []*traits.Species{oak, maple} {
		get := func(name string) float64 { return named(s, name).Value }
		warm := func(T float64) float64 { return math.Exp(-math.Pow((T-get("t_opt"))/get("t_width"), 2)) }
		rd := get("rd") * math.Pow(get("q10"), (25-get("t_ref"))/10)
		amax := (get("amax")+get("rd"))*warm(25)/warm(get("t_ref")) - rd
		for name, want := range map[string]float64{"amax": amax, "rd": rd} {
			got := atCommon(s, name)
			if math.Abs(got.Value/want-1) > 1e-9 || got.Low > got.Value || got.High < got.Value {
				t.Errorf("%s of %s: %+v, want %g", name, s.Botanical, got, want)
			}
			if !strings.Contains(b.String(), sig(want, 3)+" (") {
				t.Errorf("the table does not show %s of %s at 25 C, %s:\n%s", name, s.Botanical, sig(want, 3), b.String())
			}
		}
		shade := grownAt(s, shadeGrown, 25)
		if ref := s.SeedlingAcclimation().At(shadeGrown); math.Abs(shade.Rd/ref.Rd-rd/get("rd")) > 1e-9 {
			t.Errorf("%s: shade leaves respire %g at 25 C, %g at %g", s.Botanical, shade.Rd, ref.Rd, get("t_ref"))
		}
		row := fmt.Sprintf("%.3g", get("t_ref"))
		if !strings.Contains(b.String(), row) {
			t.Errorf("the table does not say that %s was measured at %s C", s.Botanical, row)
		}
	}
	if !strings.Contains(b.String(), "Net assimilation at 25 C") {
		t.Error("the plot does not say its temperature")
	}
}

// Ranges of a shade set are taken below the geometric mean of the two growth lights, and only where there is a shade set.
func TestShaded(t *testing.T) {
	pine, err := traits.Find("Pinus strobus")
	if err != nil {
		t.Fatal(err)
	}
	between := math.Sqrt(named(pine, "growth_light").Value * named(pine, "shade_growth_light").Value)
	if !shaded(pine, 0.99*between) || shaded(pine, 1.01*between) {
		t.Errorf("shade and sun do not part at %g %%", between)
	}
	larch, err := traits.Find("Larix decidua")
	if err != nil || larch.Paired() || shaded(larch, 1) {
		t.Error("a species without a shade set has shade ranges", err)
	}
}
