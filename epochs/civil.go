package epochs

import (
	"fmt"
	"regexp"
	"strconv"
	"strings"
)

// The parts of civil dates as printed.
const (
	yearPattern  = `(?P<year>\d{4})`
	monthPattern = `(?P<month>\p{L}+)\.?`
	dayPattern   = `(?P<day>\d{1,2}(?:[.,]\d+)?)(?:(?P<join>[-/])(?P<other>\d{1,2}))?`
	clockPattern = `(?:[\s,T]+(?P<hour>\d{1,2}(?:[.,]\d+)?)\s*(?:[h:]|[\s])?\s*(?:(?P<minute>\d{1,2}(?:[.,]\d+)?)\s*(?:[m:']|[\s])?\s*(?:(?P<second>\d{1,2}(?:[.,]\d+)?)\s*(?:s|'')?)?)?)?`
	gap          = `[\s.,]+`
)

// civilPatterns are the orders in which tables print a date. A month as a
// number is read only between year and day.
var civilPatterns = []*regexp.Regexp{
	regexp.MustCompile(`^` + yearPattern + gap + monthPattern + `\s*` + dayPattern + `\.?` + clockPattern + `$`),
	regexp.MustCompile(`^` + dayPattern + `\.?\s*` + monthPattern + gap + yearPattern + clockPattern + `$`),
	regexp.MustCompile(`^` + monthPattern + `\s*` + dayPattern + gap + yearPattern + clockPattern + `$`),
	regexp.MustCompile(`^` + yearPattern + `[\s.,/-]+(?P<month>\d{1,2})[\s.,/-]+` + dayPattern + clockPattern + `$`),
}

// acceptedCivil says what a civil date can look like.
const acceptedCivil = "a date such as \"1908 Jan 14.62\", \"14. Mai 1931 3h 12m\", \"1908 I 14.62\" or \"1908 01 14.62\""

// longestDate bounds a cell before it is matched.
const longestDate = 100

// readCivil reads a date as printed in one cell.
func (r *StampReader) readCivil(text string) (Stamp, error) {
	if len(text) > longestDate {
		return Stamp{}, r.unreadable(acceptedCivil)
	}
	plain := strings.NewReplacer("·", ".", "−", "-", "–", "-", "—", "-", "\u00a0", " ").Replace(strings.TrimSpace(text))
	if !r.convention.DecimalComma && decimalCommaInDay.MatchString(plain) {
		return Stamp{}, r.unreadable(acceptedCivil + " (a decimal comma needs decimal_comma = true)")
	}
	for _, pattern := range civilPatterns {
		if match := pattern.FindStringSubmatch(plain); match != nil {
			part := func(name string) string { return match[max(0, pattern.SubexpIndex(name))] }
			d, err := r.civilParts(part)
			if err != nil {
				return Stamp{}, err
			}
			return r.fromCivil(text, d)
		}
	}
	return Stamp{}, r.unreadable(acceptedCivil)
}

var decimalCommaInDay = regexp.MustCompile(`\d,\d`)

// civilParts reads the matched parts of a civil date.
func (r *StampReader) civilParts(part func(string) string) (civilDay, error) {
	month, ok := monthNamed(part("month"))
	if !ok {
		return civilDay{}, r.unreadable(acceptedCivil)
	}
	year, err := strconv.Atoi(part("year"))
	if err != nil {
		return civilDay{}, r.unreadable(acceptedCivil)
	}
	day, _, err := parseDecimal(part("day"), r.convention.DecimalComma)
	if err != nil {
		return civilDay{}, r.unreadable(acceptedCivil)
	}
	d := civilDay{year: year, month: month, day: int(day.whole), fraction: day.fraction, quantumDays: day.quantum}
	if part("other") != "" {
		if d, err = r.twoDays(d, part("join"), part("other"), part("hour") != ""); err != nil {
			return d, err
		}
	}
	return r.addClock(d, part("hour"), part("minute"), part("second"))
}

// twoDays reads a day printed as two numbers: "14/27" in both calendars, and
// "14-15" for the night that joins two days, whose middle is meant when no
// time is given.
func (r *StampReader) twoDays(d civilDay, join, otherText string, clock bool) (civilDay, error) {
	other, err := strconv.Atoi(otherText)
	if err != nil || d.quantumDays < 1 {
		return d, r.unreadable(acceptedCivil)
	}
	if join == "/" {
		return r.bothCalendars(d, other)
	}
	next := d.day + 1
	if next > DaysInMonth(r.convention.Calendar, d.year, d.month) {
		next = 1
	}
	if other != next || clock {
		return d, fmt.Errorf("%w: a night is printed as two days that follow each other, without a time; accepted: such as \"Jan. 14-15\"", ErrUnreadable)
	}
	if r.convention.Scale == ScaleGMAT || r.convention.DayStart == DayStartNoon {
		d.fraction = 0.5 // the day from noon is the night
		return d, nil
	}
	d.fraction, d.quantumDays = 1, 0.5
	return d, nil
}

// bothCalendars reads "14/27 Jan.": 14 in the Julian calendar, 27 in the
// Gregorian. The month is that of the convention's calendar.
func (r *StampReader) bothCalendars(d civilDay, gregorianDay int) (civilDay, error) {
	julian, err := DayNumber(CalendarJulian, d.year, d.month, d.day)
	year, month, day, _ := NewJD(julian, 0).CivilDate(CalendarGregorian)
	if err != nil || day != gregorianDay {
		// The month printed may be the Gregorian one; it can lack the Julian day.
		previousYear, previousMonth := d.year, d.month-1
		if previousMonth == 0 {
			previousYear, previousMonth = d.year-1, 12
		}
		if julian, err = DayNumber(CalendarJulian, previousYear, previousMonth, d.day); err != nil {
			return d, err
		}
		year, month, day, _ = NewJD(julian, 0).CivilDate(CalendarGregorian)
	}
	if day != gregorianDay {
		return d, fmt.Errorf("%w: %d/%d is no day in both calendars; accepted: the Julian day, then the Gregorian, such as 14/27", ErrDate, d.day, gregorianDay)
	}
	if r.convention.Calendar == CalendarJulian {
		year, month, day, _ = NewJD(julian, 0).CivilDate(CalendarJulian)
	}
	d.year, d.month, d.day = year, month, day
	return d, nil
}
