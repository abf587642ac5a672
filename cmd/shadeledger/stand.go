package main

import (
	"github.com/spf13/cobra"

	"shadeledger/scenarios"
	"shadeledger/scenarios/report"
)

type standOptions struct {
	*settings
	io   streams
	plan string
}

func newStand(io streams) *cobra.Command {
	cmd := &cobra.Command{
		Use:   "stand [PLAN]",
		Short: "Your cruise read back: basal area, trees, leaf area and where it came from",
		Long: `Your cruise read back: basal area, trees, quadratic mean diameter (QMD) and H:D by species and class, the standard
error where points or plots were counted, what the sheet's own totals say, and the leaf area made of it with its
source. --format csv lists every class with height, crown and leaf area.`,
		Example: "  shadeledger stand\n  shadeledger stand my-stand --format csv --output classes.csv",
		Args:    atMost(1),
		RunE: func(cmd *cobra.Command, args []string) error {
			s, err := readSettings(cmd)
			if err != nil {
				return err
			}
			return runStand(standOptions{s, io, first(args)})
		},
	}
	addPlanFlags(cmd)
	return cmd
}

func runStand(o standOptions) error {
	p, err := o.open(o.plan)
	if err != nil {
		return err
	}
	_, correction, err := scenarios.Corrected(p)
	if err != nil {
		return err
	}
	if err := o.deliver(o.io, p, func(out report.Output) error { return report.Stand(out, p, correction) }); err != nil {
		return err
	}
	if o.strict && len(p.Warnings)+len(correction.Notes()) > 0 {
		return errWarnings
	}
	return nil
}
