package bundle

import (
	"strconv"

	"platemeld/harmonize"
)

// zeroPoints writes one row for each zero point of the fit.
func zeroPoints(s *harmonize.Series) []byte {
	t := newCSV("zero_point", "instrument", "era", "rows", "zero_point_kms", "error_kms", "anchored", "group",
		"jitter_kms", "jitter_low_kms", "jitter_high_kms", "jitter_is_limit", "variance_inflation")
	for i, z := range s.ZeroPoints {
		instrument := s.Plan.Instruments[z.Instrument]
		era := ""
		if len(instrument.Eras) > 0 {
			era = instrument.Eras[z.Era].Name
		}
		fit := s.Solution.ZeroPoints[i]
		value, sigma := kms(fit.Kms), kms(fit.SigmaKms)
		if !fit.Anchored {
			value, sigma = "", ""
		}
		t.add(z.Name, instrument.Name, era, strconv.Itoa(fit.Rows), value, sigma, yesNo(fit.Anchored), strconv.Itoa(fit.Group),
			kms(fit.JitterKms), kms(fit.JitterLowKms), kms(fit.JitterHighKms), yesNo(fit.JitterIsLimit), fixed(fit.Inflation, 3))
	}
	return t.bytes()
}

// covariance writes the covariance of the zero points in km²/s², a row and a
// column for each, in the order of zeropoints.csv.
func covariance(s *harmonize.Series) []byte {
	header := []string{"zero_point"}
	for _, z := range s.ZeroPoints {
		header = append(header, z.Name)
	}
	t := newCSV(header...)
	for i, z := range s.ZeroPoints {
		cells := []string{z.Name}
		for k := range s.ZeroPoints {
			cells = append(cells, significant(s.Solution.Covariance.At(i, k)))
		}
		t.add(cells...)
	}
	return t.bytes()
}
