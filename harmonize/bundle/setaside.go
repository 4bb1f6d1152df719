package bundle

import (
	"strconv"

	"platemeld/harmonize"
)

// setAside writes the rows kept out of the series, each with its reason and
// the row that is used instead.
func setAside(s *harmonize.Series) []byte {
	t := newCSV("id", "fate", "reason", "used_instead", "time_as_printed", "velocity_as_printed", "error_as_printed",
		"source", "reference", "file", "sheet", "row")
	for i := range s.Measurements {
		m := &s.Measurements[i]
		if m.Fate == harmonize.FateMerged {
			continue
		}
		source := s.Plan.Sources[m.Source]
		t.add(m.ID(s.Plan), m.Fate.String(), m.Reason, usedInstead(s, m), m.Raw.Time, m.Raw.Velocity, m.Raw.Error,
			source.Name, source.Reference, m.Place.File, m.Place.Sheet, strconv.Itoa(m.Place.Row))
	}
	return t.bytes()
}

// usedInstead names the row that is used for a duplicate, or "".
func usedInstead(s *harmonize.Series, m *harmonize.Measurement) string {
	if m.DuplicateOf < 0 {
		return ""
	}
	return s.Measurements[m.DuplicateOf].ID(s.Plan)
}
