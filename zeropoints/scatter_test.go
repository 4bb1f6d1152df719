package zeropoints_test

import (
	"math"
	"math/rand/v2"
	"testing"

	"platemeld/zeropoints"
)

// besides is an instrument with published errors of 0.5 km/s and rows of
// another one, which publishes none.
func besides(velocities ...float64) zeropoints.Problem {
	random := rand.New(rand.NewPCG(1, 2))
	p := zeropoints.Problem{Instruments: []zeropoints.Instrument{{Name: "with errors"}, {Name: "without"}}}
	for i := range 40 {
		p.Observations = append(p.Observations, zeropoints.Observation{TimeDays: 2440000 + 30*float64(i), VelocityKms: -12 + 0.5*random.NormFloat64(), SigmaKms: 0.5})
	}
	for i, v := range velocities {
		p.Observations = append(p.Observations, zeropoints.Observation{TimeDays: 2440010 + 40*float64(i), VelocityKms: v, Instrument: 1})
	}
	return p
}

// TestRowsWithoutErrors: however rounded or few the rows of an instrument
// without published errors are, its zero point is never given an error that
// leaves them out. The first value is the standard deviation of the sample, by
// algebra, about the mean, from which the robust level is a little off; the
// others are the scatter of the other instrument.
func TestRowsWithoutErrors(t *testing.T) {
	tests := []struct {
		name       string
		velocities []float64
		want       float64 // jitter, km/s
		tolerance  float64
		borrowed   bool
	}{
		{"seven of ten rounded to one number", []float64{-10, -10, -10, -10, -10, -10, -10, -11, -11, -11}, math.Sqrt(0.21 * 10 / 9), 0.01, false},
		{"three equal", []float64{-10, -10, -10}, 0.5, 0.15, true},
		{"two", []float64{-10, -14}, 0.5, 0.15, true},
		{"one", []float64{-10}, 0.5, 0.15, true},
	}
	for _, test := range tests {
		t.Run(test.name, func(t *testing.T) {
			s := fit(t, besides(test.velocities...))
			z := s.ZeroPoints[1]
			near(t, "jitter in km/s", z.JitterKms, test.want, test.tolerance)
			alone := z.JitterKms / math.Sqrt(float64(len(test.velocities)))
			if !(z.SigmaKms >= 0.7*alone) { // a sandwich of rows that agree is somewhat narrower
				t.Errorf("error %.4f km/s of a zero point whose rows alone give %.4f", z.SigmaKms, alone)
			}
			borrowed := false
			for _, f := range s.Findings {
				borrowed = borrowed || f.Kind == zeropoints.FindingFewRows
				if f.Kind == zeropoints.FindingUnsettled {
					t.Error(f.Text)
				}
			}
			if borrowed != test.borrowed {
				t.Errorf("a finding about too few rows: %v, want %v", borrowed, test.borrowed)
			}
		})
	}
}

// TestNoScale: rows without errors that show no scatter anywhere say nothing
// about the errors of the zero points, and a finding says so.
func TestNoScale(t *testing.T) {
	p := besides(-10, -10, -10, -10)
	p.Observations = p.Observations[40:]
	p.Instruments = p.Instruments[:1]
	for i := range p.Observations {
		p.Observations[i].Instrument = 0
	}
	s := fit(t, p)
	if len(s.Findings) == 0 || s.Findings[0].Kind != zeropoints.FindingNoScale {
		t.Errorf("findings %v, want first that no error has a scale", s.Findings)
	}
	if z := s.ZeroPoints[0]; !math.IsInf(z.JitterHighKms, 1) {
		t.Errorf("a jitter up to %v km/s, want no limit", z.JitterHighKms)
	}
}

// TestOneInstant: a trend that the times cannot show leaves the zero points
// and jitters as they are without it.
func TestOneInstant(t *testing.T) {
	p := besides(-10, -10.4, -9.7, -10.2)
	for i := range p.Observations {
		p.Observations[i].TimeDays = 2440000
	}
	without := fit(t, p)
	p.Signal.TrendDegree = 1
	with := fit(t, p)
	for k := range with.ZeroPoints {
		near(t, "zero point", with.ZeroPoints[k].Kms, without.ZeroPoints[k].Kms, 1e-9)
		near(t, "its error", with.ZeroPoints[k].SigmaKms, without.ZeroPoints[k].SigmaKms, 1e-9)
		near(t, "jitter", with.ZeroPoints[k].JitterKms, without.ZeroPoints[k].JitterKms, 1e-9)
	}
}
