package plan

import "fmt"

// Assumed lists what is taken for granted about the source because the plan
// does not state it, as "key = value".
func (s *Source) Assumed() []string {
	var list []string
	note := func(stated, key string, value any) {
		if stated == "" {
			list = append(list, fmt.Sprintf("%s = \"%v\"", key, value))
		}
	}
	convention, err := s.Convention()
	if err != nil {
		return nil // validation has reported it
	}
	note(s.Time.Scale, "time.scale", convention.Scale)
	note(s.Time.Place, "time.place", convention.Place)
	note(s.Time.ExposurePoint, "time.exposure_point", convention.Exposure)
	note(s.Velocity.Convention, "velocity.convention", "optical")
	note(s.Error.Kind, "error.kind", s.ErrorKind())
	return list
}
