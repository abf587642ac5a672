package main

import (
	"github.com/spf13/cobra"

	"shadeledger/scenarios"
	"shadeledger/scenarios/report"
)

type cautionsOptions struct {
	*settings
	io   streams
	plan string
}

func newCautions(io streams) *cobra.Command {
	o := cautionsOptions{io: io}
	cmd := &cobra.Command{
		Use:   "cautions [PLAN]",
		Short: "What speaks against each treatment: conflicts, your limits, every caution",
		Long: `Runs the plan and sets beside its light what may overturn it. Conflicts first, by treatment: frost, windthrow, shrubs above the
seedlings, rivals that grow faster, a dark edge, a year that lives on spring light, limits overstepped; each with its rule,
where the rule is from, the figure found and what would change it. Then your limits (plan key limits), each with the figure
against it. Then all cautions: addressed, not applicable, to check or OPEN, as the plan says. No key or flag takes one away.`,
		Example: "  shadeledger cautions\n  shadeledger cautions my-stand --format csv --output cautions.csv\n  shadeledger cautions --set 'limits.opening=0.25 ac' --set size.against=Birch",
		Args:    atMost(1),
		RunE: func(cmd *cobra.Command, args []string) error {
			s, err := readSettings(cmd)
			if err != nil {
				return err
			}
			o.settings, o.plan = s, first(args)
			return runCautions(o)
		},
	}
	addPlanFlags(cmd)
	return cmd
}

func runCautions(o cautionsOptions) error {
	p, err := o.open(o.plan)
	if err != nil {
		return err
	}
	r, err := scenarios.Run(p, scenarios.Options{Workers: o.workers, Depth: scenarios.BreakEvens, By: scenarios.ByYear})
	if err != nil {
		return err
	}
	if err := o.deliver(o.io, p, func(out report.Output) error { return report.Cautions(out, r) }); err != nil {
		return err
	}
	return o.verdict(r.Warnings)
}
