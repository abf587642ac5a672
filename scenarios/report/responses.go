package report

import (
	"fmt"
	"math"

	"github.com/jedib0t/go-pretty/v6/table"

	"shadeledger/leaf"
	"shadeledger/leaf/traits"
	"shadeledger/scenarios/report/figures"
)

// Growth lights that responses are shown for, percent of full light, and the brightest light on the axis, umol m-2 s-1.
const shadeGrown, sunGrown, brightest = 5.0, 100.0, 2000.0

// Titles of the axes of a light response.
const (
	ppfdAxis = "PPFD, µmol m⁻² s⁻¹"
	netAxis  = "net assimilation, µmol CO₂ m⁻² s⁻¹"
)

// response is the light response of a species' seedlings grown at a light, with a band: the lowest and the highest net rate that Amax, Rd and the
// initial slope at the ends of their ranges give together.
func response(s *traits.Species, name string, light float64) figures.Curve {
	set := s.SeedlingAcclimation().At(light)
	c := figures.Curve{Name: name}
	corners := cornerSets(s, set, light)
	for I := 0.0; I <= brightest; I += brightest / 200 {
		low, high := math.Inf(1), math.Inf(-1)
		for _, k := range corners {
			low, high = math.Min(low, k.Net(I)), math.Max(high, k.Net(I))
		}
		c.Line = append(c.Line, figures.Point{X: I, Y: set.Net(I)})
		c.Low, c.High = append(c.Low, figures.Point{X: I, Y: low}), append(c.High, figures.Point{X: I, Y: high})
	}
	return c
}

// cornerSets are the set with Amax, Rd and phi each at its low and its high end. A measured shade set lends its own ranges in deep shade.
func cornerSets(s *traits.Species, set leaf.Set, light float64) (out []leaf.Set) {
	ends := func(name string) [2]float64 {
		v := named(s, name)
		if shade := named(s, "shade_"+name); light <= 20 && !math.IsNaN(shade.Value) {
			v = shade
		}
		return [2]float64{v.Low / v.Value, v.High / v.Value}
	}
	amax, rd, phi := ends("amax"), ends("rd"), ends("phi")
	for i := range 8 {
		k := set
		k.Rd *= rd[i/2%2]
		k.Ag = set.Amax()*amax[i%2] + k.Rd
		k.Phi *= phi[i/4]
		out = append(out, k)
	}
	return out
}

// grown names the two leaves of a species.
func grown(s *traits.Species, of string) []figures.Curve {
	return []figures.Curve{response(s, fmt.Sprintf("%sgrown at %g %% of full light", of, shadeGrown), shadeGrown), response(s, of+"grown in full light", sunGrown)}
}

// SpeciesFigure draws the light responses of one species, or of two beside each other, at their reference temperatures.
func SpeciesFigure(o Output, all ...*traits.Species) error {
	f := figures.Figure{X: ppfdAxis + " (bands: Amax, Rd and slope at the ends of their ranges)", Y: netAxis}
	for _, s := range all {
		f.Panels = append(f.Panels, figures.Panel{Title: s.Botanical + ", " + s.Common, Curves: grown(s, "")})
	}
	return figures.Write(o.Out, f, o.kind())
}

// plotResponses draws curves with letters.
func plotResponses(p *printer, curves []figures.Curve, letters string) {
	textPlot(p, figures.Figure{X: "PPFD, umol m-2 s-1", Y: "Net assimilation at the reference temperature, umol CO2 m-2 s-1", Panels: []figures.Panel{{Curves: curves}}}, []byte(letters))
}

// compared are the values that two species are held against each other by.
var compared = []string{"tolerance", "amax", "rd", "phi", "theta", "lma", "leaf_lifespan", "stem_rate", "root_rate", "chi", "crown_lai", "leaf_fraction"}

// CompareSpecies writes two species side by side: their main values, leaves of seedlings in shade and sun, and both responses.
func CompareSpecies(o Output, a, b *traits.Species) error {
	if o.Format == CSV || o.Format == JSON {
		var entries []entry
		for _, s := range []*traits.Species{a, b} {
			for _, v := range s.Values() {
				entries = append(entries, entry{s, v})
			}
		}
		if o.Format == CSV {
			return writeCSV(o.Out, entryColumns, entries)
		}
		rows, err := jsonRows(entryColumns, entries)
		if err != nil {
			return err
		}
		return writeNamed(o.Out, a.Botanical+" and "+b.Botanical, rows)
	}
	p := &printer{w: o.Out}
	p.f("%s: %s (%s) and %s (%s)\n", library, a.Botanical, a.Common, b.Botanical, b.Common)
	t := newTable("value", a.Common, "basis", b.Common, "basis", "unit")
	for _, name := range compared {
		x, y := named(a, name), named(b, name)
		unit := x.Unit
		if unit == "" {
			unit = y.Unit
		}
		t.AppendRow(table.Row{name, spanned(x), x.Basis, spanned(y), y.Basis, unit})
	}
	for _, light := range []float64{shadeGrown, sunGrown} {
		x, y := a.SeedlingAcclimation().At(light), b.SeedlingAcclimation().At(light)
		for _, row := range []struct {
			name, unit string
			x, y       float64
		}{
			{"amax", "umol m-2 s-1", x.Amax(), y.Amax()}, {"rd", "umol m-2 s-1", x.Rd, y.Rd},
			{"compensation", "umol m-2 s-1", x.CompensationPoint(), y.CompensationPoint()}, {"lma", "g m-2", x.LMA, y.LMA},
		} {
			t.AppendRow(table.Row{fmt.Sprintf("%s, grown at %g %%", row.name, light), sig(row.x, 2), "", sig(row.y, 2), "", row.unit})
		}
	}
	if p.err == nil {
		p.err = render(o.Out, t, 2, 4)
	}
	p.f("\n")
	plotResponses(p, append(grown(a, a.Common+", "), grown(b, b.Common+", ")...), "aAbB")
	return p.err
}

// spanned is a value with its range.
func spanned(v traits.Value) string {
	if math.IsNaN(v.Value) {
		return "-"
	}
	return fmt.Sprintf("%s (%s-%s)", sig(v.Value, 3), sig(v.Low, 2), sig(v.High, 2))
}
