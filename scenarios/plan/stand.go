package plan

import (
	"fmt"
	"math"

	"go.yaml.in/yaml/v4"

	"shadeledger/canopy"
	"shadeledger/canopy/inventory"
	"shadeledger/leaf"
	"shadeledger/leaf/traits"
	"shadeledger/scenarios"
)

// region holds defaults of a forest region, all common practice: to start from, never as truth.
type region struct {
	lai, clumping float64
	leaves        leaf.Calendar
	closing       [3]float64 // edge speed of border crowns, m a year: low, best, high (common practice)
}

func dates(out, full, colour, bare leaf.Date) leaf.Calendar {
	return leaf.Deciduous{Out: out, Full: full, Colour: colour, Bare: bare}
}

// regions by name. Leaf dates are leaf-out to leaf-fall; three weeks to full leaf and for the fall.
var regions = map[string]*region{
	"northern-hardwood":     {5.0, 0.95, dates(leaf.Date{Month: 5, Day: 10}, leaf.Date{Month: 5, Day: 31}, leaf.Date{Month: 9, Day: 20}, leaf.Date{Month: 10, Day: 10}), [3]float64{0.10, 0.18, 0.40}},
	"oak-hickory":           {4.5, 0.95, dates(leaf.Date{Month: 4, Day: 20}, leaf.Date{Month: 5, Day: 11}, leaf.Date{Month: 9, Day: 30}, leaf.Date{Month: 10, Day: 20}), [3]float64{0.10, 0.18, 0.35}},
	"central-europe-spruce": {6.0, 0.72, leaf.Evergreen{}, [3]float64{0.05, 0.12, 0.20}},
	"coastal-douglas-fir":   {7.0, 0.65, leaf.Evergreen{}, [3]float64{0.10, 0.20, 0.35}},
	"boreal-aspen":          {2.6, 0.85, dates(leaf.Date{Month: 5, Day: 20}, leaf.Date{Month: 6, Day: 10}, leaf.Date{Month: 9, Day: 1}, leaf.Date{Month: 9, Day: 20}), [3]float64{0.10, 0.15, 0.20}},
	"uk-sitka":              {6.5, 0.65, leaf.Evergreen{}, [3]float64{0.10, 0.20, 0.30}},
}

func regionNames() []string {
	return []string{"northern-hardwood", "oak-hickory", "central-europe-spruce", "coastal-douglas-fir", "boreal-aspen", "uk-sitka"}
}

const practice = "common practice"

// tallest is the height, m, above which a slip of feet for metres is likelier than such a stand (common practice).
const tallest = 60

// stand reads the uncut stand and leaves it in the plan.
func (r *reader) stand(v val, p *scenarios.Plan) map[string]val {
	f := r.fields(v)
	if v.node == nil {
		return f
	}
	s := &p.Stand
	s.Area, s.Age = math.NaN(), math.NaN()
	if h, ok := r.quantity(r.need(v, f, "height")); ok {
		s.Height, r.height = h, h
	}
	if x, ok := r.quantity(f["area"]); ok {
		s.Area = x / 1e4
	}
	if x, ok := r.number(f["age"]); ok {
		s.Age = x
	}
	before := len(r.faults)
	classes := r.cruise(f, s)
	r.crowns(f, s, classes)
	index := r.fields(f["site_index"])
	r.quantity(index["value"])
	r.number(index["base_age"])
	r.text(index["system"])
	r.quantity(f["smallest_dbh"])
	r.carry(index["value"], index["base_age"], index["system"], f["smallest_dbh"])
	if s.Height > tallest {
		r.warnings = append(r.warnings, scenarios.Warning{Key: "stand.height",
			Text: fmt.Sprintf("%.3g m is taller than most stands; were feet meant? %.3g ft is %.3g m", s.Height, s.Height, s.Height*foot)})
	}
	switch {
	case len(classes) > 0 && len(r.faults) == before:
		s.Layers = r.trees(v, f, classes, s)
	case !cruised(f) && len(classes) == 0 && len(r.faults) == before:
		s.Layers = r.overstory(v, f, p)
	}
	s.Understory = r.understory(f["understory"], f["leaves"])
	r.readings(f, p)
	r.slender(s)
	return f
}

// H:D above which a stand is unstable, and very (common practice).
const slender, verySlender = 80, 95

// slender warns of trees thin for their height.
func (r *reader) slender(s *scenarios.Stand) {
	if !s.Cruised() || !s.Trees.Measured() {
		return
	}
	word, x := "caution", s.Trees.Slenderness()
	switch {
	case x <= slender:
		return
	case x > verySlender:
		word = "high risk"
	}
	r.warnings = append(r.warnings, scenarios.Warning{Key: "windthrow", Text: fmt.Sprintf(
		"%s: H:D %.0f (dominant height over QMD of %s), above %d; thin in steps, keep edges closed", word, x, s.Trees.Leading().Species.Common, map[string]int{"caution": slender, "high risk": verySlender}[word])})
}

// crowns reads where crowns begin and how far they reach; left out, both come from the trees, else from the species group.
func (r *reader) crowns(f map[string]val, s *scenarios.Stand, classes []inventory.Class) {
	conifer := r.leadingConifer(f)
	if len(classes) > 0 {
		conifer = conifers(classes)
	}
	base, radius, group := 0.45, 3.5, "hardwood"
	if conifer {
		base, radius, group = 0.55, 2.0, "conifer"
	}
	source := practice + ", " + group
	if share, ok := crownBase(classes); ok {
		base, source = share, "the stand table's measured crowns"
	}
	x, ok := r.quantity(f["crown_base"])
	s.CrownBase = r.or(x, ok, f["crown_base"], "stand.crown_base", base*s.Height, fmt.Sprintf("%.3g m, %.2g H", base*s.Height, base), source)
	if ok && s.Height > 0 && s.CrownBase >= s.Height {
		r.fault(f["crown_base"], "", fmt.Sprintf("a crown base below stand.height, %.4g m", s.Height))
	}
	source = practice + ", by species group"
	if len(classes) > 0 {
		radius, source = inventory.BorderCrown(classes), "dbh of the thickest 100 trees/ha, by species group"
	}
	x, ok = r.quantity(f["crown_radius"])
	s.CrownRadius = r.or(x, ok, f["crown_radius"], "stand.crown_radius", radius, fmt.Sprintf("%.2g m", radius), source)
}

// leadingConifer looks for the species named first.
func (r *reader) leadingConifer(f map[string]val) bool {
	names := []val{f["species"]}
	if l := f["layers"]; l.present() && l.node.Kind == yaml.SequenceNode {
		for _, n := range l.node.Content {
			for i := 0; i+1 < len(n.Content); i += 2 {
				if n.Content[i].Value == "species" {
					names = append(names, val{node: n.Content[i+1]})
				}
			}
		}
	}
	for _, v := range names {
		if v.scalar() {
			if s, err := traits.Find(v.node.Value); err == nil {
				return s.Needled()
			}
		}
	}
	return r.region != nil && r.region.leaves == leaf.Calendar(leaf.Evergreen{})
}

// overstory reads layers, or one layer from lai or the region.
func (r *reader) overstory(v val, f map[string]val, p *scenarios.Plan) []scenarios.Layer {
	beside := []string{"lai", "wai", "chi", "clumping", "absorptance", "species"}
	if f["layers"].present() {
		for _, k := range beside {
			if f[k].present() {
				r.fault(f[k], "", "not beside stand.layers: put it in the layers")
			}
		}
		return r.layers(f["layers"], f["leaves"])
	}
	one := map[string]val{}
	for _, k := range append(beside, "leaves") {
		if f[k].present() {
			one[k] = f[k]
		}
	}
	if !f["lai"].present() {
		if r.region == nil {
			r.fault(val{node: v.node, at: v.at, path: "stand.lai"}, " ", "missing; give stand_table, basal_area, layers or lai, or a region whose value is assumed")
			return nil
		}
		r.assume("stand.lai", fmt.Sprint(r.region.lai), practice+", the region's")
	}
	l := r.layerRest("stand", one, val{})
	if !f["lai"].present() {
		l.LAI = r.region.lai
	}
	l.Bottom, l.Top = p.Stand.CrownBase, p.Stand.Height
	return []scenarios.Layer{l}
}

// layers reads a list of layers.
func (r *reader) layers(v, leaves val) (out []scenarios.Layer) {
	for _, item := range r.items(v) {
		f := r.fields(item)
		from, okF := r.quantity(r.need(item, f, "from"))
		to, okT := r.quantity(r.need(item, f, "to"))
		r.need(item, f, "lai")
		l := r.layerRest(item.path, f, leaves)
		l.Bottom, l.Top = from, to
		if okF && okT && to <= from {
			r.fault(f["to"], "", fmt.Sprintf("a top above from, %.4g m", from))
		}
		out = append(out, l)
	}
	return out
}

// layerRest reads all of a layer but its heights; leaves is the stand's override for deciduous layers.
func (r *reader) layerRest(path string, f map[string]val, leaves val) scenarios.Layer {
	var l scenarios.Layer
	l.LAI, _ = r.number(f["lai"])
	x, ok := r.number(f["wai"])
	l.WAI = r.or(x, ok, f["wai"], path+".wai", 0, "0", "left out: no wood, so leafless light comes out too bright")
	x, ok = r.number(f["chi"])
	l.Chi = r.or(x, ok, f["chi"], path+".chi", 1, "1, spherical", practice)
	clumping, why := 1.0, "left out: leaves at random"
	if r.region != nil {
		clumping, why = r.region.clumping, practice+", the region's"
	}
	x, ok = r.number(f["clumping"])
	l.Clumping = r.or(x, ok, f["clumping"], path+".clumping", clumping, fmt.Sprint(clumping), why)
	x, ok = r.number(f["absorptance"])
	l.Absorptance = r.or(x, ok, f["absorptance"], path+".absorptance", 0.85, "0.85", practice)
	l.Species, l.Calendar = r.layerCalendar(path, f, leaves)
	return l
}

// layerCalendar finds when a layer has leaves: its own dates, the stand's for deciduous species, the library's, the
// region's; else evergreen.
func (r *reader) layerCalendar(path string, f map[string]val, leaves val) (string, leaf.Calendar) {
	var species *traits.Species
	name, ok := r.text(f["species"])
	if ok {
		species = r.find(f["species"])
		if species != nil {
			name = species.Botanical
		}
	}
	switch {
	case f["leaves"].present():
		return name, r.calendar(f["leaves"], species)
	case leaves.present() && (species == nil || species.Deciduous()):
		return name, r.calendar(leaves, species)
	case species != nil:
		if species.Deciduous() {
			r.assume(path+".leaves", calendarText(species.Calendar()), "species library, "+species.Botanical)
		}
		return name, species.Calendar()
	case r.region != nil:
		r.assume(path+".leaves", calendarText(r.region.leaves), practice+", the region's")
		return name, r.region.leaves
	}
	r.assume(path+".leaves", "evergreen", "left out")
	return name, leaf.Evergreen{}
}

func calendarText(c leaf.Calendar) string {
	if d, ok := c.(leaf.Deciduous); ok {
		return fmt.Sprintf("out %s, full %s, colour %s, bare %s", d.Out, d.Full, d.Colour, d.Bare)
	}
	return "evergreen"
}

// find looks a species up.
func (r *reader) find(v val) *traits.Species {
	if !v.scalar() {
		return nil
	}
	s, err := traits.Find(v.node.Value)
	if err != nil {
		r.fault(v, "", err.Error())
		return nil
	}
	return s
}

// calendar reads a leaves value.
func (r *reader) calendar(v val, species *traits.Species) leaf.Calendar {
	if v.scalar() {
		if v.node.Value != "evergreen" {
			r.fault(v, "", "evergreen, or a block {out, full, colour, bare}, or {earlier: 8 d}")
		}
		return leaf.Evergreen{}
	}
	f := r.fields(v)
	if f["earlier"].present() {
		return r.earlier(v, f, species)
	}
	var d [4]leaf.Date
	sound := true
	for i, k := range []string{"out", "full", "colour", "bare"} {
		x, ok := r.date(r.need(v, f, k))
		sound = sound && ok
		d[i] = leaf.Date(x)
	}
	if !sound {
		return leaf.Evergreen{}
	}
	c, err := leaf.NewDeciduous(d[0], d[1], d[2], d[3])
	if err != nil {
		r.fault(v, " ", err.Error())
	}
	return c
}

// earlier shifts the library's leaf-out and full leaf.
func (r *reader) earlier(v val, f map[string]val, species *traits.Species) leaf.Calendar {
	hours, ok := r.quantity(f["earlier"])
	if len(f) > 1 {
		r.fault(v, " ", "earlier by itself, or the four dates")
	}
	if species == nil || !species.Deciduous() {
		r.fault(f["earlier"], "", "earlier shifts the dates of a deciduous library species; give the four dates instead")
		return leaf.Evergreen{}
	}
	d, isDeciduous := species.Calendar().(leaf.Deciduous)
	if !ok || !isDeciduous {
		return species.Calendar()
	}
	c, err := d.ShiftSpring(-int(math.Round(hours / 24)))
	if err != nil {
		r.fault(f["earlier"], "", err.Error())
	}
	return c
}

func (r *reader) understory(v, leaves val) (out []scenarios.Understory) {
	seen := map[string]int{}
	for _, item := range r.items(v) {
		f := r.fields(item)
		var u scenarios.Understory
		u.Name, _ = r.text(r.need(item, f, "name"))
		r.unique(f["name"], u.Name, seen)
		top, okTop := r.quantity(r.need(item, f, "height"))
		lai := f["lai"]
		delete(f, "lai")
		u.Layer = r.layerRest(item.path, f, leaves)
		u.LAI = r.underLeaves(item, f, lai, u.Layer, top)
		base, ok := r.quantity(f["base"])
		u.Bottom = r.or(base, ok, f["base"], item.path+".base", 0, "0 m", "left out: leaves down to the ground")
		u.Top = top
		if okTop && u.Top <= u.Bottom {
			r.fault(f["height"], "", fmt.Sprintf("a top above base, %.4g m", u.Bottom))
		}
		out = append(out, u)
	}
	return out
}

// saplingSlenderness is height over dbh of saplings in shade (common practice).
const saplingSlenderness = 120

// underLeaves is the leaf area of an understory: stated, or of its cover, -ln(1 - cover) over the projection of its leaves straight down, or
// of its stems.
func (r *reader) underLeaves(item val, f map[string]val, lai val, l scenarios.Layer, height float64) float64 {
	given := 0
	for _, v := range []val{lai, f["cover"], f["stems"]} {
		if v.present() {
			given++
		}
	}
	if given != 1 {
		r.fault(val{node: item.node, at: item.at, path: item.path}, " ", "one of lai, cover and stems, such as lai: 0.8")
		return 0
	}
	switch {
	case f["cover"].present():
		cover, _ := r.quantity(f["cover"])
		x := -math.Log(1-cover) / (l.Clumping * canopy.LeafProjection(l.Chi, 1, 0))
		r.assume(item.path+".lai", fmt.Sprintf("%.2f", x), "its cover seen from straight above, leaves alone")
		return x
	case f["stems"].present():
		stems, ok := r.quantity(f["stems"])
		species := r.find(f["species"])
		if f["species"].node == nil {
			r.fault(f["stems"], "", "stems need the species beside them")
		}
		if !ok || species == nil || height <= 0 {
			return 0
		}
		area, source := inventory.LeafArea(species, height/saplingSlenderness)
		x := area * stems / 1e4
		r.assume(item.path+".lai", fmt.Sprintf("%.2f", x), fmt.Sprintf("stems of %.1f cm, height over %d; %s", 100*height/saplingSlenderness, saplingSlenderness, source))
		return x
	}
	x, _ := r.number(lai)
	return x
}
