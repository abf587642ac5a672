package main

import (
	"io"

	"github.com/spf13/cobra"
)

const longRoot = `shadeledger goes from a forest stand, an opening or thinning and seedlings to the light at
each planting spot and each seedling's yearly carbon ledger. It works offline.

PLAN is a file or a folder that holds plan.yaml. Left out, it is plan.yaml in the
current folder if there is one, else the built-in example.

Settings: a flag goes before SHADELEDGER_NAME in the environment (SHADELEDGER_FORMAT,
SHADELEDGER_UNITS, SHADELEDGER_WORKERS, SHADELEDGER_QUIET, SHADELEDGER_STRICT), that before the
settings file (shadeledger/settings.yaml in your configuration folder, or the file that
SHADELEDGER_SETTINGS names), that before the default.

Exit status: 0 done, 1 failed, 2 wrong usage or plan, 3 done with warnings under --strict.`

// newRoot puts the commands together.
func newRoot(stdout, stderr io.Writer) *cobra.Command {
	root := &cobra.Command{
		Use:           "shadeledger COMMAND [PLAN]",
		Short:         "Light at planting spots and the seedling's yearly carbon ledger",
		Long:          longRoot,
		Example:       "  shadeledger balance\n  shadeledger start my-stand\n  shadeledger check my-stand",
		SilenceErrors: true,
		SilenceUsage:  true,
		Args:          cobra.ArbitraryArgs,
		RunE: func(cmd *cobra.Command, args []string) error {
			if len(args) > 0 {
				return usagef("%q is not a command; see shadeledger --help", args[0])
			}
			return cmd.Help()
		},
	}
	root.SetFlagErrorFunc(func(_ *cobra.Command, err error) error { return usageError{err} })
	io := streams{stdout, stderr}
	root.AddCommand(newStart(io), newCheck(io), newKeys(io), newStand(io), newLight(io), newBalance(io), newThin(io), newSize(io), newWhere(io), newYears(io), newSpread(io), newCautions(io), newFit(io), newSpecies(io))
	return root
}

// streams are where a command writes.
type streams struct{ out, err io.Writer }

// atMost is the number of arguments a command takes, as an error of usage.
func atMost(n int) cobra.PositionalArgs {
	return func(cmd *cobra.Command, args []string) error {
		if len(args) > n {
			return usagef("%s takes at most %d argument(s), not %d; see shadeledger %s --help", cmd.Name(), n, len(args), cmd.Name())
		}
		return nil
	}
}

// first is the first argument or "".
func first(args []string) string {
	if len(args) == 0 {
		return ""
	}
	return args[0]
}
