package zeropoints_test

import (
	"context"
	"math"
	"math/rand/v2"
	"testing"

	"pgregory.net/rapid"

	"platemeld/zeropoints"
)

// fit solves a problem or ends the test.
func fit(t interface {
	Helper()
	Fatal(...any)
}, p zeropoints.Problem) *zeropoints.Solution {
	t.Helper()
	s, err := zeropoints.Fit(context.Background(), p)
	if err != nil {
		t.Fatal(err)
	}
	return s
}

func near(t *testing.T, what string, got, want, tolerance float64) {
	t.Helper()
	if !(math.Abs(got-want) <= tolerance) {
		t.Errorf("%s: got %.12g, want %.12g within %g", what, got, want, tolerance)
	}
}

// bcg holds the log risk ratios and their variances of 13 trials of the BCG
// vaccine with the way each trial allocated (Colditz et al. 1994, JAMA 271,
// 698; the data set dat.bcg of the R package metafor): sampling variances are
// known, as those of velocities.
var bcg = struct {
	y, variance []float64
	group       string
}{
	y: []float64{-.8893113339202, -1.5853886572014, -1.3480731482997, -1.4415511900213, -.2175473222113, -.7861155858189, -1.6208982235984,
		.0119523335238, -.4694176487381, -1.3713448034728, -.3393588283384, .4459134005714, -.0173139482169},
	variance: []float64{.32558476500396, .19458112139814, .41536796536797, .02001003190225, .05121017216963, .00690561845591, .22301724757232,
		.00396157929782, .05643421046325, .07302479361303, .01241221397156, .53250584520015, .07140465968399},
	group: "rrrraarrrssss",
}

func knownVariances(y, variance []float64, instrument func(i int) int, instruments ...string) zeropoints.Problem {
	p := zeropoints.Problem{Loss: zeropoints.LossGaussian}
	for _, name := range instruments {
		p.Instruments = append(p.Instruments, zeropoints.Instrument{Name: name})
	}
	for i := range y {
		p.Observations = append(p.Observations, zeropoints.Observation{TimeDays: 2445000 + float64(i), VelocityKms: y[i], SigmaKms: math.Sqrt(variance[i]), Instrument: instrument(i)})
	}
	return p
}

func first(int) int { return 0 }

// TestJitterIsREML: one mean and one jitter. Expected: metafor 3.8-1,
// rma(method = "REML") (its documentation prints 0.3132), and an optimiser of
// the restricted likelihood.
func TestJitterIsREML(t *testing.T) {
	s := fit(t, knownVariances(bcg.y, bcg.variance, first, "all"))
	near(t, "jitter²", s.ZeroPoints[0].JitterKms*s.ZeroPoints[0].JitterKms, .313243256478, 1e-6)
	near(t, "mean", s.Terms[0].Value, -.714532342006, 1e-6)
	near(t, "standard error", s.Terms[0].Sigma, .179781515722, 1e-6)
}

// TestJitterPerInstrument: a mean and a jitter for each of three groups, like
// instruments with zero points and jitters of their own. Expected: metafor
// 3.8-1, REML by group.
func TestJitterPerInstrument(t *testing.T) {
	s := fit(t, knownVariances(bcg.y, bcg.variance, func(i int) int { return map[byte]int{'r': 0, 'a': 1, 's': 2}[bcg.group[i]] }, "random", "alternate", "systematic"))
	want := []struct{ variance, mean, sigma float64 }{
		{.392528006901, -.970964704263, .275956102973},
		{.132577039878, -.540792961849, .281601613104},
		{.400345880175, -.424207391511, .359745232433},
	}
	for k, w := range want {
		z := s.ZeroPoints[k]
		near(t, "jitter²", z.JitterKms*z.JitterKms, w.variance, 1e-6)
		near(t, "zero point", z.Kms, w.mean-want[0].mean, 1e-6)
		if k > 0 {
			near(t, "standard error", z.SigmaKms, math.Hypot(w.sigma, want[0].sigma), 1e-6)
		}
		near(t, "inflation without a signal", z.Inflation, 1, 1e-6)
	}
}

// TestJitterOfZero: the eight schools (Rubin 1981, J. Educ. Stat. 6, 377),
// whose REML variance is zero. Expected: metafor 3.8-1.
func TestJitterOfZero(t *testing.T) {
	y := []float64{28, 8, -3, 7, -1, 1, 18, 12}
	variance := []float64{225, 100, 256, 121, 81, 121, 100, 324}
	s := fit(t, knownVariances(y, variance, first, "schools"))
	z := s.ZeroPoints[0]
	if z.JitterKms != 0 || !z.JitterIsLimit || !(z.JitterHighKms > 0 && z.JitterHighKms < 50) {
		t.Errorf("jitter %v, limit %v up to %v; want 0 with an upper limit", z.JitterKms, z.JitterIsLimit, z.JitterHighKms)
	}
	near(t, "mean", s.Terms[0].Value, 7.685616725, 1e-6)
	near(t, "standard error", s.Terms[0].Sigma, 4.071919158, 1e-6)
}

// TestEqualErrors: with equal errors REML has a closed form, the sample
// variance less the errors' (algebra): 2.5 - 0.25.
func TestEqualErrors(t *testing.T) {
	s := fit(t, knownVariances([]float64{1, 2, 3, 4, 5}, []float64{.25, .25, .25, .25, .25}, first, "one"))
	near(t, "jitter²", s.ZeroPoints[0].JitterKms*s.ZeroPoints[0].JitterKms, 2.25, 1e-7) // where the iteration stops
}

// TestNorris is a straight line without published errors: slope, intercept,
// their standard errors and the residual standard deviation as certified by
// NIST (Statistical Reference Datasets, Norris).
func TestNorris(t *testing.T) {
	x := []float64{.2, 337.4, 118.2, 884.6, 10.1, 226.5, 666.3, 996.3, 448.6, 777, 558.2, .4, .6, 775.5, 666.9, 338, 447.5, 11.6, 556, 228.1, 995.8, 887.6, 120.2, .3, .3, 556.8, 339.1, 887.2, 999, 779, 11.1, 118.3, 229.2, 669.1, 448.9, .5}
	y := []float64{.1, 338.8, 118.1, 888, 9.2, 228.1, 668.5, 998.5, 449.1, 778.9, 559.2, .3, .1, 778.1, 668.8, 339.3, 448.9, 10.8, 557.7, 228.3, 998, 888.8, 119.6, .3, .6, 557.6, 339.3, 888, 998.5, 778.9, 10.2, 117.6, 228.9, 668.4, 449.2, .2}
	p := knownVariances(y, make([]float64, len(y)), first, "line")
	for i := range p.Observations {
		p.Observations[i].TimeDays = x[i]
	}
	p.Signal.TrendDegree = 1
	s := fit(t, p)
	near(t, "residual standard deviation", s.ZeroPoints[0].JitterKms, .884796396144373, 1e-8)
	near(t, "slope", s.Terms[1].Value/365.25, 1.00211681802045, 1e-10)
	near(t, "its standard error", s.Terms[1].Sigma/365.25, .429796848199937e-3, 1e-10)
	middle := (999 + .2) / 2
	near(t, "intercept", s.Terms[0].Value-middle*s.Terms[1].Value/365.25, -0.262323073774029, 1e-8)
}

// century simulates instruments that overlap in part, with jitters, and
// outliers in the share given.
func century(random *rand.Rand, outliers float64) (p zeropoints.Problem, zero []float64) {
	p.Signal = zeropoints.Signal{PeriodDays: 5500, Harmonics: 1}
	const phase, amplitude = 1.1, 1.3
	settings := []struct {
		zero, sigma, jitter, from, to float64
		rows                          int
	}{ // years
		{0, 0.02, 0.01, 2000, 2024, 60}, {-0.3, 0.05, 0.03, 1990, 2010, 50}, {0.8, 0.3, 0.2, 1970, 1995, 40}, {-1.2, 0.4, 0.2, 1955, 1980, 40},
		{2.1, 0.8, 0.5, 1930, 1960, 35}, {-3.0, 1.0, 0.6, 1920, 1945, 30}, {1.5, 1.2, 1.0, 1905, 1930, 30}, {4.0, 1.5, 0.8, 1898, 1915, 25},
	}
	for k, s := range settings {
		p.Instruments = append(p.Instruments, zeropoints.Instrument{Name: string(rune('A' + k))})
		zero = append(zero, s.zero)
		for range s.rows {
			day := 2451544.5 + 365.25*(s.from-2000+random.Float64()*(s.to-s.from))
			sigma := s.sigma * (0.7 + 0.6*random.Float64())
			v := -12 + s.zero + amplitude*math.Sin(2*math.Pi*day/5500+phase) + math.Hypot(sigma, s.jitter)*random.NormFloat64()
			if random.Float64() < outliers {
				v += 12 * math.Hypot(sigma, s.jitter)
			}
			p.Observations = append(p.Observations, zeropoints.Observation{TimeDays: day, VelocityKms: v, SigmaKms: sigma, Instrument: k})
		}
	}
	return p, zero
}

// TestCoverage simulates 60 centuries for each case and counts how often the
// zero points' intervals hold the truth. 420 intervals scatter by 2.3 per cent
// about 68.3, were they independent; the limits allow for three times that
// and some more, since seven zero points of a century share a reference.
func TestCoverage(t *testing.T) {
	tests := []struct {
		name     string
		loss     zeropoints.Loss
		outliers float64
	}{
		{"Gaussian, no outliers", zeropoints.LossGaussian, 0},
		{"Student, no outliers", zeropoints.LossStudent, 0},
		{"Student, 4% one-sided outliers", zeropoints.LossStudent, 0.04},
		{"Huber, 4% one-sided outliers", zeropoints.LossHuber, 0.04},
	}
	for _, test := range tests {
		t.Run(test.name, func(t *testing.T) {
			random := rand.New(rand.NewPCG(7, 11))
			const centuries = 60
			inside68, inside95, all := 0, 0, 0
			mean, square := 0.0, 0.0
			for range centuries {
				p, zero := century(random, test.outliers)
				p.Loss = test.loss
				s := fit(t, p)
				for k := 1; k < len(zero); k++ {
					pull := (s.ZeroPoints[k].Kms - zero[k]) / s.ZeroPoints[k].SigmaKms
					mean, square, all = mean+pull, square+pull*pull, all+1
					if math.Abs(pull) <= 1 {
						inside68++
					}
					if math.Abs(pull) <= 1.959964 {
						inside95++
					}
				}
			}
			share68, share95 := 100*float64(inside68)/float64(all), 100*float64(inside95)/float64(all)
			mean /= float64(all)
			t.Logf("68.3%% intervals hold %.1f%%, 95%% intervals %.1f%%; mean pull %+.3f, rms %.3f", share68, share95, mean, math.Sqrt(square/float64(all)))
			if !(share68 >= 60 && share68 <= 76) || !(share95 >= 90 && share95 <= 98.5) {
				t.Errorf("coverage %.1f%% and %.1f%%", share68, share95)
			}
			limit := 0.2
			if test.loss == zeropoints.LossHuber {
				limit = 0.6 // a bounded pull is still a pull: the loss for tables without one-sided outliers
			}
			if !(math.Abs(mean) <= limit) {
				t.Errorf("mean pull %.3f", mean)
			}
		})
	}
}

// TestOutliers: a row 12 standard deviations off has next to no weight and
// does not inflate the jitter.
func TestOutliers(t *testing.T) {
	p, _ := century(rand.New(rand.NewPCG(1, 2)), 0)
	clean := fit(t, p)
	p.Observations[10].VelocityKms += 12 * p.Observations[10].SigmaKms
	s := fit(t, p)
	if w := s.RobustWeights[10]; !(w < 0.1) {
		t.Errorf("robust weight %.3f of a row 12 standard deviations off", w)
	}
	if a, b := clean.ZeroPoints[0].JitterKms, s.ZeroPoints[0].JitterKms; !(math.Abs(a-b) < 0.005) {
		t.Errorf("jitter %.4f without the outlier, %.4f with it", a, b)
	}
}

// TestScanFindsThePeriod: the period is not given.
func TestScanFindsThePeriod(t *testing.T) {
	p, zero := century(rand.New(rand.NewPCG(3, 4)), 0.04)
	p.Signal = zeropoints.Signal{ScanMinDays: 500, ScanMaxDays: 20000, Harmonics: 1}
	s := fit(t, p)
	near(t, "period in its standard errors", (s.PeriodDays-5500)/s.PeriodSigmaDays, 0, 4)
	near(t, "period", s.PeriodDays, 5500, 100)
	for k := range zero {
		if pull := (s.ZeroPoints[k].Kms - zero[k]) / math.Max(s.ZeroPoints[k].SigmaKms, 1e-9); !(math.Abs(pull) <= 4) {
			t.Errorf("zero point %d is %.1f standard errors off", k, pull)
		}
	}
}

// TestUnanchored: a step between two instruments that do not overlap can be a
// trend's only when both show it; with one row an instrument shows none, and
// its zero point can be anything.
func TestUnanchored(t *testing.T) {
	p := zeropoints.Problem{Instruments: []zeropoints.Instrument{{Name: "A"}, {Name: "B"}, {Name: "C"}}, Signal: zeropoints.Signal{TrendDegree: 1}}
	for i := range 3 { // one night each: no instrument shows the trend
		for range 4 {
			p.Observations = append(p.Observations, zeropoints.Observation{TimeDays: 2445000 + 1000*float64(i), VelocityKms: 0.1 * float64(len(p.Observations)%4), SigmaKms: 0.1, Instrument: i})
		}
	}
	s := fit(t, p)
	for k := 1; k < 3; k++ {
		if s.ZeroPoints[k].Anchored {
			t.Errorf("%s is called anchored", p.Instruments[k].Name)
		}
	}
	if len(s.Findings) == 0 || s.Findings[0].Kind != zeropoints.FindingUnanchored {
		t.Errorf("findings %v, want one about unanchored zero points", s.Findings)
	}
	p.Signal.TrendDegree = 0
	for _, z := range fit(t, p).ZeroPoints {
		if !z.Anchored {
			t.Error("without a trend every zero point is anchored")
		}
	}
}

// TestGauges: whatever the gauge, differences of zero points stay the same,
// and each gauge's condition holds.
func TestGauges(t *testing.T) {
	p, _ := century(rand.New(rand.NewPCG(5, 6)), 0)
	reference := fit(t, p)
	p.Gauge.Kind = zeropoints.GaugeWeightedMean
	mean := fit(t, p)
	p.Gauge.Kind = zeropoints.GaugePublished
	p.Instruments[2].HasPublished, p.Instruments[2].PublishedKms, p.Instruments[2].PublishedSigmaKms = true, 0.75, 0.02
	published := fit(t, p)
	near(t, "the published zero point", published.ZeroPoints[2].Kms, 0.75, 1e-12)
	near(t, "its error", published.ZeroPoints[2].SigmaKms, 0.02, 1e-9)
	for k := range reference.ZeroPoints {
		want := reference.ZeroPoints[k].Kms - reference.ZeroPoints[1].Kms
		near(t, "difference, mean", mean.ZeroPoints[k].Kms-mean.ZeroPoints[1].Kms, want, 1e-9)
		near(t, "difference, published", published.ZeroPoints[k].Kms-published.ZeroPoints[1].Kms, want, 1e-9)
	}
}

// TestProperties: a common shift moves the systemic velocity alone; a shift of
// one instrument moves its zero point alone; the order of rows changes
// nothing; in noiseless data planted zero points come out.
func TestProperties(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		seed := rapid.Uint64().Draw(t, "seed")
		p, _ := century(rand.New(rand.NewPCG(seed, 1)), 0.02)
		before := fit(t, p)
		shift, own := rapid.Float64Range(-50, 50).Draw(t, "shift"), rapid.Float64Range(-50, 50).Draw(t, "own")
		q := p
		q.Observations = append([]zeropoints.Observation{}, p.Observations...)
		for i := range q.Observations {
			q.Observations[i].VelocityKms += shift
			if q.Observations[i].Instrument == 3 {
				q.Observations[i].VelocityKms += own
			}
		}
		random := rand.New(rand.NewPCG(seed, 2))
		random.Shuffle(len(q.Observations), func(a, b int) {
			q.Observations[a], q.Observations[b] = q.Observations[b], q.Observations[a]
		})
		after := fit(t, q)
		if d := after.Terms[0].Value - before.Terms[0].Value - shift; !(math.Abs(d) <= 1e-4) {
			t.Fatalf("a common shift of %v moved the systemic velocity by %v more", shift, d)
		}
		for k := range before.ZeroPoints {
			want := before.ZeroPoints[k].Kms
			if k == 3 {
				want += own
			}
			if d := after.ZeroPoints[k].Kms - want; !(math.Abs(d) <= 0.01*before.ZeroPoints[k].SigmaKms+1e-12) {
				t.Fatalf("zero point %d moved by %v (standard error %v)", k, d, before.ZeroPoints[k].SigmaKms)
			}
		}
	})
}

// TestProblems: what cannot be solved is an error, not a panic.
func TestProblems(t *testing.T) {
	sound, _ := century(rand.New(rand.NewPCG(5, 6)), 0)
	tests := []struct {
		name   string
		damage func(p *zeropoints.Problem)
	}{
		{"no observations", func(p *zeropoints.Problem) { p.Observations = nil }},
		{"no instruments", func(p *zeropoints.Problem) { p.Instruments = nil }},
		{"instrument without observations", func(p *zeropoints.Problem) { p.Instruments = append(p.Instruments, zeropoints.Instrument{Name: "X"}) }},
		{"unknown instrument", func(p *zeropoints.Problem) { p.Observations[3].Instrument = 99 }},
		{"velocity not a number", func(p *zeropoints.Problem) { p.Observations[3].VelocityKms = math.NaN() }},
		{"negative error", func(p *zeropoints.Problem) { p.Observations[3].SigmaKms = -1 }},
		{"infinite time", func(p *zeropoints.Problem) { p.Observations[3].TimeDays = math.Inf(1) }},
		{"reference out of range", func(p *zeropoints.Problem) { p.Gauge.Reference = -1 }},
		{"no harmonics", func(p *zeropoints.Problem) { p.Signal.Harmonics = 0 }},
		{"periods the wrong way round", func(p *zeropoints.Problem) { p.Signal.ScanMinDays, p.Signal.ScanMaxDays = 10, 5 }},
		{"published gauge without a zero point", func(p *zeropoints.Problem) { p.Gauge.Kind = zeropoints.GaugePublished }},
		{"two stars", func(p *zeropoints.Problem) { p.Stars = []string{"a", "b"} }},
	}
	for _, test := range tests {
		t.Run(test.name, func(t *testing.T) {
			p := sound
			p.Observations = append([]zeropoints.Observation{}, sound.Observations...)
			p.Instruments = append([]zeropoints.Instrument{}, sound.Instruments...)
			test.damage(&p)
			if _, err := zeropoints.Fit(context.Background(), p); err == nil {
				t.Error("got no error")
			}
		})
	}
	cancelled, cancel := context.WithCancel(context.Background())
	cancel()
	if _, err := zeropoints.Fit(cancelled, sound); err == nil {
		t.Error("a cancelled fit returned no error")
	}
}

func BenchmarkFit(b *testing.B) {
	p, _ := century(rand.New(rand.NewPCG(1, 1)), 0.02)
	for len(p.Observations) < 2000 {
		more, _ := century(rand.New(rand.NewPCG(uint64(len(p.Observations)), 1)), 0.02)
		p.Observations = append(p.Observations, more.Observations...)
	}
	p.Observations = p.Observations[:2000]
	b.ReportAllocs()
	for b.Loop() {
		if _, err := zeropoints.Fit(context.Background(), p); err != nil {
			b.Fatal(err)
		}
	}
}
