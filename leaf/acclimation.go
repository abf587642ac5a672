package leaf

import (
	"fmt"
	"math"
)

// Range of growth light, percent of full light, and the light above which leaves change no more
// (Bond et al. 1999, Oecologia 120:183-192: physiology levels off near 50 % of full sun).
const (
	darkest  = 1.0
	fullest  = 100.0
	levelOff = 50.0
)

// ClampLight brings growth light into 1..100 percent.
func ClampLight(light float64) float64 { return math.Max(darkest, math.Min(fullest, light)) }

// Constant is one set whatever the growth light.
type Constant struct{ Set Set }

// NewConstant checks the set.
func NewConstant(s Set) (Constant, error) { return Constant{s}, s.Check() }

// At is the set.
func (c Constant) At(float64) Set { return c.Set }

// Rule names the rule.
func (c Constant) Rule() string {
	return fmt.Sprintf("one leaf trait set at every growth light (Amax %.3g, Rd %.3g, LMA %.3g)", c.Set.Amax(), c.Set.Rd, c.Set.LMA)
}
func (Constant) acclimation() {}

// TwoSets lies between a shade and a sun set, linear in the logarithm of growth light:
// s = clamp[(ln L - ln L_shade)/(ln L_sun - ln L_shade), 0, 1], p = p_shade + s (p_sun - p_shade)
// for Ag, Rd, LMA, Phi and Theta.
type TwoSets struct {
	Sun, Shade           Set
	SunLight, ShadeLight float64 // percent of full light
}

// NewTwoSets checks both sets and their lights, 1 <= shade < sun <= 100.
func NewTwoSets(t TwoSets) (TwoSets, error) {
	if err := t.Sun.Check(); err != nil {
		return t, fmt.Errorf("sun set: %w", err)
	}
	if err := t.Shade.Check(); err != nil {
		return t, fmt.Errorf("shade set: %w", err)
	}
	if !(t.ShadeLight >= darkest && t.SunLight <= fullest && t.ShadeLight < t.SunLight) {
		return t, fmt.Errorf("growth lights are %g %% (shade) and %g %% (sun); shade must be below sun, both 1 to 100", t.ShadeLight, t.SunLight)
	}
	return t, nil
}

// SunShare is s of the rule, 0..1.
func (t TwoSets) SunShare(light float64) float64 {
	s := math.Log(ClampLight(light)/t.ShadeLight) / math.Log(t.SunLight/t.ShadeLight)
	return math.Max(0, math.Min(1, s))
}

// At is the set between the two.
func (t TwoSets) At(light float64) Set {
	s := t.SunShare(light)
	between := func(shade, sun float64) float64 { return shade + s*(sun-shade) }
	return Set{
		Ag: between(t.Shade.Ag, t.Sun.Ag), Rd: between(t.Shade.Rd, t.Sun.Rd),
		Phi: between(t.Shade.Phi, t.Sun.Phi), Theta: between(t.Shade.Theta, t.Sun.Theta),
		LMA: between(t.Shade.LMA, t.Sun.LMA), Cap: between(t.Shade.Cap, t.Sun.Cap),
	}
}

// Rule names the rule and its clamps.
func (t TwoSets) Rule() string {
	return fmt.Sprintf("between a shade set (%.3g %% light) and a sun set (%.3g %%), linear in the logarithm of growth light, held outside", t.ShadeLight, t.SunLight)
}
func (TwoSets) acclimation() {}

// PowerLaw carries one set measured at RefLight to other growth lights: with L and L_ref held at 50 % above it and r = L/L_ref,
// LMA ~ r^LMA, Amax (net) ~ r^Amax, Rd ~ r^Rd, Phi and Theta unchanged. At the reference light it gives the reference set. Of a biochemical
// set both capacities follow the exponent of Amax.
type PowerLaw struct {
	Ref           Set
	RefLight      float64 // percent of full light
	LMA, Amax, Rd float64 // exponents on light
}

// NewPowerLaw checks the set, the light 1..100 and the exponents 0..2.
func NewPowerLaw(p PowerLaw) (PowerLaw, error) {
	if err := p.Ref.Check(); err != nil {
		return p, err
	}
	for _, c := range []struct {
		name         string
		v, low, high float64
	}{
		{"growth light of the set", p.RefLight, darkest, fullest}, {"exponent of LMA on light", p.LMA, 0, 2},
		{"exponent of amax on light", p.Amax, 0, 2}, {"exponent of rd on light", p.Rd, 0, 2},
	} {
		if !(c.v >= c.low && c.v <= c.high) {
			return p, fmt.Errorf("%s is %g; it must be %g to %g", c.name, c.v, c.low, c.high)
		}
	}
	return p, nil
}

// At is the set grown at a light.
func (p PowerLaw) At(light float64) Set {
	r := math.Log(math.Min(ClampLight(light), levelOff) / math.Min(ClampLight(p.RefLight), levelOff))
	rate := math.Exp(p.Amax * r)
	s := Set{Rd: p.Ref.Rd * math.Exp(p.Rd*r), Phi: p.Ref.Phi, Theta: p.Ref.Theta, LMA: p.Ref.LMA * math.Exp(p.LMA*r)}
	if p.Ref.Cap > 0 {
		s.Ag, s.Cap = p.Ref.Ag*rate, p.Ref.Cap*rate
		return s
	}
	s.Ag = p.Ref.Amax()*rate + s.Rd
	return s
}

// Rule names the rule, its exponents and clamps.
func (p PowerLaw) Rule() string {
	return fmt.Sprintf("one set at %.3g %% light; LMA ~ light^%.3g, Amax ~ light^%.3g, Rd ~ light^%.3g, level above 50 %%", p.RefLight, p.LMA, p.Amax, p.Rd)
}
func (PowerLaw) acclimation() {}

// Applied is the rule together with the clamp that took hold at a growth light, for the list of assumptions.
func Applied(a Acclimation, light float64) string {
	note := a.Rule()
	if c := ClampLight(light); c != light {
		note += fmt.Sprintf("; %.3g %% taken as %.3g %%", light, c)
	}
	switch a := a.(type) {
	case TwoSets:
		switch a.SunShare(light) {
		case 0:
			note += "; the shade set as it stands"
		case 1:
			note += "; the sun set as it stands"
		}
	case PowerLaw:
		if light > levelOff {
			note += fmt.Sprintf("; as at %g %%", levelOff)
		}
	}
	return note
}
