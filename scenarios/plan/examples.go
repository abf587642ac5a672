package plan

import (
	"embed"
	"io/fs"
)

// examples are the plans that ship in the program. Their stands are invented; measured weather says so itself.
//
//go:embed examples
var examples embed.FS

// BuiltIn is the example that runs where no plan is named.
const BuiltIn = "kettle-bench"

// Examples lists the built-in plans, the first the one that runs by default.
func Examples() []string {
	return []string{BuiltIn, "hinterlohe", "kestrel-fork", "moosewillow", "macleish"}
}

// ExampleFiles gives the files of an example.
func ExampleFiles(name string) (fs.FS, error) { return fs.Sub(examples, "examples/"+name) }
