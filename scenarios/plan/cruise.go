package plan

import (
	"fmt"
	"math"

	"go.yaml.in/yaml/v4"

	"shadeledger/canopy/inventory"
	"shadeledger/leaf"
	"shadeledger/leaf/traits"
	"shadeledger/scenarios"
)

// cruised tells whether the stand is given by its trees.
func cruised(f map[string]val) bool { return f["stand_table"].present() || f["basal_area"].present() }

// cruise reads what was counted; its classes are empty where the stand is not given by trees.
func (r *reader) cruise(f map[string]val, s *scenarios.Stand) []inventory.Class {
	c := &s.Cruise
	r.angleCount(f["angle_count"], c)
	switch {
	case f["layers"].present():
		for _, k := range []string{"stand_table", "basal_area"} {
			if f[k].present() {
				r.fault(f[k], describe(f[k].node), "not beside stand.layers: one of the two")
			}
		}
	case f["stand_table"].present():
		if f["basal_area"].present() {
			r.fault(f["basal_area"], describe(f["basal_area"].node), "not beside stand.stand_table: one of the two")
		}
		return r.standTable(f["stand_table"], s)
	case f["basal_area"].present():
		return r.basalAreas(f["basal_area"], s.Height)
	case len(c.Counts) > 0 && !f["lai"].present():
		if leading := r.find(f["species"]); leading != nil {
			r.assume("stand.basal_area", fmt.Sprintf("%s: %.3g m2/ha", leading.Botanical, c.BasalArea().Mean), "the angle count, all of stand.species")
			return []inventory.Class{inventory.FromBasalArea(leading, c.BasalArea().Mean, math.Max(1, s.Height))}
		}
		r.fault(f["angle_count"], " ", "beside it stand_table, basal_area by species, or species for a stand of one")
	}
	return nil
}

func (r *reader) angleCount(v val, c *scenarios.Cruise) {
	f := r.fields(v)
	if v.node == nil {
		return
	}
	c.Factor, _ = r.quantity(r.need(v, f, "factor"))
	for _, item := range r.items(r.need(v, f, "counts")) {
		if x, ok := r.number(item); ok {
			if x < 0 || x > 1000 {
				r.fault(item, "", "trees counted at a point, 0 to 1000")
			}
			c.Counts = append(c.Counts, x)
		}
	}
}

// standTable reads the sheet, from the file beside the plan.
func (r *reader) standTable(v val, s *scenarios.Stand) []inventory.Class {
	name, data, ok := r.open(v)
	if !ok {
		return nil
	}
	o := inventory.SheetOptions{BasalArea: math.NaN(), Area: s.Area}
	if e := s.Cruise.BasalArea(); e.N > 0 {
		o.BasalArea = e.Mean
	}
	sheet, faults := inventory.ReadSheet(data, o)
	for _, f := range faults {
		r.faults = append(r.faults, Fault{File: name, Line: f.Line, Key: f.Column, Value: f.Value, Fix: f.Fix})
	}
	s.Cruise.Table, s.Cruise.Totals, s.Cruise.Notes = name, sheet.Totals, sheet.Notes
	for _, n := range sheet.Notes {
		at := "stand.stand_table"
		if n.Line > 0 {
			at = fmt.Sprintf("%s:%d", name, n.Line)
		}
		r.assume(at, n.Text, "read so")
	}
	var out []inventory.Class
	byPlot := map[string]float64{}
	for _, row := range sheet.Rows {
		c := row.Class
		if math.IsNaN(c.DBH) && s.Height > 0 {
			c = inventory.FromBasalArea(c.Species, row.BasalArea, s.Height)
		}
		out = append(out, c)
		byPlot[row.Plot] += row.BasalArea * float64(len(sheet.Plots))
	}
	for _, p := range sheet.Plots {
		s.Cruise.Plots = append(s.Cruise.Plots, byPlot[p])
	}
	return out
}

// basalAreas reads a map of species to basal area.
func (r *reader) basalAreas(v val, height float64) (out []inventory.Class) {
	if v.node.Kind != yaml.MappingNode {
		r.fault(v, describe(v.node), "basal area by species, such as {Quercus rubra: 60 ft2/ac}")
		return nil
	}
	seen := map[*traits.Species]bool{}
	for i := 0; i+1 < len(v.node.Content); i += 2 {
		k, n := v.node.Content[i], v.node.Content[i+1]
		at := val{node: k, path: join(v.path, k.Value), at: k}
		species := r.find(at)
		x, ok := r.doubted(val{node: n, path: at.path, at: k}, func(s string) (float64, error) { return parseQuantity(s, basalArea, 0) })
		switch {
		case species == nil || !ok:
			continue
		case seen[species]:
			r.fault(at, k.Value, "each species once; "+species.Botanical+" stands already")
			continue
		case !(x > 0 && x <= mostBasalArea):
			r.fault(val{node: n, path: at.path}, n.Value, fmt.Sprintf("above 0 to %d m2/ha", mostBasalArea))
			continue
		}
		seen[species] = true
		if height > 0 {
			out = append(out, inventory.FromBasalArea(species, x, height))
		}
	}
	if len(seen) == 0 && len(v.node.Content) == 0 {
		r.fault(v, " ", "basal area by species, such as {Quercus rubra: 60 ft2/ac}")
	}
	return out
}

// mostBasalArea, m2/ha, is above what temperate forests reach (common practice).
const mostBasalArea = 120

// conifers tells whether needles lead in basal area.
func conifers(classes []inventory.Class) bool {
	needles := 0.0
	for _, c := range classes {
		if c.Species.Needled() {
			needles += c.BasalArea()
		} else {
			needles -= c.BasalArea()
		}
	}
	return needles > 0
}

// crownBase is the mean share of height below the crown of the classes that have both, weighted by basal area.
func crownBase(classes []inventory.Class) (share float64, ok bool) {
	sum, weight := 0.0, 0.0
	for _, c := range classes {
		if x := c.CrownBase / c.Height; x > 0 && x < 1 {
			sum += x * c.BasalArea()
			weight += c.BasalArea()
		}
	}
	return sum / weight, weight > 0
}

// trees makes the stand's layers of its classes.
func (r *reader) trees(v val, f map[string]val, classes []inventory.Class, s *scenarios.Stand) []scenarios.Layer {
	if f["species"].present() && cruised(f) {
		r.fault(f["species"], "", "not beside stand_table or basal_area: their species count")
	}
	var err error
	if s.Trees, err = inventory.NewStand(classes, inventory.Setting{Height: s.Height, CrownBase: s.CrownBase}); err != nil {
		r.fault(v, " ", err.Error())
		return nil
	}
	s.Foliage = scenarios.Foliage{LeafFactor: 1, WoodFactor: 1, Chi: math.NaN(), Clumping: math.NaN(), Absorptance: math.NaN()}
	for _, set := range []struct {
		key string
		to  *float64
	}{{"chi", &s.Foliage.Chi}, {"clumping", &s.Foliage.Clumping}, {"absorptance", &s.Foliage.Absorptance}} {
		if x, ok := r.number(f[set.key]); ok {
			*set.to = x
		}
	}
	u := s.Trees.Sums()
	if x, ok := r.number(f["lai"]); ok {
		s.Foliage.LeafFactor, s.Foliage.LeafStated = x/u.LAI, true
	}
	if x, ok := r.number(f["wai"]); ok {
		s.Foliage.WoodFactor = x / u.WAI
	}
	r.calendars(f, s)
	r.assumeTrees(f, s)
	return s.Foliage.Layers(s.Trees)
}

// calendars finds the leaf dates of every species: the stand's for deciduous ones, else the library's.
func (r *reader) calendars(f map[string]val, s *scenarios.Stand) {
	s.Foliage.Calendars = map[string]leaf.Calendar{}
	for _, sp := range s.Trees.BySpecies() {
		if f["leaves"].present() && sp.Species.Deciduous() {
			s.Foliage.Calendars[sp.Species.Botanical] = r.calendar(f["leaves"], sp.Species)
			continue
		}
		if r.region != nil && sp.Species.Deciduous() && r.region.leaves != leaf.Calendar(leaf.Evergreen{}) {
			r.assume("stand.leaves, "+sp.Species.Botanical, calendarText(r.region.leaves), practice+", the region's")
			s.Foliage.Calendars[sp.Species.Botanical] = r.region.leaves
			continue
		}
		if sp.Species.Deciduous() {
			r.assume("stand.leaves, "+sp.Species.Botanical, calendarText(sp.Species.Calendar()), "species library")
		}
		s.Foliage.Calendars[sp.Species.Botanical] = sp.Species.Calendar()
	}
}

// assumeTrees lists what allometry added.
func (r *reader) assumeTrees(f map[string]val, s *scenarios.Stand) {
	t := s.Trees
	for _, sp := range t.BySpecies() {
		source := ""
		for _, x := range t.Trees {
			if x.Species == sp.Species {
				source = x.Source
			}
		}
		if !f["lai"].present() {
			r.assume("stand.lai, "+sp.Species.Botanical, fmt.Sprintf("%.2f", sp.LAI), source)
		}
	}
	u := t.Sums()
	if t.Crowding < 1 && !f["lai"].present() {
		r.assume("stand.lai, crowding", fmt.Sprintf("%.2f of the allometric leaf area", t.Crowding), fmt.Sprintf("crowns share the ground that random crowns cover; sample trees taken to come from a crown sum of %g", inventory.SampledCrowns))
	}
	r.assume("stand.lai, by tree", "more to tall trees, less to suppressed ones, the sum kept", "in proportion to height in the stand; Long & Smith 1988, DeRose & Seymour 2012")
	if !f["wai"].present() {
		r.assume("stand.wai", fmt.Sprintf("%.2f", u.WAI), fmt.Sprintf("stems as cones, branches %g times their surface, %g under needles, at random; Whittaker & Woodwell 1967, from memory", inventory.BareBranches, inventory.HiddenBranches))
	}
	if !f["clumping"].present() {
		r.assume("stand.clumping", fmt.Sprintf("%.2f", t.Layers()[0].Clumping), fmt.Sprintf("%g within crowns; between them from the stand's crowns: Nilson 1971, Agric. Meteorol. 8:25-38", inventory.Within))
	}
	if !f["chi"].present() {
		r.assume("stand.chi", "2.1 broadleaves, 1 needles", "Pisek et al. 2013, Agric. For. Meteorol. 169:186-194; "+practice)
	}
	if !f["absorptance"].present() {
		r.assume("stand.absorptance", fmt.Sprint(inventory.Absorptance), practice)
	}
	heights, bases, taken := 0, 0, 0
	for _, x := range t.Trees {
		if x.HeightTaken {
			heights++
		}
		if x.DBHTaken {
			taken++
		}
		if x.CrownBaseMade {
			bases++
		}
	}
	if taken > 0 {
		r.assume("stand.basal_area, dbh", fmt.Sprintf("%.3g cm, height over %d", 100*s.Height/inventory.UsualSlenderness, inventory.UsualSlenderness), practice+"; for leaf area, crowns and the order of thinning")
	}
	if heights > 0 {
		r.assume("stand.stand_table, height", fmt.Sprintf("of %d of %d classes from dominant height and dbh", heights, len(t.Trees)), "root of dbh over that of the thickest 100 trees/ha, "+practice)
	}
	if bases > 0 {
		r.assume("stand.stand_table, crown_base", fmt.Sprintf("of %d of %d classes as the dominant trees' share of height", bases, len(t.Trees)), practice)
	}
}
