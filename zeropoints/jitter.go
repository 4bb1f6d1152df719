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
		v := j.known[i] + variance
		if v < smallestVariance {
			v = smallestVariance
		}
		free := 1 - j.fitted[i]/v
		if free < 1e-3 {
			free = 1e-3
		}
		psi := loss.psi(r / math.Sqrt(v*free))
		part := free / v
		sum += part * (psi*psi/normal.psiSquare - 1)
		deviation += part * part
	}
	return sum, math.Sqrt(deviation*normal.spread) / normal.psiSquare
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
	high := j.beyond(loss, normal)
	if math.IsInf(high, 0) || math.IsNaN(high) {
		return math.Inf(1) // numbers overflowed: nothing limits the jitter
	}
	if z < 0 { // the upper end of an interval lies beyond the estimate
		const widest = 1e4 // jitters beyond 100 times the largest residual are no limit
		if high *= widest; excess(high) > 0 {
			return math.Inf(1)
		}
	}
	const stride = 2.0
	low, atHigh := high, excess(high)
	for {
		if high = low; low < smallestVariance {
			if atLow := excess(0); atLow > 0 {
				return root(excess, 0, high, atLow, atHigh)
			}
			return 0
		}
		low /= stride
		atLow := excess(low)
		if atLow > 0 {
			return root(excess, low, high, atLow, atHigh)
		}
		atHigh = atLow
	}
}

// beyond is a variance from which on every row's part of the score is
// negative, so that no estimate lies above it: |psi(u)| is at most steepest
// times |u|.
func (j *jitterRows) beyond(loss Loss, normal normalMoments) float64 {
	steepest := loss.psiSlope(0)
	high := smallestVariance
	for i, r := range j.residual {
		// With v = variance + known >= r² steepest² / E[psi²] + fitted the row's
		// (r/sigma)² is no more than what the normal distribution expects.
		high = math.Max(high, r*r*steepest*steepest/normal.psiSquare+j.fitted[i])
	}
	return high
}

// root returns the zero of a continuous function between two places where its
// signs differ, by false position with the standing end halved (Dowell and
// Jarratt 1971, BIT 11, 168, who call it the Illinois method).
func root(f func(float64) float64, low, high, atLow, atHigh float64) float64 {
	side := 0
	for range 200 {
		if high-low <= 1e-13*high {
			break
		}
		at := low + (high-low)*atLow/(atLow-atHigh)
		if !(at > low && at < high) {
			at = (low + high) / 2
		}
		value := f(at)
		switch {
		case value == 0:
			return at
		case value > 0:
			if low, atLow = at, value; side == 1 {
				atHigh /= 2
			}
			side = 1
		default:
			if high, atHigh = at, value; side == -1 {
				atLow /= 2
			}
			side = -1
		}
		if math.Abs(value) <= 1e-15*(math.Abs(atLow)+math.Abs(atHigh)) {
			return at
		}
	}
	return (low + high) / 2
}
