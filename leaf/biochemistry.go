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

// peaked is the Arrhenius response with deactivation, over that at 25 deg C; energies in J mol-1, entropy in J mol-1 K-1.
func peaked(activation, entropy, celsius float64) float64 {
	const (
		R            = 1000 * gasConstant
		deactivation = 200000
		T25          = 25 + kelvin
	)
	T := celsius + kelvin
	rise := math.Exp(activation * (T - T25) / (T25 * R * T))
	return rise * (1 + math.Exp((T25*entropy-deactivation)/(T25*R))) / (1 + math.Exp((T*entropy-deactivation)/(T*R)))
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

// capacity is the apparatus at a temperature.
type capacity struct {
	vcmax, rd      float64
	electrons      float64 // J, at the light
	gamma, rubisco float64 // compensation point without respiration; Kc (1 + O/Ko), ppm
}

func (b Biochemistry) at(a Air) capacity {
	T := a.Temperature
	return capacity{vcmax: b.Vcmax * b.Heat.vcmax(T), rd: b.Rd * b.Heat.rd(T), electrons: Electrons(driven(a.PPFD), b.Jmax*b.Heat.jmax(T)), gamma: compensation.at(T),
		rubisco: michaelis(T)}
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

// Limits of a reading: ci in ppm, ppfd in umol m-2 s-1, deg C.
func Limits(ci, ppfd, celsius float64, heat Heat) Limit {
	gamma := compensation.at(celsius)
	return Limit{
		Rubisco:   heat.vcmax(celsius) * (ci - gamma) / (ci + michaelis(celsius)),
		Electrons: (ci - gamma) / (4 * (ci + 2*gamma)), Light: driven(ppfd), Jmax: heat.jmax(celsius), Rd: heat.rd(celsius),
	}
}

// gross is carboxylation, the slower of what Rubisco and electron transport drive, less photorespiration; below gamma it is negative.
func (c capacity) gross(ci float64) float64 {
	return math.Min(c.vcmax/(ci+c.rubisco), c.electrons/4/(ci+2*c.gamma)) * (ci - c.gamma)
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

// within finds the CO2 in the leaf with a residual conductance.
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
	gamma := compensation.at(celsius)
	return absorbed * (1 - lost) / 2 / 4 * (ci - gamma) / (ci + 2*gamma)
}
