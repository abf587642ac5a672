package main

import (
	"errors"
	"fmt"
	"io/fs"
	"os"
	"path/filepath"
	"slices"
	"strings"

	"github.com/spf13/cobra"

	"shadeledger/scenarios/plan"
)

type startOptions struct {
	io      streams
	dir     string
	example string
	list    bool
	quiet   bool
}

func newStart(io streams) *cobra.Command {
	o := startOptions{io: io}
	cmd := &cobra.Command{
		Use:   "start DIR",
		Short: "Write a plan and its files, ready to edit",
		Long: `Writes an example plan and the files it names into DIR, ready to edit. The examples are invented data, but for
the measured weather of one. A file that is there is never overwritten.`,
		Example: "  shadeledger start my-stand\n  shadeledger start --list\n  shadeledger start conversion --example hinterlohe",
		Args:    atMost(1),
		RunE: func(cmd *cobra.Command, args []string) error {
			s, err := readSettings(cmd)
			if err != nil {
				return err
			}
			o.dir, o.quiet = first(args), s.quiet
			return runStart(o)
		},
	}
	f := cmd.Flags()
	f.StringVar(&o.example, "example", plan.BuiltIn, "which example to write")
	f.BoolVar(&o.list, "list", false, "list the examples")
	f.Bool("quiet", false, "do not name the files written")
	complete(cmd, "example", plan.Examples()...)
	return cmd
}

func runStart(o startOptions) error {
	if o.list {
		for _, name := range plan.Examples() {
			p, faults := plan.ReadExample(name, plan.Options{})
			if len(faults) > 0 {
				return faultsError{faults: faults}
			}
			if _, err := fmt.Fprintf(o.io.out, "%-22s %s\n", name, p.Title); err != nil {
				return err
			}
		}
		return nil
	}
	if o.dir == "" {
		return usagef("name the folder to write to, for instance: shadeledger start my-stand")
	}
	if !slices.Contains(plan.Examples(), o.example) {
		return usagef("%q is not an example; there are %s", o.example, strings.Join(plan.Examples(), ", "))
	}
	files, err := plan.ExampleFiles(o.example)
	if err != nil {
		return err
	}
	names, err := fs.Glob(files, "*")
	if err != nil {
		return err
	}
	for _, name := range names { // all or nothing: look before the first file is written
		path := filepath.Join(o.dir, name)
		if _, err := os.Lstat(path); err == nil {
			return usagef("%s exists and is not overwritten; name another folder", path)
		} else if !errors.Is(err, fs.ErrNotExist) {
			return usagef("%s: %w", path, err)
		}
	}
	if err := os.MkdirAll(o.dir, 0o755); err != nil {
		return err
	}
	for _, name := range names {
		body, err := fs.ReadFile(files, name)
		if err != nil {
			return err
		}
		path := filepath.Join(o.dir, name)
		if err := writeWhole(path, body, keep); err != nil {
			return err
		}
		if !o.quiet {
			fmt.Fprintln(o.io.err, "wrote "+path)
		}
	}
	return nil
}
