package main

import (
	"fmt"
	"math"
	"path/filepath"
	"slices"
	"strings"

	"github.com/spf13/cobra"

	"shadeledger/leaf"
	"shadeledger/leaf/fit"
	"shadeledger/scenarios/plan"
	"shadeledger/scenarios/report"
)

type fitLeafOptions struct {
	*settings
	io      streams
	file    string
	over    string // light or co2
	columns map[string]string
}

func newFitLeaf(io streams) *cobra.Command {
	var columns []string
	var over string
	cmd := &cobra.Command{
		Use:         "leaf CSV",
		Annotations: map[string]string{draws: ""},
		Short:       "Leaf parameters from light-response readings, leaf by leaf",
		Long: `Fits the light response of every leaf in a CSV file by least squares: net light-saturated rate, respiration, initial
slope, curvature and compensation point, each with its 95 % interval; says by AICc where an exponential or a
rectangular hyperbola meets the leaf better, and flags what is wrong with a curve: few or no dim points, no plateau,
drift, closed stomata, photoinhibition, a wrong sign. Then each species' mean with its spread between plants, and a
block that a plan takes. --output FILE.svg or FILE.png draws every curve with its readings and the band of its interval.

--over co2 fits curves over the CO2 within the leaf instead: Vcmax, Jmax and respiration at 25 C, use of triose phosphates
where the curve asks for it. It needs ci_ppm and leaf_temp_c.

Columns: ppfd_umol_m2_s, net_umol_m2_s, leaf; where known species, plant, leaf_temp_c, growth_light_pct, gsw_mol_m2_s,
ci_ppm, pressure_kpa. Headings of common instruments are known; --column NAME=HEADING names others.`,
		Example: "  shadeledger fit leaf curves.csv\n  shadeledger fit leaf licor.csv --column leaf=sample --column net_umol_m2_s=Photo --format csv",
		Args:    atMost(1),
		RunE: func(cmd *cobra.Command, args []string) error {
			s, err := readSettings(cmd)
			if err != nil {
				return err
			}
			o := fitLeafOptions{settings: s, io: io, file: first(args), over: over, columns: map[string]string{}}
			switch {
			case o.file == "":
				return usagef("name the CSV file of readings, for instance: shadeledger fit leaf curves.csv")
			case over != "light" && over != "co2":
				return usagef("--over %s: light or co2", over)
			case over == "co2" && s.strict && cmd.Flags().Changed("strict"):
				return usagef("--strict: curves over CO2 are not flagged; leave it out beside --over co2")
			}
			for _, c := range columns {
				name, heading, ok := strings.Cut(c, "=")
				if !ok || !slices.Contains(plan.CurveColumns(), name) {
					return usagef("--column %q: write NAME=HEADING, NAME one of %s", c, strings.Join(plan.CurveColumns(), ", "))
				}
				o.columns[name] = heading
			}
			return runFitLeaf(o)
		},
	}
	addOutputFlags(cmd)
	cmd.Flags().Bool("strict", false, "exit with 3 where a curve over light is flagged")
	cmd.Flags().StringVar(&over, "over", "light", "light: curves over light; co2: curves over the CO2 within the leaf, for capacities")
	complete(cmd, "over", "light", "co2")
	cmd.Flags().StringArrayVar(&columns, "column", nil, "NAME=HEADING, the heading of a column in the file; may be given again")
	return cmd
}

func runFitLeaf(o fitLeafOptions) error {
	if err := o.checkOutput(); err != nil {
		return err
	}
	curves, faults := plan.ReadCurves(o.file, o.columns)
	if len(faults) > 0 {
		return faultsError{faults, "the file"}
	}
	if o.over == "co2" {
		return runFitCO2(o, curves)
	}
	var out []report.LeafFit
	for _, c := range curves {
		l, err := fitOf(&c)
		if err != nil {
			faults = append(faults, plan.Fault{File: o.file, Line: c.Line, Key: "leaf", Value: c.Leaf, Fix: err.Error()})
			continue
		}
		out = append(out, l)
	}
	if len(faults) > 0 {
		return faultsError{faults, "the file"}
	}
	flagged := false
	for _, l := range out {
		flagged = flagged || len(l.Flags) > 0
	}
	if err := o.hand(out); err != nil {
		return err
	}
	if o.strict && flagged {
		return errWarnings
	}
	return nil
}

// hand delivers the fits as text, or as figures of up to report.MostLeaves leaves, numbered where there are several.
func (o *fitLeafOptions) hand(out []report.LeafFit) error {
	if o.format != report.SVG && o.format != report.PNG {
		return o.deliver(o.io, nil, func(w report.Output) error { return report.FitLeaf(w, o.file, out, takesLeaf) })
	}
	pages := slices.Collect(slices.Chunk(out, report.MostLeaves))
	name := o.output
	place := func(i int) string {
		if len(pages) == 1 {
			return name
		}
		end := filepath.Ext(name)
		return fmt.Sprintf("%s-%d%s", strings.TrimSuffix(name, end), i+1, end)
	}
	for i := range pages {
		o.output = place(i)
		if err := o.checkOutput(); err != nil {
			return err
		}
	}
	for i, page := range pages {
		o.output = place(i)
		if err := o.deliver(o.io, nil, func(w report.Output) error { return report.FitLeafFigure(w, page) }); err != nil {
			return err
		}
		if len(pages) > 1 {
			o.progress(o.io, "wrote %s", o.output)
		}
	}
	return nil
}

// takesLeaf tells whether a plan takes a leaf block.
func takesLeaf(species, block string) error {
	faults := plan.CheckLeaf(species, block)
	if len(faults) == 0 {
		return nil
	}
	f := faults[0]
	name := strings.TrimPrefix(f.Key, "seedlings[0].leaf.")
	return fmt.Errorf("%s: %s", name, strings.TrimPrefix(strings.TrimSpace(f.Value)+"; "+f.Fix, "; "))
}

// sample says what leaf a curve is of.
func sample(c *plan.LeafCurve) report.Sample {
	s := report.Sample{Species: c.Species, Plant: c.Plant, Leaf: c.Leaf, GrowthLight: c.GrowthLight, Temperature: math.NaN()}
	sum, n := 0.0, 0.0
	for _, r := range c.Readings {
		if !math.IsNaN(r.Temperature) {
			sum, n = sum+r.Temperature, n+1
		}
	}
	if n > 0 {
		s.Temperature = sum / n
	}
	return s
}

// fitOf fits one leaf.
func fitOf(c *plan.LeafCurve) (report.LeafFit, error) {
	points := make([]fit.Point, len(c.Readings))
	for i, r := range c.Readings {
		points[i] = r.Point
	}
	l := report.LeafFit{Sample: sample(c), Points: points}
	var err error
	if l.Fit, err = fit.Curve(points, fit.NonRectangular); err != nil {
		return l, err
	}
	all, err := fit.Best(points)
	if err != nil {
		return l, err
	}
	l.Best, l.Gain = all[0].Shape, l.Fit.AICc-all[0].AICc
	l.Flags = fit.Flags(c.Readings, &l.Fit)
	return l, nil
}

// runFitCO2 fits capacities to curves over CO2.
func runFitCO2(o fitLeafOptions, curves []plan.LeafCurve) error {
	if o.format == report.SVG || o.format == report.PNG {
		return usagef("--output %s: curves over CO2 have no figure; name a file for text", o.output)
	}
	var out []report.CO2Fit
	var faults []plan.Fault
	for _, c := range curves {
		gas := make([]fit.Gas, len(c.Readings))
		for i, r := range c.Readings {
			gas[i] = fit.Gas{Ci: r.Ci, Net: r.Net, PPFD: r.PPFD, Temperature: r.Temperature}
			if !math.IsNaN(r.Pressure) {
				gas[i].Pressure = r.Pressure
			}
		}
		f, err := fit.CO2Curve(gas, leaf.Bernacchi{})
		if err != nil {
			faults = append(faults, plan.Fault{File: o.file, Line: c.Line, Key: "leaf", Value: c.Leaf, Fix: err.Error()})
			continue
		}
		out = append(out, report.CO2Fit{Sample: sample(&c), Fit: f})
	}
	if len(faults) > 0 {
		return faultsError{faults, "the file"}
	}
	return o.deliver(o.io, nil, func(w report.Output) error { return report.FitCO2(w, o.file, out, takesLeaf) })
}
