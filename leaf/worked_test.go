package leaf

import (
	"encoding/csv"
	"math"
	"os"
	"strconv"
	"strings"
	"testing"
)

// The worked values cover light response, compensation, saturation, respiration over temperature,
// inhibition in the light, the half-sine day and sunflecks; biochemistry has its own file and test.
// Left out of the copy, with their reasons: induction (leaves respond at once); yearly leaf balance
// in the field (no light record given); field compensation points in foot-candles (no leaf traits given).

type worked struct {
	id, topic, output, source string
	in                        map[string]float64
	want, tolerance           float64
}

func workedRows(t *testing.T) []worked {
	t.Helper()
	f, err := os.Open("../testdata/leaf/worked_values.csv")
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	records, err := csv.NewReader(f).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	var rows []worked
	for _, r := range records[1:] {
		w := worked{id: r[0], topic: r[1], output: r[3], source: r[7] + r[8], in: map[string]float64{}}
		for _, pair := range strings.Split(r[2], ";") {
			k, v, _ := strings.Cut(pair, "=")
			w.in[k] = atof(t, v)
		}
		w.want, w.tolerance = atof(t, r[4]), atof(t, r[6])
		rows = append(rows, w)
	}
	return rows
}

func atof(t *testing.T, s string) float64 {
	t.Helper()
	x, err := strconv.ParseFloat(s, 64)
	if err != nil {
		t.Fatal(err)
	}
	return x
}

func TestWorkedValues(t *testing.T) {
	seen := map[string]int{}
	for _, w := range workedRows(t) {
		seen[w.topic]++
		got := w.compute(t)
		if d := math.Abs(got - w.want); !(d <= w.tolerance*math.Max(math.Abs(w.want), 1e-3)) {
			t.Errorf("%s %s %v: got %.10g, want %.10g", w.id, w.topic, w.in, got, w.want)
		}
	}
	want := map[string]int{"light response": 100, "light compensation": 10, "light saturation": 30, "leaf respiration": 23,
		"light inhibition": 8, "daily leaf carbon": 35, "daily light compensation": 7, "sunfleck averaging": 4}
	for topic, n := range want {
		if seen[topic] != n {
			t.Errorf("%s: %d rows checked, want %d", topic, seen[topic], n)
		}
	}
}

func (w worked) set() Set {
	return Set{Ag: w.in["Pg"], Rd: w.in["Rd"], Phi: w.in["phi"], Theta: w.in["theta"], LMA: 50}
}

func (w worked) compute(t *testing.T) float64 {
	s := w.set()
	r := s.Response()
	switch w.topic {
	case "light response":
		return s.Net(w.in["I"])
	case "light compensation":
		return s.CompensationPoint()
	case "light saturation":
		return r.LightFor(w.in["fraction_of_Pg"])
	case "leaf respiration":
		return w.respiration()
	case "light inhibition":
		return LightRespiration(w.in["I"])
	case "daily leaf carbon":
		return dayBalance(&r, w.in["I_noon"], w.in["daylength_h"])
	case "daily light compensation":
		return dayCompensation(&r, w.in["daylength_h"])
	case "sunfleck averaging":
		f := w.in["fleck_fraction"]
		return f*r.Net(w.in["I_fleck"]) + (1-f)*r.Net(w.in["I_background"])
	}
	t.Fatalf("no way to compute %q", w.topic)
	return 0
}

func (w worked) respiration() float64 {
	curve := Heskel
	if strings.HasPrefix(w.source, "Tjoelker") {
		curve = Tjoelker
	}
	if w.output == "increase" {
		return 100 * (Temperature{Ref: w.in["from_C"], Respiration: curve}.RdFactor(w.in["to_C"]) - 1)
	}
	return Temperature{Ref: w.in["Tref_C"], Respiration: curve}.RdFactor(w.in["T_C"])
}

// dayBalance is the 24-hour net of a leaf under half-sine light, mmol m-2 d-1, by Simpson's rule in
// the sine's angle.
func dayBalance(r *Response, noon, hours float64) float64 {
	const n = 4000
	sum := 0.0
	for i := range n + 1 {
		weight := 2.0 + 2*float64(i%2)
		if i == 0 || i == n {
			weight = 1
		}
		sum += weight * r.Gross(noon*math.Sin(math.Pi*float64(i)/n))
	}
	return (sum/(3*n)*hours - 24*r.Rd()) * 3.6
}

// dayCompensation is the day sum of half-sine light with a zero balance, mol m-2 d-1.
func dayCompensation(r *Response, hours float64) float64 {
	low, high := 0.0, 2000.0
	for range 60 {
		mid := (low + high) / 2
		if dayBalance(r, mid, hours) < 0 {
			low = mid
		} else {
			high = mid
		}
	}
	return low * 2 / math.Pi * hours * 3600 / 1e6
}
