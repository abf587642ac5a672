package main

import (
	"errors"
	"os"
	"strings"

	"shadeledger/scenarios"
	"shadeledger/scenarios/plan"
)

// planFile is what a folder's plan is called.
const planFile = "plan.yaml"

// faultsError is a plan, or another input, with faults: wrong usage, in the exit status.
type faultsError struct {
	faults []plan.Fault
	of     string // "" is the plan
}

// Error lists the faults, one a line, each with its place and what would be right.
func (e faultsError) Error() string {
	var b strings.Builder
	of, faults := e.of, "faults"
	if of == "" {
		of = "the plan"
	}
	if len(e.faults) == 1 {
		faults = "a fault"
	}
	b.WriteString(of + " has " + faults + "; nothing was run")
	for _, f := range e.faults {
		b.WriteString("\n" + f.Error())
	}
	return b.String()
}

// open reads the named plan, after a look at where output goes.
func (s *settings) open(name string) (*scenarios.Plan, error) {
	if err := s.checkOutput(); err != nil {
		return nil, err
	}
	return loadPlan(name, s.set)
}

// loadPlan reads the named plan; "" is plan.yaml in the current folder if there is one, else the built-in example.
func loadPlan(name string, set []string) (*scenarios.Plan, error) {
	var p *scenarios.Plan
	var faults []plan.Fault
	opts := plan.Options{Set: set}
	if name == "" {
		if _, err := os.Lstat(planFile); err == nil {
			name = planFile
		}
	}
	if name == "" {
		p, faults = plan.ReadExample(plan.BuiltIn, opts)
	} else {
		p, faults = plan.Read(name, opts)
	}
	if len(faults) > 0 {
		return nil, faultsError{faults: faults}
	}
	if p == nil {
		return nil, errors.New("the plan was not read")
	}
	return p, nil
}
