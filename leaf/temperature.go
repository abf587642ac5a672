package leaf

import (
	"fmt"
	"math"
)

// Temperature is how rates follow leaf temperature (deg C). Phi and Theta do not change.
type Temperature struct {
	Ref         float64 // T_ref of every Set
	Opt         float64 // T_opt (June, Evans & Farquhar 2004)
	Width       float64 // w of the same, deg C, > 0
	Q10         float64 // of leaf respiration, used by ConstantQ10
	Respiration RespirationCurve
}

// RespirationCurve is the shape of leaf respiration over temperature.
type RespirationCurve int

// The curves.
const (
	// ConstantQ10 is Rd = Rd_ref Q10^((T - T_ref)/10).
	ConstantQ10 RespirationCurve = iota
	// Heskel is ln Rd = a + 0.1012 T - 0.0005 T^2 (Heskel et al. 2016, PNAS 113:3832-3837), the
	// mean curve of 231 species, whose Q10 falls as leaves warm. Measured 10..45 deg C.
	Heskel
	// Tjoelker is a Q10 of 3.22 - 0.046 (T + T_ref)/2 (Tjoelker, Oleksyn & Reich 2001, Global
	// Change Biol 7:223-230).
	Tjoelker
	// Arrhenius is exp(18.72 - 46.39/(R T)), kJ mol-1 (Bernacchi et al. 2001, Plant Cell Environ. 24:253-259): that of a biochemical leaf
	// whose capacities do not acclimate.
	Arrhenius
)

// Coefficients of Heskel et al. (2016): per deg C and per deg C squared.
const (
	heskelLinear = 0.1012
	heskelSquare = -0.0005
)

// NewTemperature checks the numbers of a temperature response with a constant Q10.
func NewTemperature(ref, opt, width, q10 float64) (Temperature, error) {
	t := Temperature{Ref: ref, Opt: opt, Width: width, Q10: q10}
	return t, t.Check()
}

// Check tells what is out of range: Ref -10..50, Opt 5..50, Width 4..60 deg C, Q10 1..4.
func (t Temperature) Check() error {
	for _, c := range []struct {
		name         string
		v, low, high float64
	}{
		{"reference temperature", t.Ref, -10, 50}, {"temperature optimum", t.Opt, 5, 50},
		{"temperature width", t.Width, 4, 60}, {"q10 of leaf respiration", t.Q10, 1, 4},
	} {
		if !(c.v >= c.low && c.v <= c.high) {
			return fmt.Errorf("%s is %g; it must be %g to %g", c.name, c.v, c.low, c.high)
		}
	}
	if t.Respiration < ConstantQ10 || t.Respiration > Arrhenius {
		return fmt.Errorf("respiration curve %d is not known; it must be ConstantQ10, Heskel, Tjoelker or Arrhenius", t.Respiration)
	}
	return nil
}

// AgFactor is Ag(T)/Ag(T_ref) = f(T)/f(T_ref), f = exp(-((T - T_opt)/w)^2)
// (June, Evans & Farquhar 2004, Funct Plant Biol 31:275-283).
func (t Temperature) AgFactor(celsius float64) float64 {
	a, b := (celsius-t.Opt)/t.Width, (t.Ref-t.Opt)/t.Width
	return math.Exp(b*b - a*a)
}

// Warmth is Ag at a temperature over that at the optimum.
func (t Temperature) Warmth(celsius float64) float64 {
	a := (celsius - t.Opt) / t.Width
	return math.Exp(-a * a)
}

// RdFactor is Rd(T)/Rd(T_ref) by the curve chosen.
func (t Temperature) RdFactor(celsius float64) float64 { return t.rdFrom(t.Ref, celsius) }

func (t Temperature) rdFrom(from, to float64) float64 {
	switch t.Respiration {
	case Heskel:
		return math.Exp((to - from) * (heskelLinear + heskelSquare*(to+from)))
	case Tjoelker:
		return math.Pow(3.22-0.046*(to+from)/2, (to-from)/10)
	case Arrhenius:
		return breathHeat.at(to) / breathHeat.at(from)
	}
	return math.Exp(math.Log(t.Q10) * (to - from) / 10)
}

// At is the set at a leaf temperature: Ag and Rd change, the rest stays.
func (t Temperature) At(s Set, celsius float64) Set {
	s.Ag *= t.AgFactor(celsius)
	s.Rd *= t.RdFactor(celsius)
	return s
}

// Response is the light response of the set at a leaf temperature.
func (t Temperature) Response(s Set, celsius float64) Response { return t.At(s, celsius).Response() }

// Measured is a leaf as studies print it: net saturated rate at T_ref and dark respiration at its
// own temperature.
type Measured struct {
	Amax   float64 // net, umol CO2 m-2 s-1 at T_ref
	Rd     float64 // positive, umol CO2 m-2 s-1
	RdTemp float64 // deg C of Rd
	Phi    float64
	Theta  float64
	LMA    float64
}

// Set brings the measured respiration to T_ref and adds it to the net rate: Ag = Amax + Rd, both at T_ref.
func (t Temperature) Set(m Measured) (Set, error) {
	rd := m.Rd * t.rdFrom(m.RdTemp, t.Ref)
	s := Set{Ag: m.Amax + rd, Rd: rd, Phi: m.Phi, Theta: m.Theta, LMA: m.LMA}
	return s, s.Check()
}

// LightRespiration is respiration in the light over that in the dark, 0.5 - 0.05 ln I above
// 10 umol m-2 s-1 and 1 below (Brooks & Farquhar 1985, Planta 165:397-406, as parameterised by
// Lloyd et al. 1995). It never falls below 0.
func LightRespiration(ppfd float64) float64 {
	if ppfd <= 10 {
		return 1
	}
	return math.Max(0, 0.5-0.05*math.Log(ppfd))
}
