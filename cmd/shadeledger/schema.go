package main

import (
	"errors"

	"shadeledger/scenarios/report"
)

// writeSchema writes the JSON Schema of a plan.
func writeSchema(report.Output) error { return errors.New("no JSON Schema yet") }
