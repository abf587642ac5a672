package report

import (
	"fmt"
	"math"

	"github.com/jedib0t/go-pretty/v6/table"

	"shadeledger/leaf/fit"
)

// CO2Fit is the capacities of one leaf from its curve over CO2.
type CO2Fit struct {
	Species, Plant, Leaf string
	GrowthLight          float64 // percent of full light; NaN where not known
	Fit                  fit.Capacities
}

func capacity(name string, of func(*fit.Capacities) *fit.Estimate) []column[CO2Fit] {
	return []column[CO2Fit]{
		figure(name, func(l *CO2Fit) float64 { return of(&l.Fit).Value }),
		figure(name+"_low", func(l *CO2Fit) float64 { return of(&l.Fit).Low }),
		figure(name+"_high", func(l *CO2Fit) float64 { return of(&l.Fit).High }),
	}
}

var co2FitColumns = func() []column[CO2Fit] {
	c := []column[CO2Fit]{
		words("species", func(l *CO2Fit) string { return l.Species }),
		words("plant", func(l *CO2Fit) string { return l.Plant }),
		words("leaf", func(l *CO2Fit) string { return l.Leaf }),
		figure("points", func(l *CO2Fit) float64 { return float64(l.Fit.Points) }),
	}
	c = append(c, capacity("vcmax", func(f *fit.Capacities) *fit.Estimate { return &f.Vcmax })...)
	c = append(c, capacity("jmax", func(f *fit.Capacities) *fit.Estimate { return &f.Jmax })...)
	c = append(c, capacity("rd", func(f *fit.Capacities) *fit.Estimate { return &f.Rd })...)
	c = append(c, capacity("export", func(f *fit.Capacities) *fit.Estimate { return &f.Export })...)
	return append(c, figure("rmse_umol_m2_s", func(l *CO2Fit) float64 { return l.Fit.RMSE }))
}()

// FitCO2 writes capacities leaf by leaf, then each species' mean over plants with its spread and a block that a plan takes.
func FitCO2(o Output, name string, fits []CO2Fit) error {
	switch o.Format {
	case CSV:
		return writeCSV(o.Out, co2FitColumns, fits)
	case JSON:
		rows, err := jsonRows(co2FitColumns, fits)
		if err != nil {
			return err
		}
		return writeNamed(o.Out, name, rows)
	}
	p := &printer{w: o.Out}
	p.f("Curves over CO2 of %s: %d leaves, capacities at 25 C (export at leaf temperature), umol m-2 s-1, 95 %% intervals.\n", name, len(fits))
	t := newTable("species", "leaf", "n", "Vcmax", "Jmax", "Rd", "export", "RMSE")
	for i := range fits {
		l := &fits[i]
		t.AppendRow(table.Row{l.Species, l.Leaf, l.Fit.Points, ranged(l.Fit.Vcmax, 0), ranged(l.Fit.Jmax, 0), ranged(l.Fit.Rd, 2), ranged(l.Fit.Export, 1), decimal(l.Fit.RMSE, 2)})
	}
	if p.err == nil {
		p.err = render(o.Out, t, 3, 4, 5, 6, 7, 8)
	}
	p.f("export: use of triose phosphates, where AICc asks for it.\n")
	capacityMeans(p, fits)
	return p.err
}

// capacityMeans prints each species' mean and a block for the plan.
func capacityMeans(p *printer, fits []CO2Fit) {
	var order []string
	by := map[string][]CO2Fit{}
	for _, l := range fits {
		if by[l.Species] == nil {
			order = append(order, l.Species)
		}
		by[l.Species] = append(by[l.Species], l)
	}
	for _, name := range order {
		list := by[name]
		plants := make([]string, len(list))
		light, n := 0.0, 0.0
		for i, l := range list {
			if plants[i] = l.Plant; plants[i] == "" {
				plants[i] = l.Leaf
			}
			if !math.IsNaN(l.GrowthLight) {
				light, n = light+l.GrowthLight, n+1
			}
		}
		mean := func(of func(*fit.Capacities) float64) fit.Spread {
			return fit.MeanOfPlants(len(list), plants, func(i int) float64 { return of(&list[i].Fit) })
		}
		v, j := mean(func(c *fit.Capacities) float64 { return c.Vcmax.Value }), mean(func(c *fit.Capacities) float64 { return c.Jmax.Value })
		rd := mean(func(c *fit.Capacities) float64 { return c.Rd.Value })
		shown := name
		if shown == "" {
			shown = "all leaves"
		}
		p.f("\n%s: %d leaves of %d plants, mean and spread (SD) between plants\n", shown, len(list), v.N)
		p.f("  Vcmax %s, Jmax %s, Rd %s\n", spread(v, 1), spread(j, 1), spread(rd, 2))
		if v.N < plantsPerSpecies {
			p.f("  Fewer than %d plants: too few for a species (common practice).\n", plantsPerSpecies)
		}
		growth := "50"
		if n > 0 {
			growth = text0(light/n, 0)
		}
		p.f("  For a plan, under seedlings (give lma too where you know it; growth_light is %s):\n    leaf:\n      biochemistry: {vcmax: %s, jmax: %s, rd: %s, growth_light: %s}\n",
			map[bool]string{true: "the leaves' own", false: "supposed"}[n > 0], fmt.Sprintf("%.1f", v.Mean), fmt.Sprintf("%.1f", j.Mean), fmt.Sprintf("%.2f", rd.Mean), growth)
	}
}
