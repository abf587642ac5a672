package main

import (
	"strings"

	"github.com/spf13/cobra"

	"shadeledger/scenarios"
	"shadeledger/scenarios/report"
)

type lightOptions struct {
	*settings
	io   streams
	plan string
	by   scenarios.By
}

func newLight(io streams) *cobra.Command {
	var by string
	cmd := &cobra.Command{
		Use:   "light [PLAN]",
		Short: "Light at each station under each treatment",
		Long: `Light at each station under each treatment: percent of full light, PAR in mol m-2 d-1, the share of it
that comes as sunflecks, and the sky view. One row for every distinct seedling height and each of
sampling.heights.

The figures are of the plan's season; --by takes other periods: leaf-on, year, month, day.`,
		Example: "  shadeledger light\n  shadeledger light my-stand --by month --format csv",
		Args:    atMost(1),
		RunE: func(cmd *cobra.Command, args []string) error {
			s, err := readSettings(cmd)
			if err != nil {
				return err
			}
			o := lightOptions{settings: s, io: io, plan: first(args)}
			if o.by, err = parseBy(by, lightBy); err != nil {
				return err
			}
			return runLight(o)
		},
	}
	addPlanFlags(cmd)
	cmd.Flags().StringVar(&by, "by", "season", "season, leaf-on, year, month or day")
	complete(cmd, "by", lightBy...)
	return cmd
}

func runLight(o lightOptions) error {
	p, err := o.open(o.plan)
	if err != nil {
		return err
	}
	r, err := scenarios.Run(p, scenarios.Options{Workers: o.workers, Depth: scenarios.Light, By: o.by})
	if err != nil {
		return err
	}
	if err := o.deliver(o.io, p, func(out report.Output) error { return report.Light(out, r) }); err != nil {
		return err
	}
	return o.verdict(r.Warnings)
}

// verdict ends a run: under --strict, warnings are an error.
func (s *settings) verdict(warnings []scenarios.Warning) error {
	if s.strict && len(warnings) > 0 {
		return errWarnings
	}
	return nil
}

var (
	lightBy   = []string{"season", "leaf-on", "year", "month", "day"}
	balanceBy = []string{"year", "month", "day"}
)

// parseBy reads --by against the words a command takes.
func parseBy(s string, words []string) (scenarios.By, error) {
	all := map[string]scenarios.By{"season": scenarios.BySeason, "leaf-on": scenarios.ByLeafOn,
		"year": scenarios.ByYear, "month": scenarios.ByMonth, "day": scenarios.ByDay}
	for _, w := range words {
		if s == w {
			return all[w], nil
		}
	}
	return 0, usagef("--by %q is not known; it must be one of %s", s, strings.Join(words, ", "))
}
