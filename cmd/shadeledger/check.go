package main

import (
	"github.com/spf13/cobra"

	"shadeledger/scenarios"
	"shadeledger/scenarios/plan"
	"shadeledger/scenarios/report"
)

type checkOptions struct {
	*settings
	io        streams
	plan      string
	effective bool
}

func newCheck(io streams) *cobra.Command {
	var effective bool
	cmd := &cobra.Command{
		Use:   "check [PLAN]",
		Short: "Is this plan sound, and what was assumed?",
		Long: `Is this plan sound, and what was assumed? Faults print with file, line, column, key, value and what would be
right, all at once, and the exit status is 2. A sound plan prints every assumed value with its unit and
source, then the warnings and the cautions. --effective prints the plan itself with every value explicit: run from the
same folder it gives the same results.`,
		Example: "  shadeledger check my-stand\n  shadeledger check my-stand --set 'stand.height=80 ft'",
		Args:    atMost(1),
		RunE: func(cmd *cobra.Command, args []string) error {
			s, err := readSettings(cmd)
			if err != nil {
				return err
			}
			return runCheck(checkOptions{s, io, first(args), effective})
		},
	}
	addPlanFlags(cmd)
	cmd.Flags().BoolVar(&effective, "effective", false, "print the plan with every value explicit, leaf area as readings correct it")
	return cmd
}

func runCheck(o checkOptions) error {
	p, err := o.open(o.plan)
	if err != nil {
		return err
	}
	write := func(out report.Output) error { return report.Check(out, p) }
	if o.effective {
		if p, _, err = scenarios.Corrected(p); err != nil {
			return err
		}
		write = func(out report.Output) error {
			_, err := out.Out.Write(plan.Effective(p))
			return err
		}
	}
	if err := o.deliver(o.io, p, write); err != nil {
		return err
	}
	return o.verdict(p.Warnings)
}
