package zeropoints

import (
	"context"
	"math"
	"runtime"
	"sort"
	"sync"

	"gonum.org/v1/gonum/mat"
)

// Peak is a period at which the scan leaves little scatter.
type Peak struct {
	PeriodDays float64
	Reduction  float64 // of the weighted sum of squares, 0 to 1
}

// The scan's grid: ten frequencies in each resolution element, the inverse of
// the time spanned; and how many peaks are fitted in full.
const (
	perElement  = 10
	peaksFitted = 5
)

// fitScanned finds the period by a scan with floating zero points, fits the
// best peaks in full and returns the fit that leaves the least robust scatter.
// The scan is done twice: first with the weights of a fit without the periodic
// term, whose jitters contain it, then with those of the best fit.
func fitScanned(ctx context.Context, p Problem) (*Solution, error) {
	flat := p
	flat.Signal.ScanMinDays, flat.Signal.ScanMaxDays, flat.Signal.PeriodDays = 0, 0, 0
	weights := newState(&flat)
	if _, err := weights.run(ctx); err != nil {
		return nil, err
	}
	var best *state
	bestIterations := 0
	for range 2 {
		peaks, err := weights.scan(ctx, p.Signal)
		if err != nil {
			return nil, err
		}
		for _, peak := range peaks {
			fitted := flat
			fitted.Signal.PeriodDays = peak.PeriodDays
			candidate := newState(&fitted)
			iterations, err := candidate.run(ctx)
			if err != nil {
				return nil, err
			}
			inside := candidate.basis.periodDays >= p.Signal.ScanMinDays*0.9 && candidate.basis.periodDays <= p.Signal.ScanMaxDays*1.1
			if inside && (best == nil || candidate.objective() < best.objective()) {
				best, bestIterations = candidate, iterations
			}
		}
		if best == nil {
			break
		}
		weights = best
	}
	if best == nil {
		out := weights.solution(1)
		out.Findings = append(out.Findings, Finding{Kind: FindingPeriod, Text: "no period between the limits of the scan could be fitted; the signal has no periodic term"})
		return out, nil
	}
	return best.solution(bestIterations), nil
}

// objective is the robust deviance: twice the negative log-likelihood that the
// loss belongs to, with the jitters as scales.
func (s *state) objective() float64 {
	sum := 0.0
	for i, k := range s.rows.instrument {
		v := math.Max(s.known[i]+s.jitter[k], smallestVariance)
		sum += math.Log(v) + 2*s.problem.Loss.rho(s.residual[i]/math.Sqrt(v))
	}
	return sum
}

// scan returns the highest peaks over the periods of a signal, with the robust
// weights of s.
func (s *state) scan(ctx context.Context, signal Signal) ([]Peak, error) {
	lowest, highest := 1/signal.ScanMaxDays, 1/signal.ScanMinDays
	step := 1 / (2 * s.basis.spanDays * perElement)
	count := int((highest-lowest)/step) + 2
	const largestGrid = 50_000_000
	if count > largestGrid {
		count, step = largestGrid, (highest-lowest)/largestGrid
	}
	f := s.newScanner(signal.Harmonics)
	reduction := make([]float64, count)
	const chunk = 2048
	var group sync.WaitGroup
	next := make(chan int)
	for range runtime.GOMAXPROCS(0) {
		group.Add(1)
		go func() {
			defer group.Done()
			for from := range next {
				f.sweep(reduction[from:min(from+chunk, count)], lowest+float64(from)*step, step)
			}
		}()
	}
	for from := 0; from < count && ctx.Err() == nil; from += chunk {
		next <- from
	}
	close(next)
	group.Wait()
	if err := ctx.Err(); err != nil {
		return nil, err
	}
	return highestPeaks(reduction, lowest, step), nil
}

// highestPeaks returns the highest local maxima, the highest first.
func highestPeaks(reduction []float64, lowest, step float64) []Peak {
	var peaks []Peak
	for i, r := range reduction {
		left := i == 0 || reduction[i-1] < r
		right := i == len(reduction)-1 || reduction[i+1] <= r
		if left && right {
			peaks = append(peaks, Peak{1 / (lowest + float64(i)*step), r})
		}
	}
	sort.SliceStable(peaks, func(a, b int) bool { return peaks[a].Reduction > peaks[b].Reduction })
	return peaks[:min(peaksFitted, len(peaks))]
}

// scanner holds the data of a scan, with what does not depend on the
// frequency taken out: levels and trend are eliminated from the velocities.
type scanner struct {
	harmonics, instruments, trend int
	instrument                    []int
	weight, velocity              []float64
	timeDays                      []float64 // from the origin
	columns                       []float64 // of the trend
	total                         float64   // weighted sum of squares without the periodic term
}

func (s *state) newScanner(harmonics int) *scanner {
	trend := s.problem.Signal.TrendDegree
	n := len(s.velocity)
	f := &scanner{harmonics: harmonics, instruments: len(s.level), trend: trend, instrument: s.rows.instrument,
		weight: make([]float64, n), velocity: make([]float64, n), timeDays: make([]float64, n), columns: make([]float64, n*trend)}
	width := s.width()
	for i, k := range s.rows.instrument {
		v := math.Max(s.known[i]+s.jitter[k], smallestVariance)
		f.weight[i] = s.problem.Loss.weight(s.residual[i]/math.Sqrt(v)) / v
		f.timeDays[i] = s.problem.Observations[i].TimeDays - s.basis.originDays
		copy(f.columns[i*trend:(i+1)*trend], s.rows.columns[i*width:i*width+trend])
	}
	r := rows{instrument: f.instrument, columns: f.columns, weight: f.weight}
	level, c := newLevels(r, f.instruments, trend).solve(r, s.velocity)
	for i, k := range f.instrument {
		f.velocity[i] = s.velocity[i] - level[k]
		for j := range trend {
			f.velocity[i] -= c[j] * f.columns[i*trend+j]
		}
		f.total += f.weight[i] * f.velocity[i] * f.velocity[i]
	}
	return f
}

// sweep fills dst with the reductions at frequencies from first on, a step
// apart. Each row's phase is turned from one frequency to the next instead of
// being computed anew; over a chunk of 2048 the rounding grows to 1e-12.
func (f *scanner) sweep(dst []float64, first, step float64) {
	n := len(f.weight)
	type phasor struct{ cos, sin, turnCos, turnSin float64 }
	phase := make([]phasor, n)
	for i, t := range f.timeDays {
		var p phasor
		p.sin, p.cos = math.Sincos(2 * math.Pi * math.Remainder(t*first, 1))
		p.turnSin, p.turnCos = math.Sincos(2 * math.Pi * math.Remainder(t*step, 1))
		phase[i] = p
	}
	width := f.trend + 2*f.harmonics
	sums := newSweepSums(f.instruments, width)
	column := make([]float64, width)
	for at := range dst {
		sums.clear()
		for i := range phase {
			p := &phase[i]
			copy(column, f.columns[i*f.trend:(i+1)*f.trend])
			c, s := p.cos, p.sin
			for h := range f.harmonics {
				column[f.trend+2*h], column[f.trend+2*h+1] = c, s
				c, s = c*p.cos-s*p.sin, s*p.cos+c*p.sin
			}
			sums.add(f.instrument[i], f.weight[i], f.velocity[i], column)
			p.cos, p.sin = p.cos*p.turnCos-p.sin*p.turnSin, p.sin*p.turnCos+p.cos*p.turnSin
		}
		dst[at] = sums.reduction() / f.total
	}
}

// sweepSums are the weighted sums over the rows at one frequency.
type sweepSums struct {
	width         int
	weight, y     []float64 // by instrument
	x             []float64 // by instrument and column
	xx, xy        []float64
	matrix        []float64
	right, result *mat.VecDense
}

func newSweepSums(instruments, width int) *sweepSums {
	return &sweepSums{width: width, weight: make([]float64, instruments), y: make([]float64, instruments), x: make([]float64, instruments*width),
		xx: make([]float64, width*width), xy: make([]float64, width), matrix: make([]float64, width*width),
		right: mat.NewVecDense(width, nil), result: mat.NewVecDense(width, nil)}
}

func (s *sweepSums) clear() {
	clear(s.weight)
	clear(s.y)
	clear(s.x)
	clear(s.xx)
	clear(s.xy)
}

func (s *sweepSums) add(k int, w, y float64, column []float64) {
	s.weight[k] += w
	s.y[k] += w * y
	mine := s.x[k*s.width : (k+1)*s.width]
	for j, x := range column {
		wx := w * x
		mine[j] += wx
		s.xy[j] += wx * y
		line := s.xx[j*s.width:]
		for m := j; m < len(column); m++ {
			line[m] += wx * column[m]
		}
	}
}

// reduction eliminates the levels and returns by how much the columns reduce
// the weighted sum of squares.
func (s *sweepSums) reduction() float64 {
	copy(s.matrix, s.xx)
	for j := range s.width {
		right := s.xy[j]
		for k, w := range s.weight {
			xj := s.x[k*s.width+j] / w
			right -= xj * s.y[k]
			for m := j; m < s.width; m++ {
				s.matrix[j*s.width+m] -= xj * s.x[k*s.width+m]
			}
		}
		s.right.SetVec(j, right)
	}
	var cholesky mat.Cholesky
	if !cholesky.Factorize(mat.NewSymDense(s.width, s.matrix)) {
		return 0
	}
	if err := cholesky.SolveVecTo(s.result, s.right); err != nil {
		return 0 // too near to singular to be a period that the data show
	}
	return mat.Dot(s.result, s.right)
}

// Scan returns the highest peaks of the periods of a problem's scan, with the
// zero points floating, the highest first.
func Scan(ctx context.Context, p Problem) ([]Peak, error) {
	if err := p.validate(); err != nil {
		return nil, err
	}
	flat := p
	flat.Signal.ScanMinDays, flat.Signal.ScanMaxDays, flat.Signal.PeriodDays = 0, 0, 0
	s := newState(&flat)
	if _, err := s.run(ctx); err != nil {
		return nil, err
	}
	return s.scan(ctx, p.Signal)
}
