package plan

import (
	"fmt"
	"math"
	"regexp"
	"strconv"
	"strings"

	"shadeledger/canopy/inventory"
)

// dimension is what a quantity measures; its unit in the program comes first in the table below.
type dimension int

const (
	bare        dimension = iota // one possible unit, written without it
	length                       // m
	area                         // m2
	basalArea                    // m2 ha-1
	slope                        // rad
	bearing                      // rad
	mass                         // g
	temperature                  // deg C
	duration                     // h
	share                        // 0..1
	ppm                          // ppm
	density                      // ha-1
	speed                        // m y-1
)

// unit is a way to write a quantity: value * scale + offset in the program's unit.
type unit struct{ scale, offset float64 }

// Exact by definition, the chain 66 ft, the pound 453.59237 g.
const (
	foot = inventory.Foot
	acre = inventory.Acre
)

var unitTable = map[dimension]map[string]unit{
	length: {"m": {1, 0}, "cm": {0.01, 0}, "mm": {0.001, 0}, "km": {1000, 0}, "ft": {foot, 0}, "in": {foot / 12, 0},
		"chain": {66 * foot, 0}, "chains": {66 * foot, 0}, "yd": {3 * foot, 0}},
	area:        {"m2": {1, 0}, "cm2": {1e-4, 0}, "ha": {1e4, 0}, "ft2": {foot * foot, 0}, "ac": {acre, 0}, "in2": {foot * foot / 144, 0}},
	basalArea:   {"m2/ha": {1, 0}, "ft2/ac": {inventory.BasalUS, 0}},
	slope:       {"%": {0, 0}, "deg": {math.Pi / 180, 0}}, // percent is an arctangent, not a factor
	bearing:     {"deg": {math.Pi / 180, 0}},
	mass:        {"g": {1, 0}, "mg": {1e-3, 0}, "kg": {1e3, 0}, "oz": {28.349523125, 0}, "lb": {453.59237, 0}},
	temperature: {"C": {1, 0}, "F": {5.0 / 9, -160.0 / 9}},
	duration:    {"h": {1, 0}, "min": {1.0 / 60, 0}, "d": {24, 0}},
	share:       {"%": {0.01, 0}},
	ppm:         {"ppm": {1, 0}},
	speed:       {"m/y": {1, 0}, "cm/y": {0.01, 0}, "ft/y": {foot, 0}, "in/y": {foot / 12, 0}},
	density:     {"stems/ha": {1, 0}, "trees/ha": {1, 0}, "stems/ac": {1e4 / acre, 0}, "trees/ac": {1e4 / acre, 0}},
}

// likely is the unit to name to someone who wrote none.
var likely = map[dimension]string{
	length: "m or ft", area: "m2 or ha or ac", basalArea: "m2/ha or ft2/ac", slope: "% or deg", bearing: "deg",
	mass: "g", temperature: "C or F", duration: "h or min", share: "%", ppm: "ppm", density: "stems/ha or stems/ac", speed: "m/y or ft/y",
}

var (
	numberPattern   = regexp.MustCompile(`^[+-]?(\d+(\.\d*)?|\.\d+)([eE][+-]?\d+)?$`)
	quantityPattern = regexp.MustCompile(`^([+-]?(?:\d+(?:\.\d*)?|\.\d+)(?:[eE][+-]?\d+)?)\s*([^\s\d+±-][^\s+±]*)?$`)
	commaPattern    = regexp.MustCompile(`^([+-]?\d+),(\d+)(.*)$`)
)

// parseNumber reads a plain number with a decimal point.
func parseNumber(s string) (float64, error) {
	s = strings.TrimSpace(s)
	if m := commaPattern.FindStringSubmatch(s); m != nil {
		return 0, fmt.Errorf("numbers use a point: write %s.%s%s", m[1], m[2], m[3])
	}
	if !numberPattern.MatchString(s) {
		return 0, fmt.Errorf("write a number, such as 2.5")
	}
	v, err := strconv.ParseFloat(s, 64)
	if err != nil || math.IsInf(v, 0) {
		return 0, fmt.Errorf("write a finite number")
	}
	return v, nil
}

// splitDoubt parts 78 ft +- 4 ft into the value and its standard error.
func splitDoubt(s string) (value, spread string, doubtful bool) {
	for _, sign := range []string{"+-", "+/-", "±"} {
		if a, b, ok := strings.Cut(s, sign); ok {
			return strings.TrimSpace(a), strings.TrimSpace(b), true
		}
	}
	return s, "", false
}

// parseSpread reads a standard error in the unit of the program. Its zero is taken off, so that degrees Fahrenheit come
// out as a difference; a slope in percent is not linear in its angle and is read as the step from the value.
func parseSpread(value, spread string, d dimension, parse func(string) (float64, error)) (float64, error) {
	x, err := parse(spread)
	if err != nil {
		return 0, fmt.Errorf("after +-: %w", err)
	}
	m := quantityPattern.FindStringSubmatch(spread)
	if m == nil {
		return 0, fmt.Errorf("after +-: write a number above 0")
	}
	zero, err := parse("0" + m[2])
	if err != nil {
		return 0, fmt.Errorf("after +-: %w", err)
	}
	x -= zero
	if v := quantityPattern.FindStringSubmatch(value); d == slope && m[2] == "%" && v != nil && v[2] == "%" {
		a, _ := strconv.ParseFloat(v[1], 64)
		b, _ := strconv.ParseFloat(m[1], 64)
		x = math.Atan((a+b)/100) - math.Atan(a/100)
	}
	if !(x > 0) {
		return 0, fmt.Errorf("after +-: a standard error above 0")
	}
	return x, nil
}

// parseQuantity reads a number with its unit. H, the height of the uncut stand in m, is a
// unit of length where it is known (> 0).
func parseQuantity(s string, d dimension, H float64) (float64, error) {
	s = strings.TrimSpace(s)
	if m := commaPattern.FindStringSubmatch(s); m != nil {
		return 0, fmt.Errorf("numbers use a point: write %s.%s%s", m[1], m[2], m[3])
	}
	m := quantityPattern.FindStringSubmatch(s)
	if m == nil {
		return 0, fmt.Errorf("write a number with a unit, %s", likely[d])
	}
	v, err := strconv.ParseFloat(m[1], 64)
	if err != nil || math.IsInf(v, 0) {
		return 0, fmt.Errorf("write a finite number")
	}
	if m[2] == "" {
		return 0, fmt.Errorf("a unit is missing: write %s %s", m[1], strings.ReplaceAll(likely[d], " or ", " or "+m[1]+" "))
	}
	if m[2] == "H" && d == length {
		if H <= 0 {
			return 0, fmt.Errorf("a size in H needs stand.height, which is missing or itself in H")
		}
		return v * H, nil
	}
	if d == slope && m[2] == "%" {
		return math.Atan(v / 100), nil
	}
	u, ok := unitTable[d][m[2]]
	if !ok {
		return 0, fmt.Errorf("unit %q is not known here: use %s", m[2], likely[d])
	}
	return v*u.scale + u.offset, nil
}

var compass = []string{"N", "NNE", "NE", "ENE", "E", "ESE", "SE", "SSE", "S", "SSW", "SW", "WSW", "W", "WNW", "NW", "NNW"}

// parseBearing reads degrees from true north, one of 16 letters, or a magnetic bearing with the declination (rad,
// east positive).
func parseBearing(s string, declination float64, declared bool) (float64, error) {
	s = strings.TrimSpace(s)
	for i, name := range compass {
		if strings.EqualFold(s, name) {
			return 22.5 * float64(i) * rad, nil
		}
	}
	magnetic := false
	if rest, ok := strings.CutSuffix(s, "magnetic"); ok {
		magnetic, s = true, strings.TrimSpace(rest)
		if !declared {
			return 0, fmt.Errorf("a magnetic bearing needs site.declination")
		}
	}
	s = strings.TrimSpace(strings.TrimSuffix(strings.TrimSuffix(s, "true"), "deg"))
	s = strings.TrimSpace(strings.TrimSuffix(s, "deg"))
	v, err := parseNumber(s)
	if err != nil {
		return 0, fmt.Errorf("write degrees from true north, 0 to 360, or one of 16 letters such as SSE")
	}
	if v < 0 || v > 360 {
		return 0, fmt.Errorf("a bearing is 0 to 360 degrees")
	}
	if magnetic {
		v = math.Round((v+declination/rad)*1e9) / 1e9 // the sum of two decimals, as if written
	}
	return math.Mod(v+360, 360) * rad, nil
}

// parseCoordinate reads 44.35, 44.35 N, 71.90 W or 44 21 00 N into degrees, north and east positive.
func parseCoordinate(s string, positive, negative string, limit float64) (float64, error) {
	want := fmt.Errorf("degrees from -%[1]g to %[1]g, such as 44.35 %[2]s or 44 21 00 %[3]s", limit, positive, negative)
	fields := strings.Fields(s)
	sign := 1.0
	if n := len(fields); n > 1 {
		switch last := strings.ToUpper(fields[n-1]); last {
		case positive:
			fields = fields[:n-1]
		case negative:
			sign, fields = -1, fields[:n-1]
		}
	}
	if len(fields) == 0 || len(fields) > 3 {
		return 0, want
	}
	v := 0.0
	for i, f := range fields {
		x, err := parseNumber(f)
		if err != nil && strings.Contains(f, ",") {
			return 0, err
		}
		if err != nil {
			return 0, want
		}
		if len(fields) > 1 && (x < 0 || (i > 0 && x >= 60)) {
			return 0, want
		}
		v += x / math.Pow(60, float64(i))
	}
	if v *= sign; math.Abs(v) > limit {
		return 0, want
	}
	return v, nil
}

var months = map[string]int{"jan": 1, "feb": 2, "mar": 3, "apr": 4, "may": 5, "jun": 6, "jul": 7, "aug": 8, "sep": 9, "oct": 10, "nov": 11, "dec": 12}

var daysIn = [13]int{0, 31, 29, 31, 30, 31, 30, 31, 31, 30, 31, 30, 31}

// parseDate reads month-day (05-14) or day month (14 May).
func parseDate(s string) (month, day int, err error) {
	want := fmt.Errorf("write month-day, such as 05-14, or 14 May")
	s = strings.TrimSpace(s)
	if f := strings.Fields(s); len(f) == 2 {
		if len(f[1]) >= 3 {
			month = months[strings.ToLower(f[1][:3])]
		}
		day, err = strconv.Atoi(f[0])
	} else if a, b, ok := strings.Cut(s, "-"); ok {
		month, err = strconv.Atoi(a)
		if err == nil {
			day, err = strconv.Atoi(b)
		}
	}
	if err != nil || month < 1 || month > 12 {
		return 0, 0, want
	}
	if day < 1 || day > daysIn[month] {
		return 0, 0, fmt.Errorf("month %d has no day %d; it has 1 to %d", month, day, daysIn[month])
	}
	return month, day, nil
}
