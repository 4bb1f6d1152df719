package zeropoints

import (
	"fmt"
	"math"
	"strings"

	"gonum.org/v1/gonum/integrate/quad"
)

// Loss says how residuals far from zero are weighed.
type Loss int

// The losses.
const (
	LossStudent  Loss = iota // Student's t with 4 degrees of freedom: far rows lose all weight
	LossHuber                // Huber's, k = 1.345: far rows pull with a bounded force
	LossGaussian             // least squares: every row counts in full
)

var lossWords = []string{"student", "huber", "gaussian"}

// String returns the word for a loss.
func (l Loss) String() string {
	if l < 0 || int(l) >= len(lossWords) {
		return fmt.Sprintf("unknown loss %d", int(l))
	}
	return lossWords[l]
}

// ParseLoss returns the loss of a word; the error lists the words.
func ParseLoss(word string) (Loss, error) {
	for i, w := range lossWords {
		if w == word {
			return Loss(i), nil
		}
	}
	return 0, fmt.Errorf("%w: the loss %q; accepted: %s", ErrProblem, word, strings.Join(lossWords, ", "))
}

// studentFreedom is the number of degrees of freedom of the Student-t loss:
// 92.6 per cent efficient at the normal distribution.
const studentFreedom = 4.0

// huberTuning makes Huber's estimate 95 per cent efficient at the normal
// distribution.
const huberTuning = 1.345

// psi returns the score of a standardised residual: what a row pulls with.
func (l Loss) psi(u float64) float64 {
	switch l {
	case LossStudent:
		return (studentFreedom + 1) * u / (studentFreedom + u*u)
	case LossHuber:
		return max(-huberTuning, min(huberTuning, u))
	default:
		return u
	}
}

// psiSlope returns the derivative of psi.
func (l Loss) psiSlope(u float64) float64 {
	switch l {
	case LossStudent:
		d := studentFreedom + u*u
		return (studentFreedom + 1) * (studentFreedom - u*u) / (d * d)
	case LossHuber:
		if math.Abs(u) > huberTuning {
			return 0
		}
		return 1
	default:
		return 1
	}
}

// weight returns psi(u)/u, the weight of a row in least squares that are
// repeated until they agree.
func (l Loss) weight(u float64) float64 {
	switch l {
	case LossStudent:
		return (studentFreedom + 1) / (studentFreedom + u*u)
	case LossHuber:
		return math.Min(1, huberTuning/math.Abs(u))
	default:
		return 1
	}
}

// normalMoments holds what the loss expects of a standard normal residual.
type normalMoments struct {
	psiSquare, psiSlope float64 // expectations
	spread              float64 // variance of psi²
}

// atNormal integrates the moments over the normal distribution.
func (l Loss) atNormal() normalMoments {
	mean := func(f func(float64) float64) float64 {
		density := func(u float64) float64 { return f(u) * math.Exp(-u*u/2) / math.Sqrt(2*math.Pi) }
		// By parts, so that Huber's corner lies at an end.
		sum := 0.0
		for _, ends := range [][2]float64{{0, huberTuning}, {huberTuning, 4}, {4, 10}} {
			sum += quad.Fixed(density, ends[0], ends[1], 40, quad.Legendre{}, 0)
		}
		return 2 * sum
	}
	square := mean(func(u float64) float64 { return l.psi(u) * l.psi(u) })
	return normalMoments{
		psiSquare: square,
		psiSlope:  mean(l.psiSlope),
		spread:    mean(func(u float64) float64 { d := l.psi(u)*l.psi(u) - square; return d * d }),
	}
}

// rho returns the integral of psi from 0: half the deviance of a residual.
func (l Loss) rho(u float64) float64 {
	switch l {
	case LossStudent:
		return (studentFreedom + 1) / 2 * math.Log1p(u*u/studentFreedom)
	case LossHuber:
		if a := math.Abs(u); a > huberTuning {
			return huberTuning*a - huberTuning*huberTuning/2
		}
		return u * u / 2
	default:
		return u * u / 2
	}
}
