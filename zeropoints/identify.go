package zeropoints

import (
	"fmt"
	"math"
	"strings"

	"gonum.org/v1/gonum/mat"
)

// Finding is something that a human should look at.
type Finding struct {
	Kind        FindingKind
	Text        string
	Instruments []int // those concerned
}

// FindingKind says what a finding is about.
type FindingKind int

// The kinds of finding.
const (
	FindingUnanchored FindingKind = iota // zero points that the data do not determine
	FindingWeak                          // zero points that hang on the signal's form
	FindingFewRows                       // a jitter that the rows cannot show
	FindingUnsettled                     // the iteration did not settle
	FindingPeriod                        // the period is not well determined
	FindingNoScale                       // nothing says how large any error is
)

// The variance of a zero point over that with the signal known, from which on
// it is called weak, and unanchored: its error is then 5 or 100 times that of
// its rows, and any error in the signal's form goes into it.
const (
	weakInflation       = 25.0
	unanchoredInflation = 1e4
)

// report fills in the zero points, terms and findings of a solution.
func (s *state) report(out *Solution) {
	full := s.covariance()
	share, published, variance := s.shares(full)
	common := 0.0
	for k, w := range share {
		common += w * (s.level[k] - published[k])
	}
	toZero := s.toZeroPoints(share)
	out.Covariance = quadratic(toZero, full)
	n := len(s.level)
	for i := range n {
		for j := i; j < n; j++ {
			out.Covariance.SetSym(i, j, out.Covariance.At(i, j)+variance)
		}
	}
	known := quadratic(toZero, s.covarianceSignalKnown())
	out.ZeroPoints = make([]ZeroPoint, n)
	for k := range n {
		z := &out.ZeroPoints[k]
		z.Kms, z.Rows, z.Anchored = s.level[k]-common, len(s.members[k]), true
		z.SigmaKms = math.Sqrt(math.Max(out.Covariance.At(k, k), 0))
		z.Inflation = 1
		if v := known.At(k, k) + variance; v > 0 {
			z.Inflation = out.Covariance.At(k, k) / v
		}
	}
	s.reportJitters(out)
	s.findUnanchored(out, toZero)
	s.reportTerms(out, full, share, common, variance)
}

// toZeroPoints is the matrix that turns levels and coefficients into zero
// points.
func (s *state) toZeroPoints(share []float64) *mat.Dense {
	n := len(s.level)
	t := mat.NewDense(n, n+s.width(), nil)
	for k := range n {
		for m, w := range share {
			t.Set(k, m, -w)
		}
		t.Set(k, k, 1-share[k])
	}
	return t
}

// quadratic returns t c t'.
func quadratic(t *mat.Dense, c *mat.SymDense) *mat.SymDense {
	var half, full mat.Dense
	half.Mul(t, c)
	full.Mul(&half, t.T())
	n, _ := full.Dims()
	out := mat.NewSymDense(n, nil)
	for i := range n {
		for j := i; j < n; j++ {
			out.SetSym(i, j, (full.At(i, j)+full.At(j, i))/2)
		}
	}
	return out
}

// covarianceSignalKnown is the covariance of the levels if the signal were
// known.
func (s *state) covarianceSignalKnown() *mat.SymDense {
	l, r := s.modelLevels()
	slope, square := s.scoreMoments(r, l.leverage(r))
	size := len(s.level) + s.width()
	c := mat.NewSymDense(size, nil)
	for k := range s.level {
		c.SetSym(k, k, square[k]/(slope[k]*slope[k]*l.sum[k]))
	}
	return c
}

// findUnanchored looks for zero points that can move without any change of
// the fitted velocities, or hang on the signal alone.
func (s *state) findUnanchored(out *Solution, toZero *mat.Dense) {
	moves := s.freeMoves()
	motion := make([][]float64, len(s.level)) // of each zero point along each free move
	for k := range motion {
		for _, move := range moves {
			motion[k] = append(motion[k], mat.Dot(toZero.RowView(k), mat.NewVecDense(len(move), move)))
		}
	}
	var unanchored, weak []int
	for k := range out.ZeroPoints {
		z := &out.ZeroPoints[k]
		switch {
		case largest(motion[k]) > 1e-6 || z.Inflation > unanchoredInflation:
			z.Anchored = false
			unanchored = append(unanchored, k)
		case z.Inflation > weakInflation:
			weak = append(weak, k)
		}
	}
	s.groupUnanchored(out, unanchored, motion)
	if len(weak) > 0 {
		out.Findings = append(out.Findings, Finding{FindingWeak,
			fmt.Sprintf("the zero points of %s hang on the form of the signal: their errors are more than %.0f times those of their rows; an overlap in time with another instrument would tie them", s.names(weak), math.Sqrt(weakInflation)), weak})
	}
}

// groupUnanchored numbers the sets of unanchored instruments that move
// together, and says so in words.
func (s *state) groupUnanchored(out *Solution, unanchored []int, motion [][]float64) {
	for _, k := range unanchored {
		z := &out.ZeroPoints[k]
		if z.Group != 0 {
			continue
		}
		group := 1
		for _, m := range unanchored {
			group = max(group, out.ZeroPoints[m].Group+1)
		}
		var members []int
		for _, m := range unanchored {
			if out.ZeroPoints[m].Group == 0 && near(motion[k], motion[m]) {
				out.ZeroPoints[m].Group = group
				members = append(members, m)
			}
		}
		verb := "can move together by any amount"
		if len(members) == 1 {
			verb = "can move by any amount"
		}
		out.Findings = append(out.Findings, Finding{FindingUnanchored,
			fmt.Sprintf("unanchored: the zero points of %s %s against the others without changing the fit, since the signal takes it up; observations that overlap with an anchored instrument, a published zero point or a simpler signal would anchor them", s.names(members), verb), members})
	}
}

// freeMoves returns the directions in which levels and coefficients can move
// without any change of the fitted velocities.
func (s *state) freeMoves() [][]float64 {
	_, r := s.modelLevels()
	k0, width := len(s.level), s.width()
	size := k0 + width
	a := mat.NewSymDense(size, nil)
	for i, k := range r.instrument {
		addProduct(a, k, k0, r.columns[i*width:(i+1)*width], r.weight[i])
	}
	d := newDirections(a)
	var moves [][]float64
	for m := range d.values {
		if !d.isFree(m) {
			continue
		}
		move := make([]float64, size)
		for i := range move {
			move[i] = d.vectors.At(i, m) * d.scale[i]
		}
		length := largest(move)
		for i := range move {
			move[i] /= length
		}
		moves = append(moves, move)
	}
	return moves
}

func largest(values []float64) float64 {
	m := 0.0
	for _, v := range values {
		m = math.Max(m, math.Abs(v))
	}
	return m
}

func near(a, b []float64) bool {
	for i := range a {
		if !(math.Abs(a[i]-b[i]) <= 1e-6) {
			return false
		}
	}
	return true
}

func (s *state) names(list []int) string {
	names := make([]string, len(list))
	for i, k := range list {
		names[i] = s.problem.Instruments[k].Name
	}
	return strings.Join(names, ", ")
}

// reportJitters fills in jitters and their intervals.
func (s *state) reportJitters(out *Solution) {
	l, r := s.modelLevels()
	fitted := l.leverage(r)
	var few, pooled []int
	for k, list := range s.members {
		z := &out.ZeroPoints[k]
		j := s.jitterRows(list, fitted)
		z.JitterKms = math.Sqrt(s.jitter[k])
		z.JitterLowKms = math.Sqrt(j.solve(1, s.problem.Loss, s.normal))
		z.JitterHighKms = math.Sqrt(j.solve(-1, s.problem.Loss, s.normal))
		if s.jitter[k] == 0 {
			const oneSided95 = 1.6448536269514722 // R: qnorm(0.95)
			z.JitterIsLimit, z.JitterLowKms = true, 0
			z.JitterHighKms = math.Sqrt(j.solve(-oneSided95, s.problem.Loss, s.normal))
		}
		switch {
		case s.pooled[k]:
			z.JitterIsLimit, z.JitterLowKms, z.JitterHighKms = false, 0, math.Inf(1)
			pooled = append(pooled, k)
		case len(list) < fewestForJitter:
			few = append(few, k)
		}
	}
	if len(few) > 0 {
		out.Findings = append(out.Findings, Finding{FindingFewRows,
			fmt.Sprintf("%s: fewer than %d rows; what jitter they show says little", s.names(few), fewestForJitter), few})
	}
	if len(pooled) > 0 && !s.scaleless() {
		out.Findings = append(out.Findings, Finding{FindingFewRows,
			fmt.Sprintf("%s: no published errors, and rows too few or too equal to show a scatter; the median scatter of the other instruments stands for it", s.names(pooled)), pooled})
	}
}

// semiAmplitude returns the half range of a harmonic, from 0, with its error
// carried over from the cosine and the sine.
func (s *state) semiAmplitude(full *mat.SymDense, harmonic int) Term {
	j := s.problem.Signal.TrendDegree + 2*harmonic
	cosine, sine := s.c[j], s.c[j+1]
	size := math.Hypot(cosine, sine)
	at := len(s.level) + j
	variance := cosine*cosine*full.At(at, at) + 2*cosine*sine*full.At(at, at+1) + sine*sine*full.At(at+1, at+1)
	sigma := 0.0
	if size > 0 {
		sigma = math.Sqrt(math.Max(variance, 0)) / size
	}
	return Term{fmt.Sprintf("harmonic %d, semi-amplitude", harmonic+1), "km/s", size, sigma}
}

// reportTerms fills in the parameters of the signal.
func (s *state) reportTerms(out *Solution, full *mat.SymDense, share []float64, common, variance float64) {
	n := len(s.level)
	levelVariance := variance
	for a, wa := range share {
		for b, wb := range share {
			levelVariance += wa * wb * full.At(a, b)
		}
	}
	out.Terms = append(out.Terms, Term{"systemic velocity", "km/s", common, math.Sqrt(math.Max(levelVariance, 0))})
	for j, name := range s.basis.names() {
		factor := name.Value
		name.Value, name.Sigma = s.c[j]*factor, math.Sqrt(math.Max(full.At(n+j, n+j), 0))*factor
		out.Terms = append(out.Terms, name)
	}
	if s.basis.periodDays <= 0 {
		return
	}
	for h := range s.problem.Signal.Harmonics {
		out.Terms = append(out.Terms, s.semiAmplitude(full, h))
	}
	linear := s.basis.width()
	out.PeriodSigmaDays = s.basis.periodDays * math.Sqrt(math.Max(full.At(n+linear, n+linear), 0))
	out.Terms = append(out.Terms, Term{"period", "d", s.basis.periodDays, out.PeriodSigmaDays})
	if !(out.PeriodSigmaDays < 0.2*s.basis.periodDays) {
		out.Findings = append(out.Findings, Finding{FindingPeriod, fmt.Sprintf("the period of %.6g d is hardly determined (standard error %.2g d); the zero points depend on it", s.basis.periodDays, out.PeriodSigmaDays), nil})
	}
}
