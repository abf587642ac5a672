package main

import (
	"context"
	"math"
	"slices"
	"strings"

	"github.com/spf13/cobra"

	"shadeledger/scenarios/decide"
	"shadeledger/scenarios/report"
)

type sizeOptions struct {
	*settings
	io       streams
	plan     string
	shapes   []string
	bearing  float64
	bearings bool
	ranges   bool
	draws    int
}

var shapes = []string{"circle", "ellipse", "strip"}

func newSize(io streams) *cobra.Command {
	o := sizeOptions{io: io}
	cmd := &cobra.Command{
		Use:   "size [PLAN]",
		Short: "Smallest opening in which a seedling is comfortable over the asked share of it",
		Long: `For every seedling and shape the smallest opening, in steps of a tenth of the tree height, in which the seedling is
comfortable over at least size.share of the area inside the crowns (50 % where the plan does not say), up to
size.up_to. Circles go by their diameter, ellipses (twice as long as wide) and strips (three times) by their short side, all
from stem to stem; what lies inside is as in the plan's first opening. With size.against the window ends where
that seedling grows faster, by net carbon over what a plant is made of. --bearings turns ellipse and strip at that size. --range draws
everything not known for sure, as spread does, and gives the 5th to the 95th percentile of every size.`,
		Example: "  shadeledger size\n  shadeledger size my-stand --shape ellipse --bearing 90 --bearings\n  shadeledger size --set 'size.share=70 %' --set size.against=Birch",
		Args:    atMost(1),
		RunE: func(cmd *cobra.Command, args []string) error {
			s, err := readSettings(cmd)
			if err != nil {
				return err
			}
			o.settings, o.plan = s, first(args)
			return runSize(o)
		},
	}
	addPlanFlags(cmd)
	f := cmd.Flags()
	f.StringSliceVar(&o.shapes, "shape", shapes, "circle, ellipse, strip: one or more, with commas")
	f.Float64Var(&o.bearing, "bearing", 90, "true bearing of the long side, degrees")
	f.BoolVar(&o.bearings, "bearings", false, "try bearings 0 to 170 by 10 at the size found: best and worst")
	f.BoolVar(&o.ranges, "range", false, "low and high of every size, from draws of what is not known for sure")
	f.IntVar(&o.draws, "draws", sizeDraws, "draws of --range")
	complete(cmd, "shape", shapes...)
	return cmd
}

// sizeDraws are fewer than those of spread, since each looks for every size anew.
const sizeDraws = 60

func runSize(o sizeOptions) error {
	if err := o.checkOutput(); err != nil {
		return err
	}
	q := decide.SizeQuery{Bearing: o.bearing * math.Pi / 180, Turn: o.bearings, Workers: o.workers}
	for _, name := range o.shapes {
		i := slices.Index(shapes, name)
		if i < 0 {
			return usagef("--shape %s: one or more of %s", name, strings.Join(shapes, ", "))
		}
		q.Shapes = append(q.Shapes, decide.Shape(i))
	}
	if o.ranges && (o.draws < 40 || o.draws > 10000) {
		return usagef("--draws is %d; it must be 40 to 10000", o.draws)
	}
	if !(o.bearing >= 0 && o.bearing < 360) {
		return usagef("--bearing is %g; it must be 0 to 360 degrees", o.bearing)
	}
	p, err := loadPlan(o.plan, o.set)
	if err != nil {
		return err
	}
	q.Share, q.UpTo, q.Against = p.Size.Share, p.Size.UpTo, p.Size.Against
	t, err := decide.FindSizes(p, q)
	if err != nil {
		return err
	}
	if o.ranges {
		if err := o.drawing(o.io, o.draws, func(ctx context.Context, progress func(int)) error {
			return t.Range(ctx, p, decide.SpreadQuery{Count: o.draws, Seed: p.Draws.Seed, Workers: o.workers, Progress: progress})
		}); err != nil {
			return err
		}
	}
	if err := o.deliver(o.io, p, func(out report.Output) error { return report.Sizes(out, p, t) }); err != nil {
		return err
	}
	if o.ranges && t.Drawn < o.draws {
		return errInterrupted
	}
	return o.verdict(p.Warnings)
}
