package radiation

import "math"

// The radiance R of a sky direction is normalised so that its cosine integral over the free
// hemisphere is 1.

// UniformRadiance is R of the uniform sky, sr-1.
const UniformRadiance = 1 / math.Pi

// OvercastRadiance is R of the standard overcast sky, 3/(7 pi) (1 + 2 cos theta) (Moon & Spencer
// 1942, Illum. Eng. 37:707-726; CIE standard overcast sky).
func OvercastRadiance(cosZenith float64) float64 { return 3 / (7 * math.Pi) * (1 + 2*cosZenith) }

// Perez is the all-weather sky of one moment: relative radiance
// [1 + a exp(b / cos theta)] [1 + c exp(d gamma) + e cos^2 gamma], gamma the angle to the sun
// (Perez, Seals & Michalsky 1993, Solar Energy 50:235-245, eq. 1).
type Perez struct{ A, B, C, D, E float64 }

// perezBins are the upper bounds of the clearness bins (the same, table 1).
var perezBins = [...]float64{1.065, 1.23, 1.5, 1.95, 2.8, 4.5, 6.2}

// perezTable holds x1..x4 of a, b, c, d, e by clearness bin (the same, table 1, with the erratum
// Solar Energy 51:423).
var perezTable = [8][5][4]float64{
	{{1.3525, -0.2576, -0.269, -1.4366}, {-0.767, 0.0007, 1.2734, -0.1233}, {2.8, 0.6004, 1.2375, 1}, {1.8734, 0.6297, 0.9738, 0.2809}, {0.0356, -0.1246, -0.5718, 0.9938}},
	{{-1.2219, -0.773, 1.4148, 1.1016}, {-0.2054, 0.0367, -3.9128, 0.9156}, {6.975, 0.1774, 6.4477, -0.1239}, {-1.5798, -0.5081, -1.7812, 0.108}, {0.2624, 0.0672, -0.219, -0.4285}},
	{{-1.1, -0.2515, 0.8952, 0.0156}, {0.2782, -0.1812, -4.5, 1.1766}, {24.7219, -13.0812, -37.7, 34.8438}, {-5, 1.5218, 3.9229, -2.6204}, {-0.0156, 0.1597, 0.4199, -0.5562}},
	{{-0.5484, -0.6654, -0.2672, 0.7117}, {0.7234, -0.6219, -5.6812, 2.6297}, {33.3389, -18.3, -62.25, 52.0781}, {-3.5, 0.0016, 1.1477, 0.1062}, {0.4659, -0.3296, -0.0876, -0.0329}},
	{{-0.6, -0.3566, -2.5, 2.325}, {0.2937, 0.0496, -5.6812, 1.8415}, {21, -4.7656, -21.5906, 7.2492}, {-3.5, -0.1554, 1.4062, 0.3988}, {0.0032, 0.0766, -0.0656, -0.1294}},
	{{-1.0156, -0.367, 1.0078, 1.4051}, {0.2875, -0.5328, -3.85, 3.375}, {14, -0.9999, -7.1406, 7.5469}, {-3.4, -0.1078, -1.075, 1.5702}, {-0.0672, 0.4016, 0.3017, -0.4844}},
	{{-1, 0.0211, 0.5025, -0.5119}, {-0.3, 0.1922, 0.7023, -1.6317}, {19, -5, 1.2438, -1.9094}, {-4, 0.025, 0.3844, 0.2656}, {1.0468, -0.3788, -2.4517, 1.4656}},
	{{-1.05, 0.0289, 0.426, 0.359}, {-0.325, 0.1156, 0.7781, 0.0025}, {31.0625, -14.5, -46.1148, 55.375}, {-7.2312, 0.405, 13.35, 0.6234}, {1.5, -0.6426, 1.8564, 0.5636}},
}

// PerezSky gives the sky at clearness epsilon >= 1, brightness Delta >= 0 and the sun's zenith angle (rad).
// Delta is raised to 0.2 for 1.065 < epsilon < 2.8, outside the range of the fit, where the relation can
// turn negative.
func PerezSky(clearness, brightness, sunZenith float64) Perez {
	bin := 0
	for bin < len(perezBins) && clearness >= perezBins[bin] {
		bin++
	}
	Δ, Z := brightness, sunZenith
	if clearness > 1.065 && clearness < 2.8 {
		Δ = math.Max(Δ, 0.2)
	}
	t := &perezTable[bin]
	x := func(i int) float64 { return t[i][0] + t[i][1]*Z + Δ*(t[i][2]+t[i][3]*Z) } // eq. 6
	p := Perez{x(0), x(1), x(2), x(3), x(4)}
	if bin == 0 {
		c, d := t[2], t[3]
		p.C = math.Exp(math.Pow(Δ*(c[0]+c[1]*Z), c[2])) - c[3] // eq. 7
		p.D = -math.Exp(Δ*(d[0]+d[1]*Z)) + d[2] + Δ*d[3]       // eq. 8
	}
	return p
}

// Gradation is the first factor, zenith to horizon; cosZenith is kept above 0.01.
func (p Perez) Gradation(cosZenith float64) float64 {
	return 1 + p.A*math.Exp(p.B/math.Max(cosZenith, 0.01))
}

// Indicatrix is the second factor, round the sun.
func (p Perez) Indicatrix(cosToSun float64) float64 {
	c := math.Max(-1, math.Min(1, cosToSun))
	return 1 + p.C*math.Exp(p.D*math.Acos(c)) + p.E*c*c
}

// Relative is the relative radiance of a direction, never below zero.
func (p Perez) Relative(cosZenith, cosToSun float64) float64 {
	return math.Max(0, p.Gradation(cosZenith)*p.Indicatrix(cosToSun))
}

// perezNodes is the number of table steps from the sun to its opposite.
const perezNodes = 96

// SkyTable tabulates Indicatrix by sin(gamma/2), fine where the sky is bright; linear between
// nodes. Its error stays below 0.5 % of the radiance.
type SkyTable struct {
	value [perezNodes + 2]float64
}

// sinHalf[i] spaces the nodes: gamma of node i is 2 asin(i/perezNodes).
var gammaNodes = func() (γ [perezNodes + 2]float64) {
	for i := range γ {
		γ[i] = 2 * math.Asin(math.Min(1, float64(i)/perezNodes))
	}
	return γ
}()

// Tabulate fills the table for one sky.
func (t *SkyTable) Tabulate(p Perez) {
	for i, γ := range gammaNodes {
		cosγ := 1 - 2*sq(math.Min(1, float64(i)/perezNodes))
		t.value[i] = 1 + p.C*math.Exp(p.D*γ) + p.E*cosγ*cosγ
	}
}

// At reads the table; cosToSun in -1..1 up to rounding.
func (t *SkyTable) At(cosToSun float64) float64 {
	u := math.Sqrt(math.Max(0, 0.5*(1-cosToSun))) * perezNodes
	i := int(u)
	if i > perezNodes {
		i = perezNodes
	}
	f := u - float64(i)
	return t.value[i] + f*(t.value[i+1]-t.value[i])
}

func sq(x float64) float64 { return x * x }

// Clearness and brightness of Perez, Ineichen, Seals, Michalsky & Stewart (1990) Solar Energy
// 44:271-289, eqs 1 and 2: diffuse on the level and beam on a plane facing the sun in W m-2.
func Clearness(diffuse, beamNormal, sunZenith float64) float64 {
	if diffuse <= 0 {
		return 1
	}
	k := 1.041 * sunZenith * sunZenith * sunZenith
	return math.Max(1, ((diffuse+beamNormal)/diffuse+k)/(1+k))
}

// Brightness is Delta = diffuse * air mass / extraterrestrial normal.
func Brightness(diffuse, elevation, extraterrestrial float64) float64 {
	return diffuse * AirMass(elevation) / extraterrestrial
}
