package main

import (
	"context"
	"errors"
	"os"
	"os/signal"
	"sync"
	"syscall"
	"time"

	"github.com/spf13/cobra"

	"shadeledger/scenarios"
	"shadeledger/scenarios/decide"
	"shadeledger/scenarios/report"
)

type spreadOptions struct {
	*settings
	io      streams
	plan    string
	count   int     // draws; 0 takes the plan's
	year    float64 // after the cut
	indices bool
}

func newSpread(io streams) *cobra.Command {
	o := spreadOptions{io: io}
	cmd := &cobra.Command{
		Use:   "spread [PLAN]",
		Short: "Ranges, what drives them, what would flip the decision, what to measure next",
		Long: `Draws everything that is not known for sure (draws.count times, from draws.seed): leaf area, clumping, heights, crowns, leaf dates, slope,
radiation and temperature, each seedling's leaves, stems and roots, and a generated year of weather, and runs every treatment for each. A
value's doubt is the plan's own (78 ft +- 4 ft, or {low, best, high}), else that of readings, of the species library or what is usual in the
field. Ranges run from the 5th to the 95th percentile.

For every seedling: each treatment's light and carbon with its range, how likely a station is comfortable, which treatments cannot be separated, the one
input that flips the decision and its value there, what to measure next and what that buys, and what moves the margin of light over the threshold.
--format csv has every station with the chance of each class; --output FILE.svg draws what moves the margin.

Ctrl-C ends the run: what was drawn by then is printed and marked, and the exit status is 1. A second Ctrl-C ends it at once.`,
		Example:     "  shadeledger spread\n  shadeledger spread my-stand --draws 500\n  shadeledger spread my-stand --format csv --output ranges.csv",
		Args:        atMost(1),
		Annotations: map[string]string{draws: ""},
		RunE: func(cmd *cobra.Command, args []string) error {
			s, err := readSettings(cmd)
			if err != nil {
				return err
			}
			if cmd.Flags().Changed("draws") && (o.count < 100 || o.count > 100000) {
				return usagef("--draws %d; it must be 100 to 100000", o.count)
			}
			if o.year < 0 || o.year > 60 {
				return usagef("--year %g; it must be 0 to 60 years after the cut", o.year)
			}
			o.settings, o.plan = s, first(args)
			return runSpread(o)
		},
	}
	addPlanFlags(cmd)
	cmd.Flags().BoolVar(&o.indices, "indices", false, "first-order and total Sobol indices by groups of inputs too, from as many runs again")
	cmd.Flags().Float64Var(&o.year, "year", 0, "years after the cut: how fast crowns close is drawn too, for stock of the plan's size planted then")
	cmd.Flags().IntVar(&o.count, "draws", 0, "draws, in place of the plan's draws.count")
	return cmd
}

// errInterrupted ends a run that was cut short: its partial answer is printed.
var errInterrupted = errors.New("interrupted: the answer is that of fewer draws")

func runSpread(o spreadOptions) error {
	p, err := o.open(o.plan)
	if err != nil {
		return err
	}
	if o.count > 0 {
		p.Draws.Count = o.count
	}
	found, err := o.spread(o.io, p, o.year)
	if err != nil {
		return err
	}
	if o.indices && found.Done == found.Query.Count {
		o.progress(o.io, "shares of variance by group:")
		if err := o.drawing(o.io, p.Draws.Count, func(ctx context.Context, progress func(int)) error {
			q := found.Query
			q.Progress = progress
			return found.FindShares(ctx, q)
		}); err != nil {
			return err
		}
	}
	if err := o.deliver(o.io, p, func(out report.Output) error { return report.Spread(out, p, found) }); err != nil {
		return err
	}
	if found.Done < found.Query.Count {
		return errInterrupted
	}
	return o.verdict(p.Warnings)
}

// spread finds ranges; an interrupt ends the draws.
func (s *settings) spread(io streams, p *scenarios.Plan, year float64) (found *decide.Spreads, err error) {
	err = s.drawing(io, p.Draws.Count, func(ctx context.Context, progress func(int)) error {
		found, err = decide.FindSpreads(ctx, p, decide.SpreadQuery{Count: p.Draws.Count, Seed: p.Draws.Seed, Workers: s.workers, After: year, Progress: progress})
		return err
	})
	return found, err
}

// drawing runs draws that tell where they are, until an interrupt.
func (s *settings) drawing(io streams, count int, work func(ctx context.Context, progress func(done int)) error) error {
	ctx, stop := signal.NotifyContext(context.Background(), os.Interrupt, syscall.SIGTERM)
	defer stop()
	context.AfterFunc(ctx, stop) // the next interrupt is the system's own
	var once sync.Mutex
	told := time.Now()
	return work(ctx, func(done int) {
		once.Lock()
		defer once.Unlock()
		if done == count || time.Since(told) > progressEvery {
			told = time.Now()
			s.progress(io, "draws %d of %d", done, count)
		}
	})
}

// progressEvery is how often a long run tells where it is.
const progressEvery = 2 * time.Second
