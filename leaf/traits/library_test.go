package traits

import (
	"encoding/csv"
	"math"
	"sort"
	"strings"
	"testing"
)

func TestEveryValueHasUnitSourceBasisAndRange(t *testing.T) {
	for _, s := range All() {
		for _, v := range s.Values() {
			where := s.Botanical + " " + v.Name
			if v.Unit == "" || v.Source == "" {
				t.Errorf("%s: unit %q, source %q", where, v.Unit, v.Source)
			}
			switch v.Basis {
			case Seen, Memory:
				if v.Rule != "" {
					t.Errorf("%s: %s and yet by rule %q", where, v.Basis, v.Rule)
				}
			case Derived:
				if v.Rule == "" {
					t.Errorf("%s: derived by no named rule", where)
				}
			default:
				t.Errorf("%s: basis %q", where, v.Basis)
			}
			if !(v.Low <= v.Value && v.Value <= v.High) || math.IsInf(v.Low, 0) || math.IsInf(v.High, 0) {
				t.Errorf("%s: %g not within %g..%g", where, v.Value, v.Low, v.High)
			}
		}
	}
}

func TestEnoughIsSeen(t *testing.T) {
	count, seen := map[Basis]int{}, map[string]int{}
	for _, s := range All() {
		for _, v := range s.Values() {
			count[v.Basis]++
			if v.Basis == Seen {
				seen[v.Name]++
			}
		}
	}
	t.Logf("%d species; values seen %d, from memory %d, derived %d", len(All()), count[Seen], count[Memory], count[Derived])
	t.Logf("species with a seen value: %v", seen)
	if len(All()) < 30 {
		t.Errorf("%d species, want 30", len(All()))
	}
	both := 0
	for _, s := range All() {
		if s.Measured() {
			both++
		}
	}
	t.Logf("amax and rd both seen: %d species", both)
	if both < 20 {
		t.Errorf("amax and rd seen for %d species, want 20", both)
	}
}

func TestSpeciesAreFoundByEitherName(t *testing.T) {
	for botanical, common := range map[string]string{
		"Quercus rubra": "northern red oak", "Pinus strobus": "eastern white pine", "Betula alleghaniensis": "yellow birch",
		"Acer saccharum": "sugar maple", "Tsuga canadensis": "eastern hemlock", "Fagus grandifolia": "American beech",
		"Acer rubrum": "red maple", "Picea abies": "Norway spruce", "Pinus sylvestris": "Scots pine", "Larix decidua": "European larch",
		"Fagus sylvatica": "European beech", "Abies alba": "silver fir", "Acer pseudoplatanus": "sycamore maple",
		"Quercus petraea": "sessile oak", "Pseudotsuga menziesii": "Douglas-fir", "Tsuga heterophylla": "western hemlock",
		"Alnus rubra": "red alder", "Thuja plicata": "western redcedar", "Abies grandis": "grand fir",
		"Populus tremuloides": "trembling aspen", "Populus balsamifera": "balsam poplar", "Picea glauca": "white spruce",
	} {
		a, err := Find(botanical)
		if err != nil {
			t.Error(err)
			continue
		}
		if b, err := Find(strings.ToUpper(" " + common)); err != nil || a != b {
			t.Errorf("%s and %s differ (%v)", botanical, common, err)
		}
	}
	for typed, want := range map[string]string{"Quercus ruba": "Quercus rubra", "doglas fir": "Douglas-fir", "suger mapel": "sugar maple"} {
		if _, err := Find(typed); err == nil || !strings.Contains(err.Error(), want) {
			t.Errorf("%q: got %v, want %s among the nearest", typed, err, want)
		}
	}
}

// table reads an embedded table anew, by its heading.
func table(t *testing.T, text string) []map[string]string {
	t.Helper()
	records, err := csv.NewReader(strings.NewReader(text)).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	var rows []map[string]string
	for _, r := range records[1:] {
		row := map[string]string{}
		for i, h := range records[0] {
			row[h] = r[i]
		}
		rows = append(rows, row)
	}
	return rows
}

func TestTablesHoldNoOrphans(t *testing.T) {
	used := map[string]bool{}
	rules := table(t, rulesTable)
	ruleVariable := map[string]bool{}
	for _, r := range rules {
		used[r["source"]] = true
		ruleVariable[r["variable"]] = true
	}
	held := map[string]bool{}
	for _, name := range ownOrder {
		held[name] = true
	}
	twice := map[string]bool{}
	for _, r := range table(t, libraryTable) {
		used[r["source"]] = true
		if !held[r["variable"]] {
			t.Errorf("%s %s is in the table but never read", r["species"], r["variable"])
		}
		if k := r["species"] + r["variable"]; twice[k] {
			t.Errorf("%s %s stands twice", r["species"], r["variable"])
		} else {
			twice[k] = true
		}
	}
	for _, s := range table(t, sourcesTable) {
		if !used[s["key"]] {
			t.Errorf("source %s is not used", s["key"])
		}
		delete(used, s["key"])
	}
	for k := range used {
		t.Errorf("source %s is not in the table", k)
	}
}

func median(x []float64) float64 {
	sort.Float64s(x)
	n := len(x)
	return (x[(n-1)/2] + x[n/2]) / 2
}

func BenchmarkFirstLoad(b *testing.B) {
	for b.Loop() {
		c, err := load()
		if err != nil {
			b.Fatal(err)
		}
		s, err := c.Find("northern red oak")
		if err != nil {
			b.Fatal(err)
		}
		_ = s.Plant()
	}
}

func BenchmarkFind(b *testing.B) {
	for b.Loop() {
		if _, err := Find("Northern red oak"); err != nil {
			b.Fatal(err)
		}
	}
}

func BenchmarkPlantAndTraits(b *testing.B) {
	s, err := Find("Northern red oak")
	if err != nil {
		b.Fatal(err)
	}
	for b.Loop() {
		_, _ = s.Plant(), s.Acclimation()
	}
}
