// Package ledger takes a light regime through a seedling to its year of carbon: income, costs,
// break-even light, working threshold and class. It knows no openings.
package ledger

import "shadeledger/leaf"

// Plant is one seedling as the plan gives it.
type Plant struct {
	Height      float64 // m
	LeafArea    float64 // m2, hemisurface, as measured
	LeafMass    float64 // g
	CrownLAI    float64 // L_c
	Chi         float64 // chi_s
	Absorptance float64 // alpha_s
	// Organs are stem and root. A plant whose wood is given as one mass has Stem only, and then no fine-root
	// replacement: the mass of its roots is not known.
	Organs      []Organ
	Leaves      leaf.Calendar
	Traits      leaf.Acclimation
	Temperature leaf.Temperature
	// Chemistry is set where the trait sets are biochemical: it carries them to the air of the day.
	Chemistry *Chemistry
	Dormancy  leaf.Dormancy // of evergreens; the zero value is none
	// LightRespiration is respiration in the light as a share of that in the dark.
	LightRespiration float64
	Ledger           Kind
	Turnover         Turnover
	// MadeAt is the growth light (percent of full light, leaf-on) of the leaves as measured, for the first-season
	// ledger; 0 takes the light whose LMA is nearest to LeafMass / LeafArea.
	MadeAt   float64
	Factor   float64            // working threshold over break-even
	SnowDays func(day int) bool // series days under snow; nil for none
}

// Chemistry is what a biochemical leaf takes from the air besides light.
type Chemistry struct {
	Leaf leaf.Biochemistry // what the trait sets were made from
	CO2  float64           // of the air, ppm
	// Pressure of the air, kPa; 0 is that at sea level.
	Pressure float64
	// Acclimates tells whether capacities follow the mean temperature of the month before (Kattge & Knorr 2007).
	Acclimates bool
}

// Kind is Acclimated or FirstSeason.
type Kind int

// The two ledgers of a plant.
const (
	Acclimated Kind = iota
	FirstSeason
)

// Organ is a respiring part other than leaves.
type Organ struct {
	Line Line    // Stem or Root
	Mass float64 // g
	Rate float64 // r_ref, nmol CO2 g-1 s-1 at TRef
	TRef float64 // deg C
	Q10  float64
}

// Line names a line of the ledger.
type Line int

// The lines, in the order of the columns.
const (
	Income Line = iota // gross; includes Sunfleck
	Sunfleck
	LeafDay
	LeafNight
	Stem
	Root
	LeafReplacement
	RootReplacement
	lines
)

// Lines holds an amount of carbon for each line, g C per plant; costs positive.
type Lines [lines]float64

// Turnover is what replacing leaves and fine roots costs.
type Turnover struct {
	LeafLifespan     float64 // y
	FineRootShare    float64 // of root mass
	FineRootLifespan float64 // y
	ConstructionCost float64 // g C per g new dry mass, its own carbon included
}

// Class of a seedling at a station.
type Class int

// The classes, worst first.
const (
	Below Class = iota
	Marginal
	Comfortable
)

// BreakEven is the light at which the year's net is zero, in percent of full light.
type BreakEven struct {
	Found     bool    // false: below zero at every light
	Season    float64 // over the plan's season
	LeafOn    float64 // over the leaf-on period
	Threshold Threshold
}

// Threshold is min(100, factor * break-even).
type Threshold struct{ Season, LeafOn float64 }
