package zeropoints

import "math"

// jitterRows is one instrument's share of the data for its jitter.
type jitterRows struct {
	residual []float64 // km/s
	known    []float64 // variance without jitter, km²/s²
	fitted   []float64 // variance of the fitted value, km²/s²
}

// score is the bounded REML score of a jitter variance, in units of its own
// standard deviation at the model: decreasing, zero at the estimate. For the
// Gaussian loss its sum is the derivative of the restricted likelihood,
//
//	sum of (r²/V - 1 + h)/V, h = leverage.
func (j *jitterRows) score(variance float64, loss Loss, normal normalMoments) (sum, deviation float64) {
	for i, r := range j.residual {
		v := math.Max(j.known[i]+variance, smallestVariance)
		free := math.Max(1-j.fitted[i]/v, 1e-3)
		psi := loss.psi(r / math.Sqrt(v*free))
		sum += free / v * (psi*psi/normal.psiSquare - 1)
		deviation += free * free / (v * v) * normal.spread / (normal.psiSquare * normal.psiSquare)
	}
	return sum, math.Sqrt(deviation)
}

// smallestVariance stands for zero where a variance divides: (1 mm/s)².
const smallestVariance = 1e-12

// solve returns the largest variance at which the score is z standard
// deviations above zero: 0 when it is below that everywhere, infinite when it
// is above, as for an upper end with one or two rows. The largest, since the
// score of a loss that gives far rows up has a second root where all rows are
// given up.
func (j *jitterRows) solve(z float64, loss Loss, normal normalMoments) float64 {
	excess := func(variance float64) float64 {
		sum, deviation := j.score(variance, loss, normal)
		return sum - z*deviation
	}
	high := smallestVariance
	for _, r := range j.residual {
		high = math.Max(high, r*r)
	}
	const widest = 1e4 // jitters beyond 100 times the largest residual are no limit
	if high *= widest; excess(high) > 0 {
		return math.Inf(1)
	}
	low := high
	for excess(low) <= 0 {
		if high = low; low < smallestVariance {
			if excess(0) > 0 {
				low = 0
				break
			}
			return 0
		}
		low /= 1.5
	}
	for range 100 {
		middle := (low + high) / 2
		if excess(middle) > 0 {
			low = middle
		} else {
			high = middle
		}
		if high-low <= 1e-12*high {
			break
		}
	}
	return (low + high) / 2
}
