package traits

import (
	"encoding/csv"
	"math"
	"os"
	"strconv"
	"strings"
	"testing"

	"shadeledger/leaf"
)

// fullDay is full light of the gradients, mol m-2 d-1, so that 3 is 7.5 % and 40 is 100 %.
const fullDay = 40

// gradient is what leaves of one tree species at 3 mol m-2 d-1 have over those at 40; NaN where not measured.
type gradient struct {
	group     Group
	lma, rate float64
}

// gradients reads canopies of trees, leaving out values marked implausible or not positive.
func gradients(t *testing.T) []gradient {
	t.Helper()
	conifers := " Abies Picea Tsuga Thuja Pseudotsuga Taxus Sequoia Cryptomeria Chamaecyparis Juniperus Cedrus Cunninghamia "
	var out []gradient
	for _, r := range readTable(t, "gradients.csv") {
		ratio := func(low, high string) float64 {
			a, errA := strconv.ParseFloat(r[low], 64)
			b, errB := strconv.ParseFloat(r[high], 64)
			name, _, _ := strings.Cut(high, "_")
			if errA != nil || errB != nil || a <= 0 || b <= 0 || strings.Contains(strings.ToLower(r["suspect"]), name) {
				return math.NaN()
			}
			return a / b
		}
		g := gradient{lma: ratio("lma_3", "lma_40"), rate: ratio("aa_3", "aa_40")}
		genus, _, _ := strings.Cut(r["species"], " ")
		switch {
		case genus == "Pinus":
			g.group = Pine
		case genus == "Larix":
			g.group = Larch
		case strings.Contains(conifers, " "+genus+" "):
			g.group = Needle
		case r["evgdecid"] == "Evergreen":
			g.group = Evergreen
		case r["evgdecid"] == "Deciduous":
			g.group = Broadleaf
		default:
			continue
		}
		out = append(out, g)
	}
	return out
}

// readTable reads a CSV of the leaf test data by its headings.
func readTable(t *testing.T, name string) []map[string]string {
	t.Helper()
	f, err := os.Open("../../testdata/leaf/" + name)
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	records, err := csv.NewReader(f).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	var out []map[string]string
	for _, r := range records[1:] {
		row := map[string]string{}
		for i, h := range records[0] {
			row[h] = r[i]
		}
		out = append(out, row)
	}
	return out
}

// medians of the ratios of a group.
func medians(t *testing.T, all []gradient, group Group) (lma, rate float64) {
	t.Helper()
	var l, a []float64
	for _, g := range all {
		if g.group != group {
			continue
		}
		if !math.IsNaN(g.lma) {
			l = append(l, g.lma)
		}
		if !math.IsNaN(g.rate) {
			a = append(a, g.rate)
		}
	}
	return median(l), median(a)
}

// Exponents of evergreens come from gradients within canopies, their respiration from pairs of leaves; each is worked out again.
func TestExponentsOfEvergreensFollowTheirRatios(t *testing.T) {
	all := gradients(t)
	pine, evergreen := []float64{}, []float64{}
	for _, r := range readTable(t, "sun_shade.csv") {
		if r["shade_rd"] == "" || r["sun_rd"] == "" || r["lower_position"] != "shade" {
			continue
		}
		x := parse(t, r["shade_rd"]) / parse(t, r["sun_rd"])
		switch {
		case r["species"] == "Pinus strobus":
			pine = append(pine, math.Log(x))
		case strings.Contains(r["study"], "Weerasinghe"):
			evergreen = append(evergreen, math.Log(x))
		}
	}
	meanLog := (pine[0] + pine[1]) / 2
	for _, group := range []Group{Pine, Needle, Evergreen} {
		lma, rate := medians(t, all, group)
		b := math.Log(lma) / math.Log(3.0/fullDay/0.5)
		rd := meanLog / (b * math.Log(0.1))
		if group == Evergreen {
			rd = median(evergreen) / (b * math.Log(0.1))
		}
		for name, want := range map[string]float64{"lma_exponent": b, "amax_exponent": math.Log(rate) / math.Log(lma), "rd_exponent": rd} {
			got := parse(t, byRule(t, name, string(group), "mid")["value"])
			t.Logf("%s %s: %.3f", group, name, want)
			if math.Abs(got/want-1) > 0.015 {
				t.Errorf("%s of %s: %g, from the data %.3f", name, group, got, want)
			}
		}
	}
}

// Leaves of trees by the group rules against canopy gradients: leaf mass per area at 3 over that at 40 mol m-2 d-1 is to lie in 0.45 to 0.65, rates in
// 0.33 to 0.60.
func TestAcclimationSpansCanopyGradients(t *testing.T) {
	all := gradients(t)
	for _, name := range []string{"Carya ovata", "Abies balsamea", "Pinus taeda", "Callicoma serratifolia", "Larix occidentalis"} {
		s, err := Find(name)
		if err != nil {
			t.Fatal(err)
		}
		if _, own := s.own["lma_exponent"]; own || s.Paired() {
			t.Fatalf("%s has more than the group rule", name)
		}
		low, high := s.Acclimation().At(100*3.0/fullDay), s.Acclimation().At(100)
		lma, rate := low.LMA/high.LMA, low.Amax()/high.Amax()
		l, a := medians(t, all, s.Group)
		t.Logf("%-9s LMA %.2f, measured %.2f; Amax %.2f, measured %.2f", s.Group, lma, l, rate, a)
		if lma < 0.45 || lma > 0.65 || rate < 0.33 || rate > 0.60 {
			t.Errorf("%s: LMA ratio %.2f, rate ratio %.2f", s.Group, lma, rate)
		}
	}
}

// The juvenile share of leaf mass per area: measured saplings over needles of trees of this library at their light, if their area is projected, and
// 2.5 times that if it is all-sided; the rule is the geometric mean of the two.
func TestJuvenileShareFollowsMeasuredSaplings(t *testing.T) {
	var ratios []float64
	for _, r := range readTable(t, "juveniles.csv") {
		s, err := Find(r["tree"])
		if err != nil {
			t.Fatal(err)
		}
		v, _ := s.Value("lma")
		if v.Basis != Seen {
			continue
		}
		ratio := parse(t, r["lma"]) / s.Acclimation().At(parse(t, r["light"])).LMA
		t.Logf("%s: %.2f", r["species"], ratio)
		ratios = append(ratios, ratio)
	}
	want := median(ratios) * math.Sqrt(2.5)
	for _, g := range []string{"pine", "needle"} {
		for _, name := range []string{"juvenile_lma", "juvenile_rd"} {
			if got := parse(t, byRule(t, name, g, "mid")["value"]); math.Abs(got-want) > 0.01 {
				t.Errorf("%s of %s: %g, from %d species %.3f", name, g, got, len(ratios), want)
			}
		}
	}
}

// On seedlings needles are thinner and breathe less, at the same rate per area; measured sapling sets stand, and broadleaves are alike.
func TestSeedlingLeaves(t *testing.T) {
	at := func(a leaf.Acclimation, light float64) leaf.Set { return a.At(light) }
	for _, s := range All() {
		for _, light := range []float64{2, 20, 100} {
			tree, young := at(s.Acclimation(), light), at(s.SeedlingAcclimation(), light)
			if err := young.Check(); err != nil {
				t.Errorf("%s at %g %%: %v", s.Botanical, light, err)
			}
			if young.LMA > tree.LMA*(1+1e-12) || young.Rd > tree.Rd*(1+1e-12) || math.Abs(young.Amax()-tree.Amax()) > 1e-9 {
				t.Errorf("%s at %g %%: tree %+v, seedling %+v", s.Botanical, light, tree, young)
			}
			if thin := s.Group == Pine || s.Group == Needle; !thin && tree != young {
				t.Errorf("%s at %g %%: leaves of seedlings differ", s.Botanical, light)
			}
		}
	}
}
