package plan

import (
	"fmt"
	"math"
	"testing"
)

// Every unit against its published size, and there and back within 0.01 %.
func TestUnitsRoundTrip(t *testing.T) {
	published := map[dimension]map[string]float64{
		length:    {"m": 1, "cm": 0.01, "mm": 0.001, "km": 1000, "ft": 0.3048, "in": 0.0254, "yd": 0.9144, "chain": 20.1168, "chains": 20.1168},
		area:      {"m2": 1, "ha": 1e4, "cm2": 1e-4, "ft2": 0.09290304, "in2": 6.4516e-4, "ac": 4046.86},
		basalArea: {"m2/ha": 1, "ft2/ac": 0.229568},
		density:   {"stems/ha": 1, "trees/ha": 1, "stems/ac": 2.47105, "trees/ac": 2.47105},
		mass:      {"g": 1, "mg": 1e-3, "kg": 1e3, "oz": 28.3495, "lb": 453.592},
	}
	for d, units := range published {
		for name := range unitTable[d] {
			if units[name] == 0 {
				t.Errorf("%s has no published size here", name)
			}
		}
		for name, size := range units {
			for _, x := range []float64{0.37, 12.7, 237} {
				got, err := parseQuantity(fmt.Sprintf("%g %s", x, name), d, 0)
				if err != nil {
					t.Fatal(err)
				}
				if math.Abs(got/(x*size)-1) > 1e-4 {
					t.Errorf("%g %s is read as %g, %g by the published size", x, name, got, x*size)
				}
				if back := got / unitTable[d][name].scale; math.Abs(back/x-1) > 1e-4 {
					t.Errorf("%g %s comes back as %g", x, name, back)
				}
			}
		}
	}
}
