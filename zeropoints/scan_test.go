package zeropoints

import (
	"math"
	"testing"
)

// TestScanIsAFloatingMeanPeriodogram holds one frequency after the other
// against the weighted floating-mean periodogram of astropy 5.2.1
// (LombScargle, normalisation "standard"), which equals 1 - chi²/chi²_0 of
// direct least squares.
func TestScanIsAFloatingMeanPeriodogram(t *testing.T) {
	times := []float64{0, 1.3, 2.1, 3.7, 5.2, 6.6, 8.9, 10.4, 12, 15.5}
	y := []float64{1.2, -.4, -1.1, .3, 1.6, .2, -1.3, .9, .5, -.8}
	sigma := []float64{.1, .2, .1, .3, .2, .1, .2, .1, .3, .2}
	f := &scanner{harmonics: 1, instruments: 1, instrument: make([]int, len(y)), velocity: append([]float64{}, y...), timeDays: times}
	mean, total := 0.0, 0.0
	for i := range y {
		f.weight = append(f.weight, 1/(sigma[i]*sigma[i]))
		mean += f.weight[i] * y[i]
		total += f.weight[i]
	}
	for i := range y {
		f.velocity[i] -= mean / total
		f.total += f.weight[i] * f.velocity[i] * f.velocity[i]
	}
	if want := 458.3538711584; !(math.Abs(f.total-want) <= 1e-8) { // astropy, psd normalisation
		t.Errorf("chi²_0: got %.10f, want %.10f", f.total, want)
	}
	for _, test := range []struct{ frequency, want float64 }{
		{.05, .05717040443}, {.1, .22478661766}, {.19, .75859785292}, {.2, .61610099189}, {.35, .08497905875},
	} {
		got := make([]float64, 1)
		f.sweep(got, test.frequency, 0.01)
		if !(math.Abs(got[0]-test.want) <= 1e-9) {
			t.Errorf("frequency %v: got %.11f, want %.11f", test.frequency, got[0], test.want)
		}
	}
	// The phases turned from one frequency to the next stay those computed anew.
	swept := make([]float64, 2048)
	f.sweep(swept, 0.01, 0.0002)
	alone := make([]float64, 1)
	f.sweep(alone, 0.01+2047*0.0002, 0.0002)
	if !(math.Abs(swept[2047]-alone[0]) <= 1e-9) {
		t.Errorf("after 2047 turns: %.12f, computed anew %.12f", swept[2047], alone[0])
	}
}

// TestTuning checks the constants of the losses against integrals in R (the
// efficiency of the Student-t score with 4 degrees of freedom at the normal
// distribution, and of Huber's at 1.345).
func TestTuning(t *testing.T) {
	for _, test := range []struct {
		loss Loss
		want float64
	}{{LossStudent, .925861839}, {LossHuber, .95000026}, {LossGaussian, 1}} {
		m := test.loss.atNormal()
		if got := m.psiSlope * m.psiSlope / m.psiSquare; !(math.Abs(got-test.want) <= 1e-7) {
			t.Errorf("%v: efficiency %.9f, want %.9f", test.loss, got, test.want)
		}
	}
	if spread := LossGaussian.atNormal().spread; !(math.Abs(spread-2) <= 1e-9) {
		t.Errorf("variance of the square of a normal residual: %v, want 2", spread)
	}
}

func BenchmarkScan(b *testing.B) {
	const n = 2000
	f := &scanner{harmonics: 1, instruments: 12, total: 1}
	for i := range n {
		f.instrument = append(f.instrument, i%12)
		f.weight = append(f.weight, 1)
		f.velocity = append(f.velocity, math.Sin(float64(i)))
		f.timeDays = append(f.timeDays, 21.7*float64(i))
	}
	dst := make([]float64, 2048)
	b.ReportAllocs()
	for b.Loop() {
		f.sweep(dst, 1e-4, 1e-7)
	}
	b.ReportMetric(float64(b.Elapsed().Nanoseconds())/float64(b.N*len(dst)), "ns/period")
}
