package zeropoints

import (
	"errors"
	"fmt"
	"math"
	"slices"
	"strings"
)

// Observation is one velocity.
type Observation struct {
	TimeDays      float64 // BJD_TDB
	VelocityKms   float64 // barycentric, zero point not yet subtracted
	SigmaKms      float64 // standard error; 0 = none published: the jitter stands for it
	TimeSigmaDays float64 // standard uncertainty of the time
	Instrument    int     // index into Problem.Instruments
	Star          int     // index into Problem.Stars
}

// Instrument is one thing that has a zero point.
type Instrument struct {
	Name              string
	HasPublished      bool
	PublishedKms      float64 // zero point published for it
	PublishedSigmaKms float64 // and its standard error, 0 = exact
}

// Signal is the star's motion to be fitted; a constant is always in it.
type Signal struct {
	TrendDegree              int     // of a polynomial in time, 0 to 3
	PeriodDays               float64 // > 0: a periodic term, its period refined in the fit
	ScanMinDays, ScanMaxDays float64 // both > 0: the period is searched for between them
	Harmonics                int     // of the periodic term, the fundamental included
}

// periodic reports whether the signal has a periodic term.
func (s Signal) periodic() bool { return s.PeriodDays > 0 || s.ScanMaxDays > 0 }

// GaugeKind says what fixes the common level.
type GaugeKind int

// The kinds of gauge.
const (
	GaugeReference    GaugeKind = iota // one instrument's zero point is 0
	GaugeWeightedMean                  // the mean of all, weighted by their data, is 0
	GaugePublished                     // published zero points, by their standard errors
)

// Gauge fixes the common level.
type Gauge struct {
	Kind      GaugeKind
	Reference int // index of the instrument, for GaugeReference
}

// Problem is what Fit solves.
type Problem struct {
	Observations []Observation
	Instruments  []Instrument // each has at least one observation
	Stars        []string     // one
	Signal       Signal
	Gauge        Gauge
	Loss         Loss
	Seed         uint64 // reserved for what is drawn at random; Fit draws nothing
}

// ErrProblem is what every error about an impossible problem unwraps to.
var ErrProblem = errors.New("zeropoints: the problem cannot be solved as it is")

// validate reports the first fault of a problem.
func (p *Problem) validate() error {
	fault := func(format string, arguments ...any) error {
		return fmt.Errorf("%w: %s", ErrProblem, fmt.Sprintf(format, arguments...))
	}
	s := p.Signal
	switch {
	case len(p.Observations) == 0:
		return fault("there are no observations")
	case len(p.Instruments) == 0:
		return fault("there are no instruments")
	case len(p.Stars) > 1:
		return fault("there are %d stars; one is accepted", len(p.Stars))
	case s.TrendDegree < 0 || s.TrendDegree > 3:
		return fault("a trend of degree %d; 0 to 3 is accepted", s.TrendDegree)
	case s.periodic() && (s.Harmonics < 1 || s.Harmonics > 20):
		return fault("%d harmonics; 1 to 20 is accepted", s.Harmonics)
	case s.ScanMaxDays > 0 && !(s.ScanMinDays > 0 && s.ScanMaxDays > s.ScanMinDays):
		return fault("periods from %v to %v d; the shorter comes first", s.ScanMinDays, s.ScanMaxDays)
	case p.Gauge.Kind == GaugeReference && (p.Gauge.Reference < 0 || p.Gauge.Reference >= len(p.Instruments)):
		return fault("the reference instrument has the index %d of %d", p.Gauge.Reference, len(p.Instruments))
	}
	if p.Gauge.Kind == GaugePublished && !slices.ContainsFunc(p.Instruments, func(i Instrument) bool { return i.HasPublished }) {
		return fault("no instrument has a published zero point")
	}
	return p.validateRows(fault)
}

func (p *Problem) validateRows(fault func(string, ...any) error) error {
	rows := make([]int, len(p.Instruments))
	for i, o := range p.Observations {
		switch {
		case o.Instrument < 0 || o.Instrument >= len(p.Instruments):
			return fault("observation %d has the instrument %d of %d", i, o.Instrument, len(p.Instruments))
		case math.IsNaN(o.TimeDays+o.VelocityKms) || math.IsInf(o.TimeDays+o.VelocityKms, 0):
			return fault("observation %d has the time %v and the velocity %v", i, o.TimeDays, o.VelocityKms)
		case !(o.SigmaKms >= 0) || math.IsInf(o.SigmaKms, 0) || !(o.TimeSigmaDays >= 0) || math.IsInf(o.TimeSigmaDays, 0):
			return fault("observation %d has the standard errors %v km/s and %v d", i, o.SigmaKms, o.TimeSigmaDays)
		}
		rows[o.Instrument]++
	}
	var empty []string
	for k, n := range rows {
		if n == 0 {
			empty = append(empty, p.Instruments[k].Name)
		}
	}
	if len(empty) > 0 {
		return fault("no observation of %s", strings.Join(empty, ", "))
	}
	return nil
}
