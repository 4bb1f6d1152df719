package bundle_test

import (
	"encoding/json"
	"math"
	"strings"
	"testing"

	"gonum.org/v1/gonum/mat"

	"platemeld/harmonize"
	"platemeld/harmonize/bundle"
	"platemeld/zeropoints"
)

// TestReportWithoutJitterLimit: one row sets no upper limit to a jitter. JSON
// has no word for infinity (RFC 8259, section 6); the report says null.
func TestReportWithoutJitterLimit(t *testing.T) {
	s := smallSeries(t)
	solution := zeropoints.Solution{Covariance: mat.NewSymDense(len(s.ZeroPoints), nil)}
	solution.ZeroPoints = append(solution.ZeroPoints, s.Solution.ZeroPoints...)
	solution.ZeroPoints[0].JitterHighKms = math.Inf(1)
	text, err := json.Marshal(bundle.NewZeroPointReport(&harmonize.Series{ZeroPoints: s.ZeroPoints, Solution: &solution}))
	if err != nil {
		t.Fatal(err)
	}
	if got := strings.Count(string(text), `"jitter_high_kms":null`); got != 1 {
		t.Errorf("%d jitters without limit in %s, want 1", got, text)
	}
}
