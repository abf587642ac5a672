// Command shadeledger tells a forester how much light each planting spot of an opening or thinning gets and whether a
// seedling there earns more carbon in a year than it spends.
package main

import (
	"errors"
	"fmt"
	"io"
	"os"
)

// Exit statuses.
const (
	exitDone     = 0
	exitFailed   = 1
	exitUsage    = 2 // wrong usage or plan
	exitWarnings = 3 // done, with warnings, under --strict
)

func main() { os.Exit(run(os.Args[1:], os.Stdout, os.Stderr)) }

// run is the whole program but the process around it.
func run(args []string, stdout, stderr io.Writer) int {
	root := newRoot(stdout, stderr)
	root.SetArgs(args)
	root.SetOut(stdout)
	root.SetErr(stderr)
	err := root.Execute()
	if err == nil {
		return exitDone
	}
	fmt.Fprintln(stderr, "shadeledger: "+err.Error())
	var usage usageError
	var faults faultsError
	switch {
	case errors.As(err, &usage), errors.As(err, &faults):
		return exitUsage
	case errors.Is(err, errWarnings):
		return exitWarnings
	}
	return exitFailed
}

// usageError is wrong usage or a wrong plan.
type usageError struct{ error }

func (e usageError) Unwrap() error { return e.error }

func usagef(format string, args ...any) error { return usageError{fmt.Errorf(format, args...)} }

// errWarnings ends a run under --strict that had warnings.
var errWarnings = errors.New("done, but with warnings, which --strict does not let pass")
