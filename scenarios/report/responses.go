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

// common is the temperature, deg C, to which species are brought to be held against each other.
const common = 25.0

// grownAt is the set of a species' seedlings grown at a light, at a temperature.
func grownAt(s *traits.Species, light, celsius float64) leaf.Set {
	return s.Temperature().At(s.SeedlingAcclimation().At(light), celsius)
}

// response is the light response of a species' seedlings grown at a light, at a temperature, with a band: the lowest and the highest net rate that
// Amax, Rd and the initial slope at the ends of their ranges give together.
func response(s *traits.Species, light, celsius float64) (c figures.Curve) {
	set := grownAt(s, light, celsius)
	corners := cornerSets(s, s.SeedlingAcclimation().At(light), light)
	for i := range corners {
		corners[i] = s.Temperature().At(corners[i], celsius)
	}
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

// cornerSets are the set with Amax, Rd and phi each at its low and its high end. A measured shade set lends its own ranges where the light is nearer
// to its own than to that of the sun set.
func cornerSets(s *traits.Species, set leaf.Set, light float64) (out []leaf.Set) {
	prefix := ""
	if shaded(s, light) {
		prefix = "shade_"
	}
	ends := func(name string) [2]float64 {
		v := named(s, prefix+name)
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

// shaded tells whether a light is nearer to that of the species' measured shade set than to that of its sun set, over the logarithm of light, on which
// traits lie between the two; false where there is no shade set.
func shaded(s *traits.Species, light float64) bool {
	return s.Paired() && light*light < named(s, "growth_light").Value*named(s, "shade_growth_light").Value
}

// grown are the responses of the two leaves of a species at a temperature, named.
func grown(s *traits.Species, of string, celsius float64) []figures.Curve {
	shade, sun := response(s, shadeGrown, celsius), response(s, sunGrown, celsius)
	shade.Name, sun.Name = fmt.Sprintf("%sgrown at %g %% of full light", of, shadeGrown), of+"grown in full light"
	return []figures.Curve{shade, sun}
}

// SpeciesFigure draws the light responses of one species at its reference temperature, or of two beside each other at the common one.
func SpeciesFigure(o Output, all ...*traits.Species) error {
	f := figures.Figure{X: ppfdAxis + " (bands: Amax, Rd and slope at the ends of their ranges)", Y: netAxis}
	for _, s := range all {
		celsius := common
		if len(all) == 1 {
			celsius = s.Temperature().Ref
		}
		f.Panels = append(f.Panels, figures.Panel{Title: fmt.Sprintf("%s, %s, at %.3g °C", s.Botanical, s.Common, celsius), Curves: grown(s, "", celsius)})
	}
	return figures.Write(o.Out, f, o.kind())
}

// plotResponses draws curves at a temperature with letters.
func plotResponses(p *printer, curves []figures.Curve, letters string, celsius float64) {
	y := fmt.Sprintf("Net assimilation at %.3g C, umol CO2 m-2 s-1", celsius)
	textPlot(p, figures.Figure{X: "PPFD, umol m-2 s-1", Y: y, Panels: []figures.Panel{{Curves: curves}}}, []byte(letters))
}

// compared are the values that two species are held against each other by; amax and rd are brought to the common temperature.
var compared = []string{"tolerance", "t_ref", "amax", "rd", "phi", "theta", "lma", "leaf_lifespan", "stem_rate", "root_rate", "chi", "crown_lai", "leaf_fraction"}

// CompareSpecies writes two species side by side: their main values, leaves of seedlings in shade and sun, and both responses.
func CompareSpecies(o Output, a, b *traits.Species) error {
	if o.Format != Table {
		return listed(o, a.Botanical+" and "+b.Botanical, entryColumns, entries(a, b))
	}
	p := &printer{w: o.Out}
	hang(p, "", fmt.Sprintf("%s: %s (%s) and %s (%s)", library, a.Botanical, a.Common, b.Botanical, b.Common))
	p.f("amax, rd and compensation point at %g C, brought there from t_ref, at which they\nwere measured, by each species' own response to temperature.\n", common)
	t := newTable("value", a.Common, "basis", b.Common, "basis", "unit")
	for _, name := range compared {
		x, y := atCommon(a, name), atCommon(b, name)
		unit := x.Unit
		if unit == "" {
			unit = y.Unit
		}
		t.AppendRow(table.Row{name, spanned(x), x.Basis, spanned(y), y.Basis, unit})
	}
	for _, light := range []float64{shadeGrown, sunGrown} {
		x, y := grownAt(a, light, common), grownAt(b, light, common)
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
	p.table(t, 2, 4)
	p.f("\n")
	plotResponses(p, append(grown(a, a.Common+", ", common), grown(b, b.Common+", ", common)...), "aAbB", common)
	return p.err
}

// atCommon is a value of a species with its range, a rate at the common temperature.
func atCommon(s *traits.Species, name string) traits.Value {
	v, t := named(s, name), s.Temperature()
	rate := func(x float64) float64 { return x }
	switch name {
	case "rd":
		rate = func(rd float64) float64 { return rd * t.RdFactor(common) }
	case "amax":
		rd := named(s, "rd").Value
		rate = func(amax float64) float64 { return (amax+rd)*t.AgFactor(common) - rd*t.RdFactor(common) }
	}
	v.Value, v.Low, v.High = rate(v.Value), rate(v.Low), rate(v.High)
	return v
}

// spanned is a value with its range.
func spanned(v traits.Value) string {
	if math.IsNaN(v.Value) {
		return "-"
	}
	return fmt.Sprintf("%s (%s-%s)", sig(v.Value, 3), sig(v.Low, 2), sig(v.High, 2))
}
