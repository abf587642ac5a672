package leaf

import (
	"math"
	"strings"
	"testing"
	"time"
)

func mustDeciduous(t *testing.T, out, full, colour, bare Date) Deciduous {
	t.Helper()
	d, err := NewDeciduous(out, full, colour, bare)
	if err != nil {
		t.Fatal(err)
	}
	return d
}

// yearShare is the share of each day of a year of 365, from 1 January.
func yearShare(c Calendar) (shares []float64, full int) {
	for day := time.Date(2025, 1, 1, 0, 0, 0, 0, time.UTC); day.Year() == 2025; day = day.AddDate(0, 0, 1) {
		shares = append(shares, c.Share(day.Month(), day.Day()))
		if c.FullOn(day.Month(), day.Day()) {
			full++
		}
	}
	return shares, full
}

func TestLeavesComeAndGoEvenly(t *testing.T) {
	d := mustDeciduous(t, Date{5, 10}, Date{6, 1}, Date{9, 25}, Date{10, 15})
	for _, c := range []struct {
		date Date
		want float64
	}{
		{Date{5, 9}, 0}, {Date{5, 10}, 0}, {Date{5, 21}, 0.5}, {Date{6, 1}, 1}, {Date{8, 1}, 1},
		{Date{9, 25}, 1}, {Date{10, 5}, 0.5}, {Date{10, 15}, 0}, {Date{12, 31}, 0}, {Date{1, 1}, 0},
	} {
		if got := d.Share(c.date.Month, c.date.Day); math.Abs(got-c.want) > 1e-15 {
			t.Errorf("%v: %g, want %g", c.date, got, c.want)
		}
	}
	if !d.FullOn(6, 1) || !d.FullOn(9, 25) || d.FullOn(5, 31) || d.FullOn(9, 26) {
		t.Error("full leaf does not run from the full date to the colour date, both counted")
	}
}

func TestEqualDatesMakeSteps(t *testing.T) {
	d := mustDeciduous(t, Date{5, 10}, Date{5, 10}, Date{10, 1}, Date{10, 1})
	shares, full := yearShare(d)
	if d.Share(5, 9) != 0 || d.Share(5, 10) != 1 || d.Share(10, 1) != 1 || d.Share(10, 2) != 0 {
		t.Error("the step is not leafed on both its days and bare outside")
	}
	sum := 0.0
	for _, s := range shares {
		sum += s
	}
	if sum != 145 || full != 145 { // 22 + 30 + 31 + 31 + 30 + 1 days
		t.Errorf("%g leafed days and %d at full leaf, want 145", sum, full)
	}
}

func TestSouthernSeasonCrossesTheNewYear(t *testing.T) {
	north := mustDeciduous(t, Date{5, 10}, Date{6, 1}, Date{9, 25}, Date{10, 15})
	south := north.Shift(182)
	a, fullA := yearShare(north)
	b, fullB := yearShare(south)
	if fullA != fullB {
		t.Errorf("%d days at full leaf in the north, %d in the south", fullA, fullB)
	}
	for i := range a {
		if a[i] != b[(i+182)%365] {
			t.Fatalf("day %d: %g in the north, %g half a year on", i, a[i], b[(i+182)%365])
		}
	}
	if south.Share(1, 1) != 1 || south.Share(12, 31) != 1 || south.Share(7, 1) != 0 {
		t.Error("the southern season does not span the new year")
	}
	if north.Shift(365) != north || north.Shift(-182).Shift(182) != north {
		t.Error("shifting round the year does not come back")
	}
}

func TestLeapDayIsLikeTheDayBefore(t *testing.T) {
	d := mustDeciduous(t, Date{2, 20}, Date{3, 10}, Date{9, 25}, Date{10, 15})
	if d.Share(2, 29) != d.Share(2, 28) {
		t.Errorf("29 February %g, 28 February %g", d.Share(2, 29), d.Share(2, 28))
	}
	mustDeciduous(t, Date{2, 29}, Date{3, 10}, Date{9, 25}, Date{10, 15})
}

func TestDatesAreChecked(t *testing.T) {
	for want, d := range map[string]Deciduous{
		"order":        {Date{5, 10}, Date{10, 1}, Date{9, 25}, Date{10, 15}},
		"out, full":    {Date{6, 10}, Date{6, 1}, Date{9, 25}, Date{10, 15}},
		"no day 31":    {Date{6, 31}, Date{7, 1}, Date{9, 25}, Date{10, 15}},
		"no day 30":    {Date{2, 30}, Date{7, 1}, Date{9, 25}, Date{10, 15}},
		"must be 1 to": {Date{13, 1}, Date{7, 1}, Date{9, 25}, Date{10, 15}},
		"bare date":    {Date{5, 10}, Date{7, 1}, Date{9, 25}, Date{10, 0}},
	} {
		if _, err := NewDeciduous(d.Out, d.Full, d.Colour, d.Bare); err == nil || !strings.Contains(err.Error(), want) {
			t.Errorf("%v: got error %v, want one that says %q", d, err, want)
		}
	}
}

func TestSpringAloneMoves(t *testing.T) {
	d := mustDeciduous(t, Date{5, 10}, Date{6, 1}, Date{9, 25}, Date{10, 15})
	e, err := d.ShiftSpring(-8)
	if err != nil || (e != Deciduous{Date{5, 2}, Date{5, 24}, Date{9, 25}, Date{10, 15}}) {
		t.Errorf("got %v, %v", e, err)
	}
	if _, err := d.ShiftSpring(150); err == nil {
		t.Error("a spring after autumn passed")
	}
	for n := 1; n <= 365; n++ {
		if got := DayOfYear(n).ordinal() + 1; got != n {
			t.Fatalf("day %d comes back as %d", n, got)
		}
	}
}

func TestEvergreenIsAlwaysFull(t *testing.T) {
	shares, full := yearShare(Evergreen{})
	for _, s := range shares {
		if s != 1 {
			t.Fatal("an evergreen day without all leaves")
		}
	}
	if full != 365 {
		t.Errorf("%d days at full leaf", full)
	}
}
