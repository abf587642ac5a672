package traits

import (
	"fmt"
	"math"
	"strings"
	"sync"

	"shadeledger/leaf"
)

// Species is one entry of the library. Its values are measured, remembered, or filled by group rules.
type Species struct {
	Botanical, Common string
	Group             Group
	Regions           []string // where foresters raise it (common practice): east, west and south of North America, boreal, europe, tropics

	position, shadePosition string // upper, mid or lower crown of the trait sets
	own                     map[string]Value
	library                 *Catalogue
	once                    sync.Once
	values                  []Value
	at                      map[string]int
}

// Values are all numbers of the species: its own first, then those from rules.
func (s *Species) Values() []Value {
	s.once.Do(s.resolve)
	return append([]Value(nil), s.values...)
}

// Value is one number by name.
func (s *Species) Value(name string) (Value, bool) {
	s.once.Do(s.resolve)
	i, ok := s.at[name]
	if !ok {
		return Value{}, false
	}
	return s.values[i], true
}

func (s *Species) get(name string) float64 {
	v, ok := s.Value(name)
	if !ok {
		panic(fmt.Sprintf("species library: %s has no %s", s.Botanical, name))
	}
	return v.Value
}

// Tolerance is the shade-tolerance index, 0 (none) to 5 (Niinemets & Valladares 2006), which rates temperate species of the northern
// hemisphere; NaN where it does not.
func (s *Species) Tolerance() float64 {
	if v, rated := s.own["tolerance"]; rated {
		return v.Value
	}
	return math.NaN()
}

// Class is the tolerance class of the group rules; species without an index are of the middle class.
func (s *Species) Class() Class {
	switch t := s.Tolerance(); {
	case math.IsNaN(t):
		return Mid
	case t < 2.25:
		return Low
	case t <= 3.5:
		return Mid
	}
	return High
}

// Deciduous tells whether the leaves fall each year.
func (s *Species) Deciduous() bool { return s.Group == Broadleaf || s.Group == Larch }

// Needled tells whether the leaves are needles or scales.
func (s *Species) Needled() bool { return s.Group == Pine || s.Group == Needle || s.Group == Larch }

// Genus is the first word of the botanical name.
func (s *Species) Genus() string {
	genus, _, _ := strings.Cut(s.Botanical, " ")
	return genus
}

// Measured tells whether the light-saturated rate and the respiration are both its own, seen; else one of them is its group's.
func (s *Species) Measured() bool {
	return s.own["amax"].Basis == Seen && s.own["rd"].Basis == Seen
}

// Paired tells whether the leaf traits are a measured sun set and a measured shade set.
func (s *Species) Paired() bool { return s.shadePosition != "" }

func (s *Species) add(v Value) {
	s.at[v.Name] = len(s.values)
	s.values = append(s.values, v)
}

// resolve fills what is not measured. The order matters: sizes need leaf traits.
func (s *Species) resolve() {
	s.at = map[string]int{}
	for _, name := range ownOrder {
		if v, ok := s.own[name]; ok {
			s.add(v)
		}
	}
	for _, name := range s.library.order {
		v, ok := s.ruled(name)
		if _, measured := s.at[name]; !ok || measured || s.omitted(name) {
			continue
		}
		s.add(v)
	}
	s.addRd()
	s.addSeedling()
	s.addLights()
	s.addPlant()
}

var ownOrder = []string{"tolerance", "amax", "rd", "phi", "theta", "lma", "t_ref", "shade_amax", "shade_rd",
	"shade_phi", "shade_theta", "shade_lma", "shade_t_ref", "leaf_lifespan", "lma_exponent", "seedling_lma", "vcmax", "jmax", "biochemical_rd"}

// ruled is the first rule of a variable that fits the genus or the group, and the tolerance class.
func (s *Species) ruled(name string) (Value, bool) {
	for _, r := range s.library.rules[name] {
		if (r.group == "any" || r.group == string(s.Group) || r.group == s.Genus()) && (r.class == "any" || r.class == string(s.Class())) {
			return r.value, true
		}
	}
	return Value{}, false
}

// omitted names rules that feed other values or do not concern the species.
func (s *Species) omitted(name string) bool {
	switch name {
	case "growth_light.upper", "growth_light.mid", "growth_light.lower", "growth_light.sapling", "rd_share":
		return true
	case "shade_phi", "shade_theta":
		return !s.Paired()
	case "leaf_out", "leaf_full", "leaf_colour", "leaf_bare", "seedling_lead":
		return !s.Deciduous()
	case "lma_exponent", "amax_exponent", "rd_exponent", "seedling_lma":
		return s.Paired()
	}
	return false
}

func (s *Species) addRd() {
	if _, ok := s.at["rd"]; ok {
		return
	}
	share, _ := s.ruled("rd_share")
	amax := s.values[s.at["amax"]].Value
	s.add(Value{"rd", share.Value * amax, share.Low * amax, share.High * amax, "umol m-2 s-1", share.Source, Derived,
		fmt.Sprintf("%g of amax, %s", share.Value, share.Rule)})
}

func (s *Species) addLights() {
	light, _ := s.ruled("growth_light." + s.position)
	light.Name = "growth_light"
	s.add(light)
	if s.Paired() {
		light, _ = s.ruled("growth_light." + s.shadePosition)
		light.Name = "shade_growth_light"
		s.add(light)
	}
}

// plantLight is the growth light at which the common stock gets its leaf area, percent.
const plantLight = 10

func (s *Species) addPlant() {
	val := func(n string) Value { return s.values[s.at[n]] }
	mass, leaf, stem := val("plant_mass"), val("leaf_fraction"), val("stem_fraction")
	part := func(name string, share float64, source string) Value {
		return Value{name, mass.Value * share, mass.Low * share, mass.High * share, "g", source, Derived, "plant mass times its fraction"}
	}
	leaves := part("leaf_mass", leaf.Value, leaf.Source)
	s.add(leaves)
	s.add(part("stem_mass", stem.Value, stem.Source))
	s.add(part("root_mass", 1-leaf.Value-stem.Value, stem.Source))
	lma := s.seedling().At(plantLight).LMA
	s.add(Value{"leaf_area", leaves.Value / lma, leaves.Low / lma, leaves.High / lma, "m2", leaf.Source, Derived,
		fmt.Sprintf("leaf mass over the leaf mass per area at %d %% light", plantLight)})
}

// Temperature is the response of the leaf rates; its Ref is that of the measured or sun set.
func (s *Species) Temperature() leaf.Temperature {
	s.once.Do(s.resolve)
	return s.temperature()
}

func (s *Species) temperature() leaf.Temperature {
	val := func(n string) float64 { return s.values[s.at[n]].Value }
	return leaf.Temperature{Ref: val("t_ref"), Opt: val("t_opt"), Width: val("t_width"), Q10: val("q10")}
}

// Acclimation gives the leaf traits over growth light: between a sun and a shade set where one
// study measured both, else from one set by the powers of the group.
func (s *Species) Acclimation() leaf.Acclimation {
	s.once.Do(s.resolve)
	return s.acclimation()
}

// SeedlingAcclimation is the same for the leaves of seedlings and saplings. Needles of wild saplings weigh the same at every light
// (`seedling_lma`) and breathe per mass as those of trees do (`seedling_rd`); their light-saturated rate is that of a tree's
// needles at their light. The lower set of a measured pair is of saplings: its mass and respiration hold.
func (s *Species) SeedlingAcclimation() leaf.Acclimation {
	s.once.Do(s.resolve)
	return s.seedling()
}

func (s *Species) seedling() leaf.Acclimation {
	if !s.Needled() {
		return s.acclimation()
	}
	switch a := s.acclimation().(type) {
	case leaf.PowerLaw:
		rd := s.values[s.at["seedling_rd"]].Value / s.temperature().RdFactor(s.values[s.at["t_ref"]].Value)
		a.Ref = withRd(a.Ref, rd)
		a.Ref.LMA, a.LMA, a.Rd = s.values[s.at["seedling_lma"]].Value, 0, 0
		return a
	case leaf.TwoSets:
		a.Sun = withRd(a.Sun, a.Shade.Rd)
		a.Sun.LMA = a.Shade.LMA
		return a
	default:
		return a
	}
}

// withRd is a set of the same net rate that breathes otherwise.
func withRd(s leaf.Set, rd float64) leaf.Set {
	s.Ag, s.Rd = s.Amax()+rd, rd
	return s
}

// addSeedling gives needles of seedlings their respiration: per mass that of the tree's.
func (s *Species) addSeedling() {
	i, needles := s.at["seedling_lma"]
	if !needles {
		return
	}
	lma, tree, rd := s.values[i], s.values[s.at["lma"]].Value, s.values[s.at["rd"]].Value
	s.add(Value{"seedling_rd", rd * lma.Value / tree, rd * lma.Low / tree, rd * lma.High / tree, "umol m-2 s-1", lma.Source, Derived,
		"rd times seedling_lma over lma: needles of seedlings breathe per mass as those of trees"})
}

func (s *Species) acclimation() leaf.Acclimation {
	val := func(n string) float64 { return s.values[s.at[n]].Value }
	if s.Paired() {
		return leaf.TwoSets{Sun: s.set(""), Shade: s.set("shade_"), SunLight: val("growth_light"), ShadeLight: val("shade_growth_light")}
	}
	b := val("lma_exponent")
	return leaf.PowerLaw{Ref: s.set(""), RefLight: val("growth_light"), LMA: b, Amax: b * val("amax_exponent"), Rd: b * val("rd_exponent")}
}

// set brings a measured set to the species' reference temperature: Rd by its own curve, Ag by the
// temperature response. The slope and the curvature are not touched.
func (s *Species) set(prefix string) leaf.Set {
	val := func(n string) float64 { return s.values[s.at[prefix+n]].Value }
	t, measured := s.temperature(), val("t_ref")
	rd := val("rd")
	return leaf.Set{
		Ag: (val("amax") + rd) / t.AgFactor(measured), Rd: rd / t.RdFactor(measured),
		Phi: val("phi"), Theta: val("theta"), LMA: val("lma"),
	}
}

// Calendar is that of overstory trees.
func (s *Species) Calendar() leaf.Calendar {
	if !s.Deciduous() {
		return leaf.Evergreen{}
	}
	return s.deciduous()
}

// SeedlingCalendar leafs out ahead of the overstory by the seedling lead.
func (s *Species) SeedlingCalendar() leaf.Calendar {
	if !s.Deciduous() {
		return leaf.Evergreen{}
	}
	d := s.deciduous()
	lead := -int(math.Round(s.get("seedling_lead")))
	d.Out, d.Full = d.Out.Shift(lead), d.Full.Shift(lead)
	return d
}

func (s *Species) deciduous() leaf.Deciduous {
	day := func(n string) leaf.Date { return leaf.DayOfYear(int(math.Round(s.get(n)))) }
	return leaf.Deciduous{Out: day("leaf_out"), Full: day("leaf_full"), Colour: day("leaf_colour"), Bare: day("leaf_bare")}
}
