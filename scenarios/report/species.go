package report

import (
	"fmt"
	"math"
	"strings"

	"github.com/jedib0t/go-pretty/v6/table"

	"shadeledger/leaf/traits"
)

// entry is one value of one species.
type entry struct {
	species *traits.Species
	value   traits.Value
}

// entries are all values of species.
func entries(all ...*traits.Species) (out []entry) {
	for _, s := range all {
		for _, v := range s.Values() {
			out = append(out, entry{s, v})
		}
	}
	return out
}

var entryColumns = []column[entry]{
	words("botanical", func(e *entry) string { return e.species.Botanical }),
	words("common", func(e *entry) string { return e.species.Common }),
	words("name", func(e *entry) string { return e.value.Name }),
	figure("value", func(e *entry) float64 { return e.value.Value }),
	figure("low", func(e *entry) float64 { return e.value.Low }),
	figure("high", func(e *entry) float64 { return e.value.High }),
	words("unit", func(e *entry) string { return e.value.Unit }),
	words("basis", func(e *entry) string { return string(e.value.Basis) }),
	words("source", func(e *entry) string { return e.value.Source }),
	words("rule", func(e *entry) string { return e.value.Rule }),
}

// speciesColumns are the fields of the list.
var speciesColumns = []column[*traits.Species]{
	words("botanical", func(s **traits.Species) string { return (*s).Botanical }),
	words("common", func(s **traits.Species) string { return (*s).Common }),
	words("group", func(s **traits.Species) string { return string((*s).Group) }),
	words("regions", func(s **traits.Species) string { return strings.Join((*s).Regions, " ") }),
	figure("tolerance", func(s **traits.Species) float64 { return (*s).Tolerance() }),
	figure("amax_umol_m2_s", func(s **traits.Species) float64 { return named(*s, "amax").Value }),
	words("amax_basis", func(s **traits.Species) string { return string(named(*s, "amax").Basis) }),
	figure("rd_umol_m2_s", func(s **traits.Species) float64 { return named(*s, "rd").Value }),
	words("rd_basis", func(s **traits.Species) string { return string(named(*s, "rd").Basis) }),
}

func named(s *traits.Species, name string) traits.Value {
	if v, ok := s.Value(name); ok {
		return v
	}
	return traits.Value{Value: math.NaN()}
}

// library heads everything printed of the species library.
const library = "Species library"

// SpeciesList writes the list of the library, as far as filters let it through.
func SpeciesList(o Output, all []*traits.Species) error {
	if len(all) == 0 {
		p := &printer{w: o.Out}
		if o.Format != Table {
			p.w = o.Notes
		}
		if p.f("%s: no species fits these filters; leave one of them out.\n", library); p.err != nil || o.Format == Table {
			return p.err
		}
	}
	if o.Format != Table {
		return listed(o, library, speciesColumns, all)
	}
	t := newTable("species", "name", "group", "tolerance", "Amax", "basis", "Rd", "basis")
	for _, s := range all {
		a, r := named(s, "amax"), named(s, "rd")
		t.AppendRow(table.Row{s.Botanical, s.Common, s.Group, decimal(s.Tolerance(), 1), sig(a.Value, 2), a.Basis, sig(r.Value, 2), r.Basis})
	}
	p := &printer{w: o.Out}
	p.f("%s: %d species. Amax (net) and Rd in umol m-2 s-1; tolerance of shade 0 to 5.\n", library, len(all))
	p.table(t, 4, 5, 7)
	p.f("One species with units, sources and basis: shadeledger species NAME\n")
	return p.err
}

// SpeciesPage writes every value of one species with unit, source and basis.
func SpeciesPage(o Output, s *traits.Species) error {
	list := entries(s)
	if o.Format != Table {
		return listed(o, s.Botanical, entryColumns, list)
	}
	p := &printer{w: o.Out}
	p.f("%s: %s, %s\n", library, s.Botanical, s.Common)
	if !s.Measured() {
		p.f("Its leaf rates are partly or wholly those of its group: read its place among others so.\n")
	}
	t := newTable("value", "", "low", "high", "unit", "basis", "source or rule")
	for _, e := range list {
		v := e.value
		why := v.Source
		if v.Rule != "" {
			why = v.Rule + " (" + v.Source + ")"
		}
		t.AppendRow(table.Row{v.Name, sig(v.Value, 3), sig(v.Low, 3), sig(v.High, 3), v.Unit, v.Basis, why})
	}
	p.table(t, 2, 3, 4)
	stock(p, o, s)
	responses(p, s)
	return p.err
}

// stock prints the sizes of planting stock.
func stock(p *printer, o Output, s *traits.Species) {
	p.f("\nPlanting stock (nursery practice, from memory; for a plan: stock: 2-0)\n")
	t := newTable("stock", "height m", "dry mass g", "")
	for _, k := range s.Stocks() {
		t.AppendRow(table.Row{k.Name, spanned(k.Height), spanned(k.Mass), k.Meaning})
	}
	p.table(t, 2, 3)
}

// responses draws net assimilation of seedlings' leaves grown in shade and in sun.
func responses(p *printer, s *traits.Species) {
	shade, sun := s.SeedlingAcclimation().At(shadeGrown), s.SeedlingAcclimation().At(sunGrown)
	p.f("\n")
	celsius := s.Temperature().Ref
	plotResponses(p, grown(s, "", celsius), "oX", celsius)
	hang(p, "", fmt.Sprintf("compensation point %s and %s umol m-2 s-1. %s.", sig(shade.CompensationPoint(), 2), sig(sun.CompensationPoint(), 2), s.SeedlingAcclimation().Rule()))
}
