package bundle

import (
	"strconv"
	"strings"

	"platemeld/harmonize"
)

// dateDecimals prints a BJD_TDB to 1e-8 d, about a millisecond.
const dateDecimals = 8

// merged writes the series in the order of time.
func merged(s *harmonize.Series) []byte {
	t := newCSV("id", "bjd_tdb", "bjd_tdb_error_d", "velocity_kms", "error_kms", "total_error_kms",
		"weight", "robust_weight", "signal_kms", "zero_point_kms", "instrument", "era", "star",
		"source", "reference", "file", "sheet", "row", "flags")
	for i := range s.Rows {
		row := &s.Rows[i]
		m := &s.Measurements[row.Measurement]
		source := s.Plan.Sources[m.Source]
		zero := s.ZeroPoints[row.ZeroPoint]
		instrument := s.Plan.Instruments[zero.Instrument]
		era := ""
		if len(instrument.Eras) > 0 {
			era = instrument.Eras[zero.Era].Name
		}
		t.add(m.ID(s.Plan), m.Epoch.BJD.Text(dateDecimals), fixed(row.EpochSigmaDays, dateDecimals),
			kms(row.VelocityKms), orEmpty(row.ErrorKms, kms), kms(row.TotalErrorKms),
			significant(row.Weight), fixed(row.RobustWeight, 4), kms(row.SignalKms),
			kms(s.Solution.ZeroPoints[row.ZeroPoint].Kms), instrument.Name, era, s.Plan.Star.Name,
			source.Name, source.Reference, m.Place.File, m.Place.Sheet, strconv.Itoa(m.Place.Row), flags(row, m))
	}
	return t.bytes()
}

// flags names what a user of the row should know, separated by "; ".
func flags(row *harmonize.MergedRow, m *harmonize.Measurement) string {
	var list []string
	if row.UnanchoredGroup {
		list = append(list, "zero point unanchored")
	}
	if row.RobustWeight < 0.5 {
		list = append(list, "outlier")
	}
	if m.NightFault != "" {
		list = append(list, "failed the night test")
	}
	if text := m.Epoch.Flags.String(); text != "" {
		list = append(list, text)
	}
	return strings.Join(list, "; ")
}
