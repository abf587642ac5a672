package main

import (
	"shadeledger/scenarios/plan"
	"shadeledger/scenarios/report"
)

// writeSchema writes the JSON Schema of a plan.
func writeSchema(o report.Output) error {
	_, err := o.Out.Write(append(plan.Schema(), '\n'))
	return err
}
