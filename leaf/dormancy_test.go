package leaf

import (
	"math"
	"testing"
)

// The state against its closed form: under a yearly cosine of amplitude A and lag L it is a cosine of amplitude A/sqrt(1 + (w L)^2), late by
// atan(w L)/w days.
func TestStateLagsAsTheClosedForm(t *testing.T) {
	const mean, amplitude, days = 6.0, 14.0, 365
	w := 2 * math.Pi / days
	T, one := make([]float64, days), make([]float64, days)
	for i := range T {
		T[i], one[i] = mean-amplitude*math.Cos(w*float64(i)), 1
	}
	worst := 0.0
	for i, x := range Pine.States(T, one) {
		wl := w * Pine.Lag
		// X at the end of day i, temperature taken at its middle
		want := mean - amplitude/math.Sqrt(1+wl*wl)*math.Cos(w*(float64(i)+0.5)-math.Atan(wl))
		worst = math.Max(worst, math.Abs(x-want))
	}
	t.Logf("worst %.4f deg C", worst)
	if worst > 0.01 {
		t.Errorf("state off its closed form by %g deg C", worst)
	}
	// four weighted days a month tell the same winter
	var few, weight, at []float64
	for i := 0; i+9 <= days; i += 9 {
		few, weight, at = append(few, T[i+4]), append(weight, 9), append(at, float64(i+8))
	}
	full := Pine.States(T, one)
	for k, x := range Pine.States(few, weight) {
		if d := math.Abs(x - full[int(at[k])]); d > 0.5 {
			t.Errorf("day %g: %g from few days, %g from all", at[k], x, full[int(at[k])])
		}
	}
}

func TestAwakeIsTheLesserOfStateAndWarmth(t *testing.T) {
	temp := Temperature{Ref: 25, Opt: 21, Width: 18, Q10: 2}
	for state := -10.0; state <= 25; state += 2.5 {
		for celsius := -15.0; celsius <= 35; celsius += 5 {
			warmth := temp.Warmth(celsius)
			a := Pine.Awake(state, warmth)
			capacity := math.Max(0, math.Min(1, (state+4)/17.3))
			if got, want := a*warmth, math.Min(warmth, capacity); math.Abs(got-want) > 1e-12 {
				t.Errorf("state %g, %g deg C: capacity %g, want %g", state, celsius, got, want)
			}
		}
	}
	if Pine.Awake(-4, temp.Warmth(10)) != 0 || Pine.Awake(14, temp.Warmth(21)) != 1 || (Dormancy{}).Awake(-30, temp.Warmth(0)) != 1 || temp.Warmth(21) != 1 {
		t.Error("dead in deep winter, whole in summer, and none is none")
	}
}
