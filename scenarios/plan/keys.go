package plan

import (
	"math"
	"strings"
)

// Kind is the form of a key's value.
type Kind string

// The forms.
const (
	Map      Kind = "block"
	List     Kind = "list"
	Quantity Kind = "quantity" // number with a unit
	Number   Kind = "number"   // bare number
	Text     Kind = "text"
	Choice   Kind = "one of"
	Date     Kind = "date"
	Bearing  Kind = "bearing"
	Place    Kind = "coordinate"
	File     Kind = "file"
	Later    Kind = "not yet available"
	Any      Kind = "free"
)

// Key describes one key of a plan. It is the only place where a key is named: the reader, the `keys` command and the
// JSON Schema all work from this table.
type Key struct {
	Path     string // [] stands for an item of a list, * for a name of the user's own
	Kind     Kind
	dim      dimension
	Low, Top float64  // range in the program's unit; both 0 for none
	Range    string   // the same in words
	Words    []string // of a Choice
	Default  string
	Example  string
	Meaning  string
}

// Unit is the unit to write, or "" for none.
func (k Key) Unit() string {
	if k.Kind != Quantity {
		return bareUnits[k.Path[strings.LastIndex(k.Path, ".")+1:]]
	}
	return likely[k.dim]
}

// bareUnits are those of keys with one possible unit.
var bareUnits = map[string]string{
	"amax": "umol CO2 m-2 s-1, net", "rd": "umol CO2 m-2 s-1, positive", "phi": "mol CO2 per mol incident PAR", "lma": "g m-2",
	"growth_light": "percent of full light", "leaf_lifespan": "years", "fine_root_lifespan": "years", "fine_root_share": "of root mass",
	"construction_cost": "g C per g new dry mass", "lai": "m2 m-2", "wai": "m2 m-2", "crown_lai": "m2 m-2", "utc_offset": "hours",
	"par_fraction": "of global energy", "theta": "0..1",
}

const (
	rad     = math.Pi / 180
	leafKey = "leaf dates: out, full, colour, bare as dates, or evergreen, or earlier: days against the library"
)

// Keys is the table, in the order of a plan.
var Keys = build()

func build() []Key {
	k := []Key{
		{Path: "title", Kind: Text, Example: "Stand 7, Kettle Bench", Meaning: "name of the stand, first line of every table"},
		{Path: "units", Kind: Choice, Words: []string{"metric", "us"}, Default: "metric", Example: "us", Meaning: "units of tables and reports; CSV and JSON are always metric"},
		{Path: "region", Kind: Choice, Words: regionNames(), Example: "northern-hardwood", Meaning: "fills blanks of the stand, each listed as assumed"},
		{Path: "site", Kind: Map, Meaning: "where the stand is"},
		{Path: "site.latitude", Kind: Place, Range: "-90 to 90 degrees", Example: "44.35 N", Meaning: "latitude; required"},
		{Path: "site.longitude", Kind: Place, Range: "-180 to 180 degrees", Example: "71.90 W", Meaning: "longitude, east positive; required"},
		{Path: "site.utc_offset", Kind: Number, Low: -12, Top: 14, Range: "-12 to 14 hours", Default: "solar time", Example: "-5", Meaning: "local standard time minus UTC, the same all year"},
		{Path: "site.elevation", Kind: Quantity, dim: length, Low: -450, Top: 6000, Range: "-450 to 6000 m", Default: "0 m", Example: "1345 ft", Meaning: "height above sea level"},
		{Path: "site.slope", Kind: Quantity, dim: slope, Low: 0, Top: 50 * rad, Range: "0 to 119 % (50 deg)", Default: "0 %", Example: "18 %", Meaning: "slope of the ground"},
		{Path: "site.aspect", Kind: Bearing, Range: "0 to 360 degrees or 16 letters", Example: "SSE", Meaning: "downslope direction; required on a slope"},
		{Path: "site.declination", Kind: Quantity, dim: bearing, Low: -90 * rad, Top: 90 * rad, Range: "-90 to 90 deg", Example: "-14 deg", Meaning: "magnetic declination, east positive"},
		{Path: "site.horizon", Kind: List, Default: "free", Example: "[[90, 12], [180, 5]]", Meaning: "terrain horizon: pairs of azimuth and elevation in degrees, linear between"},
		{Path: "site.frost", Kind: Map, Meaning: "usual frosts"},
		{Path: "site.frost.last", Kind: Date, Example: "24 May", Meaning: "last spring frost"},
		{Path: "site.frost.first", Kind: Date, Example: "24 Sep", Meaning: "first autumn frost"},
		{Path: "site.soil", Kind: Map, Meaning: "soil, for the record"},
		{Path: "site.soil.texture", Kind: Text, Example: "sandy loam", Meaning: "texture class"},
		{Path: "site.soil.drainage", Kind: Text, Example: "moderate", Meaning: "drainage class"},
		{Path: "site.soil.restricting_depth", Kind: Quantity, dim: length, Low: 0, Top: 20, Range: "0 to 20 m", Example: "24 in", Meaning: "depth to a layer that roots do not pass"},
		{Path: "site.soil.water_capacity", Kind: Quantity, dim: length, Low: 0, Top: 2, Range: "0 to 2 m", Example: "4.3 in", Meaning: "available water capacity"},
		{Path: "weather", Kind: Map, Meaning: "one of hourly, daily, normals; required"},
		{Path: "weather.hourly", Kind: File, Example: "weather.csv", Meaning: "CSV: time, ghi_w_m2, air_temp_c [, rh_pct, dhi_w_m2, ppfd_umol_m2_s, diffuse_ppfd_umol_m2_s]"},
		{Path: "weather.daily", Kind: File, Example: "daily.csv", Meaning: "CSV: date, ghi_mj_m2 or sunshine_h, tmin_c, tmax_c [, rh_pct, rain_mm]"},
		{Path: "weather.stamp", Kind: Choice, Words: []string{"start", "middle", "end"}, Default: "start", Example: "end", Meaning: "what a time stamp of an interval means"},
		{Path: "weather.max_gap", Kind: Quantity, dim: duration, Low: 0, Top: 24 * 31, Range: "0 to 744 h", Default: "0 h", Example: "3 h", Meaning: "longest gap that is bridged"},
		{Path: "weather.source", Kind: Text, Example: "station records", Meaning: "where the weather comes from"},
		{Path: "weather.co2", Kind: Quantity, dim: ppm, Low: 150, Top: 2000, Range: "150 to 2000 ppm", Default: "420 ppm", Example: "420 ppm", Meaning: "carbon dioxide of the air, for leaves given by biochemistry"},
		{Path: "weather.par_fraction", Kind: Number, Low: 0.3, Top: 0.6, Range: "0.3 to 0.6", Default: "0.45", Example: "0.43", Meaning: "share of global energy that is PAR"},
		{Path: "weather.normals", Kind: Map, Meaning: "monthly normals, January first"},
		{Path: "weather.normals.temperature_unit", Kind: Choice, Words: []string{"C", "F"}, Example: "C", Meaning: "unit of mean, min and max; required"},
		{Path: "weather.normals.radiation_unit", Kind: Choice, Words: []string{"MJ m-2 d-1", "kWh m-2 d-1", "W m-2"}, Example: "MJ m-2 d-1", Meaning: "unit of radiation; required with it"},
		{Path: "weather.normals.rain_unit", Kind: Choice, Words: []string{"mm", "in"}, Example: "mm", Meaning: "unit of rain; required with it"},
	}
	for _, n := range []struct{ name, meaning string }{
		{"mean", "mean air temperature"}, {"min", "mean daily minimum"}, {"max", "mean daily maximum"}, {"radiation", "mean daily global radiation"},
		{"sunshine_share", "share of possible sunshine, 0..1, instead of radiation"}, {"diffuse_share", "diffuse share of global radiation, 0..1"}, {"rain", "rain, for the record"},
	} {
		k = append(k, Key{Path: "weather.normals." + n.name, Kind: List, Range: "12 numbers", Example: "[-8.3, -7.1, ...]", Meaning: n.meaning})
	}
	k = append(k,
		Key{Path: "snow", Kind: Map, Default: "none", Meaning: "snow that covers small plants and keeps light off them"},
		Key{Path: "snow.from", Kind: Date, Example: "12-01", Meaning: "first day of snow cover"},
		Key{Path: "snow.to", Kind: Date, Example: "04-15", Meaning: "last day of snow cover"},
		Key{Path: "snow.depth", Kind: Quantity, dim: length, Low: 0, Top: 10, Range: "0 to 10 m", Example: "0.6 m", Meaning: "plants lower than this lie under it"},
		Key{Path: "season", Kind: Map, Meaning: "period of light figures; required; may cross New Year"},
		Key{Path: "season.from", Kind: Date, Example: "05-01", Meaning: "first day, in"},
		Key{Path: "season.to", Kind: Date, Example: "09-30", Meaning: "last day, in"},
	)
	k = append(k, standKeys()...)
	k = append(k, seedlingKeys()...)
	k = append(k, treatmentKeys()...)
	return append(k, restKeys()...)
}

// layerKeys describe one canopy layer at a path.
func layerKeys(path string) []Key {
	return []Key{
		{Path: path, Kind: Map, Meaning: "a canopy layer; its area is spread evenly between its heights"},
		{Path: path + ".from", Kind: Quantity, dim: length, Low: 0, Top: 120, Range: "0 to 120 m", Example: "9 m", Meaning: "bottom of the layer above the ground"},
		{Path: path + ".to", Kind: Quantity, dim: length, Low: 0, Top: 120, Range: "0 to 120 m", Example: "24 m", Meaning: "top of the layer"},
		{Path: path + ".lai", Kind: Number, Low: 0, Top: 20, Range: "0 to 20", Example: "4.2", Meaning: "leaf area index, half of total leaf surface"},
		{Path: path + ".wai", Kind: Number, Low: 0, Top: 5, Range: "0 to 5", Default: "0", Example: "0.6", Meaning: "wood area index"},
		{Path: path + ".chi", Kind: Number, Low: 0.1, Top: 10, Range: "0.1 to 10", Default: "1", Example: "1.5", Meaning: "ellipsoidal leaf angle parameter, 1 spherical, more flatter"},
		{Path: path + ".clumping", Kind: Number, Low: 0.05, Top: 1.2, Range: "0.05 to 1.2", Default: "1, or the region's", Example: "0.9", Meaning: "clumping index Omega"},
		{Path: path + ".absorptance", Kind: Number, Low: 0.5, Top: 1, Range: "0.5 to 1", Default: "0.85", Example: "0.85", Meaning: "leaf absorptance of PAR"},
		{Path: path + ".species", Kind: Text, Example: "Quercus rubra", Meaning: "library species, for its leaf dates"},
		{Path: path + ".leaves", Kind: Any, Default: "the species', else evergreen", Example: "{out: 05-14, full: 06-04, colour: 09-28, bare: 10-18}", Meaning: leafKey},
	}
}

// leavesKeys are the dates under a leaves key.
func leavesKeys(path string) []Key {
	return []Key{
		{Path: path + ".out", Kind: Date, Example: "05-14", Meaning: "leaves begin to come out"},
		{Path: path + ".full", Kind: Date, Example: "06-04", Meaning: "full leaf"},
		{Path: path + ".colour", Kind: Date, Example: "09-28", Meaning: "leaves begin to fall"},
		{Path: path + ".bare", Kind: Date, Example: "10-18", Meaning: "last leaf down"},
		{Path: path + ".earlier", Kind: Quantity, dim: duration, Low: -24 * 60, Top: 24 * 60, Range: "-60 to 60 d", Example: "8 d", Meaning: "leaf-out and full leaf ahead of the library's dates"},
	}
}

func standKeys() []Key {
	k := []Key{
		{Path: "stand", Kind: Map, Meaning: "the uncut stand; required"},
		{Path: "stand.height", Kind: Quantity, dim: length, Low: 1, Top: 90, Range: "1 to 90 m", Example: "78 ft", Meaning: "dominant height, H in every treatment; required"},
		{Path: "stand.crown_base", Kind: Quantity, dim: length, Low: 0, Top: 80, Range: "0 to 80 m, below stand.height", Default: "0.45 H hardwood, 0.55 H conifer", Example: "30 ft", Meaning: "height of the crown base"},
		{Path: "stand.crown_radius", Kind: Quantity, dim: length, Low: 0, Top: 15, Range: "0 to 15 m", Default: "3.5 m hardwood, 2.0 m conifer", Example: "3.5 m", Meaning: "crown radius of border trees"},
		{Path: "stand.area", Kind: Quantity, dim: area, Low: 1, Top: 1e9, Range: "above 0", Example: "31.4 ac", Meaning: "area of the stand"},
		{Path: "stand.age", Kind: Number, Low: 0, Top: 2000, Range: "0 to 2000 years", Example: "85", Meaning: "age, years"},
		{Path: "stand.site_index", Kind: Map, Meaning: "site index, for the record"},
		{Path: "stand.site_index.value", Kind: Quantity, dim: length, Low: 1, Top: 90, Range: "1 to 90 m", Example: "60 ft", Meaning: "height at the base age"},
		{Path: "stand.site_index.base_age", Kind: Number, Low: 1, Top: 200, Range: "1 to 200 years", Example: "50", Meaning: "base age, years"},
		{Path: "stand.site_index.system", Kind: Text, Example: "sugar maple", Meaning: "name of the system"},
		{Path: "stand.smallest_dbh", Kind: Quantity, dim: length, Low: 0, Top: 1, Range: "0 to 1 m", Example: "3 in", Meaning: "smallest diameter counted"},
		{Path: "stand.layers", Kind: List, Meaning: "canopy layers, instead of stand_table, basal_area or lai"},
		{Path: "stand.lai", Kind: Number, Low: 0, Top: 20, Range: "0 to 20", Example: "5.0", Meaning: "leaf area index: of one layer from crown_base to height, or, beside stand_table or basal_area, of their trees together"},
		{Path: "stand.wai", Kind: Number, Low: 0, Top: 5, Range: "0 to 5", Default: "0", Example: "0.6", Meaning: "wood area index, beside lai"},
		{Path: "stand.chi", Kind: Number, Low: 0.1, Top: 10, Range: "0.1 to 10", Default: "1", Example: "1", Meaning: "leaf angle parameter, beside lai"},
		{Path: "stand.clumping", Kind: Number, Low: 0.05, Top: 1.2, Range: "0.05 to 1.2", Default: "1, or the region's", Example: "0.95", Meaning: "clumping index, beside lai"},
		{Path: "stand.absorptance", Kind: Number, Low: 0.5, Top: 1, Range: "0.5 to 1", Default: "0.85", Example: "0.85", Meaning: "leaf absorptance, beside lai"},
		{Path: "stand.species", Kind: Text, Example: "Quercus rubra", Meaning: "leading species, beside lai"},
		{Path: "stand.leaves", Kind: Any, Example: "{out: 05-14, full: 06-04, colour: 09-28, bare: 10-18}", Meaning: "overrides the dates of deciduous layers"},
		{Path: "stand.understory", Kind: List, Default: "none", Meaning: "layers that stay in openings unless a treatment removes them"},
		{Path: "stand.understory[].name", Kind: Text, Example: "beech saplings", Meaning: "name, by which a treatment removes it"},
	}
	k = append(k, cruiseKeys()...)
	k = append(k, layerKeys("stand.layers[]")...)
	k = append(k, leavesKeys("stand.layers[].leaves")...)
	k = append(k, leavesKeys("stand.leaves")...)
	for _, l := range layerKeys("stand.understory[]") {
		l.Path = strings.NewReplacer(".from", ".base", ".to", ".height").Replace(l.Path)
		k = append(k, l)
	}
	k = append(k, leavesKeys("stand.understory[].leaves")...)
	return append(k,
		Key{Path: "stand.understory[].cover", Kind: Quantity, dim: share, Low: 0, Top: 0.99, Range: "0 to 99 %", Example: "45 %", Meaning: "ground hidden from straight above, instead of lai"},
		Key{Path: "stand.understory[].stems", Kind: Quantity, dim: density, Low: 0, Top: 1e6, Range: "0 to 1 000 000 stems/ha", Example: "900 stems/ac", Meaning: "stems, instead of lai; species and height give their leaves"})
}

// Find gives a key by its path; list items as [].
func Find(path string) (Key, bool) {
	i, ok := keyIndex[path]
	if !ok {
		return Key{}, false
	}
	return Keys[i], true
}

var keyIndex = func() map[string]int {
	m := map[string]int{}
	for i, k := range Keys {
		m[k.Path] = i
	}
	return m
}()

// usable are the children that this version reads.
func usable(path string) []string {
	var out []string
	for _, name := range children(path) {
		if k, _ := Find(join(path, name)); k.Kind != Later {
			out = append(out, name)
		}
	}
	return out
}

// children lists the keys directly under a path.
func children(path string) []string { return keyChildren[path] }

var keyChildren = func() map[string][]string {
	m := map[string][]string{}
	for _, k := range Keys {
		if strings.HasSuffix(k.Path, "[]") {
			continue
		}
		parent, name := "", k.Path
		if i := strings.LastIndex(k.Path, "."); i >= 0 {
			parent, name = k.Path[:i], k.Path[i+1:]
		}
		m[parent] = append(m[parent], name)
	}
	return m
}()
