// Package scenarios says what a plan, a treatment and a result are, and runs a plan:
// stand -> light -> ledger -> compare. It holds the order of steps and no physics.
package scenarios

import (
	"time"

	"shadeledger/canopy"
	"shadeledger/canopy/inventory"
	"shadeledger/leaf"
	"shadeledger/radiation"
	"shadeledger/radiation/weather"
	"shadeledger/scenarios/ledger"
)

// Plan is a sound plan: every value resolved, in metres, radians and SI, nothing optional.
type Plan struct {
	Title   string
	File    string // where it came from, as the user named it; "" for the built-in example
	Example bool   // the built-in example: "built-in example, invented data"
	Units   Units  // of tables; CSV and JSON are always metric

	Site        radiation.Site
	Ground      canopy.Ground
	Horizon     canopy.Horizon
	Declination float64 // rad, magnetic, east positive
	Frost       Frost

	Weather     weather.Source
	WeatherFile string // as the plan names it; "" for normals
	Par         weather.Par
	Snow        Snow
	Season      Period // period of light figures, both days in

	Stand      Stand
	Seedlings  []Seedling
	Treatments []Treatment
	Stations   []Station // empty: the default stations of each treatment
	Sampling   Sampling
	Size       SizeWish
	Years      YearsAhead
	Draws      Draws
	Record     Record
	Cautions   []Caution // all sixteen, in order, with their state
	Limits     []Limit   // of the owner or the law, in the order of the keys
	Water      Water

	Facts  []Fact  // carried for the record; they change no result
	Doubts []Doubt // doubt as given, for ranges

	Assumed  []Assumed
	Warnings []Warning
}

// Fact is a value of the plan that no result depends on, as written: soil, site index, source of the weather.
type Fact struct{ Key, Value string }

// Doubt is how well a value of the plan is known, in the unit of the plan's types: a standard error where it is
// above 0, else a range.
type Doubt struct {
	Key           string // path in the plan
	Best          float64
	StandardError float64
	Low, High     float64
}

// Units of tables.
type Units int

// The unit systems of tables.
const (
	Metric Units = iota
	US
)

// Date is a month and day of any year.
type Date struct {
	Month time.Month
	Day   int
}

// Period runs from one date to another, both in; From after To crosses New Year.
type Period struct{ From, To Date }

// Frost holds the usual last and first frost; zero Dates where not given.
type Frost struct{ Last, First Date }

// Snow keeps light off plants lower than Depth from From to To. Depth 0 is no snow.
type Snow struct {
	Period
	Depth float64 // m
}

// Stand is the uncut stand.
type Stand struct {
	Height      float64 // m, dominant height, H in every treatment
	CrownBase   float64 // m
	CrownRadius float64 // m, of border trees
	Layers      []Layer // the overstory, cut by openings
	Understory  []Understory
	Trees       inventory.Stand // what the layers are made of; without trees where the plan states layers
	Foliage     Foliage         // how
	Cruise      Cruise
	Readings    Readings
	Area        float64 // ha; NaN where not given
	Age         float64 // y; NaN where not given
}

// Cruised tells whether the stand is known by its trees.
func (s *Stand) Cruised() bool { return len(s.Trees.Trees) > 0 }

// Layer is a canopy layer with its leaf calendar. canopy.Layer.Phenology is filled by Run.
type Layer struct {
	canopy.Layer
	Species  string
	Calendar leaf.Calendar
}

// Understory is a separate layer that stays in openings unless a treatment removes it.
type Understory struct {
	Name string
	Layer
}

// Seedling is a plant to bring up, with the names it goes by.
type Seedling struct {
	Name      string // unique; by default the species
	Botanical string // "" for a full trait set of the user's own
	Ranges    []TraitRange
	ledger.Plant
}

// TraitRange is how well a trait of a seedling is known: its 5th and 95th percentile over its best value; days for a date.
type TraitRange struct {
	Trait     Trait
	Low, High float64
	Source    string
}

// Trait names what a range is about.
type Trait int

// The traits that draws vary.
const (
	Saturated    Trait = iota // light-saturated rate
	Respiration               // of leaves in the dark
	Slope                     // initial, of the light response
	LeafMass                  // per area
	NeedleMass                // per area, respiration per mass held: needles of seedlings breathe so in the library
	Organs                    // respiration of stem and root
	Wood                      // mass of stem and root beside leaves
	LeafAngle                 // chi of the seedling
	CrownArea                 // crown leaf area index
	Lifespan                  // of leaves
	FineRoots                 // lifespan of fine roots
	Construction              // cost of new tissue
	OwnLeafOut                // days that the seedling's own leaf-out may shift
)

// Treatment is one alternative.
type Treatment struct {
	Name       string
	Matrix     []Layer             // the stand between openings after the treatment, understory not in
	Trees      inventory.Stand     // what the matrix is made of; without trees where it is stated
	Cut        []inventory.Removal // trees taken from the matrix
	Thinning   inventory.Thinning  // the last one; of a treatment that is thinned
	Understory []Understory
	Opening    Opening
	Count      int     // openings of that shape in the stand; 0 without an opening
	Centres    Centres // where they are
}

// Opening is a Cleared plan outline or NoOpening.
type Opening interface{ opening() }

// NoOpening leaves the stand whole.
type NoOpening struct{}

// Cleared is an opening in which none of the stand's layers exists.
type Cleared struct {
	Stems  canopy.Outline // legal area
	Crowns canopy.Outline // bounds foliage: light, stations, zones, shares
	Inside []Layer        // bare where empty
	File   string         // of a polygon, as the plan names it
}

func (NoOpening) opening() {}
func (Cleared) opening()   {}

// Station is a named spot: bearing and horizontal distance from the opening's centre.
type Station struct {
	Name     string
	Bearing  float64 // rad from true north
	Distance float64 // m
}

// Sampling says how finely time and space are sampled.
type Sampling struct {
	Step    time.Duration
	Grid    float64   // m
	Heights []float64 // m, further heights for `light`
	Sky     radiation.Sky
	// Dormancy of evergreens, in seedlings and canopy; the zero value is none.
	Dormancy leaf.Dormancy
}

// SizeWish is what an opening is to bring: the share of its area, 0..1, that is to be comfortable, the largest size, m, and the seedling to be outgrown
// ("" for none).
type SizeWish struct {
	Share, UpTo float64
	Against     string
}

// YearsAhead is how the stand closes again. Ranges are low, best, high.
type YearsAhead struct {
	Horizon  int        // years
	Closing  [3]float64 // edge speed of border crowns at the start, m a year and side
	Regrowth [3]float64 // years until a thinned canopy has its leaf area again; 0 takes what is usual for the cut
}

// Draws is how ranges are drawn.
type Draws struct {
	Count int
	Seed  uint64
}

// Record is who prepared the plan for what.
type Record struct{ Forest, Stand, OwnerGoal, Preparer, Licence, Date string }

// Caution is one of the cautions with what the plan says of it.
type Caution struct {
	Key   string // windthrow, felling safety, ...
	Text  string // what to watch
	State string // OPEN, addressed, not applicable, to check
	By    string
	Note  string
}

// Assumed is a value the plan left out, filled by a default, the region or the library.
type Assumed struct {
	Key    string // path in the plan, stand.layers[0].chi
	Value  string // with unit
	Source string // where the value comes from
}

// Warning is a doubt that travels with the results and prints as a footnote.
type Warning struct {
	Key  string
	Text string
}
