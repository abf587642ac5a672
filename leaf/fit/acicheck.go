package fit

import (
	"errors"
	"fmt"
	"math"

	"shadeledger/leaf"
)

// least of points and CO2 that a curve must have.
const (
	leastGas     = 6
	lowestCO2    = 250 // ppm: a point below tells Vcmax
	highestCO2   = 450 // a point above tells Jmax
	leastExports = 500 // ppm, below which export is not looked for
	leastNet     = 0.1 // umol m-2 s-1 that the best reading must reach
)

// checkGas tells what is missing from the readings of a leaf or in another unit.
func checkGas(readings []Gas) error {
	if len(readings) < leastGas {
		return fmt.Errorf("%s; a curve over CO2 needs at least %d", counted(len(readings), "reading"), leastGas)
	}
	low, high, most := math.Inf(1), math.Inf(-1), math.Inf(-1)
	for _, g := range readings {
		if math.IsNaN(g.Ci + g.Net + g.PPFD + g.Temperature) {
			return errors.New("a reading without CO2 within the leaf, net assimilation, light or leaf temperature")
		}
		for _, c := range []struct {
			name         string
			v, low, high float64
			unit         string
		}{
			{"CO2 within the leaf", g.Ci, 0, 5000, "ppm"}, {"net assimilation", g.Net, -50, 200, "umol m-2 s-1"}, {"light", g.PPFD, 50, 4000, "umol m-2 s-1"},
			{"leaf temperature", g.Temperature, -10, 60, "deg C"}, {"pressure", pressure(g), 40, 110, "kPa"},
		} {
			if !(c.v >= c.low && c.v <= c.high) {
				return fmt.Errorf("%s is %g; give it in %s, %g to %g", c.name, c.v, c.unit, c.low, c.high)
			}
		}
		low, high, most = math.Min(low, g.Ci), math.Max(high, g.Ci), math.Max(most, g.Net)
	}
	switch {
	case high < lowestCO2:
		return fmt.Errorf("CO2 within the leaf is %g at most; give it in ppm, not Pa, with readings above %d", high, highestCO2)
	case low > lowestCO2:
		return fmt.Errorf("CO2 within the leaf is %g ppm or more; without readings below %d Vcmax is not told", low, lowestCO2)
	case high < highestCO2:
		return fmt.Errorf("CO2 within the leaf is %g ppm at most; without readings above %d Jmax is not told", high, highestCO2)
	case most < leastNet:
		return fmt.Errorf("net assimilation is %g at most; give it in umol m-2 s-1, uptake positive", most)
	}
	return nil
}

// pressure of the air, kPa.
func pressure(g Gas) float64 {
	if g.Pressure == 0 {
		return leaf.StandardPressure
	}
	return g.Pressure
}
