package zeropoints

import (
	"math"

	"gonum.org/v1/gonum/mat"
)

// levels is the weighted least-squares problem of one step: a level for each
// instrument and the coefficients of the signal. Only the small dense part is
// ever a matrix; the levels are eliminated by sums over each instrument, so
// that the cost is linear in the rows.
type levels struct {
	instruments, width int
	sum                []float64   // of weights, by instrument
	mean               [][]float64 // weighted mean of each column, by instrument
	reduced            *mat.SymDense
	cholesky           mat.Cholesky
	singular           bool // the signal's columns and the levels are degenerate
}

// rows is the data of a step, flattened.
type rows struct {
	instrument []int
	columns    []float64 // row by row, width wide
	weight     []float64
}

// degenerateBelow is the relative size of a pivot below which a column of the
// signal is a combination of the others and the levels: rounding of sums over
// many rows reaches 1e-12.
const degenerateBelow = 1e-10

// newLevels forms and factors the reduced normal equations.
func newLevels(r rows, instruments, width int) *levels {
	l := &levels{instruments: instruments, width: width, sum: make([]float64, instruments), mean: make([][]float64, instruments)}
	for k := range l.mean {
		l.mean[k] = make([]float64, width)
	}
	for i, k := range r.instrument {
		w := r.weight[i]
		l.sum[k] += w
		for j := range width {
			l.mean[k][j] += w * r.columns[i*width+j]
		}
	}
	for k := range l.mean {
		for j := range l.mean[k] {
			l.mean[k][j] /= l.sum[k]
		}
	}
	if width == 0 {
		return l
	}
	product := make([]float64, width*width)
	total := make([]float64, width)
	centred := make([]float64, width)
	for i, k := range r.instrument {
		w := r.weight[i]
		for j := range centred {
			x := r.columns[i*width+j]
			total[j] += w * x * x
			centred[j] = x - l.mean[k][j]
		}
		for j := range centred {
			for m := j; m < width; m++ {
				product[j*width+m] += w * centred[j] * centred[m]
			}
		}
	}
	l.reduced = mat.NewSymDense(width, product)
	scaled := mat.NewSymDense(width, nil)
	for j := range width {
		for m := j; m < width; m++ {
			scaled.SetSym(j, m, product[j*width+m]/math.Sqrt(math.Max(total[j]*total[m], math.SmallestNonzeroFloat64)))
		}
	}
	var eigen mat.EigenSym
	if !eigen.Factorize(scaled, false) || !(eigen.Values(nil)[0] > degenerateBelow) {
		l.singular = true
		ridge := mat.NewSymDense(width, nil)
		ridge.CopySym(l.reduced)
		for j := range width { // the shortest solution, up to the ridge
			more := 1e-8 * total[j]
			if total[j] == 0 { // an empty column, such as a trend at one instant
				more = 1
			}
			ridge.SetSym(j, j, ridge.At(j, j)+more)
		}
		l.reduced = ridge
	}
	if !l.cholesky.Factorize(l.reduced) {
		l.singular = true
	}
	return l
}

// solve returns the levels and coefficients for the data y.
func (l *levels) solve(r rows, y []float64) (level, coefficients []float64) {
	level = make([]float64, l.instruments)
	for i, k := range r.instrument {
		level[k] += r.weight[i] * y[i]
	}
	for k := range level {
		level[k] /= l.sum[k]
	}
	coefficients = make([]float64, l.width)
	if l.width == 0 {
		return level, coefficients
	}
	right := mat.NewVecDense(l.width, nil)
	for i, k := range r.instrument {
		for j := range l.width {
			right.SetVec(j, right.AtVec(j)+r.weight[i]*(r.columns[i*l.width+j]-l.mean[k][j])*(y[i]-level[k]))
		}
	}
	solution := mat.NewVecDense(l.width, coefficients)
	if err := l.cholesky.SolveVecTo(solution, right); err != nil {
		if _, conditioned := err.(mat.Condition); !conditioned {
			return level, coefficients
		}
	}
	for k := range level {
		for j, c := range coefficients {
			level[k] -= l.mean[k][j] * c
		}
	}
	return level, coefficients
}

// leverage returns, for each row, the variance of its fitted value in units
// of the inverse weights.
func (l *levels) leverage(r rows) []float64 {
	q := make([]float64, len(r.instrument))
	var inverse mat.SymDense
	if l.width > 0 {
		if err := l.cholesky.InverseTo(&inverse); err != nil {
			if _, conditioned := err.(mat.Condition); !conditioned {
				inverse = *mat.NewSymDense(l.width, nil)
			}
		}
	}
	centred := make([]float64, l.width)
	for i, k := range r.instrument {
		q[i] = 1 / l.sum[k]
		for j := range centred {
			centred[j] = r.columns[i*l.width+j] - l.mean[k][j]
		}
		for j := range centred {
			for m := range centred {
				q[i] += centred[j] * centred[m] * inverse.At(j, m)
			}
		}
	}
	return q
}
