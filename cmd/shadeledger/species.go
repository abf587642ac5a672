package main

import (
	"slices"
	"strings"

	"github.com/spf13/cobra"

	"shadeledger/leaf/traits"
	"shadeledger/scenarios/report"
)

type speciesOptions struct {
	*settings
	io                       streams
	name                     string
	compare                  []string
	comparing                bool
	tolerance, habit, region string
}

// Words of the filters.
var (
	tolerances = []string{"low", "mid", "high"}
	habits     = []string{"deciduous", "evergreen", "broadleaf", "needle"}
	regions    = []string{"east", "west", "south", "boreal", "europe", "tropics"}
)

func newSpecies(io streams) *cobra.Command {
	o := speciesOptions{io: io}
	cmd := &cobra.Command{
		Use:         "species [NAME]",
		Annotations: map[string]string{draws: ""},
		Short:       "The trait library, each value with unit, source and basis",
		Long: `The trait library: without a name the list, which filters narrow; with a botanical or common name every value of
that species with its range, unit, basis (seen, memory, derived) and source, and the light responses of its seedlings. --compare A,B
sets two species side by side. --output FILE.svg or FILE.png draws the responses with the bands of their ranges.`,
		Example: "  shadeledger species --tolerance high --habit needle --region west\n  shadeledger species 'Quercus rubra' --output oak.svg\n  shadeledger species --compare 'red oak,sugar maple'",
		RunE: func(cmd *cobra.Command, args []string) error {
			s, err := readSettings(cmd)
			if err != nil {
				return err
			}
			o.settings, o.name, o.comparing = s, strings.Join(args, " "), cmd.Flags().Changed("compare")
			return runSpecies(o)
		},
		ValidArgsFunction: func(_ *cobra.Command, args []string, _ string) ([]string, cobra.ShellCompDirective) {
			var out []string
			for _, s := range traits.All() {
				out = append(out, s.Botanical+"\t"+s.Common)
			}
			return out, cobra.ShellCompDirectiveNoFileComp
		},
	}
	addOutputFlags(cmd)
	f := cmd.Flags()
	f.StringSliceVar(&o.compare, "compare", nil, "A,B: two species side by side")
	f.StringVar(&o.tolerance, "tolerance", "", "list only this class of shade tolerance: "+strings.Join(tolerances, ", "))
	f.StringVar(&o.habit, "habit", "", "list only "+strings.Join(habits, ", "))
	f.StringVar(&o.region, "region", "", "list only "+strings.Join(regions, ", "))
	complete(cmd, "tolerance", tolerances...)
	complete(cmd, "habit", habits...)
	complete(cmd, "region", regions...)
	return cmd
}

func runSpecies(o speciesOptions) error {
	if err := o.checkOutput(); err != nil {
		return err
	}
	if err := o.check(); err != nil {
		return err
	}
	names := o.compare
	if o.name != "" {
		names = []string{o.name}
	}
	var found []*traits.Species
	for _, n := range names {
		s, err := traits.Find(n)
		if err != nil {
			return usageError{err}
		}
		found = append(found, s)
	}
	return o.deliver(o.io, nil, func(out report.Output) error {
		drawing := out.Format == report.SVG || out.Format == report.PNG
		switch {
		case drawing && len(found) == 0:
			return usagef("a figure is of one species or of two to compare: name one, or add --compare A,B")
		case drawing:
			return report.SpeciesFigure(out, found...)
		case len(found) == 2:
			return report.CompareSpecies(out, found[0], found[1])
		case len(found) == 1:
			return report.SpeciesPage(out, found[0])
		}
		return report.SpeciesList(out, o.filtered())
	})
}

// check refuses words that no filter knows and what does not go together.
func (o *speciesOptions) check() error {
	for _, f := range []struct {
		name, word string
		words      []string
	}{{"tolerance", o.tolerance, tolerances}, {"habit", o.habit, habits}, {"region", o.region, regions}} {
		if f.word != "" && !slices.Contains(f.words, f.word) {
			return usagef("--%s %s: one of %s", f.name, f.word, strings.Join(f.words, ", "))
		}
	}
	switch filters := o.tolerance != "" || o.habit != "" || o.region != ""; {
	case o.comparing && len(o.compare) != 2:
		return usagef("--compare takes two species: A,B")
	case o.comparing && o.name != "":
		return usagef("either a NAME or --compare A,B")
	case filters && (o.name != "" || o.comparing):
		return usagef("filters narrow the list; leave them out beside a NAME or --compare")
	}
	return nil
}

// filtered is the library as far as the filters let it through.
func (o *speciesOptions) filtered() []*traits.Species {
	return slices.DeleteFunc(traits.All(), func(s *traits.Species) bool {
		is := map[string]bool{"": true, "deciduous": s.Deciduous(), "evergreen": !s.Deciduous(), "broadleaf": !s.Needled(), "needle": s.Needled()}
		return !is[o.habit] || o.tolerance != "" && string(s.Class()) != o.tolerance || o.region != "" && !slices.Contains(s.Regions, o.region)
	})
}
