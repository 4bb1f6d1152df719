package harmonize_test

import (
	"context"
	"fmt"

	"platemeld/harmonize"
	"platemeld/harmonize/plan"
)

// The demo, from its plan to the merged series.
func ExampleMerge() {
	p, err := plan.Load("../testdata/demo/plan.toml")
	if err != nil {
		fmt.Println(err)
		return
	}
	series, err := harmonize.Merge(context.Background(), p, nil)
	if err != nil {
		fmt.Println(err)
		return
	}
	first := series.Rows[0]
	fmt.Printf("%d rows in, %d merged; the first comes from %s\n", len(series.Measurements), len(series.Rows),
		series.Measurements[first.Measurement].Place)
	// Output: 615 rows in, 554 merged; the first comes from hohenrauth_plates.txt, row 5
}
