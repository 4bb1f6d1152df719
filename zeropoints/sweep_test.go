package zeropoints

import (
	"fmt"
	"math"
	"math/rand/v2"
	"testing"

	"gonum.org/v1/gonum/mat"
)

// TestSweepIsLeastSquares holds the scan, with zero points and a trend
// floating and harmonics, against least squares by the QR factorisation of the
// whole design (gonum), one frequency after the other.
func TestSweepIsLeastSquares(t *testing.T) {
	for _, test := range []struct{ harmonics, trend, instruments int }{{1, 0, 1}, {1, 0, 3}, {2, 0, 3}, {1, 1, 3}, {3, 2, 2}} {
		t.Run(fmt.Sprintf("%d harmonics, trend of degree %d, %d instruments", test.harmonics, test.trend, test.instruments), func(t *testing.T) {
			p := invented(60, test.instruments)
			p.Signal = Signal{TrendDegree: test.trend}
			s := newState(&p)
			s.step(1)
			f := s.newScanner(test.harmonics)
			got := make([]float64, 40)
			const first, step = 0.002, 0.0007
			f.sweep(got, first, step)
			for at, reduction := range got {
				want := 1 - sumOfSquares(f, first+float64(at)*step)/f.total
				if !(math.Abs(reduction-want) <= 1e-10) {
					t.Errorf("frequency %d: reduction %.12f, least squares %.12f", at, reduction, want)
				}
			}
		})
	}
}

func invented(rows, instruments int) Problem {
	random := rand.New(rand.NewPCG(1, 3))
	p := Problem{Instruments: make([]Instrument, instruments)}
	for i := range rows {
		p.Observations = append(p.Observations, Observation{TimeDays: 2450000 + 1000*random.Float64(), VelocityKms: random.NormFloat64(), SigmaKms: 0.1 + random.Float64(), Instrument: i % instruments})
	}
	return p
}

// sumOfSquares is what the whole design leaves of the velocities.
func sumOfSquares(f *scanner, frequency float64) float64 {
	n, width := len(f.weight), f.instruments+f.trend+2*f.harmonics
	design, y := mat.NewDense(n, width, nil), mat.NewDense(n, 1, nil)
	for i, w := range f.weight {
		root := math.Sqrt(w)
		y.Set(i, 0, root*f.velocity[i])
		design.Set(i, f.instrument[i], root)
		for j := range f.trend {
			design.Set(i, f.instruments+j, root*f.columns[i*f.trend+j])
		}
		for h := range f.harmonics {
			sin, cos := math.Sincos(2 * math.Pi * float64(h+1) * frequency * f.timeDays[i])
			design.Set(i, f.instruments+f.trend+2*h, root*cos)
			design.Set(i, f.instruments+f.trend+2*h+1, root*sin)
		}
	}
	var qr mat.QR
	qr.Factorize(design)
	var x, left mat.Dense
	if err := qr.SolveTo(&x, false, y); err != nil {
		return math.NaN()
	}
	left.Mul(design, &x)
	left.Sub(y, &left)
	norm := mat.Norm(&left, 2)
	return norm * norm
}
