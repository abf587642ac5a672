package report

import (
	"fmt"
	"math"
	"slices"
	"strings"

	"github.com/jedib0t/go-pretty/v6/table"

	"shadeledger/canopy/inventory"
	"shadeledger/scenarios"
)

// treeRow is a class of a stand with what was made of it.
type treeRow struct {
	inventory.Tree
	lai, wai float64
}

var treeColumns = []column[treeRow]{
	words("species", func(t *treeRow) string { return t.Species.Common }),
	words("botanical", func(t *treeRow) string { return t.Species.Botanical }),
	figure("dbh_cm", func(t *treeRow) float64 { return 100 * t.DBH }),
	figure("trees_ha", func(t *treeRow) float64 { return t.PerHa }),
	figure("basal_area_m2_ha", func(t *treeRow) float64 { return t.BasalArea() }),
	figure("height_m", func(t *treeRow) float64 { return t.Height }),
	figure("crown_base_m", func(t *treeRow) float64 { return t.CrownBase }),
	figure("crown_radius_m", func(t *treeRow) float64 { return t.Crown }),
	figure("leaf_area_m2", func(t *treeRow) float64 { return t.lai / t.PerHa * m2PerHectare }),
	figure("lai", func(t *treeRow) float64 { return t.lai }),
	figure("wai", func(t *treeRow) float64 { return t.wai }),
	words("source", func(t *treeRow) string { return t.Source }),
}

// Stand writes the cruise read back: what was counted, what it adds to and how sure it is, and the leaf area made of it. plan is as
// it was read; its leaf area is corrected by c.
func Stand(o Output, p *scenarios.Plan, c scenarios.Correction) error {
	f := &p.Stand.Foliage
	factor := f.LeafFactor
	if c.Source != "" {
		factor *= c.Factor
	}
	n := notes{plan: p, assumed: p.Assumed, warnings: append(slices.Clone(p.Warnings), c.Notes()...)}
	var rows []treeRow
	for _, t := range p.Stand.Trees.Trees {
		rows = append(rows, treeRow{t, t.LeafArea * t.PerHa / m2PerHectare * factor, (t.Stem + t.Branch) * t.PerHa / m2PerHectare * f.WoodFactor})
	}
	if o.Format != Table {
		return data(o, n, treeColumns, rows)
	}
	b := standReport{p: &printer{w: o.Out}, o: o, plan: p, factor: factor}
	b.p.f("%s\n", Name(p))
	if !p.Stand.Cruised() {
		b.stated()
	} else {
		b.species()
		b.classes(rows)
		b.counted()
		b.made(c)
	}
	b.p.f("\n")
	if b.p.err != nil {
		return b.p.err
	}
	return n.write(o.Out)
}

type standReport struct {
	p      *printer
	o      Output
	plan   *scenarios.Plan
	factor float64 // on the leaf area
}

// stated is a stand given by its layers.
func (b *standReport) stated() {
	s := &b.plan.Stand
	b.p.f("The plan states the canopy: height %s, leaf area %s in %d layers. With stand_table or\nbasal_area it would follow from the trees.\n",
		length(s.Height, b.o.Units), text0(scenarios.LeafArea(s.Layers), 2), len(s.Layers))
}

func (b *standReport) table(t table.Writer, right ...int) {
	if b.p.err == nil {
		b.p.err = render(b.o.Out, t, right...)
	}
}

// units of a stand table's columns.
func (b *standReport) perArea() string {
	if b.o.Units == scenarios.US {
		return "ac"
	}
	return "ha"
}

func (b *standReport) dbhUnit() string {
	if b.o.Units == scenarios.US {
		return "in"
	}
	return "cm"
}

func (b *standReport) species() {
	u := b.o.Units
	t := newTable("species", "trees/"+b.perArea(), "basal area "+basalUnit(u), "%", "QMD "+b.dbhUnit(), "leaf area")
	all := b.plan.Stand.Trees.Sums()
	for _, s := range b.plan.Stand.Trees.BySpecies() {
		t.AppendRow(table.Row{s.Species.Common, count(densityValue(s.PerHa, u)), text0(basalValue(s.BasalArea, u), 1), whole(100 * s.BasalArea / all.BasalArea),
			text0(diameterValue(s.QMD(), u), 1), text0(s.LAI*b.factor, 2)})
	}
	t.AppendRow(table.Row{"all", count(densityValue(all.PerHa, u)), text0(basalValue(all.BasalArea, u), 1), "100",
		text0(diameterValue(all.QMD(), u), 1), text0(all.LAI*b.factor, 2)})
	b.table(t, 2, 3, 4, 5, 6)
	b.p.f("\n")
}

// mostDiameters is how many distinct diameters are shown as they stand; a tree list is put in classes.
const mostDiameters = 24

// classes sums over species by dbh, as the table has it; a list of trees by classes of 2 in or 5 cm, named by their middle.
func (b *standReport) classes(rows []treeRow) {
	u := b.o.Units
	width := 0.05
	if u == scenarios.US {
		width = 2 * inventory.Inch
	}
	distinct := map[float64]bool{}
	for _, r := range rows {
		distinct[r.DBH] = true
	}
	of := func(dbh float64) float64 { return dbh }
	if len(distinct) > mostDiameters {
		of = func(dbh float64) float64 { return width * math.Round(dbh/width) }
	}
	type sum struct{ trees, ba, lai float64 }
	by := map[float64]*sum{}
	var dbh []float64
	for _, r := range rows {
		d := of(r.DBH)
		if by[d] == nil {
			by[d] = &sum{}
			dbh = append(dbh, d)
		}
		s := by[d]
		s.trees, s.ba, s.lai = s.trees+r.PerHa, s.ba+r.BasalArea(), s.lai+r.lai
	}
	slices.Sort(dbh)
	t := newTable("dbh "+b.dbhUnit(), "trees/"+b.perArea(), "basal area "+basalUnit(u), "leaf area")
	for _, d := range dbh {
		s := by[d]
		t.AppendRow(table.Row{short(diameterValue(d, u), 1), count(densityValue(s.trees, u)), text0(basalValue(s.ba, u), 1), text0(s.lai, 2)})
	}
	b.table(t, 1, 2, 3, 4)
	b.p.f("\n")
}

// counted says what the points and the sheet's own totals say beside the sums.
func (b *standReport) counted() {
	u, s := b.o.Units, &b.plan.Stand
	sums := s.Trees.Sums()
	lead := s.Trees.Leading()
	if !s.Trees.Measured() {
		hang(b.p, "", "No diameters: trees and diameters above are supposed, the height over "+itoa(inventory.UsualSlenderness)+"; H:D is not known.")
	} else {
		hang(b.p, "", fmt.Sprintf("H:D %.0f: dominant height %s over QMD of %s, %s.%s", s.Trees.Slenderness(), length(s.Height, u), lead.Species.Common,
			diameter(lead.QMD(), u), map[bool]string{true: " Above 80 is a caution, above 95 high risk of windthrow.", false: ""}[s.Trees.Slenderness() > 80]))
	}
	if e := s.Cruise.BasalArea(); e.N > 0 {
		kind := "plots"
		if len(s.Cruise.Counts) > 0 {
			kind = "points"
		}
		text := fmt.Sprintf("Basal area by %d %s: %s", e.N, kind, basalArea(e.Mean, u))
		if e.N > 1 {
			text += fmt.Sprintf(", standard error %s, 95 %% interval +- %s (%.0f %%)", basalArea(e.SE, u), basalArea(e.CI, u), 100*e.CI/e.Mean)
		}
		hang(b.p, "", text+fmt.Sprintf("; the trees add to %s.", basalArea(sums.BasalArea, u)))
		if e.N < 10 {
			hang(b.p, "", "Fewer than 10 points: a wide interval is all that can be had (common practice).")
		}
	}
	for _, x := range s.Cruise.Totals {
		who := "the stand"
		if x.Species != nil {
			who = x.Species.Common
		}
		var parts []string
		if !math.IsNaN(x.PerHa) {
			parts = append(parts, density(x.PerHa, u))
		}
		if !math.IsNaN(x.BasalArea) {
			parts = append(parts, basalArea(x.BasalArea, u))
		}
		if len(parts) > 0 {
			hang(b.p, "", fmt.Sprintf("The sheet's own total of %s, line %d: %s.", who, x.Line, strings.Join(parts, ", ")))
		}
	}
}

// made says where leaf area, wood and clumping come from.
func (b *standReport) made(c scenarios.Correction) {
	s := &b.plan.Stand
	sums := s.Trees.Sums()
	text := fmt.Sprintf("Leaf area index %.2f, wood %.2f, crown cover %.0f %%, clumping of crowns %.2f.", sums.LAI*b.factor, sums.WAI*s.Foliage.WoodFactor, 100*sums.Cover(), s.Trees.Clumping())
	switch {
	case c.Source != "":
		text += fmt.Sprintf(" The trees' diameters give %.2f; %s make it %.2f times that (90 %% range %.2f to %.2f).", sums.LAI*s.Foliage.LeafFactor, c.Source, c.Factor, c.Low, c.High)
	case s.Foliage.LeafStated:
		text += fmt.Sprintf(" Leaf area as the plan states it; the trees' diameters give %.2f.", sums.LAI)
	default:
		text += " From the trees' diameters by published regressions: sources below and in --format csv."
	}
	hang(b.p, "", text)
}
