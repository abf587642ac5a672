package report

import (
	"fmt"
	"math"
	"strconv"
	"strings"
	"unicode/utf8"

	"shadeledger/canopy/inventory"
	"shadeledger/scenarios"
)

const (
	metresPerFoot = inventory.Foot
	m2PerAcre     = inventory.Acre
	m2PerHectare  = 1e4
)

func length(m float64, u scenarios.Units) string {
	if u == scenarios.US {
		return sig(m/metresPerFoot, 3) + " ft"
	}
	return sig(m, 3) + " m"
}

// lengthValue is a length in the unit of tables, without the unit's name.
func lengthValue(m float64, u scenarios.Units) float64 {
	if u == scenarios.US {
		return m / metresPerFoot
	}
	return m
}

func lengthUnit(u scenarios.Units) string {
	if u == scenarios.US {
		return "ft"
	}
	return "m"
}

func area(m2 float64, u scenarios.Units) string { return areaTo(m2, u, 2) }

// areaTo is an area to a number of significant digits.
func areaTo(m2 float64, u scenarios.Units, digits int) string {
	if u == scenarios.US {
		return sig(m2/m2PerAcre, digits) + " ac"
	}
	if m2 < m2PerHectare {
		return sig(m2, digits) + " m2"
	}
	return sig(m2/m2PerHectare, digits) + " ha"
}

// basalArea takes m2/ha.
func basalArea(v float64, u scenarios.Units) string {
	return sig(basalValue(v, u), 3) + " " + basalUnit(u)
}

func basalValue(v float64, u scenarios.Units) float64 {
	if u == scenarios.US {
		return v / inventory.BasalUS
	}
	return v
}

func basalUnit(u scenarios.Units) string {
	if u == scenarios.US {
		return "ft2/ac"
	}
	return "m2/ha"
}

// density takes trees/ha.
func density(v float64, u scenarios.Units) string {
	if u == scenarios.US {
		return count(densityValue(v, u)) + " trees/ac"
	}
	return count(v) + " trees/ha"
}

// count shows trees: whole from ten up, two digits below.
func count(v float64) string {
	if v >= 10 {
		return text0(v, 0)
	}
	return short(v, 1)
}

// short prints a number to some decimal places, without zeros at its end.
func short(v float64, places int) string {
	s := text0(v, places)
	if strings.Contains(s, ".") {
		s = strings.TrimRight(strings.TrimRight(s, "0"), ".")
	}
	return s
}

func densityValue(v float64, u scenarios.Units) float64 {
	if u == scenarios.US {
		return v * m2PerAcre / m2PerHectare
	}
	return v
}

// diameter takes m.
func diameter(v float64, u scenarios.Units) string {
	if u == scenarios.US {
		return short(diameterValue(v, u), 1) + " in"
	}
	return short(diameterValue(v, u), 1) + " cm"
}

func diameterValue(v float64, u scenarios.Units) float64 {
	if u == scenarios.US {
		return v / inventory.Inch
	}
	return 100 * v
}

// sig prints a number to n significant digits, without an exponent.
func sig(v float64, n int) string {
	if v == 0 || math.IsNaN(v) || math.IsInf(v, 0) {
		return strconv.FormatFloat(v, 'f', -1, 64)
	}
	places := n - 1 - int(math.Floor(math.Log10(math.Abs(v))))
	if places < 0 {
		scale := math.Pow(10, float64(-places))
		return strconv.FormatFloat(math.Round(v/scale)*scale, 'f', 0, 64)
	}
	return strconv.FormatFloat(v, 'f', places, 64)
}

// whole prints a percent; what is above 0 but rounds to it shows as <1.
func whole(v float64) string {
	switch {
	case math.IsNaN(v):
		return "-"
	case v > 0 && v < 0.5:
		return "<1"
	}
	return strconv.FormatFloat(math.Round(v), 'f', 0, 64)
}

func itoa(i int) string { return fmt.Sprint(i) }

func runes(s string) int { return utf8.RuneCountInString(s) }

func text0(v float64, places int) string { return strconv.FormatFloat(v, 'f', places, 64) }
