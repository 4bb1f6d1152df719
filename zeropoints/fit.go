package zeropoints

import (
	"context"
	"fmt"
	"math"
	"slices"
	"sort"

	"gonum.org/v1/gonum/mat"
)

// Solution is the outcome of a fit.
type Solution struct {
	ZeroPoints      []ZeroPoint   // in the order of the instruments
	Covariance      *mat.SymDense // of the zero points, km²/s²
	RobustWeights   []float64     // of the observations, 1 = counts in full
	PredictedKms    []float64     // signal and zero point at the observations
	ResidualKms     []float64     // velocity - predicted
	Terms           []Term        // the signal
	PeriodDays      float64       // 0 = no periodic term
	PeriodSigmaDays float64
	Findings        []Finding
	Iterations      int
}

// ZeroPoint is what is known of one instrument.
type ZeroPoint struct {
	Kms, SigmaKms float64 // zero point and its standard error
	Rows          int
	Anchored      bool    // the data tie it to the common level
	Group         int     // unanchored instruments that move together share one; 0 = anchored
	JitterKms     float64 // 0 is an answer
	JitterLowKms  float64 // 68 per cent interval, or up to the 95 per cent limit
	JitterHighKms float64 // infinite when the rows set no limit
	JitterIsLimit bool    // the jitter is zero and JitterHighKms its upper limit
	Inflation     float64 // variance of the zero point over that with the signal known
}

// state is a fit in progress.
type state struct {
	problem  *Problem
	normal   normalMoments
	basis    *basis
	loss     Loss // of the current stage
	rows     rows // columns at the current period; weights of the current step
	velocity []float64
	jitter   []float64 // variance by instrument, km²/s²
	known    []float64 // variance without jitter by row, km²/s²
	residual []float64
	level    []float64
	c        []float64 // coefficients of the signal, without that of the period
	members  [][]int   // rows by instrument
	bare     []bool    // a row of the instrument has no published error: only the jitter gives it one
	pooled   []bool    // the jitter is the other instruments', for want of scatter of its own
}

// Fit solves the problem. Errors wrap ErrProblem, or are the context's.
func Fit(ctx context.Context, p Problem) (*Solution, error) {
	if err := p.validate(); err != nil {
		return nil, err
	}
	if p.Signal.ScanMaxDays > 0 {
		return fitScanned(ctx, p)
	}
	s := newState(&p)
	iterations, err := s.run(ctx)
	if err != nil {
		return nil, err
	}
	return s.solution(iterations), nil
}

// newState starts from each instrument's median and scatter.
func newState(p *Problem) *state {
	n := len(p.Observations)
	s := &state{problem: p, normal: p.Loss.atNormal(), basis: newBasis(p), loss: LossHuber,
		rows:     rows{instrument: make([]int, n), weight: make([]float64, n)},
		velocity: make([]float64, n), known: make([]float64, n), residual: make([]float64, n),
		jitter: make([]float64, len(p.Instruments)), level: make([]float64, len(p.Instruments)),
		members: make([][]int, len(p.Instruments)), bare: make([]bool, len(p.Instruments)), pooled: make([]bool, len(p.Instruments))}
	if p.Loss == LossGaussian {
		s.loss = LossGaussian
	}
	for i, o := range p.Observations {
		s.rows.instrument[i], s.velocity[i] = o.Instrument, o.VelocityKms
		s.members[o.Instrument] = append(s.members[o.Instrument], i)
		s.bare[o.Instrument] = s.bare[o.Instrument] || o.SigmaKms == 0
	}
	for k, list := range s.members {
		s.level[k], s.jitter[k] = medianAndVariance(s.velocity, list)
	}
	for i, k := range s.rows.instrument {
		s.residual[i] = s.velocity[i] - s.level[k]
	}
	s.c = make([]float64, s.basis.width())
	s.refill()
	for k, list := range s.members {
		if s.bare[k] && s.jitter[k] == 0 { // more than half of its rows agree, as rounded ones may
			s.jitter[k] = s.plainJitter(list, make([]float64, n))
		}
	}
	s.poolJitters()
	return s
}

// medianAndVariance returns the median of the values at a list of places, and
// the variance by their median absolute deviation.
func medianAndVariance(values []float64, list []int) (median, variance float64) {
	sorted := make([]float64, len(list))
	for i, at := range list {
		sorted[i] = values[at]
	}
	median = medianOf(sorted)
	for i, at := range list {
		sorted[i] = math.Abs(values[at] - median)
	}
	const madToSigma = 1.482602218505602 // R: 1/qnorm(0.75)
	sigma := madToSigma * medianOf(sorted)
	return median, sigma * sigma
}

// medianOf sorts the values and returns their median.
func medianOf(values []float64) float64 {
	sort.Float64s(values)
	n := len(values)
	return (values[(n-1)/2] + values[n/2]) / 2
}

// refill computes the columns at the current period, the last of them the
// derivative in the logarithm of the period, and the variances without jitter.
func (s *state) refill() {
	linear := s.basis.width()
	width := linear
	if s.basis.periodDays > 0 {
		width++
	}
	s.rows.columns = resized(s.rows.columns, len(s.velocity)*width)
	for i, o := range s.problem.Observations {
		row := s.rows.columns[i*width : (i+1)*width]
		s.basis.fill(row[:linear], o.TimeDays)
		perDay, perLogPeriod := s.basis.slopes(s.c, o.TimeDays)
		if width > linear {
			row[linear] = perLogPeriod
		}
		moved := perDay * o.TimeSigmaDays
		s.known[i] = o.SigmaKms*o.SigmaKms + moved*moved
	}
}

func resized(values []float64, n int) []float64 {
	if cap(values) < n {
		return make([]float64, n)
	}
	return values[:n]
}

// width is the number of columns, that of the period among them.
func (s *state) width() int { return len(s.rows.columns) / len(s.velocity) }

// The limits of the iteration: settled when no level moves by more than this
// share of its standard error, and no variance by more than this share.
const (
	maxIterations = 500
	settledAt     = 1e-8
)

// run repeats weighted least squares and jitter steps until they agree, first
// with Huber's loss from the medians, then with the loss of the problem.
func (s *state) run(ctx context.Context) (int, error) {
	for iteration := 1; iteration <= maxIterations; iteration++ {
		if err := ctx.Err(); err != nil {
			return iteration, err
		}
		moved := s.step(iteration)
		if moved > settledAt && !(s.loss != s.problem.Loss && iteration >= 15) {
			continue
		}
		if s.loss == s.problem.Loss {
			return iteration, nil
		}
		s.loss, s.normal = s.problem.Loss, s.problem.Loss.atNormal()
	}
	return maxIterations, nil
}

// step does one round and returns the largest move of a level, in its
// standard errors.
func (s *state) step(iteration int) float64 {
	for i, k := range s.rows.instrument {
		v := math.Max(s.known[i]+s.jitter[k], smallestVariance)
		s.rows.weight[i] = s.loss.weight(s.residual[i]/math.Sqrt(v)) / v
	}
	width := s.width()
	l := newLevels(s.rows, len(s.level), width)
	level, c := l.solve(s.rows, s.target())
	moved := 0.0
	for k := range level {
		moved = math.Max(moved, math.Abs(level[k]-s.level[k])*math.Sqrt(l.sum[k]))
	}
	s.level = level
	linear := s.basis.width()
	copy(s.c, c[:linear])
	if width > linear && iteration > 3 {
		s.movePeriod(c[linear])
	}
	s.refill()
	s.updateResiduals()
	moved = math.Max(moved, s.updateJitters())
	return moved
}

// target is what the columns are fitted to: the velocities, since the
// coefficients are fitted anew each time and the period's column is a change.
func (s *state) target() []float64 { return s.velocity }

// movePeriod changes the period by a step in its logarithm, at most a quarter
// of what would lose a cycle over the observations.
func (s *state) movePeriod(step float64) {
	limit := s.basis.periodDays / s.basis.spanDays / 16
	step = math.Max(-limit, math.Min(limit, step))
	s.basis.periodDays *= math.Exp(step)
}

func (s *state) updateResiduals() {
	width, linear := s.width(), s.basis.width()
	for i, k := range s.rows.instrument {
		predicted := s.level[k]
		for j := range linear {
			predicted += s.c[j] * s.rows.columns[i*width+j]
		}
		s.residual[i] = s.velocity[i] - predicted
	}
}

// modelLevels is the least-squares problem with the model's weights, without
// the robust ones: what leverages and variances refer to.
func (s *state) modelLevels() (*levels, rows) {
	r := s.rows
	r.weight = make([]float64, len(s.velocity))
	for i, k := range r.instrument {
		r.weight[i] = 1 / math.Max(s.known[i]+s.jitter[k], smallestVariance)
	}
	return newLevels(r, len(s.level), s.width()), r
}

// fewestForJitter is how many rows an instrument needs for a jitter of its
// own when it publishes no errors: two rows and a zero point leave one degree
// of freedom.
const fewestForJitter = 3

// updateJitters solves each jitter's equation and returns the largest
// relative change of a mean variance.
func (s *state) updateJitters() float64 {
	l, r := s.modelLevels()
	fitted := l.leverage(r)
	before := slices.Clone(s.jitter)
	for k, list := range s.members {
		j := s.jitterRows(list, fitted)
		s.jitter[k] = j.solve(0, s.loss, s.normal)
		if s.bare[k] && s.jitter[k] == 0 {
			s.jitter[k] = s.plainJitter(list, fitted)
		}
	}
	s.poolJitters()
	changed := 0.0
	for k, list := range s.members {
		change := math.Abs(s.jitter[k] - before[k])
		changed = math.Max(changed, change/(smallestVariance+s.meanKnown(list)+s.jitter[k]))
	}
	return changed
}

func (s *state) jitterRows(list []int, fitted []float64) jitterRows {
	j := jitterRows{}
	for _, i := range list {
		j.residual = append(j.residual, s.residual[i])
		j.known = append(j.known, s.known[i])
		j.fitted = append(j.fitted, fitted[i])
	}
	return j
}

// plainJitter is the jitter by the restricted likelihood of the normal
// distribution. It stands in where the robust one is zero and rows without a
// published error would weigh without limit: when most velocities of an
// instrument were rounded to the same number, the others look like outliers.
func (s *state) plainJitter(list []int, fitted []float64) float64 {
	j := s.jitterRows(list, fitted)
	variance := j.solve(0, LossGaussian, LossGaussian.atNormal())
	if variance <= 10*smallestVariance { // equal velocities show no scatter
		return 0
	}
	return variance
}

// poolJitters gives an instrument without published errors whose rows are too
// few, or too equal, to show a scatter the median variance of the others.
func (s *state) poolJitters() {
	var others []float64
	for k, list := range s.members {
		s.pooled[k] = s.bare[k] && (len(list) < fewestForJitter || s.jitter[k] == 0)
		if !s.pooled[k] {
			others = append(others, s.jitter[k]+s.meanKnown(list))
		}
	}
	if len(others) == 0 {
		return
	}
	median := medianOf(others)
	for k := range s.jitter {
		if s.pooled[k] {
			s.jitter[k] = median
		}
	}
}

// meanKnown is the mean variance without jitter of a list of rows.
func (s *state) meanKnown(list []int) float64 {
	sum := 0.0
	for _, i := range list {
		sum += s.known[i]
	}
	return sum / float64(len(list))
}

// scaleless reports whether nothing says how large any error is: no
// instrument has published errors, or rows that show a scatter.
func (s *state) scaleless() bool { return !slices.Contains(s.pooled, false) }

// solution puts the converged state in order.
func (s *state) solution(iterations int) *Solution {
	n := len(s.velocity)
	out := &Solution{Iterations: iterations, RobustWeights: make([]float64, n), PredictedKms: make([]float64, n), ResidualKms: make([]float64, n), PeriodDays: s.basis.periodDays}
	for i, k := range s.rows.instrument {
		u := s.residual[i] / math.Sqrt(math.Max(s.known[i]+s.jitter[k], smallestVariance))
		out.RobustWeights[i] = math.Min(1, s.problem.Loss.weight(u))
		out.ResidualKms[i] = s.residual[i]
		out.PredictedKms[i] = s.velocity[i] - s.residual[i]
	}
	if iterations >= maxIterations {
		out.Findings = append(out.Findings, Finding{Kind: FindingUnsettled, Text: fmt.Sprintf("the fit had not settled after %d rounds; its numbers are not final", maxIterations)})
	}
	if s.scaleless() {
		out.Findings = append(out.Findings, Finding{Kind: FindingNoScale, Text: fmt.Sprintf("nothing says how large the errors are: no instrument has a published error on every row, or %d rows without one that differ; the errors given for the zero points mean nothing until one instrument has a default error", fewestForJitter)})
	}
	s.report(out)
	return out
}
