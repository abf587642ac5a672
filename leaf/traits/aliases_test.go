package traits

import (
	"strings"
	"testing"
)

func TestFurtherNamesAreFound(t *testing.T) {
	for name, botanical := range map[string]string{
		"QURU": "Quercus rubra", "quru": "Quercus rubra", "ACRU": "Acer rubrum", "ACSA3": "Acer saccharum", "POGR4": "Populus grandidentata",
		"FAGR": "Fagus grandifolia", "833": "Quercus rubra", "316": "Acer rubrum", "12": "Abies balsamea", "012": "Abies balsamea",
		"Fichte": "Picea abies", "Buche": "Fagus sylvatica", "Rotbuche": "Fagus sylvatica", "Weißtanne": "Abies alba",
		"Weisstanne": "Abies alba", "WEISSTANNE": "Abies alba", "Lärche": "Larix decidua", "Laerche": "Larix decidua", "Kiefer": "Pinus sylvestris",
		"Bergahorn": "Acer pseudoplatanus", "Traubeneiche": "Quercus petraea", "aspen": "Populus tremuloides", "red oak": "Quercus rubra",
		"N. red oak": "Quercus rubra", "Am. beech": "Fagus grandifolia", "E. hemlock": "Tsuga canadensis", "White pine": "Pinus strobus",
		"Quercus prinus": "Quercus montana", "yellow-poplar": "Liriodendron tulipifera",
	} {
		if s, err := Find(name); err != nil || s.Botanical != botanical {
			t.Errorf("%q: %v, %v, want %s", name, s, err, botanical)
		}
	}
}

// TestCodesAreTakenToTheLetter wants no other code to pass for one that is held, and both species of a name of two.
func TestCodesAreTakenToTheLetter(t *testing.T) {
	for name, want := range map[string]string{
		"ACSA": "ACSA3 (Acer saccharum)", "ACSA9": "not in the library", "FRAM": "FRAM2", "POGR": "POGR4", "834": "not in the library", "3": "not in the library",
		"": "not in the library", "Eiche": "Quercus petraea (sessile oak) or Quercus robur (pedunculate oak)", "hemlock": "Tsuga canadensis",
		"Ahorn": "Acer platanoides", "sycamore": "sycamore maple", "Red oka": "red oak (Quercus rubra)", "Fichtte": "Fichte (Picea abies)",
	} {
		if s, err := Find(name); err == nil || !strings.Contains(err.Error(), want) {
			t.Errorf("%q: %v, %v, want %q", name, s, err, want)
		}
	}
}

// TestAliasTable wants a known kind and a source on every row, codes of one meaning, and codes and German names for
// nearly all species; European trees have no code in an American inventory.
func TestAliasTable(t *testing.T) {
	kinds, two := map[string]map[string]bool{}, map[string]bool{}
	for _, r := range table(t, aliasTable) {
		switch r["kind"] {
		case "plants", "fia", "german", "common", "synonym":
		default:
			t.Errorf("%s: kind %q", r["alias"], r["kind"])
		}
		if !strings.Contains(r["source"], "from memory") && !strings.Contains(r["source"], "common practice") {
			t.Errorf("%s: source %q", r["alias"], r["source"])
		}
		if kinds[r["botanical"]] == nil {
			kinds[r["botanical"]] = map[string]bool{}
		}
		kinds[r["botanical"]][r["kind"]] = true
		if held := Library().byAlias[aliasKey(r["alias"])]; len(held) > 1 {
			two[r["alias"]] = true
			if r["kind"] == "plants" || r["kind"] == "fia" {
				t.Errorf("code %s stands for %d species", r["alias"], len(held))
			}
		}
	}
	american, german := 0, 0
	for _, s := range All() {
		k := kinds[s.Botanical]
		if k["german"] {
			german++
		}
		if k["plants"] && k["fia"] {
			american++
		}
	}
	t.Logf("of %d species %d have both codes, %d a German name; names of two meanings %v", len(All()), american, german, two)
	if american < 48 || german < 57 {
		t.Errorf("%d species with both codes, want 48; %d with a German name, want 57", american, german)
	}
}
