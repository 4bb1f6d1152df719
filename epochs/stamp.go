package epochs

import (
	"errors"
	"fmt"
	"math"
	"strings"
)

// The errors of reading a stamp.
var (
	ErrUnreadable = errors.New("epochs: unreadable date")
	ErrAmbiguous  = errors.New("epochs: ambiguous date")
)

// Stamp is a date as printed, on the scale and at the place of its
// convention, with calendar, noon and offset resolved. It becomes an instant
// only with a star and a site, by Converter.Epoch.
type Stamp struct {
	Text            string
	JD              JD // on Scale at Place; on ScaleUTC a quasi Julian date, see UTC
	Scale           Scale
	Place           Place
	ZoneHours       float64
	QuantumDays     float64 // one unit of the last printed digit
	Exposure        ExposurePoint
	ExposureLengthS float64 // seconds, 0 = unknown
	// DayFromNoon: a local sidereal time belongs to the day that starts at noon
	// of its date. JD counts sidereal days from midnight of the date either way.
	DayFromNoon bool
}

// SigmaDays returns the standard uncertainty in days that comes from the
// printed digits: a number rounded to a quantum is uniform within half of it.
func (s Stamp) SigmaDays() float64 { return s.QuantumDays / math.Sqrt(12) }

// StampReader reads the dates of one table, in the order of its rows: a date
// in split columns can refer to the row above. It is not safe for concurrent
// use.
type StampReader struct {
	convention Convention
	offset     decimalNumber
	above      Fields // year, month and day of the last row, for dittos
}

// NewStampReader returns a reader for the dates of one table. The error wraps
// ErrConvention.
func (c Convention) NewStampReader() (*StampReader, error) {
	if err := c.Validate(); err != nil {
		return nil, err
	}
	r := &StampReader{convention: c}
	if c.Offset != "" {
		offset, _, err := parseDecimal(c.Offset, false)
		if err != nil {
			return nil, fmt.Errorf("%w: the offset reads %q", ErrConvention, c.Offset)
		}
		r.offset = offset
	}
	return r, nil
}

// Read reads the date in one cell. The error wraps ErrUnreadable, ErrDate or
// ErrAmbiguous and says what would be accepted.
func (r *StampReader) Read(text string) (Stamp, error) {
	switch r.convention.Form {
	case FormJD, FormMJD:
		return r.readJD(text)
	case FormISO:
		return r.readISO(text)
	case FormCivil:
		return r.readCivil(text)
	case FormJulianYear, FormBesselianYear, FormCivilYear:
		return r.readYear(text)
	case FormSpreadsheet:
		return r.ReadSerial(text, false)
	}
	return Stamp{}, fmt.Errorf("%w: form %q has a column for each part of the date", ErrUnreadable, r.convention.Form)
}

// stamp fills in what the convention says.
func (r *StampReader) stamp(text string, jd JD, quantumDays float64) Stamp {
	c := r.convention
	return Stamp{Text: text, JD: jd, Scale: c.Scale, Place: c.Place, ZoneHours: c.ZoneHours,
		QuantumDays: quantumDays, Exposure: c.Exposure, ExposureLengthS: c.ExposureLengthS}
}

// unreadable returns the error about a text, with what would be accepted.
func (r *StampReader) unreadable(accepted string) error {
	return fmt.Errorf("%w; accepted: %s", ErrUnreadable, accepted)
}

// The Julian dates that a table of stellar spectra can hold: 1800 to 2200.
const (
	earliestJD = 2378496.5
	latestJD   = 2524593.5
)

// readJD reads a Julian date, less the offset.
func (r *StampReader) readJD(text string) (Stamp, error) {
	n, _, err := parseDecimal(text, r.convention.DecimalComma)
	if err != nil {
		return Stamp{}, r.unreadable("decimal digits such as 2453162.5123")
	}
	offset := r.offset
	if r.convention.Form == FormMJD {
		offset = decimalNumber{whole: 2400000, fraction: 0.5}
	}
	jd := NewJD(n.whole+offset.whole, n.fraction+offset.fraction)
	if !(jd.Float() >= earliestJD && jd.Float() <= latestJD) {
		return Stamp{}, fmt.Errorf("%w: that is JD %s, not in 1800 to 2200; is the offset right?", ErrUnreadable, jd.Text(4))
	}
	return r.stamp(text, jd, n.quantum), nil
}

// readYear reads a year with a fraction.
func (r *StampReader) readYear(text string) (Stamp, error) {
	n, digits, err := parseDecimal(text, r.convention.DecimalComma)
	if err != nil || digits != 4 || !(n.whole >= 1800 && n.whole < 2200) {
		return Stamp{}, r.unreadable("a year of four digits from 1800 to 2200 with a fraction, such as 1908.62")
	}
	var jd JD
	length := 365.25
	switch r.convention.Form {
	case FormJulianYear: // IAU 1976: J = 2000 + (JD - 2451545)/365.25
		jd = NewJD(2451545+(n.whole-2000)*365.25, n.fraction*365.25)
	case FormBesselianYear: // Lieske 1979, A&A 73, 282: B = 1900 + (JD - 2415020.31352)/365.242198781
		length = 365.242198781
		jd = NewJD(2415020, 0.31352+(n.whole-1900)*0.242198781+n.fraction*length).Add((n.whole - 1900) * 365)
	default:
		year := int(n.whole)
		start, err := DayNumber(r.convention.Calendar, year, 1, 1)
		if err != nil {
			return Stamp{}, err
		}
		length = 365
		if IsLeapYear(r.convention.Calendar, year) {
			length = 366
		}
		jd = NewJD(start, n.fraction*length)
	}
	return r.stamp(text, jd, n.quantum*length), nil
}

// civilDay is a calendar date with a time of day, as printed.
type civilDay struct {
	year, month, day int
	fraction         float64 // of the day as counted, from noon or midnight
	leapSecond       bool    // within 23:59:60
	quantumDays      float64
}

// fromCivil turns a calendar date into a stamp: calendar, noon, and the
// question what G.M.T. means.
func (r *StampReader) fromCivil(text string, d civilDay) (Stamp, error) {
	c := r.convention
	midnight, err := DayNumber(c.Calendar, d.year, d.month, d.day)
	if err != nil {
		return Stamp{}, err
	}
	const year1925 = 2424151.5
	if c.Scale == ScaleGMT && c.DayStart == DayStartUnstated && midnight < year1925 {
		return Stamp{}, fmt.Errorf("%w: before 1925 a day of G.M.T. can start at noon or at midnight; state day_starts = \"noon\" or \"midnight\" (or scale \"gmat\" or \"ut\")", ErrAmbiguous)
	}
	jd := NewJD(midnight, d.fraction)
	fromNoon := c.Scale == ScaleGMAT || c.DayStart == DayStartNoon
	sidereal := c.Scale == ScaleLocalSidereal
	if fromNoon && !sidereal {
		jd = jd.Add(0.5)
	}
	if c.Scale == ScaleUTC && jd.Float() >= utcStart {
		jd, err = r.stretched(jd, d)
	} else if d.leapSecond {
		err = r.unreadable("seconds below 60; only UTC has 23:59:60")
	}
	s := r.stamp(text, jd, d.quantumDays)
	s.DayFromNoon = fromNoon && sidereal
	return s, err
}

// stretched makes a quasi Julian date of a UTC date: on a day of 86401 s the
// fraction shrinks accordingly.
func (r *StampReader) stretched(jd JD, d civilDay) (JD, error) {
	mjd, fraction := mjdOf(jd)
	if d.leapSecond { // fraction went one second past the day
		mjd, fraction = mjd-1, fraction+1
	}
	length := dayLengthS(mjd)
	if d.leapSecond && length <= SecondsPerDay {
		return jd, fmt.Errorf("%w: no leap second ended that day; accepted: seconds below 60", ErrUnreadable)
	}
	if length == SecondsPerDay {
		return jd, nil
	}
	return NewJD(mjd+2400001, -0.5).Add(fraction * SecondsPerDay / length), nil
}

// ReadSerial reads the serial number of a spreadsheet's date cell: days since
// the end of 1899 with a 29 February 1900 that never was (ECMA-376, part 1,
// 18.17.4), or since 1 January 1904. The error wraps ErrUnreadable.
func (r *StampReader) ReadSerial(serial string, system1904 bool) (Stamp, error) {
	n, _, err := parseDecimal(serial, false)
	if err != nil {
		return Stamp{}, r.unreadable("the serial number of a date cell, such as 36526.25")
	}
	origin := 2415018.5
	switch {
	case system1904:
		origin = 2416480.5
	case n.whole == 60:
		return Stamp{}, fmt.Errorf("%w: serial 60 is 29 February 1900, a day that never was", ErrDate)
	case n.whole < 60:
		origin++
	}
	if !(n.whole+n.fraction >= 0 && n.whole < 200000) || !system1904 && n.whole < 1 {
		return Stamp{}, r.unreadable("a serial number of 1 to 200000 (0 in the 1904 system)")
	}
	// Cells are stored as binary fractions of a day: 1 ms is what a clock
	// reading survives with.
	quantum := math.Max(n.quantum, 1e-3/SecondsPerDay)
	jd := NewJD(origin, 0).Add(n.whole).Add(n.fraction)
	year, month, day, fraction := jd.CivilDate(CalendarGregorian)
	return r.fromCivilGregorian(serial, civilDay{year: year, month: month, day: day, fraction: fraction, quantumDays: quantum})
}

// fromCivilGregorian is fromCivil for a date that a spreadsheet has counted:
// its calendar is the Gregorian one, whatever the table's.
func (r *StampReader) fromCivilGregorian(text string, d civilDay) (Stamp, error) {
	other := *r
	other.convention.Calendar = CalendarGregorian
	return other.fromCivil(text, d)
}

// Fields are the parts of a date in columns of their own, as printed; those
// without a column are empty.
type Fields struct{ Year, Month, Day, Hour, Minute, Second string }

// ReadFields reads a date in columns of its own. A year, month or day that is
// blank or a ditto is that of the row above. The error wraps ErrUnreadable,
// ErrDate or ErrAmbiguous.
func (r *StampReader) ReadFields(f Fields) (Stamp, error) {
	for _, part := range []struct{ now, above *string }{{&f.Year, &r.above.Year}, {&f.Month, &r.above.Month}, {&f.Day, &r.above.Day}} {
		if isDitto(*part.now) {
			if *part.above == "" {
				return Stamp{}, r.unreadable("a first row with year, month and day; \"as above\" has no row above")
			}
			*part.now = *part.above
		}
		*part.above = *part.now
	}
	text := strings.Join(strings.Fields(strings.Join([]string{f.Year, f.Month, f.Day, f.Hour, f.Minute, f.Second}, " ")), " ")
	d, err := r.fieldsDate(f)
	if err != nil {
		return Stamp{}, err
	}
	return r.fromCivil(text, d)
}

func isDitto(text string) bool {
	switch strings.ToLower(strings.TrimSpace(text)) {
	case "", `"`, "''", ",,", "„", "”", "“", "〃", "do.", "do", "id.", "id", "-":
		return true
	}
	return false
}

// fieldsDate reads the parts.
func (r *StampReader) fieldsDate(f Fields) (civilDay, error) {
	year, digits, err := parseDecimal(f.Year, false)
	if err != nil || year.fraction != 0 || year.quantum != 1 || digits != 4 {
		return civilDay{}, r.unreadable("a year of four digits")
	}
	month, ok := monthNamed(f.Month)
	if !ok {
		return civilDay{}, r.unreadable("a month as a number, a name or a Roman numeral")
	}
	day, _, err := parseDecimal(f.Day, r.convention.DecimalComma)
	if err != nil || day.whole < 0 || day.whole > 99 {
		return civilDay{}, r.unreadable("a day with or without a fraction")
	}
	d := civilDay{year: int(year.whole), month: month, day: int(day.whole), fraction: day.fraction, quantumDays: day.quantum}
	return r.addClock(d, f.Hour, f.Minute, f.Second)
}

// addClock adds hours, minutes and seconds, of which only the last given can
// have a fraction, and none when the day has one.
func (r *StampReader) addClock(d civilDay, hour, minute, second string) (civilDay, error) {
	accepted := "hours 0 to 23, minutes and seconds 0 to 59, a fraction only in the last of them"
	limits := [3]float64{24, 60, 60}
	unit := [3]float64{1.0 / 24, 1.0 / 1440, 1.0 / 86400}
	seconds := 0.0
	final := d.quantumDays < 1 // the part before has a fraction
	for i, text := range []string{hour, minute, second} {
		if strings.TrimSpace(text) == "" {
			continue
		}
		n, _, err := parseDecimal(text, r.convention.DecimalComma)
		if err != nil || final || n.whole < 0 || i > 0 && []string{hour, minute}[i-1] == "" {
			return d, r.unreadable(accepted)
		}
		if !(n.whole < limits[i]) {
			if i != 2 || n.whole != 60 || d.fraction != 0 || seconds != 23*3600+59*60 {
				return d, r.unreadable(accepted)
			}
			d.leapSecond = true
		}
		final = n.quantum < 1
		seconds += (n.whole + n.fraction) * unit[i] * SecondsPerDay
		d.quantumDays = n.quantum * unit[i]
	}
	d.fraction += seconds / SecondsPerDay
	return d, nil
}
