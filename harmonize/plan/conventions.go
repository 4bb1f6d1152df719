package plan

import (
	"fmt"
	"math"
	"strconv"
	"strings"

	"platemeld/epochs"
	"platemeld/zeropoints"
)

// Direction returns the star's place and motion on ICRS axes.
func (s Star) Direction() (epochs.Star, error) {
	star := epochs.Star{
		EpochJY: s.PositionEpoch, PMRAMasYr: s.PMRA, PMDecMasYr: s.PMDec,
		ParallaxMas: s.Parallax, SystemicKms: s.SystemicVelocity,
	}
	var err error
	if star.RADeg, err = angle(s.RA, epochs.ParseRA); err != nil {
		return star, fmt.Errorf("ra: %w", err)
	}
	if star.DecDeg, err = angle(s.Dec, epochs.ParseDec); err != nil {
		return star, fmt.Errorf("dec: %w", err)
	}
	switch strings.ToUpper(s.Frame) {
	case "", "ICRS":
	case "B1950":
		star, err = epochs.FromB1950(star)
	case "B1900":
		star, err = epochs.FromB1900(star)
	default:
		return star, fmt.Errorf("frame: reads %q; \"ICRS\", \"B1950\" and \"B1900\" are accepted", s.Frame)
	}
	if err != nil {
		return star, err
	}
	return star, star.Validate()
}

// angle reads a number of degrees, or a text by the given reader.
func angle(value any, read func(string) (float64, error)) (float64, error) {
	switch v := value.(type) {
	case float64:
		return v, nil
	case int64:
		return float64(v), nil
	case string:
		return read(v)
	}
	return 0, fmt.Errorf("reads %v; a text or a number of degrees is accepted", value)
}

// Place returns the site as epochs needs it. Longitude and Latitude must be
// given, as a validated plan has them.
func (s Site) Place() epochs.Site {
	return epochs.Site{Name: s.Name, LongitudeDeg: *s.Longitude, LatitudeDeg: *s.Latitude, HeightM: s.Height}
}

// Convention returns how the dates of the source are read, with the defaults
// of the plan filled in.
func (s *Source) Convention() (epochs.Convention, error) {
	t := s.Time
	c := epochs.Convention{ZoneHours: t.ZoneHours, ExposureLengthS: t.ExposureS, DecimalComma: s.DecimalComma}
	var err error
	if c.Form, err = epochs.ParseForm(t.Form); err != nil {
		return c, err
	}
	if c.Offset, err = offsetText(t.Offset); err != nil {
		return c, err
	}
	if c.Place, err = epochs.ParsePlace(orElse(t.Place, "observatory")); err != nil {
		return c, err
	}
	scale := "utc"
	if c.Place == epochs.PlaceBarycentre {
		scale = "tdb"
	}
	if c.Scale, err = epochs.ParseScale(orElse(t.Scale, scale)); err != nil {
		return c, err
	}
	if c.Calendar, err = epochs.ParseCalendar(orElse(t.Calendar, "gregorian")); err != nil {
		return c, err
	}
	if t.DayStarts != "" {
		if c.DayStart, err = epochs.ParseDayStart(t.DayStarts); err != nil {
			return c, err
		}
	}
	if c.Exposure, err = epochs.ParseExposurePoint(orElse(t.ExposurePoint, "mid")); err != nil {
		return c, err
	}
	return c, c.Validate()
}

// offsetText returns the offset of a Julian date in decimal digits.
func offsetText(value any) (string, error) {
	switch v := value.(type) {
	case nil:
		return "", nil
	case int64:
		return strconv.FormatInt(v, 10), nil
	case float64:
		return strconv.FormatFloat(v, 'f', -1, 64), nil
	case string:
		return v, nil
	}
	return "", fmt.Errorf("offset reads %v; a number of days such as 2400000.5 is accepted", value)
}

func orElse(word, otherwise string) string {
	if word == "" {
		return otherwise
	}
	return word
}

// Published returns a velocity of the source, in km/s, with the source's
// frame and convention.
func (s *Source) Published(kms float64) (epochs.PublishedVelocity, error) {
	v := epochs.PublishedVelocity{Kms: kms, PerspectiveRemoved: s.Velocity.PerspectiveRemoved}
	var err error
	if v.Frame, err = epochs.ParseFrame(s.Velocity.Frame); err != nil {
		return v, err
	}
	motion := s.Velocity.SolarMotion
	switch {
	case (v.Frame == epochs.FrameLSR) != (motion != nil):
		return v, fmt.Errorf("frame \"lsr\", and no other, needs solar_motion, the motion of the Sun that the table's author used")
	case motion != nil && !(motion.Speed >= 0 && motion.Speed <= 1000 && motion.RA >= 0 && motion.RA <= 360 && math.Abs(motion.Dec) <= 90):
		return v, fmt.Errorf("solar_motion reads %v km/s towards %v, %v; 0 to 1000 km/s and degrees are accepted", motion.Speed, motion.RA, motion.Dec)
	case motion != nil:
		v.LSR = &epochs.SolarMotion{SpeedKms: motion.Speed, ApexRADeg: motion.RA, ApexDecDeg: motion.Dec}
	case s.Velocity.KeepHeliocentric && v.Frame != epochs.FrameHeliocentric:
		return v, fmt.Errorf("keep_heliocentric goes with frame \"heliocentric\", not %q", s.Velocity.Frame)
	}
	v.Convention, err = epochs.ParseVelocityConvention(orElse(s.Velocity.Convention, "optical"))
	return v, err
}

// ErrorKind returns the source's kind of error with the default filled in.
func (s *Source) ErrorKind() string {
	if s.Error.Kind != "" {
		return s.Error.Kind
	}
	if s.Columns.Error == "" {
		return "none"
	}
	return "standard"
}

// ZeroPoint is one thing that has a zero point of its own: an instrument, or
// one era of it.
type ZeroPoint struct {
	Name       string // the instrument's name, or instrument/era
	Instrument int    // index into the plan's instruments
	Era        int    // index into its eras, 0 when it has none
}

// ZeroPoints lists what has a zero point, in the order of the plan.
func (p *Plan) ZeroPoints() []ZeroPoint {
	var list []ZeroPoint
	for i, instrument := range p.Instruments {
		if len(instrument.Eras) == 0 {
			list = append(list, ZeroPoint{Name: instrument.Name, Instrument: i})
		}
		for k, era := range instrument.Eras {
			list = append(list, ZeroPoint{Name: instrument.Name + "/" + era.Name, Instrument: i, Era: k})
		}
	}
	return list
}

// zeroPointNamed returns the index into ZeroPoints of a name.
func (p *Plan) zeroPointNamed(name string) (int, error) {
	var names []string
	for i, z := range p.ZeroPoints() {
		if Fold(z.Name) == Fold(name) {
			return i, nil
		}
		names = append(names, z.Name)
	}
	return -1, fmt.Errorf("%q is described nowhere; accepted: %s", name, strings.Join(names, ", "))
}

// EraAt returns the index of the era of instrument i at a Julian date.
func (p *Plan) EraAt(i int, jd float64) int {
	eras := p.Instruments[i].Eras
	for k, era := range eras {
		if era.Until == "" {
			return k
		}
		if end, err := era.end(); err == nil && jd <= end { // the plan was validated
			return k
		}
	}
	return max(0, len(eras)-1)
}

// end returns the Julian date (UTC) of the era's last moment. A date without
// a time of day counts to the end of that day.
func (e Era) end() (float64, error) {
	if jd, err := strconv.ParseFloat(strings.TrimSpace(e.Until), 64); err == nil {
		if !(jd > 1e6 && jd < 1e7) {
			return 0, fmt.Errorf("until reads %q; a whole Julian date such as 2453236.5 or an ISO date is accepted", e.Until)
		}
		return jd, nil
	}
	reader, err := epochs.Convention{Form: epochs.FormISO, Scale: epochs.ScaleUTC}.NewStampReader()
	if err != nil {
		return math.NaN(), err
	}
	stamp, err := reader.Read(e.Until)
	if err != nil {
		return math.NaN(), fmt.Errorf("until: %w", err)
	}
	end := stamp.JD.Float()
	if !strings.ContainsAny(e.Until, ":T") {
		end++
	}
	return end, nil
}

// LossChoice returns the loss of the fit.
func (f Fit) LossChoice() (zeropoints.Loss, error) {
	return zeropoints.ParseLoss(orElse(f.Loss, "student"))
}

// Signal returns the star's motion to be fitted.
func (f Fit) Signal() zeropoints.Signal {
	s := zeropoints.Signal{TrendDegree: f.Trend, PeriodDays: f.Period, Harmonics: f.Harmonics}
	if len(f.PeriodRange) == 2 {
		s.ScanMinDays, s.ScanMaxDays = f.PeriodRange[0], f.PeriodRange[1]
	}
	if s.Harmonics == 0 && (s.PeriodDays > 0 || s.ScanMaxDays > 0) {
		s.Harmonics = 1
	}
	return s
}

// Gauge returns what fixes the common system.
func (p *Plan) Gauge() zeropoints.Gauge {
	switch {
	case p.Fit.Gauge == "published":
		return zeropoints.Gauge{Kind: zeropoints.GaugePublished}
	case p.Fit.ReferenceInstrument != "":
		reference, err := p.zeroPointNamed(p.Fit.ReferenceInstrument)
		if err != nil {
			panic("plan: the reference instrument was validated: " + err.Error())
		}
		return zeropoints.Gauge{Kind: zeropoints.GaugeReference, Reference: reference}
	}
	return zeropoints.Gauge{Kind: zeropoints.GaugeWeightedMean}
}
