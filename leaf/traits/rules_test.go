package traits

import (
	"math"
	"strconv"
	"strings"
	"testing"
)

// classOf cuts the tolerance index as the library documents it.
func classOf(index float64) string {
	if index < 2.25 {
		return "low"
	} else if index > 3.5 {
		return "high"
	}
	return "mid"
}

// byRule finds the first rule row that fits, from the table itself.
func byRule(t *testing.T, variable, group, class string) map[string]string {
	t.Helper()
	for _, r := range table(t, rulesTable) {
		if r["variable"] == variable && strings.Contains("any "+group, r["group"]) && strings.Contains("any "+class, r["class"]) {
			return r
		}
	}
	t.Fatalf("no rule for %s of %s, %s", variable, group, class)
	return nil
}

func parse(t *testing.T, s string) float64 {
	t.Helper()
	x, err := strconv.ParseFloat(s, 64)
	if err != nil {
		t.Fatal(err)
	}
	return x
}

// expected works a derived value out again from the tables and the formulas of its rule.
func expected(t *testing.T, s *Species, name string) float64 {
	t.Helper()
	rule := func(v string) float64 {
		return parse(t, byRule(t, v, string(s.Group)+" "+s.Genus(), classOf(s.Tolerance()))["value"])
	}
	own := func(v string) float64 {
		x, ok := s.Value(v)
		if !ok {
			t.Fatalf("%s has no %s", s.Botanical, v)
		}
		return x.Value
	}
	switch name {
	case "rd":
		return rule("rd_share") * own("amax")
	case "seedling_rd":
		return own("rd") * own("seedling_lma") / own("lma")
	case "growth_light":
		return rule("growth_light." + s.position)
	case "shade_growth_light":
		return rule("growth_light.lower")
	case "leaf_mass":
		return rule("plant_mass") * rule("leaf_fraction")
	case "stem_mass":
		return rule("plant_mass") * rule("stem_fraction")
	case "root_mass":
		return rule("plant_mass") * (1 - rule("leaf_fraction") - rule("stem_fraction"))
	case "leaf_area":
		return rule("plant_mass") * rule("leaf_fraction") / lmaAtTen(s, own)
	}
	return rule(name)
}

func lmaAtTen(s *Species, own func(string) float64) float64 {
	switch {
	case s.Needled() && s.Paired():
		return own("shade_lma")
	case s.Needled():
		return own("seedling_lma")
	case s.Paired():
		low := own("shade_growth_light")
		return own("shade_lma") + (own("lma")-own("shade_lma"))*math.Log(10/low)/math.Log(own("growth_light")/low)
	}
	return own("lma") * math.Pow(10/own("growth_light"), own("lma_exponent"))
}

func TestEveryDerivedValueFollowsItsRule(t *testing.T) {
	checked := 0
	for _, s := range All() {
		for _, v := range s.Values() {
			if v.Basis != Derived {
				continue
			}
			checked++
			if want := expected(t, s, v.Name); !(math.Abs(v.Value-want) <= 1e-12*math.Abs(want)) {
				t.Errorf("%s %s: %g, the rule %q gives %g", s.Botanical, v.Name, v.Value, v.Rule, want)
			}
		}
	}
	t.Logf("%d derived values", checked)
	if checked < 1000 {
		t.Errorf("%d derived values checked", checked)
	}
}

func TestRulesFromThisLibraryAreItsMedians(t *testing.T) {
	checked := 0
	for _, r := range table(t, rulesTable) {
		if r["source"] != "library" {
			continue
		}
		var x []float64
		for _, s := range All() {
			v, ok := s.own[r["variable"]]
			if ok && v.Basis == Seen && string(s.Group) == r["group"] && (r["class"] == "any" || classOf(s.Tolerance()) == r["class"]) {
				x = append(x, v.Value)
			}
		}
		checked++
		if want := median(x); math.Abs(parse(t, r["value"])-want) > 5e-4*want {
			t.Errorf("%s of %s (%s): %s, median of %d is %g", r["variable"], r["group"], r["class"], r["value"], len(x), want)
		}
	}
	if checked != 3 {
		t.Errorf("%d rules from the library checked, want 3", checked)
	}
}

func TestExponentOfBroadleavesIsTheirMedian(t *testing.T) {
	var b []float64
	for _, s := range All() {
		if v, ok := s.own["lma_exponent"]; ok {
			b = append(b, v.Value)
		}
	}
	if got := parse(t, byRule(t, "lma_exponent", "broadleaf", "mid")["value"]); len(b) != 7 || median(b) != got {
		t.Errorf("broadleaf %g, median of %d species %g", got, len(b), median(b))
	}
}
