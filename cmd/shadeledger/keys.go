package main

import (
	"strings"

	"github.com/spf13/cobra"

	"shadeledger/scenarios/plan"
	"shadeledger/scenarios/report"
)

type keysOptions struct {
	*settings
	io     streams
	key    string
	schema bool
}

func newKeys(io streams) *cobra.Command {
	var schema bool
	cmd := &cobra.Command{
		Use:   "keys [KEY]",
		Short: "Every plan key: meaning, unit, range, default, an example",
		Long: `Every plan key with its meaning, unit, range, default and an example; with KEY that key in full, or all keys
that begin with it or hold it. --schema prints a JSON Schema for editors.`,
		Example: "  shadeledger keys\n  shadeledger keys stand.height\n  shadeledger keys --schema --output plan.schema.json",
		Args:    atMost(1),
		RunE: func(cmd *cobra.Command, args []string) error {
			s, err := readSettings(cmd)
			if err != nil {
				return err
			}
			if schema && (len(args) > 0 || cmd.Flags().Changed("format")) {
				return usagef("--schema is of all keys and in its own form; leave KEY and --format out")
			}
			return runKeys(keysOptions{s, io, first(args), schema})
		},
		ValidArgsFunction: completeKeys,
	}
	addOutputFlags(cmd)
	cmd.Flags().BoolVar(&schema, "schema", false, "print a JSON Schema of the plan")
	return cmd
}

func completeKeys(_ *cobra.Command, _ []string, _ string) ([]string, cobra.ShellCompDirective) {
	var out []string
	for _, k := range plan.Keys {
		out = append(out, k.Path+"\t"+k.Meaning)
	}
	return out, cobra.ShellCompDirectiveNoFileComp
}

func runKeys(o keysOptions) error {
	if err := o.checkOutput(); err != nil {
		return err
	}
	if o.schema {
		return o.deliver(o.io, nil, writeSchema)
	}
	keys := findKeys(o.key)
	if len(keys) == 0 {
		return usagef("%q is not a key of a plan; shadeledger keys lists them", o.key)
	}
	return o.deliver(o.io, nil, func(out report.Output) error { return report.Keys(out, keys) })
}

// findKeys gives the key of that path, else those that begin with the words, else those that hold them; all for "". The
// [] of list items may be left out.
func findKeys(text string) []report.Key {
	plain := strings.NewReplacer("[]", "")
	text = plain.Replace(text)
	tests := []func(path string) bool{
		func(path string) bool { return path == text },
		func(path string) bool { return strings.HasPrefix(path, text) },
		func(path string) bool { return strings.Contains(path, text) },
	}
	for _, fits := range tests {
		var out []report.Key
		for _, k := range plan.Keys {
			if fits(plain.Replace(k.Path)) {
				out = append(out, shown(k))
			}
		}
		if out != nil {
			return out
		}
	}
	return nil
}

func shown(k plan.Key) report.Key {
	r := k.Range
	if len(k.Words) > 0 {
		r = strings.Join(k.Words, ", ")
	}
	return report.Key{Key: k.Path, Form: string(k.Kind), Unit: k.Unit(), Range: r, Default: k.Default, Example: k.Example, Meaning: k.Meaning}
}
