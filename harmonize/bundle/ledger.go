package bundle

import (
	"strconv"

	"platemeld/harmonize"
)

// ledger writes what became of every input row, step by step: the cells as
// printed, the date as read, its light time, the velocity's change of frame,
// the error, the zero point and the weight. Cells of steps that a row did not
// reach are empty.
func ledger(s *harmonize.Series) []byte {
	t := newCSV("id", "source", "reference", "file", "sheet", "row", "fate", "reason", "used_instead",
		"time_as_printed", "velocity_as_printed", "error_as_printed", "instrument_as_printed",
		"star_as_printed", "exposure", "remark",
		"instrument", "stamp_jd", "stamp_scale", "stamp_place", "stamp_resolution_d",
		"delta_t_s", "observer_tt_jd", "roemer_sun_s", "roemer_barycentre_s", "shapiro_s", "curvature_s",
		"tdb_minus_tt_s", "bjd_tdb", "bjd_tdb_error_d",
		"night_test", "published_kms", "published_frame", "change_to_barycentre_ms", "sun_along_sight_ms", "relativity_ms",
		"barycentric_kms",
		"error_from", "error_kms", "zero_point_kms", "jitter_kms", "robust_weight", "merged_kms")
	inSeries := make(map[int]*harmonize.MergedRow, len(s.Rows))
	for i := range s.Rows {
		inSeries[s.Rows[i].Measurement] = &s.Rows[i]
	}
	for i := range s.Measurements {
		m := &s.Measurements[i]
		cells := append(origin(s, m), conversion(s, m)...)
		t.add(append(cells, correction(s, inSeries[i])...)...)
	}
	return t.bytes()
}

// origin is where a row comes from, what it says and what became of it.
func origin(s *harmonize.Series, m *harmonize.Measurement) []string {
	source := s.Plan.Sources[m.Source]
	return []string{m.ID(s.Plan), source.Name, source.Reference, m.Place.File, m.Place.Sheet, strconv.Itoa(m.Place.Row),
		m.Fate.String(), m.Reason, usedInstead(s, m),
		m.Raw.Time, m.Raw.Velocity, m.Raw.Error, m.Raw.Instrument, m.Raw.Star, m.Raw.Exposure, m.Raw.Remark}
}

// conversion is the way of a row to the barycentre.
func conversion(s *harmonize.Series, m *harmonize.Measurement) []string {
	const steps = 23
	if m.ZeroPoint < 0 {
		return make([]string, steps)
	}
	source := s.Plan.Sources[m.Source]
	terms := m.Epoch.Terms
	seconds := func(v float64) string { return fixed(v, 6) }
	return []string{s.Plan.Instruments[m.Instrument].Name,
		m.Stamp.JD.Text(dateDecimals), m.Stamp.Scale.String(), m.Stamp.Place.String(), strconv.FormatFloat(m.Stamp.QuantumDays, 'g', 3, 64),
		orEmpty(terms.DeltaTS, seconds), m.Epoch.ObserverTT.Text(dateDecimals), seconds(terms.RoemerSunS), seconds(terms.RoemerBarycentreS),
		seconds(terms.ShapiroS), seconds(terms.CurvatureS), seconds(terms.TDBMinusTTS),
		m.Epoch.BJD.Text(dateDecimals), fixed(m.Epoch.SigmaDays, dateDecimals),
		m.NightFault, kms(m.PublishedKms), source.Velocity.Frame, fixed((m.Velocity.Kms-m.PublishedKms)*1000, 3),
		fixed(m.Velocity.SunAlongSightMs, 3), fixed(m.Velocity.Terms.RelativityMs, 3), kms(m.Velocity.Kms),
		m.ErrorFrom.String(), orEmpty(m.SigmaKms, kms)}
}

// correction is what the fit did to a row of the series; nil is no such row.
func correction(s *harmonize.Series, row *harmonize.MergedRow) []string {
	if row == nil {
		return make([]string, 4)
	}
	z := s.Solution.ZeroPoints[row.ZeroPoint]
	return []string{kms(z.Kms), kms(z.JitterKms), fixed(row.RobustWeight, 4), kms(row.VelocityKms)}
}
