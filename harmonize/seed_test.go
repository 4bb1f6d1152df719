package harmonize_test

import (
	"flag"

	_ "pgregory.net/rapid" // defines the flag
)

// The property tests draw the same cases in every run, so that a failure can
// be seen again; go test -rapid.seed=0 draws new ones.
func init() {
	if err := flag.Set("rapid.seed", "1908"); err != nil {
		panic(err)
	}
}
