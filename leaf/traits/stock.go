package traits

import (
	_ "embed" // the table
	"encoding/csv"
	"fmt"
	"slices"
	"strings"
	"sync"
)

//go:embed stock.csv
var stockTable string

// Stock is a common kind of planting stock, or natural growth, with its usual size (nursery practice, from memory).
type Stock struct {
	Name, Meaning string
	Height        Value // m
	Mass          Value // g dry, leaves with stem and roots
}

const nursery = "common nursery practice"

var stocks = sync.OnceValue(func() map[string][]Stock {
	out := map[string][]Stock{}
	records, err := csv.NewReader(strings.NewReader(stockTable)).ReadAll()
	if err != nil {
		panic(fmt.Sprintf("embedded stock table: %v", err))
	}
	for _, f := range records[1:] {
		s := Stock{Name: f[0], Meaning: f[8]}
		for i, v := range []*Value{&s.Height, &s.Mass} {
			*v, err = number([]string{"height", "mass"}[i], f[2+3*i:5+3*i])
			if err != nil {
				panic(fmt.Sprintf("embedded stock table: %v", err))
			}
			v.Unit, v.Source, v.Basis = []string{"m", "g"}[i], nursery, Memory
		}
		out[f[1]] = append(out[f[1]], s)
	}
	return out
})

// StockNames are the kinds of stock.
func StockNames() (out []string) {
	for _, s := range stocks()["broad"] {
		out = append(out, s.Name)
	}
	return out
}

// Stocks are the kinds of stock of the species with their sizes.
func (s *Species) Stocks() []Stock {
	if s.Needled() {
		return slices.Clone(stocks()["needle"])
	}
	return slices.Clone(stocks()["broad"])
}

// PlantOf is the seedling of a kind of stock: the species' plant brought to its mass, leaf area and organs alike, at its height.
func (s *Species) PlantOf(stock string) (Plant, error) {
	for _, k := range s.Stocks() {
		if k.Name != stock {
			continue
		}
		p := s.Plant()
		scale := k.Mass.Value / (p.LeafMass + p.StemMass + p.RootMass)
		p.Height = k.Height.Value
		for _, x := range []*float64{&p.LeafArea, &p.LeafMass, &p.StemMass, &p.RootMass} {
			*x *= scale
		}
		return p, nil
	}
	return Plant{}, fmt.Errorf("stock %q is not known; it must be one of %s", stock, strings.Join(StockNames(), ", "))
}
