package harmonize

import (
	"strings"

	"platemeld/epochs"
	"platemeld/harmonize/plan"
)

// Stamps converts single dates as the rows of a source are converted.
type Stamps struct {
	reader    *epochs.StampReader
	converter *epochs.Converter
	site      *epochs.Site
}

// StampSettings says how single dates are to be converted. With a Plan the
// star is the plan's; with a Source of it the dates are read as that source's,
// save for the keys of Time that are set here.
type StampSettings struct {
	Plan               *plan.Plan // nil = Star is used
	Source, Instrument string     // names in the plan, "" = none
	Star               plan.Star
	Time               plan.Time
	Site               *epochs.Site // nil = that of the instrument, if any
}

// NewStamps returns a converter for single dates.
func NewStamps(settings StampSettings) (*Stamps, error) {
	s := &Stamps{site: settings.Site}
	source, err := settings.source()
	if err != nil {
		return nil, err
	}
	convention, err := source.Convention()
	if err != nil {
		return nil, err
	}
	if s.reader, err = convention.NewStampReader(); err != nil {
		return nil, err
	}
	p := settings.Plan
	if p == nil {
		p = &plan.Plan{Path: "the command line", Star: settings.Star}
	}
	if s.converter, err = newConverter(p); err != nil {
		return nil, err
	}
	if s.site == nil {
		s.site, err = siteOf(p, orElse(settings.Instrument, source.Instrument))
	} else {
		err = s.site.Validate()
	}
	return s, err
}

// source returns the source of the plan, or an empty one, with the keys of
// Time that are set.
func (settings *StampSettings) source() (plan.Source, error) {
	var source plan.Source
	if settings.Plan != nil && settings.Source != "" {
		found, err := settings.Plan.SourceNamed(settings.Source)
		if err != nil {
			return source, err
		}
		source = *found
	}
	source.Time = overlay(source.Time, settings.Time)
	return source, nil
}

// Convert reads a date and converts it to BJD_TDB.
func (s *Stamps) Convert(text string) (epochs.Epoch, error) {
	stamp, err := s.reader.Read(strings.TrimSpace(text))
	if err != nil {
		return epochs.Epoch{}, err
	}
	return s.converter.Epoch(stamp, s.site)
}

// ConvertWithVelocity is Convert with what it takes to refer a velocity of
// zero, observed at the site or else at the Earth's centre, to the barycentre:
// the velocity correction.
func (s *Stamps) ConvertWithVelocity(text string) (epochs.Epoch, epochs.BarycentricVelocity, error) {
	stamp, err := s.reader.Read(strings.TrimSpace(text))
	if err != nil {
		return epochs.Epoch{}, epochs.BarycentricVelocity{}, err
	}
	frame := epochs.FrameTopocentric
	if s.site == nil {
		frame = epochs.FrameGeocentric
	}
	return s.converter.Convert(stamp, epochs.PublishedVelocity{Frame: frame}, s.site)
}

// siteOf returns the site of an instrument of the plan, or nil.
func siteOf(p *plan.Plan, instrument string) (*epochs.Site, error) {
	if instrument == "" {
		return nil, nil
	}
	i, err := p.InstrumentNamed(instrument)
	if err != nil {
		return nil, err
	}
	site := p.SiteNamed(p.Instruments[i].Site)
	if site == nil {
		return nil, nil
	}
	place := site.Place()
	return &place, nil
}

// overlay returns base with every key that over sets.
func overlay(base, over plan.Time) plan.Time {
	base.Form = orElse(over.Form, base.Form)
	base.Scale = orElse(over.Scale, base.Scale)
	base.Place = orElse(over.Place, base.Place)
	base.Calendar = orElse(over.Calendar, base.Calendar)
	base.DayStarts = orElse(over.DayStarts, base.DayStarts)
	base.ExposurePoint = orElse(over.ExposurePoint, base.ExposurePoint)
	if over.Offset != nil {
		base.Offset = over.Offset
	}
	if over.ZoneHours != 0 {
		base.ZoneHours = over.ZoneHours
	}
	if over.ExposureS != 0 {
		base.ExposureS = over.ExposureS
	}
	return base
}

func orElse(word, otherwise string) string {
	if word == "" {
		return otherwise
	}
	return word
}
