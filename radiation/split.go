package radiation

import "math"

// PhotonsPerJoule is PAR photons per joule of PAR in daylight, umol J-1 (McCree 1972, Agric. Meteorol.
// 10:443-453; from memory; the ASTM G173-03 global spectrum gives 4.60).
const PhotonsPerJoule = 4.57

// ExtraterrestrialNormal is the energy on a plane facing the sun outside the atmosphere, W m-2, at a
// distance in AU.
func ExtraterrestrialNormal(distance float64) float64 { return SolarConstant / (distance * distance) }

// DiffuseShare is the diffuse share q of hourly global radiation at clearness kt in 0..1:
// Erbs, Klein & Duffie (1982) Solar Energy 28:293-302, eq. 1.
func DiffuseShare(kt float64) float64 {
	switch {
	case kt <= 0.22:
		return 1 - 0.09*kt
	case kt <= 0.80:
		return 0.9511 + kt*(-0.1604+kt*(4.388+kt*(-16.638+kt*12.336)))
	}
	return 0.165
}

// DiffuseShareDaily is the diffuse share of a day's global radiation at daily clearness kt and sunset
// hour angle ws (rad): Erbs, Klein & Duffie (1982), daily correlation; Duffie & Beckman eq. 2.11.1.
func DiffuseShareDaily(kt, ws float64) float64 {
	if ws < 81.4*deg {
		if kt >= 0.715 {
			return 0.143
		}
		return 1 + kt*(-0.2727+kt*(2.4495+kt*(-11.9514+kt*9.3879)))
	}
	if kt >= 0.722 {
		return 0.175
	}
	return 1 + kt*(0.2832+kt*(-2.5557+kt*0.8448))
}

// DiffusePAR is the diffuse share of PAR where the diffuse share of global radiation is q:
// min[1, q (1 + 0.3 (1 - q^2))], Spitters, Toussaint & Goudriaan (1986) Agric. For. Meteorol.
// 38:217-229, eq. 9, of one instant (the day's circumsolar term of eq. 10 left out).
func DiffusePAR(q float64) float64 { return math.Min(1, q*(1+0.3*(1-q*q))) }

// AirMass is the relative optical air mass at a true elevation (rad) above -0.5 deg: Kasten & Young
// (1989) Appl. Opt. 28:4735-4738, eq. 3.
func AirMass(elevation float64) float64 {
	γ := math.Max(elevation/deg, -0.5)
	return 1 / (math.Sin(γ*deg) + 0.50572*math.Pow(γ+6.07995, -1.6364))
}
