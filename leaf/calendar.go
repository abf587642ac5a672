package leaf

import (
	"fmt"
	"time"
)

// Date is a day of the year without a year. 29 February counts as 28 February, so that a calendar
// means the same in every year and a year has 365 places.
type Date struct {
	Month time.Month
	Day   int
}

const yearDays = 365

var monthStart = [13]int{0, 0, 31, 59, 90, 120, 151, 181, 212, 243, 273, 304, 334}

func (d Date) check() error {
	if d.Month < time.January || d.Month > time.December {
		return fmt.Errorf("month %d is not in the year; it must be 1 to 12", int(d.Month))
	}
	last := 29 // February
	if d.Month != time.February {
		last = monthLength(d.Month)
	}
	if d.Day < 1 || d.Day > last {
		return fmt.Errorf("%s has no day %d; it must be 1 to %d", d.Month, d.Day, last)
	}
	return nil
}

func monthLength(m time.Month) int {
	if m == time.December {
		return 31
	}
	return monthStart[m+1] - monthStart[m]
}

func (d Date) ordinal() int {
	if d.Month == time.February && d.Day == 29 {
		return monthStart[d.Month] + 27
	}
	return monthStart[d.Month] + d.Day - 1
}

func dateOf(ordinal int) Date {
	o := modYear(ordinal)
	m := time.December
	for monthStart[m] > o {
		m--
	}
	return Date{m, o - monthStart[m] + 1}
}

func modYear(n int) int { return ((n % yearDays) + yearDays) % yearDays }

// Shift moves the date by days, round the year.
func (d Date) Shift(days int) Date { return dateOf(d.ordinal() + days) }

func (d Date) String() string { return fmt.Sprintf("%02d-%02d", int(d.Month), d.Day) }

// Evergreen has its whole leaf area every day.
type Evergreen struct{}

// Share is 1.
func (Evergreen) Share(time.Month, int) float64 { return 1 }

// FullOn is true.
func (Evergreen) FullOn(time.Month, int) bool { return true }
func (Evergreen) calendar()                   {}

// Deciduous leaf area rises evenly from none on Out to full on Full, stays to Colour and falls
// evenly to none on Bare. Out = Full, and Colour = Bare, are steps: leafed on both days and between.
// The leafed time may cross the new year. Build it with NewDeciduous.
type Deciduous struct{ Out, Full, Colour, Bare Date }

// NewDeciduous checks that the dates exist and follow one another within a year, in this order.
func NewDeciduous(out, full, colour, bare Date) (Deciduous, error) {
	d := Deciduous{out, full, colour, bare}
	for i, date := range []Date{out, full, colour, bare} {
		if err := date.check(); err != nil {
			return d, fmt.Errorf("%s date: %w", []string{"leaf-out", "full-leaf", "colour", "bare"}[i], err)
		}
	}
	f, c, b := d.after(full), d.after(colour), d.after(bare)
	if f > c || c > b {
		return d, fmt.Errorf("leaf dates %s, %s, %s, %s do not follow one another; the order must be out, full, colour, bare within one year", out, full, colour, bare)
	}
	return d, nil
}

func (d Deciduous) after(x Date) int { return modYear(x.ordinal() - d.Out.ordinal()) }

// Share of the full leaf area on a day, 0..1.
func (d Deciduous) Share(month time.Month, day int) float64 {
	p, f, c, b := d.after(Date{month, day}), d.after(d.Full), d.after(d.Colour), d.after(d.Bare)
	switch {
	case p < f:
		return float64(p) / float64(f)
	case p <= c:
		return 1
	case p < b:
		return float64(b-p) / float64(b-c)
	}
	return 0
}

// FullOn says whether all leaves are out on a day: from Full to Colour, both counted.
func (d Deciduous) FullOn(month time.Month, day int) bool {
	p := d.after(Date{month, day})
	return p >= d.after(d.Full) && p <= d.after(d.Colour)
}
func (Deciduous) calendar() {}

// Shift moves all four dates by days (later is positive).
func (d Deciduous) Shift(days int) Deciduous {
	return Deciduous{d.Out.Shift(days), d.Full.Shift(days), d.Colour.Shift(days), d.Bare.Shift(days)}
}

// ShiftSpring moves leaf-out and full leaf by days and leaves autumn alone; the result is checked.
func (d Deciduous) ShiftSpring(days int) (Deciduous, error) {
	return NewDeciduous(d.Out.Shift(days), d.Full.Shift(days), d.Colour, d.Bare)
}

// DayOfYear is the date of a place 1..365 in the year, wrapped round it.
func DayOfYear(n int) Date { return dateOf(n - 1) }
