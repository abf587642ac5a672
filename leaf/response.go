package leaf

import "math"

// Gross is the non-rectangular hyperbola (Marshall & Biscoe 1980, J Exp Bot 31:29-39) without
// respiration, as the root that loses no digits at small theta or small light:
//
//	P = 2 phi I Ag / (S + sqrt(S^2 - 4 theta phi I Ag)),  S = phi I + Ag.
//
// The discriminant is taken as (phi I - Ag)^2 + 4 (1 - theta) phi I Ag, which is never negative.
// ppfd and ag in umol m-2 s-1, phi mol CO2 per incident photon, theta 0..1. No light: 0.
func Gross(ppfd, ag, phi, theta float64) float64 {
	x := phi * ppfd
	if x <= 0 {
		return 0
	}
	d := x - ag
	return 2 * x * ag / (x + ag + math.Sqrt(d*d+4*(1-theta)*ag*x))
}

// Response is a light response with its constants worked out once, for inner loops.
type Response struct {
	ag, rd, phi, theta float64
	twoAg, bend        float64 // 2 Ag and 4 (1 - theta) Ag
}

// Response of the set at its own reference temperature.
func (s Set) Response() Response {
	return Response{ag: s.Ag, rd: s.Rd, phi: s.Phi, theta: s.Theta, twoAg: 2 * s.Ag, bend: 4 * (1 - s.Theta) * s.Ag}
}

// Rd is dark respiration, umol CO2 m-2 s-1.
func (r Response) Rd() float64 { return r.rd }

// Gross is gross assimilation at incident PPFD, umol CO2 m-2 s-1, as the function Gross.
func (r Response) Gross(ppfd float64) float64 {
	x := r.phi * ppfd
	if x <= 0 {
		return 0
	}
	d := x - r.ag
	return x * r.twoAg / (x + r.ag + math.Sqrt(d*d+r.bend*x))
}

// Net is Gross less Rd, umol CO2 m-2 s-1.
func (r Response) Net(ppfd float64) float64 { return r.Gross(ppfd) - r.rd }

// CompensationPoint is the exact root of Net, Rd (Ag - theta Rd) / (phi (Ag - Rd)), umol m-2 s-1.
// Where Rd is not below Ag the leaf never reaches zero: +Inf.
func (r Response) CompensationPoint() float64 {
	if r.rd >= r.ag {
		return math.Inf(1)
	}
	return r.rd * (r.ag - r.theta*r.rd) / (r.phi * (r.ag - r.rd))
}

// LightFor is the PPFD at which gross assimilation is the share f (0 <= f < 1) of Ag, the
// hyperbola turned round: f Ag (1 - theta f) / (phi (1 - f)), umol m-2 s-1.
func (r Response) LightFor(share float64) float64 {
	return share * r.ag * (1 - r.theta*share) / (r.phi * (1 - share))
}

// narrow is the span of light, as a share of Ag / phi, under which the mean is taken by
// quadrature: the exact integral would lose digits.
const narrow = 1e-4

// MeanGross is <P(Id + In mu)> for mu uniform on 0..1, the cosine of incidence on leaves of
// spherical distribution: exact, since with u = P/Ag, x = phi I = Ag u (1 - theta u)/(1 - u) and
//
//	int (x - x0) dP = Ag^2 [theta u^2/2 - (1 - theta)(u + ln(1 - u))] - x0 P,
//	<P> = P1 - int (x - x0) dP / (x1 - x0).
//
// Relative error below 1e-9 for theta <= 0.999. diffuse >= 0 and normal >= 0 in umol m-2 s-1.
func (r Response) MeanGross(diffuse, normal float64) float64 {
	dx := r.phi * normal
	if dx <= narrow*r.ag {
		return r.meanNarrow(diffuse, normal)
	}
	p0, p1 := r.Gross(diffuse), r.Gross(diffuse+normal)
	x0 := r.phi * diffuse
	u0, u1 := p0/r.ag, p1/r.ag
	rest0, rest1 := r.unsaturated(x0), r.unsaturated(x0+dx)
	du := dx * rest1 / (r.ag + x0 - r.theta*(p0+p1))
	area := r.theta * du * (u0 + u1) / 2
	switch {
	case r.theta >= 1:
	case du < 0.5*rest0:
		area -= (1 - r.theta) * (du + math.Log1p(-du/rest0))
	default:
		area -= (1 - r.theta) * (du + math.Log(rest1/rest0))
	}
	return p1 - r.ag*(r.ag*area-x0*du)/dx
}

// unsaturated is 1 - P/Ag at x = phi I, without loss near saturation.
func (r Response) unsaturated(x float64) float64 {
	d := x - r.ag
	root := math.Sqrt(d*d + r.bend*x)
	if d <= 0 {
		return (root - d) / (x + r.ag + root)
	}
	return r.bend * x / ((x + r.ag + root) * (root + d))
}

// meanNarrow is the three-point Gauss-Legendre mean.
func (r Response) meanNarrow(diffuse, normal float64) float64 {
	const half = 0.38729833462074168852 // sqrt(3/5)/2
	mid := r.Gross(diffuse + 0.5*normal)
	ends := r.Gross(diffuse+(0.5-half)*normal) + r.Gross(diffuse+(0.5+half)*normal)
	return (8*mid + 5*ends) / 18
}
