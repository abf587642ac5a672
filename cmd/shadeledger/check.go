package main

import (
	"github.com/spf13/cobra"

	"shadeledger/scenarios/report"
)

type checkOptions struct {
	*settings
	io   streams
	plan string
}

func newCheck(io streams) *cobra.Command {
	cmd := &cobra.Command{
		Use:   "check [PLAN]",
		Short: "Is this plan sound, and what was assumed?",
		Long: `Is this plan sound, and what was assumed? Faults print with file, line, column, key, value and what would be
right, all at once, and the exit status is 2. A sound plan prints every assumed value with its unit and
source, then the warnings and the cautions.`,
		Example: "  shadeledger check my-stand\n  shadeledger check my-stand --set 'stand.height=80 ft'",
		Args:    atMost(1),
		RunE: func(cmd *cobra.Command, args []string) error {
			s, err := readSettings(cmd)
			if err != nil {
				return err
			}
			return runCheck(checkOptions{s, io, first(args)})
		},
	}
	addPlanFlags(cmd)
	return cmd
}

func runCheck(o checkOptions) error {
	if err := o.checkOutput(); err != nil {
		return err
	}
	p, err := loadPlan(o.plan, o.set)
	if err != nil {
		return err
	}
	if err := o.deliver(o.io, p, func(out report.Output) error { return report.Check(out, p) }); err != nil {
		return err
	}
	if o.strict && len(p.Warnings) > 0 {
		return errWarnings
	}
	return nil
}
