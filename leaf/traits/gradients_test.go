package traits

import (
	"encoding/csv"
	"math"
	"os"
	"strconv"
	"strings"
	"testing"
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

// saplings reads light and leaf mass per area of wild conifer saplings by species.
func saplings(t *testing.T) (light, lma map[string][]float64) {
	t.Helper()
	light, lma = map[string][]float64{}, map[string][]float64{}
	for _, r := range readTable(t, "saplings.csv") {
		light[r["species"]] = append(light[r["species"]], parse(t, r["light"]))
		lma[r["species"]] = append(lma[r["species"]], parse(t, r["lma"]))
	}
	return light, lma
}

// Needles of saplings weigh what the rules and the library say: medians by species, over species by genus and group.
func TestSeedlingNeedlesFollowMeasuredSaplings(t *testing.T) {
	_, lma := saplings(t)
	white, err := Find("Pinus strobus")
	if err != nil {
		t.Fatal(err)
	}
	of := map[string][]float64{"Pinus": {white.get("shade_lma")}}
	for species, all := range lma {
		m := median(all)
		genus, _, _ := strings.Cut(species, " ")
		of[genus] = append(of[genus], m)
		t.Logf("%s: %.1f g m-2, %d saplings", species, m, len(all))
		if s, err := Find(species); err == nil && s.Botanical != "Pinus contorta" {
			if got := s.own["seedling_lma"]; got.Basis != Seen || math.Abs(got.Value-m) > 0.1 {
				t.Errorf("%s: %+v in the library, %.1f measured", species, got, m)
			}
		}
	}
	of["needle"] = append(append([]float64{}, of["Abies"]...), of["Picea"]...)
	of["larch"], of["pine"] = of["needle"], of["Pinus"]
	for _, group := range []string{"Abies", "Picea", "needle", "larch", "pine"} {
		got, want := parse(t, byRule(t, "seedling_lma", group, "mid")["value"]), median(of[group])
		if math.Abs(got-want) > 0.1 {
			t.Errorf("seedling_lma of %s: %g, from %d species %.2f", group, got, len(of[group]), want)
		}
	}
}

// Their leaf mass per area is the same at every light: the slopes of ln LMA on ln light of firs and spruces, weighted by their
// variances, are level.
func TestSeedlingNeedlesAreLevelOverLight(t *testing.T) {
	light, lma := saplings(t)
	var sum, weight float64
	for species, x := range light {
		b, variance := slope(x, lma[species])
		t.Logf("%s: %.3f, standard error %.3f", species, b, math.Sqrt(variance))
		if !strings.HasPrefix(species, "Pinus") {
			sum, weight = sum+b/variance, weight+1/variance
		}
	}
	b, se := sum/weight, math.Sqrt(1/weight)
	t.Logf("firs and spruces: %.3f, standard error %.3f; trees within their crowns 0.303", b, se)
	if math.Abs(b) > 2*se || se > 0.05 {
		t.Errorf("slope %.3f, standard error %.3f", b, se)
	}
}

// slope of ln y on ln x and its variance, by least squares.
func slope(x, y []float64) (b, variance float64) {
	n := float64(len(x))
	var mx, my, xx, xy, yy float64
	for i := range x {
		mx, my = mx+math.Log(x[i])/n, my+math.Log(y[i])/n
	}
	for i := range x {
		dx, dy := math.Log(x[i])-mx, math.Log(y[i])-my
		xx, xy, yy = xx+dx*dx, xy+dx*dy, yy+dy*dy
	}
	b = xy / xx
	return b, (yy - b*xy) / (n - 2) / xx
}

// Needles of seedlings weigh and breathe the same at every light, at the net rate of trees, and breathe no less per mass than
// trees do; broad leaves are those of trees.
func TestSeedlingLeaves(t *testing.T) {
	for _, s := range All() {
		full := s.SeedlingAcclimation().At(100)
		for _, light := range []float64{1, 2, 20, 100} {
			tree, young := s.Acclimation().At(light), s.SeedlingAcclimation().At(light)
			if err := young.Check(); err != nil {
				t.Errorf("%s at %g %%: %v", s.Botanical, light, err)
			}
			if !s.Needled() {
				if tree != young {
					t.Errorf("%s at %g %%: leaves of seedlings differ", s.Botanical, light)
				}
				continue
			}
			if math.Abs(young.LMA-full.LMA) > 1e-9 || math.Abs(young.Rd-full.Rd) > 1e-9 || math.Abs(young.Amax()-tree.Amax()) > 1e-9 {
				t.Errorf("%s at %g %%: tree %+v, seedling %+v", s.Botanical, light, tree, young)
			}
			if young.LMA < 41 || !s.Paired() && math.Abs(young.Rd/young.LMA/(s.Acclimation().At(50).Rd/s.Acclimation().At(50).LMA)-1) > 1e-9 {
				t.Errorf("%s at %g %%: %+v", s.Botanical, light, young)
			}
		}
	}
}
