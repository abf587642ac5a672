package report

import (
	"fmt"
	"math"
	"slices"
	"strings"

	"shadeledger/leaf/fit"
	"shadeledger/leaf/traits"
)

// Sample says what a leaf is that was read.
type Sample struct {
	Species, Plant, Leaf string
	GrowthLight          float64 // percent of full light; NaN where not known
	Temperature          float64 // of the leaf, deg C, mean; NaN where not known
}

// Takes tells whether a plan takes a leaf block of a species, four spaces in; the error says which value it refuses and why.
type Takes func(species, block string) error

// kin are the leaves of one species in a file.
type kin struct {
	name               string          // "" where the file names none
	species            *traits.Species // nil where the library has none of that name
	at                 []int           // places among the leaves
	plants             []string        // of each; a leaf without a plant is its own
	light, temperature float64         // means; NaN where no leaf has one
}

// kinsOf sorts leaves by species, in the order of the file.
func kinsOf(leaves []Sample) (out []kin) {
	for i, l := range leaves {
		at := slices.IndexFunc(out, func(k kin) bool { return k.name == l.Species })
		if at < 0 {
			at = len(out)
			k := kin{name: l.Species}
			if s, err := traits.Find(l.Species); err == nil {
				k.species = s
			}
			out = append(out, k)
		}
		plant := l.Plant
		if plant == "" {
			plant = l.Leaf
		}
		out[at].at, out[at].plants = append(out[at].at, i), append(out[at].plants, plant)
	}
	for k := range out {
		out[k].light = out[k].mean(func(i int) float64 { return leaves[i].GrowthLight }).Mean
		out[k].temperature = out[k].mean(func(i int) float64 { return leaves[i].Temperature }).Mean
	}
	return out
}

// mean over plants of a value of the leaves.
func (k *kin) mean(of func(i int) float64) fit.Spread {
	return fit.MeanOfPlants(len(k.at), k.plants, func(i int) float64 { return of(k.at[i]) })
}

// head prints the means, of whom and from how many plants.
func (k *kin) head(p *printer, means string) {
	name := k.name
	if name == "" {
		name = "all leaves"
	}
	plants := slices.Clone(k.plants)
	slices.Sort(plants)
	n := len(slices.Compact(plants))
	p.f("\n%s: %s of %s, mean and spread (SD) between plants\n", name, counted(len(k.at), "leaf", "leaves"), counted(n, "plant", "plants"))
	hang(p, "  ", means)
	if n < plantsPerSpecies {
		p.f("  Fewer than %d plants: too few for a species (common practice).\n", plantsPerSpecies)
	}
}

// counted is a number with its noun.
func counted(n int, one, more string) string {
	if n == 1 {
		return "1 " + one
	}
	return fmt.Sprintf("%d %s", n, more)
}

// field is one value of a block.
type field struct {
	name    string
	value   float64
	places  int
	assumed string // why, where the readings do not give it
}

// Values of leaves that neither readings nor the library tell.
const (
	supposedLight = 50   // percent, leaves of the upper crown (common practice)
	supposedLMA   = 74   // g m-2, broadleaf trees, group median of the library (Wright et al. 2004, Nature 428:821-827)
	supposedG1    = 4.45 // kPa^0.5, deciduous broadleaves (Lin et al. 2015, Nat. Clim. Change 5:459-464)
)

// common fields of both kinds of block: what the plan needs besides what was fitted.
func (k *kin) fields(fitted []field) []field {
	if k.species == nil {
		fitted = append(fitted, field{"lma", supposedLMA, 0, "lma (broadleaf trees; needles 234)"})
	}
	light := field{"growth_light", k.light, 0, ""}
	if math.IsNaN(k.light) {
		light = field{"growth_light", supposedLight, 0, "growth_light"}
	}
	return append(fitted, light)
}

// leafBlock is what a plan takes of leaves: a key with fields and words in braces, more lines of the leaf, and what is to be said of it.
type leafBlock struct {
	key         string
	fields      []field
	words, more []string
	said        string
}

// print prints a block of the leaves. Where a value is not determined or a plan refuses it, that is said instead.
func (k *kin) print(p *printer, b leafBlock, takes Takes) {
	var parts, supposed []string
	for _, v := range k.fields(b.fields) {
		if math.IsNaN(v.value) || math.IsInf(v.value, 0) {
			hang(p, "  ", "No block for a plan: these readings do not determine "+v.name+".")
			return
		}
		text := text0(v.value, v.places)
		if v.name == "growth_light" && v.value < 1 {
			text = sig(v.value, 1)
		}
		parts = append(parts, v.name+": "+text)
		if v.assumed != "" {
			supposed = append(supposed, v.assumed)
		}
	}
	lead := "      " + b.key + ": {"
	lines := wrap(strings.Join(append(parts, b.words...), ", ")+"}", Width-len(lead), Width-len(lead))
	text := "    leaf:\n" + lead + strings.Join(lines, "\n"+strings.Repeat(" ", len(lead))) + "\n"
	for _, l := range b.more {
		text += "      " + l + "\n"
	}
	if k.species != nil && k.species.Needled() {
		text += "      area_basis: projected\n"
		supposed = append(supposed, "area_basis (half, projected or all: the area of needles that the rates are per)")
	}
	if err := takes(k.name, text); err != nil {
		hang(p, "  ", "No block for a plan, which refuses "+err.Error()+".")
		return
	}
	said := "For a plan, under a seedling"
	switch {
	case k.species != nil:
		said += "; give lma too where you know it"
	case k.name == "":
		said += " with sizes, leaves and respiration of its own (the file names no species)"
	default:
		said += " with sizes, leaves and respiration of its own (the library does not know the species)"
	}
	said += b.said
	if len(supposed) > 0 {
		said += ". Supposed, not read: " + strings.Join(supposed, ", ")
	}
	hang(p, "  ", said+":")
	p.f("%s", text)
}

// lightBlock prints the block of a light response: the shade set of a species that has one where the leaves grew nearer to its light.
func (k *kin) lightBlock(p *printer, s fit.Summary, takes Takes) {
	b := leafBlock{key: "sun", fields: []field{{"amax", s.Amax.Mean, 2, ""}, {"rd", s.Rd.Mean, 2, ""}, {"phi", s.Phi.Mean, 4, ""}, {"theta", s.Theta.Mean, 2, ""}}}
	if k.species != nil && shaded(k.species, k.light) {
		b.key = "shade"
	}
	b.more = []string{"t_ref: " + text0(k.temperature, 0) + " C"}
	if math.IsNaN(k.temperature) {
		b.more = []string{"t_ref: 25 C   # supposed: no leaf temperature was read"}
	}
	k.print(p, b, takes)
}

// capacityBlock prints the block of a curve over CO2, with the temperature response that it was fitted by.
func (k *kin) capacityBlock(p *printer, vcmax, jmax, rd fit.Spread, takes Takes) {
	b := leafBlock{key: "biochemistry", fields: []field{{"vcmax", vcmax.Mean, 1, ""}, {"jmax", jmax.Mean, 1, ""}, {"rd", rd.Mean, 2, ""}}}
	if k.species == nil {
		b.fields = append(b.fields, field{"g1", supposedG1, 2, "g1 (deciduous broadleaves; conifers 2.35)"})
	}
	b.words = []string{"capacities: fixed"}
	b.said = ". The values at 25 C hold with capacities: fixed (responses of Bernacchi et al. 2001, 2003)"
	k.print(p, b, takes)
}
