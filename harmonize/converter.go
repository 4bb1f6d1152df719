package harmonize

import (
	"platemeld/epochs"
	"platemeld/epochs/ephemeris"
	"platemeld/harmonize/plan"
)

// newConverter returns the converter for the plan's star, on the plan's
// ephemeris.
func newConverter(p *plan.Plan) (*epochs.Converter, error) {
	star, err := p.Star.Direction()
	if err != nil {
		return nil, p.FaultAt("star", "%v", err)
	}
	source, err := openEphemeris(p)
	if err != nil {
		return nil, err
	}
	converter, err := epochs.NewConverter(star, source)
	if err != nil {
		return nil, p.FaultAt("star", "%v", err)
	}
	return converter, nil
}

// openEphemeris returns the plan's ephemeris, or nil for the embedded one.
func openEphemeris(p *plan.Plan) (epochs.Ephemeris, error) {
	if p.Ephemeris == "" {
		return nil, nil
	}
	kernel, err := ephemeris.OpenSPK(p.File(p.Ephemeris))
	if err != nil {
		return nil, p.FaultAt("ephemeris", "%v", err)
	}
	embedded, err := ephemeris.Embedded()
	if err != nil {
		return nil, err
	}
	return ephemeris.Layered{kernel, embedded}, nil
}
