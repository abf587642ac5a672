package main

import (
	"github.com/spf13/cobra"

	"shadeledger/scenarios/decide"
	"shadeledger/scenarios/report"
)

type yearsOptions struct {
	*settings
	io       streams
	plan     string
	stations bool
}

func newYears(io streams) *cobra.Command {
	o := yearsOptions{io: io}
	cmd := &cobra.Command{
		Use:   "years [PLAN]",
		Short: "How long it lasts: yearly light and class per station, early, likely and late",
		Long: `Follows every treatment for years.horizon: border crowns grow into openings (years.side_closure), thinned canopies get their leaf
area back (years.leaf_regrowth), each at three paces: early is fast crowns and quick leaves, late slow ones. Seedlings grow:
each year's net carbon becomes leaves, wood and roots and with them height, up to the crown base, and each year's light is
that at the height reached. After three years of loss in a row a seedling dies. For every seedling: the year in which the
last station inside is lost, which is when to come back; the same for new stock; height; the year it stands above the
understory. --stations prints when every station is lost, --format csv has every year of every station; an empty year lies
beyond the horizon. Light is that of maps, a few weighted days a month. No other plants grow up.`,
		Example: "  shadeledger years\n  shadeledger years my-stand --format csv --output years.csv\n  shadeledger years --set 'years.side_closure={low: 0.1 m/y, best: 0.25 m/y, high: 0.4 m/y}'",
		Args:    atMost(1),
		RunE: func(cmd *cobra.Command, args []string) error {
			s, err := readSettings(cmd)
			if err != nil {
				return err
			}
			o.settings, o.plan = s, first(args)
			return runYears(o)
		},
	}
	addPlanFlags(cmd)
	cmd.Flags().BoolVar(&o.stations, "stations", false, "print when every station is lost")
	return cmd
}

func runYears(o yearsOptions) error {
	p, err := o.open(o.plan)
	if err != nil {
		return err
	}
	f, err := decide.FindYears(p, o.workers)
	if err != nil {
		return err
	}
	write := report.Years
	if o.stations {
		write = report.YearStations
	}
	if err := o.deliver(o.io, p, func(out report.Output) error { return write(out, p, f) }); err != nil {
		return err
	}
	return o.verdict(p.Warnings)
}
