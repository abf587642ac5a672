package main

import (
	"strings"

	"github.com/spf13/cobra"

	"shadeledger/leaf/traits"
	"shadeledger/scenarios/report"
)

type speciesOptions struct {
	*settings
	io   streams
	name string
}

func newSpecies(io streams) *cobra.Command {
	cmd := &cobra.Command{
		Use:   "species [NAME]",
		Short: "The trait library, each value with unit, source and basis",
		Long: `The trait library: without a name the list; with a botanical or common name every value of that species
with its range, unit, basis (seen, memory, derived) and source, and its light response.`,
		Example: "  shadeledger species\n  shadeledger species 'Quercus rubra'\n  shadeledger species sugar maple --format csv",
		RunE: func(cmd *cobra.Command, args []string) error {
			s, err := readSettings(cmd)
			if err != nil {
				return err
			}
			return runSpecies(speciesOptions{settings: s, io: io, name: strings.Join(args, " ")})
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
	return cmd
}

func runSpecies(o speciesOptions) error {
	if err := o.checkOutput(); err != nil {
		return err
	}
	if o.name == "" {
		return o.deliver(o.io, nil, func(out report.Output) error { return report.SpeciesList(out, traits.All()) })
	}
	s, err := traits.Find(o.name)
	if err != nil {
		return usageError{err}
	}
	return o.deliver(o.io, nil, func(out report.Output) error { return report.SpeciesPage(out, s) })
}
