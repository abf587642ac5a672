package traits

import (
	"math"
	"testing"
)

// Every kind of stock has a size for every species, in order of age, and scales the whole plant alike.
func TestStockScalesThePlant(t *testing.T) {
	for _, s := range All() {
		whole := s.Plant()
		sizes := map[string]Plant{}
		for _, k := range s.Stocks() {
			p, err := s.PlantOf(k.Name)
			if err != nil {
				t.Fatal(err)
			}
			sizes[k.Name] = p
			for _, v := range []Value{k.Height, k.Mass} {
				if !(v.Low < v.Value && v.Value < v.High) || v.Unit == "" || v.Source == "" || v.Basis != Memory {
					t.Errorf("%s, %s: %+v", s.Botanical, k.Name, v)
				}
			}
			mass := p.LeafMass + p.StemMass + p.RootMass
			if math.Abs(mass/k.Mass.Value-1) > 1e-12 || math.Abs(p.LeafMass/p.LeafArea/(whole.LeafMass/whole.LeafArea)-1) > 1e-12 || math.Abs(p.StemMass/mass-whole.StemMass/(whole.LeafMass+whole.StemMass+whole.RootMass)) > 1e-12 {
				t.Errorf("%s, %s: %+v of %+v", s.Botanical, k.Name, p, whole)
			}
		}
		if !(sizes["natural"].Height < sizes["1-0"].Height && sizes["1-0"].Height < sizes["2-0"].Height && sizes["2-0"].Height < sizes["2-1"].Height && sizes["plug"].LeafMass < sizes["2-0"].LeafMass) {
			t.Errorf("%s: sizes out of order", s.Botanical)
		}
	}
	if _, err := All()[0].PlantOf("3-0"); err == nil {
		t.Error("3-0 is no stock of the table")
	}
}
