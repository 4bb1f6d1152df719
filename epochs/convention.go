package epochs

import (
	"errors"
	"fmt"
	"math"
	"strings"
)

// Form is the form in which a table prints its dates.
type Form int

// The forms.
const (
	FormJD            Form = iota // Julian date, less a stated offset
	FormMJD                       // JD - 2400000.5
	FormISO                       // 2003-06-01T04:12:30.5
	FormCivil                     // a date as printed: 1908 Jan 14.62, 14. Mai 1931 3h 12m
	FormFields                    // year, month, day and time in columns of their own
	FormJulianYear                // 2000 + (JD - 2451545)/365.25
	FormBesselianYear             // 1900 + (JD - 2415020.31352)/365.242198781
	FormCivilYear                 // a calendar year and the fraction of its days
	FormSpreadsheet               // the serial number of a date cell
)

var formWords = []string{"jd", "mjd", "iso", "civil", "fields", "julian_year", "besselian_year", "civil_year", "spreadsheet"}

// Scale is the time scale on which a table gives its dates.
type Scale int

// The scales.
const (
	ScaleUTC           Scale = iota // from 1960; before that the word is taken for UT
	ScaleUT                         // mean solar time of Greenwich, the day from midnight
	ScaleGMT                        // the same label before 1925, when the day could start at noon
	ScaleGMAT                       // Greenwich mean astronomical time, the day from noon
	ScaleUT1                        // the rotation of the Earth
	ScaleLocalMean                  // mean solar time of the site
	ScaleZone                       // Greenwich time plus a number of hours
	ScaleLocalSidereal              // sidereal time of the site
	ScaleTAI
	ScaleTT // also Ephemeris Time
	ScaleTDB
	ScaleTCB
)

var scaleWords = []string{"utc", "ut", "gmt", "gmat", "ut1", "local_mean", "zone", "local_sidereal", "tai", "tt", "tdb", "tcb"}

// Place is where the light was when the clock showed the date.
type Place int

// The places.
const (
	PlaceObservatory Place = iota
	PlaceGeocentre
	PlaceHeliocentre // HJD
	PlaceBarycentre  // BJD
)

var placeWords = []string{"observatory", "geocentre", "heliocentre", "barycentre"}

// Calendar is the calendar of civil dates.
type Calendar int

// The calendars.
const (
	CalendarGregorian Calendar = iota
	CalendarJulian             // Old Style
)

var calendarWords = []string{"gregorian", "julian"}

// DayStart says when a day of civil dates begins.
type DayStart int

// The starts of the day.
const (
	DayStartUnstated DayStart = iota
	DayStartMidnight
	DayStartNoon // noon of the civil date, the astronomical day before 1925
)

var dayStartWords = []string{"", "midnight", "noon"}

// ExposurePoint is the moment of the exposure that a date gives.
type ExposurePoint int

// The points of an exposure.
const (
	ExposureMid ExposurePoint = iota
	ExposureStart
	ExposureEnd
	ExposureUnknown
)

var exposureWords = []string{"mid", "start", "end", "unknown"}

// String returns the word by which a plan names the value.
func (f Form) String() string          { return wordOf(int(f), formWords) }
func (s Scale) String() string         { return wordOf(int(s), scaleWords) }
func (p Place) String() string         { return wordOf(int(p), placeWords) }
func (c Calendar) String() string      { return wordOf(int(c), calendarWords) }
func (d DayStart) String() string      { return wordOf(int(d), dayStartWords) }
func (e ExposurePoint) String() string { return wordOf(int(e), exposureWords) }

// ParseForm returns the form of a word; the error lists the words.
func ParseForm(word string) (Form, error) {
	i, err := findWord("form", word, formWords)
	return Form(i), err
}

// ParseScale returns the scale of a word; the error lists the words. "et" is
// another word for "tt".
func ParseScale(word string) (Scale, error) {
	if strings.EqualFold(strings.TrimSpace(word), "et") {
		return ScaleTT, nil
	}
	i, err := findWord("scale", word, scaleWords)
	return Scale(i), err
}

// ParsePlace returns the place of a word; the error lists the words.
func ParsePlace(word string) (Place, error) {
	i, err := findWord("place", word, placeWords)
	return Place(i), err
}

// ParseCalendar returns the calendar of a word; the error lists the words.
func ParseCalendar(word string) (Calendar, error) {
	i, err := findWord("calendar", word, calendarWords)
	return Calendar(i), err
}

// ParseDayStart returns the start of the day of a word; the error lists the
// words.
func ParseDayStart(word string) (DayStart, error) {
	i, err := findWord("day_starts", word, dayStartWords[1:])
	return DayStart(i + 1), err
}

// ParseExposurePoint returns the point of the exposure of a word; the error
// lists the words.
func ParseExposurePoint(word string) (ExposurePoint, error) {
	i, err := findWord("exposure_point", word, exposureWords)
	return ExposurePoint(i), err
}

// Convention says how the dates of a table are to be read.
type Convention struct {
	Form            Form
	Offset          string // days that were subtracted from the JD, in decimal digits; "" = 0; for FormJD
	Scale           Scale
	ZoneHours       float64 // for ScaleZone: zone time - Greenwich time, in hours, east positive
	Place           Place
	Calendar        Calendar
	DayStart        DayStart
	Exposure        ExposurePoint
	ExposureLengthS float64 // seconds, 0 = unknown
	DecimalComma    bool
}

// ErrConvention is what every error about a convention that contradicts
// itself unwraps to.
var ErrConvention = errors.New("epochs: impossible convention")

// Validate reports a convention whose parts contradict each other. The error
// unwraps to ErrConvention.
func (c Convention) Validate() error {
	calendarForm := c.Form == FormISO || c.Form == FormCivil || c.Form == FormFields || c.Form == FormSpreadsheet
	switch {
	case c.Offset != "" && c.Form != FormJD:
		return fmt.Errorf("%w: an offset goes with form \"jd\", not %q", ErrConvention, c.Form)
	case c.Scale == ScaleZone && !(math.Abs(c.ZoneHours) <= 15):
		return fmt.Errorf("%w: a zone of %v hours; -15 to 15, east of Greenwich positive, is accepted", ErrConvention, c.ZoneHours)
	case c.Scale != ScaleZone && c.ZoneHours != 0:
		return fmt.Errorf("%w: zone_hours goes with scale \"zone\", not %q", ErrConvention, c.Scale)
	case c.Scale == ScaleGMAT && c.DayStart == DayStartMidnight:
		return fmt.Errorf("%w: the day of \"gmat\" starts at noon; for a day from midnight the scale is \"ut\"", ErrConvention)
	case c.DayStart == DayStartNoon && !calendarForm:
		return fmt.Errorf("%w: day_starts goes with calendar dates, not with form %q", ErrConvention, c.Form)
	case c.Calendar == CalendarJulian && !calendarForm:
		return fmt.Errorf("%w: a calendar goes with calendar dates, not with form %q", ErrConvention, c.Form)
	case c.Scale == ScaleLocalSidereal && c.Form != FormISO && c.Form != FormCivil && c.Form != FormFields:
		return fmt.Errorf("%w: sidereal time goes with a calendar date and hours, not with form %q", ErrConvention, c.Form)
	case !(c.ExposureLengthS >= 0) || math.IsInf(c.ExposureLengthS, 0):
		return fmt.Errorf("%w: an exposure of %v s; a number not below 0 is accepted", ErrConvention, c.ExposureLengthS)
	case (c.Place == PlaceHeliocentre || c.Place == PlaceBarycentre) && (c.Scale == ScaleLocalMean || c.Scale == ScaleLocalSidereal || c.Scale == ScaleZone):
		return fmt.Errorf("%w: local time at the %s", ErrConvention, c.Place)
	}
	if _, _, err := parseDecimal(c.Offset, false); c.Offset != "" && err != nil {
		return fmt.Errorf("%w: the offset reads %q; decimal digits such as 2400000.5 are accepted", ErrConvention, c.Offset)
	}
	return nil
}
