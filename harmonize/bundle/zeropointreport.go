package bundle

import (
	"math"

	"platemeld/harmonize"
)

// ZeroPointReport is the machine form of the zero points: all in km/s, the
// covariance in km²/s² in the order of the list.
type ZeroPointReport struct {
	ZeroPoints []ZeroPointEntry `json:"zero_points"`
	Covariance [][]float64      `json:"covariance_km2_s2"`
	Signal     []SignalEntry    `json:"signal"`
	Findings   []string         `json:"findings"`
}

// ZeroPointEntry is one zero point; an unanchored one has no value.
type ZeroPointEntry struct {
	Name        string   `json:"name"`
	Rows        int      `json:"rows"`
	Kms         *float64 `json:"zero_point_kms"`
	SigmaKms    *float64 `json:"error_kms"`
	Anchored    bool     `json:"anchored"`
	Group       int      `json:"group"`
	JitterKms   float64  `json:"jitter_kms"`
	JitterLow   float64  `json:"jitter_low_kms"`
	JitterHigh  *float64 `json:"jitter_high_kms"` // null: the rows set no limit
	JitterLimit bool     `json:"jitter_is_limit"`
	Inflation   float64  `json:"variance_inflation"`
}

// SignalEntry is one parameter of the star's fitted signal.
type SignalEntry struct {
	Name  string  `json:"name"`
	Unit  string  `json:"unit"`
	Value float64 `json:"value"`
	Sigma float64 `json:"error"`
}

// NewZeroPointReport returns the machine form of the zero points of a series.
func NewZeroPointReport(s *harmonize.Series) ZeroPointReport {
	report := ZeroPointReport{Findings: []string{}}
	for i, z := range s.ZeroPoints {
		fit := s.Solution.ZeroPoints[i]
		entry := ZeroPointEntry{Name: z.Name, Rows: fit.Rows, Anchored: fit.Anchored, Group: fit.Group, JitterKms: fit.JitterKms,
			JitterLow: fit.JitterLowKms, JitterLimit: fit.JitterIsLimit, Inflation: fit.Inflation}
		if !math.IsInf(fit.JitterHighKms, 0) {
			entry.JitterHigh = &fit.JitterHighKms
		}
		if fit.Anchored {
			entry.Kms, entry.SigmaKms = &fit.Kms, &fit.SigmaKms
		}
		report.ZeroPoints = append(report.ZeroPoints, entry)
		row := make([]float64, len(s.ZeroPoints))
		for k := range row {
			row[k] = s.Solution.Covariance.At(i, k)
		}
		report.Covariance = append(report.Covariance, row)
	}
	for _, term := range s.Solution.Terms {
		report.Signal = append(report.Signal, SignalEntry{term.Name, term.Unit, term.Value, term.Sigma})
	}
	for _, finding := range s.Solution.Findings {
		report.Findings = append(report.Findings, finding.Text)
	}
	return report
}
