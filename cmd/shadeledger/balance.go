package main

import (
	"github.com/spf13/cobra"

	"shadeledger/scenarios"
	"shadeledger/scenarios/decide"
	"shadeledger/scenarios/report"
)

type balanceOptions struct {
	*settings
	io    streams
	plan  string
	by    scenarios.By
	view  report.View
	draws int // of ranges; 0 for none
}

func newBalance(io streams) *cobra.Command {
	var by string
	var stations, lines, ranges bool
	var count int
	cmd := &cobra.Command{
		Use:   "balance [PLAN]",
		Short: "Each seedling's yearly carbon ledger at each station under each treatment",
		Long: `The main job: each seedling's yearly ledger at each station under each treatment, its income to cost ratio,
the light at which it breaks even, and its class: below, marginal or comfortable.

below        the year's costs are more than its income
marginal     it earns its costs, but the light is under the working threshold
comfortable  leaf-on light at or above the working threshold (break-even times threshold_factor)

The first screen holds the decision and the best class inside each opening. --stations prints every station,
--ledger every line of the ledger, --by month or day parts the year.

--range draws everything not known for sure, as spread does with more draws, and follows the years: the first screen then tells how likely each
seedling is comfortable, for how many years (early to late), the one input that flips the decision and what to measure next; tables and CSV
get the 5th and 95th percentile.`,
		Example: "  shadeledger balance\n  shadeledger balance my-stand --stations\n  shadeledger balance my-stand --by month --format csv --output ledger.csv",
		Args:    atMost(1),
		RunE: func(cmd *cobra.Command, args []string) error {
			s, err := readSettings(cmd)
			if err != nil {
				return err
			}
			o := balanceOptions{settings: s, io: io, plan: first(args)}
			if o.by, err = parseBy(by, balanceBy); err != nil {
				return err
			}
			switch {
			case lines:
				o.view = report.Ledger
			case stations || o.by != scenarios.ByYear:
				o.view = report.Stations
			}
			if ranges {
				if o.draws = count; count < 100 || count > 100000 {
					return usagef("--draws %d; it must be 100 to 100000", count)
				}
			}
			return runBalance(o)
		},
	}
	addPlanFlags(cmd)
	f := cmd.Flags()
	f.StringVar(&by, "by", "year", "year, month or day")
	f.BoolVar(&stations, "stations", false, "print every station")
	f.BoolVar(&lines, "ledger", false, "print every line of the ledger")
	f.BoolVar(&ranges, "range", false, "low and high of each figure, chances, years, what would flip the decision and what to measure next")
	f.IntVar(&count, "draws", balanceDraws, "draws of --range")
	complete(cmd, "by", balanceBy...)
	return cmd
}

func runBalance(o balanceOptions) error {
	p, err := o.open(o.plan)
	if err != nil {
		return err
	}
	r, err := scenarios.Run(p, scenarios.Options{Workers: o.workers, Depth: scenarios.BreakEvens, By: o.by})
	if err != nil {
		return err
	}
	doubts, err := o.doubts(p)
	if err != nil {
		return err
	}
	if err := o.deliver(o.io, p, func(out report.Output) error { return report.Balance(out, r, o.view, doubts) }); err != nil {
		return err
	}
	if doubts != nil && doubts.Spreads.Done < o.draws {
		return errInterrupted
	}
	return o.verdict(r.Warnings)
}

// balanceDraws are fewer than those of spread, for an answer in seconds.
const balanceDraws = 300

// doubts finds ranges and years where they are asked for; nil where not.
func (o *balanceOptions) doubts(p *scenarios.Plan) (*report.Doubts, error) {
	if o.draws == 0 {
		return nil, nil
	}
	p.Draws.Count = o.draws
	s, err := o.spread(o.io, p, 0)
	if err != nil {
		return nil, err
	}
	f, err := decide.FindYears(p, o.workers)
	return &report.Doubts{Spreads: s, Years: f}, err
}
