package main

import (
	"github.com/spf13/cobra"

	"shadeledger/scenarios"
	"shadeledger/scenarios/plan"
	"shadeledger/scenarios/report"
)

type fitOptions struct {
	*settings
	io         streams
	plan, file string
}

func newFit(io streams) *cobra.Command {
	cmd := &cobra.Command{
		Use:   "fit",
		Short: "Parameters from readings: leaf traits from light responses, leaf area from light",
		RunE: func(cmd *cobra.Command, args []string) error {
			if len(args) > 0 {
				return usagef("%q is nothing to fit: leaf or canopy; see shadeledger fit --help", args[0])
			}
			return cmd.Help()
		},
	}
	cmd.AddCommand(newFitLeaf(io), newFitCanopy(io))
	return cmd
}

func newFitCanopy(io streams) *cobra.Command {
	cmd := &cobra.Command{
		Use:   "canopy [PLAN] [CSV]",
		Short: "Effective leaf area from paired light readings",
		Long: `The factor on the stand's leaf area at which the uncut stand passes the light that was read, with its 90 % interval, the
light before and after, and each reading beside the model. CSV columns: time, below, above, height, sky, and where
known point, quantity (ppfd or lux), above_shrubs. Without CSV the plan's own readings are taken.`,
		Example: "  shadeledger fit canopy\n  shadeledger fit canopy my-stand readings.csv",
		Args:    atMost(2),
		RunE: func(cmd *cobra.Command, args []string) error {
			s, err := readSettings(cmd)
			if err != nil {
				return err
			}
			o := fitOptions{settings: s, io: io, plan: first(args)}
			if len(args) == 2 {
				o.file = args[1]
			}
			return runFitCanopy(o)
		},
	}
	addPlanFlags(cmd)
	return cmd
}

func runFitCanopy(o fitOptions) error {
	p, err := o.open(o.plan)
	if err != nil {
		return err
	}
	if o.file != "" {
		r, faults := plan.ReadReadings(o.file, p.Site)
		if len(faults) > 0 {
			return faultsError{faults: faults}
		}
		p.Stand.Readings = r
	}
	r := p.Stand.Readings
	if len(r.Pairs) == 0 && len(r.Openness) == 0 {
		return usagef("no readings: name a CSV file, or give stand.readings in the plan")
	}
	_, correction, err := scenarios.Corrected(p)
	if err != nil {
		return err
	}
	if err := o.deliver(o.io, p, func(out report.Output) error { return report.FitCanopy(out, p, correction) }); err != nil {
		return err
	}
	if o.strict && len(correction.Notes()) > 1 {
		return errWarnings
	}
	return nil
}
