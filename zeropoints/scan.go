package zeropoints

import (
	"context"
	"math"
	"runtime"
	"sort"
	"sync"
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
//
// Products of two harmonics are harmonics themselves, cos a cos b = (cos(a-b)
// + cos(a+b))/2 and so on, so that sums of the harmonics up to twice the
// highest are all that a pass over the rows has to make.
func (f *scanner) sweep(dst []float64, first, step float64) {
	rows := f.newSweepRows(first, step)
	sums := newSweepSums(f)
	for at := range dst {
		sums.clear()
		for k, own := range rows.byInstrument {
			sums.addInstrument(k, own)
		}
		dst[at] = sums.reduction() / f.total
	}
}

// sweepRow is what a sweep needs of a row, its phase that of the current
// frequency.
type sweepRow struct {
	cos, sin, turnCos, turnSin float64
	weight, pull               float64   // pull = weight times velocity
	trend                      []float64 // weight times the columns of the trend
}

type sweepRows struct{ byInstrument [][]sweepRow }

func (f *scanner) newSweepRows(first, step float64) sweepRows {
	r := sweepRows{make([][]sweepRow, f.instruments)}
	weighted := make([]float64, len(f.columns))
	for i, k := range f.instrument {
		row := sweepRow{weight: f.weight[i], pull: f.weight[i] * f.velocity[i], trend: weighted[i*f.trend : (i+1)*f.trend]}
		row.sin, row.cos = math.Sincos(2 * math.Pi * math.Remainder(f.timeDays[i]*first, 1))
		row.turnSin, row.turnCos = math.Sincos(2 * math.Pi * math.Remainder(f.timeDays[i]*step, 1))
		for j := range row.trend {
			row.trend[j] = f.weight[i] * f.columns[i*f.trend+j]
		}
		r.byInstrument[k] = append(r.byInstrument[k], row)
	}
	return r
}

// sweepSums are the weighted sums over the rows. Columns are those of the
// trend, then cosine and sine of each harmonic.
type sweepSums struct {
	harmonics, trend, width int
	weight, y               []float64 // by instrument, the same at every frequency
	fixed                   []float64 // products of the trend's columns, likewise
	x                       []float64 // by instrument and column
	xy                      []float64 // of each column with the velocities
	cos, sin                []float64 // of harmonics 0 to twice the highest, over all rows
	cross                   []float64 // of the trend's columns with the harmonics
	matrix                  []float64
}

func newSweepSums(f *scanner) *sweepSums {
	width := f.trend + 2*f.harmonics
	s := &sweepSums{harmonics: f.harmonics, trend: f.trend, width: width,
		weight: make([]float64, f.instruments), y: make([]float64, f.instruments), fixed: make([]float64, f.trend*f.trend),
		x: make([]float64, f.instruments*width), xy: make([]float64, width),
		cos: make([]float64, 2*f.harmonics+1), sin: make([]float64, 2*f.harmonics+1),
		cross: make([]float64, f.trend*2*f.harmonics), matrix: make([]float64, width*width)}
	for i, k := range f.instrument {
		w := f.weight[i]
		s.weight[k] += w
		s.y[k] += w * f.velocity[i]
		column := f.columns[i*f.trend : (i+1)*f.trend]
		for j, x := range column {
			s.x[k*width+j] += w * x
			s.xy[j] += w * x * f.velocity[i]
			for m, z := range column {
				s.fixed[j*f.trend+m] += w * x * z
			}
		}
	}
	for _, w := range s.weight {
		s.cos[0] += w
	}
	return s
}

// clear forgets what belongs to one frequency.
func (s *sweepSums) clear() {
	for k := range s.weight {
		clear(s.x[k*s.width+s.trend : (k+1)*s.width])
	}
	clear(s.xy[s.trend:])
	clear(s.cos[1:])
	clear(s.sin)
	clear(s.cross)
}

// addInstrument adds the rows of an instrument and turns their phases on.
func (s *sweepSums) addInstrument(k int, rows []sweepRow) {
	if s.harmonics == 1 && s.trend == 0 {
		s.addSine(k, rows)
		return
	}
	x, xy := s.x[k*s.width+s.trend:(k+1)*s.width], s.xy[s.trend:]
	for i := range rows {
		row := &rows[i]
		cos, sin := row.cos, row.sin
		for h := range 2 * s.harmonics {
			s.cos[h+1] += row.weight * cos
			s.sin[h+1] += row.weight * sin
			if h < s.harmonics {
				x[2*h] += row.weight * cos
				x[2*h+1] += row.weight * sin
				xy[2*h] += row.pull * cos
				xy[2*h+1] += row.pull * sin
				for j, t := range row.trend {
					s.cross[(j*s.harmonics+h)*2] += t * cos
					s.cross[(j*s.harmonics+h)*2+1] += t * sin
				}
			}
			cos, sin = cos*row.cos-sin*row.sin, sin*row.cos+cos*row.sin
		}
		row.turn()
	}
}

func (r *sweepRow) turn() {
	r.cos, r.sin = r.cos*r.turnCos-r.sin*r.turnSin, r.sin*r.turnCos+r.cos*r.turnSin
}

// addSine is addInstrument for the most common signal, one sine, with its sums
// kept out of memory.
func (s *sweepSums) addSine(k int, rows []sweepRow) {
	var c, d, cy, dy, c2, d2 float64
	for i := range rows {
		row := &rows[i]
		cos, sin := row.cos, row.sin
		wc, wd := row.weight*cos, row.weight*sin
		c += wc
		d += wd
		cy += row.pull * cos
		dy += row.pull * sin
		c2 += wc*cos - wd*sin
		d2 += 2 * wc * sin
		row.cos, row.sin = cos*row.turnCos-sin*row.turnSin, sin*row.turnCos+cos*row.turnSin
	}
	s.x[k*2], s.x[k*2+1] = c, d
	s.xy[0] += cy
	s.xy[1] += dy
	s.cos[2] += c2
	s.sin[2] += d2
}

// fill sets the upper triangle of the matrix of the columns' products.
func (s *sweepSums) fill() {
	for j := range s.trend {
		copy(s.matrix[j*s.width:j*s.width+s.trend], s.fixed[j*s.trend:(j+1)*s.trend])
		copy(s.matrix[j*s.width+s.trend:(j+1)*s.width], s.cross[j*2*s.harmonics:(j+1)*2*s.harmonics])
	}
	for g := range s.harmonics {
		for h := g; h < s.harmonics; h++ {
			apart, together := h-g, h+g+2
			line := s.matrix[(s.trend+2*g)*s.width+s.trend+2*h:]
			line[0] = (s.cos[apart] + s.cos[together]) / 2 // cos g cos h
			line[1] = (s.sin[together] + s.sin[apart]) / 2 // cos g sin h
			line = s.matrix[(s.trend+2*g+1)*s.width+s.trend+2*h:]
			line[0] = (s.sin[together] - s.sin[apart]) / 2 // sin g cos h
			line[1] = (s.cos[apart] - s.cos[together]) / 2 // sin g sin h
		}
	}
}

// reduction eliminates the levels and returns by how much the columns reduce
// the weighted sum of squares: b' A^-1 b, by the Cholesky factor of A.
func (s *sweepSums) reduction() float64 {
	s.fill()
	n := s.width
	sum := 0.0
	right := make([]float64, 0, 8)
	right = append(right, s.xy...)
	for k, w := range s.weight {
		x := s.x[k*n : (k+1)*n]
		for j := range n {
			share := x[j] / w
			right[j] -= share * s.y[k]
			for m := j; m < n; m++ {
				s.matrix[j*n+m] -= share * x[m]
			}
		}
	}
	for j := range n {
		pivot := s.matrix[j*n+j]
		if !(pivot > degenerateBelow*s.cos[0]) {
			return 0 // too near to singular to be a period that the data show
		}
		sum += right[j] * right[j] / pivot
		for m := j + 1; m < n; m++ {
			share := s.matrix[j*n+m] / pivot
			right[m] -= share * right[j]
			for l := m; l < n; l++ {
				s.matrix[m*n+l] -= share * s.matrix[j*n+l]
			}
		}
	}
	return sum
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
