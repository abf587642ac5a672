package leaf

import (
	"fmt"
	"math"
)

// Biochemistry is a leaf by its capacities: Farquhar, von Caemmerer & Berry (1980, Planta 149:78-90) with the optimal stomata of Medlyn et
// al. (2011, Glob. Change Biol. 17:2134-2144). Rates per hemisurface leaf area at 25 deg C.
type Biochemistry struct {
	Vcmax, Jmax, Rd float64 // umol m-2 s-1 at 25 deg C
	G1              float64 // slope of the stomata, kPa^0.5 (Lin et al. 2015, Nat. Clim. Change 5:459-464: 2.35 conifers, 4.45 deciduous broadleaves)
	G0              float64 // residual conductance to water, mol m-2 s-1
	Heat            Heat
}

// Heat says how capacities follow temperature.
type Heat interface {
	vcmax(celsius float64) float64 // over that at 25
	jmax(celsius float64) float64
	rd(celsius float64) float64
}

// Bernacchi is the temperature response of Bernacchi et al. (2001, Plant Cell Environ. 24:253-259; Jmax: 2003, 26:1419-1430), without acclimation.
type Bernacchi struct{}

// Acclimated is the response of Kattge & Knorr (2007, Plant Cell Environ. 30:1176-1190) to the temperature a leaf grew in, mean of the month before,
// deg C, 11 to 35; respiration after Heskel et al. (2016).
type Acclimated struct{ Growth float64 }

// NewAcclimated holds a growth temperature within the range of the study, 11 to 35 deg C.
func NewAcclimated(growth float64) Acclimated {
	return Acclimated{math.Max(11, math.Min(35, growth))}
}

// gasConstant, kJ mol-1 K-1 and in J.
const (
	gasConstant = 8.314e-3
	kelvin      = 273.15
)

// arrhenius is exp(c - Ha / (R T)), Ha in kJ mol-1.
type arrhenius struct{ c, activation float64 }

// Bernacchi et al. (2001, 2003); the first three in ppm, mmol mol-1 and ppm.
var (
	carboxylation = arrhenius{38.05, 79.43} // Kc
	oxygenation   = arrhenius{20.30, 36.38} // Ko
	compensation  = arrhenius{19.02, 37.83} // Gamma*
	rubiscoHeat   = arrhenius{26.35, 65.33} // Vcmax over that at 25
	electronHeat  = arrhenius{17.57, 43.54} // Jmax
	breathHeat    = arrhenius{18.72, 46.39} // Rd
)

func (a arrhenius) at(celsius float64) float64 {
	return math.Exp(a.c - a.activation/(gasConstant*(celsius+kelvin)))
}

// over25 is 1 at 25 deg C, where the printed constants give 0.995 to 1.005.
func (a arrhenius) over25(celsius float64) float64 { return a.at(celsius) / a.at(25) }

func (Bernacchi) vcmax(T float64) float64 { return rubiscoHeat.over25(T) }
func (Bernacchi) jmax(T float64) float64  { return electronHeat.over25(T) }
func (Bernacchi) rd(T float64) float64    { return breathHeat.over25(T) }

// deactivation energy of both capacities, J mol-1 (Kattge & Knorr 2007).
const deactivation = 200000

// peaked is the Arrhenius response with deactivation, over that at 25 deg C; energies in J mol-1, entropy in J mol-1 K-1.
func peaked(activation, entropy, celsius float64) float64 {
	const (
		R   = 1000 * gasConstant
		T25 = 25 + kelvin
	)
	T := celsius + kelvin
	rise := math.Exp(activation * (T - T25) / (T25 * R * T))
	return rise * (1 + math.Exp((T25*entropy-deactivation)/(T25*R))) / (1 + math.Exp((T*entropy-deactivation)/(T*R)))
}

// optimum of electron transport, deg C, where the derivative of the peaked response is zero (Medlyn et al. 2002, Plant Cell Environ. 25:1167-1179, eq. 19).
func (a Acclimated) optimum() float64 {
	entropy, activation := 659.70-0.75*a.Growth, 49884.0
	return deactivation/(entropy-1000*gasConstant*math.Log(activation/(deactivation-activation))) - kelvin
}

func (a Acclimated) vcmax(T float64) float64 { return peaked(71513, 668.39-1.07*a.Growth, T) }
func (a Acclimated) jmax(T float64) float64  { return peaked(49884, 659.70-0.75*a.Growth, T) }
func (a Acclimated) rd(T float64) float64 {
	return Temperature{Ref: 25, Respiration: Heskel}.RdFactor(T)
}

// Air is what the leaf works in.
type Air struct {
	PPFD        float64 // incident, umol m-2 s-1
	Temperature float64 // of the leaf, deg C
	CO2         float64 // of the air, ppm
	VPD         float64 // kPa; below 0.05 it is taken as that
	Pressure    float64 // of the air, kPa; 0 is 101.325
}

// StandardPressure is that of air at sea level, kPa.
const StandardPressure = 101.325

// PressureAt is the air pressure of the standard atmosphere, kPa, at metres above sea level, to 11 km (ISO 2533:1975).
func PressureAt(elevation float64) float64 {
	return StandardPressure * math.Pow(1-2.25577e-5*elevation, 5.25588)
}

// thinness is the pressure over the standard one.
func (a Air) thinness() float64 {
	if a.Pressure == 0 {
		return 1
	}
	return a.Pressure / StandardPressure
}

// Exchange is what the leaf does in it.
type Exchange struct {
	Net, Gross  float64 // umol CO2 m-2 s-1; net is gross less respiration
	Ci          float64 // CO2 within, ppm
	Conductance float64 // stomatal, to water, mol m-2 s-1
}

// Constants of the photosynthetic apparatus.
const (
	oxygen          = 210.0 // mmol mol-1
	absorbed        = 0.85  // share of incident PAR (common practice)
	lost            = 0.15  // absorbed by other than photosystems (Evans 1987)
	curvature       = 0.7   // of electron transport on light (Evans 1989)
	leastVPD        = 0.05  // kPa
	waterOverCarbon = 1.6   // conductance of water over carbon dioxide
)

// Check tells what is out of range.
func (b Biochemistry) Check() error {
	for _, c := range []struct {
		name         string
		v, low, high float64
	}{
		{"vcmax", b.Vcmax, 1, 300}, {"jmax", b.Jmax, 1, 600}, {"rd", b.Rd, 0, 15}, {"g1", b.G1, 0.5, 15}, {"g0", b.G0, 0, 0.2},
	} {
		if !(c.v >= c.low && c.v <= c.high) {
			return fmt.Errorf("%s is %g; it must be %g to %g", c.name, c.v, c.low, c.high)
		}
	}
	if b.Heat == nil {
		return fmt.Errorf("no temperature response: Bernacchi, or Acclimated to a growth temperature")
	}
	return nil
}

// capacity is the apparatus at a temperature and pressure.
type capacity struct {
	vcmax, rd float64
	electrons float64 // J, at the light
	enzymes
}

// enzymes are what photorespiration and the affinities of Rubisco make of CO2 at a temperature and pressure. Carbon dioxide and oxygen act by
// partial pressure, given as ppm of standard air: both shrink with the pressure, and with oxygen the compensation point.
type enzymes struct {
	gamma    float64 // compensation point without respiration, ppm of the air as it is
	rubisco  float64 // Kc (1 + O/Ko), ppm of standard air
	thinness float64
}

func enzymesAt(celsius, thinness float64) enzymes {
	return enzymes{compensation.at(celsius), carboxylation.at(celsius) * (1 + thinness*oxygen/oxygenation.at(celsius)), thinness}
}

// carboxylated is assimilation by Rubisco per Vcmax at a CO2 within, ppm.
func (e enzymes) carboxylated(ci float64) float64 {
	return e.thinness * (ci - e.gamma) / (e.thinness*ci + e.rubisco)
}

// regenerated is assimilation by electron transport per quarter electron at a CO2 within, ppm; the pressure does not matter.
func (e enzymes) regenerated(ci float64) float64 { return (ci - e.gamma) / (ci + 2*e.gamma) }

func (b Biochemistry) at(a Air) capacity {
	T := a.Temperature
	return capacity{vcmax: b.Vcmax * b.Heat.vcmax(T), rd: b.Rd * b.Heat.rd(T), electrons: Electrons(driven(a.PPFD), b.Jmax*b.Heat.jmax(T)),
		enzymes: enzymesAt(T, a.thinness())}
}

// driven is the electron transport that light alone would drive, umol m-2 s-1.
func driven(ppfd float64) float64 { return ppfd * absorbed * (1 - lost) / 2 }

// Electrons is electron transport, the smaller root of 0.7 J^2 - (x + Jmax) J + x Jmax = 0, of what light drives and the capacity, umol m-2 s-1.
func Electrons(x, jmax float64) float64 {
	if x <= 0 {
		return 0
	}
	s := x + jmax
	return 2 * x * jmax / (s + math.Sqrt(s*s-4*curvature*x*jmax))
}

// Limit is what CO2 within a leaf, light and temperature allow: gross assimilation is the lesser of Vcmax times Rubisco and of electron transport,
// from Light and Jmax times its heat factor, times Electrons; below the compensation point, where both are negative, the slower process gives the
// greater of the two. Net is that less Rd times its heat factor.
type Limit struct {
	Rubisco   float64 // per Vcmax at 25 deg C
	Electrons float64 // per electron
	Light     float64 // electrons that the light drives, umol m-2 s-1
	Jmax, Rd  float64 // over those at 25 deg C
}

// Limits of a reading at a CO2 within, ppm, in air whose light, leaf temperature and pressure are known.
func Limits(ci float64, a Air, heat Heat) Limit {
	T, e := a.Temperature, enzymesAt(a.Temperature, a.thinness())
	return Limit{Rubisco: heat.vcmax(T) * e.carboxylated(ci), Electrons: e.regenerated(ci) / 4, Light: driven(a.PPFD), Jmax: heat.jmax(T), Rd: heat.rd(T)}
}

// gross is carboxylation, the slower of what Rubisco and electron transport drive, less photorespiration; below gamma, where both are negative, the
// slower is the greater.
func (c capacity) gross(ci float64) float64 {
	byRubisco, byElectrons := c.vcmax*c.carboxylated(ci), c.electrons/4*c.regenerated(ci)
	if ci < c.gamma {
		return math.Max(byRubisco, byElectrons)
	}
	return math.Min(byRubisco, byElectrons)
}

// Assimilate solves assimilation and stomata together: A = min(Ac, Aj) - Rd, gs = g0 + 1.6 (1 + g1/sqrt(D)) A / Ca and A = gs/1.6 (Ca - Ci). Without g0
// the CO2 within is Ca g1/(g1 + sqrt(D)); with it, it is halved for until the two assimilations agree to 1e-9 of Ca in ppm. Where net
// assimilation is not positive stomata are at g0, or at that ratio where g0 is 0.
func (b Biochemistry) Assimilate(a Air) Exchange {
	c := b.at(a)
	open := b.G1 / math.Sqrt(math.Max(leastVPD, a.VPD))
	ci := a.CO2 * open / (1 + open)
	if b.G0 > 0 {
		ci = b.within(c, a.CO2, open)
	}
	e := Exchange{Gross: c.gross(ci), Ci: ci}
	e.Net = e.Gross - c.rd
	e.Conductance = b.G0 + waterOverCarbon*(1+open)*math.Max(0, e.Net)/a.CO2
	return e
}

// within finds the CO2 in the leaf with a residual conductance, up to three times that of the air.
func (b Biochemistry) within(c capacity, ca, open float64) float64 {
	excess := func(ci float64) float64 {
		net := c.gross(ci) - c.rd
		return net - (b.G0/waterOverCarbon+(1+open)*math.Max(0, net)/ca)*(ca-ci)
	}
	low, high := 1.0, 3*ca
	for range 100 {
		mid := (low + high) / 2
		if excess(mid) < 0 {
			low = mid
		} else {
			high = mid
		}
		if high-low < 1e-9*ca {
			break
		}
	}
	return (low + high) / 2
}

// QuantumYield is the slope of gross assimilation on incident light in darkness at a CO2 within, mol CO2 per mol.
func QuantumYield(ci, celsius float64) float64 {
	return driven(1) / 4 * enzymesAt(celsius, 1).regenerated(ci)
}
