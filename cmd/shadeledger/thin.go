package main

import (
	"strings"

	"github.com/spf13/cobra"

	"shadeledger/canopy/inventory"
	"shadeledger/scenarios"
	"shadeledger/scenarios/decide"
	"shadeledger/scenarios/report"
)

type thinOptions struct {
	*settings
	io          streams
	plan        string
	order       string
	steps       int
	light       float64
	comfortable string
	layers, cut bool
	by          scenarios.By
}

var orders = []string{"smallest", "largest", "all"}

func newThin(io streams) *cobra.Command {
	var by string
	o := thinOptions{io: io}
	cmd := &cobra.Command{
		Use:   "thin [PLAN]",
		Short: "Residual basal area against light and the stand's own carbon gain, both ways",
		Long: `Residual basal area against light, sky view, each seedling's balance and class, and what the stand's own leaves gain:
what the stand gives up and what the seedlings get in one table, and for how many years each seedling stays comfortable
while the canopy closes again (see years). Trees go as in the plan's first thinned treatment,
else smallest first; --order takes another order.

--light asks how much basal area may stay for a percent of full light, --comfortable for a seedling of the plan to be
comfortable; the answer is computed forward again. --layers shows what every layer of the plan's treatments gains,
--cut which trees they take.`,
		Example: "  shadeledger thin\n  shadeledger thin my-stand --light 25\n  shadeledger thin my-stand --comfortable \"Red oak 2-0\"\n  shadeledger thin --layers --by month --format csv",
		Args:    atMost(1),
		RunE: func(cmd *cobra.Command, args []string) error {
			s, err := readSettings(cmd)
			if err != nil {
				return err
			}
			o.settings, o.plan = s, first(args)
			if o.by, err = parseBy(by, balanceBy); err != nil {
				return err
			}
			if err := o.check(cmd); err != nil {
				return err
			}
			return runThin(o)
		},
	}
	addPlanFlags(cmd)
	f := cmd.Flags()
	f.StringVar(&o.order, "order", "", "smallest, largest or all: which trees go first")
	f.IntVar(&o.steps, "steps", 10, "how many residual basal areas, evenly from the uncut stand to a tenth of it")
	f.Float64Var(&o.light, "light", 0, "find the residual basal area for this percent of full light over the season")
	f.StringVar(&o.comfortable, "comfortable", "", "find the residual basal area at which this seedling is comfortable")
	f.BoolVar(&o.layers, "layers", false, "what every layer of each treatment's trees gains")
	f.BoolVar(&o.cut, "cut", false, "which trees each treatment takes, by class")
	f.StringVar(&by, "by", "year", "year, month or day, with --layers")
	complete(cmd, "order", orders...)
	complete(cmd, "by", balanceBy...)
	return cmd
}

// check refuses what does not go together.
func (o *thinOptions) check(cmd *cobra.Command) error {
	asked := 0
	for _, name := range []string{"light", "comfortable", "layers", "cut"} {
		if cmd.Flags().Changed(name) {
			asked++
		}
	}
	switch {
	case asked > 1:
		return usagef("one of --light, --comfortable, --layers and --cut at a time")
	case cmd.Flags().Changed("by") && !o.layers:
		return usagef("--by goes with --layers")
	case o.order != "" && !strings.Contains(" smallest largest all ", " "+o.order+" "):
		return usagef("--order %q is not known; it must be one of %s", o.order, strings.Join(orders, ", "))
	case o.steps < 2 || o.steps > 200:
		return usagef("--steps is %d; it must be 2 to 200", o.steps)
	case cmd.Flags().Changed("light") && !(o.light > 0 && o.light <= 100):
		return usagef("--light is %g; it must be above 0 to 100 percent", o.light)
	}
	return nil
}

func runThin(o thinOptions) error {
	p, err := o.open(o.plan)
	if err != nil {
		return err
	}
	if o.cut {
		if err := o.deliver(o.io, p, func(out report.Output) error { return report.CutTrees(out, p) }); err != nil {
			return err
		}
		return o.verdict(p.Warnings)
	}
	if o.layers {
		r, err := scenarios.Run(p, scenarios.Options{Workers: o.workers, Depth: scenarios.Light, Gain: true})
		if err != nil {
			return err
		}
		if err := o.deliver(o.io, p, func(out report.Output) error { return report.Layers(out, r, o.by) }); err != nil {
			return err
		}
		return o.verdict(r.Warnings)
	}
	if !p.Stand.Cruised() {
		return usagef("thin works on trees: give stand.stand_table or stand.basal_area in the plan")
	}
	q := decide.QueryOf(p)
	q.Workers = o.workers
	if o.order != "" {
		q.Thinning.Order = map[string]inventory.Order{"smallest": inventory.SmallestFirst, "largest": inventory.LargestFirst, "all": inventory.AllSizes}[o.order]
	}
	if o.light > 0 || o.comfortable != "" {
		return runResidual(o, p, q)
	}
	t, err := decide.Thin(p, q, decide.Steps(p, o.steps))
	if err != nil {
		return err
	}
	if err := o.deliver(o.io, p, func(out report.Output) error { return report.Thin(out, p, t, q) }); err != nil {
		return err
	}
	return o.verdict(t.Results.Warnings)
}

// runResidual answers how much may stay.
func runResidual(o thinOptions, p *scenarios.Plan, q decide.ThinQuery) error {
	var target decide.Target = decide.LightTarget{Percent: o.light}
	if o.comfortable != "" {
		target = decide.ComfortTarget{Seedling: o.comfortable}
		if !decide.HasSeedling(p, o.comfortable) {
			return usagef("--comfortable %q is not a seedling of the plan; there are %s", o.comfortable, strings.Join(decide.Seedlings(p), ", "))
		}
	}
	_, correction, err := scenarios.Corrected(p)
	if err != nil {
		return err
	}
	a, err := decide.FindResidual(p, q, target)
	if err != nil {
		return err
	}
	if err := o.deliver(o.io, p, func(out report.Output) error { return report.Residual(out, p, a, q, correction) }); err != nil {
		return err
	}
	return o.verdict(p.Warnings)
}
