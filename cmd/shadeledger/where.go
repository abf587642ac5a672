package main

import (
	"github.com/spf13/cobra"

	"shadeledger/scenarios/decide"
	"shadeledger/scenarios/report"
)

type whereOptions struct {
	*settings
	io       streams
	plan     string
	bearings bool
}

func newWhere(io streams) *cobra.Command {
	o := whereOptions{io: io}
	cmd := &cobra.Command{
		Use:   "where [PLAN]",
		Short: "Where in each opening a seedling is comfortable: plant-here zones",
		Long: `Maps every opening of the plan on its grid (sampling.grid), half a tree height beyond the crowns, and names the pieces of ground
where each seedling is comfortable: area, and how to walk there from the centre, true and, where the plan gives a
declination, magnetic. Light and net are worked out at every spot, break-even every 3 m and linear between. --bearings turns
ellipses and strips: the best and the worst bearing for each seedling.`,
		Example: "  shadeledger where\n  shadeledger where my-stand --set 'sampling.grid=2 m' --format csv\n  shadeledger where --bearings",
		Args:    atMost(1),
		RunE: func(cmd *cobra.Command, args []string) error {
			s, err := readSettings(cmd)
			if err != nil {
				return err
			}
			o.settings, o.plan = s, first(args)
			return runWhere(o)
		},
	}
	addPlanFlags(cmd)
	cmd.Flags().BoolVar(&o.bearings, "bearings", false, "try bearings 0 to 170 by 10 of ellipses and strips")
	return cmd
}

func runWhere(o whereOptions) error {
	p, err := o.open(o.plan)
	if err != nil {
		return err
	}
	places, err := decide.FindPlaces(p, o.workers, o.bearings)
	if err != nil {
		return err
	}
	if len(places.Shares) == 0 {
		return usagef("the plan has no opening; places are found in openings")
	}
	if err := o.deliver(o.io, p, func(out report.Output) error { return report.Places(out, p, places) }); err != nil {
		return err
	}
	return o.verdict(p.Warnings)
}
