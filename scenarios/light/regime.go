// Package light brings the sky and the canopy together: the light at every station through the
// year. It knows no species.
package light

import (
	"shadeledger/radiation/weather"
)

// Above is the light above the canopy of a plan, shared by all stations.
type Above struct {
	Series *weather.Series
	Zenith []float64 // ring bounds, rad, of every ring shape
	// Open[i] is the ring shape of the free sky (no canopy, no hill) at lit sub-step i:
	// Open[i][r] = integral over ring r of R dOmega, for unit level-plane diffuse flux.
	// Steps may share one slice (uniform and overcast skies share a single shape).
	Open [][]float64
}

// Regime is the light at one spot and height through the series. One value per lit sub-step.
type Regime struct {
	Above *Above
	// BeamChance is P0, the chance that the sun is seen; 0 behind a hill or a terrain horizon.
	BeamChance []float64
	// Scattered is I_b (T - P0), umol m-2 s-1 on the level plane: beam scattered down by leaves.
	Scattered []float64
	// SkyPlane is D, umol m-2 s-1 on the level plane: sky light that reaches the spot.
	SkyPlane []float64
	// Shape[i] is the index in Shapes of sub-step i's ring shape.
	Shape []int32
	// Shapes[s][r] = integral over ring r of R T dOmega for unit D_above.
	Shapes [][]float64
	// SkyView is the cosine-weighted visible sky, 0..1, leaves at full, wood in, hill and horizon dark.
	SkyView float64
}
