package weather

import (
	"time"

	"shadeledger/radiation"
)

// Source is one of the three kinds of weather input, best first: *Records, *Daily, *Normals.
type Source interface {
	// Check lists every impossible value, gap and missing stretch; an empty list is sound.
	// A part year, a wrong count of rows or a gap longer than MaxGap is a problem.
	Check(site radiation.Site, step time.Duration) []Problem
	// Series brings the source to sub-steps of the given length. It may assume that Check passed.
	Series(site radiation.Site, step time.Duration, par Par) *Series
}

// Par says how global radiation becomes PAR.
type Par struct {
	Fraction float64 // f_PAR, share of global energy, default 0.45
}

// Problem is a fault in weather data. Line is the line of the file it came from, 0 for none.
type Problem struct {
	Line  int
	Field string
	Value string
	Want  string // what would be right
}

// Stamp is what a time stamp of a record means.
type Stamp int

// The meanings of a stamp.
const (
	StampStart Stamp = iota
	StampMiddle
	StampEnd
)

// Records is hourly (or any even interval) measured weather covering whole calendar years.
type Records struct {
	Rows   []Record
	Stamp  Stamp
	MaxGap time.Duration // gaps up to this are bridged linearly and reported
}

// Record is one row. NaN stands for a value not given.
type Record struct {
	Line        int
	Time        time.Time // local standard time, carried as if UTC
	Global      float64   // ghi, W m-2
	Temperature float64   // deg C
	Humidity    float64   // %, NaN if not given
	Diffuse     float64   // dhi, W m-2, NaN if not given
	PPFD        float64   // umol m-2 s-1, NaN if not given
	DiffusePPFD float64   // umol m-2 s-1, NaN if not given
}

// Daily is a row a day covering whole calendar years.
type Daily struct {
	Rows   []DailyRecord
	MaxGap time.Duration
}

// DailyRecord is one day. Exactly one of Global and Sunshine is given; NaN stands for not given.
type DailyRecord struct {
	Line       int
	Date       time.Time
	Global     float64 // MJ m-2 d-1
	Sunshine   float64 // h
	Tmin, Tmax float64 // deg C
	Humidity   float64 // %
	Rain       float64 // mm
}

// Normals are monthly means, January first.
type Normals struct {
	Mean, Min, Max [12]float64 // deg C
	Global         [12]float64 // MJ m-2 d-1; NaN where SunshineShare is given
	SunshineShare  [12]float64 // of possible sunshine, 0..1; NaN where Global is given
	DiffuseShare   [12]float64 // of global, 0..1; NaN for the relation's own
	// DaysPerMonth > 0 makes a representative series of that many weighted days a month
	// instead of every calendar day: for maps over thousands of spots.
	DaysPerMonth int
}
