package report

import (
	"fmt"

	"github.com/jedib0t/go-pretty/v6/table"

	"shadeledger/leaf/fit"
)

// CO2Fit is the capacities of one leaf from its curve over CO2.
type CO2Fit struct {
	Sample
	Fit fit.Capacities
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
func FitCO2(o Output, name string, fits []CO2Fit, takes Takes) error {
	if o.Format != Table {
		return listed(o, name, co2FitColumns, fits)
	}
	p := &printer{w: o.Out}
	p.f("Curves over CO2 of %s: %s, 95 %% intervals.\n", name, counted(len(fits), "leaf", "leaves"))
	p.f("Capacities at 25 C (export at leaf temperature) and RMSE in umol m-2 s-1.\n")
	t := newTable("species", "leaf", "n", "Vcmax", "Jmax", "Rd", "export", "RMSE")
	for i := range fits {
		l := &fits[i]
		t.AppendRow(table.Row{l.Species, l.Leaf, l.Fit.Points, ranged(l.Fit.Vcmax, 0), ranged(l.Fit.Jmax, 0), ranged(l.Fit.Rd, 2), ranged(l.Fit.Export, 1), decimal(l.Fit.RMSE, 2)})
	}
	p.table(t, 3, 4, 5, 6, 7, 8)
	p.f("export: use of triose phosphates, where AICc asks for it.\n")
	leaves := make([]Sample, len(fits))
	for i := range fits {
		leaves[i] = fits[i].Sample
	}
	for _, k := range kinsOf(leaves) {
		mean := func(of func(*fit.Capacities) *fit.Estimate) fit.Spread {
			return k.mean(func(i int) float64 { return of(&fits[i].Fit).Value })
		}
		v, j := mean(func(c *fit.Capacities) *fit.Estimate { return &c.Vcmax }), mean(func(c *fit.Capacities) *fit.Estimate { return &c.Jmax })
		rd := mean(func(c *fit.Capacities) *fit.Estimate { return &c.Rd })
		k.head(p, fmt.Sprintf("Vcmax %s, Jmax %s, Rd %s", spread(v, 1), spread(j, 1), spread(rd, 2)))
		k.capacityBlock(p, v, j, rd, takes)
	}
	return p.err
}
