package zeropoints

import (
	"fmt"
	"math"
)

// basis holds the columns of the signal's design, without the constant, which
// is the instruments' common level.
type basis struct {
	signal     Signal
	originDays float64 // middle of the observations
	spanDays   float64 // half of their length, at least a day
	periodDays float64 // current, 0 = no periodic term
}

func newBasis(p *Problem) *basis {
	first, last := math.Inf(1), math.Inf(-1)
	for _, o := range p.Observations {
		first, last = math.Min(first, o.TimeDays), math.Max(last, o.TimeDays)
	}
	return &basis{signal: p.Signal, originDays: (first + last) / 2, spanDays: math.Max((last-first)/2, 1), periodDays: p.Signal.PeriodDays}
}

// width is the number of linear columns.
func (b *basis) width() int {
	w := b.signal.TrendDegree
	if b.periodDays > 0 {
		w += 2 * b.signal.Harmonics
	}
	return w
}

// fill writes the columns at a time to dst, width() long.
func (b *basis) fill(dst []float64, timeDays float64) {
	x := (timeDays - b.originDays) / b.spanDays
	power := 1.0
	for j := range b.signal.TrendDegree {
		power *= x
		dst[j] = power
	}
	if b.periodDays <= 0 {
		return
	}
	phase := 2 * math.Pi * math.Remainder((timeDays-b.originDays)/b.periodDays, 1)
	for h := range b.signal.Harmonics {
		sin, cos := math.Sincos(float64(h+1) * phase)
		dst[b.signal.TrendDegree+2*h], dst[b.signal.TrendDegree+2*h+1] = cos, sin
	}
}

// slopes returns the derivatives of the signal with coefficients c at a time:
// in time, km/s per day, and in the logarithm of the period, km/s.
func (b *basis) slopes(c []float64, timeDays float64) (perDay, perLogPeriod float64) {
	x := (timeDays - b.originDays) / b.spanDays
	power := 1.0
	for j := range b.signal.TrendDegree {
		perDay += c[j] * float64(j+1) * power / b.spanDays
		power *= x
	}
	if b.periodDays <= 0 {
		return perDay, 0
	}
	rate := 2 * math.Pi / b.periodDays
	since := timeDays - b.originDays
	phase := 2 * math.Pi * math.Remainder(since/b.periodDays, 1)
	for h := range b.signal.Harmonics {
		n := float64(h + 1)
		sin, cos := math.Sincos(n * phase)
		a, s := c[b.signal.TrendDegree+2*h], c[b.signal.TrendDegree+2*h+1]
		perPhase := n * (s*cos - a*sin)
		perDay += perPhase * rate
		perLogPeriod -= perPhase * rate * since
	}
	return perDay, perLogPeriod
}

// Term is one parameter of the fitted signal.
type Term struct {
	Name, Unit   string
	Value, Sigma float64
}

const daysPerYear = 365.25

// names returns name, unit and factor to that unit of each linear column.
func (b *basis) names() []Term {
	var list []Term
	for j := range b.signal.TrendDegree {
		unit := "km/s/yr"
		if j > 0 {
			unit = fmt.Sprintf("km/s/yr^%d", j+1)
		}
		list = append(list, Term{Name: fmt.Sprintf("trend of degree %d", j+1), Unit: unit, Value: math.Pow(daysPerYear/b.spanDays, float64(j+1))})
	}
	if b.periodDays > 0 {
		for h := range b.signal.Harmonics {
			list = append(list,
				Term{Name: fmt.Sprintf("harmonic %d, cosine", h+1), Unit: "km/s", Value: 1},
				Term{Name: fmt.Sprintf("harmonic %d, sine", h+1), Unit: "km/s", Value: 1})
		}
	}
	return list
}
