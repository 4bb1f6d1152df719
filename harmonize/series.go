package harmonize

import (
	"context"
	"errors"
	"fmt"
	"math"
	"sort"

	"platemeld/harmonize/plan"
	"platemeld/zeropoints"
)

// Series is the merged series with all that it was made from.
type Series struct {
	*Collection
	Duplicates []DuplicateCount
	ZeroPoints []plan.ZeroPoint // those that have rows, as in Solution
	Solution   *zeropoints.Solution
	Rows       []MergedRow // in the order of time
}

// MergedRow is one row of the merged series.
type MergedRow struct {
	Measurement     int     // index into the collection's measurements
	ZeroPoint       int     // index into the series' zero points
	VelocityKms     float64 // barycentric, on the common system
	ErrorKms        float64 // standard error without jitter; 0 = none published
	TotalErrorKms   float64 // standard error with jitter
	Weight          float64 // 1/TotalErrorKms² times the robust weight, 1/(km/s)²
	RobustWeight    float64 // 1 = counts in full, near 0 = an outlier
	SignalKms       float64 // the fitted signal at the row's epoch
	EpochSigmaDays  float64
	UnanchoredGroup bool // its zero point is not tied to the common system
}

// ErrNothingToFit is returned when no usable row is left.
var ErrNothingToFit = errors.New("harmonize: no row is left to merge")

// Merge collects the plan's tables, settles duplicates, fits the zero points
// and returns the merged series. When the input has problems it returns them
// all as Problems and merges nothing.
func Merge(ctx context.Context, p *plan.Plan, progress Progress) (*Series, error) {
	c, err := Collect(ctx, p, progress)
	if err != nil {
		return nil, err
	}
	if len(c.Problems) > 0 {
		return nil, c.Problems
	}
	s := &Series{Collection: c, Duplicates: c.SettleDuplicates()}
	if err := s.fit(ctx, progress); err != nil {
		return nil, err
	}
	return s, s.account()
}

// fit estimates the zero points from the rows that were not set aside.
func (s *Series) fit(ctx context.Context, progress Progress) error {
	rows := s.usedInOrderOfTime()
	if len(rows) == 0 {
		return fmt.Errorf("%w: all %d rows were set aside; set_aside rules, missing values and duplicates leave none", ErrNothingToFit, len(s.Measurements))
	}
	place, err := s.selectZeroPoints(rows)
	if err != nil {
		return err
	}
	problem, err := s.problem(rows, place)
	if err != nil {
		return err
	}
	progress.report("fitting the zero points", 0, 1)
	if s.Solution, err = zeropoints.Fit(ctx, problem); err != nil {
		return fmt.Errorf("%s: %w", s.Plan.Path, err)
	}
	progress.report("fitting the zero points", 1, 1)
	s.weigh(rows, place)
	return nil
}

// usedInOrderOfTime returns the measurements to merge, ties in the order of
// the plan.
func (s *Series) usedInOrderOfTime() []int {
	var rows []int
	for i := range s.Measurements {
		if s.Measurements[i].Fate == FateMerged {
			rows = append(rows, i)
		}
	}
	sort.SliceStable(rows, func(a, b int) bool {
		return s.Measurements[rows[a]].Epoch.BJD.Sub(s.Measurements[rows[b]].Epoch.BJD.JD) < 0
	})
	return rows
}

// selectZeroPoints keeps the plan's zero points that have rows and returns
// the place of each of the plan's among them, -1 = none.
func (s *Series) selectZeroPoints(rows []int) ([]int, error) {
	all := s.Plan.ZeroPoints()
	counts := make([]int, len(all))
	for _, i := range rows {
		counts[s.Measurements[i].ZeroPoint]++
	}
	place := make([]int, len(all))
	for k, z := range all {
		place[k] = -1
		if counts[k] > 0 {
			place[k] = len(s.ZeroPoints)
			s.ZeroPoints = append(s.ZeroPoints, z)
		} else {
			s.Remarks = append(s.Remarks, Remark{Text: fmt.Sprintf("instrument %s has no row in the merged series", z.Name)})
		}
	}
	if g := s.Plan.Gauge(); g.Kind == zeropoints.GaugeReference && place[g.Reference] < 0 {
		return nil, s.Plan.FaultAt("fit.reference_instrument", "no row of %q is left to merge; name an instrument that has rows", all[g.Reference].Name)
	}
	return place, nil
}

// problem puts the rows before the fit.
func (s *Series) problem(rows, place []int) (zeropoints.Problem, error) {
	loss, err := s.Plan.Fit.LossChoice()
	if err != nil {
		return zeropoints.Problem{}, s.Plan.FaultAt("fit.loss", "%v", err)
	}
	problem := zeropoints.Problem{Stars: []string{s.Plan.Star.Name}, Signal: s.Plan.Fit.Signal(),
		Gauge: s.Plan.Gauge(), Loss: loss, Seed: s.Plan.Fit.Seed}
	if problem.Gauge.Kind == zeropoints.GaugeReference {
		problem.Gauge.Reference = place[problem.Gauge.Reference]
	}
	for _, z := range s.ZeroPoints {
		known := s.Plan.Instruments[z.Instrument]
		instrument := zeropoints.Instrument{Name: z.Name}
		if known.ZeroPoint != nil {
			instrument.HasPublished, instrument.PublishedKms, instrument.PublishedSigmaKms = true, *known.ZeroPoint, known.ZeroPointError
		}
		problem.Instruments = append(problem.Instruments, instrument)
	}
	for _, i := range rows {
		m := &s.Measurements[i]
		problem.Observations = append(problem.Observations, zeropoints.Observation{
			TimeDays: m.Epoch.BJD.Float(), VelocityKms: m.Velocity.Kms, SigmaKms: m.SigmaKms,
			TimeSigmaDays: m.Epoch.SigmaDays, Instrument: place[m.ZeroPoint],
		})
	}
	return problem, nil
}

// weigh makes the rows of the merged series from the solution.
func (s *Series) weigh(rows, place []int) {
	s.Rows = make([]MergedRow, len(rows))
	for k, i := range rows {
		m := &s.Measurements[i]
		zero := place[m.ZeroPoint]
		z := s.Solution.ZeroPoints[zero]
		row := MergedRow{
			Measurement: i, ZeroPoint: zero,
			VelocityKms: m.Velocity.Kms - z.Kms, ErrorKms: m.SigmaKms,
			TotalErrorKms: math.Hypot(m.SigmaKms, z.JitterKms), RobustWeight: s.Solution.RobustWeights[k],
			SignalKms: s.Solution.PredictedKms[k] - z.Kms, EpochSigmaDays: m.Epoch.SigmaDays,
			UnanchoredGroup: !z.Anchored,
		}
		if row.TotalErrorKms > 0 {
			row.Weight = row.RobustWeight / (row.TotalErrorKms * row.TotalErrorKms)
		}
		s.Rows[k] = row
	}
}

// ErrRowsLost is returned when rows in differ from rows merged and set aside:
// a fault of this package, never of the input.
var ErrRowsLost = errors.New("harmonize: rows in differ from rows merged plus rows set aside")

// account asserts that every row ended in the series or was set aside with a
// reason.
func (s *Series) account() error {
	merged := make([]int, len(s.Measurements))
	for _, row := range s.Rows {
		merged[row.Measurement]++
	}
	setAside := 0
	for i := range s.Measurements {
		m := &s.Measurements[i]
		switch {
		case m.Fate == FateMerged && merged[i] == 1:
		case (m.Fate == FateSetAside || m.Fate == FateDuplicate) && merged[i] == 0 && m.Reason != "":
			setAside++
		default:
			return fmt.Errorf("%w: %s is %s and stands %d times in the series", ErrRowsLost, m.ID(s.Plan), m.Fate, merged[i])
		}
	}
	if len(s.Measurements) != len(s.Rows)+setAside {
		return fmt.Errorf("%w: %d in, %d merged, %d set aside", ErrRowsLost, len(s.Measurements), len(s.Rows), setAside)
	}
	return nil
}
