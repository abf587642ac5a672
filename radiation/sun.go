package radiation

import (
	"math"
	"time"
)

// SolarConstant is the energy of sunlight at 1 AU, W m-2: 1361 +- 0.5 (Kopp & Lean 2011,
// Geophys. Res. Lett. 38:L01706).
const SolarConstant = 1361.0

const (
	deg     = math.Pi / 180
	j2000   = 2451545.0 // JD of 2000 January 1.5 TT (Meeus 1998)
	century = 36525.0
	// equatorial horizontal parallax of the sun at 1 AU, 8.794 arcsec (IAU 1976; Meeus 1998 ch. 40)
	parallax = 8.794 / 3600 * deg
)

// Ephemeris is where the sun is seen from the centre of the Earth at one instant.
type Ephemeris struct {
	sinDec, cosDec float64
	ra             float64 // apparent right ascension, rad
	gast           float64 // apparent sidereal time at Greenwich, rad
	Declination    float64 // apparent, rad
	EquationOfTime float64 // rad, apparent minus mean solar time
	Distance       float64 // AU
}

// At gives the sun's geocentric place at a real instant, 1950-2100, to better than 0.003 deg:
// mean elements and equation of the centre of Meeus (1998) ch. 25, with the planetary and lunar terms of
// Meeus (1988) ch. 18 and the leading nutation of Meeus (1998) ch. 22.
func At(t time.Time) Ephemeris {
	return atJulian(2440587.5 + float64(t.UnixNano())/86400e9)
}

// atJulian is At for a Julian date in UT.
func atJulian(jd float64) Ephemeris {
	T := (jd + deltaT(jd)/86400 - j2000) / century // Meeus 1998 eq. 25.1, in TT
	// mean longitude, mean anomaly, eccentricity: eqs 25.2-25.4
	L0 := 280.46646 + T*(36000.76983+T*0.0003032)
	M := (357.52911 + T*(35999.05029-T*0.0001537)) * deg
	e := 0.016708634 - T*(0.000042037+T*0.0000001267)
	sM, cM := math.Sincos(M)
	s2M := 2 * sM * cM
	s3M := sM * (3 - 4*sM*sM)
	C := (1.914602-T*(0.004817+T*0.000014))*sM + (0.019993-0.000101*T)*s2M + 0.000289*s3M // p. 164
	pull, stretch := perturbation(T + 1)
	ν := M + C*deg
	R := 1.000001018*(1-e*e)/(1+e*math.Cos(ν)) + stretch // eq. 25.5
	// nutation, Meeus 1998 p. 144, to 0.5 arcsec
	Ω := (125.04452 - 1934.136261*T) * deg
	L, Lm := 2*L0*deg, 2*(218.3165+481267.8813*T)*deg
	sΩ, cΩ := math.Sincos(Ω)
	Δψ := (-17.20*sΩ - 1.32*math.Sin(L) - 0.23*math.Sin(Lm) + 0.21*math.Sin(2*Ω)) / 3600 * deg
	Δε := (9.20*cΩ + 0.57*math.Cos(L) + 0.10*math.Cos(Lm) - 0.09*math.Cos(2*Ω)) / 3600 * deg
	ε := (23.4392911-T*(0.0130042+T*(1.64e-7-T*5.04e-7)))*deg + Δε // eq. 22.2
	λ := (L0+C+pull-20.4898/3600/R)*deg + Δψ                       // aberration: eq. 25.10
	sλ, cλ := math.Sincos(λ)
	sε, cε := math.Sincos(ε)
	sinδ := sε * sλ            // eq. 25.7
	α := math.Atan2(cε*sλ, cλ) // eq. 25.6
	D := jd - j2000
	Tu := D / century
	gmst := 280.46061837 + 360.98564736629*D + Tu*Tu*(0.000387933-Tu/38710000) // eq. 12.4
	E := math.Remainder((L0-0.0057183)*deg-α+Δψ*cε, 2*math.Pi)                 // eq. 28.1
	return Ephemeris{
		sinDec: sinδ, cosDec: math.Sqrt(1 - sinδ*sinδ), ra: α,
		gast:        math.Mod(gmst, 360)*deg + Δψ*cε,
		Declination: math.Asin(sinδ), EquationOfTime: E, Distance: R,
	}
}

// perturbation is the pull of Venus, Jupiter and the Moon on the sun's longitude (deg) and distance
// (AU); T is centuries from 1900 (Meeus 1988, Astronomical Formulae for Calculators, ch. 18, from memory;
// checked against an independent ephemeris in the tests).
func perturbation(T float64) (longitude, distance float64) {
	A := (153.23 + 22518.7541*T) * deg
	B := (216.57 + 45037.5082*T) * deg
	C := (312.69 + 32964.3577*T) * deg
	D := (350.74 + T*(445267.1142-0.00144*T)) * deg
	H := (353.40 + 65928.7155*T) * deg
	sA, cA := math.Sincos(A)
	sB, cB := math.Sincos(B)
	sC, cC := math.Sincos(C)
	sD, cD := math.Sincos(D)
	longitude = 0.00134*cA + 0.00154*cB + 0.00200*cC + 0.00179*sD
	distance = 1e-8 * (543*sA + 1575*sB + 1627*sC + 3076*cD + 927*math.Sin(H))
	return longitude, distance
}

// deltaT is TT - UT in seconds, 1950-2100 (Espenak & Meeus 2006, NASA/TP-2006-214141, polynomial
// expressions; from memory). An error of 10 s moves the sun by 0.0001 deg along the ecliptic.
func deltaT(jd float64) float64 {
	y := 2000 + (jd-2451544.5)/365.25
	switch {
	case y < 1961:
		t := y - 1950
		return 29.07 + t*(0.407+t*(-1.0/233+t/2547))
	case y < 1986:
		t := y - 1975
		return 45.45 + t*(1.067+t*(-1.0/260-t/718))
	case y < 2005:
		t := y - 2000
		return 63.86 + t*(0.3345+t*(-0.060374+t*(0.0017275+t*(0.000651814+t*0.00002373599))))
	case y < 2050:
		t := y - 2000
		return 62.92 + t*(0.32217+t*0.005589)
	}
	u := (y - 1820) / 100
	return -20 + 32*u*u - 0.5628*(2150-y)
}

// Horizontal brings a geocentric place to elevation and azimuth at a site: Meeus (1998) eqs 13.5, 13.6,
// with the sun's parallax in altitude. Refraction is not in it.
type Horizontal struct{ sinφ, cosφ, longitude float64 }

// NewHorizontal prepares a site.
func NewHorizontal(s Site) Horizontal {
	sφ, cφ := math.Sincos(s.Latitude)
	return Horizontal{sφ, cφ, s.Longitude}
}

// HourAngle is the sun's local hour angle, rad in -pi..pi, 0 at apparent noon.
func (h Horizontal) HourAngle(e Ephemeris) float64 {
	return math.Remainder(e.gast+h.longitude-e.ra, 2*math.Pi)
}

// Place is where the sun stands over the site.
func (h Horizontal) Place(e Ephemeris) Sun {
	H := h.HourAngle(e)
	sH, cH := math.Sincos(H)
	sinh := h.sinφ*e.sinDec + h.cosφ*e.cosDec*cH // eq. 13.6
	x := h.sinφ*e.cosDec*cH - h.cosφ*e.sinDec    // towards south
	y := e.cosDec * sH                           // towards west
	cosh := math.Sqrt(x*x + y*y)
	elevation := math.Atan2(sinh, cosh) - parallax/e.Distance*cosh
	azimuth := math.Atan2(y, x) + math.Pi // from north, clockwise
	if azimuth >= 2*math.Pi {
		azimuth -= 2 * math.Pi
	}
	return Sun{Elevation: elevation, Azimuth: azimuth, Distance: e.Distance}
}

// Position is the topocentric geometric place of the sun's centre at a real instant.
func Position(t time.Time, s Site) Sun { return NewHorizontal(s).Place(At(t)) }

// Blend is the ephemeris a share f of the way from a to b, less than a day apart. Over six hours its
// error is below 1e-4 deg.
func Blend(a, b Ephemeris, f float64) Ephemeris {
	wrap := func(x float64) float64 { return math.Remainder(x, 2*math.Pi) }
	δ := a.Declination + f*(b.Declination-a.Declination)
	sδ, cδ := math.Sincos(δ)
	return Ephemeris{
		sinDec: sδ, cosDec: cδ, Declination: δ,
		ra:             a.ra + f*wrap(b.ra-a.ra),
		gast:           a.gast + f*math.Mod(math.Mod(b.gast-a.gast, 2*math.Pi)+2*math.Pi, 2*math.Pi),
		EquationOfTime: a.EquationOfTime + f*(b.EquationOfTime-a.EquationOfTime),
		Distance:       a.Distance + f*(b.Distance-a.Distance),
	}
}
